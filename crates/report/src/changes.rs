//! What a scenario that was opened changes of the one that was here: a teammate sends back what was
//! sent, with something altered, and this says what. Two scenarios without a rival in common are
//! strangers, of which nothing is said.

use record::file::print;
use record::scenario::{Rival, Scenario};

use crate::difference::{Lines, lines};
use crate::number::of;

/// One change: a sentence, and the lines of text that only one of the two has; the first is the one
/// that was here.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Change {
    /// The sentence.
    pub words: String,
    /// The lines.
    pub lines: Lines,
}

impl Change {
    fn plain(words: String) -> Self {
        Self { words, lines: Lines::default() }
    }

    /// A change of a text; none where both say the same.
    fn text(words: &str, before: &str, after: &str) -> Option<Self> {
        let lines = lines(before, after);
        (before != after).then(|| Self { words: words.to_owned(), lines })
    }
}

/// What is another, in the order of the page; empty where nothing is, or where the two are strangers.
#[must_use]
pub fn changes(before: &Scenario, after: &Scenario) -> Vec<Change> {
    let common =
        after.rivals.iter().any(|rival| twin(rival, &before.rivals).is_some()) || before == after;
    if !common {
        return Vec::new();
    }
    let mut found = Vec::new();
    if before.title != after.title {
        found.push(Change::plain(format!("The title was “{}”.", before.title)));
    }
    found.extend(instances(before, after));
    found.extend(rivals(before, after));
    found.extend(Change::text("Limits and rules are others:", &settings(before), &settings(after)));
    if before.studies != after.studies {
        found.push(Change::plain("Other studies are asked for.".to_owned()));
    }
    found.extend(Change::text("The notes are others:", &before.notes, &after.notes));
    found
}

fn instances(before: &Scenario, after: &Scenario) -> Vec<Change> {
    let (old, new) = (before.instances().count() as u64, after.instances().count() as u64);
    let mut found = Vec::new();
    if old != new {
        let words = format!("It has {}; there was {old}.", of(new, "instance"));
        found.push(Change::plain(words));
    }
    for (place, (one, other)) in before.instances().zip(after.instances()).enumerate() {
        let which = if new > 1 { format!("Instance {}", place + 1) } else { "The instance".into() };
        found.extend(Change::text(&format!("{which} has other data:"), &one.text, &other.text));
        if one.bind != other.bind {
            found.push(Change::plain(format!("{which} gives its data to other names.")));
        }
    }
    found
}

/// What a rival is known by: its title, or what it comes from.
fn name(rival: &Rival) -> &str {
    if rival.title.is_empty() { rival.from.as_deref().unwrap_or_default() } else { &rival.title }
}

fn twin<'a>(rival: &Rival, others: &'a [Rival]) -> Option<&'a Rival> {
    others.iter().find(|other| name(other) == name(rival))
}

fn rivals(before: &Scenario, after: &Scenario) -> Vec<Change> {
    let mut found = Vec::new();
    for rival in &before.rivals {
        if twin(rival, &after.rivals).is_none() {
            found.push(Change::plain(format!("{} is gone.", name(rival))));
        }
    }
    for rival in &after.rivals {
        match twin(rival, &before.rivals) {
            Some(old) => found.extend(within(old, rival)),
            None => found.push(Change::plain(format!("{} is new.", name(rival)))),
        }
    }
    let order = |rivals: &[Rival], others: &[Rival]| -> Vec<String> {
        let shared = rivals.iter().filter(|rival| twin(rival, others).is_some());
        shared.map(|rival| name(rival).to_owned()).collect()
    };
    if order(&before.rivals, &after.rivals) != order(&after.rivals, &before.rivals) {
        found.push(Change::plain("The rivals stand in another order.".to_owned()));
    }
    found
}

/// What is another within one rival.
fn within(before: &Rival, after: &Rival) -> Vec<Change> {
    let name = name(after);
    let text = |rival: &Rival| {
        rival.text.clone().or_else(|| rival.mps.clone()).or_else(|| rival.from.clone())
    };
    let (old, new) = (text(before).unwrap_or_default(), text(after).unwrap_or_default());
    let mut found: Vec<Change> =
        Change::text(&format!("{name} is written otherwise:"), &old, &new).into_iter().collect();
    let word = |state: Option<&record::scenario::FamilyState>| {
        state.map_or("as it comes", |state| state.word())
    };
    let families = before.families.keys().chain(after.families.keys());
    let families: std::collections::BTreeSet<&String> = families.collect();
    for family in families {
        let (old, new) = (before.families.get(family), after.families.get(family));
        if old != new {
            let words = format!("{name}: ({family}) is {}; it was {}.", word(new), word(old));
            found.push(Change::plain(words));
        }
    }
    if before.acts != after.acts {
        let acts = of(after.acts.len() as u64, "act");
        let words = format!("{name}: {acts} by hand; there were {}.", before.acts.len());
        found.push(Change::plain(words));
    }
    found
}

/// The settings as a scenario file writes them.
fn settings(scenario: &Scenario) -> String {
    print(&Scenario { run: scenario.run.clone(), seed: scenario.seed, ..Scenario::default() })
}

#[cfg(test)]
mod tests {
    use super::*;
    use record::scenario::{FamilyState, InstanceText};

    fn scenario() -> Scenario {
        let rival = |title: &str, from: &str| Rival {
            title: title.to_owned(),
            from: Some(from.to_owned()),
            ..Rival::default()
        };
        Scenario {
            title: "Round".to_owned(),
            instance: Some(InstanceText {
                text: "a 1\nb 2\n".to_owned(),
                ..InstanceText::default()
            }),
            rivals: vec![rival("Labels", "atsp/labels"), rival("Subtours", "atsp/subtours")],
            ..Scenario::default()
        }
    }

    fn told(before: &Scenario, after: &Scenario) -> Vec<String> {
        changes(before, after).into_iter().map(|change| change.words).collect()
    }

    #[test]
    fn the_same_scenario_and_a_stranger_are_not_spoken_of() {
        let mine = scenario();
        assert!(told(&mine, &mine).is_empty());
        let mut other = scenario();
        for rival in &mut other.rivals {
            rival.title += " of ships";
        }
        assert!(told(&mine, &other).is_empty());
    }

    #[test]
    fn each_kind_of_change_is_told() {
        let (before, mut after) = (scenario(), scenario());
        after.title = "Round, with Ann's limits".to_owned();
        after.instance.as_mut().unwrap().text = "a 1\nb 3\n".to_owned();
        after.rivals[1].families.insert("subtour".to_owned(), FamilyState::Out);
        after.rivals[0].title = "Flow".to_owned();
        after.run.nodes = 500;
        after.notes = "Why so many nodes?".to_owned();
        let words = told(&before, &after);
        let expected = [
            "The title was “Round”.",
            "The instance has other data:",
            "Labels is gone.",
            "Flow is new.",
            "Subtours: (subtour) is out; it was as it comes.",
            "Limits and rules are others:",
            "The notes are others:",
        ];
        assert_eq!(words, expected);
        let data = &changes(&before, &after)[1].lines.told;
        let data: Vec<(bool, &str)> =
            data.iter().map(|line| (line.first, line.text.as_str())).collect();
        assert_eq!(data, [(true, "b 2"), (false, "b 3")]);
    }

    #[test]
    fn another_order_is_told() {
        let (before, mut after) = (scenario(), scenario());
        after.rivals.reverse();
        assert_eq!(told(&before, &after), ["The rivals stand in another order."]);
    }
}
