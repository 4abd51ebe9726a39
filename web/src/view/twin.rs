//! The text twin of a tree: the same nodes as a list, with the keys of a tree. Only the rows in
//! view are in the document.

use std::collections::BTreeSet;

use record::event::NodeNumber;
use record::message::RivalReport;
use report::number::{of, short};
use wasm_bindgen::JsCast;
use web_sys::{HtmlElement, HtmlInputElement};
use yew::prelude::*;

use crate::browser::run::TreeCell;
use crate::state::find::{Wanted, next};
use crate::state::outline::{Row, rows};
use crate::state::pointer::Shared;
use crate::state::tree::Tree;
use crate::state::words::{branching, node_state};
use crate::view::inspector::focus_inspector;
use crate::view::scene::Folded;

/// Height of a row, as the style sheet has it, and rows in view.
const ROW: i32 = 28;
const VIEW: usize = 10;
/// Rows kept in the document above and below the view.
const SPARE: usize = 4;
/// Deepest indentation.
const DEEPEST: u32 = 12;

#[derive(Properties, PartialEq)]
pub(crate) struct TwinProps {
    pub(crate) tree: TreeCell,
    pub(crate) version: u64,
    pub(crate) made: u32,
    pub(crate) letter: String,
    pub(crate) rival: Option<Shared<RivalReport>>,
    pub(crate) selected: Option<usize>,
    pub(crate) select: Callback<NodeNumber>,
    /// Places of nodes whose subtrees are folded, here and in the drawing.
    pub(crate) folded: Folded,
    pub(crate) fold: Callback<usize>,
}

/// The twin, folded away until it is opened.
#[component]
pub(crate) fn Twin(props: &TwinProps) -> Html {
    let open = use_state_eq(|| false);
    let wanted = use_state_eq(String::new);
    let ontoggle = {
        let open = open.setter();
        Callback::from(move |event: Event| {
            let element: web_sys::Element = event.target_unchecked_into();
            open.set(element.has_attribute("open"));
        })
    };
    let nodes = of(u64::from(props.made), "node");
    html! {
        <details class="folded twin small" data-testid="twin" {ontoggle}>
            <summary>{ format!("{nodes} as a list") }</summary>
            if *open { { find(props, &wanted) } <List ..props.copy() /> }
        </details>
    }
}

impl TwinProps {
    fn copy(&self) -> Self {
        Self {
            tree: self.tree.clone(),
            version: self.version,
            made: self.made,
            letter: self.letter.clone(),
            rival: self.rival.clone(),
            selected: self.selected,
            select: self.select.clone(),
            folded: self.folded.clone(),
            fold: self.fold.clone(),
        }
    }
}

/// A field that finds nodes; each press of Enter or of the button leads to the next one.
fn find(props: &TwinProps, wanted: &UseStateHandle<String>) -> Html {
    let columns = props.rival.as_ref().map_or(&[][..], |rival| rival.column_names.as_slice());
    let places = Wanted::read(wanted).map(|wanted| wanted.places(&props.tree.borrow(), columns));
    let words = places.as_ref().map_or_else(String::new, |places| match places.len() {
        0 => "no node matches".to_owned(),
        1 => "1 node matches".to_owned(),
        some => format!("{} match", of(some as u64, "node")),
    });
    let step = {
        let (select, selected) = (props.select.clone(), props.selected);
        Callback::from(move |()| {
            if let Some(place) = places.as_ref().and_then(|places| next(places, selected)) {
                select.emit(Tree::number(place));
            }
        })
    };
    let oninput = {
        let wanted = wanted.setter();
        Callback::from(move |event: InputEvent| {
            wanted.set(event.target_unchecked_into::<HtmlInputElement>().value());
        })
    };
    let onkeydown = {
        let step = step.clone();
        Callback::from(move |event: KeyboardEvent| {
            if event.key() == "Enter" {
                step.emit(());
            }
        })
    };
    html! {
        <div class="row find">
            <label class="field">
                { "Find" }
                <input
                    type="text" placeholder="17, depth 5, infeasible, x[" value={(**wanted).clone()}
                    spellcheck="false" autocomplete="off" data-testid="find-node" {oninput} {onkeydown}
                />
            </label>
            <button type="button" data-testid="find-next" onclick={step.reform(|_: MouseEvent| ())}>{ "Next" }</button>
            <span class="soft" role="status" data-testid="found">{ words }</span>
        </div>
    }
}

/// What a key does in the list.
#[derive(Debug, PartialEq, Eq)]
enum Move {
    Select(usize),
    Fold(usize),
    Unfold(usize),
    Open,
    Stay,
}

#[component]
fn List(props: &TwinProps) -> Html {
    let frame = use_node_ref();
    let folded = &props.folded;
    let top = use_state_eq(|| 0_usize);
    let key = (props.tree.clone(), props.version, folded.clone());
    let rows = use_memo(key, |(tree, _, folded)| rows(&tree.borrow(), folded));
    let first = top.saturating_sub(SPARE).min(rows.len());
    let last = (*top + VIEW + SPARE).clamp(first, rows.len());
    {
        let frame = frame.clone();
        use_effect_with((first, rows.len() - last), move |&(before, after)| {
            stretch(&frame, before, after);
        });
    }
    {
        let (frame, rows) = (frame.clone(), rows.clone());
        use_effect_with(props.selected, move |selected| {
            if let Some(place) = selected {
                reveal(&frame, &rows, *place);
            }
        });
    }
    let onscroll = {
        let top = top.setter();
        Callback::from(move |event: Event| {
            let element: web_sys::Element = event.target_unchecked_into();
            top.set((element.scroll_top() / ROW).max(0) as usize);
        })
    };
    let onkeydown = {
        let (tree, select, selected) = (props.tree.clone(), props.select.clone(), props.selected);
        let (rows, shut, fold) = (rows.clone(), folded.clone(), props.fold.clone());
        Callback::from(move |event: KeyboardEvent| {
            let step = step(&rows, &tree.borrow(), &shut, selected, &event.key());
            let Some(step) = step else { return };
            event.prevent_default();
            match step {
                Move::Select(place) => select.emit(Tree::number(place)),
                Move::Fold(place) | Move::Unfold(place) => fold.emit(place),
                Move::Open => focus_inspector(),
                Move::Stay => {}
            }
        })
    };
    let active =
        props.selected.filter(|place| rows[first..last].iter().any(|row| row.place == *place));
    let tree = props.tree.borrow();
    html! {
        <div
            ref={frame} class="list" role="tree" tabindex="0" {onscroll} {onkeydown}
            aria-label={format!("Nodes of {}", props.letter)}
            aria-activedescendant={active.map(|place| row_id(&props.letter, place))}
        >
            <div class="before" role="none" />
            for row in rows[first..last].iter() { { item(props, &tree, folded, *row) } }
            <div class="after" role="none" />
        </div>
    }
}

fn row_id(letter: &str, place: usize) -> String {
    format!("node-{letter}-{}", place + 1)
}

fn item(props: &TwinProps, tree: &Tree, folded: &BTreeSet<usize>, row: Row) -> Html {
    let place = row.place;
    let Some(node) = tree.nodes().get(place) else { return Html::default() };
    let chosen = props.selected == Some(place);
    let parent = tree.first_child(place).is_some();
    let expanded = parent.then(|| if folded.contains(&place) { "false" } else { "true" });
    let columns = props.rival.as_ref().map_or(&[][..], |rival| rival.column_names.as_slice());
    let made_by =
        node.branching.as_ref().map_or_else(|| "root".to_owned(), |by| branching(by, columns));
    let bound =
        if node.own_bound { node.stand.map_or_else(String::new, short) } else { String::new() };
    let select = props.select.clone();
    let onclick = Callback::from(move |_: MouseEvent| select.emit(Tree::number(place)));
    html! {
        <div
            key={place} id={row_id(&props.letter, place)} role="treeitem" {onclick}
            class={classes!("item", format!("depth-{}", node.depth.min(DEEPEST)))}
            aria-level={(node.depth + 1).to_string()} aria-setsize={row.siblings.to_string()}
            aria-posinset={row.rank.to_string()} aria-expanded={expanded}
            aria-selected={if chosen { "true" } else { "false" }}
        >
            <span class="by">{ format!("{} {made_by}", place + 1) }</span>
            <span class="soft">{ node_state(node.state) }</span>
            <span class="value">{ bound }</span>
        </div>
    }
}

/// What a key does; `None` for a key that is not for the list.
fn step(
    rows: &[Row],
    tree: &Tree,
    folded: &BTreeSet<usize>,
    selected: Option<usize>,
    key: &str,
) -> Option<Move> {
    let here = selected.and_then(|place| rows.iter().position(|row| row.place == place));
    let select = |index: Option<usize>| {
        index.and_then(|index| rows.get(index)).map_or(Move::Stay, |row| Move::Select(row.place))
    };
    let arrow = key.starts_with("Arrow");
    let Some(here) = here else { return (arrow || key == "Home").then(|| select(Some(0))) };
    let place = rows[here].place;
    let child = tree.first_child(place);
    match key {
        "ArrowDown" => Some(select(Some(here + 1))),
        "ArrowUp" => Some(select(here.checked_sub(1))),
        "Home" => Some(select(Some(0))),
        "End" => Some(select(rows.len().checked_sub(1))),
        "ArrowRight" if folded.contains(&place) => Some(Move::Unfold(place)),
        "ArrowRight" => Some(child.map_or(Move::Stay, Move::Select)),
        "ArrowLeft" if child.is_some() && !folded.contains(&place) => Some(Move::Fold(place)),
        "ArrowLeft" => Some(tree.parent(place).map_or(Move::Stay, Move::Select)),
        "Enter" => Some(Move::Open),
        _ => None,
    }
}

/// Gives the two spacers the height of the rows that are not in the document.
fn stretch(frame: &NodeRef, before: usize, after: usize) {
    let Some(frame) = frame.cast::<HtmlElement>() else { return };
    for (class, rows) in [(".before", before), (".after", after)] {
        let spacer = frame.query_selector(class).ok().flatten();
        if let Some(spacer) = spacer.and_then(|spacer| spacer.dyn_into::<HtmlElement>().ok()) {
            let height = [(rows * ROW as usize).to_string().as_str(), "px"].concat();
            // A spacer without its height leaves the list shorter, not wrong.
            let _ = spacer.style().set_property("height", &height);
        }
    }
}

/// Scrolls the list so that a node's row is in view.
fn reveal(frame: &NodeRef, rows: &[Row], place: usize) {
    let Some(frame) = frame.cast::<HtmlElement>() else { return };
    let Some(index) = rows.iter().position(|row| row.place == place) else { return };
    let (from, height) = (index as i32 * ROW, frame.client_height());
    if from < frame.scroll_top() {
        frame.set_scroll_top(from);
    } else if from + ROW > frame.scroll_top() + height {
        frame.set_scroll_top(from + ROW - height);
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::state::tree::tests::small;

    fn press(folded: &[usize], selected: Option<usize>, key: &str) -> Option<Move> {
        let tree = small();
        let folded = folded.iter().copied().collect();
        step(&rows(&tree, &folded), &tree, &folded, selected, key)
    }

    #[test]
    fn arrows_follow_the_rows() {
        assert_eq!(press(&[], None, "ArrowDown"), Some(Move::Select(0)));
        assert_eq!(press(&[], Some(0), "ArrowDown"), Some(Move::Select(1)));
        assert_eq!(press(&[], Some(2), "ArrowDown"), Some(Move::Stay));
        assert_eq!(press(&[], Some(1), "End"), Some(Move::Select(2)));
        assert_eq!(press(&[], Some(1), "x"), None);
    }

    #[test]
    fn left_folds_then_goes_to_the_parent() {
        assert_eq!(press(&[], Some(0), "ArrowLeft"), Some(Move::Fold(0)));
        assert_eq!(press(&[0], Some(0), "ArrowLeft"), Some(Move::Stay));
        assert_eq!(press(&[0], Some(0), "ArrowRight"), Some(Move::Unfold(0)));
        assert_eq!(press(&[], Some(2), "ArrowLeft"), Some(Move::Select(0)));
        assert_eq!(press(&[], Some(0), "ArrowRight"), Some(Move::Select(1)));
    }
}
