//! Speed beside other solvers: tests/bench, built as a release is.

use crate::check::cargo;
use crate::fault::Fault;
use crate::packages;
use crate::process::run;
use crate::workplace::Workplace;

/// Builds and runs the measurement with these arguments.
pub(crate) fn measure(place: &Workplace, arguments: &[String]) -> Result<(), Fault> {
    packages::ensure(&["cmake", "libclang-dev"], "to build HiGHS for the measurement")?;
    if arguments.iter().any(|word| word == "instructions") {
        packages::ensure(&["valgrind"], "to count instructions")?;
    }
    let mut bench = cargo(place);
    bench.args(["run", "--release", "--quiet", "--package", "hullward-tests-bench", "--"]);
    run(bench.args(arguments))
}
