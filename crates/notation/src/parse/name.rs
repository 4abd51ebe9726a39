//! Names with their decorations, subscripts and superscripts.

use super::{Parser, Read};
use crate::lex::token::Kind as T;
use crate::syntax::{Expression, Kind, Name};

impl Parser<'_> {
    /// A word, what hangs on it, and a bracket that touches it.
    pub(super) fn name(&mut self) -> Read<Expression> {
        let start = self.here();
        let mut name = Name {
            text: self.tokens[self.at].text.clone(),
            indices: Vec::new(),
            superscript: None,
        };
        self.bump();
        loop {
            let before = self.at;
            if self.peek() == T::Underscore && name.indices.is_empty() {
                self.bump();
                self.subscript(&mut name)?;
            } else if self.peek() == T::Caret && name.superscript.is_none() {
                self.bump();
                self.superscript(&mut name)?;
            } else {
                break;
            }
            debug_assert!(self.at > before, "a decoration must move on");
        }
        let touches = self.gap() == crate::lex::token::Gap::default();
        if self.peek() == T::LeftParen
            && touches
            && name.indices.is_empty()
            && name.superscript.is_none()
        {
            self.bump();
            let inner = self.bracketed(T::RightParen, "“)”")?;
            return Ok(self.make(Kind::Call(name, inner), start));
        }
        Ok(self.make(Kind::Name(name), start))
    }

    fn subscript(&mut self, name: &mut Name) -> Read<()> {
        if let Some(decoration) = self.decoration() {
            name.text.push('_');
            name.text.push_str(&decoration);
            return Ok(());
        }
        name.indices = self.grouped(Self::items)?;
        Ok(())
    }

    fn superscript(&mut self, name: &mut Name) -> Read<()> {
        if let Some(decoration) = self.decoration() {
            if !decoration.starts_with('\'') {
                name.text.push('^');
            }
            name.text.push_str(&decoration);
            return Ok(());
        }
        let start = self.here();
        let mut items = if self.peek() == T::LeftBrace {
            self.grouped(Self::items)?
        } else {
            vec![self.grouped(Self::additive)?]
        };
        name.superscript = Some(Box::new(match items.len() {
            1 => items.remove(0),
            _ => self.make(Kind::Tuple(items), start),
        }));
        Ok(())
    }

    /// Whether a prime stands so many tokens ahead.
    pub(super) fn at_prime(&self, by: usize) -> bool {
        let token = self.tokens.get(self.at + by).filter(|_| self.at + by < self.end);
        token.is_some_and(|t| t.kind == T::Word && t.text.chars().all(|c| c == '\''))
    }

    /// What belongs to a name: `\max`, `\text{in}`, `+`, alone in the group.
    fn decoration(&mut self) -> Option<String> {
        let braced = usize::from(self.peek() == T::LeftBrace);
        if self.at_prime(braced) {
            let count = (braced..).take_while(|by| self.at_prime(*by)).count();
            let text: String =
                (0..count).map(|k| self.tokens[self.at + braced + k].text.as_str()).collect();
            self.at += count + 2 * braced;
            return Some(text);
        }
        if braced == 1 && self.ahead(2) != T::RightBrace {
            return None;
        }
        let text = match self.ahead(braced) {
            T::Max => "{\\max}".to_owned(),
            T::Min => "{\\min}".to_owned(),
            T::Plus => "+".to_owned(),
            T::Minus => "-".to_owned(),
            T::Dot => "*".to_owned(),
            T::Text => format!("{{\\text{{{}}}}}", self.tokens[self.at + braced].text),
            _ => return None,
        };
        self.at += 1 + 2 * braced;
        Some(text)
    }

    /// A word alone, without what hangs on it.
    pub(super) fn bare_word(&mut self) -> Expression {
        let start = self.here();
        let text = self.tokens[self.at].text.clone();
        self.bump();
        let name = Name { text, indices: Vec::new(), superscript: None };
        self.make(Kind::Name(name), start)
    }

    /// A list of expressions up to a closing bracket.
    pub(super) fn bracketed(&mut self, close: T, wanted: &str) -> Read<Vec<Expression>> {
        let items = self.within(super::Surroundings::default(), |p| p.nested(Self::items))?;
        self.expect(close, wanted)?;
        Ok(items)
    }
}
