//! What a model does not tell apart.
//!
//! Columns and rows are coloured by their data, then by the colours of what they meet and the
//! coefficients between, until nothing changes (colour refinement: Weisfeiler, Leman 1968; for
//! integer programs Margot 2010): a symmetry keeps colours. Exchanges of two labels of one colour
//! are tried, and for columns that these do not join, one is singled out on each side of two
//! copies and both are refined in step until a permutation is left. Whatever is told was verified
//! against every row; what was not found need not be missing. Rows that order interchangeable
//! labels keep one copy of each plan (Sherali, Smith 2001, Management Science 47).

mod order;
mod refine;

use std::collections::BTreeMap;
use std::rc::Rc;

use model::{ColumnId, LabelId, Model, RowId};
use record::study::{Generator, Interchangeable, RivalSymmetry, Symmetry};

use crate::desk::Desk;
use crate::plan::Plan;
use crate::subject::Subject;
use refine::Graph;

/// Non-zeros touched at most for a rival.
const MOST_WORK: u64 = 100_000_000;
/// Moves that are told of a permutation.
const MOST_MOVES: usize = 4;

/// Looks for the symmetries of each rival.
pub async fn symmetry(desk: Rc<Desk>, subjects: Vec<Subject>, _: Plan) -> Symmetry {
    let mut rivals = Vec::new();
    for subject in &subjects {
        rivals.push(of_rival(&desk, subject).await);
    }
    Symmetry { rivals }
}

async fn of_rival(desk: &Desk, subject: &Subject) -> RivalSymmetry {
    let model = &subject.model;
    desk.say(format!("{}: what it does not tell apart", subject.letter));
    let mut out = RivalSymmetry {
        rival: subject.letter.clone(),
        title: subject.title.clone(),
        columns: count(model.columns().len()),
        ..RivalSymmetry::default()
    };
    if !model.subset_families().is_empty() {
        out.open = "it has rows on demand, which cannot all be compared".to_owned();
        return out;
    }
    let graph = Graph::new(model);
    let size = graph.size();
    let colours = graph.refined(desk, graph.first()).await;
    let colours_of_columns = &colours[..model.columns().len()];
    out.classes = distinct(colours_of_columns);
    let mut orbits = Orbits::new(model.columns().len());
    let mut work = 0;
    let classes =
        exchangeable(model, (desk, size), colours_of_columns, (&mut orbits, &mut work)).await;
    for labels in &classes {
        let name = |label: &LabelId| model.labels().name(*label).to_owned();
        out.log10_copies += (2..=labels.len()).map(|k| libm::log10(size_of(k))).sum::<f64>();
        out.interchangeable.push(Interchangeable {
            labels: labels.iter().map(name).collect(),
            order: order::words(model, labels),
        });
    }
    out.with_order = order::ordered(model, &classes).unwrap_or_default();
    let mut further = Further { graph: &graph, model, orbits: &mut orbits, work };
    out.generators = further.found(desk, &colours).await;
    if further.work > MOST_WORK {
        out.open = "not every pair of columns was compared: it would take too long".to_owned();
    }
    out.orbits = orbits.count();
    out
}

/// Classes of two labels or more any two of which can be exchanged.
async fn exchangeable(
    model: &Model,
    (desk, size): (&Desk, u64),
    colours: &[u32],
    (orbits, work): (&mut Orbits, &mut u64),
) -> Vec<Vec<LabelId>> {
    let marks = marks(model, colours);
    let mut classes: Vec<Vec<LabelId>> = Vec::new();
    for set in tree::index_sets(model) {
        let mut own: Vec<Vec<LabelId>> = Vec::new();
        for label in set {
            if classes.iter().any(|class| class.contains(&label)) {
                continue;
            }
            let mut joined = false;
            for class in &mut own {
                if *work > MOST_WORK || marks.get(&class[0]) != marks.get(&label) {
                    continue;
                }
                *work += size;
                desk.spend(size).await;
                let image = tree::exchanged(model, class[class.len() - 1], label);
                let image = image.filter(|image| tree::is_symmetry(model, image));
                if let Some(image) = image {
                    orbits.join(&image);
                    class.push(label);
                    joined = true;
                    break;
                }
            }
            if !joined {
                own.push(vec![label]);
            }
        }
        classes.extend(own.into_iter().filter(|class| class.len() > 1));
    }
    classes
}

/// The colours of the columns that each label stands in: labels that differ in them cannot be
/// exchanged.
fn marks(model: &Model, colours: &[u32]) -> BTreeMap<LabelId, Vec<u32>> {
    let mut marks: BTreeMap<LabelId, Vec<u32>> = BTreeMap::new();
    for (index, &colour) in colours.iter().enumerate() {
        for &label in model.column_tuple(ColumnId::from_index(index)) {
            marks.entry(label).or_default().push(colour);
        }
    }
    marks.values_mut().for_each(|mark| mark.sort_unstable());
    marks
}

/// Symmetries beyond exchanges of labels.
struct Further<'f> {
    graph: &'f Graph,
    model: &'f Model,
    orbits: &'f mut Orbits,
    work: u64,
}

impl Further<'_> {
    /// For the columns of each colour that are not known to be one orbit, a permutation that
    /// carries the first into each.
    async fn found(&mut self, desk: &Desk, colours: &[u32]) -> Vec<Generator> {
        let mut generators = Vec::new();
        let mut by_colour: BTreeMap<u32, Vec<usize>> = BTreeMap::new();
        for (column, &colour) in colours[..self.model.columns().len()].iter().enumerate() {
            by_colour.entry(colour).or_default().push(column);
        }
        for columns in by_colour.values() {
            for &other in &columns[1..] {
                if self.orbits.same(columns[0], other) {
                    continue;
                }
                if self.work > MOST_WORK {
                    return generators;
                }
                let pair = (columns[0], other);
                let image = self.graph.carried((desk, colours), pair, &mut self.work).await;
                self.work += self.graph.size();
                desk.spend(self.graph.size()).await;
                if let Some(image) = image.filter(|image| tree::is_symmetry(self.model, image)) {
                    self.orbits.join(&image);
                    generators.push(generator(self.model, &image));
                }
            }
        }
        generators
    }
}

/// A permutation in words.
fn generator(model: &Model, image: &[usize]) -> Generator {
    let moved: Vec<(usize, usize)> =
        image.iter().copied().enumerate().filter(|(from, to)| from != to).collect();
    let tuple = |column: usize| model.column_tuple(ColumnId::from_index(column));
    let turned = moved.iter().all(|&(from, to)| tuple(from).iter().rev().eq(tuple(to)));
    let words = if turned {
        "every pair of indices can be turned round".to_owned()
    } else {
        labels_moved(model, &moved).unwrap_or_else(|| {
            let name = |column: usize| model.column_name(ColumnId::from_index(column));
            let told = moved.iter().take(MOST_MOVES);
            let told: Vec<String> =
                told.map(|&(from, to)| format!("{} becomes {}", name(from), name(to))).collect();
            told.join(", ") + if moved.len() > MOST_MOVES { ", …" } else { "" }
        })
    };
    Generator { moves: count(moved.len()), words }
}

/// The permutation as one of labels, where it is one.
fn labels_moved(model: &Model, moved: &[(usize, usize)]) -> Option<String> {
    let mut to: BTreeMap<LabelId, LabelId> = BTreeMap::new();
    for &(from, image) in moved {
        let [from, image] = [from, image].map(|c| model.column_tuple(ColumnId::from_index(c)));
        for (&label, &becomes) in from.iter().zip(image) {
            if *to.entry(label).or_insert(becomes) != becomes {
                return None;
            }
        }
    }
    let name = |label: &LabelId| model.labels().name(*label);
    let mut told: Vec<String> = to
        .iter()
        .filter(|(label, becomes)| label != becomes)
        .map(|(label, becomes)| format!("{} becomes {}", name(label), name(becomes)))
        .collect();
    if told.len() > 2 * MOST_MOVES {
        told.truncate(2 * MOST_MOVES);
        told.push("…".to_owned());
    }
    (!told.is_empty()).then(|| told.join(", "))
}

/// Sets of columns that symmetries carry into each other.
struct Orbits(Vec<usize>);

impl Orbits {
    fn new(columns: usize) -> Self {
        Self((0..columns).collect())
    }

    fn root(&self, mut column: usize) -> usize {
        while self.0[column] != column {
            column = self.0[column];
        }
        column
    }

    fn same(&self, a: usize, b: usize) -> bool {
        self.root(a) == self.root(b)
    }

    fn join(&mut self, image: &[usize]) {
        for (from, &to) in image.iter().enumerate() {
            let (a, b) = (self.root(from), self.root(to));
            if a < b { self.0[b] = a } else { self.0[a] = b }
        }
    }

    fn count(&self) -> u32 {
        count((0..self.0.len()).filter(|&column| self.0[column] == column).count())
    }
}

fn distinct(colours: &[u32]) -> u32 {
    let mut colours = colours.to_vec();
    colours.sort_unstable();
    colours.dedup();
    count(colours.len())
}

fn count(length: usize) -> u32 {
    u32::try_from(length).unwrap_or(u32::MAX)
}

fn size_of(length: usize) -> f64 {
    f64::from(count(length))
}

/// The rows of the model that are in.
fn rows(model: &Model) -> impl Iterator<Item = RowId> + '_ {
    (0..model.row_count()).map(RowId::from_index).filter(|&row| model.row_is_in(row))
}
