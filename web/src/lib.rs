//! The page: what is read from top to bottom in a browser. It holds no mathematics: figures come
//! from the engine's workers, drawings from `report`.
//!
//! | module | holds |
//! |---|---|
//! | `state` | what the page knows, in pure reducers |
//! | `browser` | workers, frames, sizes |
//! | `view` | components, one idea a file |

mod browser;
mod demo;
mod state;
mod view;

use wasm_bindgen::prelude::wasm_bindgen;

/// Draws the page into the element `page` of the document. Called once, by the boot script.
#[wasm_bindgen(start)]
pub fn start() {
    let Some(root) = gloo_utils::document().get_element_by_id("page") else { return };
    yew::Renderer::<view::app::App>::with_root(root).render();
}
