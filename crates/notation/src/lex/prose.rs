//! Sentences around the mathematics: `Let $x_{ij} = 1$ if …`, `We minimise …`, `where x_{ij} is
//! the share of …`. They say nothing to the model but for the definitions between their dollars:
//! `Let $V' = V \setminus \{0\}$ be the customers.`

use super::phrase::phrase;
use super::token::{Gap, Kind, Token};
use super::{Lexer, foreign, lex, table};

/// The text of the tokens that a sentence leaves: a break for itself, a word for a definition.
pub(crate) const PROSE: &str = "prose";

/// Words with which a sentence begins.
const OPENERS: &str = "let where we here the denote suppose assume consider given in this these \
    there our its it note moreover furthermore finally then thus with all each to as an writing \
    setting putting defining using constraint constraints equation equations inequality \
    inequalities objective variable variables decision binary integer continuous parameter \
    parameters";

/// The fewest words of a sentence, its first one among them.
const FEWEST: usize = 4;

/// The longest sentence, in bytes.
const LONGEST: usize = 2_000;

impl Lexer<'_> {
    /// Passes over the sentence that begins on this line, if one does.
    pub(super) fn sentence(&mut self) -> bool {
        let (text, start) = (self.text, self.at);
        // What ends a line in TeX ends it as a new line does: printed, the two are the same.
        let anew = self.gap.has(Gap::NEWLINE)
            || self.tokens.last().is_some_and(|token| token.kind == Kind::Break);
        let begins = anew && self.environment == 0 && self.depth == 0;
        if !begins {
            return false;
        }
        let line = line_of(&text[start..]);
        if !(is_sentence(line) || is_headed(line)) {
            return false;
        }
        let mut end = start + line_of(&text[start..]).len();
        while goes_on(&text[start..end], text[end..].strip_prefix('\n').map_or("", line_of))
            && end - start < LONGEST
        {
            end += 1 + line_of(&text[end + 1..]).len();
        }
        self.push_text(Kind::Break, start, end, PROSE.to_owned());
        self.definitions_of(start, end);
        self.at = end;
        true
    }

    /// The definitions between the dollars of a sentence, with `for all $i \in V$` behind them.
    fn definitions_of(&mut self, start: usize, end: usize) {
        let text = self.text;
        let mut pieces = Vec::new();
        let mut at = start;
        for piece in text[start..end].split('$') {
            pieces.push((at, piece));
            at += piece.len() + 1;
        }
        let variables = text[start..end].contains("variables");
        let mut next = 1;
        while next + 1 < pieces.len() {
            let (at, inner) = pieces[next];
            // Ξ = {x_t, y_t} is the set of variables
            let listed = variables
                && inner.contains("\\{")
                && !inner.contains(['|', ':', '.'])
                && !inner.contains("dots");
            if listed || !defines(&lex(inner, 0), inner) {
                next += 2;
                continue;
            }
            self.push_text(Kind::Definitions, at, at, PROSE.to_owned());
            self.relex(inner, at);
            let mut joins = Kind::ForAll;
            while let (Some((_, words)), Some((at, inner))) =
                (pieces.get(next + 1), pieces.get(next + 2))
                && next + 3 < pieces.len()
                && joined_by(words, joins)
            {
                self.push(joins, *at, *at);
                self.relex(inner, *at);
                joins = Kind::Comma;
                next += 2;
            }
            self.push(Kind::Break, end, end);
            next += 2;
        }
    }
}

fn line_of(text: &str) -> &str {
    text.split('\n').next().unwrap_or("")
}

/// Whether the words between two pieces of mathematics make the second one a quantifier.
fn joined_by(words: &str, joins: Kind) -> bool {
    let words = words.trim();
    match joins {
        Kind::ForAll => matches!(words, "for all" | "for each" | "for every" | "for any" | "for"),
        _ => matches!(words, "," | "and" | ", and"),
    }
}

/// Whether `name = value` or `name_{…} := value` stands here; that something be a number says
/// when, and not what it is.
fn defines(tokens: &[Token], text: &str) -> bool {
    let Some(at) = tokens.iter().position(|t| t.kind.is_relation()) else { return false };
    let name = tokens[0].kind == Kind::Word
        && matches!(tokens[1].kind, Kind::Underscore | Kind::Caret | Kind::Equal);
    let number = tokens.len() == at + 3 && tokens[at + 1].kind == Kind::Number;
    let sure = tokens[at].span.of(text).starts_with(':');
    // a relation below a maximum is its own
    let mut depth = 0_i32;
    let alone = !tokens[at + 1..].iter().any(|t| {
        depth += i32::from(t.kind.opens()) - i32::from(t.kind.closes());
        depth == 0 && t.kind.is_relation() && t.kind != Kind::In
    });
    name && tokens[at].kind == Kind::Equal && alone && (sure || !number)
}

/// Whether a line is the first of a sentence: a word with which sentences begin, and further
/// words, none of them set apart as a remark is.
pub(crate) fn is_sentence(line: &str) -> bool {
    let trimmed = line.trim_start();
    let Some(first) = opens(trimmed) else { return false };
    let rest = trimmed[first.len()..].trim_start_matches(' ');
    let sign = rest.chars().next().and_then(table::sign);
    if sign.is_some_and(|kind| kind != Kind::LeftParen) || is_apart(trimmed.trim_end()) {
        return false;
    }
    let outside: String = trimmed.split('$').step_by(2).collect::<Vec<_>>().join(" ");
    let related = outside.chars().any(|c| table::sign(c).is_some_and(Kind::is_relation));
    let named =
        matches!(&*first.to_ascii_lowercase(), "let" | "where") && rest.contains(['_', '^']);
    let words = words_of(&outside);
    words >= FEWEST && (!related || named || words >= 6)
}

/// The first word of a line, where sentences begin with it.
fn opens(line: &str) -> Option<&str> {
    let first = line.trim_start().split(foreign::is_white).next()?;
    let opener = first.trim_end_matches([',', ':']).to_ascii_lowercase();
    let known = opener.len() <= 12 && OPENERS.split_whitespace().any(|one| one == opener);
    known.then_some(first)
}

/// Whether a line begins with a heading, as in `\\textbf{Variables.} $x_i = 1$ if …`, alone or
/// before words; and behind one a shorter sentence: `\\textbf{Model 1.} With $M = 9$,`.
fn is_headed(line: &str) -> bool {
    let Some((rest, named)) = behind_heading(line) else { return false };
    let outside: String = rest.split('$').step_by(2).collect::<Vec<_>>().join(" ");
    let related = outside.chars().any(|c| table::sign(c).is_some_and(Kind::is_relation));
    let alone = named && (rest.trim().is_empty() || opens(rest).is_some());
    alone || is_sentence(rest) || words_of(&outside) >= FEWEST && !related
}

/// What follows `\\noindent` and `\\textbf{…}` at the start of a line, and whether a heading in
/// words is among them.
fn behind_heading(line: &str) -> Option<(&str, bool)> {
    const SPACING: [&str; 5] = ["\\noindent", "\\smallskip", "\\medskip", "\\bigskip", "\\item"];
    const WORDS: [&str; 4] = ["\\textbf{", "\\textit{", "\\emph{", "\\paragraph{"];
    let (mut rest, mut found, mut named) = (line.trim_start(), false, false);
    loop {
        if let Some(after) = SPACING.iter().find_map(|one| rest.strip_prefix(one)) {
            (rest, found) = (after.trim_start(), true);
            continue;
        }
        let inner = WORDS.iter().find_map(|one| rest.strip_prefix(one));
        let Some((inner, after)) = inner.and_then(|inner| inner.split_once('}')) else { break };
        let plain = inner.contains(char::is_alphabetic) && !inner.contains(['{', '$', '\\']);
        if !plain || phrase(inner).is_some() {
            break;
        }
        (rest, found, named) = (after.trim_start(), true, true);
    }
    found.then_some((rest, named))
}

/// Whether two spaces or a tab stand between words, as before a remark.
fn is_apart(line: &str) -> bool {
    let wide = ["  ", "\t"].iter().filter_map(|gap| line.find(gap)).min();
    wide.is_some_and(|at| !line[..at].ends_with(['.', ':', ';', ',']))
}

/// How many plain words a text has.
fn words_of(text: &str) -> usize {
    let marks = ['.', ',', ';', ':', '(', ')'];
    let pieces = text.split(foreign::is_white).map(|piece| piece.trim_matches(marks));
    let word = |piece: &str| {
        piece.len() > 1
            && piece.split('-').all(|p| !p.is_empty() && p.chars().all(char::is_alphabetic))
    };
    pieces.filter(|piece| word(piece)).count()
}

/// Whether a sentence goes on with the next line.
fn goes_on(before: &str, next: &str) -> bool {
    let next = next.trim();
    let ended = before.trim_end().ends_with(['.', ':', ';']);
    let first = next.split(foreign::is_white).next().unwrap_or("");
    let lower = first.starts_with(|c: char| c.is_lowercase() || c == '$') || first == "and";
    let opens = lex(next, 0).first().is_none_or(|t| {
        t.kind.is_part() || matches!(t.kind, Kind::SuchThat | Kind::Min | Kind::Max | Kind::End)
    });
    let outside: String = next.split('$').step_by(2).collect::<Vec<_>>().join(" ");
    let related = outside.chars().any(|c| table::sign(c).is_some_and(Kind::is_relation));
    !ended && lower && !opens && !related && !next.starts_with("$$") && words_of(&outside) >= 2
}

#[cfg(test)]
mod tests {
    use super::is_sentence;

    #[test]
    fn sentences_are_told_from_mathematics() {
        for sentence in [
            "Let $x_{ij} = 1$ if item $i$ is in bin $j$.",
            "where x_{ijt} is the share of customer j that comes from i,",
            "We maximise the margin of all fuels",
            "Constraints (2) say that every job is done.",
        ] {
            assert!(is_sentence(sentence), "{sentence}");
        }
        for mathematics in [
            "where N_i = {j ∈ J | d_{ij} ≤ S}",
            "where $M_{ij} = \\max\\{0, b_i\\}$ for all $i, j \\in V$",
            "the  stops of the whole town",
            "we ≤ 3",
            "all",
            "x_i ≥ 0 for all i and all of the j",
        ] {
            assert!(!is_sentence(mathematics), "{mathematics}");
        }
    }
}
