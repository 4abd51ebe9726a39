//! Dispatch rules for work on machines, where a model has the structure that they are for.
//!
//! *Times* are continuous columns; a row `t_b − t_a ≥ d` says that b comes after a; a *choice* is a
//! binary that turns such a row on (by a big number), one way or the other. Active schedules are made
//! by Giffler, Thompson 1960 (Operations Research 8): of the steps that may come next the one that
//! could end first takes its machine, and of those that conflict with it there one is chosen by a
//! rule. The rules are weight over time (Smith 1956, Naval Research Logistics Quarterly 3), shortest
//! time, most work remaining and first come; the schedule that costs least is suggested.

use std::collections::BTreeMap;

use model::{ColumnId, Model, RowId};

/// Times and choices at most: a schedule costs their product.
const MOST_WORK: usize = 20_000_000;

/// b comes at least `gap` after a.
#[derive(Debug, Clone, Copy)]
struct After {
    a: usize,
    b: usize,
    gap: f64,
}

/// A row that a binary turns on at one of its values.
#[derive(Debug, Clone, Copy)]
struct Choice {
    column: ColumnId,
    on_at_one: bool,
    after: After,
}

/// What was recognised.
#[derive(Debug, Default)]
struct Shop {
    times: BTreeMap<ColumnId, usize>,
    release: Vec<f64>,
    cost: Vec<f64>,
    always: Vec<After>,
    choices: Vec<Choice>,
    /// Binaries of which exactly one is 1.
    either: BTreeMap<ColumnId, ColumnId>,
}

/// How the next step is chosen among those that want the same machine: the least comes first.
#[derive(Debug, Clone, Copy)]
enum Rule {
    WeightOverTime,
    ShortestTime,
    MostWork,
    FirstCome,
}

/// The binaries of the best schedule that the rules make; `None` where the model has none.
/// `O(rules · steps · (steps + rows))`.
pub(crate) fn dispatched(model: &Model) -> Option<Vec<(ColumnId, f64)>> {
    let shop = Shop::read(model);
    let steps = shop.release.len();
    let size = steps.saturating_mul(steps + shop.always.len() + shop.choices.len());
    if shop.choices.is_empty() || size > MOST_WORK {
        return None;
    }
    let mut best: Option<(f64, Vec<usize>)> = None;
    for ends in [true, false] {
        for rule in [Rule::WeightOverTime, Rule::ShortestTime, Rule::MostWork, Rule::FirstCome] {
            let Some((cost, place)) = shop.schedule(rule, ends) else { continue };
            if best.as_ref().is_none_or(|(least, _)| cost < *least) {
                best = Some((cost, place));
            }
        }
    }
    let (_, place) = best?;
    let mut values: BTreeMap<ColumnId, f64> = BTreeMap::new();
    for choice in &shop.choices {
        let on = place[choice.after.a] < place[choice.after.b];
        values.insert(choice.column, f64::from(u8::from(on == choice.on_at_one)));
    }
    Some(values.into_iter().collect())
}

impl Shop {
    fn read(model: &Model) -> Self {
        let mut shop = Self::default();
        for row in (0..model.row_count()).map(RowId::from_index) {
            shop.take(model, row);
        }
        if !shop.is_paired() {
            shop.choices.clear();
        }
        shop
    }

    /// Whether each row that a binary turns on has one that holds otherwise and turns the pair round:
    /// rows that number the stops of a round trip have none.
    fn is_paired(&self) -> bool {
        let of = |choice: &Choice| (choice.after.a, choice.after.b);
        let mut known: BTreeMap<(usize, usize), Vec<(ColumnId, bool)>> = BTreeMap::new();
        for choice in &self.choices {
            known.entry(of(choice)).or_default().push((choice.column, choice.on_at_one));
        }
        self.choices.iter().all(|choice| {
            let (a, b) = of(choice);
            let other = self.either.get(&choice.column);
            let turned = known.get(&(b, a)).map_or(&[][..], Vec::as_slice);
            turned.contains(&(choice.column, !choice.on_at_one))
                || other.is_some_and(|&other| turned.contains(&(other, choice.on_at_one)))
        })
    }

    /// Takes in a row `t ≥ r`, `t_b − t_a ≥ d` or `t_b − t_a + c y ≥ d`, either side of it.
    fn take(&mut self, model: &Model, row: RowId) {
        let entries = model.row_entries(row);
        if entries.len() > 3 {
            return;
        }
        let (lower, upper) = model.row_sides(row);
        if let &[(x, a), (y, b)] = entries
            && lower == upper
            && [Some(a), Some(b)] == [upper, upper]
            && model.is_binary(x)
            && model.is_binary(y)
        {
            self.either.extend([(x, y), (y, x)]);
            return;
        }
        let float = |id: Option<model::NumberId>| id.map(|id| model.numbers().float(id));
        for (side, sign) in [(float(lower), 1.0), (float(upper), -1.0)] {
            let Some(side) = side.map(|side| side * sign) else { continue };
            let mut times = Vec::new();
            let mut binary = None;
            for &(column, a) in entries {
                let a = sign * model.numbers().float(a);
                if !model.columns()[column.index()].integer {
                    times.push((column, a));
                } else if model.is_binary(column) && binary.is_none() {
                    binary = Some((column, a));
                } else {
                    return;
                }
            }
            self.note(model, &times, binary, side);
        }
    }

    fn note(
        &mut self,
        model: &Model,
        times: &[(ColumnId, f64)],
        binary: Option<(ColumnId, f64)>,
        side: f64,
    ) {
        match (times, binary) {
            (&[(t, a)], None) if a > 0.0 => {
                let t = self.time(model, t);
                let least = side / a;
                self.release[t] = if least > self.release[t] { least } else { self.release[t] };
            }
            (&[one, other], _) => {
                let (b, a) = if one.1 > 0.0 { (one, other) } else { (other, one) };
                if b.1 != 1.0 || a.1 != -1.0 {
                    return;
                }
                let (a, b) = (self.time(model, a.0), self.time(model, b.0));
                match binary {
                    None => self.always.push(After { a, b, gap: side }),
                    // With y = 1 the gap is side − c, with y = 0 it is side: the larger counts.
                    Some((column, c)) => {
                        let on_at_one = c < 0.0;
                        let gap = if on_at_one { side - c } else { side };
                        self.choices.push(Choice { column, on_at_one, after: After { a, b, gap } });
                    }
                }
            }
            _ => {}
        }
    }

    fn time(&mut self, model: &Model, column: ColumnId) -> usize {
        let next = self.release.len();
        let place = *self.times.entry(column).or_insert(next);
        if place == next {
            let given = &model.columns()[column.index()];
            let least = given.lower.map_or(0.0, |id| model.numbers().float(id));
            self.release.push(least);
            self.cost.push(model.numbers().float(given.cost));
        }
        place
    }

    /// How long each step takes: the gap that its choices leave before it, where times are `ends`,
    /// or behind it.
    fn lengths(&self, ends: bool) -> Vec<f64> {
        let mut lengths = vec![0.0; self.release.len()];
        for Choice { after: After { a, b, gap }, .. } in &self.choices {
            let own: &mut f64 = &mut lengths[if ends { *b } else { *a }];
            *own = if *gap > *own { *gap } else { *own };
        }
        lengths
    }

    /// The longest way from each step to an end; `None` where the rows close a circle.
    fn tails(&self, lengths: &[f64]) -> Option<Vec<f64>> {
        let mut tails = lengths.to_vec();
        for _ in 0..=tails.len() {
            let mut changed = false;
            for &After { a, b, gap } in &self.always {
                if tails[b] + gap > tails[a] + 1e-9 {
                    tails[a] = tails[b] + gap;
                    changed = true;
                }
            }
            if !changed {
                return Some(tails);
            }
        }
        None
    }

    /// What a schedule by a rule costs, and the place of each step in it.
    fn schedule(&self, rule: Rule, ends: bool) -> Option<(f64, Vec<usize>)> {
        let steps = self.release.len();
        let lengths = self.lengths(ends);
        let tails = self.tails(&lengths)?;
        let mut early = self.release.clone();
        let mut waits = vec![0_usize; steps];
        self.always.iter().for_each(|after| waits[after.b] += 1);
        let mut place = vec![usize::MAX; steps];
        let mut cost = 0.0;
        for turn in 0..steps {
            let next = self.next(rule, (&early, &lengths, &tails), (&waits, &place), ends)?;
            place[next] = turn;
            let at = early[next];
            cost += self.cost[next] * at;
            let choices = self.choices.iter().map(|choice| choice.after);
            let follow = choices.filter(|after| place[after.b] == usize::MAX);
            for After { a, b, gap } in self.always.iter().copied().chain(follow) {
                if a == next {
                    early[b] = if at + gap > early[b] { at + gap } else { early[b] };
                }
            }
            for after in self.always.iter().filter(|after| after.a == next) {
                waits[after.b] -= 1;
            }
        }
        Some((cost, place))
    }

    /// The step that comes next (Giffler, Thompson 1960).
    fn next(
        &self,
        rule: Rule,
        (early, lengths, tails): (&[f64], &[f64], &[f64]),
        (waits, place): (&[usize], &[usize]),
        ends: bool,
    ) -> Option<usize> {
        let may: Vec<usize> =
            (0..early.len()).filter(|&t| place[t] == usize::MAX && waits[t] == 0).collect();
        let end = |t: usize| if ends { early[t] } else { early[t] + lengths[t] };
        let start = |t: usize| end(t) - lengths[t];
        let first = may.iter().copied().min_by(|&a, &b| end(a).total_cmp(&end(b)))?;
        let shares = |t: usize| {
            t == first
                || self.choices.iter().any(|choice| {
                    let After { a, b, .. } = choice.after;
                    (a, b) == (t, first) || (a, b) == (first, t)
                })
        };
        let rival = |t: &usize| start(*t) < end(first) || *t == first;
        let rank = |t: usize| match rule {
            Rule::WeightOverTime => {
                -self.cost[t] / if lengths[t] > 0.0 { lengths[t] } else { 1e-9 }
            }
            Rule::ShortestTime => lengths[t],
            Rule::MostWork => -tails[t],
            Rule::FirstCome => start(t),
        };
        let conflict = may.iter().copied().filter(rival).filter(|&t| shares(t));
        conflict.min_by(|&a, &b| rank(a).total_cmp(&rank(b)))
    }
}
