//! Duels: both rivals are optimised for the same random objective in the shared variables. Where the
//! optima differ, the better plan is one that the other does not admit.

use std::rc::Rc;

use model::{ColumnId, Model, Number, Sense};
use rand_core::{Rng, SeedableRng};
use rand_pcg::Pcg32;
use record::study::Counterexample;
use tree::{Settings, Status};

use super::plans::{self, Outcome};
use super::{Case, Findings};
use crate::shared::is_boxed;
use crate::words::{of, same};

/// Nodes at most for each side of a duel: many small ones tell more than a few large ones.
const NODES: u32 = 400;
/// Costs are whole numbers up to this.
pub(super) const LARGEST: i64 = 50;

/// What a duel came to.
pub(crate) enum Duel {
    Agree,
    Differ(Counterexample),
    Open,
}

/// Sizes of sub-instances on which duels are fought where those on the instance are not settled.
const SMALLER: [u32; 5] = [14, 11, 9, 7, 5];

impl Case<'_> {
    /// Duels on objectives of free sign; where the rivals differ, on non-negative ones. They are
    /// fought on the instance, or on the largest part of it on which the first is settled.
    pub(crate) async fn duels(&self, findings: &mut Findings) {
        let whole = [self.rivals[0].clone(), self.rivals[1].clone()];
        let extent = self.extent();
        let smaller = SMALLER.iter().filter(|&&size| extent.is_some_and(|extent| size < extent));
        for size in std::iter::once(None).chain(smaller.map(|&size| Some(size))) {
            let models = match size {
                None => Some(whole.clone()),
                Some(size) => self.first(size).await,
            };
            let Some(models) = models else { continue };
            let part = self.with_models(&models);
            let Some(differ) = part.round(("free sign", -LARGEST), size, findings).await else {
                continue;
            };
            if differ || findings.plans_differ {
                findings.costs_differ = part.round(("non-negative", 0), size, findings).await;
            }
            return;
        }
        findings.note("duels", "no duel was settled within the limit".to_owned(), None, 0);
    }

    /// A round of duels; whether any told the rivals apart. `None` where the first was not settled.
    async fn round(
        &self,
        (sign, least): (&str, i64),
        size: Option<u32>,
        findings: &mut Findings,
    ) -> Option<bool> {
        let place = size.map_or_else(String::new, |size| format!(" on the first {size}"));
        let (mut settled, mut differing) = (0, false);
        for number in 0..self.plan.duels {
            self.say(&format!("duel {} of {}{place} ({sign} costs)", number + 1, self.plan.duels));
            match self.duel(u64::from(number), least).await {
                Duel::Agree => settled += 1,
                Duel::Open if settled == 0 => return None,
                Duel::Open => {}
                Duel::Differ(example) => {
                    (settled, differing) = (settled + 1, true);
                    findings.differs(Counterexample { size, ..example });
                    break;
                }
            }
        }
        let outcome = if differing {
            format!("different optima in duel {settled}{place}")
        } else {
            format!("the same optimum in {}{place}", of(settled, "duel"))
        };
        findings.note(&format!("duels, {sign} costs"), outcome, Some(!differing), settled);
        Some(differing)
    }

    /// One duel.
    pub(crate) async fn duel(&self, number: u64, least: i64) -> Duel {
        let costs = self.costs(number, least);
        if costs.is_empty() {
            return Duel::Open;
        }
        let mut solved = Vec::new();
        for side in [0, 1] {
            let model = self.priced(&costs, side);
            let settings = Settings { node_limit: Some(self.nodes()), ..self.plan.search() };
            let one = self.desk.solve(&Rc::new(model), settings).await;
            if one.root == Status::Unbounded || !one.is_settled() {
                return Duel::Open;
            }
            solved.push(one);
        }
        let better = match [solved[0].incumbent, solved[1].incumbent] {
            [None, None] => return Duel::Agree,
            [Some(left), Some(right)] if same(left, right) => return Duel::Agree,
            [Some(left), Some(right)] => usize::from(right < left),
            [Some(_), None] => 0,
            [None, Some(_)] => 1,
        };
        let plan = plans::plan_of(&solved[better].solution, &self.shared, better);
        let (own, other) = (self.rivals[better], self.rivals[1 - better]);
        match plans::place(self, &plan, 1 - better).await {
            Outcome::Refused(violated) => Duel::Differ(Counterexample {
                admitted_by: own.letter.clone(),
                refused_by: other.letter.clone(),
                plan: plan.entries(&own.model, better),
                violated,
                ..Counterexample::default()
            }),
            Outcome::Value(_) | Outcome::Open => Duel::Open,
        }
    }

    fn nodes(&self) -> u32 {
        self.plan.nodes.min(NODES)
    }

    /// Random costs on the deciding pairs that lie between finite bounds in both.
    fn costs(&self, number: u64, least: i64) -> Vec<((ColumnId, ColumnId), i64)> {
        let [a, b] = self.rivals;
        let stream = number.wrapping_add(u64::from(least.unsigned_abs() > 0) << 32);
        let mut random = Pcg32::seed_from_u64(self.plan.seed.wrapping_add(stream));
        let width = LARGEST - least + 1;
        let deciding = self.shared.deciding(&a.model, &b.model).into_iter();
        let boxed =
            deciding.filter(|pair| is_boxed(&a.model, pair.0) && is_boxed(&b.model, pair.1));
        boxed.map(|pair| (pair, least + ((i64::from(random.next_u32()) * width) >> 32))).collect()
    }

    /// The rival at `side` under these costs, its columns beyond the shared ones at 0.
    fn priced(&self, costs: &[((ColumnId, ColumnId), i64)], side: usize) -> Model {
        let own = |pair: &(ColumnId, ColumnId)| if side == 0 { pair.0 } else { pair.1 };
        let costs: Vec<(ColumnId, Number)> =
            costs.iter().map(|(pair, cost)| (own(pair), Number::from(*cost))).collect();
        self.rivals[side].model.priced(Sense::Minimise, &costs)
    }
}
