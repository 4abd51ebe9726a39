//! Maps: places fitted to a frame, bent arcs with their arrow, convex hulls.

/// A point in pixels, y downwards.
pub type Point = (f64, f64);

/// A frame in pixels.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Frame {
    /// Width.
    pub width: f64,
    /// Height.
    pub height: f64,
    /// Room kept free at each side.
    pub margin: f64,
}

/// Fits places (y upwards) into a frame with one scale for both directions, centred.
#[must_use]
pub fn fit(places: &[Point], frame: Frame) -> Vec<Point> {
    let (left, right) = extent(places.iter().map(|place| place.0));
    let (bottom, top) = extent(places.iter().map(|place| place.1));
    let across = (frame.width - 2.0 * frame.margin) / positive(right - left);
    let along = (frame.height - 2.0 * frame.margin) / positive(top - bottom);
    let scale = if across < along { across } else { along };
    let scale = if right > left || top > bottom { scale } else { 0.0 };
    let (middle_x, middle_y) = ((left + right) / 2.0, (bottom + top) / 2.0);
    let at = |place: &Point| {
        (
            frame.width / 2.0 + (place.0 - middle_x) * scale,
            frame.height / 2.0 - (place.1 - middle_y) * scale,
        )
    };
    places.iter().map(at).collect()
}

fn extent(values: impl Iterator<Item = f64>) -> (f64, f64) {
    let mut extent: Option<(f64, f64)> = None;
    for value in values.filter(|value| value.is_finite()) {
        extent = Some(extent.map_or((value, value), |(low, high)| {
            (if value < low { value } else { low }, if value > high { value } else { high })
        }));
    }
    extent.unwrap_or((0.0, 0.0))
}

fn positive(value: f64) -> f64 {
    if value > 0.0 { value } else { f64::MIN_POSITIVE }
}

/// A quadratic curve from stop to stop that keeps to its right, so that the two directions of a
/// pair do not cover each other.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Curve {
    /// Start.
    pub from: Point,
    /// Control point.
    pub control: Point,
    /// End.
    pub to: Point,
}

impl Curve {
    /// The curve between two points; the bend is an eighth of their distance.
    #[must_use]
    pub fn between(from: Point, to: Point) -> Self {
        let (dx, dy) = (to.0 - from.0, to.1 - from.1);
        let control = ((from.0 + to.0) / 2.0 - dy / 8.0, (from.1 + to.1) / 2.0 + dx / 8.0);
        Self { from, control, to }
    }

    /// The point at a share of the way.
    #[must_use]
    pub fn at(&self, share: f64) -> Point {
        let rest = 1.0 - share;
        let mix =
            |a: f64, b: f64, c: f64| rest * rest * a + 2.0 * rest * share * b + share * share * c;
        (mix(self.from.0, self.control.0, self.to.0), mix(self.from.1, self.control.1, self.to.1))
    }

    /// Points on the curve about `step` pixels apart, its ends left out.
    #[must_use]
    pub fn points(&self, step: f64) -> Vec<Point> {
        let (dx, dy) = (self.to.0 - self.from.0, self.to.1 - self.from.1);
        let count = ((dx * dx + dy * dy).sqrt() / step) as u32;
        (1..count).map(|index| self.at(f64::from(index) / f64::from(count))).collect()
    }

    /// A small arrow just past the middle: its tip and its two ends. `None` on a curve too short
    /// to carry one.
    #[must_use]
    pub fn arrow(&self, size: f64) -> Option<[Point; 3]> {
        let (dx, dy) = (self.to.0 - self.from.0, self.to.1 - self.from.1);
        let length = (dx * dx + dy * dy).sqrt();
        if length < 4.0 * size {
            return None;
        }
        let (dx, dy) = (dx / length * size, dy / length * size);
        let middle = self.at(0.5);
        let tip = (middle.0 + dx, middle.1 + dy);
        let back = (middle.0 - 0.6 * dx, middle.1 - 0.6 * dy);
        Some([tip, (back.0 - 0.7 * dy, back.1 + 0.7 * dx), (back.0 + 0.7 * dy, back.1 - 0.7 * dx)])
    }
}

/// The convex hull, counter-clockwise in a frame with y upwards (Andrew 1979). O(n log n).
#[must_use]
pub fn hull(points: &[Point]) -> Vec<Point> {
    let mut sorted: Vec<Point> = points.to_vec();
    sorted.sort_by(|a, b| a.0.total_cmp(&b.0).then(a.1.total_cmp(&b.1)));
    sorted.dedup();
    if sorted.len() < 3 {
        return sorted;
    }
    let mut hull = chain(sorted.iter());
    let mut upper = chain(sorted.iter().rev());
    hull.pop();
    upper.pop();
    hull.append(&mut upper);
    hull
}

fn chain<'a>(points: impl Iterator<Item = &'a Point>) -> Vec<Point> {
    let mut chain: Vec<Point> = Vec::new();
    for &point in points {
        while let [.., a, b] = chain[..] {
            if turn(a, b, point) > 0.0 {
                break;
            }
            chain.pop();
        }
        chain.push(point);
    }
    chain
}

fn turn(a: Point, b: Point, c: Point) -> f64 {
    (b.0 - a.0) * (c.1 - a.1) - (b.1 - a.1) * (c.0 - a.0)
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    const FRAME: Frame = Frame { width: 200.0, height: 100.0, margin: 10.0 };

    #[test]
    fn places_keep_their_shape() {
        let placed = fit(&[(0.0, 0.0), (1.0, 0.0), (0.0, 1.0)], FRAME);
        assert_eq!(placed, vec![(60.0, 90.0), (140.0, 90.0), (60.0, 10.0)]);
    }

    #[test]
    fn a_single_place_stands_in_the_middle() {
        assert_eq!(fit(&[(7.0, 7.0)], FRAME), vec![(100.0, 50.0)]);
        assert!(fit(&[], FRAME).is_empty());
    }

    #[test]
    fn two_directions_bend_apart() {
        let there = Curve::between((0.0, 0.0), (80.0, 0.0));
        let back = Curve::between((80.0, 0.0), (0.0, 0.0));
        assert!(there.control.1 > 0.0 && back.control.1 < 0.0);
        assert_eq!(there.at(0.0), (0.0, 0.0));
        assert_eq!(there.at(1.0), (80.0, 0.0));
        assert!(
            there.arrow(4.0).is_some()
                && Curve::between((0.0, 0.0), (5.0, 0.0)).arrow(4.0).is_none()
        );
    }

    #[test]
    fn the_hull_of_a_square_leaves_its_inside_out() {
        let square = [(0.0, 0.0), (2.0, 0.0), (2.0, 2.0), (0.0, 2.0), (1.0, 1.0), (1.0, 0.0)];
        assert_eq!(hull(&square), vec![(0.0, 0.0), (2.0, 0.0), (2.0, 2.0), (0.0, 2.0)]);
        assert_eq!(hull(&[(1.0, 1.0), (1.0, 1.0)]), vec![(1.0, 1.0)]);
    }

    proptest! {
        #[test]
        fn every_point_is_in_its_hull(points in proptest::collection::vec((0i32..30, 0i32..30), 1..40)) {
            let points: Vec<Point> = points.iter().map(|&(x, y)| (f64::from(x), f64::from(y))).collect();
            let hull = hull(&points);
            if hull.len() >= 3 {
                for &point in &points {
                    for place in 0..hull.len() {
                        let next = hull[(place + 1) % hull.len()];
                        prop_assert!(turn(hull[place], next, point) >= 0.0);
                    }
                }
            }
        }

        #[test]
        fn everything_is_in_the_frame(points in proptest::collection::vec((-1e3f64..1e3, -1e3f64..1e3), 1..40)) {
            for (x, y) in fit(&points, FRAME) {
                prop_assert!((9.99..=190.01).contains(&x) && (9.99..=90.01).contains(&y));
            }
        }
    }
}
