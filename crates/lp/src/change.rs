//! Changes to problem and basis between solves: rows come and go, a basis is loaded.

use crate::basis::{Basis, Repair, Status};
use crate::care::ATTEMPTS;
use crate::problem::CleanRow;
use crate::state::{Core, settled};

impl Core {
    /// Appends rows; their logicals are basic.
    pub(crate) fn append_rows(&mut self, rows: &[CleanRow]) {
        let before = self.unscale();
        self.matrix.append(rows.iter().map(|row| row.entries.as_slice()));
        for row in rows {
            self.cost.push(0.0);
            self.lower.push(row.lower);
            self.upper.push(row.upper);
            self.status.push(Status::Basic);
        }
        self.scale(&before);
        self.restore_given();
        self.sort_head();
    }

    /// Keeps the rows marked true; the logicals of the others are basic.
    pub(crate) fn retain_rows(&mut self, keep: &[bool]) {
        let mut before = self.unscale();
        let n = self.columns();
        let kept = |j: usize| j < n || keep[j - n];
        let mut place = vec![0u32; self.variables()];
        let mut next = 0;
        for (j, place) in place.iter_mut().enumerate() {
            *place = next;
            next += u32::from(kept(j));
        }
        let held = self.head.iter().zip(&self.weight).filter(|(j, _)| kept(**j as usize));
        let (head, weight): (Vec<u32>, Vec<f64>) =
            held.map(|(&j, &weight)| (place[j as usize], weight)).unzip();
        self.head = head;
        self.weight = weight;
        for list in [&mut self.cost, &mut self.lower, &mut self.upper, &mut before] {
            let mut j = 0;
            list.retain(|_| {
                j += 1;
                kept(j - 1)
            });
        }
        let mut j = 0;
        self.status.retain(|_| {
            j += 1;
            kept(j - 1)
        });
        self.matrix.retain(keep);
        self.scale(&before);
        self.restore_given();
        self.sort_head();
    }

    /// Makes a basis current: unknown rows basic, as many basic variables as rows, dependent ones
    /// replaced.
    pub(crate) fn load(&mut self, basis: &Basis) -> Repair {
        let is_factorised = self.canonical && self.factor.updates() == 0;
        let (n, m) = (self.columns(), self.rows());
        if is_factorised && basis.is_of(&self.status, n) {
            self.load_current();
            return Repair::default();
        }
        let (known_columns, known_rows) =
            (basis.column_count() as usize, basis.row_count() as usize);
        for j in 0..n + m {
            self.status[j] = if j < n && j < known_columns {
                basis.status(j)
            } else if j < n {
                Status::Lower
            } else if j - n < known_rows {
                basis.status(known_columns + j - n)
            } else {
                Status::Basic
            };
        }
        self.restore_given();
        self.settle_statuses();
        let mut repair =
            Repair { new_rows: m.saturating_sub(known_rows) as u32, dropped: 0, inserted: 0 };
        self.balance(&mut repair);
        let before = std::mem::take(&mut self.head);
        self.sort_head();
        if is_factorised && before == self.head {
            // other statuses out of the basis, the same factors
            self.canonical = true;
            self.count_factorisation();
        }
        let replaced = self.refactor_first();
        repair.dropped += replaced;
        repair.inserted += replaced;
        repair
    }

    /// Loads the basis that is current, a node right after its parent: the factors are there, and count
    /// as made, so that what came before a loading shows nowhere.
    fn load_current(&mut self) {
        self.care = ATTEMPTS[0];
        self.restore_given();
        self.settle_statuses();
        self.weight.fill(1.0);
        self.count_factorisation();
    }

    /// Makes as many variables basic as there are rows: too many leave from the last column,
    /// missing ones are logicals.
    fn balance(&mut self, repair: &mut Repair) {
        let (n, m) = (self.columns(), self.rows());
        let mut count = self.status.iter().filter(|status| **status == Status::Basic).count();
        for j in (0..n).rev().chain((n..n + m).rev()) {
            if count > m && self.status[j] == Status::Basic {
                self.status[j] = settled(Status::Lower, self.work_lower[j], self.work_upper[j]);
                count -= 1;
                repair.dropped += 1;
            }
        }
        for j in n..n + m {
            if count < m && self.status[j] != Status::Basic {
                self.status[j] = Status::Basic;
                count += 1;
                repair.inserted += 1;
            }
        }
    }

    /// True when no value is within a variable's given bounds.
    pub(crate) fn has_empty_range(&self, j: usize) -> bool {
        self.lower[j] > self.upper[j]
            || self.lower[j] == f64::INFINITY
            || self.upper[j] == f64::NEG_INFINITY
    }
}
