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
    /// their crates. `None` if the variable is not set or names no folder.
    pub(crate) fn data(&self) -> Option<PathBuf> {
        let named = env::var_os(DATA).filter(|value| !value.is_empty())?;
        self.folder(Path::new(&named))
    }

    /// A folder named from the root of the repository, if there is one.
    fn folder(&self, named: &Path) -> Option<PathBuf> {
        self.root.join(named).canonicalize().ok().filter(|folder| folder.is_dir())
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn folders_are_named_from_the_root_and_given_in_full() {
        let place = Workplace::find().expect("the repository");
        assert_eq!(place.folder(Path::new("web/../web")), Some(place.web()));
        assert_eq!(place.folder(&place.web()), Some(place.web()));
        assert_eq!(place.folder(Path::new("no-such-folder")), None);
        assert_eq!(place.folder(Path::new("Cargo.toml")), None);
    }
}
