//! Data under other names are mapped in a table; several instances stand in one scenario.

use hullward_tests_browser::Outcome;
use hullward_tests_browser::browser::{Browser, SOON};
use hullward_tests_browser::visit::{Source, visit};
use record::file::parse;

use crate::lanes::{add, paste, status, value};

/// Two costs over depots, neither called by a word of the formulation: the page cannot choose.
const TABLES: &str = "\
depot\tpermit\trent
Ashford\t62\t6
Birchley\t55\t9

depot\tvillage\thaul
Ashford\tAbbey\t31
Ashford\tBarrow\t24
Birchley\tAbbey\t92
Birchley\tBarrow\t21
";

/// The same without the drive from Birchley to Barrow, and a datum of another shape beside it.
const GAPS: &str = "\
depot\tpermit
Ashford\t62
Birchley\t55

depot\tvillage\thaul
Ashford\tAbbey\t31
Ashford\tBarrow\t24
Birchley\tAbbey\t92
";

pub(crate) const TWO: &str = "hullward = 1
title = \"Two days\"

[[instance]]
title = \"Monday\"
text = '''
\tA\tB\tC
A\t\t1\t2
B\t3\t\t4
C\t5\t6\t
'''

[[instance]]
title = \"Tuesday\"
text = '''
\tA\tB\tC\tD
A\t\t10\t20\t30
B\t10\t\t15\t20
C\t20\t15\t\t12
D\t30\t20\t12\t
'''

[[rival]]
from = \"atsp/labels\"

[[rival]]
from = \"atsp/subtours\"
";

async fn text(browser: &Browser, selector: &str) -> Outcome<String> {
    let script = "return document.querySelector(arguments[0])?.textContent ?? ''";
    let text = browser.script_with(script, vec![selector.into()]).await?;
    Ok(text.as_str().unwrap_or_default().to_owned())
}

async fn holds(browser: &Browser, selector: &str, words: &str) -> Outcome<()> {
    let what = format!("{selector} holds {words:?}");
    browser.until(&what, SOON, async || Ok(text(browser, selector).await?.contains(words))).await
}

/// The row of a name of the rivals.
fn line(name: &str) -> String {
    format!("[data-testid=bindings] [data-name={name}]")
}

#[tokio::test(flavor = "multi_thread")]
async fn foreign_headings_are_mapped_in_the_table() -> Outcome<()> {
    visit(Source::File, async |browser| {
        let rivals =
            "hullward = 1\n[instance]\nreader = \"blocks\"\ntext = \"I\\na b\\n\"\n[[rival]]\nfrom = \"ufl/split\"\n";
        paste(browser, rivals).await?;
        browser.shows("I is a set of 2 labels").await?;
        paste(browser, TABLES).await?;
        browser.shows("depot is a set of 2 labels").await?;
        holds(browser, &line("c"), "assumed").await?;
        holds(browser, &line("I"), "assumed").await?;
        holds(browser, &line("f"), "line 6 of A: nothing suits f").await?;
        status(browser, "A", "could not be run").await?;
        let choice = browser.select(&format!("{} select", line("f"))).await?;
        choice.select_by_value("permit").await?;
        holds(browser, &line("f"), "chosen").await?;
        status(browser, "A", "root solved").await?;
        // Ashford alone: 62 + 31 + 24; the relaxation of split links opens it whole.
        assert_eq!(value(browser, "A", "root-bound").await?, Some(117.0));
        browser.still("[data-testid=undo]").await?.click().await?;
        status(browser, "A", "could not be run").await
    })
    .await
}

/// From the page as it opens to two rivals on tables that are no round trip: pasted, a family that suits
/// is taken, the one datum that two headings suit is chosen, all run. Each is a click but the choice, which
/// is two.
#[tokio::test(flavor = "multi_thread")]
async fn five_actions_lead_from_tables_of_another_problem_to_two_rivals_that_run() -> Outcome<()> {
    visit(Source::File, async |browser| {
        status(browser, "C", "root solved").await?;
        paste(browser, TABLES).await?;
        browser.shows("No rival finds all of its data here but by assumption.").await?;
        browser.find("button", "facility location, uncapacitated").await?.click().await?;
        let choice = browser.select(&format!("{} select", line("f"))).await?;
        choice.select_by_value("permit").await?;
        for letter in ["A", "B"] {
            status(browser, letter, "root solved").await?;
        }
        let gone = "return document.querySelector('[data-testid=suits]') === null";
        let gone = async || Ok(browser.script(gone).await? == true);
        browser.until("nothing else is offered", SOON, gone).await?;
        browser.still("[data-testid=run-all]").await?.click().await?;
        for letter in ["A", "B"] {
            // Ashford alone: 62 + 31 + 24.
            status(browser, letter, "closed: 117 is optimal").await?;
        }
        Ok(())
    })
    .await
}

/// A datum of the wrong shape names the `data` line, and one that lacks a value the cell as well.
#[tokio::test(flavor = "multi_thread")]
async fn a_wrong_shape_and_a_missing_cell_name_their_line() -> Outcome<()> {
    visit(Source::File, async |browser| {
        let own = "hullward = 1\n[instance]\ntext = '''\n".to_owned()
            + GAPS
            + "'''\n[[rival]]\nfrom = \"ufl/split\"\n";
        paste(browser, &own).await?;
        let failure = "[data-lane=A] [data-testid=failure]";
        holds(browser, failure, "rival line 7").await?;
        holds(browser, failure, "c[Birchley, Barrow] (a cell of haul)").await?;
        let choice = browser.select(&format!("{} select", line("c"))).await?;
        choice.select_by_value("permit").await?;
        holds(browser, &line("c"), "line 7 of A: permit is a table, which does not fit").await?;
        holds(browser, failure, "c (as permit) is indexed by 2").await?;
        // With the cell that lacked, it runs: Ashford alone, 62 + 31 + 24.
        let choice = browser.select(&format!("{} select", line("c"))).await?;
        choice.select_by_value("haul").await?;
        holds(browser, failure, "c[Birchley, Barrow]").await?;
        paste(browser, &format!("{GAPS}Birchley\tBarrow\t21\n")).await?;
        status(browser, "A", "root solved").await?;
        assert_eq!(value(browser, "A", "root-bound").await?, Some(117.0));
        Ok(())
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn a_choice_of_data_runs_only_the_rivals_that_use_it() -> Outcome<()> {
    visit(Source::File, async |browser| {
        let own = "hullward = 1\n[instance]\nbind = { f = \"rent\" }\ntext = '''\n".to_owned()
            + TABLES
            + "'''\n[[rival]]\nfrom = \"ufl/split\"\n[[rival]]\ntext = '''\nHauls\n\ndata\n  I  depots\n  \
               J  villages\n  c_{i,j}  ∀ i ∈ I, j ∈ J  haul\nminimise\n  Σ_{i ∈ I} Σ_{j ∈ J} c_{i,j} x_{i,j}\n\
               subject to\n  Σ_{i ∈ I} x_{i,j} = 1  ∀ j ∈ J  (serve)\n  x_{i,j} ≥ 0  ∀ i ∈ I, j ∈ J\n'''\n";
        paste(browser, &own).await?;
        // Ashford alone, 6 + 31 + 24; without rent each village its nearest depot, 31 + 21
        for (letter, bound) in [("A", 61.0), ("B", 52.0)] {
            status(browser, letter, "root solved").await?;
            assert_eq!(value(browser, letter, "root-bound").await?, Some(bound), "{letter}");
        }
        browser.still("[data-lane=B] [data-testid=run]").await?.click().await?;
        status(browser, "B", "closed").await?;
        let choice = browser.select(&format!("{} select", line("f"))).await?;
        choice.select_by_value("permit").await?;
        holds(browser, "[data-lane=A] [data-testid=root-bound]", "117").await?;
        status(browser, "B", "closed").await
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn two_instances_have_results_for_both() -> Outcome<()> {
    visit(Source::File, async |browser| {
        paste(browser, TWO).await?;
        holds(browser, "[data-testid=instances]", "Tuesday").await?;
        browser.shows("3 stops, 6 drives").await?;
        status(browser, "B", "root solved").await?;
        browser.still("[data-testid=run-instances]").await?.click().await?;
        // Monday A → B → C → A is 1 + 4 + 5 = 10, back 2 + 6 + 3 = 11; Tuesday symmetric:
        // A B D C A is 10 + 20 + 12 + 20 = 62, the best of its three rounds.
        for (day, best) in [(1, "10"), (2, "62")] {
            for rival in [2, 3] {
                let row =
                    format!("[data-testid=results] tbody:nth-of-type({day}) tr:nth-child({rival})");
                holds(browser, &row, if day == 1 { "" } else { "optimal" }).await?;
                holds(browser, &format!("{row} td:nth-child(3)"), best).await?;
            }
        }
        let second = browser.find("button", "Tuesday").await?;
        second.click().await?;
        browser.shows("4 stops, 12 drives").await?;
        let monday = "[data-testid=results] tbody:nth-of-type(1) tr:nth-child(2) td:nth-child(3)";
        holds(browser, monday, "10").await?;
        browser.still("[data-testid=add-instance]").await?.click().await?;
        holds(browser, "[data-testid=instances]", "Instance 3").await?;
        browser.still("[data-testid=remove-instance]").await?.click().await?;
        browser.still("[data-testid=undo]").await?.click().await?;
        holds(browser, "[data-testid=instances]", "Instance 3").await?;
        let titles = reopened(browser).await?;
        assert_eq!(titles, ["Monday", "Tuesday", "Instance 3"]);
        holds(browser, "[data-testid=instances]", "Instance 3").await
    })
    .await
}

/// Opens the page's own link anew, and the titles of the instances in it.
async fn reopened(browser: &Browser) -> Outcome<Vec<String>> {
    browser.script("navigator.clipboard.writeText = () => Promise.reject(new Error('no'))").await?;
    browser.still("[data-testid=copy-link]").await?.click().await?;
    browser.still("[data-testid=copy-now]").await?.click().await?;
    let field = browser.select("[data-testid=link-field]").await?;
    let link = field.prop("value").await?.unwrap_or_default();
    let (_, hash) = link.split_once('#').unwrap_or_default();
    let scenario = parse(&record::link::unpack(&link)?).scenario.ok_or("a scenario")?;
    browser.script_with("location.hash = arguments[0]", vec![hash.into()]).await?;
    Ok(scenario.instances().map(|text| text.title.clone()).collect())
}

#[tokio::test(flavor = "multi_thread")]
async fn an_instance_joins_with_the_keyboard() -> Outcome<()> {
    visit(Source::File, async |browser| {
        status(browser, "A", "root solved").await?;
        add(browser, "atsp/cuts").await?;
        let join = browser.select("[data-testid=add-instance]").await?;
        join.send_keys(&fantoccini::key::Key::Enter.to_string()).await?;
        holds(browser, "[data-testid=instances]", "Instance 2").await?;
        holds(browser, "[data-testid=results]", "Instance 2").await
    })
    .await
}
