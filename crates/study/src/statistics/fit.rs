//! A straight line by least squares.

use super::count;

/// y = intercept + slope · x.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(crate) struct Line {
    pub(crate) intercept: f64,
    pub(crate) slope: f64,
    /// The share of the variance that it explains.
    pub(crate) r2: f64,
}

impl Line {
    pub(crate) fn at(self, x: f64) -> f64 {
        self.intercept + self.slope * x
    }
}

/// The line through points; `None` where they have fewer than two places.
pub(crate) fn line(points: &[(f64, f64)]) -> Option<Line> {
    let n = count(points.len());
    let mean = |of: fn(&(f64, f64)) -> f64| points.iter().map(of).sum::<f64>() / n;
    let (x, y) = (mean(|point| point.0), mean(|point| point.1));
    let sum = |of: &dyn Fn(&(f64, f64)) -> f64| points.iter().map(of).sum::<f64>();
    let xx = sum(&|point| (point.0 - x) * (point.0 - x));
    let xy = sum(&|point| (point.0 - x) * (point.1 - y));
    let yy = sum(&|point| (point.1 - y) * (point.1 - y));
    // Not above 0 where there are no points either.
    if xx.is_nan() || xx <= 0.0 {
        return None;
    }
    let slope = xy / xx;
    let r2 = if yy > 0.0 { slope * xy / yy } else { 1.0 };
    Some(Line { intercept: y - slope * x, slope, r2 })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_line_is_found_again_and_points_in_one_place_have_none() {
        let points: Vec<(f64, f64)> =
            (0..9_u32).map(|i| (f64::from(i), 3.0 - 0.5 * f64::from(i))).collect();
        let found = line(&points).unwrap_or(Line { intercept: 0.0, slope: 0.0, r2: 0.0 });
        assert!((found.intercept - 3.0).abs() < 1e-12 && (found.slope + 0.5).abs() < 1e-12);
        assert!((found.r2 - 1.0).abs() < 1e-12 && (found.at(20.0) + 7.0).abs() < 1e-9);
        assert_eq!(line(&[(1.0, 2.0), (1.0, 3.0)]), None);
        assert_eq!(line(&[]), None);
    }

    /// Anscombe's first set (Anscombe 1973, American Statistician 27): y = 3.00 + 0.500 x, r² = 0.67.
    #[test]
    fn anscombes_first_set() {
        let x = [10.0, 8.0, 13.0, 9.0, 11.0, 14.0, 6.0, 4.0, 12.0, 7.0, 5.0];
        let y = [8.04, 6.95, 7.58, 8.81, 8.33, 9.96, 7.24, 4.26, 10.84, 4.82, 5.68];
        let points: Vec<(f64, f64)> = x.into_iter().zip(y).collect();
        let found = line(&points).unwrap_or(Line { intercept: 0.0, slope: 0.0, r2: 0.0 });
        assert!((found.intercept - 3.0).abs() < 5e-3, "{found:?}");
        assert!((found.slope - 0.5).abs() < 5e-4, "{found:?}");
        assert!((found.r2 - 0.67).abs() < 5e-3, "{found:?}");
    }
}
