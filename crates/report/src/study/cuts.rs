//! The cut adviser in words.

use record::study::{ClassGain, CutAdvice, RivalCuts};

use super::{Section, Table, and, value};
use crate::number::{count, short};

pub(super) fn sections(advice: &CutAdvice) -> Vec<Section> {
    advice.rivals.iter().map(of_rival).collect()
}

fn of_rival(rival: &RivalCuts) -> Section {
    let mut table = Table::new(&["class", "bound", "gained", "cuts", "work"], &[0]);
    table.rows = rival.classes.iter().map(row).collect();
    let mut notes = Vec::new();
    if !rival.idle.is_empty() && !rival.classes.is_empty() {
        notes.push(format!("Nothing is found by {}.", and(&rival.idle)));
    }
    Section {
        figure: None,
        heading: format!("General cuts for {}: {}", rival.rival, rival.title),
        verdict: vec![verdict(rival)],
        table: (!rival.classes.is_empty()).then_some(table),
        notes,
    }
}

fn row(class: &ClassGain) -> Vec<String> {
    vec![
        class.class.clone(),
        value(class.bound),
        value(class.gained),
        count(u64::from(class.added)),
        count(class.work),
    ]
}

fn verdict(rival: &RivalCuts) -> String {
    let (Some(bound), Some(all)) = (rival.bound, rival.with_all) else {
        return "Its relaxation has no bound to lift.".to_owned();
    };
    let names: Vec<String> = rival.chosen.iter().map(|(name, _)| name.clone()).collect();
    match rival.chosen.last() {
        None => format!("No class lifts its bound of {}.", short(bound)),
        Some((_, reached)) => format!(
            "{} lift the bound from {} to {}; all classes together to {}.",
            and(&names),
            short(bound),
            short(*reached),
            short(all)
        ),
    }
}
