//! Texts to begin with.

use std::path::Path;

use catalogue::{Class, entries, generate};

/// The texts that a target begins with: those of the project, and those of `corpus/<target>`,
/// where inputs that once made it fall over are kept.
#[must_use]
pub fn of(target: &str) -> Vec<String> {
    let mut seeds = match target {
        "instance" => instances(),
        "scenario" => scenarios(),
        "mps" => vec![MPS.to_owned()],
        _ => formulations(),
    };
    seeds.extend(corpus(target));
    seeds
}

fn formulations() -> Vec<String> {
    let shipped = entries().into_iter().map(|entry| entry.text.to_owned());
    let helped = notation::codes().filter(|help| !help.code.starts_with("size."));
    shipped.chain(helped.flat_map(|help| [help.fails(), help.mended()])).collect()
}

fn instances() -> Vec<String> {
    let mut all: Vec<String> = ["atsp", "tsp", "path", "ufl", "lot"]
        .into_iter()
        .flat_map(|family| Class::ALL.map(|class| generate(family, 4, class, 3)))
        .flatten()
        .collect();
    all.push(TSPLIB.to_owned());
    all.push("name,lat,lon\nDepot,52.5,13.4\nHarbour,53.5,10.0\n".to_owned());
    all.push("from;to;minutes\nA;B;3,5\nB;C;4\nC;A;2\n".to_owned());
    all
}

fn scenarios() -> Vec<String> {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("../../scenarios");
    let mut all = files(&folder);
    let links: Vec<String> = all.iter().filter_map(|text| record::link::pack(text).ok()).collect();
    all.extend(links);
    all
}

fn corpus(target: &str) -> Vec<String> {
    files(&Path::new(env!("CARGO_MANIFEST_DIR")).join("corpus").join(target))
}

fn files(folder: &Path) -> Vec<String> {
    let entries = std::fs::read_dir(folder).into_iter().flatten().flatten();
    let mut paths: Vec<_> = entries.map(|entry| entry.path()).collect();
    paths.sort();
    let bytes = paths.iter().filter_map(|path| std::fs::read(path).ok());
    bytes.map(|bytes| String::from_utf8_lossy(&bytes).into_owned()).collect()
}

const TSPLIB: &str = "\
NAME: five
TYPE: TSP
DIMENSION: 5
EDGE_WEIGHT_TYPE: EUC_2D
NODE_COORD_SECTION
1 0 0
2 3 4
3 6 8
4 1 7
5 9 2
EOF
";

const MPS: &str = "\
NAME          SMALL
ROWS
 N  COST
 L  LIM1
 G  MYEQN
COLUMNS
    MARKER    MARKER    'MARKER'  'INTORG'
    X         COST      1.0       LIM1      1.0
    X         MYEQN     1.0
    MARKER    MARKER    'MARKER'  'INTEND'
    Y         COST      2.0       LIM1      1.0
RHS
    RHS       LIM1      4.0       MYEQN     1.0
RANGES
    RNG       LIM1      2.5
BOUNDS
 UP BND       X         4.0
 MI BND       Y
ENDATA
";
