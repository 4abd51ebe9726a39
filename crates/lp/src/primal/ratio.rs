//! The primal ratio test in two passes.
//!
//! The entering variable moves by t; basic values change by −t α (times the direction). The first
//! pass finds how far it can go when every bound may be overstepped by a tolerance; the second
//! takes the largest |α_i| among those that block within that distance. A boxed entering variable
//! may reach its own other bound first.
//!
//! Source: Harris 1973.

use crate::state::Core;
use crate::tolerances::HARRIS_PRIMAL;

/// What stops the entering variable.
#[derive(Clone, Copy, Debug)]
pub(crate) enum Block {
    /// Nothing.
    None,
    /// Its own other bound.
    Flip { length: f64 },
    /// The basic variable at a position.
    Leave { position: u32, length: f64 },
}

/// Runs the test for the column in `scratch.column`.
pub(crate) fn block(core: &Core, entering: u32, direction: f64) -> Block {
    let least = core.care.least_entry(core.scratch.column.largest());
    let mut reach = f64::INFINITY;
    let blocking = || core.scratch.column.iter().filter(|(_, alpha)| alpha.abs() > least);
    for (position, alpha) in blocking() {
        let length = room(core, position, direction * alpha, HARRIS_PRIMAL);
        if length < reach {
            reach = length;
        }
    }
    let own = core.work_upper[entering as usize] - core.work_lower[entering as usize];
    let mut best: Option<(u32, f64, f64)> = None;
    for (position, alpha) in blocking() {
        let length = room(core, position, direction * alpha, 0.0);
        let better = best.is_none_or(|held| {
            alpha.abs() > held.2 || (alpha.abs() == held.2 && position < held.0)
        });
        if length <= reach && length < f64::INFINITY && better {
            best = Some((position, length, alpha.abs()));
        }
    }
    match best {
        Some((position, length, _)) if length < own => {
            Block::Leave { position, length: if length > 0.0 { length } else { 0.0 } }
        }
        _ if own < f64::INFINITY => Block::Flip { length: own },
        _ => Block::None,
    }
}

/// How far the entering variable can go before the basic variable at a position oversteps a bound
/// by `slack`; the basic variable falls at `rate`.
fn room(core: &Core, position: u32, rate: f64, slack: f64) -> f64 {
    let value = core.basic[position as usize];
    let j = core.head[position as usize] as usize;
    if rate > 0.0 {
        (value - core.work_lower[j] + slack) / rate
    } else {
        (core.work_upper[j] - value + slack) / -rate
    }
}
