//! The memory of a browser's processes, as Linux tells it under `/proc` (proc(5)).

use std::fs;
use std::path::Path;

use crate::{Outcome, fault};

/// Bytes held by the processes of a group that show pages; the greatest of them is the page under
/// test.
pub(crate) fn of_renderers(group: u32) -> Outcome<u64> {
    let mut greatest = None;
    for entry in fs::read_dir("/proc")? {
        let folder = entry?.path();
        // A process may end while it is looked at.
        if is_renderer(&folder, group) {
            greatest = greatest.max(held(&folder));
        }
    }
    greatest.ok_or_else(|| fault("no process of the browser shows a page"))
}

fn is_renderer(folder: &Path, group: u32) -> bool {
    let read = |name: &str| fs::read_to_string(folder.join(name)).unwrap_or_default();
    // After the name in brackets: state, parent, group.
    let stat = read("stat");
    let of = stat.rsplit(')').next().and_then(|rest| rest.split_whitespace().nth(2)?.parse().ok());
    of == Some(group) && read("cmdline").contains("--type=renderer")
}

fn held(folder: &Path) -> Option<u64> {
    let status = fs::read_to_string(folder.join("status")).ok()?;
    let line = status.lines().find_map(|line| line.strip_prefix("VmRSS:"))?;
    let kilobytes: u64 = line.split_whitespace().next()?.parse().ok()?;
    Some(kilobytes * 1024)
}
