//! The decision record: what was asked, what was found, and what would reopen it, on paper. It is
//! put together once as blocks and set as HTML or Markdown; every sentence comes from figures that
//! stand in it, and cites the piece of evidence where they stand by its number.

mod choice;
mod cited;
mod html;
mod json;
mod markdown;
mod mathml;
mod reopen;
mod svg;

use choice::intervals;
use cited::{Cited, Marks, plain};
pub(crate) use html::escaped;
pub use mathml::mathml;
use record::results::{Proof, RivalResult, Status};
use record::scenario::{Rival, Scenario, letter};
use record::study::Report;

use crate::number::{count, of, percent, short, ten_digits};
use crate::study::{Figure, Section, Table, and, overview, sections};

/// Stands at the end of every record.
const CAUTION: &str = "A plan that comes out of a model is a decision aid; driving, working-time, \
energy and safety rules of the place, and the people licensed to apply them, come first.";

/// Stands before the findings.
const TRACED: &str =
    "A number in brackets names the piece of evidence below that a sentence is made of.";

/// What a record is made of.
#[derive(Debug, Clone, Copy)]
pub struct Evidence<'e> {
    /// The scenario.
    pub scenario: &'e Scenario,
    /// What each rival gave, instance by instance.
    pub results: &'e [RivalResult],
    /// What studies found, with the instance where there are several.
    pub studies: &'e [(String, Report)],
    /// What was understood of the first instance, in sentences.
    pub facts: &'e [String],
    /// The notation of each rival; empty for a model in MPS.
    pub statements: &'e [String],
    /// The same set as mathematics by [`mathml()`]; none, or empty, where it is not set.
    pub typeset: &'e [String],
    /// The unit of the objective ("minutes"); empty where the data name none.
    pub unit: &'e str,
    /// The engine's version.
    pub engine: &'e str,
    /// The link's part behind the page's address; empty where it is too long.
    pub link: &'e str,
}

/// A piece of the record.
#[derive(Debug, Clone, PartialEq, Eq)]
enum Block {
    Title(String),
    Heading(String),
    Minor(String),
    /// The heading of a piece of evidence, with the number that sentences cite it by.
    Part(usize, String),
    Text(String),
    /// Markdown of somebody's hand.
    Notes(String),
    /// Sentences, each with the numbers of the evidence that it is made of.
    List(Vec<Cited>),
    Table(Table),
    /// A drawing, as SVG of our own.
    Figure(String),
    Code(String),
    /// A formulation set as mathematics, of our own making, and its notation.
    Formulation(String, String),
}

/// The record as one HTML file that needs nothing else and prints on A4 and Letter.
#[must_use]
pub fn html(evidence: &Evidence<'_>) -> String {
    html::document(&blocks(evidence))
}

/// The record as Markdown.
#[must_use]
pub fn markdown(evidence: &Evidence<'_>) -> String {
    markdown::document(&blocks(evidence))
}

/// The record as one JSON object: `hullward_record`, `engine`, `scenario`, `intervals` (between which
/// values the best possible plan of an instance lies: `bound` is proved in exact arithmetic, `plan` the
/// best that was found, both in `unit`) and `record`, an array of its pieces. A piece is an object whose
/// only field is its kind ("title", "heading", "subheading", "text", "notes", "list", "table", "figure" or
/// "code"). A table has `head` and `rows`, a figure is SVG.
#[must_use]
pub fn json(evidence: &Evidence<'_>) -> String {
    json::object(evidence, &intervals(evidence), &blocks(evidence))
}

/// The drawings of the record as one SVG, each below its heading; where there is none it says so.
#[must_use]
pub fn svg(evidence: &Evidence<'_>) -> String {
    svg::document(&drawings(evidence))
}

/// Every drawing with its heading.
fn drawings(evidence: &Evidence<'_>) -> Vec<(String, Figure)> {
    let mut sections: Vec<Section> = Vec::new();
    let mut instances: Vec<&String> =
        evidence.studies.iter().map(|(instance, _)| instance).collect();
    instances.dedup();
    for instance in instances {
        let own = evidence.studies.iter().filter(|(of, _)| of == instance);
        let own: Vec<&Report> = own.map(|(_, report)| report).collect();
        let all =
            overview(&own).into_iter().chain(own.into_iter().flat_map(crate::study::sections));
        let on = if instance.is_empty() { String::new() } else { format!(" ({instance})") };
        sections.extend(all.map(|one| Section { heading: one.heading.clone() + &on, ..one }));
    }
    sections.into_iter().filter_map(|one| Some((one.heading, one.figure?))).collect()
}

fn blocks(evidence: &Evidence<'_>) -> Vec<Block> {
    let marks = Marks::of(evidence);
    let mut out = question(evidence);
    out.push(Block::Heading("What was found".to_owned()));
    out.push(Block::Text(TRACED.to_owned()));
    out.push(Block::List(findings(evidence, &marks)));
    out.push(Block::Heading("The rivals side by side".to_owned()));
    for (instance, mark) in instances(evidence).iter().zip(&marks.results) {
        let on = if instance.is_empty() { "Results" } else { instance };
        out.push(Block::Part(*mark, on.to_owned()));
        out.push(Block::Table(results(evidence, instance)));
    }
    if !evidence.studies.is_empty() {
        out.push(Block::Heading("Evidence".to_owned()));
        let found = orders(evidence).into_iter().zip(&marks.orders);
        out.extend(found.flat_map(|((instance, found), mark)| section(&instance, *mark, found)));
        for ((instance, report), own) in evidence.studies.iter().zip(&marks.studies) {
            let found = sections(report).into_iter().zip(own);
            out.extend(found.flat_map(|(found, mark)| section(instance, *mark, found)));
        }
    }
    let choice = choice::choice(evidence, &marks);
    if !choice.is_empty() {
        out.push(Block::Heading("The choice".to_owned()));
        out.push(Block::List(choice));
    }
    out.push(Block::Heading("What reopens this decision".to_owned()));
    out.push(Block::List(reopen::conditions(evidence, &marks)));
    out.extend(statements(evidence));
    out.extend(reproduce(evidence));
    out.push(Block::Text(CAUTION.to_owned()));
    out
}

fn question(evidence: &Evidence<'_>) -> Vec<Block> {
    let title = &evidence.scenario.title;
    let title = if title.is_empty() { "Which formulation?".to_owned() } else { title.clone() };
    let mut out = vec![Block::Title(title)];
    let notes = evidence.scenario.notes.trim();
    if !notes.is_empty() {
        out.push(Block::Notes(notes.to_owned()));
    }
    if !evidence.facts.is_empty() {
        out.push(Block::Heading("The instance".to_owned()));
        out.push(Block::List(plain(evidence.facts.iter().cloned())));
    }
    out.push(Block::Heading("The rivals".to_owned()));
    let rivals = evidence.scenario.rivals.iter().enumerate();
    out.push(Block::List(plain(rivals.map(|(place, rival)| named(evidence, place, rival)))));
    out
}

/// A rival in a sentence: its title, where it is from, and the families that are not as published.
fn named(evidence: &Evidence<'_>, place: usize, rival: &Rival) -> String {
    let own = letter(place);
    let found = evidence.results.iter().find(|result| result.rival == own);
    let title = found.map_or(rival.title.as_str(), |result| result.title.as_str());
    let from = match (&rival.from, &rival.mps) {
        (Some(id), _) => format!(" ({id})"),
        (None, Some(_)) => " (a model in MPS)".to_owned(),
        (None, None) => " (own formulation)".to_owned(),
    };
    let states = rival.families.iter().map(|(name, state)| format!("{name} {}", state.word()));
    let states: Vec<String> = states.collect();
    let states = if states.is_empty() { String::new() } else { format!("; {}", states.join(", ")) };
    format!("{own}: {title}{from}{states}")
}

/// The sentences of the studies, and for each rival what its search came to.
fn findings(evidence: &Evidence<'_>, marks: &Marks) -> Vec<Cited> {
    let of_results = |result: &RivalResult| Some((outcome(result)?, marks.on(&result.instance)));
    let mut out: Vec<Cited> = evidence.results.iter().filter_map(of_results).collect();
    for interval in intervals(evidence) {
        out.push((interval.words(evidence.unit), marks.on(&interval.instance)));
    }
    out.extend(best_known(evidence).map(|sentence| (sentence, marks.results.clone())));
    for ((_, report), own) in evidence.studies.iter().zip(&marks.studies) {
        let verdicts =
            matches!(report, Report::Equivalence(_) | Report::Order(_) | Report::Growth(_));
        if verdicts {
            // A sentence a pair: of growth each stands in the first section.
            let most = if matches!(report, Report::Growth(_)) { usize::MAX } else { 1 };
            for (section, mark) in sections(report).into_iter().zip(own) {
                let some = section.verdict.into_iter().take(most);
                out.extend(some.map(|sentence| (sentence, vec![*mark])));
            }
        }
    }
    out
}

/// The value that the scenario gives, and how far each root bound is from it.
fn best_known(evidence: &Evidence<'_>) -> Option<String> {
    let best = evidence.scenario.run.best_known.filter(|_| evidence.results.len() > 1)?;
    let away = |result: &RivalResult| {
        let bound = result.root.as_ref()?.bound.filter(|_| best != 0.0)?;
        Some(format!("{} {}", result.rival, percent((best - bound).abs() / best.abs())))
    };
    let away: Vec<String> = evidence.results.iter().filter_map(away).collect();
    let best = ten_digits(best);
    Some(format!(
        "The best value known is {best}, as the scenario says; root bounds are away from it: {}.",
        and(&away)
    ))
}

/// What a rival came to on an instance, with the interval in which the best plan lies.
fn outcome(result: &RivalResult) -> Option<String> {
    let on =
        if result.instance.is_empty() { String::new() } else { format!(" on {}", result.instance) };
    let root = result.root.as_ref()?;
    let bound = root.bound.map_or_else(|| "no bound".to_owned(), ten_digits);
    let proved = if root.proof == Proof::Exact { ", checked" } else { "" };
    let search = match (&result.search, result.status) {
        (Some(search), Status::Optimal) => {
            let value = search.incumbent.or(search.bound).map_or_else(String::new, ten_digits);
            let checked = if search.checked { ", every leaf checked" } else { "" };
            format!("; optimum {value} after {}{checked}", of(u64::from(search.nodes), "node"))
        }
        (Some(search), Status::Infeasible) => {
            let nodes = of(u64::from(search.nodes), "node");
            let checked = if search.checked { ", every leaf checked" } else { "" };
            format!("; no plan at all, proved by {nodes}{checked}")
        }
        (Some(search), _) => match (search.bound, search.incumbent) {
            (Some(bound), Some(incumbent)) => format!(
                "; stopped after {}: the best plan lies between {} and {}",
                of(u64::from(search.nodes), "node"),
                ten_digits(bound),
                ten_digits(incumbent)
            ),
            _ => format!("; stopped after {}", of(u64::from(search.nodes), "node")),
        },
        (None, _) => String::new(),
    };
    Some(format!("{}{on}: root bound {bound}{proved}{search}.", result.rival))
}

fn instances(evidence: &Evidence<'_>) -> Vec<String> {
    let mut out: Vec<String> = Vec::new();
    for result in evidence.results {
        if !out.contains(&result.instance) {
            out.push(result.instance.clone());
        }
    }
    out
}

/// The table of an instance.
fn results(evidence: &Evidence<'_>, instance: &str) -> Table {
    let head = ["rival", "rows", "columns", "root bound", "bound", "best plan", "nodes", "status"];
    let mut table = Table::new(&head, &[0, 7]);
    let own = evidence.results.iter().filter(|result| result.instance == instance);
    table.rows = own.map(row).collect();
    table
}

fn row(result: &RivalResult) -> Vec<String> {
    let number = |value: Option<f64>| value.map_or_else(|| "–".to_owned(), short);
    let search = result.search.as_ref();
    let status = match result.status {
        Status::Optimal => "optimal",
        Status::Infeasible => "infeasible",
        Status::Unbounded => "unbounded",
        Status::Limit => "stopped by a limit",
        Status::Error => "could not be run",
    };
    let gap = search.and_then(|search| search.gap).filter(|gap| *gap > 0.0);
    let gap = gap.map_or_else(String::new, |gap| format!(", gap {}", percent(gap)));
    vec![
        format!("{} {}", result.rival, result.title),
        count(u64::from(result.rows)),
        count(u64::from(result.columns)),
        number(result.root.as_ref().and_then(|root| root.bound)),
        number(search.and_then(|search| search.bound)),
        number(search.and_then(|search| search.incumbent)),
        search.map_or_else(|| "–".to_owned(), |search| count(u64::from(search.nodes))),
        format!("{status}{gap}"),
    ]
}

/// The order of all rivals, instance by instance.
fn orders(evidence: &Evidence<'_>) -> Vec<(String, Section)> {
    let mut instances: Vec<&String> =
        evidence.studies.iter().map(|(instance, _)| instance).collect();
    instances.dedup();
    let mut out = Vec::new();
    for instance in instances {
        let own = evidence.studies.iter().filter(|(of, _)| of == instance);
        let own: Vec<&Report> = own.map(|(_, report)| report).collect();
        out.extend(overview(&own).map(|found| (instance.clone(), found)));
    }
    out
}

fn section(instance: &str, mark: usize, section: Section) -> Vec<Block> {
    let on = if instance.is_empty() { String::new() } else { format!(" ({instance})") };
    let mut out = vec![Block::Part(mark, format!("{}{on}", section.heading))];
    out.extend(section.faults.into_iter().chain(section.verdict).map(Block::Text));
    out.extend(section.figure.map(|figure| Block::Figure(figure.svg())));
    out.extend(section.table.map(Block::Table));
    out.extend(section.notes.into_iter().map(Block::Text));
    out
}

/// The notation of each rival.
fn statements(evidence: &Evidence<'_>) -> Vec<Block> {
    let texts = evidence.statements.iter().enumerate().filter(|(_, text)| !text.is_empty());
    let mut out: Vec<Block> = texts
        .flat_map(|(place, text)| {
            let set = evidence.typeset.get(place).filter(|set| !set.is_empty());
            let text = text.clone();
            let body = match set {
                Some(set) => Block::Formulation(set.clone(), text),
                None => Block::Code(text),
            };
            [Block::Minor(format!("Rival {}", letter(place))), body]
        })
        .collect();
    if !out.is_empty() {
        out.insert(0, Block::Heading("The formulations".to_owned()));
    }
    out
}

fn reproduce(evidence: &Evidence<'_>) -> Vec<Block> {
    let mut out = vec![
        Block::Heading("How to see the same".to_owned()),
        Block::Text(format!(
            "Made by Hullward {}. The scenario file gives the same numbers on every machine: \
             hullward run, or open it in the page.",
            evidence.engine
        )),
    ];
    if !evidence.link.is_empty() {
        out.push(Block::Text("Behind the page's address:".to_owned()));
        out.push(Block::Code(evidence.link.to_owned()));
    }
    out
}

#[cfg(test)]
mod tests;
