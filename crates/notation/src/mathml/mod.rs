//! The printer to MathML: a formulation set as a paper sets it, one row a line, in cells that
//! align at the relation. What cannot be read stands among the rows as it was typed.
//!
//! A row's cells are elements of presentation MathML ([MathML Core]); who shows them makes a
//! `math` element of each cell and nodes of each element, never markup of a text.
//!
//! [MathML Core]: https://www.w3.org/TR/mathml-core/

mod element;
mod expression;
mod name;

pub use element::{Element, Tag};

use crate::place::Span;
use crate::syntax::{Clause, Formulation, Line, Section};
use expression::Printer;

/// Rows set at most.
const MOST_ROWS: usize = 400;
/// Letters shown of a line that cannot be read.
const MOST_LETTERS: usize = 200;

/// A formulation, set.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub struct Typeset {
    /// Its rows: data, definitions, objective, constraints and domains, each in the text's order.
    pub rows: Vec<TypesetRow>,
    /// How many lines more there are than are set.
    pub further: usize,
}

/// A line, set. The cells before the relation are flush right, those from it on flush left.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct TypesetRow {
    /// The part of the text it stands in.
    pub section: Section,
    /// The word that opens that part, in the part's first row: "minimise".
    pub head: &'static str,
    /// The line's place in the text.
    pub span: Span,
    /// What stands before the relation.
    pub left: Vec<Element>,
    /// The relation and what follows it.
    pub right: Vec<Element>,
    /// The quantifier.
    pub quantifier: Vec<Element>,
    /// The label of a constraint, the remark of a datum.
    pub words: String,
    /// The line as it was typed where it cannot be read; empty elsewhere.
    pub unread: String,
}

impl TypesetRow {
    fn new(section: Section, span: Span) -> Self {
        Self {
            section,
            head: "",
            span,
            left: Vec::new(),
            right: Vec::new(),
            quantifier: Vec::new(),
            words: String::new(),
            unread: String::new(),
        }
    }

    /// Elements in its cells.
    #[must_use]
    pub fn size(&self) -> usize {
        let cells = [&self.left, &self.right, &self.quantifier];
        cells.into_iter().flatten().map(Element::size).sum()
    }
}

/// Sets a formulation that was read from `text`: 400 lines and 6,000 expressions at most.
/// `O(tree · log names)`.
#[must_use]
pub fn typeset(tree: &Formulation, text: &str) -> Typeset {
    let printer = Printer::new(tree);
    let mut out = Typeset::default();
    for section in [Section::Data, Section::Definitions, Section::Objective, Section::Statements] {
        let mut rows = Vec::new();
        for source in sources(tree, section) {
            if out.rows.len() + rows.len() >= MOST_ROWS || !printer.has_room() {
                out.further += 1;
            } else {
                rows.push(source.row(&printer, section, text));
            }
        }
        if let Some(first) = rows.first_mut() {
            first.head = head(section, tree.objective.as_ref().is_some_and(|o| o.maximise));
        }
        out.rows.extend(rows);
    }
    out
}

/// What becomes a row.
enum Source<'t> {
    Line(&'t Line),
    Objective(&'t crate::syntax::Objective),
    Unread(Span),
}

impl Source<'_> {
    fn start(&self) -> u32 {
        match self {
            Self::Line(line) => line.span.start,
            Self::Objective(objective) => objective.span.start,
            Self::Unread(span) => span.start,
        }
    }

    fn row(&self, printer: &Printer<'_>, section: Section, text: &str) -> TypesetRow {
        match self {
            Self::Line(line) => set(printer, section, line),
            Self::Objective(objective) => {
                let right = vec![printer.expression(&objective.expression)];
                TypesetRow { right, ..TypesetRow::new(section, objective.span) }
            }
            Self::Unread(span) => {
                let typed = span.of(text).split_whitespace().collect::<Vec<_>>().join(" ");
                let unread = typed.chars().take(MOST_LETTERS).collect();
                TypesetRow { unread, ..TypesetRow::new(section, *span) }
            }
        }
    }
}

/// What stands in a part, in the order of the text.
fn sources(tree: &Formulation, section: Section) -> Vec<Source<'_>> {
    let lines = match section {
        Section::Data => &tree.data[..],
        Section::Definitions => &tree.definitions,
        Section::Objective => &[],
        Section::Statements => &tree.statements,
    };
    let mut sources: Vec<Source<'_>> = lines.iter().map(Source::Line).collect();
    if section == Section::Objective {
        sources.extend(tree.objective.as_ref().map(Source::Objective));
    }
    let unread = tree.unread_lines.iter().filter(|unread| unread.section == section);
    sources.extend(unread.map(|unread| Source::Unread(unread.span)));
    sources.sort_by_key(Source::start);
    sources
}

fn head(section: Section, maximise: bool) -> &'static str {
    match section {
        Section::Data => "data",
        Section::Definitions => "definitions",
        Section::Objective if maximise => "maximise",
        Section::Objective => "minimise",
        Section::Statements => "subject to",
    }
}

fn set(printer: &Printer<'_>, section: Section, line: &Line) -> TypesetRow {
    let links = line.links.iter().flat_map(|(sign, operand)| printer.link(*sign, operand));
    let right = links.collect();
    let words = match (&line.label, &line.remark) {
        (Some(label), _) => label.text.clone(),
        (None, remark) => remark.clone().unwrap_or_default(),
    };
    TypesetRow {
        left: printer.list(&line.left),
        right,
        quantifier: quantifier(printer, &line.clauses),
        words,
        ..TypesetRow::new(section, line.span)
    }
}

fn quantifier(printer: &Printer<'_>, clauses: &[Clause]) -> Vec<Element> {
    let mut out = Vec::new();
    for (at, clause) in clauses.iter().enumerate() {
        if at > 0 {
            out.push(printer.operator(","));
        }
        out.push(printer.operator("∀"));
        out.extend(printer.clause(clause));
    }
    out
}

#[cfg(test)]
mod tests;
