//! Seeded mutations: pieces cut, doubled, exchanged, put in from a dictionary or another text.

/// A small generator (Knuth's 64-bit linear congruence), so that a case is known by its number.
#[derive(Debug, Clone)]
pub struct Draw(u64);

impl Draw {
    /// A generator of its own for each case of each target.
    #[must_use]
    pub fn new(target: &str, case: u64) -> Self {
        let seed = target.bytes().fold(case, |sum, byte| sum.wrapping_mul(31) + u64::from(byte));
        let mut draw = Self(seed);
        draw.below(2);
        draw
    }

    /// A number below `limit`; 0 where that is 0.
    pub fn below(&mut self, limit: usize) -> usize {
        self.0 =
            self.0.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695_040_888_963_407);
        let high = usize::try_from(self.0 >> 33).unwrap_or(0);
        if limit == 0 { 0 } else { high % limit }
    }
}

/// Pieces on which readers may stumble.
const PIECES: &[&str] = &[
    "",
    "\n",
    "\n\n",
    "\t",
    " ",
    "  ",
    "\r\n",
    "\u{0}",
    "\u{feff}",
    "é",
    "𝒳",
    "−",
    "-",
    "–",
    "Σ_{i ∈ V} ",
    "Σ_{i=1}^{n} ",
    "\\sum_{",
    "∀ i ∈ V",
    " ∀ S ⊂ V : |S| ≥ 2",
    "∈",
    "⊆",
    "≤",
    "≥ 0",
    "= 1",
    "{0,1}",
    "{1..",
    "..9999999}",
    "^{",
    "_{",
    "}",
    "{",
    "(",
    ")",
    "((((((((",
    "|",
    "⌊",
    "⌈",
    "max(",
    "min_{",
    " ⟹ ",
    "if ",
    " then ",
    "=>",
    " x_i y_i ",
    "|x_i|",
    "x_i^2",
    "\\frac{",
    "\\begin{align}",
    "\\end{align}",
    "\\\\",
    "&",
    "\\text{",
    "\\tag{",
    "data\n",
    "definitions\n",
    "minimise\n",
    "subject to\n",
    "δ(S)",
    "x(A)",
    "∞",
    "1e400",
    "1e-400",
    "999999999999999999999",
    "0.000001",
    "1,5",
    "1.000,5",
    "NaN",
    "inf",
    "-0",
    "0x1F",
    "%",
    "#",
    ";",
    ":",
    ",",
    "\"",
    "'''",
    "[[rival]]\n",
    "[run]\n",
    "nodes = -1\n",
    "from = \"atsp/labels\"\n",
    "= ",
    "#s1.",
    "EOF\n",
    "NODE_COORD_SECTION\n",
    "EDGE_WEIGHT_FORMAT: UPPER_ROW\n",
    "DIMENSION: 99999\n",
    "RANGES\n",
    "BOUNDS\n UP BND x -1\n",
    "MARKER",
    "ROWS\n N cost\n",
    "ENDATA\n",
    "lat\tlon\n",
    "from,to,minutes\n",
    "A→B",
    "/ 0",
    "mod 2 = 1",
    "clique in E",
    " odd",
    "ℤ_+",
    "ℝ",
];

/// A text made of one of the seeds (and perhaps a second) by a few changes.
#[must_use]
pub fn mutated(seeds: &[String], draw: &mut Draw) -> Vec<u8> {
    let mut text: Vec<char> = pick(seeds, draw).chars().collect();
    for _ in 0..=draw.below(6) {
        change(&mut text, seeds, draw);
    }
    text.truncate(20_000);
    let mut bytes = text.into_iter().collect::<String>().into_bytes();
    if draw.below(16) == 0 && !bytes.is_empty() {
        let at = draw.below(bytes.len());
        bytes[at] = u8::try_from(draw.below(256)).unwrap_or(0);
    }
    bytes
}

fn pick<'s>(seeds: &'s [String], draw: &mut Draw) -> &'s str {
    seeds.get(draw.below(seeds.len())).map_or("", String::as_str)
}

fn change(text: &mut Vec<char>, seeds: &[String], draw: &mut Draw) {
    let at = draw.below(text.len() + 1);
    let longest = if draw.below(8) == 0 { 400 } else { 12 };
    let end = (at + draw.below(longest)).min(text.len());
    match draw.below(7) {
        0 => {
            text.drain(at..end);
        }
        1 => {
            let piece: Vec<char> = text[at..end].to_vec();
            let times = [1, 1, 2, 5, 200][draw.below(5)];
            let many: Vec<char> = piece.iter().copied().cycle().take(piece.len() * times).collect();
            text.splice(at..at, many);
        }
        2 | 3 => {
            let piece = PIECES[draw.below(PIECES.len())];
            text.splice(at..at, piece.chars());
        }
        4 => {
            let piece = PIECES[draw.below(PIECES.len())];
            text.splice(at..end, piece.chars());
        }
        5 => {
            let other: Vec<char> = pick(seeds, draw).chars().collect();
            let from = draw.below(other.len() + 1);
            let to = (from + draw.below(longest * 4)).min(other.len());
            text.splice(at..end, other[from..to].iter().copied());
        }
        _ => {
            let to = draw.below(text.len() + 1 - (end - at));
            let piece: Vec<char> = text.drain(at..end).collect();
            text.splice(to..to, piece);
        }
    }
}
