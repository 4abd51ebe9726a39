//! A rival's lane: on the left its name, size, families, figures and buttons; on the right its
//! bound ruler and its tree on the shared axis.

use record::event::NodeNumber;
use record::message::{LaneJob, LogJob, RivalReport};
use record::results::ErrorReport;
use record::scenario::{InstanceText, Rival, Run};
use report::axis::Axis;
use report::explain::{further, grown};
use report::number::{count, of};
use yew::prelude::*;

use crate::browser::run::at_the_limit;
use crate::state::board::{BoardAction, Selection};
use crate::state::document::{DocumentAction, Slot};
use crate::state::editor::Draft;
use crate::state::lane::{Lane, LaneId, Memory, Phase};
use crate::state::pointer::Shared;
use crate::state::share::file_of;
use crate::state::steer::{Steer, is_stopped};
use crate::state::words::{advice, sentence, status};
use crate::view::acts::Acts;
use crate::view::change::change;
use crate::view::drawing::Drawing;
use crate::view::editor::{Editor, toggle};
use crate::view::families::Families;
use crate::view::figures::Figures;
use crate::view::handover::{TakeAway, alone};
use crate::view::hands::{Hands, use_hands};
use crate::view::inspector::focus_inspector;
use crate::view::lane_name::LaneName;
use crate::view::reason::reason;
use crate::view::second::second;
use crate::view::statistics::statistics;

#[derive(Properties, PartialEq)]
pub(crate) struct LaneProps {
    pub(crate) slot: Slot,
    pub(crate) letter: String,
    pub(crate) hue: usize,
    pub(crate) title: String,
    /// Who published it, where that is known.
    pub(crate) source: String,
    pub(crate) relaxation: bool,
    pub(crate) draft: Option<Draft>,
    pub(crate) lane: Shared<Lane>,
    pub(crate) text: Option<Shared<InstanceText>>,
    pub(crate) run: Shared<Run>,
    pub(crate) seed: u64,
    pub(crate) axis: Option<Axis>,
    pub(crate) width: f64,
    pub(crate) best: Option<f64>,
    /// Whether it is a copy of a shipped formulation in which nothing was changed yet.
    pub(crate) copied: bool,
    pub(crate) selected: Option<NodeNumber>,
}

/// The lane.
#[component]
pub(crate) fn LaneView(props: &LaneProps) -> Html {
    let hands = use_hands();
    use_loading(props, hands.clone());
    let writing = use_state_eq(|| props.slot.is_scaffold() || props.copied);
    html! {
        <section
            class={classes!("lane", format!("hue-{}", props.hue))} data-testid="lane"
            data-lane={props.letter.clone()} aria-label={format!("{}, {}", props.letter, props.title)}
        >
            <div class="lane-side">
                <LaneName id={props.slot.id} letter={props.letter.clone()} title={props.title.clone()} />
                if !props.source.is_empty() { <p class="small soft">{ props.source.clone() }</p> }
                if let Some(rival) = &props.lane.rival {
                    <p class="small soft" data-testid="size" title={of(rival.nonzeros, "coefficient")}>{ size(rival) }</p>
                    <Families slot={props.slot.clone()} rival={rival.clone()} />
                    { statistics(&rival.statistics) }
                }
                if props.relaxation {
                    <p class="small soft">{ "A relaxation: bounded, not compared for its optimum." }</p>
                }
                <Figures lane={props.lane.clone()} tree={hands.as_ref().and_then(|hands| hands.session.tree(props.slot.id))} best={props.best} />
                { second(&props.lane) }
                <Acts slot={props.slot.clone()} letter={props.letter.clone()} rival={props.lane.rival.clone()} />
                <p class="small" data-testid="status">{ status(&props.lane) }</p>
                if !props.lane.notice.is_empty() {
                    <p class="small warn" data-testid="notice">{ props.lane.notice.clone() }</p>
                }
                if let Some(words) = props.lane.memory.and_then(Memory::warning) {
                    <p class="small warn" data-testid="memory-full">{ words }</p>
                }
                if !props.lane.proved.is_empty() {
                    <p class="small" data-testid="proved">{ props.lane.proved.clone() }</p>
                }
                for words in props.lane.search.iter().flat_map(|search| grown(search)) {
                    <p class="small soft" data-testid="diagnosis">{ sentence(&words) }</p>
                }
                { wrong_with_the_plan(&props.lane) }
                { reason(props.slot.id, &props.lane, props.draft.is_some().then_some(&writing)) }
                if let Some(error) = &props.lane.error { { failure(error) } }
                if let Some(hands) = &hands { { buttons(props, hands) } }
                <div class="acts more">
                    if let Some(hands) = hands.as_ref().filter(|_| may_change(&props.lane)) {
                        { change(props.slot.id, &props.letter, hands) }
                    }
                    if props.draft.is_some() { { toggle(props.slot.id, &props.letter, &writing) } }
                    if let Some(hands) = &hands { { with_the_log(props, hands) } }
                    { take_away(props) }
                </div>
            </div>
            <div class="lane-drawing">
                if let Some(hands) = &hands { { drawing(props, hands) } }
            </div>
            if let Some(draft) = props.draft.clone() {
                <Editor
                    slot={props.slot.clone()} letter={props.letter.clone()} {draft}
                    instance={props.text.clone()} open={*writing}
                />
            }
        </section>
    }
}

/// What else is wrong with a plan that was given, once it is asked for.
fn wrong_with_the_plan(lane: &Lane) -> Html {
    let Some((words, rest)) = lane.search.as_ref().and_then(|search| further(search)) else {
        return Html::default();
    };
    html! {
        <details class="small" data-testid="all-broken">
            <summary>{ words }</summary>
            <ul>for one in rest { <li>{ sentence(one) }</li> }</ul>
        </details>
    }
}

fn take_away(props: &LaneProps) -> Html {
    let job = job(props.text.as_deref().cloned(), &props.slot.rival, &props.run, props.seed);
    html! { <TakeAway letter={props.letter.clone()} title={props.title.clone()} {job} /> }
}

fn job(instance: Option<InstanceText>, rival: &Rival, run: &Run, seed: u64) -> LaneJob {
    LaneJob { instance, rival: rival.clone(), settings: run.clone(), seed, ..LaneJob::default() }
}

/// Loads the rival when it, or the instance, is another; ends its worker when the lane goes.
#[hook]
fn use_loading(props: &LaneProps, hands: Option<Hands>) {
    let id = props.slot.id;
    let session = hands.map(|hands| hands.session);
    let (run, seed, rival) = (props.run.clone(), props.seed, props.slot.rival.clone());
    {
        let session = session.clone();
        use_effect_with((props.text.clone(), rival, run), move |(text, rival, run)| {
            // A model in MPS brings its data along.
            if let Some(session) = session.filter(|_| text.is_some() || rival.mps.is_some()) {
                session.load(id, job(text.as_deref().cloned(), rival, run, seed));
            }
        });
    }
    use_effect_with((), move |()| {
        move || {
            if let Some(session) = session {
                session.remove(id);
            }
        }
    });
}

fn size(rival: &RivalReport) -> String {
    let whole = match rival.integer_columns {
        0 => "none whole".to_owned(),
        all if all == rival.columns => "all whole".to_owned(),
        some => format!("{} whole", count(u64::from(some))),
    };
    format!(
        "{} · {} · {whole}",
        of(u64::from(rival.rows), "row"),
        of(u64::from(rival.columns), "column")
    )
}

fn failure(error: &ErrorReport) -> Html {
    html! {
        <div class="complaints errors small" data-testid="failure">
            <p><b>{ "Not run: " }</b>{ sentence(&error.message) }</p>
            if !error.complaints.is_empty() {
                <ul>
                    for complaint in error.complaints.iter().take(6) {
                        <li>
                            { format!("{} line {}: {}", error.place, complaint.line, sentence(&complaint.message)) }
                            if !complaint.mend.is_empty() { { " " }<span class="mend">{ advice(&complaint.mend) }</span> }
                        </li>
                    }
                </ul>
            }
        </div>
    }
}

/// A button that stays where it is, and keeps the focus, while it can do nothing.
fn button(name: &'static str, able: bool, press: Callback<MouseEvent>) -> Html {
    let onclick = if able { press } else { Callback::noop() };
    let disabled = if able { "false" } else { "true" };
    html! {
        <button type="button" data-testid={name.to_lowercase().replace(' ', "-")} aria-disabled={disabled} {onclick}>{ name }</button>
    }
}

/// Saves the log of the search with the scenario of this rival alone.
fn save_log(props: &LaneProps, hands: &Hands) -> Callback<MouseEvent> {
    let (session, id) = (hands.session.clone(), props.slot.id);
    let job = job(props.text.as_deref().cloned(), &props.slot.rival, &props.run, props.seed);
    let (title, letter) = (props.title.clone(), props.letter.clone());
    Callback::from(move |_: MouseEvent| {
        let scenario = record::file::print(&alone(&job, &title));
        let file = file_of(&format!("{letter} {title}"), "log");
        session.save_log(id, file, LogJob { scenario, instance: 0, rival: 0 });
    })
}

fn buttons(props: &LaneProps, hands: &Hands) -> Html {
    let (id, phase) = (props.slot.id, props.lane.phase);
    let act = |then: fn(&Hands, Selection)| {
        let hands = hands.clone();
        Callback::from(move |_: MouseEvent| {
            then(&hands, Selection { lane: id, node: NodeNumber(1) });
        })
    };
    let over = is_over(&props.lane);
    let run: fn(&Hands, Selection) = match phase {
        Phase::Done if is_stopped(&props.slot.rival) => |hands, at| {
            hands.session.want_end(at.lane);
            hands.document.dispatch(DocumentAction::Steer(Steer::GoOn(at.lane)));
        },
        Phase::Done | Phase::Failed => |hands, at| hands.session.search_anew(at.lane),
        _ => |hands, at| hands.session.search(at.lane, None),
    };
    html! {
        <div class="acts" role="group" aria-label={format!("Run of {}", props.letter)}>
            { button("Run", phase.can_go_on() || (!over && matches!(phase, Phase::Done | Phase::Failed)), act(run)) }
            { button("Pause", phase == Phase::Running, act(|hands, at| hands.session.pause(at.lane))) }
            { button("Step", phase.can_go_on(), act(|hands, at| hands.session.search(at.lane, Some(1)))) }
            { button("Next plan", phase.can_go_on(), act(|hands, at| hands.session.search_to_plan(at.lane))) }
            if props.lane.proving {
                { button("Stop", true, act(|hands, at| hands.session.stop_proving(at.lane))) }
            } else {
                { button("Stop", phase.can_stop(), act(|hands, at| hands.session.stop(at.lane))) }
            }
        </div>
    }
}

/// What may be done with a search that rests: prove it again once it is over, save its log.
fn with_the_log(props: &LaneProps, hands: &Hands) -> Html {
    let rests = matches!(props.lane.phase, Phase::Done | Phase::Paused);
    if !rests || props.lane.nodes() == 0 {
        return Html::default();
    }
    let (id, session) = (props.slot.id, hands.session.clone());
    let prove = Callback::from(move |_: MouseEvent| session.prove(id));
    html! {
        <>
            if is_over(&props.lane) { { button("Prove", !props.lane.proving, prove) } }
            { button("Save log", !props.lane.proving, save_log(props, hands)) }
        </>
    }
}

/// Whether there is nothing left to search.
pub(crate) fn is_over(lane: &Lane) -> bool {
    use record::results::Status;
    let ended = |status: Status| !matches!(status, Status::Limit | Status::Error);
    lane.phase == Phase::Done && lane.search.as_ref().is_some_and(|search| ended(search.status))
}

/// Whether rules may be changed: the search has begun or may begin, and has not ended, but for its
/// limit of nodes, which may be raised.
fn may_change(lane: &Lane) -> bool {
    let at_work =
        matches!(lane.phase, Phase::Ready | Phase::Running | Phase::Pausing | Phase::Paused);
    let limited = || lane.search.as_ref().is_some_and(|search| at_the_limit(search));
    at_work || (lane.phase == Phase::Done && limited())
}

fn drawing(props: &LaneProps, hands: &Hands) -> Html {
    let id = props.slot.id;
    if let Some(words) = without_bound(&props.lane) {
        return to_the_root(id, hands, words);
    }
    let (Some(axis), Some(tree)) = (props.axis, hands.session.tree(id)) else {
        return Html::default();
    };
    if props.width <= 0.0 || props.lane.tally.made == 0 {
        return Html::default();
    }
    let board = hands.board.clone();
    let select = Callback::from(move |node: NodeNumber| {
        board.dispatch(BoardAction::Select(Selection { lane: id, node }));
    });
    html! {
        <Drawing
            letter={props.letter.clone()} lane={props.lane.clone()} {tree} {axis} width={props.width}
            best={props.best} selected={props.selected} {select}
        />
    }
}

/// What leads to the root of a rival whose relaxation has no bound, so that no tree stands on
/// the axis.
fn without_bound(lane: &Lane) -> Option<&'static str> {
    use record::results::Status;
    match lane.root.as_ref()?.status {
        Status::Infeasible => Some("Show the proof that there is no plan"),
        Status::Unbounded => Some("Show why there is no best plan"),
        _ => None,
    }
}

fn to_the_root(lane: LaneId, hands: &Hands, words: &'static str) -> Html {
    let board = hands.board.clone();
    let onclick = Callback::from(move |_: MouseEvent| {
        board.dispatch(BoardAction::Select(Selection { lane, node: NodeNumber(1) }));
        focus_inspector();
    });
    html! { <button type="button" class="link" data-testid="show-root" {onclick}>{ words }</button> }
}
