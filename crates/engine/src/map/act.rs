//! Acts by hand: from names to places in the model and back.

use std::collections::BTreeSet;

use model::{ColumnId, LabelId, Model, SubsetFamilyId};
use record::file::{BRANCHING, SELECTION};
use record::message::Acted;
use record::scenario::{Act, ActKind};
use tree::Rule;

use super::settings;

/// The act on the places of a model; else why there are none, as a clause.
pub(crate) fn act_of(model: &Model, act: &Act) -> Result<tree::Act, String> {
    match act.what {
        ActKind::Branch => {
            let [variable, tuple @ ..] = act.on.as_slice() else {
                return Err("it names no column".to_owned());
            };
            let tuple: Vec<&str> = tuple.iter().map(String::as_str).collect();
            let column = model.find_column(variable, &tuple).ok_or_else(|| {
                format!("the model has no column {}", named(variable, &tuple.join(", ")))
            })?;
            Ok(tree::Act::Branch { node: node(act)?, column })
        }
        ActKind::Close => Ok(tree::Act::Close { node: node(act)? }),
        ActKind::Cut => cut(model, &act.on),
        ActKind::Stop => Ok(tree::Act::Stop),
        ActKind::Rule => rule(model, &act.on).map(tree::Act::Rule),
    }
}

/// A rule or a limit by its name in `[run]` and its value there; a limit of 0 is none. After
/// `priority` come the names of variables.
fn rule(model: &Model, on: &[String]) -> Result<Rule, String> {
    if let [name, variables @ ..] = on
        && name == "priority"
    {
        let is_known = |name: &&String| model.variables().iter().any(|own| own.name == **name);
        let unknown = variables.iter().find(|name| !is_known(name));
        return match unknown {
            Some(name) => Err(format!("the model has no variable {name}")),
            None => Ok(Rule::Priority(variables.to_vec())),
        };
    }
    let [name, value] = on else { return Err("it names no rule and its value".to_owned()) };
    let limit = || value.parse::<u32>().map_err(|_| format!("{value} is no limit"));
    match name.as_str() {
        "branching" => find(&BRANCHING, value).map(settings::branching).map(Rule::Branching),
        "selection" => find(&SELECTION, value).map(settings::selection).map(Rule::Selection),
        "nodes" => limit().map(|most| Rule::Nodes((most > 0).then_some(most))),
        "iterations" => limit().map(|most| Rule::Iterations((most > 0).then_some(u64::from(most)))),
        _ => Err(format!(
            "{name} is no rule that can be changed: branching, selection, priority, nodes, iterations"
        )),
    }
}

fn find<T: Copy>(words: &[(&str, T)], value: &str) -> Result<T, String> {
    let found = words.iter().find(|(word, _)| *word == value);
    found.map(|(_, rule)| *rule).ok_or_else(|| {
        let known: Vec<&str> = words.iter().map(|(word, _)| *word).collect();
        format!("{value} is none of {}", known.join(", "))
    })
}

/// A rule as an act says it.
fn rule_words(rule: &Rule) -> Vec<String> {
    let limit = |most: Option<u64>| most.unwrap_or(0).to_string();
    let (name, value) = match rule {
        Rule::Branching(rule) => {
            let word = BRANCHING.iter().find(|(_, own)| settings::branching(*own) == *rule);
            ("branching", word.map_or("", |word| word.0).to_owned())
        }
        Rule::Selection(rule) => {
            let word = SELECTION.iter().find(|(_, own)| settings::selection(*own) == *rule);
            ("selection", word.map_or("", |word| word.0).to_owned())
        }
        Rule::Priority(names) => {
            return std::iter::once("priority".to_owned()).chain(names.iter().cloned()).collect();
        }
        Rule::Nodes(most) => ("nodes", limit(most.map(u64::from))),
        Rule::Iterations(most) => ("iterations", limit(*most)),
    };
    vec![name.to_owned(), value]
}

fn node(act: &Act) -> Result<tree::NodeId, String> {
    act.node.map(tree::NodeId).ok_or_else(|| "it names no node".to_owned())
}

/// A member of a family: by its name, its outer index tuple and the set.
fn cut(model: &Model, on: &[String]) -> Result<tree::Act, String> {
    let [name, labels @ ..] = on else { return Err("it names no family".to_owned()) };
    let families = model.subset_families().iter().enumerate();
    let mut of_name = families
        .filter(|(_, family)| model.families()[family.family.index()].name == *name)
        .peekable();
    if of_name.peek().is_none() {
        return Err(format!("there is no family {name} over subsets, on demand"));
    }
    let places: Option<Vec<LabelId>> =
        labels.iter().map(|label| model.labels().find(label)).collect();
    let places =
        places.ok_or_else(|| format!("the model does not know all of {}", labels.join(", ")))?;
    let found = of_name.find(|(_, family)| places.starts_with(&family.tuple));
    let (index, family) = found.ok_or_else(|| format!("{name} has no such index"))?;
    let subset: BTreeSet<LabelId> = places[family.tuple.len()..].iter().copied().collect();
    Ok(tree::Act::Cut { family: SubsetFamilyId::from_index(index), subset })
}

/// What became of an act, with its names.
pub(crate) fn acted(model: &Model, acted: &tree::Acted) -> Acted {
    let refused = acted.refused.as_ref().map(ToString::to_string);
    let act = written(model, &acted.act, acted.after);
    Acted { act, replayed: acted.replayed, refused }
}

/// An act whose names the model does not know.
pub(crate) fn refused(act: &Act, after: u32, replayed: bool, why: String) -> Acted {
    Acted { act: Act { after, ..act.clone() }, replayed, refused: Some(why) }
}

fn written(model: &Model, act: &tree::Act, after: u32) -> Act {
    let names = |labels: &[LabelId]| -> Vec<String> {
        labels.iter().map(|&label| model.labels().name(label).to_owned()).collect()
    };
    let of =
        |what, node: Option<tree::NodeId>, on| Act { after, what, node: node.map(|n| n.0), on };
    match act {
        tree::Act::Branch { node, column } => {
            of(ActKind::Branch, Some(*node), column_words(model, *column))
        }
        tree::Act::Close { node } => of(ActKind::Close, Some(*node), Vec::new()),
        tree::Act::Cut { family, subset } => {
            let family = model.subset_family(*family);
            let set: Vec<LabelId> = subset.iter().copied().collect();
            let mut on = vec![model.families()[family.family.index()].name.clone()];
            on.extend(names(&family.tuple));
            on.extend(names(&set));
            of(ActKind::Cut, None, on)
        }
        tree::Act::Rule(rule) => of(ActKind::Rule, None, rule_words(rule)),
        tree::Act::Stop => of(ActKind::Stop, None, Vec::new()),
    }
}

/// A column as an act names it: the variable, then its indices.
pub(crate) fn column_words(model: &Model, column: ColumnId) -> Vec<String> {
    let variable = model.columns()[column.index()].variable;
    let indices = model.column_tuple(column).iter();
    let mut words = vec![model.variables()[variable.index()].name.clone()];
    words.extend(indices.map(|&label| model.labels().name(label).to_owned()));
    words
}

fn named(name: &str, tuple: &str) -> String {
    if tuple.is_empty() { name.to_owned() } else { format!("{name}[{tuple}]") }
}

#[cfg(test)]
mod tests {
    use super::*;
    use model::{
        ColumnSpec, FamilyState, ModelBuilder, Number, Relation, Scope, Sense, SubsetFamily,
        SubsetTerm,
    };

    /// One column `x[a]` and a family over subsets of {a, b} for each of p and q.
    fn model() -> Model {
        let mut builder = ModelBuilder::new("t", Sense::Minimise);
        let [a, b, p, q] = ["a", "b", "p", "q"].map(|name| builder.label(name));
        builder.variable("x", false);
        let spec =
            ColumnSpec { lower: Some(Number::ZERO), upper: None, cost: Number::ONE, integer: true };
        let column = builder.column(&[a], &spec).unwrap();
        let family = builder.family("cover", FamilyState::OnDemand, false);
        for outer in [p, q] {
            let term = SubsetTerm { column, coefficient: Number::ONE, scope: Scope::Element(a) };
            let over_subsets = SubsetFamily {
                family,
                tuple: vec![outer],
                ground: vec![a, b],
                conditions: Vec::new(),
                terms: vec![term],
                weights: vec![Number::ZERO; 2],
                constant: Number::ZERO,
                rounded: None,
                relation: Relation::AtLeast,
            };
            builder.subset_family(over_subsets).unwrap();
        }
        builder.build()
    }

    fn act(what: ActKind, node: Option<u32>, on: &[&str]) -> Act {
        Act { after: 4, what, node, on: on.iter().map(|&word| word.to_owned()).collect() }
    }

    #[test]
    fn names_become_places_and_names_again() {
        let model = model();
        for given in [
            act(ActKind::Branch, Some(3), &["x", "a"]),
            act(ActKind::Close, Some(3), &[]),
            act(ActKind::Cut, None, &["cover", "p", "a"]),
            act(ActKind::Cut, None, &["cover", "q", "a", "b"]),
            act(ActKind::Stop, None, &[]),
            act(ActKind::Rule, None, &["branching", "pseudocost"]),
            act(ActKind::Rule, None, &["selection", "depth first"]),
            act(ActKind::Rule, None, &["nodes", "500"]),
            act(ActKind::Rule, None, &["iterations", "0"]),
            act(ActKind::Rule, None, &["priority", "x"]),
            act(ActKind::Rule, None, &["priority"]),
        ] {
            let known = act_of(&model, &given).unwrap();
            let told = tree::Acted { act: known, after: 4, replayed: false, refused: None };
            assert_eq!(acted(&model, &told).act, given);
        }
    }

    #[test]
    fn unknown_names_are_named() {
        let model = model();
        for (given, why) in [
            (act(ActKind::Branch, Some(1), &["x", "b"]), "no column x[b]"),
            (act(ActKind::Cut, None, &["cover", "a"]), "cover has no such index"),
            (act(ActKind::Cut, None, &["cover", "p", "z"]), "know all of p, z"),
            (act(ActKind::Cut, None, &["order", "p"]), "no family order"),
            (act(ActKind::Rule, None, &["branching", "best"]), "best is none of most fractional"),
            (act(ActKind::Rule, None, &["cuts", "all"]), "cuts is no rule"),
            (act(ActKind::Rule, None, &["nodes", "-3"]), "-3 is no limit"),
            (act(ActKind::Rule, None, &["priority", "z"]), "no variable z"),
            (act(ActKind::Rule, None, &[]), "names no rule"),
        ] {
            let refused = act_of(&model, &given).unwrap_err();
            assert!(refused.contains(why), "{refused}");
        }
    }
}
