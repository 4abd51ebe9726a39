//! The three spellings: signs, TeX commands and plain words, each with the token it stands for.

use super::token::Kind;

/// Unicode and ASCII signs of one character.
pub(super) fn sign(c: char) -> Option<Kind> {
    Some(match c {
        '+' => Kind::Plus,
        '-' | '−' | '–' | '‐' | '‑' | '‒' | '﹣' => Kind::Minus,
        '*' | '·' | '⋅' | '∗' | '⋆' => Kind::Dot,
        '×' => Kind::Cross,
        '/' | '∕' | '÷' => Kind::Slash,
        '^' => Kind::Caret,
        '_' => Kind::Underscore,
        '=' | '≔' => Kind::Equal,
        '≠' => Kind::NotEqual,
        '<' => Kind::Less,
        '≤' | '⩽' | '≦' => Kind::AtMost,
        '>' => Kind::Greater,
        '≥' | '⩾' | '≧' => Kind::AtLeast,
        '∈' => Kind::In,
        '∉' => Kind::NotIn,
        '⊂' | '⊊' => Kind::Subset,
        '⊆' => Kind::SubsetOrEqual,
        '⊃' | '⊋' => Kind::Superset,
        '⊇' => Kind::SupersetOrEqual,
        '≡' => Kind::Congruent,
        '∪' => Kind::Union,
        '∩' => Kind::Intersection,
        '∖' | '⧵' => Kind::Difference,
        '∧' => Kind::And,
        '∨' => Kind::Or,
        '¬' => Kind::Not,
        '∀' => Kind::ForAll,
        'Σ' | '∑' => Kind::Sum,
        '∏' | 'Π' => Kind::Product,
        '⋃' => Kind::BigUnion,
        '⋂' => Kind::BigIntersection,
        ':' | '∣' | '∶' => Kind::Colon,
        ',' => Kind::Comma,
        '.' => Kind::Period,
        ';' => Kind::Break,
        '…' | '⋯' | '‥' => Kind::Dots,
        '(' => Kind::LeftParen,
        ')' => Kind::RightParen,
        '{' => Kind::LeftBrace,
        '}' => Kind::RightBrace,
        '[' => Kind::LeftBracket,
        ']' => Kind::RightBracket,
        '⟦' => Kind::LeftWhole,
        '⟧' => Kind::RightWhole,
        '|' => Kind::Bar,
        '⌊' => Kind::LeftFloor,
        '⌋' => Kind::RightFloor,
        '⌈' => Kind::LeftCeiling,
        '⌉' => Kind::RightCeiling,
        '∅' | 'Ø' => Kind::EmptySet,
        '∞' => Kind::Infinity,
        'ℕ' => Kind::Naturals,
        'ℤ' => Kind::Integers,
        'ℝ' => Kind::Reals,
        '𝔹' => Kind::Binaries,
        _ => return None,
    })
}

/// ASCII signs of more than one character, longest first.
pub(super) const LONG_SIGNS: &[(&str, Kind)] = &[
    ("...", Kind::Dots),
    ("..", Kind::Dots),
    ("<=", Kind::AtMost),
    ("=<", Kind::AtMost),
    (">=", Kind::AtLeast),
    ("!=", Kind::NotEqual),
    ("<>", Kind::NotEqual),
    (":=", Kind::Equal),
    ("==", Kind::Equal),
    ("&&", Kind::And),
];

/// Plain words.
pub(super) fn word(text: &str) -> Option<Kind> {
    Some(match text {
        "sum" => Kind::Sum,
        "prod" => Kind::Product,
        "forall" | "for" => Kind::ForAll,
        "in" => Kind::In,
        "notin" => Kind::NotIn,
        "subset" => Kind::Subset,
        "subseteq" => Kind::SubsetOrEqual,
        "cross" => Kind::Cross,
        "union" => Kind::Union,
        "inter" => Kind::Intersection,
        "setminus" => Kind::Difference,
        "and" => Kind::And,
        "or" => Kind::Or,
        "not" => Kind::Not,
        "odd" => Kind::Odd,
        "even" => Kind::Even,
        "floor" => Kind::Floor,
        "ceil" => Kind::Ceiling,
        "min" => Kind::Min,
        "max" => Kind::Max,
        "inf" | "infinity" => Kind::Infinity,
        "emptyset" => Kind::EmptySet,
        "mod" => Kind::Modulo,
        "free" | "unrestricted" => Kind::Free,
        "clique" => Kind::Clique,
        "minimise" | "minimize" => Kind::Minimise,
        "maximise" | "maximize" => Kind::Maximise,
        _ => return None,
    })
}

/// Plain expressions of two words.
pub(super) const WORD_PAIRS: &[(&str, &str, Kind)] = &[
    ("subject", "to", Kind::SubjectTo),
    ("such", "that", Kind::SuchThat),
    ("for", "all", Kind::ForAll),
    ("for", "each", Kind::ForAll),
    ("for", "every", Kind::ForAll),
    ("for", "any", Kind::ForAll),
    ("not", "in", Kind::NotIn),
];

/// TeX commands, without the backslash.
pub(super) fn command(name: &str) -> Option<Kind> {
    Some(match name {
        "sum" => Kind::Sum,
        "prod" => Kind::Product,
        "bigcup" => Kind::BigUnion,
        "bigcap" => Kind::BigIntersection,
        "forall" => Kind::ForAll,
        "in" => Kind::In,
        "notin" => Kind::NotIn,
        "subset" | "subsetneq" | "subsetneqq" | "varsubsetneq" => Kind::Subset,
        "subseteq" | "subseteqq" => Kind::SubsetOrEqual,
        "supset" | "supsetneq" => Kind::Superset,
        "supseteq" | "supseteqq" => Kind::SupersetOrEqual,
        "le" | "leq" | "leqslant" | "leqq" => Kind::AtMost,
        "ge" | "geq" | "geqslant" | "geqq" => Kind::AtLeast,
        "lt" => Kind::Less,
        "gt" => Kind::Greater,
        "ne" | "neq" => Kind::NotEqual,
        "equiv" => Kind::Congruent,
        "bmod" | "mod" => Kind::Modulo,
        "cup" => Kind::Union,
        "cap" => Kind::Intersection,
        "setminus" | "smallsetminus" | "backslash" => Kind::Difference,
        "times" => Kind::Cross,
        "cdot" | "ast" | "star" => Kind::Dot,
        "div" => Kind::Slash,
        "land" | "wedge" => Kind::And,
        "lor" | "vee" => Kind::Or,
        "lnot" | "neg" => Kind::Not,
        "mid" | "colon" => Kind::Colon,
        "ldots" | "dots" | "cdots" | "dotsc" | "dotsb" | "hdots" | "dotso" => Kind::Dots,
        "lfloor" => Kind::LeftFloor,
        "rfloor" => Kind::RightFloor,
        "lceil" => Kind::LeftCeiling,
        "rceil" => Kind::RightCeiling,
        "lvert" | "rvert" | "vert" => Kind::Bar,
        "lbrace" => Kind::LeftBrace,
        "rbrace" => Kind::RightBrace,
        "emptyset" | "varnothing" => Kind::EmptySet,
        "infty" => Kind::Infinity,
        "min" => Kind::Min,
        "max" => Kind::Max,
        "frac" | "tfrac" | "dfrac" | "nicefrac" | "sfrac" | "cfrac" => Kind::Fraction,
        "lbrack" => Kind::LeftBracket,
        "rbrack" => Kind::RightBracket,
        "llbracket" => Kind::LeftWhole,
        "rrbracket" => Kind::RightWhole,
        "coloneqq" | "triangleq" | "doteq" => Kind::Equal,
        "R" | "Re" | "reals" | "RR" => Kind::Reals,
        "Z" | "ZZ" | "integers" => Kind::Integers,
        "N" | "NN" | "naturals" => Kind::Naturals,
        "B" | "BB" => Kind::Binaries,
        _ => return None,
    })
}

/// TeX commands that say nothing about the model.
pub(super) fn vanishes(name: &str) -> bool {
    VANISHING.split(' ').any(|one| one == name)
}

const VANISHING: &str = "big Big bigl bigr Bigl Bigr bigg Bigg biggl biggr nonumber notag limits nolimits \
    displaystyle textstyle scriptstyle thinspace medspace thickspace negthinspace \
    null noindent centering hline bigm Bigm biggm Biggm Biggl Biggr middle \
    mathopen mathclose mathbin mathrel mathord mathstrut strut displaylimits \
    scriptscriptstyle allowbreak allowdisplaybreaks smallskip medskip bigskip \
    small footnotesize normalsize par relax protect boldmath IEEEnonumber \
    IEEEyesnumber IEEEyessubnumber toprule midrule bottomrule";

/// TeX commands that only make space.
pub(super) fn spaces(name: &str) -> bool {
    matches!(name, "quad" | "qquad" | "enspace" | "enskip" | "hfil" | "hfill")
}

/// TeX commands that say nothing, with so many arguments.
pub(super) fn dropped(name: &str) -> Option<u8> {
    Some(match name {
        "label" | "subsubsection" | "hspace" | "vspace" | "phantom" | "hphantom" | "vphantom"
        | "ref" | "eqref" | "cite" | "index" | "footnote" | "color" | "section" | "subsection"
        | "paragraph" | "caption" | "mspace" | "cline" | "usepackage" | "documentclass" => 1,
        "setlength" | "addtolength" | "rule" | "setcounter" => 2,
        _ => return None,
    })
}

/// TeX commands that only say how their last argument is set: how many stand before it.
pub(super) fn sets_last(name: &str) -> Option<u8> {
    Some(match name {
        "mathop" | "ensuremath" | "boxed" | "fbox" | "smash" | "mathclap" | "mathrlap"
        | "mathllap" | "displaylines" | "mathchoice" => 0,
        "textcolor" | "overset" | "colorbox" => 1,
        "IEEEeqnarraymulticol" | "multicolumn" => 2,
        _ => return None,
    })
}

/// Greek letters and a few others with their TeX commands, the usual one first.
const LETTERS: &[(&str, &str)] = &[
    ("alpha", "α"),
    ("beta", "β"),
    ("gamma", "γ"),
    ("delta", "δ"),
    ("epsilon", "ε"),
    ("varepsilon", "ε"),
    ("zeta", "ζ"),
    ("eta", "η"),
    ("theta", "θ"),
    ("vartheta", "θ"),
    ("iota", "ι"),
    ("kappa", "κ"),
    ("lambda", "λ"),
    ("mu", "μ"),
    ("nu", "ν"),
    ("xi", "ξ"),
    ("pi", "π"),
    ("rho", "ρ"),
    ("varrho", "ρ"),
    ("sigma", "σ"),
    ("tau", "τ"),
    ("upsilon", "υ"),
    ("phi", "φ"),
    ("varphi", "φ"),
    ("chi", "χ"),
    ("psi", "ψ"),
    ("omega", "ω"),
    ("Gamma", "Γ"),
    ("Delta", "Δ"),
    ("Theta", "Θ"),
    ("Lambda", "Λ"),
    ("Xi", "Ξ"),
    ("Phi", "Φ"),
    ("Psi", "Ψ"),
    ("Omega", "Ω"),
    ("ell", "ℓ"),
    ("imath", "ı"),
    ("jmath", "ȷ"),
    ("prime", "'"),
    ("top", "⊤"),
    ("intercal", "⊤"),
];

/// A letter that stands for a TeX command, as a name.
pub(super) fn letter(name: &str) -> Option<&'static str> {
    LETTERS.iter().find(|(command, _)| *command == name).map(|(_, letter)| *letter)
}

/// The TeX command of a letter, without the backslash.
pub(crate) fn letter_command(letter: &str) -> Option<&'static str> {
    LETTERS.iter().find(|(_, known)| *known == letter).map(|(command, _)| *command)
}

/// Small raised and lowered characters with the plain ones they stand for.
pub(super) fn small(c: char) -> Option<(bool, char)> {
    const LOWERED: &str = "₀0₁1₂2₃3₄4₅5₆6₇7₈8₉9ₐaₑeₕhᵢiⱼjₖkₗlₘmₙnₒoₚpᵣrₛsₜtᵤuᵥvₓx₊+₋-";
    const RAISED: &str = "⁰0¹1²2³3⁴4⁵5⁶6⁷7⁸8⁹9⁺+⁻-ⁿnⁱi";
    let find = |table: &str| {
        let mut pairs = table.chars();
        while let (Some(from), Some(to)) = (pairs.next(), pairs.next()) {
            if from == c {
                return Some(to);
            }
        }
        None
    };
    find(LOWERED).map(|to| (false, to)).or_else(|| find(RAISED).map(|to| (true, to)))
}
