//! The deletion filter over families, then rows.

use std::collections::{BTreeMap, BTreeSet};
use std::rc::Rc;

use model::{FamilyId, FamilyState, Model, Row, RowId};
use tree::{Conflict, ConflictLimits, Status};

use crate::desk::{Desk, Solved};
use crate::plan::Plan;

/// Slices in which families in conflict are looked for, in non-zeros touched.
const SLICE: u64 = 200_000;

/// What is dropped at once: a written row, or a family on demand with all its rows.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub(crate) enum Part {
    Row(RowId),
    Family(FamilyId),
}

pub(crate) struct Filter<'f> {
    desk: &'f Desk,
    model: &'f Rc<Model>,
    plan: &'f Plan,
    /// Whether whole points are asked for.
    whole: bool,
    /// Models solved.
    pub(crate) solved: u32,
}

impl<'f> Filter<'f> {
    pub(crate) fn new(desk: &'f Desk, model: &'f Rc<Model>, plan: &'f Plan, whole: bool) -> Self {
        Self { desk, model, plan, whole, solved: 0 }
    }

    /// Parts that cannot hold together, and whether each was shown to be needed.
    pub(crate) async fn filtered(&mut self, solved: &Solved, letter: &str) -> (Vec<Part>, bool) {
        let mut kept = self.first(solved).await;
        let (mut piece, mut open) = (0, false);
        loop {
            let (mut place, last) = (0, piece == 1);
            while place < kept.len() {
                if self.solved >= self.plan.rows {
                    return (kept, false);
                }
                let end = self.end_of_piece(&kept, place, piece);
                self.desk.say(format!("{letter}: {} of {} rows in conflict", place, kept.len()));
                let rest = [&kept[..place], &kept[end..]].concat();
                match self.is_conflict(&rest).await {
                    Some(true) => kept = rest,
                    Some(false) => place = end,
                    None => (place, open) = (end, open || last),
                }
            }
            if last {
                return (kept, !open);
            }
            let half = kept.len().div_ceil(4);
            piece = if piece == 0 { half.max(1) } else { (piece / 2).max(1) };
        }
    }

    /// Where a piece ends: with its family at first (`piece` 0), then after so many parts.
    fn end_of_piece(&self, kept: &[Part], place: usize, piece: usize) -> usize {
        if piece > 0 {
            return (place + piece).min(kept.len());
        }
        let family = self.family(kept[place]);
        let other = kept[place..].iter().position(|part| self.family(*part) != family);
        other.map_or(kept.len(), |after| place + after)
    }

    fn family(&self, part: Part) -> FamilyId {
        match part {
            Part::Row(row) => self.model.row_family(row),
            Part::Family(family) => family,
        }
    }

    /// The rows of the Farkas ray where they suffice; else those of a smallest set of families.
    async fn first(&mut self, solved: &Solved) -> Vec<Part> {
        let all = self.parts(&self.model.families_that_hold());
        if self.whole {
            let families = self.families().await;
            return self.parts(&families);
        }
        let names: BTreeSet<&str> = solved.ray.iter().map(|(name, _)| name.as_str()).collect();
        let of_ray: Vec<Part> = all
            .iter()
            .copied()
            .filter(|part| match part {
                Part::Row(row) => names.contains(self.model.row_name(*row).as_str()),
                Part::Family(_) => true,
            })
            .collect();
        if self.is_conflict(&of_ray).await == Some(true) { of_ray } else { all }
    }

    async fn families(&mut self) -> Vec<FamilyId> {
        let mut conflict = Conflict::new(Rc::clone(self.model), ConflictLimits::default());
        while !conflict.advance(SLICE) {
            self.desk.spend(SLICE).await;
        }
        conflict.result().families
    }

    fn parts(&self, families: &[FamilyId]) -> Vec<Part> {
        let parts = families.iter().flat_map(|&id| {
            let family = &self.model.families()[id.index()];
            if family.over_subsets || family.state == FamilyState::OnDemand {
                vec![Part::Family(id)]
            } else {
                family.rows.clone().map(|row| Part::Row(RowId(row))).collect()
            }
        });
        parts.collect()
    }

    /// Whether these parts alone have no point; `None` where a limit left it open.
    async fn is_conflict(&mut self, parts: &[Part]) -> Option<bool> {
        let solved = self.solve(parts).await;
        match (solved.root, solved.status) {
            (Status::Infeasible, _) => Some(true),
            (Status::Optimal, _) if !self.whole => Some(false),
            (_, Status::Infeasible) => Some(true),
            _ => solved.incumbent.map(|_| false),
        }
    }

    /// Whether exact arithmetic proves that these parts have no point.
    pub(crate) async fn is_proved(&mut self, parts: &[Part]) -> bool {
        let solved = self.solve(parts).await;
        solved.checked && solved.is_infeasible()
    }

    async fn solve(&mut self, parts: &[Part]) -> Solved {
        self.solved += 1;
        let model = Rc::new(self.only(parts));
        if self.whole {
            self.desk.solve(&model, self.plan.search()).await
        } else {
            self.desk.relax(&model).await
        }
    }

    /// The model with these parts and no other.
    fn only(&self, parts: &[Part]) -> Model {
        let families: BTreeSet<FamilyId> = parts.iter().map(|part| self.family(*part)).collect();
        let model = self.model.feasibility(&families);
        let kept: BTreeSet<Part> = parts.iter().copied().collect();
        let mut free = BTreeMap::new();
        for row in (0..model.row_count()).map(RowId::from_index) {
            if model.row_is_in(row) && !kept.contains(&Part::Row(row)) {
                free.insert(row, Row { entries: Vec::new(), lower: None, upper: None });
            }
        }
        // Rows without entries name no column that is not there.
        model.rewritten(&free).unwrap_or(model)
    }
}
