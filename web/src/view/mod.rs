//! Components, one idea a file.

pub(crate) mod announcer;
pub(crate) mod app;
pub(crate) mod axis;
mod bars;
pub(crate) mod canvas;
pub(crate) mod complaints;
pub(crate) mod editor;
pub(crate) mod editor_box;
pub(crate) mod editor_remarks;
pub(crate) mod evidence;
pub(crate) mod families;
pub(crate) mod figure;
pub(crate) mod grid;
pub(crate) mod hands;
pub(crate) mod inspector;
pub(crate) mod instance;
pub(crate) mod lane;
pub(crate) mod map;
pub(crate) mod notes;
pub(crate) mod paint;
pub(crate) mod paste;
mod picture;
pub(crate) mod rivals;
pub(crate) mod ruler;
pub(crate) mod share;
pub(crate) mod twin;
pub(crate) mod values;
