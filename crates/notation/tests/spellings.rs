//! The same formulation in the three spellings, mixed, and pasted from a paper: one tree, one
//! model.
#![allow(
    clippy::unwrap_used,
    clippy::expect_used,
    clippy::panic,
    reason = "a test ends where it fails"
)]

#[allow(dead_code, unreachable_pub, reason = "each test file uses its own part")]
use crate::common::{made, stops};
use hullward_notation::{parse, syntax::Formulation};

const UNICODE: &str = "
data
  V                                      stops
  A ⊆ V × V                              drives that are allowed
  c_{i,j}  ∀ (i,j) ∈ A                   minutes
  r ∈ V                                  depot
definitions
  n = |V|
minimise
  Σ_{(i,j) ∈ A} c_{i,j} x_{i,j}
subject to
  Σ_{j : (i,j) ∈ A} x_{i,j} = 1             ∀ i ∈ V                         (leave)
  Σ_{i : (i,j) ∈ A} x_{i,j} = 1             ∀ j ∈ V                         (enter)
  u_i − u_j + (n−1) x_{i,j} ≤ n − 2         ∀ (i,j) ∈ A : i ≠ r, j ≠ r      (order)
  x_{i,j} ∈ {0,1}                           ∀ (i,j) ∈ A
  1 ≤ u_i ≤ n − 1                           ∀ i ∈ V : i ≠ r
";

const PLAIN: &str = "
data
  V  stops
  A subseteq V cross V  drives that are allowed
  c_{i,j} forall (i,j) in A  minutes
  r in V  depot
definitions
  n = |V|
minimize
  sum_{(i,j) in A} c_{i,j} x_{i,j}
subject to
  sum_{j : (i,j) in A} x_{i,j} = 1     for all i in V   (leave)
  sum_{i : (i,j) in A} x_{i,j} = 1     forall j in V   (enter)
  u_i - u_j + (n-1) x_{i,j} <= n - 2   forall (i,j) in A : i != r, j != r   (order)
  x_{i,j} in {0,1}                     for (i,j) in A
  1 <= u_i <= n - 1                    for each i in V : i != r
";

const TEX: &str = r"
data
  V \text{stops}
  A \subseteq V \times V \text{drives that are allowed}
  c_{i,j} \forall (i,j) \in A \text{minutes}
  r \in V \text{depot}
definitions
  n = |V|
\begin{align}
\min \quad & \sum_{(i,j) \in A} c_{i,j} x_{i,j} \\
\text{s.t.} \quad
  & \sum_{j \colon (i,j) \in A} x_{i,j} = 1 & \forall i \in V \tag{leave} \\
  & \sum_{i : (i,j) \in A} x_{i,j} = 1 & \forall j \in V \tag{enter} \\
  & u_i - u_j + (n-1) x_{i,j} \leq n - 2 & \forall (i,j) \in A : i \neq r, j \ne r \tag{order} \\
  & x_{i,j} \in \{0,1\} & \forall (i,j) \in A \\
  & 1 \le u_i \le n-1 & \forall i \in V : i \neq r
\end{align}
";

const MIXED: &str = r"
data
  V  stops
  A ⊆ V \times V  drives that are allowed
  c_{i,j} forall (i,j) ∈ A  minutes
  r \in V  depot
definitions
  n = \lvert V \rvert
minimise
  \sum_{(i,j) ∈ A} c_{i,j} x_{i,j}
subject to
  Σ_{j : (i,j) in A} x_{i,j} = 1 ∀ i \in V (leave)
  sum_{i : (i,j) ∈ A} x_{i,j} = 1 \forall j ∈ V (enter);
  u_i − u_j + (n - 1) x_{i,j} <= n − 2, \quad (i,j) in A : i ≠ r, j \neq r (order)
  x_{i,j} ∈ \{0,1\} ∀ (i,j) ∈ A
  1 \le u_i ≤ n − 1   for all i in V : i ≠ r
";

fn tree(text: &str) -> Formulation {
    let parsed = parse(text);
    let lines: Vec<String> = parsed.diagnostics.iter().map(|d| d.line(text)).collect();
    assert!(lines.is_empty(), "{lines:#?}");
    parsed.tree
}

#[test]
fn three_spellings_and_their_mixture_are_one_tree() {
    let unicode = tree(UNICODE);
    assert_eq!(unicode, tree(PLAIN));
    assert_eq!(unicode, tree(TEX));
    assert_eq!(unicode, tree(MIXED));
}

#[test]
fn they_are_one_model() {
    let instance = stops(5);
    let model = made(UNICODE, &instance);
    assert_eq!((model.row_count(), model.columns().len()), (22, 24));
    assert_eq!(model, made(TEX, &instance));
    assert_eq!(model.row_name(model::RowId(0)), "leave[Ash]");
    assert_eq!(model.row_name(model::RowId(10)), "order[Birch → Cedar]");
    assert_eq!(model.column_name(model::ColumnId(0)), "x[Ash → Birch]");
    assert_eq!(model.column_name(model::ColumnId(20)), "u[Birch]");
}

/// As a paper prints it: letters without commas, sets left to the context, one numbered line
/// each, superscripts for commodities.
#[test]
fn a_block_from_a_paper_needs_only_the_data_lines() {
    let text = r"
data
  V
  A ⊆ V × V
  c_{ij} ∀ (i,j) ∈ A
  r ∈ V
definitions
  n = |V|
  K = V \setminus \{r\}
\begin{align*}
  \min \quad        & \sum_{(i,j)\in A} c_{ij}x_{ij}                                          &                              \\
  \text{subject to} & \sum_{j:(i,j)\in A} x_{ij} = 1,                                         & i \in V,                     \label{out} \\
                    & \sum_{i:(i,j)\in A} x_{ij} = 1,                                         & j \in V,                     \nonumber \\
                    & \sum_{j:(j,i)\in A} f_{ji}^{k} - \sum_{j:(i,j)\in A} f_{ij}^{k} = 0,      & i, k \in K, \; i \neq k,     \tag{transit} \\
                    & \sum_{j:(j,k)\in A} f_{jk}^k - \sum_{j:(k,j)\in A} f_{kj}^k = 1,          & k \in K,                     \tag{sink} \\
                    & 0 \le f_{ij}^k \le x_{ij},                                              & (i,j) \in A, \; k \in K,     \tag{3} \\
                    & x_{ij} \in \mathbb{B},                                                  & (i,j) \in A.
\end{align*}
";
    let model = made(text, &stops(4));
    assert_eq!(model.columns().len(), 12 + 12 * 3);
    assert_eq!(model.row_count(), 4 + 4 + 6 + 3 + 36);
    let names: Vec<&str> = model.families().iter().map(|f| f.name.as_str()).collect();
    assert_eq!(names, ["row 1", "row 2", "transit", "sink", "3"]);
    // f has the first domain line
    assert_eq!(model.column_name(model::ColumnId(0)), "f[Ash, Birch, Birch]");
}
