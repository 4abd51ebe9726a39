//! The rivals of a scenario on their way to models for a study, one slice at a time: each is read,
//! its rows are written in slices, and it is handed over.

use std::rc::Rc;

use record::results::ErrorReport;
use record::scenario::{Rival, Role, Scenario, letter};
use study::{Ground, Source, Subject};

use crate::load::{Loaded, Loading, formulation, job, states};
use crate::native::instance_title;
use crate::readings::Readings;

/// Non-zeros that are written at once where nobody waits.
const AT_ONCE: u64 = 1_000_000;

/// Rivals on their way. Those that do not become a model are left out.
#[derive(Debug)]
pub(crate) struct Gathering {
    scenario: Scenario,
    instance: usize,
    readings: Readings,
    next: usize,
    loading: Option<Loading>,
    /// Those that are there.
    pub(crate) subjects: Vec<Subject>,
}

impl Gathering {
    /// Nothing is read yet.
    pub(crate) fn new(scenario: Scenario, instance: usize) -> Self {
        let readings = Readings::default();
        Self { scenario, instance, readings, next: 0, loading: None, subjects: Vec::new() }
    }

    /// Goes on for about `ticks`; whether there is more to do.
    pub(crate) fn advance(&mut self, ticks: u64) -> bool {
        if self.next >= self.scenario.rivals.len() {
            return false;
        }
        let text = self.scenario.instances().nth(self.instance);
        if text.is_some_and(|text| self.readings.advance(text, ticks)) {
            return true;
        }
        match self.loading.take() {
            None => {
                let job = job(&self.scenario, (self.instance, self.next));
                match job.and_then(|job| Loading::begin(&mut self.readings, &job)) {
                    Ok(loading) => self.loading = Some(loading),
                    Err(_) => self.next += 1,
                }
            }
            Some(mut loading) => {
                if loading.advance(ticks) {
                    self.loading = Some(loading);
                } else {
                    let subject = loading.finish().and_then(|loaded| self.subject(loaded));
                    self.subjects.extend(subject);
                    self.next += 1;
                }
            }
        }
        true
    }

    /// Those that are there, with the title of their instance.
    pub(crate) fn ground(&mut self) -> Ground {
        let title = instance_title(&self.scenario, self.instance);
        Ground { title, subjects: std::mem::take(&mut self.subjects) }
    }

    /// The rivals on the next instance.
    pub(crate) fn next(&self) -> Self {
        Self::new(self.scenario.clone(), self.instance + 1)
    }

    /// What is being done, as a clause.
    pub(crate) fn doing(&self) -> String {
        format!("writing the rows of {}", letter(self.next))
    }

    fn subject(&mut self, loaded: Loaded) -> Result<Subject, ErrorReport> {
        let Loaded { title, model, .. } = loaded;
        let rival = &self.scenario.rivals[self.next];
        let entry = rival.from.as_deref().and_then(catalogue::find);
        let relaxation = rival.role == Some(Role::Relaxation)
            || entry.as_ref().is_some_and(|entry| entry.relaxation);
        let source = source(&self.scenario, self.instance, rival, &mut self.readings)?;
        Ok(Subject { letter: letter(self.next), title, model, entry, relaxation, source })
    }
}

/// What a rival's model was made of; none where it is one already.
fn source(
    scenario: &Scenario,
    instance: usize,
    rival: &Rival,
    readings: &mut Readings,
) -> Result<Option<Source>, ErrorReport> {
    let Some(text) = scenario.instances().nth(instance).filter(|_| rival.mps.is_none()) else {
        return Ok(None);
    };
    let reading = readings.read(text)?;
    let Some(data) = reading.instance.clone() else { return Ok(None) };
    let (words, _) = formulation(rival)?;
    Ok(Some(Source {
        text: Rc::from(words.as_str()),
        instance: Rc::new(data),
        bind: text.bind.clone(),
        states: states(rival),
    }))
}

/// The rivals that become a model on each instance, all at once.
pub(crate) fn grounds_at_once(scenario: &Scenario) -> Vec<Ground> {
    let on = |instance: usize| {
        let mut gathering = Gathering::new(scenario.clone(), instance);
        while gathering.advance(AT_ONCE) {}
        gathering.ground()
    };
    (0..scenario.instances().count().max(1)).map(on).collect()
}
