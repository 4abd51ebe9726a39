//! What is handed over: texts that read back, and what is refused.

use super::*;
use record::scenario::{FamilyState, InstanceText};

const STOPS: &str = "0 3 4 5\n2 0 4 6\n7 3 0 5\n4 6 3 0\n";

fn scenario(rival: Rival) -> Scenario {
    let instance = Some(InstanceText { text: STOPS.to_owned(), ..InstanceText::default() });
    Scenario { instance, rivals: vec![rival], ..Scenario::default() }
}

fn shipped(id: &str) -> Scenario {
    scenario(Rival { from: Some(id.to_owned()), ..Rival::default() })
}

#[test]
fn every_shipped_round_trip_is_written_and_compared() {
    for entry in catalogue::entries().iter().filter(|entry| entry.id.starts_with("atsp/")) {
        let handed = mps(&shipped(&entry.id), (0, 0)).unwrap_or_else(|refusal| {
            panic!("{}: {refusal:?}", entry.id);
        });
        let on_demand = handed.notes.iter().any(|note| note.contains("is on demand"));
        assert_eq!(on_demand, matches!(entry.id.as_str(), "atsp/subtours" | "atsp/cuts"));
        assert!(handed.text.ends_with("ENDATA\n"));
    }
}

#[test]
fn notation_is_printed_with_what_it_lacks() {
    let mut own = shipped("atsp/labels");
    own.rivals[0].families.insert("order".to_owned(), FamilyState::OnDemand);
    let handed = notation_text(&own, 0).expect("printed");
    assert!(handed.text.contains("(order)") || handed.text.contains("\\tag{order}"));
    assert!(handed.notes[0].ends_with("is not in it: order"), "{:?}", handed.notes);
    let handed = latex(&own, 0).expect("printed");
    assert!(handed.text.contains("\\tag{order}") && handed.text.contains("\\begin{align*}"));
}

fn in_mps(text: &str) -> Scenario {
    let mut own = scenario(Rival { mps: Some(text.to_owned()), ..Rival::default() });
    own.instance = None;
    own
}

#[test]
fn a_rival_in_mps_is_written_again() {
    let text = mps(&shipped("atsp/labels"), (0, 0)).expect("written").text;
    let again = mps(&in_mps(&text), (0, 0)).expect("written");
    // But for the title in the first comment, which the name of the model gives without blanks.
    let from_name = |text: &str| text.split_once('\n').map(|(_, rest)| rest.to_owned());
    assert_eq!((from_name(&again.text), again.complaints.len()), (from_name(&text), 0));
}

/// A model in MPS had no LaTeX. Its columns keep their names where these are words.
#[test]
fn a_rival_in_mps_is_written_out_in_notation_and_latex() {
    let small = "NAME SMALL\nROWS\n N COST\n L ROOM\n G LEAST\n E A+B\n L BETWEEN\nCOLUMNS\n X COST 3 ROOM 2\n \
        X LEAST 1 A+B 1\n M1 'MARKER' 'INTORG'\n Y COST -1.5 ROOM 1\n Y A+B 1 BETWEEN 1\n Z COST 1 LEAST 1\n \
        M2 'MARKER' 'INTEND'\n W A+B -1 BETWEEN 0.25\nRHS\n R COST -4 ROOM 7.5\n R LEAST 1 BETWEEN 5\nRANGES\n \
        S BETWEEN 3\nBOUNDS\n UP B X 4\n UP B Y 9\n BV B Z\n FR B W\nENDATA\n";
    let handed = notation_text(&in_mps(small), 0).expect("written out");
    for line in [
        "3 X − 1.5 Y + Z + 4",
        "2 X + Y ≤ 7.5",
        "\\tag{ROOM}",
        "X + Y − W = 0",
        "\\tag{row 3}",
        "2 ≤ Y + 0.25 W ≤ 5",
        "Z ∈ {0, 1}",
        "0 ≤ X ≤ 4",
        "W ∈ ℝ",
    ] {
        assert!(handed.text.contains(line), "{line}\n{}", handed.text);
    }
    assert!(handed.notes.is_empty(), "{:?}", handed.notes);
    let set = latex(&in_mps(small), 0).expect("set");
    assert!(
        set.text.contains("\\begin{align*}") && set.text.contains("\\tag{ROOM}"),
        "{}",
        set.text
    );
}

#[test]
fn columns_without_names_of_the_notation_are_counted() {
    let text = mps(&shipped("atsp/labels"), (0, 0)).expect("written").text;
    let handed = latex(&in_mps(&text), 0).expect("written out");
    assert!(handed.text.contains("x_{12}"), "{}", handed.text);
    assert!(handed.notes[0].starts_with("the columns are x_1"), "{:?}", handed.notes);
    let many = 120;
    let instance: String = (0..many)
        .map(|i| (0..many).map(|j| format!("{} ", i + j)).collect::<String>() + "\n")
        .collect();
    let mut large = shipped("atsp/assignment");
    large.instance = Some(InstanceText { text: instance, ..InstanceText::default() });
    let text = mps(&large, (0, 0)).expect("written").text;
    let Err(Refusal::Wrong(error)) = latex(&in_mps(&text), 0) else { panic!("written out") };
    assert!(error.message.contains("up to 5000 entries"), "{}", error.message);
}

#[test]
fn what_cannot_be_made_is_refused_with_places() {
    let text = "minimise\n  Σ_{i ∈ V} x_{i\n";
    let own = scenario(Rival { text: Some(text.to_owned()), ..Rival::default() });
    for refused in [mps(&own, (0, 0)), notation_text(&own, 0), latex(&own, 0)] {
        let Err(Refusal::Wrong(error)) = refused else { panic!("{refused:?}") };
        assert_eq!(error.complaints.first().map(|one| one.line), Some(2), "{error:?}");
    }
    assert!(latex(&own, 1).is_err());
}

#[test]
fn the_page_is_handed_the_same_text() {
    let own = shipped("atsp/labels");
    let job = |rival: &Rival| LaneJob {
        instance: own.instance.clone(),
        rival: rival.clone(),
        ..LaneJob::default()
    };
    let texts = [mps(&own, (0, 0)), latex(&own, 0), notation_text(&own, 0)];
    for (form, wanted) in [Form::Mps, Form::Latex, Form::Text].into_iter().zip(texts) {
        let Reply::Written(written) = handed_over(form, job(&own.rivals[0])) else {
            panic!("{form:?} is refused");
        };
        let wanted = wanted.expect("written");
        assert_eq!((written.text, written.notes), (wanted.text, wanted.notes));
    }
    let unknown = Rival { from: Some("atsp/none".to_owned()), ..Rival::default() };
    assert!(matches!(handed_over(Form::Mps, job(&unknown)), Reply::Failed(_)));
}
