//! How far coefficients range, how much can leak through them, how ill-conditioned the optimal basis
//! is, and what exact arithmetic makes of the bound and of the best plan. Thresholds are common
//! practice and named.

use std::rc::Rc;

use model::{ColumnId, Model, NumberId, RowId, nearest_f64};
use proof::Point;
use record::study::{FamilyNumerics, Numerics, RivalNumerics};

use crate::desk::Desk;
use crate::plan::Plan;
use crate::subject::Subject;
use crate::words::short;

/// How far a binary may be off and still count as whole (common practice).
const INTEGRALITY: f64 = 1e-6;
/// A leak of more can change a plan of whole units (common practice).
const MOST_LEAK: f64 = 1e-2;
/// A basis with a larger condition may lose half of the sixteen digits (common practice).
const MOST_CONDITION: f64 = 1e8;
/// A plan that misses a row by more is not one (the tolerance of the kernel).
const MOST_VIOLATION: f64 = 1e-6;
/// Ratios of coefficients over this are said (common practice).
const MOST_RATIO: f64 = 1e6;

/// Studies the coefficients of each rival.
pub async fn numerics(desk: Rc<Desk>, subjects: Vec<Subject>, plan: Plan) -> Numerics {
    let mut rivals = Vec::new();
    for subject in &subjects {
        desk.say(format!("{}: its coefficients", subject.letter));
        desk.spend(subject.model.row_count() as u64).await;
        let mut rival = of_rival(subject);
        rechecked(&desk, subject, &plan, &mut rival).await;
        rival.verdicts = verdicts(&rival);
        rivals.push(rival);
    }
    Numerics { rivals }
}

/// The relaxation and the best plan, again in exact arithmetic.
async fn rechecked(desk: &Desk, subject: &Subject, plan: &Plan, out: &mut RivalNumerics) {
    let model = &subject.model;
    desk.say(format!("{}: its relaxation in exact arithmetic", subject.letter));
    let (solved, condition) = desk.conditioned(model).await;
    out.condition = condition.filter(|_| solved.bound.is_some());
    out.bound = solved.bound;
    let proved = solved.checked_bound.as_ref().map(nearest_f64);
    out.bound_off = solved.bound.zip(proved).map(|(bound, proved)| (bound - proved).abs());
    out.exact = solved.exact;
    if subject.relaxation {
        return;
    }
    desk.say(format!("{}: its best plan in exact arithmetic", subject.letter));
    let solved = desk.solve(model, plan.search()).await;
    if !solved.solution.is_empty() {
        desk.spend(model.row_count() as u64).await;
        out.plan_off = Some(nearest_f64(&Point::new(model, &solved.solution).worst()));
    }
}

fn of_rival(subject: &Subject) -> RivalNumerics {
    let model = &subject.model;
    let mut out = RivalNumerics {
        rival: subject.letter.clone(),
        title: subject.title.clone(),
        ..RivalNumerics::default()
    };
    let mut columns = vec![Range::default(); model.columns().len()];
    let (mut matrix, mut sides) = (Range::default(), Range::default());
    for family in model.families() {
        let mut range = Range::default();
        let mut worst = 0.0;
        for row in (family.rows.start..family.rows.end).map(RowId) {
            let own = of_row(model, row, &mut columns);
            if own.ratio() > worst {
                worst = own.ratio();
            }
            if own.ratio() > out.row_ratio.0 {
                out.row_ratio = (own.ratio(), model.row_name(row));
            }
            range.join(own);
            let (lower, upper) = model.row_sides(row);
            [lower, upper].into_iter().flatten().for_each(|id| sides.note(size(model, id)));
            let opened = leak(model, row);
            out.leak_in_all += opened;
            if opened > out.leak.0 {
                out.leak = (opened, model.row_name(row));
            }
        }
        matrix.join(range);
        let (name, range) = (family.name.clone(), range.pair());
        out.families.push(FamilyNumerics { name, range, row_ratio: worst });
    }
    out.families.retain(|family| family.range.1 > 0.0);
    (out.matrix, out.sides, out.costs) = (matrix.pair(), sides.pair(), costs(model).pair());
    out.column_ratio = worst_column(model, &columns);
    out
}

/// Smallest and largest absolute value other than 0.
#[derive(Debug, Clone, Copy, Default)]
struct Range(Option<(f64, f64)>);

impl Range {
    fn note(&mut self, value: f64) {
        if value == 0.0 {
            return;
        }
        let (low, high) = self.0.unwrap_or((value, value));
        self.0 =
            Some((if value < low { value } else { low }, if value > high { value } else { high }));
    }

    fn join(&mut self, other: Self) {
        if let Some((low, high)) = other.0 {
            self.note(low);
            self.note(high);
        }
    }

    fn pair(self) -> (f64, f64) {
        self.0.unwrap_or((0.0, 0.0))
    }

    fn ratio(self) -> f64 {
        self.0.map_or(0.0, |(low, high)| high / low)
    }
}

fn size(model: &Model, id: NumberId) -> f64 {
    model.numbers().float(id).abs()
}

fn of_row(model: &Model, row: RowId, columns: &mut [Range]) -> Range {
    let mut range = Range::default();
    for &(column, a) in model.row_entries(row) {
        range.note(size(model, a));
        columns[column.index()].note(size(model, a));
    }
    range
}

fn costs(model: &Model) -> Range {
    let mut range = Range::default();
    model.columns().iter().for_each(|column| range.note(size(model, column.cost)));
    range
}

fn worst_column(model: &Model, columns: &[Range]) -> (f64, String) {
    let mut worst = (0.0, String::new());
    for (index, range) in columns.iter().enumerate() {
        if range.ratio() > worst.0 {
            worst = (range.ratio(), model.column_name(ColumnId::from_index(index)));
        }
    }
    worst
}

/// The most by which a binary that is off by the tolerance opens a row, in units of the row's
/// smallest coefficient on another column.
fn leak(model: &Model, row: RowId) -> f64 {
    let (mut switch, mut rest) = (Range::default(), Range::default());
    for &(column, a) in model.row_entries(row) {
        let range = if model.is_binary(column) { &mut switch } else { &mut rest };
        range.note(size(model, a));
    }
    match (switch.0, rest.0) {
        (Some((_, largest)), Some((smallest, _))) => largest * INTEGRALITY / smallest,
        _ => 0.0,
    }
}

fn verdicts(of: &RivalNumerics) -> Vec<String> {
    let mut verdicts = Vec::new();
    let (leak, row) = &of.leak;
    if *leak > MOST_LEAK {
        verdicts.push(format!(
            "{row} can leak {}: its binary may be 10⁻⁶ off and still count as whole",
            short(*leak)
        ));
    }
    if let Some(condition) = of.condition.filter(|condition| *condition > MOST_CONDITION) {
        verdicts.push(format!(
            "the basis at the optimum has a condition of about {}: a bound may lose digits",
            short(condition)
        ));
    }
    if let Some(off) = of.plan_off.filter(|off| *off > MOST_VIOLATION) {
        verdicts.push(format!(
            "its best plan, with whole values, misses a row by {} in exact arithmetic",
            short(off)
        ));
    }
    for (what, (ratio, place)) in [("row", &of.row_ratio), ("column", &of.column_ratio)] {
        if *ratio > MOST_RATIO {
            verdicts.push(format!(
                "coefficients of the {what} {place} range over 1 : {}",
                short(*ratio)
            ));
        }
    }
    for (what, (low, high)) in [("costs", of.costs), ("sides of rows", of.sides)] {
        if low > 0.0 && high / low > MOST_RATIO {
            verdicts.push(format!(
                "{what} range from {} to {}: choose another unit",
                short(low),
                short(high)
            ));
        }
    }
    verdicts
}

#[cfg(test)]
mod tests {
    use super::*;

    /// How many verdicts a rival has with one figure.
    fn said(set: impl Fn(&mut RivalNumerics)) -> usize {
        let mut of = RivalNumerics::default();
        set(&mut of);
        verdicts(&of).len()
    }

    /// Each named threshold from both sides: at it nothing is said, beyond it one sentence.
    #[test]
    fn each_threshold_speaks_beyond_it_and_not_at_it() {
        let beyond = |most: f64| [most, most * (1.0 + 1e-9)];
        let at = String::from("here");
        let leak = beyond(MOST_LEAK).map(|v| said(|of| of.leak = (v, at.clone())));
        let condition = beyond(MOST_CONDITION).map(|v| said(|of| of.condition = Some(v)));
        let plan = beyond(MOST_VIOLATION).map(|v| said(|of| of.plan_off = Some(v)));
        let row = beyond(MOST_RATIO).map(|v| said(|of| of.row_ratio = (v, at.clone())));
        let column = beyond(MOST_RATIO).map(|v| said(|of| of.column_ratio = (v, at.clone())));
        let silent = said(|_| ());
        for [under, over] in [leak, condition, plan, row, column] {
            assert_eq!((under, over), (silent, silent + 1));
        }
    }
}
