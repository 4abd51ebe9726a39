//! Pivots that need no arithmetic: columns, then rows, with one active entry.
//!
//! A column singleton leaves its row to U and nothing to L; a row singleton leaves its
//! column, divided by the pivot, to L and nothing to U. Bases of modelling problems are mostly
//! triangular, so little remains.

use super::pivots::{BasisColumns, Pivots};

/// Takes every singleton of at least `singular`; returns whether anything is left open.
pub(crate) fn eliminate(columns: &BasisColumns, singular: f64, pivots: &mut Pivots) -> bool {
    let size = columns.size() as u32;
    take_columns(columns, singular, pivots);
    if pivots.diagonal.len() < size as usize {
        take_rows(columns, singular, pivots);
    }
    pivots.diagonal.len() < size as usize
}

/// Column singletons, until there are none.
fn take_columns(columns: &BasisColumns, singular: f64, pivots: &mut Pivots) {
    let size = columns.size() as u32;
    let mut count: Vec<u32> =
        (0..size).map(|position| columns.column(position).len() as u32).collect();
    let mut stack: Vec<u32> =
        (0..size).rev().filter(|&position| count[position as usize] == 1).collect();
    while let Some(position) = stack.pop() {
        let open =
            columns.column(position).iter().find(|&&(row, _)| pivots.row_is_open(row)).copied();
        let Some((row, value)) = open.filter(|&(_, value)| value.abs() >= singular) else {
            continue;
        };
        for &(other, entry) in columns.row(row) {
            if other != position && pivots.position_is_open(other) {
                pivots.push_upper(other, entry);
                count[other as usize] -= 1;
                if count[other as usize] == 1 {
                    stack.push(other);
                }
            }
        }
        pivots.close(row, position, value);
    }
}

/// Row singletons, until there are none.
fn take_rows(columns: &BasisColumns, singular: f64, pivots: &mut Pivots) {
    let size = columns.size() as u32;
    let open_entries = |row: u32, pivots: &Pivots| {
        columns.row(row).iter().filter(|&&(position, _)| pivots.position_is_open(position)).count()
    };
    let mut count: Vec<u32> = (0..size)
        .map(|row| if pivots.row_is_open(row) { open_entries(row, pivots) as u32 } else { 0 })
        .collect();
    let mut stack: Vec<u32> = (0..size).rev().filter(|&row| count[row as usize] == 1).collect();
    while let Some(row) = stack.pop() {
        let open = columns
            .row(row)
            .iter()
            .find(|&&(position, _)| pivots.position_is_open(position))
            .copied();
        let Some((position, value)) = open.filter(|&(_, value)| value.abs() >= singular) else {
            continue;
        };
        for &(other, entry) in columns.column(position) {
            if other != row && pivots.row_is_open(other) {
                pivots.push_lower(other, entry / value);
                count[other as usize] -= 1;
                if count[other as usize] == 1 {
                    stack.push(other);
                }
            }
        }
        pivots.close(row, position, value);
    }
}
