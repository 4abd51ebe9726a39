//! `hullward list`: the shipped formulations, those that hold some words, or one in full.

use std::io::{Result, Write};

use record::file::nearest;
use record::message::{CatalogueEntry, Reply, Request};

use crate::ending::Ending;

/// Lists all formulations, or prints one.
pub(crate) fn list(id: Option<&str>, out: &mut dyn Write, err: &mut dyn Write) -> Result<Ending> {
    let entries = catalogue();
    let Some(id) = id else {
        return every(&entries, out).map(|()| Ending::Done);
    };
    let Some(entry) = entries.iter().find(|entry| entry.id == id) else {
        let found: Vec<CatalogueEntry> =
            entries.iter().filter(|entry| entry.holds(id)).cloned().collect();
        if !found.is_empty() {
            return every(&found, out).map(|()| Ending::Done);
        }
        let known: Vec<&str> = entries.iter().map(|entry| entry.id.as_str()).collect();
        let hint = nearest(id, &known)
            .map_or_else(|| "see hullward list".to_owned(), |near| format!("did you mean {near}?"));
        writeln!(err, "hullward: there is no formulation {id}: {hint}")?;
        return Ok(Ending::Wrong);
    };
    writeln!(out, "# {} ({}): {}", entry.id, entry.family, entry.citation)?;
    if entry.relaxation {
        writeln!(out, "# a relaxation: bounded, not compared for its optimum")?;
    }
    writeln!(out, "# size: {}", entry.size)?;
    writeln!(out, "# right for: {}", entry.assumption)?;
    writeln!(out, "# reads: {}; compared in {}", entry.readers.join(", "), entry.natural)?;
    for known in &entry.known {
        writeln!(out, "# bound: {known}")?;
    }
    writeln!(out, "# pitfall: {}", entry.pitfall)?;
    writeln!(out, "{}", entry.text.trim_end())?;
    Ok(Ending::Done)
}

fn catalogue() -> Vec<CatalogueEntry> {
    let mut worker = engine::Worker::new();
    worker.handle(Request::List);
    while worker.advance(engine::native::USUAL_SLICE) {}
    let replies = worker.take().into_iter();
    let lists = replies.filter_map(|envelope| match envelope.reply {
        Reply::Catalogue(entries) => Some(entries),
        _ => None,
    });
    lists.flatten().collect()
}

fn every(entries: &[CatalogueEntry], out: &mut dyn Write) -> Result<()> {
    let wide = entries.iter().map(|entry| entry.id.chars().count()).max().unwrap_or(0);
    let mut family = "";
    for entry in entries {
        if entry.family != family {
            family = &entry.family;
            writeln!(out, "{family}")?;
        }
        let role = if entry.relaxation { " [a relaxation]" } else { "" };
        writeln!(out, "  {:wide$}  {}{role}; {}", entry.id, entry.title, entry.citation)?;
    }
    Ok(())
}
