//! What was understood of an instance.

use instance::{Instance, Pace, Reading};
use record::message::{InstanceReport, Stop};

use super::{of_instance, tidy};

/// The report of a reading of `text`: facts, complaints, and what the map and the grid need.
pub(crate) async fn instance_report(text: &str, reading: &Reading, pace: &Pace) -> InstanceReport {
    let mut report = InstanceReport {
        reader: reading.reader.name().to_owned(),
        facts: reading.facts.clone(),
        parts: reading.parts.clone(),
        statistics: reading.sums.clone(),
        complaints: reading.complaints.iter().map(|found| of_instance(text, found)).collect(),
        ..InstanceReport::default()
    };
    if let Some(instance) = &reading.instance {
        fill(&mut report, instance, pace).await;
    }
    report
}

/// What it takes to round a value, in ticks.
const TICKS_OF_A_VALUE: usize = 4;

async fn fill(report: &mut InstanceReport, instance: &Instance, pace: &Pace) {
    report.usable = true;
    report.title.clone_from(&instance.title);
    report.unit.clone_from(&instance.unit);
    let layout = instance::layout_in_slices(instance, pace.clone()).await;
    report.places_computed = layout.computed;
    let places = instance.stops().iter().zip(&layout.places);
    report.stops = places
        .map(|(label, &(x, y))| {
            let mark = mark(instance, label).to_owned();
            Stop { label: label.clone(), x: tidy(x), y: tidy(y), mark }
        })
        .collect();
    let values = instance.matrix_in_slices(pace).await;
    report.matrix = Vec::with_capacity(values.len());
    for value in values {
        pace.spend(TICKS_OF_A_VALUE).await;
        report.matrix.push(value.map(model::nearest_f64));
    }
}

/// What a stop is marked as.
fn mark(instance: &Instance, label: &str) -> &'static str {
    match instance.ends() {
        Some((start, end)) if start == label && end == label => "start and end",
        Some((start, _)) if start == label => "start",
        Some((_, end)) if end == label => "end",
        _ => "",
    }
}
