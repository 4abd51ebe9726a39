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
        heading: format!("Coefficients of {}: {}", rival.rival, rival.title),
        verdict,
        table: Some(table),
        notes: vec![
            range("rows", rival.matrix),
            range("costs", rival.costs),
            range("sides", rival.sides),
        ],
    }
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
