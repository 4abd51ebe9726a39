//! The first steps, for who opens the page for the first time; dismissed once, they never come back.

use yew::prelude::*;

use crate::browser::store::{dismiss_hints, wants_hints};

/// The hints.
#[component]
pub(crate) fn Hints() -> Html {
    let shown = use_state_eq(wants_hints);
    if !*shown {
        return Html::default();
    }
    let away = {
        let shown = shown.setter();
        Callback::from(move |_: MouseEvent| {
            dismiss_hints();
            shown.set(false);
            crate::view::inspector::focus(crate::view::rivals::HEADING);
        })
    };
    html! {
        <aside class="hints small" aria-label="First steps" data-testid="hints">
            <ol>
                <li>{ "What stands here is an example. Paste your own table, file or model over it, under “Instance”." }</li>
                <li>{ "Choose rivals, change a family to “out” or “on demand”, or open “Notation” and edit. “Run all” grows the trees." }</li>
                <li>{ "Ask the questions under “Evidence”; save the decision record; “Copy link” hands all of it over." }</li>
            </ol>
            <button type="button" onclick={away} data-testid="dismiss-hints">{ "Do not show again" }</button>
        </aside>
    }
}
