//! The instances of the scenario by title, where there are several; one is chosen.

use record::scenario::MOST_INSTANCES;
use web_sys::HtmlInputElement;
use yew::prelude::*;

use crate::state::document::DocumentAction;
use crate::state::instances::{InstanceEdit, instance_title};
use crate::view::hands::use_hands;
use crate::view::instance::InstanceProps;

/// The row.
#[component]
pub(crate) fn Instances(props: &InstanceProps) -> Html {
    let hands = use_hands();
    let edit = Callback::from(move |edit: InstanceEdit| {
        if let Some(hands) = &hands {
            hands.document.dispatch(DocumentAction::Instances(edit));
        }
    });
    let all = props.document.instances();
    let chosen = props.document.chosen;
    let press = |what: InstanceEdit| edit.reform(move |_: MouseEvent| what.clone());
    let oninput = edit.reform(|event: InputEvent| {
        let field: HtmlInputElement = event.target_unchecked_into();
        InstanceEdit::Rename(field.value())
    });
    html! {
        <div class="instances" role="group" aria-label="Instances" data-testid="instances">
            if all.len() > 1 {
                for (place, text) in all.iter().enumerate() {
                    <button
                        key={place} type="button" onclick={press(InstanceEdit::Choose(place))}
                        aria-pressed={if place == chosen { "true" } else { "false" }}
                    >{ instance_title(text, place) }</button>
                }
                <input
                    type="text" aria-label="Title of the chosen instance" maxlength="80"
                    data-testid="instance-title" value={props.document.draft.title.clone()} {oninput}
                />
                <button type="button" data-testid="remove-instance" onclick={press(InstanceEdit::Remove)}>{ "Remove" }</button>
            }
            if all.len() < MOST_INSTANCES {
                <button type="button" data-testid="add-instance" onclick={press(InstanceEdit::Add)}>{ "Add an instance" }</button>
            }
        </div>
    }
}
