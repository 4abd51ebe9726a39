//! Numerics in words.

use record::study::{FamilyNumerics, Numerics, RivalNumerics};

use super::{Section, Table};
use crate::number::short;

pub(super) fn sections(numerics: &Numerics) -> Vec<Section> {
    numerics.rivals.iter().map(of_rival).collect()
}

fn of_rival(rival: &RivalNumerics) -> Section {
    let mut table = Table::new(&["family", "smallest", "largest", "worst ratio in a row"], &[0]);
    table.rows = rival.families.iter().map(row).collect();
    let mut verdict: Vec<String> =
        rival.verdicts.iter().map(|sentence| format!("{sentence}.")).collect();
    if verdict.is_empty() {
        verdict.push("Nothing in its coefficients is to be worried about.".to_owned());
    }
    Section {
        faults: Vec::new(),
        figure: None,
        heading: format!("Coefficients of {}: {}", rival.rival, rival.title),
        verdict,
        table: Some(table),
        notes: notes(rival),
    }
}

fn notes(rival: &RivalNumerics) -> Vec<String> {
    let mut notes =
        vec![range("rows", rival.matrix), range("costs", rival.costs), range("sides", rival.sides)];
    if rival.leak_in_all > 0.0 {
        notes.push(format!(
            "Switches that are 10⁻⁶ off can let through {} in one row and {} in all.",
            short(rival.leak.0),
            short(rival.leak_in_all)
        ));
    }
    if let Some(condition) = rival.condition {
        notes.push(format!(
            "The basis at the optimum of the relaxation has a condition of about {}.",
            short(condition)
        ));
    }
    notes.extend(rival.bound_off.map(|off| match (rival.exact, off == 0.0) {
        (true, true) => "Exact arithmetic finds the same bound.".to_owned(),
        (true, false) => format!("Exact arithmetic finds a bound that is {} away.", short(off)),
        (false, _) => format!("Exact arithmetic proves the bound to within {}.", short(off)),
    }));
    notes.extend(rival.plan_off.map(|off| {
        if off == 0.0 {
            "The best plan, with whole values, meets every row in exact arithmetic.".to_owned()
        } else {
            format!("The best plan, with whole values, misses a row by {}.", short(off))
        }
    }));
    notes
}

fn range(what: &str, (low, high): (f64, f64)) -> String {
    if high == 0.0 {
        return format!("The {what} have no coefficient other than 0.");
    }
    format!("The {what} range from {} to {}.", short(low), short(high))
}

fn row(family: &FamilyNumerics) -> Vec<String> {
    vec![family.name.clone(), short(family.range.0), short(family.range.1), short(family.row_ratio)]
}
