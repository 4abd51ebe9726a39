//! How cuts of each class are found, in words that whoever builds the production model can follow.

use tree::Class;

/// The routine that separates a class.
pub(super) fn separation(class: Class) -> &'static str {
    match class {
        Class::Gomory => {
            "of each fractional whole column take its row of the optimal tableau; with the parts after \
             the point of its entries and of its side write Gomory's mixed-integer cut (Gomory 1960)"
        }
        Class::Mir => {
            "take a row, add rows that cancel a continuous column between its bounds, put upper bounds \
             in for columns nearer to them, divide by each coefficient of a whole column in turn and \
             round (Marchand, Wolsey 2001)"
        }
        Class::Cover => {
            "of a row of binaries take columns by rising (1 − x)/a until they exceed its side, drop what \
             is not needed, lift the others in one after the other (Crowder, Johnson, Padberg 1983)"
        }
        Class::Clique => {
            "join two literals that no plan has both; from each fractional one grow a set that is joined \
             throughout, by falling value: at most one of it (Johnson, Padberg 1982)"
        }
        Class::OddHole => {
            "in the graph of literals that no plan has both find a shortest odd circle with lengths \
             (1 − x − x′)/2 and lift what is joined to it (Grötschel, Lovász, Schrijver 1988)"
        }
        Class::ZeroHalf => {
            "reduce whole rows modulo 2, combine those of little slack so that entries cancel and the side \
             is odd, halve the sum and round (Caprara, Fischetti 1996)"
        }
        Class::FlowCover => {
            "of a row of flows with on-off bounds choose flows whose bounds exceed the side by λ, rising by \
             (1 − y), and write the lifted flow cover (Padberg, Van Roy, Wolsey 1985)"
        }
        Class::LotSizing => {
            "for each last period l walk the periods up to it; put period t into S where the demand from t \
             to l times y is less than the lot: Σ over S of those, lots elsewhere, cover the demand \
             (Barany, Van Roy, Wolsey 1984)"
        }
        Class::Blossom => {
            "drop edges at 0 and at 1, take the components of what is left as handles and edges at 1 that \
             leave them as teeth, an odd number; else by a minimum odd cut (Padberg, Rao 1982)"
        }
        Class::OddSet => {
            "find an odd set of vertices that edges leave with less than 1 in all, by a minimum odd cut: \
             it holds at most half of its vertices less one (Edmonds 1965)"
        }
        Class::RoundTrip => {
            "grow a path of three or four stops along large arcs and weigh the arcs that close it or jump \
             back on it: D₃ and D₄ inequalities (Grötschel, Padberg 1985)"
        }
    }
}

/// A share in words, to two digits: it was told as "0.0130719 times".
pub(super) fn share(part: f64, whole: f64) -> String {
    let share = if whole > 0.0 { part / whole } else { 0.0 };
    let rounded = format!("{share:.1e}").parse().unwrap_or(share);
    format!("{} times", crate::words::short(rounded))
}

#[cfg(test)]
mod tests {
    #[test]
    fn a_share_is_told_to_two_digits() {
        assert_eq!(super::share(3.93978, 1.0), "3.9 times");
        assert_eq!(super::share(0.0130719, 1.0), "0.013 times");
        assert_eq!(super::share(1.0, 0.0), "0 times");
    }
}
