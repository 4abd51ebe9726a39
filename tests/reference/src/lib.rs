//! What the reference checks share: open data, shipped rivals on an instance, and two
//! independent solvers (HiGHS and microlp) behind one face.
//!
//! Every number in these checks comes from outside the project: published, or computed by a
//! library that shares no code with it. `fixtures/round_trips.json` names the source of each.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]
#![allow(clippy::print_stderr, reason = "a check says what it passed over")]

pub mod falsify;
pub mod golden;
pub mod graphs;
pub mod independent;
pub mod kernel;
pub mod parts;
pub mod random_lp;
pub mod round_trip;
pub mod seeded;
pub mod shops;
pub mod theory;

use std::io::Read;
use std::path::PathBuf;

/// Whether the long checks are asked for as well, by `HULLWARD_WHOLE`.
#[must_use]
pub fn whole() -> bool {
    std::env::var_os("HULLWARD_WHOLE").is_some()
}

/// A file of the open data, as text. `None` when it is not there: the check then says where
/// the file is published and passes over it.
///
/// # Panics
/// When `CI` is `true` and the file lacks: on CI every file must be there.
#[must_use]
pub fn open_data(file: &str, published: &str) -> Option<String> {
    let folder = std::env::var_os("HULLWARD_DATA").map(PathBuf::from);
    let text = folder.and_then(|folder| {
        let path = folder.join(file);
        std::fs::read(&path).ok().or_else(|| unpacked(path.with_added_extension("gz")))
    });
    if let Some(bytes) = text {
        return Some(String::from_utf8_lossy(&bytes).into_owned());
    }
    let message = format!(
        "{file} was not found: it is published at {published}; name the folder that holds it in HULLWARD_DATA"
    );
    assert!(std::env::var("CI").as_deref() != Ok("true"), "{message}");
    eprintln!("skipped: {message}");
    None
}

/// A file as it is behind gzip.
fn unpacked(path: PathBuf) -> Option<Vec<u8>> {
    let mut bytes = Vec::new();
    let file = std::fs::File::open(path).ok()?;
    flate2::read::GzDecoder::new(file).read_to_end(&mut bytes).ok()?;
    Some(bytes)
}

/// Where TSPLIB is published (Reinelt, ORSA Journal on Computing 3 (1991) 376-384).
pub const TSPLIB: &str = "TSPLIB95, Universität Heidelberg";

/// Whether two values agree: absolutely within `tolerance`, or relatively for large ones.
#[must_use]
pub fn agree(a: f64, b: f64, tolerance: f64) -> bool {
    (a - b).abs() <= tolerance * (1.0 + b.abs())
}
