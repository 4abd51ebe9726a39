//! The instance: its drawing, what was understood of it, and the box it is pasted into.

use gloo_timers::callback::Timeout;
use yew::prelude::*;

use crate::state::document::{Document, DocumentAction, broken_scenario};
use crate::state::pointer::Shared;
use crate::state::words::spans;
use crate::view::bindings::Bindings;
use crate::view::complaints::Complaints;
use crate::view::grid::Grid;
use crate::view::guide::said;
use crate::view::hands::{Hands, use_hands};
use crate::view::instances::Instances;
use crate::view::map::Map;
use crate::view::paste::Paste;
use crate::view::statistics::{parts, statistics};

/// Rest after typing before the text is read, in milliseconds.
const REST: u32 = 250;

#[derive(Properties, PartialEq)]
pub(crate) struct InstanceProps {
    pub(crate) document: Document,
}

/// The section.
#[component]
pub(crate) fn Instance(props: &InstanceProps) -> Html {
    let hands = use_hands();
    let shown = hands.clone();
    let first = use_mut_ref(|| true);
    use_effect_with(props.document.draft.clone(), move |draft| {
        let rest = if std::mem::take(&mut *first.borrow_mut()) { 0 } else { REST };
        let draft = draft.clone();
        let timer = Timeout::new(rest, move || {
            let Some(hands) = hands else { return };
            match broken_scenario(&draft.text) {
                Some(report) => hands.document.dispatch(DocumentAction::Read(draft, report)),
                None => hands.session.read(draft),
            }
        });
        move || drop(timer)
    });
    let document = &props.document;
    html! {
        <section
            class="instance" aria-labelledby="instance-heading"
            aria-busy={is_being_read(document).then_some("true")}
        >
            <div class="heading">
                <h2 id="instance-heading">{ "Instance" }</h2>
                <Instances document={document.clone()} />
            </div>
            <div class={classes!("instance-parts", (!is_drawn(document)).then_some("plain"))}>
                if is_drawn(document) { <Drawing document={document.clone()} /> }
                <div>
                    if needs_none(document) {
                        <p class="soft" data-testid="report">{ "No instance: the models in MPS below bring their data along." }</p>
                    } else {
                        { facts(document, shown.as_ref()) }
                        if let Some(report) = &document.reading {
                            <Complaints text={document.draft.clone()} report={report.clone()} />
                        }
                    }
                    <Bindings document={document.clone()} />
                    <Paste draft={document.draft.clone()} broken={is_broken(document) && !needs_none(document)} />
                </div>
            </div>
        </section>
    }
}

/// Whether the text in the box is still to be understood: what is shown is then of the one before.
fn is_being_read(document: &Document) -> bool {
    document.reading.is_none() && !needs_none(document)
}

/// Whether nothing was pasted and no rival waits for it.
fn needs_none(document: &Document) -> bool {
    let mut slots = document.slots.iter();
    let all_mps = !document.slots.is_empty() && slots.all(|slot| slot.rival.mps.is_some());
    all_mps && document.accepted.is_none() && document.draft.text.trim().is_empty()
}

/// Whether there are stops to draw, or the instance is still being read and may have some.
fn is_drawn(document: &Document) -> bool {
    let drawn = document.accepted.as_ref().is_none_or(|accepted| !accepted.report.stops.is_empty());
    drawn && !needs_none(document)
}

fn is_broken(document: &Document) -> bool {
    document.reading.as_ref().is_some_and(|report| !report.usable)
}

/// What was understood; of the text in the box when it can be used, else of the last that could.
fn facts(document: &Document, hands: Option<&Hands>) -> Html {
    let broken = is_broken(document);
    let report = if broken { document.reading.as_ref() } else { None };
    let report = report.or(document.accepted.as_ref().map(|accepted| &accepted.report));
    let Some(report) = report else {
        return html! { <p class="soft" data-testid="report">{ "Reading the instance…" }</p> };
    };
    html! {
        <>
            <ul class="facts" data-testid="report">
                for fact in report.facts.iter() {
                    <li>{ for spans(fact).map(said) }</li>
                }
            </ul>
            { parts(report, document.draft.reader.as_deref(), hands) }
            { statistics(&report.statistics) }
            if broken && document.accepted.is_some() {
                <p class="warn">
                    { "This text gives no instance yet. The drawing and the rivals are still those of the last one that did." }
                </p>
            }
        </>
    }
}

#[component]
fn Drawing(props: &InstanceProps) -> Html {
    let values = use_state_eq(|| false);
    let no_arcs = use_memo((), |()| Shared::new(Vec::new()));
    let Some(accepted) = props.document.accepted.clone() else {
        return html! { <figure class="drawing empty" /> };
    };
    let report = accepted.report;
    let choose = |shown: bool| {
        let values = values.setter();
        Callback::from(move |_: MouseEvent| values.set(shown))
    };
    let switch = |name: &'static str, shown: bool| {
        let pressed = if *values == shown { "true" } else { "false" };
        html! { <button type="button" aria-pressed={pressed} onclick={choose(shown)}>{ name }</button> }
    };
    let caption = if *values {
        "Darker is longer."
    } else if report.places_computed {
        "Places computed from the distances."
    } else {
        "Places as given."
    };
    html! {
        <figure class="drawing" data-testid="drawing">
            if *values {
                <Grid {report} />
            } else {
                <Map {report} arcs={(*no_arcs).clone()} label="Map of the stops" />
            }
            <figcaption class="under">
                <span class="soft">{ caption }</span>
                <span class="switch" role="group" aria-label="Drawing">
                    { switch("Map", false) }
                    { switch("Values", true) }
                </span>
            </figcaption>
        </figure>
    }
}
