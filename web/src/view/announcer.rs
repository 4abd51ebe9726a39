//! One sentence about what the lanes do, for those who do not see them: at most one in two
//! seconds, and only when a lane's phase changes.

use gloo_timers::callback::Timeout;
use yew::prelude::*;

use crate::browser::frame::now;
use crate::state::board::Board;
use crate::state::document::Document;
use crate::state::lane::Phase;
use crate::state::words::status;

/// Time between sentences, in milliseconds.
const PAUSE: f64 = 2000.0;

#[derive(Properties, PartialEq)]
pub(crate) struct AnnouncerProps {
    pub(crate) document: Document,
    pub(crate) board: Board,
}

/// The status region.
#[component]
pub(crate) fn Announcer(props: &AnnouncerProps) -> Html {
    let said = use_state_eq(String::new);
    let last = use_mut_ref(|| -PAUSE);
    let phases: Vec<Phase> = props.board.lanes.values().map(|lane| lane.phase).collect();
    let sentence = sentence(&props.document, &props.board);
    let say = said.setter();
    use_effect_with(phases, move |_| {
        let wait = PAUSE - (now() - *last.borrow());
        let wait = if wait > 0.0 { wait as u32 } else { 0 };
        let timer = Timeout::new(wait, move || {
            *last.borrow_mut() = now();
            say.set(sentence);
        });
        move || drop(timer)
    });
    html! { <p class="unseen" role="status" data-testid="announcer">{ (*said).clone() }</p> }
}

fn sentence(document: &Document, board: &Board) -> String {
    let lanes = document.slots.iter().map(|slot| board.lane(slot.id)).enumerate();
    let parts: Vec<String> = lanes
        .map(|(place, lane)| format!("{}: {}", Document::letter(place), status(&lane)))
        .collect();
    parts.join(". ")
}
