//! Trees put together from every kind of node are printed as Unicode text and as LaTeX, and both
//! read back as the same tree.
#![allow(
    clippy::unwrap_used,
    clippy::expect_used,
    clippy::panic,
    reason = "a test ends where it fails"
)]

use hullward_notation::syntax::{
    Additive, Big, Clause, Expression, Formulation, Function, Kind, Label, Line, Multiplicative,
    Name, NumberSet, Objective, Relation,
};
use hullward_notation::{Span, latex, parse, print};
use model::Number;
use proptest::collection::vec;
use proptest::prelude::*;

/// What the names stand for does not matter here, only that data can be told from variables.
const DATA: &str = "Trees of every kind\n\ndata\n  V  places\n  A ⊆ V × V\n  T\n  N_i ⊆ V  ∀ i ∈ V\n  \
                    n\n  Q ≥ 0\n  d_i  ∀ i ∈ V\n  c_{i,j}  ∀ (i,j) ∈ A\nminimise\n  x\nsubject to\n  x ≥ 0\n";

type Made = BoxedStrategy<Expression>;

fn made(kind: Kind) -> Expression {
    Expression { kind, span: Span::default() }
}

fn boxed(expression: Expression) -> Box<Expression> {
    Box::new(expression)
}

fn named(text: &str, indices: Vec<Expression>, superscript: Option<Expression>) -> Name {
    Name { text: text.to_owned(), indices, superscript: superscript.map(Box::new) }
}

fn word(text: &str) -> Expression {
    made(Kind::Name(named(text, Vec::new(), None)))
}

fn words(all: &'static [&'static str]) -> Made {
    prop::sample::select(all).prop_map(word).boxed()
}

fn number() -> Made {
    (0_i32..40, prop::sample::select(&[1_i32, 1, 2, 4, 10][..]))
        .prop_map(|(a, b)| made(Kind::Number(Number::from(a) / Number::from(b))))
        .boxed()
}

fn index() -> Made {
    let shifted = (words(&["t", "i"]), number())
        .prop_map(|(t, by)| made(Kind::Additive(boxed(t), vec![(Additive::Minus, by)])));
    prop_oneof![4 => words(&["i", "j", "k", "t"]), 1 => number(), 1 => shifted].boxed()
}

/// A name with indices and perhaps a superscript.
fn indexed(texts: &'static [&'static str]) -> Made {
    (prop::sample::select(texts), vec(index(), 1..3), prop::option::weighted(0.2, index()))
        .prop_map(|(text, indices, up)| made(Kind::Name(named(text, indices, up))))
        .boxed()
}

fn set() -> Made {
    let listed = vec(words(&["i", "j", "r"]), 1..3).prop_map(|items| made(Kind::Set(items)));
    let range = (index(), index()).prop_map(|(a, b)| made(Kind::Range(boxed(a), boxed(b))));
    let leaf = prop_oneof![
        3 => words(&["V", "A", "T"]),
        1 => indexed(&["N"]),
        1 => listed,
        1 => range,
        1 => Just(made(Kind::EmptySet)),
    ];
    leaf.prop_recursive(2, 6, 2, |inner| {
        let sum = (inner.clone(), prop::bool::ANY, inner.clone()).prop_map(|(a, union, b)| {
            let operator = if union { Additive::Union } else { Additive::Difference };
            made(Kind::Additive(boxed(a), vec![(operator, b)]))
        });
        let product = (inner.clone(), prop::bool::ANY, inner.clone()).prop_map(|(a, cross, b)| {
            let operator = if cross { Multiplicative::Cross } else { Multiplicative::Intersection };
            made(Kind::Multiplicative(boxed(a), vec![(operator, b)]))
        });
        let member = prop_oneof![
            inner.clone().prop_map(|set| (word("k"), set)),
            inner.clone().prop_map(|set| (made(Kind::Tuple(vec![word("k"), word("l")])), set)),
        ];
        let builder = (member, indexed(&["d"]), number()).prop_map(|((member, set), d, n)| {
            let member = made(Kind::Chain(boxed(member), vec![(Relation::In, set)]));
            let condition = made(Kind::Chain(boxed(d), vec![(Relation::Greater, n)]));
            made(Kind::Builder(boxed(member), vec![condition]))
        });
        prop_oneof![sum, product, builder]
    })
    .boxed()
}

/// A number made of data, or of data and variables.
fn value(names: &'static [&'static str], depth: u32) -> Made {
    let size = set().prop_map(|set| made(Kind::Function(Function::Bars, vec![set])));
    let call = (prop::sample::select(&["x", "δ", "E"][..]), set())
        .prop_map(|(text, set)| made(Kind::Call(named(text, Vec::new(), None), vec![set])));
    let leaf = prop_oneof![
        4 => indexed(names),
        2 => words(&["n", "Q"]),
        2 => number(),
        1 => size,
        1 => call,
    ];
    leaf.prop_recursive(depth, 12, 3, |inner| {
        let signs = prop::sample::select(&[Additive::Plus, Additive::Minus][..]);
        let sum = (inner.clone(), vec((signs, inner.clone()), 1..3))
            .prop_map(|(first, rest)| made(Kind::Additive(boxed(first), rest)));
        let operators = [Multiplicative::Times, Multiplicative::Over, Multiplicative::Modulo];
        let product =
            (inner.clone(), vec((prop::sample::select(operators.to_vec()), inner.clone()), 1..3))
                .prop_map(|(first, rest)| made(Kind::Multiplicative(boxed(first), rest)));
        let power =
            (inner.clone(), inner.clone()).prop_map(|(a, b)| made(Kind::Power(boxed(a), boxed(b))));
        let bigs = [Big::Sum, Big::Product, Big::Least, Big::Greatest];
        let big = (prop::sample::select(bigs.to_vec()), memberships(), inner.clone())
            .prop_map(|(big, clause, body)| made(Kind::Big(big, clause, boxed(body))));
        let rounding = (prop::bool::ANY, inner.clone()).prop_map(|(up, a)| {
            let function = if up { Function::Ceiling } else { Function::Floor };
            made(Kind::Function(function, vec![a]))
        });
        let extreme = (prop::bool::ANY, vec(inner.clone(), 1..3)).prop_map(|(least, all)| {
            let function = if least { Function::Minimum } else { Function::Maximum };
            made(Kind::Function(function, all))
        });
        let negative = inner.prop_map(|a| made(Kind::Negative(boxed(a))));
        prop_oneof![sum, product, power, big, rounding, extreme, negative]
    })
    .boxed()
}

fn condition() -> Made {
    let datum = || prop_oneof![indexed(&["d", "c"]), words(&["n", "Q"])];
    let relations = [
        Relation::Equal,
        Relation::NotEqual,
        Relation::Less,
        Relation::AtMost,
        Relation::Greater,
        Relation::AtLeast,
    ];
    let compared = (datum(), prop::sample::select(relations.to_vec()), value(&["d", "c"], 1))
        .prop_map(|(a, relation, b)| made(Kind::Chain(boxed(a), vec![(relation, b)])));
    let member = (prop::bool::ANY, set()).prop_map(|(inside, set)| {
        let relation = if inside { Relation::In } else { Relation::NotIn };
        let pair = made(Kind::Tuple(vec![word("i"), word("j")]));
        made(Kind::Chain(boxed(pair), vec![(relation, set)]))
    });
    let parity = (prop::bool::ANY, set()).prop_map(|(odd, set)| {
        made(Kind::Parity(boxed(made(Kind::Function(Function::Bars, vec![set]))), odd))
    });
    let clique = Just(made(Kind::Clique(boxed(word("V")), boxed(word("A")))));
    let leaf = prop_oneof![3 => compared, 2 => member, 1 => parity, 1 => clique];
    leaf.prop_recursive(2, 6, 2, |inner| {
        let all = vec(inner.clone(), 2..4).prop_map(|items| made(Kind::All(items)));
        let any = vec(inner.clone(), 2..4).prop_map(|items| made(Kind::Any(items)));
        let not = inner.prop_map(|a| made(Kind::Not(boxed(a))));
        prop_oneof![all, any, not]
    })
    .boxed()
}

/// What stands under a sum: memberships, and conditions behind a colon.
fn memberships() -> BoxedStrategy<Clause> {
    let one = prop_oneof![
        set().prop_map(|set| made(Kind::Chain(boxed(word("i")), vec![(Relation::In, set)]))),
        set().prop_map(|set| {
            let pair = made(Kind::Tuple(vec![word("i"), word("j")]));
            made(Kind::Chain(boxed(pair), vec![(Relation::In, set)]))
        }),
    ];
    let asked = (indexed(&["d"]), number())
        .prop_map(|(d, n)| made(Kind::Chain(boxed(d), vec![(Relation::Less, n)])));
    (vec(one, 1..3), vec(asked, 0..2))
        .prop_map(|(items, such_that)| Clause { items, such_that, span: Span::default() })
        .boxed()
}

fn quantifier() -> BoxedStrategy<Clause> {
    let subset = (prop::bool::ANY, set()).prop_map(|(proper, set)| {
        let relation = if proper { Relation::Subset } else { Relation::SubsetOrEqual };
        made(Kind::Chain(boxed(word("S")), vec![(relation, set)]))
    });
    (memberships(), prop::option::of(subset), vec(condition(), 0..3))
        .prop_map(|(mut clause, subset, conditions)| {
            clause.items.extend(subset);
            clause.such_that = conditions;
            clause
        })
        .boxed()
}

fn line(left: Vec<Expression>, links: Vec<(Relation, Expression)>) -> Line {
    Line { left, links, clauses: Vec::new(), label: None, remark: None, span: Span::default() }
}

fn domain() -> BoxedStrategy<Line> {
    use NumberSet as N;
    let sets = [
        N::Real,
        N::RealNonNegative,
        N::Integer,
        N::IntegerNonNegative,
        N::IntegerPositive,
        N::Binary,
    ];
    let zero_one =
        || made(Kind::Set(vec![made(Kind::Number(Number::ZERO)), made(Kind::Number(Number::ONE))]));
    let endless = (number(), prop::bool::ANY).prop_map(|(a, end)| {
        let end = if end { made(Kind::Infinity) } else { word("Q") };
        made(Kind::Interval(boxed(a), boxed(end)))
    });
    let values = prop_oneof![
        prop::sample::select(sets.to_vec()).prop_map(|set| made(Kind::NumberSet(set))),
        Just(zero_one()),
        (number(), number()).prop_map(|(a, b)| made(Kind::Range(boxed(a), boxed(b)))),
        endless,
    ];
    let names = prop_oneof![
        indexed(&["x", "y"]).prop_map(|name| vec![name]),
        Just(vec![word("x"), word("y")]),
    ];
    (names, values).prop_map(|(left, set)| line(left, vec![(Relation::In, set)])).boxed()
}

fn row() -> BoxedStrategy<Line> {
    let relations =
        prop::sample::select(&[Relation::AtMost, Relation::AtLeast, Relation::Equal][..]);
    let links = vec((relations, value(&["x", "y", "c", "d"], 2)), 1..3);
    (value(&["x", "y", "c"], 3), links).prop_map(|(left, links)| line(vec![left], links)).boxed()
}

fn statement() -> BoxedStrategy<Line> {
    let label = prop::option::of(prop::sample::select(&["leave", "7", "(l,S)"][..]));
    (prop_oneof![3 => row(), 1 => domain()], vec(quantifier(), 0..2), label)
        .prop_map(|(mut line, clauses, label)| {
            line.clauses = clauses;
            let text = label.map(|text| text.trim_matches(['(', ')']).to_owned());
            line.label = text.map(|text| Label { text, span: Span::default() });
            line
        })
        .boxed()
}

/// A tree that is shown as its text.
struct Shown(Formulation);

impl std::fmt::Debug for Shown {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        f.write_str(&print(&self.0))
    }
}

fn formulation() -> impl Strategy<Value = Shown> {
    let definition = prop_oneof![
        value(&["d", "c"], 2)
            .prop_map(|value| line(vec![word("m")], vec![(Relation::Equal, value)])),
        set().prop_map(|set| line(vec![word("F")], vec![(Relation::Equal, set)])),
    ];
    let objective = (prop::bool::ANY, value(&["x", "y", "c"], 3));
    (objective, vec(definition, 0..2), vec(statement(), 1..4)).prop_map(
        |((maximise, value), definitions, statements)| {
            let mut tree = parse(DATA).tree;
            // a product first could be a function of the word before it
            let two = made(Kind::Number(Number::from(2)));
            let expression = made(Kind::Additive(boxed(two), vec![(Additive::Plus, value)]));
            tree.objective = Some(Objective { maximise, expression, span: Span::default() });
            tree.definitions = definitions;
            tree.statements = statements;
            Shown(tree)
        },
    )
}

proptest! {
    #![proptest_config(ProptestConfig {
        cases: 400,
        max_shrink_iters: 20_000,
        failure_persistence: None,
        ..ProptestConfig::default()
    })]

    #[test]
    fn trees_of_every_kind_read_back(Shown(tree) in formulation()) {
        // `x = y = 0` is two rows as it is read.
        let equal = |line: &Line| line.links.iter().all(|(relation, _)| *relation == Relation::Equal);
        prop_assume!(!tree.statements.iter().any(|line| line.links.len() > 1 && equal(line)));
        for printed in [print(&tree), latex(&tree)] {
            let again = parse(&printed);
            // A domain whose index nothing binds is given its quantifier as it is read, and that is
            // told: such a tree is not what is written.
            prop_assume!(again.diagnostics.iter().all(|found| found.code != "name.inferred"));
            let found: Vec<String> = again.diagnostics.iter().map(|d| d.line(&printed)).collect();
            prop_assert!(found.is_empty(), "{printed}\n{found:?}");
            prop_assert!(again.tree == tree, "{printed}\nis read as\n{}", print(&again.tree));
        }
    }
}
