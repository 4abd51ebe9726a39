//! The columns of a variable by index tuple. The places of a tuple have ranks among the elements
//! that occur there, and the ranks make one number (mixed radix); where that would leave most
//! numbers unused, a map takes its place.

use super::{Element, TupleMap};

/// Numbers that may lie unused for each tuple.
const UNUSED: usize = 4;

/// No column, no rank.
const NONE: u32 = u32::MAX;

/// Tuples of one length, one behind the other, each with its position.
#[derive(Debug, Default)]
pub(crate) struct Columns {
    /// The column of the first tuple.
    first: u32,
    places: usize,
    tuples: Vec<Element>,
    count: usize,
    index: Index,
}

#[derive(Debug)]
enum Index {
    /// By place the rank of each element and the number that a rank counts for; then positions.
    Ranked {
        ranks: Vec<Vec<u32>>,
        radix: Vec<usize>,
        at: Vec<u32>,
    },
    Mapped(TupleMap<u32>),
}

impl Default for Index {
    fn default() -> Self {
        Self::Mapped(TupleMap::default())
    }
}

impl Index {
    /// An index for tuples that are put into it one by one.
    fn empty(places: usize, tuples: &[Element], count: usize) -> Self {
        let mut ranks: Vec<Vec<u32>> = vec![Vec::new(); places];
        let mut sizes = vec![0_u32; places];
        for tuple in tuples.chunks_exact(places.max(1)) {
            for (place, element) in tuple.iter().enumerate() {
                let ranks = &mut ranks[place];
                let at = element.0 as usize;
                if ranks.len() <= at {
                    ranks.resize(at + 1, NONE);
                }
                if ranks[at] == NONE {
                    ranks[at] = sizes[place];
                    sizes[place] += 1;
                }
            }
        }
        let mut radix = Vec::with_capacity(places);
        let mut size = 1_usize;
        for &one in &sizes {
            radix.push(size);
            size = size.saturating_mul(one as usize);
        }
        if size > count.saturating_mul(UNUSED).saturating_add(64) {
            return Self::default();
        }
        Self::Ranked { ranks, radix, at: vec![NONE; size] }
    }

    fn get(&self, tuple: &[Element]) -> Option<u32> {
        match self {
            Self::Mapped(map) => map.get(tuple).copied(),
            Self::Ranked { ranks, radix, at } => {
                let cell = cell(ranks, radix, tuple)?;
                at.get(cell).copied().filter(|&position| position != NONE)
            }
        }
    }

    fn insert(&mut self, tuple: &[Element], position: u32) {
        match self {
            Self::Mapped(map) => {
                map.insert(tuple, position);
            }
            Self::Ranked { ranks, radix, at } => {
                let cell = cell(ranks, radix, tuple).and_then(|cell| at.get_mut(cell));
                if let Some(cell) = cell {
                    *cell = position;
                }
            }
        }
    }
}

/// The number that the ranks of a tuple make.
fn cell(ranks: &[Vec<u32>], radix: &[usize], tuple: &[Element]) -> Option<usize> {
    if tuple.len() != radix.len() {
        return None;
    }
    let places = tuple.iter().zip(ranks).zip(radix);
    places
        .map(|((element, ranks), radix)| {
            let rank = ranks.get(element.0 as usize).copied().filter(|&rank| rank != NONE)?;
            Some(rank as usize * radix)
        })
        .sum()
}

impl Columns {
    /// Puts a tuple at the end; it is found once [`Self::settle`] has been called.
    pub(crate) fn push(&mut self, tuple: &[Element]) {
        self.places = tuple.len();
        self.tuples.extend_from_slice(tuple);
        self.count += 1;
    }

    /// Indexes all tuples, of which each stays once. `place` is told where one stood, where it or
    /// its like stands now, and whether it is the first of its like. `O(tuples)`, with a map `O(tuples · log tuples)`.
    pub(crate) fn settle(&mut self, mut place: impl FnMut(usize, usize, bool)) {
        let mut index = Index::empty(self.places, &self.tuples, self.count);
        let mut kept = 0;
        for position in 0..self.count {
            let from = position * self.places;
            let tuple = from..from + self.places;
            match index.get(&self.tuples[tuple.clone()]) {
                Some(earlier) => place(position, earlier as usize, false),
                None => {
                    index.insert(&self.tuples[tuple.clone()], narrow(kept));
                    place(position, kept, true);
                    if kept < position {
                        self.tuples.copy_within(tuple, kept * self.places);
                    }
                    kept += 1;
                }
            }
        }
        self.count = kept;
        self.tuples.truncate(kept * self.places);
        self.index = index;
    }

    /// The position of a tuple that has been settled.
    pub(crate) fn position(&self, tuple: &[Element]) -> Option<usize> {
        self.index.get(tuple).map(|position| position as usize)
    }

    /// The column of a tuple.
    pub(crate) fn get(&self, tuple: &[Element]) -> Option<u32> {
        self.index.get(tuple).map(|position| self.first + position)
    }

    /// Says which column the first tuple has.
    pub(crate) fn begin_at(&mut self, first: u32) {
        self.first = first;
    }

    pub(crate) fn len(&self) -> usize {
        self.count
    }

    pub(crate) fn tuple(&self, position: usize) -> &[Element] {
        let from = position * self.places;
        self.tuples.get(from..from + self.places).unwrap_or_default()
    }

    /// All tuples with their columns.
    pub(crate) fn iter(&self) -> impl Iterator<Item = (&[Element], u32)> {
        (0..self.count).map(|position| (self.tuple(position), self.first + narrow(position)))
    }
}

fn narrow(position: usize) -> u32 {
    u32::try_from(position).unwrap_or(NONE)
}

#[cfg(test)]
mod tests {
    use super::{Columns, Element, Index};

    fn filled(tuples: &[&[u32]]) -> (Columns, Vec<(usize, usize, bool)>) {
        let mut columns = Columns::default();
        for tuple in tuples {
            columns.push(&tuple.iter().map(|&n| Element(n)).collect::<Vec<_>>());
        }
        let mut merged = Vec::new();
        columns.settle(|from, to, first| {
            if from != to {
                merged.push((from, to, first));
            }
        });
        columns.begin_at(10);
        (columns, merged)
    }

    fn column(columns: &Columns, tuple: &[u32]) -> Option<u32> {
        columns.get(&tuple.iter().map(|&n| Element(n)).collect::<Vec<_>>())
    }

    #[test]
    fn tuples_are_found_by_rank_and_by_map() {
        let square: Vec<[u32; 2]> = (0..9).flat_map(|i| (0..9).map(move |j| [i, 7 * j])).collect();
        let (columns, merged) =
            filled(&square.iter().map(<[u32; 2]>::as_slice).collect::<Vec<_>>());
        assert!(matches!(columns.index, Index::Ranked { .. }) && merged.is_empty());
        for (position, tuple) in square.iter().enumerate() {
            assert_eq!(column(&columns, tuple), u32::try_from(10 + position).ok());
        }
        assert_eq!((column(&columns, &[0, 1]), column(&columns, &[0])), (None, None));
        // a long diagonal would leave nearly all numbers unused
        let line: Vec<[u32; 2]> = (0..200).map(|i| [i, i]).collect();
        let (columns, _) = filled(&line.iter().map(<[u32; 2]>::as_slice).collect::<Vec<_>>());
        assert!(matches!(columns.index, Index::Mapped(_)));
        assert_eq!((column(&columns, &[7, 7]), column(&columns, &[7, 8])), (Some(17), None));
    }

    #[test]
    fn what_is_there_already_is_merged() {
        let (columns, merged) = filled(&[&[1], &[2], &[1], &[3], &[2]]);
        assert_eq!(merged, [(2, 0, false), (3, 2, true), (4, 1, false)]);
        assert_eq!(columns.len(), 3);
        assert_eq!((column(&columns, &[3]), columns.tuple(2)), (Some(12), &[Element(3)][..]));
        let (columns, _) = filled(&[&[], &[]]);
        assert_eq!((columns.len(), column(&columns, &[])), (1, Some(10)));
    }
}
