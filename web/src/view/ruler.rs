//! The bound ruler of a lane: the root's bound, the bound now, and what is left to the best known
//! value, on the shared axis.

use report::axis::Axis;
use report::labels::along;
use report::number::short;
use yew::prelude::*;

use crate::view::axis::across;
use crate::view::map::px;

const SIZE: f64 = 11.0;

#[derive(Properties, PartialEq)]
pub(crate) struct RulerProps {
    pub(crate) axis: Axis,
    pub(crate) width: f64,
    pub(crate) root: f64,
    pub(crate) now: Option<f64>,
    pub(crate) best: Option<f64>,
}

/// The ruler.
#[component]
pub(crate) fn Ruler(props: &RulerProps) -> Html {
    let x = |value: f64| across(&props.axis, props.width, value);
    let root = x(props.root);
    let now = props.now.filter(|now| (x(*now) - root).abs() > 1.0);
    let end = now.map_or(root, x);
    let root_text = format!("root {}", short(props.root));
    let now_text = now.map(|now| format!("now {}", short(now)));
    let mut wishes = vec![(root, root_text.as_str())];
    wishes.extend(now.zip(now_text.as_deref()).map(|(now, text)| (x(now), text)));
    let mut marks: Vec<f64> = wishes.iter().map(|wish| wish.0).collect();
    marks.extend(props.best.map(x));
    let places = along(&wishes, &marks, props.width, SIZE);
    let texts = wishes.iter().zip(places);
    html! {
        <svg class="ruler" width={px(props.width)} height="26" aria-hidden="true">
            if let Some(best) = props.best {
                <line class="left" x1={px(end)} y1="19.5" x2={px(x(best))} y2="19.5" />
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
