//! Drawing a tree on a canvas: x is a node's bound, y its place in the layout.
//!
//! Marks differ by shape as well as by colour and are drawn in one path a shape. A mark that
//! would fall on the same few pixels as one of its kind is left out, and past [`DENSE`] nodes the
//! tree is drawn as counts by cell, so that the cost is bounded by pixels.

use record::event::NodeState;
use report::axis::Axis;
use report::density::Density;
use wasm_bindgen::{JsCast, JsValue};
use web_sys::{CanvasRenderingContext2d, HtmlCanvasElement};

use crate::state::tree::Tree;
use crate::view::axis::across;

/// Nodes up to which edges are curves, all edges are drawn, edges of inner nodes are drawn, and
/// marks are drawn.
const CURVED: usize = 600;
const LEAFED: usize = 1_200;
const EDGED: usize = 5_000;
const DENSE: usize = 6_000;
/// Edges drawn in one stroke: a longer path costs more than its parts.
const STROKE: usize = 64;
/// Shades of a dense drawing.
const LEVELS: u32 = 4;
/// Side of a cell of a dense drawing, in pixels.
const CELL: f64 = 3.0;
/// Room above and below the tree, in pixels.
const ROOM: f64 = 9.0;

/// What is drawn beside the tree itself.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(crate) struct Scene {
    /// The shared axis.
    pub(crate) axis: Axis,
    /// Width in pixels.
    pub(crate) width: f64,
    /// Height in pixels.
    pub(crate) height: f64,
    /// The best known value.
    pub(crate) best: Option<f64>,
    /// The root's bound.
    pub(crate) root: Option<f64>,
    /// The bound of the whole tree.
    pub(crate) now: Option<f64>,
    /// The selected node.
    pub(crate) selected: Option<usize>,
}

impl Scene {
    /// Where a node stands.
    fn at(&self, tree: &Tree, place: usize) -> Option<(f64, f64)> {
        let stand = tree.nodes().get(place)?.stand?;
        let y = ROOM + tree.height(place) * (self.height - 2.0 * ROOM);
        Some((across(&self.axis, self.width, stand), y))
    }

    /// The node nearest to a point, if one is within reach. O(nodes).
    pub(crate) fn nearest(&self, tree: &Tree, x: f64, y: f64, reach: f64) -> Option<usize> {
        let distance = |place: usize| {
            let (node_x, node_y) = self.at(tree, place)?;
            let (dx, dy) = (node_x - x, node_y - y);
            Some((dx * dx + dy * dy, place))
        };
        (0..tree.nodes().len())
            .filter_map(distance)
            .filter(|(square, _)| *square <= reach * reach)
            .min_by(|a, b| a.0.total_cmp(&b.0))
            .map(|(_, place)| place)
    }
}

/// The value of a custom property of the style at an element.
pub(crate) fn colour(canvas: &HtmlCanvasElement, name: &str) -> String {
    let style = gloo_utils::window().get_computed_style(canvas).ok().flatten();
    let value = style.and_then(|style| style.get_property_value(name).ok());
    value.map_or_else(String::new, |value| value.trim().to_owned())
}

/// Draws a tree.
pub(crate) fn paint(canvas: &HtmlCanvasElement, tree: &Tree, scene: &Scene) {
    let ratio = gloo_utils::window().device_pixel_ratio();
    let (width, height) = ((scene.width * ratio) as u32, (scene.height * ratio) as u32);
    if (canvas.width(), canvas.height()) != (width, height) {
        canvas.set_width(width);
        canvas.set_height(height);
    }
    let context = canvas.get_context("2d").ok().flatten();
    let Some(context) = context.and_then(|c| c.dyn_into::<CanvasRenderingContext2d>().ok()) else {
        return;
    };
    // A drawing whose state cannot be set is drawn with the state there is.
    let _ = context.set_transform(ratio, 0.0, 0.0, ratio, 0.0, 0.0);
    context.clear_rect(0.0, 0.0, scene.width, scene.height);
    let pen = Pen {
        hue: colour(canvas, "--h"),
        ink: colour(canvas, "--ink"),
        soft: colour(canvas, "--soft"),
        paper: colour(canvas, "--paper"),
        context,
        tree,
        scene,
    };
    pen.draw();
}

struct Pen<'a> {
    context: CanvasRenderingContext2d,
    tree: &'a Tree,
    scene: &'a Scene,
    hue: String,
    ink: String,
    soft: String,
    paper: String,
}

impl Pen<'_> {
    fn draw(&self) {
        self.rungs();
        let count = self.tree.nodes().len();
        if count > DENSE {
            self.density();
        } else {
            if count <= EDGED {
                self.edges(count);
            }
            self.marks();
        }
        self.best();
        self.selection();
    }

    /// Dotted lines at the root's bound and at the bound now.
    fn rungs(&self) {
        self.context.set_stroke_style_str(&self.soft);
        self.context.set_line_width(1.0);
        self.dash(&[1.0, 3.0]);
        self.context.begin_path();
        for value in [self.scene.root, self.scene.now].into_iter().flatten() {
            self.upright(value);
        }
        self.context.stroke();
        self.dash(&[]);
    }

    fn best(&self) {
        let Some(best) = self.scene.best else { return };
        self.context.set_stroke_style_str(&self.ink);
        self.context.set_line_width(1.5);
        self.context.begin_path();
        self.upright(best);
        self.context.stroke();
    }

    fn upright(&self, value: f64) {
        let x = across(&self.scene.axis, self.scene.width, value);
        self.context.move_to(x, 0.0);
        self.context.line_to(x, self.scene.height);
    }

    fn dash(&self, lengths: &[f64]) {
        let lengths: js_sys::Array =
            lengths.iter().map(|&length| JsValue::from_f64(length)).collect();
        // Lines stay plain where dashes are not known.
        let _ = self.context.set_line_dash(&lengths);
    }

    fn edges(&self, count: usize) {
        self.context.set_stroke_style_str(&self.soft);
        self.context.set_line_width(0.7);
        self.context.set_global_alpha(if count <= CURVED { 0.55 } else { 0.35 });
        let shown = |&place: &usize| count <= LEAFED || self.tree.first_child(place).is_some();
        let places: Vec<usize> = (1..count).filter(shown).collect();
        for stroke in places.chunks(STROKE) {
            self.context.begin_path();
            for &place in stroke {
                self.edge(place, count <= CURVED);
            }
            self.context.stroke();
        }
        self.context.set_global_alpha(1.0);
    }

    fn edge(&self, place: usize, curved: bool) {
        let parent = self.tree.parent(place).and_then(|parent| self.scene.at(self.tree, parent));
        let Some((from, to)) = parent.zip(self.scene.at(self.tree, place)) else { return };
        self.context.move_to(from.0, from.1);
        if curved {
            let middle = (from.0 + to.0) / 2.0;
            self.context.bezier_curve_to(middle, from.1, middle, to.1, to.0, to.1);
        } else {
            self.context.line_to(to.0, to.1);
        }
    }

    fn marks(&self) {
        let mut shown = Shown::new(self.scene);
        for shape in Shape::ALL {
            self.context.begin_path();
            let usual = if self.tree.nodes().len() > LEAFED { 0.75 } else { 1.0 };
            for (place, node) in self.tree.nodes().iter().enumerate() {
                if Shape::of(node.state) != shape {
                    continue;
                }
                let Some((x, y)) = self.scene.at(self.tree, place) else { continue };
                if shown.first(shape, x, y) {
                    self.mark(shape, x, y, if place == 0 { 2.0 } else { usual });
                }
            }
            self.ink(shape);
        }
    }

    fn mark(&self, shape: Shape, x: f64, y: f64, scale: f64) {
        match shape {
            Shape::Disc => self.disc(x, y, 2.4 * scale),
            Shape::Ring => self.disc(x, y, 3.0 * scale),
            Shape::Bar => self.line((x, y - 3.5 * scale), (x, y + 3.5 * scale)),
            Shape::Cross => {
                let r = 2.8 * scale;
                self.line((x - r, y - r), (x + r, y + r));
                self.line((x - r, y + r), (x + r, y - r));
            }
            Shape::Diamond => {
                let r = 4.4 * scale;
                self.line((x, y - r), (x + r, y));
                self.context.line_to(x, y + r);
                self.context.line_to(x - r, y);
                self.context.line_to(x, y - r);
            }
            Shape::Square => self.context.rect(x - 2.5, y - 2.5, 5.0, 5.0),
        }
    }

    fn line(&self, from: (f64, f64), to: (f64, f64)) {
        self.context.move_to(from.0, from.1);
        self.context.line_to(to.0, to.1);
    }

    fn disc(&self, x: f64, y: f64, radius: f64) {
        self.context.move_to(x + radius, y);
        // A radius that is not negative is never refused.
        let _ = self.context.arc(x, y, radius, 0.0, std::f64::consts::TAU);
    }

    /// Fills or strokes the path of a shape.
    fn ink(&self, shape: Shape) {
        let stroke = if matches!(shape, Shape::Bar | Shape::Cross | Shape::Square) {
            &self.soft
        } else {
            &self.hue
        };
        match shape {
            Shape::Disc | Shape::Diamond => {
                self.context.set_fill_style_str(&self.hue);
                self.context.fill();
            }
            Shape::Ring => {
                self.context.set_fill_style_str(&self.paper);
                self.context.fill();
                self.stroke(stroke, 1.4);
            }
            Shape::Bar | Shape::Cross | Shape::Square => self.stroke(stroke, 1.2),
        }
    }

    fn stroke(&self, colour: &str, width: f64) {
        self.context.set_stroke_style_str(colour);
        self.context.set_line_width(width);
        self.context.stroke();
    }

    fn density(&self) {
        let (width, height) = (self.scene.width, self.scene.height);
        let place = |index: usize| self.scene.at(self.tree, index);
        let points =
            (0..self.tree.nodes().len()).filter_map(place).map(|(x, y)| (x / width, y / height));
        let density = Density::of(points, (width / CELL) as usize, (height / CELL) as usize);
        let (step_x, step_y) = (width / density.columns as f64, height / density.rows as f64);
        self.context.set_fill_style_str(&self.hue);
        for level in 1..=LEVELS {
            self.context.set_global_alpha(0.25 + 0.75 * f64::from(level) / f64::from(LEVELS));
            self.context.begin_path();
            for cell in
                (0..density.counts.len()).filter(|&cell| density.level(cell, LEVELS) == level)
            {
                let (column, row) = (cell % density.columns, cell / density.columns);
                self.context.rect(column as f64 * step_x, row as f64 * step_y, step_x, step_y);
            }
            self.context.fill();
        }
        self.context.set_global_alpha(1.0);
    }

    /// The selected node, ringed, with its path to the root.
    fn selection(&self) {
        let Some(place) = self.scene.selected else { return };
        self.context.begin_path();
        let mut below = place;
        while let Some(parent) = self.tree.parent(below) {
            self.edge(below, true);
            below = parent;
        }
        self.stroke(&self.ink, 1.5);
        if let Some((x, y)) = self.scene.at(self.tree, place) {
            self.context.begin_path();
            self.disc(x, y, 7.5);
            self.stroke(&self.ink, 2.0);
        }
    }
}

/// The shape of a mark; drawn in this order, later ones over earlier ones.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Shape {
    Bar,
    Cross,
    Square,
    Disc,
    Ring,
    Diamond,
}

impl Shape {
    const ALL: [Self; 6] =
        [Self::Bar, Self::Cross, Self::Square, Self::Disc, Self::Ring, Self::Diamond];

    fn of(state: NodeState) -> Self {
        match state {
            NodeState::Open => Self::Ring,
            NodeState::Branched => Self::Disc,
            NodeState::Integer => Self::Diamond,
            NodeState::Infeasible => Self::Cross,
            NodeState::Pruned => Self::Bar,
            NodeState::Closed | NodeState::Unbounded | NodeState::Unsolved => Self::Square,
        }
    }
}

/// Which shapes were drawn in which pair of pixels.
struct Shown {
    columns: usize,
    bits: Vec<u8>,
}

impl Shown {
    fn new(scene: &Scene) -> Self {
        let columns = (scene.width / 2.0) as usize + 1;
        let rows = (scene.height / 2.0) as usize + 1;
        Self { columns, bits: vec![0; columns * rows] }
    }

    /// Whether a shape is the first of its kind there.
    fn first(&mut self, shape: Shape, x: f64, y: f64) -> bool {
        let bit = 1_u8 << shape as u8;
        let cell = (y / 2.0) as usize * self.columns + (x / 2.0) as usize;
        let Some(bits) = self.bits.get_mut(cell) else { return false };
        let first = *bits & bit == 0;
        *bits |= bit;
        first
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::state::tree::tests::small;

    fn scene() -> Scene {
        Scene {
            axis: Axis { low: 0.0, high: 20.0, step: 5.0 },
            width: 228.0,
            height: 118.0,
            best: None,
            root: None,
            now: None,
            selected: None,
        }
    }

    #[test]
    fn a_point_finds_the_nearest_node_within_reach() {
        let mut tree = small();
        tree.settle();
        assert_eq!(scene().at(&tree, 0), Some((114.0, 59.0)));
        assert_eq!(scene().nearest(&tree, 115.0, 60.0, 12.0), Some(0));
        assert_eq!(scene().nearest(&tree, 114.0, 30.0, 12.0), Some(1));
        assert_eq!(scene().nearest(&tree, 10.0, 10.0, 12.0), None);
    }

    #[test]
    fn a_second_mark_on_the_same_pixels_is_left_out() {
        let mut shown = Shown::new(&scene());
        assert!(shown.first(Shape::Disc, 10.0, 10.0));
        assert!(!shown.first(Shape::Disc, 10.9, 10.9));
        assert!(shown.first(Shape::Ring, 10.0, 10.0));
        assert!(!shown.first(Shape::Ring, 1e6, 10.0));
    }
}
