//! Names beside their stops: each name tries places around its stop, near ones first, and takes
//! the first that covers no other stop, no other name and stays in the frame; if there is one, a
//! place that no line runs through. Stops with many neighbours choose first. A name that finds no
//! place is left out; the page then shows it on demand only.

use crate::map::{Frame, Point};

/// Distances from the stop at which names are tried, in pixels beyond its radius.
const RINGS: [f64; 4] = [2.0, 9.0, 18.0, 30.0];

/// Directions in the order of preference: right, left, above, below, then the diagonals.
const DIRECTIONS: [Point; 8] = [
    (1.0, 0.0),
    (-1.0, 0.0),
    (0.0, -1.0),
    (0.0, 1.0),
    (0.75, -0.66),
    (0.75, 0.66),
    (-0.75, -0.66),
    (-0.75, 0.66),
];

/// A stop that wants its name shown.
#[derive(Debug, Clone, Copy)]
pub struct Wish<'a> {
    /// The name.
    pub text: &'a str,
    /// The stop.
    pub at: Point,
    /// The radius of its mark.
    pub radius: f64,
}

/// A name in its place.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Placed {
    /// Left end of the text.
    pub x: f64,
    /// Baseline of the text.
    pub y: f64,
    /// A line that ties a distant name to its stop.
    pub leader: Option<(Point, Point)>,
}

#[derive(Debug, Clone, Copy)]
struct Space {
    left: f64,
    top: f64,
    right: f64,
    bottom: f64,
}

impl Space {
    fn around(at: Point, radius: f64) -> Self {
        Self {
            left: at.0 - radius,
            top: at.1 - radius,
            right: at.0 + radius,
            bottom: at.1 + radius,
        }
    }

    fn meets(&self, other: &Self) -> bool {
        self.left < other.right
            && other.left < self.right
            && self.top < other.bottom
            && other.top < self.bottom
    }

    fn holds(&self, at: Point) -> bool {
        self.left <= at.0 && at.0 <= self.right && self.top <= at.1 && at.1 <= self.bottom
    }

    fn is_inside(&self, frame: Frame) -> bool {
        self.left >= 0.0
            && self.top >= 0.0
            && self.right <= frame.width
            && self.bottom <= frame.height
    }
}

/// Places names of a font size in pixels; `lines` are points that lines run through, a few pixels
/// apart. O(n · (n + points)) for n stops.
#[must_use]
pub fn place(wishes: &[Wish<'_>], lines: &[Point], frame: Frame, size: f64) -> Vec<Option<Placed>> {
    let marks: Vec<Space> =
        wishes.iter().map(|wish| Space::around(wish.at, wish.radius + 1.0)).collect();
    let mut taken: Vec<Space> = Vec::with_capacity(wishes.len());
    let mut placed = vec![None; wishes.len()];
    for index in by_crowding(wishes, size) {
        let fits = |space: &Space| {
            space.is_inside(frame)
                && !marks.iter().any(|mark| mark.meets(space))
                && !taken.iter().any(|other| other.meets(space))
        };
        let clear = |space: &Space| fits(space) && !lines.iter().any(|&at| space.holds(at));
        let found = first_free(&wishes[index], size, clear);
        let found = found.or_else(|| first_free(&wishes[index], size, fits));
        let Some((space, leader)) = found else { continue };
        taken.push(space);
        placed[index] = Some(Placed { x: space.left + 1.0, y: space.bottom - 0.25 * size, leader });
    }
    placed
}

fn first_free(
    wish: &Wish<'_>,
    size: f64,
    fits: impl Fn(&Space) -> bool,
) -> Option<(Space, Option<(Point, Point)>)> {
    let (half_width, half_height) = (text_width(wish.text, size) / 2.0 + 1.0, size * 0.56);
    for ring in RINGS {
        for (across, along) in DIRECTIONS {
            let reach = wish.radius + ring;
            let x = wish.at.0 + across * reach + across.signum_or_zero() * half_width;
            let y = wish.at.1 + along * reach + along.signum_or_zero() * half_height;
            let space = Space {
                left: x - half_width,
                top: y - half_height,
                right: x + half_width,
                bottom: y + half_height,
            };
            if fits(&space) {
                let end = (wish.at.0 + across * reach, wish.at.1 + along * reach);
                return Some((space, (ring > RINGS[1]).then_some((wish.at, end))));
            }
        }
    }
    None
}

trait SignOrZero {
    fn signum_or_zero(self) -> f64;
}

impl SignOrZero for f64 {
    fn signum_or_zero(self) -> f64 {
        if self == 0.0 { 0.0 } else { self.signum() }
    }
}

/// Places by falling number of stops within six font sizes, then by place.
fn by_crowding(wishes: &[Wish<'_>], size: f64) -> Vec<usize> {
    let reach = 6.0 * size;
    let crowd = |wish: &Wish<'_>| {
        let near = |other: &&Wish<'_>| {
            let (dx, dy) = (other.at.0 - wish.at.0, other.at.1 - wish.at.1);
            dx * dx + dy * dy < reach * reach
        };
        wishes.iter().filter(near).count()
    };
    let crowds: Vec<usize> = wishes.iter().map(crowd).collect();
    let mut order: Vec<usize> = (0..wishes.len()).collect();
    order.sort_by(|&a, &b| crowds[b].cmp(&crowds[a]).then(a.cmp(&b)));
    order
}

/// Texts beside marks on a line: each tries the right of its mark, then the left, and is left out
/// where it would cover another text, another mark or the end of the line. Returns left ends.
#[must_use]
pub fn along(wishes: &[(f64, &str)], marks: &[f64], width: f64, size: f64) -> Vec<Option<f64>> {
    let mut taken: Vec<(f64, f64)> = Vec::with_capacity(wishes.len());
    let mut placed = Vec::with_capacity(wishes.len());
    for &(at, text) in wishes {
        let length = text_width(text, size);
        let free = |left: &f64| {
            let right = left + length;
            let clear = |mark: &f64| right + 2.0 < *mark || *mark < left - 2.0;
            *left >= 0.0
                && right <= width
                && marks.iter().all(clear)
                && taken.iter().all(|&(start, end)| right + 6.0 < start || end + 6.0 < *left)
        };
        let found = [at + 5.0, at - 5.0 - length].into_iter().find(|left| free(left));
        taken.extend(found.map(|left| (left, left + length)));
        placed.push(found);
    }
    placed
}

/// The width of a text in a sans-serif face, estimated on the wide side.
#[must_use]
pub fn text_width(text: &str, size: f64) -> f64 {
    let units: f64 = text
        .chars()
        .map(|letter| match letter {
            'i' | 'l' | 'j' | '.' | ',' | ' ' | '\'' | '|' | 'I' | 't' | 'f' => 0.36,
            'm' | 'w' | 'M' | 'W' | '@' | '→' => 0.96,
            'A'..='Z' => 0.72,
            letter if letter > '\u{2e80}' => 1.0,
            _ => 0.62,
        })
        .sum();
    units * size
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    const FRAME: Frame = Frame { width: 400.0, height: 300.0, margin: 20.0 };

    fn space(text: &str, placed: &Placed, size: f64) -> Space {
        Space {
            left: placed.x,
            top: placed.y - size * 0.8,
            right: placed.x + text_width(text, size),
            bottom: placed.y + size * 0.2,
        }
    }

    #[test]
    fn a_lone_name_stands_to_the_right() {
        let wish = Wish { text: "Ash", at: (100.0, 100.0), radius: 3.0 };
        let placed = place(&[wish], &[], FRAME, 11.0)[0].unwrap();
        assert!(placed.x > 103.0 && placed.leader.is_none());
        assert!((placed.y - 100.0).abs() < 6.0);
    }

    #[test]
    fn a_name_keeps_off_a_line_where_it_can() {
        let wish = Wish { text: "Ash", at: (100.0, 100.0), radius: 3.0 };
        let line: Vec<Point> = (0..40).map(|step| (100.0 + f64::from(step) * 4.0, 100.0)).collect();
        let placed = place(&[wish], &line, FRAME, 11.0)[0].unwrap();
        assert!(placed.x + text_width("Ash", 11.0) < 100.0);
        let everywhere: Vec<Point> =
            (0..10_000).map(|k| (f64::from(k % 100) * 4.0, f64::from(k / 100) * 3.0)).collect();
        assert!(place(&[wish], &everywhere, FRAME, 11.0)[0].is_some());
    }

    #[test]
    fn at_the_right_edge_it_turns_to_the_left() {
        let wish = Wish { text: "Birch", at: (396.0, 100.0), radius: 3.0 };
        let placed = place(&[wish], &[], FRAME, 11.0)[0].unwrap();
        assert!(placed.x + text_width("Birch", 11.0) < 394.0);
    }

    #[test]
    fn along_a_line_texts_turn_away_from_marks_and_ends() {
        let wishes = [(10.0, "root 10"), (30.0, "now 12"), (395.0, "best")];
        let placed = along(&wishes, &[10.0, 30.0, 395.0], 400.0, 11.0);
        assert_eq!(placed[1], Some(35.0));
        assert!(placed[0].is_none(), "there is no room between the two marks");
        assert!(placed[2].unwrap() + text_width("best", 11.0) < 395.0);
    }

    #[test]
    fn a_crowd_leaves_names_out_rather_than_cover() {
        let wishes = [Wish { text: "Crossroads", at: (200.0, 150.0), radius: 3.0 }; 60];
        let placed = place(&wishes, &[], FRAME, 11.0);
        assert!(placed.iter().any(Option::is_some) && placed.iter().any(Option::is_none));
    }

    proptest! {
        #[test]
        fn names_cover_neither_names_nor_stops(
            places in proptest::collection::vec((0.0f64..400.0, 0.0f64..300.0), 1..40),
        ) {
            let wishes: Vec<Wish<'_>> =
                places.iter().map(|&at| Wish { text: "Maple", at, radius: 3.0 }).collect();
            let placed = place(&wishes, &[], FRAME, 11.0);
            let spaces: Vec<Space> = placed.iter().flatten().map(|p| space("Maple", p, 11.0)).collect();
            for (index, one) in spaces.iter().enumerate() {
                prop_assert!(!spaces[index + 1..].iter().any(|other| other.meets(one)));
                prop_assert!(!wishes.iter().any(|wish| Space::around(wish.at, 3.0).meets(one)));
            }
        }
    }
}
