//! Worked examples of the literature, value by value: every node of a tree, every cut and every
//! bound that the source prints. Values from memory of the sources, each computed again with HiGHS
//! by a program that shares no code with this project.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]

use hullward_tests_reference::agree;
use hullward_tests_reference::independent::{Verdict, highs};
use hullward_tests_reference::round_trip::{formulation, instance, rival, root, solve};
use instance::Instance;
use model::{Number, RowId, nearest_f64};
use separate::general::{Aggregate, Frame, from_tableau};
use tree::{Settings, Status};

/// What the example holds no data for.
fn none() -> Instance {
    instance("Q = 1\n")
}

/// A text, further lines, and the value of its relaxation; `None` where it has no point.
type Nodes = &'static [(&'static str, Option<f64>)];

fn relaxation(text: &str) -> Option<f64> {
    let found = root(&formulation(text, &none()));
    match found.status {
        Status::Infeasible => None,
        Status::Optimal => found.bound,
        other => panic!("{other:?}: {text}"),
    }
}

/// The relaxations of all nodes, and the optimum.
fn example(text: &str, nodes: Nodes, optimum: f64) {
    for (lines, wanted) in nodes {
        let found = relaxation(&format!("{text}{lines}\n"));
        let same = match (found, wanted) {
            (Some(found), Some(wanted)) => agree(found, *wanted, 1e-9),
            (found, wanted) => found.is_none() && wanted.is_none(),
        };
        assert!(same, "{lines}: {found:?} for {wanted:?}\n{text}");
    }
    let found = solve(&formulation(text, &none()), Settings::default()).incumbent.unwrap();
    assert!(agree(found, optimum, 1e-9), "{found} for {optimum}\n{text}");
}

/// Wolsey, Integer Programming (1998): branch and bound, then two cuts of Gomory.
#[test]
fn an_example_of_wolsey() {
    let text = "Wolsey\n\nmaximise\n  4 a − b\nsubject to\n  7 a − 2 b ≤ 14 (first)\n  b ≤ 3 (second)\n  \
        2 a − 2 b ≤ 3 (third)\n  a, b ∈ ℤ_+\n";
    let nodes: Nodes = &[
        ("", Some(59.0 / 7.0)),
        ("  a ≤ 2", Some(7.5)),
        ("  a ≥ 3", None),
        ("  a ≤ 2\n  b ≤ 0", Some(6.0)),
        ("  a ≤ 2\n  b ≥ 1", Some(7.0)),
        ("  a ≤ 2 (cut)", Some(7.5)),
        ("  a ≤ 2 (cut)\n  a − b ≤ 1 (another)", Some(7.0)),
    ];
    example(text, nodes, 7.0);
}

/// Bertsimas & Tsitsiklis, Introduction to Linear Optimization (1997): two cuts, and a tree.
#[test]
fn an_example_of_bertsimas_and_tsitsiklis() {
    let text = "Bertsimas and Tsitsiklis\n\nminimise\n  a − 2 b\nsubject to\n  6 b − 4 a ≤ 9 (first)\n  \
        a + b ≤ 4 (second)\n  a, b ∈ ℤ_+\n";
    let nodes: Nodes = &[
        ("", Some(-3.5)),
        ("  b ≤ 2 (cut)", Some(-3.25)),
        ("  b ≤ 2 (cut)\n  5 b − 3 a ≤ 7 (another)", Some(-3.0)),
        ("  b ≥ 3", None),
        ("  b ≤ 2\n  a ≤ 0", Some(-3.0)),
        ("  b ≤ 2\n  a ≥ 1", Some(-3.0)),
    ];
    example(text, nodes, -3.0);
}

/// A row of a printed tableau: the text with the rows so far, by which of them it is multiplied (the
/// coefficients of the slacks), the vertex, and the cut that follows, `a x + b y ≤ c`.
type Tableau = (&'static str, &'static [(i32, i32)], [f64; 2], [f64; 3]);

/// Fractional cuts of Gomory as the books derive them: of a row whose slacks have no larger fraction than
/// its right-hand side the mixed-integer cut is the same, of the last two it implies theirs. The first four are
/// printed in Wolsey (1998) and in Bertsimas & Tsitsiklis (1997); the others were derived from the tableaus of
/// Nemhauser & Wolsey (1988) and of Winston by a program that shares no code with this project.
const PRINTED: [Tableau; 8] = [
    (
        "  7 a − 2 b ≤ 14 (one)\n  b ≤ 3 (two)",
        &[(1, 7), (2, 7)],
        [20.0 / 7.0, 3.0],
        [1.0, 0.0, 2.0],
    ),
    ("  2 a − 2 b ≤ 3 (one)\n  a ≤ 2 (two)", &[(-1, 2), (1, 1)], [2.0, 0.5], [1.0, -1.0, 1.0]),
    ("  6 b − 4 a ≤ 9 (one)\n  a + b ≤ 4 (two)", &[(1, 10), (2, 5)], [1.5, 2.5], [0.0, 1.0, 2.0]),
    ("  6 b − 4 a ≤ 9 (one)\n  b ≤ 2 (two)", &[(-1, 4), (3, 2)], [0.75, 2.0], [-3.0, 5.0, 7.0]),
    (
        "  2 b − a ≤ 4 (one)\n  5 a + b ≤ 20 (two)",
        &[(5, 11), (1, 11)],
        [36.0 / 11.0, 40.0 / 11.0],
        [0.0, 1.0, 3.0],
    ),
    (
        "  a + b ≤ 6 (one)\n  9 a + 5 b ≤ 45 (two)",
        &[(-5, 4), (1, 4)],
        [3.75, 2.25],
        [3.0, 2.0, 15.0],
    ),
    (
        "  2 b − a ≤ 4 (one)\n  5 a + b ≤ 20 (two)",
        &[(-1, 11), (2, 11)],
        [36.0 / 11.0, 40.0 / 11.0],
        [0.0, 2.0, 7.0],
    ),
    (
        "  a + b ≤ 6 (one)\n  9 a + 5 b ≤ 45 (two)",
        &[(9, 4), (-1, 4)],
        [3.75, 2.25],
        [7.0, 4.0, 35.0],
    ),
];

#[test]
fn cuts_of_gomory_follow_from_printed_rows() {
    let mut equal = 0;
    for (text, multipliers, vertex, wanted) in PRINTED {
        let text = format!("Row\n\nmaximise\n  a + b\nsubject to\n{text}\n  a, b ∈ ℤ_+\n");
        let model = formulation(&text, &none());
        let frame = Frame::new(&model);
        let mut sum = Aggregate::default();
        for (number, &(above, below)) in multipliers.iter().enumerate() {
            let row = model.row(RowId::from_index(number));
            let multiplier = Number::from(above) / Number::from(below);
            assert!(sum.add(&frame, (number, &row), &multiplier, &vertex), "{text}");
        }
        let cut = from_tableau(&sum, &frame, &vertex).unwrap_or_else(|| panic!("no cut: {text}"));
        let mut found = [0.0, 0.0, nearest_f64(cut.row.upper.as_ref().unwrap())];
        for (column, coefficient) in &cut.row.entries {
            found[column.index()] = nearest_f64(coefficient);
        }
        let scale = wanted[2] / found[2];
        let same = found.iter().zip(wanted).all(|(&one, other)| agree(one * scale, other, 1e-12));
        assert!(same && scale > 0.0 || implied(&text, found, wanted), "{found:?} for {wanted:?}");
        equal += usize::from(same);
    }
    assert_eq!(equal, 6);
}

/// Whether no point of a relaxation that keeps to one row breaks another.
fn implied(text: &str, [a, b, side]: [f64; 3], [c, d, most]: [f64; 3]) -> bool {
    let text = text.replace("a + b\n", &format!("{c} a + {d} b\n"));
    let found = relaxation(&format!("{text}  {a} a + {b} b ≤ {side} (cut)\n"));
    found.is_some_and(|found| found <= most + 1e-9)
}

/// Nemhauser & Wolsey, Integer and Combinatorial Optimization (1988).
#[test]
fn an_example_of_nemhauser_and_wolsey() {
    let text = "Nemhauser and Wolsey\n\nmaximise\n  7 a + 2 b\nsubject to\n  2 b − a ≤ 4 (first)\n  \
        5 a + b ≤ 20 (second)\n  2 a + 2 b ≥ 7 (third)\n  a, b ∈ ℤ_+\n";
    example(text, &[("", Some(332.0 / 11.0))], 28.0);
}

/// Hillier & Lieberman, Introduction to Operations Research: the four yes-or-no decisions.
#[test]
fn the_binary_example_of_hillier_and_lieberman() {
    let text = "California\n\nmaximise\n  9 a + 5 b + 6 c + 4 d\nsubject to\n  \
        6 a + 3 b + 5 c + 2 d ≤ 10 (money)\n  c + d ≤ 1 (one)\n  c ≤ a (with)\n  d ≤ b (too)\n  \
        a, b, c, d ∈ {0,1}\n";
    let nodes: Nodes = &[
        ("", Some(16.5)),
        ("  a = 0", Some(9.0)),
        ("  a = 1", Some(16.2)),
        ("  a = 1\n  b = 0", Some(13.8)),
        ("  a = 1\n  b = 1", Some(16.0)),
        ("  a = 1\n  b = 1\n  c = 0", Some(16.0)),
        ("  a = 1\n  b = 1\n  c = 1", None),
        ("  a = 1\n  b = 1\n  c = 0\n  d = 0", Some(14.0)),
        ("  a = 1\n  b = 1\n  c = 0\n  d = 1", None),
    ];
    example(text, nodes, 14.0);
}

/// Hillier & Lieberman: the example in which one variable need not be whole.
#[test]
fn the_mixed_example_of_hillier_and_lieberman() {
    let text = "Mixed\n\nmaximise\n  4 a − 2 b + 7 c − d\nsubject to\n  a + 5 c ≤ 10 (first)\n  \
        a + b − c ≤ 1 (second)\n  6 a − 5 b ≤ 0 (third)\n  2 c − a − 2 d ≤ 3 (fourth)\n  \
        a, b, c ∈ ℤ_+\n  d ≥ 0\n";
    let nodes: Nodes = &[
        ("", Some(14.25)),
        ("  a ≤ 1", Some(14.2)),
        ("  a ≥ 2", None),
        ("  a ≤ 1\n  b ≤ 1", Some(14.0 + 1.0 / 6.0)),
        ("  a ≤ 1\n  b ≥ 2", Some(12.0 + 1.0 / 6.0)),
        ("  a ≤ 0\n  b ≤ 1", Some(13.5)),
        ("  a = 1\n  b ≤ 1", None),
    ];
    example(text, nodes, 13.5);
}

/// Winston, Operations Research: tables and chairs, with the two cuts of its first tableau.
#[test]
fn the_tables_and_chairs_of_winston() {
    let text = "Tables and chairs\n\nmaximise\n  8 a + 5 b\nsubject to\n  a + b ≤ 6 (hours)\n  \
        9 a + 5 b ≤ 45 (wood)\n  a, b ∈ ℤ_+\n";
    let nodes: Nodes = &[
        ("", Some(41.25)),
        ("  a ≥ 4", Some(41.0)),
        ("  a ≤ 3", Some(39.0)),
        ("  a ≥ 4\n  b ≥ 2", None),
        ("  a ≥ 4\n  b ≤ 1", Some(365.0 / 9.0)),
        ("  a ≥ 5\n  b ≤ 1", Some(40.0)),
        ("  a = 4\n  b ≤ 1", Some(37.0)),
        ("  3 a + 2 b ≤ 15 (cut)", Some(40.0)),
    ];
    example(text, nodes, 40.0);
}

/// Hillier & Lieberman's two plants and a third; Beale's cycling example (1955); Cook, Kannan &
/// Schrijver's mixed set (1990), which no finite number of split cuts closes.
#[test]
fn three_known_small_programs() {
    let plants = "Wyndor\n\nmaximise\n  3 a + 5 b\nsubject to\n  a ≤ 4 (first)\n  2 b ≤ 12 (second)\n  \
        3 a + 2 b ≤ 18 (third)\n  a, b ≥ 0\n";
    example(plants, &[("", Some(36.0))], 36.0);
    let cycling = "Beale\n\nminimise\n  −3/4 a + 20 b − 1/2 c + 6 d\nsubject to\n  \
        1/4 a − 8 b − c + 9 d ≤ 0 (first)\n  1/2 a − 12 b − 1/2 c + 3 d ≤ 0 (second)\n  \
        c ≤ 1 (third)\n  a, b, c, d ≥ 0\n";
    example(cycling, &[("", Some(-1.25))], -1.25);
    let mixed = "Cook, Kannan and Schrijver\n\nmaximise\n  c\nsubject to\n  c ≤ a (first)\n  c ≤ b (second)\n  \
        a + b + c ≤ 2 (third)\n  a, b ∈ ℤ_+\n  c ≥ 0\n";
    example(mixed, &[("", Some(2.0 / 3.0))], 0.0);
}

/// Wolsey's knapsack 11, 6, 6, 5, 5, 4, 1 with room 19: each cover, its extension and its lifting
/// is as tight as it says, and 64 sets fit.
#[test]
fn the_covers_of_wolsey() {
    let weights = [11, 6, 6, 5, 5, 4, 1];
    let items: Vec<Vec<u32>> = (0_u32..1 << 7)
        .map(|set| (0..7).map(|i| set >> i & 1).collect::<Vec<u32>>())
        .filter(|set| set.iter().zip(weights).map(|(x, w)| x * w).sum::<u32>() <= 19)
        .collect();
    assert_eq!(items.len(), 64);
    let rows: [([u32; 7], u32); 6] = [
        ([1, 1, 1, 0, 0, 0, 0], 2),
        ([1, 1, 0, 0, 0, 1, 0], 2),
        ([1, 0, 0, 0, 1, 1, 0], 2),
        ([0, 0, 1, 1, 1, 1, 0], 3),
        ([1, 1, 1, 1, 1, 1, 0], 3),
        ([2, 1, 1, 1, 1, 1, 0], 3),
    ];
    let text = |row: &[u32; 7]| {
        let sum = |factors: &[u32]| {
            let names = ["a", "b", "c", "d", "e", "f", "g"];
            let terms = factors.iter().zip(names).map(|(factor, name)| format!("{factor} {name}"));
            terms.collect::<Vec<_>>().join(" + ")
        };
        format!(
            "Cover\n\nmaximise\n  {}\nsubject to\n  {} ≤ 19 (room)\n  a, b, c, d, e, f, g ∈ {{0,1}}\n",
            sum(row),
            sum(&weights)
        )
    };
    for (row, most) in rows {
        let value = |set: &Vec<u32>| set.iter().zip(row).map(|(x, a)| x * a).sum::<u32>();
        assert_eq!(items.iter().map(value).max(), Some(most), "{row:?}");
        example(&text(&row), &[], f64::from(most));
    }
}

/// Martello & Toth, Knapsack Problems (1990): seven items. The bound is Dantzig's before it is
/// rounded; the form by states has no gap.
#[test]
fn the_knapsack_of_martello_and_toth() {
    let (worth, weight) = ([70, 20, 39, 37, 7, 5, 10], [31, 10, 20, 19, 4, 3, 6]);
    let rows = |numbers: [u32; 7]| {
        numbers.iter().enumerate().map(|(i, n)| format!("i{i} {n}\n")).collect::<String>()
    };
    let names: Vec<String> = (0..7).map(|i| format!("i{i}")).collect();
    let text = format!(
        "I\n{}\n\nc by i\n{}\na by i\n{}\nb = 50\n",
        names.join(" "),
        rows(worth),
        rows(weight)
    );
    let data = instance(&text);
    let bound = |id: &str| root(&rival(id, &data)).bound.unwrap();
    assert!(agree(bound("knapsack/plain"), 107.55, 1e-9));
    assert!(agree(bound("knapsack/states"), 107.0, 1e-9));
    let found = solve(&rival("knapsack/plain", &data), Settings::default()).incumbent.unwrap();
    assert!(agree(found, 107.0, 1e-9), "{found}");
}

/// Steiner triples: nine points, and the fifteen of the projective space over two elements.
#[test]
fn steiner_triples() {
    let nine: Vec<[usize; 3]> =
        triples(9, |a, b, c| (a / 3 + b / 3 + c / 3) % 3 == 0 && (a + b + c) % 3 == 0);
    let fifteen = triples(15, |a, b, c| (a + 1) ^ (b + 1) == c + 1);
    assert_eq!((nine.len(), fifteen.len()), (12, 35));
    for (points, rows, bound, best) in [(9, nine, 3.0, 5.0), (15, fifteen, 5.0, 7.0)] {
        let names = |letter: char, count: usize| {
            (0..count).map(|i| format!("{letter}{i}")).collect::<Vec<_>>().join(" ")
        };
        let mut text =
            format!("I\n{}\n\nJ\n{}\n\nc by j\n", names('r', rows.len()), names('p', points));
        (0..points).for_each(|p| text.push_str(&format!("p{p} 1\n")));
        text.push_str("\na by i, j\n");
        for (r, row) in rows.iter().enumerate() {
            row.iter().for_each(|p| text.push_str(&format!("r{r} p{p} 1\n")));
        }
        let model = rival("cover/plain", &instance(&text));
        let found = root(&model).bound.unwrap();
        assert!(agree(found, bound, 1e-9), "{points}: {found}");
        let found = solve(&model, Settings::default()).incumbent.unwrap();
        assert!(agree(found, best, 1e-9), "{points}: {found}");
    }
}

fn triples(points: usize, wanted: impl Fn(usize, usize, usize) -> bool) -> Vec<[usize; 3]> {
    let mut out = Vec::new();
    for a in 0..points {
        for b in a + 1..points {
            out.extend((b + 1..points).filter(|&c| wanted(a, b, c)).map(|c| [a, b, c]));
        }
    }
    out
}

/// Wolsey's six clients and five depots, profits turned round: joined links 36.5, split links 28,
/// which is the optimum.
#[test]
fn the_depots_of_wolsey() {
    let profits = [
        [6, 2, 1, 3, 5],
        [4, 10, 2, 6, 1],
        [3, 2, 4, 1, 3],
        [2, 0, 4, 1, 4],
        [1, 8, 6, 2, 5],
        [3, 2, 4, 8, 1],
    ];
    let mut text = "I\nd1 d2 d3 d4 d5\n\nJ\nc1 c2 c3 c4 c5 c6\n\nf by i\n\
        d1 2\nd2 4\nd3 5\nd4 3\nd5 3\n\nc by i, j\n"
        .to_owned();
    for (j, row) in (1..).zip(profits) {
        for (i, profit) in (1..).zip(row) {
            text.push_str(&format!("d{i} c{j} {}\n", -profit));
        }
    }
    let data = instance(&text);
    for (id, wanted) in [("ufl/joined", -36.5), ("ufl/split", -28.0), ("ufl/radii", -28.0)] {
        let found = root(&rival(id, &data)).bound.unwrap();
        assert!(agree(found, wanted, 1e-9), "{id}: {found}");
    }
    let found = solve(&rival("ufl/joined", &data), Settings::default()).incumbent.unwrap();
    assert!(agree(found, -28.0, 1e-9), "{found}");
}

/// The weighted sum of completion times of four jobs: what the strong forms say is Smith's rule.
#[test]
fn four_jobs_by_the_rule_of_smith() {
    let rows = |numbers: [u32; 4]| {
        (1..).zip(numbers).map(|(j, n)| format!("j{j} {n}\n")).collect::<String>()
    };
    let text = format!(
        "J\nj1 j2 j3 j4\n\np by j\n{}\nw by j\n{}\nr by j\n{}",
        rows([4, 2, 6, 5]),
        rows([3, 1, 8, 2]),
        rows([0, 0, 0, 0])
    );
    let data = instance(&text);
    for (id, wanted) in [
        ("machine/time-indexed", 124.0),
        ("machine/parallel", 124.0),
        ("machine/linear-ordering", 124.0),
        ("machine/big-m", 72.0),
    ] {
        let model = rival(id, &data);
        let found = root(&model).bound.unwrap();
        assert!(agree(found, wanted, 1e-9), "{id}: {found} for {wanted}");
        let found = solve(&model, Settings::default()).incumbent.unwrap();
        assert!(agree(found, 124.0, 1e-9), "{id}: {found}");
    }
}

/// Three cost curves, 14 units needed: 28 by their convex envelopes in every sharp form, 28.6 in
/// truth. A breakpoint on a straight line is no new one: so all three have four pieces.
#[test]
fn three_bent_costs() {
    let curves = [
        (["0", "2", "5", "9", "10"], ["0", "8", "14", "18", "30"]),
        (["0", "3", "4", "6", "8"], ["0", "9", "10", "18", "26"]),
        (["0", "0.5", "1", "3.5", "6"], ["0", "2.5", "5", "8.5", "12"]),
    ];
    let (mut ends, mut costs) = (String::new(), String::new());
    for (i, (end, cost)) in curves.iter().enumerate() {
        for k in 0..5 {
            ends.push_str(&format!("s{i} {k} {}\n", end[k]));
            costs.push_str(&format!("s{i} {k} {}\n", cost[k]));
        }
    }
    let data = instance(&format!(
        "I\ns0 s1 s2\n\nK\n1 2 3 4\n\nd = 14\n\nB by i, k\n{ends}\nF by i, k\n{costs}"
    ));
    let all = catalogue::entries().into_iter().filter(|entry| entry.family == "piecewise");
    for entry in all {
        let model = rival(&entry.id, &data);
        let found = root(&model).bound.unwrap();
        let sharp = agree(found, 28.0, 1e-9);
        assert!(sharp || entry.id == "piecewise/big-m" && found < 28.0, "{}: {found}", entry.id);
        let found = solve(&model, Settings::default()).incumbent.unwrap();
        assert!(agree(found, 28.6, 1e-9), "{}: {found}", entry.id);
    }
}

/// Hillier & Lieberman's park: the shortest way from O to T is 13, the shortest tree 14.
#[test]
fn the_park_of_hillier_and_lieberman() {
    let roads = [
        ("O", "A", 2),
        ("O", "B", 5),
        ("O", "C", 4),
        ("A", "B", 2),
        ("A", "D", 7),
        ("B", "C", 1),
        ("B", "D", 4),
        ("B", "E", 3),
        ("C", "E", 4),
        ("D", "E", 1),
        ("D", "T", 5),
        ("E", "T", 7),
    ];
    let one = |(a, b, n): (&str, &str, u32)| format!("{a} {b} {n}\n");
    let edges: String = roads.into_iter().map(one).collect();
    let back: String = roads.into_iter().map(|(a, b, n)| one((b, a, n))).collect();
    let pairs: String = roads.iter().map(|(a, b, _)| format!("{a} {b}\n")).collect();
    let way = instance(&format!("V\nO A B C D E T\n\nc by i, j\n{edges}{back}\ns = O\nt = T\n"));
    for id in ["path/flow", "path/potentials"] {
        let found = root(&rival(id, &way)).bound.unwrap();
        assert!(agree(found, 13.0, 1e-9), "{id}: {found}");
    }
    let park = format!("V\nO A B C D E T\n\nE by i, j\n{pairs}\nc by i, j\n{edges}\nr = O\n");
    for id in ["tree/subtours", "tree/directed-cuts", "tree/arborescences"] {
        let found = root(&rival(id, &instance(&park))).bound.unwrap();
        assert!(agree(found, 14.0, 1e-9), "{id}: {found}");
    }
}

/// Length of a bin, sizes and pieces; the bound by patterns and the optimum.
type Cutting = (u32, &'static [u32], &'static [u32], f64, f64);

/// Chvátal, Linear Programming (1983), chapter 13; Gau (1994), where rounding up fails; 5600 mm of
/// paper, in tens; Winston's boards; a small one of our own; 20 by 5, 7, 9; three that are over half.
const CUTTINGS: &[Cutting] = &[
    (100, &[45, 36, 31, 14], &[97, 610, 395, 211], 452.25, 453.0),
    (132, &[44, 33, 12], &[2, 3, 6], 259.0 / 132.0, 3.0),
    (
        560,
        &[138, 152, 156, 171, 182, 188, 193, 200, 205, 210, 214, 215, 220],
        &[22, 25, 12, 14, 18, 18, 20, 10, 12, 14, 16, 18, 20],
        72.0 + 11.0 / 12.0,
        73.0,
    ),
    (17, &[3, 5, 9], &[25, 20, 15], 18.0 + 1.0 / 3.0, 19.0),
    (9, &[2, 3, 4], &[20, 10, 20], 17.5, 18.0),
    (20, &[5, 7, 9], &[150, 200, 300], 262.5, 263.0),
    (10, &[6], &[3], 3.0, 3.0),
];

/// All patterns that leave no room for a piece.
fn patterns(room: u32, sizes: &[u32]) -> Vec<Vec<u32>> {
    let mut open = vec![(Vec::new(), room)];
    let mut out = Vec::new();
    while let Some((counts, left)) = open.pop() {
        match sizes.get(counts.len()) {
            None if sizes.iter().all(|&size| size > left) => out.push(counts),
            None => {}
            Some(size) => open.extend(
                (0..=left / size).map(|n| ([counts.as_slice(), &[n]].concat(), left - n * size)),
            ),
        }
    }
    out
}

#[test]
fn cutting_stock_by_patterns_by_arcs_and_cut_by_cut() {
    for &(room, sizes, pieces, bound, best) in CUTTINGS {
        let column = |numbers: &[u32]| {
            numbers.iter().enumerate().map(|(i, n)| format!("i{i} {n}\n")).collect::<String>()
        };
        let names = |letter: char, count: usize| {
            let names: Vec<String> = (0..count).map(|i| format!("{letter}{i}")).collect();
            names.chunks(200).map(|line| line.join(" ")).collect::<Vec<_>>().join("\n")
        };
        let patterns = patterns(room, sizes);
        let mut text = format!(
            "I\n{}\n\nw by i\n{}\nb by i\n{}\nQ = {room}\n\nP\n{}\n\na by i, p\n",
            names('i', sizes.len()),
            column(sizes),
            column(pieces),
            names('p', patterns.len())
        );
        for (p, counts) in patterns.iter().enumerate() {
            for (i, count) in counts.iter().enumerate().filter(|(_, count)| **count > 0) {
                text.push_str(&format!("i{i} p{p} {count}\n"));
            }
        }
        let data = instance(&text);
        let forms: &[&str] = if room < 200 {
            &["bins/patterns", "bins/arc-flow", "bins/one-cut"]
        } else {
            &["bins/patterns"]
        };
        for id in forms {
            let found = root(&rival(id, &data)).bound.unwrap();
            assert!(agree(found, bound, 1e-8), "{id}, {room}: {found} for {bound}");
        }
        let model = rival("bins/patterns", &data);
        let Verdict::Optimal(found) = highs(&model, &[], true) else { panic!("{room}") };
        assert!(agree(found, best, 1e-9), "{room}: {found}");
        if room < 200 {
            let found = solve(&model, Settings::default()).incumbent.unwrap();
            assert!(agree(found, best, 1e-9), "{room}: {found}");
        }
        let length: f64 = sizes.iter().zip(pieces).map(|(w, b)| f64::from(w * b)).sum();
        if pieces.iter().sum::<u32>() < 60 {
            let found = root(&rival("bins/assignment", &data)).bound.unwrap();
            assert!(agree(found, length / f64::from(room), 1e-9), "{room}: {found}");
        }
    }
}
