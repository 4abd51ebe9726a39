//! The notes at the foot: why these rivals, and what was decided, in Markdown.

use report::notes::{Hand, Piece, Run, pieces};
use web_sys::HtmlTextAreaElement;
use yew::prelude::*;

use crate::state::document::DocumentAction;
use crate::state::pointer::Shared;
use crate::view::hands::use_hands;

#[derive(Properties, PartialEq)]
pub(crate) struct NotesProps {
    pub(crate) notes: Shared<String>,
}

/// The section: the notes as they read, or the field to write them in.
#[component]
pub(crate) fn Notes(props: &NotesProps) -> Html {
    let hands = use_hands();
    let writing = use_state_eq(|| false);
    let oninput = {
        let writing = writing.setter();
        Callback::from(move |event: InputEvent| {
            let area: HtmlTextAreaElement = event.target_unchecked_into();
            writing.set(true);
            if let Some(hands) = &hands {
                hands.document.dispatch(DocumentAction::Notes(area.value()));
            }
        })
    };
    let turn = {
        let writing = writing.clone();
        Callback::from(move |_: MouseEvent| writing.set(!*writing))
    };
    let empty = props.notes.trim().is_empty();
    html! {
        <section class="notes" aria-labelledby="notes-heading">
            <div class="heading">
                <h2 id="notes-heading">{ "Notes and decision" }</h2>
                if !empty {
                    <button type="button" data-testid="turn-notes" onclick={turn}>
                        { if *writing { "Read notes" } else { "Edit notes" } }
                    </button>
                }
            </div>
            if *writing || empty {
                <textarea
                    aria-labelledby="notes-heading" data-testid="notes" rows="6" value={(*props.notes).clone()}
                    placeholder="Why these rivals, and what was decided, in Markdown. Kept with the scenario." {oninput}
                />
            } else {
                <div class="prose" data-testid="notes-read">{ for pieces(&props.notes).iter().map(piece) }</div>
            }
        </section>
    }
}

fn piece(piece: &Piece) -> Html {
    let items = |items: &[Vec<Run>]| -> Html {
        items.iter().map(|item| html! { <li>{ for item.iter().map(run) }</li> }).collect()
    };
    match piece {
        Piece::Heading(runs) => html! { <h3>{ for runs.iter().map(run) }</h3> },
        Piece::Paragraph(runs) => html! { <p>{ for runs.iter().map(run) }</p> },
        Piece::Bullets(list) => html! { <ul>{ items(list) }</ul> },
        Piece::Numbers(first, list) => html! { <ol start={first.to_string()}>{ items(list) }</ol> },
        Piece::Code(text) => html! { <pre>{ text.clone() }</pre> },
    }
}

fn run(run: &Run) -> Html {
    let text = run.text.clone();
    match run.hand {
        Hand::Plain => html! { { text } },
        Hand::Emphasis => html! { <em>{ text }</em> },
        Hand::Strong => html! { <strong>{ text }</strong> },
        Hand::Code => html! { <code>{ text }</code> },
    }
}
