//! Our root beside what a second LP code says of the same relaxation: whether they agree, and
//! which of them the exact check supports where they do not.
//!
//! The two numbers are never mixed: the root's bound is always ours. Two values agree when they
//! differ by at most 1e-6 of the larger, and by at most 1e-6 where both are below 1. Where they
//! do not, what was proved in exact arithmetic decides, as far as it can:
//!
//! | ours | the second says | what a checked root decides |
//! |---|---|---|
//! | a bound | a weaker bound, or none at all | it is wrong: our bound is proved |
//! | a bound | a stronger bound, or no point | nothing: ours holds, but the truth may be stronger |
//! | the optimum, proved as such | anything else | it is wrong: bound and point are proved |
//! | no point | a value, or no bound | it is wrong: that there is no point is proved |

use record::opinion::Opinion;
use record::results::{Proof, RootReport, Status};

use crate::number::{full, short};

/// Two values agree within this share of the larger of them, or of 1.
const NEAR: f64 = 1e-6;

/// How an opinion stands to our root.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Verdict {
    /// Both say the same.
    Agrees,
    /// They do not, and the exact check proves that the second is wrong.
    Refuted,
    /// They do not, and the exact check does not decide between them.
    Undecided,
    /// There is nothing to compare.
    Silent,
}

/// Compares a root with an opinion on its relaxation.
#[must_use]
pub fn verdict(root: &RootReport, maximise: bool, opinion: &Opinion) -> Verdict {
    let settled = |refuted: bool| {
        let proved = root.checked && (refuted || root.proof == Proof::Exact);
        if proved { Verdict::Refuted } else { Verdict::Undecided }
    };
    match (root.status, root.bound, opinion) {
        (_, _, Opinion::Silent(_)) | (Status::Limit | Status::Error, _, _) => Verdict::Silent,
        (Status::Optimal, Some(ours), Opinion::Optimal(theirs)) => {
            if near(ours, *theirs) {
                Verdict::Agrees
            } else {
                settled(if maximise { *theirs > ours } else { *theirs < ours })
            }
        }
        (Status::Infeasible, _, Opinion::Infeasible)
        | (Status::Unbounded, _, Opinion::Unbounded) => Verdict::Agrees,
        (Status::Optimal, _, Opinion::Unbounded) | (Status::Infeasible, _, _) => settled(true),
        (Status::Optimal, _, Opinion::Infeasible) => settled(false),
        (Status::Optimal | Status::Unbounded, _, _) => Verdict::Undecided,
    }
}

/// The comparison in a sentence without a stop.
#[must_use]
pub fn words(root: &RootReport, maximise: bool, opinion: &Opinion) -> String {
    match verdict(root, maximise, opinion) {
        Verdict::Agrees => format!("a second LP code agrees: {}", said(opinion, short)),
        Verdict::Silent => match opinion {
            Opinion::Silent(why) => format!("no second opinion: {why}"),
            _ => "no second opinion: the root was not solved".to_owned(),
        },
        Verdict::Refuted => {
            format!("{}. The exact check supports {}", disagreement(root, opinion), ours(root))
        }
        Verdict::Undecided => format!("{}. {}", disagreement(root, opinion), undecided(root)),
    }
}

/// A value to nine significant digits: more than that is not compared, and may differ between
/// machines, for the second code uses functions that do.
#[must_use]
pub fn nine_digits(value: f64) -> f64 {
    format!("{value:.8e}").parse().unwrap_or(value)
}

fn disagreement(root: &RootReport, opinion: &Opinion) -> String {
    let theirs = said(opinion, |value| full(nine_digits(value)));
    format!("a second LP code disagrees: {theirs}, against {} here", ours(root))
}

fn near(ours: f64, theirs: f64) -> bool {
    let size = [ours.abs(), theirs.abs()].into_iter().fold(1.0, |a, b| if b > a { b } else { a });
    (ours - theirs).abs() <= NEAR * size
}

fn said(opinion: &Opinion, number: fn(f64) -> String) -> String {
    match opinion {
        Opinion::Optimal(value) => number(*value),
        Opinion::Infeasible => "no point".to_owned(),
        Opinion::Unbounded => "no bound".to_owned(),
        Opinion::Silent(why) => why.clone(),
    }
}

fn ours(root: &RootReport) -> String {
    match (root.status, root.bound) {
        (Status::Infeasible, _) => "no point".to_owned(),
        (Status::Unbounded, _) | (_, None) => "no bound".to_owned(),
        (_, Some(bound)) => full(nine_digits(bound)),
    }
}

fn undecided(root: &RootReport) -> &'static str {
    if root.checked {
        "The exact check proves ours as a bound and does not rule the other out"
    } else {
        "The exact check decides for neither"
    }
}

#[cfg(test)]
mod tests;
