//! Quantifiers to steps: a new name binds, a bound one makes a condition, left to right.

use super::indices::place_name;
use super::order::in_order_of_need;
use super::{Bound, Checker, Local};
use crate::diagnostic::{names as message, shapes, subsets};
use crate::place::Span;
use crate::plan::{Node, Pattern, Root, SetOperator, Step, SubsetPlan};
use crate::syntax::{Clause, Expression, Kind, Name, Relation};

/// The most indices that are bound on one line, and places that a tuple may have.
pub(super) const INDEX_LIMIT: usize = 24;

/// The work on one quantifier.
pub(super) struct Quantifier<'e> {
    pub(super) steps: Vec<Step>,
    /// New names whose set is still to come.
    pub(super) pending: Vec<(String, Span)>,
    /// How many of them stand before the colon at hand and cannot share a set behind it.
    fenced: usize,
    /// Conditions that wait for a pending name.
    pub(super) deferred: Vec<Expression>,
    pub(super) carriers: Vec<&'e Expression>,
    subsets: bool,
    /// Whether the item at hand stands behind the colon.
    behind_colon: bool,
}

impl Checker<'_> {
    /// The steps of a quantifier. `carriers` are the expressions from whose indices a missing
    /// set can be told; `subsets` says whether a subset may be quantified.
    pub(super) fn quantify(
        &mut self,
        clauses: &[Clause],
        carriers: &[&Expression],
        subsets: bool,
    ) -> Option<Vec<Step>> {
        let mut work = Quantifier {
            steps: Vec::new(),
            pending: Vec::new(),
            fenced: 0,
            deferred: Vec::new(),
            carriers: carriers.to_vec(),
            subsets,
            behind_colon: false,
        };
        let mut sound = true;
        for clause in clauses {
            work.behind_colon = false;
            for item in in_order_of_need(&clause.items) {
                sound &= self.item(item, &mut work).is_some();
            }
            work.fenced = work.pending.len();
            work.behind_colon = true;
            for item in &self.with_shared_sets(&clause.such_that) {
                sound &= self.item(item, &mut work).is_some();
            }
        }
        if !sound {
            return None;
        }
        self.infer(&mut work)?;
        for condition in std::mem::take(&mut work.deferred) {
            self.condition_step(&condition, &mut work)?;
        }
        Some(work.steps)
    }

    /// `i, j ∈ U` behind a colon, both bound: each of them is asked.
    fn with_shared_sets(&self, items: &[Expression]) -> Vec<Expression> {
        let mut out = items.to_vec();
        for at in (1..out.len()).rev() {
            let Kind::Name(name) = &out[at - 1].kind else { continue };
            let Kind::Chain(first, links) = &out[at].kind else { continue };
            let member = matches!(links[..], [(Relation::In, _)]);
            let bound = self.local(&name.text).is_some() && matches!(first.kind, Kind::Name(_));
            if member && bound {
                let kind = Kind::Chain(Box::new(out[at - 1].clone()), links.clone());
                out[at - 1].kind = kind;
            }
        }
        out
    }

    fn item(&mut self, item: &Expression, work: &mut Quantifier<'_>) -> Option<()> {
        if self.locals.len() + work.pending.len() > INDEX_LIMIT {
            return self.report(crate::diagnostic::size::indices(INDEX_LIMIT, item.span));
        }
        match &item.kind {
            Kind::Name(name) if self.is_new(name, work) => {
                work.pending.push((name.text.clone(), item.span));
                Some(())
            }
            Kind::All(items) => {
                for item in items {
                    self.item(item, work)?;
                }
                Some(())
            }
            Kind::Chain(first, links) => self.chain_item(item, first, links, work),
            _ => self.condition_step(item, work),
        }
    }

    /// A bare name that is not bound and not declared.
    pub(super) fn is_new(&self, name: &Name, work: &Quantifier<'_>) -> bool {
        let bare = name.indices.is_empty() && name.superscript.is_none();
        let waiting = work.pending.iter().any(|(n, _)| *n == name.text);
        bare && (waiting || !self.is_known(&name.text) || self.is_only_indexed(&name.text))
    }

    /// Whether a name has a meaning with indices only: bare, it can be an index as well
    /// (`c ∈ C` beside the costs `c_{ij}`).
    fn is_only_indexed(&self, name: &str) -> bool {
        match self.names.get(name) {
            Some(super::Global::Symbol(id)) if self.local(name).is_none() => {
                let symbol = &self.symbols[*id];
                !symbol.roots.is_empty() && symbol.shape == crate::plan::Shape::Number
            }
            _ => false,
        }
    }

    fn new_name<'e>(&self, expression: &'e Expression, work: &Quantifier<'_>) -> Option<&'e Name> {
        match &expression.kind {
            Kind::Name(name) if self.is_new(name, work) => Some(name),
            _ => None,
        }
    }

    fn chain_item(
        &mut self,
        item: &Expression,
        first: &Expression,
        links: &[(Relation, Expression)],
        work: &mut Quantifier<'_>,
    ) -> Option<()> {
        let mut operands: Vec<&Expression> = vec![first];
        operands.extend(links.iter().map(|(_, operand)| operand));
        if let [(Relation::Equal, places), (Relation::In, set)] = links
            && let Kind::Tuple(items) | Kind::Set(items) = &places.kind
            && let Some(name) = self.new_name(first, work)
        {
            self.membership_step(places, set, work)?;
            self.name_places(&name.text, items, work);
            return Some(());
        }
        let binds = |k: usize| match links[k].0 {
            Relation::In => self.has_new(operands[k], work),
            Relation::Subset | Relation::SubsetOrEqual => {
                self.new_name(operands[k], work).is_some()
            }
            _ => false,
        };
        let binder = (0..links.len()).find(|&k| binds(k));
        if let Some(k) = binder {
            return self.bind_in_chain(k, &operands, links, work);
        }
        let new: Vec<&Name> = operands.iter().filter_map(|o| self.new_name(o, work)).collect();
        if new.is_empty() {
            if let (Kind::Name(name), Relation::In, false) =
                (&first.kind, links[0].0, work.behind_colon)
            {
                let _: Option<()> = self.report(message::bound_already(&name.text, item.span));
            }
            return self.condition_step(item, work);
        }
        if self.bounded_chain(&operands, links, work)? {
            work.deferred.push(item.clone());
            return Some(());
        }
        for name in new {
            if !work.pending.iter().any(|(n, _)| *n == name.text) {
                work.pending.push((name.text.clone(), item.span));
            }
        }
        // i < j, k ∈ K: the set of k is not that of i
        work.fenced = work.pending.len();
        work.deferred.push(item.clone());
        Some(())
    }

    /// Binds at link `k` of a chain; its other links are conditions.
    fn bind_in_chain(
        &mut self,
        k: usize,
        operands: &[&Expression],
        links: &[(Relation, Expression)],
        work: &mut Quantifier<'_>,
    ) -> Option<()> {
        if links[k].0 == Relation::In {
            // i ≠ j ∈ V: all of them are from V
            let before: Vec<&Name> =
                operands[..k].iter().filter_map(|o| self.new_name(o, work)).collect();
            let fresh =
                before.into_iter().filter(|n| !work.pending.iter().any(|(p, _)| *p == n.text));
            let fresh: Vec<(String, Span)> =
                fresh.map(|n| (n.text.clone(), operands[k].span)).collect();
            work.pending.extend(fresh);
            self.membership_step(operands[k], operands[k + 1], work)?;
        } else {
            self.subset_step(operands[k], links[k].0, operands[k + 1], work)?;
        }
        for (i, (relation, _)) in links.iter().enumerate().filter(|(i, _)| *i != k) {
            let kind = Kind::Chain(
                Box::new(operands[i].clone()),
                vec![(*relation, operands[i + 1].clone())],
            );
            let span = operands[i].span.to(operands[i + 1].span);
            self.condition_step(&Expression { kind, span }, work)?;
        }
        Some(())
    }

    /// Whether a pattern holds a new name.
    fn has_new(&self, pattern: &Expression, work: &Quantifier<'_>) -> bool {
        match &pattern.kind {
            Kind::Tuple(items) | Kind::Set(items) => {
                items.iter().any(|item| self.new_name(item, work).is_some())
            }
            Kind::Name(_) => self.new_name(pattern, work).is_some(),
            _ => false,
        }
    }

    /// `1 ≤ i < j ≤ n`: the new names run over the whole numbers between the ends.
    fn bounded_chain(
        &mut self,
        operands: &[&Expression],
        links: &[(Relation, Expression)],
        work: &mut Quantifier<'_>,
    ) -> Option<bool> {
        let rises = |r: Relation| matches!(r, Relation::Less | Relation::AtMost);
        let rising = links.iter().all(|(r, _)| rises(*r) || *r == Relation::NotEqual)
            && links.first().is_some_and(|(r, _)| rises(*r))
            && links.last().is_some_and(|(r, _)| rises(*r));
        let (Some(first), Some(last)) = (operands.first(), operands.last()) else {
            return Some(false);
        };
        let inner = &operands[1..operands.len() - 1];
        let closed = self.new_name(first, work).is_none() && self.new_name(last, work).is_none();
        if !rising || !closed || inner.is_empty() {
            return Some(false);
        }
        let from = self.data(first, "a range")?;
        let to = self.data(last, "a range")?;
        let span = first.span.to(last.span);
        let set = Node::Range(Box::new(from), Box::new(to), span);
        for operand in inner {
            let Some(name) = self.new_name(operand, work) else { continue };
            let text = name.text.clone();
            work.pending.retain(|(n, _)| *n != text);
            let slot = self.bind(&text, Root::Integer);
            work.steps.push(Step::Over {
                pattern: vec![Pattern::Bind(slot)],
                set: set.clone(),
                span,
            });
        }
        Some(true)
    }

    pub(super) fn membership_step(
        &mut self,
        left: &Expression,
        right: &Expression,
        work: &mut Quantifier<'_>,
    ) -> Option<()> {
        if let Kind::Name(name) = &left.kind {
            self.shared_sets(name, right, work)?;
        }
        if let Kind::Call(word, _) = &right.kind
            && self.graph_word(word).is_some()
        {
            return self.graph_step(left, right, work);
        }
        let (set, roots) = self.set(right)?;
        if roots.is_empty() {
            let wanted = "a set to draw from";
            return self.report(shapes::expected(wanted, "∅", right.span));
        }
        let items = self.pattern_items(left, roots.len(), work);
        if items.len() > INDEX_LIMIT {
            return self.report(crate::diagnostic::size::indices(INDEX_LIMIT, left.span));
        }
        if items.len() != roots.len() {
            return self.report(shapes::tuple_size(roots.len(), items.len(), left.span));
        }
        let set = if self.is_half_edge(left, work) {
            self.both_ways(set, &roots, left.span)
        } else {
            set
        };
        let tuple = self.tuple_name(left, roots.len(), work);
        let pattern = self.pattern(&items, &roots, work)?;
        self.name_tuple(tuple, roots.len(), work);
        self.push_over(pattern, set, left.span.to(right.span), work);
        Some(())
    }

    /// `i, j ∈ V`: the names that stand before `j` in the same list take the same set.
    fn shared_sets(
        &mut self,
        name: &Name,
        right: &Expression,
        work: &mut Quantifier<'_>,
    ) -> Option<()> {
        let waiting: Vec<(String, Span)> =
            work.pending.drain(work.fenced.min(work.pending.len())..).collect();
        for (other, span) in waiting {
            if other == name.text {
                continue;
            }
            let (set, roots) = self.set(right)?;
            let [root] = roots[..] else {
                return self.report(shapes::tuple_size(roots.len(), 1, span));
            };
            let slot = self.bind(&other, root);
            self.push_over(vec![Pattern::Bind(slot)], set, span, work);
        }
        Some(())
    }

    /// Adds a step; one over the quantified subset itself runs over its ground set, with the
    /// membership as a condition on the subset.
    fn push_over(
        &mut self,
        pattern: Vec<Pattern>,
        set: Node,
        span: Span,
        work: &mut Quantifier<'_>,
    ) {
        let over_subset = work.subsets && names_subset(&set);
        if !over_subset {
            work.steps.push(Step::Over { pattern, set, span });
            return;
        }
        let Some(subset) = &mut self.subset else { return };
        let members = pattern.iter().map(|p| match p {
            Pattern::Bind(slot) | Pattern::Same(slot) => Node::Slot(*slot),
            Pattern::Match(node) => node.clone(),
        });
        let (base, inside, set) = match set {
            // j ∈ V ∖ S runs over V
            Node::SetOperation(SetOperator::Difference, base, other)
                if matches!(*other, Node::Subset) && !names_subset(&base) =>
            {
                (*base, false, *other)
            }
            Node::SetOperation(SetOperator::Intersection, base, other)
                if matches!(*other, Node::Subset) && !names_subset(&base) =>
            {
                (*base, true, *other)
            }
            set => (subset.ground.clone(), true, set),
        };
        subset.conditions.push((Node::Member(inside, members.collect(), Box::new(set)), span));
        work.steps.push(Step::Over { pattern, set: base, span });
    }

    /// The places of a pattern. One word for several places is split into its letters where
    /// they fit (`ij ∈ A`), else it names the tuple (`e ∈ E`).
    fn pattern_items(
        &self,
        left: &Expression,
        wanted: usize,
        work: &Quantifier<'_>,
    ) -> Vec<Expression> {
        let names: Vec<String> = match &left.kind {
            Kind::Tuple(items) | Kind::Set(items) => return items.clone(),
            Kind::Name(name) if wanted > 1 && self.is_new(name, work) => {
                let letters: Vec<String> = name.text.chars().map(String::from).collect();
                if letters.len() == wanted {
                    letters
                } else {
                    (0..wanted).map(|k| place_name(&name.text, k)).collect()
                }
            }
            _ => return vec![left.clone()],
        };
        let item = |text| Expression {
            kind: Kind::Name(Name { text, indices: Vec::new(), superscript: None }),
            span: left.span,
        };
        names.into_iter().map(item).collect()
    }

    /// The name that a pattern of `wanted` places gives to the whole tuple.
    fn tuple_name(
        &self,
        left: &Expression,
        wanted: usize,
        work: &Quantifier<'_>,
    ) -> Option<String> {
        let name = self.new_name(left, work)?;
        (wanted > 1 && name.text.chars().count() != wanted).then(|| name.text.clone())
    }

    fn name_tuple(&mut self, name: Option<String>, places: usize, work: &mut Quantifier<'_>) {
        let Some(name) = name else { return };
        work.pending.retain(|(n, _)| *n != name);
        work.fenced = work.fenced.min(work.pending.len());
        self.locals.push(Local { name, what: Bound::Tuple(places) });
    }

    /// `e = {i,j}`: the whole tuple has a name beside those of its places.
    fn name_places(&mut self, name: &str, items: &[Expression], work: &mut Quantifier<'_>) {
        for (k, item) in items.iter().enumerate() {
            let Kind::Name(place) = &item.kind else { return };
            let Some(at) = self.local(&place.text) else { return };
            let what = self.locals[at].what;
            self.locals.push(Local { name: place_name(name, k), what });
        }
        self.name_tuple(Some(name.to_owned()), items.len(), work);
    }

    fn pattern(
        &mut self,
        items: &[Expression],
        roots: &[Root],
        work: &mut Quantifier<'_>,
    ) -> Option<Vec<Pattern>> {
        let mut pattern = Vec::with_capacity(items.len());
        let mut bound: Vec<(String, usize)> = Vec::new();
        // what is known is matched before the new names are bound
        for (item, &root) in items.iter().zip(roots) {
            if let Kind::Name(name) = &item.kind {
                if let Some((_, slot)) = bound.iter().find(|(n, _)| *n == name.text) {
                    pattern.push(Pattern::Same(*slot));
                    continue;
                }
                if self.is_new(name, work) {
                    work.pending.retain(|(n, _)| *n != name.text);
                    work.fenced = work.fenced.min(work.pending.len());
                    let slot = self.bind(&name.text, root);
                    bound.push((name.text.clone(), slot));
                    pattern.push(Pattern::Bind(slot));
                    continue;
                }
                if matches!(self.names.get(&name.text), Some(super::Global::Variable(_))) {
                    return self.report(message::taken(&name.text, item.span, "variable"));
                }
            }
            if items.iter().any(|other| self.computes_from(item, other, work)) {
                pattern.push(self.computed_place(item, root, work));
                continue;
            }
            pattern.push(Pattern::Match(self.index(item)?.0));
        }
        Some(pattern)
    }

    /// Whether a place of a tuple is computed from one that is bound beside it: `(k, k + w)`.
    fn computes_from(&self, item: &Expression, other: &Expression, work: &Quantifier<'_>) -> bool {
        let Kind::Name(name) = &other.kind else { return false };
        let fresh =
            self.is_new(name, work) || matches!(self.locals.last(), Some(l) if l.name == name.text);
        if !fresh || matches!(item.kind, Kind::Name(_)) {
            return false;
        }
        let mut words = std::collections::BTreeSet::new();
        super::usage::words(item, &mut words);
        words.contains(name.text.as_str())
    }

    /// A place that is bound to a name of its own, with the computation as a condition.
    fn computed_place(
        &mut self,
        item: &Expression,
        root: Root,
        work: &mut Quantifier<'_>,
    ) -> Pattern {
        let own = place_name("computed", self.locals.len());
        let slot = self.bind(&own, root);
        let own = Name { text: own, indices: Vec::new(), superscript: None };
        let own = Expression { kind: Kind::Name(own), span: item.span };
        let kind = Kind::Chain(Box::new(own), vec![(Relation::Equal, item.clone())]);
        work.deferred.push(Expression { kind, span: item.span });
        Pattern::Bind(slot)
    }

    fn graph_step(
        &mut self,
        left: &Expression,
        right: &Expression,
        work: &mut Quantifier<'_>,
    ) -> Option<()> {
        let before = self.locals.len();
        let (steps, slots, _) = self.walk_set(right)?;
        let items = self.pattern_items(left, slots.len(), work);
        if items.len() != slots.len() {
            return self.report(shapes::tuple_size(slots.len(), items.len(), left.span));
        }
        let (tuple, places) = (self.tuple_name(left, slots.len(), work), slots.len());
        work.steps.extend(steps);
        for (at, (item, slot)) in (before..).zip(items.iter().zip(slots)) {
            match self.new_name(item, work).map(|n| n.text.clone()) {
                Some(text) => {
                    work.pending.retain(|(n, _)| *n != text);
                    self.locals[at].name = text;
                }
                None => {
                    let node = self.index(item)?.0;
                    let same = Node::Same(true, Box::new(Node::Slot(slot)), Box::new(node));
                    work.steps.push(Step::When(same, item.span));
                }
            }
        }
        self.name_tuple(tuple, places, work);
        Some(())
    }

    fn subset_step(
        &mut self,
        left: &Expression,
        relation: Relation,
        right: &Expression,
        work: &mut Quantifier<'_>,
    ) -> Option<()> {
        let name = self.new_name(left, work)?.text.clone();
        let span = left.span.to(right.span);
        if !work.subsets {
            return self.report(subsets::misplaced(span));
        }
        if self.subset.is_some() {
            return self.report(subsets::two(span));
        }
        let (ground, roots) = self.set(right)?;
        let [root] = roots[..] else { return self.report(subsets::ground(right.span)) };
        work.pending.retain(|(n, _)| *n != name);
        let proper = relation == Relation::Subset;
        self.locals.push(Local { name: name.clone(), what: Bound::Subset(root) });
        self.subset = Some(SubsetPlan { name, ground, proper, conditions: Vec::new(), span });
        Some(())
    }

    pub(super) fn condition_step(
        &mut self,
        condition: &Expression,
        work: &mut Quantifier<'_>,
    ) -> Option<()> {
        if !work.pending.is_empty() && self.mentions_pending(condition, work) {
            work.deferred.push(condition.clone());
            return Some(());
        }
        let subset_uses = self.subset_uses;
        let node = self.truth(condition)?;
        if work.subsets && self.subset_uses > subset_uses {
            if let Some(subset) = &mut self.subset {
                subset.conditions.push((node, condition.span));
            }
        } else {
            work.steps.push(Step::When(node, condition.span));
        }
        Some(())
    }

    fn mentions_pending(&self, expression: &Expression, work: &Quantifier<'_>) -> bool {
        let own = matches!(&expression.kind, Kind::Name(name) if work.pending.iter().any(|(n, _)| *n == name.text));
        own || super::usage::children(expression)
            .into_iter()
            .any(|child| self.mentions_pending(child, work))
    }
}

/// Whether a set is made from the quantified subset.
fn names_subset(set: &Node) -> bool {
    match set {
        Node::Subset => true,
        Node::SetOperation(_, a, b) => names_subset(a) || names_subset(b),
        _ => false,
    }
}
