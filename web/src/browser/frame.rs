//! A call before the next frame is drawn; a timer takes its place while the page is hidden, for
//! then no frame is drawn.

use gloo_timers::callback::Timeout;
use wasm_bindgen::JsCast;
use wasm_bindgen::closure::Closure;

/// Time between calls while the page is hidden, in milliseconds.
const HIDDEN_PAUSE: u32 = 100;

/// A call that is due; not made when this is dropped.
#[derive(Debug)]
pub(crate) struct Frame {
    request: Option<(i32, Closure<dyn FnMut()>)>,
    _timer: Option<Timeout>,
}

impl Frame {
    /// Calls `then` before the next frame.
    pub(crate) fn request(then: impl FnOnce() + 'static) -> Self {
        if gloo_utils::document().hidden() {
            let timer = Timeout::new(HIDDEN_PAUSE, then);
            return Self { request: None, _timer: Some(timer) };
        }
        let closure = Closure::once(then);
        let id = gloo_utils::window().request_animation_frame(closure.as_ref().unchecked_ref());
        Self { request: id.ok().map(|id| (id, closure)), _timer: None }
    }
}

impl Drop for Frame {
    fn drop(&mut self) {
        if let Some((id, _)) = &self.request {
            // A frame that is already drawn has nothing to cancel.
            let _ = gloo_utils::window().cancel_animation_frame(*id);
        }
    }
}

/// Milliseconds since the page was opened; 0 where the browser keeps no such clock.
pub(crate) fn now() -> f64 {
    gloo_utils::window().performance().map_or(0.0, |clock| clock.now())
}
