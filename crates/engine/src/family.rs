//! Plans by textbook methods, where a model has the structure that they are for. What they give are
//! values of some columns: the search solves for the others and checks the whole.
//!
//! The structure is read from the rows: *places* are binaries that rows `Σ a x ≤ b y` open for other
//! columns; *needs* are rows `Σ x = 1` (or ≥ 1) over those columns. Where serving costs something
//! this is location: places are opened one by one while that saves, then exchanged (Kuehn, Hamburger
//! 1963, Management Science 9; Teitz, Bart 1968, Operations Research 16). Where only places cost it
//! is packing: first fit, largest first (Johnson 1974, Journal of Computer and System Sciences 8).
//! Where the columns that are opened are what balances `s + x − s' = d` take in, it is lot sizing:
//! the dynamic program of Wagner, Whitin 1958 (Management Science 5), one item at a time. Work on
//! machines is [`crate::dispatch`]'s.

use std::collections::{BTreeMap, BTreeSet};

use model::{ColumnId, Model, RowId, Sense};
use tree::{SuggestedBy, Suggestion};

use crate::dispatch::dispatched;

/// Sums that location and packing look at, at most.
const MOST_WORK: usize = 20_000_000;

/// What a place opens.
#[derive(Debug, Default)]
struct Place {
    room: f64,
    opens: BTreeMap<ColumnId, f64>,
}

/// The structure of a model.
#[derive(Debug, Default)]
struct Shape {
    places: BTreeMap<ColumnId, Place>,
    /// The place of each column that is opened.
    place_of: BTreeMap<ColumnId, ColumnId>,
    /// Columns of which so many are to be 1 in all.
    needs: Vec<(Vec<ColumnId>, f64)>,
    /// How many places are open, where a row says so.
    count: Option<usize>,
}

/// What the textbook methods suggest for a model that is minimised. `O(non-zeros)` to read it.
pub(crate) fn suggestions(model: &Model) -> Vec<Suggestion> {
    if model.sense() != Sense::Minimise {
        return Vec::new();
    }
    let shape = Shape::read(model);
    let placed = !shape.places.is_empty();
    let all = [
        placed
            .then(|| shape.location(model))
            .flatten()
            .map(|v| ("greedy location with interchange", v)),
        placed.then(|| shape.packing(model)).flatten().map(|v| ("first fit, largest first", v)),
        placed.then(|| shape.lots(model)).flatten().map(|v| ("Wagner-Whitin", v)),
        dispatched(model).map(|v| ("dispatch rules", v)),
    ];
    let of = |(name, values)| Suggestion { origin: SuggestedBy::Heuristic(name), values };
    all.into_iter().flatten().map(of).collect()
}

impl Shape {
    fn read(model: &Model) -> Self {
        let mut shape = Self::default();
        for row in (0..model.row_count()).map(RowId::from_index) {
            shape.link(model, row);
        }
        for row in (0..model.row_count()).map(RowId::from_index) {
            shape.need(model, row);
        }
        shape
    }

    /// Takes in a row `Σ a x − b y ≤ 0`, a and b over 0, y binary.
    fn link(&mut self, model: &Model, row: RowId) {
        let (lower, upper) = float_sides(model, row);
        let sign = match (lower, upper) {
            (_, upper) if upper == 0.0 && lower != 0.0 => 1.0,
            (lower, _) if lower == 0.0 && upper != 0.0 => -1.0,
            _ => return,
        };
        let entries = entries(model, row, sign);
        let mut opening = entries.iter().filter(|entry| entry.1 < 0.0);
        let (Some(&(y, b)), None) = (opening.next(), opening.next()) else { return };
        if !model.is_binary(y) || entries.len() < 2 {
            return;
        }
        // Of a row for all and rows for each, that for all says what there is room for.
        let place = self.places.entry(y).or_default();
        let for_all = entries.len() > 2;
        if for_all || place.opens.is_empty() {
            place.room = -b;
        }
        for (x, a) in entries.into_iter().filter(|entry| entry.1 > 0.0) {
            let new = self.place_of.insert(x, y).is_none();
            if for_all || new {
                place.opens.insert(x, a);
            }
        }
    }

    /// Takes in a row over columns that are opened, or over the places.
    fn need(&mut self, model: &Model, row: RowId) {
        let entries = entries(model, row, 1.0);
        if entries.iter().any(|&(_, a)| a != 1.0) || entries.is_empty() {
            return;
        }
        let (lower, upper) = float_sides(model, row);
        let whole = lower >= 1.0 && lower == lower.round();
        if whole && entries.iter().all(|(x, _)| self.place_of.contains_key(x)) {
            self.needs.push((entries.into_iter().map(|(x, _)| x).collect(), lower));
        } else if lower == upper && entries.len() == self.places.len() {
            let all = entries.iter().all(|(y, _)| self.places.contains_key(y));
            self.count = (0..=entries.len()).find(|&n| all && n as f64 == upper).or(self.count);
        }
    }

    /// The cheapest way found to serve every need from open places.
    fn location(&self, model: &Model) -> Option<Vec<(ColumnId, f64)>> {
        let serves = self.needs.iter().flat_map(|need| &need.0).any(|&x| cost(model, x) != 0.0);
        let single = self.needs.iter().all(|need| need.1 == 1.0);
        if self.needs.is_empty() || !serves || !single {
            return None;
        }
        let places: Vec<ColumnId> = self.places.keys().copied().collect();
        let number: BTreeMap<ColumnId, usize> =
            places.iter().enumerate().map(|(k, &y)| (y, k)).collect();
        let mut serving = vec![f64::INFINITY; self.needs.len() * places.len()];
        for (need, (columns, _)) in self.needs.iter().enumerate() {
            for &x in columns {
                let at = need * places.len() + number[&self.place_of[&x]];
                let c = cost(model, x);
                serving[at] = if c < serving[at] { c } else { serving[at] };
            }
        }
        let fixed: Vec<f64> = places.iter().map(|&y| cost(model, y)).collect();
        let costs = Costs { fixed, serving };
        let open = costs.opened(self.count);
        Some(places.iter().zip(open).map(|(&y, open)| (y, f64::from(u8::from(open)))).collect())
    }

    /// Each need into the first place with room, largest first; places in their order.
    fn packing(&self, model: &Model) -> Option<Vec<(ColumnId, f64)>> {
        let free = self.needs.iter().flat_map(|need| &need.0).all(|&x| cost(model, x) == 0.0);
        if self.needs.is_empty() || !free {
            return None;
        }
        let size: BTreeMap<ColumnId, f64> = self
            .places
            .values()
            .flat_map(|place| place.opens.iter().map(|(&x, &a)| (x, a)))
            .collect();
        let largest = |need: &[ColumnId]| {
            need.iter().fold(0.0, |most: f64, x| if size[x] > most { size[x] } else { most })
        };
        let mut order: Vec<usize> = (0..self.needs.len()).collect();
        order.sort_by(|&a, &b| {
            largest(&self.needs[b].0).total_cmp(&largest(&self.needs[a].0)).then(a.cmp(&b))
        });
        let mut room: BTreeMap<ColumnId, f64> =
            self.places.iter().map(|(&y, place)| (y, place.room)).collect();
        let mut values: BTreeMap<ColumnId, f64> =
            size.keys().chain(self.places.keys()).map(|&column| (column, 0.0)).collect();
        for need in order {
            let (columns, pieces) = &self.needs[need];
            let mut left = *pieces;
            while left > 0.0 {
                let fits = |x: &&ColumnId| size[*x] <= room[&self.place_of[*x]];
                let &x = columns.iter().find(fits)?;
                let y = self.place_of[&x];
                *room.get_mut(&y)? -= if size[&x] > 0.0 { size[&x] } else { return None };
                *values.get_mut(&x)? += 1.0;
                values.insert(y, 1.0);
                left -= 1.0;
            }
        }
        Some(values.into_iter().collect())
    }

    /// Where to set up for each chain of balances.
    fn lots(&self, model: &Model) -> Option<Vec<(ColumnId, f64)>> {
        let mut setups = Vec::new();
        for chain in self.chains(model) {
            let open = wagner_whitin(&chain);
            setups.extend(
                chain.iter().zip(open).map(|(p, open)| (p.setup, f64::from(u8::from(open)))),
            );
        }
        (!setups.is_empty()).then_some(setups)
    }

    /// The balances `s + x − s' = d` in which the stock s' of one is the s of the next.
    fn chains(&self, model: &Model) -> Vec<Vec<Period>> {
        let mut all_periods: Vec<(Option<ColumnId>, Period)> = Vec::new();
        for row in (0..model.row_count()).map(RowId::from_index) {
            let (lower, upper) = float_sides(model, row);
            if lower != upper {
                continue;
            }
            let sign = if upper < 0.0 { -1.0 } else { 1.0 };
            let all = entries(model, row, sign);
            let made = all.iter().find(|(x, a)| *a == 1.0 && self.place_of.contains_key(x));
            let stock = |sign: f64| {
                let mut found =
                    all.iter().filter(|(s, a)| *a == sign && !self.place_of.contains_key(s));
                found.next().map(|entry| entry.0).filter(|_| found.next().is_none())
            };
            let Some(&(x, _)) = made.filter(|_| all.len() <= 3) else { continue };
            let (before, after) = (stock(1.0), stock(-1.0));
            let known = 1 + usize::from(before.is_some()) + usize::from(after.is_some());
            if known != all.len() {
                continue;
            }
            let setup = self.place_of[&x];
            let period = Period {
                setup,
                after,
                demand: sign * upper,
                fixed: cost(model, setup),
                each: cost(model, x),
                hold: after.map_or(0.0, |s| cost(model, s)),
            };
            all_periods.push((before, period));
        }
        let left: BTreeSet<ColumnId> = all_periods.iter().filter_map(|(_, p)| p.after).collect();
        let follows = |before: &Option<ColumnId>| before.is_some_and(|s| left.contains(&s));
        let (later, first): (Vec<_>, Vec<_>) =
            all_periods.into_iter().partition(|(before, _)| follows(before));
        let by_incoming: BTreeMap<ColumnId, Period> =
            later.into_iter().filter_map(|(before, period)| Some((before?, period))).collect();
        let follow = |period: Period| {
            let mut chain = vec![period];
            while let Some(next) =
                chain.last().and_then(|p| p.after).and_then(|s| by_incoming.get(&s))
            {
                if chain.len() > by_incoming.len() {
                    break;
                }
                chain.push(next.clone());
            }
            chain
        };
        first
            .into_iter()
            .map(|(_, period)| follow(period))
            .filter(|chain| chain.len() > 1)
            .collect()
    }
}

/// One period of an item.
#[derive(Debug, Clone)]
struct Period {
    setup: ColumnId,
    /// The stock that it leaves.
    after: Option<ColumnId>,
    demand: f64,
    fixed: f64,
    each: f64,
    hold: f64,
}

/// In which periods to set up: the cheapest way to cut the periods into runs, each made in its
/// first. `O(periods²)`.
fn wagner_whitin(chain: &[Period]) -> Vec<bool> {
    let n = chain.len();
    let mut best = vec![(0.0, 0); n + 1];
    for end in 1..=n {
        best[end] = (f64::INFINITY, 0);
        // The run grows towards earlier periods: what later ones need is held through each.
        let (mut needed, mut holding) = (0.0, 0.0);
        for start in (0..end).rev() {
            let first = &chain[start];
            holding += first.hold * needed;
            needed += first.demand;
            let made = if needed > 0.0 { first.fixed + first.each * needed } else { 0.0 };
            let sum = best[start].0 + holding + made;
            if sum < best[end].0 {
                best[end] = (sum, start);
            }
        }
    }
    let mut open = vec![false; n];
    let mut end = n;
    while end > 0 {
        let start = best[end].1;
        open[start] = chain[start..end].iter().any(|p| p.demand > 0.0);
        end = start;
    }
    open
}

/// What opening and serving cost; a row of `serving` a need.
struct Costs {
    fixed: Vec<f64>,
    serving: Vec<f64>,
}

impl Costs {
    fn total(&self, open: &[bool]) -> f64 {
        let chosen = |of: &[f64]| -> f64 {
            let least = of.iter().zip(open).filter(|(_, open)| **open);
            least.fold(f64::INFINITY, |least, (&c, _)| if c < least { c } else { least })
        };
        let fixed = self.fixed.iter().zip(open).filter(|(_, open)| **open);
        fixed.map(|(f, _)| f).sum::<f64>()
            + self.serving.chunks(self.fixed.len()).map(chosen).sum::<f64>()
    }

    /// Opens while that saves (up to `count`, where there is one), then exchanges while that does.
    fn opened(&self, count: Option<usize>) -> Vec<bool> {
        let places = self.fixed.len();
        let mut open = vec![false; places];
        let mut now = f64::INFINITY;
        let mut left = MOST_WORK / (self.serving.len() + 1);
        loop {
            let have = open.iter().filter(|open| **open).count();
            let may_open = count.is_none_or(|count| have < count);
            let must = count.is_some_and(|count| have < count);
            let mut best: Option<(f64, Vec<bool>)> = None;
            for place in 0..places {
                let away = (0..places).filter(|&other| open[place] && !open[other] && !must);
                let mut moves: Vec<Option<usize>> = away.map(Some).collect();
                if (!open[place] && may_open) || (open[place] && count.is_none()) {
                    moves.push(None);
                }
                for other in moves {
                    left = left.saturating_sub(1);
                    let mut next = open.clone();
                    next[place] = !open[place];
                    if let Some(other) = other {
                        next[other] = true;
                    }
                    let total = self.total(&next);
                    if best.as_ref().is_none_or(|(least, _)| total < *least) {
                        best = Some((total, next));
                    }
                }
            }
            match best {
                Some((total, next)) if (total < now || must) && left > 0 => {
                    (now, open) = (total, next);
                }
                _ => return open,
            }
        }
    }
}

fn entries(model: &Model, row: RowId, sign: f64) -> Vec<(ColumnId, f64)> {
    let all = model.row_entries(row).iter();
    all.map(|&(column, a)| (column, sign * model.numbers().float(a))).collect()
}

fn float_sides(model: &Model, row: RowId) -> (f64, f64) {
    let (lower, upper) = model.row_sides(row);
    let float = |id: Option<model::NumberId>, none| id.map_or(none, |n| model.numbers().float(n));
    (float(lower, f64::NEG_INFINITY), float(upper, f64::INFINITY))
}

fn cost(model: &Model, column: ColumnId) -> f64 {
    model.numbers().float(model.columns()[column.index()].cost)
}
