//! The document, table by table.

use std::collections::BTreeMap;
use std::ops::Range;

use toml::Spanned;

use super::Origin;
use super::fields::{Findings, Table};
use crate::place::Finding;
use crate::scenario::{
    Act, ActKind, BranchingRule, CUT_CLASSES, FamilyState, HEURISTICS, InstanceText, MOST_ACTS,
    MOST_INSTANCES, MOST_RIVALS, PRESETS, Rival, Role, Run, Scenario, Selection, Study,
    reader_and_part,
};

const SCENARIO: [&str; 10] =
    ["hullward", "title", "seed", "notes", "engine", "digest", "instance", "rival", "run", "study"];
const INSTANCE: [&str; 4] = ["reader", "title", "text", "bind"];
const RIVAL: [&str; 7] = ["title", "from", "text", "mps", "role", "families", "act"];
const ACT: [&str; 4] = ["after", "do", "node", "on"];
const RUN: [&str; 15] = [
    "search",
    "nodes",
    "iterations",
    "seconds",
    "best_known",
    "branching",
    "selection",
    "priority",
    "node_work",
    "cuts",
    "cut_every",
    "cut_rounds",
    "preset",
    "heuristics",
    "plan",
];
const NODE_WORK: [(&str, ()); 3] =
    [("propagation", ()), ("reduced costs", ()), ("objective step", ())];
const STUDIES: [(&str, ()); 12] = [
    ("ladder", ()),
    ("families", ()),
    ("equivalence", ()),
    ("order", ()),
    ("tightening", ()),
    ("cuts", ()),
    ("growth", ()),
    ("variability", ()),
    ("numerics", ()),
    ("symmetry", ()),
    ("infeasibility", ()),
    ("production", ()),
];

/// The words for the readers of instances.
const READERS: [(&str, ()); 19] = [
    ("matrix", ()),
    ("points", ()),
    ("points geographic", ()),
    ("arcs", ()),
    ("table", ()),
    ("tsplib", ()),
    ("mps", ()),
    ("blocks", ()),
    ("knapsack", ()),
    ("multi-knapsack", ()),
    ("assignment", ()),
    ("sites", ()),
    ("medians", ()),
    ("tardiness", ()),
    ("job-shop", ()),
    ("quadratic", ()),
    ("graph", ()),
    ("steiner", ()),
    ("routing", ()),
];

/// The words for where the rows of a family stand.
pub(super) const FAMILY_STATES: [(&str, FamilyState); 3] =
    [("in", FamilyState::In), ("on demand", FamilyState::OnDemand), ("out", FamilyState::Out)];

/// The words for the kinds of an act.
pub(super) const ACTS: [(&str, ActKind); 5] = [
    ("branch", ActKind::Branch),
    ("close", ActKind::Close),
    ("cut", ActKind::Cut),
    ("stop", ActKind::Stop),
    ("rule", ActKind::Rule),
];

/// The words for the branching rules.
pub const BRANCHING: [(&str, BranchingRule); 5] = [
    ("most fractional", BranchingRule::MostFractional),
    ("pseudocost", BranchingRule::Pseudocost),
    ("strong", BranchingRule::Strong),
    ("reliability", BranchingRule::Reliability),
    ("by hand", BranchingRule::ByHand),
];

/// The words for the node selection rules.
pub const SELECTION: [(&str, Selection); 3] = [
    ("best bound", Selection::BestBound),
    ("depth first", Selection::DepthFirst),
    ("best estimate", Selection::BestEstimate),
];

/// A document, decoded as far as it goes.
pub(super) struct Decoded {
    pub(super) scenario: Scenario,
    pub(super) findings: Vec<Finding>,
    pub(super) instance_origins: Vec<Origin>,
    pub(super) rival_origins: Vec<Option<Origin>>,
}

/// Decodes the root table.
pub(super) fn document(file: &str, table: &Table<'_>) -> Decoded {
    let mut decoder = Decoder {
        file,
        findings: Findings::default(),
        instance_origins: Vec::new(),
        rival_origins: Vec::new(),
    };
    let scenario = decoder.scenario(table);
    Decoded {
        scenario,
        findings: decoder.findings.0,
        instance_origins: decoder.instance_origins,
        rival_origins: decoder.rival_origins,
    }
}

struct Decoder<'f> {
    file: &'f str,
    findings: Findings,
    instance_origins: Vec<Origin>,
    rival_origins: Vec<Option<Origin>>,
}

impl Decoder<'_> {
    fn scenario(&mut self, table: &Table<'_>) -> Scenario {
        if !self.version(table) {
            return Scenario::default();
        }
        let found = &mut self.findings;
        found.unknown_keys(table, "a scenario", &SCENARIO);
        let mut scenario = Scenario {
            title: found.text(table, "title").unwrap_or_default(),
            seed: found.whole(table, "seed").unwrap_or_default(),
            notes: found.text(table, "notes").unwrap_or_default(),
            engine: found.text(table, "engine"),
            digest: found.text(table, "digest"),
            ..Scenario::default()
        };
        let mut instances = self.instances(table).into_iter();
        scenario.instance = instances.next();
        scenario.further_instances = instances.collect();
        for (rival, span) in self.at_most(MOST_RIVALS, table, "rival") {
            let rival = self.rival(rival, span);
            scenario.rivals.push(rival);
        }
        if let Some(run) = self.findings.table(table, "run") {
            scenario.run = self.run(run);
        }
        for (study, span) in self.findings.tables(table, "study") {
            scenario.studies.extend(self.study(study, span));
        }
        scenario
    }

    /// The tables of `[[key]]`; more than `most` are complained of once, and only `most` are read.
    fn at_most<'d, 't>(
        &mut self,
        most: usize,
        table: &'d Table<'t>,
        key: &str,
    ) -> Vec<(&'d Table<'t>, Range<usize>)> {
        let mut tables = self.findings.tables(table, key);
        if let Some((_, span)) = tables.get(most) {
            let message = format!("there are {} [[{key}]] tables", tables.len());
            let mend = format!("{most} are possible: split the scenario");
            self.findings.error("too-many", span.clone(), message, mend);
            tables.truncate(most);
        }
        tables
    }

    /// Whether the version is one that can be read.
    fn version(&mut self, table: &Table<'_>) -> bool {
        let Some(value) = table.get("hullward") else {
            let message = "the version of the format is missing".to_owned();
            self.findings.error("version", 0..0, message, "begin with hullward = 1".to_owned());
            return false;
        };
        let version = self.findings.whole::<u32>(table, "hullward");
        if let Some(version) = version.filter(|&version| version != 1) {
            let message = format!("the file is of version {version}; this program reads version 1");
            let mend = "open it with the newer page or program that wrote it".to_owned();
            self.findings.error("version", value.span(), message, mend);
        }
        version == Some(1)
    }

    fn instances(&mut self, table: &Table<'_>) -> Vec<InstanceText> {
        let Some(value) = table.get("instance") else { return Vec::new() };
        if let Some(one) = value.get_ref().as_table() {
            return vec![self.instance(one, value.span())];
        }
        let tables = self.at_most(MOST_INSTANCES, table, "instance");
        tables.into_iter().map(|(one, span)| self.instance(one, span)).collect()
    }

    fn instance(&mut self, table: &Table<'_>, span: Range<usize>) -> InstanceText {
        let found = &mut self.findings;
        found.unknown_keys(table, "an instance", &INSTANCE);
        if let Some(reader) = found.text(table, "reader") {
            let span = table.get("reader").map(Spanned::span).unwrap_or_default();
            found.word(reader_and_part(&reader).0, span, "reader", &READERS);
        }
        let text = found.text(table, "text");
        if text.is_none() && !table.contains_key("text") {
            let message = "the instance has no text".to_owned();
            found.error("missing", span.clone(), message, "add text = '''…'''".to_owned());
        }
        let span = table.get("text").map_or(span, Spanned::span);
        self.instance_origins.push(Origin::of_string(self.file, &span));
        let mut bind = BTreeMap::new();
        if let Some(names) = self.findings.table(table, "bind") {
            for key in names.keys() {
                let key: &str = key.get_ref();
                bind.extend(self.findings.text(names, key).map(|name| (key.to_owned(), name)));
            }
        }
        InstanceText {
            reader: self.findings.text(table, "reader"),
            title: self.findings.text(table, "title").unwrap_or_default(),
            text: text.unwrap_or_default(),
            bind,
        }
    }

    fn rival(&mut self, table: &Table<'_>, span: Range<usize>) -> Rival {
        let found = &mut self.findings;
        found.unknown_keys(table, "a rival", &RIVAL);
        let sources =
            ["from", "text", "mps"].iter().filter(|key| table.contains_key(**key)).count();
        if sources != 1 {
            let message = match sources {
                0 => "the rival has no formulation",
                _ => "the rival has more than one formulation",
            };
            let mend = "give one of from = \"…\", text = '''…''', mps = '''…'''".to_owned();
            found.error("missing", span, message.to_owned(), mend);
        }
        let text = ["text", "mps"].iter().find_map(|key| table.get(*key));
        let origin = text.map(|value| Origin::of_string(self.file, &value.span()));
        self.rival_origins.push(origin);
        let mut rival = Rival {
            title: found.text(table, "title").unwrap_or_default(),
            from: found.text(table, "from"),
            text: found.text(table, "text"),
            mps: found.text(table, "mps"),
            role: found.choice(table, "role", &[("relaxation", Role::Relaxation)]),
            families: BTreeMap::new(),
            acts: Vec::new(),
        };
        if let Some(families) = found.table(table, "families") {
            for key in families.keys() {
                let key: &str = key.get_ref();
                let state = found.choice(families, key, &FAMILY_STATES);
                rival.families.extend(state.map(|state| (key.to_owned(), state)));
            }
        }
        for (act, span) in self.at_most(MOST_ACTS, table, "act") {
            rival.acts.extend(self.act(act, span));
        }
        rival
    }

    fn act(&mut self, table: &Table<'_>, span: Range<usize>) -> Option<Act> {
        let found = &mut self.findings;
        found.unknown_keys(table, "an act", &ACT);
        if !table.contains_key("do") {
            let message = "the act does not say what was done".to_owned();
            let mend = "add do = \"branch\", \"close\", \"cut\" or \"stop\"".to_owned();
            found.error("missing", span, message, mend);
        }
        Some(Act {
            after: found.whole(table, "after").unwrap_or_default(),
            what: found.choice(table, "do", &ACTS)?,
            node: found.whole(table, "node"),
            on: found.texts(table, "on").unwrap_or_default(),
        })
    }

    fn run(&mut self, table: &Table<'_>) -> Run {
        let found = &mut self.findings;
        found.unknown_keys(table, "run", &RUN);
        let preset = found.choice(table, "preset", &PRESETS).unwrap_or_default();
        let usual = Run::of(preset);
        let seconds = found.number(table, "seconds").unwrap_or(usual.seconds);
        if seconds < 0.0 {
            let span = table.get("seconds").map(Spanned::span).unwrap_or_default();
            let message = "`seconds` must not be negative".to_owned();
            found.error("range", span, message, "0 is no limit".to_owned());
        }
        let cuts = found.texts(table, "cuts");
        let span = table.get("cuts").map(Spanned::span).unwrap_or_default();
        let classes: Vec<(&str, ())> =
            ["on demand"].into_iter().chain(CUT_CLASSES).map(|class| (class, ())).collect();
        for cut in cuts.iter().flatten() {
            found.word(cut, span.clone(), "cuts", &classes);
        }
        let node_work = found.texts(table, "node_work");
        let span = table.get("node_work").map(Spanned::span).unwrap_or_default();
        for work in node_work.iter().flatten() {
            found.word(work, span.clone(), "node_work", &NODE_WORK);
        }
        let heuristics = found.texts(table, "heuristics");
        let known = HEURISTICS.map(|word| (word, ()));
        let span = table.get("heuristics").map(Spanned::span).unwrap_or_default();
        for heuristic in heuristics.iter().flatten() {
            found.word(heuristic, span.clone(), "heuristics", &known);
        }
        Run {
            search: found.flag(table, "search").unwrap_or(usual.search),
            nodes: found.whole(table, "nodes").unwrap_or(usual.nodes),
            iterations: found.whole(table, "iterations").unwrap_or(usual.iterations),
            seconds,
            best_known: found.number(table, "best_known"),
            branching: found.choice(table, "branching", &BRANCHING).unwrap_or(usual.branching),
            selection: found.choice(table, "selection", &SELECTION).unwrap_or(usual.selection),
            priority: found.texts(table, "priority").unwrap_or_default(),
            node_work: node_work.or(usual.node_work),
            cuts: cuts.or(usual.cuts),
            cut_every: found.whole(table, "cut_every").unwrap_or(usual.cut_every),
            cut_rounds: found.whole(table, "cut_rounds").unwrap_or(usual.cut_rounds),
            preset,
            heuristics: heuristics.or(usual.heuristics),
            plan: found.text(table, "plan"),
        }
    }

    fn study(&mut self, table: &Table<'_>, span: Range<usize>) -> Option<Study> {
        if !table.contains_key("kind") {
            let message = "the study has no kind".to_owned();
            self.findings.error("missing", span, message, "add kind = \"growth\"".to_owned());
        }
        self.findings.choice(table, "kind", &STUDIES)?;
        let kind = self.findings.text(table, "kind")?;
        let mut fields = self.findings.fields(table, 0)?;
        fields.remove("kind");
        Some(Study { kind, fields })
    }
}
