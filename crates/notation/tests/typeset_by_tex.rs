//! The LaTeX of every shipped formulation and of every model section of the corpus is set by
//! pdflatex without an error, where that is installed.
#![allow(
    clippy::unwrap_used,
    clippy::expect_used,
    clippy::panic,
    reason = "a test ends where it fails"
)]

use std::fmt::Write as _;
use std::path::Path;
use std::process::{Command, Stdio};

use hullward_notation::{latex, parse};

fn texts(folder: &Path, found: &mut Vec<(String, String)>) {
    let mut paths: Vec<_> = std::fs::read_dir(folder).unwrap().map(|e| e.unwrap().path()).collect();
    paths.sort();
    for path in paths {
        if path.is_dir() {
            texts(&path, found);
        } else if path.extension().is_some_and(|ending| ending == "txt") {
            let text = std::fs::read_to_string(&path).unwrap();
            let text = text.split("=== instance").next().unwrap().to_owned();
            found.push((path.display().to_string(), text));
        }
    }
}

/// One document with everything on pages of their own.
fn document(found: &[(String, String)]) -> String {
    // A Greek letter within a subscript of several, as in x_{iτ}, stays the letter that it is: as
    // a command it would read back as another name. LuaTeX sets it; pdfTeX is told how.
    let mut out = String::from(
        "\\documentclass{article}\n\\usepackage[a3paper,landscape]{geometry}\n\\usepackage[utf8]{inputenc}\n\
         \\usepackage{amsmath,amssymb}\n\\DeclareUnicodeCharacter{03C4}{\\ensuremath{\\tau}}\n\\begin{document}\n",
    );
    for (name, text) in found {
        let parsed = parse(text);
        assert!(parsed.diagnostics.is_empty(), "{name}");
        let _ = writeln!(out, "\\typeout{{at {name}}}\n{}\\clearpage", latex(&parsed.tree));
    }
    out + "\\end{document}\n"
}

#[test]
fn latex_is_set_without_an_error() {
    let version = Command::new("pdflatex").arg("--version").stdout(Stdio::null()).status();
    if !version.is_ok_and(|status| status.success()) {
        println!("pdflatex is not installed: what it would set is not tested");
        return;
    }
    let here = Path::new(env!("CARGO_MANIFEST_DIR"));
    let mut found = Vec::new();
    texts(&here.join("../catalogue/formulations"), &mut found);
    texts(&here.join("tests/models"), &mut found);
    texts(&here.join("tests/fixtures/ok"), &mut found);
    assert!(found.len() > 80, "{} texts", found.len());
    let folder = Path::new(env!("CARGO_TARGET_TMPDIR")).join("typeset-by-tex");
    std::fs::create_dir_all(&folder).unwrap();
    std::fs::write(folder.join("models.tex"), document(&found)).unwrap();
    let run = Command::new("pdflatex")
        .args(["-interaction=nonstopmode", "-halt-on-error", "models.tex"])
        .current_dir(&folder)
        .output()
        .unwrap();
    let log = String::from_utf8_lossy(&run.stdout);
    let from = log.find("\n!").map_or(0, |at| log[..at].rfind("at /").unwrap_or(0));
    let shown: String = log[from..].chars().take(1_500).collect();
    assert!(run.status.success(), "{shown}");
}
