//! A formulation as it is typed: what is wrong with it, its names, and its size where that is
//! quickly known. Nothing is solved.

use std::collections::BTreeMap;

use instance::Instance;
use model::Model;
use notation::syntax::Formulation;
use notation::{Binding, Bound, Checked, Diagnostic, Expansion, Limits, Progress, utf16_range};
use record::message::{CheckJob, CheckReport, CheckedSize, Complaint, Remark, TextEdit};
use record::typeset::Typeset;

use crate::map::{of_diagnostic, of_typeset};
use crate::readings::Readings;

/// Non-zeros looked at for the size: a few milliseconds. What is larger is left to its lane.
const GLANCE: u64 = 400_000;

/// Parses and checks a text; binds it to the instance, and expands it if it is small, when
/// nothing is wrong so far.
pub(crate) fn check(job: &CheckJob, readings: &mut Readings) -> CheckReport {
    let parse = notation::parse(&job.text);
    let (checked, found) = notation::check(&parse.tree);
    let found = [parse.diagnostics.clone(), found].concat();
    let mut found = notation::offers(&job.text, &parse, &checked, found);
    let mut size = None;
    // An instance that cannot be read is complained of where it stands.
    if let Some(given) = &job.instance
        && !found.iter().any(Diagnostic::is_error)
        && let Ok(reading) = readings.read(given)
        && let Some(instance) = &reading.instance
    {
        let (names, assumed) = notation::assumed(&job.text, &checked, instance, &given.bind);
        found.extend(assumed);
        match expand(&parse.tree, &checked, instance, &names) {
            Ok(None) => {}
            Ok(Some((model, further))) => {
                size = Some(size_of(&model));
                found.extend(further);
            }
            Err(wrong) => found.extend(wrong),
        }
    }
    let (errors, others): (Vec<_>, Vec<_>) = found.iter().partition(|one| one.is_error());
    CheckReport {
        number: job.number,
        remarks: errors.into_iter().chain(others).map(|one| remark(&job.text, one)).collect(),
        title: checked.title().to_owned(),
        data: names(&[checked.data(), checked.definitions()].concat()),
        variables: names(&checked.variables()),
        families: names(&checked.families()),
        size,
        typeset: of_typeset(&job.text, &notation::typeset(&parse.tree, &job.text), &checked),
    }
}

/// The model with its warnings; `None` when it is too large for a glance.
fn expand(
    tree: &Formulation,
    checked: &Checked,
    instance: &Instance,
    bind: &BTreeMap<String, String>,
) -> Result<Option<(Model, Vec<Diagnostic>)>, Vec<Diagnostic>> {
    let mut binding = Binding::new(checked, bind);
    if binding.advance(GLANCE, instance) == Progress::Working {
        return Ok(None);
    }
    let bound: Bound = binding.finish()?;
    let mut expansion = Expansion::new(bound, &BTreeMap::new(), Limits::default());
    match expansion.advance(GLANCE) {
        Progress::Working => Ok(None),
        Progress::Finished => expansion.finish().map(|(model, mut found)| {
            found.extend(notation::lint(tree, checked, &model));
            Some((model, found))
        }),
    }
}

fn size_of(model: &Model) -> CheckedSize {
    let counted = model.statistics();
    CheckedSize { rows: counted.rows, columns: counted.columns, nonzeros: counted.nonzeros }
}

fn remark(text: &str, found: &Diagnostic) -> Remark {
    let edits = found.mends.iter().filter_map(|mend| Some((mend, mend.edit.as_ref()?)));
    let mends = edits.map(|(mend, edit)| {
        let units = utf16_range(text, &edit.span);
        TextEdit {
            label: mend.label.clone(),
            start: units.start,
            end: units.end,
            text: edit.text.clone(),
        }
    });
    let by_hand = found.mends.iter().filter(|mend| mend.edit.is_none());
    let by_hand: Vec<&str> = by_hand.map(|mend| mend.label.as_str()).collect();
    let complaint = Complaint { mend: by_hand.join("; "), ..of_diagnostic(text, found) };
    Remark { complaint, mends: mends.collect() }
}

fn names(names: &[&str]) -> Vec<String> {
    names.iter().map(|&name| name.to_owned()).collect()
}

/// Journal notation set as mathematics; without rows where there is none.
#[must_use]
pub(crate) fn typeset(text: &str) -> Typeset {
    let parse = notation::parse(text);
    let (checked, _) = notation::check(&parse.tree);
    of_typeset(text, &notation::typeset(&parse.tree, text), &checked)
}

#[cfg(test)]
mod tests {
    use super::*;
    use record::scenario::InstanceText;

    const ASSIGNMENT: &str = "Assignment\n\ndata\n  V  stops\n  A ⊆ V × V  drives\n  \
        c_{i,j}  ∀ (i,j) ∈ A  minutes\nminimise\n  Σ_{(i,j) ∈ A} c_{i,j} x_{i,j}\n\
        subject to\n  Σ_{j : (i,j) ∈ A} x_{i,j} = 1  ∀ i ∈ V  (leave)\n  \
        Σ_{i : (i,j) ∈ A} x_{i,j} = 1  ∀ j ∈ V  (enter)\n  x_{i,j} ∈ {0,1}  ∀ (i,j) ∈ A\n";

    fn checked(text: &str, table: &str) -> CheckReport {
        let instance = InstanceText { text: table.to_owned(), ..InstanceText::default() };
        let job = CheckJob { number: 7, text: text.to_owned(), instance: Some(instance) };
        check(&job, &mut Readings::default())
    }

    const TABLE: &str = "\tA\tB\tC\nA\t\t1\t2\nB\t3\t\t4\nC\t5\t6\t\n";

    #[test]
    fn a_sound_text_has_names_and_a_size() {
        let report = checked(ASSIGNMENT, TABLE);
        assert!(report.is_sound(), "{:?}", report.remarks);
        assert_eq!((report.number, report.title.as_str()), (7, "Assignment"));
        assert_eq!(report.data, ["V", "A", "c"]);
        assert_eq!(report.variables, ["x"]);
        assert_eq!(report.families, ["leave", "enter"]);
        assert_eq!(report.size, Some(CheckedSize { rows: 6, columns: 6, nonzeros: 12 }));
    }

    #[test]
    fn an_unknown_name_has_its_place_and_edits_that_mend_it() {
        let report = checked(&ASSIGNMENT.replace("c_{i,j} x_{i,j}", "c_{i,j} y_{i,j}"), TABLE);
        assert!(!report.is_sound() && report.size.is_none());
        let remark = &report.remarks[0];
        assert_eq!(remark.complaint.line, 8);
        assert!(remark.complaint.message.contains('y'), "{remark:?}");
        assert!(!remark.mends.is_empty(), "{remark:?}");
        let told = |edit: &TextEdit| remark.complaint.mend.contains(&edit.label);
        assert!(!remark.mends.iter().any(told), "what a button does is told once: {remark:?}");
    }

    #[test]
    fn a_text_is_set_with_the_places_of_its_lines() {
        let text = ASSIGNMENT.replace("  (enter)", "").replace("i ∈ V  (leave)", "≤ 𝔹  (leave)");
        let report = checked(&text, TABLE);
        let units: Vec<u16> = text.encode_utf16().collect();
        let typed = |row: &record::typeset::TypesetRow| {
            String::from_utf16(&units[row.start as usize..row.end as usize]).expect("whole letters")
        };
        let rows = &report.typeset.rows;
        assert_eq!(rows.iter().filter(|row| row.describes).count(), 3);
        let model: Vec<_> = rows.iter().filter(|row| !row.describes).collect();
        let heads: Vec<&str> = model.iter().map(|row| row.head.as_str()).collect();
        assert_eq!(heads, ["minimise", "subject to", "", ""]);
        assert!(model[1].unread.ends_with("(leave)"), "{model:?}");
        assert_eq!(typed(model[2]), "Σ_{i : (i,j) ∈ A} x_{i,j} = 1  ∀ j ∈ V");
        assert_eq!((model[2].words.as_str(), model[3].words.as_str()), ("row 1", ""));
        assert!(checked("", TABLE).typeset.rows.is_empty());
    }

    #[test]
    fn what_only_the_instance_shows_is_told_too() {
        let weighted = ASSIGNMENT.replace("minutes\n", "minutes\n  q ≥ 0  weight\n");
        let report = checked(&weighted.replace("c_{i,j} x", "q c_{i,j} x"), TABLE);
        assert!(!report.is_sound());
        assert!(report.remarks[0].complaint.code.starts_with("data."), "{:?}", report.remarks);
    }

    #[test]
    fn a_table_under_another_name_is_taken_and_that_is_said() {
        let report = checked(&ASSIGNMENT.replace("c_{i,j}", "w_{i,j}"), TABLE);
        assert!(report.is_sound(), "{:?}", report.remarks);
        let said = |remark: &Remark| remark.complaint.message.contains("w is taken from c");
        assert!(report.remarks.iter().any(said), "{:?}", report.remarks);
    }

    #[test]
    fn a_text_is_checked_without_an_instance_too() {
        let job = CheckJob { text: ASSIGNMENT.to_owned(), ..CheckJob::default() };
        let report = check(&job, &mut Readings::default());
        assert!(report.is_sound() && report.size.is_none());
        assert_eq!(report.variables, ["x"]);
        assert!(checked(ASSIGNMENT, "no table").is_sound());
        assert!(!check(&CheckJob::default(), &mut Readings::default()).is_sound());
    }
}
