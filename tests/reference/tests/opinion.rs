//! The second opinion as the command and the page ask for it: on every golden model and on the
//! shipped round trips, families on demand with the rows that separation added, it agrees with
//! our root; on a falsified relaxation it does not. Sources: the golden models, computed with
//! HiGHS; generated round trips of every class.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]

use std::time::Duration;

use catalogue::{Class, generate};
use engine::native::{RivalRun, Watch, run_rival};
use hullward_tests_reference::golden;
use record::opinion::{Opinion, Relaxation, SECONDS};
use record::results::RootReport;
use record::scenario::{InstanceText, Rival, Run, Scenario};
use record::wire::read_relaxation;
use report::opinion::{Verdict, verdict};

/// The root of a rival and its relaxation.
fn solved(instance: Option<String>, rival: Rival) -> (RootReport, Relaxation) {
    let scenario = Scenario {
        instance: instance.map(|text| InstanceText { text, ..InstanceText::default() }),
        rivals: vec![rival],
        run: Run { search: false, ..Run::default() },
        ..Scenario::default()
    };
    let run: RivalRun = run_rival(&scenario, (0, 0), 10_000_000, &mut |_| Watch::GoOn);
    let bytes = run.relaxation.unwrap_or_else(|| panic!("{:?}", run.error)).unwrap();
    (run.root.unwrap(), read_relaxation(&bytes).unwrap())
}

fn opinion_of(relaxation: &Relaxation) -> Opinion {
    opinion::ask(relaxation, Duration::from_secs(6 * SECONDS))
}

#[test]
fn it_agrees_on_every_golden_model_and_not_when_its_costs_are_falsified() {
    for golden in golden::all() {
        let text = model::mps::write(&golden.model).unwrap().text;
        let mps = Rival { mps: Some(text), ..Rival::default() };
        let (root, mut relaxation) = solved(None, mps);
        let maximise = relaxation.maximise;
        let said = opinion_of(&relaxation);
        assert_eq!(verdict(&root, maximise, &said), Verdict::Agrees, "{}: {said:?}", golden.name);
        let away = if maximise { 1.0 } else { -1.0 };
        relaxation.offset += away * (1.0 + golden.lp.abs());
        let said = opinion_of(&relaxation);
        assert_eq!(verdict(&root, maximise, &said), Verdict::Refuted, "{}: {said:?}", golden.name);
    }
}

#[test]
fn it_agrees_on_round_trips_with_the_rows_that_were_added() {
    let mut added = 0;
    for class in Class::ALL {
        for (size, seed) in [(8, 1), (13, 2)] {
            for entry in catalogue::entries().iter().filter(|entry| entry.id.starts_with("atsp/")) {
                let instance = generate("atsp", size, class, seed).unwrap();
                let from = Rival { from: Some(entry.id.to_owned()), ..Rival::default() };
                let (root, relaxation) = solved(Some(instance), from);
                added += root.added;
                let said = opinion_of(&relaxation);
                let found = verdict(&root, relaxation.maximise, &said);
                assert_eq!(found, Verdict::Agrees, "{}, {class:?}, {size}: {said:?}", entry.id);
            }
        }
    }
    assert!(added > 0, "no family was separated");
}
