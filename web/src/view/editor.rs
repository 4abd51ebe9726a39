//! A rival opened to its notation: typed text is checked beside the page's own work, and the lane
//! runs it only when that is asked for. A text that is wrong touches nothing.

use std::cell::RefCell;

use record::scenario::InstanceText;
use report::number::of;
use web_sys::{HtmlInputElement, HtmlTextAreaElement};
use yew::prelude::*;

use crate::state::document::{DocumentAction, Slot};
use crate::state::editor::{Draft, Edit};
use crate::state::highlight::Piece;
use crate::state::lane::LaneId;
use crate::state::pointer::Shared;
use crate::state::typeset::row_at;
use crate::view::checking::{Checked, Reading, use_checking};
use crate::view::editor_box::{ScriptBox, select};
use crate::view::editor_remarks::Remarks;
use crate::view::guide::Guide;
use crate::view::hands::{Hands, use_hands};
use crate::view::typeset::Set;

#[derive(Properties, PartialEq)]
pub(crate) struct EditorProps {
    pub(crate) slot: Slot,
    pub(crate) letter: String,
    /// What the lane runs.
    pub(crate) draft: Draft,
    pub(crate) instance: Option<Shared<InstanceText>>,
    pub(crate) open: bool,
}

/// The button that opens the editor, and closes it with the text kept.
pub(crate) fn toggle(id: LaneId, letter: &str, open: &UseStateHandle<bool>) -> Html {
    let shown = **open;
    let open = open.setter();
    let onclick = Callback::from(move |_: MouseEvent| open.set(!shown));
    html! {
        <button
            type="button" data-testid="notation" aria-expanded={if shown { "true" } else { "false" }}
            aria-controls={panel(id)} aria-label={format!("Notation of {letter}")} {onclick}
        >{ "Notation" }</button>
    }
}

/// The id of the box that holds the text.
pub(crate) fn text_box(id: LaneId) -> String {
    format!("{}-text", panel(id))
}

fn panel(id: LaneId) -> String {
    format!("notation-{}", id.0)
}

/// The editor. While it is closed it keeps what was typed.
#[component]
pub(crate) fn Editor(props: &EditorProps) -> Html {
    let hands = use_hands();
    let draft = use_state_eq(|| props.draft.clone());
    let area = use_node_ref();
    let (caret, held) = (use_state_eq(|| 0_u32), use_mut_ref(|| None::<usize>));
    // A shipped formulation is looked at before it is edited.
    let editing = use_state_eq(|| props.slot.rival.from.is_none());
    let helping = use_state_eq(|| false);
    let begun = use_mut_ref(|| false);
    let begin = {
        let (editing, begun) = (editing.setter(), begun.clone());
        Callback::from(move |_: MouseEvent| {
            begun.replace(true);
            editing.set(true);
        })
    };
    use_effect_with((*editing, area.clone()), move |(_, area)| {
        if let (true, Some(area)) = (begun.replace(false), area.cast::<HtmlTextAreaElement>()) {
            select(&area, (0, 0));
        }
    });
    let setter = draft.setter();
    use_effect_with(props.draft.clone(), move |running| setter.set(running.clone()));
    let (id, instance) = (props.slot.id, props.instance.as_ref());
    let Reading { checked, pieces, names } = use_checking(id, props.open, &draft.text, instance);
    let now = (*draft).clone();
    let setter = draft.setter();
    let change = Callback::from(move |draft: Draft| setter.set(draft));
    if !props.open {
        return html! { <div id={panel(props.slot.id)} hidden=true /> };
    }
    let state = State { running: props.draft.clone(), draft: now, checked };
    let set = set(props, &state, *caret, &held, &area);
    let guide = format!("{}-guide", panel(props.slot.id));
    let help = helper(&guide, &helping);
    html! {
        <div
            class={classes!("editor", editing.then_some("open"))} id={panel(props.slot.id)} role="group"
            aria-label={format!("Notation of {}", props.letter)} data-testid="editor"
        >
            if *editing {
                { written(props, &state, hands.as_ref(), Text { pieces, names, help, area, change, caret: caret.setter() }) }
                { set }
            } else {
                { set }
                <div class="row">
                    <button type="button" data-testid="edit" onclick={begin}>{ "Edit" }</button>
                    { duplicate(props.slot.id, hands.as_ref()) }
                    { help }
                </div>
            }
            if *helping { <Guide id={guide} /> }
        </div>
    }
}

/// What the box of the text is drawn with.
struct Text {
    pieces: Shared<Vec<Piece>>,
    names: Shared<Vec<String>>,
    help: Html,
    area: NodeRef,
    change: Callback<Draft>,
    caret: UseStateSetter<u32>,
}

/// Title, role, the text with its buttons, and what is to be said of it.
fn written(props: &EditorProps, state: &State, hands: Option<&Hands>, text: Text) -> Html {
    let enter = run_it(props.slot.id, state, hands);
    let typed = {
        let draft = state.draft.clone();
        text.change.reform(move |text| Draft { text, ..draft.clone() })
    };
    let remarks = state.checked.as_ref().map_or_else(Vec::new, |c| c.report.remarks.clone());
    let id = panel(props.slot.id);
    let (told, listed) = (format!("{id}-state"), format!("{id}-remarks"));
    html! {
        <div>
            { heading(&state.draft, &text.change) }
            <ScriptBox
                id={text_box(props.slot.id)} label={format!("Notation of {}", props.letter)}
                text={state.draft.text.clone()} pieces={text.pieces} names={text.names}
                invalid={state.is_wrong()} described_by={format!("{told} {listed}")}
                area={text.area.clone()} typed={typed.clone()} enter={enter.clone()}
                caret={Callback::from(move |at| text.caret.set(at))}
            />
            { buttons(props, state, &enter, hands, text.help) }
            <div class="small">
                <p id={told} role="status" data-testid="notation-state">{ state.words() }</p>
                <Remarks
                    id={listed} remarks={Shared::new(remarks)} fresh={state.is_fresh()}
                    area={text.area} {typed}
                />
            </div>
        </div>
    }
}

/// The button of the help on the notation.
fn helper(guide: &str, open: &UseStateHandle<bool>) -> Html {
    let (shown, open) = (**open, open.setter());
    let onclick = Callback::from(move |_: MouseEvent| open.set(!shown));
    html! {
        <button
            type="button" data-testid="help" aria-expanded={if shown { "true" } else { "false" }}
            aria-controls={guide.to_owned()} {onclick}
        >{ "Help" }</button>
    }
}

/// The formulation as it was last read, set; the row of the caret is found while the text is as
/// it was read.
fn set(
    props: &EditorProps,
    state: &State,
    caret: u32,
    held: &RefCell<Option<usize>>,
    area: &NodeRef,
) -> Html {
    let Some(Checked { text, report }) = &state.checked else { return Html::default() };
    if state.is_fresh() {
        *held.borrow_mut() = row_at(&report.typeset.rows, text, caret);
    }
    let area = area.clone();
    let show = Callback::from(move |place: (u32, u32)| {
        if let Some(area) = area.cast::<HtmlTextAreaElement>() {
            select(&area, place);
        }
    });
    html! {
        <Set
            label={format!("{} as mathematics", props.letter)} report={report.clone()}
            active={*held.borrow()} {show}
        />
    }
}

/// What is typed, beside what runs.
struct State {
    running: Draft,
    draft: Draft,
    checked: Option<Checked>,
}

impl State {
    /// Whether the text as it is now was checked.
    fn is_fresh(&self) -> bool {
        self.checked.as_ref().is_some_and(|checked| checked.text == self.draft.text)
    }

    fn is_wrong(&self) -> bool {
        self.checked.as_ref().is_some_and(|checked| !checked.report.is_sound())
    }

    fn can_be_used(&self) -> bool {
        self.is_fresh() && !self.is_wrong() && self.draft != self.running
    }

    fn words(&self) -> String {
        let Some(checked) = &self.checked else { return "Checking.".to_owned() };
        if !self.is_fresh() {
            return "Changed, being checked.".to_owned();
        }
        let errors = checked.report.remarks.iter().filter(|one| one.complaint.error).count();
        if errors > 0 {
            let errors = of(errors as u64, "error");
            return format!("{errors}. The lane keeps what it runs.");
        }
        let size = checked.report.size.map_or_else(String::new, |size| {
            let (rows, columns) = (u64::from(size.rows), u64::from(size.columns));
            format!(": {}, {} on this instance", of(rows, "row"), of(columns, "column"))
        });
        let used = if self.draft == self.running {
            "This is what the lane runs."
        } else {
            "Changed, not used yet."
        };
        format!("No errors{size}. {used}")
    }
}

/// Title and role.
fn heading(draft: &Draft, change: &Callback<Draft>) -> Html {
    let title = {
        let draft = draft.clone();
        change.reform(move |event: InputEvent| {
            let input: HtmlInputElement = event.target_unchecked_into();
            Draft { title: input.value(), ..draft.clone() }
        })
    };
    let role = {
        let draft = draft.clone();
        change.reform(move |_: Event| Draft { relaxation: !draft.relaxation, ..draft.clone() })
    };
    html! {
        <>
            <label class="field wide">
                { "Title" }
                <input
                    type="text" maxlength="120" data-testid="notation-title"
                    value={draft.title.clone()} oninput={title}
                />
            </label>
            <label class="row small">
                <input type="checkbox" checked={draft.relaxation} onchange={role} data-testid="notation-role" />
                { "A relaxation: bounded, not compared for its optimum" }
            </label>
        </>
    }
}

/// Makes the lane run the draft.
fn run_it(id: LaneId, state: &State, hands: Option<&Hands>) -> Callback<()> {
    let (Some(hands), Some(checked), true) = (hands, &state.checked, state.can_be_used()) else {
        return Callback::noop();
    };
    let (hands, draft, report) = (hands.clone(), state.draft.clone(), checked.report.clone());
    Callback::from(move |()| {
        let edit = Edit::Use(id, draft.clone(), report.clone());
        hands.document.dispatch(DocumentAction::Edit(edit));
    })
}

fn buttons(
    props: &EditorProps,
    state: &State,
    enter: &Callback<()>,
    hands: Option<&Hands>,
    help: Html,
) -> Html {
    let able = state.can_be_used();
    let run = enter.reform(|_: MouseEvent| ());
    html! {
        <div class="row">
            <button
                type="button" data-testid="use" aria-disabled={if able { "false" } else { "true" }}
                title="Control and Enter" onclick={run}
            >{ "Use this text" }</button>
            if props.slot.shipped.is_some() {
                <button type="button" data-testid="restore" onclick={act(Edit::Restore, props.slot.id, hands)}>{ "Back to the shipped text" }</button>
            }
            { duplicate(props.slot.id, hands) }
            { help }
        </div>
    }
}

fn duplicate(id: LaneId, hands: Option<&Hands>) -> Html {
    html! {
        <button type="button" data-testid="duplicate" onclick={act(Edit::Duplicate, id, hands)}>{ "Duplicate this rival" }</button>
    }
}

fn act(edit: fn(LaneId) -> Edit, id: LaneId, hands: Option<&Hands>) -> Callback<MouseEvent> {
    let hands = hands.cloned();
    Callback::from(move |_: MouseEvent| {
        if let Some(hands) = &hands {
            hands.document.dispatch(DocumentAction::Edit(edit(id)));
        }
    })
}
