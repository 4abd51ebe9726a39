//! What CI runs, quick things first.

use std::process::Command;

use crate::fault::Fault;
use crate::options::Part;
use crate::process::{run, step};
use crate::workplace::{DATA, Workplace};
use crate::{bundle, counts, packages, parity};

const REFERENCE: &str = "hullward-tests-reference";
const BENCH: &str = "hullward-tests-bench";
const BROWSER: &str = "hullward-tests-browser";

/// Runs the parts.
pub(crate) fn run_parts(place: &Workplace, parts: &[Part]) -> Result<(), Fault> {
    match place.data() {
        Some(data) => println!("   published instances: {}\n", data.display()),
        None => println!(
            "   LEFT OUT: checks on published instances, since {DATA} is not set to a folder that \
             exists\n"
        ),
    }
    for part in parts {
        match part {
            Part::Native => native(place)?,
            Part::Counts => step("instructions of fixed solves", || counts::check(place, false))?,
            Part::Page => page(place)?,
            Part::Browser => browser(place)?,
            Part::Firefox => firefox(place, parts.len() == 1)?,
            Part::Reference => reference(place)?,
        }
    }
    Ok(())
}

fn native(place: &Workplace) -> Result<(), Fault> {
    step("format", || run(cargo(place).args(["fmt", "--all", "--check"])))?;
    step("lint", || run(all_but(place, "clippy", &[REFERENCE, BENCH]).args(LINT)))?;
    step("documentation", || {
        let mut doc = all_but(place, "doc", &[REFERENCE, BENCH]);
        run(doc.args(["--no-deps", "--document-private-items"]).env("RUSTDOCFLAGS", "-D warnings"))
    })?;
    step("native tests", || run(&mut all_but(place, "test", &[REFERENCE, BENCH, BROWSER])))
}

fn page(place: &Workplace) -> Result<(), Fault> {
    bundle::build(place)?;
    step("the shipped engine against the native one", || parity::check(place))
}

fn browser(place: &Workplace) -> Result<(), Fault> {
    step("browser tests", || {
        packages::ensure(&["chromium", "chromium-driver"], "for the browser tests")?;
        packages::fetch(place.root(), "axe-core", "4.14.1")?;
        if !place.dist().join("index.html").is_file() {
            return Err(Fault::new("the page is not built: run `cargo xtask page --no-serve`"));
        }
        run(cargo(place).args(["test", "--package", BROWSER]))
    })
}

/// Tests of the main job in Firefox; all of them when nothing else is asked for. Without a driver
/// this is left out and said.
fn firefox(place: &Workplace, all: bool) -> Result<(), Fault> {
    step("the same in Firefox", || {
        packages::ensure(&["firefox-esr"], "for the tests in Firefox")?;
        let Some(driver) = packages::program(place.root(), "geckodriver", GECKODRIVER) else {
            println!(
                "   LEFT OUT: tests in Firefox, since geckodriver {GECKODRIVER} cannot be had"
            );
            return Ok(());
        };
        let mut test = cargo(place);
        test.args(["test", "--package", BROWSER, "--test", "page", "--"]);
        if !all {
            test.args(MAIN_JOB);
        }
        run(test.env("HULLWARD_BROWSER", "firefox").env("HULLWARD_GECKODRIVER", driver))
    })
}

fn reference(place: &Workplace) -> Result<(), Fault> {
    step("reference checks", || {
        packages::ensure(&["cmake", "libclang-dev"], "to build HiGHS for the reference checks")?;
        run(cargo(place).arg("clippy").args(CHECKS).args(LINT))?;
        run(cargo(place).arg("test").args(CHECKS))
    })
}

/// The checks, and with them what makes cargo choose the same features of the libraries as for the
/// native tests, so that nothing is built a second time.
const CHECKS: [&str; 8] = [
    "--package",
    REFERENCE,
    "--package",
    BENCH,
    "--package",
    "hullward-web",
    "--package",
    "hullward-xtask",
];

/// The driver's version.
const GECKODRIVER: &str = "0.37.1";

/// Tests of the main job, by the beginnings of their names.
const MAIN_JOB: [&str; 4] = ["opening::", "pasting::", "solving::", "nodes::"];

const LINT: [&str; 4] = ["--all-targets", "--", "-D", "warnings"];

/// cargo in the repository, with the data's folder as an absolute path or not at all.
pub(crate) fn cargo(place: &Workplace) -> Command {
    let mut cargo = Command::new(std::env::var_os("CARGO").unwrap_or("cargo".into()));
    cargo.current_dir(place.root());
    match place.data() {
        Some(data) => cargo.env(DATA, data),
        None => cargo.env_remove(DATA),
    };
    cargo
}

/// A cargo task on the whole workspace but some packages.
fn all_but(place: &Workplace, task: &str, left_out: &[&str]) -> Command {
    let mut cargo = cargo(place);
    cargo.args([task, "--workspace"]);
    for package in left_out {
        cargo.args(["--exclude", package]);
    }
    cargo
}
