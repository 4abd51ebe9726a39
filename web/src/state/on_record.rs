//! The decision record of what the page has found, in each of its forms.

use record::handover::Stated;
use record::results::RivalResult;
use record::scenario::Scenario;
use record::study::Report;
use report::decision::{self, Evidence};
use report::study::over_instances;

use crate::state::document::Document;
use crate::state::studies::{KINDS, Shelf, scenario_of};

/// A form that the page writes by itself.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Paper {
    /// One HTML file.
    Html,
    /// Markdown.
    Markdown,
    /// JSON.
    Json,
    /// The drawings alone.
    Svg,
}

/// What a record is made of.
#[derive(Debug, Clone, Default, PartialEq)]
pub(crate) struct OnRecord {
    scenario: Scenario,
    results: Vec<RivalResult>,
    studies: Vec<(String, Report)>,
    stated: Stated,
    link: String,
}

impl OnRecord {
    /// What was found. Answers to an earlier state of the scenario are left out.
    pub(crate) fn of(document: &Document, results: Vec<RivalResult>, shelf: &Shelf) -> Self {
        let mut studies = Vec::new();
        for (kind, ..) in KINDS {
            let found = shelf.found.get(kind);
            let found = found.filter(|found| *found.of == *scenario_of(document, kind));
            studies.extend(found.iter().flat_map(|found| found.named()));
        }
        let over = over_instances(&studies);
        studies.extend(over.into_iter().map(|report| (String::new(), report)));
        let link = record::link::pack(&document.file()).unwrap_or_default();
        let link = if link.len() > record::link::OFTEN_CUT { String::new() } else { link };
        let (scenario, stated) = (document.scenario(), Stated::default());
        Self { scenario, results, studies, stated, link }
    }

    /// The text of its scenario.
    pub(crate) fn scenario_text(&self) -> String {
        record::file::print(&self.scenario)
    }

    /// With what it repeats of the scenario.
    pub(crate) fn with(self, stated: Stated) -> Self {
        Self { stated, ..self }
    }

    /// The record in a form.
    pub(crate) fn text(&self, paper: Paper) -> String {
        self.set(match paper {
            Paper::Html => decision::html,
            Paper::Markdown => decision::markdown,
            Paper::Json => decision::json,
            Paper::Svg => decision::svg,
        })
    }

    fn set(&self, set: fn(&Evidence<'_>) -> String) -> String {
        let rivals = &self.stated.rivals;
        let statements: Vec<String> = rivals.iter().map(|one| one.text.clone()).collect();
        let typeset: Vec<String> =
            rivals.iter().map(|one| decision::mathml(&one.typeset)).collect();
        set(&Evidence {
            scenario: &self.scenario,
            results: &self.results,
            studies: &self.studies,
            facts: &self.stated.facts,
            statements: &statements,
            typeset: &typeset,
            unit: &self.stated.unit,
            engine: env!("CARGO_PKG_VERSION"),
            link: &self.link,
        })
    }
}

#[cfg(test)]
mod tests {
    use std::rc::Rc;

    use super::*;
    use crate::demo::demo;
    use crate::state::studies::{Found, Part};

    fn record(document: &Document, shelf: &Shelf) -> OnRecord {
        OnRecord::of(document, Vec::new(), shelf)
    }

    #[test]
    fn a_record_holds_the_rivals_and_no_stale_answer() {
        let document = Document::open(demo());
        let mut shelf = Shelf::default();
        let left =
            |why: &str| Ok(vec![Report::Left { kind: "order".to_owned(), why: why.to_owned() }]);
        let now = scenario_of(&document, "order");
        let found = |of: &str, reports| {
            let part = Part { instance: String::new(), reports };
            Rc::new(Found { of: of.into(), parts: vec![part], left: 0 })
        };
        shelf.found.insert("order", found(&now, left("fresh")));
        shelf.found.insert("ladder", found("", left("stale")));
        let text = record(&document, &shelf).text(Paper::Markdown);
        assert!(text.contains("left out: fresh") && !text.contains("stale"), "{text}");
        assert!(text.contains("- B: ") && text.contains("#s1."), "{text}");
        assert!(record(&document, &shelf).text(Paper::Html).starts_with("<!doctype html>"));
    }

    #[test]
    fn orders_on_several_instances_are_summed_up_on_the_page_and_in_the_record() {
        use record::study::{Order, OrderLevel, Relation};
        let document = Document::open(demo());
        let rivals = ["A".to_owned(), "B".to_owned()];
        let (relation, level) = (Relation::NeverWeaker, OrderLevel::Observed);
        let order = Order { rivals, relation, level, ..Order::default() };
        let part = |day: &str| Part {
            instance: day.to_owned(),
            reports: Ok(vec![Report::Order(Box::new(order.clone()))]),
        };
        let of: Rc<str> = scenario_of(&document, "order").into();
        let found = Found { of, parts: vec![part("Monday"), part("Tuesday")], left: 0 };
        assert_eq!(found.over().len(), 1);
        let one = Found { parts: vec![part("Monday")], ..found.clone() };
        assert_eq!(one.over(), []);
        let mut shelf = Shelf::default();
        shelf.found.insert("order", Rc::new(found));
        let text = record(&document, &shelf).text(Paper::Markdown);
        assert!(text.contains("A stronger on 2 of 2 instances"), "{text}");
    }
}
