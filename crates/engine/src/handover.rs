//! A rival handed over to others: as MPS that was read again and compared, as journal notation,
//! as LaTeX. A model that came as MPS is written out row by row for the last two.

mod compare;
mod explicit;

use std::collections::BTreeMap;

use model::mps as format;
use record::handover::{Form, Written};
use record::message::{Complaint, LaneJob, Reply};
use record::results::ErrorReport;
use record::scenario::{Rival, Scenario, Study};
use record::study::Report;

use crate::fault::fault;
use crate::load::{Loaded, formulation, load};
use crate::map::of_diagnostic;
use crate::studies::StudyRun;
use compare::compare;
use explicit::explicit;

/// Slices of a study that is made to its end, in non-zeros touched.
const SLICE: u64 = 2_000_000;

/// A text to hand over.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct HandOver {
    /// The text.
    pub text: String,
    /// What who takes it should know, one sentence each.
    pub notes: Vec<String>,
    /// What was said about the rival itself.
    pub complaints: Vec<Complaint>,
}

/// Why nothing is handed over.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Refusal {
    /// The rival or its instance is wrong, or cannot be said in that form.
    Wrong(ErrorReport),
    /// What was written is not what was meant: our fault.
    Broken(String),
}

impl From<ErrorReport> for Refusal {
    fn from(error: ErrorReport) -> Self {
        Self::Wrong(error)
    }
}

/// A rival on an instance (both by place from 0) as MPS. The text is read by our own reader
/// before it is offered, and its columns, rows, non-zeros and linear relaxation are compared
/// with those of the rival.
///
/// # Errors
/// A rival that cannot be made or whose numbers MPS cannot say; a text that reads otherwise.
pub fn mps(scenario: &Scenario, place: (usize, usize)) -> Result<HandOver, Refusal> {
    let Loaded { model, complaints, .. } = load(scenario, place)?;
    let written = format::write(&model).map_err(|error| fault("rival", error.to_string()))?;
    let (again, warnings) = format::read(&written.text).map_err(|found| {
        let first = found.first().map_or("", |one| one.message.as_str());
        Refusal::Broken(format!("the MPS text cannot be read again: {first}"))
    })?;
    let mut notes = written.notes;
    notes.extend(warnings.into_iter().map(|warning| warning.message));
    notes.extend(compare(&model, &again).map_err(Refusal::Broken)?);
    Ok(HandOver { text: written.text, notes, complaints })
}

/// A rival on an instance with the smallest coefficients and bounds that are proved, as MPS: see
/// [`study::tightening`].
///
/// # Errors
/// A rival that cannot be made, or of which nothing can be made tighter.
pub fn tightened(scenario: &Scenario, place: (usize, usize)) -> Result<HandOver, Refusal> {
    let Loaded { complaints, .. } = load(scenario, place)?;
    let rivals = scenario.rivals.get(place.1).cloned().into_iter().collect();
    let alone = Scenario { rivals, ..scenario.clone() };
    let study = Study { kind: "tightening".to_owned(), fields: BTreeMap::new() };
    let mut run = StudyRun::new(&alone, place.0, &study);
    while !run.advance(SLICE) {}
    let Some(Report::Tightening(found)) = run.take().into_iter().next() else {
        return Err(fault("rival", "it cannot be tightened").into());
    };
    match found.rivals.into_iter().next() {
        Some(found) if !found.model.is_empty() => {
            let changed: u32 = found.families.iter().map(|one| one.tightened_by_relaxation).sum();
            let bounds = found.bounds;
            let notes = vec![format!(
                "coefficients of rows made smaller: {changed}; bounds made tighter: {bounds}"
            )];
            Ok(HandOver { text: found.model, notes, complaints })
        }
        _ => {
            let why =
                "no coefficient and no bound can be made tighter, or rows on demand would be lost";
            Err(fault("rival", why).into())
        }
    }
}

/// The journal notation of a rival, in one spelling.
///
/// # Errors
/// A rival whose notation cannot be read, or a model in MPS that is too large to be written out.
pub fn notation_text(scenario: &Scenario, rival: usize) -> Result<HandOver, Refusal> {
    printed(scenario, rival, notation::print)
}

/// The model section of a rival in LaTeX; [`notation::latex`] says how.
///
/// # Errors
/// A rival whose notation cannot be read, or a model in MPS that is too large to be written out.
pub fn latex(scenario: &Scenario, rival: usize) -> Result<HandOver, Refusal> {
    let mut handed = printed(scenario, rival, notation::latex)?;
    handed.notes.push("LaTeX needs \\usepackage{amsmath,amssymb}".to_owned());
    Ok(handed)
}

/// The answer to a page that hands a rival over.
pub(crate) fn handed_over(form: Form, job: LaneJob) -> Reply {
    let scenario = Scenario {
        instance: job.instance,
        rivals: vec![job.rival],
        run: job.settings,
        seed: job.seed,
        ..Scenario::default()
    };
    let made = match form {
        Form::Mps => mps(&scenario, (0, 0)),
        Form::Latex => latex(&scenario, 0),
        Form::Text => notation_text(&scenario, 0),
    };
    written(made.map(|HandOver { text, notes, .. }| (text, notes)), "rival")
}

/// A text with its notes as an answer to the page; or why there is none, and whose fault that is.
pub(crate) fn written(made: Result<(String, Vec<String>), Refusal>, place: &str) -> Reply {
    match made {
        Ok((text, notes)) => Reply::Written(Box::new(Written { text, notes })),
        Err(Refusal::Wrong(error)) => Reply::Failed(error),
        Err(Refusal::Broken(what)) => Reply::Failed(fault(place, what)),
    }
}

fn printed(
    scenario: &Scenario,
    rival: usize,
    print: fn(&notation::syntax::Formulation) -> String,
) -> Result<HandOver, Refusal> {
    let Some(rival) = scenario.rivals.get(rival) else {
        return Err(fault("scenario", "the scenario has no such rival").into());
    };
    let (text, mut notes) = match (&rival.from, &rival.text, &rival.mps) {
        (None, None, Some(mps)) => {
            let (model, _) = crate::mps::read(mps)?;
            explicit(&model).map_err(|why| fault("rival", why))?
        }
        _ => (formulation(rival)?.0, Vec::new()),
    };
    let parse = notation::parse(&text);
    let complaints: Vec<Complaint> =
        parse.diagnostics.iter().map(|found| of_diagnostic(&text, found)).collect();
    if complaints.iter().any(|complaint| complaint.error) {
        let message = "the notation cannot be read".to_owned();
        return Err(ErrorReport { message, complaints, place: "rival".to_owned() }.into());
    }
    let text_again = print(&parse.tree);
    if notation::parse(&text_again).tree != parse.tree {
        return Err(Refusal::Broken("what is printed reads as another formulation".to_owned()));
    }
    notes.extend(not_in_notation(rival, &text));
    Ok(HandOver { text: text_again, notes, complaints })
}

/// What a rival has that its printed notation does not say.
fn not_in_notation(rival: &Rival, text: &str) -> Vec<String> {
    let mut notes = Vec::new();
    let begins = |line: &&str| line.trim_start().starts_with(['#', '%']);
    let comments = text.lines().filter(begins).count();
    if comments > 0 {
        notes.push(format!("lines of comment are not in it: {comments}"));
    }
    if !rival.families.is_empty() {
        let names: Vec<&str> = rival.families.keys().map(String::as_str).collect();
        let names = names.join(", ");
        notes.push(format!("which families are in, on demand or out is not in it: {names}"));
    }
    notes
}

#[cfg(test)]
mod tests;
