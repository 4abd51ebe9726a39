//! Families over subsets from text to tree: the relaxation with a family on demand, the one with
//! all its members written out, and the optimum, beside published values.

use std::fmt::Write as _;

use serde_json::Value;

use crate::launch::hullward;

/// Whether two nodes are joined, the first being the lower.
type Joined<'a> = &'a dyn Fn(usize, usize) -> bool;

/// What a rival came to.
struct Outcome {
    root: f64,
    checked: bool,
    value: f64,
    proved: bool,
}

/// Runs one formulation with its family `name` on demand, and, where `written`, with all its
/// members in: both relaxations must have the same bound.
fn run(instance: &str, text: &str, name: &str, written: bool) -> Outcome {
    let states = if written { &["on demand", "in"][..] } else { &["on demand"] };
    let mut scenario = format!("hullward = 1\n[instance]\ntext = '''\n{instance}'''\n");
    for state in states {
        write!(
            scenario,
            "[[rival]]\ntitle = \"{state}\"\ntext = '''\n{text}'''\nfamilies = {{ {name} = \"{state}\" }}\n"
        )
        .expect("a text");
    }
    let objects = objects(&scenario);
    assert_eq!(objects.len(), states.len(), "{scenario}");
    let number =
        |object: &Value, part: &str, field: &str| object[part][field].as_f64().expect("a number");
    for object in &objects {
        let same = number(object, "root", "bound") - number(&objects[0], "root", "bound");
        assert!(same.abs() < 1e-6, "{object}");
        assert_eq!(object["search"]["bound"], objects[0]["search"]["bound"], "{object}");
    }
    let first = &objects[0];
    Outcome {
        root: number(first, "root", "bound"),
        checked: first["root"]["checked"] == true,
        value: number(first, "search", "incumbent"),
        proved: first["search"]["checked"] == true && first["search"]["status"] == "optimal",
    }
}

fn objects(scenario: &str) -> Vec<Value> {
    let output = hullward(&["run", "-", "--json"], scenario);
    let told = String::from_utf8_lossy(&output.stderr).into_owned();
    assert_eq!(output.status.code(), Some(0), "{told}\n{scenario}");
    let text = String::from_utf8(output.stdout).expect("text");
    text.lines().map(|line| serde_json::from_str(line).expect("JSON")).collect()
}

fn holds(outcome: &Outcome, root: f64, value: f64) {
    assert!((outcome.root - root).abs() < 1e-6, "{} for {root}", outcome.root);
    assert!((outcome.value - value).abs() < 1e-6, "{} for {value}", outcome.value);
    assert!(outcome.checked && outcome.proved);
}

/// A list of labels under its name.
fn set(name: &str, labels: impl Iterator<Item = usize>) -> String {
    let labels: Vec<String> = labels.map(|i| format!("v{i}")).collect();
    format!("{name}\n{}\n\n", labels.join(" "))
}

fn edges(pairs: &[(usize, usize)]) -> String {
    let rows: String = pairs.iter().fold(String::new(), |mut rows, (i, j)| {
        let _ = writeln!(rows, "v{i} v{j}");
        rows
    });
    format!("E by i, j\n{rows}\n")
}

fn costs(pairs: &[(usize, usize, i32)]) -> String {
    let rows: String = pairs.iter().fold(String::new(), |mut rows, (i, j, c)| {
        let _ = writeln!(rows, "v{i} v{j} {c}");
        rows
    });
    format!("c by i, j\n{rows}\n")
}

/// Two triangles of cost 1 joined by edges of cost 5: 3 with degrees alone, 7 with odd cuts
/// (Edmonds 1965), in both ways to write these.
#[test]
fn odd_sets_of_a_matching() {
    let pairs: Vec<(usize, usize, i32)> = (0..6)
        .flat_map(|i| (i + 1..6).map(move |j| (i, j, if (i < 3) == (j < 3) { 1 } else { 5 })))
        .collect();
    let plain: Vec<(usize, usize)> = pairs.iter().map(|&(i, j, _)| (i, j)).collect();
    let instance = set("V", 0..6) + &edges(&plain) + &costs(&pairs);
    for odd in [
        "x(δ(S)) ≥ 1 ∀ S ⊂ V : |S| odd (odd)",
        "x(E(S)) ≤ (|S| − 1) / 2 ∀ S ⊂ V : |S| odd, |S| ≥ 3 (odd)",
    ] {
        let text = format!(
            "Perfect matching\ndata\n  V\n  E ⊆ V × V\n  c_{{i,j}} ∀ (i,j) ∈ E\nminimise\n  \
             Σ_{{(i,j) ∈ E}} c_{{i,j}} x_{{i,j}}\nsubject to\n  x(δ(v)) = 1 ∀ v ∈ V (degree)\n  \
             {odd}\n  x_{{i,j}} ∈ {{0,1}} ∀ (i,j) ∈ E\n"
        );
        holds(&run(&instance, &text, "odd", true), 7.0, 7.0);
    }
}

/// Stable sets with cliques on demand: the relaxation and the stability number of the
/// icosahedron (4 and 3), the queens of a 5 × 5 board (5 and 5) and the complement of the
/// circuit of 7 (7/3 and 2); Padberg 1973 for the rows.
#[test]
fn cliques_of_a_graph() {
    let near = |i: usize, j: usize| {
        let ((a, b), (c, d)) = ((i / 5, i % 5), (j / 5, j % 5));
        a == c || b == d || a.abs_diff(c) == b.abs_diff(d)
    };
    let icosahedron = |i: usize, j: usize| match (i, j) {
        (0, k) => (1..=5).contains(&k),
        (i @ 1..=5, j @ 1..=5) => (j - i) % 5 == 1 || (j - i) % 5 == 4,
        (i @ 1..=5, j @ 6..=10) => j - 6 == i - 1 || j - 6 == i % 5,
        (i @ 6..=10, j @ 6..=10) => (j - i) % 5 == 1 || (j - i) % 5 == 4,
        (6..=10, 11) => true,
        _ => false,
    };
    let circuit = |i: usize, j: usize| !matches!(j - i, 1 | 6);
    let graphs: [(usize, Joined<'_>, f64, f64); 3] =
        [(12, &icosahedron, 4.0, 3.0), (25, &near, 5.0, 5.0), (7, &circuit, 7.0 / 3.0, 2.0)];
    for (size, joined, root, value) in graphs {
        let pairs = (0..size).flat_map(|i| (i + 1..size).map(move |j| (i, j)));
        let pairs: Vec<(usize, usize)> = pairs.filter(|&(i, j)| joined(i, j)).collect();
        let text = "Stable set\ndata\n  V\n  E ⊆ V × V\nmaximise\n  Σ_{i ∈ V} z_i\nsubject to\n  \
                    Σ_{i ∈ C} z_i ≤ 1 ∀ C ⊆ V : |C| ≥ 2, C clique in E (clique)\n  \
                    z_i ∈ {0,1} ∀ i ∈ V\n";
        let outcome = run(&(set("V", 0..size) + &edges(&pairs)), text, "clique", size <= 16);
        holds(&outcome, root, value);
    }
}

/// The odd circuit of three terminals of Koch and Martin (SteinLib): 3 by undirected cuts, and
/// the optimum 4 by directed ones (Wong 1984).
#[test]
fn cuts_of_a_steiner_tree() {
    let pairs = [(1, 2), (1, 6), (2, 3), (2, 4), (2, 6), (3, 4), (4, 5), (4, 6), (5, 6)];
    let terminals = set("T", [1, 3, 5].into_iter());
    let undirected = "Cuts\ndata\n  V\n  T ⊆ V\n  E ⊆ V × V\nminimise\n  Σ_{(i,j) ∈ E} x_{i,j}\n\
                      subject to\n  x(δ(S)) ≥ 1 ∀ S ⊂ V : S ∩ T ≠ ∅, T ∖ S ≠ ∅ (cut)\n  \
                      x_{i,j} ∈ {0,1} ∀ (i,j) ∈ E\n";
    let nodes = set("V", 1..7) + &terminals;
    holds(&run(&(nodes.clone() + &edges(&pairs)), undirected, "cut", true), 3.0, 4.0);
    let both: Vec<(usize, usize)> = pairs.iter().flat_map(|&(i, j)| [(i, j), (j, i)]).collect();
    let directed = "Directed cuts\ndata\n  V\n  T ⊆ V\n  E ⊆ V × V\n  r ∈ V\nminimise\n  \
                    Σ_{(i,j) ∈ E} x_{i,j}\nsubject to\n  \
                    x(δ^-(S)) ≥ 1 ∀ S ⊂ V : r ∉ S, S ∩ T ≠ ∅ (cut)\n  \
                    x_{i,j} ∈ {0,1} ∀ (i,j) ∈ E\n";
    holds(&run(&(nodes + &edges(&both) + "r = v1\n"), directed, "cut", true), 4.0, 4.0);
}

/// The lots of Wolsey's four periods (69; Integer Programming, data from memory): (l,S) rows give
/// the hull (Barany, Van Roy, Wolsey 1984).
#[test]
fn lots_have_an_integral_hull() {
    let table = |name: &str, values: [i32; 4]| {
        let rows: String = (1..).zip(values).fold(String::new(), |mut rows, (t, value)| {
            let _ = writeln!(rows, "{t} {value}");
            rows
        });
        format!("{name} by t\n{rows}\n")
    };
    let instance = "T\n1 2 3 4\n\n".to_owned()
        + &table("d", [2, 4, 5, 1])
        + &table("f", [12, 20, 16, 8])
        + &table("p", [3, 3, 3, 3])
        + &table("h", [1, 2, 1, 1]);
    let text = include_str!("../../../catalogue/formulations/lot/l-s.txt");
    holds(&run(&instance, text, "\"l,S\"", true), 69.0, 69.0);
}

/// 60x₁ + … over a knapsack of 17: the relaxation with all covers is that with covers on
/// demand, and the optimum is the best by enumeration.
#[test]
fn covers_of_a_knapsack() {
    let weights = [9, 7, 6, 5, 5, 3, 2];
    let values = [31, 22, 20, 17, 15, 8, 4];
    let best = (0..128_usize).filter_map(|mask| {
        let sum = |of: &[i32; 7]| (0..7).filter(|i| mask >> i & 1 == 1).map(|i| of[i]).sum::<i32>();
        (sum(&weights) <= 17).then_some(sum(&values))
    });
    let best = f64::from(best.max().expect("the empty set fits"));
    let table = |name: &str, of: &[i32; 7]| {
        let rows: String = of.iter().enumerate().fold(String::new(), |mut rows, (i, value)| {
            let _ = writeln!(rows, "v{i} {value}");
            rows
        });
        format!("{name} by i\n{rows}\n")
    };
    let instance = set("I", 0..7) + &table("a", &weights) + &table("p", &values) + "b = 17\n";
    let text = "Covers\ndata\n  I\n  a_i ∀ i ∈ I\n  p_i ∀ i ∈ I\n  b\nmaximise\n  Σ_{i ∈ I} p_i z_i\n\
                subject to\n  Σ_{i ∈ C} z_i ≤ |C| − 1 ∀ C ⊆ I : Σ_{i ∈ C} a_i > b (cover)\n  \
                z_i ∈ {0,1} ∀ i ∈ I\n";
    let outcome = run(&instance, text, "cover", true);
    assert!(outcome.root >= best);
    holds(&outcome, outcome.root, best);
}

/// Rounds of vehicles that carry 7: capacity cuts with the rounded demand, undirected, and the
/// fractional ones inside the sets, against all of them written out.
#[test]
fn capacity_cuts() {
    let demand = [0, 3, 4, 2, 5, 3, 4];
    let place = [(0_i32, 0_i32), (3, 1), (4, 4), (-2, 5), (-5, 1), (-3, -4), (2, -5)];
    let pairs: Vec<(usize, usize, i32)> = (0..7)
        .flat_map(|i| (i + 1..7).map(move |j| (i, j)))
        .map(|(i, j)| {
            let ((a, b), (c, d)) = (place[i], place[j]);
            (i, j, (a - c).abs() + (b - d).abs())
        })
        .collect();
    let plain: Vec<(usize, usize)> = pairs.iter().map(|&(i, j, _)| (i, j)).collect();
    let mut loads = "q by i\n".to_owned();
    for (i, load) in demand.iter().enumerate() {
        let _ = writeln!(loads, "v{i} {load}");
    }
    let instance = set("V", 0..7) + &edges(&plain) + &costs(&pairs) + &loads + "\nr = v0\nQ = 7\n";
    let model = |cut: &str| {
        format!(
            "Capacity cuts\ndata\n  V\n  E ⊆ V × V\n  c_{{i,j}} ∀ (i,j) ∈ E\n  q_i ∀ i ∈ V\n  \
             r ∈ V\n  Q\nminimise\n  Σ_{{(i,j) ∈ E}} c_{{i,j}} x_{{i,j}}\nsubject to\n  \
             x(δ(v)) = 2 ∀ v ∈ V : v ≠ r (degree)\n  {cut} (capacity)\n  \
             x_{{i,j}} ∈ {{0,1}} ∀ (i,j) ∈ E : i ≠ r\n  x_{{r,j}} ∈ {{0,1,2}} ∀ j ∈ V : (r,j) ∈ E\n"
        )
    };
    let all = "∀ S ⊆ V ∖ {r} : |S| ≥ 1";
    let rounded = model(&format!("x(δ(S)) ≥ 2 ⌈Σ_{{i ∈ S}} q_i / Q⌉ {all}"));
    let inside = model(&format!("x(E(S)) ≤ |S| − ⌈Σ_{{i ∈ S}} q_i / Q⌉ {all}"));
    let plain = model(&format!("x(δ(S)) ≥ 2 Σ_{{i ∈ S}} q_i / Q {all}"));
    let [rounded, inside, plain] =
        [rounded, inside, plain].map(|text| run(&instance, &text, "capacity", true));
    assert!((rounded.root - inside.root).abs() < 1e-6);
    assert!(plain.root <= rounded.root + 1e-6 && rounded.root <= rounded.value);
    assert!((plain.value - rounded.value).abs() < 1e-6);
    assert!(rounded.proved && inside.proved && plain.proved);
}

/// Prize collecting on a tree: x(E(S)) ≤ y(S) − y_k for k in S (generalised subtours), the
/// closure with one forced element.
#[test]
fn generalised_subtours() {
    let pairs: Vec<(usize, usize)> = (0..6)
        .flat_map(|i| (i + 1..6).map(move |j| (i, j)))
        .filter(|(i, j)| (i * j + j) % 3 != 1)
        .collect();
    let prizes = "p by i\nv0 4\nv1 1\nv2 7\nv3 2\nv4 6\nv5 5\n\n";
    let weights: Vec<(usize, usize, i32)> =
        (3..).zip(&pairs).map(|(k, &(i, j))| (i, j, k * 7 % 5 + 2)).collect();
    let instance = set("V", 0..6) + &edges(&pairs) + &costs(&weights) + prizes;
    let text = "Prize collecting tree\ndata\n  V\n  E ⊆ V × V\n  c_{i,j} ∀ (i,j) ∈ E\n  p_i ∀ i ∈ V\n\
                maximise\n  Σ_{i ∈ V} p_i y_i − Σ_{(i,j) ∈ E} c_{i,j} x_{i,j}\nsubject to\n  \
                Σ_{(i,j) ∈ E} x_{i,j} = Σ_{i ∈ V} y_i − 1 (tree)\n  \
                x(E(S)) ≤ Σ_{i ∈ S} y_i − y_k ∀ k ∈ V, S ⊆ V : k ∈ S, |S| ≥ 2 (subtour)\n  \
                x_{i,j} ∈ {0,1} ∀ (i,j) ∈ E\n  y_i ∈ {0,1} ∀ i ∈ V\n";
    let outcome = run(&instance, text, "subtour", true);
    assert!(outcome.checked && outcome.proved && outcome.root >= outcome.value);
}
