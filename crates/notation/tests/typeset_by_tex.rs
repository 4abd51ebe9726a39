//! The LaTeX of every shipped formulation and of every model section of the corpus is set by
//! pdflatex without an error, where that is installed.
#![allow(
    clippy::unwrap_used,
    clippy::expect_used,
    clippy::panic,
    clippy::print_stdout,
    reason = "a test ends where it fails"
)]

use std::fmt::Write as _;
use std::path::Path;
use std::process::{Command, Stdio};

use hullward_notation::{Diagnostic, latex, parse, print};

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
    let mut out = String::from(
        "\\documentclass{article}\n\\usepackage[a3paper,landscape]{geometry}\n\\usepackage[utf8]{inputenc}\n\
         \\usepackage{amsmath,amssymb}\n\\begin{document}\n",
    );
    for (name, text) in found {
        let parsed = parse(text);
        assert!(!parsed.diagnostics.iter().any(Diagnostic::is_error), "{name}");
        let _ = writeln!(out, "\\typeout{{at {name}}}\n{}\\clearpage", latex(&parsed.tree));
    }
    out + "\\end{document}\n"
}

/// Runs pdflatex on a document; nothing where it is not installed.
fn set_by_tex(name: &str, document: &str) {
    let version = Command::new("pdflatex").arg("--version").stdout(Stdio::null()).status();
    if !version.is_ok_and(|status| status.success()) {
        println!("pdflatex is not installed: what it would set is not tested");
        return;
    }
    let folder = Path::new(env!("CARGO_TARGET_TMPDIR")).join("typeset-by-tex");
    std::fs::create_dir_all(&folder).unwrap();
    let file = format!("{name}.tex");
    std::fs::write(folder.join(&file), document).unwrap();
    let run = Command::new("pdflatex")
        .args(["-interaction=nonstopmode", "-halt-on-error", &file])
        .current_dir(&folder)
        .output()
        .unwrap();
    let log = String::from_utf8_lossy(&run.stdout);
    let from = log.find("\n!").map_or(0, |at| log[..at].rfind("at /").unwrap_or(0));
    let shown: String = log[from..].chars().take(1_500).collect();
    assert!(run.status.success(), "{shown}");
}

#[test]
fn latex_is_set_without_an_error() {
    let here = Path::new(env!("CARGO_MANIFEST_DIR"));
    let mut found = Vec::new();
    texts(&here.join("../catalogue/formulations"), &mut found);
    texts(&here.join("tests/models"), &mut found);
    texts(&here.join("tests/fixtures/ok"), &mut found);
    assert!(found.len() > 80, "{} texts", found.len());
    set_by_tex("models", &document(&found));
}

/// Every character that the notation knows and some that it does not, in titles, labels, remarks
/// and names: a minus in a title stopped pdfTeX, and so did a Greek letter in `x_{iτ}`.
#[test]
fn titles_labels_remarks_and_names_hold_any_character() {
    let signs = "−–‐‑‒﹣·⋅∗⋆×∕÷≔≠≤⩽≦≥⩾≧∈∉⊂⊊⊆⊃⊋⊇≡∪∩∖⧵∧∨¬∀Σ∑∏Π⋃⋂∣∶…⋯‥⌊⌋⌈⌉∅Ø∞ℕℤℝ𝔹′’→←↔⇒⇔≈±√∂∇∃\
                 °€“”‘—«»₀₉₊₋⁰¹²³⁺⁻";
    let letters = "αβγδεζηθικλμνξπρστυφχψωΓΔΘΛΞΦΨΩℓıȷéÉßñçøåœžąșıİжЖ漢字אبℬℱ𝒜𝑥𝐀𝛼ŝ";
    let mut found = Vec::new();
    for c in signs.chars().chain(letters.chars()) {
        let name = if letters.contains(c) { format!("q{c}") } else { "q".to_owned() };
        let text = format!(
            "On {c} and {c}{c}\n\ndata\n  V  stops {c} here\n  {name}_i ∀ i ∈ V\nminimise\n  Σ_{{i ∈ V}} x_i\n\
             subject to\n  x_i ≥ {name}_i  ∀ i ∈ V  \\tag{{a{c}b}}\n  x_i ≥ 0  ∀ i ∈ V\n"
        );
        let parsed = parse(&text);
        if parsed.diagnostics.iter().any(Diagnostic::is_error) {
            continue;
        }
        let printed = latex(&parsed.tree);
        let again = parse(&printed);
        assert!(again.tree == parsed.tree, "{c}: {printed}\n{}", print(&again.tree));
        found.push((format!("/{c}"), text));
    }
    assert!(found.len() > 130, "{} of all can be read", found.len());
    set_by_tex("characters", &document(&found));
}
