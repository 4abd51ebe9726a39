//! LaTeX that reads back as the same tree.

use crate::{latex, parse};

fn printed(text: &str) -> String {
    let parsed = parse(text);
    assert!(parsed.diagnostics.is_empty(), "{:?}", parsed.diagnostics);
    let out = latex(&parsed.tree);
    let again = parse(&out);
    assert!(again.diagnostics.is_empty(), "{out}\n{:?}", again.diagnostics);
    assert_eq!(again.tree, parsed.tree, "{out}");
    out
}

#[test]
fn a_section_is_printed_as_a_paper_prints_it() {
    let text = "Labels (Miller, Tucker & Zemlin 1960)

data
  V                                      stops
  A ⊆ V × V                              a_b of all
  dist_{i,j}  ∀ (i,j) ∈ A                minutes
  r ∈ V
definitions
  n = |V|
minimise
  Σ_{(i,j) ∈ A} dist_{i,j} x_{ij}
subject to
  Σ_{j : (i,j) ∈ A} x_{ij} = 1          ∀ i ∈ V                         (leave)
  u_i − u_j + (n−1) x_{i,j} ≤ n − 2     ∀ (i,j) ∈ A : i ≠ r, j ≠ r      (order)
  Σ_{t=1}^n λ_t (1 − y_t) ≥ ⌈n/2⌉
  x_{i,j} ∈ {0,1}                       ∀ (i,j) ∈ A
  y_t ∈ ℝ_+  ∀ t ∈ {1..n}
";
    let wanted = r"Labels (Miller, Tucker \& Zemlin 1960)

\begin{align*}
\text{data}\quad & V && \text{stops} \\
& A \subseteq V \times V && \text{a\_b of all} \\
& \mathit{dist}_{i,j} && \forall (i,j) \in A \quad \text{minutes} \\
& r \in V \\
\text{definitions}\quad & n = \lvert V \rvert
\end{align*}
\begin{align*}
\text{minimise}\quad & \sum_{(i,j) \in A} \mathit{dist}_{i,j} \, x_{ij} \\
\text{subject to}\quad & \sum_{j : (i,j) \in A} x_{ij} = 1 && \forall i \in V \tag{leave} \\
& u_{i} - u_{j} + (n - 1) \, x_{i,j} \leq n - 2 && \forall (i,j) \in A : i \neq r, j \neq r \tag{order} \\
& \sum_{t = 1}^{n} \lambda_{t} \, (1 - y_{t}) \geq \left\lceil \frac{n}{2} \right\rceil \\
& x_{i,j} \in \{0, 1\} && \forall (i,j) \in A \\
& y_{t} \in \mathbb{R}_+ && \forall t \in \{1, \ldots, n\}
\end{align*}
";
    assert_eq!(printed(text), wanted);
}

#[test]
fn every_construct_reads_back() {
    let statements = [
        "Σ_{(i,j) ∈ A : i ∈ S, j ∈ S} x_{i,j} ≤ |S| − 1  ∀ S ⊂ V : 2 ≤ |S| ≤ n − 1  (l,S)",
        "x(δ⁺(S)) ≥ 1  ∀ ∅ ≠ S ⊊ V ∖ {r}",
        "x(E(S)) ≤ (|S| − 1)/2  ∀ S ⊆ V : |S| odd ∨ ¬ r ∈ S",
        "y_t ≤ min(a_t, b_t) max_{s ∈ T} d_{s−1} + (a b)/c^2 ∀ t ∈ T",
        "2 Σ_{i<j} x_{ij} (1 / n) − −y ≤ n mod 2 · (k)^2",
        "\\bar λ_i + c_{\\max} + x^+ + y^{\\text{in}} ≤ ∞",
        "x_i^k ∈ ℤ_{>0} ∀ i ∈ {v ∈ V : v ≠ r} ∪ {a, b}, k ∈ K",
        "Σ_{i ∈ C} x_i ≤ 1 ∀ C ⊆ V : C clique in E",
        "0 ≤ x ≤ 0.25 \\tag{\\ast}",
        "1 data ≤ 1",
        "z ∈ [0, 1]",
        "((a + b) c) (k) ≤ M (n-1)",
    ];
    for statement in statements {
        printed(&format!("minimise\n  (min(a, b)) x\nsubject to\n  x ≥ 0\n  {statement}\n"));
    }
}

#[test]
fn remarks_and_titles_keep_what_tex_reserves() {
    for remark in ["free", "50 % of a_b", "all $V_0$ & more", "in km", "for all"] {
        let out = printed(&format!("data\n  V \\mathrm{{{remark}}}\nminimise\n  x\n"));
        assert!(!out.contains(" & more"), "{out}");
    }
    assert!(
        printed("R&D #4, 10 % (a_b)\nminimise\n x\n").starts_with("R\\&D \\#4, 10 \\% (a\\_b)")
    );
    let pasted = parse("R\\&D\n\\begin{align}\\min x\\end{align}").tree;
    assert_eq!(pasted.title.as_deref(), Some("R&D"));
}

/// Found by mutation: each of these was read, and what was printed of it was not the same.
#[test]
fn what_mutation_found_reads_back() {
    let both = |text: &str| {
        let parsed = parse(text);
        assert!(parsed.diagnostics.is_empty(), "{text}: {:?}", parsed.diagnostics);
        for out in [latex(&parsed.tree), crate::print(&parsed.tree)] {
            let again = parse(&out);
            assert!(again.diagnostics.is_empty(), "{out}\n{:?}", again.diagnostics);
            assert_eq!(again.tree, parsed.tree, "{out}");
        }
    };
    // a remark that no \text holds: a brace, a backslash, a dollar, a word of the language
    for remark in ["a } b", "{ open", "costs \\$ 5", "for all", "\\text{ x", "', so ^ ~"] {
        both(&format!("data\n  V    {remark}\nminimise\n  x\n"));
    }
    // a list whose last name of several letters would be taken for a remark
    both("data\n  from,to,minutes\nminimise\n  x\n");
    // titles that would be taken for comments, or that are too long once escaped
    both("\\# 4\nminimise\n  x\n");
    both(&format!("{}\nminimise\n  x\n", "&".repeat(300)));
    // a relation in brackets, alone as the objective or in a list
    both("minimise\n  (a x ≥ b)\n");
    // two names that make one word of the language side by side
    both("minimise\n  x\nsubject to\n  subject · to ≥ 1\n");
    // a domain is no quantifier, so its letter takes no word apart
    both("min_ there is\n  s ∈ V\n");
}

/// `|S| − 1 '''` was read as a power, with a name made of primes for its exponent.
#[test]
fn a_prime_behind_what_is_no_name_is_an_error() {
    for line in ["|S| - 1 ''' ≤ 2", "(a + b)' ≤ 2", "2^{'} ≤ 1"] {
        let parsed = parse(&format!("minimise\n  x\nsubject to\n  {line}\n"));
        assert_eq!(parsed.diagnostics.len(), 1, "{line}");
    }
    printed("minimise\n  x\nsubject to\n  x' + y_i' + z_{i}^{\\prime} ≤ 2\n");
}
