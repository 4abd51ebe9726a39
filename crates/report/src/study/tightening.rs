//! Tightening in words.

use record::study::{FamilyTightening, RivalTightening, Tightening, TooSmall};

use super::{Section, Table, entries, value};
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
    let mut head =
        vec!["family", "rows", "largest", "by the data", "rows", "by the relaxation", "rows"];
    if rival.cutoff.is_some() {
        head.extend(["with the cut-off", "rows"]);
    }
    let mut table = Table::new(&head, &[0]);
    table.rows = rival.families.iter().map(|family| row(family, rival.cutoff)).collect();
    let examples = rival.families.iter().filter(|family| !family.example.is_empty());
    let mut notes: Vec<String> = examples.map(|family| format!("{}.", family.example)).collect();
    notes.extend(rival.too_small.iter().map(too_small));
    if rival.left_out > 0 {
        notes.push(format!(
            "{} not looked at, for the limit of {}.",
            of(u64::from(rival.left_out), "row"),
            count(u64::from(rival.rows))
        ));
    }
    let verdict = std::iter::once(verdict(rival)).chain(beside(rival)).collect();
    Section { heading, verdict, table: Some(table), notes, ..Section::default() }
}

/// What smaller coefficients do to their range, and what the cut-off adds.
fn beside(rival: &RivalTightening) -> Vec<String> {
    let mut out = Vec::new();
    let ((low, high), (low_after, high_after)) = (rival.range, rival.range_after);
    if rival.range != rival.range_after {
        out.push(format!(
            "Coefficients of its rows range from {} to {}; then from {} to {}.",
            short(low),
            short(high),
            short(low_after),
            short(high_after)
        ));
    }
    let by_cutoff: u32 = rival.families.iter().map(|family| family.tightened_by_cutoff).sum();
    let by_relaxation: u32 =
        rival.families.iter().map(|family| family.tightened_by_relaxation).sum();
    if let (Some(cutoff), Some(bound)) = (rival.cutoff, rival.bound_by_cutoff)
        && (by_cutoff > by_relaxation || rival.bound_by_cutoff != rival.bound_by_relaxation)
    {
        out.push(format!(
            "With the cut-off {} the bound is {}: this keeps an optimum only, plans that are worse may be \
             lost.",
            short(cutoff),
            short(bound)
        ));
    }
    if rival.bounds > 0 {
        let by = match rival.bounds_by_relaxation {
            0 => String::new(),
            some => format!(", {} of them by the relaxation alone", count(u64::from(some))),
        };
        out.push(format!(
            "{} of columns can be tighter{by}.",
            of(u64::from(rival.bounds), "bound")
        ));
    }
    out
}

/// Entries of a plan that are written out at most.
const MOST_VALUES: usize = 12;

/// That a row cuts off a plan though its binary opens it.
fn too_small(found: &TooSmall) -> String {
    format!(
        "{} is more than a switch ({}): with {} = {}, which opens it, the rest may be at most {}, and in a \
         plan that every other row admits it is {}. If it is meant to switch alone, {} is too small and {} \
         is needed; the plan that it cuts off: {}.",
        found.row,
        found.says,
        found.switch,
        short(found.open),
        short(found.allows),
        short(found.reaches),
        short(found.coefficient),
        short(found.needs),
        entries(&found.plan, MOST_VALUES).join(", ")
    )
}

fn row(family: &FamilyTightening, cutoff: Option<f64>) -> Vec<String> {
    let mut row = vec![
        family.name.clone(),
        count(u64::from(family.rows)),
        short(family.largest),
        short(family.largest_by_data),
        count(u64::from(family.tightened_by_data)),
        short(family.largest_by_relaxation),
        count(u64::from(family.tightened_by_relaxation)),
    ];
    if cutoff.is_some() {
        row.push(short(family.largest_by_cutoff));
        row.push(count(u64::from(family.tightened_by_cutoff)));
    }
    row
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
