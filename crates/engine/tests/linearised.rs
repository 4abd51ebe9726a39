//! Linearisations: the text that a mend writes has the optimum that enumeration of the original
//! finds, on small invented instances.

#![expect(clippy::panic, clippy::expect_used, reason = "the helpers of these tests fail loudly")]

use hullward_engine::native::{USUAL_SLICE, Watch, run_rival};
use notation::{Edit, Severity};
use record::file;
use record::results::Status;

/// What an instance gives: c by rows, and a_i, the sum of row i.
struct Data {
    c: [[i64; 3]; 3],
    a: [i64; 3],
}

const SEEDS: std::ops::Range<u64> = 1..6;

fn data(seed: u64) -> Data {
    let mut state = seed;
    let mut c = [[0; 3]; 3];
    for (i, row) in c.iter_mut().enumerate() {
        for (j, cell) in row.iter_mut().enumerate().filter(|(j, _)| i != *j) {
            state = state
                .wrapping_mul(6_364_136_223_846_793_005)
                .wrapping_add(1_442_695_040_888_963_407 + j as u64);
            *cell = i64::try_from((state >> 33) % 9).expect("below nine");
        }
    }
    Data { c, a: c.map(|row| row.iter().sum()) }
}

const HEAD: &str = "data\n  V\n  A ⊆ V × V\n  c_{i,j} ∀ (i,j) ∈ A\n  r ∈ V\ndefinitions\n  \
    a_i = Σ_{j : (i,j) ∈ A} c_{i,j} ∀ i ∈ V\n";

fn edited(text: &str, edit: &Edit) -> String {
    format!("{}{}{}", &text[..edit.span.start], edit.text, &text[edit.span.end..])
}

/// The text with every linearisation written that it needs, and how many that were.
fn linearised(text: &str) -> (String, usize) {
    let mut text = text.to_owned();
    for written in 0..10 {
        let parsed = notation::parse(&text);
        let (checked, found) = notation::check(&parsed.tree);
        let found = [parsed.diagnostics.clone(), found].concat();
        let found = notation::offers(&text, &parsed, &checked, found);
        let Some(error) = found.iter().find(|d| d.severity == Severity::Error) else {
            return (text, written);
        };
        let edit = error.mends.iter().find_map(|mend| mend.edit.as_ref());
        let edit = edit.unwrap_or_else(|| panic!("{}\n{text}", error.line(&text)));
        text = edited(&text, edit);
    }
    panic!("no end of linearisations\n{text}")
}

/// The optimum that the engine finds of the linearised text; none where it has no plan.
fn optimum(text: &str, data: &Data) -> Option<f64> {
    let c = data.c;
    let cell = |i: usize, j: usize| if i == j { String::new() } else { c[i][j].to_string() };
    let rows: String = ["Ash", "Birch", "Cedar"]
        .iter()
        .enumerate()
        .map(|(i, name)| format!("{name}\t{}\t{}\t{}\n", cell(i, 0), cell(i, 1), cell(i, 2)))
        .collect();
    let scenario = format!(
        "hullward = 1\n[instance]\ntext = '''\n\tAsh\tBirch\tCedar\n{rows}'''\n[[rival]]\ntext = '''\n{text}'''\n"
    );
    let scenario = file::parse(&scenario).scenario.unwrap_or_else(|| panic!("{scenario}"));
    let run = run_rival(&scenario, (0, 0), USUAL_SLICE, &mut |_| Watch::GoOn);
    let search = run.search.unwrap_or_else(|| panic!("{:?}\n{text}", run.error));
    match search.status {
        Status::Optimal => search.incumbent,
        Status::Infeasible => None,
        other => panic!("{other:?}\n{text}"),
    }
}

/// All points of a box of whole numbers.
fn points(sides: &[(i64, i64)]) -> Vec<Vec<i64>> {
    sides.iter().fold(vec![Vec::new()], |points, &(low, high)| {
        let longer = |point: &Vec<i64>| {
            let point = point.clone();
            (low..=high).map(move |value| [point.clone(), vec![value]].concat())
        };
        points.iter().flat_map(longer).collect()
    })
}

/// A text, the box of its variables, and what a point of it costs, if it is feasible.
struct Case {
    text: &'static str,
    sides: Vec<(i64, i64)>,
    value: fn(&Data, &[i64]) -> Option<i64>,
    /// How many linearisations it takes.
    written: usize,
}

fn holds(case: &Case) {
    let maximise = case.text.starts_with("maximise");
    let (text, written) = linearised(&format!("{HEAD}{}", case.text));
    assert_eq!(written, case.written, "{text}");
    for seed in SEEDS {
        let data = data(seed);
        let values = points(&case.sides).into_iter().filter_map(|p| (case.value)(&data, &p));
        let best = if maximise { values.max() } else { values.min() };
        let found = optimum(&text, &data);
        let same = match (best, found) {
            (None, None) => true,
            (Some(best), Some(found)) => (found - best as f64).abs() < 1e-6,
            _ => false,
        };
        assert!(same, "seed {seed}: enumeration {best:?}, rows {found:?}\n{text}");
    }
}

#[test]
fn a_binary_times_a_binary() {
    holds(&Case {
        text: "maximise\n  Σ_{(i,j) ∈ A} (c_{i,j} − 4) x_i x_j\nsubject to\n  \
            Σ_{i ∈ V} x_i ≤ 2  (two)\n  x_i ∈ {0,1} ∀ i ∈ V\n",
        sides: vec![(0, 1); 3],
        value: |data, x| {
            let pairs = points(&[(0, 2); 2]);
            let pairs =
                pairs.iter().map(|p| (p[0] as usize, p[1] as usize)).filter(|(i, j)| i != j);
            let sum = pairs.map(|(i, j)| (data.c[i][j] - 4) * x[i] * x[j]).sum();
            (x.iter().sum::<i64>() <= 2).then_some(sum)
        },
        written: 1,
    });
    holds(&Case {
        text: "minimise\n  Σ_{i ∈ V} (5 − a_i) x_i^2\nsubject to\n  \
            Σ_{i ∈ V} x_i ≤ 2  (two)\n  x_i ∈ {0,1} ∀ i ∈ V\n",
        sides: vec![(0, 1); 3],
        value: |data, x| {
            let sum = (0..3).map(|i| (5 - data.a[i]) * x[i]).sum();
            (x.iter().sum::<i64>() <= 2).then_some(sum)
        },
        written: 1,
    });
}

#[test]
fn a_binary_times_what_has_two_bounds() {
    holds(&Case {
        text: "minimise\n  Σ_{i ∈ V} (a_i − 9) y_i s_i\nsubject to\n  \
            y_i s_i + Σ_{j ∈ V} y_j ≥ 1 ∀ i ∈ V (some)\n  Σ_{i ∈ V} s_i ≤ 4 (most)\n  \
            s_i ∈ {−2..3} ∀ i ∈ V\n  y_i ∈ {0,1} ∀ i ∈ V\n",
        sides: [vec![(0, 1); 3], vec![(-2, 3); 3]].concat(),
        value: |data, p| {
            let (y, s) = p.split_at(3);
            let open: i64 = y.iter().sum();
            let fits = (0..3).all(|i| y[i] * s[i] + open >= 1) && s.iter().sum::<i64>() <= 4;
            fits.then(|| (0..3).map(|i| (data.a[i] - 9) * y[i] * s[i]).sum())
        },
        written: 2,
    });
    holds(&Case {
        text: "maximise\n  z (Σ_{i ∈ V} (a_i − 7) s_i) − 3 z\nsubject to\n  \
            0 ≤ s_i ≤ a_i ∀ i ∈ V\n  s_i ∈ ℤ ∀ i ∈ V\n  z ∈ 𝔹\n  Σ_{i ∈ V} s_i ≥ z (some)\n",
        sides: [vec![(0, 1)], vec![(0, 16); 3]].concat(),
        value: |data, p| {
            let s = &p[1..];
            let fits = (0..3).all(|i| s[i] <= data.a[i]) && s.iter().sum::<i64>() >= p[0];
            fits.then(|| p[0] * (0..3).map(|i| (data.a[i] - 7) * s[i]).sum::<i64>() - 3 * p[0])
        },
        written: 1,
    });
}

#[test]
fn absolute_values_on_either_side() {
    holds(&Case {
        text: "minimise\n  Σ_{i ∈ V} |s_i − a_i + 6| − s_r\nsubject to\n  \
            Σ_{i ∈ V} s_i = 3 (three)\n  s_i ∈ {−1..4} ∀ i ∈ V\n",
        sides: vec![(-1, 4); 3],
        value: |data, s| {
            let sum: i64 = (0..3).map(|i| (s[i] - data.a[i] + 6).abs()).sum();
            (s.iter().sum::<i64>() == 3).then_some(sum - s[0])
        },
        written: 1,
    });
    holds(&Case {
        text: "maximise\n  Σ_{i ∈ V} |2 s_i − a_i|\nsubject to\n  \
            Σ_{i ∈ V} s_i = 3 (three)\n  |s_i| ≥ 1 ∀ i ∈ V (away)\n  s_i ∈ {−1..4} ∀ i ∈ V\n",
        sides: vec![(-1, 4); 3],
        value: |data, s| {
            let sum = (0..3).map(|i| (2 * s[i] - data.a[i]).abs()).sum();
            (s.iter().sum::<i64>() == 3 && s.iter().all(|s| *s != 0)).then_some(sum)
        },
        written: 2,
    });
}

#[test]
fn greatest_and_least_of_expressions() {
    holds(&Case {
        text: "minimise\n  Σ_{i ∈ V} max(s_i, a_i − 2 s_i)\nsubject to\n  \
            Σ_{i ∈ V} s_i = 5 (five)\n  s_i ∈ {0..4} ∀ i ∈ V\n",
        sides: vec![(0, 4); 3],
        value: |data, s| {
            let sum = (0..3).map(|i| s[i].max(data.a[i] - 2 * s[i])).sum();
            (s.iter().sum::<i64>() == 5).then_some(sum)
        },
        written: 1,
    });
    holds(&Case {
        text: "maximise\n  Σ_{i ∈ V} (max(s_i, a_i − 2 s_i, 3) − 2 min(s_i, 2) − s_i)\nsubject to\n  \
            Σ_{i ∈ V} s_i = 5 (five)\n  s_i ∈ {0..4} ∀ i ∈ V\n",
        sides: vec![(0, 4); 3],
        value: |data, s| {
            let one = |i: usize| s[i].max(data.a[i] - 2 * s[i]).max(3) - 2 * s[i].min(2) - s[i];
            (s.iter().sum::<i64>() == 5).then(|| (0..3).map(one).sum())
        },
        written: 2,
    });
    holds(&Case {
        text: "maximise\n  −Σ_{i ∈ V} s_i + max_{i ∈ V} (a_i − s_i)\nsubject to\n  \
            6 ≤ min_{i ∈ V} (s_i + a_i) (least)\n  s_i ∈ {0..6} ∀ i ∈ V\n",
        sides: vec![(0, 6); 3],
        value: |data, s| {
            let most = (0..3).map(|i| data.a[i] - s[i]).max()?;
            let fits = (0..3).all(|i| s[i] + data.a[i] >= 6);
            fits.then(|| most - s.iter().sum::<i64>())
        },
        written: 2,
    });
}

#[test]
fn rows_that_hold_where_a_binary_says_so() {
    holds(&Case {
        text: "maximise\n  Σ_{i ∈ V} (a_i s_i + (7 − a_i) y_i)\nsubject to\n  \
            y_i = 1 ⟹ s_i ≤ 1 ∀ i ∈ V (short)\n  if y_r = 0 then Σ_{i ∈ V} s_i ≤ 5 (all)\n  \
            Σ_{i ∈ V} y_i ≥ 1 (one)\n  s_i ∈ {0..4} ∀ i ∈ V\n  y_i ∈ {0,1} ∀ i ∈ V\n",
        sides: [vec![(0, 1); 3], vec![(0, 4); 3]].concat(),
        value: |data, p| {
            let (y, s) = p.split_at(3);
            let short = (0..3).all(|i| y[i] == 0 || s[i] <= 1);
            let all = y[0] == 1 || s.iter().sum::<i64>() <= 5;
            let fits = short && all && y.iter().sum::<i64>() >= 1;
            fits.then(|| (0..3).map(|i| data.a[i] * s[i] + (7 - data.a[i]) * y[i]).sum())
        },
        written: 2,
    });
    holds(&Case {
        text: "minimise\n  Σ_{i ∈ V} ((a_i − 8) s_i + 3 y_i)\nsubject to\n  \
            y_i = 0 => s_i = 1 ∀ i ∈ V (usual)\n  s_i ∈ {0..4} ∀ i ∈ V\n  y_i ∈ {0,1} ∀ i ∈ V\n",
        sides: [vec![(0, 1); 3], vec![(0, 4); 3]].concat(),
        value: |data, p| {
            let (y, s) = p.split_at(3);
            let fits = (0..3).all(|i| y[i] == 1 || s[i] == 1);
            fits.then(|| (0..3).map(|i| (data.a[i] - 8) * s[i] + 3 * y[i]).sum())
        },
        written: 1,
    });
}

#[test]
fn without_bounds_the_mend_says_what_is_missing() {
    let text = format!(
        "{HEAD}minimise\n  Σ_{{i ∈ V}} y_i s_i\nsubject to\n  s_i ≥ 0 ∀ i ∈ V\n  y_i ∈ {{0,1}} ∀ i ∈ V\n"
    );
    let parsed = notation::parse(&text);
    let (checked, found) = notation::check(&parsed.tree);
    let found = notation::offers(&text, &parsed, &checked, found);
    let product = found.iter().find(|d| d.code == "shape.product").expect("a product is told");
    assert!(product.mends.iter().all(|mend| mend.edit.is_none()));
    assert!(product.mends[0].label.contains("a lower and an upper bound"), "{product:?}");
}
