//! The catalogue as one looks through it: by family, or those that hold some words; one entry at a
//! time with its statement as a paper sets it, its size, what is known of its bound and what goes
//! wrong with it. Nothing of it is made before it is opened.

use record::message::{CatalogueEntry, CheckJob, CheckReport};
use report::number::of;
use web_sys::HtmlInputElement;
use yew::prelude::*;

use crate::state::document::{DocumentAction, READERS};
use crate::state::editor::Edit;
use crate::state::lane::LaneId;
use crate::state::pointer::Shared;
use crate::view::hands::use_hands;
use crate::view::rivals::by_family;
use crate::view::typeset::Set;

/// Statements are set under the number of a lane that there never is.
const NO_LANE: LaneId = LaneId(u32::MAX - 1);

#[derive(Properties, PartialEq)]
pub(crate) struct ShelfProps {
    pub(crate) catalogue: Shared<Vec<CatalogueEntry>>,
    /// The family that is open at first.
    pub(crate) family: Option<String>,
}

/// Families as a list of which one is open; with words to look for, all that hold them.
#[component]
pub(crate) fn Shelf(props: &ShelfProps) -> Html {
    let words = use_state_eq(String::new);
    let family = use_state_eq(|| props.family.clone());
    let entry = use_state_eq(|| None::<String>);
    let typed = words.setter();
    let oninput = Callback::from(move |event: InputEvent| {
        let box_ = event.target_dyn_into::<HtmlInputElement>();
        typed.set(box_.map(|one| one.value()).unwrap_or_default());
    });
    let searched = !words.trim().is_empty();
    let found: Vec<CatalogueEntry> =
        props.catalogue.iter().filter(|entry| entry.holds(&words)).cloned().collect();
    let families = by_family(&found);
    let said = if searched { "with all of these words" } else { "in all" };
    let count = format!("{} {said}", of(found.len() as u64, "formulation"));
    let list = families.iter().map(|(name, entries)| {
        let shown = searched || family.as_deref() == Some(*name);
        let (setter, this) = (family.setter(), (*name).to_owned());
        let onclick =
            Callback::from(move |_: MouseEvent| setter.set((!shown).then(|| this.clone())));
        html! {
            <li key={(*name).to_owned()}>
                <h3>
                    if searched { { (*name).to_owned() } } else {
                        <button type="button" class="link" aria-expanded={yes(shown)} {onclick}>
                            { (*name).to_owned() }
                        </button>
                        <span class="small soft">{ entries.len() }</span>
                    }
                </h3>
                if shown {
                    <ul>{ for entries.iter().map(|(_, one)| row(one, &entry)) }</ul>
                }
            </li>
        }
    });
    html! {
        <div class="shelf" role="region" aria-label="Catalogue" data-testid="shelf">
            <label class="field">
                { "Words, such as a name or a year" }
                <input type="search" data-testid="search" value={(*words).clone()} {oninput} />
            </label>
            <p class="small soft" role="status">{ count }</p>
            <ul>{ for list }</ul>
        </div>
    }
}

fn yes(shown: bool) -> &'static str {
    if shown { "true" } else { "false" }
}

fn row(one: &CatalogueEntry, open: &UseStateHandle<Option<String>>) -> Html {
    let shown = open.as_ref() == Some(&one.id);
    let (setter, id) = (open.setter(), one.id.clone());
    let onclick = Callback::from(move |_: MouseEvent| setter.set((!shown).then(|| id.clone())));
    html! {
        <li key={one.id.clone()}>
            <h4><button type="button" class="link" aria-expanded={yes(shown)} {onclick}>
                { one.title.clone() }
            </button></h4>
            if shown { <Entry entry={one.clone()} /> }
        </li>
    }
}

#[derive(Properties, PartialEq)]
struct EntryProps {
    entry: CatalogueEntry,
}

/// An entry in full.
#[component]
fn Entry(props: &EntryProps) -> Html {
    let hands = use_hands();
    let entry = &props.entry;
    let report = use_state_eq(|| None::<Shared<CheckReport>>);
    let (heard, session) = (report.setter(), hands.as_ref().map(|hands| hands.session.clone()));
    use_effect_with(entry.text.clone(), move |text| {
        if let Some(session) = session {
            let job = CheckJob { text: text.clone(), ..CheckJob::default() };
            let hear = move |report| heard.set(Some(Shared::new(report)));
            session.check(NO_LANE, job, Callback::from(hear));
        }
    });
    let act = |action: fn(String) -> DocumentAction| {
        let (hands, id) = (hands.clone(), entry.id.clone());
        Callback::from(move |_: MouseEvent| {
            if let Some(hands) = &hands {
                hands.document.dispatch(action(id.clone()));
            }
        })
    };
    let (add, copy) = (act(DocumentAction::Add), act(|id| DocumentAction::Edit(Edit::Copy(id))));
    html! {
        <div class="entry" data-testid="entry">
            if let Some(report) = &*report {
                <Set
                    label={format!("{} as mathematics", entry.title)} report={report.clone()}
                    active={None::<usize>} show={Callback::noop()}
                />
            } else {
                <p class="soft">{ "Setting the statement." }</p>
            }
            <dl>
                { fact("Published", &entry.citation) }
                { fact("Size", &entry.size) }
                { fact("Right for", &entry.assumption) }
                { fact("Reads", &readers(entry)) }
                { fact("Compared in", &entry.natural) }
                if !entry.known.is_empty() {
                    <dt>{ "Its bound is" }</dt>
                    for known in &entry.known { <dd>{ known.clone() }</dd> }
                }
                { fact("Pitfall", &entry.pitfall) }
                if entry.relaxation { { fact("Note", "A relaxation only: bounded, not compared for its optimum.") } }
            </dl>
            <div class="row">
                <button type="button" data-testid="use" onclick={add}>{ "Use as rival" }</button>
                <button type="button" data-testid="copy-entry" onclick={copy}>{ "Edit a copy" }</button>
            </div>
        </div>
    }
}

/// The readers whose instances it takes, in words.
fn readers(entry: &CatalogueEntry) -> String {
    let words = entry.readers.iter().map(|reader| {
        let known = READERS.iter().find(|(name, _)| name == reader);
        known.map_or(reader.as_str(), |&(_, words)| words)
    });
    words.collect::<Vec<_>>().join(", ")
}

fn fact(name: &'static str, words: &str) -> Html {
    html! { <><dt>{ name }</dt><dd>{ words.to_owned() }</dd></> }
}
