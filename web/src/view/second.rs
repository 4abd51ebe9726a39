//! The second opinion on a lane's root: that another LP code agrees, that it does not (large
//! enough to be noticed), or why it says nothing.

use report::opinion::{Verdict, verdict, words};
use yew::prelude::*;

use crate::state::lane::Lane;
use crate::state::words::advice;

/// The second opinion; nothing while it is not there.
pub(crate) fn second(lane: &Lane) -> Html {
    let (Some(root), Some(opinion)) = (&lane.root, &lane.second) else { return Html::default() };
    let maximise = lane.maximise();
    let (class, name) = match verdict(root, maximise, opinion) {
        Verdict::Agrees => ("small soft", "agrees"),
        Verdict::Silent => ("small soft", "silent"),
        Verdict::Refuted => ("dissent", "refuted"),
        Verdict::Undecided => ("dissent", "undecided"),
    };
    html! {
        <p {class} data-testid="second" data-verdict={name}>
            { advice(&words(root, maximise, opinion)) }
        </p>
    }
}
