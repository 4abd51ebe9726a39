//! Places of the stops on the map: the given points (latitude and longitude by an equirectangular
//! projection, see [`crate::geo`]), or places computed from the distances by
//! classical scaling (Torgerson, Psychometrika 17, 1952).
//!
//! With D the symmetrised distances and J = I − 𝟙𝟙ᵀ/n, the two leading eigenvectors of
//! B = −½ J D² J, each times the root of its eigenvalue, are the coordinates. They are found by
//! power iteration from a fixed start with a fixed number of steps, on B + σI with σ making it
//! positive semidefinite, so that every machine computes the same bits.

use crate::geo::project;
use crate::instance::Instance;
use crate::number::Number;
use crate::pace::{Pace, Slices};

/// Places of the stops in the order of `V`.
#[derive(Debug, Clone, PartialEq)]
pub struct Layout {
    /// Places in the unit square, aspect ratio kept; x grows to the right, y upwards.
    pub places: Vec<(f64, f64)>,
    /// Whether they are computed from the distances instead of given.
    pub computed: bool,
}

/// Whether an instance's stops have places: given, or to be computed from distances.
#[must_use]
pub fn has_layout(instance: &Instance) -> bool {
    instance.points.is_some() || !instance.matrix().is_empty()
}

/// The places of an instance's stops; none when it is no round trip. O(n²) a step of the
/// iteration, with fewer steps above 300 stops.
#[must_use]
pub fn layout(instance: &Instance) -> Layout {
    Slices::whole(|pace| layout_in_slices(instance, pace))
}

/// As [`layout()`], in the slices of a pace.
pub async fn layout_in_slices(instance: &Instance, pace: Pace) -> Layout {
    if let Some(points) = &instance.points {
        let places =
            if points.geographic { project(&points.places) } else { points.places.clone() };
        return Layout { places: fit(&places), computed: false };
    }
    let matrix = instance.matrix_in_slices(&pace).await;
    if matrix.is_empty() {
        return Layout { places: Vec::new(), computed: true };
    }
    let n = instance.stops().len();
    let distances = symmetrised(&matrix, n, &pace).await;
    Layout { places: fit(&scaling(distances, n, &pace).await), computed: true }
}

/// Moves and scales places into the unit square, the shorter side in the middle. O(n).
fn fit(places: &[(f64, f64)]) -> Vec<(f64, f64)> {
    let range = |pick: fn(&(f64, f64)) -> f64| {
        let mut range = (f64::INFINITY, f64::NEG_INFINITY);
        for value in places.iter().map(pick) {
            if value < range.0 {
                range.0 = value;
            }
            if value > range.1 {
                range.1 = value;
            }
        }
        range
    };
    let (across, along) = (range(|place| place.0), range(|place| place.1));
    let (width, height) = (across.1 - across.0, along.1 - along.0);
    let size = if width > height { width } else { height };
    let onto = |value: f64, range: (f64, f64)| {
        if size > 0.0 { 0.5 + (value - range.0 - (range.1 - range.0) * 0.5) / size } else { 0.5 }
    };
    places.iter().map(|&(x, y)| (onto(x, across), onto(y, along))).collect()
}

/// Means of both directions; a pair without drive gets the largest distance. O(n²).
async fn symmetrised(matrix: &[Option<&Number>], n: usize, pace: &Pace) -> Vec<f64> {
    let float = |number: &Number| number.to_f64().value() + 0.0;
    let mut distances = vec![f64::NAN; n * n];
    let mut most = 0.0;
    for i in 0..n {
        pace.spend(8 * n).await;
        for j in 0..n {
            let value = match (matrix[i * n + j], matrix[j * n + i]) {
                (Some(there), Some(back)) => (float(there) + float(back)) * 0.5,
                (Some(one), None) | (None, Some(one)) => float(one),
                (None, None) => continue,
            };
            let value = if value > 0.0 { value } else { 0.0 };
            if value > most {
                most = value;
            }
            distances[i * n + j] = value;
        }
    }
    for i in 0..n {
        for j in 0..n {
            if i == j {
                distances[i * n + j] = 0.0;
            } else if distances[i * n + j].is_nan() {
                distances[i * n + j] = most;
            }
        }
    }
    let scale = if most > 0.0 { 1.0 / most } else { 1.0 };
    distances.iter().map(|value| value * scale).collect()
}

/// Classical scaling to two dimensions.
async fn scaling(distances: Vec<f64>, n: usize, pace: &Pace) -> Vec<(f64, f64)> {
    let steps = if n <= 300 { 300 } else { 90_000 * 300 / (n * n) + 20 };
    let mut b = centred(distances, n);
    let (leading, _) = power(&b, (n, steps), 0.0, pace).await;
    let (lowest, _) = power(&b, (n, steps), -leading, pace).await;
    let sigma = [leading, lowest].into_iter().fold(
        0.0,
        |most, value| {
            if -value > most { -value } else { most }
        },
    );
    let first = axis(&mut b, (n, steps), sigma, pace).await;
    let second = axis(&mut b, (n, steps), sigma, pace).await;
    first.into_iter().zip(second).collect()
}

/// B = −½ J D² J. O(n²).
fn centred(mut d: Vec<f64>, n: usize) -> Vec<f64> {
    for value in &mut d {
        *value = -0.5 * *value * *value;
    }
    let size = n as f64;
    let means: Vec<f64> =
        (0..n).map(|i| d[i * n..(i + 1) * n].iter().sum::<f64>() / size).collect();
    let mean = means.iter().sum::<f64>() / size;
    for i in 0..n {
        for j in 0..n {
            d[i * n + j] += mean - means[i] - means[j];
        }
    }
    d
}

/// The eigenvalue of B for the eigenvalue of B + σI of largest size, and a unit eigenvector.
async fn power(b: &[f64], (n, steps): (usize, usize), sigma: f64, pace: &Pace) -> (f64, Vec<f64>) {
    let mut v: Vec<f64> = (0..n).map(|i| 1.0 + ((i * 7 + 3) % 11) as f64).collect();
    let mut next = vec![0.0; n];
    let mut value = 0.0;
    normalise(&mut v);
    for _ in 0..steps {
        value = 0.0;
        pace.spend(n * n / 8).await;
        for i in 0..n {
            let row = &b[i * n..(i + 1) * n];
            let product: f64 = row.iter().zip(&v).map(|(entry, x)| entry * x).sum();
            value += product * v[i];
            next[i] = product + sigma * v[i];
        }
        if !normalise(&mut next) {
            break;
        }
        std::mem::swap(&mut v, &mut next);
    }
    (value, v)
}

/// Scales to length one; false when the length is not a positive number.
fn normalise(v: &mut [f64]) -> bool {
    let length = v.iter().map(|x| x * x).sum::<f64>().sqrt();
    let fit = length > 1e-300 && length.is_finite();
    if fit {
        for x in v {
            *x /= length;
        }
    }
    fit
}

/// The leading axis of B, which is then taken out of B. The coordinate of largest size is made
/// positive.
async fn axis(b: &mut [f64], (n, steps): (usize, usize), sigma: f64, pace: &Pace) -> Vec<f64> {
    let (value, v) = power(b, (n, steps), sigma, pace).await;
    for i in 0..n {
        for j in 0..n {
            b[i * n + j] -= (value + sigma) * v[i] * v[j];
        }
    }
    let mut largest = 0;
    for (i, x) in v.iter().enumerate() {
        if x.abs() > v[largest].abs() + 1e-9 {
            largest = i;
        }
    }
    let scale = if value > 1e-9 { value.sqrt() } else { 0.0 };
    let sign = if v.get(largest).is_some_and(|x| *x < 0.0) { -1.0 } else { 1.0 };
    v.iter().map(|x| sign * scale * x).collect()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::read;

    fn distance(a: (f64, f64), b: (f64, f64)) -> f64 {
        ((a.0 - b.0) * (a.0 - b.0) + (a.1 - b.1) * (a.1 - b.1)).sqrt()
    }

    #[test]
    fn plane_points_are_found_again() {
        let text = "0 0\n8 0\n8 3\n0 5\n2 2\n7 1\n3 4\n1 1\n6 2";
        let given = read(text, None).instance.unwrap();
        let mut hidden = given.clone();
        hidden.points = None;
        let (given, computed) = (layout(&given), layout(&hidden));
        assert!(!given.computed && computed.computed);
        let scale = distance(computed.places[0], computed.places[1])
            / distance(given.places[0], given.places[1]);
        for i in 0..9 {
            for j in 0..9 {
                let there = distance(given.places[i], given.places[j]) * scale;
                assert!((distance(computed.places[i], computed.places[j]) - there).abs() < 0.01);
            }
        }
    }

    #[test]
    fn places_are_in_the_unit_square() {
        for text in ["0 5 9\n2 0 7\n4 1 0", "0 0\n0 0", "0 1\n1 0", "0 -1\n-5 0", "- 3\n- -"] {
            let layout = layout(&read(text, Some(crate::Reader::Matrix)).instance.unwrap());
            for (x, y) in layout.places {
                assert!((-1e-9..=1.0 + 1e-9).contains(&x) && (-1e-9..=1.0 + 1e-9).contains(&y));
            }
        }
    }

    #[test]
    fn degrees_are_projected() {
        let text = "stop lat lon\na 60 0\nb 60 4\nc 61 0";
        let layout = layout(&read(text, None).instance.unwrap());
        let ratio = distance(layout.places[0], layout.places[1])
            / distance(layout.places[0], layout.places[2]);
        // cos 60.5° = 0.492424.
        assert!((ratio - 4.0 * 0.492_424).abs() < 1e-5 && !layout.computed, "{ratio}");
    }

    #[test]
    fn the_aspect_ratio_is_kept() {
        assert_eq!(fit(&[(0.0, 0.0), (4.0, 2.0)]), [(0.0, 0.25), (1.0, 0.75)]);
        assert_eq!(fit(&[(3.0, 3.0)]), [(0.5, 0.5)]);
        assert!(fit(&[]).is_empty());
    }
}
