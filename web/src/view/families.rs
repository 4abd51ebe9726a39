//! The constraint families of a rival, each with its state: in the model, on demand, or out.

use record::message::RivalReport;
use record::results::FamilyReport;
use record::scenario::FamilyState;
use report::number::of;
use web_sys::HtmlSelectElement;
use yew::prelude::*;

use crate::state::document::{DocumentAction, Slot};
use crate::state::lane::LaneId;
use crate::state::pointer::Shared;
use crate::state::words::family_state_from;
use crate::view::hands::use_hands;

#[derive(Properties, PartialEq)]
pub(crate) struct FamiliesProps {
    pub(crate) slot: Slot,
    pub(crate) rival: Shared<RivalReport>,
}

/// The families.
#[component]
pub(crate) fn Families(props: &FamiliesProps) -> Html {
    let known = &props.rival.families;
    let hidden = props.slot.rival.families.iter();
    let hidden = hidden.filter(|(name, _)| known.iter().all(|family| family.name != **name));
    html! {
        <div class="families" role="group" aria-label="Constraint families">
            for family in known.iter() {
                <Family key={family.name.clone()} lane={props.slot.id} family={family.clone()} />
            }
            for (name, state) in hidden {
                <Family key={name.clone()} lane={props.slot.id} family={absent(name, *state)} />
            }
        </div>
    }
}

/// A family that the scenario names and the model does not hold.
fn absent(name: &str, state: FamilyState) -> FamilyReport {
    FamilyReport {
        name: name.to_owned(),
        state,
        rows: 0,
        added: 0,
        decades: std::collections::BTreeMap::new(),
        separation: String::new(),
    }
}

#[derive(Properties, PartialEq)]
struct FamilyProps {
    lane: LaneId,
    family: FamilyReport,
}

#[component]
fn Family(props: &FamilyProps) -> Html {
    let hands = use_hands();
    let (lane, family) = (props.lane, &props.family);
    let name = family.name.clone();
    let onchange = Callback::from(move |event: Event| {
        let select: HtmlSelectElement = event.target_unchecked_into();
        if let (Some(hands), Some(state)) = (&hands, family_state_from(&select.value())) {
            hands.document.dispatch(DocumentAction::Family(lane, name.clone(), state));
        }
    });
    let separable = !family.separation.is_empty() || family.state == FamilyState::OnDemand;
    let states = [FamilyState::In, FamilyState::OnDemand, FamilyState::Out];
    html! {
        <label class="family" title={explained(family)}>
            { family.name.clone() }
            <select data-family={family.name.clone()} {onchange}>
                for state in states {
                    if separable || state != FamilyState::OnDemand {
                        <option value={state.word()} selected={state == family.state}>
                            { state.word() }
                        </option>
                    }
                }
            </select>
        </label>
    }
}

fn explained(family: &FamilyReport) -> String {
    let rows = match family.state {
        FamilyState::In => of(u64::from(family.rows), "row"),
        FamilyState::OnDemand => {
            format!("{} added at the root", of(u64::from(family.added), "row"))
        }
        FamilyState::Out => "left out".to_owned(),
    };
    if family.separation.is_empty() { rows } else { format!("{rows}; {}", family.separation) }
}
