//! Files of the public libraries, read by our readers and run on formulations: LP bounds and
//! optima by HiGHS against published values and values computed elsewhere.
//!
//! Published: OR-Library (Beasley 1990), its lists `uncapopt`, `mknap1` (the optimum stands in the
//! file) and `gapopt` (from memory, recomputed); CVRPLIB; DIMACS (from memory, recomputed). The LP
//! bounds were computed with HiGHS 1.16 by a generator that shares no code with this project.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]

use std::rc::Rc;

use hullward_tests_reference::independent::{Verdict, highs};
use hullward_tests_reference::round_trip::{formulation, rival};
use hullward_tests_reference::{agree, open_data};
use instance::Instance;
use model::Model;

const OR_LIBRARY: &str = "the OR-Library, J. E. Beasley, Brunel University";

fn part(file: &str, published: &str, part: usize) -> Option<Instance> {
    let text = open_data(file, published)?;
    let reading = instance::read_part(&text, None, Some(part));
    Some(reading.instance.unwrap_or_else(|| panic!("{file}: {:?}", reading.complaints)))
}

fn value(model: &Rc<Model>, whole: bool) -> f64 {
    match highs(model, &[], whole) {
        Verdict::Optimal(value) => value,
        other => panic!("{other:?}"),
    }
}

/// Bounds of the shipped rivals on `cap`: joined links computed, split links also published.
#[test]
fn sites_have_their_bounds() {
    for (file, joined, split) in [
        ("cap71", 844_807.587_5, 932_615.75),
        ("cap74", 859_463.45, 1_034_976.975),
        ("cap101", 659_341.15, 796_648.437_5),
        ("cap134", 648_426.3, 928_941.75),
    ] {
        let Some(instance) = part(&format!("cap/{file}.txt"), OR_LIBRARY, 1) else { return };
        let found = [rival("ufl/joined", &instance), rival("ufl/split", &instance)];
        let found = found.map(|model| value(&model, false));
        assert!(agree(found[0], joined, 1e-9), "{file}: {} for {joined}", found[0]);
        assert!(agree(found[1], split, 1e-9), "{file}: {} for {split}", found[1]);
    }
}

/// cap41 is cap71 with a capacity of 5000 at every site; its published optimum is higher.
#[test]
fn capacities_are_read() {
    let Some(instance) = part("cap/cap41.txt", OR_LIBRARY, 1) else { return };
    let text = "Capacities\ndata\n I  sites\n J  clients\n f_i ∀ i ∈ I\n c_{i,j} ∀ i ∈ I, j ∈ J\n d_j ∀ j ∈ J\n q_i ∀ i ∈ I\n\
        minimise\n Σ_{i ∈ I} f_i y_i + Σ_{i ∈ I, j ∈ J} c_{i,j} x_{i,j}\nsubject to\n Σ_{i ∈ I} x_{i,j} = 1 ∀ j ∈ J\n \
        Σ_{j ∈ J} d_j x_{i,j} ≤ q_i y_i ∀ i ∈ I (capacity)\n x_{i,j} ≤ y_i ∀ i ∈ I, j ∈ J (link)\n \
        0 ≤ x_{i,j} ≤ 1 ∀ i ∈ I, j ∈ J\n y_i ∈ {0,1} ∀ i ∈ I\n";
    let found = value(&formulation(text, &instance), true);
    assert!(agree(found, 1_040_444.375, 1e-6), "{found}");
}

#[test]
fn knapsacks_of_several_rows_have_bound_and_optimum() {
    for (at, bound, best) in [
        (1, 4_134.074_074_074, 3800.0),
        (2, 9_297.712_466_844, 8706.1),
        (4, 6_155.333_333_333, 6120.0),
        (5, 12_462.104_166_667, 12_400.0),
        (6, 10_672.345_878_168, 10_618.0),
        (7, 16_612.821_234_12, 16_537.0),
    ] {
        let Some(instance) = part("mknap/mknap1.txt", OR_LIBRARY, at) else { return };
        let model = rival("multi-knapsack/plain", &instance);
        let found = [value(&model, false), value(&model, true)];
        assert!(agree(found[0], bound, 1e-9) && agree(found[1], best, 1e-9), "{at}: {found:?}");
    }
}

#[test]
fn generalised_assignment_has_bound_and_optimum() {
    let text = "Assignment\ndata\n I  agents\n J  jobs\n c_{i,j} ∀ i ∈ I, j ∈ J\n a_{i,j} ∀ i ∈ I, j ∈ J\n b_i ∀ i ∈ I\n\
        maximise\n Σ_{i ∈ I, j ∈ J} c_{i,j} x_{i,j}\nsubject to\n Σ_{i ∈ I} x_{i,j} = 1 ∀ j ∈ J (one)\n \
        Σ_{j ∈ J} a_{i,j} x_{i,j} ≤ b_i ∀ i ∈ I (fit)\n x_{i,j} ∈ {0,1} ∀ i ∈ I, j ∈ J\n";
    for (file, at, bound, best) in [
        ("gap1", 1, 343.587_209_302, 336.0),
        ("gap1", 2, 339.376_568_327, 327.0),
        ("gap1", 4, 350.399_659_864, 341.0),
        ("gap1", 5, 335.764_035_835, 326.0),
        ("gap2", 1, 444.029_511_466, 434.0),
        ("gap2", 2, 446.916_188_161, 436.0),
        ("gap2", 3, 425.133_406_433, 420.0),
        ("gap2", 5, 431.828_193_833, 428.0),
        ("gap3", 1, 582.922_716_736, 580.0),
        ("gap3", 2, 569.245_555_556, 564.0),
        ("gap3", 3, 577.665_343_652, 573.0),
        ("gap3", 4, 574.202_799_479, 570.0),
        ("gap3", 5, 571.033_537_147, 564.0),
    ] {
        let Some(instance) = part(&format!("gap/{file}.txt"), OR_LIBRARY, at) else { return };
        let model = formulation(text, &instance);
        let found = [value(&model, false), value(&model, true)];
        assert!(
            agree(found[0], bound, 1e-9) && agree(found[1], best, 1e-9),
            "{file}-{at}: {found:?}"
        );
    }
}

/// Load flow with the vehicles fixed, from files of the TSPLIB form, by list and by coordinates,
/// and of the older form.
#[test]
fn routes_have_their_bounds() {
    let text = "Load flow\ndata\n V  stops\n A ⊆ V × V\n c_{i,j} ∀ (i,j) ∈ A\n r ∈ V\n q_i ∀ i ∈ V\n Q\n K\n\
        minimise\n Σ_{(i,j) ∈ A} c_{i,j} x_{i,j}\nsubject to\n Σ_{j : (i,j) ∈ A} x_{i,j} = 1 ∀ i ∈ V : i ≠ r\n \
        Σ_{i : (i,j) ∈ A} x_{i,j} = 1 ∀ j ∈ V : j ≠ r\n Σ_{j : (r,j) ∈ A} x_{r,j} = K\n \
        Σ_{j : (j,i) ∈ A} f_{j,i} − Σ_{j : (i,j) ∈ A} f_{i,j} = q_i ∀ i ∈ V : i ≠ r\n f_{i,j} ≤ Q x_{i,j} ∀ (i,j) ∈ A\n \
        f_{i,j} ≥ 0 ∀ (i,j) ∈ A\n x_{i,j} ∈ {0,1} ∀ (i,j) ∈ A\n";
    for (file, bound) in [
        ("P-n16-k8", 409.714_285_714),
        ("A-n32-k5", 646.05),
        ("E-n22-k4", 309.966_666_667),
        ("E-n23-k3", 480.843_333_333),
        ("E-n33-k4", 737.605),
    ] {
        let Some(instance) = part(&format!("vrp/{file}.vrp"), "CVRPLIB", 1) else { return };
        let found = value(&formulation(text, &instance), false);
        assert!(agree(found, bound, 1e-9), "{file}: {found} for {bound}");
    }
}

/// Representatives in the order of the file: a vertex stands for itself or for a later one that
/// it is not joined to.
#[test]
fn a_graph_has_its_bound_by_representatives() {
    let text = "Representatives\ndata\n V  vertices\n E ⊆ V × V\ndefinitions\n \
        N = {(u,v) ∈ V × V : u < v, (u,v) ∉ E, (v,u) ∉ E}\n F = {(i,j) ∈ V × V : i < j}\n\
        minimise\n Σ_{u ∈ V} y_u\nsubject to\n y_v + Σ_{u : (u,v) ∈ N} x_{u,v} = 1 ∀ v ∈ V\n \
        x_{u,v} + x_{u,w} ≤ y_u ∀ u ∈ V, (v,w) ∈ F : (u,v) ∈ N, (u,w) ∈ N, (v,w) ∈ E ∪ {(b,a) ∈ V × V : (a,b) ∈ E}\n \
        x_{u,v} ≤ y_u ∀ (u,v) ∈ N\n y_u ∈ {0,1} ∀ u ∈ V\n x_{u,v} ∈ {0,1} ∀ (u,v) ∈ N\n";
    for (file, bound) in [("myciel3", 2.8), ("myciel4", 2.934_782_609)] {
        let Some(instance) = part(&format!("colour/{file}.col"), "DIMACS graphs", 1) else {
            return;
        };
        let found = value(&formulation(text, &instance), false);
        assert!(agree(found, bound, 1e-8), "{file}: {found} for {bound}");
    }
}
