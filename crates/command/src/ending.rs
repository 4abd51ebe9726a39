//! How a call ended, as its exit status.

use std::process::ExitCode;

/// The exit status of the command. Of several the worst counts: they stand in that order.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub(crate) enum Ending {
    /// 0: done.
    Done,
    /// 1: a limit stopped it; the results are printed.
    Limit,
    /// 2: the input is wrong; the reasons are on standard error.
    Wrong,
    /// 3: an internal check failed.
    Broken,
}

impl Ending {
    /// The status as a number.
    pub(crate) fn code(self) -> ExitCode {
        ExitCode::from(match self {
            Self::Done => 0,
            Self::Limit => 1,
            Self::Wrong => 2,
            Self::Broken => 3,
        })
    }
}
