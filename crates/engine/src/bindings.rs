//! Which data the rivals take from an instance, one line for each name that they use.

use std::collections::BTreeSet;

use instance::{Datum, Instance};
use notation::{Diagnostic, Found, Match};
use record::message::{BindJob, Binding, BindingOffer, FoundBy, Suit};
use record::scenario::{InstanceText, Rival, letter};

use crate::load::formulation;
use crate::readings::Readings;

/// The bindings of all rivals in journal notation whose text is sound; none where the instance
/// cannot be read, which is complained of elsewhere. Where no rival finds all of its data, or only by
/// guessing, the families that do.
pub(crate) fn bindings(job: &BindJob, readings: &mut Readings) -> (Vec<Binding>, Vec<Suit>) {
    let none = || (Vec::new(), Vec::new());
    let Ok(reading) = readings.read(&job.instance) else { return none() };
    let Some(instance) = &reading.instance else { return none() };
    let mut bindings: Vec<Binding> = Vec::new();
    let (mut asked, mut found) = (0, 0);
    for (place, rival) in job.rivals.iter().enumerate() {
        let Ok((text, _)) = formulation(rival) else { continue };
        let Some(lines) = matched(&text, &job.instance, instance) else { continue };
        asked += 1;
        found += usize::from(lines.iter().all(Match::is_well) && !guessed(&lines, instance));
        for line in lines {
            let problem = problem(&line, &text, place);
            match bindings.iter_mut().find(|known| known.name == line.name) {
                Some(known) => join(known, &line, problem),
                None => bindings.push(binding(line, problem)),
            }
        }
    }
    let mut suits = match found {
        0 if asked > 0 => suits(&job.instance, instance),
        _ => Vec::new(),
    };
    let own: BTreeSet<String> = job.rivals.iter().filter_map(family).collect();
    suits.retain(|suit| !own.contains(&suit.family));
    (bindings, suits)
}

/// Whether all that a rival takes is assumed, and tables of the instance are left that it does not
/// take: a table of five costs suits any family that wants one.
fn guessed(lines: &[Match], instance: &Instance) -> bool {
    let taken = |name: &str| lines.iter().any(|line| line.taken.as_deref() == Some(name));
    let named = lines.iter().any(|line| matches!(line.found, Found::Named | Found::Given));
    let left = |(name, datum): (&str, &Datum)| matches!(datum, Datum::Table { .. }) && !taken(name);
    !named && instance.data().any(left)
}

/// The family of the catalogue that a rival is taken from.
fn family(rival: &Rival) -> Option<String> {
    let entry = catalogue::find(rival.from.as_deref()?)?;
    Some(entry.family_title)
}

/// What each line of data of a text takes; `None` where the text has errors.
fn matched(text: &str, given: &InstanceText, instance: &Instance) -> Option<Vec<Match>> {
    let parse = notation::parse(text);
    let (checked, found) = notation::check(&parse.tree);
    let sound = !parse.diagnostics.iter().chain(&found).any(Diagnostic::is_error);
    sound.then(|| notation::matches(text, &checked, instance, &given.bind))
}

/// The families whose first formulation lacks one datum at most. What speaks for a family comes first:
/// data that are found, and twice as much tables that it asks for and headings that its own words hold;
/// against it what is to be chosen, and twice as much what is lacking.
fn suits(given: &InstanceText, instance: &Instance) -> Vec<Suit> {
    let (mut seen, mut suits) = (BTreeSet::new(), Vec::new());
    for entry in catalogue::entries() {
        if entry.relaxation || !seen.insert(entry.family) {
            continue;
        }
        let Some(lines) = matched(entry.text, given, instance) else { continue };
        let unwell: Vec<&Match> = lines.iter().filter(|line| !line.is_well()).collect();
        let lacking = unwell.iter().filter(|line| !line.offers.iter().any(|offer| offer.fits));
        let lacking: Vec<&&Match> = lacking.collect();
        let lacks = match lacking.as_slice() {
            [] => String::new(),
            [one] => format!("{}, {}", one.name, one.meaning),
            _ => continue,
        };
        let found = lines.iter().filter(|line| line.is_well() && line.found != Found::Default);
        let speaks = found.count() + 2 * (tables(&lines, instance) + headings(&lines));
        let against = unwell.len() + lacking.len();
        let suit = Suit { family: entry.family_title, lacks };
        suits.push((speaks as i64 - against as i64, suit));
    }
    suits.sort_by_key(|(rank, _)| -rank);
    suits.into_iter().map(|(_, suit)| suit).collect()
}

/// How many of the instance's tables the lines could take that have no default.
fn tables(lines: &[Match], instance: &Instance) -> usize {
    let is_table = |name: &str| matches!(instance.get(name), Some(Datum::Table { .. }));
    let takes = |line: &&Match| {
        let mut fitting = line.offers.iter().filter(|offer| offer.fits);
        line.found != Found::Default && fitting.any(|offer| is_table(&offer.name))
    };
    let there = instance.data().filter(|(name, _)| is_table(name)).count();
    lines.iter().filter(takes).count().min(there)
}

/// Letters at their begin in which words that mean the same agree.
const STEM: usize = 4;

/// How many names of the instance's data begin as a word of what some line means.
fn headings(lines: &[Match]) -> usize {
    let stem = |word: &str| word.to_lowercase().chars().take(STEM).collect::<String>();
    let words = |text: &str| {
        let words = text.split(|letter: char| !letter.is_alphabetic());
        words.map(stem).filter(|stem| stem.chars().count() == STEM).collect::<Vec<_>>()
    };
    let meant: BTreeSet<String> = lines.iter().flat_map(|line| words(&line.meaning)).collect();
    let offers = lines.first().map_or(&[][..], |line| line.offers.as_slice());
    offers.iter().filter(|offer| words(&offer.name).iter().any(|stem| meant.contains(stem))).count()
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

    const TABLES: &str = "depot\topening\nAshford\t62\nBirchley\t55\n\ndepot\tvillage\thaul\n\
        Ashford\tAbbey\t31\nAshford\tBarrow\t24\nBirchley\tAbbey\t92\nBirchley\tBarrow\t21\n";

    fn bound(bind: &[(&str, &str)]) -> Vec<Binding> {
        let rival = |id: &str| Rival { from: Some(id.to_owned()), ..Rival::default() };
        let bind = bind.iter().map(|&(name, of)| (name.to_owned(), of.to_owned())).collect();
        let instance = InstanceText { text: TABLES.to_owned(), bind, ..InstanceText::default() };
        let rivals = vec![rival("ufl/joined"), rival("ufl/split"), rival("no/such")];
        bindings(&BindJob { instance, rivals }, &mut Readings::default()).0
    }

    fn suited(text: &str, id: &str) -> Vec<(String, String)> {
        let rivals = vec![Rival { from: Some(id.to_owned()), ..Rival::default() }];
        let instance = InstanceText { text: text.to_owned(), ..InstanceText::default() };
        let (_, suits) = bindings(&BindJob { instance, rivals }, &mut Readings::default());
        suits.into_iter().map(|suit| (suit.family, suit.lacks)).collect()
    }

    #[test]
    fn where_no_rival_finds_its_data_the_families_that_do_are_told() {
        let found = suited(TABLES, "atsp/labels");
        assert_eq!(found[0], ("facility location, uncapacitated".to_owned(), String::new()));
        assert!(suited(TABLES, "ufl/split").is_empty(), "a rival that finds all needs no other");
        let items = "item\tvalue\tweight\nsaw\t5\t3\ndrill\t4\t2\nlamp\t3\t2\n";
        let found = suited(items, "atsp/labels");
        assert_eq!(found[0], ("knapsack".to_owned(), "b, what can be carried".to_owned()));
        let lots = "period\tdemand\tsetup\n1\t20\t100\n2\t30\t90\n3\t10\t80\n";
        assert!(suited(lots, "atsp/labels")[0].0.starts_with("lot sizing"));
        let jobs = "job\tduration\tdue\tweight\na\t3\t5\t1\nb\t4\t6\t2\nc\t2\t9\t1\n";
        let found = suited(jobs, "atsp/labels");
        assert_eq!(found[0], ("one machine, weighted tardiness".to_owned(), String::new()));
        let jobs = "job\tduration\tcost\na\t3\t1\nb\t4\t2\nc\t2\t1\n";
        assert!(suited(jobs, "atsp/labels").iter().take(3).any(|(of, _)| of == "one machine"));
    }

    /// A file of several constraints once stood beside the round trips of the demo: they took its only
    /// table over two indices for distances, and no other family was told.
    #[test]
    fn a_rival_that_only_guesses_does_not_hide_the_families_that_fit() {
        let items = "1\n\n3 2 50\n10 20 30\n1 2 3\n4 5 6\n5 9\n";
        let found = suited(items, "atsp/labels");
        assert_eq!(found[0], ("knapsack with several rows".to_owned(), String::new()));
        let named = "V = 0 1 2\nc:\n  0 1 2\n0 0 4 5\n1 3 0 6\n2 2 9 0\n";
        assert!(suited(named, "atsp/labels").is_empty(), "named data are no guess");
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
        assert_eq!(bindings(&BindJob::default(), &mut Readings::default()), (vec![], vec![]));
    }
}
