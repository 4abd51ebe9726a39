//! Each diagnosis by scenarios: one that provokes it, and one that must not.

#![expect(clippy::panic, reason = "the helpers of these tests fail loudly")]

use hullward_engine::native::{USUAL_SLICE, Watch, run_rival};
use record::file;
use record::results::DiagnosisKind;

/// What is said of the search of a scenario's first rival, with its sentences.
fn said(text: &str) -> Vec<(DiagnosisKind, String)> {
    let parsed = file::parse(text);
    let scenario = parsed.scenario.unwrap_or_else(|| panic!("{:?}", parsed.complaints));
    let run = run_rival(&scenario, (0, 0), USUAL_SLICE, &mut |_| Watch::GoOn);
    let search = run.search.unwrap_or_else(|| panic!("{:?}", run.error));
    search.diagnosis.into_iter().map(|found| (found.kind, found.words)).collect()
}

fn held(kind: DiagnosisKind, provoking: &str, other: &str, figure: &str) {
    let told = said(provoking);
    let found = told.iter().find(|(own, _)| *own == kind);
    let (_, words) = found.unwrap_or_else(|| panic!("{kind:?} is not said: {told:?}"));
    assert!(words.contains(figure), "{words}");
    let told = said(other);
    assert!(told.iter().all(|(own, _)| *own != kind), "{told:?}");
}

const LABELS: &str = include_str!("scenarios/labels.toml");
const SUBTOURS: &str = include_str!("scenarios/subtours.toml");

/// Items of one size into bins: alike, or each bin a little dearer than the one before.
fn bins(costs: &str) -> String {
    let items: String = (1..=9).map(|k| format!("i{k} ")).collect();
    let kinds: String = (1..=6).map(|k| format!("b{k} ")).collect();
    let cost: String =
        costs.split(' ').enumerate().map(|(k, c)| format!("b{} {c}\n", k + 1)).collect();
    format!(
        "hullward = 1\n[instance]\nreader = \"blocks\"\ntext = '''\nI\n{items}\n\nB\n{kinds}\n\nc by b\n{cost}\n'''\n\
         [[rival]]\ntext = '''\nBins\ndata\n I  items\n B  bins\n c_b ∀ b ∈ B\nminimise\n Σ_{{b ∈ B}} c_b y_b\nsubject to\n \
         Σ_{{b ∈ B}} x_{{i,b}} = 1 ∀ i ∈ I (each)\n Σ_{{i ∈ I}} 6 x_{{i,b}} ≤ 10 y_b ∀ b ∈ B (room)\n \
         x_{{i,b}} ∈ {{0,1}} ∀ i ∈ I, b ∈ B\n y_b ∈ {{0,1}} ∀ b ∈ B\n'''\n[run]\nseconds = 0\nnodes = 400\n"
    )
}

/// 2 Σ x = n over n binaries: with n odd there is no plan, and each leaf shows it by itself (Jeroslow
/// 1974).
fn parity(n: u32) -> String {
    let items: String = (1..=n).map(|k| format!("i{k} ")).collect();
    format!(
        "hullward = 1\n[instance]\nreader = \"blocks\"\ntext = '''\nI\n{items}\n\nn = {n}\n'''\n\
         [[rival]]\ntext = '''\nParity\ndata\n I  things\n n\nminimise\n Σ_{{i ∈ I}} x_i\nsubject to\n \
         Σ_{{i ∈ I}} 2 x_i = n (half)\n x_i ∈ {{0,1}} ∀ i ∈ I\n'''\n[run]\nseconds = 0\n"
    )
}

/// Depots of one size: leaving one out costs next to nothing, opening one that is half empty costs half
/// of it; or customers who take whole depots.
fn depots(room: u32) -> String {
    let names: String = (1..=20).map(|k| format!("d{k} ")).collect();
    let costs: String = (1..=20).map(|k| format!("d{k} {}\n", 1000 + k * 7 % 9)).collect();
    format!(
        "hullward = 1\n[instance]\nreader = \"blocks\"\ntext = '''\nD\n{names}\n\nc by d\n{costs}\nq = {room}\n'''\n\
         [[rival]]\ntext = '''\nDepots\ndata\n D  depots\n c_d ∀ d ∈ D\n q\nminimise\n Σ_{{d ∈ D}} c_d y_d\nsubject to\n \
         x_d ≤ q y_d ∀ d ∈ D (room)\n Σ_{{d ∈ D}} x_d ≥ 45 (all)\n x_d ∈ [0,10] ∀ d ∈ D\n y_d ∈ {{0,1}} ∀ d ∈ D\n'''\n\
         [run]\nseconds = 0\nnodes = 120\nheuristics = []\n"
    )
}

/// A flow through switches, at least so much: one of 10⁻¹⁰ leaks through a switch of 10⁷ that is off by
/// less than any tolerance.
fn switches(big: &str, least: &str) -> String {
    format!(
        "hullward = 1\n[instance]\nreader = \"blocks\"\ntext = '''\nI\na b c d\n\nM = {big}\n\nl = {least}\n'''\n\
         [[rival]]\ntext = '''\nSwitches\ndata\n I  machines\n M\n l\nminimise\n Σ_{{i ∈ I}} y_i\nsubject to\n \
         x_i ≤ M y_i ∀ i ∈ I (switch)\n x_i ≥ l ∀ i ∈ I (least)\n x_i ∈ [0,5] ∀ i ∈ I\n y_i ∈ {{0,1}} ∀ i ∈ I\n'''\n\
         [run]\nseconds = 0\n"
    )
}

#[test]
fn a_weak_root() {
    held(DiagnosisKind::WeakRoot, LABELS, SUBTOURS, "% away from");
}

#[test]
fn a_late_plan() {
    let late = LABELS.replace("[run]", "[run]\nheuristics = []");
    held(DiagnosisKind::IncumbentLate, &late, LABELS, "nodes");
}

#[test]
fn a_plateau() {
    held(DiagnosisKind::Plateau, &bins("100 100 100 100 100 100"), LABELS, "stood still for");
}

#[test]
fn one_sided_branching() {
    held(DiagnosisKind::UnbalancedBranching, &depots(10), LABELS, "one-sided");
}

#[test]
fn symmetric_copies() {
    let alike = bins("100 100 100 100 100 100");
    held(DiagnosisKind::SymmetricCopies, &alike, LABELS, "labels apart");
}

#[test]
fn many_leaves_without_a_point() {
    held(DiagnosisKind::ManyInfeasibleLeaves, &parity(9), LABELS, "leaves have no point");
}

#[test]
fn numerics() {
    let (leaking, tight) = (switches("10000000", "0.0000000001"), switches("10", "1"));
    held(DiagnosisKind::Numerics, &leaking, &tight, "within the tolerance");
}
