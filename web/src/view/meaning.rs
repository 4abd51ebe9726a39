//! What the code of a remark means, asked of the engine when it is opened: the page itself holds
//! none of the texts.

use record::message::Explanation;
use yew::prelude::*;

use crate::view::hands::use_hands;

#[derive(Properties, PartialEq)]
pub(crate) struct MeaningProps {
    pub(crate) code: AttrValue,
}

/// The button, and the meaning with its example once it is open.
#[component]
pub(crate) fn Meaning(props: &MeaningProps) -> Html {
    let hands = use_hands();
    let open = use_state_eq(|| false);
    let found = use_state_eq(|| None::<Explanation>);
    // a remark that takes the place of another has another code
    let shown = (*found).as_ref().filter(|found| *open && *found.code == *props.code);
    let onclick = {
        let (open, found, code) = (open.clone(), found.setter(), props.code.clone());
        let close = shown.is_some();
        Callback::from(move |_: MouseEvent| {
            open.set(!close);
            if let (false, Some(hands)) = (close, &hands) {
                let found = found.clone();
                hands.session.explain(&code, Callback::from(move |one| found.set(Some(one))));
            }
        })
    };
    html! {
        <>
            <button
                type="button" class="link" data-testid="meaning" {onclick}
                aria-expanded={if shown.is_some() { "true" } else { "false" }}
            >{ "What this means" }</button>
            if let Some(found) = shown { { told(found) } }
        </>
    }
}

fn told(found: &Explanation) -> Html {
    html! {
        <div class="meaning" data-testid="explanation">
            <p>{ &found.meaning }</p>
            if !found.example.is_empty() {
                <pre aria-label="Example, with the lines that fail marked − and those that mend it marked +">
                    for line in found.example.lines() { { example(line) } }
                </pre>
            }
        </div>
    }
}

/// A line of the example; what is only in one of the two texts is struck or marked.
fn example(line: &str) -> Html {
    let text = format!("{line}\n");
    match line.chars().next() {
        Some('-') => html! { <del>{ text }</del> },
        Some('+') => html! { <ins>{ text }</ins> },
        _ => html! { <>{ text }</> },
    }
}
