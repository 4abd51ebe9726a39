//! A plan that a person gives: read in the names of the model, and every row that it breaks in words.
//!
//! ```text
//! x[Ash, Birch] = 1      a variable with its indices and a value; = 1 may be left out
//! Ash, Birch, Cedar      a round trip over stops in their order, back to the first
//! Milk: Depot 2          an assignment: a pair of labels, as the tuple of a column has them
//! ```
//!
//! Columns of a variable that is named and that are not are 0 where they must be whole; all others
//! are left free, to be solved for.

use std::collections::BTreeMap;

use model::{ColumnId, FamilyState, LabelId, Model, Number, RowId, nearest_f64};
use record::results::PlanReport;
use separate::{Separator, Violated};
use tree::{SuggestedBy, Suggestion};

/// Lines that were not understood and are told at most.
const MOST: usize = 20;

/// A plan as it was read.
#[derive(Debug, Clone)]
pub(crate) struct Plan {
    values: BTreeMap<ColumnId, f64>,
    /// Lines that were not understood.
    unread: Vec<String>,
}

impl Plan {
    /// Reads the lines of a plan. `O(lines · columns)`.
    pub(crate) fn read(model: &Model, text: &str) -> Self {
        let mut plan = Self { values: BTreeMap::new(), unread: Vec::new() };
        for (number, line) in text.lines().enumerate() {
            let line = line.trim();
            if line.is_empty() || line.starts_with('#') {
                continue;
            }
            if !plan.line(model, line) && plan.unread.len() < MOST {
                let names = "it names no column, pair or round trip of this model";
                plan.unread.push(format!("Line {} of the plan, “{line}”: {names}", number + 1));
            }
        }
        plan.fill(model);
        plan
    }

    fn line(&mut self, model: &Model, line: &str) -> bool {
        let (names, value) = match line.rsplit_once('=') {
            None => (line, 1.0),
            Some((names, value)) => match value.trim().parse::<f64>() {
                Ok(value) if value.is_finite() => (names, value),
                _ => return false,
            },
        };
        let words: Vec<&str> = names
            .split(|c: char| ",;:[]()\t→".contains(c))
            .flat_map(|part| part.split("->"))
            .map(str::trim)
            .filter(|word| !word.is_empty())
            .collect();
        let column = |words: &[&str]| {
            words.split_first().and_then(|(variable, tuple)| model.find_column(variable, tuple))
        };
        let spaced: Vec<&str> = names.split_whitespace().collect();
        if let Some(column) = column(&words).or_else(|| column(&spaced)) {
            self.values.insert(column, value);
            return true;
        }
        let labels = |words: &[&str]| -> Option<Vec<LabelId>> {
            words.iter().map(|word| model.labels().find(word)).collect()
        };
        let Some(labels) = labels(&words).or_else(|| labels(&spaced)) else { return false };
        match labels.as_slice() {
            [one, other] => self.pair(model, [*one, *other], value),
            [_, _, _, ..] => self.trip(model, labels),
            _ => false,
        }
    }

    /// A pair of labels: the first column that must be whole and has them as its tuple.
    fn pair(&mut self, model: &Model, pair: [LabelId; 2], value: f64) -> bool {
        let columns = (0..model.columns().len()).map(ColumnId::from_index);
        let mut fits = columns.filter(|&column| {
            model.columns()[column.index()].integer && model.column_tuple(column) == pair
        });
        let found = fits.next();
        found.map(|column| self.values.insert(column, value)).is_some()
    }

    /// A round trip: each leg in its direction, else against it.
    fn trip(&mut self, model: &Model, mut stops: Vec<LabelId>) -> bool {
        if stops.first() == stops.last() {
            stops.pop();
        }
        let legs = (0..stops.len()).map(|k| [stops[k], stops[(k + 1) % stops.len()]]);
        legs.into_iter().all(|[from, to]| {
            self.pair(model, [from, to], 1.0) || self.pair(model, [to, from], 1.0)
        })
    }

    /// The other columns of a variable that is named.
    fn fill(&mut self, model: &Model) {
        for variable in model.variables() {
            let columns = || variable.columns.clone().map(ColumnId);
            if columns().any(|column| self.values.contains_key(&column)) {
                for column in columns().filter(|c| model.columns()[c.index()].integer) {
                    self.values.entry(column).or_insert(0.0);
                }
            }
        }
    }

    /// What the search is to make of it; `None` where nothing was read.
    pub(crate) fn suggestion(&self) -> Option<Suggestion> {
        let values = self.values.iter().map(|(&column, &value)| (column, value)).collect();
        (!self.values.is_empty()).then_some(Suggestion { origin: SuggestedBy::Person, values })
    }

    /// What became of it, with every row that it breaks.
    pub(crate) fn report(&self, model: &Model, search: &tree::Search) -> PlanReport {
        let value = search.given_plan().and_then(|given| given.value);
        let mut remarks = self.unread.clone();
        let mut count = 0;
        if value.is_none() {
            let (broken, others) = self.broken(model, search.separators());
            if broken.is_empty() {
                remarks.push(if self.values.is_empty() {
                    "Nothing of the plan was understood".to_owned()
                } else if search.given_plan().is_some() {
                    "No row over the given values alone is broken, and the other variables \
                     cannot be chosen so that all rows hold"
                        .to_owned()
                } else {
                    "It was not tried: the search ended at its root".to_owned()
                });
            }
            count = u32::try_from(broken.len()).unwrap_or(u32::MAX);
            remarks.extend(broken);
            remarks.extend(others);
        }
        PlanReport { feasible: value.is_some(), value, remarks, broken: count }
    }

    /// The bounds, rows and members of families over subsets that the given values break by themselves;
    /// beside them which families may have further ones.
    fn broken(&self, model: &Model, separators: &[Separator]) -> (Vec<String>, Vec<String>) {
        let mut all = Vec::new();
        for (&column, &value) in &self.values {
            let found = &model.columns()[column.index()];
            let float =
                |id: Option<model::NumberId>, none| id.map_or(none, |n| model.numbers().float(n));
            let (lower, upper) =
                (float(found.lower, f64::NEG_INFINITY), float(found.upper, f64::INFINITY));
            let name = model.column_name(column);
            if value < lower || value > upper {
                all.push(format!("{name} = {value} is outside {lower} to {upper}"));
            } else if found.integer && value.fract() != 0.0 {
                all.push(format!("{name} = {value} must be whole"));
            }
        }
        let rows = (0..model.row_count()).map(RowId::from_index);
        all.extend(rows.filter_map(|row| self.row(model, row)));
        let mut others = Vec::new();
        for separator in separators {
            let (told, more) = self.members(model, separator);
            all.extend(told);
            others.extend(more);
        }
        (all, others)
    }

    /// A written row all of whose columns are given.
    fn row(&self, model: &Model, row: RowId) -> Option<String> {
        let family = &model.families()[model.row_family(row).index()];
        if family.state == FamilyState::Out {
            return None;
        }
        let mut sum = Number::ZERO;
        for &(column, a) in model.row_entries(row) {
            let value = Number::try_from(*self.values.get(&column)?).ok()?;
            sum += model.numbers().exact(a).clone() * value;
        }
        let (lower, upper) = model.row_sides(row);
        let side = |id: Option<model::NumberId>| id.map(|n| model.numbers().exact(n).clone());
        let asked = match (side(lower), side(upper)) {
            (Some(l), Some(u)) if l == u && sum != l => format!("= {}", nearest_f64(&l)),
            (Some(l), _) if sum < l => format!("≥ {}", nearest_f64(&l)),
            (_, Some(u)) if sum > u => format!("≤ {}", nearest_f64(&u)),
            _ => return None,
        };
        let name = model.row_name(row);
        Some(format!("{name}: the left side is {}, and {asked} is asked", nearest_f64(&sum)))
    }

    /// The members of a family over subsets that are broken and whose columns are all given, and
    /// whether others may be.
    fn members(&self, model: &Model, separator: &Separator) -> (Vec<String>, Option<String>) {
        let x: Vec<f64> = (0..model.columns().len())
            .map(|j| self.values.get(&ColumnId::from_index(j)).copied().unwrap_or(0.0))
            .collect();
        let (found, all) = separator.violated_members(&x);
        let given = |member: &&Violated| {
            member.row.entries.iter().all(|(column, _)| self.values.contains_key(column))
        };
        let told: Vec<String> =
            found.iter().filter(given).map(|member| told(model, member)).collect();
        let more = found.first().filter(|_| !all && !told.is_empty()).map(|member| {
            let name = family(model, member);
            format!(
                "Sets of {name} that are told are those that separation finds: others may be broken"
            )
        });
        (told, more)
    }
}

fn family<'a>(model: &'a Model, member: &Violated) -> &'a str {
    &model.families()[model.subset_family(member.family).family.index()].name
}

/// A member that is broken, in words.
fn told(model: &Model, member: &Violated) -> String {
    let name = family(model, member);
    let labels: Vec<&str> = member.subset.iter().map(|&label| model.labels().name(label)).collect();
    format!("{name} for the set {{{}}} is broken by {}", labels.join(", "), member.violation)
}
