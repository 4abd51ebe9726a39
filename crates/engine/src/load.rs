//! From a rival's text and an instance's text to the model: read, parse, check, bind, and
//! expansion in slices. A rival in MPS is a model already.

use std::collections::BTreeMap;
use std::rc::Rc;

use instance::{Instance, Reading};
use model::{FamilyState, Model};
use notation::syntax::Formulation;
use notation::{Binding, Checked, Diagnostic, Expansion, Limits, Progress};
use record::message::{Complaint, LaneJob};
use record::results::ErrorReport;
use record::scenario::{InstanceText, Rival, Scenario};

use crate::assumption;
use crate::fault::{fault, unknown};
use crate::map::{of_diagnostic, of_instance};
use crate::readings::Readings;

/// A rival that is being expanded, or that was read as a model.
#[derive(Debug)]
pub(crate) enum Loading {
    /// Journal notation on its way.
    Notation(Box<Notation>),
    /// MPS.
    Model(Box<Loaded>),
}

/// Journal notation that is being expanded.
#[derive(Debug)]
pub(crate) struct Notation {
    title: String,
    text: String,
    tree: Formulation,
    checked: Checked,
    warnings: Vec<Diagnostic>,
    /// What the data do not keep of the catalogue's assumptions.
    broken: Vec<Complaint>,
    stage: Stage,
    reading: Rc<Reading>,
    rival: Rival,
}

/// How far it is.
#[derive(Debug)]
enum Stage {
    Binding(Box<Binding>),
    Expanding(Box<Expansion>),
    /// What is wrong with the data.
    Failed(Vec<Diagnostic>),
}

/// A rival that is expanded.
#[derive(Debug)]
pub(crate) struct Loaded {
    /// Its title.
    pub(crate) title: String,
    /// Its model.
    pub(crate) model: Rc<Model>,
    /// What notation warns of.
    pub(crate) complaints: Vec<Complaint>,
    /// The instance's stops.
    pub(crate) stops: Vec<String>,
}

impl Loading {
    /// Reads, parses and checks.
    ///
    /// # Errors
    /// What cannot be read, with its places in the text that it is in.
    pub(crate) fn begin(readings: &mut Readings, job: &LaneJob) -> Result<Self, ErrorReport> {
        if let (None, None, Some(text)) = (&job.rival.from, &job.rival.text, &job.rival.mps) {
            let stops = job.instance.as_ref().map(|given| stops(readings, given));
            return model_in_mps(text, &job.rival, stops.unwrap_or_default());
        }
        let (text, title) = formulation(&job.rival)?;
        let Some(given) = &job.instance else {
            return Err(fault("scenario", "the scenario has no instance"));
        };
        let reading = readings.read(given)?;
        let Some(instance) = &reading.instance else {
            return Err(unreadable(&given.text, &reading));
        };
        let parse = notation::parse(&text);
        let (checked, found) = notation::check(&parse.tree);
        let found = [parse.diagnostics.clone(), found].concat();
        let mut found = notation::offers(&text, &parse, &checked, found);
        if found.iter().any(Diagnostic::is_error) {
            return Err(not_a_model(&text, &found));
        }
        let (names, assumed) = notation::assumed(&text, &checked, instance, &given.bind);
        found.extend(assumed);
        let stage = Stage::Binding(Box::new(Binding::new(&checked, &names)));
        let rival = Rival { text: None, ..job.rival.clone() };
        let (tree, warnings) = (parse.tree, found);
        let from = rival.from.as_deref().unwrap_or_default();
        let broken = assumption::broken(from, (&text, &tree), instance, &names);
        Ok(Self::Notation(Box::new(Notation {
            title,
            text,
            tree,
            checked,
            warnings,
            broken,
            stage,
            reading,
            rival,
        })))
    }

    /// Binds and expands for about `ticks`; whether there is more to do.
    pub(crate) fn advance(&mut self, ticks: u64) -> bool {
        match self {
            Self::Notation(notation) => notation.advance(ticks),
            Self::Model(_) => false,
        }
    }

    /// The model.
    ///
    /// # Errors
    /// Rows that cannot be made, and families that were asked for and are not there.
    pub(crate) fn finish(self) -> Result<Loaded, ErrorReport> {
        match self {
            Self::Notation(notation) => notation.finish(),
            Self::Model(loaded) => Ok(*loaded),
        }
    }
}

impl Notation {
    fn advance(&mut self, ticks: u64) -> bool {
        match &mut self.stage {
            Stage::Binding(binding) => {
                let Some(instance) = &self.reading.instance else { return false };
                if binding.advance(ticks, instance) == Progress::Finished {
                    self.expand();
                }
                true
            }
            Stage::Expanding(expansion) => expansion.advance(ticks) == Progress::Working,
            Stage::Failed(_) => false,
        }
    }

    /// All data are found, or what lacks is known.
    fn expand(&mut self) {
        let stage = std::mem::replace(&mut self.stage, Stage::Failed(Vec::new()));
        let Stage::Binding(binding) = stage else { return };
        self.stage = match binding.finish() {
            Ok(bound) => {
                let states = states(&self.rival);
                Stage::Expanding(Box::new(Expansion::new(bound, &states, Limits::default())))
            }
            Err(wrong) => Stage::Failed(wrong),
        };
    }

    fn finish(mut self) -> Result<Loaded, ErrorReport> {
        while self.advance(u64::MAX) {}
        let Self { title, text, tree, checked, mut warnings, broken, stage, reading, rival } = self;
        let expanded = match stage {
            Stage::Expanding(expansion) => expansion.finish(),
            Stage::Failed(wrong) => Err(wrong),
            // only where there is no instance, which has been told
            Stage::Binding(_) => Err(Vec::new()),
        };
        let (model, further) =
            expanded.map_err(|wrong| not_a_model(&text, &[warnings.clone(), wrong].concat()))?;
        warnings.extend(further);
        warnings.extend(notation::lint(&tree, &checked, &model));
        let known: Vec<&str> = model.families().iter().map(|family| family.name.as_str()).collect();
        for name in rival.families.keys() {
            if !known.contains(&name.as_str()) {
                return Err(unknown("rival", "constraint family", name, &known));
            }
        }
        Ok(Loaded {
            title: entitled(&title, &model),
            complaints: warnings
                .iter()
                .map(|found| of_diagnostic(&text, found))
                .chain(broken)
                .collect(),
            stops: reading.instance.as_ref().map_or_else(Vec::new, on_the_map),
            model: Rc::new(model),
        })
    }
}

/// The model of a rival on the scenario's first instance, all at once.
///
/// # Errors
/// As the replies of a worker give them.
pub fn prepare(scenario: &Scenario, rival: usize) -> Result<Rc<Model>, ErrorReport> {
    load(scenario, (0, rival)).map(|loaded| loaded.model)
}

/// Title and size of a rival's model on an instance, both by place, in sentences.
///
/// # Errors
/// As the replies of a worker give them.
pub fn describe(
    scenario: &Scenario,
    instance: usize,
    rival: usize,
) -> Result<(String, Vec<String>), ErrorReport> {
    let loaded = load(scenario, (instance, rival))?;
    Ok((loaded.title, loaded.model.describe()))
}

/// A rival on an instance, both by place, all at once.
///
/// # Errors
/// As the replies of a worker give them.
pub(crate) fn load(
    scenario: &Scenario,
    (instance, rival): (usize, usize),
) -> Result<Loaded, ErrorReport> {
    let job = job(scenario, (instance, rival))?;
    let mut loading = Loading::begin(&mut Readings::default(), &job)?;
    while loading.advance(1_000_000) {}
    loading.finish()
}

/// What a worker is asked to load for a rival on an instance, both by place.
///
/// # Errors
/// The scenario has no such rival.
pub(crate) fn job(
    scenario: &Scenario,
    (instance, rival): (usize, usize),
) -> Result<LaneJob, ErrorReport> {
    let Some(rival) = scenario.rivals.get(rival) else {
        return Err(fault("scenario", "the scenario has no such rival"));
    };
    let instance = scenario.instances().nth(instance).cloned();
    Ok(LaneJob { instance, rival: rival.clone(), ..LaneJob::default() })
}

/// A rival in MPS, which needs no instance; `stops` are those of the instance, for the map.
fn model_in_mps(text: &str, rival: &Rival, stops: Vec<String>) -> Result<Loading, ErrorReport> {
    let (model, complaints) = crate::mps::read(text)?;
    let known: Vec<&str> = model.families().iter().map(|family| family.name.as_str()).collect();
    for (name, state) in &rival.families {
        if !known.contains(&name.as_str()) {
            return Err(unknown("rival", "constraint family", name, &known));
        }
        if *state != record::scenario::FamilyState::In {
            let message = format!(
                "the rows of a model in MPS are in: {name} cannot be switched; take them out of the text"
            );
            return Err(fault("rival", message));
        }
    }
    let title = entitled(&rival.title, &model);
    let found = notation::lint_rows(&model);
    let complaints = complaints
        .into_iter()
        .chain(found.iter().map(|found| of_diagnostic(text, found)))
        .collect();
    Ok(Loading::Model(Box::new(Loaded { title, complaints, stops, model: Rc::new(model) })))
}

/// The stops of an instance that have places on a map.
fn on_the_map(instance: &Instance) -> Vec<String> {
    if instance::has_layout(instance) { instance.stops().to_vec() } else { Vec::new() }
}

/// The stops of an instance; none where it cannot be read.
fn stops(readings: &mut Readings, given: &InstanceText) -> Vec<String> {
    let reading = readings.read(given).ok();
    let instance = reading.as_ref().and_then(|reading| reading.instance.as_ref());
    instance.map_or_else(Vec::new, on_the_map)
}

/// The title given to a rival, else that of its model.
fn entitled(given: &str, model: &Model) -> String {
    let titles = [given, model.title(), "untitled"];
    titles.into_iter().find(|title| !title.is_empty()).unwrap_or_default().to_owned()
}

/// The notation text of a rival and the title given to it.
///
/// # Errors
/// No such formulation, or a rival without notation.
pub(crate) fn formulation(rival: &Rival) -> Result<(String, String), ErrorReport> {
    match (&rival.from, &rival.text, &rival.mps) {
        (Some(id), None, None) => match catalogue::find(id) {
            Some(entry) => Ok((entry.text.to_owned(), rival.title.clone())),
            None => {
                let entries = catalogue::entries();
                let known: Vec<&str> = entries.iter().map(|entry| entry.id.as_str()).collect();
                Err(unknown("scenario", "formulation", id, &known))
            }
        },
        (None, Some(text), None) => Ok((text.clone(), rival.title.clone())),
        (None, None, Some(_)) => Err(fault(
            "scenario",
            "the rival is a model in MPS, without journal notation: it can be written --as mps",
        )),
        _ => Err(fault("scenario", "the rival has not exactly one formulation")),
    }
}

pub(crate) fn states(rival: &Rival) -> BTreeMap<String, FamilyState> {
    let states = rival.families.iter().map(|(family, state)| {
        let state = match state {
            record::scenario::FamilyState::In => FamilyState::In,
            record::scenario::FamilyState::OnDemand => FamilyState::OnDemand,
            record::scenario::FamilyState::Out => FamilyState::Out,
        };
        (family.clone(), state)
    });
    states.collect()
}

fn unreadable(text: &str, reading: &Reading) -> ErrorReport {
    ErrorReport {
        message: "the instance cannot be read".to_owned(),
        complaints: reading.complaints.iter().map(|found| of_instance(text, found)).collect(),
        place: "instance".to_owned(),
    }
}

/// What stands in the way comes first, what was only assumed behind it.
fn not_a_model(text: &str, found: &[Diagnostic]) -> ErrorReport {
    let (errors, others): (Vec<_>, Vec<_>) = found.iter().partition(|one| one.is_error());
    ErrorReport {
        message: "the formulation does not become a model".to_owned(),
        complaints: errors.into_iter().chain(others).map(|one| of_diagnostic(text, one)).collect(),
        place: "rival".to_owned(),
    }
}
