//! D₃ and D₄ of directed round trips over stops i₁ … i_k (Grötschel, Padberg 1985; Fischetti 1991):
//!
//! ```text
//! x_{i1 ik} + Σ_{h=2..k} x_{ih i(h−1)} + 2 Σ_{h=2..k−1} x_{i1 ih} + Σ_{h=3..k−1} Σ_{l=2..h−1} x_{il ih} ≤ k − 1
//! ```
//!
//! and the same with all arcs turned round. It holds where no stop is left or entered twice and no
//! cycle closes among these stops. That the model says so is looked for in its rows: the sums at the
//! stops; and for each cycle a member of a family over subsets, alone or with such sums, or the rows
//! that order the stops by labels (Miller, Tucker, Zemlin 1960). The derivation names them.

use std::collections::{BTreeMap, BTreeSet};

use model::{ColumnId, FamilyState, LabelId, Model, Number, Row, SubsetFamilyId, nearest_f64};

use super::aggregate::Frame;
use super::check::broken;
use super::derivation::{Combination, Derivation, Used};
use super::mir::{LEAST, efficacy};
use super::{Class, GeneralCut};

/// Stops at most, for D₃ and for D₄.
const MOST_STOPS: [usize; 2] = [120, 40];
/// Cuts of one first stop at most.
const MOST_CUTS: usize = 4;

/// An arc by the places of its ends.
type Arc = (usize, usize);

/// The round trips of a model: its stops, arcs and what says that they are trips.
#[derive(Debug, Clone)]
pub struct Trips {
    stops: Vec<LabelId>,
    columns: BTreeMap<Arc, ColumnId>,
    /// The rows of the sums that leave and enter each stop.
    leave: Vec<usize>,
    enter: Vec<usize>,
    /// Rows with labels by the arc that they are about, with the multiplier.
    order: BTreeMap<Arc, (usize, Number)>,
    /// What each cycle breaks, once it was looked for.
    known: BTreeMap<Vec<usize>, Option<Combination>>,
    /// The members of families that were put behind the rows, in order.
    members: Vec<(SubsetFamilyId, BTreeSet<LabelId>)>,
}

impl Trips {
    /// The trips over these stops and arcs, where each stop has its sums among the rows.
    /// `O(entries · log)`.
    #[must_use]
    pub fn new(
        stops: &[LabelId],
        arcs: &[(usize, usize, ColumnId)],
        rows: &[Row],
        frame: &Frame,
    ) -> Option<Self> {
        let columns: BTreeMap<Arc, ColumnId> = arcs.iter().map(|a| ((a.0, a.1), a.2)).collect();
        let of: BTreeMap<ColumnId, Arc> = arcs.iter().map(|a| (a.2, (a.0, a.1))).collect();
        let mut sums: BTreeMap<Vec<ColumnId>, usize> = BTreeMap::new();
        let mut order = BTreeMap::new();
        for (number, row) in rows.iter().enumerate() {
            if row.entries.iter().all(|(c, a)| of.contains_key(c) && Some(a) == row.upper.as_ref())
            {
                sums.entry(row.entries.iter().map(|(c, _)| *c).collect()).or_insert(number);
            } else if let Some((arc, y)) = ordering(row, &of, frame) {
                order.entry(arc).or_insert((number, y));
            }
        }
        let sum = |wanted: &dyn Fn(Arc) -> bool| {
            let own = of.iter().filter(|(_, arc)| wanted(**arc)).map(|(column, _)| *column);
            sums.get(&own.collect::<Vec<_>>()).copied()
        };
        let all = 0..stops.len();
        let leave: Option<Vec<usize>> = all.clone().map(|k| sum(&|arc| arc.0 == k)).collect();
        let enter: Option<Vec<usize>> = all.map(|k| sum(&|arc| arc.1 == k)).collect();
        let (leave, enter, known) = (leave?, enter?, BTreeMap::new());
        let (stops, members) = (stops.to_vec(), Vec::new());
        Some(Self { stops, columns, leave, enter, order, known, members })
    }

    /// How many stops there are.
    #[must_use]
    pub fn len(&self) -> usize {
        self.stops.len()
    }

    /// The members of families that were put behind the rows, in order.
    #[must_use]
    pub fn members(&self) -> &[(SubsetFamilyId, BTreeSet<LabelId>)] {
        &self.members
    }

    /// Whether there are none.
    #[must_use]
    pub fn is_empty(&self) -> bool {
        self.stops.is_empty()
    }

    /// The violated cuts whose i₁ is this stop. Members of families that they rest on are put behind
    /// the rows. `O(stops³)` at most.
    pub fn cuts(
        &mut self,
        first: usize,
        (model, frame): (&Model, &Frame),
        rows: &mut Vec<Row>,
        x: &[f64],
    ) -> Vec<GeneralCut> {
        let mut found = Vec::new();
        for (k, most) in [3, 4].into_iter().zip(MOST_STOPS) {
            if self.len() > most || self.len() <= k {
                continue;
            }
            for turned in [false, true] {
                found.extend(self.violated(first, k, turned, x));
            }
        }
        found.sort_by(|a, b| b.0.total_cmp(&a.0).then_with(|| a.1.cmp(&b.1)));
        found.truncate(MOST_CUTS);
        let cut = |(_, stops, turned): (f64, Vec<usize>, bool)| {
            self.cut(&stops, turned, (model, frame), (rows, x))
        };
        found.into_iter().filter_map(cut).collect()
    }

    fn violated(
        &self,
        first: usize,
        k: usize,
        turned: bool,
        x: &[f64],
    ) -> Vec<(f64, Vec<usize>, bool)> {
        let pattern = pattern(k);
        let n = self.len();
        let value = |a: usize, b: usize| {
            let column = self.columns.get(&arc((a, b), turned));
            column.map_or(0.0, |column| x[column.index()])
        };
        // every stop has a used arc of the cut with one before it
        let mut lists = vec![(1.0, vec![first])];
        for place in 1..k {
            let own = pattern.iter().filter(|term| term.0.max(term.1) == place);
            let own: Vec<_> = own.copied().collect();
            let mut longer = Vec::new();
            for (sum, list) in lists {
                for stop in (0..n).filter(|stop| !list.contains(stop)) {
                    let at = |place: usize| list.get(place).copied().unwrap_or(stop);
                    let gain = own.iter().fold(0.0, |gain, &(a, b, count)| {
                        gain + f64::from(count) * value(at(a), at(b))
                    });
                    if gain > 1e-9 {
                        let list = list.iter().copied().chain([stop]).collect::<Vec<_>>();
                        longer.push((sum + gain - 1.0, list));
                    }
                }
            }
            lists = longer;
        }
        let scored = lists.into_iter().map(|(over, list)| (over - 1.0, list, turned));
        scored.filter(|(over, ..)| *over > LEAST).collect()
    }

    fn cut(
        &mut self,
        stops: &[usize],
        turned: bool,
        (model, frame): (&Model, &Frame),
        (rows, x): (&mut Vec<Row>, &[f64]),
    ) -> Option<GeneralCut> {
        let here = |arc: &Arc| stops.contains(&arc.0) && stops.contains(&arc.1);
        let arcs: Vec<(usize, usize, ColumnId)> = self
            .columns
            .iter()
            .filter(|(arc, _)| here(arc))
            .map(|(arc, column)| (arc.0, arc.1, *column))
            .collect();
        let mut cycles = Vec::new();
        for cycle in cycles_of(stops) {
            let next = cycle.iter().skip(1).chain(cycle.first());
            let place = |(a, b): (&usize, &usize)| arcs.iter().position(|r| (r.0, r.1) == (*a, *b));
            let Some(places) = cycle.iter().zip(next).map(place).collect() else { continue };
            if !self.known.contains_key(&cycle) {
                let found = self.breaking(&cycle, (model, frame), rows);
                self.known.insert(cycle.clone(), found);
            }
            cycles.push((places, self.known.get(&cycle)?.clone()?));
        }
        let mut pairs = Vec::new();
        for (b, two) in arcs.iter().enumerate() {
            for (a, one) in arcs[..b].iter().enumerate() {
                let tail = (one.0 == two.0).then(|| self.leave[one.0]);
                let row = tail.or_else(|| (one.1 == two.1).then(|| self.enter[one.1]));
                pairs.extend(row.map(|row| (a, b, Used { row, upper: true })));
            }
        }
        let mut entries: Vec<(ColumnId, Number)> = Vec::new();
        for (a, b, count) in pattern(stops.len()) {
            let column = self.columns.get(&arc((stops[a], stops[b]), turned));
            entries.extend(column.map(|column| (*column, Number::from(count))));
        }
        entries.sort_by_key(|(column, _)| *column);
        let row = Row { entries, lower: None, upper: Some(Number::from(stops.len() - 1)) };
        let efficacy = efficacy(&row, x);
        let derivation = Derivation::Paths { arcs, pairs, cycles };
        let cut = GeneralCut { class: Class::RoundTrip, row, efficacy, derivation };
        (efficacy > LEAST).then_some(cut)
    }

    /// Rows that a cycle breaks.
    fn breaking(
        &mut self,
        cycle: &[usize],
        (model, frame): (&Model, &Frame),
        rows: &mut Vec<Row>,
    ) -> Option<Combination> {
        let next = cycle.iter().skip(1).chain(cycle.first());
        let arcs: Option<Vec<Arc>> = cycle
            .iter()
            .zip(next)
            .map(|(&a, &b)| self.columns.contains_key(&(a, b)).then_some((a, b)))
            .collect();
        let arcs = arcs?;
        let fixed: BTreeMap<ColumnId, bool> =
            arcs.iter().filter_map(|arc| Some((*self.columns.get(arc)?, true))).collect();
        let order: Option<Combination> =
            arcs.iter().map(|arc| self.order.get(arc).cloned()).collect();
        if let Some(order) = order.filter(|order| broken(order, &fixed, rows, frame)) {
            return Some(order);
        }
        let inside: BTreeSet<usize> = cycle.iter().copied().collect();
        let outside: BTreeSet<usize> = (0..self.len()).filter(|k| !inside.contains(k)).collect();
        for set in [&inside, &outside] {
            let labels: BTreeSet<LabelId> = set.iter().map(|&k| self.stops[k]).collect();
            for (id, family) in model.subset_families().iter().enumerate() {
                let out = model.families()[family.family.index()].state == FamilyState::Out;
                let fits = !out && labels.iter().all(|label| family.ground.contains(label));
                if !fits || !family.admits(&labels) {
                    continue;
                }
                let member = family.member(&labels);
                let y = Number::from(if member.upper.is_some() { 1 } else { -1 });
                let number = rows.iter().position(|row| *row == member).unwrap_or(rows.len());
                if number == rows.len() {
                    self.members.push((SubsetFamilyId::from_index(id), labels.clone()));
                    rows.push(member);
                }
                let tries = self.with_sums(&(number, y), &inside, &outside);
                if let Some(found) = tries.into_iter().find(|c| broken(c, &fixed, rows, frame)) {
                    return Some(found);
                }
            }
        }
        None
    }

    /// A member alone and with the sums that turn a cut into what lies inside.
    fn with_sums(
        &self,
        member: &(usize, Number),
        inside: &BTreeSet<usize>,
        outside: &BTreeSet<usize>,
    ) -> [Combination; 4] {
        let sums = |of: &[usize], set: &BTreeSet<usize>, y: Number| -> Combination {
            set.iter().map(|&k| (of[k], y.clone())).collect()
        };
        let with = |mut sums: Combination| {
            sums.push(member.clone());
            sums
        };
        let mut all = sums(&self.enter, inside, Number::ONE);
        all.extend(sums(&self.leave, outside, -Number::ONE));
        [
            with(Vec::new()),
            with(sums(&self.leave, inside, Number::ONE)),
            with(sums(&self.enter, inside, Number::ONE)),
            with(all),
        ]
    }
}

fn arc((a, b): Arc, turned: bool) -> Arc {
    if turned { (b, a) } else { (a, b) }
}

/// The arcs of D_k by places in its list of stops, with their coefficients.
fn pattern(k: usize) -> Vec<(usize, usize, u8)> {
    let mut terms = vec![(0, k - 1, 1)];
    terms.extend((1..k).map(|h| (h, h - 1, 1)));
    terms.extend((1..k - 1).map(|h| (0, h, 2)));
    terms.extend((2..k - 1).flat_map(|h| (1..h).map(move |l| (l, h, 1))));
    terms
}

/// The directed cycles over some of the stops, each from its least stop on.
fn cycles_of(stops: &[usize]) -> Vec<Vec<usize>> {
    let mut cycles: Vec<Vec<usize>> = Vec::new();
    let mut paths: Vec<Vec<usize>> = stops.iter().map(|&stop| vec![stop]).collect();
    while let Some(path) = paths.pop() {
        for &stop in stops.iter().filter(|&&stop| stop > path[0] && !path.contains(&stop)) {
            let longer: Vec<usize> = path.iter().copied().chain([stop]).collect();
            cycles.push(longer.clone());
            paths.push(longer);
        }
    }
    cycles
}

/// The arc that a row with labels is about: the binary with the largest coefficient, of a row with two
/// columns that are not binary; and the multiplier that gives these ±1.
fn ordering(row: &Row, of: &BTreeMap<ColumnId, Arc>, frame: &Frame) -> Option<(Arc, Number)> {
    let labels: Vec<&Number> =
        row.entries.iter().filter(|(c, _)| !frame.is_binary(*c)).map(|(_, a)| a).collect();
    let &[a, b] = labels.as_slice() else { return None };
    let sign = if row.upper.is_some() { 1.0 } else { -1.0 };
    let arcs = row.entries.iter().filter_map(|(c, a)| Some((sign * nearest_f64(a), *of.get(c)?)));
    let (_, arc) = arcs.reduce(|one, other| if other.0 > one.0 { other } else { one })?;
    let size = if *a > Number::ZERO { a.clone() } else { -a.clone() };
    let opposite = (a + b).is_zero();
    let y = Number::ONE / size;
    opposite.then_some((arc, if sign > 0.0 { y } else { -y }))
}
