//! Vehicle routing in its older form: `n K Q`, then demand and place of each stop.

use std::collections::BTreeMap;

use crate::MAX_STOPS;
use crate::complaint::plural;
use crate::instance::{Datum, Instance, Points, Reader};
use crate::number::{number_text, total_text};
use crate::square::{Square, counted};

use super::stream::Stream;

/// Reads the file; the depot comes first. Distances are Euclidean, rounded to the nearest.
pub(super) async fn read(stream: &mut Stream<'_, '_>) -> Option<(Instance, Vec<String>)> {
    let n = stream.whole("the number of stops", 2, MAX_STOPS)?;
    let vehicles = stream.count("vehicles")?;
    let capacity = stream.number("the capacity")?;
    let (mut demands, mut places) = (Vec::new(), Vec::new());
    for _ in 0..n {
        demands.push(stream.number("the demand of a stop")?);
        let mut coordinate = || Some(stream.number("a coordinate")?.to_f64().value() + 0.0);
        places.push((coordinate()?, coordinate()?));
    }
    stream.finish()?;
    let labels = counted(n);
    let total = total_text(&demands);
    let rule = crate::tsplib::Rule::Euclidean;
    let between = |i: usize, j: usize| rule.between(places[i], places[j]).into();
    let pace = stream.pace();
    let square = Square::of(labels.clone(), between, &pace).await;
    let mut instance = Instance::round_trip_in_slices(labels.clone(), &square.cells, &pace).await;
    instance.reader = Reader::Routing;
    instance.points = Some(Points { places, geographic: false });
    let cells: BTreeMap<_, _> = labels.into_iter().map(|label| vec![label]).zip(demands).collect();
    instance.set("q", Datum::Table { arity: 1, cells });
    let facts = vec![
        format!("{}, the first of which is the depot.", plural(n, "stop", "stops")),
        format!(
            "{} of capacity {} for a demand of {total}.",
            plural(vehicles, "vehicle", "vehicles"),
            number_text(&capacity)
        ),
        "Distances are Euclidean, rounded to the nearest whole number, as TSPLIB rounds."
            .to_owned(),
    ];
    instance.set("Q", Datum::Number(capacity));
    instance.set("K", Datum::Number(vehicles.into()));
    Some((instance, facts))
}
