//! A growth study by batch queues: the scripts that the command writes are run, and what is gathered is
//! the study that one process makes, byte for byte.

use std::path::{Path, PathBuf};
use std::process::Command;

use crate::launch::{err, hullward, out, status};

/// Three days of the same five stops, invented.
const SCENARIO: &str = "\
hullward = 1
title = \"Three days (invented)\"
seed = 3

[[instance]]
title = \"Monday\"
text = '''
Ash 0 0
Birch 9 2
Cedar 4 8
Elm 11 9
Fir 2 5
'''

[[instance]]
title = \"Tuesday\"
text = '''
Ash 1 0
Birch 9 7
Cedar 4 3
Elm 1 9
Fir 6 5
'''

[[instance]]
title = \"Wednesday\"
text = '''
Ash 3 3
Birch 8 2
Cedar 0 8
Elm 5 9
Fir 2 1
'''

[[rival]]
from = \"atsp/labels\"
[[rival]]
from = \"atsp/subtours\"

[run]
search = false

[[study]]
kind = \"growth\"
sizes = [3, 4]
seeds = [1, 2]
";

/// A folder with the scenario in a file whose name a shell must not take apart.
fn folder(name: &str) -> (PathBuf, PathBuf) {
    let folder = std::env::temp_dir().join(format!("hullward-{name}-{}", std::process::id()));
    std::fs::create_dir_all(&folder).expect("a folder");
    let file = folder.join("three days.toml");
    std::fs::write(&file, SCENARIO).expect("it is written");
    (folder, file)
}

/// The shell on a script in a folder, with the built command first in its path.
fn sh(folder: &Path, script: &str, task: Option<usize>) -> String {
    let own = Path::new(env!("CARGO_BIN_EXE_hullward")).parent().expect("a folder").to_owned();
    let path = std::env::var_os("PATH").unwrap_or_default();
    let all = std::iter::once(own).chain(std::env::split_paths(&path));
    let mut shell = Command::new("sh");
    shell.arg("-c").arg(script).current_dir(folder);
    shell.env("PATH", std::env::join_paths(all).expect("a path"));
    if let Some(task) = task {
        shell.env("SLURM_ARRAY_TASK_ID", task.to_string());
    }
    let output = shell.output().expect("a shell");
    assert!(output.status.success(), "{}", String::from_utf8_lossy(&output.stderr));
    String::from_utf8(output.stdout).expect("text")
}

/// What one process makes of the study.
fn whole(file: &Path) -> String {
    let run = hullward(&["run", "--json", &file.to_string_lossy()], "");
    assert_eq!(status(&run), 0, "{}", err(&run));
    out(&run).lines().last().expect("a study").to_owned()
}

fn script(file: &Path, queue: &str) -> String {
    let script = hullward(&["cells", "--job", queue, &file.to_string_lossy()], "");
    assert_eq!(status(&script), 0, "{}", err(&script));
    out(&script)
}

#[test]
fn an_array_job_gives_the_study_byte_for_byte() {
    let (folder, file) = folder("slurm");
    let script = script(&file, "slurm");
    // Two sizes, three days, two seeds, two rivals.
    assert!(script.starts_with("#!/bin/sh\n#SBATCH") && script.contains("--array=0-23\n"));
    for task in (0..24).rev() {
        sh(&folder, &script, Some(task));
    }
    let gathered = sh(&folder, "hullward gather --json cell-*.json", None);
    assert_eq!(gathered.trim_end(), whole(&file));
    std::fs::remove_dir_all(&folder).expect("it was there");
}

#[test]
fn gnu_parallel_gives_the_study_byte_for_byte() {
    let version = Command::new("parallel").arg("--version").output();
    let is_gnu = version.is_ok_and(|said| said.stdout.starts_with(b"GNU parallel"));
    if !is_gnu {
        eprintln!("skipped: GNU parallel is not installed; Debian has it as the package parallel");
        return;
    }
    let (folder, file) = folder("parallel");
    let gathered = sh(&folder, &script(&file, "parallel"), None);
    assert_eq!(gathered.trim_end(), whole(&file));
    std::fs::remove_dir_all(&folder).expect("it was there");
}

#[test]
fn several_instances_are_one_study_drawn_together_by_instance() {
    let (folder, file) = folder("days");
    let object: serde_json::Value = serde_json::from_str(&whole(&file)).expect("JSON");
    assert_eq!(
        (&object["study"], &object["data"]),
        (&"growth".into(), &"parts of 3 instances".into())
    );
    let cells = object["cells"].as_array().expect("cells");
    let days: std::collections::BTreeSet<&str> =
        cells.iter().filter_map(|cell| cell["instance"].as_str()).collect();
    assert_eq!(days, ["Monday", "Tuesday", "Wednesday"].into());
    assert_eq!((cells.len(), &object["pairs"][0]["instances"]), (24, &12.into()));
    let words = out(&hullward(&["run", &file.to_string_lossy()], ""));
    assert!(words.contains("both rest on 3 instances"), "{words}");
    std::fs::remove_dir_all(&folder).expect("it was there");
}

/// Rounds with and without the rows that forbid there and back.
fn in_notation() -> String {
    let text = "data\n  V  stops\n  A ⊆ V × V  drives\n  c_{i,j} ∀ (i,j) ∈ A  cost\nminimise\n  \
         Σ_{(i,j) ∈ A} c_{i,j} x_{i,j}\nsubject to\n  \
         Σ_{j : (i,j) ∈ A} x_{i,j} = 1  ∀ i ∈ V  (leave)\n  \
         Σ_{i : (i,j) ∈ A} x_{i,j} = 1  ∀ j ∈ V  (enter)\n";
    let pairs = "  x_{i,j} + x_{j,i} ≤ 1  ∀ (i,j) ∈ A  (once)\n";
    let domain = "  x_{i,j} ∈ {0,1}  ∀ (i,j) ∈ A\n";
    let head = SCENARIO.split("[[rival]]").next().expect("a head");
    format!(
        "{head}[[rival]]\ntext = '''\nPlain\n{text}{domain}'''\n[[rival]]\ntext = '''\nOnce\n{text}{pairs}{domain}'''\n\
         [run]\nsearch = false\n[[study]]\nkind = \"order\"\n[[study]]\nkind = \"variability\"\norders = 2\n"
    )
}

#[test]
fn an_order_that_no_theorem_settles_is_observed_on_all_instances() {
    let run = hullward(&["run", "--json", "-"], &in_notation());
    assert_eq!(status(&run), 0, "{}", err(&run));
    let lines = out(&run);
    let objects: Vec<serde_json::Value> =
        lines.lines().map(|line| serde_json::from_str(line).expect("JSON")).collect();
    let orders: Vec<_> = objects.iter().filter(|object| object["study"] == "order").collect();
    // One a day, and what they come to.
    assert_eq!(orders.len(), 4);
    let over = orders[3];
    assert_eq!((&over["relation"], &over["level"]), (&"⪯".into(), &"observed".into()), "{over}");
    assert_eq!(over["over"].as_array().map(Vec::len), Some(3));
    assert!(over["source"].as_str().is_some_and(|said| said.ends_with("certified on 3")), "{over}");
    let varied = objects.iter().find(|object| object["study"] == "variability").expect("one");
    assert_eq!(
        (&varied["instances"], varied["rivals"].as_array().map(Vec::len)),
        (&3.into(), Some(6))
    );
    let pair = &varied["pairs"][0];
    let runs: u64 = ["wins", "ties", "losses"].iter().filter_map(|of| pair[of].as_u64()).sum();
    assert_eq!(runs, 9, "{pair}");
    let words = out(&hullward(&["write", "--as", "markdown", "-"], &in_notation()));
    assert!(words.contains("B is never weaker than A – observed on 3 instances"), "{words}");
}

#[test]
fn a_script_needs_a_file_and_a_queue_that_is_known() {
    let piped = hullward(&["cells", "--job", "slurm", "-"], SCENARIO);
    assert_eq!(status(&piped), 2);
    assert!(err(&piped).contains("needs the name of a file"), "{}", err(&piped));
    let unknown = hullward(&["cells", "--job", "slurn", "a.toml"], "");
    assert!(err(&unknown).contains("did you mean slurm?"), "{}", err(&unknown));
}
