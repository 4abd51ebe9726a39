//! A lane's tree on its canvas: drawn at most once a frame and never for more than a small part
//! of the time; a click or the arrow keys select a node.

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
use crate::view::paint::{Scene, paint};

/// After a drawing that took `t`, the next of the same tree waits for this many times `t`.
const REST: f64 = 5.0;

/// Nodes that lengthen the wait by a millisecond, and the longest such wait: putting a drawing on
/// the screen costs time that the script does not see.
const NODES: f64 = 16.0;
const LONGEST: f64 = 250.0;

/// Between drawings of different trees, in milliseconds, so that no frame holds two large ones.
const APART: f64 = 20.0;

thread_local! {
    /// When any tree was last drawn.
    static LAST: Cell<f64> = const { Cell::new(0.0) };
}

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
}

/// What is to be drawn, and what the last drawing costs in rest.
#[derive(Default)]
struct Painter {
    due: Option<(HtmlCanvasElement, TreeCell, Scene)>,
    ended: f64,
    cost: f64,
    timer: Option<Timeout>,
}

type PainterCell = Rc<RefCell<Painter>>;

impl Painter {
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
        let other = LAST.get() + APART - now;
        if own > other { own } else { other }
    }

    fn paint(&mut self) {
        let Some((canvas, tree, scene)) = &self.due else { return };
        let begun = now();
        let tree = tree.borrow();
        paint(canvas, &tree, scene);
        self.ended = now();
        let nodes = tree.nodes().len() as f64 / NODES;
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
        let key = (props.tree.clone(), props.version, props.scene);
        use_effect_with(key, move |(tree, _, scene)| {
            let canvas = node.cast::<HtmlCanvasElement>();
            painter.borrow_mut().due = canvas.map(|canvas| (canvas, tree.clone(), *scene));
            Painter::draw(&painter);
        });
    }
    use_effect_with((), move |()| {
        let listener = on_colours_changed(move || Painter::draw(&painter));
        move || drop(listener)
    });
    html! {
        <canvas
            ref={node} class="tree" tabindex="0" role="application" data-testid="tree"
            aria-label={props.label.clone()} onclick={on_click(props)} onkeydown={on_key(props)}
        />
    }
}

fn on_colours_changed(then: impl Fn() + 'static) -> Option<EventListener> {
    let query = gloo_utils::window().match_media("(prefers-color-scheme: dark)").ok().flatten()?;
    Some(EventListener::new(&query, "change", move |_| then()))
}

fn on_click(props: &CanvasProps) -> Callback<MouseEvent> {
    let (tree, scene, select) = (props.tree.clone(), props.scene, props.select.clone());
    Callback::from(move |event: MouseEvent| {
        let (x, y) = (f64::from(event.offset_x()), f64::from(event.offset_y()));
        let found = scene.nearest(&tree.borrow(), x, y, REACH);
        if let Some(place) = found {
            select.emit(Tree::number(place));
        }
    })
}

fn on_key(props: &CanvasProps) -> Callback<KeyboardEvent> {
    let (tree, selected) = (props.tree.clone(), props.scene.selected);
    let (select, open) = (props.select.clone(), props.open.clone());
    Callback::from(move |event: KeyboardEvent| {
        let key = event.key();
        if key == "Enter" {
            open.emit(());
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
