//! From the square of a round trip to the instance and what is said of it.

use crate::extra::Tables;
use crate::facts;
use crate::instance::{Instance, Points, Reader};
use crate::pace::Pace;
use crate::square::Square;

/// What a reader of round trips found.
pub(crate) struct RoundTrip {
    pub(crate) title: String,
    pub(crate) unit: String,
    pub(crate) square: Square,
    pub(crate) points: Option<Points>,
    /// What the text gives besides.
    pub(crate) tables: Tables,
    /// Sentences of the reader's own.
    pub(crate) notes: Vec<String>,
    /// How the text was read: "a matrix with labels, cells separated by tabs".
    pub(crate) how: String,
}

/// The instance and the sentences.
pub(crate) async fn finish(
    reader: Reader,
    trip: RoundTrip,
    pace: &Pace,
) -> (Instance, Vec<String>) {
    let mut sentences = facts::of(&trip.square, &trip.unit, pace).await;
    sentences.extend(
        trip.points.as_ref().and_then(|points| facts::same_places(&trip.square.labels, points)),
    );
    sentences.extend(trip.notes);
    sentences.push(format!("Read as {}; every line was read.", trip.how));
    let Square { labels, cells } = trip.square;
    let mut instance = Instance::round_trip_in_slices(labels, &cells, pace).await;
    instance.title = trip.title;
    instance.unit = trip.unit;
    instance.reader = reader;
    instance.points = trip.points;
    for (name, table) in trip.tables {
        if !name.unit.is_empty() {
            instance.units.insert(name.text.clone(), name.unit);
        }
        instance.assumed.remove(&name.text);
        instance.set(&name.text, table);
    }
    (instance, sentences)
}
