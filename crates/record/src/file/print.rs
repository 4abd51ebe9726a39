//! A scenario as TOML text. What equals its default is not written, and long texts stand
//! between `'''` exactly as they were pasted, where TOML can hold them so.

use std::collections::BTreeMap;
use std::fmt::Write;

use super::decode::{ACTS, BRANCHING, FAMILY_STATES, SELECTION};
use crate::scenario::{
    Act, Field, InstanceText, PRESETS, Preset, Rival, Role, Run, Scenario, Study,
};

/// The scenario file: [`super::parse`] of it gives the scenario back.
#[must_use]
pub fn print(scenario: &Scenario) -> String {
    let mut out = Printer::default();
    out.pair("hullward", &scenario.hullward.to_string());
    out.text_unless_empty("title", &scenario.title);
    if scenario.seed != 0 {
        out.pair("seed", &scenario.seed.to_string());
    }
    out.text_unless_empty("notes", &scenario.notes);
    out.text_if_some("engine", scenario.engine.as_deref());
    out.text_if_some("digest", scenario.digest.as_deref());
    let header = if scenario.further_instances.is_empty() { "[instance]" } else { "[[instance]]" };
    for instance in scenario.instances() {
        out.instance(header, instance);
    }
    for rival in &scenario.rivals {
        out.rival(rival);
    }
    out.run(&scenario.run);
    for study in &scenario.studies {
        out.study(study);
    }
    out.0
}

#[derive(Default)]
struct Printer(String);

impl Printer {
    fn header(&mut self, header: &str) {
        let _ = writeln!(self.0, "\n{header}");
    }

    fn pair(&mut self, key: &str, value: &str) {
        let _ = writeln!(self.0, "{} = {value}", quoted_key(key));
    }

    fn text(&mut self, key: &str, text: &str) {
        self.pair(key, &long_text(text));
    }

    fn text_unless_empty(&mut self, key: &str, text: &str) {
        if !text.is_empty() {
            self.text(key, text);
        }
    }

    fn text_if_some(&mut self, key: &str, text: Option<&str>) {
        if let Some(text) = text {
            self.text(key, text);
        }
    }

    fn instance(&mut self, header: &str, instance: &InstanceText) {
        self.header(header);
        self.text_unless_empty("title", &instance.title);
        self.text_if_some("reader", instance.reader.as_deref());
        if !instance.bind.is_empty() {
            let pairs = instance.bind.iter().map(|(key, name)| (key, basic(name)));
            self.pair("bind", &inline_table(pairs));
        }
        self.text("text", &instance.text);
    }

    fn rival(&mut self, rival: &Rival) {
        self.header("[[rival]]");
        self.text_unless_empty("title", &rival.title);
        self.text_if_some("from", rival.from.as_deref());
        if rival.role == Some(Role::Relaxation) {
            self.text("role", "relaxation");
        }
        if !rival.families.is_empty() {
            let states = rival.families.iter();
            let pairs = states.map(|(family, state)| (family, basic(word(&FAMILY_STATES, *state))));
            self.pair("families", &inline_table(pairs));
        }
        self.text_if_some("text", rival.text.as_deref());
        self.text_if_some("mps", rival.mps.as_deref());
        for act in &rival.acts {
            self.act(act);
        }
    }

    fn act(&mut self, act: &Act) {
        self.header("[[rival.act]]");
        self.pair("after", &act.after.to_string());
        self.text("do", word(&ACTS, act.what));
        if let Some(node) = act.node {
            self.pair("node", &node.to_string());
        }
        if !act.on.is_empty() {
            self.pair("on", &list(&act.on));
        }
    }

    fn run(&mut self, run: &Run) {
        if *run == Run::default() {
            return;
        }
        let usual = Run::of(run.preset);
        self.header("[run]");
        if run.preset != Preset::default() {
            self.text("preset", word(&PRESETS, run.preset));
        }
        if run.search != usual.search {
            self.pair("search", &run.search.to_string());
        }
        if run.nodes != usual.nodes {
            self.pair("nodes", &run.nodes.to_string());
        }
        if run.iterations != usual.iterations {
            self.pair("iterations", &run.iterations.to_string());
        }
        if run.seconds.to_bits() != usual.seconds.to_bits() {
            self.pair("seconds", &number(run.seconds));
        }
        if let Some(best) = run.best_known {
            self.pair("best_known", &number(best));
        }
        if run.branching != usual.branching {
            self.text("branching", word(&BRANCHING, run.branching));
        }
        if run.selection != usual.selection {
            self.text("selection", word(&SELECTION, run.selection));
        }
        if !run.priority.is_empty() {
            self.pair("priority", &list(&run.priority));
        }
        if let Some(work) = run.node_work.as_ref().filter(|_| run.node_work != usual.node_work) {
            self.pair("node_work", &list(work));
        }
        if let Some(cuts) = run.cuts.as_ref().filter(|_| run.cuts != usual.cuts) {
            self.pair("cuts", &list(cuts));
        }
        if run.cut_every != usual.cut_every {
            self.pair("cut_every", &run.cut_every.to_string());
        }
        if run.cut_rounds != usual.cut_rounds {
            self.pair("cut_rounds", &run.cut_rounds.to_string());
        }
        let heuristics = run.heuristics.as_ref();
        if let Some(heuristics) = heuristics.filter(|_| run.heuristics != usual.heuristics) {
            self.pair("heuristics", &list(heuristics));
        }
        self.text_if_some("plan", run.plan.as_deref());
    }

    fn study(&mut self, study: &Study) {
        self.header("[[study]]");
        self.text("kind", &study.kind);
        for (key, value) in &study.fields {
            self.pair(key, &field(value));
        }
    }
}

/// The word for a value; every value has one.
fn word<T: Copy + PartialEq>(words: &[(&'static str, T)], value: T) -> &'static str {
    words.iter().find(|(_, known)| *known == value).map_or("", |(word, _)| word)
}

/// The shortest decimal that reads back as the same finite number.
fn number(value: f64) -> String {
    let tidy = if value.is_finite() { value + 0.0 } else { 0.0 };
    format!("{tidy:?}")
}

fn field(value: &Field) -> String {
    match value {
        Field::Text(text) => basic(text),
        Field::Whole(whole) => whole.to_string(),
        Field::Number(value) => number(*value),
        Field::Flag(flag) => flag.to_string(),
        Field::List(items) => {
            format!("[{}]", items.iter().map(field).collect::<Vec<_>>().join(", "))
        }
        Field::Table(fields) => inline_fields(fields),
    }
}

fn inline_fields(fields: &BTreeMap<String, Field>) -> String {
    inline_table(fields.iter().map(|(key, value)| (key, field(value))))
}

fn inline_table<'k>(pairs: impl Iterator<Item = (&'k String, String)>) -> String {
    let pairs: Vec<String> =
        pairs.map(|(key, value)| format!("{} = {value}", quoted_key(key))).collect();
    if pairs.is_empty() { "{}".to_owned() } else { format!("{{ {} }}", pairs.join(", ")) }
}

fn list(texts: &[String]) -> String {
    format!("[{}]", texts.iter().map(|text| basic(text)).collect::<Vec<_>>().join(", "))
}

fn quoted_key(key: &str) -> String {
    let bare = |c: char| c.is_ascii_alphanumeric() || c == '_' || c == '-';
    if !key.is_empty() && key.chars().all(bare) { key.to_owned() } else { basic(key) }
}

/// Several lines as they are between `'''`; one line, and what a literal cannot hold, escaped.
fn long_text(text: &str) -> String {
    let control = |c: char| c.is_control() && c != '\n' && c != '\t';
    let literal = text.contains('\n')
        && !text.contains("'''")
        && !text.ends_with('\'')
        && !text.contains(control);
    if literal { format!("'''\n{text}'''") } else { basic(text) }
}

/// A basic string on one line.
fn basic(text: &str) -> String {
    let mut out = String::with_capacity(text.len() + 2);
    out.push('"');
    for c in text.chars() {
        match c {
            '"' => out.push_str("\\\""),
            '\\' => out.push_str("\\\\"),
            '\n' => out.push_str("\\n"),
            '\r' => out.push_str("\\r"),
            '\t' => out.push_str("\\t"),
            c if c.is_control() => {
                let _ = write!(out, "\\u{:04X}", u32::from(c));
            }
            c => out.push(c),
        }
    }
    out.push('"');
    out
}
