//! What is to be said of a formulation: message, place and mends; a click puts the caret there.

use record::message::{Remark, TextEdit};
use web_sys::HtmlTextAreaElement;
use yew::prelude::*;

use crate::state::pointer::Shared;
use crate::state::words::{advice, sentence};
use crate::view::complaints::kind;
use crate::view::editor_box::{replace, select};
use crate::view::meaning::Meaning;

/// Remarks shown at once.
const SHOWN: usize = 12;

#[derive(Properties, PartialEq)]
pub(crate) struct RemarksProps {
    pub(crate) id: String,
    pub(crate) remarks: Shared<Vec<Remark>>,
    /// Whether they are about the text as it is now: only then can it be mended by a button.
    pub(crate) fresh: bool,
    pub(crate) area: NodeRef,
    pub(crate) typed: Callback<String>,
}

/// The list.
#[component]
pub(crate) fn Remarks(props: &RemarksProps) -> Html {
    let remarks = &props.remarks;
    let errors = remarks.iter().any(|remark| remark.complaint.error);
    let more = remarks.len().saturating_sub(SHOWN) as u64;
    if remarks.is_empty() {
        return html! { <div id={props.id.clone()} /> };
    }
    html! {
        <div
            id={props.id.clone()} class={classes!("complaints", errors.then_some("errors"))}
            role="group" aria-label="Remarks on the formulation"
        >
            <ol data-testid="notation-remarks">
                for (place, remark) in remarks.iter().take(SHOWN).enumerate() {
                    <li key={place} class={classes!("remark", kind(&remark.complaint))}>
                        { one(props, remark) }
                    </li>
                }
            </ol>
            if more > 0 {
                <p class="soft">{ format!("and {}", report::number::of(more, "further remark")) }</p>
            }
        </div>
    }
}

fn one(props: &RemarksProps, remark: &Remark) -> Html {
    let complaint = &remark.complaint;
    let place =
        format!("{}, line {}, column {}", kind(complaint), complaint.line, complaint.column);
    let (area, range) = (props.area.clone(), (complaint.start, complaint.end));
    let show = Callback::from(move |_: MouseEvent| {
        if let Some(area) = area.cast::<HtmlTextAreaElement>() {
            select(&area, range);
        }
    });
    let told = !complaint.mend.is_empty();
    html! {
        <>
            <button type="button" class="link" onclick={show}>{ place }</button>
            { ": " }<p>
                { sentence(&complaint.message) }
                if told { { " " }<span class="mend">{ advice(&complaint.mend) }</span> }
            </p>
            if complaint.code.contains('.') {
                { " " }<Meaning code={complaint.code.clone()} />
            }
            if props.fresh {
                for (place, edit) in remark.mends.iter().enumerate() {
                    { " " }{ mend(props, place, edit) }
                }
            }
        </>
    }
}

fn mend(props: &RemarksProps, place: usize, edit: &TextEdit) -> Html {
    let (area, typed, made) = (props.area.clone(), props.typed.clone(), edit.clone());
    let onclick = Callback::from(move |_: MouseEvent| {
        replace(&area, (made.start, made.end), &made.text, &typed);
    });
    let name = format!("Do this: {}", edit.label);
    html! {
        <button key={place} type="button" class="link" data-testid="mend" {onclick}>{ name }</button>
    }
}
