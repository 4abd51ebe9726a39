//! A text that is checked beside the page's own work, again once typing rests, and what is drawn
//! of it meanwhile.

use gloo_timers::callback::Timeout;
use record::message::{CheckJob, CheckReport};
use record::scenario::InstanceText;
use yew::prelude::*;

use crate::state::highlight::{Piece, pieces};
use crate::state::lane::LaneId;
use crate::state::pointer::Shared;
use crate::view::hands::use_hands;

/// Rest after typing before the text is checked, in milliseconds.
const REST: u32 = 150;

/// A text with what was said of it.
#[derive(Debug, Clone, PartialEq)]
pub(crate) struct Checked {
    pub(crate) text: String,
    pub(crate) report: Shared<CheckReport>,
}

/// What is known of a text: the last report, the colours of the text as it is now, and the names
/// that can be completed.
#[derive(Debug, Clone, PartialEq)]
pub(crate) struct Reading {
    pub(crate) checked: Option<Checked>,
    pub(crate) pieces: Shared<Vec<Piece>>,
    pub(crate) names: Shared<Vec<String>>,
}

/// Checks a text on an instance while `open`, for the lane of a number.
#[hook]
pub(crate) fn use_checking(
    id: LaneId,
    open: bool,
    text: &str,
    instance: Option<&Shared<InstanceText>>,
) -> Reading {
    let hands = use_hands();
    let checked = use_state_eq(|| None::<Checked>);
    let heard = checked.setter();
    let asked = (open, text.to_owned(), instance.cloned());
    use_effect_with(asked, move |(open, text, instance)| {
        let timer = open.then(|| {
            let (text, instance) = (text.clone(), instance.as_deref().cloned());
            Timeout::new(REST, move || {
                let Some(hands) = hands else { return };
                let job = CheckJob { text: text.clone(), instance, ..CheckJob::default() };
                let hear = move |report| {
                    heard.set(Some(Checked { text: text.clone(), report: Shared::new(report) }));
                };
                hands.session.check(id, job, Callback::from(hear));
            })
        });
        move || drop(timer)
    });
    let checked = (*checked).clone();
    let coloured = use_memo((text.to_owned(), checked.clone()), |(text, checked)| {
        let old = checked.as_ref().map_or("", |checked| checked.text.as_str());
        Shared::new(pieces(text, old, checked.as_ref().map(|checked| &*checked.report)))
    });
    let names = use_memo(checked.clone(), |checked| {
        Shared::new(checked.as_ref().map_or_else(Vec::new, |checked| checked.report.names()))
    });
    Reading { checked, pieces: (*coloured).clone(), names: (*names).clone() }
}
