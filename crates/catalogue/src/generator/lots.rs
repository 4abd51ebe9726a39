//! Lot sizing: demand and costs by period, as named blocks. The cost of a unit may fall from one
//! period to the next by more than holding costs, and rise again.

use super::Class;
use super::draw::Draw;

pub(super) fn periods(size: u32, class: Class, seed: u64) -> String {
    let mut draw = Draw::new(seed);
    let periods: Vec<String> = (1..=size).map(|t| t.to_string()).collect();
    let mut text = format!("T\n{}\n", periods.join(" "));
    let mut block = |name: char, value: &mut dyn FnMut(&mut Draw) -> i64| {
        text.push_str(&format!("\n{name} by t\n"));
        for period in &periods {
            text.push_str(&format!("{period} {}\n", value(&mut draw)));
        }
    };
    block('d', &mut |draw| demand(draw, class));
    let set_up = if class == Class::ZeroOne { (1, 4) } else { (50, 200) };
    block('f', &mut |draw| set_up.0 + draw.below(set_up.1));
    block('p', &mut |draw| 1 + draw.below(4));
    block('h', &mut |draw| 1 + draw.below(2));
    text
}

/// Clustered: two periods of three are without demand.
fn demand(draw: &mut Draw, class: Class) -> i64 {
    match class {
        Class::ZeroOne => draw.below(2),
        Class::Clustered if draw.below(3) > 0 => 0,
        Class::Clustered => 60 + draw.below(120),
        Class::Uniform => draw.below(100),
        Class::Euclidean | Class::NearlySymmetric => draw.amount(class, 0, 100),
    }
}
