//! A record of figures that are known.

use record::results::{Proof, RivalResult, RootReport, SearchReport, Status};
use record::scenario::{Rival, Scenario};
use record::study::{
    Equivalence, EquivalenceKind, EquivalenceLevel, Growth, GrowthPair, Numerics, Order,
    OrderLevel, Relation, Report, RivalNumerics,
};

use super::{Evidence, html, markdown};

fn result(rival: &str, bound: f64, nodes: u32) -> RivalResult {
    RivalResult {
        rival: rival.to_owned(),
        title: format!("Rival <{rival}>"),
        status: Status::Optimal,
        rows: 1_234,
        root: Some(RootReport { bound: Some(bound), proof: Proof::Exact, ..RootReport::default() }),
        search: Some(SearchReport {
            status: Status::Optimal,
            bound: Some(214.0),
            incumbent: Some(214.0),
            gap: Some(0.0),
            nodes,
            work: 100 * u64::from(nodes),
            checked: true,
            ..SearchReport::default()
        }),
        ..RivalResult::default()
    }
}

fn made(of: impl Fn(&Evidence<'_>) -> String) -> String {
    let rivals = vec![
        Rival { from: Some("atsp/labels".to_owned()), ..Rival::default() },
        Rival { from: Some("atsp/subtours".to_owned()), ..Rival::default() },
    ];
    let notes = "Which one?\n\n<script>alert(1)</script>".to_owned();
    let scenario = Scenario { title: "A & B".to_owned(), notes, rivals, ..Scenario::default() };
    let verdict = Equivalence {
        rivals: ["A".to_owned(), "B".to_owned()],
        equivalent: Some(true),
        level: EquivalenceLevel::Enumerated,
        kind: EquivalenceKind::Sets,
        ..Equivalence::default()
    };
    let rivals = || ["A".to_owned(), "B".to_owned()];
    let order = Order {
        rivals: rivals(),
        relation: Relation::NeverStronger,
        level: OrderLevel::Theorem,
        ..Order::default()
    };
    let pair = GrowthPair { rivals: rivals(), instances: 6, ..GrowthPair::default() };
    let growth = Growth { pairs: vec![pair], ..Growth::default() };
    of(&Evidence {
        scenario: &scenario,
        results: &[result("A", 151.2, 431), result("B", 208.5, 9)],
        studies: &[
            (String::new(), Report::Equivalence(Box::new(verdict))),
            (String::new(), Report::Order(Box::new(order))),
            (String::new(), Report::Growth(Box::new(growth))),
        ],
        facts: &["18 stops".to_owned()],
        statements: &["x ≤ 1 | y".to_owned(), String::new()],
        typeset: &[],
        unit: "minutes",
        engine: "0.1.0",
        link: "#s1.abc",
    })
}

#[test]
fn every_figure_of_the_findings_stands_in_the_record() {
    let text = made(markdown);
    for sentence in [
        "# A & B",
        "- A: root bound 151.2, checked; optimum 214 after 431 nodes, every leaf checked.",
        "- A and B admit the same plans: every plan of sub-instances was compared",
        "- a plan on which A and B differ: none was found, not all were tried",
        "- more instances: A and B could not be told apart",
        "| B Rival <B> | 1,234 | 0 | 208.5 | 214 | 214 | 9 | optimal |",
        "#s1.abc",
        "- The best possible plan costs 214 minutes: proved.",
        "- No choice is recorded",
        "- On these figures B is ahead: it was solved with 900 non-zeros touched.",
        "- A is behind it: 47.89 times the work; its relaxation is no stronger than that of B \
         (theorem); though not to be told from it over 6 instances of the growth study.",
        "come first.",
    ] {
        assert!(text.contains(sentence), "{sentence}\n{text}");
    }
}

/// The numbers in brackets of a line.
fn cited(line: &str) -> Vec<usize> {
    let marks = line.rsplit_once('[').and_then(|(_, rest)| rest.trim_end().strip_suffix(']'));
    let marks = marks.map_or_else(Vec::new, |marks| marks.split(", ").collect());
    marks.iter().filter_map(|mark| mark.parse().ok()).collect()
}

/// Every sentence that is made of figures names the table or drawing that they stand in.
#[test]
fn each_finding_is_traced_to_its_evidence() {
    let text = made(markdown);
    let heading = |mark: usize| {
        let of_mark = |line: &&str| line.starts_with("### ") && cited(line) == [mark];
        text.lines().find(of_mark).unwrap_or_else(|| panic!("no evidence {mark}\n{text}"))
    };
    let of_part = |from: &str, to: &str| {
        let (_, part) = text.split_once(from).unwrap_or_default();
        part.split(to).next().unwrap_or_default().lines().filter(|line| line.starts_with("- "))
    };
    let findings: Vec<&str> = of_part("## What was found", "## ").collect();
    assert!(findings.len() >= 5, "{text}");
    for finding in findings {
        let [mark] = cited(finding)[..] else { panic!("{finding}") };
        let wanted = match finding {
            _ if finding.contains("admit the same plans") => "### Are A and B the same problem?",
            _ if finding.contains('⪰') => "### Which of A and B is stronger?",
            _ if finding.contains("distinguishable") || finding.contains("neither was solved") => {
                "### Growth"
            }
            _ => "### Results",
        };
        assert!(heading(mark).starts_with(wanted), "{finding}: {}", heading(mark));
    }
    // Why the other one is behind rests on the results, the order and the growth study.
    let behind = of_part("## The choice", "## ").find(|line| line.contains("is behind it"));
    let cites: Vec<&str> = cited(behind.unwrap_or_default()).into_iter().map(heading).collect();
    let starts = ["### Results", "### Which of A and B is stronger?", "### Growth"];
    assert!(cites.len() == 3, "{cites:?}");
    cites.iter().zip(starts).for_each(|(cite, start)| assert!(cite.starts_with(start), "{cite}"));
    // On paper and on a screen the number leads there.
    let page = made(html);
    for mark in 1..=4 {
        assert_eq!(page.matches(&format!("id=\"e{mark}\"")).count(), 1, "{page}");
    }
    assert!(page.contains("[<a href=\"#e1\">1</a>]"), "{page}");
}

/// A study that a limit stopped was told as one that nobody had asked for; of three pairs of a growth study
/// one stood among the findings; the largest coefficient of every rival cited that of the first.
#[test]
fn what_is_open_is_said_and_every_condition_cites_its_own_section() {
    let scenario = Scenario::default();
    let pair = |a: &str, b: &str| GrowthPair {
        rivals: [a.to_owned(), b.to_owned()],
        ratio: 4.0,
        interval: (3.0, 5.0),
        instances: 9,
        distinguishable: true,
        ..GrowthPair::default()
    };
    let pairs = vec![pair("A", "B"), pair("A", "C"), pair("B", "C")];
    let of_rival = |rival: &str| RivalNumerics { rival: rival.to_owned(), ..Default::default() };
    let rivals = vec![of_rival("A"), of_rival("B")];
    let why = "it was stopped by the limit of 60 s".to_owned();
    let studies = [
        Report::Left { kind: "equivalence".to_owned(), why },
        Report::Growth(Box::new(Growth { pairs, ..Growth::default() })),
        Report::Numerics(Numerics { rivals }),
    ];
    let studies = studies.map(|report| (String::new(), report));
    let text = markdown(&Evidence {
        scenario: &scenario,
        results: &[result("A", 1.0, 1), result("B", 1.0, 1)],
        studies: &studies,
        facts: &[],
        statements: &[],
        typeset: &[],
        unit: "",
        engine: "",
        link: "",
    });
    // Results 1, the court 2, growth 3 and 4, numerics 5 and 6.
    for sentence in [
        "left out: it was stopped by the limit of 60 s",
        "- doubt that the rivals are the same problem: that was not settled\n",
        "- B takes 4 times the work (95 % interval 3 to 5, 9 instances) that A takes. [3]",
        "- C takes 4 times the work (95 % interval 3 to 5, 9 instances) that B takes. [3]",
        "- coefficients of A over 0, the largest that was seen [5]",
        "- coefficients of B over 0, the largest that was seen [6]",
    ] {
        assert!(text.contains(sentence), "{sentence}\n{text}");
    }
}

#[test]
fn what_was_typed_stays_text() {
    let page = made(html);
    assert!(page.contains("&lt;script&gt;") && !page.contains("<script"), "{page}");
    assert!(page.contains("<title>A &amp; B</title>"));
    assert!(page.contains("default-src 'none'"));
    // On A4 a table that a page divided had a scroll bar, and a formulation left half a page empty.
    let (_, print) = page.split_once("@media print{").unwrap_or_default();
    assert!(print.contains(".scroll{overflow:visible}") && !print.contains("pre,"), "{page}");
    for tag in ["p", "ul", "li", "table", "h2", "pre"] {
        let count = |mark: &str| page.matches(mark).count();
        assert_eq!(
            count(&format!("<{tag}>")) + count(&format!("<{tag} ")),
            count(&format!("</{tag}>")),
            "{tag}"
        );
    }
}
