//! Subscripts: `x_{i,j}`, `x_{ij}`, `x_i^k`, `s_{t−1}`.

use super::names::{Piece, splits};
use super::{Bound, Checker, Form};
use crate::diagnostic::shapes as message;
use crate::place::Span;
use crate::plan::{Node, Root};
use crate::syntax::{Expression, Kind, Multiplicative, Name};

impl Checker<'_> {
    /// The indices of a name that takes one from each of `roots`, and what is left as a power.
    pub(super) fn indices_of<'n>(
        &mut self,
        name: &'n Name,
        roots: &[Root],
        span: Span,
    ) -> Option<(Vec<Node>, Option<&'n Expression>)> {
        let mut written = self.spread(&name.indices, roots.len());
        let mut power = name.superscript.as_deref();
        if let Some(raised) = power
            && written.len() < roots.len()
        {
            written.extend(self.spread(std::slice::from_ref(raised), roots.len() - written.len()));
            power = None;
        }
        if written.len() != roots.len() {
            return self.report(message::indices(&name.text, roots.len(), written.len(), span));
        }
        let mut nodes = Vec::with_capacity(roots.len());
        let mut sound = true;
        for (place, (index, &wanted)) in written.iter().zip(roots).enumerate() {
            let Some((node, found)) = self.index(index) else {
                sound = false;
                continue;
            };
            sound &= self.fits((name, place + 1), wanted, found, index.span);
            nodes.push(node);
        }
        sound.then_some((nodes, power))
    }

    /// Whether an index from `found` may stand at a place (from 1) that takes one from `wanted`.
    pub(super) fn fits(
        &mut self,
        place: (&Name, usize),
        wanted: Root,
        found: Root,
        span: Span,
    ) -> bool {
        let (Root::Set(a), Root::Set(b)) = (wanted, found) else { return true };
        if a == b {
            return true;
        }
        let (wanted, found) = (self.root_name(wanted), self.root_name(found));
        let diagnostic = message::wrong_set(&place.0.text, place.1, &wanted, &found, span);
        let _: Option<()> = self.report(diagnostic);
        false
    }

    /// Subscripts as separate expressions; letters are split when there are too few.
    pub(super) fn spread(&self, written: &[Expression], wanted: usize) -> Vec<Expression> {
        let written: Vec<Expression> = written.iter().flat_map(|e| self.places(e)).collect();
        let all_known = written.iter().all(|e| match &e.kind {
            Kind::Name(name) if name.indices.is_empty() => self.is_known(&name.text),
            _ => true,
        });
        if written.len() >= wanted && all_known {
            return written;
        }
        written.iter().flat_map(|e| self.letters(e)).collect()
    }

    /// The places of a name that stands for a tuple; else the expression itself.
    pub(super) fn places(&self, expression: &Expression) -> Vec<Expression> {
        if let Kind::Tuple(items) = &expression.kind {
            return items.iter().flat_map(|item| self.places(item)).collect();
        }
        let Kind::Name(name) = &expression.kind else { return vec![expression.clone()] };
        let tuple = self.local(&name.text).map(|at| self.locals[at].what);
        match tuple {
            Some(Bound::Tuple(places)) if name.indices.is_empty() => {
                let place = |k| Piece::Name(place_name(&name.text, k));
                (0..places).map(|k| as_expression(&place(k), expression.span)).collect()
            }
            _ => vec![expression.clone()],
        }
    }

    fn letters(&self, expression: &Expression) -> Vec<Expression> {
        match &expression.kind {
            Kind::Name(name) if name.indices.is_empty() && !self.is_known(&name.text) => {
                let readings = splits(&name.text, &|word| self.is_known(word));
                let mut pieces = if readings.len() == 1 {
                    readings[0].iter().map(|piece| as_expression(piece, expression.span)).collect()
                } else {
                    vec![expression.clone()]
                };
                if let (Some(last), Some(raised)) = (pieces.last_mut(), &name.superscript)
                    && let Kind::Name(last) = &mut last.kind
                {
                    last.superscript = Some(raised.clone());
                }
                pieces
            }
            Kind::Multiplicative(first, rest)
                if rest.iter().all(|(op, _)| *op == Multiplicative::Times) =>
            {
                let factors = [first.as_ref()].into_iter().chain(rest.iter().map(|(_, e)| e));
                factors.flat_map(|factor| self.letters(factor)).collect()
            }
            _ => vec![expression.clone()],
        }
    }

    /// An expression that names an element.
    pub(super) fn index(&mut self, expression: &Expression) -> Option<(Node, Root)> {
        let typed = self.expression(expression)?;
        match typed.form {
            Form::Element(root) => Some((typed.node, root)),
            Form::Number if typed.variable.is_none() => {
                Some((Node::AsElement(Box::new(typed.node), typed.span), Root::Integer))
            }
            Form::Number => self.report(message::not_constant("an index", typed.span)),
            form => self.report(message::expected("an index", form.noun(), typed.span)),
        }
    }
}

/// The name of a place of a tuple; no text can spell it.
pub(super) fn place_name(tuple: &str, place: usize) -> String {
    format!("{tuple}.{}", place + 1)
}

fn as_expression(piece: &Piece, span: Span) -> Expression {
    let kind = match piece {
        Piece::Name(text) => {
            Kind::Name(Name { text: text.clone(), indices: Vec::new(), superscript: None })
        }
        Piece::Number(value) => Kind::Number(value.clone()),
    };
    Expression { kind, span }
}
