//! Writes what the targets begin with, a folder for each, for a coverage-guided fuzzer to grow:
//! `cargo run -p hullward-tests-fuzz --example seeds -- FOLDER`.

use std::path::Path;

use hullward_tests_fuzz::{seeds, targets};

fn main() -> std::io::Result<()> {
    let folder = std::env::args().nth(1).unwrap_or_else(|| "target/fuzz-seeds".to_owned());
    for (name, _) in targets::ALL {
        let folder = Path::new(&folder).join(name);
        std::fs::create_dir_all(&folder)?;
        for (place, seed) in seeds::of(name).iter().enumerate() {
            std::fs::write(folder.join(format!("seed-{place:03}")), seed)?;
        }
    }
    Ok(())
}
