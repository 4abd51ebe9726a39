//! The equivalence court: whether two rivals are the same problem.
//!
//! Nothing but a proof settles it, so everything is tried that can tell them apart: the optimum, the best plan of
//! each in the other, duels on random objectives of either sign, on sub-instances every plan, and each row of one over
//! every plan of the other.
//! Last, where nothing tells them apart, each rival is broken on purpose to see that the court would
//! notice. The verdict names
//! which equivalence holds and how far it was tried.

mod duel;
mod enumerate;
mod example;
mod mutants;
mod plans;
mod rows;
mod verdict;

use std::rc::Rc;

use record::study::{Counterexample, Equivalence, Evidence};

use crate::desk::Desk;
use crate::plan::Plan;
use crate::shared::{Shared, shared};
use crate::subject::Subject;
use crate::words::{of, same, short};
use plans::{Outcome, Placed};

/// The verdict on every pair of rivals, relaxations aside.
pub async fn court(desk: Rc<Desk>, subjects: Vec<Subject>, plan: Plan) -> Vec<Equivalence> {
    let rivals: Vec<&Subject> = subjects.iter().filter(|subject| !subject.relaxation).collect();
    let mut verdicts = Vec::new();
    for (place, a) in rivals.iter().enumerate() {
        for b in &rivals[place + 1..] {
            let case = Case::new(&desk, &plan, [a, b]);
            verdicts.push(case.heard().await);
        }
    }
    verdicts
}

/// Two rivals before the court.
pub(crate) struct Case<'s> {
    pub(crate) desk: &'s Desk,
    pub(crate) plan: &'s Plan,
    pub(crate) rivals: [&'s Subject; 2],
    pub(crate) shared: Shared,
}

/// What was found so far.
#[derive(Debug, Default)]
pub(crate) struct Findings {
    pub(crate) evidence: Vec<Evidence>,
    pub(crate) counterexample: Option<Counterexample>,
    /// Whether both have the same optimum under their own objectives.
    pub(crate) same_optimum: Option<bool>,
    /// Whether a plan of one is none of the other, or is valued otherwise.
    pub(crate) plans_differ: bool,
    /// Whether they have no variable in common, so that no plan of one can be put into the other.
    pub(crate) no_names: bool,
    /// Whether optima under non-negative costs differ; `None` where that was not tried.
    pub(crate) costs_differ: Option<bool>,
    /// The largest sub-instance of which all plans were compared.
    pub(crate) compared: Option<u32>,
    /// The largest of few plans: that of the control.
    pub(crate) control: Option<u32>,
    /// Whether all plans of the instance itself were compared.
    pub(crate) all_compared: bool,
    /// Whether no plan of either breaks a row of the other.
    pub(crate) rows_hold: bool,
}

impl Findings {
    pub(crate) fn note(&mut self, test: &str, outcome: String, agrees: Option<bool>, count: u32) {
        self.evidence.push(Evidence { test: test.to_owned(), outcome, agrees, count });
    }

    /// Keeps a counterexample that is smaller than the one at hand.
    pub(crate) fn differs(&mut self, example: Counterexample) {
        self.plans_differ = true;
        let size = |example: &Counterexample| example.size.unwrap_or(u32::MAX);
        if self.counterexample.as_ref().is_none_or(|known| size(&example) < size(known)) {
            self.counterexample = Some(example);
        }
    }
}

impl<'s> Case<'s> {
    pub(crate) fn new(desk: &'s Desk, plan: &'s Plan, rivals: [&'s Subject; 2]) -> Self {
        let shared = shared(rivals[0], rivals[1], &plan.shared);
        Self { desk, plan, rivals, shared }
    }

    pub(crate) fn say(&self, what: &str) {
        let [a, b] = self.rivals;
        self.desk.say(format!("{} and {}: {what}", a.letter, b.letter));
    }

    async fn heard(&self) -> Equivalence {
        let mut findings = Findings::default();
        self.optima(&mut findings).await;
        if self.shared.pairs.is_empty() {
            let outcome = "they share no variable: only their optima can be compared".to_owned();
            findings.note("shared variables", outcome, None, 0);
            findings.no_names = true;
        } else {
            self.duels(&mut findings).await;
            self.enumerations(&mut findings).await;
            if !findings.plans_differ && !findings.all_compared {
                self.rows(&mut findings).await;
            }
        }
        self.told(&mut findings).await;
        // Of rivals that differ nothing is shown by a copy that differs as well.
        let control = self.plan.mutants && !self.shared.pairs.is_empty() && !findings.plans_differ;
        let (mutants, mutants_untried) =
            if control { self.mutants(&findings).await } else { (Vec::new(), 0) };
        let (equivalent, level, kind) = verdict::verdict(&findings);
        let [a, b] = self.rivals;
        Equivalence {
            rivals: [a.letter.clone(), b.letter.clone()],
            equivalent,
            level,
            kind,
            shared: self.shared.variables.clone(),
            evidence: findings.evidence,
            counterexample: findings.counterexample,
            mutants,
            mutants_untried,
        }
    }

    /// Both optima, and the best plan of each in the other.
    async fn optima(&self, findings: &mut Findings) {
        let mut solved = Vec::new();
        for rival in self.rivals {
            self.say(&format!("the optimum of {}", rival.letter));
            solved.push(self.desk.solve(&rival.model, self.plan.search()).await);
        }
        let settled = solved.iter().all(crate::Solved::is_settled);
        let values = [solved[0].incumbent, solved[1].incumbent];
        findings.same_optimum = match values {
            _ if !settled => None,
            [Some(left), Some(right)] => Some(same(left, right)),
            [None, None] => Some(true),
            _ => Some(false),
        };
        let word = |value: Option<f64>| value.map_or_else(|| "no plan".to_owned(), short);
        let outcome = if settled {
            format!("{} and {}", word(values[0]), word(values[1]))
        } else {
            format!("not settled within {}", of(self.plan.nodes, "node"))
        };
        findings.note("optimum", outcome, findings.same_optimum, 2);
        for from in [0, 1] {
            if let (Some(value), false) = (values[from], self.shared.pairs.is_empty()) {
                let plan = plans::plan_of(&solved[from].solution, &self.shared, from);
                self.cross(findings, from, (&plan, value)).await;
            }
        }
    }

    /// A plan of one in the other.
    async fn cross(&self, findings: &mut Findings, from: usize, (plan, value): (&Placed, f64)) {
        let (own, other) = (self.rivals[from], self.rivals[1 - from]);
        self.say(&format!("the best plan of {} in {}", own.letter, other.letter));
        let placed = plans::place(self, plan, 1 - from).await;
        let (outcome, agrees) = match &placed {
            Outcome::Value(found) if same(*found, value) => {
                ("admitted at the same value".to_owned(), Some(true))
            }
            Outcome::Value(found) => {
                let sign = crate::words::direction(&other.model);
                let better = sign * found < sign * value;
                let words = format!("admitted at {} in place of {}", short(*found), short(value));
                (words, if better { Some(false) } else { None })
            }
            Outcome::Refused(families) => (refused(families), Some(false)),
            Outcome::Open => ("not settled within the limit".to_owned(), None),
        };
        let test = format!("best plan of {} in {}", own.letter, other.letter);
        findings.note(&test, outcome, agrees, 1);
        if agrees == Some(false) {
            let values = match placed {
                Outcome::Value(found) => Some((value, found)),
                _ => None,
            };
            let violated = match placed {
                Outcome::Refused(families) => families,
                _ => Vec::new(),
            };
            findings.differs(Counterexample {
                admitted_by: own.letter.clone(),
                refused_by: other.letter.clone(),
                plan: plan.entries(&own.model, from),
                violated,
                values,
                ..Counterexample::default()
            });
        }
    }
}

fn refused(families: &[String]) -> String {
    if families.is_empty() {
        "refused".to_owned()
    } else {
        format!("refused: it cannot hold with {}", families.join(", "))
    }
}
