//! What the catalogue weighs in the page: its texts are packed with the engine, which the page
//! fetches when it is open already.

#![allow(clippy::unwrap_used, reason = "a test ends where it fails")]

use std::path::Path;

/// The most that all of it may weigh packed, in bytes.
const MOST: usize = 120 << 10;

/// Every file that is shipped, in order.
fn shipped(folder: &Path, whole: &mut Vec<u8>) {
    let mut paths: Vec<_> =
        std::fs::read_dir(folder).unwrap().map(|entry| entry.unwrap().path()).collect();
    paths.sort();
    for path in paths {
        if path.is_dir() {
            shipped(&path, whole);
        } else {
            whole.extend(std::fs::read(&path).unwrap());
        }
    }
}

#[test]
fn the_catalogue_weighs_less_than_120_kb_packed() {
    let mut whole = Vec::new();
    shipped(&Path::new(env!("CARGO_MANIFEST_DIR")).join("formulations"), &mut whole);
    let packed = miniz_oxide::deflate::compress_to_vec(&whole, 9).len();
    assert!(whole.len() > 100_000, "{} bytes are not the catalogue", whole.len());
    assert!(packed < MOST, "{packed} bytes packed of {}", whole.len());
}
