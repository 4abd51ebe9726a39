//! The tables of the ready scenarios, and their shortest rounds found without any model: by
//! dynamic programming over subsets (Held & Karp, J. SIAM 10, 1962).

#![allow(clippy::unwrap_used, reason = "a test's own helpers")]

use std::path::Path;

use hullward_instance::{Instance, Reader, Reading, read};

/// The table of a scenario file, read.
fn table(name: &str) -> Reading {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("../../scenarios");
    let scenario = std::fs::read_to_string(folder.join(name)).unwrap();
    let (_, rest) = scenario.split_once("text = '''\n").unwrap();
    read(rest.split_once("'''").unwrap().0, None)
}

/// The length of the shortest round. O(2ⁿ n²).
fn shortest(instance: &Instance) -> i64 {
    const FAR: i64 = i64::MAX / 4;
    let n = instance.stops().len();
    let number = |cell: Option<&hullward_instance::Number>| {
        cell.map_or(FAR, |number| i64::try_from(number.numerator().clone()).unwrap())
    };
    let c: Vec<i64> = instance.matrix().into_iter().map(number).collect();
    let m = n - 1;
    let mut best = vec![FAR; (1 << m) * m];
    for j in 0..m {
        best[(1 << j) * m + j] = c[j + 1];
    }
    for set in 1..1_usize << m {
        for j in (0..m).filter(|j| set >> j & 1 == 1) {
            let here = best[set * m + j];
            for k in (0..m).filter(|k| set >> k & 1 == 0) {
                let place = (set | 1 << k) * m + k;
                best[place] = best[place].min(here + c[(j + 1) * n + k + 1]);
            }
        }
    }
    (0..m).map(|j| best[((1 << m) - 1) * m + j] + c[(j + 1) * n]).min().unwrap()
}

#[test]
fn the_demo_is_a_round_of_18_stops() {
    let reading = table("mobile-library-round.toml");
    assert_eq!((reading.reader, reading.complaints.as_slice()), (Reader::Matrix, &[][..]));
    assert_eq!(
        reading.facts[..3],
        [
            "18 stops, 306 drives, minutes.",
            "Not symmetric: 131 of 153 pairs differ, by up to 13 (Quarry → Brook 19, back 6).",
            "Triangle inequality broken for 2 of 4,896 triples, most by 2: Elms → Knoll is 20, by way \
             of Brook it is 18.",
        ]
    );
    assert_eq!(shortest(&reading.instance.unwrap()), 159);
}

#[test]
fn the_one_way_round_lacks_eight_drives() {
    let reading = table("one-way-depot.toml");
    assert_eq!((reading.reader, reading.complaints.as_slice()), (Reader::Matrix, &[][..]));
    let instance = reading.instance.unwrap();
    assert_eq!((instance.unit.as_str(), instance.stops().len()), ("minutes", 9));
    assert_eq!(instance.matrix().iter().flatten().count(), 64);
    assert_eq!(shortest(&instance), 111);
}
