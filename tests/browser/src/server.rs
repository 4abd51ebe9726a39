//! The page's own server, on a free port.

use std::path::{Path, PathBuf};

use tokio::process::Command;

use crate::driver::Listening;
use crate::{Outcome, fault};

/// The repository.
pub(crate) fn root() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("../..")
}

/// The built page as one file.
pub(crate) fn one_file() -> Outcome<PathBuf> {
    let path = root().join("web/dist/hullward.html");
    path.canonicalize()
        .map_err(|_| fault("the page is not built: run `cargo xtask page --no-serve`"))
}

/// Starts the server; it says its address.
pub(crate) async fn start() -> Outcome<Listening> {
    let mut command = Command::new(env!("CARGO"));
    command.current_dir(root());
    command.args(["run", "--quiet", "--package", "hullward-xtask", "--", "serve", "--port", "0"]);
    Listening::start(&mut command, |line| line.starts_with("http://").then(|| line.to_owned()))
        .await
}
