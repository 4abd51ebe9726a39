//! An instance as named blocks, as the reader of blocks takes them.

use std::fmt::Write;

use crate::instance::{Datum, Instance};
use crate::number::number_text;

/// Every datum under its name. Names must be single words that begin with a letter, labels without
/// blanks, commas or quotes, and not whole numbers alone, which read back as a set of numbers; places on
/// a map and units are not in it. `O(size of the instance)`.
#[must_use]
pub fn blocks_text(instance: &Instance) -> String {
    let mut out = String::new();
    for (name, datum) in instance.data() {
        // Writing to a string cannot fail.
        let _ = match datum {
            Datum::Labels(labels) => writeln!(out, "{name}\n{}\n", labels.join(" ")),
            Datum::Integers(integers) => {
                let integers: Vec<String> = integers.iter().map(i64::to_string).collect();
                writeln!(out, "{name}\n{}\n", integers.join(" "))
            }
            Datum::Tuples { arity, rows } => {
                let rows: String = rows.iter().map(|row| row.join(" ") + "\n").collect();
                writeln!(out, "{name} by {}\n{rows}", indices(*arity))
            }
            Datum::Number(number) => writeln!(out, "{name} = {}\n", number_text(number)),
            Datum::Element(label) => writeln!(out, "{name} = {label}\n"),
            Datum::Table { arity, cells } => {
                let line = |(tuple, number): (&Vec<String>, &_)| {
                    format!("{} {}\n", tuple.join(" "), number_text(number))
                };
                let rows: String = cells.iter().map(line).collect();
                writeln!(out, "{name} by {}\n{rows}", indices(*arity))
            }
        };
    }
    out
}

/// `i1, i2`.
fn indices(arity: usize) -> String {
    (1..=arity).map(|place| format!("i{place}")).collect::<Vec<_>>().join(", ")
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::{Reader, read};

    #[test]
    fn what_is_written_reads_back_as_the_same_data() {
        for text in [
            "V\nAsh Birch Cedar\n\nE by i, j\nAsh Birch\nBirch Cedar\n\nd by i\nAsh 1.5\nBirch 2/3\n\n\
             T\n1 2 3\n\nQ = 40\nr = Ash\n",
            "\tA\tB\tC\nA\t0\t3\t4\nB\t2\t0\t4\nC\t7\t3\t0\n",
        ] {
            let before = read(text, None).instance.expect("an instance");
            let again = blocks_text(&before);
            let after = read(&again, Some(Reader::Blocks)).instance.expect("an instance");
            for (name, datum) in before.data() {
                assert_eq!(after.get(name), Some(datum), "{name}\n{again}");
            }
        }
    }
}
