//! Tightening in words.

use record::study::{FamilyTightening, RivalTightening, Tightening};

use super::{Section, Table, value};
use crate::number::{count, of, short};

pub(super) fn sections(tightening: &Tightening) -> Vec<Section> {
    tightening.rivals.iter().map(of_rival).collect()
}

fn of_rival(rival: &RivalTightening) -> Section {
    let heading = format!("Coefficients of switches in {}: {}", rival.rival, rival.title);
    if rival.families.is_empty() {
        let verdict =
            vec!["No row is switched by a binary with the largest coefficient.".to_owned()];
        return Section { heading, verdict, ..Section::default() };
    }
    let head = ["family", "rows", "largest", "by the data", "rows", "by the relaxation", "rows"];
    let mut table = Table::new(&head, &[0]);
    table.rows = rival.families.iter().map(row).collect();
    let examples = rival.families.iter().filter(|family| !family.example.is_empty());
    let mut notes: Vec<String> = examples.map(|family| format!("{}.", family.example)).collect();
    if rival.left_out > 0 {
        notes.push(format!(
            "{} not looked at, for the limit of {}.",
            of(u64::from(rival.left_out), "row"),
            count(u64::from(rival.rows))
        ));
    }
    Section { heading, verdict: vec![verdict(rival)], figure: None, table: Some(table), notes }
}

fn row(family: &FamilyTightening) -> Vec<String> {
    vec![
        family.name.clone(),
        count(u64::from(family.rows)),
        short(family.largest),
        short(family.largest_by_data),
        count(u64::from(family.tightened_by_data)),
        short(family.largest_by_relaxation),
        count(u64::from(family.tightened_by_relaxation)),
    ]
}

fn verdict(rival: &RivalTightening) -> String {
    let smaller: u32 = rival.families.iter().map(|family| family.tightened_by_relaxation).sum();
    if smaller == 0 {
        return "No coefficient can be proved to be larger than it need be.".to_owned();
    }
    format!(
        "{} of {} can do with a smaller coefficient, and lose no plan. The bound: {} as written, {} \
         by the data alone, {} by the relaxation.",
        count(u64::from(smaller)),
        of(u64::from(rival.rows), "row"),
        value(rival.bound),
        value(rival.bound_by_data),
        value(rival.bound_by_relaxation)
    )
}
