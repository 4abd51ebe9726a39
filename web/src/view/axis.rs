//! The shared axis over all lanes: ticks, unit, and the best known value.

use report::axis::Axis;
use report::labels::text_width;
use report::number::short;
use yew::prelude::*;

use crate::state::lens::Lens;
use crate::state::span::Span;
use crate::view::map::px;

/// Room at both ends of the axis, so that marks at the ends are whole.
const ROOM: f64 = 14.0;

/// Size of its texts in pixels.
const SIZE: f64 = 12.0;

/// How much wider bold text is.
const BOLD: f64 = 1.12;

/// The x of a value on a drawing of some width.
pub(crate) fn across(axis: &Axis, width: f64, value: f64) -> f64 {
    ROOM + axis.place(value, width - 2.0 * ROOM)
}

/// Pixels of axis a labelled tick wants.
pub(crate) const TICK: f64 = 110.0;

/// The part of an axis in view on a drawing of some width.
pub(crate) fn shown_part(axis: &Axis, part: Option<Span>, width: f64) -> Axis {
    part.map_or(*axis, |part| axis.part(part, (width / TICK) as u32))
}

/// The best value known, and whose it is.
#[derive(Debug, Clone, PartialEq)]
pub(crate) struct Best {
    /// The value.
    pub(crate) value: f64,
    /// "found by C", "given".
    pub(crate) whose: String,
}

#[derive(Properties, PartialEq)]
pub(crate) struct AxisProps {
    pub(crate) axis: Axis,
    pub(crate) width: f64,
    pub(crate) best: Option<Best>,
}

/// The axis.
#[component]
pub(crate) fn AxisView(props: &AxisProps) -> Html {
    let lens = use_context::<UseReducerHandle<Lens>>();
    let part = lens.and_then(|lens| lens.part);
    let width = props.width;
    let axis = &shown_part(&props.axis, part, width);
    let end = px(width - ROOM);
    html! {
        <svg class="axis" width={px(width)} height="44" role="img" aria-label={label(props, axis)}>
            <line class="rule" x1={px(ROOM)} y1="43.5" x2={end} y2="43.5" />
            for tick in axis.ticks() {
                <line class="rule" x1={px(across(axis, width, tick))} y1="38" x2={px(across(axis, width, tick))} y2="44" />
                { tick_label(props, axis, tick) }
            }
            if let Some(best) = &props.best { { best_mark(axis, width, best) } }
        </svg>
    }
}

fn label(props: &AxisProps, axis: &Axis) -> String {
    let (low, high) = (short(axis.low), short(axis.high));
    let best = props.best.as_ref().map_or_else(String::new, |best| {
        format!("; best known value {}, {}", short(best.value), best.whose)
    });
    format!("Shared axis of bounds from {low} to {high}{best}")
}

/// The text of a tick, unless the line of the best value would run through it.
fn tick_label(props: &AxisProps, axis: &Axis, tick: f64) -> Html {
    let width = props.width;
    let text = axis.label(tick);
    let half = text_width(&text, SIZE) / 2.0;
    let x = within(across(axis, width, tick) - half, 2.0 * half, width);
    let best = props.best.as_ref().map(|best| across(axis, width, best.value));
    if best.is_some_and(|best| x - 4.0 < best && best < x + 2.0 * half + 4.0) {
        return Html::default();
    }
    html! { <text class="tick" x={px(x)} y="34">{ text }</text> }
}

fn best_mark(axis: &Axis, width: f64, best: &Best) -> Html {
    let x = across(axis, width, best.value);
    let text = format!("best known {} ({})", short(best.value), best.whose);
    let length = text_width(&text, SIZE) * BOLD;
    let left = within(x - length / 2.0, length, width);
    html! {
        <>
            if in_view(x, width) {
                <line class="best" x1={px(x)} y1="19" x2={px(x)} y2="44" />
            }
            <text class="tick strong" x={px(left)} y="14" data-testid="best">{ text }</text>
        </>
    }
}

/// Whether an x stands on a drawing of some width.
pub(crate) fn in_view(x: f64, width: f64) -> bool {
    (0.0..=width).contains(&x)
}

/// The left end of a text that stays within the width.
fn within(left: f64, length: f64, width: f64) -> f64 {
    let left = if left + length > width { width - length } else { left };
    if left > 0.0 { left } else { 0.0 }
}
