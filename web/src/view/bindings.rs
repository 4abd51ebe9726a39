//! Which datum of the instance each name of the rivals takes, where the names differ; and whose rivals
//! would find their data, where none of these does or all of it is assumed.

use record::message::{BindJob, Binding, BindingOffer, FoundBy};
use web_sys::HtmlSelectElement;
use yew::prelude::*;

use crate::state::arrange::Arrange;
use crate::state::document::{Document, DocumentAction};
use crate::view::hands::{Hands, use_hands};
use crate::view::instance::InstanceProps;

/// Families offered at most.
const SUITS: usize = 6;

/// The table; nothing while every name is the instance's own.
#[component]
pub(crate) fn Bindings(props: &InstanceProps) -> Html {
    let hands = use_hands();
    let document = &props.document;
    let text = document.accepted.as_ref().map(|accepted| accepted.text.clone());
    let rivals: Vec<_> = document.slots.iter().map(|slot| slot.rival.clone()).collect();
    let asked = hands.clone();
    use_effect_with((text, rivals), move |(text, rivals)| {
        if let (Some(hands), Some(text)) = (asked, text) {
            let rivals = rivals.iter().map(|rival| (**rival).clone()).collect();
            hands.session.bind(BindJob { instance: (**text).clone(), rivals });
        }
    });
    let plain = |line: &Binding| line.found == FoundBy::Name && line.problem.is_empty();
    if document.bindings.iter().all(plain) {
        return Html::default();
    }
    let choose = |name: &str| {
        let (hands, name) = (hands.clone(), name.to_owned());
        Callback::from(move |event: Event| {
            let field: HtmlSelectElement = event.target_unchecked_into();
            let taken = Some(field.value()).filter(|value| !value.is_empty());
            if let Some(hands) = &hands {
                hands.document.dispatch(DocumentAction::Bind(name.clone(), taken));
            }
        })
    };
    html! {
        <>
        { suits(document, hands.as_ref()) }
        <div class="scroll" tabindex="0" role="region" aria-label="Data that the rivals take">
            <table class="bindings" data-testid="bindings">
                <caption>{ "What the rivals take from the instance." }</caption>
                <thead><tr>
                    <th scope="col">{ "rivals' name" }</th>
                    <th scope="col">{ "takes" }</th>
                    <td />
                </tr></thead>
                <tbody>
                    for line in document.bindings.iter() { { row(document, line, choose(&line.name)) } }
                </tbody>
            </table>
        </div>
        </>
    }
}

/// Families whose data the instance holds, where no rival finds all of its own, or only by assumption:
/// one click takes their rivals in place of these.
fn suits(document: &Document, hands: Option<&Hands>) -> Html {
    if document.suits.is_empty() {
        return Html::default();
    }
    let take = |family: &str| {
        let (hands, family) = (hands.cloned(), family.to_owned());
        Callback::from(move |_: MouseEvent| {
            if let Some(hands) = &hands {
                let family = Arrange::Family(family.clone());
                hands.document.dispatch(DocumentAction::Arrange(family));
            }
        })
    };
    html! {
        <div class="suits" role="group" aria-label="Rivals that suit the instance" data-testid="suits">
            <p class="small">{ "No rival finds all of its data here but by assumption. Take rivals of a family that does, or nearly:" }</p>
            <ul class="acts">
                for suit in document.suits.iter().take(SUITS) {
                    <li key={suit.family.clone()}>
                        <button type="button" onclick={take(&suit.family)}>{ suit.family.clone() }</button>
                        if !suit.lacks.is_empty() { <span class="small soft">{ format!(" lacks {}", suit.lacks) }</span> }
                    </li>
                }
            </ul>
        </div>
    }
}

fn row(document: &Document, line: &Binding, onchange: Callback<Event>) -> Html {
    let own = document.draft.bind.get(&line.name);
    let chosen = own.or(line.taken.as_ref());
    let known = chosen.is_none_or(|name| line.offers.iter().any(|offer| offer.name == *name));
    let option = |offer: &BindingOffer| {
        html! {
            <option value={offer.name.clone()} selected={chosen == Some(&offer.name)}>
                { if offer.fits { offer.name.clone() } else { format!("{} – {}", offer.name, offer.what) } }
            </option>
        }
    };
    let fits = line.offers.iter().filter(|offer| offer.fits);
    let others = line.offers.iter().filter(|offer| !offer.fits);
    html! {
        <tr key={line.name.clone()} data-name={line.name.clone()}>
            <th scope="row"><i>{ line.name.clone() }</i>{ " " }<span class="soft">{ line.meaning.clone() }</span></th>
            <td>
                <select aria-label={format!("Datum that {} takes", line.name)} {onchange}>
                    if !known { <option selected=true>{ chosen.cloned() }</option> }
                    <option value="" selected={chosen.is_none()}>{ if own.is_some() { "as found" } else { "choose" } }</option>
                    for offer in fits { { option(offer) } }
                    if others.clone().next().is_some() {
                        <optgroup label="other shapes">for offer in others { { option(offer) } }</optgroup>
                    }
                </select>
            </td>
            <td>{ said(line) }</td>
        </tr>
    }
}

/// How it was found, or what is wrong.
fn said(line: &Binding) -> Html {
    if !line.problem.is_empty() {
        return html! { <span class="warn">{ line.problem.clone() }</span> };
    }
    html! {
        <span class="soft">{ match line.found {
            FoundBy::Shape => format!("assumed: {}", line.reason),
            FoundBy::Person => "chosen".to_owned(),
            FoundBy::Name | FoundBy::Nothing => String::new(),
        } }</span>
    }
}
