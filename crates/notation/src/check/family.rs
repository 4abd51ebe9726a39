//! Constraint families: rows, ranges, split chains, labels.

use std::collections::BTreeMap;

use super::domain::{Role, operands};
use super::{Bound, Checker, Typed};
use crate::diagnostic::{names, rows as message};
use crate::place::Span;
use crate::plan::{FamilyPlan, Root, RowPlan, Slot};
use crate::print;
use crate::syntax::{Expression, Line, Relation};

impl<'t> Checker<'t> {
    pub(super) fn families(&mut self, roles: &[Role]) -> Vec<FamilyPlan> {
        let tree = self.tree;
        let mut labels: BTreeMap<&str, Span> = BTreeMap::new();
        let mut families = Vec::new();
        let mut number = 0;
        for (line, role) in tree.statements.iter().zip(roles) {
            if *role == Role::Domain {
                continue;
            }
            number += 1;
            if let Some(label) = &line.label {
                if let Some(&first) = labels.get(label.text.as_str()) {
                    let _: Option<()> =
                        self.report(names::label_twice(&label.text, label.span, first));
                }
                labels.insert(&label.text, label.span);
            }
            let name =
                line.label.as_ref().map_or_else(|| format!("row {number}"), |l| l.text.clone());
            families.extend(self.family(line, role, name));
        }
        families
    }

    fn family(&mut self, line: &'t Line, role: &Role, name: String) -> Option<FamilyPlan> {
        self.fresh_line();
        let carriers = operands(line);
        if line.left.len() > 1 {
            return self.report(message::relation(line.left[1].span));
        }
        let steps = self.quantify(&line.clauses, &carriers, true)?;
        let rows = self.rows(line, role);
        let (tuple, roots) = self.tuple_of_family();
        let subset = self.subset.take();
        let arrow = is_arrow(&roots) && subset.is_none();
        Some(FamilyPlan { name, span: line.span, steps, tuple, arrow, subset, rows: rows? })
    }

    /// The bound elements in order: the index tuple of a row.
    fn tuple_of_family(&self) -> (Vec<Slot>, Vec<Root>) {
        let elements = self.locals.iter().filter_map(|local| match local.what {
            Bound::Element(slot, root) => Some((slot, root)),
            Bound::Subset(_) | Bound::Tuple(_) => None,
        });
        elements.unzip()
    }

    fn rows(&mut self, line: &Line, role: &Role) -> Option<Vec<RowPlan>> {
        let expressions: Vec<&Expression> = operands(line);
        let typed: Vec<Option<Typed>> = expressions.iter().map(|e| self.linear(e)).collect();
        for (k, (relation, _)) in line.links.iter().enumerate() {
            let span = expressions[k].span.to(expressions[k + 1].span);
            match relation {
                Relation::Equal | Relation::AtMost | Relation::AtLeast => {}
                Relation::Less | Relation::Greater | Relation::NotEqual => {
                    let weak = weak(expressions[k], *relation, expressions[k + 1]);
                    return self.report(message::strict(span, weak));
                }
                _ => return self.report(message::relation(span)),
            }
        }
        let typed: Vec<Typed> = typed.into_iter().collect::<Option<_>>()?;
        let relations: Vec<Relation> = line.links.iter().map(|(relation, _)| *relation).collect();
        if let Some(ranged) = ranged(&typed, &relations) {
            return Some(vec![ranged]);
        }
        let is_bound = |k: usize| matches!(role, Role::Links(links) if links.contains(&k));
        let mut rows = Vec::new();
        for (k, relation) in relations.iter().enumerate().filter(|(k, _)| !is_bound(*k)) {
            rows.push(RowPlan::Link(typed[k].node.clone(), *relation, typed[k + 1].node.clone()));
        }
        Some(rows)
    }
}

/// `a ≤ b` for `a < b`; nothing for `a ≠ b`.
fn weak(left: &Expression, relation: Relation, right: &Expression) -> Option<String> {
    let sign = match relation {
        Relation::Less => Relation::AtMost,
        Relation::Greater => Relation::AtLeast,
        _ => return None,
    };
    let (left, right) = (print::expression(left), print::expression(right));
    Some(format!("{left} {} {right}", print::sign(sign)))
}

/// `a ≤ e ≤ b` with constants at both ends is one row.
fn ranged(typed: &[Typed], relations: &[Relation]) -> Option<RowPlan> {
    let [low, middle, high] = typed else { return None };
    let constant = low.variable.is_none() && high.variable.is_none() && middle.variable.is_some();
    let node = |typed: &Typed| typed.node.clone();
    match relations {
        [Relation::AtMost, Relation::AtMost] if constant => {
            Some(RowPlan::Ranged(node(low), node(middle), node(high)))
        }
        [Relation::AtLeast, Relation::AtLeast] if constant => {
            Some(RowPlan::Ranged(node(high), node(middle), node(low)))
        }
        _ => None,
    }
}

/// Directed pairs over one set.
pub(crate) fn is_arrow(roots: &[Root]) -> bool {
    matches!(roots, [Root::Set(a), Root::Set(b)] if a == b)
}
