//! The cut adviser: each class of general cuts alone, and a greedy choice of the fewest that gain
//! nine tenths of what all gain together. A class whose cuts are few and short beside the rows that
//! are there can be written up front; else its cuts are separated on demand. The cuts of the chosen
//! classes can be made rows of a rival of their own.

mod words;

use std::rc::Rc;

use model::{FamilyState, Row};
use record::study::{ClassGain, CutAdvice, RivalCuts};
use tree::{Class, Classes, Cuts, Settings};

use crate::desk::{Desk, Solved};
use crate::plan::Plan;
use crate::statistics::count;
use crate::subject::Subject;
use crate::words::direction;

/// The share of the gain of all classes at which the choice is enough.
const ENOUGH: f64 = 0.9;
/// A gain of less is rounding, as a share of the bound.
const ROUNDING: f64 = 1e-7;
/// Cuts are written up front where their non-zeros are at most this share of the model's.
const SHORT: f64 = 0.25;

/// Advises on the cuts of each rival.
pub async fn cuts(desk: Rc<Desk>, subjects: Vec<Subject>, _: Plan) -> CutAdvice {
    let mut rivals = Vec::new();
    for subject in &subjects {
        let adviser = Adviser { desk: &desk, subject, sign: direction(&subject.model) };
        rivals.push(adviser.advise().await);
    }
    CutAdvice { rivals }
}

struct Adviser<'s> {
    desk: &'s Desk,
    subject: &'s Subject,
    sign: f64,
}

impl Adviser<'_> {
    async fn advise(&self) -> RivalCuts {
        let mut out = RivalCuts {
            rival: self.subject.letter.clone(),
            title: self.subject.title.clone(),
            ..RivalCuts::default()
        };
        self.desk.say(format!("{}: its relaxation", out.rival));
        out.bound = self.desk.relax(&self.subject.model).await.bound;
        let mut useful = Vec::new();
        for (class, name) in Class::ALL {
            let (solved, rows) = self.with(&[class], name).await;
            match solved.cuts {
                Some((bound, added)) if added > 0 => {
                    useful.push((class, name));
                    out.classes.push(ClassGain {
                        class: name.to_owned(),
                        bound: Some(bound),
                        gained: out.bound.map(|base| self.gain(bound, base)),
                        added,
                        work: solved.work,
                        ..self.judged(class, &rows)
                    });
                }
                _ => out.idle.push(name.to_owned()),
            }
        }
        let all: Vec<Class> = useful.iter().map(|(class, _)| *class).collect();
        out.with_all = match all.as_slice() {
            [] => out.bound,
            all => self.with(all, "all classes").await.0.cuts.map(|(bound, _)| bound),
        };
        self.choose(&useful, &mut out).await;
        out
    }

    /// What is to be said of the cuts of a class beside their gain.
    fn judged(&self, class: Class, rows: &[Row]) -> ClassGain {
        let model = &self.subject.model;
        let entries: usize = rows.iter().map(|row| row.entries.len()).sum();
        let whole: usize = (0..model.row_count())
            .map(|row| model.row_entries(model::RowId::from_index(row)).len())
            .sum();
        let cells = rows.len() * model.columns().len();
        let up_front = count(entries) <= SHORT * count(whole) && !rows.is_empty();
        let share = words::share(count(entries), count(whole));
        ClassGain {
            kept: u32::try_from(rows.len()).unwrap_or(u32::MAX),
            density: (cells > 0).then(|| count(entries) / count(cells)),
            up_front,
            why: match rows.len() {
                0 => "none of them is tight at the end".to_owned(),
                _ => format!("those kept have {share} as many non-zeros as the model"),
            },
            separation: words::separation(class).to_owned(),
            ..ClassGain::default()
        }
    }

    /// Chooses classes one after the other.
    async fn choose(&self, useful: &[(Class, &str)], out: &mut RivalCuts) {
        let (Some(base), Some(all)) = (out.bound, out.with_all) else { return };
        let whole = self.gain(all, base);
        if whole <= ROUNDING * (1.0 + base.abs()) {
            return;
        }
        let (mut chosen, mut at): (Vec<Class>, f64) = (Vec::new(), base);
        while self.gain(at, base) < ENOUGH * whole && chosen.len() < useful.len() {
            let mut best: Option<(Class, &str, f64)> = None;
            for (class, name) in useful.iter().filter(|(class, _)| !chosen.contains(class)) {
                let with = [chosen.as_slice(), &[*class]].concat();
                let Some((bound, _)) = self.with(&with, name).await.0.cuts else { continue };
                if best.is_none_or(|(.., known)| self.gain(bound, known) > 0.0) {
                    best = Some((*class, name, bound));
                }
            }
            let Some((class, name, bound)) = best else { return };
            chosen.push(class);
            if self.gain(bound, at) > 0.0 {
                at = bound;
            }
            out.chosen.push((name.to_owned(), bound));
        }
        if !chosen.is_empty() {
            let (_, rows) = self.with(&chosen, "the chosen classes").await;
            out.rows = u32::try_from(rows.len()).unwrap_or(u32::MAX);
            out.model = self.with_rows(rows).unwrap_or_default();
        }
    }

    /// The model with these cuts as rows, in MPS.
    fn with_rows(&self, rows: Vec<Row>) -> Option<String> {
        let model = &self.subject.model;
        let on_demand = model.families().iter().any(|one| one.state == FamilyState::OnDemand);
        if on_demand || rows.is_empty() {
            return None;
        }
        let model = model.with_numbered_rows("cut", rows).ok()?;
        Some(model::mps::write(&model).ok()?.text)
    }

    /// How much better a bound is than another; 0 where it is no better.
    fn gain(&self, bound: f64, base: f64) -> f64 {
        let gain = self.sign * (bound - base);
        if gain > ROUNDING * (1.0 + base.abs()) { gain } else { 0.0 }
    }

    /// The relaxation with cuts of these classes, and the cuts that stay in it.
    async fn with(&self, classes: &[Class], name: &str) -> (Solved, Vec<Row>) {
        self.desk.say(format!("{}: its relaxation with {name}", self.subject.letter));
        let classes: Classes = classes.iter().copied().collect();
        let cuts = Cuts::at_root(classes);
        let settings = Settings { cuts, node_limit: Some(1), ..Settings::default() };
        self.desk.with_cuts(&self.subject.model, settings).await
    }
}
