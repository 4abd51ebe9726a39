//! What differs between two rivals as they are written: sizes, variables, families, coefficients, and
//! the lines of their notation.

use report::difference::{LineOf, Lines, lines, sentences};
use web_sys::HtmlSelectElement;
use yew::prelude::*;

use crate::state::board::Board;
use crate::state::document::{Document, Slot};
use crate::state::editor::Draft;
use crate::view::inspector::InspectorProps as DifferencesProps;

/// The part, folded until it is asked for; nothing where there are no two rivals.
#[component]
pub(crate) fn Differences(props: &DifferencesProps) -> Html {
    let (document, board) = (&props.document, &props.board);
    let open = use_state_eq(|| false);
    let pair = use_state_eq(|| (0_usize, 1_usize));
    let last = document.slots.len();
    if last < 2 {
        return Html::default();
    }
    let ontoggle = {
        let open = open.setter();
        Callback::from(move |event: Event| {
            open.set(event.target_unchecked_into::<web_sys::Element>().has_attribute("open"));
        })
    };
    let (one, other) = (pair.0.min(last - 1), pair.1.min(last - 1));
    let choose = |chosen: usize, other: usize, label: &'static str, first: bool| {
        let pair = pair.setter();
        let onchange = Callback::from(move |event: Event| {
            let place = event.target_unchecked_into::<HtmlSelectElement>().selected_index();
            let place = place.max(0) as usize;
            pair.set(if first { (place, other) } else { (other, place) });
        });
        html! {
            <select aria-label={label} {onchange}>
                for (place, slot) in document.slots.iter().enumerate() {
                    <option selected={place == chosen}>
                        { format!("{} {}", Document::letter(place), document.rival_title(&slot.rival)) }
                    </option>
                }
            </select>
        }
    };
    html! {
        <details class="folded small" data-testid="differences" {ontoggle}>
            <summary>{ "What differs between two rivals as they are written?" }</summary>
            if *open {
                <div class="row">
                    { choose(one, other, "First rival", true) }
                    { choose(other, one, "Second rival", false) }
                </div>
                { told(document, board, (one, other)) }
            }
        </details>
    }
}

fn told(document: &Document, board: &Board, (one, other): (usize, usize)) -> Html {
    let slots = [&document.slots[one], &document.slots[other]];
    let names = [Document::letter(one), Document::letter(other)];
    let [Some(mine), Some(theirs)] = slots.map(|slot| board.lane(slot.id).rival.clone()) else {
        return html! { <p class="soft">{ "Both are compared once both are understood." }</p> };
    };
    let said = sentences([&names[0], &names[1]], [&mine, &theirs]);
    let script = |slot: &Slot| Draft::of(&slot.rival, &document.catalogue).map(|draft| draft.text);
    let apart = match slots.map(script) {
        [Some(mine), Some(theirs)] => lines(&mine, &theirs),
        _ => Lines::default(),
    };
    html! {
        <>
            <ul class="prose" data-testid="difference-words">
                for sentence in said { <li>{ sentence }</li> }
            </ul>
            if !apart.told.is_empty() {
                <table class="lines" data-testid="difference-lines">
                    <caption>{ "Lines of notation that only one of them has" }</caption>
                    <tbody>
                        for LineOf { first, text } in apart.told {
                            <tr>
                                <th scope="row">{ names[usize::from(!first)].clone() }</th>
                                <td><code>{ text }</code></td>
                            </tr>
                        }
                    </tbody>
                </table>
            }
            if !apart.left_out.is_empty() { <p class="soft">{ apart.left_out }</p> }
        </>
    }
}
