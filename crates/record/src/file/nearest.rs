//! The nearest known name to one that is not known.

/// The name of `known` that differs least from `name` in letters inserted, deleted or replaced
/// (Levenshtein 1966), the earlier one on a tie; `None` when all differ in more than a third of
/// their letters (two at least). `O(|name| · total length of the known names)`.
#[must_use]
pub fn nearest<'k>(name: &str, known: &[&'k str]) -> Option<&'k str> {
    let letters: Vec<char> = name.chars().flat_map(char::to_lowercase).take(64).collect();
    let mut best: Option<(usize, &'k str)> = None;
    for &candidate in known {
        let away = distance(&letters, &candidate.chars().collect::<Vec<_>>());
        if best.is_none_or(|(least, _)| away < least) {
            best = Some((away, candidate));
        }
    }
    best.filter(|(away, _)| *away <= (letters.len() / 3).max(2)).map(|(_, candidate)| candidate)
}

/// Fewest insertions, deletions and replacements from `a` to `b`, row by row of the table.
fn distance(a: &[char], b: &[char]) -> usize {
    let mut row: Vec<usize> = (0..=b.len()).collect();
    for (i, x) in a.iter().enumerate() {
        let mut diagonal = row[0];
        row[0] = i + 1;
        for (j, y) in b.iter().enumerate() {
            let replaced = diagonal + usize::from(x != y);
            diagonal = row[j + 1];
            row[j + 1] = replaced.min(diagonal + 1).min(row[j] + 1);
        }
    }
    row[b.len()]
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn finds_the_slip_of_the_pen() {
        let known = ["nodes", "seconds", "best_known", "search"];
        assert_eq!(nearest("nodez", &known), Some("nodes"));
        assert_eq!(nearest("Seconds", &known), Some("seconds"));
        assert_eq!(nearest("best-known", &known), Some("best_known"));
        assert_eq!(nearest("colour", &known), None);
    }

    #[test]
    fn the_distance_is_the_textbook_one() {
        let letters = |word: &str| word.chars().collect::<Vec<_>>();
        assert_eq!(distance(&letters("kitten"), &letters("sitting")), 3);
        assert_eq!(distance(&letters(""), &letters("abc")), 3);
    }
}
