//! The cut adviser in words.

use record::study::{ClassGain, CutAdvice, RivalCuts};

use super::{Section, Table, and, value};
use crate::number::{count, percent, short};

pub(super) fn sections(advice: &CutAdvice) -> Vec<Section> {
    advice.rivals.iter().map(of_rival).collect()
}

fn of_rival(rival: &RivalCuts) -> Section {
    let head = ["class", "bound", "gained", "cuts", "kept", "density", "work", "rather"];
    let mut table = Table::new(&head, &[0, 7]);
    table.rows = rival.classes.iter().map(row).collect();
    let mut notes: Vec<String> = rival.classes.iter().filter(|one| gains(one)).map(how).collect();
    if !rival.idle.is_empty() && !rival.classes.is_empty() {
        notes.push(format!("Nothing is found by {}.", and(&rival.idle)));
    }
    Section {
        faults: Vec::new(),
        figure: None,
        heading: format!("General cuts for {}: {}", rival.rival, rival.title),
        verdict: vec![verdict(rival)],
        table: (!rival.classes.is_empty()).then_some(table),
        notes,
    }
}

fn gains(class: &ClassGain) -> bool {
    class.gained.is_some_and(|gained| gained > 0.0)
}

/// How the cuts of a class are found, and when they are best written.
fn how(class: &ClassGain) -> String {
    let when = if class.up_front { "up front" } else { "on demand" };
    format!("{}, {when} ({}): {}.", class.class, class.why, class.separation)
}

fn row(class: &ClassGain) -> Vec<String> {
    vec![
        class.class.clone(),
        value(class.bound),
        value(class.gained),
        count(u64::from(class.added)),
        count(u64::from(class.kept)),
        class.density.map_or_else(|| "–".to_owned(), percent),
        count(class.work),
        (if class.up_front { "up front" } else { "on demand" }).to_owned(),
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
            "{} the bound from {} to {}; all classes together to {}{}.",
            match names.as_slice() {
                [one] => format!("The class {one} lifts"),
                several => format!("The classes {} lift", and(several)),
            },
            short(bound),
            short(*reached),
            short(all),
            if (all - bound).abs() < (reached - bound).abs() - 1e-9 {
                ", which is less: more cuts at once are not always better ones"
            } else {
                ""
            }
        ),
    }
}
