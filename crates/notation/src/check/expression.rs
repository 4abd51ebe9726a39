//! Numbers and linear expressions: shapes, and which terms hold variables.

use super::{Checker, Form, Global, Typed};
use crate::diagnostic::{rows, shapes as message};
use crate::place::Span;
use crate::plan::{Node, Root, Slot, Step};
use crate::syntax::{Additive, Big, Clause, Expression, Function, Kind, Multiplicative, Name};
use model::Number;

impl Checker<'_> {
    /// Resolves an expression; what mentions no bound name and no variable is evaluated once.
    pub(super) fn expression(&mut self, expression: &Expression) -> Option<Typed> {
        let outer = std::mem::replace(&mut self.lowest, usize::MAX);
        let known = self.locals.len();
        let typed = self.resolve(expression);
        let open = self.lowest < known;
        self.lowest = self.lowest.min(outer);
        let mut typed = typed?;
        let composite = !matches!(
            typed.node,
            Node::Number(_) | Node::Slot(_) | Node::Symbol(..) | Node::Once(..)
        );
        if composite && !open && typed.variable.is_none() && typed.form != Form::Truth {
            typed.node = Node::Once(self.cells, Box::new(typed.node));
            self.cells += 1;
        }
        Some(typed)
    }

    fn resolve(&mut self, expression: &Expression) -> Option<Typed> {
        let span = expression.span;
        match &expression.kind {
            Kind::Number(value) => Some(self.constant(Node::Number(value.clone()), span)),
            Kind::Infinity => self.report(rows::objective_infinite(span)),
            Kind::Name(name) => self.name(name, span),
            Kind::Call(name, arguments) => self.call(name, arguments, span),
            Kind::Negative(inner) => {
                let inner = self.numeric(inner)?;
                Some(Typed {
                    node: Node::Negative(Box::new(inner.node)),
                    form: Form::Number,
                    span,
                    ..inner
                })
            }
            Kind::Additive(first, rest) => self.additive(first, rest, span),
            Kind::Multiplicative(first, rest) => self.multiplicative(first, rest, span),
            Kind::Power(base, exponent) => {
                let base = self.numeric(base)?;
                self.power(base, exponent)
            }
            Kind::Big(big @ (Big::Union | Big::Intersection), clause, body) => {
                self.big_set(*big, clause, body, span)
            }
            Kind::Big(big, clause, body) => self.big(*big, clause, body, span),
            Kind::Function(function, arguments) => self.function(*function, arguments, span),
            Kind::Tuple(_) => self.report(message::expected("a number or a set", "a tuple", span)),
            Kind::Set(items) => self.listed(items, span),
            Kind::Range(from, to) => self.range(from, to, span),
            Kind::Builder(member, conditions) => self.builder(member, conditions, span),
            Kind::EmptySet => Some(Typed {
                node: Node::Members(1, Vec::new()),
                form: Form::Empty,
                variable: None,
                span,
            }),
            Kind::Interval(..) => self.report(message::not_supported("an interval", span)),
            Kind::NumberSet(_) => {
                self.report(message::not_supported("a set of all numbers of a kind", span))
            }
            Kind::Chain(..)
            | Kind::Parity(..)
            | Kind::Clique(..)
            | Kind::All(_)
            | Kind::Any(_)
            | Kind::Not(_) => {
                let node = self.truth(expression)?;
                Some(Typed { node, form: Form::Truth, variable: None, span })
            }
        }
    }

    pub(super) fn constant(&self, node: Node, span: Span) -> Typed {
        Typed { node, form: Form::Number, variable: None, span }
    }

    /// An expression that is a number, perhaps with variables; whole elements count.
    pub(super) fn numeric(&mut self, expression: &Expression) -> Option<Typed> {
        // {c}: a group of TeX
        if let Kind::Set(items) = &expression.kind
            && let [only] = &items[..]
            && !matches!(only.kind, Kind::Range(..))
        {
            return self.numeric(only);
        }
        let typed = self.expression(expression)?;
        self.as_number(typed)
    }

    pub(super) fn as_number(&mut self, typed: Typed) -> Option<Typed> {
        match typed.form {
            Form::Number | Form::Element(_) => Some(Typed { form: Form::Number, ..typed }),
            form => self.report(message::expected("a number", form.noun(), typed.span)),
        }
    }

    /// A number with no variable in it.
    pub(super) fn data(&mut self, expression: &Expression, what: &str) -> Option<Node> {
        let typed = self.numeric(expression)?;
        match typed.variable {
            Some(span) => self.report(message::not_constant(what, span)),
            None => Some(typed.node),
        }
    }

    /// A linear expression.
    pub(super) fn linear(&mut self, expression: &Expression) -> Option<Typed> {
        self.numeric(expression)
    }

    fn additive(
        &mut self,
        first: &Expression,
        rest: &[(Additive, Expression)],
        span: Span,
    ) -> Option<Typed> {
        let sets = rest.iter().any(|(op, _)| matches!(op, Additive::Union | Additive::Difference));
        if sets {
            return self.set_sum(first, rest, span);
        }
        let first = self.numeric(first);
        let rest: Vec<Option<(bool, Typed)>> = rest
            .iter()
            .map(|(op, operand)| Some((*op == Additive::Minus, self.numeric(operand)?)))
            .collect();
        let first = first?;
        let mut variable = first.variable;
        let mut terms = vec![(false, first.node)];
        for term in rest {
            let (minus, typed) = term?;
            variable = variable.or(typed.variable);
            terms.push((minus, typed.node));
        }
        Some(Typed { node: Node::Add(terms), form: Form::Number, variable, span })
    }

    fn multiplicative(
        &mut self,
        first: &Expression,
        rest: &[(Multiplicative, Expression)],
        span: Span,
    ) -> Option<Typed> {
        let typed = self.expression(first);
        let is_set = matches!(&typed, Some(Typed { form: Form::Set(_) | Form::Empty, .. }));
        if is_set || rest.iter().any(|(op, _)| *op == Multiplicative::Intersection) {
            return self.set_product(typed?, rest, span);
        }
        let operands: Vec<_> =
            rest.iter().map(|(op, operand)| Some((*op, self.numeric(operand)?))).collect();
        let mut product = self.as_number(typed?)?;
        for operand in operands {
            let (operator, operand) = operand?;
            product = match operator {
                Multiplicative::Over | Multiplicative::Modulo => {
                    self.divide(product, operand, operator, span)?
                }
                _ => self.multiply(vec![product, operand], span)?,
            };
        }
        Some(Typed { span, ..product })
    }

    fn divide(
        &mut self,
        over: Typed,
        under: Typed,
        operator: Multiplicative,
        span: Span,
    ) -> Option<Typed> {
        if let Some(variable) = under.variable {
            return self.report(message::quotient(span, variable));
        }
        let (a, b) = (Box::new(over.node), Box::new(under.node));
        if operator == Multiplicative::Over {
            let node = Node::Divide(a, b, under.span);
            return Some(Typed { node, form: Form::Number, variable: over.variable, span });
        }
        match over.variable {
            Some(variable) => self.report(message::not_constant("mod", variable)),
            None => Some(self.constant(Node::Modulo(a, b, under.span), span)),
        }
    }

    pub(super) fn multiply(&mut self, factors: Vec<Typed>, span: Span) -> Option<Typed> {
        let mut variable: Option<Span> = None;
        let mut nodes = Vec::with_capacity(factors.len());
        for factor in factors {
            let factor = self.as_number(factor)?;
            if let (Some(first), Some(second)) = (variable, factor.variable) {
                return self.report(message::product(span, first, second));
            }
            variable = variable.or(factor.variable);
            match factor.node {
                Node::Multiply(inner) => nodes.extend(inner),
                node => nodes.push(node),
            }
        }
        Some(Typed { node: Node::Multiply(nodes), form: Form::Number, variable, span })
    }

    pub(super) fn power(&mut self, base: Typed, exponent: &Expression) -> Option<Typed> {
        let node = self.data(exponent, "an exponent")?;
        let span = base.span.to(exponent.span);
        let base = self.as_number(base)?;
        if let Some(variable) = base.variable {
            return self.report(message::product(span, variable, variable));
        }
        Some(self.constant(Node::Power(Box::new(base.node), Box::new(node), exponent.span), span))
    }

    fn function(
        &mut self,
        function: Function,
        arguments: &[Expression],
        span: Span,
    ) -> Option<Typed> {
        if function == Function::Bars {
            let typed = self.expression(arguments.first()?)?;
            if matches!(typed.form, Form::Set(_) | Form::Empty) {
                return Some(self.constant(Node::Size(Box::new(typed.node)), span));
            }
            let typed = self.as_number(typed)?;
            if let Some(variable) = typed.variable {
                return self.report(message::not_constant("an absolute value", variable));
            }
            return Some(self.constant(Node::Absolute(Box::new(typed.node)), span));
        }
        let what = match function {
            Function::Floor | Function::Ceiling => "rounding",
            _ => "min or max",
        };
        let nodes: Vec<Option<Node>> = arguments.iter().map(|a| self.data(a, what)).collect();
        let mut nodes: Vec<Node> = nodes.into_iter().collect::<Option<_>>()?;
        if let Some(node) = self.half_of_odd(function, &nodes) {
            return Some(self.constant(node, span));
        }
        let node = match function {
            Function::Floor => Node::Floor(Box::new(nodes.pop()?)),
            Function::Ceiling => Node::Ceiling(Box::new(nodes.pop()?)),
            Function::Minimum => Node::Least(nodes),
            _ => Node::Greatest(nodes),
        };
        Some(self.constant(node, span))
    }

    /// `⌊|S|/2⌋` where `|S|` is odd is `(|S| − 1)/2`.
    fn half_of_odd(&self, function: Function, nodes: &[Node]) -> Option<Node> {
        let step = match function {
            Function::Floor => true,
            Function::Ceiling => false,
            _ => return None,
        };
        let [Node::Divide(size, two, place)] = nodes else { return None };
        let subset = |node: &Node| matches!(node, Node::Size(set) if matches!(**set, Node::Subset));
        let halved = matches!(two.as_ref(), Node::Number(n) if *n == Number::from(2));
        if !subset(size)
            || !halved
            || !is_odd(self.subset.as_ref()?.conditions.iter().map(|c| &c.0))
        {
            return None;
        }
        let one = Node::Number(Number::ONE);
        let sum = Node::Add(vec![(false, size.as_ref().clone()), (step, one)]);
        Some(Node::Divide(Box::new(sum), two.clone(), *place))
    }

    fn big(&mut self, big: Big, clause: &Clause, body: &Expression, span: Span) -> Option<Typed> {
        let outer = self.locals.len();
        let steps = self.quantify(std::slice::from_ref(clause), &[body], false);
        let binds = self.locals.len() > outer;
        let Some(steps) = steps else {
            self.locals.truncate(outer);
            return None;
        };
        if !binds && !matches!(steps[..], [Step::Over { .. }, ..]) {
            return self.report(crate::diagnostic::names::no_index(clause.span));
        }
        let body = self.numeric(body);
        self.locals.truncate(outer);
        let body = body?;
        if let (Some(variable), true) = (body.variable, big != Big::Sum) {
            return self
                .report(message::not_constant("a product, min or max over an index", variable));
        }
        let node = Node::Over(big, steps, Box::new(body.node), span);
        Some(Typed { node, form: Form::Number, variable: body.variable, span })
    }

    /// `x(F)` is Σ_{a∈F} x_a where `F` is a set; else `n(n−1)` is a product.
    fn call(&mut self, name: &Name, arguments: &[Expression], span: Span) -> Option<Typed> {
        let callee =
            self.names.get(&name.text).copied().filter(|_| self.local(&name.text).is_none());
        if let Some(graph) = self.graph_call(name, arguments, span) {
            return graph;
        }
        let [argument] = arguments else {
            return self.report(message::expected("one argument", "several", span));
        };
        let roots = match callee {
            Some(Global::Variable(number)) => self.variables[number].roots.clone(),
            Some(Global::Symbol(id)) => self.symbols[id].roots.clone(),
            None => Vec::new(),
        };
        if roots.is_empty() || !self.is_set(argument) {
            let factor = self.name(name, span)?;
            let argument = self.numeric(argument)?;
            return self.multiply(vec![factor, argument], span);
        }
        let outer = self.locals.len();
        let typed = self.sum_over(name, argument, &roots, span);
        self.locals.truncate(outer);
        typed
    }

    fn sum_over(
        &mut self,
        name: &Name,
        set: &Expression,
        roots: &[Root],
        span: Span,
    ) -> Option<Typed> {
        let (steps, slots, found) = self.walk_set(set)?;
        if slots.len() != roots.len() {
            return self.report(message::indices(&name.text, roots.len(), slots.len(), span));
        }
        for (place, (&wanted, &found)) in roots.iter().zip(&found).enumerate() {
            if !self.fits((name, place + 1), wanted, found, span) {
                return None;
            }
        }
        let indices: Vec<Node> = slots.into_iter().map(|s: Slot| Node::Slot(s)).collect();
        let (node, variable) = match self.names.get(&name.text).copied() {
            Some(Global::Variable(number)) => {
                self.variables[number].used = true;
                (Node::Variable(number, indices, span), Some(span))
            }
            Some(Global::Symbol(id)) => {
                self.symbols[id].used = true;
                (Node::Symbol(id, indices, span), None)
            }
            None => return self.undeclared(&name.text, span),
        };
        let node = Node::Over(Big::Sum, steps, Box::new(node), span);
        Some(Typed { node, form: Form::Number, variable, span })
    }
}

/// Whether one of the conditions says that the subset has odd size.
fn is_odd<'n>(mut conditions: impl Iterator<Item = &'n Node>) -> bool {
    conditions.any(|node| match node {
        Node::Parity(true, size, _) => {
            matches!(size.as_ref(), Node::Size(set) if matches!(**set, Node::Subset))
        }
        Node::All(all) => is_odd(all.iter()),
        _ => false,
    })
}
