//! The address, the clipboard and downloads.

use gloo_file::{Blob, BlobContents, ObjectUrl};
use gloo_timers::callback::Timeout;
use gloo_utils::{document, window};
use wasm_bindgen::closure::Closure;
use wasm_bindgen::{JsCast, JsValue};
use web_sys::HtmlElement;

/// How long a download may take to begin, in milliseconds.
const BEGINNING: u32 = 20_000;

/// The fragment of the address, with its `#`.
pub(crate) fn fragment() -> String {
    window().location().hash().unwrap_or_default()
}

/// The address without its fragment.
pub(crate) fn address() -> String {
    let whole = window().location().href().unwrap_or_default();
    whole.split('#').next().unwrap_or_default().to_owned()
}

/// Takes the fragment out of the address: the page no longer shows what the link holds.
pub(crate) fn drop_fragment() {
    if let Ok(history) = window().history() {
        // Where the address cannot be changed, it stays.
        let _ = history.replace_state_with_url(&JsValue::NULL, "", Some(&address()));
    }
}

/// What a copy waits for.
#[derive(Debug)]
pub(crate) struct Copying {
    _done: Closure<dyn FnMut(JsValue)>,
    _refused: Closure<dyn FnMut(JsValue)>,
}

/// Copies a text, and calls `then` with whether the browser allowed it; not when what it gives
/// back is dropped before.
pub(crate) fn copy(text: &str, then: impl Fn(bool) + Clone + 'static) -> Option<Copying> {
    let clipboard = js_sys::Reflect::get(&window().navigator(), &"clipboard".into());
    if clipboard.map_or(true, |clipboard| clipboard.is_undefined()) {
        then(false);
        return None;
    }
    let refuse = then.clone();
    let done = Closure::<dyn FnMut(JsValue)>::new(move |_| then(true));
    let refused = Closure::<dyn FnMut(JsValue)>::new(move |_| refuse(false));
    let promise = window().navigator().clipboard().write_text(text);
    let promise: js_sys::Promise = promise.unchecked_into();
    let _ = promise.then2(&done, &refused);
    Some(Copying { _done: done, _refused: refused })
}

/// Saves a text, or bytes, as a file of the browser's downloads.
pub(crate) fn download(name: &str, content: impl BlobContents) {
    let url = ObjectUrl::from(Blob::new_with_options(content, Some("application/octet-stream")));
    let Ok(link) = document().create_element("a") else { return };
    let named = link.set_attribute("href", &url).and(link.set_attribute("download", name));
    if let (Ok(()), Ok(link)) = (named, link.dyn_into::<HtmlElement>()) {
        link.click();
    }
    Timeout::new(BEGINNING, move || drop(url)).forget();
}
