//! WCAG 2.2 AA by axe-core, in every state of the page; what lacks axe-core says so.

use std::fs;

use hullward_tests_browser::Outcome;
use hullward_tests_browser::browser::{Browser, SOON};
use hullward_tests_browser::screen::Screen;
use hullward_tests_browser::visit::{Source, visit};

use crate::data::TWO;
use crate::lanes::{button, part, paste, paste_long_work, status};

/// The rules of WCAG 2.0 to 2.2, A and AA, and axe-core's own of good practice.
const RUN: &str = "
    const done = arguments[arguments.length - 1];
    const tags = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa', 'best-practice'];
    const words = (rule) => `${rule.id}: ${rule.help}: `
      + rule.nodes.slice(0, 3).map((node) => node.html.slice(0, 200)).join(' | ');
    axe.run(document, { runOnly: tags }).then(
      (found) => done([found.violations.map(words), found.passes.length]),
      (error) => done([[`${error}`], 0]));
";

/// The script of axe-core, which `cargo xtask test` fetches; `None` where it was not fetched, which
/// in CI is an error.
#[allow(clippy::print_stdout, reason = "a test that is left out says so")]
fn axe() -> Outcome<Option<String>> {
    let path =
        concat!(env!("CARGO_MANIFEST_DIR"), "/../../target/npm/node_modules/axe-core/axe.min.js");
    match fs::read_to_string(path) {
        Ok(script) => Ok(Some(script)),
        Err(error) if std::env::var_os("CI").is_some() => {
            Err(format!("axe-core is not at {path}: {error}").into())
        }
        Err(_) => {
            println!(
                "LEFT OUT: axe-core is not installed; `cargo xtask test --only browser` fetches it by npm"
            );
            Ok(None)
        }
    }
}

/// Nothing is violated as the page stands, light and dark, and on a phone.
async fn holds(browser: &Browser, axe: &str, state: &str) -> Outcome<()> {
    for (width, dark) in [(1280, false), (1280, true), (390, false)] {
        browser.look(Screen { width, dark }).await?;
        browser.script(axe).await?;
        let found = browser.script_async(RUN, Vec::new()).await?;
        let violations = found[0].as_array().cloned().unwrap_or_default();
        assert!(violations.is_empty(), "{state}, {width} pixels, dark {dark}: {violations:#?}");
        assert!(found[1].as_u64().unwrap_or(0) > 20, "{state}: so few rules passed: {found}");
    }
    Ok(())
}

/// Depots and villages whose headings are nobody's names of data.
const UNMAPPED: &str = "hullward = 1
[instance]
text = '''
depot\tpermit\trent
Ashford\t62\t6
Birchley\t55\t9

depot\tvillage\thaul
Ashford\tAbbey\t31
Ashford\tBarrow\t24
Birchley\tAbbey\t92
Birchley\tBarrow\t21
'''
[[rival]]
from = \"ufl/split\"
";

/// Results of a solver, one of them no number.
const MISTAKEN: &str = "instance\trival\tbound\tplan\tnodes\ttime\n\
    Monday\tA\t10\t10\t70\t3\nMonday\tB\t9\t9\t3\t1\n\
    Tuesday\tA\t62\t62\tmany\t15\nTuesday\tB\t62\t62\t1\t3\n";

const UNFOLD: &str =
    "document.querySelectorAll('details').forEach((each) => { each.open = true; })";

#[tokio::test(flavor = "multi_thread")]
async fn wcag_is_kept_from_the_empty_page_to_everything_open() -> Outcome<()> {
    let Some(axe) = axe()? else { return Ok(()) };
    visit(Source::File, async |browser| {
        for letter in ["A", "B", "C"] {
            status(browser, letter, "root solved").await?;
        }
        holds(browser, &axe, "as it opens").await?;
        for letter in ["B", "C"] {
            button(browser, letter, "run").await?.click().await?;
            status(browser, letter, "closed").await?;
        }
        browser.select("[data-testid=moment]").await?.select_by_value("nodes").await?;
        browser.still("[data-testid=browse]").await?.click().await?;
        browser.find("button", "Write my own").await?.click().await?;
        browser.still("[data-testid=kept]").await?.click().await?;
        browser.still("[data-testid=copy-link]").await?.click().await?;
        for _ in 0..2 {
            browser.script(UNFOLD).await?;
            browser.shows("Find").await?;
        }
        holds(browser, &axe, "everything open").await
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn wcag_is_kept_with_errors_and_with_an_infeasible_rival() -> Outcome<()> {
    let Some(axe) = axe()? else { return Ok(()) };
    visit(Source::File, async |browser| {
        status(browser, "C", "root solved").await?;
        paste(browser, "a b c\n1 2 x\n3 4 5 6\n").await?;
        browser.shows("line 2").await?;
        holds(browser, &axe, "a broken table").await?;
        paste(browser, include_str!("../../fixtures/no-round.toml")).await?;
        browser.shows("no plan").await?;
        holds(browser, &axe, "no plan").await
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn wcag_is_kept_while_rivals_run_and_at_a_node_of_a_paused_search() -> Outcome<()> {
    let Some(axe) = axe()? else { return Ok(()) };
    visit(Source::File, async |browser| {
        paste_long_work(browser).await?;
        button(browser, "A", "run").await?.click().await?;
        status(browser, "A", "searching").await?;
        holds(browser, &axe, "a search that runs").await?;
        button(browser, "A", "pause").await?.click().await?;
        status(browser, "A", "paused").await?;
        let open = "document.querySelectorAll('[data-lane=A] details').forEach((each) => { each.open = true; })";
        browser.script(open).await?;
        let choose = "document.querySelectorAll('[data-lane=A] .item')[3].click()";
        browser.until("the nodes are listed", SOON, async || Ok(browser.script(choose).await.is_ok())).await?;
        browser.select("[data-testid=inspector] table").await?;
        browser.script(UNFOLD).await?;
        holds(browser, &axe, "a node that is looked at").await
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn wcag_is_kept_where_one_writes_a_rival_and_makes_mistakes() -> Outcome<()> {
    let Some(axe) = axe()? else { return Ok(()) };
    visit(Source::File, async |browser| {
        status(browser, "C", "root solved").await?;
        button(browser, "A", "notation").await?.click().await?;
        holds(browser, &axe, "a formulation that is read").await?;
        button(browser, "A", "edit").await?.click().await?;
        let field = browser.select(&part("A", "notation-text")).await?;
        let sound = field.prop("value").await?.unwrap_or_default();
        browser.paste(&field, &sound.replace("c_{i,j} x_{i,j}", "c_{i,j} y_{i,j}")).await?;
        button(browser, "A", "mend").await?;
        holds(browser, &axe, "an error in the notation").await?;
        button(browser, "A", "help").await?.click().await?;
        browser.select("[data-testid=guide] textarea").await?;
        holds(browser, &axe, "help on the notation").await
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn wcag_is_kept_in_the_catalogue_at_an_entry() -> Outcome<()> {
    let Some(axe) = axe()? else { return Ok(()) };
    visit(Source::File, async |browser| {
        status(browser, "C", "root solved").await?;
        browser.still("[data-testid=browse]").await?.click().await?;
        let search = browser.select("[data-testid=search]").await?;
        browser.paste(&search, "desrochers lifted round trip").await?;
        browser.find("button", "Lifted position labels").await?.click().await?;
        browser.select("[data-testid=entry] [data-testid=typeset]").await?;
        holds(browser, &axe, "an entry of the catalogue").await
    })
    .await
}

/// Two instances with studies of both, and results of a solver with a mistake.
#[tokio::test(flavor = "multi_thread")]
async fn wcag_is_kept_with_several_instances_and_their_studies() -> Outcome<()> {
    let Some(axe) = axe()? else { return Ok(()) };
    visit(Source::File, async |browser| {
        paste(browser, TWO).await?;
        status(browser, "B", "root solved").await?;
        let there = async |words: &str| {
            let what = format!("{words} is shown");
            let shown = async || Ok(browser.text().await?.contains(words));
            browser.until(&what, 4 * SOON, shown).await
        };
        browser.still("[data-testid=study-ladder-all]").await?.click().await?;
        there("Tuesday – ").await?;
        let table = browser.select("[data-testid=production-text]").await?;
        browser.paste(&table, MISTAKEN).await?;
        browser.still("[data-testid=study-production]").await?.click().await?;
        there("many").await?;
        browser.script(UNFOLD).await?;
        holds(browser, &axe, "studies of two instances").await
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn wcag_is_kept_where_names_of_data_are_mapped() -> Outcome<()> {
    let Some(axe) = axe()? else { return Ok(()) };
    visit(Source::File, async |browser| {
        paste(browser, UNMAPPED).await?;
        browser.shows("depot is a set of 2 labels").await?;
        browser.select("[data-testid=bindings] select").await?;
        holds(browser, &axe, "names to be mapped").await
    })
    .await
}
