//! The map: stops with names that do not collide, and a solution's arcs between them, as wide as
//! their value and dashed where it is fractional. Laid out for the width there is, so that names
//! keep their size.

use record::message::{Arc, InstanceReport, Stop};
use report::labels::{Placed, Wish, place};
use report::map::{Curve, Frame, Point, fit, hull};
use report::number::{fixed, short};
use yew::prelude::*;

use crate::browser::size::use_width;
use crate::state::pointer::Shared;

/// Size of names in pixels.
const SIZE: f64 = 11.0;
/// Radius of a stop's mark, and of the first one's.
const RADIUS: f64 = 3.0;
const FIRST: f64 = 5.0;
/// Distance of the points at which names look out for an arc.
const STEP: f64 = 6.0;
/// Beyond this many stops names are left to the marks' titles.
const NAMED: usize = 150;

#[derive(Properties, PartialEq)]
pub(crate) struct MapProps {
    pub(crate) report: Shared<InstanceReport>,
    pub(crate) arcs: Shared<Vec<Arc>>,
    /// Values to write at stops.
    #[prop_or_default]
    pub(crate) at: Option<Shared<Vec<(u32, f64)>>>,
    /// What it shows, for those who do not see it.
    pub(crate) label: AttrValue,
    /// A set of stops to tint.
    #[prop_or_default]
    pub(crate) set: Option<Shared<Vec<usize>>>,
    /// The column of the arc to name.
    #[prop_or_default]
    pub(crate) column: Option<u32>,
    /// What joins the stops of a graph: thin lines, and no stop is a depot.
    #[prop_or_default]
    pub(crate) edges: Option<Shared<Vec<(u32, u32)>>>,
    /// The value of each stop of a graph, which fills its mark.
    #[prop_or_default]
    pub(crate) fills: Option<Shared<Vec<f64>>>,
}

/// Places of stops and names in pixels.
#[derive(Debug, PartialEq)]
struct Places {
    frame: Frame,
    stops: Vec<Point>,
    names: Vec<Option<Placed>>,
    /// What is written at each stop.
    texts: Vec<String>,
    /// Turns values into widths: 1 at the greatest, if that is more than 1.
    scale: f64,
}

/// The map.
#[component]
pub(crate) fn Map(props: &MapProps) -> Html {
    let node = use_node_ref();
    let width = use_width(&node);
    let key = (props.report.clone(), props.arcs.clone(), props.at.clone(), width as u32);
    let places = use_memo(key, |(report, arcs, at, width)| {
        let at = at.as_ref().map_or(&[][..], |at| at.as_slice());
        places(report, (arcs, at), f64::from(*width))
    });
    html! {
        <div class="map" ref={node}>
            if width > 0.0 {
                <svg
                    width={width.to_string()} height={places.frame.height.to_string()}
                    role="img" aria-label={props.label.clone()}
                >
                    { tinted(props, &places) }
                    { joined(props, &places) }
                    for (key, arc) in props.arcs.iter().enumerate() { { arc_path(key, arc, &places, props.column) } }
                    { stops(props, &places) }
                    { chosen(props, &places) }
                </svg>
            }
        </div>
    }
}

fn places(report: &InstanceReport, (arcs, at): (&[Arc], &[(u32, f64)]), width: f64) -> Places {
    let height = if width * 0.66 < 380.0 { width * 0.66 } else { 380.0 };
    let frame = Frame { width, height, margin: 26.0 };
    let given: Vec<Point> = report.stops.iter().map(|stop| (stop.x, stop.y)).collect();
    let stops = fit(&given, frame);
    let texts = texts(report, at);
    let wishes: Vec<Wish<'_>> = texts
        .iter()
        .zip(&stops)
        .enumerate()
        .map(|(index, (text, &at))| Wish { text, at, radius: radius(report, index) })
        .collect();
    let curves = arcs.iter().filter_map(|arc| curve(arc, &stops));
    let lines: Vec<Point> = curves.flat_map(|curve| curve.points(STEP)).collect();
    let names = if wishes.len() <= NAMED {
        place(&wishes, &lines, frame, SIZE)
    } else {
        vec![None; wishes.len()]
    };
    let most = arcs.iter().fold(1.0, |most, arc| if arc.value > most { arc.value } else { most });
    Places { frame, stops, names, texts, scale: 1.0 / most }
}

/// What is written at each stop: its label, what it is marked as, and its value.
fn texts(report: &InstanceReport, at: &[(u32, f64)]) -> Vec<String> {
    let mut texts: Vec<String> = report.stops.iter().map(|stop| stop.label.clone()).collect();
    for (text, stop) in texts.iter_mut().zip(&report.stops) {
        if !stop.mark.is_empty() {
            *text = format!("{text} ({})", stop.mark);
        }
    }
    for &(stop, value) in at {
        if let Some(text) = texts.get_mut(stop as usize) {
            *text = format!("{text}  {}", short(value));
        }
    }
    texts
}

/// Marked stops are larger; where none is marked, the first, which is the depot.
fn radius(report: &InstanceReport, index: usize) -> f64 {
    let marked = |stop: &Stop| !stop.mark.is_empty();
    let large = if report.stops.iter().any(marked) {
        report.stops.get(index).is_some_and(marked)
    } else {
        index == 0
    };
    if large { FIRST } else { RADIUS }
}

fn stops(props: &MapProps, places: &Places) -> Html {
    let radius = |index| if props.edges.is_some() { FIRST } else { radius(&props.report, index) };
    html! {
        <>
            for (index, (stop, &(x, y))) in props.report.stops.iter().zip(&places.stops).enumerate() {
                <circle key={index} class={classes!("stop", filled(props, index))} cx={px(x)} cy={px(y)} r={radius(index).to_string()}>
                    <title>{ stop.label.clone() }</title>
                </circle>
            }
            for (text, name) in places.texts.iter().zip(&places.names) {
                if let Some(name) = name {
                    if let Some((from, to)) = name.leader {
                        <line class="leader" x1={px(from.0)} y1={px(from.1)} x2={px(to.0)} y2={px(to.1)} />
                    }
                    <text class="name" x={px(name.x)} y={px(name.y)}>{ text.clone() }</text>
                }
            }
        </>
    }
}

/// How the mark of a stop is filled: by its value, in a graph where each has one.
fn filled(props: &MapProps, index: usize) -> Option<&'static str> {
    let value = *props.fills.as_ref()?.get(index)?;
    Some(if value == 0.0 {
        "none"
    } else if is_fractional(value) {
        "part"
    } else {
        "whole"
    })
}

/// The edges of a graph, below everything that has a value.
fn joined(props: &MapProps, places: &Places) -> Html {
    let Some(edges) = &props.edges else { return Html::default() };
    let ends = |&(from, to): &(u32, u32)| {
        Some((*places.stops.get(from as usize)?, *places.stops.get(to as usize)?))
    };
    html! {
        for ((x, y), (a, b)) in edges.iter().filter_map(ends) {
            <line class="edge" x1={px(x)} y1={px(y)} x2={px(a)} y2={px(b)} />
        }
    }
}

fn arc_path(key: usize, arc: &Arc, places: &Places, column: Option<u32>) -> Html {
    let Some(curve) = curve(arc, &places.stops) else { return Html::default() };
    let chosen = column.is_some() && column == arc.column;
    let class = classes!(
        "arc",
        is_fractional(arc.value).then_some("fractional"),
        chosen.then_some("chosen")
    );
    let size = arc.value.abs() * places.scale;
    let width = px(0.8 + 2.4 * size);
    html! {
        <g {key} {class}>
            <path d={path(&curve)} stroke-width={width} />
            if let Some([a, b, c]) = curve.arrow(3.0 + 2.0 * size) {
                <polygon points={points(&[a, b, c])} />
            }
        </g>
    }
}

/// The name of the chosen arc, over everything else.
fn chosen(props: &MapProps, places: &Places) -> Html {
    let found = props.arcs.iter().find(|arc| props.column.is_some() && props.column == arc.column);
    let Some((arc, curve)) = found.and_then(|arc| Some((arc, curve(arc, &places.stops)?))) else {
        return Html::default();
    };
    let (x, y) = curve.at(0.5);
    html! { <text class="name value" x={px(x)} y={px(y - 6.0)} text-anchor="middle">{ fixed(arc.value, 3) }</text> }
}

fn tinted(props: &MapProps, places: &Places) -> Html {
    let Some(set) = &props.set else { return Html::default() };
    let inside: Vec<Point> =
        set.iter().filter_map(|&stop| places.stops.get(stop).copied()).collect();
    html! { <polygon class="tint" points={points(&hull(&inside))} /> }
}

fn curve(arc: &Arc, stops: &[Point]) -> Option<Curve> {
    let from = stops.get(arc.from as usize)?;
    let to = stops.get(arc.to as usize)?;
    (arc.from != arc.to).then(|| Curve::between(*from, *to))
}

/// Whether a value differs from a whole number by more than the tolerance of the search.
pub(crate) fn is_fractional(value: f64) -> bool {
    (value - value.round()).abs() > 1e-6
}

fn path(curve: &Curve) -> String {
    let (from, control, to) = (curve.from, curve.control, curve.to);
    let parts = [px(from.0), px(from.1), px(control.0), px(control.1), px(to.0), px(to.1)];
    let [a, b, c, d, e, f] = parts;
    ["M", &a, " ", &b, "Q", &c, " ", &d, " ", &e, " ", &f].concat()
}

fn points(points: &[Point]) -> String {
    let pairs: Vec<String> = points.iter().map(|&(x, y)| [px(x), px(y)].join(",")).collect();
    pairs.join(" ")
}

/// A pixel measure with one decimal.
pub(crate) fn px(value: f64) -> String {
    ((value * 10.0).round() / 10.0).to_string()
}
