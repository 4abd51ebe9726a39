//! Bars over time: one row of bars a variable, each row on a scale of its own.

use record::message::{Drawing, Picture};
use report::number::{full, short};
use yew::prelude::*;

use crate::browser::size::use_width;
use crate::state::pointer::Shared;
use crate::view::map::px;

/// Height of a row, of its bars, and of the line of periods, in pixels.
const ROW: f64 = 76.0;
const BAR: f64 = 48.0;
const PERIODS: f64 = 20.0;
/// Width left to the names.
const NAMES: f64 = 28.0;
/// Width that the digits of a value, and of a period, take.
const DIGITS: f64 = 7.0;

#[derive(Properties, PartialEq)]
pub(crate) struct BarsProps {
    pub(crate) drawing: Shared<Drawing>,
}

/// The bars.
#[component]
pub(crate) fn Bars(props: &BarsProps) -> Html {
    let node = use_node_ref();
    let width = use_width(&node);
    let Picture::Bars { periods, series } = &props.drawing.picture else { return Html::default() };
    let step = (width - NAMES) / periods.len().max(1) as f64;
    let below = ROW * series.len() as f64 + 14.0;
    let every = (widest(periods.iter().map(ToString::to_string)) / step).ceil() as usize;
    html! {
        <div class="map" ref={node}>
            if width > 0.0 {
                <svg
                    width={width.to_string()} height={(below + PERIODS - 14.0).to_string()} role="img"
                    aria-label={format!("{}; the values are in the table", props.drawing.name)}
                    data-testid="bars"
                >
                    for (row, (name, values)) in series.iter().enumerate() {
                        { bars(name, values, periods, (ROW * row as f64, step)) }
                    }
                    for (place, period) in periods.iter().enumerate().step_by(every.max(1)) {
                        <text class="name" x={px(middle(place, step))} y={px(below)} text-anchor="middle">{ period.to_string() }</text>
                    }
                </svg>
            }
        </div>
    }
}

fn middle(place: usize, step: f64) -> f64 {
    NAMES + (place as f64 + 0.5) * step
}

/// The pixels that the longest of some texts takes, with room beside it.
fn widest(texts: impl Iterator<Item = String>) -> f64 {
    texts.map(|text| text.chars().count()).max().unwrap_or(0) as f64 * DIGITS + 4.0
}

fn bars(name: &str, values: &[Option<f64>], periods: &[i64], (top, step): (f64, f64)) -> Html {
    let shown = values.iter().flatten().copied();
    let (low, high) = extent(shown.clone());
    let scale = if high > low { BAR / (high - low) } else { 0.0 };
    let base = top + ROW - 12.0 + low * scale;
    let named = widest(shown.map(short)) <= step;
    let bar = |(place, value): (usize, Option<f64>)| {
        let value = value?;
        let (height, up) = (value.abs() * scale, value >= 0.0);
        let y = if up { base - height } else { base };
        let text = if up { y - 4.0 } else { y + height + 11.0 };
        Some(html! {
            <g key={place}>
                <rect x={px(middle(place, step) - step * 0.32)} y={px(y)} width={px(step * 0.64)} height={px(height)}>
                    <title>{ format!("{name}[{}] = {}", periods[place], full(value)) }</title>
                </rect>
                if named && value.abs() * scale > 0.5 {
                    <text class="name" x={px(middle(place, step))} y={px(text)} text-anchor="middle">{ short(value) }</text>
                }
            </g>
        })
    };
    let right = middle(values.len(), step) - step * 0.5;
    html! {
        <g class="bars">
            for bar in values.iter().copied().enumerate().filter_map(bar) { { bar } }
            <line x1={px(NAMES)} y1={px(base)} x2={px(right)} y2={px(base)} />
            <text class="name series" x="0" y={px(base)}>{ name.to_owned() }</text>
            if !named {
                <text class="name" x="0" y={px(base - BAR + 4.0)}>{ short(high) }</text>
            }
        </g>
    }
}

/// The least and the greatest value, 0 among them.
fn extent(values: impl Iterator<Item = f64>) -> (f64, f64) {
    values.fold((0.0, 0.0), |(low, high), value| {
        (if value < low { value } else { low }, if value > high { value } else { high })
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn bars_stand_on_zero() {
        assert_eq!(extent([3.0, 7.0].into_iter()), (0.0, 7.0));
        assert_eq!(extent([-2.0].into_iter()), (-2.0, 0.0));
        assert_eq!(extent([].into_iter()), (0.0, 0.0));
    }
}
