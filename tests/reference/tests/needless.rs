//! What the pitfalls call needlessly whole, is: on seeded instances of every family the optimum stays the same once
//! all variables that are named may be fractional, by HiGHS, which knows nothing of the theorem (Heller & Tompkins
//! 1956). Models with rows on demand are left to the others.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]

use std::collections::{BTreeMap, BTreeSet};

use hullward_tests_reference::agree;
use hullward_tests_reference::independent::{Verdict, highs};
use hullward_tests_reference::seeded::{extent, families, seeded};
use instance::Instance;
use model::{Model, VariableId};

/// The variables that are named, and the model.
fn named(text: &str, on: &Instance) -> Option<(Vec<VariableId>, Model)> {
    let (model, found) = notation::model(text, on, &BTreeMap::new(), &BTreeMap::new()).ok()?;
    if !model.subset_families().is_empty() {
        return None;
    }
    let said = found.iter().filter(|found| found.code == "lint.needless-integrality");
    let names = said.map(|found| {
        let from = found.message.strip_prefix("on this instance ").unwrap();
        from.split_once(" need not").unwrap().0.to_owned()
    });
    let names: BTreeSet<String> = names.collect();
    let variables = model.variables().iter().enumerate();
    let ids = variables.filter(|(_, variable)| names.contains(&variable.name));
    Some((ids.map(|(v, _)| VariableId::from_index(v)).collect(), model))
}

#[test]
fn optima_stay_where_named_variables_may_be_fractional() {
    let mut told: BTreeMap<String, u32> = BTreeMap::new();
    for family in families() {
        let sizes = extent(&family).optima;
        for (name, on) in seeded(&family, sizes, 3) {
            for entry in catalogue::entries().iter().filter(|entry| entry.family == family) {
                let Some((ids, model)) = named(entry.text, &on) else { continue };
                if ids.is_empty() {
                    continue;
                }
                *told.entry(entry.id.clone()).or_default() += 1;
                let [whole, free] =
                    [&model, &model.relaxed(&ids)].map(|model| highs(model, &[], true));
                let same = match (&whole, &free) {
                    (Verdict::Optimal(one), Verdict::Optimal(other)) => agree(*one, *other, 1e-7),
                    (one, other) => std::mem::discriminant(one) == std::mem::discriminant(other),
                };
                assert!(
                    same,
                    "{} on {name}: {whole:?}, with {ids:?} fractional {free:?}",
                    entry.id
                );
            }
        }
    }
    // Where the literature says so: assignments (Birkhoff), the radii of centres, families of agents.
    for id in ["atsp/assignment", "p-centre/radius", "grouping/assignment", "lines/multiple-choice"]
    {
        assert!(told.contains_key(id), "{id} is not told of: {told:?}");
    }
}
