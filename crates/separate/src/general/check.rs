//! Checks that a cut follows from its derivation, in exact arithmetic, from the rows as given.

use std::collections::{BTreeMap, BTreeSet};

use model::{ColumnId, Number, Row};

use super::GeneralCut;
use super::aggregate::Frame;
use super::derivation::{Combination, Derivation, Literal, Used};

/// The most values that the knapsack over a cut's coefficients goes through.
const MOST_VALUES: usize = 10_000;

/// `Σ entries ≤ side`.
#[derive(Debug, Clone, Default)]
struct AtMost {
    entries: BTreeMap<ColumnId, Number>,
    side: Number,
}

/// Whether `cut` holds at every point of the frame that meets these rows and is whole where it must
/// be, as its derivation says. `O(non-zeros of the rows used · log)`; of a cover `O(columns ·
/// right side)`, of paths exponential in their (at most four) stops.
#[must_use]
pub fn follows(cut: &GeneralCut, rows: &[Row], frame: &Frame) -> bool {
    let check = Check { row: &cut.row, rows, frame };
    let holds = match &cut.derivation {
        Derivation::Rounding { sum, divisor, upper } => check.rounding(sum, divisor, upper),
        Derivation::Knapsack(used) => check.knapsack(*used),
        Derivation::Conflicts { cycle, hubs, witnesses } => check.conflicts(cycle, hubs, witnesses),
        Derivation::Cases { split, proofs } => check.cases(split, proofs),
        Derivation::Paths { arcs, pairs, cycles } => check.paths(arcs, pairs, cycles),
    };
    holds == Some(true) && cut.row.lower.is_none()
}

struct Check<'a> {
    row: &'a Row,
    rows: &'a [Row],
    frame: &'a Frame,
}

impl Check<'_> {
    fn side(&self, used: Used) -> Option<(&Row, &Number)> {
        let row = self.rows.get(used.row)?;
        Some((row, (if used.upper { &row.upper } else { &row.lower }).as_ref()?))
    }

    /// A row as `Σ ≤ side`.
    fn at_most(&self, used: Used) -> Option<AtMost> {
        let (row, side) = self.side(used)?;
        let sign = Number::from(if used.upper { 1 } else { -1 });
        let entries = row.entries.iter().map(|(column, a)| (*column, a * &sign)).collect();
        Some(AtMost { entries, side: side * &sign })
    }

    fn bound(
        &self,
        fixed: &BTreeMap<ColumnId, bool>,
        column: ColumnId,
        upper: bool,
    ) -> Option<Number> {
        if let Some(&one) = fixed.get(&column) {
            return Some(Number::from(u8::from(one)));
        }
        let (low, high) = &self.frame.bounds[column.index()];
        (if upper { high } else { low }).clone()
    }

    /// The most of `Σ entries` over the bounds; `None` is infinite.
    fn most(
        &self,
        entries: &BTreeMap<ColumnId, Number>,
        fixed: &BTreeMap<ColumnId, bool>,
    ) -> Option<Number> {
        let mut most = Number::ZERO;
        for (&column, a) in entries.iter().filter(|(_, a)| !a.is_zero()) {
            most += a * self.bound(fixed, column, *a > Number::ZERO)?;
        }
        Some(most)
    }

    /// Whether the cut is no stronger than a row over these bounds.
    fn implied(&self, by: AtMost, fixed: &BTreeMap<ColumnId, bool>) -> Option<bool> {
        let AtMost { mut entries, side } = by;
        entries.values_mut().for_each(|a| *a = -a.clone());
        for (column, a) in &self.row.entries {
            *entries.entry(*column).or_default() += a;
        }
        Some(self.most(&entries, fixed)? + side <= *self.row.upper.as_ref()?)
    }

    fn combined(&self, combination: &[(usize, Number)]) -> Option<AtMost> {
        let mut sum = AtMost::default();
        for (row, y) in combination {
            let (row, side) = self.side(Used { row: *row, upper: *y > Number::ZERO })?;
            sum.side += side * y;
            for (column, a) in &row.entries {
                *sum.entries.entry(*column).or_default() += a * y;
            }
        }
        Some(sum)
    }

    fn is_whole(&self, column: ColumnId) -> bool {
        self.frame.integer[column.index()]
    }

    fn is_binary(&self, column: ColumnId) -> bool {
        self.frame.is_binary(column)
    }

    fn rounding(
        &self,
        sum: &[(Used, Number)],
        divisor: &Number,
        upper: &BTreeSet<ColumnId>,
    ) -> Option<bool> {
        if *divisor <= Number::ZERO {
            return None;
        }
        let mut total = AtMost::default();
        for (used, y) in sum {
            let (row, side) = self.side(*used)?;
            let y = y / divisor;
            total.side += side * &y;
            for (column, a) in &row.entries {
                *total.entries.entry(*column).or_default() += a * &y;
            }
        }
        let at = |column| self.bound(&BTreeMap::new(), column, upper.contains(&column));
        let mut right = total.side.clone();
        for (&column, a) in total.entries.iter().filter(|(_, a)| !a.is_zero()) {
            right -= a * at(column)?;
        }
        let floor = Number::from(right.floor());
        let f = &right - &floor;
        if f.is_zero() {
            return None;
        }
        let round = |a: &Number, whole: bool| {
            let low = if whole { Number::from(a.floor()) } else { Number::ZERO };
            let over = if whole { a - &low - &f } else { a.clone() };
            let counts = if whole { over > Number::ZERO } else { over < Number::ZERO };
            if counts { low + over / (Number::ONE - &f) } else { low }
        };
        let mut cut = AtMost { entries: BTreeMap::new(), side: floor };
        for (&column, a) in total.entries.iter().filter(|(_, a)| !a.is_zero()) {
            let bound = at(column)?;
            let whole = self.is_whole(column) && bound.is_int();
            let turn = if upper.contains(&column) { -Number::ONE } else { Number::ONE };
            let g = round(&(a * &turn), whole) * turn;
            cut.side += &g * bound;
            *cut.entries.entry(column).or_default() += g;
        }
        for (used, y) in sum.iter().filter(|(used, _)| !self.is_equation(used.row)) {
            let slack = self.at_most(*used)?;
            let whole = slack.side.is_int()
                && slack.entries.iter().all(|(column, a)| self.is_whole(*column) && a.is_int());
            let sign = Number::from(if used.upper { 1 } else { -1 });
            let g = round(&(y / divisor * sign), whole);
            cut.side -= &g * slack.side;
            for (column, a) in slack.entries {
                *cut.entries.entry(column).or_default() -= &g * a;
            }
        }
        self.implied(cut, &BTreeMap::new())
    }

    fn is_equation(&self, row: usize) -> bool {
        self.rows[row].lower == self.rows[row].upper
    }

    fn knapsack(&self, used: Used) -> Option<bool> {
        let row = self.at_most(used)?;
        let (mut right, mut capacity) = (self.row.upper.clone()?, row.side);
        let mut items: Vec<(usize, Number)> = Vec::new();
        let mut left: BTreeMap<ColumnId, &Number> =
            self.row.entries.iter().map(|(column, a)| (*column, a)).collect();
        for (column, a) in row.entries {
            if !self.is_binary(column) {
                return None;
            }
            let value = left.remove(&column).cloned().unwrap_or_default();
            let turned = a < Number::ZERO;
            let (weight, value) = if turned { (-a, -value) } else { (a, value) };
            if turned {
                capacity += &weight;
                right += &value;
            }
            if value < Number::ZERO || !value.is_int() {
                return None;
            }
            items.push((usize::try_from(value.numerator()).ok()?, weight));
        }
        let right = usize::try_from(Number::from(right.floor()).numerator()).ok()?;
        if !left.is_empty() || right > MOST_VALUES {
            return None;
        }
        // the least weight at which a value is reached, all over the right side as one
        let mut lightest: Vec<Option<Number>> = vec![None; right + 2];
        lightest[0] = Some(Number::ZERO);
        for (value, weight) in items.into_iter().filter(|(value, _)| *value > 0) {
            for from in (0..=right).rev() {
                let Some(with) = lightest[from].as_ref().map(|own| own + &weight) else { continue };
                let to = if from + value > right { right + 1 } else { from + value };
                if lightest[to].as_ref().is_none_or(|own| with < *own) {
                    lightest[to] = Some(with);
                }
            }
        }
        Some(lightest[right + 1].as_ref().is_none_or(|weight| *weight > capacity))
    }

    /// Whether a row cannot hold with all of these literals 1.
    fn breaks(&self, row: AtMost, fixed: &BTreeMap<ColumnId, bool>) -> Option<bool> {
        let turned = row.entries.into_iter().map(|(column, a)| (column, -a)).collect();
        Some(-self.most(&turned, fixed)? > row.side)
    }

    fn conflict(&self, a: Literal, b: Literal, used: Used) -> bool {
        let fixed = BTreeMap::from([(a.column, a.plain), (b.column, b.plain)]);
        let both = a.column != b.column && self.is_binary(a.column) && self.is_binary(b.column);
        let breaks = || self.at_most(used).and_then(|row| self.breaks(row, &fixed));
        both && breaks() == Some(true)
    }

    fn conflicts(&self, cycle: &[Literal], hubs: &[Literal], witnesses: &[Used]) -> Option<bool> {
        let mut pairs: Vec<(Literal, Literal)> = Vec::new();
        if !cycle.is_empty() {
            let next = cycle.iter().skip(1).chain(cycle.first());
            pairs.extend(cycle.iter().copied().zip(next.copied()));
        }
        for (place, &hub) in hubs.iter().enumerate() {
            pairs.extend(cycle.iter().chain(&hubs[..place]).map(|&other| (hub, other)));
        }
        let met = pairs.len() == witnesses.len()
            && pairs.iter().zip(witnesses).all(|(&(a, b), &used)| self.conflict(a, b, used));
        if !met || (cycle.len().is_multiple_of(2) && !cycle.is_empty()) || cycle.len() == 1 {
            return None;
        }
        let most = if cycle.is_empty() { 1 } else { cycle.len() / 2 };
        let mut cut = AtMost { entries: BTreeMap::new(), side: Number::from(most) };
        let own = cycle.iter().map(|literal| (literal, 1));
        for (literal, count) in own.chain(hubs.iter().map(|literal| (literal, most))) {
            let a = Number::from(count);
            if !literal.plain {
                cut.side -= &a;
            }
            *cut.entries.entry(literal.column).or_default() += if literal.plain { a } else { -a };
        }
        self.implied(cut, &BTreeMap::new())
    }

    fn cases(&self, split: &[ColumnId], proofs: &[Combination]) -> Option<bool> {
        if proofs.len() != split.len() + 1 || !split.iter().all(|&column| self.is_binary(column)) {
            return None;
        }
        let mut fixed = BTreeMap::new();
        for (place, proof) in proofs.iter().enumerate() {
            if let Some(&column) = split.get(place) {
                fixed.insert(column, true);
            }
            if !self.implied(self.combined(proof)?, &fixed)? {
                return None;
            }
            if let Some(&column) = split.get(place) {
                fixed.insert(column, false);
            }
        }
        Some(true)
    }

    fn paths(
        &self,
        arcs: &[(usize, usize, ColumnId)],
        pairs: &[(usize, usize, Used)],
        cycles: &[(Vec<usize>, Combination)],
    ) -> Option<bool> {
        let literal = |place: usize| Literal { column: arcs[place].2, plain: true };
        let inside = |place: usize| place < arcs.len();
        if !arcs.iter().all(|arc| self.is_binary(arc.2)) || arcs.len() > 16 {
            return None;
        }
        let mut parted = BTreeSet::new();
        for &(a, b, used) in pairs {
            if !inside(a) || !inside(b) || !self.conflict(literal(a), literal(b), used) {
                return None;
            }
            parted.insert((a, b));
        }
        let mut broken: Vec<u32> = Vec::new();
        for (cycle, rows) in cycles {
            if !cycle.iter().all(|&place| inside(place)) {
                return None;
            }
            let fixed = cycle.iter().map(|&place| (arcs[place].2, true)).collect();
            if !self.breaks(self.combined(rows)?, &fixed)? {
                return None;
            }
            broken.push(cycle.iter().fold(0, |mask, &place| mask | 1 << place));
        }
        let places: BTreeMap<ColumnId, usize> =
            arcs.iter().enumerate().map(|(place, arc)| (arc.2, place)).collect();
        let mut values = vec![Number::ZERO; arcs.len()];
        for (column, a) in &self.row.entries {
            values[*places.get(column)?] = a.clone();
        }
        let most = self.row.upper.as_ref()?;
        let holds = |mask: u32| {
            let chosen = (0..arcs.len()).filter(|place| mask >> place & 1 == 1);
            let sum = chosen.fold(Number::ZERO, |sum, place| sum + &values[place]);
            sum <= *most
        };
        Some(allowed(arcs.len(), &parted, &broken).into_iter().all(holds))
    }
}

/// The sets of arcs without a pair that is parted and without a cycle that is broken.
fn allowed(count: usize, parted: &BTreeSet<(usize, usize)>, broken: &[u32]) -> Vec<u32> {
    let mut sets = vec![0_u32];
    for place in 0..count {
        let apart =
            |other: usize| parted.contains(&(place, other)) || parted.contains(&(other, place));
        let shut = (0..place).filter(|&other| apart(other)).fold(0_u32, |mask, o| mask | 1 << o);
        let longer: Vec<u32> = sets
            .iter()
            .filter(|&&set| set & shut == 0)
            .map(|set| set | 1 << place)
            .filter(|set| broken.iter().all(|cycle| set & cycle != *cycle))
            .collect();
        sets.extend(longer);
    }
    sets
}

/// Whether no point of the bounds meets these rows with some binaries as they are `fixed`.
pub(super) fn broken(
    combination: &[(usize, Number)],
    fixed: &BTreeMap<ColumnId, bool>,
    rows: &[Row],
    frame: &Frame,
) -> bool {
    let Some(row) = rows.first() else { return false };
    let check = Check { row, rows, frame };
    check.combined(combination).and_then(|sum| check.breaks(sum, fixed)) == Some(true)
}
