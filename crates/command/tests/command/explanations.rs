//! What the command says of rivals without a plan and without a bound.

use serde_json::Value;

use crate::launch::hullward;

const INSTANCE: &str = "
[instance]
text = '''
\tAsh\tBirch\tCedar\tElm
Ash\t0\t3\t14\t15
Birch\t2\t0\t6\t5
Cedar\t5\t8\t0\t9
Elm\t9\t3\t2\t0
'''
";

/// Position labels: `order` runs over `pairs`, x has this domain.
fn labels(pairs: &str, domain: &str) -> String {
    format!(
        "hullward = 1\n{INSTANCE}\n[[rival]]\ntext = '''
Labels

data
  V  stops
  A ⊆ V × V  drives
  c_{{i,j}}  ∀ (i,j) ∈ A  minutes
  r ∈ V  depot
definitions
  n = |V|
minimise
  Σ_{{(i,j) ∈ A}} c_{{i,j}} x_{{i,j}}
subject to
  Σ_{{j : (i,j) ∈ A}} x_{{i,j}} = 1  ∀ i ∈ V  (leave)
  Σ_{{i : (i,j) ∈ A}} x_{{i,j}} = 1  ∀ j ∈ V  (enter)
  u_i − u_j + (n−1) x_{{i,j}} ≤ n − 2  ∀ {pairs}  (order)
  {domain}  ∀ (i,j) ∈ A
  1 ≤ u_i ≤ n  ∀ i ∈ V
'''
"
    )
}

fn result(input: &str) -> Value {
    let output = hullward(&["run", "--json", "-"], input);
    let text = String::from_utf8(output.stdout).expect("text");
    serde_json::from_str(text.lines().next().unwrap_or_default()).expect("an object")
}

#[test]
fn a_depot_row_among_the_labels_is_named() {
    let wrong = labels("i, j ∈ V : (i,j) ∈ A", "x_{i,j} ∈ {0,1}");
    let result = result(&wrong);
    assert_eq!(result["status"], "infeasible");
    assert_eq!(result["root"]["status"], "optimal", "its relaxation has a point");
    // Every stop is entered, so there is a circle; along it the labels cannot rise for ever.
    assert_eq!(result["conflict"]["families"], serde_json::json!(["enter", "order"]));
    assert_eq!(result["conflict"]["level"], "smallest");
    let table = String::from_utf8(hullward(&["run", "-"], &wrong).stdout).expect("text");
    assert!(table.contains("(enter) and (order) cannot hold together; no smaller set"), "{table}");
}

#[test]
fn what_has_a_plan_has_no_conflict() {
    let right = labels("i, j ∈ V : (i,j) ∈ A, i ≠ r, j ≠ r", "x_{i,j} ∈ {0,1}");
    let result = result(&right);
    assert_eq!(result["status"], "optimal");
    assert!(result.get("conflict").is_none(), "{result}");
}

#[test]
fn rows_of_an_infeasible_relaxation_are_named() {
    let wrong = labels("i, j ∈ V : (i,j) ∈ A, i ≠ r, j ≠ r", "0 ≤ x_{i,j} ≤ 1/5");
    let result = result(&wrong);
    assert_eq!(result["status"], "infeasible");
    let rows = result["root"]["ray"].as_array().expect("rows");
    assert!(rows.iter().any(|row| row[0].as_str().is_some_and(|name| name.contains('['))));
    let table = String::from_utf8(hullward(&["run", "-"], &wrong).stdout).expect("text");
    assert!(table.contains("No point satisfies these rows"), "{table}");
}

#[test]
fn the_direction_of_an_unbounded_relaxation_is_named() {
    // Around an alternating circle of drives, up and down in turn, leave and enter hold on.
    let free = labels("i, j ∈ V : (i,j) ∈ A, i ≠ r, j ≠ r", "x_{i,j} ∈ ℝ");
    let free = format!("{free}families = {{ order = \"out\" }}\n");
    let result = result(&free);
    assert_eq!(result["status"], "unbounded");
    let columns = result["root"]["ray"].as_array().expect("columns");
    assert!(columns.iter().any(|column| column[1].as_f64().is_some_and(|step| step != 0.0)));
    let table = String::from_utf8(hullward(&["run", "-"], &free).stdout).expect("text");
    assert!(table.contains("falls without end along this direction: x["), "{table}");
}
