//! The point of a basis against rows and bounds, exactly.

use dashu_int::IBig;
use model::Number;

use crate::basis::{Standings, Vertex, activity};
use crate::rows::{Bounds, ExactRows};

/// A column or a row.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub(crate) enum Variable {
    Column(usize),
    Row(usize),
}

/// One bound or side that a vertex breaks, by how much in the units of the model.
#[derive(Debug, Clone)]
pub(crate) struct Excess {
    pub(crate) variable: Variable,
    pub(crate) amount: Number,
}

impl Vertex {
    /// The least cost at this point that a minimisation without offset sees.
    pub(crate) fn objective(&self, rows: &ExactRows) -> Number {
        let terms =
            rows.costs.iter().zip(&self.values).filter(|(c, x)| !c.is_zero() && !x.is_zero());
        let sum = terms.fold(IBig::ZERO, |sum, (cost, x)| sum + cost * x);
        Number::from(sum) / Number::from(&self.denominator * &rows.cost_scale)
    }

    /// One exact value a column.
    pub(crate) fn point(&self) -> Vec<Number> {
        let one = |value: &IBig| match value.is_zero() {
            true => Number::ZERO,
            false => Number::from_parts(value.clone(), self.denominator.clone()),
        };
        self.values.iter().map(one).collect()
    }

    /// All that the point breaks, columns before rows. `O(non-zeros)`.
    pub(crate) fn excesses(
        &self,
        rows: &ExactRows,
        bounds: &[Bounds],
        basis: &Standings,
    ) -> Vec<Excess> {
        let mut out = Vec::new();
        for (column, (value, (lower, upper))) in self.values.iter().zip(bounds).enumerate() {
            let amount = if self.within(value, lower.as_ref(), upper.as_ref()) {
                None
            } else {
                let value = Number::from_parts(value.clone(), self.denominator.clone());
                outside(&value, lower.as_ref(), upper.as_ref())
            };
            out.extend(amount.map(|amount| Excess { variable: Variable::Column(column), amount }));
        }
        let times = IBig::from(self.denominator.clone());
        for (row, scaled) in rows.rows.iter().enumerate().take(basis.rows.len()) {
            let value = activity(rows, row, &self.values);
            let under = scaled.lower.as_ref().map(|side| side * &times - &value);
            let over = scaled.upper.as_ref().map(|side| value - side * &times);
            if let Some(most) = under.max(over).filter(|most| *most > IBig::ZERO) {
                let amount = Number::from_parts(most, &self.denominator * &scaled.scale);
                out.push(Excess { variable: Variable::Row(row), amount });
            }
        }
        out
    }

    /// Whether a value over the denominator is within bounds, without a division.
    fn within(&self, value: &IBig, lower: Option<&Number>, upper: Option<&Number>) -> bool {
        let scaled = |bound: &Number| bound.numerator() * IBig::from(self.denominator.clone());
        let own = |bound: &Number| value * IBig::from(bound.denominator().clone());
        lower.is_none_or(|bound| {
            if bound.is_zero() { *value >= IBig::ZERO } else { own(bound) >= scaled(bound) }
        }) && upper.is_none_or(|bound| own(bound) <= scaled(bound))
    }
}

/// By how much a value is outside; `None` when it is not.
fn outside(value: &Number, lower: Option<&Number>, upper: Option<&Number>) -> Option<Number> {
    let under = lower.map(|lower| lower - value);
    let over = upper.map(|upper| value - upper);
    under.max(over).filter(|amount| *amount > Number::ZERO)
}
