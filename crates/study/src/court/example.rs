//! A counterexample made small and told: on the fewest elements, with the rows that refuse the plan and
//! the nearest plan of the rival that refuses it.
//!
//! Elements are dropped one by one as long as every plan of the rest can be compared and a difference
//! remains (a deletion filter, as for rows in conflict). Without any one of those that are left none is
//! found.

use std::collections::{BTreeMap, BTreeSet};
use std::rc::Rc;

use model::{ColumnId, Model, Number, Row, RowId, Sense};
use record::results::SolutionEntry;
use record::study::{ConflictRow, Counterexample};
use tree::{Settings, Status};

use super::duel::{Duel, LARGEST};
use super::enumerate::{Compared, restricted};
use super::plans::{self, Placed};
use super::{Case, Findings};
use crate::infeasibility::{Filter, conflict_row, says};
use crate::plan::Plan;
use crate::subject::Subject;
use crate::words::exact;

/// Duels on each smaller sub-instance, where a difference was seen on a large one alone.
const DUELS: u64 = 4;
/// Models solved at most while rows that refuse a plan are looked for.
const MOST_SOLVED: u32 = 120;
/// Nodes at most in the search for the nearest plan.
const NODES: u32 = 400;

impl Case<'_> {
    /// Makes the counterexample smaller, and says what refuses it.
    pub(super) async fn told(&self, findings: &mut Findings) {
        self.shrink(findings).await;
        let Some(example) = findings.counterexample.take() else { return };
        let (example, models) = self.fewest(example).await;
        let example = self.with_models(&models).explained(example).await;
        findings.counterexample = Some(example);
    }

    /// A difference that was seen on the instance, or on a large part of it, is looked for on
    /// smaller ones than every plan of which was compared.
    async fn shrink(&self, findings: &mut Findings) {
        let Some(example) = &findings.counterexample else { return };
        let Some(end) = example.size.or_else(|| self.extent()) else { return };
        for size in findings.compared.map_or(2, |size| size + 1)..end {
            let Some(models) = self.first(size).await else { continue };
            let part = self.with_models(&models);
            self.say(&format!("the difference on the first {size}"));
            for number in 0..DUELS {
                if let Duel::Differ(example) = part.duel(number, -LARGEST).await {
                    return findings.differs(Counterexample { size: Some(size), ..example });
                }
            }
        }
    }

    /// The counterexample on the fewest elements, with both models there.
    async fn fewest(&self, mut example: Counterexample) -> (Counterexample, [Subject; 2]) {
        let whole = [self.rivals[0].clone(), self.rivals[1].clone()];
        let (Some(size), Some(source)) = (example.size, &self.rivals[0].source) else {
            return (example, whole);
        };
        let Some(mut models) = self.first(size).await else { return (example, whole) };
        let mut kept = source.instance.first(size as usize).elements();
        let mut place = 0;
        while place < kept.len() {
            let mut fewer = kept.clone();
            fewer.remove(place);
            self.say(&format!("the difference without {}", kept[place]));
            match self.differs_on(&fewer).await {
                Some((smaller, found)) => {
                    (example, models, kept) = (smaller, found, fewer);
                }
                None => place += 1,
            }
        }
        let part = source.instance.keeping(&kept.iter().cloned().collect());
        example.size = u32::try_from(part.extent()).ok();
        example.elements = part.elements();
        (example, models)
    }

    /// A difference on these elements alone, where every plan can be compared.
    async fn differs_on(&self, elements: &[String]) -> Option<(Counterexample, [Subject; 2])> {
        let kept: BTreeSet<String> = elements.iter().cloned().collect();
        let part = async |subject: &Subject| {
            let source = subject.source.as_ref()?;
            let instance = source.instance.keeping(&kept);
            let model = source.model_on(self.desk, &instance, &source.bind).await?;
            Some(Subject { model: Rc::new(model), ..subject.clone() })
        };
        let models = [part(self.rivals[0]).await?, part(self.rivals[1]).await?];
        let found = match self.with_models(&models).compared().await {
            Compared::Differ(example) => example,
            Compared::Same(_) | Compared::Open(_) => return None,
        };
        Some((found, models))
    }

    /// The counterexample with the rows that refuse it and the nearest plan.
    async fn explained(&self, mut example: Counterexample) -> Counterexample {
        if example.values.is_some() {
            return example;
        }
        let side = usize::from(self.rivals[1].letter == example.refused_by);
        let plan = self.placed(&example.plan, 1 - side);
        self.say("the rows that refuse the plan, and the nearest one");
        example.rows = self.refusing(&plan, side).await;
        example.nearest = self.nearest(&plan, side).await;
        example
    }

    /// A plan from how it is written.
    fn placed(&self, entries: &[SolutionEntry], side: usize) -> Placed {
        let model = &self.rivals[side].model;
        let written: BTreeMap<(&str, &[String]), f64> = entries
            .iter()
            .map(|entry| ((entry.variable.as_str(), entry.indices.as_slice()), entry.value))
            .collect();
        let value = |column: ColumnId| {
            let labels = model.column_tuple(column).iter();
            let labels: Vec<String> =
                labels.map(|&label| model.labels().name(label).to_owned()).collect();
            let variable = model.columns()[column.index()].variable;
            let name = model.variables()[variable.index()].name.as_str();
            written.get(&(name, labels.as_slice())).copied()
        };
        let own = |pair: &(ColumnId, ColumnId)| if side == 0 { pair.0 } else { pair.1 };
        let pairs = self.shared.pairs.iter();
        Placed {
            values: pairs.map(|pair| (*pair, value(own(pair)).unwrap_or_default())).collect(),
            beyond: self.shared.only[side]
                .iter()
                .copied()
                .filter(|&column| value(column).is_some())
                .collect(),
        }
    }

    /// The rows of the rival at `side` that cannot hold with a plan of the other.
    async fn refusing(&self, plan: &Placed, side: usize) -> Vec<ConflictRow> {
        let own = self.rivals[side];
        if !plan.beyond.is_empty() {
            let theirs = &self.rivals[1 - side].model;
            let lacks = |&column: &ColumnId| ConflictRow {
                says: format!("{} has no column {}", own.letter, theirs.column_name(column)),
                ..ConflictRow::default()
            };
            return plan.beyond.iter().map(lacks).collect();
        }
        let model = Rc::new(plans::fixed(self, plan, side));
        if let Some(row) = self.broken(&model).await {
            return vec![row];
        }
        let solved = self.desk.solve(&model, self.plan.search()).await;
        if !solved.is_infeasible() {
            return Vec::new();
        }
        let few = Plan { rows: MOST_SOLVED, ..self.plan.clone() };
        let mut filter = Filter::new(self.desk, &model, &few, solved.root != Status::Infeasible);
        let (parts, _) = filter.filtered(&solved, &own.letter).await;
        parts.iter().map(|part| conflict_row(&model, *part)).collect()
    }

    /// A row, or a member of a family over subsets, that the fixed columns alone break.
    async fn broken(&self, model: &Rc<Model>) -> Option<ConflictRow> {
        let rows = (0..model.row_count()).map(RowId::from_index);
        let written = rows.filter(|&id| model.row_is_in(id)).find_map(|id| {
            let family = &model.families()[model.row_family(id).index()].name;
            broken(model, (&model.row_name(id), family), &model.row(id))
        });
        if written.is_some() || model.subset_families().is_empty() {
            return written;
        }
        let members = self.desk.members(model).await;
        members.iter().find_map(|(name, row)| {
            let family = name.split(['[', '{']).next().unwrap_or_default();
            broken(model, (name, family), row)
        })
    }

    /// The plan of the rival at `side` that is another in the fewest shared columns of 0 and 1.
    async fn nearest(&self, plan: &Placed, side: usize) -> Vec<SolutionEntry> {
        let [a, b] = self.rivals;
        let own = |pair: &(ColumnId, ColumnId)| if side == 0 { pair.0 } else { pair.1 };
        let deciding = self.shared.deciding(&a.model, &b.model);
        let model = restricted(&self.rivals[side].model, &deciding, own);
        let apart = |value: f64| if value > 0.5 { -Number::ONE } else { Number::ONE };
        let decided = plan.values.iter().filter(|(pair, _)| deciding.binary_search(pair).is_ok());
        let costs: Vec<(ColumnId, Number)> = decided
            .map(|(pair, value)| (own(pair), apart(*value)))
            .chain(self.shared.only[side].iter().map(|&column| (column, Number::ONE)))
            .filter(|(column, _)| model.is_binary(*column))
            .collect();
        let priced = model.priced(Sense::Minimise, &costs);
        let nodes = self.plan.nodes.min(NODES);
        let settings = Settings { node_limit: Some(nodes), ..self.plan.search() };
        let solved = self.desk.solve(&Rc::new(priced), settings).await;
        if costs.is_empty() || solved.solution.is_empty() {
            return Vec::new();
        }
        plans::plan_of(&solved.solution, &self.shared, side).entries(&model, side)
    }
}

/// A row all of whose columns are fixed, where they break it, in words.
fn broken(model: &Model, (name, family): (&str, &str), row: &Row) -> Option<ConflictRow> {
    let mut sum = Number::ZERO;
    for (column, a) in &row.entries {
        let column = &model.columns()[column.index()];
        let value = column.lower.filter(|_| column.lower == column.upper)?;
        sum += a * model.numbers().exact(value);
    }
    let over = row.upper.as_ref().is_some_and(|upper| sum > *upper);
    let under = row.lower.as_ref().is_some_and(|lower| sum < *lower);
    (over || under).then(|| ConflictRow {
        row: name.to_owned(),
        family: family.to_owned(),
        says: format!("{}, and the plan gives {}", says(model, row), exact(&sum)),
    })
}
