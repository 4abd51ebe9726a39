//! The triangle inequality c_ij ≤ c_ik + c_kj over triples of stops, in scaled integers.

use dashu_int::{IBig, UBig, ops::Gcd};
use dashu_ratio::RBig;

use crate::number::number_text;
use crate::pace::Pace;
use crate::square::Square;

/// Up to this many stops every triple is looked at.
pub(crate) const EVERY_TRIPLE: usize = 300;
/// Beyond, this many triples are drawn.
pub(crate) const DRAWN: usize = 1_000_000;

/// Distances as multiples of 1 / `denominator`.
pub(crate) struct Scaled {
    pub(crate) n: usize,
    pub(crate) values: Vec<Option<i64>>,
    denominator: UBig,
}

impl Scaled {
    /// `None` when the numbers are too long for sums in 64 bits.
    pub(crate) async fn of(square: &Square, pace: &Pace) -> Option<Self> {
        let mut denominator = UBig::ONE;
        for number in square.cells.iter().flatten() {
            pace.spend(2).await;
            if !(&denominator % number.denominator()).is_zero() {
                let common = (&denominator).gcd(number.denominator());
                denominator = denominator / common * number.denominator();
            }
            u128::try_from(&denominator).ok()?;
        }
        let scale = |number: &RBig| {
            let factor = IBig::from(&denominator / number.denominator());
            let value = i64::try_from(number.numerator() * factor).ok()?;
            (value.unsigned_abs() < 1 << 60).then_some(value)
        };
        let mut values = Vec::with_capacity(square.cells.len());
        for cell in &square.cells {
            pace.spend(2).await;
            values.push(match cell {
                Some(number) => Some(scale(number)?),
                None => None,
            });
        }
        Some(Self { n: square.len(), values, denominator })
    }

    pub(crate) fn at(&self, i: usize, j: usize) -> Option<i64> {
        self.values[i * self.n + j]
    }

    /// A multiple as a number in words.
    pub(crate) fn text(&self, value: i64) -> String {
        number_text(&RBig::from_parts(IBig::from(value), self.denominator.clone()))
    }
}

/// How often the triangle inequality is broken.
#[derive(Debug, Default, PartialEq, Eq)]
pub(crate) struct Triangles {
    /// Triples of different stops that have all three drives.
    pub(crate) examined: usize,
    pub(crate) broken: usize,
    /// The excess and the stops from, by way of, to of the worst one.
    pub(crate) worst: Option<(i64, [usize; 3])>,
}

impl Triangles {
    /// Looks at every triple from `i` by way of `k`.
    fn look_by_way_of(&mut self, scaled: &Scaled, i: usize, k: usize) {
        let n = scaled.n;
        let Some(first) = scaled.at(i, k) else { return };
        let direct = &scaled.values[i * n..(i + 1) * n];
        let second = &scaled.values[k * n..(k + 1) * n];
        // The diagonal holds nothing, so i = j and k = j drop out.
        for (j, pair) in direct.iter().zip(second).enumerate() {
            if let (Some(direct), Some(second)) = pair {
                self.count(direct - first - second, [i, k, j]);
            }
        }
    }

    fn look(&mut self, scaled: &Scaled, [i, k, j]: [usize; 3]) {
        let (Some(direct), Some(first), Some(second)) =
            (scaled.at(i, j), scaled.at(i, k), scaled.at(k, j))
        else {
            return;
        };
        self.count(direct - first - second, [i, k, j]);
    }

    fn count(&mut self, excess: i64, [i, k, j]: [usize; 3]) {
        self.examined += 1;
        if excess > 0 {
            self.broken += 1;
            if self.worst.is_none_or(|(most, _)| excess > most) {
                self.worst = Some((excess, [i, k, j]));
            }
        }
    }
}

/// Looks at every triple up to [`EVERY_TRIPLE`] stops, else at [`DRAWN`] ones drawn with a fixed
/// seed. O(n³), or O(drawn).
pub(crate) async fn triangles(scaled: &Scaled, pace: &Pace) -> Triangles {
    let mut found = Triangles::default();
    let n = scaled.n;
    if n <= EVERY_TRIPLE {
        for i in 0..n {
            for k in (0..n).filter(|&k| k != i) {
                pace.spend(n / 8).await;
                found.look_by_way_of(scaled, i, k);
            }
        }
        return found;
    }
    let mut draw = Draw(1);
    for _ in 0..DRAWN {
        pace.spend(1).await;
        let [i, k, j] = [draw.below(n), draw.below(n), draw.below(n)];
        if i != k && k != j && i != j {
            found.look(scaled, [i, k, j]);
        }
    }
    found
}

/// A linear congruential generator (Knuth, The Art of Computer Programming 2, MMIX constants).
struct Draw(u64);

impl Draw {
    fn below(&mut self, n: usize) -> usize {
        self.0 =
            self.0.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695_040_888_963_407);
        let high = self.0 >> 33;
        usize::try_from(high % n.max(1) as u64).unwrap_or(0)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::pace::Slices;
    use crate::square::counted;

    fn scaled(square: &Square) -> Option<Scaled> {
        Slices::whole(async |pace| Scaled::of(square, &pace).await)
    }

    fn looked(scaled: &Scaled) -> Triangles {
        Slices::whole(async |pace| triangles(scaled, &pace).await)
    }

    fn square(labels: Vec<String>, value: impl FnMut(usize, usize) -> RBig) -> Square {
        Slices::whole(async |pace| Square::of(labels, value, &pace).await)
    }

    #[test]
    fn the_worst_triple_is_found() {
        let mut square = self::square(counted(4), |_, _| RBig::from_parts(1.into(), 2_u8.into()));
        square.put(0, 2, Some(RBig::from(3)));
        square.put(3, 1, None);
        let scaled = self::scaled(&square).unwrap();
        let found = looked(&scaled);
        // Of 24 triples, 6 use the drive 4 → 2; 1 → 3 breaks by way of 2 and of 4.
        assert_eq!((found.examined, found.broken), (18, 2));
        assert_eq!(found.worst, Some((4, [0, 1, 2])));
        assert_eq!(scaled.text(4), "2");
    }

    #[test]
    fn large_ones_are_drawn_alike_each_time() {
        let n = EVERY_TRIPLE + 1;
        let square = self::square(counted(n), |i, j| RBig::from(u32::from(i == 5 && j != 7) + 1));
        let scaled = self::scaled(&square).unwrap();
        let found = looked(&scaled);
        assert!(found.examined > DRAWN * 9 / 10 && found.broken == 0);
        assert_eq!(looked(&scaled), found);
    }

    #[test]
    fn numbers_too_long_are_not_compared() {
        let long = |i: usize, _| RBig::from_parts(1.into(), UBig::from(10_u8).pow(36 + i) + 1_u8);
        assert!(scaled(&square(counted(3), long)).is_none());
    }
}
