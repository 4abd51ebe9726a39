//! Results beside those of a pack that was opened.

use yew::prelude::*;

use crate::state::document::DocumentAction;
use crate::state::recorded::Held;
use crate::view::hands::use_hands;
use crate::view::inspector::InspectorProps as EvidenceProps;

/// The part; nothing where no pack was opened.
#[component]
pub(crate) fn AgainstRecords(props: &EvidenceProps) -> Html {
    let hands = use_hands();
    let Some(recorded) = &props.document.pack else { return Html::default() };
    let forget = Callback::from(move |_: MouseEvent| {
        if let Some(hands) = &hands {
            hands.document.dispatch(DocumentAction::ForgetPack);
        }
    });
    html! {
        <div class="study" data-testid="against-records">
            <div class="heading">
                <h3>{ "Is it as it was recorded?" }</h3>
                <button type="button" data-testid="forget-pack" onclick={forget}>{ "Forget the pack" }</button>
            </div>
            <p class="soft">
                { format!("Recorded with engine {}. An instance that was recorded is held to its own record; \
                    paste another, and it is held to the least and the most of all of them.", recorded.engine) }
            </p>
            <ul class="prose">{ for recorded.hold(&props.document, &props.board).iter().map(held) }</ul>
        </div>
    }
}

fn held(one: &Held) -> Html {
    let (class, words) = match one.beyond.is_empty() {
        true => ("", one.words.clone()),
        false => ("warn", one.beyond.join("; ")),
    };
    html! { <li {class}>{ format!("{}: {words}.", one.who) }</li> }
}
