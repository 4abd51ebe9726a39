//! Why a rival has no plan or no bound, in sentences: families in conflict, rows of a Farkas
//! ray, the direction along which an objective has no end.

use record::results::{ConflictLevel, ConflictReport, RootReport, SearchReport, Status};

use crate::number::{count, of, short};

/// So many rows or columns are named; of the others the number is told.
const NAMED: usize = 6;
/// So many nodes without a plan are worth a word.
const MANY: u32 = 1_000;
/// So many things that are wrong with a plan are told before the others are asked for.
const TOLD: usize = 20;
/// So many characters of a name are shown.
const NAME: usize = 60;

/// What a root without an optimum shows, with what to look at; `None` for any other.
#[must_use]
pub fn root(root: &RootReport, maximise: bool) -> Option<String> {
    match root.status {
        Status::Infeasible => Some(rows(&root.ray)),
        Status::Unbounded => Some(direction(&root.ray, maximise)),
        _ => None,
    }
}

/// What to do about a search that a limit stopped before it found a plan; `None` for any other.
/// A contradiction that only shows once all of a tree is closed takes few nodes on few stops and
/// more than anybody has on many.
#[must_use]
pub fn search(search: &SearchReport) -> Option<String> {
    let in_vain = search.status == Status::Limit && search.incumbent.is_none();
    (in_vain && search.nodes >= MANY).then(|| {
        format!(
            "No plan was found in {}, which does not say that there is none. Run this rival on a \
             small part of the instance: a search that ends without a plan names the families that \
             cannot hold together.",
            of(u64::from(search.nodes), "node")
        )
    })
}

/// How large the tree will be, while that is not known, what became of a plan that was given, and
/// what the search suffers from: a sentence each.
#[must_use]
pub fn grown(search: &SearchReport) -> Vec<String> {
    let mut all = Vec::new();
    if let Some(plan) = &search.plan {
        let value = plan.value.map_or_else(String::new, |value| format!(": {}", short(value)));
        let word = if plan.feasible { "is one" } else { "is not taken" };
        all.push(format!("The plan that was given {word}{value}"));
        all.extend(plan.remarks.iter().take(TOLD).cloned());
    }
    if let Some(estimate) = &search.estimate {
        let [low, middle, high] = [estimate.low, estimate.middle, estimate.high].map(short);
        all.push(format!(
            "The whole tree may have about {middle} nodes; three estimates lie between {low} and {high}"
        ));
    }
    all.extend(search.diagnosis.iter().map(|found| found.words.clone()));
    all
}

/// What else is wrong with a plan that was given: a line that tells how much, and a sentence each;
/// `None` where [`grown()`] told all.
#[must_use]
pub fn further(search: &SearchReport) -> Option<(String, &[String])> {
    let plan = search.plan.as_ref()?;
    let rest = plan.remarks.get(TOLD..).filter(|rest| !rest.is_empty())?;
    let broken = u64::from(plan.broken);
    Some((format!("It breaks {} in all: show the other {}", of(broken, "row"), rest.len()), rest))
}

/// Families that cannot hold together, and what is known of the set.
#[must_use]
pub fn conflict(found: &ConflictReport) -> String {
    let names: Vec<String> =
        found.families.iter().map(|name| format!("({})", clipped(name))).collect();
    let together = match names.as_slice() {
        [] => {
            return "The domains of the variables alone leave no plan: look for a lower bound over \
                    an upper one, or bounds without a whole number between them."
                .to_owned();
        }
        [one] => format!("{one} alone cannot hold within the domains of the variables"),
        _ => format!("{} cannot hold together", listed(&names)),
    };
    let undecided = of(u64::from(found.nodes), "node");
    let known = match (found.level, names.len()) {
        (ConflictLevel::Smallest, 1) => String::new(),
        (ConflictLevel::Smallest, _) => "; no smaller set of families is in conflict".to_owned(),
        (ConflictLevel::Irreducible, _) => format!(
            "; without any one of them the others can. Whether a smaller set is in conflict was \
             not decided within {undecided}"
        ),
        (ConflictLevel::Undecided, _) => {
            format!("; whether each of them is needed was not decided within {undecided}")
        }
    };
    format!(
        "{together}{known}. Look at their signs, right-hand sides and index sets, or set one of \
         them to out."
    )
}

/// The rows of a Farkas ray: added up with their multipliers they contradict the bounds.
fn rows(ray: &[(String, f64)]) -> String {
    if ray.is_empty() {
        return "A variable or a row has a lower side over its upper one.".to_owned();
    }
    let times = |(name, y): &(String, f64)| format!("{} × {}", short(*y), clipped(name));
    format!(
        "No point satisfies these rows within the bounds of the variables; added up they contradict \
         them: {}. Look at their signs, right-hand sides and index sets.",
        few(ray, "row", times)
    )
}

/// The ray of an unbounded relaxation.
fn direction(ray: &[(String, f64)], maximise: bool) -> String {
    let runs = if maximise { "rises" } else { "falls" };
    if ray.is_empty() {
        return format!("The objective {runs} without end.");
    }
    let step = |(name, step): &(String, f64)| {
        let by = if *step > 0.0 { "up" } else { "down" };
        format!("{} {by} by {}", clipped(name), short(step.abs()))
    };
    format!(
        "The objective {runs} without end along this direction: {}. Give one of these variables a \
         bound, or write the row that limits it.",
        few(ray, "column", step)
    )
}

fn few(all: &[(String, f64)], noun: &str, tell: impl Fn(&(String, f64)) -> String) -> String {
    let named: Vec<String> = all.iter().take(NAMED).map(tell).collect();
    match all.len().saturating_sub(NAMED) {
        0 => named.join(", "),
        1 => format!("{} and 1 more {noun}", named.join(", ")),
        more => format!("{} and {} more {noun}s", named.join(", "), count(more as u64)),
    }
}

/// `a, b and c`.
fn listed(names: &[String]) -> String {
    match names {
        [] => String::new(),
        [one] => one.clone(),
        [first @ .., last] => format!("{} and {last}", first.join(", ")),
    }
}

/// A name that may be of any length.
fn clipped(name: &str) -> String {
    match name.char_indices().nth(NAME) {
        None => name.to_owned(),
        Some((end, _)) => format!("{}…", &name[..end]),
    }
}

#[cfg(test)]
mod tests {

    use super::*;

    fn found(families: &[&str], level: ConflictLevel) -> ConflictReport {
        let families = families.iter().map(|&name| name.to_owned()).collect();
        ConflictReport { families, level, nodes: 20_000, trials: 3 }
    }

    fn ray(names: &[&str]) -> Vec<(String, f64)> {
        names.iter().zip([1.0, -2.0].iter().cycle()).map(|(n, s)| ((*n).to_owned(), *s)).collect()
    }

    #[test]
    fn families_in_conflict_are_named_with_what_is_known() {
        let text = conflict(&found(&["leave", "enter", "order"], ConflictLevel::Smallest));
        assert!(text.starts_with("(leave), (enter) and (order) cannot hold together; no smaller"));
        let text = conflict(&found(&["leave", "order"], ConflictLevel::Irreducible));
        assert!(text.contains("not decided within 20,000 nodes. Look"), "{text}");
        let text = conflict(&found(&["leave", "order"], ConflictLevel::Undecided));
        assert!(text.contains("whether each of them is needed"), "{text}");
        let text = conflict(&found(&["order"], ConflictLevel::Smallest));
        assert!(text.starts_with("(order) alone cannot hold within the domains"), "{text}");
        assert!(conflict(&found(&[], ConflictLevel::Smallest)).starts_with("The domains"));
    }

    #[test]
    fn rows_and_columns_are_named_and_the_rest_counted() {
        let names = ["a", "b", "c", "d", "e", "f", "g", "h"];
        assert!(rows(&ray(&names[..2])).contains("them: 1 × a, −2 × b. Look"));
        assert!(rows(&ray(&names)).contains("−2 × f and 2 more rows."));
        assert!(rows(&[]).starts_with("A variable or a row"));
        let text = direction(&ray(&names[..2]), false);
        assert!(text.contains("falls without end along this direction: a up by 1, b down by 2."));
        assert!(direction(&ray(&names[..7]), true).contains("and 1 more column."));
        assert!(direction(&[], true).contains("rises"));
    }

    #[test]
    fn a_search_in_vain_says_what_shows_a_contradiction_sooner() {
        let vain = SearchReport {
            status: Status::Limit,
            bound: Some(163.3),
            incumbent: None,
            gap: None,
            nodes: 20_000,
            open: 7,
            iterations: 0,
            work: 0,
            solution: Vec::new(),
            checked: false,
            stopped: None,
            ..SearchReport::default()
        };
        let text = search(&vain).unwrap();
        assert!(
            text.starts_with("No plan was found in 20,000 nodes, which does not say"),
            "{text}"
        );
        assert_eq!(search(&SearchReport { nodes: 30, ..vain.clone() }), None);
        assert_eq!(search(&SearchReport { incumbent: Some(1.0), ..vain.clone() }), None);
        assert_eq!(search(&SearchReport { status: Status::Infeasible, ..vain }), None);
    }

    #[test]
    fn long_names_are_cut() {
        let long = "é".repeat(1_000_000);
        assert!(conflict(&found(&[&long], ConflictLevel::Smallest)).len() < 400);
    }
}
