//! `cargo xtask`: builds, serves and tests what one `cargo` command cannot.
//!
//! The page needs two wasm modules, a bundler and, where rustup has no wasm target, another
//! compiler; the browser checks need a browser; the reference checks need a C++ tool chain. Each
//! step says what it does and how long it took; what lacks is installed, or the line to type is
//! said.
#![allow(
    clippy::print_stdout,
    clippy::print_stderr,
    reason = "a tool for whoever develops: it speaks to the terminal"
)]

mod bench;
mod bundle;
mod check;
mod compiler;
mod counts;
mod fault;
mod html;
mod options;
mod pack;
mod packages;
mod parity;
mod process;
mod serve;
mod streams;
mod wasm;
mod workplace;

use std::process::ExitCode;

use fault::Fault;
use options::Task;
use workplace::Workplace;

fn main() -> ExitCode {
    let arguments: Vec<String> = std::env::args().skip(1).collect();
    match options::parse(&arguments).and_then(|task| carry_out(&task)) {
        Ok(()) => ExitCode::SUCCESS,
        Err(fault) => {
            eprintln!("\nerror: {fault}");
            ExitCode::FAILURE
        }
    }
}

fn carry_out(task: &Task) -> Result<(), Fault> {
    let place = Workplace::find()?;
    match task {
        Task::Help => {
            println!("{}", options::USAGE);
            Ok(())
        }
        Task::Page { port, serve } => {
            bundle::build(&place)?;
            if *serve { serve::serve(&place.dist(), *port) } else { Ok(()) }
        }
        Task::Serve { port } => serve::serve(&place.dist(), *port),
        Task::Test { only } => check::run_parts(&place, only),
        Task::Counts { write } => counts::check(&place, *write),
        Task::Bench { arguments } if arguments.first().is_some_and(|word| word == "wasm") => {
            wasm::measure(&place)
        }
        Task::Bench { arguments } => bench::measure(&place, arguments),
    }
}
