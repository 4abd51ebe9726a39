//! The width of an element, kept up to date.

use std::rc::Rc;

use wasm_bindgen::JsCast;
use wasm_bindgen::closure::Closure;
use web_sys::{Element, ResizeObserver};
use yew::prelude::*;

struct Observed {
    observer: ResizeObserver,
    _told: Closure<dyn FnMut()>,
}

impl Drop for Observed {
    fn drop(&mut self) {
        self.observer.disconnect();
    }
}

/// The width of the element behind `node` in whole pixels; 0 before it is known.
#[hook]
pub(crate) fn use_width(node: &NodeRef) -> f64 {
    let width = use_state_eq(|| 0.0);
    let known = *width;
    let set = width.setter();
    use_effect_with(node.clone(), move |node| {
        let observed = node.cast::<Element>().and_then(|element| observe(element, set));
        move || drop(observed)
    });
    known
}

fn observe(element: Element, set: UseStateSetter<f64>) -> Option<Observed> {
    let watched = element.clone();
    let told: Rc<dyn Fn()> = Rc::new(move || {
        set.set(element.get_bounding_client_rect().width().floor());
    });
    told();
    let closure = Closure::<dyn FnMut()>::new(move || told());
    let observer = ResizeObserver::new(closure.as_ref().unchecked_ref()).ok()?;
    observer.observe(&watched);
    Some(Observed { observer, _told: closure })
}
