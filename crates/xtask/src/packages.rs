//! Debian packages that a step needs.

use std::path::{Path, PathBuf};
use std::process::Command;

use crate::fault::Fault;
use crate::process::{output, run};

/// Sees to it that packages are installed: installs what lacks when it may, else says the line to
/// type. `purpose` as in "to build the page".
pub(crate) fn ensure(packages: &[&str], purpose: &str) -> Result<(), Fault> {
    let lacking: Vec<&str> = packages.iter().copied().filter(|name| !installed(name)).collect();
    if lacking.is_empty() {
        return Ok(());
    }
    let line = install_line(&lacking);
    if !crate::process::on_path("apt-get") || !is_root() {
        return Err(Fault::new(format!(
            "{} {} needed {purpose}; install by\n\n    sudo sh -c '{line}'\n",
            lacking.join(", "),
            if lacking.len() == 1 { "is" } else { "are" },
        )));
    }
    println!("   installing {} {purpose}", lacking.join(", "));
    let mut shell = Command::new("sh");
    shell.args(["-c", &line]).env("DEBIAN_FRONTEND", "noninteractive");
    run(&mut shell)
}

/// Fetches a package of npm into `target/npm`, unless it is there. Where there is no npm, tests that
/// need the package say so.
pub(crate) fn fetch(root: &Path, name: &str, version: &str) -> Result<(), Fault> {
    let folder = root.join("target/npm");
    if folder.join("node_modules").join(name).is_dir() {
        return Ok(());
    }
    if !crate::process::on_path("npm") {
        println!("   LEFT OUT: checks by {name}, since there is no npm to fetch it");
        return Ok(());
    }
    let mut npm = Command::new("npm");
    npm.args(["install", "--no-audit", "--no-fund", "--ignore-scripts", "--prefix"]);
    run(npm.arg(folder).arg(format!("{name}@{version}")))
}

/// A program that cargo builds from its package into `target/tools`, unless it is on the path or was
/// built before. `None` where it cannot be had.
pub(crate) fn program(root: &Path, name: &str, version: &str) -> Option<PathBuf> {
    if crate::process::on_path(name) {
        return Some(name.into());
    }
    let folder = root.join("target/tools");
    let built = folder.join("bin").join(name);
    if !built.is_file() {
        let mut cargo = Command::new(std::env::var_os("CARGO").unwrap_or("cargo".into()));
        cargo.args(["install", "--quiet", "--locked", "--version", version, "--root"]);
        cargo.arg(&folder).arg("--target-dir").arg(folder.join("target")).arg(name);
        run(&mut cargo).ok()?;
    }
    built.is_file().then_some(built)
}

/// The line that installs packages.
fn install_line(packages: &[&str]) -> String {
    format!(
        "apt-get update -q && apt-get install -q -y --no-install-recommends {}",
        packages.join(" ")
    )
}

/// Whether dpkg knows the package as installed.
pub(crate) fn installed(package: &str) -> bool {
    let mut query = Command::new("dpkg-query");
    query.args(["--show", "--showformat=${db:Status-Status}", package]);
    output(&mut query).is_ok_and(|status| status == "installed")
}

/// The files that a package has installed.
pub(crate) fn files(package: &str) -> Result<Vec<String>, Fault> {
    let listed = output(Command::new("dpkg").args(["--listfiles", package]))?;
    Ok(listed.lines().map(String::from).collect())
}

fn is_root() -> bool {
    output(Command::new("id").arg("-u")).is_ok_and(|id| id.trim() == "0")
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_line_to_type_names_every_package() {
        let line = install_line(&["cmake", "libclang-dev"]);
        assert!(line.contains("apt-get install"));
        assert!(line.ends_with("cmake libclang-dev"));
    }

    #[test]
    fn a_package_that_does_not_exist_is_not_installed() {
        assert!(!installed("no-such-package-anywhere"));
    }
}
