//! What the figures say of the choice: which rival is ahead and by what, and of each other one why it is
//! not. Every sentence is made of figures that stand in the record; the choice itself is for people.

use record::results::{Proof, RivalResult, Status};
use record::study::{GrowthPair, Order, OrderLevel, Relation, Report};

use super::cited::{Cited, Marks};
use super::{Evidence, instances};
use crate::number::{count, of, short, ten_digits};

/// Notes that record a choice hold this word.
const DECIDED: &str = "Decided: ";

/// What a rival came to over all instances.
struct Standing<'r> {
    letter: &'r str,
    instances: u32,
    solved: u32,
    work: f64,
}

/// The sentences; none where fewer than two rivals were searched.
pub(super) fn choice(evidence: &Evidence<'_>, marks: &Marks) -> Vec<Cited> {
    let mut standings = standings(evidence.results);
    if standings.len() < 2 {
        return Vec::new();
    }
    let mut first = 0;
    for (place, one) in standings.iter().enumerate() {
        let best = &standings[first];
        if (one.solved > best.solved) || (one.solved == best.solved && one.work < best.work) {
            first = place;
        }
    }
    let ahead = standings.remove(first);
    let mut out = vec![(decided(evidence), Vec::new())];
    if let Some((place, pair)) = apart(evidence.studies) {
        let sentence =
            format!("{pair} are not the same problem: what one gains over the other says nothing.");
        out.push((sentence, marks.study(place).into_iter().collect()));
        return out;
    }
    if ahead.solved == 0 {
        let sentence = "No rival was solved within the limits: which is ahead is not known.";
        out.push((sentence.to_owned(), marks.results.clone()));
        return out;
    }
    out.push((is_ahead(&ahead), marks.results.clone()));
    out.extend(standings.iter().map(|other| why_not((evidence, marks), &ahead, other)));
    out
}

fn is_ahead(ahead: &Standing<'_>) -> String {
    let solved = match (ahead.solved, ahead.instances) {
        (1, 1) => "it was solved".to_owned(),
        (solved, all) => {
            let all = of(u64::from(all), "instance");
            format!("{} of {all} were solved", count(u64::from(solved)))
        }
    };
    format!(
        "On these figures {} is ahead: {solved} with {} non-zeros touched.",
        ahead.letter,
        short(ahead.work)
    )
}

fn decided(evidence: &Evidence<'_>) -> String {
    match evidence.scenario.notes.split_once(DECIDED) {
        Some((_, rest)) => {
            // Up to the end of its paragraph.
            let choice = rest.find("\n\n").map_or(rest, |end| &rest[..end]);
            let choice: Vec<&str> = choice.split_whitespace().collect();
            format!("Decided, as the notes say: {}", choice.join(" "))
        }
        None => "No choice is recorded: a line “Decided: …” in the notes is one.".to_owned(),
    }
}

/// The rivals that were searched, in order.
fn standings(results: &[RivalResult]) -> Vec<Standing<'_>> {
    let mut out: Vec<Standing<'_>> = Vec::new();
    for result in results.iter().filter(|result| !result.relaxation) {
        let Some(search) = &result.search else { continue };
        let place = out.iter().position(|one| one.letter == result.rival);
        let place = place.unwrap_or_else(|| {
            let letter = result.rival.as_str();
            out.push(Standing { letter, instances: 0, solved: 0, work: 0.0 });
            out.len() - 1
        });
        // Exact up to 2⁵³; more is not reached within the limits.
        #[allow(clippy::cast_precision_loss, reason = "counts of work are far below 2^53")]
        let work = search.work as f64;
        out[place].instances += 1;
        out[place].solved += u32::from(result.status == Status::Optimal);
        out[place].work += work;
    }
    out
}

/// A pair that the court tells apart, and the place of the study that does.
fn apart(studies: &[(String, Report)]) -> Option<(usize, String)> {
    studies.iter().enumerate().find_map(|(place, (_, report))| match report {
        Report::Equivalence(verdict) if verdict.equivalent == Some(false) => {
            Some((place, verdict.rivals.join(" and ")))
        }
        _ => None,
    })
}

/// Why a rival is not the one that is ahead.
fn why_not(
    (evidence, marks): (&Evidence<'_>, &Marks),
    ahead: &Standing<'_>,
    other: &Standing<'_>,
) -> Cited {
    let (mut why, mut cited) = (Vec::new(), marks.results.clone());
    if other.solved < ahead.solved {
        let instances = of(u64::from(other.instances), "instance");
        why.push(format!("{} of {instances} solved", count(u64::from(other.solved))));
    }
    if ahead.work > 0.0 {
        let least = if other.solved < ahead.solved { "at least " } else { "" };
        why.push(format!("{least}{} times the work", short(other.work / ahead.work)));
    }
    let pair = [ahead.letter, other.letter];
    for (place, (_, report)) in evidence.studies.iter().enumerate() {
        let before = why.len();
        match report {
            Report::Order(order) => why.extend(weaker(order, pair)),
            Report::Growth(growth) => {
                why.extend(growth.pairs.iter().filter_map(|one| grown(one, pair)));
            }
            _ => {}
        }
        if why.len() > before {
            cited.extend(marks.study(place));
        }
    }
    why.dedup();
    (format!("{} is behind it: {}.", other.letter, why.join("; ")), cited)
}

/// How the relaxation of the other stands to that of the one ahead.
fn weaker(order: &Order, [ahead, other]: [&str; 2]) -> Option<String> {
    let turned = order.rivals[0] == other && order.rivals[1] == ahead;
    if !turned && (order.rivals[0] != ahead || order.rivals[1] != other) {
        return None;
    }
    let level = match order.level {
        OrderLevel::Theorem => "theorem",
        OrderLevel::Certified => "certified",
        OrderLevel::Observed => "observed",
        OrderLevel::Undecided => return None,
    };
    let relation = match (order.relation, turned) {
        (Relation::NeverWeaker, false) | (Relation::NeverStronger, true) => {
            "its relaxation is no stronger than that"
        }
        (Relation::NeverWeaker, true) | (Relation::NeverStronger, false) => {
            "though its relaxation is no weaker than that"
        }
        (Relation::Equal, _) => "its relaxation is as strong as that",
        (Relation::Incomparable | Relation::Undecided, _) => return None,
    };
    Some(format!("{relation} of {ahead} ({level})"))
}

/// What the growth study says of the pair.
fn grown(pair: &GrowthPair, [ahead, other]: [&str; 2]) -> Option<String> {
    let same = pair.rivals.iter().all(|rival| rival == ahead || rival == other);
    let instances = of(u64::from(pair.instances), "instance");
    (same && !pair.distinguishable)
        .then(|| format!("though not to be told from it over {instances} of the growth study"))
}

/// Between which values the best possible plan of an instance lies, in the unit of the data.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Interval {
    /// The instance; empty where there is one.
    pub(super) instance: String,
    /// Whether larger is better.
    pub(super) maximise: bool,
    /// The strongest bound that exact arithmetic proved.
    pub(super) bound: f64,
    /// The best plan that was found; none where there is none.
    pub(super) plan: Option<f64>,
}

/// The interval of each instance; none where nothing is proved or rivals are not the same problem.
pub(super) fn intervals(evidence: &Evidence<'_>) -> Vec<Interval> {
    if apart(evidence.studies).is_some() {
        return Vec::new();
    }
    instances(evidence).iter().filter_map(|instance| interval(evidence, instance)).collect()
}

fn interval(evidence: &Evidence<'_>, instance: &str) -> Option<Interval> {
    let own = || evidence.results.iter().filter(|one| one.instance == instance);
    let maximise = own().next()?.maximise;
    let sign = if maximise { -1.0 } else { 1.0 };
    let best = |values: &mut dyn Iterator<Item = f64>, most: bool| {
        values.reduce(|best, value| {
            let better = if most { sign * value > sign * best } else { sign * value < sign * best };
            if better { value } else { best }
        })
    };
    let bound = best(&mut own().filter_map(proved), true)?;
    let mut plans =
        own().filter(|one| !one.relaxation).filter_map(|one| one.search.as_ref()?.incumbent);
    let plan = best(&mut plans, false);
    Some(Interval { instance: instance.to_owned(), maximise, bound, plan })
}

impl Interval {
    /// Whether bound and plan meet.
    pub(super) fn is_closed(&self) -> bool {
        self.plan.is_some_and(|plan| (plan - self.bound).abs() <= 1e-9 * (1.0 + plan.abs()))
    }

    /// The interval in a sentence.
    pub(super) fn words(&self, unit: &str) -> String {
        let unit = if unit.is_empty() { String::new() } else { format!(" {unit}") };
        let on =
            if self.instance.is_empty() { String::new() } else { format!(" on {}", self.instance) };
        let (verb, side) =
            if self.maximise { ("brings", "at most") } else { ("costs", "at least") };
        let bound = ten_digits(self.bound);
        let Some(plan) = self.plan else {
            return format!("The best possible plan{on} {verb} {side} {bound}{unit}: proved.");
        };
        let found = ten_digits(plan);
        if self.is_closed() {
            return format!("The best possible plan{on} {verb} {found}{unit}: proved.");
        }
        let (low, high) = if self.bound < plan { (&bound, &found) } else { (&found, &bound) };
        format!(
            "The best possible plan{on} {verb} between {low} and {high}{unit}; the best one found {verb} \
             {found}{unit}."
        )
    }
}

/// The bound of a rival that exact arithmetic proved: of its tree, else of its relaxation.
fn proved(result: &RivalResult) -> Option<f64> {
    let tree = result.search.as_ref().filter(|search| search.checked && !result.relaxation);
    let root = result.root.as_ref().filter(|root| root.proof != Proof::None);
    tree.and_then(|search| search.bound).or(root.and_then(|root| root.bound))
}
