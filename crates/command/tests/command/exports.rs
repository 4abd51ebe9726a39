//! What is written to be handed on: the record as an object and as drawings, the scenario without names.

use serde_json::Value;

use crate::launch::{err, hullward, out, status};

/// Shops and clients, invented; one rival is shipped, one in notation of its own.
const SCENARIO: &str = "\
hullward = 1
title = \"Secret shops\"
notes = \"For the board only.\"

[instance]
text = '''
shop\topening
Ashford\t62
Birchley\t55

shop\tvillage\thaul
Ashford\tAbbey\t31
Ashford\tBarrow\t24
Birchley\tAbbey\t92
Birchley\tBarrow\t21
'''

[[rival]]
from = \"ufl/joined\"
[[rival]]
title = \"Our own\"
text = '''
Sites of the firm
data
  I  shop
  J  village
  f_i  ∀ i ∈ I  opening
  c_{i,j}  ∀ i ∈ I, j ∈ J  haul
minimise
  Σ_{i ∈ I} f_i y_i + Σ_{i ∈ I, j ∈ J} c_{i,j} x_{i,j}
subject to
  Σ_{i ∈ I} x_{i,j} = 1       ∀ j ∈ J           (serve)
  x_{i,j} ≤ y_i               ∀ i ∈ I, j ∈ J    (link)
  x_{i,j} ≥ 0                 ∀ i ∈ I, j ∈ J
  y_i ∈ {0, 1}                ∀ i ∈ I
'''

[[study]]
kind = \"order\"
";

/// The root bounds of all rivals.
fn bounds(scenario: &str) -> Vec<f64> {
    let run = hullward(&["run", "--json", "-"], scenario);
    assert_eq!(status(&run), 0, "{}", err(&run));
    let lines = out(&run);
    let objects = lines.lines().map(|line| serde_json::from_str::<Value>(line).expect("JSON"));
    objects.filter_map(|object| object["root"]["bound"].as_f64()).collect()
}

#[test]
fn a_scenario_without_names_has_the_same_bounds_and_no_name() {
    let stripped = hullward(&["write", "--as", "stripped", "-"], SCENARIO);
    assert_eq!(status(&stripped), 0, "{}", err(&stripped));
    let text = out(&stripped);
    for secret in [
        "Secret", "board", "Ashford", "Birchley", "Abbey", "Barrow", "shop", "village", "haul",
        "opening", "firm", "Our own",
    ] {
        assert!(!text.contains(secret), "{secret}\n{text}");
    }
    assert!(text.contains("ufl/joined"), "{text}");
    assert_eq!(bounds(&text), bounds(SCENARIO));
    assert!(err(&stripped).contains("every rival was compared"), "{}", err(&stripped));
}

#[test]
fn costs_are_scaled_and_nothing_else() {
    let scaled = hullward(&["write", "--as", "stripped", "--scale", "0.5", "-"], SCENARIO);
    assert_eq!(status(&scaled), 0, "{}", err(&scaled));
    let halves: Vec<f64> = bounds(SCENARIO).iter().map(|bound| bound / 2.0).collect();
    assert_eq!(bounds(&out(&scaled)), halves);
    assert!(!out(&scaled).contains("62"), "{}", out(&scaled));
    let wrong = hullward(&["write", "--as", "stripped", "--scale", "-1", "-"], SCENARIO);
    assert_eq!(status(&wrong), 2);
    assert!(err(&wrong).contains("the factor must be over 0"), "{}", err(&wrong));
}

#[test]
fn a_model_in_mps_loses_its_names_and_costs_that_rows_need_are_not_scaled() {
    let mps = out(&hullward(&["write", "--rival", "A", "--as", "mps", "-"], SCENARIO));
    let text = format!("hullward = 1\n[[rival]]\nmps = '''\n{mps}'''\n");
    let stripped = hullward(&["write", "--as", "stripped", "--scale", "3", "-"], &text);
    assert_eq!(status(&stripped), 0, "{}", err(&stripped));
    let bare = out(&stripped);
    assert!(!bare.contains("Ashford") && !bare.contains("serve"), "{bare}");
    assert_eq!(bounds(&bare)[0], 3.0 * bounds(&text)[0]);
    // A price that is a cost and a coefficient of a row as well.
    let both =
        SCENARIO.replace("  x_{i,j} ≥ 0  ", "  Σ_{i ∈ I} f_i y_i ≤ 200  (budget)\n  x_{i,j} ≥ 0  ");
    let refused = hullward(&["write", "--as", "stripped", "--scale", "3", "-"], &both);
    assert_eq!(status(&refused), 2);
    assert!(err(&refused).contains("data that rows need too"), "{}", err(&refused));
    let plain = hullward(&["write", "--as", "stripped", "-"], &both);
    assert_eq!(status(&plain), 0, "{}", err(&plain));
}

#[test]
fn the_record_is_an_object_with_the_figures_that_it_is_made_of() {
    let record = hullward(&["write", "--as", "json", "-"], SCENARIO);
    assert_eq!(status(&record), 0, "{}", err(&record));
    let object: Value = serde_json::from_str(&out(&record)).expect("JSON");
    assert_eq!(object["hullward_record"], 1);
    assert_eq!(object["results"].as_array().map(Vec::len), Some(2));
    assert_eq!(object["studies"][0]["study"], "order");
    let pieces = object["record"].as_array().expect("pieces");
    assert_eq!(pieces[0]["title"], "Secret shops");
    let table = pieces.iter().find_map(|piece| piece["table"].as_object()).expect("a table");
    assert_eq!(table["rows"].as_array().map(Vec::len), Some(2));
    // The interval that the record tells in words, as figures: the optimum of these two shops.
    let interval = &object["intervals"][0];
    assert_eq!((&interval["sense"], &interval["closed"]), (&"minimise".into(), &true.into()));
    let optimum = object["results"][0]["search"]["incumbent"].as_f64().expect("an optimum");
    assert_eq!(
        (interval["bound"].as_f64(), interval["plan"].as_f64()),
        (Some(optimum), Some(optimum))
    );
    assert!(interval["unit"].is_string(), "{interval}");
    // The scenario in it is run to the same results.
    assert_eq!(bounds(object["scenario"].as_str().expect("text")), bounds(SCENARIO));
}

#[test]
fn the_drawings_stand_alone() {
    let drawn = hullward(&["write", "--as", "svg", "-"], SCENARIO);
    assert_eq!(status(&drawn), 0, "{}", err(&drawn));
    let text = out(&drawn);
    assert!(text.starts_with("<svg xmlns=\"http://www.w3.org/2000/svg\""), "{text}");
    assert!(text.contains("The order of the relaxations") && text.contains("<line"), "{text}");
    assert_eq!(text.matches("<svg").count(), text.matches("</svg>").count());
    let none = SCENARIO.split("[[study]]").next().expect("a head");
    let empty = out(&hullward(&["write", "--as", "svg", "-"], none));
    assert!(empty.contains("The record has no drawing."), "{empty}");
}
