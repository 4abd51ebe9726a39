//! Help on the notation, under the text that is written: one section at a time, each with an
//! example that is read while it is changed.

use record::message::GuideSection;
use web_sys::HtmlTextAreaElement;
use yew::prelude::*;

use crate::state::lane::LaneId;
use crate::state::pointer::Shared;
use crate::state::typeset::row_at;
use crate::state::words::{Span, spans};
use crate::view::checking::{Checked, Reading, use_checking};
use crate::view::editor_box::{ScriptBox, select};
use crate::view::editor_remarks::Remarks;
use crate::view::hands::use_hands;
use crate::view::typeset::Set;

/// Examples are checked under the number of a lane that there never is.
const NO_LANE: LaneId = LaneId(u32::MAX);

#[derive(Properties, PartialEq)]
pub(crate) struct GuideProps {
    pub(crate) id: String,
}

/// The sections as a list of titles, of which one is open.
#[component]
pub(crate) fn Guide(props: &GuideProps) -> Html {
    let hands = use_hands();
    let guide = use_state_eq(Shared::<Vec<GuideSection>>::default);
    let open = use_state_eq(|| Some(0_usize));
    let heard = guide.setter();
    use_effect_with((), move |()| {
        if let Some(hands) = hands {
            hands.session.guide(Callback::from(move |guide| heard.set(guide)));
        }
    });
    let section = |(place, section): (usize, &GuideSection)| {
        let shown = *open == Some(place);
        let (open, inside) = (open.setter(), format!("{}-{place}", props.id));
        let onclick = Callback::from(move |_: MouseEvent| open.set((!shown).then_some(place)));
        html! {
            <li key={place}>
                <h4><button
                    type="button" class="link" aria-expanded={if shown { "true" } else { "false" }}
                    aria-controls={inside.clone()} {onclick}
                >{ section.title.clone() }</button></h4>
                <div id={inside.clone()} hidden={!shown}>
                    if shown { <Lesson id={inside} section={section.clone()} /> }
                </div>
            </li>
        }
    };
    html! {
        <div
            class="guide" id={props.id.clone()} role="region" aria-label="Help on the notation"
            data-testid="guide"
        >
            if guide.is_empty() { <p class="soft">{ "Fetching the help." }</p> }
            <ul>{ for guide.iter().enumerate().map(section) }</ul>
        </div>
    }
}

#[derive(Properties, PartialEq)]
struct LessonProps {
    id: String,
    section: GuideSection,
}

/// What is to be known, and the example beside its mathematics.
#[component]
fn Lesson(props: &LessonProps) -> Html {
    let text = use_state_eq(|| props.section.example.clone());
    let caret = use_state_eq(|| 0_u32);
    let area = use_node_ref();
    let Reading { checked: heard, pieces, names } = use_checking(NO_LANE, true, &text, None);
    let changed = **text != *props.section.example;
    let typed = {
        let text = text.setter();
        Callback::from(move |typed| text.set(typed))
    };
    let (back, example) = (text.setter(), props.section.example.clone());
    let back = Callback::from(move |_: MouseEvent| back.set(example.clone()));
    let place = caret.setter();
    let fresh = heard.as_ref().is_some_and(|heard| heard.text == *text);
    html! {
        <>
            <p class="lesson">{ for spans(&props.section.words).map(said) }</p>
            <div class="pair">
                <div>
                    <ScriptBox
                        id={format!("{}-text", props.id)} label={format!("Example: {}", props.section.title)}
                        text={(*text).clone()} {pieces} {names}
                        invalid={heard.as_ref().is_some_and(|heard| !heard.report.is_sound())}
                        described_by={format!("{}-remarks", props.id)} area={area.clone()}
                        typed={typed.clone()} enter={Callback::noop()}
                        caret={Callback::from(move |at| place.set(at))}
                    />
                    if changed {
                        <button type="button" onclick={back}>{ "Back to the example" }</button>
                    }
                    if let Some(heard) = &heard {
                        <div class="small"><Remarks
                            id={format!("{}-remarks", props.id)} remarks={Shared::new(heard.report.remarks.clone())}
                            {fresh} area={area.clone()} {typed}
                        /></div>
                    }
                </div>
                if let Some(heard) = &heard { { set(props, heard, *caret, &area) } }
            </div>
        </>
    }
}

fn set(props: &LessonProps, heard: &Checked, caret: u32, area: &NodeRef) -> Html {
    let area = area.clone();
    let show = Callback::from(move |place: (u32, u32)| {
        if let Some(area) = area.cast::<HtmlTextAreaElement>() {
            select(&area, place);
        }
    });
    html! {
        <Set
            label={format!("{} as mathematics", props.section.title)} report={heard.report.clone()}
            active={row_at(&heard.report.typeset.rows, &heard.text, caret)} {show}
        />
    }
}

pub(crate) fn said(span: Span<'_>) -> Html {
    match span {
        Span::Words(words) => html! { { words.to_owned() } },
        Span::Code(code) => html! { <code>{ code.to_owned() }</code> },
    }
}
