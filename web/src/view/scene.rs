//! Where the nodes of a tree stand on a drawing, and which of them are drawn at all.
//!
//! From the root down, a subtree out of view is left out and one whose slot is thinner than a
//! mark, or that was folded by hand, is drawn as one silhouette. So what a drawing costs follows
//! from its pixels and the depth of the tree, not from the number of nodes.

use std::collections::BTreeSet;

use report::axis::Axis;

use crate::state::pointer::Shared;
use crate::state::span::Span;
use crate::state::tree::Tree;
use crate::view::axis::across;

/// Room above and below the tree, in pixels.
const ROOM: f64 = 9.0;
/// A subtree whose slot is thinner is drawn as a silhouette.
const THIN: f64 = 1.5;
/// How far out of view a node still counts as in view.
const MARGIN: f64 = 12.0;
/// Nodes drawn at most: a chain so deep that its pixels do not bound it ends in a silhouette.
const MOST: usize = 20_000;

/// The whole height of a tree.
pub(crate) const HEIGHTS: Span = (0.0, 1.0);

/// Places of nodes whose subtrees are folded.
pub(crate) type Folded = Shared<BTreeSet<usize>>;

/// What is drawn beside the tree itself.
#[derive(Debug, Clone, PartialEq)]
pub(crate) struct Scene {
    /// The shared axis, or its part in view.
    pub(crate) axis: Axis,
    /// The part of the tree's height in view.
    pub(crate) heights: Span,
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
    /// Subtrees folded by hand.
    pub(crate) folded: Folded,
    /// Whether the greatest bound is the weakest.
    pub(crate) maximise: bool,
}

/// How a node is drawn.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(crate) enum Kind {
    /// With its mark.
    Mark,
    /// With all that grows from it as a silhouette that reaches so far to the left and to the
    /// right and stands so high.
    Silhouette { from: f64, to: f64, height: f64 },
    /// Out of view: only its edge is.
    Edge,
}

/// A node that is drawn.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(crate) struct Spot {
    /// The node.
    pub(crate) place: usize,
    /// Where it stands.
    pub(crate) at: (f64, f64),
    /// How it is drawn.
    pub(crate) kind: Kind,
}

impl Scene {
    /// Where a node stands.
    pub(crate) fn at(&self, tree: &Tree, place: usize) -> Option<(f64, f64)> {
        let stand = tree.nodes().get(place)?.stand?;
        Some((across(&self.axis, self.width, stand), self.y(tree.height(place))))
    }

    /// Where a share of the tree's height stands.
    fn y(&self, share: f64) -> f64 {
        let (top, bottom) = self.heights;
        ROOM + (share - top) / (bottom - top) * (self.height - 2.0 * ROOM)
    }

    /// The share of the tree's height that stands at a place.
    pub(crate) fn share(&self, y: f64) -> f64 {
        let (top, bottom) = self.heights;
        top + (y - ROOM) / (self.height - 2.0 * ROOM) * (bottom - top)
    }

    /// The nodes to draw, parents before their children.
    pub(crate) fn spots(&self, tree: &Tree) -> Vec<Spot> {
        let mut spots = Vec::new();
        let mut waiting = vec![0];
        while let Some(place) = waiting.pop() {
            let Some(at) = self.at(tree, place) else { continue };
            let kind = self.kind(tree, place, at, spots.len() >= MOST);
            spots.push(Spot { place, at, kind });
            if kind != Kind::Mark {
                continue;
            }
            let mut child = tree.first_child(place);
            while let Some(next) = child {
                waiting.push(next);
                child = tree.next_sibling(next);
            }
        }
        spots
    }

    fn kind(&self, tree: &Tree, place: usize, at: (f64, f64), full: bool) -> Kind {
        let (top, bottom) = tree.slot(place);
        let (top, bottom) = (self.y(top), self.y(bottom));
        let (least, most) = self.reach(tree, place, at.0);
        let out = bottom < -MARGIN
            || top > self.height + MARGIN
            || most < -MARGIN
            || least > self.width + MARGIN;
        if out {
            return Kind::Edge;
        }
        let inner = tree.first_child(place).is_some();
        if inner && (bottom - top < THIN || full || self.folded.contains(&place)) {
            return Kind::Silhouette { from: least, to: most, height: bottom - top };
        }
        Kind::Mark
    }

    /// How far what grows from a node reaches.
    fn reach(&self, tree: &Tree, place: usize, x: f64) -> (f64, f64) {
        let reach = tree.nodes().get(place).and_then(|node| node.reach);
        let Some((low, high)) = reach else { return (x, x) };
        let low = across(&self.axis, self.width, f64::from(low));
        let high = across(&self.axis, self.width, f64::from(high));
        (if low < x { low } else { x }, if high > x { high } else { x })
    }

    /// The drawn node nearest to a point, if one is within reach.
    pub(crate) fn nearest(&self, tree: &Tree, (x, y): (f64, f64), reach: f64) -> Option<usize> {
        let distance = |spot: &Spot| {
            let (dx, dy) = (spot.at.0 - x, spot.at.1 - y);
            dx * dx + dy * dy
        };
        let spots = self.spots(tree).into_iter().filter(|spot| spot.kind != Kind::Edge);
        let near = spots.map(|spot| (distance(&spot), spot.place));
        let nearest =
            near.filter(|(square, _)| *square <= reach * reach).min_by(|a, b| a.0.total_cmp(&b.0));
        nearest.map(|(_, place)| place)
    }
}

#[cfg(test)]
pub(crate) mod tests {
    use super::*;
    use crate::state::tree::tests::{created, small, solved};
    use record::event::NodeState;

    pub(crate) fn scene() -> Scene {
        Scene {
            axis: Axis { low: 0.0, high: 20.0, step: 5.0, whole: (0.0, 20.0) },
            heights: HEIGHTS,
            width: 228.0,
            height: 118.0,
            best: None,
            root: None,
            now: None,
            selected: None,
            folded: Shared::default(),
            maximise: false,
        }
    }

    #[test]
    fn a_point_finds_the_nearest_node_within_reach() {
        let mut tree = small();
        tree.settle();
        assert_eq!(scene().at(&tree, 0), Some((114.0, 59.0)));
        assert_eq!(scene().nearest(&tree, (115.0, 60.0), 12.0), Some(0));
        assert_eq!(scene().nearest(&tree, (114.0, 30.0), 12.0), Some(1));
        assert_eq!(scene().nearest(&tree, (10.0, 10.0), 12.0), None);
    }

    #[test]
    fn what_is_folded_or_out_of_view_is_not_walked() {
        let mut tree = small();
        tree.grow(&[solved(3, NodeState::Branched, Some(15.0)), created(4, 3), created(5, 3)]);
        tree.settle();
        let kinds = |scene: &Scene| -> Vec<(usize, Kind)> {
            scene.spots(&tree).iter().map(|spot| (spot.place, spot.kind)).collect()
        };
        assert!(kinds(&scene()).iter().all(|(_, kind)| *kind == Kind::Mark));
        assert_eq!(kinds(&scene()).len(), 5);
        let folded = Scene { folded: Shared::new(BTreeSet::from([2])), ..scene() };
        let at_two = kinds(&folded).into_iter().find(|(place, _)| *place == 2).unwrap();
        assert!(matches!(at_two.1, Kind::Silhouette { height, .. } if height > 60.0));
        assert_eq!(kinds(&folded).len(), 3);
        let low = Scene { heights: (0.9, 1.0), ..scene() };
        assert!(kinds(&low).contains(&(1, Kind::Edge)));
        assert!((scene().share(scene().y(0.3)) - 0.3).abs() < 1e-12);
    }

    #[test]
    fn the_cost_of_a_drawing_does_not_follow_the_number_of_nodes() {
        let mut tree = Tree::default();
        let mut events = vec![created(1, 0), solved(1, NodeState::Branched, Some(1.0))];
        for node in 2..60_000_u32 {
            events.push(created(node, node / 2));
            events.push(solved(node, NodeState::Branched, Some(1.0 + f64::from(node % 19))));
        }
        tree.grow(&events);
        tree.settle();
        assert!(scene().spots(&tree).len() < 1_000);
        let near = Scene { heights: (0.5, 0.500_2), ..scene() };
        assert!(near.spots(&tree).len() < 1_000);
    }
}
