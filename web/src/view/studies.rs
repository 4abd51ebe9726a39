//! The studies of the evidence: a question each, a button, and what was found.

use record::pack::Pack;
use record::study::Report;
use report::certificate;
use report::study::{Figure, Section, Table, derived, overview, sections};
use yew::prelude::*;

use crate::browser::share::download;
use crate::browser::studying::Studying;
use crate::state::board::Board;
use crate::state::document::{Document, DocumentAction};
use crate::state::same::results as results_of;
use crate::state::share::file_of;
use crate::state::studies::{Found as Answer, KINDS, Shelf, on_record, scenario_of};
use crate::view::hands::use_hands;

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
    html! {
        <>
        for (kind, question, how) in KINDS {
            <div class="study" key={kind} data-study={kind}>
                { head(document, &shelf, kind, question, {
                    let (document, studying, hands) = (document.clone(), (*studying).clone(), hands.clone());
                    let (running, ready) = (is_running(&shelf, kind), is_ready(&document));
                    Callback::from(move |_: MouseEvent| {
                        if running {
                            return studying.stop();
                        }
                        if !ready {
                            return;
                        }
                        if let Some(hands) = &hands {
                            hands.document.dispatch(DocumentAction::Study(kind));
                        }
                        studying.begin(kind, scenario_of(&document, kind), document.chosen);
                    })
                }) }
                { body(document, &shelf, kind, how) }
            </div>
        }
        { decision_record(props, &shelf) }
        </>
    }
}

/// The record of all that the page has found, saved as a file.
fn decision_record(props: &StudiesProps, shelf: &Shelf) -> Html {
    let save = |html: bool| {
        let (StudiesProps { document, board }, shelf) = (props.clone(), shelf.clone());
        Callback::from(move |_: MouseEvent| {
            let results = results_of(&document, &board);
            let text = on_record(&document, &results, &shelf, html);
            let ending = if html { "decision.html" } else { "decision.md" };
            download(&file_of(&document.title, ending), text.as_str());
        })
    };
    let pack = {
        let (document, board) = (props.document.clone(), props.board.clone());
        Callback::from(move |_: MouseEvent| {
            let mut results = results_of(&document, &board);
            results.retain(|one| one.root.is_some());
            let pack = Pack::new(env!("CARGO_PKG_VERSION"), &document.scenario(), &results);
            download(&file_of(&document.title, "pack.json"), report::pack::json(&pack).as_str());
        })
    };
    html! {
        <div class="study">
            <div class="heading">
                <h3>{ "Decision record" }</h3>
                <span class="row">
                    <button type="button" data-testid="record-html" onclick={save(true)}>{ "Save to print" }</button>
                    <button type="button" data-testid="record-markdown" onclick={save(false)}>{ "Save as Markdown" }</button>
                    <button type="button" data-testid="pack" onclick={pack}>{ "Save pack" }</button>
                </span>
            </div>
            <p class="soft">
                { "The question, the instance, what was found and answered above, what would reopen the decision, \
                   the formulations, and how to see the same. The pack is for regression tests: the scenario with what \
                   each rival gave so far, to be opened here or run by hullward drift." }
            </p>
        </div>
    }
}

/// Whether there is something to run rivals on; rivals in MPS need no instance.
fn is_ready(document: &Document) -> bool {
    document.accepted.is_some() || document.draft.text.is_empty()
}

fn is_running(shelf: &Shelf, kind: &str) -> bool {
    shelf.running.as_ref().is_some_and(|(running, _)| *running == kind)
}

fn head(
    document: &Document,
    shelf: &Shelf,
    kind: &'static str,
    question: &str,
    onclick: Callback<MouseEvent>,
) -> Html {
    let words = if is_running(shelf, kind) {
        "Stop"
    } else if shelf.found.contains_key(kind) {
        "Ask again"
    } else {
        "Ask"
    };
    let ready = is_ready(document);
    html! {
        <div class="heading">
            <h3>{ question }</h3>
            <button type="button" data-testid={format!("study-{kind}")} aria-disabled={(!ready).to_string()}
                aria-label={format!("{words}: {question}")} {onclick}>{ words }</button>
        </div>
    }
}

fn body(document: &Document, shelf: &Shelf, kind: &'static str, how: &str) -> Html {
    if let Some((_, doing)) = shelf.running.as_ref().filter(|(running, _)| *running == kind) {
        return html! { <p class="soft" data-testid="study-doing">{ doing.clone() }</p> };
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
            { results(found) }
            { handed(document, found) }
        </>
    }
}

fn results(found: &Answer) -> Html {
    match &found.reports {
        Err(why) => html! { <p class="warn">{ format!("It could not be made: {why}.") }</p> },
        Ok(reports) => {
            let all: Vec<&Report> = reports.iter().collect();
            let over = overview(&all).map(|found| section(&found));
            over.into_iter().chain(reports.iter().flat_map(sections_of)).collect()
        }
    }
}

/// What is kept of an answer: models that came out of it as rivals, certificates as a file.
fn handed(document: &Document, found: &Answer) -> Html {
    let Ok(reports) = &found.reports else { return Html::default() };
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

fn sections_of(report: &Report) -> Vec<Html> {
    sections(report).iter().map(section).collect()
}

fn section(section: &Section) -> Html {
    html! {
        <div class="finding">
            <h4>{ section.heading.clone() }</h4>
            for sentence in &section.verdict {
                <p class="prose">{ sentence.clone() }</p>
            }
            if let Some(figure) = &section.figure {
                <div class="scroll">{ drawn(figure) }</div>
            }
            if let Some(found) = &section.table {
                <div class="scroll" tabindex="0" role="region" aria-label={section.heading.clone()}>
                    { table(found) }
                </div>
            }
            for sentence in &section.notes {
                <p class="prose soft">{ sentence.clone() }</p>
            }
        </div>
    }
}

/// The order of the rivals; it is told in words above it. Attributes, not styles: the page's policy
/// refuses styles that stand in an element.
fn drawn(figure: &Figure) -> Html {
    let (width, height) = figure.size;
    html! {
        <svg role="img" aria-label={figure.label.clone()} viewBox={format!("0 0 {width} {height}")}
            width={width.to_string()} height={height.to_string()} fill="currentColor">
            for ([x1, y1, x2, y2], dashes) in &figure.lines {
                <line x1={x1.to_string()} y1={y1.to_string()} x2={x2.to_string()} y2={y2.to_string()}
                    stroke="currentColor" stroke-dasharray={*dashes} />
            }
            for (x, y, word) in &figure.words {
                <text x={x.to_string()} y={y.to_string()} font-style="italic">{ word.clone() }</text>
            }
            for (x, y, name) in &figure.names {
                <text x={x.to_string()} y={y.to_string()} font-weight="600" text-anchor="middle">{ name.clone() }</text>
            }
        </svg>
    }
}

fn table(table: &Table) -> Html {
    let class = |column: usize| table.words.contains(&column).then_some("word");
    html! {
        <table>
            <thead><tr>
                for (column, head) in table.head.iter().enumerate() {
                    <th scope="col" class={class(column)}>{ head.clone() }</th>
                }
            </tr></thead>
            <tbody>
                for row in &table.rows {
                    <tr>
                        for (column, cell) in row.iter().enumerate() {
                            if column == 0 {
                                <th scope="row">{ cell.clone() }</th>
                            } else {
                                <td class={class(column)}>{ cell.clone() }</td>
                            }
                        }
                    </tr>
                }
            </tbody>
        </table>
    }
}
