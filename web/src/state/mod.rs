//! What the page knows, without the page: reducers and the trees as they grow. Nothing here
//! touches a document, so that all of it is tested natively.

pub(crate) mod arrange;
pub(crate) mod board;
pub(crate) mod commands;
pub(crate) mod document;
pub(crate) mod editor;
pub(crate) mod find;
pub(crate) mod highlight;
pub(crate) mod history;
pub(crate) mod instances;
pub(crate) mod kept;
pub(crate) mod lane;
pub(crate) mod lens;
pub(crate) mod mps;
mod naming;
pub(crate) mod on_record;
pub(crate) mod outcomes;
pub(crate) mod outline;
pub(crate) mod places;
pub(crate) mod pointer;
pub(crate) mod recorded;
pub(crate) mod same;
pub(crate) mod share;
pub(crate) mod span;
pub(crate) mod steer;
pub(crate) mod studies;
pub(crate) mod tree;
pub(crate) mod typeset;
pub(crate) mod words;
