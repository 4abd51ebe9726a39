//! Why a rival has no plan or no bound, in its lane; each family named there leads to its line of
//! the notation.

use gloo_timers::callback::Timeout;
use report::explain;
use wasm_bindgen::JsCast;
use web_sys::HtmlTextAreaElement;
use yew::prelude::*;

use crate::state::lane::{Lane, LaneId};
use crate::state::places::of_family;
use crate::view::editor::text_box;
use crate::view::editor_box::select;

/// Families that can be shown at once.
const SHOWN: usize = 6;

/// The reason, where there is one; `writing` opens the notation, `None` where there is none.
pub(crate) fn reason(id: LaneId, lane: &Lane, writing: Option<&UseStateHandle<bool>>) -> Html {
    let told = match (&lane.root, &lane.conflict) {
        (_, Some(conflict)) => Some(explain::conflict(conflict)),
        (Some(root), None) => explain::root(root, lane.maximise())
            .or_else(|| lane.search.as_deref().and_then(explain::search)),
        (None, None) => None,
    };
    let Some(told) = told else { return Html::default() };
    let named = lane.conflict.as_ref().map_or(&[][..], |conflict| conflict.families.as_slice());
    html! {
        <div class="reason small" data-testid="reason" role="status">
            <p>{ told }</p>
            if let Some(writing) = writing.filter(|_| !named.is_empty()) {
                <p>
                    { "Show in the notation: " }
                    for (place, family) in named.iter().take(SHOWN).enumerate() {
                        <>{ if place > 0 { ", " } else { "" } }{ link(id, family, writing) }</>
                    }
                </p>
            }
        </div>
    }
}

fn link(id: LaneId, family: &str, writing: &UseStateHandle<bool>) -> Html {
    let (name, open) = (family.to_owned(), writing.setter());
    let onclick = Callback::from(move |_: MouseEvent| {
        open.set(true);
        let name = name.clone();
        // The notation is drawn first.
        Timeout::new(0, move || show(id, &name)).forget();
    });
    html! {
        <button type="button" class="link" data-testid="show-family" {onclick}>{ family.to_owned() }</button>
    }
}

/// Selects the family's line; without one the notation is open all the same.
fn show(id: LaneId, family: &str) {
    let document = web_sys::window().and_then(|window| window.document());
    let area = document.and_then(|document| document.get_element_by_id(&text_box(id)));
    if let Some(area) = area.and_then(|area| area.dyn_into::<HtmlTextAreaElement>().ok()) {
        let place = of_family(&area.value(), family);
        select(&area, place.unwrap_or_default());
    }
}
