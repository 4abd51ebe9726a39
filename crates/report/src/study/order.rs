//! The strength order in words.

mod over;

use record::study::{Certificate, Order, OrderLevel, Relation};

use super::{Section, Table, value};
use crate::number::{of, short};

pub use over::over_instances;

pub(super) fn section(order: &Order) -> Section {
    let [a, b] = &order.rivals;
    if !order.over.is_empty() {
        return on_all(order);
    }
    let mut table = Table::new(&["", "root bound", "rows proved over it"], &[0, 2]);
    table.rows = (0..2)
        .map(|side| {
            let proved = rows(&order.certificates[side], &order.rivals[1 - side]);
            vec![order.rivals[side].clone(), value(order.bounds[side]), proved]
        })
        .collect();
    Section {
        faults: Vec::new(),
        figure: None,
        heading: format!("Which of {a} and {b} is stronger?"),
        verdict: vec![verdict(order)],
        table: Some(table),
        notes: Vec::new(),
    }
}

/// What was proved of the rows of `other` over this rival's relaxation.
fn rows(certificate: &Certificate, other: &str) -> String {
    match certificate.holds {
        Some(true) if !certificate.map.is_empty() => format!(
            "all {} of {other}, with {} as an affine map",
            certificate.rows,
            of(certificate.map.len() as u64, "further variable")
        ),
        Some(true) => format!("all {} of {other}", certificate.rows),
        Some(false) if certificate.apart.is_some() => {
            let (own, theirs) = certificate.apart.unwrap_or_default();
            format!(
                "not all of {other}: under {} the bound is {} here and {} with {other}",
                certificate.witness,
                short(own),
                short(theirs)
            )
        }
        Some(false) => {
            let by = certificate
                .violation
                .map_or_else(|| "without end".to_owned(), |by| format!("by {}", short(by)));
            format!("not {} of {other}: it can be violated {by}", certificate.witness)
        }
        None => format!("not shown: {}", certificate.why),
    }
}

fn verdict(order: &Order) -> String {
    let [a, b] = &order.rivals;
    let relation = match order.relation {
        Relation::NeverWeaker => format!("{a} ⪰ {b}: {a} is never weaker than {b}"),
        Relation::NeverStronger => format!("{b} ⪰ {a}: {b} is never weaker than {a}"),
        Relation::Equal => format!("{a} = {b}: their relaxations give the same bound"),
        Relation::Incomparable => format!("{a} ∥ {b}: neither is always as strong as the other"),
        Relation::Undecided => return format!("How {a} stands to {b} is undecided."),
    };
    let source = &order.source;
    match order.level {
        OrderLevel::Theorem => format!("{relation} – theorem: {source}."),
        OrderLevel::Certified => {
            format!(
                "{relation}, for every objective in the shared variables – certified on this instance: {source}."
            )
        }
        OrderLevel::Observed => observed(order),
        OrderLevel::Undecided => format!("{relation}."),
    }
}

/// What several instances come to.
fn on_all(order: &Order) -> Section {
    let [a, b] = &order.rivals;
    let mut table = Table::new(&["instance", a, b], &[0]);
    let row = |(name, bounds): &(String, [Option<f64>; 2])| {
        vec![name.clone(), value(bounds[0]), value(bounds[1])]
    };
    table.rows = order.over.iter().map(row).collect();
    let number = of(order.over.len() as u64, "instance");
    let what = match order.relation {
        Relation::Equal => format!("{a} and {b} have the same bound"),
        Relation::NeverWeaker => format!("{a} is never weaker than {b}"),
        Relation::NeverStronger => format!("{b} is never weaker than {a}"),
        Relation::Incomparable => {
            format!("Neither of {a} and {b} is always as strong as the other")
        }
        Relation::Undecided => format!("How {a} stands to {b} is undecided"),
    };
    Section {
        heading: format!("Which of {a} and {b} is stronger over all instances?"),
        verdict: vec![format!("{what} – observed on {number}: {}.", order.source)],
        table: Some(table),
        ..Section::default()
    }
}

/// Bounds of one instance say nothing of others.
fn observed(order: &Order) -> String {
    let [a, b] = &order.rivals;
    let what = match order.relation {
        Relation::Equal => format!("{a} and {b} have the same bound"),
        Relation::NeverWeaker => format!("{a} has the stronger bound"),
        _ => format!("{b} has the stronger bound"),
    };
    format!("{what} – observed on this instance and objective alone.")
}
