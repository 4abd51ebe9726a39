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
    if twins(&before.rivals, &after.rivals).is_empty() && before != after {
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

/// What a rival says, in whatever form it is given.
fn formulation(rival: &Rival) -> &str {
    let forms = [&rival.text, &rival.mps, &rival.from];
    forms.into_iter().flatten().next().map_or("", String::as_str)
}

/// Which rivals of before and after are the same one, by place: first those that say the same, by
/// title or else by their families; then those of the same title. So one that was renamed stays itself.
fn twins(before: &[Rival], after: &[Rival]) -> Vec<(usize, usize)> {
    type Same = fn(&Rival, &Rival) -> bool;
    let says: Same = |old, new| formulation(old) == formulation(new);
    let named: Same = |old, new| name(old) == name(new);
    let passes: [Same; 4] = [
        |old, new| formulation(old) == formulation(new) && name(old) == name(new),
        |old, new| formulation(old) == formulation(new) && old.families == new.families,
        says,
        named,
    ];
    let mut pairs: Vec<(usize, usize)> = Vec::new();
    for same in passes {
        for (place, new) in after.iter().enumerate() {
            let taken = |old: usize| pairs.iter().any(|pair| pair.0 == old);
            if pairs.iter().any(|pair| pair.1 == place) {
                continue;
            }
            let mut free = before.iter().enumerate().filter(|(old, _)| !taken(*old));
            if let Some((old, _)) = free.find(|(_, old)| same(old, new)) {
                pairs.push((old, place));
            }
        }
    }
    pairs.sort_by_key(|pair| pair.1);
    pairs
}

fn rivals(before: &Scenario, after: &Scenario) -> Vec<Change> {
    let pairs = twins(&before.rivals, &after.rivals);
    let gone = before
        .rivals
        .iter()
        .enumerate()
        .filter(|(place, _)| pairs.iter().all(|pair| pair.0 != *place));
    let mut found: Vec<Change> =
        gone.map(|(_, rival)| Change::plain(format!("{} is gone.", name(rival)))).collect();
    for (place, rival) in after.rivals.iter().enumerate() {
        match pairs.iter().find(|pair| pair.1 == place) {
            Some(&(old, _)) => found.extend(within(&before.rivals[old], rival)),
            None => found.push(Change::plain(format!("{} is new.", name(rival)))),
        }
    }
    if !pairs.is_sorted_by_key(|pair| pair.0) {
        found.push(Change::plain("The rivals stand in another order.".to_owned()));
    }
    found
}

/// What is another within one rival.
fn within(before: &Rival, after: &Rival) -> Vec<Change> {
    let (was, name) = (name(before), name(after));
    let mut found = Vec::new();
    if was != name {
        found.push(Change::plain(format!("{was} is called {name} now.")));
    }
    let words = format!("{name} is written otherwise:");
    found.extend(Change::text(&words, formulation(before), formulation(after)));
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
            rival.from = Some("cvrp/labels".to_owned());
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
            "Labels is called Flow now.",
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

    // A rival that a teammate renamed was told as one that is gone and one that is new.
    #[test]
    fn a_renamed_rival_is_the_same_one() {
        let (before, mut after) = (scenario(), scenario());
        after.rivals[0].title = "Subtours".to_owned();
        after.rivals[1].title = "Cuts of the round".to_owned();
        let words = ["Labels is called Subtours now.", "Subtours is called Cuts of the round now."];
        assert_eq!(told(&before, &after), words);
        // A copy beside it is new, whichever of the two stands first.
        let mut copied = scenario();
        copied.rivals.insert(0, Rival { title: "Copy".to_owned(), ..copied.rivals[0].clone() });
        assert_eq!(told(&before, &copied), ["Copy is new."]);
        // One that was written anew under its title is the same, one with neither is not.
        let mut anew = scenario();
        anew.rivals[0].from = Some("atsp/flow".to_owned());
        assert_eq!(told(&before, &anew), ["Labels is written otherwise:"]);
        anew.rivals[0].title = "Flow".to_owned();
        assert_eq!(told(&before, &anew), ["Labels is gone.", "Flow is new."]);
    }

    #[test]
    fn another_order_is_told() {
        let (before, mut after) = (scenario(), scenario());
        after.rivals.reverse();
        assert_eq!(told(&before, &after), ["The rivals stand in another order."]);
    }
}
