//! The words of the command line.

use record::file::nearest;
use record::scenario::{PRESETS, Preset};

use crate::help::Topic;

/// What is asked for.
#[derive(Debug, Clone, PartialEq)]
pub(crate) enum Call {
    Help(Topic),
    /// What a code means.
    Explain(String),
    Version,
    Run(RunOptions),
    Read(String),
    Write(WriteOptions),
    List(Option<String>),
    Digest(DigestOptions),
    Cells(CellsOptions),
    Gather(GatherOptions),
    Drift(DriftOptions),
    Prove(ProveOptions),
}

/// How `drift` is asked for.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) struct DriftOptions {
    /// A pack.
    pub(crate) pack: String,
    /// A new instance; without one the pack is run again.
    pub(crate) file: Option<String>,
}

/// How `cells` is asked for.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) struct CellsOptions {
    pub(crate) file: String,
    /// The queue for which a script is written in place of the list.
    pub(crate) queue: Option<Queue>,
}

/// A batch queue.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Queue {
    /// An array job of Slurm.
    Slurm,
    /// GNU parallel.
    Parallel,
}

/// The queues by name.
const QUEUES: [(&str, Queue); 2] = [("slurm", Queue::Slurm), ("parallel", Queue::Parallel)];

/// How `gather` is asked for.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub(crate) struct GatherOptions {
    pub(crate) files: Vec<String>,
    pub(crate) json: bool,
}

/// How `run` is asked for.
#[derive(Debug, Clone, Default, PartialEq)]
pub(crate) struct RunOptions {
    pub(crate) files: Vec<String>,
    pub(crate) json: bool,
    /// Seconds a rival in place of the scenario's; 0 is none.
    pub(crate) seconds: Option<f64>,
    /// The letter of the only rival to run.
    pub(crate) rival: Option<String>,
    /// Where the log is saved.
    pub(crate) log: Option<String>,
    /// The only cell of its growth study to run.
    pub(crate) cell: Option<u32>,
    /// The preset in place of the scenario's settings.
    pub(crate) preset: Option<Preset>,
}

/// How `digest` is asked for.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) struct DigestOptions {
    pub(crate) file: String,
    /// Ticks a slice.
    pub(crate) slice: u64,
    /// How often each rival is run on the clock; 0 is once, without one.
    pub(crate) runs: u64,
}

/// How `prove` is asked for.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) struct ProveOptions {
    /// The saved log.
    pub(crate) file: String,
    pub(crate) json: bool,
}

/// How `write` is asked for.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) struct WriteOptions {
    pub(crate) file: String,
    /// The letter of the rival.
    pub(crate) rival: Option<String>,
    /// The instance, from 1.
    pub(crate) instance: Option<usize>,
    pub(crate) form: Form,
    /// The file that is written.
    pub(crate) out: Option<String>,
    /// By what costs are multiplied in a scenario without names.
    pub(crate) scale: Option<String>,
}

/// What `write` writes.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Form {
    Mps,
    /// The same with the smallest coefficients and bounds that are proved.
    Tightened,
    Latex,
    Text,
    Scenario,
    Link,
    /// The decision record as HTML.
    Report,
    /// The same as Markdown.
    Markdown,
    /// The results as a table.
    Csv,
    /// The record, its results and its studies as one JSON object.
    Json,
    /// The drawings of the record.
    Svg,
    /// The scenario without names.
    Stripped,
    /// The scenario with what its rivals gave, to be run again.
    Pack,
}

/// The forms by name.
const FORMS: [(&str, Form); 13] = [
    ("mps", Form::Mps),
    ("tightened", Form::Tightened),
    ("latex", Form::Latex),
    ("text", Form::Text),
    ("scenario", Form::Scenario),
    ("link", Form::Link),
    ("report", Form::Report),
    ("markdown", Form::Markdown),
    ("csv", Form::Csv),
    ("json", Form::Json),
    ("svg", Form::Svg),
    ("stripped", Form::Stripped),
    ("pack", Form::Pack),
];

impl Form {
    /// Whether it holds the whole scenario where no rival is named.
    pub(crate) fn is_whole(self) -> bool {
        matches!(self, Self::Scenario | Self::Link | Self::Stripped) || self.is_run()
    }

    /// Whether the scenario is run for it.
    pub(crate) fn is_run(self) -> bool {
        matches!(
            self,
            Self::Report | Self::Markdown | Self::Csv | Self::Json | Self::Svg | Self::Pack
        )
    }

    fn named(word: &str) -> Result<Self, String> {
        let found = FORMS.iter().find(|(name, _)| *name == word).map(|(_, form)| *form);
        let known = FORMS.map(|(name, _)| name);
        found.ok_or_else(|| {
            let hint = nearest(word, &known).map(|near| format!("did you mean {near}? "));
            let hint = hint.unwrap_or_default();
            format!("there is no form {word}: {hint}there are {}", known.join(", "))
        })
    }
}

const CALLS: [&str; 10] =
    ["run", "read", "write", "list", "digest", "cells", "gather", "drift", "prove", "help"];

/// The call, or what is wrong with the words.
pub(crate) fn parse(words: &[String]) -> Result<Call, String> {
    let Some((call, rest)) = words.split_first() else {
        return Ok(Call::Help(Topic::All));
    };
    if let Some(topic) = Topic::of(call).filter(|_| rest.iter().any(|word| is_help(word))) {
        return Ok(Call::Help(topic));
    }
    match call.as_str() {
        "--version" | "-V" => Ok(Call::Version),
        "help" => Ok(help(rest)),
        word if is_help(word) => Ok(Call::Help(Topic::All)),
        "run" => run(rest).map(Call::Run),
        "read" => one(rest, "read").map(Call::Read),
        "write" => write(rest).map(Call::Write),
        "list" => list(rest),
        "digest" => digest(rest),
        "cells" => cells(rest).map(Call::Cells),
        "gather" => gather(rest).map(Call::Gather),
        "drift" => drift(rest).map(Call::Drift),
        "prove" => prove(rest),
        other => Err(unknown("call", other, &CALLS)),
    }
}

/// Help on a call or, where the word has the dot of one, on a code.
fn help(words: &[String]) -> Call {
    match words.first() {
        Some(code) if code.contains('.') => Call::Explain(code.clone()),
        word => Call::Help(word.and_then(|word| Topic::of(word)).unwrap_or(Topic::All)),
    }
}

fn is_help(word: &str) -> bool {
    word == "--help" || word == "-h"
}

fn unknown(what: &str, word: &str, known: &[&str]) -> String {
    let hint = nearest(word, known).map(|near| format!("did you mean {near}? "));
    format!("there is no {what} {word}: {}see hullward help", hint.unwrap_or_default())
}

fn run(words: &[String]) -> Result<RunOptions, String> {
    let mut options = RunOptions::default();
    let mut words = words.iter();
    while let Some(word) = words.next() {
        match word.as_str() {
            "--json" => options.json = true,
            "--seconds" => options.seconds = Some(seconds(value(word, words.next())?)?),
            "--rival" => options.rival = Some(value(word, words.next())?.to_uppercase()),
            "--log" => options.log = Some(value(word, words.next())?.to_owned()),
            "--cell" => options.cell = Some(cell(value(word, words.next())?)?),
            "--preset" => options.preset = Some(preset(value(word, words.next())?)?),
            other if is_option(other) => {
                let known = ["--json", "--seconds", "--rival", "--log", "--cell", "--preset"];
                return Err(unknown("option", other, &known));
            }
            file => options.files.push(file.to_owned()),
        }
    }
    if options.files.is_empty() {
        return Err("run needs a scenario: hullward run FILE…".to_owned());
    }
    Ok(options)
}

fn write(words: &[String]) -> Result<WriteOptions, String> {
    let (mut files, mut form) = (Vec::new(), None);
    let (mut rival, mut instance, mut out, mut scale) = (None, None, None, None);
    let mut words = words.iter();
    while let Some(word) = words.next() {
        match word.as_str() {
            "--as" => form = Some(Form::named(value(word, words.next())?)?),
            "--rival" => rival = Some(value(word, words.next())?.to_uppercase()),
            "--instance" => instance = Some(place(value(word, words.next())?)?),
            "--scale" => scale = Some(value(word, words.next())?.to_owned()),
            "-o" | "--out" => out = Some(value(word, words.next())?.to_owned()),
            other if is_option(other) => {
                let known = ["--as", "--rival", "--instance", "--scale", "--out"];
                return Err(unknown("option", other, &known));
            }
            file => files.push(file.to_owned()),
        }
    }
    let file = one(&files, "write")?;
    let Some(form) = form else {
        let known = FORMS.map(|(name, _)| name).join(", ");
        return Err(format!("write needs --as and one of {known}"));
    };
    if scale.is_some() && form != Form::Stripped {
        return Err("--scale goes with --as stripped".to_owned());
    }
    Ok(WriteOptions { file, rival, instance, form, out, scale })
}

fn drift(words: &[String]) -> Result<DriftOptions, String> {
    match words {
        [word, ..] if is_option(word) => Err(unknown("option", word, &[])),
        [pack] => Ok(DriftOptions { pack: pack.clone(), file: None }),
        [pack, file] => Ok(DriftOptions { pack: pack.clone(), file: Some(file.clone()) }),
        _ => Err("drift needs a pack, and a new instance: hullward drift PACK [FILE]".to_owned()),
    }
}

fn gather(words: &[String]) -> Result<GatherOptions, String> {
    let mut options = GatherOptions::default();
    for word in words {
        match word.as_str() {
            "--json" => options.json = true,
            other if is_option(other) => return Err(unknown("option", other, &["--json"])),
            file => options.files.push(file.to_owned()),
        }
    }
    if options.files.is_empty() {
        return Err("gather needs what the cells gave: hullward gather RESULT…".to_owned());
    }
    Ok(options)
}

fn cells(words: &[String]) -> Result<CellsOptions, String> {
    let (mut files, mut queue) = (Vec::new(), None);
    let mut words = words.iter();
    while let Some(word) = words.next() {
        match word.as_str() {
            "--job" => queue = Some(named_queue(value(word, words.next())?)?),
            other if is_option(other) => return Err(unknown("option", other, &["--job"])),
            file => files.push(file.to_owned()),
        }
    }
    let file = one(&files, "cells")?;
    if queue.is_some() && file == "-" {
        return Err(
            "--job needs the name of a file: a batch job reads the scenario anew".to_owned()
        );
    }
    Ok(CellsOptions { file, queue })
}

fn named_queue(word: &str) -> Result<Queue, String> {
    let found = QUEUES.iter().find(|(name, _)| *name == word).map(|(_, queue)| *queue);
    found.ok_or_else(|| unknown("queue", word, &QUEUES.map(|(name, _)| name)))
}

fn cell(word: &str) -> Result<u32, String> {
    word.parse().map_err(|_| format!("--cell needs the number of a cell, not {word}"))
}

fn place(word: &str) -> Result<usize, String> {
    let place = word.parse().ok().filter(|place| *place > 0);
    place.ok_or_else(|| format!("--instance needs a whole number over 0, not {word}"))
}

fn list(words: &[String]) -> Result<Call, String> {
    match words {
        [] => Ok(Call::List(None)),
        _ => one(words, "list").map(|id| Call::List(Some(id))),
    }
}

fn digest(words: &[String]) -> Result<Call, String> {
    let mut files = Vec::new();
    let (mut slice, mut runs) = (engine::native::USUAL_SLICE, 0);
    let mut words = words.iter();
    while let Some(word) = words.next() {
        match word.as_str() {
            "--slice" => slice = positive(word, value(word, words.next())?)?,
            "--runs" => runs = positive(word, value(word, words.next())?)?,
            _ => files.push(word.clone()),
        }
    }
    one(&files, "digest").map(|file| Call::Digest(DigestOptions { file, slice, runs }))
}

fn prove(words: &[String]) -> Result<Call, String> {
    let (flags, files): (Vec<String>, Vec<String>) =
        words.iter().cloned().partition(|word| word == "--json");
    let file = one(&files, "prove")?;
    Ok(Call::Prove(ProveOptions { file, json: !flags.is_empty() }))
}

fn positive(option: &str, word: &str) -> Result<u64, String> {
    let number = word.parse().ok().filter(|number| *number > 0);
    number.ok_or_else(|| format!("{option} needs a whole number over 0, not {word}"))
}

/// The only word, which is no option.
fn one(words: &[String], call: &str) -> Result<String, String> {
    match words {
        [word] if !is_option(word) => Ok(word.clone()),
        [word] => Err(unknown("option", word, &["--help"])),
        _ => Err(format!("{call} takes one name: see hullward help {call}")),
    }
}

fn is_option(word: &str) -> bool {
    word.starts_with('-') && word != "-"
}

fn value<'w>(option: &str, word: Option<&'w String>) -> Result<&'w str, String> {
    word.map(String::as_str).ok_or_else(|| format!("{option} needs a value"))
}

fn preset(word: &str) -> Result<Preset, String> {
    let found = PRESETS.iter().find(|(name, _)| *name == word).map(|(_, preset)| *preset);
    found.ok_or_else(|| unknown("preset", word, &PRESETS.map(|(name, _)| name)))
}

fn seconds(word: &str) -> Result<f64, String> {
    let seconds = word.parse::<f64>().ok().filter(|seconds| seconds.is_finite() && *seconds >= 0.0);
    seconds.ok_or_else(|| format!("--seconds needs a number of seconds, not {word}"))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn call(line: &str) -> Result<Call, String> {
        parse(&line.split_whitespace().map(str::to_owned).collect::<Vec<_>>())
    }

    #[test]
    fn calls_are_understood() {
        let options = RunOptions {
            files: vec!["a.toml".to_owned(), "-".to_owned()],
            json: true,
            seconds: Some(1.5),
            ..RunOptions::default()
        };
        assert_eq!(call("run a.toml --json - --seconds 1.5"), Ok(Call::Run(options)));
        assert_eq!(call(""), Ok(Call::Help(Topic::All)));
        assert_eq!(call("read --help"), Ok(Call::Help(Topic::Read)));
        assert_eq!(call("list atsp/labels"), Ok(Call::List(Some("atsp/labels".to_owned()))));
        let write = WriteOptions {
            file: "a".to_owned(),
            rival: Some("B".to_owned()),
            instance: Some(2),
            form: Form::Mps,
            out: Some("b.mps".to_owned()),
            scale: None,
        };
        let line = "write a --rival b --as mps -o b.mps --instance 2";
        assert_eq!(call(line), Ok(Call::Write(write)));
        let digest = DigestOptions { file: "a".to_owned(), slice: 99, runs: 3 };
        assert_eq!(call("digest a --slice 99 --runs 3"), Ok(Call::Digest(digest)));
        let prove = ProveOptions { file: "a.log".to_owned(), json: true };
        assert_eq!(call("prove a.log --json"), Ok(Call::Prove(prove)));
    }

    #[test]
    fn wrong_words_come_with_the_nearest_right_one() {
        assert!(call("rum a").expect_err("wrong").contains("did you mean run?"));
        let refused = call("write a --as pdf").expect_err("refused");
        assert!(
            refused.contains("there are mps, tightened, latex, text, scenario, link, report"),
            "{refused}"
        );
        assert!(call("write a --as tex").expect_err("wrong").contains("did you mean text?"));
        assert!(call("run a --jsn").expect_err("wrong").contains("did you mean --json?"));
        for wrong in [
            "run",
            "run a --seconds",
            "run a --seconds -1",
            "read",
            "read a b",
            "digest a --slice 0",
            "digest a --runs x",
            "prove",
            "prove a b",
            "write a",
            "write --as mps",
            "write a --as mps --instance 0",
            "write a --as mps --scale 2",
        ] {
            assert!(call(wrong).is_err(), "{wrong}");
        }
    }
}
