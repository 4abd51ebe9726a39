//! The panel a link is copied from: first what it gives away, then Copy or Cancel.

use record::link::{OFTEN_CUT, pack};
use report::number::count;
use web_sys::HtmlInputElement;
use yew::prelude::*;

use crate::browser::share::{Copying, address, copy};
use crate::state::document::Document;
use crate::view::share::notice::Notice;

#[derive(Properties, PartialEq)]
pub(crate) struct LinkProps {
    pub(crate) document: Document,
    pub(crate) digest: Option<String>,
    pub(crate) save: Callback<()>,
    pub(crate) close: Callback<Option<Notice>>,
}

/// The panel.
#[component]
pub(crate) fn LinkPanel(props: &LinkProps) -> Html {
    let refused = use_state_eq(|| false);
    let copying = use_mut_ref(|| None::<Copying>);
    let first = use_node_ref();
    use_effect_with(first.clone(), |first| {
        if let Some(button) = first.cast::<web_sys::HtmlElement>() {
            // A button that is gone leaves the focus where it is.
            let _ = button.focus();
        }
    });
    let link = use_memo((props.document.edited(), props.digest.clone()), |(_, digest)| {
        pack(&props.document.file_with(digest.as_ref())).map(|fragment| address() + &fragment)
    });
    let press = {
        let (link, close, refused) = (link.clone(), props.close.clone(), refused.setter());
        Callback::from(move |_: MouseEvent| {
            let Ok(link) = link.as_ref() else { return };
            let (close, refused) = (close.clone(), refused.clone());
            let wait = copy(link, move |done| {
                if done {
                    close.emit(Some(Notice::of("The link is copied.")));
                } else {
                    refused.set(true);
                }
            });
            *copying.borrow_mut() = wait;
        })
    };
    let cancel = props.close.reform(|_: MouseEvent| None);
    html! {
        <div class="panel" role="group" aria-label="Link" data-testid="link-panel">
            { words(link.as_ref().as_ref()) }
            <div class="row">
                if link.is_ok() {
                    <button ref={first.clone()} type="button" data-testid="copy-now" onclick={press}>{ "Copy" }</button>
                } else {
                    <button ref={first.clone()} type="button" onclick={props.save.reform(|_| ())}>{ "Save file instead" }</button>
                }
                <button type="button" data-testid="copy-cancel" onclick={cancel}>{ "Cancel" }</button>
            </div>
            if let (true, Ok(link)) = (*refused, link.as_ref()) { <ByHand link={link.clone()} /> }
        </div>
    }
}

fn words(link: Result<&String, &record::link::LinkError>) -> Html {
    let link = match link {
        Ok(link) => link,
        Err(error) => return html! { <p class="warn">{ format!("No link: {error}.") }</p> },
    };
    let length = link.chars().count();
    html! {
        <>
            <p>{ "The link holds your data; whoever has it can read them." }</p>
            if link.starts_with("file:") {
                <p class="soft">{ "This page is a file on your disk: elsewhere the link opens once its part from # on is put behind the address of a copy of the page." }</p>
            }
            if length > OFTEN_CUT {
                <p class="warn" data-testid="link-long">
                    { format!("It has {} characters. Some mail and chat programs cut a link as long as this: a saved file is safer.", count(length as u64)) }
                </p>
            }
        </>
    }
}

#[derive(Properties, PartialEq)]
struct ByHandProps {
    link: String,
}

/// The link in a field, selected, where the browser does not let the page copy.
#[component]
fn ByHand(props: &ByHandProps) -> Html {
    let field = use_node_ref();
    use_effect_with(field.clone(), |field| {
        if let Some(field) = field.cast::<HtmlInputElement>() {
            // A field that is gone leaves nothing to select.
            let _ = field.focus();
            field.select();
        }
    });
    html! {
        <label class="by-hand">
            { "The browser does not let the page copy. Press Ctrl+C (on a Mac ⌘C):" }
            <input ref={field} type="text" readonly=true data-testid="link-field" value={props.link.clone()} />
        </label>
    }
}
