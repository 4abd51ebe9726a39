//! Finds lists of entries that are multiples of one another.

use std::cmp::Ordering;

/// Entries (place, value), places ascending.
pub(crate) type Entries = Vec<(u32, f64)>;

/// A list that is a factor times another one: (kept, other, factor).
pub(crate) type Multiple = (u32, u32, f64);

/// The lists by places and by their values divided by the first one, so that multiples stand next
/// to one another; of a group the one named first is kept.
pub(crate) fn multiples(lists: Vec<(u32, Entries)>) -> Vec<Multiple> {
    let mut shapes: Vec<(u32, f64, Entries)> = lists
        .into_iter()
        .filter(|(_, entries)| !entries.is_empty())
        .map(|(name, entries)| {
            let first = entries[0].1;
            let shape = entries.into_iter().map(|(place, value)| (place, value / first)).collect();
            (name, first, shape)
        })
        .collect();
    shapes.sort_by(|a, b| compare(&a.2, &b.2).then(a.0.cmp(&b.0)));
    let mut found = Vec::new();
    let mut kept = 0;
    for k in 1..shapes.len() {
        if compare(&shapes[kept].2, &shapes[k].2) == Ordering::Equal {
            found.push((shapes[kept].0, shapes[k].0, shapes[k].1 / shapes[kept].1));
        } else {
            kept = k;
        }
    }
    found
}

fn compare(a: &Entries, b: &Entries) -> Ordering {
    a.len().cmp(&b.len()).then_with(|| {
        let pairs = a.iter().zip(b);
        let mut orders = pairs.map(|(x, y)| x.0.cmp(&y.0).then(x.1.total_cmp(&y.1)));
        orders.find(|order| order.is_ne()).unwrap_or(Ordering::Equal)
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn multiples_are_found_and_others_not() {
        let lists = vec![
            (0, vec![(0, 1.0), (2, 2.0)]),
            (1, vec![(0, 1.0), (2, 3.0)]),
            (2, vec![(0, -2.0), (2, -4.0)]),
            (3, vec![]),
            (4, vec![(0, 1.0), (1, 2.0)]),
        ];
        assert_eq!(multiples(lists), vec![(0, 2, -2.0)]);
    }
}
