//! Two plans side by side: the one on which rivals differ, and the nearest one that the other admits.
//! Elements stand on a circle and pairs are arrows between them; a dashed arrow is in one of the plans
//! alone. Plans that are no pairs of few elements are written value by value, with a dot before what is in
//! one of them alone.

use record::results::SolutionEntry;
use record::study::Counterexample;

use super::{Figure, entries};
use crate::spring::places;

/// Elements at most that are drawn.
const MOST_ELEMENTS: usize = 16;
/// Letters of a name at most, and values of a plan that are written.
const MOST_LETTERS: usize = 14;
const MOST_VALUES: usize = 16;
/// The height of a line of words.
const LINE: usize = 20;
/// Width and height of a plan, the radius of the circle, and room for names.
const SIDE: f64 = 320.0;
const RADIUS: f64 = 84.0;
const NAME: f64 = 22.0;
/// Room for the line above a plan.
const HEAD: f64 = 28.0;
/// How far an arrow ends before its element, how long its barbs are, and how far to the right of the
/// straight line it runs, so that there and back are two.
const GAP: f64 = 14.0;
const BARB: f64 = 7.0;
const ASIDE: f64 = 4.0;

type Place = (f64, f64);

/// The drawing of a counterexample; `None` where its plan is nothing but zeros.
pub(super) fn figure(example: &Counterexample) -> Option<Figure> {
    circles(example).or_else(|| listed(example))
}

/// Both plans value by value.
fn listed(example: &Counterexample) -> Option<Figure> {
    if example.plan.is_empty() {
        return None;
    }
    let mut out = empty(example);
    let mut rows = 0;
    let plans = [(&example.plan, &example.nearest), (&example.nearest, &example.plan)];
    for (side, (plan, other)) in plans.into_iter().enumerate() {
        let alone = |entry: &SolutionEntry| !other.is_empty() && !other.contains(entry);
        let mark = |place: usize| plan.get(place).is_some_and(alone);
        let lines: Vec<String> = entries(plan, MOST_VALUES)
            .into_iter()
            .enumerate()
            .map(|(place, text)| if mark(place) { "• ".to_owned() + &text } else { text })
            .collect();
        rows = rows.max(lines.len());
        let x = side * whole(SIDE) + 12;
        let placed = lines.into_iter().enumerate();
        out.words.extend(placed.map(|(row, text)| (x, whole(HEAD) + LINE * (row + 1), text)));
    }
    out.size.1 = whole(HEAD) + LINE * (rows + 1);
    Some(out)
}

/// The drawing with its words and no plan.
fn empty(example: &Counterexample) -> Figure {
    let (own, other) = (&example.admitted_by, &example.refused_by);
    let mut out = Figure {
        label: format!("The plan that {own} admits and {other} refuses"),
        size: (whole(SIDE), whole(SIDE + HEAD)),
        ..Figure::default()
    };
    let head = |side: f64, text: String| (whole(side * SIDE + 12.0), 18, text);
    let refused = if example.values.is_some() { "values it otherwise" } else { "does not" };
    out.words.push(head(0.0, format!("{own} admits it, {other} {refused}")));
    if !example.nearest.is_empty() {
        out.label += &format!(", and the nearest plan that {other} admits");
        out.size.0 *= 2;
        out.words.push(head(1.0, format!("the nearest that {other} admits")));
    }
    out
}

/// Both plans as arrows; `None` where they are not pairs of few elements.
fn circles(example: &Counterexample) -> Option<Figure> {
    let (plan, nearest) = (pairs(&example.plan)?, pairs(&example.nearest)?);
    let mut elements: Vec<&str> = example.elements.iter().map(String::as_str).collect();
    for name in plan.iter().chain(&nearest).flat_map(|(from, to)| [*from, *to]) {
        if !elements.contains(&name) {
            elements.push(name);
        }
    }
    if elements.len() > MOST_ELEMENTS || plan.is_empty() {
        return None;
    }
    let mut out = empty(example);
    draw(&mut out, 0.0, &elements, (&plan, &nearest));
    if !nearest.is_empty() {
        draw(&mut out, 1.0, &elements, (&nearest, &plan));
    }
    Some(out)
}

/// The pairs that a plan uses; `None` where it uses anything else.
fn pairs(plan: &[SolutionEntry]) -> Option<Pairs<'_>> {
    let pair = |entry: &SolutionEntry| entry.indices.len() == 2 && entry.value > 0.5;
    plan.iter().all(pair).then(|| {
        plan.iter().map(|entry| (entry.indices[0].as_str(), entry.indices[1].as_str())).collect()
    })
}

type Pairs<'p> = Vec<(&'p str, &'p str)>;

fn draw(out: &mut Figure, side: f64, elements: &[&str], (plan, other): (&Pairs, &Pairs)) {
    let centre = (side * SIDE + SIDE / 2.0, HEAD + SIDE / 2.0);
    // Without edges the vertices stand on a circle.
    let circle = places(elements.len(), &[]);
    let at = |radius: f64, place: usize| {
        let (x, y) = circle[place];
        (centre.0 + 2.0 * radius * (x - 0.5), centre.1 + 2.0 * radius * (y - 0.5))
    };
    for (place, name) in elements.iter().enumerate() {
        let (x, y) = at(RADIUS + NAME, place);
        out.names.push((whole(x), whole(y + 4.0), shortened(name)));
    }
    let place = |name: &str| elements.iter().position(|known| *known == name);
    for pair in plan {
        let (Some(from), Some(to)) = (place(pair.0), place(pair.1)) else { continue };
        let both = other.is_empty() || other.contains(pair);
        let dashes = if both { "none" } else { "5 4" };
        arrow(out, (at(RADIUS, from), at(RADIUS, to)), dashes);
    }
}

fn shortened(name: &str) -> String {
    if name.chars().count() <= MOST_LETTERS {
        return name.to_owned();
    }
    name.chars().take(MOST_LETTERS - 1).chain(['…']).collect()
}

fn arrow(out: &mut Figure, ((x1, y1), (x2, y2)): (Place, Place), dashes: &'static str) {
    let length = ((x2 - x1) * (x2 - x1) + (y2 - y1) * (y2 - y1)).sqrt();
    if length < 2.0 * GAP {
        return;
    }
    let (along, across) = (((x2 - x1) / length, (y2 - y1) / length), ASIDE);
    let at = |from: f64, right: f64| {
        let (x, y) = (x1 + along.0 * from - along.1 * right, y1 + along.1 * from + along.0 * right);
        (whole(x), whole(y))
    };
    let tip = at(length - GAP, across);
    let mut line = |(x, y): (usize, usize), dashes| out.lines.push(([x, y, tip.0, tip.1], dashes));
    line(at(GAP, across), dashes);
    line(at(length - GAP - BARB, across + BARB / 2.0), "none");
    line(at(length - GAP - BARB, across - BARB / 2.0), "none");
}

/// A place in whole pixels; nothing lies left of or above the drawing.
fn whole(value: f64) -> usize {
    #[allow(clippy::cast_possible_truncation, clippy::cast_sign_loss, reason = "0 to 1,000")]
    let pixels = (if value > 0.0 { value + 0.5 } else { 0.0 }) as usize;
    pixels
}

#[cfg(test)]
mod tests {
    use super::*;

    fn plan(pairs: &[(&str, &str)]) -> Vec<SolutionEntry> {
        let entry = |(from, to): &(&str, &str)| SolutionEntry {
            variable: "x".to_owned(),
            indices: vec![(*from).to_owned(), (*to).to_owned()],
            value: 1.0,
        };
        pairs.iter().map(entry).collect()
    }

    #[test]
    fn two_plans_stand_side_by_side_and_what_differs_is_dashed() {
        let example = Counterexample {
            admitted_by: "A".to_owned(),
            refused_by: "B".to_owned(),
            plan: plan(&[("p", "q"), ("q", "p"), ("r", "s"), ("s", "r")]),
            nearest: plan(&[("p", "q"), ("q", "r"), ("r", "s"), ("s", "p")]),
            ..Counterexample::default()
        };
        let drawn = figure(&example).unwrap_or_default();
        let dashed = drawn.lines.iter().filter(|(_, dashes)| *dashes == "5 4").count();
        assert_eq!((drawn.lines.len(), dashed, drawn.names.len()), (24, 4, 8), "{drawn:?}");
        assert!(drawn.svg().contains(">the nearest that B admits<"));
        // One index is no pair: value by value, and what is in one plan alone has a dot.
        let mut other = example;
        other.plan[0].indices.pop();
        let drawn = figure(&other).unwrap_or_default();
        assert!(drawn.lines.is_empty(), "{drawn:?}");
        let dotted = drawn.words.iter().filter(|(_, _, word)| word.starts_with('•')).count();
        assert_eq!(dotted, 6, "{drawn:?}");
    }
}
