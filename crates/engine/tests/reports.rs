//! What is said of every file of the open data, held against reports that were read by people:
//! sizes, sums, habits and complaints. The files are read from the folder that `HULLWARD_DATA`
//! names; each folder's reports stand in `tests/reports`. With `HULLWARD_REPORTS=write` they are
//! written anew.
//!
//! Where they come from: TSPLIB (Reinelt 1991), CVRPLIB, OR-Library (Beasley 1990), SteinLib
//! (Koch, Martin, Voß 2001), DIMACS graphs, the standard job shops, Netlib and MIPLIB 3.

#![allow(clippy::print_stdout, clippy::expect_used, reason = "a test's own helpers")]

use std::fmt::Write as _;
use std::fs;
use std::path::{Path, PathBuf};

use record::message::{Complaint, InstanceReport, Reply, Request};
use record::scenario::InstanceText;

/// The report of a text, as `hullward read` prints it, complaints behind.
fn report(text: &str) -> String {
    let report = if hullward_engine::looks_like_mps(text) {
        hullward_engine::mps_report(text)
    } else {
        let mut worker = hullward_engine::Worker::new();
        worker.handle(Request::Read(InstanceText {
            text: text.to_owned(),
            ..InstanceText::default()
        }));
        while worker.advance(1_000_000) {}
        let read = worker.take().into_iter().find_map(|envelope| match envelope.reply {
            Reply::InstanceRead(report) => Some(*report),
            _ => None,
        });
        read.expect("a report")
    };
    printed(&report)
}

fn printed(report: &InstanceReport) -> String {
    let mut out = format!("{} ({})\n", report.title, report.reader);
    for said in report.facts.iter().chain(&report.statistics) {
        writeln!(out, "  {said}").expect("a string");
    }
    // Of many complaints or instances the first three and the count.
    for part in report.parts.iter().take(3) {
        writeln!(out, "  | {part}").expect("a string");
    }
    if report.parts.len() > 3 {
        writeln!(out, "  | … {} in all", report.parts.len()).expect("a string");
    }
    for complaint in report.complaints.iter().take(3) {
        let Complaint { line, column, message, mend, .. } = complaint;
        let kind = if complaint.error { "error" } else { "warning" };
        writeln!(out, "  {line}:{column} {kind}: {message} [{mend}]").expect("a string");
    }
    if report.complaints.len() > 3 {
        writeln!(out, "  … {} complaints in all", report.complaints.len()).expect("a string");
    }
    out
}

/// A file as its user would have it: without the compression of RFC 1952 in which some are kept.
fn unpacked(bytes: Vec<u8>) -> Vec<u8> {
    if !bytes.starts_with(&[0x1f, 0x8b]) {
        return bytes;
    }
    let name = bytes[3] & 8 != 0;
    let end = bytes[10..].iter().position(|byte| *byte == 0).expect("a name that ends");
    let start = if name { 11 + end } else { 10 };
    miniz_oxide::inflate::decompress_to_vec(&bytes[start..]).expect("a sound file")
}

/// The reports of a folder's files, by name.
fn reports(folder: &Path) -> String {
    let mut files: Vec<PathBuf> = fs::read_dir(folder)
        .expect("a folder")
        .map(|entry| entry.expect("a file").path())
        .collect();
    files.retain(|file| file.is_file());
    files.sort();
    let mut out = String::new();
    for file in files {
        let bytes = unpacked(fs::read(&file).expect("a file"));
        let name = file.file_name().and_then(|name| name.to_str()).expect("a name");
        write!(out, "== {name}\n{}", report(&String::from_utf8_lossy(&bytes))).expect("a string");
    }
    out
}

fn check(folder: &str) {
    let data = std::env::var_os("HULLWARD_DATA").map(|data| PathBuf::from(data).join(folder));
    let Some(data) = data.filter(|data| data.is_dir()) else {
        let message =
            format!("skipped: {folder} is not in HULLWARD_DATA; see the head of this file");
        assert!(std::env::var("CI").as_deref() != Ok("true"), "{message}");
        println!("{message}");
        return;
    };
    let kept = Path::new(env!("CARGO_MANIFEST_DIR"))
        .join("tests/reports")
        .join(format!("{}.txt", folder.replace('/', "-")));
    let found = reports(&data);
    if std::env::var("HULLWARD_REPORTS").as_deref() == Ok("write") {
        fs::write(&kept, &found).expect("written");
    }
    let wanted = fs::read_to_string(&kept).expect("the reports that were kept");
    for (found, wanted) in found.split("== ").zip(wanted.split("== ")) {
        assert_eq!(found, wanted, "{folder}");
    }
    assert_eq!(found.len(), wanted.len(), "{folder}: files came or went");
}

#[test]
fn round_trips_and_routes() {
    check("tsplib");
    check("tsplib/tours");
    check("vrp");
}

#[test]
fn packing_and_location() {
    check("mknap");
    check("gap");
    check("cap");
    check("pmedian");
}

#[test]
fn schedules() {
    check("jobshop");
    check("wt");
}

#[test]
fn graphs() {
    check("colour");
    check("steiner");
}

#[test]
fn models_of_netlib_and_others() {
    check("netlib");
    check("mps");
}

#[test]
fn models_of_miplib() {
    check("miplib3");
    check("miplib3/pairs");
}

/// Every folder of the data that holds files has its reports and every list of reports has its
/// folder, so that no file is left out.
#[test]
fn no_folder_is_left_out() {
    let Some(data) = std::env::var_os("HULLWARD_DATA").map(PathBuf::from) else {
        assert!(std::env::var("CI").as_deref() != Ok("true"), "HULLWARD_DATA names no folder");
        println!("skipped: HULLWARD_DATA names no folder");
        return;
    };
    let mut found = Vec::new();
    let mut work = vec![data.clone()];
    while let Some(folder) = work.pop() {
        let mut holds = false;
        for entry in fs::read_dir(&folder).expect("a folder") {
            let path = entry.expect("an entry").path();
            holds |= path.is_file();
            work.extend(path.is_dir().then_some(path));
        }
        // the list of sources stands in the folder of folders
        if holds && folder != data {
            let name =
                folder.strip_prefix(&data).expect("below it").to_string_lossy().replace('/', "-");
            found.push(format!("{name}.txt"));
        }
    }
    let kept =
        fs::read_dir(Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/reports")).expect("reports");
    let mut kept: Vec<String> = kept
        .map(|entry| entry.expect("a file").file_name().to_string_lossy().into_owned())
        .collect();
    found.sort();
    kept.sort();
    assert_eq!(found, kept);
}
