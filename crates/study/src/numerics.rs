//! How far coefficients range, and how much can leak through them. Closed forms over the exact
//! model; thresholds are common practice and named.

use std::rc::Rc;

use model::{ColumnId, Model, NumberId, RowId};
use record::study::{FamilyNumerics, Numerics, RivalNumerics};

use crate::desk::Desk;
use crate::plan::Plan;
use crate::subject::Subject;
use crate::words::short;

/// How far a binary may be off and still count as whole (common practice).
const INTEGRALITY: f64 = 1e-6;
/// A leak of more can change a plan of whole units (common practice).
const MOST_LEAK: f64 = 1e-2;
/// Ratios of coefficients over this are said (common practice).
const MOST_RATIO: f64 = 1e6;

/// Studies the coefficients of each rival.
pub async fn numerics(desk: Rc<Desk>, subjects: Vec<Subject>, _: Plan) -> Numerics {
    let mut rivals = Vec::new();
    for subject in &subjects {
        desk.say(format!("{}: its coefficients", subject.letter));
        desk.spend(subject.model.row_count() as u64).await;
        rivals.push(of_rival(subject));
    }
    Numerics { rivals }
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
            leak(model, row, &mut out.leak);
        }
        matrix.join(range);
        let (name, range) = (family.name.clone(), range.pair());
        out.families.push(FamilyNumerics { name, range, row_ratio: worst });
    }
    out.families.retain(|family| family.range.1 > 0.0);
    (out.matrix, out.sides, out.costs) = (matrix.pair(), sides.pair(), costs(model).pair());
    out.column_ratio = worst_column(model, &columns);
    out.verdicts = verdicts(&out);
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
fn leak(model: &Model, row: RowId, worst: &mut (f64, String)) {
    let (mut switch, mut rest) = (Range::default(), Range::default());
    for &(column, a) in model.row_entries(row) {
        let range = if model.is_binary(column) { &mut switch } else { &mut rest };
        range.note(size(model, a));
    }
    let (Some((_, largest)), Some((smallest, _))) = (switch.0, rest.0) else { return };
    let opened = largest * INTEGRALITY / smallest;
    if opened > worst.0 {
        *worst = (opened, model.row_name(row));
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
