//! Where a bound comes from.
//!
//! Each coalition of families has a bound: that of the relaxation with these families and no
//! other. Leaving one out, adding one to none, and the Shapley value (Shapley 1953, Contributions to
//! the Theory of Games II: the mean gain over all orders of adding) are read from these bounds, each
//! by solving anew. A dual share would not do: it is 0 for every family with right-hand side 0, and
//! not unique on a degenerate optimum.

mod dual;

use std::rc::Rc;

use model::{FamilyId, FamilyState, Model, VariableId};
use record::study::{Families, FamilyShare, IntegralityShare, RivalFamilies};

use crate::desk::Desk;
use crate::plan::Plan;
use crate::subject::Subject;
use crate::words::{direction, same};

/// Up to so many families every coalition is solved.
const MOST_COALITIONS_OF: usize = 8;
/// And so many non-zeros touched by all of them, as far as the first one tells.
const MOST_WORK: u64 = 4_000_000_000;

/// Studies the families of each rival.
pub async fn families(desk: Rc<Desk>, subjects: Vec<Subject>, plan: Plan) -> Families {
    let mut rivals = Vec::new();
    for subject in &subjects {
        rivals.push(of_rival(&desk, subject, &plan).await);
    }
    Families { rivals }
}

async fn of_rival(desk: &Desk, subject: &Subject, plan: &Plan) -> RivalFamilies {
    let model = &subject.model;
    let ids: Vec<FamilyId> = (0..model.families().len())
        .map(FamilyId::from_index)
        .filter(|id| model.families()[id.index()].state != FamilyState::Out)
        .collect();
    let mut table = Coalitions { desk, model, ids: &ids, letter: &subject.letter, solved: 0 };
    let (whole, work) = table.bound(&|_| true).await;
    let (bare, _) = table.bound(&|_| false).await;
    let mut out = RivalFamilies {
        rival: subject.letter.clone(),
        title: subject.title.clone(),
        bound: whole,
        bare,
        families: shares(model, &ids),
        ..RivalFamilies::default()
    };
    out.no_shapley = too_many(ids.len(), work).unwrap_or_default();
    if out.no_shapley.is_empty() {
        table.every(&mut out).await;
    } else {
        table.each(&mut out).await;
    }
    out.solved = table.solved;
    for (place, &id) in ids.iter().enumerate() {
        desk.say(format!("{}: the dual share of {}", subject.letter, out.families[place].name));
        out.families[place].dual = dual::share(desk, model, (id, whole)).await;
    }
    if !subject.relaxation {
        out.integrality = integrality(desk, subject, plan).await;
    }
    out
}

/// Why not every coalition is solved.
fn too_many(count: usize, work: u64) -> Option<String> {
    if count > MOST_COALITIONS_OF {
        return Some(format!("more than {MOST_COALITIONS_OF} families"));
    }
    let all = work.saturating_mul(1 << count);
    (all > MOST_WORK).then(|| "its coalitions would take too long on this instance".to_owned())
}

fn shares(model: &Model, ids: &[FamilyId]) -> Vec<FamilyShare> {
    let name = |id: &FamilyId| model.families()[id.index()].name.clone();
    ids.iter().map(|id| FamilyShare { name: name(id), ..FamilyShare::default() }).collect()
}

/// The bounds of coalitions of a rival's families.
struct Coalitions<'s> {
    desk: &'s Desk,
    model: &'s Model,
    ids: &'s [FamilyId],
    letter: &'s str,
    solved: u32,
}

impl Coalitions<'_> {
    /// The bound of the coalition of the families at the places that `is_in` names, and what it
    /// took. `None` where there is none.
    async fn bound(&mut self, is_in: &dyn Fn(usize) -> bool) -> (Option<f64>, u64) {
        let out: Vec<FamilyId> = self
            .ids
            .iter()
            .enumerate()
            .filter(|&(place, _)| !is_in(place))
            .map(|(_, &id)| id)
            .collect();
        self.solved += 1;
        let (letter, solved) = (self.letter, self.solved);
        self.desk.say(format!("{letter}: relaxation {solved} without some of its families"));
        let solved = self.desk.relax(&Rc::new(self.model.left_out(&out))).await;
        (solved.bound, solved.work)
    }

    /// Leaves each out, and adds each to none.
    async fn each(&mut self, out: &mut RivalFamilies) {
        for place in 0..self.ids.len() {
            let (without, _) = self.bound(&|other| other != place).await;
            let (alone, _) = self.bound(&|other| other == place).await;
            self.set(out, place, (without, alone));
        }
    }

    fn set(
        &self,
        out: &mut RivalFamilies,
        place: usize,
        (without, alone): (Option<f64>, Option<f64>),
    ) {
        let sign = direction(self.model);
        let gain = |more: Option<f64>, less: Option<f64>| Some(tidy(sign * (more? - less?)));
        let share = &mut out.families[place];
        (share.without, share.alone) = (without, alone);
        share.lost = gain(out.bound, without);
        share.gained = gain(alone, out.bare);
    }

    /// Solves every coalition: the Shapley value, and with it leaving out and adding in.
    async fn every(&mut self, out: &mut RivalFamilies) {
        let count = self.ids.len();
        let all = (1_usize << count) - 1;
        let mut bounds = vec![None; all + 1];
        (bounds[0], bounds[all]) = (out.bare, out.bound);
        for (coalition, bound) in bounds.iter_mut().enumerate().skip(1).take(all.saturating_sub(1))
        {
            *bound = self.bound(&|place| coalition >> place & 1 == 1).await.0;
        }
        for place in 0..count {
            self.set(out, place, (bounds[all & !(1 << place)], bounds[1 << place]));
        }
        let bounds: Option<Vec<f64>> = bounds.into_iter().collect();
        match bounds {
            None => {
                out.no_shapley =
                    "some families alone leave the objective without a bound".to_owned();
            }
            Some(bounds) => {
                let sign = direction(self.model);
                for (share, value) in out.families.iter_mut().zip(shapley(count, &bounds)) {
                    share.shapley = Some(tidy(sign * value));
                }
            }
        }
    }
}

/// The Shapley value of each of `count` players; `worth[S]` is what the coalition with the bits of
/// `S` is worth. `O(count · 2^count)`.
fn shapley(count: usize, worth: &[f64]) -> Vec<f64> {
    // |S|! (n − |S| − 1)! / n! by size of S.
    let weights: Vec<f64> = (0..count).map(|size| weight(size, count)).collect();
    let mut values = vec![0.0; count];
    for (coalition, &value) in worth.iter().enumerate() {
        let size = coalition.count_ones() as usize;
        for (player, sum) in values.iter_mut().enumerate() {
            if coalition >> player & 1 == 0 {
                *sum += weights[size] * (worth[coalition | 1 << player] - value);
            }
        }
    }
    values
}

/// 1 / (count · C(count − 1, size)).
fn weight(size: usize, count: usize) -> f64 {
    let choose = (0..size).fold(1_usize, |c, i| c * (count - 1 - i) / (i + 1));
    1.0 / (f64::from(u32::try_from(count * choose).unwrap_or(u32::MAX)))
}

/// Differences of bounds that are rounding are 0.
fn tidy(value: f64) -> f64 {
    if value.abs() < 1e-9 { 0.0 } else { value }
}

/// What it is worth that each variable must be whole.
async fn integrality(desk: &Desk, subject: &Subject, plan: &Plan) -> Vec<IntegralityShare> {
    let model = &subject.model;
    let whole = whole_variables(model);
    let mut out = Vec::new();
    if whole.is_empty() {
        return out;
    }
    desk.say(format!("{}: its optimum", subject.letter));
    let optimum = desk.solve(model, plan.search()).await;
    for (variable, columns) in whole {
        let name = model.variables()[variable.index()].name.clone();
        desk.say(format!("{}: its optimum with {name} fractional", subject.letter));
        let relaxed = Rc::new(model.relaxed(&[variable]));
        let solved = desk.solve(&relaxed, plan.search()).await;
        let value = solved.incumbent.filter(|_| solved.is_settled());
        let before = optimum.incumbent.filter(|_| optimum.is_settled());
        let free = value.zip(before).map(|(value, before)| same(value, before));
        out.push(IntegralityShare { variable: name, columns, optimum: value, free });
    }
    out
}

/// The variables with whole columns, and how many they have.
fn whole_variables(model: &Model) -> Vec<(VariableId, u32)> {
    let mut counts = vec![0; model.variables().len()];
    for column in model.columns().iter().filter(|column| column.integer) {
        counts[column.variable.index()] += 1;
    }
    let ids = (0..counts.len()).map(VariableId::from_index);
    ids.zip(counts).filter(|(_, count)| *count > 0).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The glove game (Shapley 1953; the textbook figures are common practice): players 1 and 2 hold a
    /// left glove each, player 3 a right one; a pair is worth 1. Values 1/6, 1/6, 4/6.
    #[test]
    fn the_shapley_value_of_the_glove_game() {
        let worth = [0.0, 0.0, 0.0, 0.0, 0.0, 1.0, 1.0, 1.0];
        let values = shapley(3, &worth);
        for (value, expected) in values.iter().zip([1.0 / 6.0, 1.0 / 6.0, 4.0 / 6.0]) {
            assert!((value - expected).abs() < 1e-15, "{values:?}");
        }
    }

    #[test]
    fn shares_add_up_to_what_all_gain() {
        let worth: Vec<f64> = (0..16_u32).map(|s| f64::from(s * s % 11)).collect();
        let sum: f64 = shapley(4, &worth).iter().sum();
        assert!((sum - (worth[15] - worth[0])).abs() < 1e-12);
    }
}
