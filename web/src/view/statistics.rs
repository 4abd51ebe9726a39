//! Sums, ranges and sizes, behind a word that opens them; and the choice among the instances of a
//! file.

use record::message::InstanceReport;
use record::scenario::reader_and_part;
use web_sys::HtmlSelectElement;
use yew::prelude::*;

use crate::state::document::DocumentAction;
use crate::view::hands::Hands;

/// The sentences; nothing where there are none.
pub(crate) fn statistics(sentences: &[String]) -> Html {
    if sentences.is_empty() {
        return Html::default();
    }
    html! {
        <details class="folded small" data-testid="statistics">
            <summary>{ "Numbers in short" }</summary>
            <ul class="facts">for said in sentences.iter() { <li>{ said.clone() }</li> }</ul>
        </details>
    }
}

/// Which instance of a file that holds several is read.
pub(crate) fn parts(report: &InstanceReport, reader: Option<&str>, hands: Option<&Hands>) -> Html {
    if report.parts.is_empty() {
        return Html::default();
    }
    let part = reader.and_then(|reader| reader_and_part(reader).1).unwrap_or(1);
    let (hands, name) = (hands.cloned(), report.reader.clone());
    let onchange = Callback::from(move |event: Event| {
        let select: HtmlSelectElement = event.target_unchecked_into();
        if let Some(hands) = &hands {
            let reader = Some(format!("{name} {}", select.value()));
            hands.document.dispatch(DocumentAction::Reader(reader));
        }
    });
    html! {
        <label class="field">
            { "Instance of this file" }
            <select data-testid="part" {onchange}>
                for (at, word) in (1..).zip(report.parts.iter()) {
                    <option value={at.to_string()} selected={at == part}>{ word.clone() }</option>
                }
            </select>
        </label>
    }
}
