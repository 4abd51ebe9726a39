//! The scenario out and in: link, file, and what the browser keeps; undo and redo.
//!
//! | module | holds |
//! |---|---|
//! | `link` | the panel that a link is copied from |
//! | `open` | opening files, by a button or dropped anywhere |
//! | `keep` | saving by itself, restoring, and other tabs |
//! | `kept` | the list of scenarios kept by name |
//! | `notice` | what is said about all that |
//! | `proof` | the proof of a log that was opened |
//! | `verdict` | whether results are those the link or file was made with |

mod keep;
mod kept;
mod link;
mod notice;
mod open;
mod proof;
mod verdict;

use std::cell::RefCell;
use std::rc::Rc;

use report::changes::{Change, changes as changed};
use yew::prelude::*;

use crate::browser::share::download;
use crate::state::document::{Document, DocumentAction};
use crate::state::pointer::Shared;
use crate::state::share::file_name;
use crate::view::hands::use_hands;

pub(crate) use keep::{Opening, opening};
pub(crate) use verdict::Verdict;

use keep::{use_keeping, use_links};
use kept::KeptPanel;
use link::LinkPanel;
use notice::{Notice, NoticeView};
use open::{OpenFile, use_drop};
use proof::{LogFile, Proof};

/// The id of the button that opens the link's panel.
const COPY: &str = "copy-link";

#[derive(Properties, PartialEq)]
pub(crate) struct ShareProps {
    pub(crate) document: Document,
    pub(crate) opening: Opening,
    /// The digest of the results that are there.
    pub(crate) digest: Option<String>,
}

/// The row of buttons, the link's panel and the notice.
#[component]
pub(crate) fn Share(props: &ShareProps) -> Html {
    let hands = use_hands();
    let notice = use_state_eq(|| Notice::at_opening(&props.opening));
    let panel = use_state_eq(|| false);
    let list = use_state_eq(|| false);
    let say = {
        let notice = notice.setter();
        use_callback((), move |said: Notice, ()| notice.set(said))
    };
    let dispatcher = hands.map(|hands| hands.document);
    let (changes, here) = use_changes(props);
    let act = {
        let (dispatcher, changes) = (dispatcher.clone(), changes.setter());
        use_callback((), move |action: DocumentAction, ()| {
            if let DocumentAction::Open(next) | DocumentAction::OpenPack(next, _) = &action {
                changes.set(Shared::new(changed(&here.borrow().scenario(), next)));
            }
            if let Some(document) = &dispatcher {
                document.dispatch(action);
            }
        })
    };
    use_keeping(&props.document, &props.opening, &say);
    use_links(&act, &say);
    let log = use_state_eq(|| None::<std::rc::Rc<LogFile>>);
    let prove = {
        let (log, say) = (log.setter(), say.clone());
        use_callback((), move |file: LogFile, ()| {
            say.emit(Notice::default());
            log.set(Some(std::rc::Rc::new(file)));
        })
    };
    use_drop(&act, &say, &prove);
    use_undo_keys(&act);
    let close = {
        let set = panel.setter();
        Callback::from(move |said: Option<Notice>| {
            set.set(false);
            crate::view::inspector::focus(COPY);
            if let Some(said) = said {
                say.emit(said);
            }
        })
    };
    let save = save(&props.document, props.digest.clone());
    let save_offered = save.clone();
    let tell = {
        let set = notice.setter();
        Callback::from(move |said: Notice| set.set(said))
    };
    let proved = {
        let (log, tell) = (log.setter(), tell.clone());
        Callback::from(move |said: Notice| {
            log.set(None);
            tell.emit(said);
        })
    };
    html! {
        <section class="share" aria-label="The scenario">
            <div class="row">
                <button
                    type="button" id={COPY} data-testid="copy-link" onclick={toggle(&panel)}
                    aria-expanded={if *panel { "true" } else { "false" }}
                >{ "Copy link" }</button>
                <button type="button" data-testid="save-file" onclick={save.reform(|_| ())}>{ "Save file" }</button>
                <OpenFile act={act.clone()} say={tell.clone()} prove={prove} />
                <button
                    type="button" data-testid="kept" onclick={toggle(&list)}
                    aria-expanded={if *list { "true" } else { "false" }}
                >{ "Kept" }</button>
                { step("Undo", props.document.history.undo_words(), &act, || DocumentAction::Undo) }
                { step("Redo", props.document.history.redo_words(), &act, || DocumentAction::Redo) }
            </div>
            if *panel { <LinkPanel document={props.document.clone()} digest={props.digest.clone()} {save} {close} /> }
            if *list {
                <KeptPanel
                    document={props.document.clone()} act={act.clone()}
                    say={tell.clone()}
                />
            }
            <Proof log={(*log).clone()} end={proved} />
            <NoticeView notice={(*notice).clone()} changes={(*changes).clone()} {act} save={save_offered} hide={tell.reform(|()| Notice::default())} />
        </section>
    }
}

/// What was opened last changes of what was here before it, and the document as it is now.
#[hook]
fn use_changes(props: &ShareProps) -> (UseStateHandle<Shared<Vec<Change>>>, Rc<RefCell<Document>>) {
    let before = props.opening.before.clone();
    let opened = props.opening.scenario.clone();
    let changes = use_state(move || {
        Shared::new(before.map(|before| changed(&before, &opened)).unwrap_or_default())
    });
    let here = use_mut_ref(|| props.document.clone());
    *here.borrow_mut() = props.document.clone();
    (changes, here)
}

/// Opens and shuts a panel.
fn toggle(panel: &UseStateHandle<bool>) -> Callback<MouseEvent> {
    let (set, open) = (panel.setter(), **panel);
    Callback::from(move |_: MouseEvent| set.set(!open))
}

fn save(document: &Document, digest: Option<String>) -> Callback<()> {
    let document = document.clone();
    Callback::from(move |()| {
        download(&file_name(&document.title), document.file_with(digest.as_ref()).as_str());
    })
}

/// Undo or Redo; it keeps its place, and the focus, while there is nothing to do.
fn step(
    name: &'static str,
    words: Option<&'static str>,
    act: &Callback<DocumentAction>,
    action: fn() -> DocumentAction,
) -> Html {
    let onclick = act.reform(move |_: MouseEvent| action());
    let label = words.map_or_else(|| name.to_owned(), |words| format!("{name}: {words}"));
    html! {
        <button
            type="button" data-testid={name.to_lowercase()} {onclick} aria-label={label.clone()} title={label}
            aria-disabled={if words.is_some() { "false" } else { "true" }}
        >{ name }</button>
    }
}

/// Ctrl+Z and Ctrl+Shift+Z (or Ctrl+Y) outside text fields, which have an undo of their own.
#[hook]
fn use_undo_keys(act: &Callback<DocumentAction>) {
    use gloo_events::{EventListener, EventListenerOptions};
    use wasm_bindgen::JsCast;
    let act = act.clone();
    use_effect_with((), move |()| {
        let options = EventListenerOptions::enable_prevent_default();
        let window = gloo_utils::window();
        let listener = EventListener::new_with_options(&window, "keydown", options, move |event| {
            let Some(key) = event.dyn_ref::<KeyboardEvent>() else { return };
            let target = key.target().and_then(|target| target.dyn_into::<web_sys::Element>().ok());
            let typing = target.is_some_and(|target| is_text_field(&target));
            if typing || !(key.ctrl_key() || key.meta_key()) || key.alt_key() {
                return;
            }
            let action = match (key.key().to_lowercase().as_str(), key.shift_key()) {
                ("z", false) => DocumentAction::Undo,
                ("z", true) | ("y", false) => DocumentAction::Redo,
                _ => return,
            };
            key.prevent_default();
            act.emit(action);
        });
        move || drop(listener)
    });
}

fn is_text_field(element: &web_sys::Element) -> bool {
    matches!(element.tag_name().as_str(), "TEXTAREA" | "INPUT")
}
