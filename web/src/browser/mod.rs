//! The thin layer over the browser: workers, frames, sizes, colours, the lanes' runs.

pub(crate) mod checks;
pub(crate) mod clock;
pub(crate) mod elsewhere;
pub(crate) mod frame;
pub(crate) mod handover;
pub(crate) mod kept;
pub(crate) mod meanings;
pub(crate) mod opinions;
pub(crate) mod packs;
pub(crate) mod proving;
pub(crate) mod run;
pub(crate) mod session;
pub(crate) mod share;
pub(crate) mod size;
pub(crate) mod store;
pub(crate) mod studying;
pub(crate) mod worker;
