//! The notes at the foot: why these rivals, and what was decided.

use web_sys::HtmlTextAreaElement;
use yew::prelude::*;

use crate::state::document::DocumentAction;
use crate::state::pointer::Shared;
use crate::view::hands::use_hands;

#[derive(Properties, PartialEq)]
pub(crate) struct NotesProps {
    pub(crate) notes: Shared<String>,
}

/// The section.
#[component]
pub(crate) fn Notes(props: &NotesProps) -> Html {
    let hands = use_hands();
    let oninput = Callback::from(move |event: InputEvent| {
        let area: HtmlTextAreaElement = event.target_unchecked_into();
        if let Some(hands) = &hands {
            hands.document.dispatch(DocumentAction::Notes(area.value()));
        }
    });
    html! {
        <section class="notes" aria-labelledby="notes-heading">
            <h2 id="notes-heading">{ "Notes and decision" }</h2>
            <textarea
                aria-labelledby="notes-heading" data-testid="notes" rows="6" value={(*props.notes).clone()}
                placeholder="Why these rivals, and what was decided. Kept with the scenario." {oninput}
            />
        </section>
    }
}
