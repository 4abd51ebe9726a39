//! The head of a lane: its letter, its title, which can be written over, and the buttons that move
//! it and take it away.

use web_sys::{HtmlElement, HtmlTextAreaElement};
use yew::prelude::*;

use crate::state::arrange::Arrange;
use crate::state::document::DocumentAction;
use crate::state::lane::LaneId;
use crate::view::hands::use_hands;
use crate::view::inspector::focus;

#[derive(Properties, PartialEq)]
pub(crate) struct LaneNameProps {
    pub(crate) id: LaneId,
    pub(crate) letter: String,
    pub(crate) title: String,
}

/// The head.
#[component]
pub(crate) fn LaneName(props: &LaneNameProps) -> Html {
    let hands = use_hands();
    let id = props.id;
    let act = Callback::from(move |action: DocumentAction| {
        if let Some(hands) = &hands {
            hands.document.dispatch(action);
        }
    });
    let remove = act.reform(move |_: MouseEvent| DocumentAction::Remove(id));
    let onclick = Callback::from(move |event: MouseEvent| {
        remove.emit(event);
        focus(crate::view::rivals::HEADING);
    });
    let label = format!("Remove {}, {}", props.letter, props.title);
    html! {
        <div class="lane-name">
            <h3>
                <span class="letter">{ props.letter.clone() }</span>
                <Title id={props.id} letter={props.letter.clone()} title={props.title.clone()} act={act.clone()} />
            </h3>
            <Order id={props.id} letter={props.letter.clone()} {act} />
            <button type="button" class="link soft" data-testid="remove" aria-label={label} {onclick}>{ "Remove" }</button>
        </div>
    }
}

#[derive(Properties, PartialEq)]
struct TitleProps {
    id: LaneId,
    letter: String,
    title: String,
    act: Callback<DocumentAction>,
}

/// The title as a field: what is written counts once it is left, or with Enter.
#[component]
fn Title(props: &TitleProps) -> Html {
    let typed = use_state_eq(|| None::<String>);
    let oninput = {
        let typed = typed.setter();
        Callback::from(move |event: InputEvent| {
            let typed_now = event.target_unchecked_into::<HtmlTextAreaElement>().value();
            typed.set(Some(typed_now.replace(['\r', '\n'], " ")));
        })
    };
    let onchange = {
        let (id, title, act, typed) =
            (props.id, props.title.clone(), props.act.clone(), typed.setter());
        Callback::from(move |event: Event| {
            let value = event.target_unchecked_into::<HtmlTextAreaElement>().value();
            typed.set(None);
            if value.trim() != title {
                act.emit(DocumentAction::Arrange(Arrange::Rename(id, value)));
            }
        })
    };
    let onkeydown = Callback::from(|event: KeyboardEvent| {
        if event.key() == "Enter" {
            event.prevent_default();
            // A field that cannot be left keeps what was typed.
            let _ = event.target_unchecked_into::<HtmlElement>().blur();
        }
    });
    let value = (*typed).clone().unwrap_or_else(|| props.title.clone());
    html! {
        <textarea
            rows="1" class="lane-title" spellcheck="false" maxlength="120" data-testid="rival-title" title={props.title.clone()}
            aria-label={format!("Title of {}", props.letter)} {value} {oninput} {onchange} {onkeydown}
        />
    }
}

#[derive(Properties, PartialEq)]
struct OrderProps {
    id: LaneId,
    letter: String,
    act: Callback<DocumentAction>,
}

/// Up and down. A lane that moves takes its button's focus along.
#[component]
fn Order(props: &OrderProps) -> Html {
    let (up, down) = (use_node_ref(), use_node_ref());
    let pressed = use_mut_ref(|| None::<NodeRef>);
    {
        let pressed = pressed.clone();
        use_effect_with(props.letter.clone(), move |_| {
            let button = pressed.borrow_mut().take().and_then(|node| node.cast::<HtmlElement>());
            if let Some(button) = button {
                // A button that takes no focus leaves it where it was.
                let _ = button.focus();
            }
        });
    }
    let press = |node: &NodeRef, arrange: fn(LaneId) -> Arrange| {
        let (id, act, node) = (props.id, props.act.clone(), node.clone());
        let pressed = pressed.clone();
        Callback::from(move |_: MouseEvent| {
            *pressed.borrow_mut() = Some(node.clone());
            act.emit(DocumentAction::Arrange(arrange(id)));
        })
    };
    let button = |node: NodeRef, sign: &'static str, word: &'static str, onclick| {
        html! {
            <button
                ref={node} type="button" class="link soft" data-testid={word} {onclick}
                aria-label={format!("Move {} {word}", props.letter)}
            >{ sign }</button>
        }
    };
    html! {
        <span class="order">
            { button(up.clone(), "\u{2191}", "up", press(&up, Arrange::Up)) }
            { button(down.clone(), "\u{2193}", "down", press(&down, Arrange::Down)) }
        </span>
    }
}
