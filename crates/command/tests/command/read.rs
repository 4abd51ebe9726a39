//! `hullward read`: files of several instances, what rivals take under other names, and the size
//! of their models.

use crate::launch::hullward;

/// What `hullward read -` prints of a text, and on standard error, with its status.
fn read(text: &str) -> (String, String, i32) {
    let output = hullward(&["read", "-"], text);
    let text = |bytes: Vec<u8>| String::from_utf8(bytes).expect("text");
    (text(output.stdout), text(output.stderr), output.status.code().expect("no signal"))
}

/// Two instances in the form of the OR-Library's gap files.
const TWO: &str = "2\n1 2\n3 4\n5 6\n7\n2 2\n1 2\n3 4\n5 6\n7 8\n9 10\n";

#[test]
fn a_file_of_several_instances_says_how_to_take_another() {
    let (out, err, status) = read(TWO);
    assert_eq!((status, err.as_str()), (0, ""));
    for said in [
        "(read as assignment)",
        "Instance 1 of the 2 in this file.",
        "c: 2 numbers from 3 to 4, sum 7, all whole, no two alike.",
        "reader = \"assignment 2\"",
        "    2 – 2 agents, 2 jobs",
    ] {
        assert!(out.contains(said), "{said}: {out}");
    }
    let scenario = |reader: &str| {
        read(&format!("hullward = 1\n[instance]\nreader = \"{reader}\"\ntext = '''\n{TWO}'''\n"))
    };
    let (out, _, status) = scenario("assignment 2");
    assert_eq!(status, 0);
    assert!(out.contains("Instance 2 of the 2 in this file."), "{out}");
    let (_, err, status) = scenario("assignment 3");
    assert_eq!(status, 2);
    assert!(err.contains("none of number 3") && err.contains("from 1 to 2"), "{err}");
    let (_, err, status) = scenario("asignment 2");
    assert_eq!(status, 2);
    assert!(err.contains("did you mean \"assignment\"?"), "{err}");
}

#[test]
fn what_rivals_take_under_other_names_is_told_with_its_reason() {
    let text = "hullward = 1\n[instance]\ntext = '''\ndepot;opening\nAsh;62\nBirch;55\n\n\
        depot;village;haul\nAsh;Abbey;31\nAsh;Barrow;24\nBirch;Abbey;92\nBirch;Barrow;21\n'''\n\
        bind = { f = \"opening\" }\n[[rival]]\nfrom = \"ufl/split\"\n";
    let (out, err, status) = read(text);
    assert_eq!((status, err.as_str()), (0, ""), "{out}");
    for said in [
        "  I takes depot: assumed, the only set that holds the labels of f, c\n",
        "  f takes opening: as the scenario says\n",
        "  c takes haul: assumed, the only table over 2 indices that is free\n",
        "A  Split links",
        "6 columns (2 of them 0 or 1)",
    ] {
        assert!(out.contains(said), "{said}: {out}");
    }
    let (out, ..) = read(&text.replace("f = \"opening\"", "f = \"haul\""));
    assert!(out.contains("line 6 of A: haul is a table, which does not fit"), "{out}");
}
