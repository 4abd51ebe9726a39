//! What the page opens with, saving by itself, links put into the address, and other tabs.

use std::cell::RefCell;
use std::rc::Rc;

use gloo_events::EventListener;
use gloo_timers::callback::Timeout;
use record::file::parse;
use record::scenario::Scenario;
use wasm_bindgen::JsCast;
use web_sys::StorageEvent;
use yew::prelude::*;

use crate::browser::kept::{keep, load, now, own, set_own};
use crate::browser::share::{drop_fragment, fragment};
use crate::browser::store::{PLACES, Unsaved, newest, restore, save};
use crate::demo::demo;
use crate::state::document::{Document, DocumentAction};
use crate::state::kept::Kept;
use crate::state::share::{Refusal, from_fragment};
use crate::view::share::notice::Notice;

/// Rest after a change before it is saved, in milliseconds.
const REST: u32 = 500;

/// What the page opens with: the link's scenario, else the one kept by the browser, else the demo.
#[derive(Debug, Clone, PartialEq)]
pub(crate) struct Opening {
    /// The scenario.
    pub(crate) scenario: Scenario,
    /// What the browser kept of before, where the address holds something else.
    pub(crate) before: Option<Scenario>,
    /// Whether it came with the address.
    pub(crate) from_link: bool,
    /// Whether the browser kept it.
    pub(crate) restored: bool,
    /// Why a link in the address was not opened.
    pub(crate) refusal: Option<Refusal>,
    /// The number of what was saved last, by any tab.
    last: u64,
    /// The kept scenario that this tab saves into, apart from other tabs.
    own: Option<String>,
}

/// What to open with.
pub(crate) fn opening() -> Opening {
    let refusal = match from_fragment(&fragment()) {
        Some(Ok(scenario)) => {
            let before = restore().map(|(scenario, _)| scenario);
            return Opening { scenario, before, from_link: true, ..Opening::plain() };
        }
        Some(Err(refusal)) => Some(refusal),
        None => None,
    };
    let plain = Opening { refusal, ..Opening::plain() };
    let own = plain.own.as_ref().and_then(|id| load(id));
    let own = own.and_then(|kept| parse(&kept.text).scenario);
    let kept = own.or_else(|| restore().map(|(scenario, _)| scenario));
    match kept.filter(|kept| *kept != Document::open(demo()).scenario()) {
        Some(scenario) => Opening { scenario, restored: true, ..plain },
        None => plain,
    }
}

impl Opening {
    /// The demo, as it is opened where nothing else is.
    fn plain() -> Self {
        Self {
            scenario: demo(),
            before: None,
            from_link: false,
            restored: false,
            refusal: None,
            last: newest(),
            own: own(),
        }
    }
}

/// The document as it is now and what was last saved of it.
struct Keeper {
    document: Document,
    saved: String,
    /// The number of what this tab saved or opened last.
    last: u64,
    /// The kept scenario that this tab saves into, once another tab uses the common place.
    own: Option<String>,
    /// Whether another tab was spoken of.
    heard: bool,
    /// Whether it was said that the browser does not save.
    said: bool,
    say: Callback<Notice>,
}

impl Keeper {
    /// Saves the document if it differs from what was saved, or opened.
    fn save(&mut self) {
        let text = self.document.file();
        if text == self.saved {
            return;
        }
        match self.store(&text) {
            Ok(()) => {
                self.said = false;
                self.saved = text;
                if is_outdated(&self.saved) {
                    drop_fragment();
                }
            }
            Err(why) if !self.said => {
                self.said = true;
                self.say.emit(Notice::offering_a_file(format!(
                    "This browser does not keep your changes ({why}): save a file before you close the page."
                )));
            }
            Err(_) => {}
        }
    }

    /// Saves into the common place; once another tab has done so too, into a kept scenario of
    /// this tab's own, so that neither overwrites the other.
    fn store(&mut self, text: &str) -> Result<(), &'static str> {
        if self.own.is_none() {
            match save(text, self.last) {
                Ok(number) => {
                    self.last = number;
                    return Ok(());
                }
                Err(Unsaved::Refused(why)) => return Err(why),
                Err(Unsaved::OtherTab) => {}
            }
        }
        let id = self.own.clone().unwrap_or_else(|| now().to_string());
        let title = &self.document.title;
        let name = load(&id).map_or_else(|| format!("{title} (second tab)"), |kept| kept.name);
        let words = format!(
            "Another tab of this browser saves its scenario too: what you do in this tab is kept \
             as \u{201c}{name}\u{201d}, under Kept."
        );
        keep(&id, &Kept { name, time: now(), text: text.to_owned() })?;
        if self.own.is_none() {
            set_own(&id);
            self.own = Some(id);
            self.say.emit(Notice::of(words));
        }
        Ok(())
    }
}

/// Saves the document by itself: when a change has rested, and when the page is left. Says when
/// another tab does so too.
#[hook]
pub(crate) fn use_keeping(document: &Document, opening: &Opening, say: &Callback<Notice>) {
    let keeper = use_mut_ref(|| Keeper {
        document: document.clone(),
        saved: Document::open(opening.scenario.clone()).file(),
        last: opening.last,
        own: opening.own.clone(),
        heard: false,
        said: false,
        say: say.clone(),
    });
    keeper.borrow_mut().document = document.clone();
    {
        let keeper = Rc::clone(&keeper);
        use_effect_with(document.edited(), move |_| {
            let timer = Timeout::new(REST, move || keeper.borrow_mut().save());
            move || drop(timer)
        });
    }
    use_effect_with((), move |()| {
        let listeners = [
            leaving(&gloo_utils::window(), "pagehide", &keeper),
            leaving(&gloo_utils::document(), "visibilitychange", &keeper),
            other_tabs(&keeper),
        ];
        move || drop(listeners)
    });
}

/// Whether the address holds a link, and to something else than this scenario file.
fn is_outdated(text: &str) -> bool {
    match from_fragment(&fragment()) {
        Some(Ok(scenario)) => Document::open(scenario).file() != text,
        Some(Err(_)) => true,
        None => false,
    }
}

fn leaving(
    target: &web_sys::EventTarget,
    event: &'static str,
    keeper: &Rc<RefCell<Keeper>>,
) -> EventListener {
    let keeper = Rc::clone(keeper);
    EventListener::new(target, event, move |event| {
        if event.type_() == "pagehide" || gloo_utils::document().hidden() {
            keeper.borrow_mut().save();
        }
    })
}

fn other_tabs(keeper: &Rc<RefCell<Keeper>>) -> EventListener {
    let keeper = Rc::clone(keeper);
    EventListener::new(&gloo_utils::window(), "storage", move |event| {
        let key = event.dyn_ref::<StorageEvent>().and_then(StorageEvent::key);
        if !key.is_some_and(|key| PLACES.contains(&key.as_str())) {
            return;
        }
        let mut keeper = keeper.borrow_mut();
        let spoken = std::mem::replace(&mut keeper.heard, true) || keeper.own.is_some();
        if !spoken {
            keeper.say.emit(Notice::of(
                "Another tab of this browser has saved its scenario. What you change here from \
                 now on is kept apart, by name, so that neither tab overwrites the other.",
            ));
        }
    })
}

/// Opens a link that is put into the address of the open page.
#[hook]
pub(crate) fn use_links(act: &Callback<DocumentAction>, say: &Callback<Notice>) {
    let (act, say) = (act.clone(), say.clone());
    use_effect_with((), move |()| {
        let window = gloo_utils::window();
        let listener =
            EventListener::new(&window, "hashchange", move |_| match from_fragment(&fragment()) {
                Some(Ok(scenario)) => {
                    say.emit(Notice::opened(&scenario, "the link"));
                    act.emit(DocumentAction::Open(Box::new(scenario)));
                }
                Some(Err(refusal)) => say.emit(Notice::refusal(refusal)),
                None => {}
            });
        move || drop(listener)
    });
}
