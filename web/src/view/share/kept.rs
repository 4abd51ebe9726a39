//! The list of scenarios that this browser keeps by name.

use report::number::of;
use web_sys::HtmlInputElement;
use yew::prelude::*;

use crate::browser::kept::{forget, keep, list, load, now, when};
use crate::state::document::{Document, DocumentAction};
use crate::state::kept::{Entry, Kept, id_for, size_words};
use crate::state::share::read;
use crate::view::share::notice::Notice;

#[derive(Properties, PartialEq)]
pub(crate) struct KeptProps {
    pub(crate) document: Document,
    pub(crate) act: Callback<DocumentAction>,
    pub(crate) say: Callback<Notice>,
}

/// What was deleted last, so that it can come back.
type Deleted = Option<(String, Kept)>;

/// The panel.
#[component]
pub(crate) fn KeptPanel(props: &KeptProps) -> Html {
    let entries = use_state_eq(list);
    let name = use_state_eq(|| props.document.title.clone());
    let deleted = use_state_eq(|| Deleted::None);
    let refresh = {
        let entries = entries.setter();
        Callback::from(move |()| entries.set(list()))
    };
    let oninput = {
        let name = name.setter();
        Callback::from(move |event: InputEvent| {
            name.set(event.target_unchecked_into::<HtmlInputElement>().value());
        })
    };
    let there = entries.iter().any(|entry| entry.name == name.trim());
    let keep_now = keeping(props, name.trim(), &refresh);
    html! {
        <div class="panel" role="group" aria-label="Kept in this browser" data-testid="kept-panel">
            <form class="row" onsubmit={keep_now}>
                <label class="field">
                    { "Name" }
                    <input type="text" maxlength="80" data-testid="kept-name" value={(*name).clone()} {oninput} />
                </label>
                <button type="submit" data-testid="keep">
                    { if there { "Replace the one of this name" } else { "Keep under this name" } }
                </button>
            </form>
            <p class="small soft">{ count(entries.len()) }</p>
            if let Some((id, kept)) = &*deleted {
                <p class="row small" role="status">
                    <span>{ format!("{} is deleted.", kept.name) }</span>
                    { bring_back(id, kept, &deleted, &refresh) }
                </p>
            }
            if !entries.is_empty() {
                <ul class="kept small">
                    for entry in entries.iter() {
                        <Line
                            key={entry.id.clone()} entry={entry.clone()} act={props.act.clone()}
                            say={props.say.clone()} refresh={refresh.clone()}
                            gone={let deleted = deleted.setter(); Callback::from(move |gone| deleted.set(Some(gone)))}
                        />
                    }
                </ul>
            }
        </div>
    }
}

/// Keeps the scenario under a name, in the place of the one that has it.
fn keeping(props: &KeptProps, name: &str, refresh: &Callback<()>) -> Callback<SubmitEvent> {
    let (document, say) = (props.document.clone(), props.say.clone());
    let (name, refresh) = (name.to_owned(), refresh.clone());
    Callback::from(move |event: SubmitEvent| {
        event.prevent_default();
        if name.is_empty() {
            return;
        }
        let time = now();
        let kept = Kept { name: name.clone(), time, text: document.file() };
        say.emit(match keep(&id_for(&name, time, &list()), &kept) {
            Ok(()) => Notice::of(format!("Kept in this browser: {name}.")),
            Err(why) => Notice::offering_a_file(format!("{name} is not kept: {why}.")),
        });
        refresh.emit(());
    })
}

fn count(kept: usize) -> String {
    match kept {
        0 => "No scenario is kept by name yet.".to_owned(),
        kept => format!("{} kept by name in this browser.", of(kept as u64, "scenario")),
    }
}

fn bring_back(
    id: &str,
    kept: &Kept,
    deleted: &UseStateHandle<Deleted>,
    refresh: &Callback<()>,
) -> Html {
    let (id, kept, refresh) = (id.to_owned(), kept.clone(), refresh.clone());
    let deleted = deleted.setter();
    let onclick = Callback::from(move |_: MouseEvent| {
        if keep(&id, &kept).is_ok() {
            deleted.set(None);
        }
        refresh.emit(());
    });
    html! { <button type="button" class="link" data-testid="kept-undo" {onclick}>{ "Bring it back" }</button> }
}

#[derive(Properties, PartialEq)]
struct LineProps {
    entry: Entry,
    act: Callback<DocumentAction>,
    say: Callback<Notice>,
    refresh: Callback<()>,
    gone: Callback<(String, Kept)>,
}

/// One kept scenario.
#[component]
fn Line(props: &LineProps) -> Html {
    let renamed = use_state_eq(|| None::<String>);
    let entry = &props.entry;
    let open = {
        let (id, act, say) = (entry.id.clone(), props.act.clone(), props.say.clone());
        Callback::from(move |_: MouseEvent| {
            let Some(kept) = load(&id) else { return };
            match read(&kept.text, &kept.name) {
                Ok(scenario) => {
                    say.emit(Notice::opened(&scenario, "this browser"));
                    act.emit(DocumentAction::Open(Box::new(scenario)));
                }
                Err(refusal) => say.emit(Notice::refusal(refusal)),
            }
        })
    };
    let delete = {
        let (id, gone, refresh) = (entry.id.clone(), props.gone.clone(), props.refresh.clone());
        Callback::from(move |_: MouseEvent| {
            if let Some(kept) = load(&id) {
                forget(&id);
                gone.emit((id.clone(), kept));
            }
            refresh.emit(());
        })
    };
    let rename = {
        let (renamed, name) = (renamed.setter(), entry.name.clone());
        Callback::from(move |_: MouseEvent| renamed.set(Some(name.clone())))
    };
    html! {
        <li class="row">
            if let Some(name) = &*renamed {
                { renaming(props, name, &renamed) }
            } else {
                <button type="button" class="link" onclick={open} aria-label={format!("Open {}", entry.name)}>{ entry.name.clone() }</button>
            }
            <span class="soft">{ format!("{}, {}", when(entry.time), size_words(entry.bytes)) }</span>
            <button type="button" class="link soft" onclick={rename} aria-label={format!("Rename {}", entry.name)}>{ "Rename" }</button>
            <button type="button" class="link soft" onclick={delete} aria-label={format!("Delete {}", entry.name)}>{ "Delete" }</button>
        </li>
    }
}

/// The field for another name.
fn renaming(props: &LineProps, name: &str, renamed: &UseStateHandle<Option<String>>) -> Html {
    let oninput = {
        let renamed = renamed.setter();
        Callback::from(move |event: InputEvent| {
            renamed.set(Some(event.target_unchecked_into::<HtmlInputElement>().value()));
        })
    };
    let onsubmit = {
        let (id, name, renamed) = (props.entry.id.clone(), name.to_owned(), renamed.setter());
        let (refresh, say) = (props.refresh.clone(), props.say.clone());
        Callback::from(move |event: SubmitEvent| {
            event.prevent_default();
            let kept = load(&id).filter(|_| !name.trim().is_empty());
            if let Some(Err(why)) = kept.map(|kept| keep(&id, &Kept { name: name.clone(), ..kept }))
            {
                say.emit(Notice::of(format!("Not renamed: {why}.")));
            }
            renamed.set(None);
            refresh.emit(());
        })
    };
    html! {
        <form class="row" {onsubmit}>
            <input type="text" maxlength="80" aria-label={format!("Another name for {}", props.entry.name)}
                data-testid="kept-rename" value={name.to_owned()} {oninput} />
            <button type="submit">{ "Save name" }</button>
        </form>
    }
}
