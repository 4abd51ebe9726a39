//! Pitfalls are told by the command with their code, and `hullward help CODE` says what it means.

use std::process::Output;

use crate::launch::hullward;

fn out(output: &Output) -> String {
    String::from_utf8_lossy(&output.stdout).into_owned()
}

fn err(output: &Output) -> String {
    String::from_utf8_lossy(&output.stderr).into_owned()
}

#[test]
fn a_pitfall_is_told_with_its_code() {
    let scenario = "hullward = 1\n[instance]\ntext = '''\n\tAsh\tBirch\tCedar\nAsh\t0\t3\t4\nBirch\t2\t0\t6\nCedar\t5\t8\t0\n'''\n[[rival]]\ntext = '''\ndata\n  V\n  A ⊆ V × V\n  c_{i,j} ∀ (i,j) ∈ A\ndefinitions\n  n = |V|\nminimise\n  Σ_{(i,j) ∈ A} c_{i,j} x_{i,j}\nsubject to\n  Σ_{j : (i,j) ∈ A} x_{i,j} = 1 ∀ i ∈ V (leave)\n  Σ_{i : (i,j) ∈ A} x_{i,j} = 1 ∀ j ∈ V (enter)\n  u_i − u_j + n x_{i,j} ≤ n − 1 ∀ (i,j) ∈ A (order)\n  x_{i,j} ∈ {0,1} ∀ (i,j) ∈ A\n  1 ≤ u_i ≤ n ∀ i ∈ V\n'''\n";
    let told = err(&hullward(&["run", "-"], scenario));
    assert!(told.contains("warning: (order) asks the labels to rise along every drive"), "{told}");
    assert!(told.contains("[lint.depot-order]"), "{told}");
}

#[test]
fn help_on_a_code_says_what_it_means_with_an_example() {
    let told = out(&hullward(&["help", "lint.depot-order"], ""));
    assert!(told.starts_with("lint.depot-order\n\n"), "{told}");
    assert!(told.contains("\n-  u_i − u_j") && told.contains("\n+  u_i − u_j"), "{told}");
    let output = hullward(&["help", "lint.depot-ordre"], "");
    assert_eq!(output.status.code(), Some(2));
    assert!(err(&output).contains("did you mean lint.depot-order?"), "{}", err(&output));
}
