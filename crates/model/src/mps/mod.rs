//! MPS: models of others read exactly, and ours written so that others read the same.
//!
//! MPS is a punched-card format without one standard (its first description is that of the
//! Mathematical Programming System/360; Murtagh, *Advanced Linear Programming*, McGraw-Hill
//! 1981, chapter 9, prints it). Where readers disagree, [`read()`] takes what most take today,
//! and says so by a warning whenever it matters:
//!
//! | where readers disagree | the reading here | code |
//! |---|---|---|
//! | an upper bound under 0, no lower bound | the lower bound is −∞ | `negative-upper` |
//! | an upper bound of 0, no lower bound | the lower bound stays 0 | `zero-upper` |
//! | a column between markers without a bound line | 0 to 1 | `unbounded-integer` |
//! | `MI` without an upper bound | the upper bound is +∞ | `minus-infinity` |
//! | the RHS of the objective row | minus the constant of the objective | `objective-constant` |
//! | RANGES on an `E` row | R > 0: rhs to rhs + R; R < 0: rhs − \|R\| to rhs | `range-on-equation` |
//! | a bound or RHS of 10²⁰ or more | infinite | `large-is-infinite` |
//! | a second entry of a column in one row | the two are added up | `entry-again` |
//! | a second value of one bound, side or range | the later one | `value-again` |
//! | further sets of RHS, RANGES or BOUNDS | the first set only | `further-set` |
//! | further `N` rows | left out | `free-row` |
//!
//! RANGES on an `L` row give rhs − |R| to rhs, on a `G` row rhs to rhs + |R|. The order of bound
//! lines does not matter, except that a later value of the same bound replaces an earlier one.
//! Semi-continuous bounds, special ordered sets, quadratic and other sections are refused.
//!
//! Lines are read as words between blanks. When that fails, the text is read by the columns of
//! the cards (2-3, 5-12, 15-22, 25-36, 40-47, 50-61), in which names may hold blanks; if that
//! succeeds, the warning `fixed-columns` says so.
//!
//! Names of the form `x[Ash,Birch]` or `x(Ash,Birch)` become a variable (or a family) and an
//! index tuple, columns and rows of one variable or family being brought together; any other
//! name is a variable or a family without index. [`write()`] writes names in the first form.

mod bounds;
mod complaint;
mod draft;
mod finish;
mod line;
mod name;
mod number;
mod read;
mod section;
#[cfg(test)]
mod tests;
mod trap;
mod write;

pub use complaint::{Complaint, Severity};
pub(crate) use complaint::{excerpt, grouped, plural};
pub use read::{MOST_BYTES, MOST_ENTRIES, read};
pub use write::{WriteError, Written, write};
