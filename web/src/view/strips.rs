//! Lengths on one scale, strip below strip: jobs on machines over time, pieces in bins. Names
//! stand in the lengths that have room for them; the others have theirs as a title.

use record::message::{Drawing, Part, Picture, Strip};
use report::axis::Axis;
use report::number::{full, short};
use yew::prelude::*;

use crate::browser::size::use_width;
use crate::state::pointer::Shared;
use crate::view::map::{is_fractional, px};

/// Height of a strip, of what lies in it, and of the line of figures, in pixels.
const STRIP: f64 = 30.0;
const PART: f64 = 20.0;
const FIGURES: f64 = 20.0;
/// About so many figures stand below.
const FIGURED: u32 = 5;
/// Width of a letter, and the most that the names at the left take.
const LETTER: f64 = 7.0;
const NAMES: f64 = 120.0;

#[derive(Properties, PartialEq)]
pub(crate) struct StripsProps {
    pub(crate) drawing: Shared<Drawing>,
    /// The column that is chosen in the table of values.
    pub(crate) column: Option<u32>,
}

/// The strips.
#[component]
pub(crate) fn Strips(props: &StripsProps) -> Html {
    let node = use_node_ref();
    let width = use_width(&node);
    let Picture::Strips { strips, time } = &props.drawing.picture else { return Html::default() };
    let longest = strips.iter().map(|strip| strip.name.chars().count()).max().unwrap_or_default();
    let left = longest as f64 * LETTER + 8.0;
    let left = if left < NAMES { left } else { NAMES };
    let scale = Scale { left, step: (width - left - 8.0) / end(strips) };
    let below = STRIP * strips.len() as f64;
    html! {
        <div class="map" ref={node}>
            if width > 0.0 {
                <svg
                    width={width.to_string()} height={px(below + FIGURES)} role="img" class="strips"
                    aria-label={format!("{}; the values are in the table", props.drawing.name)}
                    data-testid="strips"
                >
                    { figures(&scale, end(strips), below) }
                    for (row, strip) in strips.iter().enumerate() {
                        { strip_of(strip, *time, (STRIP * row as f64, &scale), props.column) }
                    }
                </svg>
            }
        </div>
    }
}

/// Where the strips begin and how many pixels a unit takes.
struct Scale {
    left: f64,
    step: f64,
}

impl Scale {
    fn at(&self, value: f64) -> f64 {
        self.left + value * self.step
    }
}

/// The end of the longest strip or room.
fn end(strips: &[Strip]) -> f64 {
    let ends = strips.iter().flat_map(|strip| {
        strip.parts.iter().map(|part| part.to).chain(strip.limit.filter(|limit| limit.is_finite()))
    });
    let end = ends.fold(0.0, |most: f64, end| if end > most { end } else { most });
    if end > 0.0 { end } else { 1.0 }
}

fn figures(scale: &Scale, end: f64, below: f64) -> Html {
    html! {
        <g class="bars">
            <line x1={px(scale.left)} y1={px(below)} x2={px(scale.at(end))} y2={px(below)} />
            for value in Axis::fit(0.0, end, FIGURED).ticks().into_iter().filter(|&value| value <= end) {
                <text class="name" x={px(scale.at(value))} y={px(below + 14.0)} text-anchor="middle">{ short(value) }</text>
            }
        </g>
    }
}

fn strip_of(strip: &Strip, time: bool, (top, scale): (f64, &Scale), column: Option<u32>) -> Html {
    let letters = ((scale.left - 8.0) / LETTER).floor() as usize;
    html! {
        <g class="bars">
            <text class="name" x="0" y={px(top + 18.0)}>
                { shortened(&strip.name, letters) }
                <title>{ strip.name.clone() }</title>
            </text>
            for part in strip.parts.iter() { { length(part, &words(part, strip, time), (top, scale), column) } }
            if let Some(limit) = strip.limit {
                <line class="limit" x1={px(scale.at(limit))} y1={px(top + 1.0)} x2={px(scale.at(limit))} y2={px(top + STRIP - 3.0)}>
                    <title>{ format!("room for {}", full(limit)) }</title>
                </line>
            }
        </g>
    }
}

fn length(
    part: &Part,
    [name, title]: &[String; 2],
    (top, scale): (f64, &Scale),
    column: Option<u32>,
) -> Html {
    let (from, width) = (scale.at(part.from), (part.to - part.from) * scale.step);
    let class = classes!(
        is_fractional(part.value).then_some("fractional"),
        (column == Some(part.column)).then_some("chosen")
    );
    let room = ((width - 6.0) / LETTER).floor();
    let name = if room >= 1.0 { shortened(name, room as usize) } else { String::new() };
    html! {
        <g {class}>
            <rect x={px(from)} y={px(top + 3.0)} width={px(width)} height={px(PART)}>
                <title>{ title.clone() }</title>
            </rect>
            <text class="name" x={px(from + 4.0)} y={px(top + 17.0)}>{ name }</text>
        </g>
    }
}

/// What stands in a part, and its title in full.
fn words(part: &Part, strip: &Strip, time: bool) -> [String; 2] {
    let whole = part.value == 1.0;
    let times = if whole { String::new() } else { format!(" × {}", short(part.value)) };
    let inside = match (part.name == strip.name, whole) {
        (true, true) => String::new(),
        (true, false) => short(part.value),
        _ => format!("{}{times}", part.name),
    };
    let (from, to, length) = (full(part.from), full(part.to), full(part.to - part.from));
    let title = if time {
        format!("{}: {from} to {to}{times}", part.name)
    } else {
        format!("{}{times}: {length}", part.name)
    };
    [inside, title]
}

/// A name in so many letters: cut short where it is longer, left out where nothing of it is left.
fn shortened(name: &str, letters: usize) -> String {
    let length = name.chars().count();
    if length <= letters {
        name.to_owned()
    } else if letters < 3 {
        String::new()
    } else {
        name.chars().take(letters - 1).chain(['…']).collect()
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn names_are_cut_to_their_room() {
        assert_eq!(shortened("oven", 4), "oven");
        assert_eq!(shortened("large oven", 6), "large…");
        assert_eq!(shortened("oven", 2), "");
    }

    #[test]
    fn a_part_says_what_its_strip_does_not() {
        let part = |name: &str, value| Part {
            name: name.to_owned(),
            from: 2.0,
            to: 5.0,
            value,
            column: 0,
        };
        let strip = Strip { name: "dig".to_owned(), limit: None, parts: Vec::new() };
        let said = |part: &Part, time| words(part, &strip, time);
        assert_eq!(said(&part("dig", 1.0), true), ["", "dig: 2 to 5"]);
        assert_eq!(said(&part("dig", 0.25), true), ["0.25", "dig: 2 to 5 × 0.25"]);
        assert_eq!(said(&part("beam", 2.0), false), ["beam × 2", "beam × 2: 3"]);
    }

    #[test]
    fn the_scale_reaches_the_end_of_what_is_longest() {
        let part = Part { name: String::new(), from: 2.0, to: 7.0, value: 1.0, column: 0 };
        let strip = |limit| Strip { name: String::new(), limit, parts: vec![part.clone()] };
        assert_eq!(end(&[strip(None)]), 7.0);
        assert_eq!(end(&[strip(Some(9.0))]), 9.0);
        assert_eq!(end(&[]), 1.0);
    }
}
