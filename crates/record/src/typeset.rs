//! A formulation set as mathematics: rows of cells, each a tree of MathML elements whose names
//! come from a fixed list and whose text is plain text. The page makes nodes of them, so that no
//! text can become markup.

use serde::{Deserialize, Serialize};

/// A formulation, set.
#[derive(Debug, Clone, Default, PartialEq, Eq, Serialize, Deserialize)]
pub struct Typeset {
    /// Its rows, by part.
    pub rows: Vec<TypesetRow>,
    /// How many lines more there are than are set.
    pub further: u32,
}

/// A line, set.
#[derive(Debug, Clone, Default, PartialEq, Eq, Serialize, Deserialize)]
pub struct TypesetRow {
    /// Whether it describes data or a definition, so that nothing aligns at its relation.
    pub describes: bool,
    /// The word that opens its part, in the part's first row: "minimise".
    pub head: String,
    /// First UTF-16 unit of the line in the text.
    pub start: u32,
    /// One past its last UTF-16 unit.
    pub end: u32,
    /// What stands before the relation, flush right.
    pub left: Vec<Element>,
    /// The relation and what follows it, flush left.
    pub right: Vec<Element>,
    /// The quantifier.
    pub quantifier: Vec<Element>,
    /// The name of a constraint family, the remark of a datum.
    pub words: String,
    /// The line as it was typed where it cannot be read; empty elsewhere.
    pub unread: String,
}

/// An element of presentation MathML.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
pub struct Element {
    /// Its name, with the attributes that go with it.
    pub tag: Tag,
    /// The text of a leaf; empty elsewhere.
    pub text: String,
    /// What stands in it.
    pub children: Vec<Element>,
}

/// The elements in use.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize)]
pub enum Tag {
    /// `mi`
    Identifier,
    /// `mn`
    Number,
    /// `mo`
    Operator,
    /// `mo` without space about it.
    Tight,
    /// `mo` that does not grow with what it holds.
    Bracket,
    /// `mtext`
    Text,
    /// `mspace` of a sixth of an em.
    Thin,
    /// `msub`
    Sub,
    /// `msup`
    Sup,
    /// `msubsup`
    SubSup,
    /// `munder`
    Under,
    /// `munderover`
    UnderOver,
    /// `mover` with an accent.
    Accent,
    /// `mfrac`
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
