//! Every plan of two models: those of the one are listed by excluding each that is found, and put
//! into the other, at the same value; then the other, with all of them excluded, must have none.

use std::rc::Rc;

use model::{ColumnId, Model, Number, Row, Sense};
use record::study::Counterexample;

use super::plans::{self, Outcome, Placed};
use super::{Case, Findings};
use crate::subject::Subject;
use crate::words::{of, same};

/// Rivals broken on purpose are compared where there are so many plans at most.
const CONTROL: u32 = 30;

/// Columns at most of models whose every plan is looked for though they cannot be made smaller.
const MOST_COLUMNS: usize = 64;

/// What comparing all plans came to.
pub(crate) enum Compared {
    /// The same plans, so many.
    Same(u32),
    /// A plan that only one of them has.
    Differ(Counterexample),
    /// Too many plans, or a limit.
    Open(String),
}

impl Case<'_> {
    /// Compares all plans of sub-instances by rising size, up to the instance itself where that is
    /// small.
    pub(crate) async fn enumerations(&self, findings: &mut Findings) {
        if self.extent().is_none() {
            return self.enumeration(findings).await;
        }
        let mut compared = Vec::new();
        for &size in &self.plan.sizes {
            let Some(models) = self.first(size).await else { continue };
            let part = self.with_models(&models);
            if part.shared.pairs.is_empty() {
                continue;
            }
            self.say(&format!("every plan of sub-instances of size {size}"));
            match part.compared().await {
                Compared::Same(0) => {
                    findings.note("every plan", format!("none on the first {size}"), None, 0);
                }
                Compared::Same(plans) => {
                    compared.push((size, plans));
                    findings.compared = Some(size);
                    findings.all_compared = self.is_whole(size);
                    if plans <= CONTROL {
                        findings.control = Some(size);
                    }
                }
                Compared::Differ(example) => {
                    let outcome = format!("different plans on the first {size}");
                    findings.note("every plan", outcome, Some(false), 1);
                    findings.differs(Counterexample { size: Some(size), ..example });
                    break;
                }
                Compared::Open(why) => {
                    findings.note("every plan", format!("on the first {size}: {why}"), None, 0);
                    break;
                }
            }
            if self.is_whole(size) {
                break;
            }
        }
        if let Some(&(size, plans)) = compared.last() {
            let counts: Vec<String> = compared.iter().map(|(_, plans)| plans.to_string()).collect();
            let outcome = match counts.as_slice() {
                [_] => format!("the same {} on the first {size}", of(plans, "plan")),
                _ => format!(
                    "the same {} plans on the first {} to {size}",
                    counts.join(", "),
                    compared[0].0
                ),
            };
            findings.note("every plan", outcome, Some(true), plans);
        }
    }

    /// Compares all plans of models that cannot be made smaller, where they are few.
    async fn enumeration(&self, findings: &mut Findings) {
        let [a, b] = self.rivals;
        let deciding = self.shared.deciding(&a.model, &b.model).len();
        if deciding > MOST_COLUMNS {
            let outcome = format!(
                "not tried: without data they cannot be made smaller, and {deciding} columns are more \
                 than {MOST_COLUMNS}"
            );
            findings.note("every plan", outcome, None, 0);
            return;
        }
        self.say("every plan");
        match self.compared().await {
            Compared::Same(plans) => {
                findings.all_compared = true;
                let outcome = format!("the same {}", of(plans, "plan"));
                findings.note("every plan", outcome, Some(true), plans);
            }
            Compared::Differ(example) => {
                findings.note("every plan", "different plans".to_owned(), Some(false), 1);
                findings.differs(example);
            }
            Compared::Open(why) => findings.note("every plan", why, None, 0),
        }
    }

    /// Whether a sub-instance of this size is the instance.
    fn is_whole(&self, size: u32) -> bool {
        self.extent().is_some_and(|extent| size >= extent)
    }

    /// The number of elements of the largest set of the instance that both are run on.
    pub(crate) fn extent(&self) -> Option<u32> {
        let extent = |subject: &Subject| {
            let extent = subject.source.as_ref()?.instance.extent();
            u32::try_from(extent).ok()
        };
        Some(extent(self.rivals[0])?.max(extent(self.rivals[1])?))
    }

    /// Both models on the first elements of each set.
    pub(crate) async fn first(&self, size: u32) -> Option<[Subject; 2]> {
        let desk = self.desk;
        let part = async |subject: &Subject| {
            let source = subject.source.as_ref()?;
            let model = source.model_of_first(desk, size as usize).await?;
            Some(Subject { model: Rc::new(model), ..subject.clone() })
        };
        Some([part(self.rivals[0]).await?, part(self.rivals[1]).await?])
    }

    pub(crate) fn with_models<'p>(&'p self, subjects: &'p [Subject; 2]) -> Case<'p> {
        Case::new(self.desk, self.plan, [&subjects[0], &subjects[1]])
    }

    /// Compares every plan of both models.
    pub(crate) async fn compared(&self) -> Compared {
        let [a, b] = self.rivals;
        let deciding = self.shared.deciding(&a.model, &b.model);
        let binary =
            |pair: &(ColumnId, ColumnId)| a.model.is_binary(pair.0) || b.model.is_binary(pair.1);
        if !deciding.iter().all(binary) {
            return Compared::Open("plans are not of 0 and 1 alone".to_owned());
        }
        let mut found: Vec<Placed> = Vec::new();
        loop {
            match self.next(&deciding, &found, 0).await {
                Err(why) => return Compared::Open(why),
                Ok(None) => break,
                Ok(Some(_)) if found.len() >= self.plan.plans as usize => {
                    return Compared::Open(format!("more than {}", of(self.plan.plans, "plan")));
                }
                Ok(Some(plan)) => {
                    let own = plans::place(self, &plan, 0).await;
                    match (own, plans::place(self, &plan, 1).await) {
                        (_, Outcome::Refused(violated)) => {
                            return Compared::Differ(self.example(&plan, violated, 0));
                        }
                        (Outcome::Value(left), Outcome::Value(right)) if same(left, right) => {
                            found.push(plan);
                        }
                        (Outcome::Value(left), Outcome::Value(right)) => {
                            let example = self.example(&plan, Vec::new(), 0);
                            let values = Some((left, right));
                            return Compared::Differ(Counterexample { values, ..example });
                        }
                        _ => return Compared::Open("a plan was not settled".to_owned()),
                    }
                }
            }
        }
        match self.next(&deciding, &found, 1).await {
            Err(why) => Compared::Open(why),
            Ok(None) => Compared::Same(u32::try_from(found.len()).unwrap_or(u32::MAX)),
            Ok(Some(plan)) => match plans::place(self, &plan, 0).await {
                Outcome::Refused(violated) => Compared::Differ(self.example(&plan, violated, 1)),
                Outcome::Value(_) | Outcome::Open => {
                    Compared::Open("a plan was not settled".to_owned())
                }
            },
        }
    }

    fn example(&self, plan: &Placed, violated: Vec<String>, from: usize) -> Counterexample {
        Counterexample {
            admitted_by: self.rivals[from].letter.clone(),
            refused_by: self.rivals[1 - from].letter.clone(),
            plan: plan.entries(&self.rivals[from].model, from),
            violated,
            ..Counterexample::default()
        }
    }

    /// A plan of the rival at `side` that is none of these.
    ///
    /// # Errors
    /// Why it was not settled.
    async fn next(
        &self,
        deciding: &[(ColumnId, ColumnId)],
        found: &[Placed],
        side: usize,
    ) -> Result<Option<Placed>, String> {
        let own = |pair: &(ColumnId, ColumnId)| if side == 0 { pair.0 } else { pair.1 };
        let rows = found.iter().map(|plan| other_than(plan, deciding, own)).collect();
        let model = self.rivals[side].model.priced(Sense::Minimise, &[]);
        let model = model.with_rows("found", rows).map_err(|error| error.to_string())?;
        let model = restricted(&model, deciding, own);
        let solved = self.desk.solve(&Rc::new(model), self.plan.search()).await;
        if solved.is_infeasible() {
            return Ok(None);
        }
        if solved.solution.is_empty() {
            return Err(format!("not settled within {}", of(self.plan.nodes, "node")));
        }
        Ok(Some(plans::plan_of(&solved.solution, &self.shared, side)))
    }
}

/// The model with its deciding columns whole between 0 and 1 where the other rival says so.
pub(super) fn restricted(
    model: &Model,
    deciding: &[(ColumnId, ColumnId)],
    own: impl Fn(&(ColumnId, ColumnId)) -> ColumnId,
) -> Model {
    let loose = deciding.iter().map(own).filter(|&column| !model.is_binary(column));
    model.whole(&loose.collect::<Vec<_>>())
}

/// The row that a plan and no other of 0 and 1 breaks: Σ over ones − Σ over zeros ≤ ones − 1.
fn other_than(
    plan: &Placed,
    deciding: &[(ColumnId, ColumnId)],
    own: impl Fn(&(ColumnId, ColumnId)) -> ColumnId,
) -> Row {
    let mut ones = 0;
    let mut entries = Vec::new();
    for (pair, value) in &plan.values {
        if deciding.binary_search(pair).is_err() {
            continue;
        }
        let one = *value > 0.5;
        ones += i32::from(one);
        entries.push((own(pair), if one { Number::ONE } else { -Number::ONE }));
    }
    Row { entries, lower: None, upper: Some(Number::from(ones - 1)) }
}
