//! The page as a whole.

use yew::prelude::*;

use crate::browser::session::Session;
use crate::state::board::Board;
use crate::state::document::{Document, DocumentAction};
use crate::state::same::Found;
use crate::view::announcer::Announcer;
use crate::view::evidence::Evidence;
use crate::view::hands::Hands;
use crate::view::hints::Hints;
use crate::view::inspector::Inspector;
use crate::view::instance::Instance;
use crate::view::notes::Notes;
use crate::view::rivals::Rivals;
use crate::view::share::{Share, Verdict, opening};

/// The page.
#[component]
pub(crate) fn App() -> Html {
    let opening = use_memo((), |()| opening());
    let document = use_reducer(|| Document::open(opening.scenario.clone()));
    let board = use_reducer(Board::default);
    let hands = use_memo((), |()| Hands {
        session: Session::new(board.dispatcher(), document.dispatcher()),
        document: document.dispatcher(),
        board: board.dispatcher(),
    });
    let document = (*document).clone();
    let board = (*board).clone();
    let found = Found::on(&document, &board);
    let digest = use_memo(found.clone(), Found::digest);
    html! {
        <ContextProvider<Hands> context={(*hands).clone()}>
            <Header title={document.title.clone()} />
            <Share document={document.clone()} opening={(*opening).clone()} digest={(*digest).clone()} />
            <Verdict document={document.clone()} {found} />
            <main>
                <Hints />
                <Instance document={document.clone()} />
                <Rivals document={document.clone()} board={board.clone()} />
                <Inspector document={document.clone()} board={board.clone()} />
                <Evidence document={document.clone()} board={board.clone()} />
                <Notes notes={document.notes.clone()} />
            </main>
            <Announcer {document} {board} />
        </ContextProvider<Hands>>
    }
}

#[derive(Properties, PartialEq)]
struct HeaderProps {
    title: String,
}

#[component]
fn Header(props: &HeaderProps) -> Html {
    let hands = use_context::<Hands>();
    use_effect_with(props.title.clone(), |title| {
        gloo_utils::document().set_title(&format!("{title} – Hullward"));
    });
    let oninput = Callback::from(move |event: InputEvent| {
        let area: web_sys::HtmlTextAreaElement = event.target_unchecked_into();
        if let Some(hands) = &hands {
            let title = area.value().replace(['\r', '\n'], " ");
            hands.document.dispatch(DocumentAction::Title(title));
        }
    });
    html! {
        <header class="head">
            <h1>
                <textarea
                    class="title" aria-label="Scenario title" data-testid="title" rows="1"
                    maxlength="120" spellcheck="false" value={props.title.clone()} {oninput}
                />
            </h1>
            <p class="soft">{ "Hullward · nothing leaves this browser" }</p>
        </header>
    }
}
