//! Whether the results are those that were there when the link or file was made.

use yew::prelude::*;

use crate::state::document::Document;
use crate::state::same::Found;

#[derive(Properties, PartialEq)]
pub(crate) struct VerdictProps {
    pub(crate) document: Document,
    pub(crate) found: Found,
}

/// One sentence; the region is always there, so that what comes into it is spoken.
#[component]
pub(crate) fn Verdict(props: &VerdictProps) -> Html {
    let words = props.document.verdict(&props.found);
    let class = classes!("said", words.starts_with("Differs").then_some("warn"));
    html! {
        <div {class} role="status" data-testid="verdict">
            if !words.is_empty() { <p>{ words }</p> }
        </div>
    }
}
