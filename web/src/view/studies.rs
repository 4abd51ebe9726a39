//! The studies of the evidence: a question each, a button, and what was found.

use record::study::Report;
use report::certificate;
use report::study::{derived, overview, sections};
use yew::prelude::*;

use crate::browser::share::download;
use crate::browser::studying::{Asked, Studying};
use crate::state::board::Board;
use crate::state::document::{Document, DocumentAction};
use crate::state::share::file_of;
use crate::state::studies::{
    Found as Answer, KINDS, OVER_ALL, Of, PRODUCTION, Part, Shelf, scenario_of,
};
use crate::view::finding::{section, sections_of};
use crate::view::hands::use_hands;
use crate::view::production::Pasted;
use crate::view::record::Record;

#[derive(Properties, PartialEq, Clone)]
pub(crate) struct StudiesProps {
    pub(crate) document: Document,
    pub(crate) board: Board,
}

/// All studies.
#[component]
pub(crate) fn Studies(props: &StudiesProps) -> Html {
    let hands = use_hands();
    let shelf = use_reducer(Shelf::default);
    let studying = use_memo((), |()| Studying::new(shelf.dispatcher()));
    let document = &props.document;
    if document.slots.is_empty() {
        return Html::default();
    }
    let begin = {
        let (document, studying, shelf) = (document.clone(), studying.clone(), shelf.clone());
        Callback::from(move |(kind, of): (&'static str, Of)| {
            if is_running(&shelf, kind) {
                return studying.stop();
            }
            if shelf.waiting.contains(&kind) {
                return studying.withdraw(kind);
            }
            if !is_ready(&document, kind) {
                return;
            }
            if let Some(hands) = &hands {
                hands.document.dispatch(DocumentAction::Study(kind));
            }
            let (scenario, instances) = (scenario_of(&document, kind), document.asked(kind, of));
            studying.ask(Asked { kind, scenario, instances });
        })
    };
    html! {
        <>
        for (kind, question, how) in KINDS {
            <div class="study" key={kind} data-study={kind}>
                { head(document, &shelf, (kind, question), &begin) }
                if kind == PRODUCTION {
                    <Pasted text={document.table().to_owned()} />
                }
                { body(document, &shelf, kind, how) }
            </div>
        }
        <Record document={document.clone()} board={props.board.clone()} shelf={(*shelf).clone()} />
        </>
    }
}

/// Whether there is something to run rivals on, or a table of results; rivals in MPS need no instance.
fn is_ready(document: &Document, kind: &str) -> bool {
    let pasted = kind != PRODUCTION || !document.table().trim().is_empty();
    pasted && (document.accepted.is_some() || document.draft.text.is_empty())
}

fn is_running(shelf: &Shelf, kind: &str) -> bool {
    shelf.running.as_ref().is_some_and(|(running, _)| *running == kind)
}

/// The question, and the buttons that ask it: of the chosen instance and, where there are several, of
/// all. Pasted results, and studies that speak of all together, are made over all in any case.
fn head(
    document: &Document,
    shelf: &Shelf,
    (kind, question): (&'static str, &str),
    begin: &Callback<(&'static str, Of)>,
) -> Html {
    let running = is_running(shelf, kind);
    let waiting = shelf.waiting.contains(&kind);
    let words = if running {
        "Stop"
    } else if waiting {
        "Do not ask"
    } else if shelf.found.contains_key(kind) {
        "Ask again"
    } else {
        "Ask"
    };
    let several = document.others.len() + 1;
    let first = if kind == PRODUCTION { Of::All } else { Of::Chosen };
    let disabled = (!running && !waiting && !is_ready(document, kind)).to_string();
    let all = format!("{words} of all {several} instances");
    html! {
        <div class="heading">
            <h3>{ question }</h3>
            <span class="acts">
                <button type="button" data-testid={format!("study-{kind}")} aria-disabled={disabled.clone()}
                    aria-label={format!("{words}: {question}")} onclick={begin.reform(move |_: MouseEvent| (kind, first))}
                >{ words }</button>
                if several > 1 && kind != PRODUCTION && !OVER_ALL.contains(&kind) && !running && !waiting {
                    <button type="button" data-testid={format!("study-{kind}-all")} aria-disabled={disabled}
                        aria-label={format!("{all}: {question}")} onclick={begin.reform(move |_: MouseEvent| (kind, Of::All))}
                    >{ all.clone() }</button>
                }
            </span>
        </div>
    }
}

fn body(document: &Document, shelf: &Shelf, kind: &'static str, how: &str) -> Html {
    if let Some((_, doing)) = shelf.running.as_ref().filter(|(running, _)| *running == kind) {
        return html! { <p class="soft" data-testid="study-doing">{ doing.clone() }</p> };
    }
    if shelf.waiting.contains(&kind) {
        return html! { <p class="soft">{ "Waits for the question that is being answered." }</p> };
    }
    let Some(found) = shelf.found.get(kind) else {
        return html! { <p class="soft">{ how.to_owned() }</p> };
    };
    let stale = *found.of != *scenario_of(document, kind);
    html! {
        <>
            if stale {
                <p class="warn">{ "Rivals, instance or settings have changed since: ask again." }</p>
            }
            { parts(document, kind, found) }
            if found.left > 0 {
                <p class="warn" data-testid="study-left">{
                    format!("Stopped: {} of {} instances were not come to.", found.left, found.left + found.parts.len())
                }</p>
            }
        </>
    }
}

/// The answer, instance by instance; several are folded to a line each below what they come to, but for
/// pasted results, whose first part speaks of all.
fn parts(document: &Document, kind: &str, found: &Answer) -> Html {
    if kind == PRODUCTION {
        return found.parts.iter().map(results).collect();
    }
    if let [part] = found.parts.as_slice() {
        return html! {
            <>
                if !part.instance.is_empty() {
                    <p class="soft">{ format!("Of {}.", part.instance) }</p>
                }
                { results(part) }
                { handed(document, part) }
            </>
        };
    }
    let folded = found.parts.iter().map(|part| {
        html! {
            <details class="folded part" key={part.instance.clone()} data-testid="study-part">
                <summary><b>{ part.instance.clone() }</b>{ " – " }{ in_short(part) }</summary>
                { results(part) }
                { handed(document, part) }
            </details>
        }
    });
    html! { <>{ for found.over().iter().flat_map(sections_of) }{ for folded }</> }
}

/// The first sentence of an answer.
fn in_short(part: &Part) -> String {
    let Ok(reports) = &part.reports else { return "it could not be made".to_owned() };
    let all: Vec<&Report> = reports.iter().collect();
    let over = overview(&all).into_iter().chain(reports.iter().flat_map(sections));
    let said = over.into_iter().find_map(|section| {
        let first = section.verdict.into_iter().next()?;
        Some(if section.heading.is_empty() {
            first
        } else {
            format!("{}: {first}", section.heading)
        })
    });
    said.unwrap_or_else(|| "see the table".to_owned())
}

fn results(part: &Part) -> Html {
    match &part.reports {
        Err(why) => html! { <p class="warn">{ format!("It could not be made: {why}.") }</p> },
        Ok(reports) => {
            let all: Vec<&Report> = reports.iter().collect();
            let over = overview(&all).map(|found| section(&found));
            over.into_iter().chain(reports.iter().flat_map(sections_of)).collect()
        }
    }
}

/// What is kept of an answer: models that came out of it as rivals, certificates as a file.
fn handed(document: &Document, part: &Part) -> Html {
    let Ok(reports) = &part.reports else { return Html::default() };
    let proofs = certificate::json(reports).map(|text| {
        let name = file_of(&document.title, "certificates.json");
        let onclick = Callback::from(move |_: MouseEvent| download(&name, text.as_str()));
        html! { <button type="button" data-testid="certificates" {onclick}>{ "Save the certificates" }</button> }
    });
    html! {
        <div class="row">
            { proofs }
            for (words, text) in reports.iter().flat_map(derived) {
                <Derived {words} {text} />
            }
        </div>
    }
}

#[derive(Properties, PartialEq)]
struct DerivedProps {
    words: String,
    text: String,
}

/// A model that came out of a study, to be added as a rival.
#[component]
fn Derived(props: &DerivedProps) -> Html {
    let hands = use_hands();
    let text = props.text.clone();
    let onclick = Callback::from(move |_: MouseEvent| {
        if let Some(hands) = &hands {
            hands.document.dispatch(DocumentAction::Text(text.clone()));
        }
    });
    html! { <button type="button" data-testid="derived" {onclick}>{ props.words.clone() }</button> }
}
