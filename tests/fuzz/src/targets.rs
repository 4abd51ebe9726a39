//! What takes bytes from outside. Each target asserts what holds for any input.

#![expect(clippy::panic, reason = "a target fails loudly")]

use std::collections::BTreeMap;
use std::ops::Range;
use std::sync::LazyLock;

use instance::{Instance, Reader};
use notation::{Bound, Diagnostic, Expansion, Limits};
use record::message::CheckJob;
use record::message::Request;
use record::scenario::InstanceText;

/// A target: its name, and what is done with the bytes.
pub type Target = (&'static str, fn(&[u8]));

/// All targets.
pub const ALL: [Target; 8] = [
    ("parse", parse),
    ("check", check),
    ("print", print),
    ("expand", expand),
    ("instance", instance),
    ("scenario", scenario),
    ("mps", mps),
    ("wire", wire),
];

/// The target of a name.
#[must_use]
pub fn find(name: &str) -> Option<Target> {
    ALL.into_iter().find(|(known, _)| *known == name)
}

fn text(bytes: &[u8]) -> String {
    String::from_utf8_lossy(bytes).into_owned()
}

fn in_text(text: &str, span: &Range<usize>) -> bool {
    text.get(span.clone()).is_some()
}

/// Places stand in the text, and what a mend makes is a text that can be read again.
fn sound(text: &str, found: &[Diagnostic]) {
    for diagnostic in found {
        let places = diagnostic.also.iter().map(|(span, _)| span).chain([&diagnostic.span]);
        for span in places {
            assert!(in_text(text, span), "{diagnostic:?}");
        }
        assert!(diagnostic.message.len() < 2_000, "{diagnostic:?}");
        for edit in diagnostic.mends.iter().filter_map(|mend| mend.edit.as_ref()) {
            assert!(in_text(text, &edit.span), "{diagnostic:?}");
        }
    }
}

/// Lexer and parser.
pub fn parse(bytes: &[u8]) {
    let text = text(bytes);
    sound(&text, &notation::parse(&text).diagnostics);
}

/// The checker, with the linearisations that it offers.
pub fn check(bytes: &[u8]) {
    let text = text(bytes);
    let parsed = notation::parse(&text);
    let (checked, found) = notation::check(&parsed.tree);
    let found = [parsed.diagnostics.clone(), found].concat();
    let found = notation::offers(&text, &parsed, &checked, found);
    sound(&text, &found);
    let errors = found.iter().any(Diagnostic::is_error);
    assert!(errors || checked.is_sound(), "what is not sound has no error");
    let edits = found.iter().flat_map(|d| &d.mends).filter_map(|mend| mend.edit.as_ref());
    for edit in edits.take(3) {
        let mended = format!("{}{}{}", &text[..edit.span.start], edit.text, &text[edit.span.end..]);
        let _ = notation::check(&notation::parse(&mended).tree);
    }
}

/// The three printers: what is printed as text or as LaTeX reads back as the same tree.
pub fn print(bytes: &[u8]) {
    let text = text(bytes);
    let parsed = notation::parse(&text);
    for row in notation::typeset(&parsed.tree, &text).rows {
        assert!(in_text(&text, &row.span.range()));
    }
    for printed in [notation::print(&parsed.tree), notation::latex(&parsed.tree)] {
        let again = notation::parse(&printed);
        if parsed.diagnostics.is_empty() {
            assert!(again.diagnostics.is_empty(), "{printed}\n{:?}", again.diagnostics);
            assert!(again.tree == parsed.tree, "{printed}");
        }
    }
}

/// An instance with drives, weights and periods.
const BLOCKS: &str = "\
V: Ash, Birch, Cedar, Elm
T: 1..4
Q = 10
r = Ash
d: 5 3 4 6
q: 0 4 5 6
";

const TABLE: &str = "\tAsh\tBirch\tCedar\tElm\nAsh\t\t3\t4\t5\nBirch\t2\t\t6\t1\nCedar\t5\t8\t\t2\nElm\t4\t4\t7\t\n";

static INSTANCES: LazyLock<Vec<Instance>> = LazyLock::new(|| {
    let read = |text: &str| instance::read(text, None).instance;
    [BLOCKS, TABLE].iter().filter_map(|text| read(text)).collect()
});

/// Binding, expansion and the search for pitfalls, within small limits.
pub fn expand(bytes: &[u8]) {
    let text = text(bytes);
    let parsed = notation::parse(&text);
    let (checked, _) = notation::check(&parsed.tree);
    if !checked.is_sound() {
        return;
    }
    for instance in INSTANCES.iter() {
        let (names, _) = notation::assumed(&text, &checked, instance, &BTreeMap::new());
        let bound: Bound = match notation::bind(&checked, instance, &names) {
            Ok(bound) => bound,
            Err(found) => {
                sound(&text, &found);
                continue;
            }
        };
        let limits = Limits { nonzeros: 2_000 };
        match Expansion::new(bound, &BTreeMap::new(), limits).finish() {
            Ok((model, found)) => {
                sound(&text, &found);
                sound(&text, &notation::lint(&parsed.tree, &checked, &model));
            }
            Err(found) => sound(&text, &found),
        }
    }
}

/// Every reader of instances.
pub fn instance(bytes: &[u8]) {
    let text = text(bytes);
    for reader in std::iter::once(None).chain(Reader::all().map(Some)) {
        let reading = instance::read(&text, reader);
        for complaint in &reading.complaints {
            assert!(in_text(&text, &complaint.span), "{complaint:?}");
            assert!(complaint.line >= 1 && complaint.column >= 1, "{complaint:?}");
        }
        let errors = reading.complaints.iter().any(|c| c.severity == instance::Severity::Error);
        assert!(reading.instance.is_some() || errors, "nothing is read and nothing is said");
    }
}

/// The scenario file and the link.
pub fn scenario(bytes: &[u8]) {
    let text = text(bytes);
    let parsed = record::file::parse(&text);
    if let Some(scenario) = &parsed.scenario {
        let printed = record::file::print(scenario);
        let again = record::file::parse(&printed);
        assert!(again.scenario.as_ref() == Some(scenario), "{printed}");
    } else {
        assert!(!parsed.complaints.is_empty(), "nothing is read and nothing is said");
    }
    if let Ok(unpacked) = record::link::unpack(&text) {
        let _ = record::file::parse(&unpacked);
    }
    if let Ok(packed) = record::link::pack(&text) {
        assert_eq!(record::link::unpack(&packed).as_deref(), Ok(text.as_str()));
    }
}

/// Models in MPS.
pub fn mps(bytes: &[u8]) {
    let text = text(bytes);
    match model::mps::read(&text) {
        Ok((model, _)) => {
            let _ = model.statistics();
        }
        Err(complaints) => assert!(!complaints.is_empty()),
    }
}

/// Messages, logs and what a worker makes of them; a text is checked as the page does it.
pub fn wire(bytes: &[u8]) {
    let _ = record::wire::read_request(bytes);
    let _ = record::wire::read_envelope(bytes);
    let _ = record::wire::read_relaxation(bytes);
    let _ = record::wire::read_opinion(bytes);
    let _ = record::log::decode(bytes);
    let mut worker = engine::Worker::new();
    let given = InstanceText { text: TABLE.to_owned(), ..InstanceText::default() };
    let job = CheckJob { number: 1, text: text(bytes), instance: Some(given) };
    worker.handle(Request::Check(Box::new(job)));
    let mut slices = 0;
    while worker.advance(1_000_000) {
        slices += 1;
        assert!(slices < 1_000, "a check does not end");
    }
    if worker.take().is_empty() {
        panic!("a check is not answered");
    }
}
