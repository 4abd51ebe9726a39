//! A rival's tree: its bound ruler, the canvas on the shared axis with what moves the view, and the
//! list of its nodes.

use std::cell::RefCell;
use std::collections::BTreeSet;

use record::event::NodeNumber;
use report::axis::Axis;
use report::number::of;
use yew::prelude::*;

use crate::browser::run::TreeCell;
use crate::state::lane::Lane;
use crate::state::lens::{Lens, Look};
use crate::state::pointer::Shared;
use crate::state::span::{self, Span};
use crate::view::axis::shown_part;
use crate::view::canvas::{LOW, TreeCanvas};
use crate::view::grip::Glance;
use crate::view::inspector::focus_inspector;
use crate::view::ruler::Ruler;
use crate::view::scene::{Folded, HEIGHTS, Scene};
use crate::view::twin::Twin;

/// Height of a larger tree in pixels, as the style sheet has it, and the nodes from which a tree is
/// larger.
const HIGH: f64 = 240.0;
const LARGER: u32 = 40;

#[derive(Properties, PartialEq)]
pub(crate) struct DrawingProps {
    pub(crate) letter: String,
    pub(crate) lane: Shared<Lane>,
    pub(crate) tree: TreeCell,
    pub(crate) axis: Axis,
    pub(crate) width: f64,
    pub(crate) best: Option<f64>,
    pub(crate) selected: Option<NodeNumber>,
    pub(crate) select: Callback<NodeNumber>,
}

/// The drawing.
#[component]
pub(crate) fn Drawing(props: &DrawingProps) -> Html {
    let lens = use_context::<UseReducerHandle<Lens>>();
    let heights = use_state_eq(|| None::<Span>);
    let folded = use_state(Folded::default);
    let tree = use_shown(props, lens.as_deref());
    let version = props.lane.tally.version;
    let selected = props.selected.and_then(|node| tree.borrow().place(node));
    let scene = scene(props, &tree, lens.as_deref(), (*heights, selected, (*folded).clone()));
    let look = looks(lens.clone(), props.axis, scene.clone(), &tree, heights.clone());
    use_follow(&scene, &tree, &look);
    let fold = {
        let (folded, set) = ((*folded).clone(), folded.setter());
        Callback::from(move |place: usize| set.set(turned(&folded, place)))
    };
    let made = tree.borrow().tally().made;
    html! {
        <>
            if let Some(root) = scene.root {
                <Ruler
                    axis={scene.axis} width={props.width} {root} now={scene.now} best={props.best}
                    then={lens.as_ref().is_some_and(|lens| lens.moment.is_some())}
                />
            }
            <TreeCanvas
                tree={tree.clone()} {version} scene={scene.clone()} label={label(props, made)}
                select={props.select.clone()} open={Callback::from(|()| focus_inspector())}
                fold={fold.clone()} look={look.clone()}
            />
            { view_buttons(&props.letter, &look, lens.is_some_and(|lens| lens.part.is_some()) || heights.is_some()) }
            <Twin
                {tree} {version} {made} letter={props.letter.clone()}
                rival={props.lane.rival.clone()} {selected} select={props.select.clone()}
                folded={(*folded).clone()} {fold}
            />
        </>
    }
}

/// The tree, or how it stood at the moment that is looked at.
#[hook]
fn use_shown(props: &DrawingProps, lens: Option<&Lens>) -> TreeCell {
    let coefficients = props.lane.rival.as_ref().map_or(1, |rival| rival.nonzeros);
    let at = lens.and_then(|lens| lens.solved(&props.tree.borrow(), coefficients));
    let key = (props.tree.clone(), at, at.map(|_| props.lane.tally.version));
    let shown = use_memo(key, |(tree, at, _)| match at {
        Some(solved) => Shared::new(RefCell::new(tree.borrow().at(*solved))),
        None => tree.clone(),
    });
    (*shown).clone()
}

fn scene(
    props: &DrawingProps,
    tree: &TreeCell,
    lens: Option<&Lens>,
    (heights, selected, folded): (Option<Span>, Option<usize>, Folded),
) -> Scene {
    let as_it_is = lens.is_none_or(|lens| lens.moment.is_none());
    let tally = tree.borrow().tally();
    Scene {
        axis: shown_part(&props.axis, lens.and_then(|lens| lens.part), props.width),
        heights: heights.unwrap_or(HEIGHTS),
        width: props.width,
        height: if props.lane.tally.made < LARGER { LOW } else { HIGH },
        best: props.best,
        root: props.lane.root_bound(),
        now: if as_it_is { props.lane.bound() } else { tally.bound },
        selected,
        folded,
        maximise: props.lane.maximise(),
    }
}

/// What a glance does to the axis, which all lanes share, and to the height of this tree.
fn looks(
    lens: Option<UseReducerHandle<Lens>>,
    whole: Axis,
    scene: Scene,
    tree: &TreeCell,
    heights: UseStateHandle<Option<Span>>,
) -> Callback<Glance> {
    let tree = tree.clone();
    Callback::from(move |glance: Glance| {
        let Some(lens) = &lens else { return };
        let (axis, length) = (scene.axis, scene.heights.1 - scene.heights.0);
        let across = whole.whole;
        match glance {
            Glance::Zoom { about, factor } => {
                let at = scene.selected.and_then(|place| scene.at(&tree.borrow(), place));
                let middle = (scene.width / 2.0, scene.height / 2.0);
                let (x, y) = about
                    .map_or(at.unwrap_or(middle), |(x, y)| (x * scene.width, y * scene.height));
                let about = axis.value(x, scene.width);
                lens.dispatch(Look::Zoom { whole: across, about, factor });
                heights.set(span::zoomed(*heights, HEIGHTS, scene.share(y), factor));
            }
            Glance::Move { right, down } => {
                let by = right * (axis.high - axis.low);
                lens.dispatch(Look::Pan { whole: across, by });
                heights.set(span::moved(*heights, HEIGHTS, down * length));
            }
            Glance::Hold(stand, height) => {
                lens.dispatch(Look::Hold { whole: across, value: stand });
                heights.set(span::holding(*heights, HEIGHTS, height));
            }
            Glance::Whole => {
                lens.dispatch(Look::Whole);
                heights.set(None);
            }
        }
    })
}

/// Brings a node that comes to be selected into view.
#[hook]
fn use_follow(scene: &Scene, tree: &TreeCell, look: &Callback<Glance>) {
    let (tree, look) = (tree.clone(), look.clone());
    use_effect_with(scene.selected, move |selected| {
        let place = selected.filter(|&place| place < tree.borrow().nodes().len());
        let at = place.and_then(|place| {
            let tree = tree.borrow();
            tree.nodes()[place].stand.map(|stand| (stand, tree.height(place)))
        });
        if let Some((stand, height)) = at {
            look.emit(Glance::Hold(stand, height));
        }
    });
}

fn turned(folded: &BTreeSet<usize>, place: usize) -> Folded {
    let mut folded = folded.clone();
    if !folded.remove(&place) {
        folded.insert(place);
    }
    Shared::new(folded)
}

/// Everything that a drag or a wheel does, as buttons.
fn view_buttons(letter: &str, look: &Callback<Glance>, moved: bool) -> Html {
    let button = |sign: &'static str, name: &'static str, glance: Glance, able: bool| {
        let look = look.clone();
        let onclick = Callback::from(move |_: MouseEvent| {
            if able {
                look.emit(glance);
            }
        });
        html! {
            <button
                type="button" class="link" {onclick} aria-label={name} title={name}
                aria-disabled={if able { "false" } else { "true" }}
            >{ sign }</button>
        }
    };
    html! {
        <div class="view-acts small" role="group" aria-label={format!("View of {letter}")} data-testid="view">
            { button("+", "Nearer", Glance::NEARER, true) }
            { button("\u{2212}", "Farther", Glance::FARTHER, moved) }
            { button("\u{2190}", "View left", Glance::LEFT, moved) }
            { button("\u{2192}", "View right", Glance::RIGHT, moved) }
            { button("\u{2191}", "View up", Glance::UP, moved) }
            { button("\u{2193}", "View down", Glance::DOWN, moved) }
            { button("Whole", "Whole tree", Glance::Whole, moved) }
        </div>
    }
}

fn label(props: &DrawingProps, made: u32) -> String {
    let nodes = of(u64::from(made), "node");
    let at = props.selected.map_or_else(String::new, |node| format!("; node {} selected", node.0));
    format!(
        "Search tree of {}: {nodes}{at}. Arrow keys move among nodes, Enter opens, Space folds; \
         plus and minus zoom, Shift with an arrow moves the view, 0 shows the whole.",
        props.letter
    )
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn folding_twice_unfolds() {
        let once = turned(&BTreeSet::new(), 4);
        assert!(once.contains(&4));
        assert!(turned(&once, 4).is_empty());
    }
}
