//! Commands that become signs while typing: `\in` and a space, or Tab, is `∈`.

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

/// Commands offered at once.
const OFFERED: usize = 6;

/// Signs that the command before the caret may become.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) struct Offer {
    /// The UTF-16 unit of the backslash.
    pub(crate) start: u32,
    /// The caret.
    pub(crate) end: u32,
    /// What was typed after the backslash.
    pub(crate) typed: String,
    /// Commands with their signs, the likeliest first; never empty.
    pub(crate) choices: Vec<(&'static str, &'static str)>,
}

impl Offer {
    /// What a key makes of it: Tab takes the likeliest, a space only a command that is whole.
    pub(crate) fn sign(&self, tab: bool) -> Option<&'static str> {
        let (command, sign) = self.choices.first()?;
        (tab || *command == self.typed).then_some(*sign)
    }
}

/// The offer at a caret, which counts UTF-16 units.
pub(crate) fn offer(text: &str, caret: u32) -> Option<Offer> {
    let before = before(text, caret);
    let typed = before.trim_end_matches(|c: char| c.is_ascii_alphabetic()).len();
    let typed = &before[typed..];
    let is_command = !typed.is_empty() && before[..before.len() - typed.len()].ends_with('\\');
    if !is_command {
        return None;
    }
    let whole = COMMANDS.iter().filter(|(command, _)| *command == typed);
    let longer = |command: &str| command != typed && command.starts_with(typed);
    let longer = COMMANDS.iter().filter(|(command, _)| longer(command));
    let choices: Vec<_> = whole.chain(longer).take(OFFERED).copied().collect();
    let length = u32::try_from(typed.len()).unwrap_or(caret);
    let start = caret.saturating_sub(length + 1);
    (!choices.is_empty()).then(|| Offer { start, end: caret, typed: typed.to_owned(), choices })
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

    #[test]
    fn a_whole_command_comes_before_longer_ones() {
        let offer = offer("∀ i \\in", 7).unwrap();
        assert_eq!((offer.start, offer.end), (4, 7));
        assert_eq!(offer.sign(false), Some("∈"));
        assert!(offer.choices.contains(&("infty", "∞")));
        assert_eq!(self::offer("\\subset", 7).unwrap().sign(false), Some("⊂"));
    }

    #[test]
    fn a_part_of_a_command_waits_for_tab() {
        let offer = offer("𝔹 \\fora x", 8).unwrap();
        assert_eq!((offer.start, offer.sign(false), offer.sign(true)), (3, None, Some("∀")));
    }

    #[test]
    fn nothing_is_offered_elsewhere() {
        for (text, caret) in
            [("in", 2), ("\\", 1), ("\\in ", 4), ("\\qed", 4), ("", 0), ("\\in", 9)]
        {
            assert_eq!(offer(text, caret).is_some(), (text, caret) == ("\\in", 9), "{text}");
        }
    }

    #[test]
    fn every_command_becomes_its_own_sign() {
        for (command, sign) in COMMANDS {
            let text = format!("\\{command}");
            let offer = offer(&text, text.len() as u32).unwrap();
            assert_eq!(offer.sign(false), Some(*sign), "{command}");
        }
    }
}
