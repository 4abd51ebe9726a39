//! The separator of one family over subsets.

use std::cmp::Ordering;
use std::collections::BTreeSet;

use model::{LabelId, Model, Number, Row, SubsetFamily, SubsetFamilyId, nearest_f64};

use crate::compiled::Compiled;
use crate::conditions::Conditions;
use crate::method::{Choice, Exactness, Method, Oracle, choose};
use crate::quadratic::Quadratic;
use crate::search::{Search, fractional};
use crate::{list, member, tolerance};

/// The most members that a round hands out.
const MOST_MEMBERS: usize = 100;

/// Whether a slice finished its round.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Progress {
    /// There is more to do.
    Working,
    /// The round is done.
    Finished,
}

/// A violated member.
#[derive(Debug, Clone, PartialEq)]
pub struct Violated {
    /// The family.
    pub family: SubsetFamilyId,
    /// The set, which the family admits.
    pub subset: BTreeSet<LabelId>,
    /// The member, as the family writes it.
    pub row: Row,
    /// By how much `x` violates it, in the units of the row; over 10⁻⁶ in a round.
    pub violation: f64,
}

/// Whether a point meets every member of a family.
#[derive(Debug, Clone, PartialEq)]
pub enum Membership {
    /// It does.
    Satisfied,
    /// It violates this one.
    Violated(Violated),
    /// No method can tell.
    Unknown,
}

/// Separates one family over subsets of a model.
#[derive(Debug, Clone)]
pub struct Separator {
    id: SubsetFamilyId,
    family: SubsetFamily,
    compiled: Compiled,
    conditions: Conditions,
    method: Method,
    exactness: Option<Exactness>,
    description: String,
    x: Vec<f64>,
    work: Work,
    ticks: u64,
}

/// Where a round stands.
#[derive(Debug, Clone)]
enum Work {
    Idle,
    Cuts(Box<Search>),
    /// The next listed member, and those found violated, by number.
    List(usize, Vec<(usize, f64)>),
}

impl Separator {
    /// Recognises the shape of a family and prepares its method. `O(terms + non-zeros)`
    /// exact operations; where the members are listed, at most 2^19 steps.
    #[must_use]
    pub fn new(model: &Model, id: SubsetFamilyId) -> Self {
        let family = model.subset_family(id).clone();
        let compiled = Compiled::new(model, &family);
        let conditions = Conditions::new(&family);
        let Choice { method, exactness, description } =
            choose(model, &family, &compiled, &conditions);
        Self {
            id,
            family,
            compiled,
            conditions,
            method,
            exactness,
            description,
            x: Vec::new(),
            work: Work::Idle,
            ticks: 0,
        }
    }

    /// The method in words, e.g. "exact minimum cut from Ash to each other element".
    #[must_use]
    pub fn description(&self) -> &str {
        &self.description
    }

    /// How the bound of the family is labelled; `None` when there is no method. An exact method
    /// with a limit (cliques) turns heuristic when a round that found nothing reached it.
    #[must_use]
    pub fn exactness(&self) -> Option<Exactness> {
        self.exactness
    }

    /// Begins a round at `x`, one value a column. Without a method the round is empty.
    pub fn start(&mut self, x: &[f64]) {
        self.x = x.to_vec();
        self.work = match &self.method {
            Method::Cut { limit, oracle } => {
                let rules = fractional(self.compiled.scale, *limit);
                let quadratic = Quadratic::new(&self.compiled, x, rules.residual);
                Work::Cuts(Box::new(Search::new(
                    quadratic,
                    &self.conditions,
                    oracle.clone(),
                    rules,
                )))
            }
            Method::List(_) => Work::List(0, Vec::new()),
            Method::None => Work::Idle,
        };
    }

    /// Works until `ticks` arcs or terms have been looked at; a cut is never left halfway.
    pub fn advance(&mut self, ticks: u64) -> Progress {
        let end = self.ticks.saturating_add(ticks);
        while self.ticks < end {
            match &mut self.work {
                Work::Idle => return Progress::Finished,
                Work::Cuts(search) if search.is_finished() => return Progress::Finished,
                Work::Cuts(search) => self.ticks += search.step(&self.conditions),
                Work::List(next, found) => {
                    let Method::List(sets) = &self.method else { return Progress::Finished };
                    let Some(set) = sets.get(*next) else { return Progress::Finished };
                    let set = flags(self.compiled.size, set);
                    let violation = self.compiled.violation(&set, &self.x);
                    if violation > tolerance::VIOLATION * self.compiled.scale {
                        found.push((*next, violation));
                    }
                    *next += 1;
                    self.ticks += 1 + u64::try_from(self.compiled.terms.len()).unwrap_or(u64::MAX);
                }
            }
        }
        Progress::Working
    }

    /// Arcs and terms looked at since the separator was made: the same for every slicing.
    #[must_use]
    pub fn ticks(&self) -> u64 {
        self.ticks
    }

    /// The violated members of the round, no two the same: the most violated first, equal
    /// ones by set; at most 100.
    pub fn take(&mut self) -> Vec<Violated> {
        let sets: Vec<Vec<usize>> = match std::mem::replace(&mut self.work, Work::Idle) {
            Work::Idle => Vec::new(),
            Work::Cuts(search) => {
                self.note(&search);
                ranked(search.found.into_iter().collect())
            }
            Work::List(_, found) => {
                let Method::List(sets) = &self.method else { return Vec::new() };
                let found = found.into_iter().filter_map(|(k, v)| Some((sets.get(k)?.clone(), v)));
                ranked(found.collect())
            }
        };
        let mut members: Vec<Violated> =
            sets.iter().map(|set| self.violated(set, &self.x)).collect();
        members.retain(|member| member.violation > tolerance::VIOLATION);
        members.sort_by(by_violation);
        members
    }

    /// An exact method that was cut short is called heuristic from then on.
    fn note(&mut self, search: &Search) {
        if search.cut_short && search.found.is_empty() && self.exactness == Some(Exactness::Exact) {
            self.exactness = Some(Exactness::Heuristic);
            self.description.push_str("; a limit was reached, so heuristic");
        }
    }

    /// Every member that `x`, whose integer columns are rounded, violates, judged as
    /// [`Self::membership`] does, and whether there are no others: all are looked at where they are no
    /// more than 4,096, else those that a round finds. The most violated first. Runs to its end:
    /// `O(members · terms)`, or a round.
    #[must_use]
    pub fn violated_members(&self, x: &[f64]) -> (Vec<Violated>, bool) {
        let x = self.compiled.rounded(x);
        let listed = match &self.method {
            Method::List(sets) => Some(sets.clone()),
            _ => list::members(&self.family, &self.conditions),
        };
        let Some(sets) = listed else { return (self.round_at(&x), false) };
        let near = -tolerance::VIOLATION * self.compiled.scale;
        let is_near =
            |set: &&Vec<usize>| self.compiled.violation(&flags(self.compiled.size, set), &x) > near;
        let broken = sets.iter().filter(is_near).filter_map(|set| self.confirmed(set, &x));
        let mut broken: Vec<Violated> = broken.collect();
        broken.sort_by(by_violation);
        (broken, true)
    }

    /// What a round finds at a whole point, or the one member that the exact check finds.
    fn round_at(&self, x: &[f64]) -> Vec<Violated> {
        let Membership::Violated(first) = self.membership(x) else { return Vec::new() };
        let mut round = self.clone();
        round.start(x);
        while round.advance(u64::MAX) == Progress::Working {}
        let found = round.take();
        if found.is_empty() { vec![first] } else { found }
    }

    fn violated(&self, places: &[usize], x: &[f64]) -> Violated {
        let set = flags(self.compiled.size, places);
        let subset = self.conditions.labels(&set);
        let row = member::row(&self.family, &self.compiled, &set);
        let activity = row.activity(x);
        let under = row.lower.as_ref().map(|lower| nearest_f64(lower) - activity);
        let over = row.upper.as_ref().map(|upper| activity - nearest_f64(upper));
        let violation = match (under, over) {
            (Some(under), Some(over)) => {
                if under > over {
                    under
                } else {
                    over
                }
            }
            (under, over) => under.or(over).unwrap_or(0.0),
        };
        Violated { family: self.id, subset, row, violation }
    }

    /// Whether `x`, whose integer columns are rounded, meets every member.
    ///
    /// Exact where the columns of the family are integer and its method is exact: members are
    /// evaluated in rationals. A member over a column that is not integer (or a
    /// family whose common denominator is over 2^40) is violated when it is by over 10⁻⁶.
    /// [`Membership::Unknown`] where there is no method, or a heuristic one gave up.
    /// Costs a whole round at once.
    #[must_use]
    pub fn membership(&self, x: &[f64]) -> Membership {
        let x = self.compiled.rounded(x);
        match &self.method {
            Method::None => Membership::Unknown,
            Method::List(sets) => {
                let mut violated = sets.iter().filter_map(|set| self.confirmed(set, &x));
                violated.next().map_or(Membership::Satisfied, Membership::Violated)
            }
            Method::Cut { limit, oracle } => self.membership_by_cuts(&x, *limit, oracle),
        }
    }

    fn membership_by_cuts(&self, x: &[f64], limit: Option<u32>, oracle: &Oracle) -> Membership {
        let mut rules = fractional(self.compiled.scale, limit);
        rules.first_only = true;
        if self.compiled.whole {
            rules.threshold = tolerance::HALF;
            rules.residual = tolerance::HALF;
            rules.balance = 0.0;
        }
        let mut quadratic = Quadratic::new(&self.compiled, x, rules.residual);
        if self.compiled.rounding.is_some() && self.compiled.whole && self.compiled.is_granular(x) {
            quadratic = quadratic.without_rounding();
            rules.limit = limit.filter(|_| !self.conditions.is_bounded());
        }
        let mut search = Search::new(quadratic, &self.conditions, oracle.clone(), rules);
        while !search.is_finished() {
            search.step(&self.conditions);
        }
        let mut violated = search.found.keys().filter_map(|set| self.confirmed(set, x));
        match violated.next() {
            Some(member) => Membership::Violated(member),
            None if search.cut_short => Membership::Unknown,
            None => Membership::Satisfied,
        }
    }

    /// The member for a set if `x` violates it: exactly, or by the tolerance where a column of
    /// it is not integer.
    fn confirmed(&self, places: &[usize], x: &[f64]) -> Option<Violated> {
        let member = self.violated(places, x);
        if member.violation.abs() > tolerance::VIOLATION {
            return (member.violation > 0.0).then_some(member);
        }
        let integer = |column: model::ColumnId| self.compiled.is_integer(column.index());
        if !member.row.entries.iter().all(|(column, _)| integer(*column)) {
            return None;
        }
        let mut activity = Number::ZERO;
        for (column, a) in &member.row.entries {
            activity += a * Number::try_from(x[column.index()]).ok()?;
        }
        let under = member.row.lower.as_ref().is_some_and(|lower| activity < *lower);
        let over = member.row.upper.as_ref().is_some_and(|upper| activity > *upper);
        (under || over).then_some(member)
    }
}

/// The most violated first, equal ones by set.
fn by_violation(a: &Violated, b: &Violated) -> Ordering {
    b.violation.total_cmp(&a.violation).then_with(|| a.subset.cmp(&b.subset))
}

/// The sets by falling violation, then by set, cut to the most that a round hands out.
fn ranked(mut found: Vec<(Vec<usize>, f64)>) -> Vec<Vec<usize>> {
    found.sort_by(|a, b| b.1.total_cmp(&a.1).then_with(|| a.0.cmp(&b.0)));
    found.truncate(MOST_MEMBERS);
    found.into_iter().map(|(set, _)| set).collect()
}

fn flags(size: usize, places: &[usize]) -> Vec<bool> {
    let mut set = vec![false; size];
    places.iter().for_each(|&place| set[place] = true);
    set
}
