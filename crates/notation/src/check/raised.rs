//! Superscripts that belong to a name: `J^h ⊆ J`, `c^{NL}_g`, `y^{in}`. A word that stands nowhere
//! but in superscripts can be neither an index nor a power.

use std::collections::BTreeSet;

use super::usage::children;
use crate::syntax::{Expression, Formulation, Kind, Name};

/// Makes such words part of the names that carry them, as in `c^{\\text{NL}}_g`.
/// `O(tree · log names)`.
pub(super) fn join(tree: &mut Formulation) {
    let mut seen = Seen::default();
    each(tree, &mut |expression| seen.see(expression));
    if seen.raised.is_empty() {
        return;
    }
    let known = |word: &String| {
        seen.words.contains(word) || word.chars().count() == 1 && seen.letters.contains(word)
    };
    let own: BTreeSet<String> = seen.raised.iter().filter(|word| !known(word)).cloned().collect();
    let mut joined = |name: &mut Name| {
        if let Some(word) = bare(name.superscript.as_deref()).filter(|word| own.contains(*word)) {
            name.text = format!("{}^{{\\text{{{word}}}}}", name.text);
            name.superscript = None;
        }
    };
    if !own.is_empty() {
        super::complete::each_name_of(tree, &mut joined);
    }
}

fn each(tree: &Formulation, visit: &mut dyn FnMut(&Expression)) {
    if let Some(objective) = &tree.objective {
        visit(&objective.expression);
    }
    for line in tree.data.iter().chain(&tree.definitions).chain(&tree.statements) {
        super::usage::of_line(line).into_iter().for_each(&mut *visit);
    }
}

/// A word that is the whole superscript.
fn bare(raised: Option<&Expression>) -> Option<&String> {
    match raised.map(|e| &e.kind) {
        Some(Kind::Name(name)) if name.indices.is_empty() && name.superscript.is_none() => {
            Some(&name.text)
        }
        _ => None,
    }
}

/// What is met in a tree.
#[derive(Default)]
struct Seen {
    /// Whole superscripts.
    raised: BTreeSet<String>,
    /// Names that stand elsewhere; a word that always has indices can be no index.
    words: BTreeSet<String>,
    /// All letters of subscripts: the k of `x_{ijk}`.
    letters: String,
}

impl Seen {
    fn see(&mut self, expression: &Expression) {
        let Kind::Name(name) = &expression.kind else {
            if let Kind::Call(name, _) = &expression.kind {
                self.words.insert(name.text.clone());
            }
            return children(expression).into_iter().for_each(|child| self.see(child));
        };
        if name.indices.is_empty() || name.text.chars().count() == 1 {
            self.words.insert(name.text.clone());
        }
        for index in &name.indices {
            if let Kind::Name(index) = &index.kind {
                self.letters.push_str(&index.text);
            }
            self.see(index);
        }
        match (bare(name.superscript.as_deref()), name.superscript.as_deref()) {
            (Some(word), _) => {
                self.raised.insert(word.clone());
            }
            (None, Some(raised)) => self.see(raised),
            (None, None) => {}
        }
    }
}
