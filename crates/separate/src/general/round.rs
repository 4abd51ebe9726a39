//! Multipliers as fractions, and which of the cuts of a round are taken.

use model::{Number, nearest_f64};

use super::GeneralCut;

/// The largest denominator of a multiplier.
const LARGEST_DENOMINATOR: i64 = 10_000;
/// How near a fraction must be to its multiplier, relative to 1 + |y|.
const NEAR: f64 = 1e-9;
/// The grid of multipliers that are no such fraction.
const GRID: f64 = 16_777_216.0;
/// Cuts whose directions are nearer than this cosine are parallel.
const PARALLEL: f64 = 0.95;

/// A simple fraction near a floating-point number, by continued fractions, or the nearest on a
/// grid. Any number serves as a multiplier; a simple one gives short cuts.
#[must_use]
pub fn fraction(value: f64) -> Option<Number> {
    if !value.is_finite() || value.abs() > 1e9 {
        return None;
    }
    let (mut before, mut now) = ((0_i64, 1_i64), (1_i64, 0_i64));
    let mut rest = value;
    for _ in 0..20 {
        let whole = rest.floor();
        #[expect(clippy::cast_possible_truncation, reason = "at most 10⁹, or the loop ends")]
        let step = whole as i64;
        let next = (step.checked_mul(now.0)? + before.0, step.checked_mul(now.1)? + before.1);
        if next.1 > LARGEST_DENOMINATOR {
            break;
        }
        (before, now) = (now, next);
        let found = Number::from_parts(now.0.into(), now.1.unsigned_abs().into());
        if (nearest_f64(&found) - value).abs() <= NEAR * (1.0 + value.abs()) {
            return Some(found);
        }
        rest = 1.0 / (rest - whole);
        if !rest.is_finite() || rest.abs() > 1e9 {
            break;
        }
    }
    Number::try_from((value * GRID).round() / GRID).ok()
}

/// The best cuts of a round, at most `most`: by falling efficacy, none nearly parallel to one
/// taken before.
#[must_use]
pub fn choose(mut cuts: Vec<GeneralCut>, most: usize) -> Vec<GeneralCut> {
    let first = |cut: &GeneralCut| (cut.class, cut.row.entries.first().map(|(column, _)| *column));
    cuts.sort_by(|a, b| b.efficacy.total_cmp(&a.efficacy).then_with(|| first(a).cmp(&first(b))));
    let mut taken: Vec<GeneralCut> = Vec::new();
    for cut in cuts {
        if taken.len() >= most {
            break;
        }
        if taken.iter().all(|other| cosine(other, &cut) < PARALLEL) {
            taken.push(cut);
        }
    }
    taken
}

/// The cosine of the angle between the directions of two cuts.
#[must_use]
pub fn cosine(a: &GeneralCut, b: &GeneralCut) -> f64 {
    let length = |cut: &GeneralCut| {
        cut.row.entries.iter().fold(0.0, |sum, (_, a)| sum + nearest_f64(a) * nearest_f64(a)).sqrt()
    };
    let mut product = 0.0;
    let mut others = b.row.entries.iter().peekable();
    for (column, value) in &a.row.entries {
        while others.peek().is_some_and(|(other, _)| other < column) {
            others.next();
        }
        if let Some((_, other)) = others.peek().filter(|(other, _)| other == column) {
            product += nearest_f64(value) * nearest_f64(other);
        }
    }
    product / (length(a) * length(b))
}
