//! Opening a file: a scenario takes the page's place, any other text is read as an instance.

use gloo_events::{EventListener, EventListenerOptions};
use gloo_file::callbacks::{FileReader, read_as_text};
use record::file::looks_like_a_scenario;
use wasm_bindgen::JsCast;
use web_sys::{DragEvent, File, HtmlInputElement};
use yew::prelude::*;

use crate::state::document::DocumentAction;
use crate::state::share::{Refusal, read};
use crate::view::share::notice::Notice;

/// The largest file that is read, in bytes.
const LARGEST: f64 = 8.0 * 1024.0 * 1024.0;

#[derive(Properties, PartialEq)]
pub(crate) struct OpenProps {
    pub(crate) act: Callback<DocumentAction>,
    pub(crate) say: Callback<Notice>,
}

/// The button.
#[component]
pub(crate) fn OpenFile(props: &OpenProps) -> Html {
    let input = use_node_ref();
    let reader = use_mut_ref(|| None::<FileReader>);
    let press = {
        let input = input.clone();
        Callback::from(move |_: MouseEvent| {
            if let Some(input) = input.cast::<HtmlInputElement>() {
                input.click();
            }
        })
    };
    let (act, say) = (props.act.clone(), props.say.clone());
    let onchange = Callback::from(move |event: Event| {
        let input: HtmlInputElement = event.target_unchecked_into();
        if let Some(file) = input.files().and_then(|files| files.get(0)) {
            *reader.borrow_mut() = open(file, act.clone(), say.clone());
        }
        input.set_value("");
    });
    html! {
        <>
            <button type="button" onclick={press}>{ "Open file" }</button>
            <input ref={input} type="file" hidden=true data-testid="open-file" aria-label="Scenario file" {onchange} />
        </>
    }
}

/// Files dropped anywhere but on the box of the instance, which takes them itself. Without this
/// the browser would leave the page for the file.
#[hook]
pub(crate) fn use_drop(act: &Callback<DocumentAction>, say: &Callback<Notice>) {
    let reader = use_mut_ref(|| None::<FileReader>);
    let (act, say) = (act.clone(), say.clone());
    use_effect_with((), move |()| {
        let window = gloo_utils::window();
        let options = EventListenerOptions::enable_prevent_default();
        let over = EventListener::new_with_options(&window, "dragover", options, |event| {
            if dropped(event).is_some() {
                event.prevent_default();
            }
        });
        let drop = EventListener::new_with_options(&window, "drop", options, move |event| {
            let taken = event.default_prevented();
            let Some(data) = dropped(event).filter(|_| !taken) else { return };
            event.prevent_default();
            if let Some(file) = data.files().and_then(|files| files.get(0)) {
                *reader.borrow_mut() = open(file, act.clone(), say.clone());
            }
        });
        move || std::mem::drop((over, drop))
    });
}

/// What is dragged, where it holds files.
fn dropped(event: &Event) -> Option<web_sys::DataTransfer> {
    let data = event.dyn_ref::<DragEvent>()?.data_transfer()?;
    data.types().iter().any(|kind| kind == "Files").then_some(data)
}

fn open(file: File, act: Callback<DocumentAction>, say: Callback<Notice>) -> Option<FileReader> {
    let name = file.name();
    if file.size() > LARGEST {
        let words = format!("{name} is larger than 8 MB and was not opened.");
        say.emit(Notice::refusal(Refusal::new(words)));
        return None;
    }
    Some(read_as_text(&file.into(), move |text| match text {
        Ok(text) => take(&name, text, &act, &say),
        Err(error) => say.emit(Notice::of(format!("{name} could not be read: {error}."))),
    }))
}

fn take(name: &str, text: String, act: &Callback<DocumentAction>, say: &Callback<Notice>) {
    if !(looks_like_a_scenario(&text) || name.to_lowercase().ends_with(".toml")) {
        act.emit(DocumentAction::Text(text));
        say.emit(Notice::of(format!("{name} was read as an instance.")));
        return;
    }
    match read(&text, name) {
        Ok(scenario) => {
            say.emit(Notice::opened(&scenario, name));
            act.emit(DocumentAction::Open(Box::new(scenario)));
        }
        Err(refusal) => say.emit(Notice::refusal(refusal)),
    }
}
