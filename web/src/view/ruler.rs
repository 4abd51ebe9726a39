//! The bound ruler of a lane: the root's bound, the bound now, and what is left to the best known
//! value, on the shared axis.

use report::axis::Axis;
use report::labels::along;
use report::number::short;
use yew::prelude::*;

use crate::view::axis::{across, in_view};
use crate::view::map::px;

const SIZE: f64 = 11.0;

#[derive(Properties, PartialEq)]
pub(crate) struct RulerProps {
    pub(crate) axis: Axis,
    pub(crate) width: f64,
    pub(crate) root: f64,
    pub(crate) now: Option<f64>,
    pub(crate) best: Option<f64>,
    /// Whether `now` is a moment of the past.
    pub(crate) then: bool,
}

/// The ruler.
#[component]
pub(crate) fn Ruler(props: &RulerProps) -> Html {
    let width = props.width;
    let raw = |value: f64| across(&props.axis, width, value);
    let x = |value: f64| clipped(raw(value), width);
    let root = x(props.root);
    let now = props.now.filter(|now| (raw(*now) - raw(props.root)).abs() > 1.0);
    let end = now.map_or(root, x);
    let root_text = said("root", props.root, raw(props.root), width);
    let now_text =
        now.map(|now| said(if props.then { "then" } else { "now" }, now, raw(now), width));
    let mut wishes = vec![(root, root_text.as_str())];
    wishes.extend(now.zip(now_text.as_deref()).map(|(now, text)| (x(now), text)));
    let mut marks: Vec<f64> = wishes.iter().map(|wish| wish.0).collect();
    let best = props.best.filter(|best| in_view(raw(*best), width));
    marks.extend(best.map(x));
    let places = along(&wishes, &marks, props.width, SIZE);
    let texts = wishes.iter().zip(places);
    html! {
        <svg class="ruler" width={px(props.width)} height="26" aria-hidden="true">
            if let Some(best) = props.best {
                <line class="left" x1={px(end)} y1="19.5" x2={px(x(best))} y2="19.5" />
            }
            if let Some(best) = best {
                <line class="best" x1={px(x(best))} y1="0" x2={px(x(best))} y2="26" />
            }
            <line class="done" x1={px(root)} y1="19.5" x2={px(end)} y2="19.5" />
            for mark in wishes.iter().map(|wish| wish.0) {
                <line class="mark" x1={px(mark)} y1="5" x2={px(mark)} y2="24" />
            }
            for (wish, place) in texts {
                if let Some(left) = place { <text class="tick" x={px(left)} y="13">{ wish.1.to_owned() }</text> }
            }
        </svg>
    }
}

/// An x within the drawing.
fn clipped(x: f64, width: f64) -> f64 {
    let x = if x > 0.0 { x } else { 0.0 };
    if x < width { x } else { width }
}

/// A bound in words; an arrow says where it stands when it is out of view.
fn said(name: &str, value: f64, x: f64, width: f64) -> String {
    let value = short(value);
    if x < 0.0 {
        format!("\u{2190} {name} {value}")
    } else if x > width {
        format!("{name} {value} \u{2192}")
    } else {
        format!("{name} {value}")
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_bound_out_of_view_says_where_it_is() {
        assert_eq!(said("root", 12.0, -4.0, 100.0), "← root 12");
        assert_eq!(said("now", 12.0, 104.0, 100.0), "now 12 →");
        assert_eq!(said("now", 12.0, 50.0, 100.0), "now 12");
        assert_eq!((clipped(-4.0, 100.0), clipped(104.0, 100.0)), (0.0, 100.0));
    }
}
