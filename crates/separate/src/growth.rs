//! Sets grown greedily from one element, for members with a rounded sum: at each step the
//! element that makes the member most violated is added (the constructive heuristic of
//! capacity cuts; Augerat et al. 1998).

use crate::conditions::{Conditions, Fixed};
use crate::quadratic::Quadratic;

/// The most violated set met on the way from `seed`, and the work. `O(n² + pairs)`.
pub(crate) fn grown(
    quadratic: &Quadratic,
    conditions: &Conditions,
    seed: usize,
) -> (Vec<Vec<bool>>, u64) {
    let size = conditions.fixed.len();
    if conditions.fixed[seed] == Fixed::Out {
        return (Vec::new(), 1);
    }
    let mut set: Vec<bool> = conditions.fixed.iter().map(|fixed| *fixed == Fixed::In).collect();
    let mut growing = Growing::new(quadratic, &set);
    growing.add(quadratic, &mut set, seed);
    let mut best: Option<(f64, Vec<bool>)> = None;
    let mut ticks = 0;
    loop {
        ticks += size + quadratic.pairs.len();
        if conditions.failure(&set).is_none() {
            let violation = quadratic.rounded_violation(&set);
            if best.as_ref().is_none_or(|(most, _)| violation > *most) {
                best = Some((violation, set.clone()));
            }
        }
        let free = |i: &usize| !set[*i] && conditions.fixed[*i] == Fixed::Free;
        let mut next: Option<((f64, f64), usize)> = None;
        for place in (0..size).filter(free) {
            let plain = growing.violation + growing.change[place];
            let mut with = set.clone();
            with[place] = true;
            let key = (plain + quadratic.gain(&with), plain);
            if next.is_none_or(|(most, _)| key > most) {
                next = Some((key, place));
            }
        }
        let Some((_, place)) = next else { break };
        growing.add(quadratic, &mut set, place);
    }
    let sets = best.into_iter().map(|(_, set)| set).collect();
    (sets, u64::try_from(ticks).unwrap_or(u64::MAX))
}

/// The violation of a set but for rounding, and how it changes with each element.
struct Growing {
    violation: f64,
    /// What adding an element changes, by place.
    change: Vec<f64>,
}

impl Growing {
    fn new(quadratic: &Quadratic, set: &[bool]) -> Self {
        let mut change: Vec<f64> = quadratic.linear.iter().map(|value| -value).collect();
        for &(i, j, there, back) in &quadratic.pairs {
            change[i] += if set[j] { back } else { -there };
            change[j] += if set[i] { there } else { -back };
        }
        Self { violation: quadratic.violation(set), change }
    }

    fn add(&mut self, quadratic: &Quadratic, set: &mut [bool], place: usize) {
        if set[place] {
            return;
        }
        self.violation += self.change[place];
        set[place] = true;
        for &(i, j, there, back) in &quadratic.pairs {
            if i == place {
                self.change[j] += there + back;
            } else if j == place {
                self.change[i] += there + back;
            }
        }
    }
}
