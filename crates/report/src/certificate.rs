//! The certificates of an order as JSON, in the words of `hullward run --json`, to be kept and checked
//! by anybody.

use record::study::{Certificate, Order, Report};

/// The certificates among these reports that hold; `None` where there are none.
#[must_use]
pub fn json(reports: &[Report]) -> Option<String> {
    let orders = reports.iter().filter_map(|report| match report {
        Report::Order(order) => Some(order),
        _ => None,
    });
    let all: Vec<String> = orders.flat_map(|order| of_order(order)).collect();
    (!all.is_empty()).then(|| format!("[\n{}\n]\n", all.join(",\n")))
}

fn of_order(order: &Order) -> Vec<String> {
    let sides = order.certificates.iter().enumerate();
    let holding = sides.filter(|(_, certificate)| !certificate.proofs.is_empty());
    holding
        .map(|(side, certificate)| {
            let [within, of] = [&order.rivals[side], &order.rivals[1 - side]];
            format!(
                "{{\"relaxation_of\":{},\"within\":{},{}}}",
                text(within),
                text(of),
                body(certificate)
            )
        })
        .collect()
}

fn body(certificate: &Certificate) -> String {
    let system = list(&certificate.system, |row| {
        format!(
            "{{\"row\":{},\"entries\":{},\"lower\":{},\"upper\":{}}}",
            text(&row.row),
            pairs(&row.entries),
            text(&row.lower),
            text(&row.upper)
        )
    });
    let bounds = list(&certificate.bounds, |(column, lower, upper)| {
        format!("[{},{},{}]", text(column), text(lower), text(upper))
    });
    let proofs = list(&certificate.proofs, |proof| {
        format!(
            "{{\"row\":{},\"entries\":{},\"side\":{},\"multipliers\":{}}}",
            text(&proof.row),
            pairs(&proof.entries),
            text(&proof.side),
            pairs(&proof.multipliers)
        )
    });
    let map = list(&certificate.map, |one| {
        format!(
            "{{\"column\":{},\"constant\":{},\"entries\":{}}}",
            text(&one.column),
            text(&one.constant),
            pairs(&one.entries)
        )
    });
    let map = if certificate.map.is_empty() { String::new() } else { format!("\"map\":{map},") };
    format!("{map}\"system\":{system},\"bounds\":{bounds},\"proofs\":{proofs}")
}

fn pairs(pairs: &[(String, String)]) -> String {
    list(pairs, |(name, number)| format!("[{},{}]", text(name), text(number)))
}

pub(crate) fn list<T>(items: &[T], one: impl Fn(&T) -> String) -> String {
    format!("[{}]", items.iter().map(one).collect::<Vec<_>>().join(","))
}

/// A string in JSON (RFC 8259).
pub(crate) fn text(text: &str) -> String {
    let mut out = String::from("\"");
    for letter in text.chars() {
        match letter {
            '"' | '\\' => out.extend(['\\', letter]),
            control if control < ' ' => out += &format!("\\u{:04x}", u32::from(control)),
            other => out.push(other),
        }
    }
    out + "\""
}
