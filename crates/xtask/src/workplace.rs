//! Where things stand: the repository's folders and the data beside it.

use std::env;
use std::path::{Path, PathBuf};

use crate::fault::{Attempt, Fault};

/// The variable that names the folder of published instances.
pub(crate) const DATA: &str = "HULLWARD_DATA";

/// The repository.
#[derive(Debug, Clone)]
pub(crate) struct Workplace {
    root: PathBuf,
}

impl Workplace {
    /// The repository whose `cargo xtask` this is. Cargo names its folder when it runs a program;
    /// the folder at the time of building may be another one, where clones share a target folder.
    pub(crate) fn find() -> Result<Self, Fault> {
        let manifest = env::var_os("CARGO_MANIFEST_DIR")
            .map_or_else(|| PathBuf::from(env!("CARGO_MANIFEST_DIR")), PathBuf::from);
        let root = manifest.join("../..").canonicalize().attempting("find the repository")?;
        Ok(Self { root })
    }

    /// Its root.
    pub(crate) fn root(&self) -> &Path {
        &self.root
    }

    /// The page's sources.
    pub(crate) fn web(&self) -> PathBuf {
        self.root.join("web")
    }

    /// Where the built page stands.
    pub(crate) fn dist(&self) -> PathBuf {
        self.root.join("web/dist")
    }

    /// The wasm compiler's own target folder: it may be another compiler than the native one.
    pub(crate) fn wasm_target(&self) -> PathBuf {
        self.root.join("target-wasm")
    }

    /// The folder of published instances as an absolute path, since tests run in the folders of
    /// their crates. `None` if the variable is not set.
    pub(crate) fn data(&self) -> Option<PathBuf> {
        env::var_os(DATA).filter(|value| !value.is_empty()).map(|value| self.root.join(value))
    }
}
