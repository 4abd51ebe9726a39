//! What was done by hand in a lane, each act with a button that takes it back.

use record::message::RivalReport;
use yew::prelude::*;

use crate::state::document::{DocumentAction, Slot};
use crate::state::pointer::Shared;
use crate::state::steer::{Steer, act_words};
use crate::view::hands::use_hands;

/// Acts shown before the rest are counted.
const SHOWN: usize = 12;

#[derive(Properties, PartialEq)]
pub(crate) struct ActsProps {
    pub(crate) slot: Slot,
    pub(crate) letter: String,
    pub(crate) rival: Option<Shared<RivalReport>>,
}

/// The list; nothing where nothing was done.
#[component]
pub(crate) fn Acts(props: &ActsProps) -> Html {
    let hands = use_hands();
    let acts = &props.slot.rival.acts;
    if acts.is_empty() {
        return Html::default();
    }
    let id = props.slot.id;
    let steer = move |steer: fn(crate::state::lane::LaneId, usize) -> Steer, place: usize| {
        let hands = hands.clone();
        Callback::from(move |_: MouseEvent| {
            if let Some(hands) = &hands {
                hands.document.dispatch(DocumentAction::Steer(steer(id, place)));
            }
        })
    };
    let columns = props.rival.as_ref().map_or(&[][..], |rival| rival.column_names.as_slice());
    let hidden = acts.len().saturating_sub(SHOWN);
    html! {
        <div class="by-hand small" data-testid="acts">
            <h4>{ "By hand" }</h4>
            <ol>
                if hidden > 0 { <li class="soft">{ format!("{hidden} earlier") }</li> }
                for (place, act) in acts.iter().enumerate().skip(hidden) {
                    <li key={place}>
                        { act_words(act, columns) }{ " " }
                        <button
                            type="button" class="link soft" onclick={steer(Steer::TakeBack, place)}
                            aria-label={format!("Take back, {}", act_words(act, columns))}
                        >{ "Take back" }</button>
                    </li>
                }
            </ol>
            <button
                type="button" class="link" data-testid="forget-acts"
                onclick={steer(|id, _| Steer::Forget(id), 0)}
                aria-label={format!("Forget all acts in {}", props.letter)}
            >{ "Forget all acts" }</button>
        </div>
    }
}
