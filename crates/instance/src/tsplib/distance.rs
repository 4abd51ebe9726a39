//! The distance functions of TSPLIB. Results are whole numbers, computed in `f64` in the order in
//! which the library's description writes them, with `libm` for the trigonometric ones.

/// A rule that gives the distance of two points.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Rule {
    /// Euclidean, rounded to the nearest.
    Euclidean,
    /// Euclidean, rounded up.
    Ceiling,
    /// Pseudo-Euclidean (the ATT instances).
    Att,
    /// On the sphere, from degrees and minutes.
    Geo,
}

const RULES: [(&str, Rule); 4] = [
    ("EUC_2D", Rule::Euclidean),
    ("CEIL_2D", Rule::Ceiling),
    ("ATT", Rule::Att),
    ("GEO", Rule::Geo),
];

/// The library's value of π: others give other distances.
#[expect(clippy::approx_constant, reason = "the library's own value")]
const PI: f64 = 3.141592;
/// The library's radius of the earth in kilometres.
const RADIUS: f64 = 6378.388;

impl Rule {
    pub(crate) fn from_name(name: &str) -> Option<Self> {
        RULES.iter().find(|(known, _)| *known == name).map(|(_, rule)| *rule)
    }

    pub(crate) fn name(self) -> &'static str {
        RULES.iter().find(|(_, rule)| *rule == self).map_or("", |(name, _)| name)
    }

    pub(crate) fn names() -> String {
        RULES.map(|(name, _)| name).join(", ")
    }

    /// The distance of two different points.
    pub(crate) fn between(self, from: (f64, f64), to: (f64, f64)) -> i64 {
        let (dx, dy) = (from.0 - to.0, from.1 - to.1);
        let squared = dx * dx + dy * dy;
        match self {
            Self::Euclidean => whole(squared.sqrt() + 0.5),
            Self::Ceiling => whole(squared.sqrt().ceil()),
            Self::Att => {
                let distance = (squared / 10.0).sqrt();
                let rounded = (distance + 0.5).floor();
                whole(if rounded < distance { rounded + 1.0 } else { rounded })
            }
            Self::Geo => geographic(from, to),
        }
    }
}

/// The whole part; saturates far beyond any distance.
fn whole(value: f64) -> i64 {
    value as i64
}

/// Degrees and minutes, written `degrees.minutes`, as decimal degrees.
pub(crate) fn degrees(value: f64) -> f64 {
    let degrees = value.trunc();
    degrees + 5.0 * (value - degrees) / 3.0
}

fn geographic(from: (f64, f64), to: (f64, f64)) -> i64 {
    let radians = |value: f64| PI * degrees(value) / 180.0;
    let (from, to) = ((radians(from.0), radians(from.1)), (radians(to.0), radians(to.1)));
    let q1 = libm::cos(from.1 - to.1);
    let q2 = libm::cos(from.0 - to.0);
    let q3 = libm::cos(from.0 + to.0);
    whole(RADIUS * libm::acos(0.5 * ((1.0 + q1) * q2 - (1.0 - q1) * q3)) + 1.0)
}
