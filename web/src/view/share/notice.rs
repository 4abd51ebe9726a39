//! What is said about links, files and what the browser keeps, in one place under the buttons.

use record::message::Complaint;
use record::scenario::Scenario;
use report::changes::Change;
use report::difference::LineOf;
use report::number::of;
use yew::prelude::*;

use crate::demo::demo;
use crate::state::document::DocumentAction;
use crate::state::pointer::Shared;
use crate::state::share::Refusal;
use crate::state::words::{advice, sentence};
use crate::view::share::keep::Opening;

/// Complaints shown at once.
const SHOWN: usize = 8;

/// A notice; empty when there is nothing to say.
#[derive(Debug, Clone, Default, PartialEq)]
pub(crate) struct Notice {
    words: String,
    complaints: Vec<Complaint>,
    offers_demo: bool,
    offers_file: bool,
}

impl Notice {
    /// A sentence.
    pub(crate) fn of(words: impl Into<String>) -> Self {
        Self { words: words.into(), ..Self::default() }
    }

    /// A sentence with the button that saves a file.
    pub(crate) fn offering_a_file(words: impl Into<String>) -> Self {
        Self { offers_file: true, ..Self::of(words) }
    }

    /// Why something was not opened.
    pub(crate) fn refusal(refusal: Refusal) -> Self {
        Self { words: refusal.words, complaints: refusal.complaints, ..Self::default() }
    }

    /// What was opened.
    pub(crate) fn opened(scenario: &Scenario, from: &str) -> Self {
        let title = if scenario.title.is_empty() { "without a title" } else { &scenario.title };
        Self::of(format!("Opened from {from}: {title}."))
    }

    /// What is said when the page opens.
    pub(crate) fn at_opening(opening: &Opening) -> Self {
        let said = match &opening.refusal {
            Some(refusal) => Self::refusal(refusal.clone()),
            None if opening.from_link => Self::opened(&opening.scenario, "the link"),
            None => Self::default(),
        };
        if !opening.restored {
            return said;
        }
        let words = [said.words.as_str(), "Restored from this browser."].join(" ");
        Self { words: words.trim().to_owned(), offers_demo: true, ..said }
    }
}

#[derive(Properties, PartialEq)]
pub(crate) struct NoticeProps {
    pub(crate) notice: Notice,
    /// What that which was opened changes of what was here.
    pub(crate) changes: Shared<Vec<Change>>,
    pub(crate) act: Callback<DocumentAction>,
    pub(crate) save: Callback<()>,
    pub(crate) hide: Callback<()>,
}

/// The notice; the region is always there, so that what comes into it is spoken.
#[component]
pub(crate) fn NoticeView(props: &NoticeProps) -> Html {
    let notice = &props.notice;
    let start = {
        let (act, hide) = (props.act.clone(), props.hide.clone());
        Callback::from(move |_: MouseEvent| {
            act.emit(DocumentAction::Open(Box::new(demo())));
            hide.emit(());
        })
    };
    let more = notice.complaints.len().saturating_sub(SHOWN) as u64;
    html! {
        <div class="said" role="status" data-testid="share-notice">
            if !notice.words.is_empty() {
                <p class="row">
                    <span>{ notice.words.clone() }</span>
                    if notice.offers_demo {
                        <button type="button" data-testid="start-from-demo" onclick={start}>{ "Start from the demo instead" }</button>
                    }
                    if notice.offers_file {
                        <button type="button" data-testid="save-offered" onclick={props.save.reform(|_| ())}>{ "Save file" }</button>
                    }
                    <button type="button" class="link" onclick={props.hide.reform(|_| ())}>{ "Hide" }</button>
                </p>
                if !notice.complaints.is_empty() {
                    <ul class="complaints errors">
                        for complaint in notice.complaints.iter().take(SHOWN) {
                            <li class={if complaint.error { "Error" } else { "Warning" }}>
                                <b>{ format!("Line {}, column {}: ", complaint.line, complaint.column) }</b>
                                { sentence(&complaint.message) }{ " " }
                                <span class="mend">{ advice(&complaint.mend) }</span>
                            </li>
                        }
                    </ul>
                }
                { changed(&props.changes) }
                if more > 0 { <p>{ format!("and {}", of(more, "further complaint")) }</p> }
            }
        </div>
    }
}

/// What was changed, folded behind its count.
fn changed(changes: &[Change]) -> Html {
    if changes.is_empty() {
        return Html::default();
    }
    let line = |line: &LineOf| {
        html! {
            <tr>
                <th scope="row">{ if line.first { "before" } else { "now" } }</th>
                <td><code>{ line.text.clone() }</code></td>
            </tr>
        }
    };
    html! {
        <details class="folded small" data-testid="changes">
            <summary>{ format!("{} to what was here", of(changes.len() as u64, "change")) }</summary>
            <ul class="prose">
                for change in changes {
                    <li>
                        { change.words.clone() }
                        if !change.lines.told.is_empty() {
                            <table class="lines"><tbody>{ for change.lines.told.iter().map(line) }</tbody></table>
                        }
                        if !change.lines.left_out.is_empty() { <p class="soft">{ change.lines.left_out.clone() }</p> }
                    </li>
                }
            </ul>
        </details>
    }
}
