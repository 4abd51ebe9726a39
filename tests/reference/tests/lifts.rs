//! Lift maps: a plan of one rival, in the natural variable of its family, is a plan of every other
//! with the further columns that go with it, and then keeps every row. On ten seeded instances of
//! every formulation.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]

use std::collections::BTreeSet;
use std::rc::Rc;

use catalogue::{Class, Entry, entries, generate};
use hullward_tests_reference::agree;
use hullward_tests_reference::round_trip::{instance, rival, solve};
use hullward_tests_reference::seeded::{extent, families};
use model::{LabelId, Model};
use proof::violations;
use study::lift::{Part, given, part};
use tree::{Settings, Status};

/// Rivals that do not have the natural variable of their family, and the one that they share with
/// the others in its place; none where all that they share is what the objective counts: bins,
/// colours, the end of all jobs, and the length of a path from its dual.
const INSTEAD: [(&str, &str); 18] = [
    ("ufl/radii", "y"),
    ("bins/arc-flow", ""),
    ("bins/patterns", ""),
    ("bins/heads", ""),
    ("bins/one-cut", ""),
    ("colouring/assignment", ""),
    ("colouring/ordered", ""),
    ("colouring/cliques", ""),
    ("colouring/representatives", ""),
    ("colouring/partial-order", ""),
    ("colouring/tight-partial-order", ""),
    ("colouring/stable-sets", ""),
    ("job-shop/time-indexed", ""),
    ("job-shop/time-indexed-split", ""),
    ("job-shop/ranks", ""),
    ("path/potentials", ""),
    // Of the copies of a plan one is let in.
    ("bins/ordered", ""),
    // Of two rounds through the same customers at the same cost the data list one.
    ("cvrp/routes", ""),
];

/// Whose plan it is: of a maximum cut that of the form by triangles, for where nothing is gained the
/// other may leave an edge across the sides uncounted; of jobs that are due that by starts, for the
/// others may end a job later than it need be while that costs nothing.
fn source<'e>(family: &str, all: &'e [Entry]) -> &'e str {
    let place = if ["max-cut", "tardiness"].contains(&family) { all.len() - 1 } else { 0 };
    &all[place].id
}

/// The variable in which a plan is put into a rival.
fn variable(entry: &Entry) -> &str {
    let other = INSTEAD.iter().find(|(id, _)| *id == entry.id);
    other.map_or(&entry.natural, |(_, variable)| variable)
}

/// Whether a solution keeps all members of the families over subsets, by trying them all; of sets
/// that are too large for it the search has proved as much by its own separation.
fn keeps_members(model: &Model, solution: &[f64]) -> bool {
    model.subset_families().iter().all(|family| {
        let ground: Vec<LabelId> = family.ground.clone();
        if ground.len() > 14 {
            return true;
        }
        (0_u32..1 << ground.len()).all(|set| {
            let members = ground.iter().enumerate().filter(|(i, _)| set >> i & 1 == 1);
            let subset: BTreeSet<LabelId> = members.map(|(_, &label)| label).collect();
            if !family.admits(&subset) {
                return true;
            }
            let row = family.member(&subset);
            let terms = row.entries.iter();
            let sum: f64 = terms.map(|(c, a)| model::nearest_f64(a) * solution[c.index()]).sum();
            let above = row.lower.is_none_or(|side| sum >= model::nearest_f64(&side) - 1e-6);
            above && row.upper.is_none_or(|side| sum <= model::nearest_f64(&side) + 1e-6)
        })
    })
}

/// A rival's lift of a plan: its value, after every row was looked at.
fn lifted(entry: &Entry, model: &Rc<Model>, plan: &Part, name: &str) -> f64 {
    let held = given(model, variable(entry), plan);
    assert_eq!(held.is_none(), variable(entry).is_empty(), "{} on {name}", entry.id);
    let held = held.map_or_else(|| Rc::clone(model), Rc::new);
    let found = solve(&held, Settings::default());
    assert_eq!(found.status, Status::Optimal, "{} on {name}", entry.id);
    for broken in violations(model, &found.solution) {
        let off = model::nearest_f64(&broken.amount);
        assert!(off <= 1e-6, "{} on {name}: {broken:?}", entry.id);
    }
    assert!(keeps_members(model, &found.solution), "{} on {name}", entry.id);
    found.incumbent.unwrap()
}

#[test]
fn a_plan_in_the_natural_variable_is_a_plan_of_every_rival() {
    let mut missed = Vec::new();
    for family in families() {
        let all: Vec<Entry> =
            entries().into_iter().filter(|e| e.family == family && !e.relaxation).collect();
        let size = extent(&family).optima[1];
        for (seed, class) in (1..=2).flat_map(|seed| Class::ALL.map(|class| (seed, class))) {
            let name = format!("{family}, {class:?}, {size}, seed {seed}");
            let on = instance(&generate(&family, size, class, seed).unwrap());
            let first = rival(source(&family, &all), &on);
            let best = solve(&first, Settings::default());
            for entry in &all {
                let plan = part(&first, variable(entry), &best.solution);
                let value = lifted(entry, &rival(&entry.id, &on), &plan, &name);
                if !agree(value, best.incumbent.unwrap(), 1e-6) {
                    missed.push(format!("{} on {name}: {value}, {:?}", entry.id, best.incumbent));
                }
            }
        }
    }
    assert!(missed.is_empty(), "{}", missed.join("\n"));
}
