//! Whether an instance keeps what a shipped formulation assumes of its data: that costs, demands or
//! worths are 0 or more. Where it does not, the optimum may be that of another problem and the known
//! order of the bounds need not hold.

use std::collections::BTreeMap;

use instance::{Datum, Instance, number_text};
use model::Number;
use notation::Help;
use notation::syntax::{Formulation, Kind};
use record::message::Complaint;
use record::place::{Finding, complaint};

/// The code of such a complaint, and what it means. The example is data of `max-cut/sides`.
pub(crate) const HELP: Help = Help {
    code: "catalogue.assumption",
    meaning: "A published formulation is right for some data: costs of 0 or more, say. With others \
        its optimum may be that of another problem, and what is known of its bound need not hold. What a \
        family assumes stands in the catalogue.",
    example: " V\n a b c\n \n E by i, j\n a b\n b c\n a c\n \n w by i, j\n a b 3\n b c 2\n-a c -1\n+a c 1\n",
};

/// A complaint for each datum of the rival `from` that is below 0 somewhere and should not be, at its
/// line in the text. `names` are those that the instance gives the data. O(cells).
pub(crate) fn broken(
    from: &str,
    (text, tree): (&str, &Formulation),
    instance: &Instance,
    names: &BTreeMap<String, String>,
) -> Vec<Complaint> {
    let Some(entry) = catalogue::find(from) else { return Vec::new() };
    let mut found = Vec::new();
    for name in catalogue::nonnegative(&entry.family) {
        let datum = instance.get(notation::table_named(names.get(&name).unwrap_or(&name)));
        let Some(below) = datum.and_then(|datum| below_zero(&name, datum)) else { continue };
        let declares = |e: &notation::syntax::Expression| matches!(&e.kind, Kind::Name(own) if own.text == name);
        let Some(line) = tree.data.iter().find(|line| line.left.iter().any(declares)) else {
            continue;
        };
        let finding = Finding {
            error: false,
            code: HELP.code.to_owned(),
            span: line.span.range(),
            message: format!("the formulation is right for {}; here {below}", entry.assumption),
            mend: "Change the number, or do not trust the optimum and what is known of the bounds."
                .to_owned(),
        };
        found.push(complaint(text, finding));
    }
    found
}

/// "c of a, b is −3", of the first cell below 0.
fn below_zero(name: &str, datum: &Datum) -> Option<String> {
    let told = |of: &str, value: &Number| {
        format!("{name}{of} is {}", number_text(value).replace('-', "−"))
    };
    match datum {
        Datum::Number(value) => (*value < Number::ZERO).then(|| told("", value)),
        Datum::Table { cells, .. } => {
            let (key, value) = cells.iter().find(|(_, value)| **value < Number::ZERO)?;
            Some(told(&format!(" of {}", key.join(", ")), value))
        }
        _ => None,
    }
}
