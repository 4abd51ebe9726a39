//! Opening a file: a scenario takes the page's place, a pack does so and is held against, a log is
//! proved, any other text is read as an instance.

use gloo_events::{EventListener, EventListenerOptions};
use gloo_file::callbacks::{FileReader, read_as_bytes};
use record::file::looks_like_a_scenario;
use record::log::looks_like_a_log;
use record::pack::looks_like_a_pack;
use wasm_bindgen::JsCast;
use web_sys::{DragEvent, File, HtmlInputElement};
use yew::prelude::*;

use crate::browser::packs::parse;
use crate::state::document::DocumentAction;
use crate::state::recorded::Recorded;
use crate::state::share::{Refusal, read};
use crate::view::share::notice::Notice;
use crate::view::share::proof::LogFile;

/// The largest file that is read, in bytes.
const LARGEST: f64 = 8.0 * 1024.0 * 1024.0;

#[derive(Properties, PartialEq)]
pub(crate) struct OpenProps {
    pub(crate) act: Callback<DocumentAction>,
    pub(crate) say: Callback<Notice>,
    pub(crate) prove: Callback<LogFile>,
}

/// What files are handed to.
type Takers = (Callback<DocumentAction>, Callback<Notice>, Callback<LogFile>);

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
    let takers = (props.act.clone(), props.say.clone(), props.prove.clone());
    let onchange = Callback::from(move |event: Event| {
        let input: HtmlInputElement = event.target_unchecked_into();
        if let Some(file) = input.files().and_then(|files| files.get(0)) {
            *reader.borrow_mut() = open(file, takers.clone());
        }
        input.set_value("");
    });
    html! {
        <>
            <button type="button" onclick={press}>{ "Open file" }</button>
            <input ref={input} type="file" hidden=true data-testid="open-file" aria-label="Scenario or log file" {onchange} />
        </>
    }
}

/// Files dropped anywhere but on the box of the instance, which takes them itself. Without this
/// the browser would leave the page for the file.
#[hook]
pub(crate) fn use_drop(
    act: &Callback<DocumentAction>,
    say: &Callback<Notice>,
    prove: &Callback<LogFile>,
) {
    let reader = use_mut_ref(|| None::<FileReader>);
    let takers = (act.clone(), say.clone(), prove.clone());
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
                *reader.borrow_mut() = open(file, takers.clone());
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

fn open(file: File, (act, say, prove): Takers) -> Option<FileReader> {
    let name = file.name();
    if file.size() > LARGEST {
        let words = format!("{name} is larger than 8 MB and was not opened.");
        say.emit(Notice::refusal(Refusal::new(words)));
        return None;
    }
    Some(read_as_bytes(&file.into(), move |bytes| match bytes {
        Ok(bytes) if looks_like_a_log(&bytes) => prove.emit((name.clone(), bytes)),
        Ok(bytes) => take(&name, String::from_utf8_lossy(&bytes).into_owned(), &act, &say),
        Err(error) => say.emit(Notice::of(format!("{name} could not be read: {error}."))),
    }))
}

fn take(name: &str, text: String, act: &Callback<DocumentAction>, say: &Callback<Notice>) {
    if looks_like_a_pack(&text) {
        return take_pack(name, &text, act, say);
    }
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

/// Opens the scenario of a pack, which is then held against what was recorded.
fn take_pack(name: &str, text: &str, act: &Callback<DocumentAction>, say: &Callback<Notice>) {
    let opened = parse(text)
        .map_err(|why| Refusal::new(format!("{name} is no pack: {why}. The page is as it was.")))
        .and_then(|pack| Ok((read(&pack.scenario, name)?, pack)));
    match opened {
        Ok((scenario, pack)) => {
            say.emit(Notice::opened(&scenario, name));
            let recorded = Recorded::new(pack, &scenario);
            act.emit(DocumentAction::OpenPack(Box::new(scenario), Box::new(recorded)));
        }
        Err(refusal) => say.emit(Notice::refusal(refusal)),
    }
}
