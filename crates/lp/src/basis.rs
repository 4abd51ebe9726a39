//! Where each variable stands, and the snapshot of it: two bits a variable.

/// Where a variable (a column or a row's logical) stands.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Status {
    /// Basic: its value follows from the others.
    Basic,
    /// At its lower bound.
    Lower,
    /// At its upper bound.
    Upper,
    /// Without bounds and out of the basis: at zero.
    Free,
}

impl Status {
    fn code(self) -> u8 {
        match self {
            Self::Basic => 0,
            Self::Lower => 1,
            Self::Upper => 2,
            Self::Free => 3,
        }
    }

    fn of_code(code: u8) -> Self {
        match code & 3 {
            0 => Self::Basic,
            1 => Self::Lower,
            2 => Self::Upper,
            _ => Self::Free,
        }
    }
}

/// A basis: for each column and each row whether it is basic, at its lower or upper bound, or free
/// at zero.
///
/// Two bits a variable. It can be loaded into a problem with other bounds or further rows.
#[derive(Clone, Debug, PartialEq, Eq, PartialOrd, Ord, Hash, Default)]
pub struct Basis {
    columns: u32,
    rows: u32,
    packed: Vec<u8>,
}

impl Basis {
    /// Packs the statuses, columns before rows.
    pub(crate) fn pack(status: &[Status], columns: usize) -> Self {
        let packed = status.chunks(4).map(packed).collect();
        Self { columns: columns as u32, rows: (status.len() - columns) as u32, packed }
    }

    /// Whether these are the statuses, columns before rows.
    pub(crate) fn is_of(&self, status: &[Status], columns: usize) -> bool {
        (self.columns as usize, (self.columns + self.rows) as usize) == (columns, status.len())
            && status.chunks(4).zip(&self.packed).all(|(four, &byte)| packed(four) == byte)
    }

    /// The packed statuses.
    pub(crate) fn packed(&self) -> &[u8] {
        &self.packed
    }

    /// A basis of packed statuses.
    pub(crate) fn of_packed(packed: Vec<u8>, columns: u32, rows: u32) -> Self {
        Self { columns, rows, packed }
    }

    /// The status of a variable, columns before rows.
    pub(crate) fn status(&self, variable: usize) -> Status {
        Status::of_code(self.packed.get(variable / 4).copied().unwrap_or(0) >> (2 * (variable % 4)))
    }

    /// Number of columns.
    #[must_use]
    pub fn column_count(&self) -> u32 {
        self.columns
    }

    /// Number of rows.
    #[must_use]
    pub fn row_count(&self) -> u32 {
        self.rows
    }

    /// True when a column is basic.
    #[must_use]
    pub fn is_basic_column(&self, column: u32) -> bool {
        column < self.columns && self.status(column as usize) == Status::Basic
    }

    /// True when a column is out of the basis at its upper bound.
    #[must_use]
    pub fn is_upper_column(&self, column: u32) -> bool {
        column < self.columns && self.status(column as usize) == Status::Upper
    }

    /// True when a row is held at its upper side.
    #[must_use]
    pub fn is_upper_row(&self, row: u32) -> bool {
        row < self.rows && self.status((self.columns + row) as usize) == Status::Upper
    }

    /// True when the logical of a row is basic: the row is not active.
    #[must_use]
    pub fn is_basic_row(&self, row: u32) -> bool {
        row < self.rows && self.status((self.columns + row) as usize) == Status::Basic
    }
}

/// Four statuses, or fewer at the end, in a byte.
fn packed(four: &[Status]) -> u8 {
    four.iter().rev().fold(0, |byte, status| byte << 2 | status.code())
}

/// What was mended when a basis was loaded.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Default)]
pub struct Repair {
    /// Rows the basis did not know; their logicals became basic.
    pub new_rows: u32,
    /// Variables that left the basis because there were too many or they were dependent.
    pub dropped: u32,
    /// Logicals that entered the basis in place of missing or dependent variables.
    pub inserted: u32,
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn packing_keeps_every_status() {
        let all = [
            Status::Upper,
            Status::Basic,
            Status::Free,
            Status::Lower,
            Status::Upper,
            Status::Basic,
            Status::Free,
        ];
        let basis = Basis::pack(&all, 4);
        assert_eq!((basis.column_count(), basis.row_count(), basis.packed.len()), (4, 3, 2));
        assert!((0..7).all(|i| basis.status(i) == all[i]));
        assert!(basis.is_of(&all, 4) && !basis.is_of(&all, 3) && !basis.is_of(&all[..6], 4));
        for i in 0..7 {
            let mut other = all;
            other[i] = if all[i] == Status::Lower { Status::Upper } else { Status::Lower };
            assert!(!basis.is_of(&other, 4), "{i}");
        }
        assert!(basis.is_basic_column(1) && basis.is_basic_row(1) && !basis.is_basic_column(5));
        assert!(basis.is_upper_column(0) && basis.is_upper_row(0) && !basis.is_upper_column(4));
    }
}
