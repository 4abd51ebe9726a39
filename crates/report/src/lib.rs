//! What the page draws, worked out without a page: numbers as text, axes, tree layout, maps.
//!
//! | module | holds |
//! |---|---|
//! | [`number`] | numbers as a reader wants them |
//! | [`audit`] | what came of proving a search again, in sentences |
//! | [`axis`] | round ticks and the shared scale |
//! | [`difference`] | what differs between two rivals as they are written |
//! | [`drift`] | results held against recorded ones |
//! | [`explain`] | why a rival has no plan or no bound, in sentences |
//! | [`layout`] | places of tree nodes, stable while the tree grows |
//! | [`map`] | places fitted to a frame, arcs, hulls |
//! | [`notes`] | notes in Markdown as paragraphs and lists |
//! | [`opinion`] | our root beside what a second LP code says |
//! | [`pack`] | the regression pack as JSON |
//! | [`proof`] | what exact arithmetic proved of a bound, in words |
//! | [`study`] | what studies found, as sections of words and tables |
//! | [`decision`] | the decision record as HTML and Markdown |
//! | [`csv`](mod@csv) | results as comma-separated values |
//! | [`labels`] | names beside their stops without collisions |
//!
//! Everything is pure and the same on every machine.

pub mod audit;
pub mod axis;
pub mod certificate;
pub mod changes;
pub mod csv;
pub mod decision;
pub mod difference;
pub mod drift;
pub mod explain;
pub mod labels;
pub mod layout;
pub mod map;
pub mod notes;
pub mod number;
pub mod opinion;
pub mod pack;
pub mod proof;
pub mod spring;
pub mod study;
