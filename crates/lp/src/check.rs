//! The invariants of the state, checked in debug builds at every evaluation.

use crate::basis::Status;
use crate::state::{Core, settled};

impl Core {
    /// Says which invariant is broken, if any: lengths, head against statuses, statuses against
    /// bounds, the two copies of the matrix against each other. Work: the nonzeros.
    pub(crate) fn check(&self) -> Result<(), String> {
        let (variables, rows) = (self.variables(), self.rows());
        let by_variable = [
            &self.cost,
            &self.lower,
            &self.upper,
            &self.work_cost,
            &self.work_lower,
            &self.work_upper,
        ];
        if variables != self.columns() + rows
            || by_variable.iter().any(|list| list.len() != variables)
        {
            return Err(format!("{variables} variables, but an array of another length"));
        }
        let by_position = [&self.basic, &self.weight, &self.violation];
        if self.head.len() != rows || by_position.iter().any(|list| list.len() != rows) {
            return Err(format!(
                "{rows} rows, but {} basic variables or an array of another length",
                self.head.len()
            ));
        }
        let basic = self.status.iter().filter(|status| **status == Status::Basic).count();
        if basic != rows || self.head.iter().any(|&j| self.status[j as usize] != Status::Basic) {
            return Err("head and statuses disagree".to_owned());
        }
        if self.canonical && !self.head.is_sorted() {
            return Err("the canonical head is not sorted".to_owned());
        }
        let fits = |j: usize| {
            self.status[j] == Status::Basic
                || self.status[j] == settled(self.status[j], self.work_lower[j], self.work_upper[j])
        };
        if let Some(j) = (0..variables).find(|&j| !fits(j)) {
            return Err(format!("variable {j} stands at a bound it does not have"));
        }
        self.check_violated()?;
        self.matrix.check()
    }

    /// The list of violated positions has each at most once.
    fn check_violated(&self) -> Result<(), String> {
        let listed = self.is_listed.iter().filter(|listed| **listed).count();
        let marked = self.violated.iter().all(|&position| self.is_listed[position as usize]);
        if listed == self.violated.len() && marked {
            Ok(())
        } else {
            Err("the list of violated positions and its marks disagree".to_owned())
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::problem::Problem;

    /// x + y ≥ 3, x ≤ y, 0 ≤ x ≤ 2, 0 ≤ y, with its slack basis.
    fn sound() -> Core {
        let mut problem = Problem::new();
        let x = problem.add_column(1.0, 0.0, 2.0).unwrap();
        let y = problem.add_column(2.0, 0.0, f64::INFINITY).unwrap();
        problem.add_row(&[(x, 1.0), (y, 1.0)], 3.0, f64::INFINITY).unwrap();
        problem.add_row(&[(x, 1.0), (y, -1.0)], f64::NEG_INFINITY, 0.0).unwrap();
        let mut core = Core::new(problem);
        core.refactor_canonical();
        core.compute_basic();
        core
    }

    /// What `check` says once `harm` was done.
    fn complaint(harm: fn(&mut Core)) -> String {
        let mut core = sound();
        assert_eq!(core.check(), Ok(()));
        harm(&mut core);
        core.check().unwrap_err()
    }

    /// What breaks an invariant, and a word of what is then said.
    type Harm = (fn(&mut Core), &'static str);

    #[test]
    fn each_broken_invariant_is_named() {
        let harms: [Harm; 7] = [
            (|core| core.work_cost.push(0.0), "an array of another length"),
            (|core| core.weight.push(1.0), "2 rows, but"),
            (|core| core.status[0] = Status::Basic, "head and statuses disagree"),
            (|core| core.head[0] = 0, "head and statuses disagree"),
            (|core| core.status[1] = Status::Upper, "variable 1 stands at a bound"),
            (|core| core.is_listed.fill(false), "the list of violated positions"),
            (|core| core.head.swap(0, 1), "the canonical head is not sorted"),
        ];
        for (harm, words) in harms {
            let said = complaint(harm);
            assert!(said.contains(words), "{said:?} where {words:?} was meant");
        }
    }
}
