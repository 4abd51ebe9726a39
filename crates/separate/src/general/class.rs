//! The classes of general cuts and sets of them.

/// The class of a general cut.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub enum Class {
    /// Gomory's mixed-integer cut.
    Gomory,
    /// A complemented mixed-integer rounding.
    Mir,
    /// A lifted cover.
    Cover,
    /// A clique of the conflict graph.
    Clique,
    /// An odd hole of the conflict graph, with what may be added to it.
    OddHole,
    /// Half of a sum of whole rows, rounded.
    ZeroHalf,
    /// A flow cover.
    FlowCover,
    /// An (l,S) inequality of a chain of stocks.
    LotSizing,
    /// A blossom: a handle and an odd number of single edges.
    Blossom,
    /// An odd set of a matching.
    OddSet,
    /// A D₃ or D₄ inequality of directed round trips.
    RoundTrip,
}

impl Class {
    /// All classes with the words a scenario has for them, in order.
    pub const ALL: [(Self, &str); 11] = [
        (Self::Gomory, "gomory"),
        (Self::Mir, "mir"),
        (Self::Cover, "cover"),
        (Self::Clique, "clique"),
        (Self::OddHole, "odd hole"),
        (Self::ZeroHalf, "zero-half"),
        (Self::FlowCover, "flow cover"),
        (Self::LotSizing, "lot sizing"),
        (Self::Blossom, "blossom"),
        (Self::OddSet, "odd set"),
        (Self::RoundTrip, "round trip"),
    ];

    /// Its place in [`Self::ALL`].
    #[must_use]
    pub fn index(self) -> usize {
        self as usize
    }

    /// Its word.
    #[must_use]
    pub fn word(self) -> &'static str {
        Self::ALL[self.index()].1
    }
}

/// A set of classes.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq)]
pub struct Classes(u16);

impl Classes {
    /// Every class.
    #[must_use]
    pub fn all() -> Self {
        Class::ALL.into_iter().map(|(class, _)| class).collect()
    }

    /// Whether a class is in it.
    #[must_use]
    pub fn has(self, class: Class) -> bool {
        self.0 >> class.index() & 1 == 1
    }

    /// Whether any of these is in it.
    #[must_use]
    pub fn any(self, classes: &[Class]) -> bool {
        classes.iter().any(|&class| self.has(class))
    }

    /// Whether none is in it.
    #[must_use]
    pub fn is_empty(self) -> bool {
        self.0 == 0
    }
}

impl FromIterator<Class> for Classes {
    fn from_iter<I: IntoIterator<Item = Class>>(classes: I) -> Self {
        Self(classes.into_iter().fold(0, |set, class| set | 1 << class.index()))
    }
}
