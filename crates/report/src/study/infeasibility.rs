//! Conflicts and repairs in words.

use record::study::{Infeasibility, Repair, RivalInfeasibility, Standing};

use super::{Section, Table, and};
use crate::number::{of, short};

/// Rows of a repair that are told one by one.
const MOST_CHANGES: usize = 6;

pub(super) fn sections(report: &Infeasibility) -> Vec<Section> {
    report.rivals.iter().map(of_rival).collect()
}

fn of_rival(rival: &RivalInfeasibility) -> Section {
    let mut section = Section {
        heading: format!("Does {} have a plan? {}", rival.rival, rival.title),
        ..Section::default()
    };
    let none = match rival.standing {
        Standing::Feasible => {
            section.verdict.push(format!("{} has a plan: nothing is in conflict.", rival.rival));
            return section;
        }
        Standing::Open => {
            section
                .verdict
                .push("Whether it has a plan was not settled within the limit.".to_owned());
            return section;
        }
        Standing::NoPoint => "its relaxation has no point",
        Standing::NoWholePoint => "its relaxation has points, but no whole one",
    };
    section.verdict.push(conflict(rival, none));
    section.verdict.extend(rival.repairs.iter().map(repair));
    let mut table = Table::new(&["row", "family", "says"], &[0, 1, 2]);
    table.rows = rival
        .rows
        .iter()
        .map(|row| vec![row.row.clone(), row.family.clone(), row.says.clone()])
        .collect();
    section.table = Some(table);
    section.notes = vec![
        "A violation is in the units of the rows. Where several families may be violated it is a \
         share of the largest side of each."
            .to_owned(),
    ];
    section
}

fn conflict(rival: &RivalInfeasibility, none: &str) -> String {
    let rows = of(rival.rows.len() as u64, "row");
    let domains = if rival.variables.is_empty() {
        String::new()
    } else {
        format!(" within the domains of {}", and(&rival.variables))
    };
    let needed = if rival.irreducible {
        "; without any one of them the rest can"
    } else {
        "; whether each of them is needed was not settled"
    };
    let checked = if rival.checked { " Checked in exact arithmetic." } else { "" };
    if rival.rows.is_empty() {
        return format!("{} has no plan: its domains alone leave none.{checked}", rival.rival);
    }
    format!(
        "{} has no plan: {none}. {rows} of {} cannot hold together{domains}{needed}.{checked}",
        rival.rival,
        and(&rival.families)
    )
}

fn repair(repair: &Repair) -> String {
    let who = and(&repair.families);
    if repair.hopeless {
        return format!("Relaxing {who} alone does not help.");
    }
    let Some(violation) = repair.violation else {
        return format!("No way to relax {who} was found within the limit.");
    };
    let told = repair.changes.iter().take(MOST_CHANGES);
    let mut told: Vec<String> = told.map(|(row, by)| format!("{row} by {}", short(*by))).collect();
    let more = repair.changes.len().saturating_sub(MOST_CHANGES);
    if more > 0 {
        told.push(format!("{more} more"));
    }
    let cheapest = if repair.proved { "The cheapest way" } else { "A way" };
    let sum = if repair.families.len() > 1 { "weighted sum" } else { "sum" };
    format!("{cheapest} to relax {who}: {} ({sum} {}).", and(&told), short(violation))
}
