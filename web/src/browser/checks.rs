//! Checks of formulations that are under way: one a lane, known by its number, so that a late
//! answer finds nobody.

use record::message::{CheckJob, CheckReport, Complaint, Remark};
use yew::Callback;

use crate::state::lane::LaneId;

/// The checks.
#[derive(Debug, Default)]
pub(crate) struct Checks {
    next: u32,
    waiting: Vec<(LaneId, u32, Callback<CheckReport>)>,
}

impl Checks {
    /// Begins a check for a lane in place of its last one: the job with its number.
    pub(crate) fn begin(
        &mut self,
        id: LaneId,
        job: CheckJob,
        hear: Callback<CheckReport>,
    ) -> CheckJob {
        self.next = self.next.wrapping_add(1);
        self.waiting.retain(|(lane, ..)| *lane != id);
        self.waiting.push((id, self.next, hear));
        CheckJob { number: self.next, ..job }
    }

    /// Who waits for the answer with this number, if anyone still does.
    pub(crate) fn end(&mut self, number: u32) -> Option<Callback<CheckReport>> {
        let place = self.waiting.iter().position(|(_, waiting, _)| *waiting == number)?;
        Some(self.waiting.swap_remove(place).2)
    }

    /// All who wait, for whom no answer will come.
    pub(crate) fn end_all(&mut self) -> Vec<Callback<CheckReport>> {
        std::mem::take(&mut self.waiting).into_iter().map(|(.., hear)| hear).collect()
    }
}

/// What is said when a check failed.
pub(crate) fn unchecked(why: &str) -> CheckReport {
    let complaint = Complaint {
        error: true,
        code: "unchecked".to_owned(),
        line: 1,
        column: 1,
        start: 0,
        end: 0,
        message: format!("the text could not be checked: {why}"),
        mend: String::new(),
    };
    let remarks = vec![Remark { complaint, mends: Vec::new() }];
    CheckReport { remarks, ..CheckReport::default() }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn only_the_last_check_of_a_lane_is_answered() {
        let mut checks = Checks::default();
        let mut begin =
            |lane: u32| checks.begin(LaneId(lane), CheckJob::default(), Callback::noop()).number;
        let (first, other, last) = (begin(1), begin(2), begin(1));
        assert!(checks.end(first).is_none());
        assert!(checks.end(last).is_some() && checks.end(other).is_some());
        assert!(checks.end(last).is_none());
    }

    #[test]
    fn who_waits_in_vain_hears_of_an_error() {
        let mut checks = Checks::default();
        checks.begin(LaneId(1), CheckJob::default(), Callback::noop());
        assert_eq!((checks.end_all().len(), checks.end_all().len()), (1, 0));
        assert!(!unchecked("it broke").is_sound());
    }
}
