//! `|a|`, `min` and `max`: by rows alone where the model gains nothing by the wrong side, else with
//! binaries that say which of the expressions it is.

use model::Number;

use super::ranges::{Range, Ranges, greatest, least};
use super::site::Site;
use super::{Rows, complement, relation};
use crate::print;
use crate::rewrite::{self, add, negative, times};
use crate::syntax::{Big, Clause, Expression, Function, Kind, Relation};

pub(super) fn rows(site: &Site<'_>, ranges: &Ranges<'_>) -> Option<Rows> {
    match &site.what.kind {
        Kind::Function(Function::Bars, items) => {
            let [a] = &items[..] else { return None };
            Extreme { most: true, items: vec![a.clone(), negative(a.clone())], label: "absolute" }
                .rows(site, ranges)
        }
        Kind::Function(Function::Maximum, items) => {
            Extreme { most: true, items: items.clone(), label: "largest" }.rows(site, ranges)
        }
        Kind::Function(Function::Minimum, items) => {
            Extreme { most: false, items: items.clone(), label: "smallest" }.rows(site, ranges)
        }
        Kind::Big(big @ (Big::Least | Big::Greatest), clause, body) => {
            over(site, ranges, (*big == Big::Greatest, clause, body))
        }
        _ => None,
    }
}

/// The greatest (`most`) or least of some expressions.
struct Extreme {
    most: bool,
    items: Vec<Expression>,
    label: &'static str,
}

impl Extreme {
    fn rows(&self, site: &Site<'_>, ranges: &Ranges<'_>) -> Option<Rows> {
        let w = site.indexed(&ranges.words.quantity()?);
        let here = || site.clauses.clone();
        let outer = if self.most { Relation::AtLeast } else { Relation::AtMost };
        let mut rows: Vec<_> =
            self.items.iter().map(|item| (relation(&w, outer, item), here())).collect();
        let mut domains = vec![(format!("{} ∈ ℝ", print::expression(&w)), here())];
        if site.small != Some(self.most) {
            let spans: Vec<Range> =
                self.items.iter().map(|item| ranges.of(item)).collect::<Option<_>>()?;
            let count = self.items.len();
            let names = ranges.words.binaries(if count == 2 { 1 } else { count })?;
            let binaries: Vec<Expression> = names.iter().map(|name| site.indexed(name)).collect();
            let chosen: Vec<Expression> = match &binaries[..] {
                [only] => vec![only.clone(), complement(only)],
                _ => binaries.clone(),
            };
            for ((item, span), z) in self.items.iter().zip(&spans).zip(&chosen) {
                rows.push((self.inner(&w, item, (&spans, span), z), here()));
            }
            if count > 2 {
                let sum = binaries.iter().cloned().reduce(|a, b| add(a, false, b))?;
                rows.push((
                    relation(&sum, Relation::Equal, &rewrite::number(&Number::ONE)),
                    here(),
                ));
            }
            domains.extend(
                binaries.iter().map(|z| (format!("{} ∈ {{0,1}}", print::expression(z)), here())),
            );
        }
        Some(Rows { new: w, rows, domains, label: self.label })
    }

    /// `w ≤ a + M (1 − z)` with the smallest M that the bounds prove; turned for the least.
    fn inner(
        &self,
        w: &Expression,
        item: &Expression,
        spans: (&[Range], &Range),
        z: &Expression,
    ) -> String {
        let (all, (low, high)) = spans;
        if self.most {
            let top = greatest(all.iter().map(|(_, high)| high.clone()).collect());
            let m = add(top, true, low.clone());
            relation(w, Relation::AtMost, &add(item.clone(), false, times(m, complement(z))))
        } else {
            let bottom = least(all.iter().map(|(low, _)| low.clone()).collect());
            let m = add(high.clone(), true, bottom);
            relation(w, Relation::AtLeast, &add(item.clone(), true, times(m, complement(z))))
        }
    }
}

/// The greatest or least over an index.
fn over(
    site: &Site<'_>,
    ranges: &Ranges<'_>,
    (most, clause, body): (bool, &Clause, &Expression),
) -> Option<Rows> {
    let w = site.indexed(&ranges.words.quantity()?);
    let label = if most { "largest" } else { "smallest" };
    let each: Vec<Clause> = site.clauses.iter().cloned().chain([clause.clone()]).collect();
    let outer = if most { Relation::AtLeast } else { Relation::AtMost };
    let mut rows = vec![(relation(&w, outer, body), each.clone())];
    let mut domains = vec![(format!("{} ∈ ℝ", print::expression(&w)), site.clauses.clone())];
    if site.small != Some(most) {
        let (low, high) = ranges.of(body)?;
        let name = clause.items.iter().find_map(single)?;
        // the index is bound on the row already, so the M has one of its own
        let other = rewrite::name(&ranges.words.index()?, Vec::new());
        let mut renamed = |e: &Expression| {
            let bare =
                matches!(&e.kind, Kind::Name(own) if own.text == name && own.indices.is_empty());
            bare.then(|| other.clone())
        };
        let under = rewrite::map_clause(clause, &mut renamed);
        let mut own = |end: &Expression, big: Big| {
            if rewrite::value(end).is_some() {
                return end.clone();
            }
            let body = rewrite::map(end, &mut renamed);
            Expression { kind: Kind::Big(big, under.clone(), Box::new(body)), span: end.span }
        };
        let mut z = site.indexed(&ranges.words.binaries(1)?.pop()?);
        if let Kind::Name(inner) = &mut z.kind {
            inner.indices.push(rewrite::name(&name, Vec::new()));
        }
        let (m, row) = if most {
            let m = add(own(&high, Big::Greatest), true, low);
            let right = add(body.clone(), false, times(m.clone(), complement(&z)));
            (m, relation(&w, Relation::AtMost, &right))
        } else {
            let m = add(high, true, own(&low, Big::Least));
            let right = add(body.clone(), true, times(m.clone(), complement(&z)));
            (m, relation(&w, Relation::AtLeast, &right))
        };
        // an index that runs to a variable makes no M of data
        if ranges.words.hold(&m) {
            return None;
        }
        rows.push((row, each.clone()));
        let kind = Kind::Big(Big::Sum, clause.clone(), Box::new(z.clone()));
        let sum = Expression { kind, span: z.span };
        let one = rewrite::number(&Number::ONE);
        rows.push((relation(&sum, Relation::Equal, &one), site.clauses.clone()));
        domains.push((format!("{} ∈ {{0,1}}", print::expression(&z)), each));
    }
    Some(Rows { new: w, rows, domains, label })
}

/// The single index that an item binds: `t` of `t ∈ T`.
fn single(item: &Expression) -> Option<String> {
    match &item.kind {
        Kind::Name(name) if name.indices.is_empty() => Some(name.text.clone()),
        Kind::Chain(first, _) => single(first),
        _ => None,
    }
}
