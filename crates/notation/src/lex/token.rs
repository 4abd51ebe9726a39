//! Tokens.

use crate::place::Span;

/// What a token is.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Kind {
    /// A name; its text is in the token.
    Word,
    /// A number; its text is the span.
    Number,
    /// `\text{…}` that is no word of the language; its text is in the token.
    Text,
    /// `\tag{…}`; its text is in the token.
    Tag,
    Plus,
    Minus,
    Dot,
    Cross,
    Slash,
    Caret,
    Underscore,
    Equal,
    NotEqual,
    Less,
    AtMost,
    Greater,
    AtLeast,
    In,
    NotIn,
    Subset,
    SubsetOrEqual,
    Superset,
    SupersetOrEqual,
    Congruent,
    Modulo,
    Union,
    Intersection,
    Difference,
    And,
    Or,
    Not,
    ForAll,
    Sum,
    Product,
    /// `⋃`
    BigUnion,
    /// `⋂`
    BigIntersection,
    Colon,
    Comma,
    Period,
    /// `;` or `\\`
    Break,
    Dots,
    LeftParen,
    RightParen,
    LeftBrace,
    RightBrace,
    LeftBracket,
    RightBracket,
    /// `⟦`, before the ends of a range of whole numbers
    LeftWhole,
    RightWhole,
    Bar,
    LeftFloor,
    RightFloor,
    LeftCeiling,
    RightCeiling,
    EmptySet,
    Infinity,
    Naturals,
    Integers,
    Reals,
    Binaries,
    Min,
    Max,
    Floor,
    Ceiling,
    Fraction,
    Odd,
    Even,
    Free,
    Clique,
    Data,
    Definitions,
    Minimise,
    Maximise,
    SubjectTo,
    SuchThat,
    /// Anything else.
    Unknown,
    End,
}

/// What stands between a token and the one before it.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub(crate) struct Gap(u8);

impl Gap {
    pub(crate) const SPACE: Self = Self(1);
    /// Two spaces or a tab.
    pub(crate) const WIDE: Self = Self(2);
    /// A line break that can end a statement.
    pub(crate) const NEWLINE: Self = Self(4);
    pub(crate) const BLANK_LINE: Self = Self(8);
    /// `\quad`, `&` and the like.
    pub(crate) const QUAD: Self = Self(16);

    pub(crate) fn has(self, other: Self) -> bool {
        self.0 & other.0 != 0
    }

    pub(crate) fn add(&mut self, other: Self) {
        self.0 |= other.0;
    }

    /// The same without line breaks.
    pub(crate) fn without_lines(self) -> Self {
        Self(self.0 & !(Self::NEWLINE.0 | Self::BLANK_LINE.0))
    }
}

/// A token with its place.
#[derive(Debug, Clone)]
pub(crate) struct Token {
    pub(crate) kind: Kind,
    pub(crate) span: Span,
    pub(crate) gap: Gap,
    /// The text of a word, text or tag; else empty.
    pub(crate) text: String,
}

impl Kind {
    pub(crate) fn opens(self) -> bool {
        matches!(
            self,
            Self::LeftParen
                | Self::LeftBrace
                | Self::LeftBracket
                | Self::LeftWhole
                | Self::LeftFloor
                | Self::LeftCeiling
        )
    }

    pub(crate) fn closes(self) -> bool {
        matches!(
            self,
            Self::RightParen
                | Self::RightBrace
                | Self::RightBracket
                | Self::RightWhole
                | Self::RightFloor
                | Self::RightCeiling
        )
    }

    pub(crate) fn is_relation(self) -> bool {
        matches!(
            self,
            Self::Equal
                | Self::NotEqual
                | Self::Less
                | Self::AtMost
                | Self::Greater
                | Self::AtLeast
                | Self::In
                | Self::NotIn
                | Self::Subset
                | Self::SubsetOrEqual
                | Self::Superset
                | Self::SupersetOrEqual
                | Self::Congruent
        )
    }

    pub(crate) fn is_operator(self) -> bool {
        matches!(
            self,
            Self::Plus
                | Self::Minus
                | Self::Dot
                | Self::Cross
                | Self::Slash
                | Self::Modulo
                | Self::Union
                | Self::Intersection
                | Self::Difference
                | Self::And
                | Self::Or
        )
    }

    /// Whether a line break beside it does not end the statement.
    pub(crate) fn continues(self) -> bool {
        self.is_relation()
            || self.is_operator()
            || matches!(self, Self::Comma | Self::Colon | Self::ForAll | Self::Not)
    }

    pub(crate) fn is_part(self) -> bool {
        matches!(
            self,
            Self::Data | Self::Definitions | Self::Minimise | Self::Maximise | Self::SubjectTo
        )
    }

    /// How it is called in a message; `None` for those that are shown as they stand.
    pub(crate) fn noun(self) -> Option<&'static str> {
        Some(match self {
            Self::End => "the end of the line",
            Self::Number => "a number",
            Self::Text | Self::Tag => "text",
            _ => return None,
        })
    }
}
