//! Speed beside other solvers: tests/bench, built as a release is; and time and memory of expansion.

use crate::check::cargo;
use crate::fault::Fault;
use crate::packages;
use crate::process::run;
use crate::workplace::Workplace;

/// Builds and runs the measurement with these arguments.
pub(crate) fn measure(place: &Workplace, arguments: &[String]) -> Result<(), Fault> {
    if arguments.first().is_some_and(|word| word == "expand") {
        let package = "hullward-tests-expansion";
        return run(cargo(place).args(["run", "--release", "--quiet", "--package", package]));
    }
    packages::ensure(&["cmake", "libclang-dev"], "to build HiGHS for the measurement")?;
    if arguments.iter().any(|word| word == "instructions") {
        packages::ensure(&["valgrind"], "to count instructions")?;
    }
    let mut bench = cargo(place);
    bench.args(["run", "--release", "--quiet", "--package", "hullward-tests-bench", "--"]);
    run(bench.args(arguments))
}
