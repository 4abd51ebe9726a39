//! What files of type CVRP hold beside the distances: demands, capacity, depot, vehicles.

use std::collections::{BTreeMap, BTreeSet};

use crate::cells::{Separator, split};
use crate::complaint::{Complaints, excerpt, grouped};
use crate::extra::Tables;
use crate::instance::Datum;
use crate::names::Name;
use crate::number::{Number, number_text, parse, total_text};

use super::file::File;

fn named(name: &str, datum: Datum) -> (Name, Datum) {
    (Name { text: name.to_owned(), unit: String::new() }, datum)
}

/// The demands `q`, the capacity `Q`, the depot `r` and, where the file tells their number, the
/// vehicles `K`.
pub(super) fn tables(
    file: &File,
    labels: &[String],
    notes: &mut Vec<String>,
    sink: &mut Complaints,
) -> Option<Tables> {
    let demands = demands(file, labels, sink)?;
    let capacity = file.keyword("CAPACITY").map(|(value, line)| (parse(value, false), line));
    let capacity = match capacity {
        Some((Ok(capacity), _)) => capacity,
        found => {
            let span = found.map_or(0..0, |(_, line)| line.span());
            let mend = "Add a line `CAPACITY: number`.";
            sink.error(span, "keyword-missing", "the capacity of a vehicle is missing", mend);
            return None;
        }
    };
    let total = total_text(demands.values());
    notes.push(format!("Capacity {} a vehicle, for a demand of {total}.", number_text(&capacity)));
    let mut tables = vec![
        named("q", Datum::Table { arity: 1, cells: demands }),
        named("Q", Datum::Number(capacity)),
    ];
    tables.extend(depot(file, labels, sink).map(|depot| named("r", Datum::Element(depot))));
    match (file.value("VEHICLES"), file.value("NAME").and_then(|name| name.rsplit_once("-k"))) {
        (Some(value), _) => {
            tables.extend(parse(value, false).ok().map(|k| named("K", Datum::Number(k))));
        }
        (None, Some((_, value))) => {
            if let Ok(vehicles) = value.parse::<u32>() {
                notes.push(format!("K is {vehicles}, as the name of the file says."));
                tables.push(named("K", Datum::Number(vehicles.into())));
            }
        }
        _ => {}
    }
    Some(tables)
}

fn demands(
    file: &File,
    labels: &[String],
    sink: &mut Complaints,
) -> Option<BTreeMap<Vec<String>, Number>> {
    let Some(rows) = file.section("DEMAND_SECTION") else {
        let mend = "Add a DEMAND_SECTION with a line for each stop.";
        sink.error(0..0, "section-missing", "the demands are missing", mend);
        return None;
    };
    let known: BTreeSet<&str> = labels.iter().map(String::as_str).collect();
    let mut cells = BTreeMap::new();
    for line in rows {
        let row = split(line, Separator::Space);
        let pair = match row.as_slice() {
            [label, demand] if known.contains(&*label.text) => {
                parse(&demand.text, false).ok().map(|demand| (label.text.to_string(), demand))
            }
            _ => None,
        };
        let Some((label, demand)) = pair else {
            if sink.is_full() {
                sink.count_error();
            } else {
                let message = format!("`{}` is no stop with its demand", excerpt(line.text.trim()));
                sink.error(line.span(), "row-length", message, "Write `number demand`.");
            }
            continue;
        };
        cells.insert(vec![label], demand);
    }
    if cells.len() != labels.len() && sink.errors() == 0 {
        let end = rows.last().map_or(0, crate::text::Line::end);
        let (found, wanted) = (grouped(cells.len()), grouped(labels.len()));
        let message = format!("{found} stops have a demand, where there are {wanted}");
        sink.error(end..end, "row-count", message, "Give a line for each stop.");
    }
    (sink.errors() == 0).then_some(cells)
}

/// The one depot; several are said not to be read.
fn depot(file: &File, labels: &[String], sink: &mut Complaints) -> Option<String> {
    let rows = file.section("DEPOT_SECTION")?;
    let first = rows.first()?;
    let label = first.text.trim();
    if let Some(second) = rows.get(1) {
        let message = "there is more than one depot: the first was taken";
        sink.warn(second.span(), "depots", message, "Leave one depot.");
    }
    if !labels.iter().any(|known| known == label) {
        let message = format!("the depot `{}` is no stop", excerpt(label));
        sink.error(first.span(), "depot", message, "Write the number of a stop.");
    }
    Some(label.to_owned())
}
