//! Conflicts that are known.

use record::study::{RivalInfeasibility, Standing};

use super::{driven, instance, shipped, stops, subject};
use crate::{Plan, Subject};

fn found(subject: Subject) -> RivalInfeasibility {
    driven(20_000, |desk| crate::infeasibility::infeasibility(desk, vec![subject], Plan::default()))
        .rivals
        .remove(0)
}

/// Depots that must serve 30 in all with room for 25; the rest of the rows have nothing to do with it.
const ROOM: &str = "Room
data
  I  depots
  d_i  ∀ i ∈ I  demand
minimise
  Σ_{i ∈ I} q_i
subject to
  q_i ≥ d_i             ∀ i ∈ I  (meet)
  q_i ≤ 60              ∀ i ∈ I  (cap)
  Σ_{i ∈ I} q_i ≤ 25             (room)
  q_i ≥ 0               ∀ i ∈ I
";

#[test]
fn rows_that_cannot_hold_together_and_the_cheapest_way_to_relax_them() {
    let found = found(subject("A", ROOM, &instance("I\na b\n\nd by i\na 18\nb 12\n")));
    assert_eq!(found.standing, Standing::NoPoint);
    assert!(found.irreducible && found.checked, "{found:?}");
    assert_eq!(found.families, ["meet", "room"]);
    let rows: Vec<&str> = found.rows.iter().map(|row| row.row.as_str()).collect();
    assert_eq!(rows, ["meet[a]", "meet[b]", "room"]);
    assert_eq!(found.rows[2].says, "q[a] + q[b] ≤ 25");
    let way = |family: &str| {
        found.repairs.iter().find(|way| way.families == [family]).expect("a way").clone()
    };
    let room = way("room");
    assert!(room.proved && (room.violation.expect("a way") - 5.0).abs() < 1e-6, "{room:?}");
    assert_eq!(room.changes[0].0, "room");
    assert!((way("meet").violation.expect("a way") - 5.0).abs() < 1e-6);
    // All together, by the largest side of each: 5/25 of the room or 5/18 of the demand, at 60 for cap.
    let all = found.repairs.iter().find(|way| way.families.len() == 3).expect("all together");
    assert!((all.violation.expect("a way") - 0.2).abs() < 1e-6, "{all:?}");
}

#[test]
fn a_label_row_for_the_depot_too_leaves_no_whole_point() {
    // The pitfall of position labels: with the row for the depot no round trip is left, though the
    // relaxation has points.
    let entry = catalogue::find("atsp/labels").expect("it is shipped");
    let wrong = entry
        .text
        .replace("∀ (i,j) ∈ A : i ≠ r, j ≠ r", "∀ (i,j) ∈ A")
        .replace("∀ i ∈ V : i ≠ r", "∀ i ∈ V");
    let found = found(subject("A", &wrong, &stops(4)));
    assert_eq!(found.standing, Standing::NoWholePoint, "{found:?}");
    assert!(found.families.contains(&"order".to_owned()) && found.irreducible, "{found:?}");
    let order = found.repairs.iter().find(|way| way.families == ["order"]).expect("a way");
    assert!(order.proved && order.violation.is_some_and(|violation| violation > 0.0), "{order:?}");
}

#[test]
fn a_model_with_a_plan_says_so() {
    let found = found(shipped("A", "atsp/subtours", &stops(5)));
    assert_eq!((found.standing, found.rows.len()), (Standing::Feasible, 0));
}
