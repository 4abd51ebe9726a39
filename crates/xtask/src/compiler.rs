//! The compiler for wasm.
//!
//! rustup's toolchain serves when it has the wasm target or can fetch it. Where it cannot, Debian's
//! compiler for the web does: it brings the standard library as source, so that it is built along
//! with the modules. Debian's cargo, rustc and rustdoc belong together and are called by their
//! paths, since rustup's stand before them on the path.

use std::path::{Path, PathBuf};
use std::process::Command;
use std::time::Duration;

use crate::fault::Fault;
use crate::packages;
use crate::process::{output, within};
use crate::workplace::Workplace;

/// The target.
pub(crate) const TARGET: &str = "wasm32-unknown-unknown";

const DEBIAN_PACKAGES: [&str; 4] = ["rustc-web", "cargo-web", "rust-web-src", "lld-19"];
const FETCH_LIMIT: Duration = Duration::from_secs(60);

/// A compiler that builds for wasm.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) enum Compiler {
    /// The cargo that runs this program, with the target installed.
    Rustup,
    /// Debian's, by path.
    Debian {
        /// cargo.
        cargo: PathBuf,
        /// rustc.
        rustc: PathBuf,
        /// rustdoc.
        rustdoc: PathBuf,
        /// The linker.
        linker: PathBuf,
    },
}

impl Compiler {
    /// Finds a compiler, installing one if need be.
    pub(crate) fn find() -> Result<Self, Fault> {
        if target_installed() {
            println!("   rustup's toolchain has the wasm target");
            return Ok(Compiler::Rustup);
        }
        let mut add = Command::new("rustup");
        add.args(["target", "add", TARGET]);
        if within(FETCH_LIMIT, &mut add) && target_installed() {
            println!("   rustup's toolchain has the wasm target now");
            return Ok(Compiler::Rustup);
        }
        println!("   rustup cannot fetch the wasm target; Debian's compiler serves instead");
        packages::ensure(&DEBIAN_PACKAGES, "to build the page")?;
        let debian = Self::debian()?;
        println!("   Debian's compiler, with the standard library built from its source");
        Ok(debian)
    }

    fn debian() -> Result<Self, Fault> {
        let rustc_files = packages::files("rustc-web")?;
        Ok(Compiler::Debian {
            cargo: program(&packages::files("cargo-web")?, "cargo")?,
            rustc: program(&rustc_files, "rustc")?,
            rustdoc: program(&rustc_files, "rustdoc")?,
            linker: program(&packages::files("lld-19")?, "wasm-ld-19")?,
        })
    }

    /// `cargo build` of packages for wasm in the page's profile, to be run in the repository.
    pub(crate) fn build(&self, place: &Workplace, names: &[&str]) -> Command {
        let mut command = match self {
            Compiler::Rustup => Command::new(std::env::var_os("CARGO").unwrap_or("cargo".into())),
            Compiler::Debian { cargo, .. } => Command::new(cargo),
        };
        command.current_dir(place.root()).args(["build", "--profile", "page", "--target", TARGET]);
        for name in names {
            command.args(["--package", name]);
        }
        for inherited in ["RUSTFLAGS", "RUSTUP_TOOLCHAIN", "LD_LIBRARY_PATH"] {
            command.env_remove(inherited);
        }
        command.env("CARGO_TARGET_DIR", place.wasm_target());
        let flags = [remapped(place), vec!["-Zlocation-detail=none".to_owned()]].concat();
        command.env("CARGO_ENCODED_RUSTFLAGS", flags.join("\u{1f}")).env("RUSTC_BOOTSTRAP", "1");
        if let Compiler::Debian { rustc, rustdoc, linker, .. } = self {
            command.args(["-Z", "build-std=std,panic_abort"]);
            command.env("RUSTC", rustc).env("RUSTDOC", rustdoc);
            command.env("CARGO_TARGET_WASM32_UNKNOWN_UNKNOWN_LINKER", linker);
        }
        command
    }
}

impl Compiler {
    /// `cargo build --release` of a native package by the same compiler, into the same folder.
    pub(crate) fn build_native(&self, place: &Workplace, name: &str) -> Command {
        let mut command = match self {
            Compiler::Rustup => Command::new(std::env::var_os("CARGO").unwrap_or("cargo".into())),
            Compiler::Debian { cargo, .. } => Command::new(cargo),
        };
        command.current_dir(place.root()).args(["build", "--release", "--package", name]);
        for inherited in ["RUSTFLAGS", "RUSTUP_TOOLCHAIN", "LD_LIBRARY_PATH"] {
            command.env_remove(inherited);
        }
        command.env("CARGO_TARGET_DIR", place.wasm_target());
        if let Compiler::Debian { rustc, rustdoc, .. } = self {
            command.env("RUSTC", rustc).env("RUSTDOC", rustdoc).env("RUSTC_BOOTSTRAP", "1");
        }
        command
    }
}

/// Flags that keep this machine's folders out of the modules.
fn remapped(place: &Workplace) -> Vec<String> {
    let home = std::env::var_os("CARGO_HOME")
        .map(PathBuf::from)
        .or_else(|| std::env::var_os("HOME").map(|home| Path::new(&home).join(".cargo")));
    let mut flags = vec![format!("--remap-path-prefix={}=hullward", place.root().display())];
    let sources = home.into_iter().map(|home| home.join("registry/src"));
    for folder in sources.filter_map(|sources| std::fs::read_dir(sources).ok()).flatten().flatten()
    {
        flags.push(format!("--remap-path-prefix={}=crates", folder.path().display()));
    }
    flags
}

/// Whether rustup's toolchain has the target's standard library.
fn target_installed() -> bool {
    output(Command::new("rustc").args(["--print", "sysroot"])).is_ok_and(|sysroot| {
        Path::new(sysroot.trim()).join("lib/rustlib").join(TARGET).join("lib").is_dir()
    })
}

/// The path of a program among a package's files.
fn program(files: &[String], name: &str) -> Result<PathBuf, Fault> {
    let end = format!("/usr/bin/{name}");
    files.iter().find(|file| **file == end).map(PathBuf::from).ok_or_else(|| {
        Fault::new(format!("Debian's package does not hold {end}: reinstall it by\n\n    apt-get install --reinstall {}\n", DEBIAN_PACKAGES.join(" ")))
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn programs_are_taken_from_the_ordinary_folder() {
        let files: Vec<String> = ["/usr/share/cargo/bin/cargo", "/usr/bin/cargo"]
            .into_iter()
            .map(String::from)
            .collect();
        assert_eq!(program(&files, "cargo"), Ok(PathBuf::from("/usr/bin/cargo")));
        assert!(program(&files, "rustc").is_err());
    }

    #[test]
    fn debian_tools_are_called_together() {
        let place = Workplace::find().expect("the repository");
        let compiler = Compiler::Debian {
            cargo: "/a/cargo".into(),
            rustc: "/a/rustc".into(),
            rustdoc: "/a/rustdoc".into(),
            linker: "/a/wasm-ld".into(),
        };
        let command = compiler.build(&place, &["hullward-web"]);
        assert_eq!(command.get_program(), "/a/cargo");
        let value = |name: &str| {
            command.get_envs().find(|(key, _)| *key == name).and_then(|(_, value)| value)
        };
        assert_eq!(value("RUSTC"), Some("/a/rustc".as_ref()));
        assert_eq!(value("RUSTDOC"), Some("/a/rustdoc".as_ref()));
        assert_eq!(value("RUSTC_BOOTSTRAP"), Some("1".as_ref()));
        assert_eq!(value("RUSTUP_TOOLCHAIN"), None);
    }
}
