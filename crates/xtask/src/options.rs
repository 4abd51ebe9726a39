//! The command line: `cargo xtask <task> [options]`.

use crate::fault::Fault;

/// What the command can do, as printed by `cargo xtask help`.
pub(crate) const USAGE: &str = "\
cargo xtask page [--port P] [--no-serve]   build the page into web/dist, then serve it
cargo xtask serve [--port P]               serve web/dist as it is
cargo xtask test [--only PART]...          what CI runs; PART: native, counts, page, browser, firefox, reference
cargo xtask counts [--write]               instructions of fixed solves against the list of them
cargo xtask bench lp [--quick] ...         speed of the linear programs; `bench help` says more
cargo xtask bench expand                  time and memory of two million non-zeros beside their MPS text
cargo xtask bench tree [--quick] ...       speed of searches beside microlp and HiGHS
cargo xtask bench wasm                     the built page's engine under Node against the native one

--port P      the port on 127.0.0.1 (8080; 0 takes any free one)
--no-serve    build only
--only PART   this part only; may be repeated";

const DEFAULT_PORT: u16 = 8080;

/// What to do.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) enum Task {
    /// Print [`USAGE`].
    Help,
    /// Build the page and, unless told not to, serve it.
    Page {
        /// The port to serve on.
        port: u16,
        /// Whether to serve.
        serve: bool,
    },
    /// Serve the page as it was built.
    Serve {
        /// The port to serve on.
        port: u16,
    },
    /// Run the checks.
    Test {
        /// The parts to run, in their order.
        only: Vec<Part>,
    },
    /// Count instructions.
    Counts {
        /// Whether to write the list anew.
        write: bool,
    },
    /// Measure speed.
    Bench {
        /// What to measure, as tests/bench reads it.
        arguments: Vec<String>,
    },
}

/// A part of the checks.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub(crate) enum Part {
    /// Format, lint, documentation and tests of everything that builds natively.
    Native,
    /// Instructions of fixed solves against the list of them.
    Counts,
    /// The page, its size, and its engine under Node against the native one.
    Page,
    /// The built page in Chromium.
    Browser,
    /// The same page and tests in Firefox, where it can be had.
    Firefox,
    /// Against published values and independent solvers.
    Reference,
}

impl Part {
    /// All parts, quick ones first.
    pub(crate) const ALL: [Part; 6] =
        [Part::Native, Part::Counts, Part::Page, Part::Browser, Part::Firefox, Part::Reference];

    fn named(name: &str) -> Result<Part, Fault> {
        match name {
            "native" => Ok(Part::Native),
            "counts" => Ok(Part::Counts),
            "page" => Ok(Part::Page),
            "browser" => Ok(Part::Browser),
            "firefox" => Ok(Part::Firefox),
            "reference" => Ok(Part::Reference),
            other => Err(Fault::new(format!(
                "there is no part {other:?}; the parts are native, counts, page, browser, firefox \
                 and reference"
            ))),
        }
    }
}

/// Reads the arguments after `cargo xtask`.
pub(crate) fn parse(arguments: &[String]) -> Result<Task, Fault> {
    let Some((task, rest)) = arguments.split_first() else {
        return Ok(Task::Help);
    };
    if task == "bench" {
        return Ok(Task::Bench { arguments: rest.to_vec() });
    }
    let mut rest = rest.iter().map(String::as_str);
    let parsed = match task.as_str() {
        "help" | "--help" | "-h" => Task::Help,
        "page" => page(&mut rest)?,
        "serve" => serve(&mut rest)?,
        "test" => test(&mut rest)?,
        "counts" => counts(&mut rest)?,
        other => return Err(Fault::new(format!("there is no task {other:?}\n\n{USAGE}"))),
    };
    match rest.next() {
        Some(extra) => Err(Fault::new(format!("{extra:?} is not understood\n\n{USAGE}"))),
        None => Ok(parsed),
    }
}

fn page<'a>(rest: &mut impl Iterator<Item = &'a str>) -> Result<Task, Fault> {
    let (mut port, mut serve) = (DEFAULT_PORT, true);
    while let Some(option) = rest.next() {
        match option {
            "--port" => port = read_port(rest.next())?,
            "--no-serve" => serve = false,
            other => return Err(unknown(other, "page")),
        }
    }
    Ok(Task::Page { port, serve })
}

fn serve<'a>(rest: &mut impl Iterator<Item = &'a str>) -> Result<Task, Fault> {
    let mut port = DEFAULT_PORT;
    while let Some(option) = rest.next() {
        match option {
            "--port" => port = read_port(rest.next())?,
            other => return Err(unknown(other, "serve")),
        }
    }
    Ok(Task::Serve { port })
}

fn test<'a>(rest: &mut impl Iterator<Item = &'a str>) -> Result<Task, Fault> {
    let mut only = Vec::new();
    while let Some(option) = rest.next() {
        match option {
            "--only" => match rest.next() {
                Some(name) => only.push(Part::named(name)?),
                None => return Err(Fault::new("--only needs the name of a part")),
            },
            other => return Err(unknown(other, "test")),
        }
    }
    if only.is_empty() {
        only.extend(Part::ALL);
    }
    only.sort_unstable();
    only.dedup();
    Ok(Task::Test { only })
}

fn counts<'a>(rest: &mut impl Iterator<Item = &'a str>) -> Result<Task, Fault> {
    match rest.next() {
        None => Ok(Task::Counts { write: false }),
        Some("--write") => Ok(Task::Counts { write: true }),
        Some(other) => Err(unknown(other, "counts")),
    }
}

fn read_port(text: Option<&str>) -> Result<u16, Fault> {
    let text = text.ok_or_else(|| Fault::new("--port needs a number"))?;
    text.parse()
        .map_err(|_| Fault::new(format!("{text:?} is not a port: a whole number from 0 to 65535")))
}

fn unknown(option: &str, task: &str) -> Fault {
    Fault::new(format!("`cargo xtask {task}` has no option {option:?}\n\n{USAGE}"))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn read(line: &str) -> Result<Task, Fault> {
        let arguments: Vec<String> = line.split_whitespace().map(String::from).collect();
        parse(&arguments)
    }

    #[test]
    fn tasks_and_their_options() {
        assert_eq!(read(""), Ok(Task::Help));
        assert_eq!(read("page"), Ok(Task::Page { port: 8080, serve: true }));
        assert_eq!(read("page --no-serve"), Ok(Task::Page { port: 8080, serve: false }));
        assert_eq!(read("page --port 0"), Ok(Task::Page { port: 0, serve: true }));
        assert_eq!(read("serve --port 9000"), Ok(Task::Serve { port: 9000 }));
        let words = ["lp", "--quick"].map(String::from).to_vec();
        assert_eq!(read("bench lp --quick"), Ok(Task::Bench { arguments: words }));
        assert_eq!(read("test"), Ok(Task::Test { only: Part::ALL.to_vec() }));
    }

    #[test]
    fn parts_run_in_their_order_and_once() {
        let task = read("test --only browser --only native --only browser");
        assert_eq!(task, Ok(Task::Test { only: vec![Part::Native, Part::Browser] }));
    }

    #[test]
    fn what_is_not_understood_is_said() {
        assert_eq!(read("counts --write"), Ok(Task::Counts { write: true }));
        for line in [
            "pages",
            "counts --wirte",
            "page --prot 1",
            "page --port",
            "page --port 70000",
            "test --only x",
        ] {
            assert!(read(line).is_err(), "{line}");
        }
        let Err(fault) = read("test --only x") else { panic!("accepted") };
        assert!(fault.to_string().contains("browser, firefox and reference"));
    }
}
