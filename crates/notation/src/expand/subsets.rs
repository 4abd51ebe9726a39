//! Families over subsets: each row, moved to one side, as terms with scopes, weights by
//! element and a constant.

use std::collections::{BTreeMap, BTreeSet};
use std::rc::Rc;

use model::{ColumnId, FamilyState, LabelId, Number, RoundedUp, Scope, SubsetFamily, SubsetTerm};

use super::Expansion;
use crate::diagnostic::{size, subsets as message};
use crate::evaluate::{Element, Evaluated, Evaluator, Guard, Linear, Rounded, Scale, Set, fail};
use crate::place::Span;
use crate::plan::{FamilyPlan, RowPlan, SubsetPlan};
use crate::syntax::Relation;

/// The most members of a family that are written out.
const WRITTEN_MEMBERS: usize = 1 << 12;
/// The largest ground set whose subsets are listed to be written out.
const WRITTEN_GROUND: usize = 16;

impl Expansion {
    /// Opens a family over subsets; whether it is to be expanded. One that is to be written
    /// out is opened when its size is known.
    pub(super) fn open_subset_family(&mut self, family: &FamilyPlan, state: FamilyState) -> bool {
        if state != FamilyState::In {
            self.builder.family(&family.name, state, family.arrow);
            self.builder.over_subsets();
        }
        state != FamilyState::Out
    }

    /// The family for the outer tuple at hand.
    pub(super) fn subset_member(&mut self, family: &FamilyPlan, budget: &mut u64) -> Evaluated<()> {
        let Some(subset) = &family.subset else { return Ok(()) };
        let ground = self.evaluator.set(&subset.ground, &mut self.env)?;
        self.evaluator.ground = Some(Rc::clone(&ground));
        let Some(conditions) = self.conditions(subset, &ground)? else { return Ok(()) };
        for plan in &family.rows {
            let mut found = self.subset_row(family, plan, &ground)?;
            found.conditions.clone_from(&conditions);
            *budget = budget.saturating_sub(found.terms.len() as u64);
            self.nonzeros += found.terms.len();
            self.mark_columns(found.terms.iter().map(|term| term.column.index()));
            self.check_empty_member(subset, &found)?;
            self.family.seen += 1;
            self.add_subset_family(family, found)?;
        }
        Ok(())
    }

    fn add_subset_family(&mut self, family: &FamilyPlan, found: SubsetFamily) -> Evaluated<()> {
        if self.state(family) == FamilyState::In {
            self.family.waiting.push(found);
            return Ok(());
        }
        match self.builder.subset_family(found) {
            Ok(_) => Ok(()),
            Err(error) => fail(size::model(error.to_string(), family.span)),
        }
    }

    /// Writes a family over subsets out, where that was asked for and it is small enough;
    /// else it stays on demand.
    pub(super) fn settle_subset_family(&mut self, family: &FamilyPlan) -> Evaluated<()> {
        let waiting = std::mem::take(&mut self.family.waiting);
        if family.subset.is_none() || self.state(family) != FamilyState::In {
            return Ok(());
        }
        let all: Option<Vec<Vec<BTreeSet<LabelId>>>> = waiting.iter().map(members).collect();
        let Some(all) =
            all.filter(|all| all.iter().map(Vec::len).sum::<usize>() <= WRITTEN_MEMBERS)
        else {
            self.warnings.push(message::too_many_to_write(&family.name, family.span));
            self.builder.family(&family.name, FamilyState::OnDemand, family.arrow);
            self.builder.over_subsets();
            for found in waiting {
                if let Err(error) = self.builder.subset_family(found) {
                    return fail(size::model(error.to_string(), family.span));
                }
            }
            return Ok(());
        };
        self.builder.family(&family.name, FamilyState::In, family.arrow);
        for (found, members) in waiting.iter().zip(all) {
            self.write_members(family, found, members)?;
        }
        Ok(())
    }

    fn write_members(
        &mut self,
        family: &FamilyPlan,
        found: &SubsetFamily,
        members: Vec<BTreeSet<LabelId>>,
    ) -> Evaluated<()> {
        for member in members {
            let row = found.member(&member);
            self.nonzeros += row.entries.len();
            if self.nonzeros > self.limits.nonzeros {
                return fail(size::nonzeros(&family.name, self.limits.nonzeros, family.span));
            }
            let mut tuple = found.tuple.clone();
            tuple.extend(found.ground.iter().filter(|label| member.contains(label)));
            if let Err(error) = self.builder.row(&tuple, row) {
                return fail(size::model(error.to_string(), family.span));
            }
        }
        Ok(())
    }

    /// ∅ is a subset; where it makes the row false, the condition against it was forgotten.
    fn check_empty_member(&self, subset: &SubsetPlan, family: &SubsetFamily) -> Evaluated<()> {
        let empty = BTreeSet::new();
        if !family.admits(&empty) {
            return Ok(());
        }
        let row = family.member(&empty);
        let above = row.lower.as_ref().is_some_and(|lower| *lower > Number::ZERO);
        let below = row.upper.as_ref().is_some_and(|upper| *upper < Number::ZERO);
        if row.entries.is_empty() && (above || below) {
            return fail(message::empty_member(&subset.name, subset.span));
        }
        Ok(())
    }

    fn subset_row(
        &mut self,
        family: &FamilyPlan,
        plan: &RowPlan,
        ground: &Set,
    ) -> Evaluated<SubsetFamily> {
        let RowPlan::Link(left, relation, right) = plan else {
            return fail(message::ranged(family.span));
        };
        let mut form = Linear::default();
        self.evaluator.linear(left, &Scale::one(), &mut self.env, &mut form)?;
        self.evaluator.linear(right, &Scale::minus_one(), &mut self.env, &mut form)?;
        let mut sums: BTreeMap<(u32, Scope), Number> = BTreeMap::new();
        for (column, guard, coefficient) in form.terms {
            for (scope, factor) in self.scopes(guard, ground) {
                *sums.entry((column, scope)).or_default() += &coefficient * Number::from(factor);
            }
        }
        let terms =
            sums.into_iter().filter(|(_, a)| !a.is_zero()).map(|((column, scope), coefficient)| {
                SubsetTerm { column: ColumnId(column), coefficient, scope }
            });
        let terms: Vec<SubsetTerm> = terms.collect();
        let (weights, constant) = weights(&form.loose, form.constant, ground)
            .map_or_else(|| fail(message::pair_constant(family.span)), Ok)?;
        let rounded = match &form.rounded[..] {
            [] => None,
            [only] => Some(rounded_up(only, ground, family.span)?),
            _ => return fail(message::nonlinear(family.span)),
        };
        let tuple = Evaluator::bound(&family.tuple, &self.env);
        Ok(SubsetFamily {
            family: model::FamilyId(0),
            tuple: self.label_tuple(&tuple),
            ground: ground.iter().map(|member| self.label(member[0])).collect(),
            conditions: Vec::new(),
            terms,
            weights,
            constant,
            rounded,
            relation: match relation {
                Relation::AtMost => model::Relation::AtMost,
                Relation::AtLeast => model::Relation::AtLeast,
                _ => model::Relation::Equal,
            },
        })
    }

    /// A guard as scopes with factors: one scope where there is one, else the polynomial
    /// f₀₀ + (f₁₀ − f₀₀)a + (f₀₁ − f₀₀)b + (f₁₁ − f₁₀ − f₀₁ + f₀₀)ab.
    fn scopes(&mut self, guard: Guard, ground: &Set) -> Vec<(Scope, i32)> {
        let inside = |e: Element| ground.contains(&[e]);
        let table = guard.table();
        let mut label = |e: Element| self.label(e);
        match *guard.atoms() {
            [] => vec![(Scope::Always, 1)],
            [a] => match (table, inside(a)) {
                (0b10, true) => vec![(Scope::Element(label(a)), 1)],
                (0b10, false) => Vec::new(),
                (_, true) => vec![(Scope::Outside(label(a)), 1)],
                (_, false) => vec![(Scope::Always, 1)],
            },
            [a, b] => {
                let (p, q) = (label(a), label(b));
                match table {
                    0b1000 if inside(a) && inside(b) => vec![(Scope::Inside(p, q), 1)],
                    0b1000 => Vec::new(),
                    0b0010 if inside(a) => vec![(Scope::Leaving(p, q), 1)],
                    0b0010 => Vec::new(),
                    0b0100 if inside(b) => vec![(Scope::Leaving(q, p), 1)],
                    0b0100 => Vec::new(),
                    0b0110 => vec![(Scope::Crossing(p, q), 1)],
                    _ => polynomial(table, (p, inside(a)), (q, inside(b))),
                }
            }
            _ => Vec::new(),
        }
    }
}

fn polynomial(table: u8, a: (LabelId, bool), b: (LabelId, bool)) -> Vec<(Scope, i32)> {
    let f = |row: u8| i32::from(table >> row & 1);
    let mut parts = vec![(Scope::Always, f(0))];
    if a.1 {
        parts.push((Scope::Element(a.0), f(1) - f(0)));
    }
    if b.1 {
        parts.push((Scope::Element(b.0), f(2) - f(0)));
    }
    if a.1 && b.1 {
        parts.push((Scope::Inside(a.0, b.0), f(3) - f(1) - f(2) + f(0)));
    }
    parts.retain(|(_, factor)| *factor != 0);
    parts
}

/// Guarded constants as a weight for each element of the ground set and a constant; `None`
/// when a constant depends on two elements.
pub(super) fn weights(
    loose: &[(Guard, Number)],
    mut constant: Number,
    ground: &Set,
) -> Option<(Vec<Number>, Number)> {
    let mut weights = vec![Number::ZERO; ground.len()];
    let mut pairs: BTreeMap<(Element, Element), Number> = BTreeMap::new();
    for (guard, value) in loose {
        let atoms = guard.atoms();
        let at = |i: usize| atoms.get(i).and_then(|&e| ground.position(&[e]));
        let f = |row: u8| Number::from(i32::from(guard.table() >> row & 1));
        constant += value * f(0);
        if let Some(i) = at(0) {
            weights[i as usize] += value * (f(1) - f(0));
        }
        if let Some(j) = at(1) {
            weights[j as usize] += value * (f(2) - f(0));
        }
        if let ([a, b], Some(_), Some(_)) = (atoms, at(0), at(1)) {
            let pair = if a < b { (*a, *b) } else { (*b, *a) };
            *pairs.entry(pair).or_default() += value * (f(3) - f(1) - f(2) + f(0));
        }
    }
    pairs.values().all(Number::is_zero).then_some((weights, constant))
}

/// A rounded sum of guarded constants as weights by element.
fn rounded_up(sum: &Rounded, ground: &Set, span: Span) -> Evaluated<RoundedUp> {
    let split = weights(&sum.loose, sum.constant.clone(), ground);
    let (weights, constant) = split.map_or_else(|| fail(message::pair_constant(span)), Ok)?;
    Ok(RoundedUp { factor: sum.factor.clone(), weights, constant })
}

/// All members, when there are few enough to write.
fn members(family: &SubsetFamily) -> Option<Vec<BTreeSet<LabelId>>> {
    if family.ground.len() > WRITTEN_GROUND {
        return None;
    }
    let mut found = Vec::new();
    for mask in 0..1_u32 << family.ground.len() {
        let chosen = family.ground.iter().enumerate().filter(|(i, _)| mask >> i & 1 == 1);
        let subset: BTreeSet<LabelId> = chosen.map(|(_, &label)| label).collect();
        if family.admits(&subset) {
            found.push(subset);
        }
        if found.len() > WRITTEN_MEMBERS {
            return None;
        }
    }
    Some(found)
}
