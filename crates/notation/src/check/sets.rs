//! Sets: listed, ranges, builders, operations, and the graph words E(S), δ⁺(S), δ⁻(S), δ(S).

use super::{Bound, Checker, Form, Global, Typed};
use crate::diagnostic::shapes as message;
use crate::place::Span;
use crate::plan::{Node, Pattern, Root, SetOperator, Shape, Slot, Step};
use crate::syntax::{Additive, Big, Clause, Expression, Kind, Multiplicative, Name, Relation};

impl Checker<'_> {
    /// An expression that is a set, with the roots of its places; `∅` has none.
    pub(super) fn set(&mut self, expression: &Expression) -> Option<(Node, Vec<Root>)> {
        let typed = self.expression(expression)?;
        match typed.form {
            Form::Set(roots) => Some((typed.node, roots)),
            Form::Empty => Some((typed.node, Vec::new())),
            form => self.report(message::expected("a set", form.noun(), typed.span)),
        }
    }

    /// Whether an expression reads as a set, without saying so when it cannot be read.
    pub(super) fn is_set(&self, expression: &Expression) -> bool {
        match &expression.kind {
            Kind::Set(_) | Kind::Range(..) | Kind::Builder(..) | Kind::EmptySet => true,
            Kind::Big(Big::Union | Big::Intersection, ..) => true,
            Kind::Additive(first, rest) => {
                rest.iter().any(|(op, _)| matches!(op, Additive::Union | Additive::Difference))
                    || self.is_set(first)
            }
            Kind::Multiplicative(first, _) => self.is_set(first),
            Kind::Call(name, _) => self.graph_word(name).is_some(),
            Kind::Name(name) => {
                if let Some(at) = self.local(&name.text) {
                    return matches!(self.locals[at].what, Bound::Subset(_));
                }
                match self.names.get(&name.text) {
                    Some(Global::Symbol(id)) => matches!(self.symbols[*id].shape, Shape::Set(_)),
                    _ => false,
                }
            }
            _ => false,
        }
    }

    /// `{a, b}`, `{(i,j)}`.
    pub(super) fn listed(&mut self, items: &[Expression], span: Span) -> Option<Typed> {
        let mut members = Vec::with_capacity(items.len());
        let mut roots: Option<Vec<Root>> = None;
        for item in items {
            let (nodes, found) = self.tuple(item)?;
            roots = Some(match roots {
                None => found,
                Some(roots) if roots.len() == found.len() => joined(&roots, &found),
                Some(roots) => {
                    return self.report(message::tuple_size(roots.len(), found.len(), item.span));
                }
            });
            members.push(nodes);
        }
        let roots = roots.unwrap_or_else(|| vec![Root::Unknown]);
        let node = Node::Members(roots.len(), members);
        Some(Typed { node, form: Form::Set(roots), variable: None, span })
    }

    /// A tuple, or a single element as a tuple of one.
    pub(super) fn tuple(&mut self, expression: &Expression) -> Option<(Vec<Node>, Vec<Root>)> {
        let items = match &expression.kind {
            Kind::Tuple(items) => items.as_slice(),
            _ => std::slice::from_ref(expression),
        };
        let items: Vec<Expression> = items.iter().flat_map(|item| self.places(item)).collect();
        let read: Vec<Option<(Node, Root)>> = items.iter().map(|item| self.index(item)).collect();
        let read: Vec<(Node, Root)> = read.into_iter().collect::<Option<_>>()?;
        Some(read.into_iter().unzip())
    }

    pub(super) fn range(
        &mut self,
        from: &Expression,
        to: &Expression,
        span: Span,
    ) -> Option<Typed> {
        let from = self.data(from, "a range");
        let to = self.data(to, "a range");
        let node = Node::Range(Box::new(from?), Box::new(to?), span);
        Some(Typed { node, form: Form::Set(vec![Root::Integer]), variable: None, span })
    }

    /// `{(i,j) ∈ V × V : i < j}`, `{i + 1 : i ∈ T}`.
    pub(super) fn builder(
        &mut self,
        member: &Expression,
        conditions: &[Expression],
        span: Span,
    ) -> Option<Typed> {
        let outer = self.locals.len();
        let typed = self.built(member, conditions, span);
        self.locals.truncate(outer);
        typed
    }

    fn built(
        &mut self,
        member: &Expression,
        conditions: &[Expression],
        span: Span,
    ) -> Option<Typed> {
        let (items, shown) = match &member.kind {
            Kind::Chain(pattern, _) => (vec![member.clone()], pattern.as_ref()),
            _ => (Vec::new(), member),
        };
        let clause = Clause { items, such_that: conditions.to_vec(), span };
        let steps = self.quantify(&[clause], &[], false)?;
        let (nodes, roots) = match &shown.kind {
            Kind::Name(name) if !self.is_known(&name.text) => {
                let letters = self.spread(std::slice::from_ref(shown), usize::MAX);
                let read: Vec<Option<(Node, Root)>> =
                    letters.iter().map(|l| self.index(l)).collect();
                let read: Vec<(Node, Root)> = read.into_iter().collect::<Option<_>>()?;
                read.into_iter().unzip()
            }
            _ => self.tuple(shown)?,
        };
        let node = Node::Builder(steps, nodes, span);
        Some(Typed { node, form: Form::Set(roots), variable: None, span })
    }

    pub(super) fn set_sum(
        &mut self,
        first: &Expression,
        rest: &[(Additive, Expression)],
        span: Span,
    ) -> Option<Typed> {
        let (mut node, mut roots) = self.set(first)?;
        for (operator, operand) in rest {
            let (next, found) = self.set(operand)?;
            if !roots.is_empty() && !found.is_empty() && roots.len() != found.len() {
                return self.report(message::tuple_size(roots.len(), found.len(), operand.span));
            }
            let operator = match operator {
                Additive::Union => {
                    roots = if roots.is_empty() { found } else { joined_or(&roots, &found) };
                    SetOperator::Union
                }
                Additive::Difference => SetOperator::Difference,
                _ => {
                    return self.report(message::expected(
                        "∪ or ∖ between sets",
                        "+ or −",
                        operand.span,
                    ));
                }
            };
            node = Node::SetOperation(operator, Box::new(node), Box::new(next));
        }
        Some(Typed { node, form: Form::Set(roots), variable: None, span })
    }

    pub(super) fn set_product(
        &mut self,
        first: Typed,
        rest: &[(Multiplicative, Expression)],
        span: Span,
    ) -> Option<Typed> {
        let mut roots = match first.form {
            Form::Set(roots) => roots,
            Form::Empty => Vec::new(),
            form => return self.report(message::expected("a set", form.noun(), first.span)),
        };
        let mut node = first.node;
        for (operator, operand) in rest {
            let (next, found) = self.set(operand)?;
            node = match operator {
                Multiplicative::Cross => {
                    roots.extend(found);
                    match node {
                        Node::Cross(mut factors, span) => {
                            factors.push(next);
                            Node::Cross(factors, span)
                        }
                        node => Node::Cross(vec![node, next], span),
                    }
                }
                Multiplicative::Intersection => {
                    Node::SetOperation(SetOperator::Intersection, Box::new(node), Box::new(next))
                }
                _ => {
                    return self.report(message::expected(
                        "× or ∩ between sets",
                        "a product",
                        operand.span,
                    ));
                }
            };
        }
        Some(Typed { node, form: Form::Set(roots), variable: None, span })
    }

    /// `⋃_{k ∈ K} V_k`: what is in one of the sets; `⋂`: in as many as there are.
    pub(super) fn big_set(
        &mut self,
        big: Big,
        clause: &Clause,
        body: &Expression,
        span: Span,
    ) -> Option<Typed> {
        let outer = self.locals.len();
        let walked = self.members_of_each(clause, body);
        self.locals.truncate(outer);
        let (mut steps, slots, roots) = walked?;
        let tuple: Vec<Node> = slots.into_iter().map(Node::Slot).collect();
        if big == Big::Intersection {
            let all = self.quantify(std::slice::from_ref(clause), &[body], false);
            let set = self.set(body);
            self.locals.truncate(outer);
            let (all, (set, _)) = (all?, set?);
            let mut holding = all.clone();
            holding.push(Step::When(Node::Member(true, tuple.clone(), Box::new(set)), span));
            let count = |steps: Vec<Step>| {
                Box::new(Node::Over(
                    Big::Sum,
                    steps,
                    Box::new(Node::Number(model::Number::ONE)),
                    span,
                ))
            };
            let every = Node::Compare(Relation::Equal, count(holding), count(all));
            steps.push(Step::When(every, span));
        }
        let node = Node::Builder(steps, tuple, span);
        Some(Typed { node, form: Form::Set(roots), variable: None, span })
    }

    fn members_of_each(
        &mut self,
        clause: &Clause,
        body: &Expression,
    ) -> Option<(Vec<Step>, Vec<Slot>, Vec<Root>)> {
        let mut steps = self.quantify(std::slice::from_ref(clause), &[body], false)?;
        let (more, slots, roots) = self.walk_set(body)?;
        steps.extend(more);
        Some((steps, slots, roots))
    }

    /// Steps that walk through a set expression, with the slots and roots of its places.
    pub(super) fn walk_set(
        &mut self,
        set: &Expression,
    ) -> Option<(Vec<Step>, Vec<Slot>, Vec<Root>)> {
        if let Kind::Call(name, arguments) = &set.kind
            && let Some(word) = self.graph_word(name)
        {
            return self.walk_graph(word, name, arguments, set.span);
        }
        let span = set.span;
        let (set, roots) = self.set(set)?;
        let slots: Vec<Slot> = roots.iter().map(|&root| self.bind("", root)).collect();
        let pattern = slots.iter().map(|&slot| Pattern::Bind(slot)).collect();
        Some((vec![Step::Over { pattern, set, span }], slots, roots))
    }

    /// What `E(…)` or `δ⁺(…)` stands for, where the name is such a word.
    pub(super) fn graph_word(&self, name: &Name) -> Option<GraphWord> {
        if let Some(Global::Symbol(id)) = self.names.get(&name.text)
            && let Shape::Set(roots) = &self.symbols[*id].shape
            && roots.len() == 2
            && self.symbols[*id].roots.is_empty()
        {
            return Some(GraphWord::Inside(*id));
        }
        if self.is_known(&name.text) {
            return None;
        }
        match name.text.as_str() {
            "δ" => self.graph("E", "A").map(GraphWord::Crossing),
            "δ^+" => self.graph("A", "E").map(GraphWord::Leaving),
            "δ^-" => self.graph("A", "E").map(GraphWord::Entering),
            _ => None,
        }
    }

    /// The set of pairs that δ is about: the one of the usual name.
    fn graph(&self, first: &str, second: &str) -> Option<usize> {
        [first, second].into_iter().find_map(|name| match self.names.get(name) {
            Some(Global::Symbol(id)) if matches!(&self.symbols[*id].shape, Shape::Set(r) if r.len() == 2) => Some(*id),
            _ => None,
        })
    }

    /// A graph word as a set by itself cannot stand in a sum of numbers.
    pub(super) fn graph_call(
        &mut self,
        name: &Name,
        arguments: &[Expression],
        span: Span,
    ) -> Option<Option<Typed>> {
        let word = self.graph_word(name)?;
        let outer = self.locals.len();
        let walked = self.walk_graph(word, name, arguments, span);
        self.locals.truncate(outer);
        Some(walked.map(|(steps, slots, roots)| {
            let tuple = slots.into_iter().map(Node::Slot).collect();
            Typed {
                node: Node::Builder(steps, tuple, span),
                form: Form::Set(roots),
                variable: None,
                span,
            }
        }))
    }

    fn walk_graph(
        &mut self,
        word: GraphWord,
        name: &Name,
        arguments: &[Expression],
        span: Span,
    ) -> Option<(Vec<Step>, Vec<Slot>, Vec<Root>)> {
        let [argument] = arguments else {
            return self.report(message::expected("one set or element", "several", span));
        };
        let (GraphWord::Inside(id)
        | GraphWord::Leaving(id)
        | GraphWord::Entering(id)
        | GraphWord::Crossing(id)) = word;
        self.symbols[id].used = true;
        let Shape::Set(roots) = self.symbols[id].shape.clone() else {
            return self.report(message::expected("a set of pairs", &name.text, span));
        };
        let set = if self.is_set(argument) {
            self.set(argument)?.0
        } else {
            Node::Members(1, vec![vec![self.index(argument)?.0]])
        };
        let slots = [self.bind("", roots[0]), self.bind("", roots[1])];
        let pattern = slots.iter().map(|&slot| Pattern::Bind(slot)).collect();
        let mut steps = vec![Step::Over { pattern, set: Node::Symbol(id, Vec::new(), span), span }];
        let member = |inside: bool, slot: Slot| {
            Node::Member(inside, vec![Node::Slot(slot)], Box::new(set.clone()))
        };
        let both = |a: bool, b: bool| Node::All(vec![member(a, slots[0]), member(b, slots[1])]);
        let condition = match word {
            GraphWord::Inside(_) => both(true, true),
            GraphWord::Leaving(_) => both(true, false),
            GraphWord::Entering(_) => both(false, true),
            GraphWord::Crossing(_) => Node::Any(vec![both(true, false), both(false, true)]),
        };
        steps.push(Step::When(condition, span));
        Some((steps, slots.to_vec(), roots))
    }
}

/// The graph words, each with its set of pairs.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum GraphWord {
    Inside(usize),
    Leaving(usize),
    Entering(usize),
    Crossing(usize),
}

fn joined(a: &[Root], b: &[Root]) -> Vec<Root> {
    a.iter().zip(b).map(|(&a, &b)| if a == b { a } else { Root::Unknown }).collect()
}

fn joined_or(a: &[Root], b: &[Root]) -> Vec<Root> {
    if b.is_empty() { a.to_vec() } else { joined(a, b) }
}
