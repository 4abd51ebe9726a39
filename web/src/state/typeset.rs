//! Which row of a formulation that is set stands for a place of its text, and which rows are
//! complained of.

use record::message::CheckReport;
use record::typeset::TypesetRow;

/// The row at a caret: of those that touch the caret's line the last that begins before it.
pub(crate) fn row_at(rows: &[TypesetRow], text: &str, caret: u32) -> Option<usize> {
    let (from, to) = line(text, caret);
    let touching = rows.iter().enumerate().filter(|(_, row)| row.start <= to && row.end >= from);
    let before = touching.clone().filter(|(_, row)| row.start <= caret);
    let found = before.max_by_key(|(_, row)| row.start).or_else(|| touching.into_iter().next());
    found.map(|(place, _)| place)
}

/// Where the line of a UTF-16 unit begins and ends.
fn line(text: &str, caret: u32) -> (u32, u32) {
    let (mut from, mut unit) = (0, 0);
    for c in text.chars() {
        if c == '\n' {
            if unit >= caret {
                break;
            }
            from = unit + 1;
        }
        unit += c.len_utf16() as u32;
    }
    (from, unit)
}

/// Whether an error stands in a row.
pub(crate) fn is_wrong(row: &TypesetRow, report: &CheckReport) -> bool {
    let errors = report.remarks.iter().map(|remark| &remark.complaint).filter(|one| one.error);
    !row.unread.is_empty()
        || errors.clone().any(|one| one.start < row.end && one.end >= row.start && one.end > 0)
}

#[cfg(test)]
mod tests {
    use super::*;
    use record::message::{Complaint, Remark};

    fn row(start: u32, end: u32) -> TypesetRow {
        TypesetRow { start, end, ..TypesetRow::default() }
    }

    #[test]
    fn a_caret_is_in_the_row_of_its_line() {
        // Σ x, then two rows in a line, then one over two lines.
        let text = "𝔹 x\n a; b\nc +\n d  \n\n";
        let rows = [row(0, 4), row(6, 7), row(9, 10), row(11, 17)];
        let at = |caret: u32| row_at(&rows, text, caret);
        assert_eq!([at(0), at(3), at(4)], [Some(0); 3]);
        assert_eq!([at(5), at(6), at(8)], [Some(1); 3], "before the first row of a line: that");
        assert_eq!([at(9), at(10)], [Some(2); 2]);
        assert_eq!([at(12), at(15), at(19)], [Some(3); 3], "a remark behind the row is its own");
        assert_eq!([at(20), at(99)], [None; 2]);
        assert_eq!(row_at(&[], text, 0), None);
    }

    #[test]
    fn a_row_is_wrong_where_an_error_touches_it() {
        let remark = |error: bool, start: u32, end: u32| Remark {
            complaint: Complaint {
                error,
                code: String::new(),
                line: 1,
                column: 1,
                start,
                end,
                message: String::new(),
                mend: String::new(),
            },
            mends: Vec::new(),
        };
        let report = |remark| CheckReport { remarks: vec![remark], ..CheckReport::default() };
        assert!(is_wrong(&row(4, 9), &report(remark(true, 6, 7))));
        assert!(is_wrong(&row(4, 9), &report(remark(true, 4, 4))));
        assert!(!is_wrong(&row(4, 9), &report(remark(false, 6, 7))));
        assert!(!is_wrong(&row(4, 9), &report(remark(true, 9, 11))));
        assert!(!is_wrong(&row(0, 9), &report(remark(true, 0, 0))), "about the text as a whole");
        let unread = TypesetRow { unread: "x ≤".to_owned(), ..row(0, 3) };
        assert!(is_wrong(&unread, &CheckReport::default()));
    }
}
