//! What every component may act with: the session and the two reducers. Constant for the page's
//! life, so that handing it down draws nothing anew.

use yew::UseReducerDispatcher;

use crate::browser::session::Session;
use crate::state::board::Board;
use crate::state::document::Document;

/// The session and where actions go.
#[derive(Debug, Clone, PartialEq)]
pub(crate) struct Hands {
    /// The workers.
    pub(crate) session: Session,
    /// The scenario.
    pub(crate) document: UseReducerDispatcher<Document>,
    /// The lanes.
    pub(crate) board: UseReducerDispatcher<Board>,
}

/// The hands from the context; a component outside the page has none.
#[yew::hook]
pub(crate) fn use_hands() -> Option<Hands> {
    yew::use_context::<Hands>()
}
