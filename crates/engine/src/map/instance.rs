//! What was understood of an instance.

use instance::{Instance, Reading};
use record::message::{InstanceReport, Stop};

use super::{of_instance, tidy};

/// The report of a reading of `text`: facts, complaints, and what the map and the grid need.
pub(crate) fn instance_report(text: &str, reading: &Reading) -> InstanceReport {
    let mut report = InstanceReport {
        reader: reading.reader.name().to_owned(),
        facts: reading.facts.clone(),
        parts: reading.parts.clone(),
        statistics: reading.sums.clone(),
        complaints: reading.complaints.iter().map(|found| of_instance(text, found)).collect(),
        ..InstanceReport::default()
    };
    if let Some(instance) = &reading.instance {
        fill(&mut report, instance);
    }
    report
}

fn fill(report: &mut InstanceReport, instance: &Instance) {
    report.usable = true;
    report.title.clone_from(&instance.title);
    report.unit.clone_from(&instance.unit);
    let layout = instance::layout(instance);
    report.places_computed = layout.computed;
    let places = instance.stops().iter().zip(&layout.places);
    report.stops = places
        .map(|(label, &(x, y))| {
            let mark = mark(instance, label).to_owned();
            Stop { label: label.clone(), x: tidy(x), y: tidy(y), mark }
        })
        .collect();
    let values = instance.matrix().into_iter();
    report.matrix = values.map(|value| value.map(model::nearest_f64)).collect();
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
