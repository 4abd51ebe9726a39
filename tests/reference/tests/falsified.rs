//! Certificates falsified on purpose must not prove anything false: multipliers turned round, moved
//! or of another problem give a weaker bound or none, bases with a column exchanged likewise, rays
//! of another problem or of what was mended since refute nothing. On the golden models, on Netlib,
//! MIPLIB 3 and the check instances of HiGHS, and on random problems; the exact optimum is held to
//! published values by other checks.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]
#![allow(clippy::print_stderr, reason = "a check says what it has seen")]

use std::rc::Rc;

use hullward_tests_reference::falsify::Falsifier;
use hullward_tests_reference::kernel::problem;
use hullward_tests_reference::parts::Parts;
use hullward_tests_reference::random_lp::{KINDS, random_lp};
use hullward_tests_reference::round_trip::root;
use hullward_tests_reference::{golden, open_data};
use lp::{Limits, Outcome, Simplex};
use model::{Model, Number, Sense, mps};
use proof::{Bounds, Budget, Certifier, ExactRows, Progress, Standings, Wish, bounds_of};
use tree::{Status, standings};

/// What a proof from a false basis may cost.
const BUDGET: Budget = Budget { ticks: 3_000_000, bits: 6_000 };

/// What was seen.
#[derive(Debug, Default)]
struct Seen {
    models: u32,
    /// Of false multipliers.
    weaker: u32,
    nothing: u32,
    as_good: u32,
    /// Of false bases.
    bases_weaker: u32,
    bases_nothing: u32,
    bases_as_good: u32,
    rays: u32,
}

/// A model with what is true of it.
struct Case<'a> {
    name: &'a str,
    sense: Sense,
    rows: ExactRows,
    bounds: Vec<Bounds>,
    optimum: Number,
}

impl Case<'_> {
    /// Whether a bound is over what can be reached: the one thing that must not be.
    fn is_false(&self, bound: &Number) -> bool {
        match self.sense {
            Sense::Minimise => *bound > self.optimum,
            Sense::Maximise => *bound < self.optimum,
        }
    }

    fn multipliers(&self, y: &[f64], seen: &mut Seen) {
        assert!(!proof::infeasible(&self.rows, &self.bounds, y), "{}: refuted by {y:?}", self.name);
        match proof::bound(&self.rows, &self.bounds, y) {
            None => seen.nothing += 1,
            Some(bound) if bound == self.optimum => seen.as_good += 1,
            Some(bound) => {
                assert!(!self.is_false(&bound), "{}: {bound} from {y:?}", self.name);
                seen.weaker += 1;
            }
        }
    }

    /// A certifier to its end. Where it asks for a better basis it is given `other`, a false one.
    fn certified(&self, basis: Standings, wish: Wish, other: &Standings) -> Certifier {
        let mut certifier = Certifier::new(self.bounds.clone(), basis, wish, BUDGET);
        loop {
            match certifier.advance(&self.rows, 1_000_000) {
                Progress::Working => {}
                Progress::Asks => certifier.answer(Some(other.clone())),
                Progress::Done => return certifier,
            }
        }
    }

    fn basis(&self, basis: Standings, other: &Standings, seen: &mut Seen) {
        let refuting = self.certified(basis.clone(), Wish::Refutation, other);
        assert!(!refuting.is_refuted(), "{}: refuted", self.name);
        let found = self.certified(basis, Wish::Optimum(None), other);
        let bound = found.bound(&self.rows);
        if found.is_exact() {
            assert_eq!(bound.as_ref(), Some(&self.optimum), "{}: exact", self.name);
        }
        match bound {
            None => seen.bases_nothing += 1,
            Some(bound) if bound == self.optimum => seen.bases_as_good += 1,
            Some(bound) => {
                assert!(!self.is_false(&bound), "{}: {bound} from a basis", self.name);
                seen.bases_weaker += 1;
            }
        }
    }
}

/// Falsifies what the kernel gives for a model that has an optimum; gives its multipliers.
fn falsify(name: &str, model: Model, foreign: &[f64], seen: &mut Seen) -> Vec<f64> {
    let mut simplex = Simplex::new(problem(&model));
    let Outcome::Optimal(solution) = simplex.solve(Limits::default()).clone() else {
        return Vec::new();
    };
    let basis = standings(&simplex.basis());
    let (rows, bounds, sense) = (ExactRows::new(&model), bounds_of(&model), model.sense());
    let root = root(&Rc::new(model));
    assert!(root.exact, "{name} is not exact");
    let optimum = root.checked_bound.unwrap();
    let case = Case { name, sense, rows, bounds, optimum };
    let mut falsifier = Falsifier::new(name.len() as u64 + 7 * basis.rows.len() as u64);
    for y in falsifier.multipliers(&solution.duals, foreign) {
        case.multipliers(&y, seen);
    }
    let bases = falsifier.bases(&basis);
    for (place, one) in bases.iter().enumerate() {
        case.basis(one.clone(), &bases[(place + 1) % bases.len()], seen);
    }
    seen.models += 1;
    solution.duals
}

/// Falsehoods must have been told, and mostly have cost something.
fn bite(seen: &Seen) {
    eprintln!("{seen:?}");
    assert!(seen.weaker + seen.nothing > 2 * seen.as_good, "{seen:?}");
    assert!(seen.bases_weaker + seen.bases_nothing > seen.bases_as_good, "{seen:?}");
}

#[test]
fn golden_models() {
    let mut seen = Seen::default();
    let mut foreign = vec![1.0];
    for golden in golden::all() {
        foreign = falsify(&golden.name, golden.model, &foreign, &mut seen);
    }
    assert_eq!(seen.models, 109);
    bite(&seen);
}

/// Files of netlib lp/data, MIPLIB 3 and HiGHS that take little time.
const FILES: [&str; 24] = [
    "netlib/adlittle.mps",
    "netlib/afiro.mps",
    "netlib/beaconfd.mps",
    "netlib/blend.mps",
    "netlib/boeing2.mps",
    "netlib/kb2.mps",
    "netlib/lotfi.mps",
    "netlib/recipe.mps",
    "netlib/sc105.mps",
    "netlib/sc50a.mps",
    "netlib/sc50b.mps",
    "netlib/scagr7.mps",
    "netlib/share2b.mps",
    "netlib/stocfor1.mps",
    "netlib/vtpbase.mps",
    "miplib3/bell5.mps",
    "miplib3/flugpl.mps",
    "miplib3/gt2.mps",
    "miplib3/lseu.mps",
    "miplib3/p0033.mps",
    "miplib3/stein27.mps",
    "miplib3/vpm1.mps",
    "mps/avgas.mps",
    "mps/small_mip.mps",
];

const PUBLISHED: &str = "netlib lp/data, MIPLIB 3, the check instances of HiGHS";

#[test]
fn files_of_netlib_and_miplib() {
    let mut seen = Seen::default();
    let mut foreign = vec![1.0];
    for name in FILES {
        let Some(text) = open_data(name, PUBLISHED) else { return };
        let Ok((model, _)) = mps::read(&text) else { panic!("{name} is not read") };
        foreign = falsify(name, model, &foreign, &mut seen);
    }
    assert_eq!(seen.models as usize, FILES.len());
    bite(&seen);
}

#[test]
fn random_problems() {
    let mut seen = Seen::default();
    let mut foreign = vec![1.0];
    for (kind, title) in KINDS.iter().enumerate() {
        for seed in 0..60 {
            let model = random_lp(kind, 5_000_000 + seed);
            let y = falsify(&format!("{title}, seed {seed}"), model, &foreign, &mut seen);
            if !y.is_empty() {
                foreign = y;
            }
        }
    }
    assert!(seen.models > 300, "{seen:?}");
    bite(&seen);
}

/// The ray of a model without a point, proved; then the rows are widened until there is one, and
/// neither the ray nor any falsification of it refutes that.
fn mended(name: &str, model: &Model, seen: &mut Seen) {
    let mut simplex = Simplex::new(problem(model));
    let Outcome::Infeasible(ray) = simplex.solve(Limits::default()).clone() else { return };
    let basis = standings(&simplex.basis());
    let root = root(&Rc::new(Parts::of(model).build()));
    assert!(root.status == Status::Infeasible && root.checked, "{name}: not refuted");
    let mut parts = Parts::of(model);
    parts.widen();
    let mended = parts.build();
    let (rows, bounds) = (ExactRows::new(&mended), bounds_of(&mended));
    if bounds
        .iter()
        .any(|(lower, upper)| lower.as_ref().zip(upper.as_ref()).is_some_and(|(l, u)| l > u))
    {
        return;
    }
    let mut falsifier = Falsifier::new(seen.models.into());
    let mut rays = falsifier.multipliers(&ray.multipliers, &[1.0, -1.0, 0.5]);
    rays.push(ray.multipliers);
    for ray in &rays {
        assert!(!proof::infeasible(&rows, &bounds, ray), "{name}: refuted by {ray:?}");
        seen.rays += 1;
    }
    let mut bases = falsifier.bases(&basis);
    bases.push(basis);
    for basis in bases {
        let mut certifier = Certifier::new(bounds.clone(), basis, Wish::Refutation, BUDGET);
        while certifier.advance(&rows, 1_000_000) == Progress::Working {}
        assert!(!certifier.is_refuted(), "{name}: refuted from a basis");
    }
    seen.models += 1;
}

#[test]
fn rays_of_what_was_mended_since() {
    let mut seen = Seen::default();
    for seed in 0..150 {
        mended(&format!("infeasible, seed {seed}"), &random_lp(5, 7_000_000 + seed), &mut seen);
    }
    assert!(seen.models > 50, "{seen:?}");
    for name in ["box1", "ex72a", "forest6", "galenet", "klein1", "woodinfe", "vol1", "bgetam"] {
        let Some(text) = open_data(&format!("mps/{name}.mps"), PUBLISHED) else { return };
        let Ok((model, _)) = mps::read(&text) else { panic!("{name} is not read") };
        let before = seen.models;
        mended(name, &model, &mut seen);
        assert_eq!(seen.models, before + 1, "{name} has a point");
    }
    eprintln!("{seen:?}");
}
