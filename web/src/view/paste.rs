//! The box an instance is pasted or dropped into, the reader, and a button for a file.

use gloo_file::callbacks::{FileReader, read_as_text};
use record::scenario::{InstanceText, reader_and_part};
use web_sys::{File, HtmlInputElement, HtmlSelectElement, HtmlTextAreaElement};
use yew::prelude::*;

use crate::state::document::{DocumentAction, READERS};
use crate::state::mps::looks_like_mps;
use crate::state::pointer::Shared;
use crate::view::hands::{Hands, use_hands};

/// The id of the box.
pub(crate) const BOX: &str = "instance-text";

/// The largest file that is read, in bytes.
const LARGEST: f64 = 8.0 * 1024.0 * 1024.0;

#[derive(Properties, PartialEq)]
pub(crate) struct PasteProps {
    pub(crate) draft: Shared<InstanceText>,
    pub(crate) broken: bool,
}

/// The box with its controls.
#[component]
pub(crate) fn Paste(props: &PasteProps) -> Html {
    let hands = use_hands();
    let reader = use_mut_ref(|| None::<FileReader>);
    let over = use_state_eq(|| false);
    let trouble = use_state_eq(String::new);
    let open = {
        let (hands, trouble) = (hands.clone(), trouble.setter());
        Callback::from(move |file: File| {
            if file.size() > LARGEST {
                trouble.set(format!("{} is larger than 8 MB and was not read.", file.name()));
                return;
            }
            trouble.set(String::new());
            let (hands, trouble) = (hands.clone(), trouble.clone());
            let read = read_as_text(&file.into(), move |text| match text {
                Ok(text) => give(hands.as_ref(), text),
                Err(error) => trouble.set(format!("The file could not be read: {error}.")),
            });
            *reader.borrow_mut() = Some(read);
        })
    };
    let ondrop = {
        let (open, over) = (open.clone(), over.setter());
        Callback::from(move |event: DragEvent| {
            over.set(false);
            let files = event.data_transfer().and_then(|data| data.files());
            if let Some(file) = files.and_then(|files| files.get(0)) {
                event.prevent_default();
                open.emit(file);
            }
        })
    };
    let (enter, leave) = (over.setter(), over.setter());
    html! {
        <div
            class={classes!("paste", over.then_some("over"))} {ondrop}
            ondragover={Callback::from(move |event: DragEvent| { event.prevent_default(); enter.set(true); })}
            ondragleave={Callback::from(move |_: DragEvent| leave.set(false))}
        >
            <label for={BOX}>
                { "Paste a distance table, points, a list of drives, tables of a spreadsheet, a file of a public library, a scenario, or a model in MPS as a rival; or drop a file here." }
            </label>
            <TextBox draft={props.draft.clone()} broken={props.broken} />
            <div class="row">
                <ReaderChoice reader={props.draft.reader.clone()} />
                <FileChoice {open} />
            </div>
            if !trouble.is_empty() { <p class="warn" role="alert">{ (*trouble).clone() }</p> }
        </div>
    }
}

fn give(hands: Option<&Hands>, text: String) {
    if let Some(hands) = hands {
        hands.document.dispatch(DocumentAction::Text(text));
    }
}

#[component]
fn TextBox(props: &PasteProps) -> Html {
    let hands = use_hands();
    let draft = props.draft.clone();
    let oninput = Callback::from(move |event: InputEvent| {
        let area: HtmlTextAreaElement = event.target_unchecked_into();
        let text = area.value();
        if looks_like_mps(&text) {
            // It becomes a rival: the box goes on to hold the instance.
            area.set_value(&draft.text);
        }
        give(hands.as_ref(), text);
    });
    html! {
        <textarea
            id={BOX} data-testid="instance-text" rows="7" wrap="off" spellcheck="false"
            autocomplete="off" value={props.draft.text.clone()} {oninput}
            aria-invalid={if props.broken { "true" } else { "false" }}
            aria-describedby={props.broken.then_some("complaints")}
        />
    }
}

#[derive(Properties, PartialEq)]
struct ReaderProps {
    reader: Option<String>,
}

#[component]
fn ReaderChoice(props: &ReaderProps) -> Html {
    let hands = use_hands();
    let onchange = Callback::from(move |event: Event| {
        let select: HtmlSelectElement = event.target_unchecked_into();
        let reader = Some(select.value()).filter(|value| !value.is_empty());
        if let Some(hands) = &hands {
            hands.document.dispatch(DocumentAction::Reader(reader));
        }
    });
    let chosen = reader_and_part(props.reader.as_deref().unwrap_or("")).0;
    html! {
        <label class="field">
            { "Read as" }
            <select data-testid="reader" {onchange}>
                <option value="" selected={chosen.is_empty()}>{ "guess" }</option>
                for (name, words) in READERS {
                    <option value={name} selected={chosen == name}>{ words }</option>
                }
            </select>
        </label>
    }
}

#[derive(Properties, PartialEq)]
struct FileProps {
    open: Callback<File>,
}

#[component]
fn FileChoice(props: &FileProps) -> Html {
    let input = use_node_ref();
    let press = {
        let input = input.clone();
        Callback::from(move |_: MouseEvent| {
            if let Some(input) = input.cast::<HtmlInputElement>() {
                input.click();
            }
        })
    };
    let open = props.open.clone();
    let onchange = Callback::from(move |event: Event| {
        let input: HtmlInputElement = event.target_unchecked_into();
        if let Some(file) = input.files().and_then(|files| files.get(0)) {
            open.emit(file);
        }
        input.set_value("");
    });
    html! {
        <>
            <button type="button" onclick={press}>{ "Choose a file" }</button>
            <input
                ref={input} type="file" hidden=true data-testid="file" {onchange}
                aria-label="File with the instance"
            />
        </>
    }
}
