//! Speed of linear programs and searches beside HiGHS and microlp, by one protocol.
//!
//! Everyone solves the same problems in a random interleaved order on the thread's CPU time; a
//! sample is a loop of at least 50 ms; figures are ratios of medians, of a class their geometric
//! mean with a bootstrap interval. Ours runs twice under two names: when the two differ by more
//! than 5 %, the machine was not quiet enough and the class is void.

#![allow(clippy::print_stdout, clippy::print_stderr, reason = "a tool: it speaks to the terminal")]
#![allow(clippy::unwrap_used, clippy::panic, reason = "what cannot be measured ends the run")]

mod arguments;
mod children;
mod classes;
mod clock;
mod growth;
mod highs_peer;
mod instructions;
mod presolved;
mod problems;
mod proofs;
mod roots;
mod sampling;
mod shadow;
mod solvers;
mod statistics;
mod subtours;
mod table;
mod trees;

#[path = "../../../crates/lp/tests/suite/instances.rs"]
mod instances;
#[path = "../../../crates/lp/tests/suite/random.rs"]
#[expect(dead_code, reason = "the tests of the kernel draw in more ways")]
mod random;

use arguments::{Arguments, Part};
use std::process::ExitCode;

fn main() -> ExitCode {
    let words: Vec<String> = std::env::args().skip(1).collect();
    match arguments::parse(&words) {
        Ok(arguments) => {
            carry_out(&arguments);
            ExitCode::SUCCESS
        }
        Err(message) => {
            eprintln!("error: {message}\n\n{}", arguments::USAGE);
            ExitCode::FAILURE
        }
    }
}

fn carry_out(arguments: &Arguments) {
    match &arguments.part {
        Part::Help => println!("{}", arguments::USAGE),
        Part::Once { problem, seed, who } => instructions::once(problem, *seed, *who),
        Part::Trees => trees::run(arguments),
        Part::Tables(parts) => {
            if !arguments.words().is_empty() {
                println!("seeds beside 1, for another run: --seeds {}\n", arguments.words());
            }
            if parts.roots {
                roots::run(arguments);
            }
            if parts.children {
                children::run(arguments);
            }
            if parts.subtours {
                subtours::run(arguments);
            }
            if parts.presolved {
                presolved::run(arguments);
            }
            if parts.proofs {
                proofs::run(arguments);
            }
            if parts.growth {
                growth::run();
            }
            if parts.instructions {
                instructions::run(arguments);
            }
        }
    }
}
