//! Which data the rivals take from an instance, one line for each name that they use.

use notation::{Diagnostic, Found, Match};
use record::message::{BindJob, Binding, BindingOffer, FoundBy};
use record::scenario::letter;

use crate::load::formulation;
use crate::readings::Readings;

/// The bindings of all rivals in journal notation whose text is sound; none where the instance
/// cannot be read, which is complained of elsewhere.
pub(crate) fn bindings(job: &BindJob, readings: &mut Readings) -> Vec<Binding> {
    let Ok(reading) = readings.read(&job.instance) else { return Vec::new() };
    let Some(instance) = &reading.instance else { return Vec::new() };
    let mut bindings: Vec<Binding> = Vec::new();
    for (place, rival) in job.rivals.iter().enumerate() {
        let Ok((text, _)) = formulation(rival) else { continue };
        let parse = notation::parse(&text);
        let (checked, found) = notation::check(&parse.tree);
        if parse.diagnostics.iter().chain(&found).any(Diagnostic::is_error) {
            continue;
        }
        for line in notation::matches(&text, &checked, instance, &job.instance.bind) {
            let problem = problem(&line, &text, place);
            match bindings.iter_mut().find(|known| known.name == line.name) {
                Some(known) => join(known, &line, problem),
                None => bindings.push(binding(line, problem)),
            }
        }
    }
    bindings
}

fn binding(line: Match, problem: String) -> Binding {
    let offers = line.offers.into_iter().map(|offer| BindingOffer {
        name: offer.name,
        what: offer.what.to_owned(),
        fits: offer.fits,
    });
    Binding {
        name: line.name,
        meaning: line.meaning,
        taken: line.taken,
        found: found_by(line.found),
        reason: line.reason,
        problem,
        offers: offers.collect(),
    }
}

/// Another rival takes a datum under the same name.
fn join(known: &mut Binding, line: &Match, problem: String) {
    for offer in &mut known.offers {
        offer.fits &= line.offers.iter().any(|other| other.name == offer.name && other.fits);
    }
    if known.problem.is_empty() {
        known.problem = problem;
    }
    if known.taken.is_none() {
        known.taken.clone_from(&line.taken);
        known.found = found_by(line.found);
        known.reason.clone_from(&line.reason);
    }
}

fn found_by(found: Found) -> FoundBy {
    match found {
        Found::Named | Found::Default => FoundBy::Name,
        Found::Given => FoundBy::Person,
        Found::Assumed => FoundBy::Shape,
        Found::Nothing => FoundBy::Nothing,
    }
}

/// What is wrong with a line, with its place.
fn problem(line: &Match, text: &str, place: usize) -> String {
    if line.is_well() {
        return String::new();
    }
    let (number, _) = notation::line_column(text, line.at);
    let at = format!("line {number} of {}", letter(place));
    match &line.taken {
        None => format!("{at}: nothing suits {}; choose", line.name),
        Some(taken) => match line.offers.iter().find(|offer| offer.name == *taken) {
            Some(offer) => format!("{at}: {taken} is {}, which does not fit", offer.what),
            None => format!("{at}: the instance has no {taken}"),
        },
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use record::scenario::{InstanceText, Rival};

    const TABLES: &str = "depot\topening\nAshford\t62\nBirchley\t55\n\ndepot\tvillage\thaul\n\
        Ashford\tAbbey\t31\nAshford\tBarrow\t24\nBirchley\tAbbey\t92\nBirchley\tBarrow\t21\n";

    fn bound(bind: &[(&str, &str)]) -> Vec<Binding> {
        let rival = |id: &str| Rival { from: Some(id.to_owned()), ..Rival::default() };
        let bind = bind.iter().map(|&(name, of)| (name.to_owned(), of.to_owned())).collect();
        let instance = InstanceText { text: TABLES.to_owned(), bind, ..InstanceText::default() };
        let rivals = vec![rival("ufl/joined"), rival("ufl/split"), rival("no/such")];
        bindings(&BindJob { instance, rivals }, &mut Readings::default())
    }

    #[test]
    fn rivals_that_use_a_name_share_its_line() {
        let lines = bound(&[]);
        let names: Vec<_> = lines.iter().map(|l| (l.name.as_str(), l.taken.as_deref())).collect();
        let all = [("I", "depot"), ("J", "village"), ("f", "opening"), ("c", "haul")];
        assert_eq!(names, all.map(|(name, of)| (name, Some(of))));
        assert!(lines.iter().all(|l| l.found == FoundBy::Shape && l.problem.is_empty()));
        let reasons: Vec<_> = lines.iter().map(|l| l.reason.as_str()).collect();
        let labels = "the only set that holds the labels of";
        assert_eq!(reasons[0], format!("{labels} f, c"));
        assert_eq!(reasons[2], "the only table over 1 index that is free");
    }

    #[test]
    fn what_does_not_fit_names_its_line() {
        let lines = bound(&[("f", "haul"), ("c", "hall")]);
        assert_eq!(lines[2].problem, "line 6 of A: haul is a table, which does not fit");
        assert_eq!(lines[3].problem, "line 7 of A: the instance has no hall");
        assert_eq!(lines[2].found, FoundBy::Person);
    }

    #[test]
    fn without_an_instance_there_is_nothing_to_bind() {
        assert!(bindings(&BindJob::default(), &mut Readings::default()).is_empty());
    }
}
