//! What could not be read: line, place, reason and mend, with the line quoted and the place in it
//! underlined.

use record::message::{Complaint, InstanceReport};
use record::scenario::InstanceText;
use web_sys::HtmlTextAreaElement;
use yew::prelude::*;

use crate::state::pointer::Shared;
use crate::state::words::{advice, sentence, spans};
use crate::view::guide::said;
use crate::view::paste::BOX;

/// Complaints shown at once.
const SHOWN: usize = 12;

/// Characters quoted around the place.
const QUOTED: usize = 48;

#[derive(Properties, PartialEq)]
pub(crate) struct ComplaintsProps {
    pub(crate) text: Shared<InstanceText>,
    pub(crate) report: Shared<InstanceReport>,
}

/// The list of complaints.
#[component]
pub(crate) fn Complaints(props: &ComplaintsProps) -> Html {
    let complaints = &props.report.complaints;
    if complaints.is_empty() {
        return Html::default();
    }
    let more = complaints.len().saturating_sub(SHOWN) as u64;
    html! {
        <div
            class={classes!("complaints", complaints.iter().any(|one| one.error).then_some("errors"))}
            id="complaints" role="group" aria-label="Remarks on the text"
        >
            <ol data-testid="complaints">
                for (place, complaint) in complaints.iter().take(SHOWN).enumerate() {
                    <li key={place} class={kind(complaint)}>
                        { one(&props.text.text, complaint) }
                    </li>
                }
            </ol>
            if more > 0 {
                <p class="soft">{ format!("and {}", report::number::of(more, "further complaint")) }</p>
            }
        </div>
    }
}

/// The kind of a complaint in a word.
pub(crate) fn kind(complaint: &Complaint) -> &'static str {
    if complaint.error {
        "Error"
    } else if complaint.is_note() {
        "Note"
    } else {
        "Warning"
    }
}

fn one(text: &str, complaint: &Complaint) -> Html {
    let (start, end) = (complaint.start, complaint.end);
    let show = Callback::from(move |_: MouseEvent| select(start, end));
    let kind = kind(complaint);
    let place = format!("{kind}, line {}, column {}: ", complaint.line, complaint.column);
    let (before, marked, after) = quote(text, complaint);
    let (message, mend) = (sentence(&complaint.message), advice(&complaint.mend));
    html! {
        <>
            <p>
                <b>{ place }</b>{ for spans(&message).map(said) }
                if !mend.is_empty() { { " " }<span class="mend">{ for spans(&mend).map(said) }</span> }
                { " " }<button type="button" class="link" onclick={show}>{ "Show in the text" }</button>
            </p>
            if !(before.is_empty() && marked.is_empty() && after.is_empty()) {
                <pre>{ before }<mark>{ marked }</mark>{ after }</pre>
            }
        </>
    }
}

/// Selects a place of the box and brings it into view.
fn select(start: u32, end: u32) {
    use wasm_bindgen::JsCast;
    let element = gloo_utils::document().get_element_by_id(BOX);
    if let Some(area) = element.and_then(|element| element.dyn_into::<HtmlTextAreaElement>().ok()) {
        // A box that is gone or a place beyond its end leaves nothing to select.
        let _ = area.focus();
        let _ = area.set_selection_range(start, end);
    }
}

/// The line of a complaint around its place: what comes before, the place, what follows.
fn quote(text: &str, complaint: &Complaint) -> (String, String, String) {
    let line = text.lines().nth((complaint.line as usize).saturating_sub(1)).unwrap_or("");
    let letters: Vec<char> = line.chars().map(|c| if c == '\t' { ' ' } else { c }).collect();
    let start = (complaint.column as usize).saturating_sub(1).min(letters.len());
    let length = (complaint.end.saturating_sub(complaint.start) as usize).max(1);
    let end = (start + length).min(letters.len());
    let from = start.saturating_sub(QUOTED / 2);
    let to = (end + QUOTED / 2).min(letters.len());
    let part = |from: usize, to: usize| letters[from..to].iter().collect::<String>();
    let lead = if from > 0 { "… " } else { "" };
    let tail = if to < letters.len() { " …" } else { "" };
    let marked = if start == end { " ".to_owned() } else { part(start, end) };
    if line.is_empty() {
        return (String::new(), String::new(), String::new());
    }
    (format!("{lead}{}", part(from, start)), marked, format!("{}{tail}", part(end, to)))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn at(line: u32, column: u32, length: u32) -> Complaint {
        Complaint {
            error: true,
            code: String::new(),
            line,
            column,
            start: 0,
            end: length,
            message: String::new(),
            mend: String::new(),
        }
    }

    #[test]
    fn the_place_is_quoted_in_its_line() {
        let (before, marked, after) = quote("1 2\n3 x4 5", &at(2, 3, 2));
        assert_eq!((before.as_str(), marked.as_str(), after.as_str()), ("3 ", "x4", " 5"));
    }

    #[test]
    fn a_place_past_the_end_is_a_blank() {
        let (before, marked, after) = quote("1 2", &at(1, 9, 1));
        assert_eq!((before.as_str(), marked.as_str(), after.as_str()), ("1 2", " ", ""));
        assert_eq!(quote("", &at(7, 1, 1)).1, "");
    }

    #[test]
    fn a_long_line_is_cut_around_the_place() {
        let line = "7 ".repeat(200);
        let (before, _, after) = quote(&line, &at(1, 201, 1));
        assert!(before.starts_with('…') && after.ends_with('…'));
        assert!(before.chars().count() + after.chars().count() < 60);
    }
}
