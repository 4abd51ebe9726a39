//! Which datum of an instance each `data` line of a formulation takes: the one of the same name,
//! the one that a person named, or, where there is neither, the only one that suits by shape,
//! labels and wording. What is assumed so is said.

use std::collections::{BTreeMap, BTreeSet};

use instance::{Datum, Instance};

use crate::bind::noun;
use crate::check::Checked;
use crate::diagnostic::{Diagnostic, data as message};
use crate::plan::{Node, Root, Shape, Symbol, SymbolId};
use crate::syntax::plain;
use crate::turned::{MARK, named};

/// How a datum was found.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Found {
    /// By its own name.
    Named,
    /// Under the name that a person gave.
    Given,
    /// By shape, labels and wording.
    Assumed,
    /// Not at all; the formulation has a default.
    Default,
    /// Not at all.
    Nothing,
}

/// A datum of the instance that could be taken.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Offer {
    /// Its name.
    pub name: String,
    /// What it is.
    pub what: &'static str,
    /// Whether it has the shape that is wanted.
    pub fits: bool,
}

/// What one `data` line takes.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Match {
    /// The formulation's name.
    pub name: String,
    /// The byte of the text at which its line names it.
    pub at: usize,
    /// What its line says of it; may be empty.
    pub meaning: String,
    /// The instance's name.
    pub taken: Option<String>,
    /// How it was found.
    pub found: Found,
    /// Why it was assumed: "the only table over 1 index that is free"; empty otherwise.
    pub reason: String,
    /// Everything that the instance holds, what fits first.
    pub offers: Vec<Offer>,
}

impl Match {
    /// Whether what is taken is there and has the right shape, or nothing need be taken.
    #[must_use]
    pub fn is_well(&self) -> bool {
        match &self.taken {
            Some(taken) => self.offers.iter().any(|offer| offer.name == *taken && offer.fits),
            None => self.found == Found::Default,
        }
    }
}

/// What each `data` line of a checked formulation takes from an instance, in order. `names`
/// holds what a person named, by the formulation's names. `O(lines · data · cells)`.
#[must_use]
pub fn matches(
    text: &str,
    checked: &Checked,
    instance: &Instance,
    names: &BTreeMap<String, String>,
) -> Vec<Match> {
    let symbols = &checked.plan.symbols;
    let lines: Vec<SymbolId> = (0..symbols.len()).filter(|&id| symbols[id].datum).collect();
    let mut matcher =
        Matcher { text, symbols, instance, taken: BTreeMap::new(), reasons: BTreeMap::new() };
    for &id in &lines {
        let name = &symbols[id].name;
        // the mark of `K_` stands in links of earlier versions
        let given = names.get(&called(text, &symbols[id])).or_else(|| names.get(name));
        if let Some(given) = given {
            matcher.taken.insert(id, (given.clone(), Found::Given));
        } else if instance.get(name).is_some() {
            matcher.taken.insert(id, (name.clone(), Found::Named));
        } else if let Some(letters) = letters(name)
            && instance.get(letters).is_some()
            && !symbols.iter().any(|symbol| symbol.name == letters)
        {
            matcher.take_letters(id, letters);
        } else if let Some(spelt) = spelt_alike(&symbols[id], symbols, instance) {
            matcher.take_letters(id, spelt);
        }
    }
    // tables first: their labels tell the sets apart
    for tables in [true, false] {
        for &id in &lines {
            if symbols[id].used && symbols[id].indices.is_empty() != tables {
                matcher.assume(id);
            }
        }
    }
    lines.into_iter().map(|id| matcher.line(id)).collect()
}

/// The names to bind by: those given, and those assumed; and what is to be said of the latter.
#[must_use]
pub fn assumed(
    text: &str,
    checked: &Checked,
    instance: &Instance,
    names: &BTreeMap<String, String>,
) -> (BTreeMap<String, String>, Vec<Diagnostic>) {
    let mut all = names.clone();
    let mut notes = Vec::new();
    let symbols = checked.plan.symbols.iter().filter(|symbol| symbol.datum);
    for (line, symbol) in matches(text, checked, instance, names).into_iter().zip(symbols) {
        match (line.found, line.taken) {
            (Found::Assumed, Some(taken)) => {
                notes.push(message::matched(&line.name, &taken, symbol.span));
                all.insert(symbol.name.clone(), taken);
            }
            (Found::Given, Some(taken)) => {
                all.insert(symbol.name.clone(), taken);
            }
            _ => {}
        }
    }
    (all, notes)
}

/// The name by which a person binds a line: `K_i` beside a set `K`, as it is written; else the name.
fn called(text: &str, symbol: &Symbol) -> String {
    if plain(&symbol.name) == symbol.name {
        return symbol.name.clone();
    }
    let written = text.get(symbol.span.range()).unwrap_or(&symbol.name);
    written.chars().filter(|c| !c.is_whitespace()).collect()
}

/// `J` of `\mathcal J`: a name that is set in a type of its own; a bar or a hat is no type.
fn letters(name: &str) -> Option<&str> {
    let (command, letters) = name.split_once(' ')?;
    let is_type = command.starts_with("\\math") || command == "\\boldsymbol";
    (is_type && !letters.contains(' ')).then_some(letters)
}

/// `c_NL` for `c^{\text{NL}}`, `Pmax` for `P_{\max}`, `I0` for `I_{k0}`: the one datum with the
/// same letters and digits, unless the formulation has that name as well.
fn spelt_alike<'i>(symbol: &Symbol, symbols: &[Symbol], instance: &'i Instance) -> Option<&'i str> {
    let letters = letters_and_digits(&symbol.name);
    let place: String = symbol.indices.iter().filter_map(Node::constant).collect();
    let numbered = spelt_as(&format!("{letters}{place}"), symbols, instance);
    numbered.or_else(|| spelt_as(&letters, symbols, instance))
}

/// The one datum with these letters and digits.
fn spelt_as<'i>(wanted: &str, symbols: &[Symbol], instance: &'i Instance) -> Option<&'i str> {
    let alike = instance.data().map(|(datum, _)| datum).filter(|datum| {
        letters_and_digits(datum) == wanted && symbols.iter().all(|symbol| symbol.name != **datum)
    });
    let alike: Vec<&str> = alike.take(2).collect();
    let twin = symbols.iter().filter(|symbol| letters_and_digits(&symbol.name) == wanted).count();
    match alike[..] {
        [only] if twin < 2 && !wanted.is_empty() => Some(only),
        _ => None,
    }
}

/// The letters and digits of a name, without the commands that only set them.
fn letters_and_digits(name: &str) -> String {
    let mut plain = name.to_owned();
    for command in ["\\text", "\\mathrm", "\\mathcal", "\\mathscr", "\\mathbf", "\\boldsymbol"] {
        plain = plain.replace(command, "");
    }
    plain.chars().filter(|c| c.is_alphanumeric()).collect()
}

struct Matcher<'m> {
    text: &'m str,
    symbols: &'m [Symbol],
    instance: &'m Instance,
    taken: BTreeMap<SymbolId, (String, Found)>,
    reasons: BTreeMap<SymbolId, String>,
}

impl Matcher<'_> {
    /// Takes a datum whose name has the same letters.
    fn take_letters(&mut self, id: SymbolId, datum: &str) {
        self.taken.insert(id, (datum.to_owned(), Found::Assumed));
        self.reasons.insert(id, "the same letters, set in another way".to_owned());
    }

    /// Takes the only datum that suits a line best, unless the line has one or a default.
    fn assume(&mut self, id: SymbolId) {
        let symbol = &self.symbols[id];
        if self.taken.contains_key(&id) || symbol.value.is_some() {
            return;
        }
        let used: BTreeSet<&str> = self.taken.values().map(|(name, _)| name.as_str()).collect();
        let free = self
            .instance
            .data()
            .filter(|(name, _)| !used.contains(name) && !self.instance.assumed.contains(*name));
        let wording = words(&format!("{} {}", symbol.name, meaning(self.text, symbol)));
        let suits = free.filter(|(_, datum)| fits(symbol, datum) && self.holds_labels(id, datum));
        let scored: Vec<(usize, &str)> =
            suits.map(|(name, _)| (shared(&wording, &words(name)).count(), name)).collect();
        if scored.is_empty() {
            return self.pairs(id);
        }
        let Some(best) = scored.iter().map(|(score, _)| *score).max() else { return };
        let mut leading = scored.iter().filter(|(score, _)| *score == best);
        if let (Some(&(_, name)), None) = (leading.next(), leading.next()) {
            let reason = match scored.len() {
                1 => self.only(id, self.instance.get(name)),
                _ => {
                    let theirs = words(name);
                    let shared: Vec<&str> = shared(&wording, &theirs).map(String::as_str).collect();
                    format!("of those that fit, it alone says \u{201c}{}\u{201d}", shared.join(" "))
                }
            };
            self.reasons.insert(id, reason);
            self.taken.insert(id, (name.to_owned(), Found::Assumed));
        }
    }

    /// A set of pairs takes those for which a table has a value: the set that the reader made of
    /// them, else the cells of the table that is indexed by it, else of the only one.
    fn pairs(&mut self, id: SymbolId) {
        let symbol = &self.symbols[id];
        let Shape::Set(roots) = &symbol.shape else { return };
        if roots.len() < 2 || !symbol.indices.is_empty() {
            return;
        }
        let made: Vec<&str> = self
            .instance
            .data()
            .filter(|(name, datum)| self.instance.assumed.contains(*name) && fits(symbol, datum))
            .map(|(name, _)| name)
            .collect();
        let tables = |own: bool| -> Vec<&str> {
            let indexed = |name: &str| {
                self.taken.iter().any(|(&other, (taken, _))| {
                    taken == name && self.symbols[other].tuples == Some(id)
                })
            };
            let fitting = self.instance.data().filter(|(name, datum)| {
                matches!(datum, Datum::Table { .. })
                    && fits(symbol, datum)
                    && (!own || indexed(name))
            });
            fitting.map(|(name, _)| name).collect()
        };
        let (name, reason) = match (&made[..], &tables(true)[..], &tables(false)[..]) {
            ([one], ..) => {
                (*one, format!("the pairs that have a value, which the table calls {one}"))
            }
            ([], [one], _) => {
                (*one, format!("the pairs for which {one}, indexed by it, has a value"))
            }
            ([], [], [one]) => {
                (*one, format!("the pairs for which {one}, the only table of pairs, has a value"))
            }
            _ => return,
        };
        let name = name.to_owned();
        self.reasons.insert(id, reason);
        self.taken.insert(id, (name, Found::Assumed));
    }

    /// Why the only datum that suits is that.
    fn only(&self, id: SymbolId, datum: Option<&Datum>) -> String {
        let symbol = &self.symbols[id];
        let over = match symbol.indices.len() {
            0 => String::new(),
            1 => " over 1 index".to_owned(),
            places => format!(" over {places} indices"),
        };
        let what = match &symbol.shape {
            Shape::Set(_) if matches!(datum, Some(Datum::Table { .. })) => {
                return "the only table whose cells could be its members".to_owned();
            }
            Shape::Set(_) => {
                let indexed = self
                    .taken
                    .keys()
                    .filter(|&&other| self.symbols[other].roots.contains(&Root::Set(id)));
                let names: Vec<String> =
                    indexed.map(|&other| called(self.text, &self.symbols[other])).collect();
                if names.is_empty() {
                    return "the only set that fits".to_owned();
                }
                return format!("the only set that holds the labels of {}", names.join(", "));
            }
            _ if !symbol.indices.is_empty() => "table",
            Shape::Number => "number",
            Shape::Element(_) => "element",
        };
        format!("the only {what}{over} that is free")
    }

    /// Whether a set holds the labels of every table that is indexed by it.
    fn holds_labels(&self, id: SymbolId, datum: &Datum) -> bool {
        let members: BTreeSet<String> = match datum {
            Datum::Labels(labels) => labels.iter().cloned().collect(),
            Datum::Integers(values) => values.iter().map(ToString::to_string).collect(),
            _ => return true,
        };
        self.taken.iter().all(|(&other, (name, _))| {
            let Some(Datum::Table { cells, .. }) = self.instance.get(named(name).0) else {
                return true;
            };
            let roots = self.symbols[other].roots.iter().enumerate();
            let mut places = roots.filter(|(_, root)| **root == Root::Set(id));
            places.all(|(place, _)| {
                cells.keys().all(|key| key.get(place).is_none_or(|label| members.contains(label)))
            })
        })
    }

    /// Tables over two indices may be taken turned round.
    fn turned_offers(&self, symbol: &Symbol) -> Vec<Offer> {
        let two = symbol.roots.len() == 2 && symbol.roots[0] != symbol.roots[1];
        let tables = self.instance.data().filter(|(_, datum)| {
            two && matches!(datum, Datum::Table { arity: 2, .. }) && fits(symbol, datum)
        });
        let turned = |(name, _): (&str, &Datum)| Offer {
            name: format!("{name}{MARK}"),
            what: "a table turned round",
            fits: true,
        };
        tables.map(turned).collect()
    }

    fn line(&self, id: SymbolId) -> Match {
        let symbol = &self.symbols[id];
        let nothing =
            if symbol.value.is_some() || !symbol.used { Found::Default } else { Found::Nothing };
        let taken = self.taken.get(&id);
        let mut offers: Vec<Offer> = self
            .instance
            .data()
            .map(|(name, datum)| Offer {
                name: name.to_owned(),
                what: noun(datum),
                fits: fits(symbol, datum),
            })
            .collect();
        offers.extend(self.turned_offers(symbol));
        offers.sort_by_key(|offer| !offer.fits);
        Match {
            name: called(self.text, symbol),
            at: symbol.span.range().start,
            meaning: meaning(self.text, symbol),
            taken: taken.map(|(name, _)| name.clone()),
            found: taken.map_or(nothing, |(_, found)| *found),
            reason: self.reasons.get(&id).cloned().unwrap_or_default(),
            offers,
        }
    }
}

/// Whether a datum has the shape that a line wants.
fn fits(symbol: &Symbol, datum: &Datum) -> bool {
    let places = symbol.indices.len();
    match (&symbol.shape, datum) {
        (Shape::Number, Datum::Number(_)) => symbol.has_places(0),
        (Shape::Element(_), Datum::Element(_)) => places == 0,
        (Shape::Set(roots), Datum::Labels(_) | Datum::Integers(_)) => {
            places == 0 && roots.len() == 1
        }
        (Shape::Number | Shape::Element(_), Datum::Table { arity, .. }) => {
            places > 0 && symbol.has_places(*arity)
        }
        (Shape::Element(_), Datum::Tuples { arity, .. }) => places > 0 && *arity == places + 1,
        (Shape::Set(roots), Datum::Tuples { arity, .. }) => *arity == places + roots.len(),
        (Shape::Set(roots), Datum::Table { arity, .. }) => {
            places == 0 && roots.len() > 1 && *arity == roots.len()
        }
        _ => false,
    }
}

/// What the line of a datum says of it: what stands behind two blanks or more at its end.
fn meaning(text: &str, symbol: &Symbol) -> String {
    let at = symbol.span.range().start;
    let rest = text.get(at..).and_then(|rest| rest.lines().next()).unwrap_or("").trim_end();
    rest.rsplit_once("  ").map_or("", |(_, words)| words.trim()).to_owned()
}

/// Words of three letters or more, in small letters and without an s at the end.
fn words(text: &str) -> BTreeSet<String> {
    let words = text.split(|c: char| !c.is_alphanumeric()).map(str::to_lowercase);
    let words = words.map(|word| word.strip_suffix('s').map_or(word.clone(), str::to_owned));
    words.filter(|word| word.chars().count() > 2).collect()
}

/// The words that two texts share.
fn shared<'w>(
    one: &'w BTreeSet<String>,
    other: &'w BTreeSet<String>,
) -> impl Iterator<Item = &'w String> {
    one.intersection(other)
}

#[cfg(test)]
mod tests {
    use super::*;

    const SPLIT: &str = "Split links\n\ndata\n  I                     facilities\n  J                     clients\n  \
        f_i  ∀ i ∈ I          cost of opening a facility\n  c_{i,j}  ∀ i ∈ I, j ∈ J   cost of serving a client\n\
        minimise\n  Σ_{i ∈ I} f_i y_i + Σ_{i ∈ I} Σ_{j ∈ J} c_{i,j} x_{i,j}\nsubject to\n  \
        Σ_{i ∈ I} x_{i,j} = 1  ∀ j ∈ J  (serve)\n  x_{i,j} ≤ y_i  ∀ i ∈ I, j ∈ J  (link)\n  \
        x_{i,j} ≥ 0  ∀ i ∈ I, j ∈ J\n  y_i ∈ {0,1}  ∀ i ∈ I\n";

    const TABLES: &str = "depot\topening\nAshford\t62\nBirchley\t55\n\ndepot\tvillage\thaul\n\
        Ashford\tAbbey\t31\nAshford\tBarrow\t24\nBirchley\tAbbey\t92\nBirchley\tBarrow\t21\n";

    fn matched(text: &str, table: &str, names: &[(&str, &str)]) -> Vec<Match> {
        let checked = crate::check(&crate::parse(text).tree).0;
        let reading = instance::read(table, None);
        let instance = reading.instance.unwrap_or_else(|| panic!("{:?}", reading.complaints));
        let own = |&(name, of): &(&str, &str)| (name.to_owned(), of.to_owned());
        matches(text, &checked, &instance, &names.iter().map(own).collect())
    }

    fn taken(lines: &[Match]) -> Vec<(&str, Option<&str>, Found)> {
        lines.iter().map(|l| (l.name.as_str(), l.taken.as_deref(), l.found)).collect()
    }

    #[test]
    fn foreign_headings_are_matched_by_shape_and_labels() {
        let lines = matched(SPLIT, TABLES, &[]);
        let all = [("I", "depot"), ("J", "village"), ("f", "opening"), ("c", "haul")];
        let all = all.map(|(name, of)| (name, Some(of), Found::Assumed));
        assert_eq!(taken(&lines), all);
        assert!(lines.iter().all(Match::is_well));
        assert_eq!(lines[3].meaning, "cost of serving a client");
        assert_eq!(lines[3].offers[0].name, "haul", "what fits comes first");
    }

    #[test]
    fn wording_decides_between_equal_shapes_and_nothing_is_guessed() {
        let two = TABLES.replace(
            "depot\topening\nAshford\t62\nBirchley\t55",
            "depot\topening\trent\nAshford\t62\t1\nBirchley\t55\t2",
        );
        let lines = matched(SPLIT, &two, &[]);
        assert_eq!(lines[2].taken.as_deref(), Some("opening"), "{lines:?}");
        assert_eq!(lines[2].reason, "of those that fit, it alone says \u{201c}opening\u{201d}");
        let lines = matched(SPLIT, &two.replace("opening", "permit"), &[]);
        assert_eq!((lines[2].taken.as_deref(), lines[2].found), (None, Found::Nothing));
        assert!(!lines[2].is_well());
    }

    #[test]
    fn what_a_person_names_stands_even_where_it_does_not_fit() {
        let lines = matched(SPLIT, TABLES, &[("f", "haul"), ("c", "nowhere")]);
        assert_eq!(lines[2].found, Found::Given);
        assert!(!lines[2].is_well() && !lines[3].is_well());
        let lines = matched(SPLIT, TABLES, &[("f", "opening")]);
        assert!(lines[2].is_well() && lines[2].found == Found::Given);
    }

    #[test]
    fn names_of_their_own_are_taken_as_they_are() {
        let own = TABLES
            .replace("depot", "I")
            .replace("village", "J")
            .replace("opening", "f")
            .replace("haul", "c");
        let lines = matched(SPLIT, &own, &[]);
        assert!(lines.iter().all(|line| line.found == Found::Named), "{lines:?}");
    }

    /// `K_i` beside a set `K` stood in the table of names as `K_`, which no text can give.
    #[test]
    fn a_name_beside_its_set_is_called_as_it_is_written() {
        let text = "data\n  I  crews\n  K  days\n  K_{i}  ∀ i ∈ I  days off of a crew\nminimise\n  \
            Σ_{i ∈ I} x_i\nsubject to\n  x_i ≥ K_i + |K|  ∀ i ∈ I  (least)\n  x_i ≥ 0  ∀ i ∈ I\n";
        let table = "I\na b\n\nK\nMo Tu\n\noff by i\na 1\nb 2\n\nleave by i\na 3\nb 4\n";
        let names = |names: &[(&str, &str)]| taken_of(&matched(text, table, names));
        assert_eq!(names(&[]), ["I: I", "K: K", "K_{i}: off"]);
        assert_eq!(names(&[("K_{i}", "leave")])[2], "K_{i}: leave");
        assert_eq!(names(&[("K_", "leave")])[2], "K_{i}: leave");
        let checked = crate::check(&crate::parse(text).tree).0;
        let instance = instance::read(table, None).instance.unwrap();
        let given = BTreeMap::from([("K_{i}".to_owned(), "leave".to_owned())]);
        let (names, _) = assumed(text, &checked, &instance, &given);
        assert!(crate::bind(&checked, &instance, &names).is_ok());
        assert_eq!((checked.data(), names["K_"].as_str()), (vec!["I", "K", "K"], "leave"));
    }

    fn taken_of(lines: &[Match]) -> Vec<String> {
        let taken = |line: &Match| line.taken.clone().unwrap_or_default();
        lines.iter().map(|line| format!("{}: {}", line.name, taken(line))).collect()
    }

    /// A paper's script letter is a table's plain one, unless the paper has both.
    #[test]
    fn a_script_letter_takes_the_plain_one() {
        let found = |text: &str| {
            let (checked, _) = crate::check(&crate::parse(text).tree);
            let mut instance = Instance::new(instance::Reader::Blocks);
            instance.set("J", Datum::Labels(vec!["a".to_owned(), "b".to_owned()]));
            let found = matches(text, &checked, &instance, &BTreeMap::new());
            found.into_iter().map(|line| (line.name, line.taken, line.found)).collect::<Vec<_>>()
        };
        let model =
            "minimise\n  Σ_{j ∈ \\mathcal{J}} x_j\nsubject to\n  x_j ≥ 1  ∀ j ∈ \\mathcal{J}\n";
        let lines = found(&format!("data\n  \\mathcal{{J}}\n{model}"));
        assert_eq!((lines[0].1.as_deref(), lines[0].2), (Some("J"), Found::Assumed));
        let lines = found(&format!("data\n  \\mathcal{{J}}\n  J\n{model}"));
        assert_eq!(lines.iter().filter(|line| line.1.as_deref() == Some("J")).count(), 1);
    }

    /// `c^{\text{NL}}` asked for a table of that very name; a sheet calls it `c_NL` or `cNL`.
    #[test]
    fn a_name_in_words_is_found_by_its_letters() {
        let text = "data\n  I\n  c^{\\text{NL}}_i ∀ i ∈ I\n  c^{\\text{SU}}_i ∀ i ∈ I\nminimise\n  \
            Σ_{i ∈ I} (c^{\\text{NL}}_i + c^{\\text{SU}}_i) x_i\nsubject to\n  x_i ≥ 1  ∀ i ∈ I\n";
        let table = |names: [&str; 2]| {
            format!("I\na b\n\n{} by i\na 1\nb 2\n\n{} by i\na 3\nb 4\n", names[0], names[1])
        };
        for names in [["c_NL", "c_SU"], ["cNL", "cSU"]] {
            let lines = matched(text, &table(names), &[]);
            let found: Vec<_> = lines[1..].iter().filter_map(|line| line.taken.clone()).collect();
            assert_eq!(found, names, "{lines:?}");
        }
        let lines = matched(text, &table(["c_NL", "cNL"]), &[]);
        assert_eq!(lines[1].found, Found::Nothing, "two are spelt alike: {lines:?}");
    }

    /// A set of pairs was taken from the cells of a table only when its name was A.
    #[test]
    fn a_set_of_pairs_is_the_cells_that_have_a_value() {
        let text = |set: &str| {
            format!(
                "data\n  V\n  {set} ⊆ V × V\n  c_{{i,j}} ∀ (i,j) ∈ {set}\nminimise\n  Σ_{{(i,j) ∈ {set}}} c_{{i,j}} x_{{i,j}}\n\
                subject to\n  x_{{i,j}} ∈ {{0,1}} ∀ (i,j) ∈ {set}\n"
            )
        };
        let table = "\tAsh\tBirch\tCedar\nAsh\t\t3\t4\nBirch\t2\t\t\nCedar\t5\t8\t\n";
        for set in ["A", "E", "F", "arcs"] {
            let lines = matched(&text(set), table, &[]);
            assert_eq!(lines[1].taken.as_deref(), Some("A"), "{set}: {lines:?}");
            assert!(lines[1].is_well());
        }
        let lines = matched(&text("E"), table, &[]);
        assert_eq!(lines[1].reason, "the pairs that have a value, which the table calls A");
        let (checked, _) = crate::check(&crate::parse(&text("E")).tree);
        let mut instance = Instance::new(instance::Reader::Blocks);
        let labels = ["a", "b"].map(str::to_owned);
        instance.set("V", Datum::Labels(labels.to_vec()));
        let cells = [(labels.to_vec(), model::Number::ONE)].into_iter().collect();
        instance.set("c", Datum::Table { arity: 2, cells });
        let lines = matches(&text("E"), &checked, &instance, &BTreeMap::new());
        assert_eq!((lines[1].taken.as_deref(), lines[1].found), (Some("c"), Found::Assumed));
        assert!(lines[1].reason.contains("for which c"), "{}", lines[1].reason);
    }
}
