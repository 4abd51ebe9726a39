//! Each row of one rival over every plan of the other: what no plan violates need not be tried plan
//! by plan. Where the other's relaxation already keeps a row, a linear program proves it; else the
//! most that a whole plan reaches is searched for. Rows of both over the plans of both: the same
//! plans.

use std::rc::Rc;

use model::{ColumnId, Sense, nearest_f64};
use record::study::Counterexample;
use tree::Status;

use super::plans::Outcome;
use super::{Case, Findings, plans};
use crate::claims::{Claim, claims, obstacle};
use crate::maximise::Maximiser;
use crate::shared::Shared;
use crate::words::of;

/// A row is violated from here on.
const VIOLATED: f64 = 1e-6;

/// Rows at most that are searched for.
const MOST_SEARCHES: u32 = 60;

/// What holding all rows of one over the other came to.
enum Held {
    /// All hold: so many by the relaxation, so many by searches.
    All(u32, u32),
    /// A plan breaks one.
    Broken(Box<Counterexample>, String),
    /// Why it is open.
    Open(String),
}

impl Case<'_> {
    /// Holds the rows of each over the plans of the other.
    pub(crate) async fn rows(&self, findings: &mut Findings) {
        let mut proved = true;
        for inner in [0, 1] {
            let [own, other] = [self.rivals[inner], self.rivals[1 - inner]];
            self.say(&format!("the rows of {} over the plans of {}", other.letter, own.letter));
            let test = format!("rows of {} over {}", other.letter, own.letter);
            match self.held(inner).await {
                Held::All(by_relaxation, by_search) => {
                    let rows = by_relaxation + by_search;
                    let outcome = format!(
                        "no plan of {} breaks one of {}: {by_relaxation} proved over its relaxation, \
                         {by_search} by search",
                        own.letter,
                        of(rows, "row")
                    );
                    findings.note(&test, outcome, Some(true), rows);
                }
                Held::Broken(example, row) => {
                    let outcome = format!("a plan of {} breaks {row}", own.letter);
                    findings.note(&test, outcome, Some(false), 1);
                    findings.differs(*example);
                    proved = false;
                }
                Held::Open(why) => {
                    findings.note(&test, format!("not settled: {why}"), None, 0);
                    proved = false;
                }
            }
        }
        findings.rows_hold = proved;
    }

    /// The shared columns as the rival at `inner` sees them.
    fn seen_by(&self, inner: usize) -> Shared {
        let mut shared = self.shared.clone();
        if inner == 1 {
            shared.pairs = shared.pairs.iter().map(|&(left, right)| (right, left)).collect();
            shared.only.swap(0, 1);
        }
        shared
    }

    async fn held(&self, inner: usize) -> Held {
        let (own, other) = (self.rivals[inner], self.rivals[1 - inner]);
        let shared = self.seen_by(inner);
        if let Some(why) = obstacle(own, other, &shared) {
            return Held::Open(why);
        }
        if !shared.only[0].is_empty() {
            return Held::Open(format!("{} has more columns of a shared variable", own.letter));
        }
        let whole = |&(mine, theirs): &(ColumnId, ColumnId)| {
            own.model.columns()[mine.index()].integer
                || !other.model.columns()[theirs.index()].integer
        };
        if !shared.pairs.iter().all(whole) {
            return Held::Open(format!("{} has columns that need not be whole", own.letter));
        }
        let claims = match claims(other, &shared, &own.model, self.plan.rows) {
            Ok(claims) => claims,
            Err(why) => return Held::Open(why),
        };
        let mut maximiser = Maximiser::new(self.desk, &own.model);
        let (mut by_relaxation, mut by_search) = (0, 0);
        for claim in &claims {
            let most = match maximiser.as_written(&claim.entries, &claim.side) {
                Some(most) => most,
                None => maximiser.most(&claim.entries, &claim.side).await,
            };
            if most.proof.is_some_and(|(_, bound)| bound <= claim.side) {
                by_relaxation += 1;
                continue;
            }
            if by_search >= MOST_SEARCHES {
                return Held::Open(format!("more than {} need a search", of(MOST_SEARCHES, "row")));
            }
            match self.searched(inner, claim).await {
                None => by_search += 1,
                Some(held) => return held,
            }
        }
        Held::All(by_relaxation, by_search)
    }

    /// The most that a plan of the rival at `inner` reaches of a row; `None` where it holds.
    async fn searched(&self, inner: usize, claim: &Claim) -> Option<Held> {
        let (own, other) = (self.rivals[inner], self.rivals[1 - inner]);
        let priced = Rc::new(own.model.priced(Sense::Maximise, &claim.entries));
        let solved = self.desk.solve(&priced, self.plan.search()).await;
        if solved.is_infeasible() {
            return None;
        }
        let over = solved.incumbent.map(|most| most - nearest_f64(&claim.side));
        match over {
            Some(over) if over > VIOLATED => {
                let plan = plans::plan_of(&solved.solution, &self.shared, inner);
                // Other values of what need not be whole may mend it: then it is the same plan.
                let Outcome::Refused(_) = plans::place(self, &plan, 1 - inner).await else {
                    let why =
                        format!("{} is broken where {} has more room", claim.name, own.letter);
                    return Some(Held::Open(why));
                };
                Some(Held::Broken(
                    Box::new(Counterexample {
                        admitted_by: own.letter.clone(),
                        refused_by: other.letter.clone(),
                        plan: plan.entries(&own.model, inner),
                        violated: vec![claim.name.clone()],
                        ..Counterexample::default()
                    }),
                    claim.name.clone(),
                ))
            }
            Some(_) if solved.status == Status::Optimal => None,
            _ => Some(Held::Open(format!("{} within {}", claim.name, of(self.plan.nodes, "node")))),
        }
    }
}
