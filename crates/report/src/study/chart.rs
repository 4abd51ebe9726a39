//! Charts: one frame and one key for lines of several rivals. Lines differ by their dashes, for the
//! drawings are of one colour.

use super::figure::Figure;

/// Dashes, rival by rival.
const DASHES: [&str; 6] = ["none", "9 4", "2 3", "9 3 2 3", "5 3", "14 4"];

/// The frame of a chart, in pixels: it is as wide as a phone shows.
const LEFT: usize = 44;
const RIGHT: usize = 280;
const TOP: usize = 28;
const BOTTOM: usize = 188;
const WIDTH: usize = 350;

/// A chart: values from 0 to 1 across and up.
#[derive(Debug)]
pub(super) struct Chart(pub(super) Figure);

impl Chart {
    /// An empty chart, with a word for each axis and the rivals' key.
    pub(super) fn new(label: String, across: &str, up: &str, rivals: &[&str]) -> Self {
        let height = (BOTTOM + 44).max(TOP + rivals.len() * 18);
        let mut figure = Figure { label, size: (WIDTH, height), ..Figure::default() };
        figure.labels.push((0, 14, "start", up.to_owned()));
        figure.labels.push((
            usize::midpoint(LEFT, RIGHT),
            BOTTOM + 36,
            "middle",
            across.to_owned(),
        ));
        for (place, rival) in rivals.iter().enumerate() {
            let y = TOP + place * 18;
            figure.lines.push(([RIGHT + 16, y, RIGHT + 44, y], dashes(place)));
            figure.labels.push((RIGHT + 50, y + 4, "start", (*rival).to_owned()));
        }
        Self(figure)
    }

    /// A tick across with its words.
    pub(super) fn tick_across(&mut self, share: f64, words: String) {
        let (x, _) = at(share, 0.0);
        self.0.rules.push([x, BOTTOM, x, BOTTOM + 4]);
        self.0.labels.push((x, BOTTOM + 18, "middle", words));
    }

    /// A tick up, with a line across.
    pub(super) fn tick_up(&mut self, share: f64, words: String) {
        let (_, y) = at(0.0, share);
        self.0.rules.push([LEFT, y, RIGHT, y]);
        self.0.labels.push((LEFT - 6, y + 4, "end", words));
    }

    /// A rival's line through points.
    pub(super) fn line(&mut self, rival: usize, points: &[(f64, f64)]) {
        for pair in points.windows(2) {
            let ((x1, y1), (x2, y2)) = (at(pair[0].0, pair[0].1), at(pair[1].0, pair[1].1));
            self.0.lines.push(([x1, y1, x2, y2], dashes(rival)));
        }
    }

    /// A grey line between two points.
    pub(super) fn rule(&mut self, from: (f64, f64), to: (f64, f64)) {
        let ((x1, y1), (x2, y2)) = (at(from.0, from.1), at(to.0, to.1));
        self.0.rules.push([x1, y1, x2, y2]);
    }

    /// A mark at a point.
    pub(super) fn mark(&mut self, (across, up): (f64, f64), full: bool) {
        let (x, y) = at(across, up);
        self.0.marks.push((x, y, full));
    }
}

fn dashes(rival: usize) -> &'static str {
    DASHES[rival % DASHES.len()]
}

fn at(across: f64, up: f64) -> (usize, usize) {
    (LEFT + pixels(across, RIGHT - LEFT), BOTTOM - pixels(up, BOTTOM - TOP))
}

/// A share of a length in whole pixels; what lies outside stands at its ends.
pub(super) fn pixels(share: f64, length: usize) -> usize {
    let length_u32 = u32::try_from(length).unwrap_or(0);
    let wanted = share * f64::from(length_u32);
    (0..=length_u32)
        .take_while(|&at| f64::from(at) <= wanted + 0.5)
        .last()
        .map_or(0, |at| at as usize)
}

/// The binary logarithm of a number over 0, by squaring: the same on every machine, to a thousandth.
pub(super) fn log2(number: f64) -> f64 {
    let (mut x, mut whole) = (number, 0.0);
    while x >= 2.0 && whole < 1_100.0 {
        (x, whole) = (x / 2.0, whole + 1.0);
    }
    while x < 1.0 && x > 0.0 {
        (x, whole) = (x * 2.0, whole - 1.0);
    }
    let mut bit = 0.5;
    for _ in 0..12 {
        x *= x;
        if x >= 2.0 {
            (x, whole) = (x / 2.0, whole + bit);
        }
        bit /= 2.0;
    }
    whole
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn logarithms_are_those_of_powers_and_of_a_known_value() {
        assert_eq!([1.0, 2.0, 1024.0, 0.25].map(log2), [0.0, 1.0, 10.0, -2.0]);
        assert!((log2(10.0) - std::f64::consts::LOG2_10).abs() < 1e-3, "{}", log2(10.0));
        assert!(log2(f64::INFINITY) >= 1_100.0 && log2(0.0) == 0.0);
    }

    #[test]
    fn shares_beyond_the_ends_stand_at_them() {
        assert_eq!(
            [-1.0, 0.0, 0.5, 1.0, 7.0, f64::NAN].map(|share| pixels(share, 10)),
            [0, 0, 5, 10, 10, 0]
        );
    }
}
