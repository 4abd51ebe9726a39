//! A lane's tree on its canvas: drawn at most once a frame and never for more than a small part
//! of the time; a click or the arrow keys select a node, a drag, the wheel or keys move the view.

use std::cell::{Cell, RefCell};
use std::rc::Rc;

use gloo_events::EventListener;
use gloo_timers::callback::Timeout;
use record::event::NodeNumber;
use web_sys::HtmlCanvasElement;
use yew::prelude::*;

use crate::browser::frame::now;
use crate::browser::run::TreeCell;
use crate::state::tree::Tree;
use crate::view::grip::{Glance, Grip, on_wheel};
use crate::view::paint::paint;
use crate::view::scene::Scene;

/// After a drawing of a growing tree that took `t`, the next one waits for this many times `t`.
const REST: f64 = 5.0;

/// Drawn nodes that lengthen the wait by a millisecond, and the longest such wait: putting a
/// drawing on the screen costs time that the script does not see.
const NODES: f64 = 16.0;
const LONGEST: f64 = 250.0;

/// Between drawings of different trees, in milliseconds, so that no frame holds two large ones.
const APART: f64 = 20.0;

thread_local! {
    /// When any tree was last drawn.
    static LAST: Cell<f64> = const { Cell::new(0.0) };
}

/// Height of a small tree; a higher one has a class of its own.
pub(crate) const LOW: f64 = 136.0;

/// How far from a node a click still means it, in pixels.
const REACH: f64 = 24.0;

#[derive(Properties, PartialEq)]
pub(crate) struct CanvasProps {
    pub(crate) tree: TreeCell,
    /// Changes when the tree does.
    pub(crate) version: u64,
    pub(crate) scene: Scene,
    /// What it shows, for those who do not see it.
    pub(crate) label: String,
    pub(crate) select: Callback<NodeNumber>,
    /// Asked for with Enter: the node in full.
    pub(crate) open: Callback<()>,
    /// Asked for with the space bar: the subtree of the selected node folded, or unfolded.
    pub(crate) fold: Callback<usize>,
    /// The view moved or zoomed.
    pub(crate) look: Callback<Glance>,
}

/// What is to be drawn, and what the last drawing costs in rest.
#[derive(Default)]
struct Painter {
    due: Option<(HtmlCanvasElement, TreeCell, Scene)>,
    version: u64,
    ended: f64,
    cost: f64,
    timer: Option<Timeout>,
}

type PainterCell = Rc<RefCell<Painter>>;

impl Painter {
    /// Takes what is to be drawn. A view that moves over a tree that stands still is drawn at once.
    fn want(cell: &PainterCell, due: Option<(HtmlCanvasElement, TreeCell, Scene)>, version: u64) {
        {
            let mut painter = cell.borrow_mut();
            if painter.version == version {
                (painter.timer, painter.ended, painter.cost) = (None, 0.0, 0.0);
            }
            (painter.due, painter.version) = (due, version);
        }
        Self::draw(cell);
    }

    /// Draws now, or when the last drawing is paid for.
    fn draw(cell: &PainterCell) {
        let wait = {
            let painter = cell.borrow();
            if painter.timer.is_some() {
                return;
            }
            painter.wait(now())
        };
        if wait <= 1.0 {
            cell.borrow_mut().paint();
            return;
        }
        let later = Rc::downgrade(cell);
        cell.borrow_mut().timer = Some(Timeout::new(wait as u32, move || {
            if let Some(cell) = later.upgrade() {
                cell.borrow_mut().timer = None;
                Self::draw(&cell);
            }
        }));
    }

    /// How long a drawing has to wait, in milliseconds.
    fn wait(&self, now: f64) -> f64 {
        let own = self.ended + self.cost - now;
        let other = if self.cost > 0.0 { LAST.get() + APART - now } else { 0.0 };
        if own > other { own } else { other }
    }

    fn paint(&mut self) {
        let Some((canvas, tree, scene)) = &self.due else { return };
        let begun = now();
        let drawn = paint(canvas, &tree.borrow(), scene);
        self.ended = now();
        let nodes = drawn as f64 / NODES;
        self.cost = REST * (self.ended - begun) + if nodes < LONGEST { nodes } else { LONGEST };
        LAST.set(self.ended);
    }
}

/// The canvas.
#[component]
pub(crate) fn TreeCanvas(props: &CanvasProps) -> Html {
    let node = use_node_ref();
    let painter = use_memo((), |()| PainterCell::default());
    {
        let (node, painter) = (node.clone(), painter.clone());
        let key = (props.tree.clone(), props.version, props.scene.clone());
        use_effect_with(key, move |(tree, version, scene)| {
            let canvas = node.cast::<HtmlCanvasElement>();
            let due = canvas.map(|canvas| (canvas, tree.clone(), scene.clone()));
            Painter::want(&painter, due, *version);
        });
    }
    let grip = use_mut_ref(Grip::default);
    let size = (props.scene.width, props.scene.height);
    {
        let (node, key) = (node.clone(), (size, props.look.clone()));
        use_effect_with(key, move |(size, look)| {
            let listener =
                node.cast().map(|canvas: HtmlCanvasElement| on_wheel(&canvas, *size, look.clone()));
            move || drop(listener)
        });
    }
    let press = Grip::pressed(&grip);
    let drag = Grip::dragged(&grip, size, props.look.clone());
    let release = Grip::released(&grip);
    use_effect_with((), move |()| {
        let listener = on_colours_changed(move || Painter::draw(&painter));
        move || drop(listener)
    });
    html! {
        <canvas
            ref={node} class={if props.scene.height > LOW { "tree high" } else { "tree" }} tabindex="0" role="application" data-testid="tree"
            aria-label={props.label.clone()} onclick={on_click(props, grip)} onkeydown={on_key(props)}
            onpointerdown={press} onpointermove={drag} onpointerup={release.clone()} onpointercancel={release}
        />
    }
}

fn on_colours_changed(then: impl Fn() + 'static) -> Option<EventListener> {
    let query = gloo_utils::window().match_media("(prefers-color-scheme: dark)").ok().flatten()?;
    Some(EventListener::new(&query, "change", move |_| then()))
}

fn on_click(props: &CanvasProps, grip: Rc<RefCell<Grip>>) -> Callback<MouseEvent> {
    let (tree, scene, select) = (props.tree.clone(), props.scene.clone(), props.select.clone());
    Callback::from(move |event: MouseEvent| {
        if grip.borrow_mut().took_a_drag() {
            return;
        }
        let at = (f64::from(event.offset_x()), f64::from(event.offset_y()));
        let found = scene.nearest(&tree.borrow(), at, REACH);
        if let Some(place) = found {
            select.emit(Tree::number(place));
        }
    })
}

fn on_key(props: &CanvasProps) -> Callback<KeyboardEvent> {
    let (tree, selected) = (props.tree.clone(), props.scene.selected);
    let (select, open) = (props.select.clone(), props.open.clone());
    let (fold, look) = (props.fold.clone(), props.look.clone());
    Callback::from(move |event: KeyboardEvent| {
        if event.ctrl_key() || event.meta_key() || event.alt_key() {
            return;
        }
        let key = event.key();
        if let Some(glance) = Glance::of_key(&key, event.shift_key()) {
            event.prevent_default();
            look.emit(glance);
            return;
        }
        if key == "Enter" {
            open.emit(());
            return;
        }
        if let Some(place) = selected.filter(|_| key == " ") {
            event.prevent_default();
            fold.emit(place);
            return;
        }
        let step = step(&tree.borrow(), selected, &key);
        if let Some(step) = step {
            event.prevent_default();
            if let Some(place) = step {
                select.emit(Tree::number(place));
            }
        }
    })
}

/// Where a key leads: `None` for a key that is not for the tree, `Some(None)` at its edge.
fn step(tree: &Tree, selected: Option<usize>, key: &str) -> Option<Option<usize>> {
    let Some(from) = selected else {
        let root = (!tree.nodes().is_empty()).then_some(0);
        return (key.starts_with("Arrow") || key == "Home").then_some(root);
    };
    match key {
        "ArrowLeft" => Some(tree.parent(from)),
        "ArrowRight" => Some(tree.first_child(from)),
        "ArrowUp" => Some(tree.neighbour(from, true)),
        "ArrowDown" => Some(tree.neighbour(from, false)),
        "Home" => Some(Some(0)),
        _ => None,
    }
}

#[cfg(test)]
mod tests {
    use super::step;
    use crate::state::tree::tests::small;

    #[test]
    fn arrows_walk_the_tree() {
        let mut tree = small();
        tree.settle();
        assert_eq!(step(&tree, None, "ArrowDown"), Some(Some(0)));
        assert_eq!(step(&tree, Some(0), "ArrowRight"), Some(Some(1)));
        assert_eq!(step(&tree, Some(1), "ArrowDown"), Some(Some(2)));
        assert_eq!(step(&tree, Some(2), "ArrowLeft"), Some(Some(0)));
        assert_eq!(step(&tree, Some(0), "ArrowLeft"), Some(None));
        assert_eq!(step(&tree, Some(0), "a"), None);
    }
}
