//! What the page finds, held against a regression pack.

use record::pack::{Expected, Pack};
use record::results::RivalResult;
use record::scenario::Scenario;
use report::drift::beyond;

use crate::state::board::Board;
use crate::state::document::Document;
use crate::state::instances::name_on_record;
use crate::state::same::results;

/// A pack that was opened.
#[derive(Debug, Clone, PartialEq)]
pub(crate) struct Recorded {
    /// What was recorded.
    pub(crate) expected: Vec<Expected>,
    /// How far a value may be away, relative to its size.
    tolerance: f64,
    /// The engine that it was recorded with.
    pub(crate) engine: String,
    /// Each recorded instance: its name in the records and its text.
    instances: Vec<(String, String)>,
}

/// What there is to say of a rival on an instance.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) struct Held {
    /// The rival, and the instance where there are several.
    pub(crate) who: String,
    /// What lies outside of the records, a clause each.
    pub(crate) beyond: Vec<String>,
    /// What it was held against, and whether that is all of it, in words.
    pub(crate) words: String,
}

impl Recorded {
    /// A pack with its scenario.
    pub(crate) fn new(pack: Pack, scenario: &Scenario) -> Self {
        let all: Vec<_> = scenario.instances().collect();
        let name = |place| match all.len() {
            1 => String::new(),
            _ => name_on_record(all[place], place),
        };
        let instances =
            all.iter().enumerate().map(|(place, text)| (name(place), text.text.clone())).collect();
        let Pack { expected, tolerance, engine, .. } = pack;
        Self { expected, tolerance, engine, instances }
    }

    /// Every result of the page against what was recorded of its rival: of the same instance where
    /// its text is the same, else of all of them.
    pub(crate) fn hold(&self, document: &Document, board: &Board) -> Vec<Held> {
        let texts = document.instances();
        let several = texts.len() > 1;
        let found = results(document, board);
        let of = |text: &str| {
            let found = self.instances.iter().position(|(_, recorded)| recorded == text);
            found.map(|place| self.instances[place].0.as_str())
        };
        let named = texts.iter().enumerate().map(|(place, text)| {
            let name = if several { name_on_record(text, place) } else { String::new() };
            (name, of(&text.text))
        });
        let named: Vec<(String, Option<&str>)> = named.collect();
        found
            .iter()
            .map(|one| {
                let same = named.iter().find(|(name, _)| *name == one.instance);
                self.one(one, same.and_then(|(_, same)| *same))
            })
            .collect()
    }

    fn one(&self, one: &RivalResult, same: Option<&str>) -> Held {
        let now = Expected::of(one);
        let mut before: Vec<&Expected> =
            self.expected.iter().filter(|before| before.rival == now.rival).collect();
        if let Some(name) = same {
            let its = |before: &&Expected| self.instances.len() < 2 || before.instance == name;
            before.retain(its);
        }
        let who = if one.instance.is_empty() {
            now.rival.clone()
        } else {
            format!("{} on {}", now.rival, one.instance)
        };
        let solved = before.iter().any(|before| before.optimum.is_some());
        let words = match (before.is_empty(), one.root.is_some(), solved && now.optimum.is_none()) {
            (true, ..) => "nothing was recorded of it",
            (_, false, _) => "not run yet",
            (_, _, true) => "so far as recorded; its optimum is not found yet",
            _ if same.is_some() => "as recorded",
            _ => "within what was recorded",
        };
        // Sizes without a root are those of a rival that is not there yet.
        let beyond =
            if one.root.is_some() { beyond(&before, &now, self.tolerance) } else { Vec::new() };
        Held { who, beyond, words: words.to_owned() }
    }
}

#[cfg(test)]
mod tests {
    use record::results::{RootReport, SearchReport, Status};
    use record::scenario::InstanceText;

    use super::*;

    fn text(title: &str, text: &str) -> InstanceText {
        InstanceText { title: title.to_owned(), text: text.to_owned(), ..InstanceText::default() }
    }

    fn result(instance: &str, rows: u32, optimum: Option<f64>) -> RivalResult {
        RivalResult {
            instance: instance.to_owned(),
            rival: "A".to_owned(),
            rows,
            status: Status::Optimal,
            root: Some(RootReport { bound: Some(1.0), ..RootReport::default() }),
            search: optimum
                .map(|value| SearchReport { incumbent: Some(value), ..SearchReport::default() }),
            ..RivalResult::default()
        }
    }

    fn recorded() -> Recorded {
        let scenario = Scenario {
            instance: Some(text("Mon", "1")),
            further_instances: vec![text("Tue", "2")],
            ..Scenario::default()
        };
        let results = [result("Mon", 3, Some(5.0)), result("Tue", 9, Some(8.0))];
        Recorded::new(Pack::new("0", &scenario, &results), &scenario)
    }

    #[test]
    fn the_same_instance_is_held_to_its_own_record_and_another_to_all() {
        let recorded = recorded();
        let same = recorded.one(&result("Mon", 9, Some(5.0)), Some("Mon"));
        assert_eq!(same.beyond, ["rows 9, where 3 was recorded"]);
        let another = recorded.one(&result("Wed", 9, Some(5.0)), None);
        assert_eq!((another.beyond.len(), another.words.as_str()), (0, "within what was recorded"));
    }

    #[test]
    fn what_is_not_there_yet_is_not_held() {
        let recorded = recorded();
        let bare = RivalResult { rival: "A".to_owned(), ..RivalResult::default() };
        assert_eq!(recorded.one(&bare, Some("Mon")).words, "not run yet");
        let rooted = recorded.one(&result("Mon", 3, None), Some("Mon"));
        assert!(rooted.words.ends_with("not found yet"), "{rooted:?}");
        let stranger = RivalResult { rival: "B".to_owned(), ..bare };
        assert_eq!(recorded.one(&stranger, None).words, "nothing was recorded of it");
    }
}
