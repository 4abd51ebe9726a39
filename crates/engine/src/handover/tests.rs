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

#[test]
fn a_rival_in_mps_is_written_again_and_has_no_notation() {
    let text = mps(&shipped("atsp/labels"), (0, 0)).expect("written").text;
    let mut own = scenario(Rival { mps: Some(text.clone()), ..Rival::default() });
    own.instance = None;
    let again = mps(&own, (0, 0)).expect("written");
    // But for the title in the first comment, which the name of the model gives without blanks.
    let from_name = |text: &str| text.split_once('\n').map(|(_, rest)| rest.to_owned());
    assert_eq!((from_name(&again.text), again.complaints.len()), (from_name(&text), 0));
    for refused in [notation_text(&own, 0), latex(&own, 0)] {
        let Err(Refusal::Wrong(error)) = refused else { panic!("{refused:?}") };
        assert!(error.message.contains("without journal notation"), "{}", error.message);
    }
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
