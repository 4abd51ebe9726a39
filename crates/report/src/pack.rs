//! The regression pack as JSON.

use record::pack::{Expected, Pack};

use crate::certificate::{list, text};

/// A pack as one JSON object, numbers in full.
#[must_use]
pub fn json(pack: &Pack) -> String {
    let digest = pack.digest.as_ref().map_or_else(null, |digest| text(digest));
    format!(
        "{{\n  \"hullward_pack\": {},\n  \"engine\": {},\n  \"tolerance\": {},\n  \"digest\": {digest},\n  \
         \"scenario\": {},\n  \"expected\": {}\n}}\n",
        pack.hullward_pack,
        text(&pack.engine),
        pack.tolerance,
        text(&pack.scenario),
        list(&pack.expected, of_one),
    )
}

fn of_one(one: &Expected) -> String {
    let number = |value: Option<f64>| value.map_or_else(null, |value| value.to_string());
    let fields = [
        ("instance", text(&one.instance)),
        ("rival", text(&one.rival)),
        ("title", text(&one.title)),
        ("status", one.status.map_or_else(null, |status| text(status.word()))),
        ("rows", one.rows.to_string()),
        ("columns", one.columns.to_string()),
        ("nonzeros", one.nonzeros.to_string()),
        ("root_bound", number(one.root_bound)),
        ("checked_bound", one.checked_bound.as_ref().map_or_else(null, |bound| text(bound))),
        ("optimum", number(one.optimum)),
        ("smallest_decade", number(one.smallest_decade.map(f64::from))),
        ("largest_decade", number(one.largest_decade.map(f64::from))),
    ];
    let fields: Vec<String> =
        fields.iter().map(|(name, value)| format!("\"{name}\": {value}")).collect();
    format!("{{{}}}", fields.join(", "))
}

fn null() -> String {
    "null".to_owned()
}

#[cfg(test)]
mod tests {
    use record::results::{RivalResult, Status};
    use record::scenario::Scenario;

    use super::*;

    #[test]
    fn a_pack_is_one_object_whose_texts_are_escaped() {
        let scenario = Scenario { title: "A \"round\"".to_owned(), ..Scenario::default() };
        let one = RivalResult {
            rival: "A".to_owned(),
            rows: 3,
            status: Status::Infeasible,
            ..RivalResult::default()
        };
        let json = json(&Pack::new("0.1.0", &scenario, &[one]));
        assert!(json.starts_with("{\n  \"hullward_pack\": 1,"), "{json}");
        assert!(json.contains("\"scenario\": \"hullward = 1\\u000a"), "{json}");
        assert!(json.contains("\\\"round"), "{json}");
        assert!(json.contains("\"status\": \"infeasible\", \"rows\": 3,"), "{json}");
        assert!(json.contains("\"optimum\": null"), "{json}");
    }
}
