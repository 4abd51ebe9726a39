//! Which method separates a family: recognition of its shape.

use std::rc::Rc;

use model::{Model, SubsetCondition, SubsetFamily};

use crate::clique::{Cliques, MOST_NODES};

use crate::compiled::{Compiled, Kind};
use crate::conditions::{Conditions, Fixed, MOST_LEVELS};
use crate::cover::Cover;
use crate::{degree, list};

/// How the bound of a family is labelled.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Exactness {
    /// A violated member is found whenever there is one.
    Exact,
    /// A violated member may be missed.
    Heuristic,
    /// All members are listed: none is missed.
    Enumerated,
}

/// The method of a separator.
#[derive(Debug, Clone)]
pub(crate) enum Method {
    /// Minimum cuts (or what the oracle finds), at most `limit` a round (`None`: as many as it
    /// takes).
    Cut { limit: Option<u32>, oracle: Oracle },
    /// All members, by places.
    List(Vec<Vec<usize>>),
    /// None is known.
    None,
}

/// What finds the most violated of the sets that agree with what is fixed.
#[derive(Debug, Clone)]
pub(crate) enum Oracle {
    /// A minimum cut; of all sets.
    Cut,
    /// Of the sets with an odd (`true`) or even number of elements.
    Parity(bool),
    /// Of the sets over a weight, for terms that split by element.
    Cover(Rc<Cover>),
    /// Of the cliques, for terms that split by element.
    Clique(Rc<Cliques>),
}

/// Cuts a round for members with a rounded sum.
const ROUNDED_LIMIT: u32 = 100;
/// Cuts a round where the conditions could take very many.
const CUT_LIMIT: u32 = 2_000;

/// A method and what it is called.
pub(crate) struct Choice {
    pub(crate) method: Method,
    pub(crate) exactness: Option<Exactness>,
    pub(crate) description: String,
}

/// Recognises the shape of a family.
pub(crate) fn choose(
    model: &Model,
    family: &SubsetFamily,
    compiled: &Compiled,
    conditions: &Conditions,
) -> Choice {
    let cut = is_cut(model, compiled);
    let balanced = cut && degree::balances(model, family);
    let oracle = oracle(family, compiled, conditions);
    let handled = !matches!(oracle, Oracle::Cut);
    let bounded = conditions.levels(handled).is_some_and(|levels| levels <= MOST_LEVELS);
    let small = !matches!(&oracle, Oracle::Cover(cover) if !cover.is_small());
    let plain = compiled.rounding.is_none();
    if cut && plain && small && (bounded || (balanced && halves(conditions))) {
        return Choice {
            description: if handled {
                exactly(&oracle)
            } else {
                named(model, family, (compiled, conditions), balanced)
            },
            method: Method::Cut { limit: None, oracle },
            exactness: Some(Exactness::Exact),
        };
    }
    if let Some(sets) = list::members(family, conditions) {
        let description = format!("all {} members listed", sets.len());
        let exactness = Some(Exactness::Enumerated);
        return Choice { method: Method::List(sets), exactness, description };
    }
    if cut {
        let description = roughly(&oracle, compiled);
        let limit = if plain { CUT_LIMIT } else { ROUNDED_LIMIT };
        let method = Method::Cut { limit: Some(limit), oracle };
        return Choice { method, exactness: Some(Exactness::Heuristic), description };
    }
    let description = "no method: the shape is not recognised and there are over 4,096 members";
    Choice { method: Method::None, exactness: None, description: description.to_owned() }
}

/// The oracle that meets the one condition of another kind; plain cuts where there is none.
fn oracle(family: &SubsetFamily, compiled: &Compiled, conditions: &Conditions) -> Oracle {
    let pair =
        |kind: Kind| matches!(kind, Kind::Inside(..) | Kind::Leaving(..) | Kind::Crossing(..));
    let split = !compiled.terms.iter().any(|term| pair(term.kind));
    let plain = compiled.rounding.is_none();
    match &conditions.others[..] {
        [SubsetCondition::Odd(odd)] if plain => Oracle::Parity(*odd),
        [SubsetCondition::WeightOver { weights, over }] if split && plain => {
            Cover::new(&family.ground, weights, over)
                .map_or(Oracle::Cut, |cover| Oracle::Cover(Rc::new(cover)))
        }
        [SubsetCondition::Clique(edges)] if split && plain => {
            Oracle::Clique(Rc::new(Cliques::new(&family.ground, edges)))
        }
        _ => Oracle::Cut,
    }
}

/// The description of an exact oracle.
fn exactly(oracle: &Oracle) -> String {
    match oracle {
        Oracle::Cut => String::new(),
        Oracle::Parity(true) => "exact minimum odd cut on a cut tree".to_owned(),
        Oracle::Parity(false) => "exact minimum even cut".to_owned(),
        Oracle::Cover(_) => "exact knapsack by dynamic programming".to_owned(),
        Oracle::Clique(_) => {
            format!("greedy cliques, then exact branch and bound up to {MOST_NODES} nodes")
        }
    }
}

/// The description of a method that may miss a violated member.
fn roughly(oracle: &Oracle, compiled: &Compiled) -> String {
    match oracle {
        Oracle::Cover(_) => {
            "heuristic: greedy knapsack, for exact states would be over 10^6".to_owned()
        }
        _ if compiled.rounding.is_some() => format!(
            "heuristic: greedy growth and up to {ROUNDED_LIMIT} minimum cuts of the form without \
             rounding"
        ),
        _ => format!(
            "heuristic: up to {CUT_LIMIT} minimum cuts a round, for these sizes or parities"
        ),
    }
}

/// Whether the violation is maximised by a minimum cut: terms inside only help, terms
/// that leave only hurt, whatever x within the bounds of the columns.
fn is_cut(model: &Model, compiled: &Compiled) -> bool {
    let sign = |column: usize| {
        let column = model.columns()[column];
        let value = |id| model.numbers().float(id);
        let low = column.lower.is_some_and(|lower| value(lower) >= 0.0);
        let high = column.upper.is_some_and(|upper| value(upper) <= 0.0);
        (low, high)
    };
    let fits = |coefficient: f64, column: usize| {
        let (low, high) = sign(column);
        (coefficient >= 0.0 && low) || (coefficient <= 0.0 && high)
    };
    let term_fits = |term: &crate::compiled::Term| match term.kind {
        Kind::Always | Kind::Element(_) | Kind::Outside(_) => true,
        Kind::Inside(..) => fits(term.coefficient, term.column),
        Kind::Leaving(..) | Kind::Crossing(..) => fits(-term.coefficient, term.column),
    };
    !compiled.equation && compiled.readable && compiled.terms.iter().all(term_fits)
}

/// Whether of each set and its complement (single elements apart) one is admitted, so that
/// balance makes a search of the sets that avoid one element complete.
pub(crate) fn halves(conditions: &Conditions) -> bool {
    let size = conditions.fixed.len();
    let free = conditions.fixed.iter().all(|fixed| *fixed == Fixed::Free);
    let lists = conditions.meets.is_empty() && conditions.lacks.is_empty();
    let plain = lists && conditions.others.is_empty() && !conditions.empty;
    let sizes = (1..=2).contains(&conditions.least)
        && conditions.most >= size / 2
        && conditions.most < size;
    free && plain && sizes
}

/// The description of an exact method.
fn named(
    model: &Model,
    family: &SubsetFamily,
    (compiled, conditions): (&Compiled, &Conditions),
    balanced: bool,
) -> String {
    let pairs = |wanted: fn(&Kind) -> bool| compiled.terms.iter().any(|t| wanted(&t.kind));
    let inside = pairs(|kind| matches!(kind, Kind::Inside(..)));
    let leaving = pairs(|kind| matches!(kind, Kind::Leaving(..) | Kind::Crossing(..)));
    if !inside && !leaving {
        return "exact: each element takes its better side".to_owned();
    }
    if inside && balanced {
        return "exact minimum cut (the degree equations make it one)".to_owned();
    }
    let weighted = compiled.weights.iter().any(|&weight| weight != 0.0)
        || pairs(|kind| matches!(kind, Kind::Element(_) | Kind::Outside(_)));
    if inside || weighted {
        return "exact closure: minimum cut with node weights, one for each forced element"
            .to_owned();
    }
    let only = |wanted: Fixed| {
        let mut places = (0..compiled.size).filter(|&i| conditions.fixed[i] == wanted);
        let first = places.next()?;
        places.next().is_none().then(|| model.labels().name(family.ground[first]))
    };
    match (only(Fixed::In), only(Fixed::Out)) {
        (Some(root), None) => format!("exact minimum cut from {root} to each other element"),
        (None, Some(root)) => format!("exact minimum cut from each element to {root}"),
        _ => "exact minimum cut between the elements".to_owned(),
    }
}
