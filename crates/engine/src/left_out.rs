//! What a scenario asks for and this version of the engine does not do: it is said, never
//! silently ignored.

use record::scenario::Run;

/// The classes of cuts that there are.
const CLASSES: [&str; 4] = ["on demand", "gomory", "mir", "cover"];

/// What is left out of such a run, one sentence each; empty when nothing is.
#[must_use]
pub fn left_out(run: &Run) -> Vec<String> {
    let mut sentences = Vec::new();
    let general: Vec<&str> = run
        .cuts
        .iter()
        .flatten()
        .map(String::as_str)
        .filter(|class| !CLASSES.contains(class))
        .collect();
    if !general.is_empty() {
        let classes = general.join(", ");
        sentences.push(format!("general cuts of these classes are not in this version: {classes}"));
    }
    sentences
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn nothing_is_left_out_of_a_usual_run() {
        assert!(left_out(&Run::default()).is_empty());
        let on_demand = Run { cuts: Some(vec!["on demand".to_owned()]), ..Run::default() };
        assert!(left_out(&on_demand).is_empty());
    }

    #[test]
    fn each_thing_left_out_is_named() {
        let run =
            Run { cuts: Some(vec!["mir".to_owned(), "flow cover".to_owned()]), ..Run::default() };
        let sentences = left_out(&run);
        assert_eq!(sentences.len(), 1);
        assert!(sentences[0].ends_with(": flow cover"));
    }
}
