//! What the browser keeps of the page: the scenario, in two places that take turns.
//!
//! Pages opened from disk may share one store, so the names begin with the project's and end
//! with the version of what stands there.

use gloo_utils::window;
use record::scenario::Scenario;
use web_sys::Storage;

use crate::state::share::{Saved, next_place, restored};

/// The two places.
pub(crate) const PLACES: [&str; 2] = ["hullward.scenario.1.a", "hullward.scenario.1.b"];

/// Where it stands that the hints were dismissed.
const HINTS: &str = "hullward.hints.1";

/// Whether the first steps are still to be shown: until they are dismissed once.
pub(crate) fn wants_hints() -> bool {
    storage().is_some_and(|storage| storage.get_item(HINTS).ok().flatten().is_none())
}

/// The first steps are not shown again.
pub(crate) fn dismiss_hints() {
    if let Some(storage) = storage() {
        // A full store shows them once more; nothing is lost.
        let _ = storage.set_item(HINTS, "dismissed");
    }
}

fn storage() -> Option<Storage> {
    window().local_storage().ok().flatten()
}

fn saved(storage: &Storage) -> [Option<Saved>; 2] {
    PLACES.map(|place| storage.get_item(place).ok().flatten().and_then(|text| Saved::parse(&text)))
}

/// The scenario that was saved last, with its text; `None` too where the store is blocked.
pub(crate) fn restore() -> Option<(Scenario, String)> {
    let places = saved(&storage()?);
    restored(&places).map(|(scenario, text)| (scenario, text.to_owned()))
}

/// Why a scenario was not saved.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Unsaved {
    /// Another tab has saved since.
    OtherTab,
    /// The browser does not, for this reason in words.
    Refused(&'static str),
}

/// The number of what was saved last; 0 where nothing was.
pub(crate) fn newest() -> u64 {
    storage().map_or(0, |storage| next_place(&saved(&storage)).1 - 1)
}

/// Saves a scenario file over what this tab saved or opened last, whose number is `last`, and
/// gives the new number.
pub(crate) fn save(text: &str, last: u64) -> Result<u64, Unsaved> {
    let storage = storage().ok_or(Unsaved::Refused("its store is blocked"))?;
    let (place, number) = next_place(&saved(&storage));
    if number > last + 1 {
        return Err(Unsaved::OtherTab);
    }
    let text = Saved { number, text: text.to_owned() }.print();
    let stored = storage.set_item(PLACES[place], &text);
    stored.map(|()| number).map_err(|_| Unsaved::Refused("its store is full or blocked"))
}
