//! Where a bound comes from, in words.

use record::study::{Families, FamilyShare, RivalFamilies};

use super::{Section, Table, and, value};
use crate::number::{count, short};

/// What the three figures mean.
const MEANING: &str = "without: the bound when the family is left out; alone: when it is the only \
one; share: its Shapley value, the mean gain over every order of adding families. Each is solved \
anew. Figures are of this instance and objective. The dual share stands beside them for who looks for \
it: it is 0 for every family whose sides are 0, and a range where multipliers are not unique, so it \
does not say what a family is worth.";

pub(super) fn sections(families: &Families) -> Vec<Section> {
    let mut sections: Vec<Section> = families.rivals.iter().map(of_rival).collect();
    if let Some(last) = sections.last_mut() {
        last.notes.push(MEANING.to_owned());
    }
    sections
}

fn of_rival(rival: &RivalFamilies) -> Section {
    let mut table =
        Table::new(&["family", "without", "lost", "alone", "gained", "share", "dual share"], &[0]);
    table.rows = rival.families.iter().map(row).collect();
    let mut notes = Vec::new();
    if !rival.no_shapley.is_empty() {
        notes.push(format!("No share is given: {}.", rival.no_shapley));
    }
    Section {
        faults: Vec::new(),
        figure: None,
        heading: format!("Where the bound of {} comes from: {}", rival.rival, rival.title),
        verdict: verdict(rival),
        table: Some(table),
        notes,
    }
}

fn row(share: &FamilyShare) -> Vec<String> {
    let lost = if share.without.is_none() { "all".to_owned() } else { value(share.lost) };
    vec![
        share.name.clone(),
        value(share.without),
        lost,
        value(share.alone),
        value(share.gained),
        value(share.shapley),
        dual(share),
    ]
}

/// The dual share, or its range.
fn dual(share: &FamilyShare) -> String {
    let Some((low, high)) = share.dual else { return "–".to_owned() };
    let end = |end: Option<f64>, none: &str| end.map_or_else(|| none.to_owned(), short);
    match (low, high) {
        (Some(low), Some(high)) if (high - low).abs() <= 1e-3 * (1.0 + high.abs()) => short(high),
        _ => format!("{} to {}", end(low, "−∞"), end(high, "∞")),
    }
}

fn verdict(rival: &RivalFamilies) -> Vec<String> {
    let mut out = Vec::new();
    if let Some(bound) = rival.bound {
        out.push(match rival.bare {
            Some(bare) => {
                format!("Domains alone give {}, all families {}.", short(bare), short(bound))
            }
            None => format!("All families give {}; domains alone give no bound.", short(bound)),
        });
    }
    let idle = |share: &&FamilyShare| share.lost == Some(0.0);
    let names = |shares: Vec<&FamilyShare>| -> Vec<String> {
        shares.iter().map(|share| share.name.clone()).collect()
    };
    let idle = names(rival.families.iter().filter(idle).collect());
    match idle.as_slice() {
        [] => {}
        [one] => out.push(format!("Leaving out {one} loses 0.000.")),
        some => out.push(format!("Leaving out any one of {} loses 0.000.", and(some))),
    }
    let free = rival.integrality.iter().filter(|share| share.free == Some(true));
    for share in free {
        let columns = count(u64::from(share.columns));
        out.push(format!(
            "{} ({columns} whole columns) may be fractional: the optimum stays as it is on this \
             instance.",
            share.variable
        ));
    }
    out
}
