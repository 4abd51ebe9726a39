//! Our distances against published facts on TSPLIB instances (Reinelt, ORSA Journal on Computing
//! 3, 1991, 376-384). The files are read from the folder `tsplib` in `HULLWARD_DATA`.
//!
//! Published at <http://comopt.ifi.uni-heidelberg.de/software/TSPLIB95/>. Where a file lacks, the
//! test says so and ends early; with `CI=true` that is a failure.

#![allow(clippy::print_stdout, clippy::unwrap_used, reason = "a test's own helpers")]

use std::path::PathBuf;

use hullward_instance::{Instance, Reader, layout, read};

/// Symmetric and asymmetric files with their numbers of cities.
const FILES: [(&str, usize); 32] = [
    ("burma14.tsp", 14),
    ("br17.atsp", 17),
    ("gr17.tsp", 17),
    ("ulysses16.tsp", 16),
    ("gr21.tsp", 21),
    ("ulysses22.tsp", 22),
    ("gr24.tsp", 24),
    ("fri26.tsp", 26),
    ("bayg29.tsp", 29),
    ("bays29.tsp", 29),
    ("ftv33.atsp", 34),
    ("ftv35.atsp", 36),
    ("ftv38.atsp", 39),
    ("dantzig42.tsp", 42),
    ("swiss42.tsp", 42),
    ("p43.atsp", 43),
    ("ftv44.atsp", 45),
    ("att48.tsp", 48),
    ("gr48.tsp", 48),
    ("hk48.tsp", 48),
    ("ftv47.atsp", 48),
    ("ry48p.atsp", 48),
    ("eil51.tsp", 51),
    ("berlin52.tsp", 52),
    ("ft53.atsp", 53),
    ("ftv55.atsp", 56),
    ("ftv64.atsp", 65),
    ("st70.tsp", 70),
    ("ft70.atsp", 70),
    ("eil76.tsp", 76),
    ("rat99.tsp", 99),
    ("kroA100.tsp", 100),
];

/// Lengths of the published optimal tours, from the library's list of best solutions.
const OPTIMA: [(&str, i64); 13] = [
    ("att48", 10628),
    ("bayg29", 1610),
    ("bays29", 2020),
    ("berlin52", 7542),
    ("eil51", 426),
    ("eil76", 538),
    ("fri26", 937),
    ("gr24", 1272),
    ("gr48", 5046),
    ("kroA100", 21282),
    ("st70", 675),
    ("ulysses16", 6859),
    ("ulysses22", 7013),
];

/// The text of a file, or nothing where it lacks.
fn file(name: &str) -> Option<String> {
    let found = std::env::var_os("HULLWARD_DATA")
        .map(|folder| PathBuf::from(folder).join("tsplib").join(name))
        .and_then(|path| std::fs::read_to_string(path).ok());
    if found.is_none() {
        let place = "http://comopt.ifi.uni-heidelberg.de/software/TSPLIB95/";
        let message = format!("skipped: tsplib/{name} is not in HULLWARD_DATA; see {place}");
        assert!(std::env::var("CI").as_deref() != Ok("true"), "{message}");
        println!("{message}");
    }
    found
}

fn instance(name: &str) -> Option<Instance> {
    let reading = read(&file(name)?, None);
    assert_eq!(reading.reader, Reader::Tsplib, "{name}");
    assert_eq!(reading.complaints, [], "{name}");
    reading.instance
}

fn integers(instance: &Instance) -> Vec<i64> {
    let value = |cell: Option<&hullward_instance::Number>| {
        cell.map_or(0, |number| {
            assert!(number.is_int());
            i64::try_from(number.numerator().clone()).unwrap()
        })
    };
    instance.matrix().into_iter().map(value).collect()
}

#[test]
fn every_file_is_read() {
    for (name, n) in FILES {
        let Some(instance) = instance(name) else { return };
        assert_eq!(instance.stops().len(), n, "{name}");
        assert_eq!(instance.title.trim_end_matches(".tsp"), name.split('.').next().unwrap());
        let matrix = integers(&instance);
        let symmetric = (0..n).all(|i| (0..i).all(|j| matrix[i * n + j] == matrix[j * n + i]));
        assert_eq!(symmetric, name.ends_with(".tsp"), "{name}");
        assert_eq!(instance.get("E").is_some(), symmetric);
        assert!(matrix.iter().all(|&value| value < 100_000), "{name}: a diagonal was taken");
        let layout = layout(&instance);
        assert_eq!((layout.places.len(), layout.computed), (n, instance.points.is_none()));
    }
}

#[test]
fn optimal_tours_have_their_published_length() {
    for (name, length) in OPTIMA {
        let Some(instance) = instance(&format!("{name}.tsp")) else { return };
        let Some(tour) = file(&format!("tours/{name}.opt.tour")) else { return };
        let (_, stops) = tour.split_once("TOUR_SECTION").unwrap();
        let stops: Vec<usize> = stops
            .split_whitespace()
            .map_while(|stop| stop.parse::<usize>().ok())
            .map(|stop| stop - 1)
            .collect();
        let n = instance.stops().len();
        assert_eq!(stops.len(), n, "{name}");
        let matrix = integers(&instance);
        let next = stops.iter().cycle().skip(1);
        let found: i64 = stops.iter().zip(next).map(|(i, j)| matrix[i * n + j]).sum();
        assert_eq!(found, length, "{name}");
    }
}

/// First rows as the files write them, their diagonal placeholders aside.
#[test]
fn facts_of_asymmetric_files() {
    let Some(br17) = instance("br17.atsp") else { return };
    let matrix = integers(&br17);
    // The first row of the file: 9999 3 5 48 48 8 8 5 5 3 3 0 3 5 8 8 5.
    assert_eq!(matrix[..17], [0, 3, 5, 48, 48, 8, 8, 5, 5, 3, 3, 0, 3, 5, 8, 8, 5]);
    let Some(ftv33) = instance("ftv33.atsp") else { return };
    assert_eq!(integers(&ftv33)[..6], [0, 26, 82, 65, 100, 147]);
}
