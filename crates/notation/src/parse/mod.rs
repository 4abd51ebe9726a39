//! The parser: tokens to a tree, by recursive descent. It never fails: a line that cannot be
//! read gives a diagnostic with its place and is skipped to its end.

mod called;
mod cases;
mod compound;
mod copied;
mod document;
mod expression;
mod graph;
mod implied;
mod inner;
mod line;
mod literal;
mod name;
mod number;
mod opening;
mod plain_sum;
mod primary;
mod quantifier;
mod superset;
mod twofold;
mod words;

pub(crate) use compound::needed;
pub(crate) use document::is_title;

use crate::diagnostic::{Diagnostic, syntax as message, tidy};
use crate::lex::lex;
use crate::lex::token::{Gap, Kind as T, Token};
use crate::place::Span;
use crate::syntax::{Formulation, Line};
use std::collections::BTreeSet;

/// How deep brackets, sums and powers may nest.
pub const NESTING_LIMIT: u32 = 100;
/// The longest text that is read, in bytes.
pub const TEXT_LIMIT: usize = 2_000_000;
/// How many diagnostics of one text are kept.
const DIAGNOSTIC_LIMIT: usize = 200;

/// What a text says, and what in it could not be read.
#[derive(Debug, Clone, PartialEq)]
pub struct Parse {
    /// The tree of all that could be read.
    pub tree: Formulation,
    /// What could not, in the order of the text.
    pub diagnostics: Vec<Diagnostic>,
}

/// Reads a text. `O(bytes)`.
#[must_use]
pub fn parse(text: &str) -> Parse {
    if text.len() > TEXT_LIMIT {
        let diagnostics = vec![message::too_long(text.len())];
        return Parse { tree: Formulation::default(), diagnostics };
    }
    let (title, start) = document::title(text);
    let mut parser = Parser {
        text,
        tokens: copied::settled(&lex(text, start)),
        at: 0,
        end: 0,
        depth: 0,
        place: Surroundings::default(),
        first: 0,
        in_statements: false,
        declared: BTreeSet::new(),
        cases: Vec::new(),
        passing: Vec::new(),
        below: None,
        diagnostics: Vec::new(),
    };
    let mut tree = parser.document();
    tree.title = title;
    called::settled(&mut tree);
    inner::summed(&mut tree);
    literal::joined(&mut tree);
    twofold::parted(&mut tree);
    parser.imply_quantifiers(&mut tree);
    tree.complete = !parser.diagnostics.iter().any(Diagnostic::is_error);
    Parse { tree, diagnostics: tidy(parser.diagnostics) }
}

/// The value of a word that is all digits.
pub(crate) fn number_text(word: &str) -> Option<model::Number> {
    word.starts_with(|c: char| c.is_ascii_digit()).then(|| number::number(word)).flatten()
}

/// A line cannot be read; the reason has been reported.
#[derive(Debug)]
struct Unread;

type Read<T> = Result<T, Unread>;

/// What the surroundings of an expression forbid.
#[derive(Debug, Clone, Copy, Default)]
struct Surroundings {
    /// Inside `|…|`: a bar closes.
    bars: bool,
    /// Not inside brackets, after a relation: `\quad` ends the expression.
    quad_ends: bool,
    /// In `data` and `definitions`: two spaces end the expression.
    wide_ends: bool,
    /// In a set: a bar separates, as a colon does.
    bar_separates: bool,
    /// Behind ∈ or ⊆: `[n]` is `{1..n}`.
    counts: bool,
    /// In a statement, outside brackets: another statement may follow on the line.
    splits: bool,
}

struct Parser<'t> {
    text: &'t str,
    tokens: Vec<Token>,
    at: usize,
    /// The end of the line that is being read: a token there counts as the end.
    end: usize,
    depth: u32,
    place: Surroundings,
    /// Where the line at hand begins.
    first: usize,
    in_statements: bool,
    /// The names that data and definitions declare.
    declared: BTreeSet<String>,
    /// The cases of the statement at hand.
    cases: Vec<cases::Case>,
    /// Sets that a quantifier defines in passing: `i ∈ M = {1,…,m}`.
    passing: Vec<Line>,
    /// The tokens below the objective's word, where they say domains: `\\min_{x ∈ {0,1}^n}`.
    below: Option<(usize, usize)>,
    diagnostics: Vec<Diagnostic>,
}

impl Parser<'_> {
    fn peek(&self) -> T {
        self.ahead(0)
    }

    fn ahead(&self, by: usize) -> T {
        if self.at + by >= self.end { T::End } else { self.tokens[self.at + by].kind }
    }

    /// What stands before the next token.
    fn gap(&self) -> Gap {
        if self.at >= self.end { Gap::default() } else { self.tokens[self.at].gap }
    }

    fn bump(&mut self) {
        if self.at < self.end {
            self.at += 1;
        }
    }

    fn eat(&mut self, kind: T) -> bool {
        let found = self.peek() == kind;
        if found {
            self.bump();
        }
        found
    }

    fn expect(&mut self, kind: T, wanted: &str) -> Read<()> {
        if self.eat(kind) { Ok(()) } else { Err(self.expected(wanted)) }
    }

    /// The place of the next token; at the end of a line the place just behind it.
    fn here(&self) -> Span {
        if self.at < self.end {
            return self.tokens[self.at].span;
        }
        let at = self.at.checked_sub(1).map_or(0, |i| self.tokens[i].span.end);
        Span { start: at, end: at }
    }

    /// From `start` to the last token that was read.
    fn since(&self, start: Span) -> Span {
        let last = self.at.checked_sub(1).map_or(start, |i| self.tokens[i].span);
        if last.end < start.start { start } else { start.to(last) }
    }

    fn report(&mut self, diagnostic: Diagnostic) -> Unread {
        if self.diagnostics.len() < DIAGNOSTIC_LIMIT {
            self.diagnostics.push(diagnostic);
        }
        Unread
    }

    fn expected(&mut self, wanted: &str) -> Unread {
        let (kind, span) = (self.peek(), self.here());
        let found = kind
            .noun()
            .map_or_else(|| format!("“{}”", message::short(span.of(self.text))), str::to_owned);
        self.report(message::expected(span, wanted, &found))
    }

    /// Runs a rule that may nest; refuses to nest too deep.
    fn nested<V>(&mut self, rule: impl FnOnce(&mut Self) -> Read<V>) -> Read<V> {
        if self.depth >= NESTING_LIMIT {
            let span = self.here();
            return Err(self.report(message::too_deep(span, NESTING_LIMIT)));
        }
        self.depth += 1;
        let result = rule(self);
        self.depth -= 1;
        result
    }

    /// Runs a rule in other surroundings.
    fn within<V>(
        &mut self,
        place: Surroundings,
        rule: impl FnOnce(&mut Self) -> Read<V>,
    ) -> Read<V> {
        let before = std::mem::replace(&mut self.place, place);
        let result = rule(self);
        self.place = before;
        result
    }
}

#[cfg(test)]
mod tests {
    use super::parse;
    use crate::syntax::{Formulation, Kind};

    fn read(text: &str) -> Formulation {
        let parsed = parse(text);
        let lines: Vec<String> = parsed.diagnostics.iter().map(|d| d.line(text)).collect();
        assert!(lines.is_empty(), "{text}: {lines:?}");
        parsed.tree
    }

    /// Two spellings of one statement.
    fn same(one: &str, other: &str) {
        let statement =
            |line: &str| read(&format!("minimise\n x\nsubject to\n {line}\n")).statements;
        assert_eq!(statement(one), statement(other), "{one} and {other}");
    }

    #[test]
    fn the_first_line_is_a_title_when_it_says_nothing_else() {
        assert_eq!(
            read("Cuts & flows for 3 stops (Wong 1980)\nminimise\n x").title.as_deref(),
            Some("Cuts & flows for 3 stops (Wong 1980)")
        );
        assert_eq!(read("minimise\n x").title, None);
        assert_eq!(read("# remark\n\nminimise x").title, None);
    }

    #[test]
    fn lines_end_and_go_on_where_they_should() {
        let count =
            |text: &str| read(&format!("minimise\n x\nsubject to\n{text}")).statements.len();
        assert_eq!(count("a ≤ 1\nb ≤ 2"), 2);
        assert_eq!(count("a ≤\n1; b ≤ 2 \\\\ c ≤ 3"), 3);
        assert_eq!(count("a +\nb ≤ 2\n  ∀ i ∈ V\nc ≤ 1"), 2);
        assert_eq!(count("a ≤ (1 +\n 2)\n\nc ≤ 1"), 2);
        assert_eq!(count("a ≤ b ∀ i ∈ V\n−c ≤ 1"), 2, "nothing is taken from a quantifier");
        assert_eq!(count("\\begin{align} a &\\le 1\n + b \\\\ c &\\ge 2\\end{align}"), 2);
    }

    #[test]
    fn sums_reach_to_the_next_plus() {
        same("Σ_{i ∈ V} a_i x_i + y ≤ 1", "(Σ_{i ∈ V} a_i x_i) + y ≤ 1");
        same("2 Σ_{i ∈ V} Σ_{j ∈ V} x ≤ 1", "2 (Σ_{i ∈ V} (Σ_{j ∈ V} x)) ≤ 1");
        same("\\sum_{i=1}^n x_i ≤ 1", "Σ_{i ∈ {1..n}} x_i ≤ 1");
        same("\\sum\\limits_{i=1}^{n} x_i ≤ 1", "Σ_{i = 1,…,n} x_i ≤ 1");
    }

    #[test]
    fn precedence_is_that_of_mathematics() {
        same(
            "−a b + c / 2 d ≤ 1",
            "(−(a b)) + ((c / 2) · d) ≤ 1".replace("((c / 2) · d)", "(c / 2 d)").as_str(),
        );
        same("x ∈ A ∪ B ∩ C", "x ∈ A ∪ (B ∩ C)");
        same(
            "y ≤ 1 ∀ i ∈ V : ¬ i = j ∧ k = l ∨ m = n",
            "y ≤ 1 ∀ i ∈ V : ((¬(i = j)) ∧ (k = l)) ∨ (m = n)",
        );
        same("y ≤ 2 n^2", "y ≤ 2 (n^2)".replace("(n^2)", "n^{2}").as_str());
    }

    #[test]
    fn labels_are_no_factors() {
        let label = |line: &str| {
            let tree = read(&format!("minimise\n x\nsubject to\n {line}\n"));
            tree.statements[0].label.as_ref().map(|l| l.text.clone())
        };
        assert_eq!(label("x ≤ 1 (leave)").as_deref(), Some("leave"));
        assert_eq!(label("x ≤ 1 (3)").as_deref(), Some("3"));
        assert_eq!(label("x ≤ k (n − 1)"), None);
        assert_eq!(label("x ≤ k (n-1)"), None);
        assert_eq!(label("x ≤ k (n)"), None);
        assert_eq!(label("x ≤ k mod (n / 10)"), None, "an operator wants it");
        assert_eq!(label("x ≤ k · (ab cd)"), None);
        assert_eq!(label("x ≤ 1 ∀ i ∈ V (a)").as_deref(), Some("a"));
        assert_eq!(label("x ≤ 1 ∀ l ∈ T  (l,S)").as_deref(), Some("l,S"));
        assert_eq!(label("x ≤ 1 (leave) \\tag{7}").as_deref(), Some("7"), "the tag wins");
    }

    #[test]
    fn data_lines_have_remarks() {
        let remark =
            |line: &str| read(&format!("data\n {line}\nminimise x")).data[0].remark.clone();
        assert_eq!(remark("V  stops (in km; all)").as_deref(), Some("stops (in km; all)"));
        assert_eq!(remark("V\tat sea").as_deref(), Some("at sea"));
        assert_eq!(remark("V, the stops").as_deref(), Some("the stops"));
        assert_eq!(remark("c_{i,j}  ∀ (i,j) ∈ A    minutes").as_deref(), Some("minutes"));
        assert_eq!(remark("V \\text{stops}").as_deref(), Some("stops"));
        assert_eq!(remark("V  stops\\end{align} of it").as_deref(), Some("stops"));
        assert_eq!(remark("s, t ∈ V").as_deref(), None);
        let definition =
            |line: &str| read(&format!("definitions\n {line}\nminimise x")).definitions[0].clone();
        assert_eq!(
            definition("m = 2  n"),
            definition("m = 2 n"),
            "no factor is taken for a remark"
        );
        assert_eq!(definition("m = 2 n \\text{pairs}").remark.as_deref(), Some("pairs"));
    }

    /// A line that begins with a minus and has no relation names nothing; below another row of LaTeX
    /// it would be read as that row's end.
    #[test]
    fn what_begins_with_a_minus_names_nothing() {
        let parsed = crate::parse("definitions\n  n = 3\n  −1  ∀ i ∈ V\nminimise\n  x\n");
        let codes: Vec<&str> = parsed.diagnostics.iter().map(|found| found.code).collect();
        assert_eq!(codes, ["syntax.no-relation"]);
    }

    /// A sum in brackets before a least value was taken for the name of a second objective.
    #[test]
    fn a_bracket_before_a_least_value_is_a_factor() {
        for factor in
            ["x_i + y_i", "x_i − y_i", "x_i x_i", "n x_i", "x_i n", "n Q", "2 x_i", "2 n", "−n"]
        {
            let row = format!("({factor}) min_{{j ∈ V}} x_j ≤ 1");
            let tree = read(&format!("minimise\n x\nsubject to\n {row} ∀ i ∈ V\n"));
            assert!(matches!(tree.statements[0].left[0].kind, Kind::Multiplicative(..)), "{row}");
        }
        for name in ["IP-1", "P", "P_1", "P_1 relaxed", "2a", "1.2"] {
            let text = format!("data\n V\n\n({name}) min Σ_{{i ∈ V}} x_i\n");
            assert!(read(&text).objective.is_some(), "{name}");
        }
    }

    #[test]
    fn domains_read_as_memberships() {
        let domain = |line: &str| {
            let tree = read(&format!("minimise\n x\nsubject to\n {line}\n"));
            tree.statements[0].links[0].1.kind.clone()
        };
        use crate::syntax::NumberSet;
        assert_eq!(domain("x ∈ ℤ_+"), Kind::NumberSet(NumberSet::IntegerNonNegative));
        assert_eq!(
            domain("x ∈ \\mathbb{Z}_{\\ge 0}"),
            Kind::NumberSet(NumberSet::IntegerNonNegative)
        );
        assert_eq!(domain("x ∈ ℤ_{>0}"), Kind::NumberSet(NumberSet::IntegerPositive));
        assert_eq!(domain("x free"), Kind::NumberSet(NumberSet::Real));
        assert_eq!(domain("x ∈ ℝ^+"), Kind::NumberSet(NumberSet::RealNonNegative));
    }
}
