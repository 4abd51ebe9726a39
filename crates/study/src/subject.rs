//! What is studied: a rival with its model, and how to make the same model of less data.

use std::collections::BTreeMap;
use std::rc::Rc;

use catalogue::Entry;
use instance::Instance;
use model::{FamilyState, Model};
use notation::{Binding, Expansion, Limits, Progress};

use crate::desk::Desk;

/// A rival of a study.
#[derive(Debug, Clone)]
pub struct Subject {
    /// Its letter.
    pub letter: String,
    /// Its title.
    pub title: String,
    /// Its model on the instance.
    pub model: Rc<Model>,
    /// Its entry in the catalogue, where it is shipped.
    pub entry: Option<Entry>,
    /// Whether it is bounded and not compared for its optimum.
    pub relaxation: bool,
    /// Its notation and data; none where it came as a model.
    pub source: Option<Source>,
}

/// The rivals on one instance of a scenario.
#[derive(Debug, Clone, Default)]
pub struct Ground {
    /// The instance's title; empty where the scenario has one instance.
    pub title: String,
    /// The rivals.
    pub subjects: Vec<Subject>,
}

/// From what a rival's model was made.
#[derive(Debug, Clone)]
pub struct Source {
    /// Journal notation.
    pub text: Rc<str>,
    /// The data.
    pub instance: Rc<Instance>,
    /// Formulation's name → instance's name, where a person gave one.
    pub bind: BTreeMap<String, String>,
    /// The states of families that differ from the formulation's default.
    pub states: BTreeMap<String, FamilyState>,
}

/// Models of sub-instances stay below so many non-zeros.
const MOST_NONZEROS: usize = 200_000;

/// Ticks after which a slice may end.
const STEP: u64 = 10_000;

impl Source {
    /// The model on the first `size` elements of each set; `None` where there is none.
    pub async fn model_of_first(&self, desk: &Desk, size: usize) -> Option<Model> {
        self.model_on(desk, &self.instance.first(size), &self.bind).await
    }

    /// The model on another instance, made in slices; `None` where it does not become one.
    pub(crate) async fn model_on(
        &self,
        desk: &Desk,
        instance: &Instance,
        bind: &BTreeMap<String, String>,
    ) -> Option<Model> {
        model_in_slices(desk, (&self.text, bind), instance, &self.states).await
    }
}

/// The model of a formulation on an instance, at once; `None` where it does not become one.
#[must_use]
pub fn model_of(
    text: &str,
    instance: &Instance,
    bind: &BTreeMap<String, String>,
    states: &BTreeMap<String, FamilyState>,
) -> Option<Model> {
    Desk::at_once(
        |desk| async move { model_in_slices(&desk, (text, bind), instance, states).await },
    )
}

async fn model_in_slices(
    desk: &Desk,
    (text, bind): (&str, &BTreeMap<String, String>),
    instance: &Instance,
    states: &BTreeMap<String, FamilyState>,
) -> Option<Model> {
    let parse = notation::parse(text);
    let (checked, found) = notation::check(&parse.tree);
    if parse.diagnostics.iter().chain(&found).any(notation::Diagnostic::is_error) {
        return None;
    }
    let (names, _) = notation::assumed(text, &checked, instance, bind);
    let mut binding = Binding::new(&checked, &names);
    while binding.advance(STEP, instance) == Progress::Working {
        desk.spend(STEP).await;
    }
    let limits = Limits { nonzeros: MOST_NONZEROS };
    let mut expansion = Expansion::new(binding.finish().ok()?, states, limits);
    while expansion.advance(STEP) == Progress::Working {
        desk.spend(STEP).await;
    }
    Some(expansion.finish().ok()?.0)
}
