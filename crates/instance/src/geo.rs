//! Places on the globe: great-circle distances and the map of a region.
//!
//! The distance is by the haversine formula (Sinnott, Sky and Telescope 68, 1984, 159) on a sphere
//! with the mean radius R₁ = (2a + b)/3 of the earth (Moritz, Geodetic Reference System 1980,
//! Journal of Geodesy 74, 2000, 128-133; adopted by the IUGG): with h = sin²(Δφ/2) +
//! cos φ₁ cos φ₂ sin²(Δλ/2), d = 2 R atan2(√h, √(1 − h)). The earth being no sphere, that is off
//! by up to about 0.5 %.

use std::f64::consts::PI;

use crate::number::Number;

/// The mean radius of the earth in kilometres.
const RADIUS: f64 = 6371.0088;

/// What is said of these distances.
pub(crate) const NOTE: &str = "Distances are great circles in kilometres, by the haversine \
    formula on a sphere of radius 6371.0088 km (the mean radius of the IUGG), rounded to metres.";

/// The great-circle distance in kilometres of two places (longitude, latitude) in degrees.
fn kilometres(from: (f64, f64), to: (f64, f64)) -> f64 {
    let radians = |degrees: f64| degrees * (PI / 180.0);
    let along = libm::sin(radians(to.1 - from.1) * 0.5);
    let across = libm::sin(radians(to.0 - from.0) * 0.5);
    let cosines = libm::cos(radians(from.1)) * libm::cos(radians(to.1));
    let h = along * along + cosines * across * across;
    let rest = if h < 1.0 { 1.0 - h } else { 0.0 };
    2.0 * RADIUS * libm::atan2(h.sqrt(), rest.sqrt())
}

/// The distance rounded half up to metres, in kilometres.
pub(crate) fn distance(from: (f64, f64), to: (f64, f64)) -> Number {
    let metres = (kilometres(from, to) * 1000.0 + 0.5) as i64;
    Number::from_parts(metres.into(), 1000_u16.into())
}

/// Places (longitude, latitude) in the equirectangular projection with the middle latitude, on
/// which the scale is true; the map is cut open in the widest gap between longitudes, so that a
/// region across the 180th meridian stays in one piece. O(n log n).
pub(crate) fn project(places: &[(f64, f64)]) -> Vec<(f64, f64)> {
    let (mut south, mut north) = (f64::INFINITY, f64::NEG_INFINITY);
    for &(_, latitude) in places {
        if latitude < south {
            south = latitude;
        }
        if latitude > north {
            north = latitude;
        }
    }
    let scale = libm::cos((south + north) * 0.5 * (PI / 180.0));
    let west = western_end(places);
    let turned = |longitude: f64| if longitude < west { longitude + 360.0 } else { longitude };
    places.iter().map(|&(longitude, latitude)| (turned(longitude) * scale, latitude)).collect()
}

/// The longitude east of the widest gap.
fn western_end(places: &[(f64, f64)]) -> f64 {
    let mut longitudes: Vec<f64> = places.iter().map(|place| place.0).collect();
    longitudes.sort_by(f64::total_cmp);
    let (Some(&first), Some(&last)) = (longitudes.first(), longitudes.last()) else { return 0.0 };
    let (mut widest, mut west) = (first + 360.0 - last, first);
    for pair in longitudes.windows(2) {
        if pair[1] - pair[0] > widest {
            (widest, west) = (pair[1] - pair[0], pair[1]);
        }
    }
    west
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::number::number_text;
    use proptest::prelude::*;

    #[test]
    fn a_degree_is_known() {
        // πR/180 = 111.19508 km along the equator and along every meridian.
        assert_eq!(number_text(&distance((0.0, 0.0), (1.0, 0.0))), "111.195");
        assert_eq!(number_text(&distance((25.0, 40.0), (25.0, 41.0))), "111.195");
        // On the parallel of 60° the chord of one degree is half as long: 2R asin(½ sin ½°).
        assert_eq!(number_text(&distance((10.0, 60.0), (11.0, 60.0))), "55.597");
        assert_eq!(number_text(&distance((179.5, 0.0), (-179.5, 0.0))), "111.195");
        assert_eq!(number_text(&distance((7.0, 7.0), (7.0, 7.0))), "0");
    }

    #[test]
    fn published_distances_of_cities() {
        // Los Angeles (33°57′ N 118°24′ W) to New York (40°38′ N 73°47′ W): 0.623585 radians, the
        // worked example of the Aviation Formulary (E. Williams, version 1.47).
        let (los_angeles, new_york) =
            ((-118.4, 33.95), (-(73.0 + 47.0 / 60.0), 40.0 + 38.0 / 60.0));
        assert!((kilometres(los_angeles, new_york) / RADIUS - 0.623585).abs() < 1e-6);
        // Nashville (36.12, −86.67) to Los Angeles (33.94, −118.40): 2887.2599506 km where the
        // radius is 6372.8 km, the worked example of the article "Haversine formula" of Rosetta
        // Code.
        let (nashville, los_angeles) = ((-86.67, 36.12), (-118.40, 33.94));
        let found = kilometres(nashville, los_angeles) / RADIUS * 6372.8;
        assert!((found - 2887.2599506).abs() < 1e-6, "{found}");
    }

    #[test]
    fn the_antipode_is_half_a_circle_away() {
        // πR = 20015.1142 km.
        assert!((kilometres((10.0, 20.0), (-170.0, -20.0)) - PI * RADIUS).abs() < 1e-6);
        assert!((kilometres((0.0, 90.0), (50.0, -90.0)) - PI * RADIUS).abs() < 1e-6);
    }

    /// The central angle by another formula, that of Vincenty (1975) on the sphere.
    fn by_vincenty(from: (f64, f64), to: (f64, f64)) -> f64 {
        let radians = |degrees: f64| degrees * (PI / 180.0);
        let (p, q, l) = (radians(from.1), radians(to.1), radians(to.0 - from.0));
        let (u, v) = (
            libm::cos(q) * libm::sin(l),
            libm::cos(p) * libm::sin(q) - libm::sin(p) * libm::cos(q) * libm::cos(l),
        );
        let w = libm::sin(p) * libm::sin(q) + libm::cos(p) * libm::cos(q) * libm::cos(l);
        RADIUS * libm::atan2((u * u + v * v).sqrt(), w)
    }

    #[test]
    fn the_map_is_not_torn() {
        let places = project(&[(179.0, 60.0), (-179.0, 60.0), (178.0, 60.0)]);
        assert!((places[1].0 - places[0].0 - 1.0).abs() < 1e-9, "{places:?}");
        assert!((places[0].0 - places[2].0 - 0.5).abs() < 1e-9, "{places:?}");
        assert!(project(&[]).is_empty());
    }

    proptest! {
        #[test]
        fn two_formulas_agree(
            a in -180.0_f64..180.0, b in -90.0_f64..90.0,
            c in -180.0_f64..180.0, d in -90.0_f64..90.0,
        ) {
            let (from, to) = ((a, b), (c, d));
            prop_assert!((kilometres(from, to) - by_vincenty(from, to)).abs() < 1e-6);
            prop_assert_eq!(distance(from, to), distance(to, from));
        }
    }
}
