//! Rules and limits changed from here on in one lane: each change is an act by hand, so that a link
//! replays it where it was made.

use record::file::{BRANCHING, SELECTION};
use record::scenario::{Act, ActKind};
use wasm_bindgen::JsCast;
use web_sys::{HtmlInputElement, HtmlSelectElement};
use yew::prelude::*;

use crate::browser::session::Session;
use crate::state::lane::LaneId;
use crate::view::hands::Hands;

/// The choices, shut until they are wanted.
pub(crate) fn change(id: LaneId, letter: &str, hands: &Hands) -> Html {
    let session = &hands.session;
    let branching: Vec<&str> = BRANCHING.iter().map(|rule| rule.0).collect();
    let selection: Vec<&str> = SELECTION.iter().map(|rule| rule.0).collect();
    html! {
        <details class="take" data-testid="change">
            <summary aria-label={format!("Change rules of {letter} from here on")}>{ "Change rules" }</summary>
            <div class="acts">
                { choice("branching", "branching", &branching, id, session) }
                { choice("selection", "next node", &selection, id, session) }
                <label class="family">
                    { "nodes at most" }
                    <input type="number" min="0" data-testid="change-nodes" onchange={limit(id, session.clone())} />
                </label>
                <label class="family">
                    { "variables first" }
                    <input type="text" size="8" data-testid="change-priority" onchange={priority(id, session.clone())} />
                </label>
            </div>
        </details>
    }
}

fn choice(
    name: &'static str,
    label: &'static str,
    words: &[&'static str],
    id: LaneId,
    session: &Session,
) -> Html {
    let session = session.clone();
    let onchange = Callback::from(move |event: Event| {
        let select: HtmlSelectElement = event.target_unchecked_into();
        session.act(id, rule(name, vec![select.value()]));
        select.set_value("");
    });
    html! {
        <label class="family">
            { label }
            <select data-testid={format!("change-{name}")} {onchange}>
                <option value="" selected=true disabled=true>{ "from here on" }</option>
                for word in words { <option value={*word}>{ *word }</option> }
            </select>
        </label>
    }
}

fn limit(id: LaneId, session: Session) -> Callback<Event> {
    Callback::from(move |event: Event| {
        let input = event.target().and_then(|input| input.dyn_into::<HtmlInputElement>().ok());
        if let Some(input) = input.filter(|input| !input.value().is_empty()) {
            session.act(id, rule("nodes", vec![input.value()]));
        }
    })
}

/// Names of variables, between commas or spaces; none leaves all alike.
fn priority(id: LaneId, session: Session) -> Callback<Event> {
    Callback::from(move |event: Event| {
        let input = event.target().and_then(|input| input.dyn_into::<HtmlInputElement>().ok());
        if let Some(input) = input {
            let names = input.value();
            let names = names.split([',', ' ']).filter(|name| !name.is_empty());
            session.act(id, rule("priority", names.map(str::to_owned).collect()));
        }
    })
}

fn rule(name: &str, values: Vec<String>) -> Act {
    let on = std::iter::once(name.to_owned()).chain(values).collect();
    Act { after: 0, what: ActKind::Rule, node: None, on }
}
