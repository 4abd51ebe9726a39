//! Title, parts, and where each line ends.

use super::{Parser, Surroundings, graph, superset};
use crate::diagnostic::syntax as message;
use crate::latex::unescaped;
use crate::lex::lex;
use crate::lex::prose::PROSE;
use crate::lex::token::{Gap, Kind as T, Token};
use crate::place::Span;
use crate::syntax::{Expression, Formulation, Kind, Line, Objective, Section, Unread};

/// How many characters of a remark are kept.
const REMARK_LIMIT: usize = 1_000;

/// The title, if the first line that holds anything is one, and the byte where the rest begins.
pub(super) fn title(text: &str) -> (Option<String>, usize) {
    let mut start = 0;
    for line in text.split_inclusive('\n') {
        let trimmed = line.trim();
        let told = trimmed.starts_with("\\expandafter");
        if trimmed.is_empty() || trimmed.starts_with(['#', '%']) || told {
            start += line.len();
            continue;
        }
        let title = heading(trimmed).unwrap_or(trimmed);
        if unescaped(title).len() > 400 || title.is_empty() || !is_title(title) {
            return (None, start);
        }
        return (Some(unescaped(title)), start + line.len());
    }
    (None, 0)
}

/// What stands in `\\section*{…}`, `\\textbf{…}` and their like, if that is the whole line.
fn heading(line: &str) -> Option<&str> {
    let (command, rest) = line.strip_prefix('\\')?.split_once('{')?;
    let inner = rest.strip_suffix('}').filter(|inner| !inner.contains(['{', '}']));
    let known = "section subsection subsubsection paragraph title caption textbf textit emph";
    let whole = known.split(' ').any(|one| one == command.trim_end_matches('*'));
    inner.map(str::trim).filter(|_| whole)
}

/// Whether a line holds no relation, part word or TeX environment.
pub(crate) fn is_title(line: &str) -> bool {
    let mathematics = ["$$", "\\[", "\\newcommand", "\\renewcommand", "\\def", "\\DeclareMath"];
    if mathematics.iter().any(|one| line.starts_with(one)) || line.contains("\\begin") {
        return false;
    }
    let tokens = lex(line, 0);
    let opens_part =
        |kind: T| kind.is_part() || matches!(kind, T::SuchThat | T::Min | T::Max | T::Text);
    // "Max cut", "Min-cost flow" and "Max-min dispersion" are titles, "max z" is none
    let sense = tokens.first().is_some_and(|t| matches!(t.kind, T::Min | T::Max));
    let words = |t: &crate::lex::token::Token| {
        let mark = matches!(t.kind, T::Minus | T::Comma | T::LeftParen | T::RightParen);
        let word = matches!(t.kind, T::Word | T::End | T::Min | T::Max);
        let spelt = t.span.of(line);
        let other = spelt.len() > 2 && spelt.chars().all(char::is_alphabetic);
        let year = t.kind == T::Number && spelt.len() == 4;
        (mark || word) && t.text.chars().count() != 1 || other || year
    };
    let named = sense && tokens.len() > 2 && tokens[1..].iter().all(words);
    let first_opens = !named && tokens.first().is_some_and(|t| opens_part(t.kind));
    let strict = |kind: T| kind.is_relation() && kind != T::In;
    let inside =
        |kind: T| strict(kind) || matches!(kind, T::SubjectTo | T::Sum | T::Minimise | T::Maximise);
    // "in" and "for" are words of a title; ∈ and ∀ are not
    let signs = line.contains(['∈', '∀']) || line.contains("\\in") || line.contains("\\forall");
    !first_opens && !signs && !tokens.iter().any(|t| inside(t.kind))
}

/// The parts of a text.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Part {
    None,
    Data,
    Definitions,
    Objective { maximise: bool, start: Span },
    Statements,
}

impl Part {
    /// The part in the tree; what stands before the first part word counts as a statement.
    fn section(self) -> Section {
        match self {
            Self::Data => Section::Data,
            Self::Definitions => Section::Definitions,
            Self::Objective { .. } => Section::Objective,
            Self::None | Self::Statements => Section::Statements,
        }
    }
}

/// What is known of a line while its end is sought.
#[derive(Debug, Default)]
struct Scan {
    depth: u32,
    quantified: bool,
    /// Whether a relation has been seen before any quantifier.
    related: bool,
    /// A minus at the start of a line of text, after a relation.
    joined: Option<usize>,
}

impl Parser<'_> {
    pub(super) fn document(&mut self) -> Formulation {
        let mut tree = Formulation::default();
        let mut part = Part::None;
        while self.at + 1 < self.tokens.len() {
            let before = self.at;
            self.end = self.tokens.len() - 1;
            if self.passes_prose(&mut tree) {
                continue;
            }
            if let Some(next) = self.part_word(part) {
                part = next;
            } else if matches!(self.peek(), T::Break | T::Comma | T::Period) {
                self.bump();
            } else if let Some(at) = self.objective_by_name(part) {
                self.at = at;
                part = self.part_word(Part::None).unwrap_or(part);
            } else {
                if self.skip_lone_tag() {
                    continue;
                }
                if matches!(part, Part::Objective { .. }) && tree.objective.is_some() {
                    part = self.part_after_objective(part);
                }
                self.line_of(part, &mut tree);
            }
            debug_assert!(self.at > before, "the parser must move on");
        }
        self.read_domains_below(&mut tree);
        tree
    }

    /// A sentence is told of and passed over; a definition in it is read.
    fn passes_prose(&mut self, tree: &mut Formulation) -> bool {
        let token = &self.tokens[self.at];
        let (kind, span) = (token.kind, token.span);
        if token.text != PROSE || !matches!(kind, T::Break | T::Definitions) {
            return false;
        }
        self.bump();
        if kind == T::Break {
            let word = span.of(self.text).split_whitespace().next().map_or(0, str::len);
            let end = span.start + u32::try_from(word).unwrap_or(0);
            self.report(message::prose(Span { end, ..span }));
        } else if self.declared.contains(&self.tokens[self.at].text) {
            let rest = &self.tokens[self.at..];
            self.at += rest.iter().position(|t| t.kind == T::Break).unwrap_or(rest.len() - 1);
        } else {
            self.line_of(Part::Definitions, tree);
        }
        true
    }

    /// `\\tag{P}` alone on a line numbers the whole display.
    fn skip_lone_tag(&mut self) -> bool {
        let next = self.tokens.get(self.at + 1).map(|t| t.kind);
        let alone = self.peek() == T::Tag
            && next.is_none_or(|kind| kind == T::Break || kind == T::End || kind.is_part());
        self.at += usize::from(alone);
        alone
    }

    /// The place of the objective's word behind its name (`Z = \\min`), at the start of a display.
    fn objective_by_name(&self, part: Part) -> Option<usize> {
        let display = self.at > 0 && {
            let before = &self.tokens[self.at - 1];
            before.kind == T::Break && !before.text.is_empty()
        };
        if matches!(part, Part::None | Part::Data | Part::Definitions)
            && let Some(at) = self.asked_objective()
        {
            return Some(at);
        }
        let open = part == Part::None || matches!(part, Part::Data | Part::Definitions) && display;
        if open {
            return self.named_objective();
        }
        if let Some(at) = self.set_form_behind_data() {
            return Some(at);
        }
        // \textbf{(P)} \quad \min …, behind data
        let sense = |kind: T| matches!(kind, T::Min | T::Max | T::Minimise | T::Maximise);
        if self.peek() == T::Text && sense(self.ahead(1)) {
            return Some(self.at + 1);
        }
        // (P) min …, behind data
        let named = self.peek() == T::LeftParen && self.tokens[self.at].gap.has(Gap::NEWLINE);
        let close = if named { self.closing(self.at)? } else { return None };
        let next = self.tokens.get(close + 1)?;
        let product = self.is_product(close, part);
        (sense(next.kind) && !product && !next.gap.has(Gap::BLANK_LINE)).then_some(close + 1)
    }

    /// Whether what stands in parentheses up to `close` is a factor, `(x_i + y_i) min …` or
    /// `(n x_i) min …`, and not the name of a problem, `(IP-1) min …`, `(P_1 relaxed) min …`.
    fn is_product(&self, close: usize, part: Part) -> bool {
        let inner = &self.tokens[self.at + 1..close];
        let dash = |t: &Token| matches!(t.kind, T::Minus | T::Slash);
        let indices = inner.iter().filter(|t| t.kind == T::Underscore).count();
        let operator = inner.iter().any(|t| t.kind.is_operator() && !dash(t));
        let operator = operator || inner.first().is_some_and(dash);
        let mut words = inner.iter().filter(|t| t.kind == T::Word);
        let letters = words.clone().count() > 1 && words.all(|t| t.text.chars().count() == 1);
        // (2a) min … behind the data is the number of a problem
        let number = inner.len() > 1 && inner[0].kind == T::Number;
        let number = number && (indices > 0 || part == Part::Statements);
        operator || letters || number || indices > 1 || indices > 0 && inner.iter().any(dash)
    }

    /// A line with a relation behind the objective is a constraint, "subject to" or not.
    fn part_after_objective(&mut self, part: Part) -> Part {
        let (end, _) = self.scan();
        let mut depth = 0_u32;
        for token in &self.tokens[self.at..end] {
            if token.kind.opens() {
                depth += 1;
            } else if token.kind.closes() {
                depth = depth.saturating_sub(1);
            } else if depth == 0 && token.kind.is_relation() {
                return Part::Statements;
            }
        }
        part
    }

    /// A word that opens a part, at the start of a line.
    fn part_word(&mut self, part: Part) -> Option<Part> {
        let start = self.here();
        // in the other parts `min(a, b)` and `min_{i ∈ V} a_i` are numbers
        let opens = matches!(self.ahead(1), T::LeftParen | T::LeftBrace | T::Underscore);
        let function = opens && matches!(part, Part::Definitions | Part::Statements);
        let function = function && !self.names_variables();
        if function && matches!(self.peek(), T::Min | T::Max) {
            return None;
        }
        let part = match self.peek() {
            T::Data => Part::Data,
            T::Definitions => Part::Definitions,
            T::Minimise | T::Min => Part::Objective { maximise: false, start },
            T::Maximise | T::Max => Part::Objective { maximise: true, start },
            // "where N_i = …" behind the constraints
            T::SuchThat if part == Part::Statements && self.at_where() => Part::Definitions,
            T::Word if part == Part::Statements && self.at_where() => Part::Definitions,
            T::SubjectTo | T::SuchThat => Part::Statements,
            _ => return None,
        };
        self.bump();
        if matches!(part, Part::Objective { .. }) {
            self.skip_variables();
            self.open_set_form();
        }
        self.eat(T::Colon);
        Some(part)
    }

    /// Whether `where` stands here at the start of a line, before a definition.
    fn at_where(&self) -> bool {
        let token = &self.tokens[self.at];
        let lower = token.text.to_lowercase();
        let begins =
            token.gap.has(Gap::NEWLINE) || self.at > 0 && self.tokens[self.at - 1].kind == T::Break;
        let Some(next) = self.tokens.get(self.at + 1) else { return false };
        lower.trim_matches([',', ':', ' ']) == "where"
            && begins
            && next.kind == T::Word
            && self.tokens[self.at..].iter().take(12).any(|t| t.kind == T::Equal)
    }

    fn line_of(&mut self, part: Part, tree: &mut Formulation) {
        let first = self.at;
        self.in_statements = part == Part::Statements;
        let described = matches!(part, Part::Data | Part::Definitions);
        let (end, after) =
            if described { self.scan_described(part == Part::Data) } else { self.scan() };
        self.end = end;
        self.first = first;
        self.place = Surroundings { wide_ends: part == Part::Data, ..Surroundings::default() };
        let span = self.tokens[first].span.to(self.tokens[after.max(first + 1) - 1].span);
        let read = self.part_line(part, tree, after, span);
        if read.is_none() {
            let words = self.tokens[first..end].iter().filter(|t| t.kind == T::Word);
            tree.unread.extend(words.map(|t| t.text.clone()));
            tree.unread_lines.push(Unread { section: part.section(), span });
        }
        match part {
            // a line that only names the model is none
            Part::Data if read.is_none() || !tree.data.is_empty() => tree.ends.data = Some(span),
            Part::Statements => tree.ends.statements = Some(span),
            _ => {}
        }
        self.depth = 0;
        self.at = after.max(first + 1);
    }

    fn part_line(
        &mut self,
        part: Part,
        tree: &mut Formulation,
        after: usize,
        span: Span,
    ) -> Option<()> {
        match part {
            Part::None => {
                self.report(message::outside_parts(span));
                return None;
            }
            Part::Data => {
                if self.is_only_a_name_in_brackets() {
                    return Some(());
                }
                let mut line = self.data_line().ok()?;
                line.remark = self.remark(after);
                let known = |name: &str| self.declared.contains(name);
                if graph::put(&mut tree.data, &line, known) {
                    tree.data.iter().rev().take(2).for_each(|line| self.note(line));
                    return Some(());
                }
                self.note(&line);
                if !superset::put(&mut tree.data, &line) {
                    tree.data.push(line);
                }
            }
            Part::Definitions => {
                let mut line = self.data_line().ok()?;
                line.remark = self.remark(after);
                let known = |name: &str| self.declared.contains(name);
                if graph::put(&mut tree.data, &line, known) {
                    tree.data.iter().rev().take(2).for_each(|line| self.note(line));
                    return Some(());
                }
                self.note(&line);
                tree.definitions.push(line);
            }
            Part::Objective { maximise, start } => {
                let expression = self.objective().ok()?;
                let objective = Objective { maximise, expression, span: start.to(span) };
                match &tree.objective {
                    Some(first) => {
                        let diagnostic = message::second_objective(objective.span, first.span);
                        self.report(diagnostic);
                    }
                    None => tree.objective = Some(objective),
                }
            }
            Part::Statements => {
                let lines = self.statements().ok()?;
                tree.statements.extend(lines);
                tree.definitions.append(&mut self.passing);
            }
        }
        Some(())
    }

    /// `(CFLP)` alone on a line names the model.
    fn is_only_a_name_in_brackets(&self) -> bool {
        self.peek() == T::LeftParen
            && self.closing(self.at).is_some_and(|close| close + 1 == self.end)
            && self.tokens[self.at..self.end].iter().all(|t| !t.kind.is_relation())
    }

    /// Remembers what a line of data or definitions declares.
    fn note(&mut self, line: &Line) {
        let mut work: Vec<&Expression> = line.left.iter().collect();
        while let Some(expression) = work.pop() {
            match &expression.kind {
                Kind::Name(name) | Kind::Call(name, _) => {
                    let bare = name.indices.is_empty() && name.superscript.is_none();
                    if !bare || matches!(expression.kind, Kind::Call(..)) {
                        self.declared.insert(format!("{}_", name.text));
                    }
                    self.declared.insert(name.text.clone());
                }
                Kind::Interval(a, b) => work.extend([a.as_ref(), b.as_ref()]),
                Kind::Tuple(items) => work.extend(items),
                _ => {}
            }
        }
    }

    /// The text from the end of what was read to the end of the line.
    fn remark(&self, after: usize) -> Option<String> {
        let from = self.tokens[self.end..after].first()?;
        let to = self.tokens[after - 1].span.end;
        let comma = from.kind == T::Comma;
        let text = if from.kind == T::Text && after == self.end + 1 {
            from.text.as_str()
        } else {
            self.text.get(from.span.start as usize + usize::from(comma)..to as usize)?
        };
        // An environment that begins or ends there ends the line, as the lexer has it.
        let ends = ["\n", "\\begin{", "\\end{"].iter().filter_map(|end| text.find(end)).min();
        let text = text[..ends.unwrap_or(text.len())].trim();
        let end = text.char_indices().nth(REMARK_LIMIT).map_or(text.len(), |(at, _)| at);
        let text = text[..end].trim();
        (!text.is_empty()).then(|| text.to_owned())
    }

    /// The end of the line that starts here. `O(tokens of the line)`.
    fn scan(&mut self) -> (usize, usize) {
        let mut scan = Scan::default();
        let last = self.tokens.len() - 1;
        for i in self.at..last {
            let kind = self.tokens[i].kind;
            if i > self.at && self.line_ends_before(i, scan.depth, scan.quantified) {
                return (i, i);
            }
            match kind {
                T::Break if i > self.at => return (i, i),
                T::ForAll => scan.quantified = true,
                T::Minus
                    if i > self.at && scan.depth == 0 && self.on_new_line(i) && scan.related =>
                {
                    scan.joined.get_or_insert(i);
                }
                kind if kind.opens() => scan.depth += 1,
                kind if kind.closes() => scan.depth = scan.depth.saturating_sub(1),
                kind if kind.is_relation() && scan.depth == 0 && !scan.quantified => {
                    scan.related = true;
                    if let Some(at) = scan.joined.take() {
                        let span = self.tokens[at].span;
                        self.report(message::joined(span));
                    }
                }
                _ => {}
            }
        }
        (last, last)
    }

    fn on_new_line(&self, i: usize) -> bool {
        self.tokens[i].gap.has(Gap::NEWLINE) && !self.goes_on(i - 1)
    }

    /// Whether a token at the end of a line goes on with the next one; the `+` of `ℝ_+` does not.
    fn goes_on(&self, i: usize) -> bool {
        let raised = i > 0 && matches!(self.tokens[i - 1].kind, T::Underscore | T::Caret);
        self.tokens[i].kind.continues() && !raised
    }

    fn line_ends_before(&self, i: usize, depth: u32, quantified: bool) -> bool {
        let token = &self.tokens[i];
        if token.gap.has(Gap::BLANK_LINE) {
            return true;
        }
        if token.kind.is_part() {
            return true;
        }
        let line_break = token.gap.has(Gap::NEWLINE);
        let opens = line_break || !quantified && !self.in_statements;
        if token.kind == T::SuchThat && opens && depth == 0 {
            return true;
        }
        if !line_break || depth > 0 || self.goes_on(i - 1) {
            return false;
        }
        // nothing is added to what stands behind a quantifier
        !token.kind.continues() || quantified && matches!(token.kind, T::Plus | T::Minus)
    }

    /// The end of what is read of a line of `data` or `definitions` that starts here, and of
    /// its remark; two spaces begin one where `wide` says so.
    fn scan_described(&self, wide: bool) -> (usize, usize) {
        let mut depth = 0_u32;
        let last = self.tokens.len() - 1;
        let mut remark = None;
        for i in self.at..last {
            let token = &self.tokens[i];
            if i > self.at {
                let ends = match remark {
                    Some(_) => {
                        token.gap.has(Gap::NEWLINE)
                            || token.kind == T::Break && token.span.of(self.text) != ";"
                    }
                    None => token.kind == T::Break || self.line_ends_before(i, depth, true),
                };
                if ends {
                    return (remark.unwrap_or(i), i);
                }
                if remark.is_none() && depth == 0 && self.remark_starts(i, wide) {
                    remark = Some(i);
                }
            }
            if token.kind.opens() {
                depth += 1;
            } else if token.kind.closes() {
                depth = depth.saturating_sub(1);
            }
        }
        (remark.unwrap_or(last), last)
    }

    fn remark_starts(&self, i: usize, wide: bool) -> bool {
        let token = &self.tokens[i];
        if token.kind == T::Text {
            return true;
        }
        if token.kind == T::Period {
            return !wide && self.tokens[i + 1].gap.has(Gap::NEWLINE);
        }
        if token.kind == T::Comma {
            let next = &self.tokens[i + 1];
            let after = self.tokens.get(i + 2).map_or(T::End, |t| t.kind);
            let word = next.kind == T::Word && next.text.chars().count() > 1;
            return word && !matches!(after, T::Underscore | T::Comma) && !after.is_relation();
        }
        let wide = wide && token.gap.has(Gap::WIDE) && !token.gap.has(Gap::NEWLINE);
        let quantifier = wide
            && token.kind == T::LeftParen
            && self.tokens[i + 1].kind == T::Word
            && self
                .is_index_since(&self.tokens[i + 1].text, (self.at.max(i.saturating_sub(100)), i));
        wide && !quantifier && !token.kind.continues() && !self.goes_on(i - 1)
    }
}
