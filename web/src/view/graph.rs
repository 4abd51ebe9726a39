//! A graph without places of its own: its vertices are spread so that joined ones are near, and drawn
//! as a map is.

use record::message::{Drawing, InstanceReport, Picture, Stop, Vertex};
use report::spring;
use yew::prelude::*;

use crate::state::pointer::Shared;
use crate::view::map::{Map, is_fractional};

#[derive(Properties, PartialEq)]
pub(crate) struct GraphProps {
    pub(crate) drawing: Shared<Drawing>,
    /// The column that is chosen in the table of values.
    pub(crate) column: Option<u32>,
}

/// The graph.
#[component]
pub(crate) fn Graph(props: &GraphProps) -> Html {
    let shown = use_memo(props.drawing.clone(), |drawing| match &drawing.picture {
        Picture::Graph { vertices, edges, arcs } => {
            let arcs_as_edges = arcs.iter().map(|arc| (arc.from, arc.to));
            let pull: Vec<(u32, u32)> = edges.iter().copied().chain(arcs_as_edges).collect();
            let report = stops(vertices, &spring::places(vertices.len(), &pull));
            (Shared::new(report), Shared::new(arcs.clone()), Shared::new(edges.clone()))
        }
        _ => (Shared::default(), Shared::default(), Shared::default()),
    });
    let values = use_memo(props.drawing.clone(), |drawing| match &drawing.picture {
        Picture::Graph { vertices, .. } => values(vertices),
        _ => (Shared::default(), None),
    });
    html! {
        <Map
            report={shown.0.clone()} arcs={shown.1.clone()} edges={Some(shown.2.clone())}
            at={Some(values.0.clone())} fills={values.1.clone()} column={props.column}
            label={format!("{}; the values are in the table", props.drawing.name)}
        />
    }
}

/// The vertices as stops, marked with their class.
fn stops(vertices: &[Vertex], places: &[(f64, f64)]) -> InstanceReport {
    let stop = |(vertex, &(x, y)): (&Vertex, &(f64, f64))| Stop {
        label: vertex.label.clone(),
        x,
        y,
        mark: vertex.class.clone(),
    };
    InstanceReport { stops: vertices.iter().zip(places).map(stop).collect(), ..Default::default() }
}

/// Values written at vertices.
type Written = Shared<Vec<(u32, f64)>>;

/// The values to write, which are those that are not whole, and all of them where each vertex has
/// one.
fn values(vertices: &[Vertex]) -> (Written, Option<Shared<Vec<f64>>>) {
    let known = vertices.iter().zip(0..).filter_map(|(vertex, place)| Some((place, vertex.value?)));
    let known: Vec<(u32, f64)> = known.collect();
    let fills = known.len() == vertices.len() && !vertices.is_empty();
    let fills = fills.then(|| Shared::new(known.iter().map(|&(_, value)| value).collect()));
    let written = known.into_iter().filter(|(_, value)| is_fractional(*value));
    (Shared::new(written.collect()), fills)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn whole_values_fill_and_others_are_written_too() {
        let vertex = |value| Vertex { label: String::new(), class: String::new(), value };
        let (written, fills) = values(&[vertex(Some(1.0)), vertex(Some(0.5))]);
        assert_eq!(*written, [(1, 0.5)]);
        assert_eq!(fills.map(|fills| (*fills).clone()), Some(vec![1.0, 0.5]));
        assert!(values(&[vertex(None)]).1.is_none());
    }
}
