//! All trees brought to one moment, the same number of nodes or the same work, by a slider or as a
//! replay.

use gloo_timers::callback::Interval;
use report::number::{of, short};
use web_sys::{HtmlInputElement, HtmlSelectElement};
use yew::prelude::*;

use crate::state::lens::{By, Lens, Look, Moment, STEPS};

/// Between two steps of a replay, in milliseconds.
const BEAT: u32 = 40;

#[derive(Properties, PartialEq)]
pub(crate) struct ReplayProps {
    /// Nodes and work of the longest search.
    pub(crate) most: (u64, u64),
}

/// The row with the choice and the slider; nothing before there is a tree to look at.
#[component]
pub(crate) fn Replay(props: &ReplayProps) -> Html {
    let lens = use_context::<UseReducerHandle<Lens>>();
    let playing = use_state_eq(|| false);
    let moment = lens.as_ref().and_then(|lens| lens.moment);
    let ended = moment.is_none_or(|moment| moment.step >= STEPS);
    {
        let dispatcher = lens.as_ref().map(UseReducerHandle::dispatcher);
        use_effect_with(*playing && !ended, move |playing| {
            let timer = dispatcher.filter(|_| *playing);
            let timer = timer.map(|lens| Interval::new(BEAT, move || lens.dispatch(Look::Next)));
            move || drop(timer)
        });
    }
    let Some(lens) = lens.filter(|_| props.most.0 > 1 || moment.is_some()) else {
        return Html::default();
    };
    let most = props.most;
    let at = {
        let (lens, playing) = (lens.dispatcher(), playing.setter());
        Callback::from(move |moment: Option<Moment>| {
            playing.set(false);
            lens.dispatch(Look::At(moment, most));
        })
    };
    let onchange = at.reform(|event: Event| {
        let select: HtmlSelectElement = event.target_unchecked_into();
        by(&select.value()).map(|by| Moment { by, step: STEPS })
    });
    html! {
        <div class="replay row small" data-testid="replay">
            <label class="field">
                { "Trees" }
                <select data-testid="moment" {onchange}>
                    <option value="now" selected={moment.is_none()}>{ "as they are" }</option>
                    <option value="nodes" selected={moment.is_some_and(|m| m.by == By::Nodes)}>{ "at the same number of nodes" }</option>
                    <option value="work" selected={moment.is_some_and(|m| m.by == By::Work)}>{ "at the same work" }</option>
                </select>
            </label>
            if let Some(moment) = moment { { slider(moment, lens.most, &at) } { play(moment, lens, (playing, ended)) } }
        </div>
    }
}

fn by(word: &str) -> Option<By> {
    match word {
        "nodes" => Some(By::Nodes),
        "work" => Some(By::Work),
        _ => None,
    }
}

fn slider(moment: Moment, most: (u64, u64), at: &Callback<Option<Moment>>) -> Html {
    let words = words(moment, most);
    let oninput = at.reform(move |event: InputEvent| {
        let field: HtmlInputElement = event.target_unchecked_into();
        Some(Moment { step: field.value().parse().unwrap_or(STEPS), ..moment })
    });
    html! {
        <>
            <input
                type="range" min="0" max={STEPS.to_string()} step="1" value={moment.step.to_string()}
                aria-label="Moment of all searches" aria-valuetext={words.clone()} data-testid="scrubber" {oninput}
            />
            <span class="value" data-testid="moment-words">{ words }</span>
        </>
    }
}

/// "after 240 nodes of each", "after 1,200,000 units of work of each".
fn words(moment: Moment, (nodes, work): (u64, u64)) -> String {
    match moment.by {
        By::Nodes => format!("after {} of each", of(moment.amount(nodes), "node")),
        By::Work => format!("after {} units of work of each", short(moment.amount(work) as f64)),
    }
}

fn play(
    moment: Moment,
    lens: UseReducerHandle<Lens>,
    (playing, ended): (UseStateHandle<bool>, bool),
) -> Html {
    let goes = *playing && !ended;
    let onclick = Callback::from(move |_: MouseEvent| {
        if ended {
            lens.dispatch(Look::At(Some(Moment { step: 0, ..moment }), lens.most));
        }
        playing.set(!goes);
    });
    html! {
        <button type="button" data-testid="play" {onclick}>{ if goes { "Hold" } else { "Replay" } }</button>
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_moment_is_told_in_nodes_or_work() {
        let at = |by, step| words(Moment { by, step }, (5000, 2_000_000));
        assert_eq!(at(By::Nodes, 500), "after 625 nodes of each");
        assert_eq!(at(By::Nodes, 1), "after 1 node of each");
        assert_eq!(at(By::Work, STEPS), "after 2,000,000 units of work of each");
        assert_eq!((by("now"), by("work")), (None, Some(By::Work)));
    }
}
