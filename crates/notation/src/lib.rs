//! Journal notation: text to checked formulation to model.
//!
//! | step | function | takes | gives |
//! |---|---|---|---|
//! | read | [`parse()`] | a text | a tree with places, and what could not be read |
//! | check | [`check()`] | a tree | names and shapes resolved |
//! | linearise | [`offers()`] | what was said of a text | the same with rows that mend it |
//! | bind | [`Binding`] | that and an instance | all data found, definitions evaluated, in slices |
//! | expand | [`Expansion`] | that | a [`model::Model`], in slices |
//! | look for pitfalls | [`lint()`] | tree, names and model | warnings with figures and mends |
//! | print | [`print()`], [`latex()`] | a tree | Unicode text or LaTeX that reads back as the same tree |
//! | set | [`typeset()`] | a tree | rows of MathML, as a tree |
//!
//! Nothing here fails on any text: what is wrong comes back as [`Diagnostic`]s with a place
//! and, where one is known, a mend. [`model()`] does all of it at once, for small things.

mod bind;
mod check;
mod diagnostic;
mod evaluate;
mod expand;
mod guide;
mod help;
mod latex;
mod lex;
mod linearise;
mod lint;
mod lists;
mod matching;
pub mod mathml;
mod parse;
mod place;
mod plan;
pub mod print;
mod rewrite;
pub mod syntax;
mod turned;

use std::collections::BTreeMap;

pub use bind::{Binding, Bound, bind};
pub use check::{Checked, check};
pub use diagnostic::{Diagnostic, Edit, Mend, Severity};
pub use expand::{Expansion, Limits, Progress, States};
pub use guide::{Section, guide};
pub use help::{Help, codes, help};
pub use latex::latex;
pub use linearise::offers;
pub use lint::{lint, lint_rows};
pub use matching::{Found, Match, Offer, assumed, matches};
pub use mathml::typeset;
pub use parse::{NESTING_LIMIT, Parse, TEXT_LIMIT, parse};
pub use place::{Span, line_column, utf16_offset, utf16_range};
pub use print::print;
pub use turned::table_named;

/// Text and instance to a model with warnings, in one go. `names` maps names of the
/// formulation to names of the instance where they differ; `states` sets families *in*,
/// *on demand* or *out*.
///
/// # Errors
/// Every error of the text; where the text is sound, every datum that lacks; where none does,
/// every error of the expansion.
pub fn model(
    text: &str,
    instance: &instance::Instance,
    names: &BTreeMap<String, String>,
    states: &States,
) -> Result<(model::Model, Vec<Diagnostic>), Vec<Diagnostic>> {
    let parsed = parse(text);
    let (checked, found) = check(&parsed.tree);
    let found = [parsed.diagnostics.clone(), found].concat();
    let mut found = diagnostic::tidy(offers(text, &parsed, &checked, found));
    if found.iter().any(Diagnostic::is_error) {
        return Err(found);
    }
    let bound = bind(&checked, instance, names)?;
    let (model, warnings) = Expansion::new(bound, states, Limits::default()).finish()?;
    found.extend(warnings);
    found.extend(lint(&parsed.tree, &checked, &model));
    Ok((model, diagnostic::tidy(found)))
}
