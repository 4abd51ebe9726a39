//! Instructions of fixed solves against the list of them: tests/instructions, built as a release is.

use crate::check::cargo;
use crate::fault::Fault;
use crate::packages;
use crate::process::run;
use crate::workplace::Workplace;

/// Counts and compares, or writes the list anew.
pub(crate) fn check(place: &Workplace, write: bool) -> Result<(), Fault> {
    packages::ensure(&["valgrind"], "to count instructions")?;
    let mut program = cargo(place);
    program.args(["run", "--release", "--quiet", "--package", "hullward-tests-instructions", "--"]);
    if write {
        program.arg("--write");
    }
    run(&mut program)
}
