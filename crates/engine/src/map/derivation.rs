//! General cuts with their derivations, from a search into a log and back for an audit.

use std::collections::BTreeSet;

use model::{ColumnId, Number, Row};
use record::derivation::{self as told, Cuts, FoundCut};
use separate::general::{Class, Derivation, GeneralCut, Literal, Used};
use tree::Source;

use super::ground::{found_row, row_of};

/// The longest number of a cut, in characters.
const LONGEST: usize = 10_000;

/// What a log holds of the cuts.
pub(super) fn cuts(sources: &[Source], cuts: &[GeneralCut]) -> Cuts {
    let source = |source: &Source| match source {
        Source::Row(row) => told::Source::Row(found_row(row)),
        Source::Cut(place) => told::Source::Cut(number(*place)),
    };
    let cut = |cut: &GeneralCut| FoundCut {
        class: cut.class.word().to_owned(),
        entries: cut.row.entries.iter().map(|(column, a)| (column.0, a.to_string())).collect(),
        side: cut.row.upper.as_ref().map_or_else(String::new, Number::to_string),
        derivation: derivation(&cut.derivation),
    };
    Cuts { sources: sources.iter().map(source).collect(), cuts: cuts.iter().map(cut).collect() }
}

fn derivation(from: &Derivation) -> told::Derivation {
    match from {
        Derivation::Rounding { sum, divisor, upper } => told::Derivation::Rounding {
            sum: sum.iter().map(|(row, y)| (used(*row), y.to_string())).collect(),
            divisor: divisor.to_string(),
            upper: upper.iter().map(|column| column.0).collect(),
        },
        Derivation::Knapsack(row) => told::Derivation::Knapsack(used(*row)),
        Derivation::Conflicts { cycle, hubs, witnesses } => told::Derivation::Conflicts {
            cycle: cycle.iter().map(literal).collect(),
            hubs: hubs.iter().map(literal).collect(),
            witnesses: witnesses.iter().map(|row| used(*row)).collect(),
        },
        Derivation::Cases { split, proofs } => told::Derivation::Cases {
            split: split.iter().map(|column| column.0).collect(),
            proofs: proofs.iter().map(|rows| combination(rows)).collect(),
        },
        Derivation::Paths { arcs, pairs, cycles } => told::Derivation::Paths {
            arcs: arcs.iter().map(|arc| (number(arc.0), number(arc.1), arc.2.0)).collect(),
            pairs: pairs
                .iter()
                .map(|pair| (number(pair.0), number(pair.1), used(pair.2)))
                .collect(),
            cycles: cycles
                .iter()
                .map(|(arcs, rows)| {
                    (arcs.iter().map(|&place| number(place)).collect(), combination(rows))
                })
                .collect(),
        },
    }
}

fn used(row: Used) -> told::Used {
    (number(row.row), row.upper)
}

fn literal(literal: &Literal) -> told::Literal {
    (literal.column.0, literal.plain)
}

fn combination(rows: &[(usize, Number)]) -> told::Combination {
    rows.iter().map(|(row, y)| (number(*row), y.to_string())).collect()
}

fn number(place: usize) -> u32 {
    u32::try_from(place).unwrap_or(u32::MAX)
}

/// The cuts of a log over a model with so many columns.
///
/// # Errors
/// What is no cut, as a sentence.
pub(super) fn cuts_of(
    given: &Cuts,
    columns: usize,
) -> Result<(Vec<Source>, Vec<GeneralCut>), String> {
    let reading = Reading { columns };
    let sources = given.sources.iter().map(|source| match source {
        told::Source::Row(row) => Source::Row(row_of(row)),
        told::Source::Cut(place) => Source::Cut(*place as usize),
    });
    let cuts: Option<Vec<GeneralCut>> = given.cuts.iter().map(|cut| reading.cut(cut)).collect();
    Ok((sources.collect(), cuts.ok_or("a general cut of the log cannot be read")?))
}

/// What numbers of a log may be.
struct Reading {
    columns: usize,
}

impl Reading {
    fn cut(&self, given: &FoundCut) -> Option<GeneralCut> {
        let (class, _) = Class::ALL.into_iter().find(|(_, word)| *word == given.class)?;
        let entries = given.entries.iter();
        let entries = entries.map(|(column, a)| Some((self.column(*column)?, value(a)?)));
        let row = Row {
            entries: entries.collect::<Option<_>>()?,
            lower: None,
            upper: Some(value(&given.side)?),
        };
        let derivation = self.derivation(&given.derivation)?;
        Some(GeneralCut { class, row, efficacy: 0.0, derivation })
    }

    fn column(&self, column: u32) -> Option<ColumnId> {
        ((column as usize) < self.columns).then_some(ColumnId(column))
    }

    fn derivation(&self, given: &told::Derivation) -> Option<Derivation> {
        Some(match given {
            told::Derivation::Rounding { sum, divisor, upper } => Derivation::Rounding {
                sum: sum
                    .iter()
                    .map(|(row, y)| Some((used_of(row), value(y)?)))
                    .collect::<Option<_>>()?,
                divisor: value(divisor)?,
                upper: self.columns(upper)?.into_iter().collect::<BTreeSet<_>>(),
            },
            told::Derivation::Knapsack(row) => Derivation::Knapsack(used_of(row)),
            told::Derivation::Conflicts { cycle, hubs, witnesses } => Derivation::Conflicts {
                cycle: self.literals(cycle)?,
                hubs: self.literals(hubs)?,
                witnesses: witnesses.iter().map(used_of).collect(),
            },
            told::Derivation::Cases { split, proofs } => Derivation::Cases {
                split: self.columns(split)?,
                proofs: proofs.iter().map(combination_of).collect::<Option<_>>()?,
            },
            told::Derivation::Paths { arcs, pairs, cycles } => Derivation::Paths {
                arcs: arcs
                    .iter()
                    .map(|arc| Some((arc.0 as usize, arc.1 as usize, self.column(arc.2)?)))
                    .collect::<Option<_>>()?,
                pairs: pairs
                    .iter()
                    .map(|pair| (pair.0 as usize, pair.1 as usize, used_of(&pair.2)))
                    .collect(),
                cycles: cycles
                    .iter()
                    .map(|(arcs, rows)| {
                        let arcs = arcs.iter().map(|&place| place as usize).collect();
                        Some((arcs, combination_of(rows)?))
                    })
                    .collect::<Option<_>>()?,
            },
        })
    }

    fn columns(&self, given: &[u32]) -> Option<Vec<ColumnId>> {
        given.iter().map(|&column| self.column(column)).collect()
    }

    fn literals(&self, given: &[told::Literal]) -> Option<Vec<Literal>> {
        let literal = |&(column, plain)| Some(Literal { column: self.column(column)?, plain });
        given.iter().map(literal).collect()
    }
}

fn used_of(&(row, upper): &told::Used) -> Used {
    Used { row: row as usize, upper }
}

fn combination_of(given: &told::Combination) -> Option<Vec<(usize, Number)>> {
    given.iter().map(|(row, y)| Some((*row as usize, value(y)?))).collect()
}

fn value(text: &str) -> Option<Number> {
    let plain = text.bytes().all(|byte| byte.is_ascii_digit() || matches!(byte, b'-' | b'/'));
    let by_zero = text.split_once('/').is_some_and(|(_, below)| below.bytes().all(|b| b == b'0'));
    if text.len() > LONGEST || !plain || by_zero {
        return None;
    }
    text.parse().ok()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn only_whole_numbers_and_fractions_are_numbers() {
        assert_eq!(value("-3"), Some(Number::from(-3)));
        assert_eq!(value("7/2").map(|seven| seven * Number::from(2)), Some(Number::from(7)));
        for wrong in ["", "1/0", "1e9", "0x1", "--1", "1/-2/3", " 1", "nan"] {
            assert_eq!(value(wrong), None, "{wrong}");
        }
        assert_eq!(value(&"1".repeat(LONGEST + 1)), None);
    }

    #[test]
    fn a_cut_over_columns_that_are_not_there_is_none() {
        let cut = FoundCut {
            class: "clique".to_owned(),
            entries: vec![(0, "1".to_owned()), (2, "1".to_owned())],
            side: "1".to_owned(),
            derivation: told::Derivation::Conflicts {
                cycle: Vec::new(),
                hubs: vec![(0, true), (2, false)],
                witnesses: vec![(0, true)],
            },
        };
        let given = Cuts { sources: vec![told::Source::Cut(0)], cuts: vec![cut] };
        assert!(cuts_of(&given, 2).is_err());
        let (sources, read) = cuts_of(&given, 3).expect("three columns");
        assert_eq!(cuts(&sources, &read), given);
    }
}
