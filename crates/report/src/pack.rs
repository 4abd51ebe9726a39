//! The regression pack as JSON.

use record::pack::{Expected, Pack};

use crate::certificate::{list, text};

/// A pack as one JSON object, numbers in full.
#[must_use]
pub fn json(pack: &Pack) -> String {
    let digest = pack.digest.as_ref().map_or_else(|| "null".to_owned(), |digest| text(digest));
    format!(
        "{{\n  \"hullward_pack\": {},\n  \"engine\": {},\n  \"tolerance\": {},\n  \"digest\": {digest},\n  \
         \"scenario\": {},\n  \"expected\": {}\n}}\n",
        pack.hullward_pack,
        text(&pack.engine),
        pack.tolerance,
        text(&pack.scenario),
        list(&pack.expected, of_one),
    )
}

fn of_one(one: &Expected) -> String {
    let number =
        |value: Option<f64>| value.map_or_else(|| "null".to_owned(), |value| value.to_string());
    let fields = [
        ("instance", text(&one.instance)),
        ("rival", text(&one.rival)),
        ("title", text(&one.title)),
        ("rows", one.rows.to_string()),
        ("columns", one.columns.to_string()),
        ("nonzeros", one.nonzeros.to_string()),
        ("root_bound", number(one.root_bound)),
        (
            "checked_bound",
            one.checked_bound.as_ref().map_or_else(|| "null".to_owned(), |bound| text(bound)),
        ),
        ("optimum", number(one.optimum)),
        ("smallest_decade", number(one.smallest_decade.map(f64::from))),
        ("largest_decade", number(one.largest_decade.map(f64::from))),
    ];
    let fields: Vec<String> =
        fields.iter().map(|(name, value)| format!("\"{name}\": {value}")).collect();
    format!("{{{}}}", fields.join(", "))
}
