//! A node's solution drawn: arcs and values on the map, bars over time, lengths in strips, a graph, or a
//! grid of values. The engine says which drawings suit, the likeliest first; a person may choose another.

use record::message::{Arc, Cycle, Drawing, InstanceReport, NodeDetail, Picture};
use report::number::{full, short};
use yew::prelude::*;

use crate::state::pointer::Shared;
use crate::view::bars::Bars;
use crate::view::graph::Graph;
use crate::view::map::Map;
use crate::view::strips::Strips;

#[derive(Properties, PartialEq)]
pub(crate) struct PicturesProps {
    pub(crate) detail: Shared<NodeDetail>,
    pub(crate) report: Shared<InstanceReport>,
    /// The name of the drawing that was chosen.
    pub(crate) drawn: UseStateHandle<String>,
    /// A set of stops to tint.
    pub(crate) set: Option<Shared<Vec<usize>>>,
    /// The column that is chosen in the table of values.
    pub(crate) column: Option<u32>,
}

/// The drawing, with what may be drawn instead.
#[component]
pub(crate) fn Pictures(props: &PicturesProps) -> Html {
    let drawings = use_memo((props.detail.clone(), props.report.clone()), |(detail, report)| {
        drawings(detail, report).into_iter().map(Shared::new).collect::<Vec<_>>()
    });
    let chosen = drawings.iter().find(|drawing| drawing.name == *props.drawn);
    let Some(drawing) = chosen.or(drawings.first()) else { return Html::default() };
    let onchange = {
        let drawn = props.drawn.setter();
        Callback::from(move |event: Event| {
            let field: web_sys::HtmlSelectElement = event.target_unchecked_into();
            drawn.set(field.value());
        })
    };
    html! {
        <figure class="drawing" data-testid="picture">
            <Drawn
                drawing={drawing.clone()} report={props.report.clone()} set={props.set.clone()}
                column={props.column}
            />
            <figcaption class="under">
                <span class="soft">{ caption(&drawing.picture) }</span>
                if drawings.len() > 1 {
                    <select aria-label="Drawing of the solution" data-testid="drawn" {onchange}>
                        for each in drawings.iter() {
                            <option value={each.name.clone()} selected={each == drawing}>{ each.name.clone() }</option>
                        }
                    </select>
                }
            </figcaption>
        </figure>
    }
}

/// The drawings that there is room for: on a map only where there are stops. Without a point,
/// the cycle that proves it.
fn drawings(detail: &NodeDetail, report: &InstanceReport) -> Vec<Drawing> {
    let mapped = !report.stops.is_empty();
    let mut drawings: Vec<Drawing> = detail
        .drawings
        .iter()
        .filter(|drawing| mapped || !matches!(drawing.picture, Picture::Map { .. }))
        .cloned()
        .collect();
    if let Some(arcs) = detail.cycle.as_ref().and_then(|cycle| around(cycle, report)) {
        let picture = Picture::Map { arcs, at: Vec::new() };
        drawings.push(Drawing { name: "the cycle on the map".to_owned(), picture });
    } else if drawings.is_empty() && mapped && !detail.values.is_empty() {
        let picture = Picture::Map { arcs: Vec::new(), at: Vec::new() };
        drawings.push(Drawing { name: "the stops".to_owned(), picture });
    }
    drawings
}

/// The arcs of a cycle, when all its stops are on the map.
fn around(cycle: &Cycle, report: &InstanceReport) -> Option<Vec<Arc>> {
    let place = |label: &String| report.stops.iter().position(|stop| stop.label == *label);
    let places: Vec<usize> = cycle.stops.iter().map(place).collect::<Option<_>>()?;
    let next = places.iter().cycle().skip(1);
    let arcs = places.iter().zip(next).map(|(&from, &to)| Arc {
        from: from as u32,
        to: to as u32,
        value: 1.0,
        column: None,
    });
    Some(arcs.collect())
}

/// A cycle in words: "Ash → Birch → Ash, total −3 minutes".
pub(crate) fn cycle_words(cycle: &Cycle, unit: &str) -> String {
    let mut stops: Vec<&str> = cycle.stops.iter().map(String::as_str).collect();
    stops.extend(cycle.stops.first().map(String::as_str));
    let unit = if unit.is_empty() { String::new() } else { format!(" {unit}") };
    format!("{}, total {}{unit}", stops.join(" → "), short(cycle.total))
}

fn caption(picture: &Picture) -> &'static str {
    match picture {
        Picture::Map { at, .. } if !at.is_empty() => {
            "The value stands at its stop; an arc is a row that is met exactly."
        }
        Picture::Map { arcs, .. } if arcs.is_empty() => "",
        Picture::Map { .. } => {
            "Width is the value; dashed where fractional. A drive keeps to the right of its way."
        }
        Picture::Bars { .. } => "Each variable on a scale of its own.",
        Picture::Strips { time: true, .. } => {
            "A length is how long the work takes; dashed where fractional. In a relaxation lengths may \
             lie over one another."
        }
        Picture::Strips { .. } => {
            "A length is weight times value; the stroke is the room there is."
        }
        Picture::Graph { arcs, .. } if !arcs.is_empty() => {
            "Width is the value; dashed where fractional."
        }
        Picture::Graph { vertices, .. } if vertices.iter().any(|at| !at.class.is_empty()) => {
            "In brackets the class with the greatest value; full is 1, half in between; thin lines \
             join what a row holds together."
        }
        Picture::Graph { .. } => {
            "Full is 1, a ring is 0, half in between; thin lines join what a row holds together."
        }
        Picture::Grid { .. } => "Darker is more; blank is 0.",
    }
}

#[derive(Properties, PartialEq)]
struct DrawnProps {
    drawing: Shared<Drawing>,
    report: Shared<InstanceReport>,
    set: Option<Shared<Vec<usize>>>,
    column: Option<u32>,
}

#[component]
fn Drawn(props: &DrawnProps) -> Html {
    let on_map = use_memo(props.drawing.clone(), |drawing| match &drawing.picture {
        Picture::Map { arcs, at } => (Shared::new(arcs.clone()), Shared::new(at.clone())),
        _ => (Shared::new(Vec::new()), Shared::new(Vec::new())),
    });
    match &props.drawing.picture {
        Picture::Map { .. } => html! {
            <Map
                report={props.report.clone()} arcs={on_map.0.clone()} at={Some(on_map.1.clone())}
                set={props.set.clone()} column={props.column}
                label={format!("{}; the values are in the table", props.drawing.name)}
            />
        },
        Picture::Bars { .. } => html! { <Bars drawing={props.drawing.clone()} /> },
        Picture::Strips { .. } => {
            html! { <Strips drawing={props.drawing.clone()} column={props.column} /> }
        }
        Picture::Graph { .. } => {
            html! { <Graph drawing={props.drawing.clone()} column={props.column} /> }
        }
        Picture::Grid { rows, columns, cells } => heat(&props.drawing.name, rows, columns, cells),
    }
}

/// Shades of a cell.
const SHADES: f64 = 5.0;

fn heat(name: &str, rows: &[String], columns: &[String], cells: &[(u32, u32, f64)]) -> Html {
    let most =
        cells.iter().fold(0.0, |a: f64, cell| if cell.2.abs() > a { cell.2.abs() } else { a });
    let mut by_place = vec![None; rows.len() * columns.len()];
    for &(row, column, value) in cells {
        if let Some(place) = by_place.get_mut(row as usize * columns.len() + column as usize) {
            *place = Some(value);
        }
    }
    let cell = |value: Option<f64>| match value {
        Some(value) => {
            let shade = (value.abs() / most * SHADES).ceil();
            html! { <td class={format!("shade-{shade}")} title={full(value)}>{ short(value) }</td> }
        }
        None => html! { <td /> },
    };
    html! {
        <div class="scroll" tabindex="0" role="region" aria-label={name.to_owned()}>
            <table class="heat" data-testid="heat">
                <thead><tr>
                    <td />
                    for column in columns.iter() { <th scope="col"><span>{ column.clone() }</span></th> }
                </tr></thead>
                <tbody>
                    for (row, label) in rows.iter().enumerate() {
                        <tr>
                            <th scope="row">{ label.clone() }</th>
                            for column in 0..columns.len() { { cell(by_place[row * columns.len() + column]) } }
                        </tr>
                    }
                </tbody>
            </table>
        </div>
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use record::message::Stop;

    fn cycle(labels: &[&str]) -> Cycle {
        Cycle { stops: labels.iter().map(|&label| label.to_owned()).collect(), total: -3.0 }
    }

    #[test]
    fn a_cycle_is_told_from_its_first_stop_to_its_first_stop() {
        let ash = cycle(&["Ash", "Birch", "Cedar"]);
        assert_eq!(cycle_words(&ash, "minutes"), "Ash → Birch → Cedar → Ash, total −3 minutes");
        assert_eq!(cycle_words(&ash, ""), "Ash → Birch → Cedar → Ash, total −3");
    }

    #[test]
    fn a_cycle_is_drawn_where_its_stops_stand() {
        let stop =
            |label: &str| Stop { label: label.to_owned(), x: 0.0, y: 0.0, mark: String::new() };
        let stops = ["Birch", "Yard", "Ash"].map(stop).to_vec();
        let report = InstanceReport { stops, ..InstanceReport::default() };
        let arcs = around(&cycle(&["Ash", "Birch"]), &report).unwrap();
        let pairs: Vec<_> = arcs.iter().map(|arc| (arc.from, arc.to)).collect();
        assert_eq!(pairs, [(2, 0), (0, 2)]);
        assert!(around(&cycle(&["Ash", "Elm"]), &report).is_none());
    }
}
