//! The box for results of the team's own solver; they belong to the scenario.

use web_sys::HtmlTextAreaElement;
use yew::prelude::*;

use crate::state::document::DocumentAction;
use crate::view::hands::use_hands;

/// What a table looks like.
const EXAMPLE: &str = "instance\trival\tbound\tplan\tnodes\ttime\nMonday\tA\t151.2\t159\t20000\t60.5\n\
                       Monday\tC\t159\t159\t3\t0.5";

#[derive(Properties, PartialEq)]
pub(crate) struct PastedProps {
    pub(crate) text: String,
}

/// The box.
#[component]
pub(crate) fn Pasted(props: &PastedProps) -> Html {
    let hands = use_hands();
    let oninput = Callback::from(move |event: InputEvent| {
        let area: HtmlTextAreaElement = event.target_unchecked_into();
        if let Some(hands) = &hands {
            hands.document.dispatch(DocumentAction::Table(area.value()));
        }
    });
    html! {
        <div class="paste">
            <label for="production-text">
                { "Its results, a line for each instance and rival: the rival by its letter here, the time in seconds; \
                   what was not measured stays empty." }
            </label>
            <textarea
                id="production-text" data-testid="production-text" rows="5" spellcheck="false" wrap="off"
                placeholder={EXAMPLE} value={props.text.clone()} {oninput}
            />
        </div>
    }
}
