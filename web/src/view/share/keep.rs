//! What the page opens with, saving by itself, links put into the address, and other tabs.

use std::cell::RefCell;
use std::rc::Rc;

use gloo_events::EventListener;
use gloo_timers::callback::Timeout;
use record::scenario::Scenario;
use wasm_bindgen::JsCast;
use web_sys::StorageEvent;
use yew::prelude::*;

use crate::browser::share::{drop_fragment, fragment};
use crate::browser::store::{PLACES, restore, save};
use crate::demo::demo;
use crate::state::document::{Document, DocumentAction};
use crate::state::share::{Refusal, from_fragment};
use crate::view::share::notice::Notice;

/// Rest after a change before it is saved, in milliseconds.
const REST: u32 = 500;

/// What the page opens with: the link's scenario, else the one kept by the browser, else the demo.
#[derive(Debug, Clone, PartialEq)]
pub(crate) struct Opening {
    /// The scenario.
    pub(crate) scenario: Scenario,
    /// Whether it came with the address.
    pub(crate) from_link: bool,
    /// Whether the browser kept it.
    pub(crate) restored: bool,
    /// Why a link in the address was not opened.
    pub(crate) refusal: Option<Refusal>,
}

/// What to open with.
pub(crate) fn opening() -> Opening {
    let refusal = match from_fragment(&fragment()) {
        Some(Ok(scenario)) => {
            return Opening { scenario, from_link: true, restored: false, refusal: None };
        }
        Some(Err(refusal)) => Some(refusal),
        None => None,
    };
    let demo = demo();
    match restore().filter(|(kept, _)| *kept != Document::open(demo.clone()).scenario()) {
        Some((scenario, _)) => Opening { scenario, from_link: false, restored: true, refusal },
        None => Opening { scenario: demo, from_link: false, restored: false, refusal },
    }
}

/// The document as it is now and what was last saved of it.
struct Keeper {
    document: Document,
    saved: String,
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
        match save(&text) {
            Ok(()) => {
                self.said = false;
                self.saved = text;
                if from_fragment(&fragment()).is_some() {
                    drop_fragment();
                }
            }
            Err(why) if !self.said => {
                self.said = true;
                self.say.emit(Notice::of(format!(
                    "This browser does not keep your changes ({why}): save a file before you close the page."
                )));
            }
            Err(_) => {}
        }
    }
}

/// Saves the document by itself: when a change has rested, and when the page is left. Says when
/// another tab does so too.
#[hook]
pub(crate) fn use_keeping(document: &Document, opening: &Opening, say: &Callback<Notice>) {
    let keeper = use_mut_ref(|| Keeper {
        document: document.clone(),
        saved: Document::open(opening.scenario.clone()).file(),
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
        if key.is_some_and(|key| PLACES.contains(&key.as_str())) {
            let say = keeper.borrow().say.clone();
            say.emit(Notice::of(
                "Another tab of this browser has saved its scenario. The one that is changed last \
                 is restored next time: save a file of what you want to keep.",
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
                    act.emit(DocumentAction::Open(scenario));
                }
                Some(Err(refusal)) => say.emit(Notice::refusal(refusal)),
                None => {}
            });
        move || drop(listener)
    });
}
