//! The built page in Chromium. One browser a test, one test at a time.

#[path = "page/lanes.rs"]
mod lanes;

#[path = "page/opening.rs"]
mod opening;

#[path = "page/arriving.rs"]
mod arriving;

#[path = "page/packs.rs"]
mod packs;

#[path = "page/pasting.rs"]
mod pasting;

#[path = "page/solving.rs"]
mod solving;

#[path = "page/nodes.rs"]
mod nodes;

#[path = "page/data.rs"]
mod data;

#[path = "page/drawings.rs"]
mod drawings;

#[path = "page/second.rs"]
mod second;

#[path = "page/share.rs"]
mod share;

#[path = "page/proofs.rs"]
mod proofs;

#[path = "page/settings.rs"]
mod settings;

#[path = "page/control.rs"]
mod control;

#[path = "page/published.rs"]
mod published;

#[path = "page/workers.rs"]
mod workers;

#[path = "page/answering.rs"]
mod answering;

#[path = "page/editing.rs"]
mod editing;

#[path = "page/studies.rs"]
mod studies;

#[path = "page/production.rs"]
mod production;

#[path = "page/linearising.rs"]
mod linearising;

#[path = "page/typeset.rs"]
mod typeset;

#[path = "page/handover.rs"]
mod handover;

#[path = "page/looks.rs"]
mod looks;

#[path = "page/mistakes.rs"]
mod mistakes;

#[path = "page/arranging.rs"]
mod arranging;

#[path = "page/keeping.rs"]
mod keeping;

#[path = "page/steering.rs"]
mod steering;

#[path = "page/shelf.rs"]
mod shelf;

#[path = "page/hostile.rs"]
mod hostile;

#[path = "page/helping.rs"]
mod helping;

#[path = "page/trees.rs"]
mod trees;

#[path = "page/lasting.rs"]
mod lasting;

#[path = "page/hands.rs"]
mod hands;

#[path = "page/accessible.rs"]
mod accessible;

#[path = "page/recording.rs"]
mod recording;
