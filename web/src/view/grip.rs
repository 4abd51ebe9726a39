//! Moving and zooming the view of a tree: by a drag, two fingers, the wheel or keys.

use std::cell::RefCell;
use std::rc::Rc;

use gloo_events::{EventListener, EventListenerOptions};
use wasm_bindgen::JsCast;
use web_sys::{HtmlCanvasElement, WheelEvent};
use yew::prelude::*;

/// A key, or a press of a button, zooms by this factor and moves by this share of what is in view.
const FACTOR: f64 = 1.5;
const STEP: f64 = 0.2;
/// Pixels that a pointer moves before its press is a drag.
const SLACK: f64 = 4.0;
/// Zoom by the wheel, a pixel of it.
const WHEEL: f64 = 0.002;

/// What happens to the view, in shares of what is in view: places from 0 to 1 across and down.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(crate) enum Glance {
    /// Nearer by a factor about a place; `None` is the selected node, or the middle.
    Zoom { about: Option<(f64, f64)>, factor: f64 },
    /// Moved right and down.
    Move { right: f64, down: f64 },
    /// Moved so that what stands at a value and a height is in view.
    Hold(f64, f64),
    /// The whole tree.
    Whole,
}

impl Glance {
    pub(crate) const NEARER: Self = Self::Zoom { about: None, factor: FACTOR };
    pub(crate) const FARTHER: Self = Self::Zoom { about: None, factor: 1.0 / FACTOR };
    pub(crate) const LEFT: Self = Self::Move { right: -STEP, down: 0.0 };
    pub(crate) const RIGHT: Self = Self::Move { right: STEP, down: 0.0 };
    pub(crate) const UP: Self = Self::Move { right: 0.0, down: -STEP };
    pub(crate) const DOWN: Self = Self::Move { right: 0.0, down: STEP };

    /// What a key does; `None` for a key that is not for the view.
    pub(crate) fn of_key(key: &str, shift: bool) -> Option<Self> {
        match (key, shift) {
            ("+" | "=", _) => Some(Self::NEARER),
            ("-" | "_", _) => Some(Self::FARTHER),
            ("0", _) => Some(Self::Whole),
            ("ArrowLeft", true) => Some(Self::LEFT),
            ("ArrowRight", true) => Some(Self::RIGHT),
            ("ArrowUp", true) => Some(Self::UP),
            ("ArrowDown", true) => Some(Self::DOWN),
            _ => None,
        }
    }
}

/// A pointer that is down.
#[derive(Debug, Clone, Copy)]
struct Finger {
    id: i32,
    at: (f64, f64),
}

/// The pointers that hold the drawing: at most two count.
#[derive(Debug, Default)]
pub(crate) struct Grip {
    fingers: Vec<Finger>,
    from: (f64, f64),
    dragging: bool,
}

impl Grip {
    /// Whether the click that ends a press ended a drag; forgets it.
    pub(crate) fn took_a_drag(&mut self) -> bool {
        std::mem::take(&mut self.dragging)
    }

    /// A pointer goes down.
    pub(crate) fn pressed(grip: &Rc<RefCell<Self>>) -> Callback<PointerEvent> {
        let grip = Rc::clone(grip);
        Callback::from(move |event: PointerEvent| {
            if event.button() == 0 {
                grip.borrow_mut().press(event.pointer_id(), place(&event));
            }
        })
    }

    fn press(&mut self, id: i32, at: (f64, f64)) {
        self.fingers.retain(|finger| finger.id != id);
        self.fingers.truncate(1);
        if self.fingers.is_empty() {
            (self.from, self.dragging) = (at, false);
        }
        self.fingers.push(Finger { id, at });
    }

    /// A pointer moves over a drawing of some size.
    pub(crate) fn dragged(
        grip: &Rc<RefCell<Self>>,
        size: (f64, f64),
        look: Callback<Glance>,
    ) -> Callback<PointerEvent> {
        let grip = Rc::clone(grip);
        Callback::from(move |event: PointerEvent| {
            let was = grip.borrow().dragging;
            let glance = grip.borrow_mut().drag(event.pointer_id(), place(&event), size);
            if !was && grip.borrow().dragging {
                let canvas: HtmlCanvasElement = event.target_unchecked_into();
                // A pointer that cannot be held still drags while it is over the drawing.
                let _ = canvas.set_pointer_capture(event.pointer_id());
            }
            if let Some(glance) = glance {
                event.prevent_default();
                look.emit(glance);
            }
        })
    }

    fn drag(&mut self, id: i32, to: (f64, f64), size: (f64, f64)) -> Option<Glance> {
        let index = self.fingers.iter().position(|finger| finger.id == id)?;
        let from = self.fingers[index].at;
        if !self.dragging && distance(self.from, to) < SLACK && self.fingers.len() < 2 {
            return None;
        }
        self.dragging = true;
        self.fingers[index].at = to;
        let other = self.fingers.iter().find(|finger| finger.id != id).map(|finger| finger.at);
        let Some(other) = other else {
            let right = (from.0 - to.0) / size.0;
            return Some(Glance::Move { right, down: (from.1 - to.1) / size.1 });
        };
        let (before, after) = (distance(from, other), distance(to, other));
        let about = ((to.0 + other.0) / 2.0 / size.0, (to.1 + other.1) / 2.0 / size.1);
        (before > 1.0).then_some(Glance::Zoom { about: Some(about), factor: after / before })
    }

    /// A pointer goes up or away.
    pub(crate) fn released(grip: &Rc<RefCell<Self>>) -> Callback<PointerEvent> {
        let grip = Rc::clone(grip);
        Callback::from(move |event: PointerEvent| {
            grip.borrow_mut().fingers.retain(|finger| finger.id != event.pointer_id());
        })
    }
}

fn place(event: &PointerEvent) -> (f64, f64) {
    (f64::from(event.offset_x()), f64::from(event.offset_y()))
}

fn distance(one: (f64, f64), other: (f64, f64)) -> f64 {
    let (x, y) = (one.0 - other.0, one.1 - other.1);
    (x * x + y * y).sqrt()
}

/// The wheel zooms with Ctrl, which is also what two fingers on a touch pad send, and moves
/// sideways; without either it is the page's.
pub(crate) fn on_wheel(
    canvas: &HtmlCanvasElement,
    size: (f64, f64),
    look: Callback<Glance>,
) -> EventListener {
    let options = EventListenerOptions::enable_prevent_default();
    EventListener::new_with_options(canvas, "wheel", options, move |event| {
        let Some(event) = event.dyn_ref::<WheelEvent>() else { return };
        let glance = if event.ctrl_key() || event.meta_key() {
            let at = (f64::from(event.offset_x()) / size.0, f64::from(event.offset_y()) / size.1);
            let turned = event.delta_y() * WHEEL;
            let factor = if turned > 0.0 { 1.0 / (1.0 + turned) } else { 1.0 - turned };
            Glance::Zoom { about: Some(at), factor }
        } else if event.delta_x().abs() > event.delta_y().abs() {
            Glance::Move { right: event.delta_x() / size.0, down: 0.0 }
        } else {
            return;
        };
        event.prevent_default();
        look.emit(glance);
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    const SIZE: (f64, f64) = (200.0, 100.0);

    #[test]
    fn a_press_that_hardly_moves_is_a_click() {
        let mut grip = Grip::default();
        grip.press(1, (50.0, 50.0));
        assert_eq!(grip.drag(1, (52.0, 51.0), SIZE), None);
        assert!(!grip.took_a_drag());
        assert_eq!(
            grip.drag(1, (60.0, 50.0), SIZE),
            Some(Glance::Move { right: -0.05, down: 0.0 })
        );
        assert!(grip.took_a_drag() && !grip.took_a_drag());
        assert_eq!(grip.drag(7, (60.0, 50.0), SIZE), None, "a pointer that is not down");
    }

    #[test]
    fn two_fingers_zoom_about_their_middle() {
        let mut grip = Grip::default();
        grip.press(1, (80.0, 50.0));
        grip.press(2, (120.0, 50.0));
        let glance = grip.drag(2, (160.0, 50.0), SIZE);
        assert_eq!(glance, Some(Glance::Zoom { about: Some((0.6, 0.5)), factor: 2.0 }));
    }

    #[test]
    fn keys_move_only_with_shift() {
        assert_eq!(Glance::of_key("ArrowLeft", true), Some(Glance::LEFT));
        assert_eq!(Glance::of_key("ArrowLeft", false), None);
        assert_eq!(Glance::of_key("+", true), Some(Glance::NEARER));
        assert_eq!(Glance::of_key("0", false), Some(Glance::Whole));
    }
}
