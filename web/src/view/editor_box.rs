//! The box that notation is typed into: a text area over the same text in colours, which scrolls
//! in step with it, and what is offered for the command or the name before the caret.

use wasm_bindgen::JsCast;
use web_sys::{Element, HtmlDocument, HtmlTextAreaElement};
use yew::prelude::*;

use crate::state::commands::{Offer, offer};
use crate::state::highlight::{Kind, Piece};
use crate::state::pointer::Shared;

/// Lines shown at least and at most.
const LINES: (usize, usize) = (8, 24);

#[derive(Properties, PartialEq)]
pub(crate) struct BoxProps {
    pub(crate) id: String,
    pub(crate) label: String,
    pub(crate) text: String,
    pub(crate) pieces: Shared<Vec<Piece>>,
    /// Names in scope, which are offered by their first letters.
    pub(crate) names: Shared<Vec<String>>,
    pub(crate) invalid: bool,
    pub(crate) described_by: String,
    pub(crate) area: NodeRef,
    pub(crate) typed: Callback<String>,
    pub(crate) enter: Callback<()>,
    /// Hears where the caret is.
    pub(crate) caret: Callback<u32>,
}

/// The box.
#[component]
pub(crate) fn ScriptBox(props: &BoxProps) -> Html {
    let offered = use_state_eq(|| None::<Offer>);
    let dismissed = use_mut_ref(|| None::<u32>);
    let behind = use_node_ref();
    let look = {
        let (area, offered, dismissed) = (props.area.clone(), offered.setter(), dismissed.clone());
        let (caret, names) = (props.caret.clone(), props.names.clone());
        move || {
            let offer =
                current(&area, &names).filter(|offer| *dismissed.borrow() != Some(offer.start));
            offered.set(offer);
            if let Some((_, end)) = selection(&area) {
                caret.emit(end);
            }
        }
    };
    let oninput = {
        let (look, typed) = (look.clone(), props.typed.clone());
        Callback::from(move |event: InputEvent| {
            let area: HtmlTextAreaElement = event.target_unchecked_into();
            typed.emit(area.value());
            look();
        })
    };
    let onkeydown = {
        let (area, typed, enter) = (props.area.clone(), props.typed.clone(), props.enter.clone());
        let (offered, names) = (offered.setter(), props.names.clone());
        Callback::from(move |event: KeyboardEvent| {
            let Some(key) = Key::of(&event) else { return };
            if key == Key::Use {
                event.prevent_default();
                enter.emit(());
                return;
            }
            let offer = current(&area, &names);
            let offer = offer.filter(|offer| *dismissed.borrow() != Some(offer.start));
            let Some(offer) = offer else { return };
            if key != Key::Space {
                event.prevent_default();
            }
            if key == Key::Dismiss {
                *dismissed.borrow_mut() = Some(offer.start);
                offered.set(None);
            } else if let Some(taken) = offer.taken(key == Key::Tab) {
                replace(&area, (offer.start, offer.end), taken, &typed);
            }
        })
    };
    let onscroll = {
        let (area, behind) = (props.area.clone(), behind.clone());
        Callback::from(move |_: Event| follow(&area, &behind))
    };
    let (onkeyup, onclick) = {
        let (up, click) = (look.clone(), look);
        (Callback::from(move |_: KeyboardEvent| up()), Callback::from(move |_: MouseEvent| click()))
    };
    let onblur = {
        let offered = offered.setter();
        Callback::from(move |_: FocusEvent| offered.set(None))
    };
    html! {
        <>
            <div class="script">
                <pre ref={behind} aria-hidden="true"><code>{ coloured(&props.pieces) }</code>{ "\n" }</pre>
                <textarea
                    ref={props.area.clone()} id={props.id.clone()} aria-label={props.label.clone()}
                    data-testid="notation-text" rows={rows(&props.text)} wrap="off" spellcheck="false"
                    autocomplete="off" autocapitalize="off" value={props.text.clone()}
                    aria-invalid={if props.invalid { "true" } else { "false" }}
                    aria-describedby={props.described_by.clone()}
                    {oninput} {onkeydown} {onkeyup} {onclick} {onblur} {onscroll}
                />
            </div>
            { offers(offered.as_ref()) }
        </>
    }
}

/// What a key press means here.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Key {
    Space,
    Tab,
    Dismiss,
    Use,
}

impl Key {
    fn of(event: &KeyboardEvent) -> Option<Self> {
        if event.is_composing() || event.alt_key() {
            return None;
        }
        let control = event.ctrl_key() || event.meta_key();
        match event.key().as_str() {
            "Enter" if control => Some(Self::Use),
            _ if control || event.shift_key() => None,
            " " => Some(Self::Space),
            "Tab" => Some(Self::Tab),
            "Escape" => Some(Self::Dismiss),
            _ => None,
        }
    }
}

/// The offer at the caret; none while something is selected.
fn current(area: &NodeRef, names: &[String]) -> Option<Offer> {
    let (start, end) = selection(area)?;
    let text = area.cast::<HtmlTextAreaElement>()?.value();
    if start == end { offer(&text, end, names) } else { None }
}

fn selection(area: &NodeRef) -> Option<(u32, u32)> {
    let area = area.cast::<HtmlTextAreaElement>()?;
    Some((area.selection_start().ok()??, area.selection_end().ok()??))
}

/// Puts a text in place of a range, so that the browser's own Undo knows of it.
pub(crate) fn replace(area: &NodeRef, range: (u32, u32), text: &str, typed: &Callback<String>) {
    let Some(area) = area.cast::<HtmlTextAreaElement>() else { return };
    select(&area, range);
    let document = gloo_utils::document().dyn_into::<HtmlDocument>().ok();
    let done = document.and_then(|document| {
        document.exec_command_with_show_ui_and_value("insertText", false, text).ok()
    });
    if done != Some(true) && area.set_range_text_with_start_and_end(text, range.0, range.1).is_ok()
    {
        typed.emit(area.value());
    }
}

/// Focuses the box and selects a range of it.
pub(crate) fn select(area: &HtmlTextAreaElement, (start, end): (u32, u32)) {
    // A box that is gone or a place beyond its end leaves nothing to select.
    let _ = area.focus();
    let _ = area.set_selection_range(start, end);
}

fn follow(area: &NodeRef, behind: &NodeRef) {
    if let (Some(area), Some(behind)) = (area.cast::<Element>(), behind.cast::<Element>()) {
        behind.set_scroll_top(area.scroll_top());
        behind.set_scroll_left(area.scroll_left());
    }
}

fn rows(text: &str) -> String {
    (text.lines().count() + 1).clamp(LINES.0, LINES.1).to_string()
}

fn coloured(pieces: &[Piece]) -> Html {
    let span = |piece: &Piece| {
        let kind = match piece.kind {
            Kind::Plain => None,
            Kind::Comment => Some("comment"),
            Kind::Datum => Some("datum"),
            Kind::Variable => Some("variable"),
            Kind::Label => Some("label"),
            Kind::Part => Some("part"),
        };
        let marked = piece.marked.map(|error| if error { "error" } else { "warning" });
        html! { <span class={classes!(kind, marked)}>{ piece.text.clone() }</span> }
    };
    pieces.iter().map(span).collect()
}

fn offers(offer: Option<&Offer>) -> Html {
    html! {
        <p class="offers" data-testid="offers" aria-live="polite">
            if let Some(offer) = offer {
                for (place, choice) in offer.choices.iter().enumerate() {
                    <span>
                        <b>{ choice.text.clone() }</b>
                        if !choice.command.is_empty() { { format!(" \\{}", choice.command) } }
                        if place == 0 { { ": Tab, or Escape to keep it as it is" } }
                    </span>
                }
            }
        </p>
    }
}
