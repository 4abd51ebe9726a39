//! Characters that pdfTeX does not set by itself. What is printed holds them as they are, so that
//! it reads back; a line before it tells TeX how each of them is set.

use std::collections::BTreeSet;
use std::fmt::Write as _;

use crate::lex::letter_command;

/// The beginning of such a line; a line that begins so is passed over when it is read back.
const TOLD: &str = "\\expandafter\\def\\csname u8:";

/// Signs with their commands.
const SIGNS: &str = "− - ≤ \\le ⩽ \\leqslant ≦ \\leqq ≥ \\ge ⩾ \\geqslant ≧ \\geqq ≠ \\ne ∈ \\in ∉ \\notin \
    ⊂ \\subset ⊊ \\subsetneq ⊆ \\subseteq ⊃ \\supset ⊋ \\supsetneq ⊇ \\supseteq ≡ \\equiv ∪ \\cup ∩ \\cap \
    ∖ \\setminus ⧵ \\setminus ∧ \\wedge ∨ \\vee ¬ \\neg ∀ \\forall Σ \\Sigma ∑ \\sum ∏ \\prod Π \\Pi \
    ⋃ \\bigcup ⋂ \\bigcap × \\times ÷ \\div · \\cdot ⋅ \\cdot ∗ \\ast ⋆ \\star ∕ / ∣ \\mid ∶ : \
    ⋯ \\cdots ‥ .. ⌊ \\lfloor ⌋ \\rfloor ⌈ \\lceil ⌉ \\rceil ∅ \\varnothing ∞ \\infty \
    ≔ := ′ ' → \\to ← \\leftarrow ↔ \\leftrightarrow ⇒ \\Rightarrow ⇔ \\Leftrightarrow ≈ \\approx \
    ± \\pm √ \\surd ∂ \\partial ∇ \\nabla ∃ \\exists ℕ \\mathbb{N} ℤ \\mathbb{Z} ℝ \\mathbb{R} 𝔹 \\mathbb{B} \
    « \\ll » \\gg ‐ - ‑ - ‒ - ﹣ -";

/// Characters of running text that TeX knows.
const KNOWN: &str = "–—‘’“”°…§©®™£¿¡";

/// Letters with a hook below, which the usual encoding of TeX lacks, and their base.
const HOOKED: &str = "ą a ę e į i ų u Ą A Ę E Į I Ų U";

/// Letters of the Latin alphabets that the usual encoding lacks altogether.
const RARE: &str = "ÐðÞþĐđĦħŊŋŦŧĸſŉĲĳĿŀ";

/// The lines that tell TeX of the characters in `printed`, in order. `O(bytes · log)`.
pub(super) fn told(printed: &str) -> String {
    let found: BTreeSet<char> = printed.chars().filter(|c| !c.is_ascii()).collect();
    let mut out = String::new();
    for c in found.into_iter().filter(|c| !c.is_whitespace() && !KNOWN.contains(*c)) {
        let kept = format!("\\csname hw:\\detokenize{{{c}}}");
        if is_latin(c) {
            // an accent of text, which mathematics does not take; what TeX knew is kept once
            let _ = writeln!(
                out,
                "\\expandafter\\ifx{kept}\\endcsname\\relax\\expandafter\\let{kept}\\expandafter\\endcsname\\csname u8:\\detokenize{{{c}}}\\endcsname\\fi"
            );
            let _ = writeln!(
                out,
                "{TOLD}\\detokenize{{{c}}}\\endcsname{{\\ifmmode\\text{{{kept}\\endcsname}}\\else{kept}\\endcsname\\fi}}"
            );
            continue;
        }
        let _ = writeln!(out, "{TOLD}\\detokenize{{{c}}}\\endcsname{{{}}}", set(c));
    }
    out
}

/// The letters of western European languages, which TeX sets in text.
fn is_latin(c: char) -> bool {
    let latin = c.is_alphabetic() && ('\u{c0}'..'\u{17f}').contains(&c);
    let own = letter_command(c.encode_utf8(&mut [0; 4])).is_some();
    latin && !own && !HOOKED.contains(c) && !RARE.contains(c)
}

/// How a character is set; one without a sign of its own by its number in Unicode.
fn set(c: char) -> String {
    let mut buffer = [0; 4];
    let own: &str = c.encode_utf8(&mut buffer);
    if let Some(command) = letter_command(own) {
        return format!("\\ensuremath{{\\{command}}}");
    }
    let mut hooked = HOOKED.split(' ');
    if hooked.any(|letter| letter == own)
        && let Some(base) = hooked.next()
    {
        return format!("\\text{{\\c{{{base}}}}}");
    }
    let mut signs = SIGNS.split_whitespace();
    while let (Some(sign), Some(command)) = (signs.next(), signs.next()) {
        if sign == own {
            return format!("\\ensuremath{{{command}}}");
        }
    }
    match crate::lex::plain_letter(c) {
        Some((form, letter)) => format!("\\ensuremath{{{form}{{{letter}}}}}"),
        None => format!("\\text{{\\texttt{{U+{:04X}}}}}", u32::from(c)),
    }
}
