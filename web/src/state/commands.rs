//! What is offered while typing: the command `\in` and a space, or Tab, is `∈`; the first letters
//! of a name and Tab are the name.

/// Commands without the backslash, the usual ones first, each with its sign.
const COMMANDS: &[(&str, &str)] = &[
    ("in", "∈"),
    ("sum", "Σ"),
    ("forall", "∀"),
    ("le", "≤"),
    ("ge", "≥"),
    ("ne", "≠"),
    ("subset", "⊂"),
    ("subseteq", "⊆"),
    ("notin", "∉"),
    ("times", "×"),
    ("cdot", "·"),
    ("prod", "∏"),
    ("leq", "≤"),
    ("geq", "≥"),
    ("neq", "≠"),
    ("subsetneq", "⊊"),
    ("cup", "∪"),
    ("cap", "∩"),
    ("setminus", "∖"),
    ("emptyset", "∅"),
    ("infty", "∞"),
    ("land", "∧"),
    ("lor", "∨"),
    ("neg", "¬"),
    ("ldots", "…"),
    ("dots", "…"),
    ("lfloor", "⌊"),
    ("rfloor", "⌋"),
    ("lceil", "⌈"),
    ("rceil", "⌉"),
    ("equiv", "≡"),
    ("alpha", "α"),
    ("beta", "β"),
    ("gamma", "γ"),
    ("delta", "δ"),
    ("epsilon", "ε"),
    ("zeta", "ζ"),
    ("eta", "η"),
    ("theta", "θ"),
    ("kappa", "κ"),
    ("lambda", "λ"),
    ("mu", "μ"),
    ("nu", "ν"),
    ("xi", "ξ"),
    ("pi", "π"),
    ("rho", "ρ"),
    ("sigma", "σ"),
    ("tau", "τ"),
    ("phi", "φ"),
    ("chi", "χ"),
    ("psi", "ψ"),
    ("omega", "ω"),
    ("ell", "ℓ"),
];

/// Choices offered at once.
const OFFERED: usize = 6;

/// Letters after which the rest of a name is offered.
const SHORTEST: usize = 2;

/// What the word before the caret may become.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) struct Offer {
    /// The UTF-16 unit where the word begins; of a command, its backslash.
    pub(crate) start: u32,
    /// The caret.
    pub(crate) end: u32,
    /// Choices, the likeliest first; never empty.
    pub(crate) choices: Vec<Choice>,
}

/// One thing that the word may become.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) struct Choice {
    /// What is put in place of the word.
    pub(crate) text: String,
    /// The command that was begun, without its backslash; empty for a name.
    pub(crate) command: &'static str,
    /// Whether a space takes it: the command is whole.
    whole: bool,
}

impl Offer {
    /// What a key makes of it: Tab takes the likeliest, a space only a command that is whole.
    pub(crate) fn taken(&self, tab: bool) -> Option<&str> {
        let choice = self.choices.first()?;
        (tab || choice.whole).then_some(choice.text.as_str())
    }
}

/// The offer at a caret, which counts UTF-16 units: signs for a command, and for the first letters
/// of a name those of `names` that begin so.
pub(crate) fn offer(text: &str, caret: u32, names: &[String]) -> Option<Offer> {
    let before = before(text, caret);
    let word = before.trim_end_matches(char::is_alphabetic).len();
    let (front, word) = before.split_at(word);
    if word.is_empty() {
        return None;
    }
    let (choices, sign) = if front.ends_with('\\') {
        (signs(word), 1)
    } else if in_comment(front) {
        return None;
    } else {
        (longer_names(word, names), 0)
    };
    let length = word.encode_utf16().count() as u32;
    let start = caret.saturating_sub(length + sign);
    (!choices.is_empty()).then_some(Offer { start, end: caret, choices })
}

fn signs(typed: &str) -> Vec<Choice> {
    let whole = COMMANDS.iter().filter(|(command, _)| *command == typed);
    let longer = |command: &str| command != typed && command.starts_with(typed);
    let longer = COMMANDS.iter().filter(|(command, _)| longer(command));
    let choice = |&(command, sign): &(&'static str, &'static str)| Choice {
        text: sign.to_owned(),
        command,
        whole: command == typed,
    };
    whole.chain(longer).take(OFFERED).map(choice).collect()
}

/// Nothing when the word is itself a name.
fn longer_names(typed: &str, names: &[String]) -> Vec<Choice> {
    if typed.chars().count() < SHORTEST || names.iter().any(|name| name == typed) {
        return Vec::new();
    }
    let longer = names.iter().filter(|name| name.starts_with(typed));
    let choice = |name: &String| Choice { text: name.clone(), command: "", whole: false };
    longer.take(OFFERED).map(choice).collect()
}

/// Whether the end of a text stands in a comment.
fn in_comment(text: &str) -> bool {
    let line = text.rsplit('\n').next().unwrap_or(text);
    line.contains('#') || line.replace("\\%", "").contains('%')
}

/// The text before a UTF-16 unit.
fn before(text: &str, caret: u32) -> &str {
    let mut units = 0;
    for (at, letter) in text.char_indices() {
        if units >= caret {
            return &text[..at];
        }
        units += letter.len_utf16() as u32;
    }
    text
}

#[cfg(test)]
mod tests {
    use super::*;

    fn at_end(text: &str, names: &[&str]) -> Option<Offer> {
        let names: Vec<String> = names.iter().map(|&name| name.to_owned()).collect();
        offer(text, text.encode_utf16().count() as u32, &names)
    }

    fn texts(offer: &Offer) -> Vec<&str> {
        offer.choices.iter().map(|choice| choice.text.as_str()).collect()
    }

    #[test]
    fn a_whole_command_comes_before_longer_ones() {
        let offer = at_end("∀ i \\in", &[]).unwrap();
        assert_eq!((offer.start, offer.end), (4, 7));
        assert_eq!(offer.taken(false), Some("∈"));
        assert!(offer.choices.iter().any(|choice| choice.command == "infty"));
        assert_eq!(at_end("\\subset", &[]).unwrap().taken(false), Some("⊂"));
    }

    #[test]
    fn a_part_of_a_command_waits_for_tab() {
        let offer = offer("𝔹 \\fora x", 8, &[]).unwrap();
        assert_eq!((offer.start, offer.taken(false), offer.taken(true)), (3, None, Some("∀")));
    }

    #[test]
    fn nothing_is_offered_elsewhere() {
        for text in ["in", "\\", "\\in ", "\\qed", ""] {
            assert_eq!(at_end(text, &[]), None, "{text}");
        }
        assert!(offer("\\in", 9, &[]).is_some());
    }

    #[test]
    fn names_in_scope_wait_for_tab() {
        let names = ["demand", "depot", "délai", "d"];
        let offer = at_end("𝔹 2 de", &names).unwrap();
        assert_eq!(texts(&offer), ["demand", "depot"]);
        assert_eq!((offer.start, offer.taken(false)), (5, None));
        assert_eq!(offer.taken(true), Some("demand"));
        assert_eq!(texts(&at_end("dé", &names).unwrap()), ["délai"]);
        for text in ["d", "x", "demand", "demands", "\\de", "# de", "  V  % de"] {
            let offered = at_end(text, &names).map(|offer| texts(&offer).join(" "));
            assert_ne!(offered.as_deref(), Some("demand depot"), "{text}");
        }
        assert!(at_end("5\\% de", &names).is_some());
    }

    #[test]
    fn every_command_becomes_its_own_sign() {
        for (command, sign) in COMMANDS {
            let offer = at_end(&format!("\\{command}"), &[]).unwrap();
            assert_eq!(offer.taken(false), Some(*sign), "{command}");
        }
    }
}
