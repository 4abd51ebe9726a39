//! Instances are read in slices: what comes out is the same for every size, no slice is long, and a
//! request is heard between two of them.

#![expect(clippy::expect_used, clippy::panic, reason = "the helpers of these tests fail loudly")]

use hullward_engine::{Worker, instance_report};
use record::message::{InstanceReport, LaneJob, Reply, Request};
use record::scenario::{InstanceText, Rival};

/// A text for each way of reading.
fn texts() -> Vec<String> {
    let rows = |n: usize| -> String {
        let row = |i: usize| (0..n).map(|j| format!(" {}", (i * 7 + j * 13) % 40)).collect();
        (0..n).map(|i| format!("s{i}{}\n", String::from_iter::<Vec<String>>(row(i)))).collect()
    };
    let heading: String = (0..12).map(|i| format!(" s{i}")).collect();
    let points: String =
        (0..12).map(|k| format!("s{k} {} {}\n", k * 37 % 101, k * 53 % 97)).collect();
    let located: String = (0..9).map(|k| format!("s{k} {} {}\n", 40 + k, 5 + k * 3 % 7)).collect();
    let drives: String = (0..20).map(|k| format!("a{k} a{} {}\n", (k + 1) % 20, k * 3)).collect();
    let long: String = (0..30).map(|k| format!("p{}\tw{}\t{}\n", k / 5, k % 5, k * 11)).collect();
    let sheet: String = (0..6).map(|k| format!("c{k}\t{}\t{}\t{}\n", k, k * 2, k * 3)).collect();
    vec![
        format!("minutes{heading}\n{}", rows(12)),
        points,
        format!("stop lat lon\n{located}"),
        format!("from to minutes\n{drives}"),
        format!("plant\tworks\tcost\n{long}"),
        format!("client\\period\t1\t2\t3\n{sheet}"),
        "V\na b c\n\nc by i, j\na b 1\nb c 2\nc a 3\n\nQ = 4\n".to_owned(),
        "NAME: x\nTYPE: TSP\nDIMENSION: 4\nEDGE_WEIGHT_TYPE: EXPLICIT\nEDGE_WEIGHT_FORMAT: \
         LOWER_ROW\nEDGE_WEIGHT_SECTION\n1 2 3\n4 5 6\nEOF\n"
            .to_owned(),
        "NAME: y\nTYPE: TSP\nDIMENSION: 3\nEDGE_WEIGHT_TYPE: EUC_2D\nNODE_COORD_SECTION\n1 0 0\n\
         2 3 4\n3 9 9\nEOF\n"
            .to_owned(),
        "2\n3 1 0\n5 6 7\n1 2 3\n4\n2 1 9\n5 6\n3 4\n8\n".to_owned(),
        "c a graph\np edge 4 4\ne 1 2\ne 2 3\ne 3 4\ne 4 1\n".to_owned(),
        "SECTION Graph\nNodes 3\nEdges 2\nE 1 2 5\nE 2 3 6\nEND\nSECTION Terminals\n\
         Terminals 2\nT 1\nT 3\nEND\nEOF\n"
            .to_owned(),
        "4 4 2\n1 2 3\n2 3 4\n3 4 5\n4 1 6\n".to_owned(),
        "2 2\n0 3 1 2\n1 4 0 5\n".to_owned(),
        "a 1 x\nb 2\n\nc".to_owned(),
        String::new(),
    ]
}

fn given(text: &str) -> InstanceText {
    InstanceText { text: text.to_owned(), ..InstanceText::default() }
}

/// The reply to the reading of a text, and in how many slices it came.
fn report(text: &str, ticks: u64) -> (InstanceReport, u32) {
    let mut worker = Worker::new();
    worker.handle(Request::Read(given(text)));
    let mut slices = 1;
    while worker.advance(ticks) {
        slices += 1;
    }
    match worker.take().pop().expect("a reply").reply {
        Reply::InstanceRead(report) => (*report, slices),
        other => panic!("{other:?}"),
    }
}

#[test]
fn a_text_is_read_the_same_in_slices_of_every_size() {
    let mut readers = std::collections::BTreeSet::new();
    for text in texts() {
        let whole = instance_report(&given(&text));
        readers.insert(whole.reader.clone());
        for ticks in [1, 97, 2_011, 20_011] {
            let (found, slices) = report(&text, ticks);
            assert_eq!(found, whole, "{ticks} ticks\n{text}");
            assert!(ticks > 1 || text.is_empty() || slices > 5, "{slices} slices\n{text}");
        }
    }
    assert!(readers.len() >= 11, "{readers:?}");
}

/// A matrix of so many stops.
fn matrix(stops: usize) -> String {
    let value = |i: usize, j: usize| format!("{} ", (i * 7919 + j * 104_729) % 997);
    let row = |i: usize| (0..stops).map(|j| value(i, j)).collect::<String>() + "\n";
    (0..stops).map(row).collect()
}

/// A matrix of 200 stops was read in one step of a seventh of a second.
#[test]
fn a_large_matrix_is_read_in_many_slices() {
    let (report, slices) = report(&matrix(200), 20_000);
    assert_eq!(report.stops.len(), 200);
    assert!(slices > 100, "{slices}");
}

/// How long this thread has run, in seconds: other work on the machine does not count. 0 where
/// Linux does not tell it.
fn run_time() -> f64 {
    let told = std::fs::read_to_string("/proc/thread-self/schedstat").unwrap_or_default();
    let nanoseconds = told.split(' ').next().and_then(|word| word.parse::<f64>().ok());
    nanoseconds.unwrap_or(0.0) / 1e9
}

/// The time of each slice of a reading is looked at only where `HULLWARD_SPEED` asks for it.
#[test]
fn no_slice_of_a_reading_is_long() {
    if std::env::var_os("HULLWARD_SPEED").is_none() {
        println!("HULLWARD_SPEED is not set: nothing is measured");
        return;
    }
    for stops in [100, 200, 400, 1_000] {
        let mut worker = Worker::new();
        worker.handle(Request::Read(given(&matrix(stops))));
        let (mut slices, mut longest, begun) = (0, 0.0_f64, run_time());
        loop {
            let slice = run_time();
            let busy = worker.advance(20_000);
            let took = run_time() - slice;
            longest = if took > longest { took } else { longest };
            slices += 1;
            if !busy {
                break;
            }
        }
        println!(
            "{stops} stops: {:.3} s in {slices} slices of 20,000 ticks, the longest {:.1} ms",
            run_time() - begun,
            longest * 1e3
        );
    }
}

/// Stop was heard only when the whole text had been read.
#[test]
fn stop_acts_while_an_instance_is_read() {
    let mut worker = Worker::new();
    let rival = Rival { from: Some("atsp/labels".to_owned()), ..Rival::default() };
    let instance = Some(given(&matrix(150)));
    let load = || {
        Request::Load(Box::new(LaneJob {
            rival: rival.clone(),
            instance: instance.clone(),
            ..LaneJob::default()
        }))
    };
    worker.handle(load());
    for _ in 0..20 {
        assert!(worker.advance(5_000));
    }
    let told: Vec<_> = worker.take().into_iter().map(|envelope| envelope.reply).collect();
    assert!(
        matches!(&told[..], [Reply::Progress(p)] if p.doing == "reading the instance"),
        "{told:?}"
    );
    worker.handle(Request::Stop);
    assert!(!worker.advance(5_000));
    let told: Vec<_> = worker.take().into_iter().map(|envelope| envelope.reply).collect();
    assert!(matches!(&told[..], [Reply::Done(report)] if report.stopped.is_some()), "{told:?}");
    // begun again, it goes on where the reading stopped
    worker.handle(load());
    while worker.advance(20_000) {
        let told = worker.take();
        assert!(!told.iter().any(|envelope| matches!(envelope.reply, Reply::Failed(_))));
        if told.iter().any(|envelope| matches!(envelope.reply, Reply::Understood(_))) {
            return;
        }
    }
    panic!("the rival was not understood");
}

/// A text that came later was read only when the one before had been.
#[test]
fn a_reading_gives_way_to_a_newer_text() {
    let mut worker = Worker::new();
    worker.handle(Request::Read(given(&matrix(150))));
    for _ in 0..20 {
        assert!(worker.advance(5_000));
    }
    worker.handle(Request::Read(given("0 1\n2 0\n")));
    let mut slices = 0;
    while worker.advance(5_000) {
        slices += 1;
    }
    let told: Vec<_> = worker.take().into_iter().map(|envelope| envelope.reply).collect();
    let [Reply::InstanceRead(older), Reply::InstanceRead(newer)] = &told[..] else {
        panic!("{told:?}")
    };
    assert_eq!((older.stops.len(), newer.stops.len()), (0, 2));
    assert!(slices < 5, "{slices}");
}
