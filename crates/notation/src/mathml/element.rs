//! Presentation MathML as a small tree: an element's name is one of [`Tag`], and what it says is
//! plain text. Whoever shows it makes nodes of it, so that no text can become markup.

/// An element.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Element {
    /// Its name, with the attributes that go with it.
    pub tag: Tag,
    /// The text of a leaf; empty elsewhere.
    pub text: String,
    /// What stands in it; a leaf has none.
    pub children: Vec<Element>,
}

/// The elements in use: the leaves, then those with a fixed number of children, then the others.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Tag {
    /// `mi`: a name; one letter is italic, several are upright.
    Identifier,
    /// `mn`
    Number,
    /// `mo`
    Operator,
    /// `mo` without space about it, as in subscripts.
    Tight,
    /// `mo`: a bracket that does not grow with what it holds.
    Bracket,
    /// `mtext`
    Text,
    /// `mspace`: a sixth of an em.
    Thin,
    /// `msub`: base, subscript.
    Sub,
    /// `msup`: base, superscript.
    Sup,
    /// `msubsup`: base, subscript, superscript.
    SubSup,
    /// `munder`: base, what stands under it.
    Under,
    /// `munderover`: base, under, over.
    UnderOver,
    /// `mover` with an accent: base, accent.
    Accent,
    /// `mfrac`: above, below.
    Fraction,
    /// `mrow`
    Row,
    /// `mtable`
    Table,
    /// `mtr`
    TableRow,
    /// `mtd`
    Cell,
}

impl Tag {
    /// How many children it has, where that is fixed; a leaf has none.
    #[must_use]
    pub fn arity(self) -> Option<usize> {
        match self {
            Self::Row | Self::Table | Self::TableRow | Self::Cell => None,
            Self::Sub | Self::Sup | Self::Under | Self::Accent | Self::Fraction => Some(2),
            Self::SubSup | Self::UnderOver => Some(3),
            _ => Some(0),
        }
    }
}

impl Element {
    pub(super) fn leaf(tag: Tag, text: impl Into<String>) -> Self {
        Self { tag, text: text.into(), children: Vec::new() }
    }

    pub(super) fn of(tag: Tag, children: Vec<Element>) -> Self {
        Self { tag, text: String::new(), children }
    }

    /// The elements as one.
    pub(super) fn row(mut children: Vec<Element>) -> Self {
        match children.pop() {
            Some(only) if children.is_empty() => only,
            last => {
                children.extend(last);
                Self::of(Tag::Row, children)
            }
        }
    }

    pub(super) fn name(text: impl Into<String>) -> Self {
        Self::leaf(Tag::Identifier, text)
    }

    pub(super) fn sub(self, below: Element) -> Self {
        Self::of(Tag::Sub, vec![self, below])
    }

    pub(super) fn sup(self, above: Element) -> Self {
        Self::of(Tag::Sup, vec![self, above])
    }

    /// Words; spaces at their ends are kept.
    pub(super) fn words(text: &str) -> Self {
        Self::leaf(Tag::Text, text.replace(' ', "\u{a0}"))
    }

    /// Whether a fraction in it makes it tall.
    pub(super) fn is_tall(&self) -> bool {
        self.tag == Tag::Fraction || self.children.iter().any(Self::is_tall)
    }

    /// Letters in it, for its width.
    pub(super) fn letters(&self) -> usize {
        let own = self.text.chars().count();
        own + self.children.iter().map(Self::letters).sum::<usize>()
    }

    /// Elements in it, itself included.
    pub(super) fn size(&self) -> usize {
        1 + self.children.iter().map(Self::size).sum::<usize>()
    }
}
