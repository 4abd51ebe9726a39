//! Drawing a tree on a canvas: x is a node's bound, y its place in the layout.
//!
//! Marks differ by shape as well as by colour and are drawn in one path a shape. A mark that
//! would fall on the same few pixels as one of its kind is left out.

use record::event::NodeState;
use report::number::{count, of, short};
use wasm_bindgen::{JsCast, JsValue};
use web_sys::{CanvasRenderingContext2d, HtmlCanvasElement};

use crate::state::tree::Tree;
use crate::view::axis::across;
use crate::view::scene::{Kind, Scene, Spot};

/// Spots up to which edges are curves, and marks have their full size.
const CURVED: usize = 600;
const USUAL: usize = 1_200;
/// Edges drawn in one stroke: a longer path costs more than its parts.
const STROKE: usize = 64;
/// A silhouette that is thinner is a line, without words.
const WORDED: f64 = 10.0;
/// Shades of a silhouette, and the nodes to a pixel from which it is a shade darker.
const SHADES: u32 = 4;
const DENSITIES: [f64; 3] = [0.1, 0.4, 2.0];

/// The value of a custom property of the style at an element.
pub(crate) fn colour(canvas: &HtmlCanvasElement, name: &str) -> String {
    let style = gloo_utils::window().get_computed_style(canvas).ok().flatten();
    let value = style.and_then(|style| style.get_property_value(name).ok());
    value.map_or_else(String::new, |value| value.trim().to_owned())
}

/// Draws a tree and returns how many of its nodes it took.
pub(crate) fn paint(canvas: &HtmlCanvasElement, tree: &Tree, scene: &Scene) -> usize {
    let ratio = gloo_utils::window().device_pixel_ratio();
    let (width, height) = ((scene.width * ratio) as u32, (scene.height * ratio) as u32);
    if (canvas.width(), canvas.height()) != (width, height) {
        canvas.set_width(width);
        canvas.set_height(height);
    }
    let context = canvas.get_context("2d").ok().flatten();
    let Some(context) = context.and_then(|c| c.dyn_into::<CanvasRenderingContext2d>().ok()) else {
        return 0;
    };
    // A drawing whose state cannot be set is drawn with the state there is.
    let _ = context.set_transform(ratio, 0.0, 0.0, ratio, 0.0, 0.0);
    context.clear_rect(0.0, 0.0, scene.width, scene.height);
    let pen = Pen {
        hue: colour(canvas, "--h"),
        ink: colour(canvas, "--ink"),
        soft: colour(canvas, "--soft"),
        paper: colour(canvas, "--paper"),
        face: colour(canvas, "font-family"),
        context,
        tree,
        scene,
    };
    pen.draw(&scene.spots(tree))
}

struct Pen<'a> {
    context: CanvasRenderingContext2d,
    tree: &'a Tree,
    scene: &'a Scene,
    hue: String,
    ink: String,
    soft: String,
    paper: String,
    face: String,
}

impl Pen<'_> {
    fn draw(&self, spots: &[Spot]) -> usize {
        self.rungs();
        self.edges(spots);
        self.silhouettes(spots);
        self.marks(spots);
        self.best();
        self.selection();
        spots.len()
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

    fn edges(&self, spots: &[Spot]) {
        let curved = spots.len() <= CURVED;
        self.context.set_stroke_style_str(&self.soft);
        self.context.set_line_width(0.7);
        self.context.set_global_alpha(if curved { 0.55 } else { 0.35 });
        for stroke in spots.chunks(STROKE) {
            self.context.begin_path();
            for spot in stroke {
                self.edge(spot.place, curved);
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

    /// What grows from a node as one shape: as far as it reaches, darker the more nodes it holds,
    /// and with its count and weakest open bound where there is room for words.
    fn silhouettes(&self, spots: &[Spot]) {
        self.context.set_fill_style_str(&self.hue);
        for shade in 1..=SHADES {
            self.context
                .set_global_alpha(0.15 + 0.6 * f64::from(shade - 1) / f64::from(SHADES - 1));
            self.context.begin_path();
            for spot in spots.iter().filter(|spot| self.shade(spot) == shade) {
                self.silhouette(spot);
            }
            self.context.fill();
        }
        self.context.set_global_alpha(1.0);
        let worded = |kind| matches!(kind, Kind::Silhouette { height, .. } if height >= WORDED);
        for spot in spots.iter().filter(|spot| worded(spot.kind)) {
            self.count(spot);
        }
    }

    /// How dark a silhouette is, from 1, by its nodes to a pixel; 0 for what is none.
    fn shade(&self, spot: &Spot) -> u32 {
        let Kind::Silhouette { from, to, height } = spot.kind else { return 0 };
        if height >= WORDED {
            return 2;
        }
        let size = self.tree.nodes().get(spot.place).map_or(0, |node| node.size);
        let dense = f64::from(size) / (to - from + 1.0);
        1 + DENSITIES.iter().filter(|&&least| dense >= least).count() as u32
    }

    fn silhouette(&self, spot: &Spot) {
        let Kind::Silhouette { from, to, height } = spot.kind else { return };
        let (x, y) = spot.at;
        if height < WORDED {
            let height = if height > 1.0 { height } else { 1.0 };
            self.context.rect(from, y - height / 2.0, to - from + 1.0, height);
            return;
        }
        let half = height / 2.0 - 1.0;
        for end in [from, to] {
            self.line((x, y), (end, y - half));
            self.context.line_to(end, y + half);
            self.context.line_to(x, y);
        }
    }

    fn count(&self, spot: &Spot) {
        let (size, open, bound) = self.tree.under(spot.place, self.scene.maximise);
        let nodes = of(u64::from(size), "node");
        let words = match bound {
            Some(bound) => {
                format!("{nodes}, {} open, from {}", count(u64::from(open)), short(bound))
            }
            None => format!("{nodes}, closed"),
        };
        self.context.set_font(&format!("11px {}", self.face));
        self.context.set_fill_style_str(&self.ink);
        let width = self.context.measure_text(&words).map_or(0.0, |size| size.width());
        let right = spot.at.0 + 8.0;
        let x = if right + width > self.scene.width { spot.at.0 - 8.0 - width } else { right };
        // Words that cannot be written leave the shape, which says as much.
        let _ = self.context.fill_text(&words, x, spot.at.1 + 4.0);
    }

    fn marks(&self, spots: &[Spot]) {
        let mut shown = Shown::new(self.scene);
        let usual = if spots.len() > USUAL { 0.75 } else { 1.0 };
        for shape in Shape::ALL {
            self.context.begin_path();
            for spot in spots.iter().filter(|spot| spot.kind != Kind::Edge) {
                let state = self.tree.nodes().get(spot.place).map(|node| node.state);
                let (x, y) = spot.at;
                if state.map(Shape::of) == Some(shape) && shown.first(shape, x, y) {
                    self.mark(shape, x, y, if spot.place == 0 { 2.0 } else { usual });
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
        let within = (0.0..=2.0 * self.columns as f64 - 2.0).contains(&x) && y >= 0.0;
        if !within {
            return false;
        }
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
    use crate::view::scene::tests::scene;

    #[test]
    fn a_second_mark_on_the_same_pixels_is_left_out() {
        let mut shown = Shown::new(&scene());
        assert!(shown.first(Shape::Disc, 10.0, 10.0));
        assert!(!shown.first(Shape::Disc, 10.9, 10.9));
        assert!(shown.first(Shape::Ring, 10.0, 10.0));
        assert!(!shown.first(Shape::Ring, 1e6, 10.0) && !shown.first(Shape::Ring, -3.0, 10.0));
    }
}
