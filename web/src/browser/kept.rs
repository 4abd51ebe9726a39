//! The browser's store of scenarios kept by name, and which of them is this tab's own.

use gloo_utils::window;
use js_sys::Date;
use web_sys::Storage;

use crate::state::kept::{Entry, Kept, PLACE, listed};

/// Where a tab notes, for itself alone, the id of the kept scenario that it saves into.
const OWN: &str = "hullward.tab.1";

fn storage() -> Option<Storage> {
    window().local_storage().ok().flatten()
}

/// The list; empty too where the store is blocked.
pub(crate) fn list() -> Vec<Entry> {
    let Some(storage) = storage() else { return Vec::new() };
    let keys = (0..storage.length().unwrap_or(0)).filter_map(|at| storage.key(at).ok().flatten());
    let entry = |key: String| {
        let id = key.strip_prefix(PLACE)?.to_owned();
        let stored = storage.get_item(&key).ok().flatten()?;
        let kept = Kept::parse(&stored)?;
        Some(Entry { id, name: kept.name, time: kept.time, bytes: stored.len() })
    };
    listed(keys.filter_map(entry).collect())
}

/// One of them.
pub(crate) fn load(id: &str) -> Option<Kept> {
    let stored = storage()?.get_item(&[PLACE, id].concat()).ok().flatten()?;
    Kept::parse(&stored)
}

/// Keeps one; the reason in words when the browser does not. What stood there before stays then.
pub(crate) fn keep(id: &str, kept: &Kept) -> Result<(), &'static str> {
    let storage = storage().ok_or("its store is blocked")?;
    let stored = storage.set_item(&[PLACE, id].concat(), &kept.print());
    stored.map_err(|_| "its store is full or blocked")
}

/// Forgets one.
pub(crate) fn forget(id: &str) {
    if let Some(storage) = storage() {
        // What cannot be removed is still listed.
        let _ = storage.remove_item(&[PLACE, id].concat());
    }
}

/// The id of the kept scenario that this tab saves into, once another tab uses the common place.
pub(crate) fn own() -> Option<String> {
    window().session_storage().ok().flatten()?.get_item(OWN).ok().flatten()
}

/// Notes that id.
pub(crate) fn set_own(id: &str) {
    if let Some(storage) = window().session_storage().ok().flatten() {
        // Without the note the tab opens with the common place next time.
        let _ = storage.set_item(OWN, id);
    }
}

/// Milliseconds since 1970.
pub(crate) fn now() -> u64 {
    Date::now() as u64
}

/// A time as a date and a time of the day here: "2026-12-01 18:05".
pub(crate) fn when(time: u64) -> String {
    let date = Date::new(&(time as f64).into());
    format!(
        "{}-{:02}-{:02} {:02}:{:02}",
        date.get_full_year(),
        date.get_month() + 1,
        date.get_date(),
        date.get_hours(),
        date.get_minutes()
    )
}
