//! Solutions are drawn by what their variables stand over, and a proof that walks in a circle is
//! shown as that circle.

use fantoccini::key::Key;
use hullward_tests_browser::Outcome;
use hullward_tests_browser::browser::{Browser, SOON};
use hullward_tests_browser::visit::{Source, visit};

use crate::lanes::{part, paste, status};

const PATHS: &str = include_str!("../../../../scenarios/paths.toml");
const LOTS: &str = include_str!("../../../../scenarios/lots.toml");

/// How many elements stand in the drawing of the node.
async fn count(browser: &Browser, selector: &str) -> Outcome<u64> {
    let script = "return document.querySelectorAll('[data-testid=picture] ' + arguments[0]).length";
    let count = browser.script_with(script, vec![selector.into()]).await?;
    Ok(count.as_u64().unwrap_or_default())
}

async fn drawn(browser: &Browser, selector: &str, expected: u64) -> Outcome<()> {
    let what = format!("{expected} of {selector} are drawn");
    browser.until(&what, SOON, async || Ok(count(browser, selector).await? == expected)).await
}

async fn words(browser: &Browser, name: &str) -> Outcome<String> {
    Ok(browser.select(&format!("[data-testid={name}]")).await?.text().await?)
}

#[tokio::test(flavor = "multi_thread")]
async fn a_path_is_drawn_from_its_start_to_its_end() -> Outcome<()> {
    visit(Source::File, async |browser| {
        paste(browser, PATHS).await?;
        browser.shows("Car can be reached from Garage").await?;
        assert!(!browser.text().await?.contains("there is no round"));
        status(browser, "A", "root solved").await?;
        browser.find("heading", "Node 1 of A").await?;
        drawn(browser, ".arc", 6).await?;
        let picture = words(browser, "picture").await?;
        assert!(picture.contains("Garage (start)") && picture.contains("Car (end)"), "{picture}");
        Ok(())
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn a_negative_cycle_is_shown_as_a_cycle() -> Outcome<()> {
    let text = PATHS.replace("Island School 2\n", "Island School 2\nSchool Island -5\n");
    visit(Source::File, async |browser| {
        paste(browser, &text).await?;
        browser.shows("Car can be reached from Garage").await?;
        for (letter, state) in [("A", "unbounded"), ("B", "infeasible")] {
            status(browser, letter, state).await?;
            let show = browser.select(&part(letter, "show-root")).await?;
            show.send_keys(&Key::Enter.to_string()).await?;
            browser.find("heading", &format!("Node 1 of {letter}")).await?;
            let words = words(browser, "cycle").await?;
            let either = ["Island → School → Island", "School → Island → School"];
            let told = either.iter().any(|cycle| words == format!("{cycle}, total −3"));
            assert!(told, "{words}");
            drawn(browser, ".arc", 2).await?;
        }
        Ok(())
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn lots_are_bars_by_period_and_another_drawing_can_be_chosen() -> Outcome<()> {
    visit(Source::File, async |browser| {
        paste(browser, LOTS).await?;
        status(browser, "C", "root solved").await?;
        browser.find("heading", "Node 1 of A").await?;
        // x and y in 12 months, s in 12 and at the start
        drawn(browser, "[data-testid=bars] rect", 37).await?;
        let bars = browser.select("[data-testid=bars]").await?.text().await?;
        assert!(bars.contains('x') && bars.contains("12"), "{bars}");
        let nodes = format!("{} summary", part("C", "twin"));
        browser.still(&nodes).await?.click().await?;
        let listed = async || Ok(!browser.find_all("treeitem", "").await?.is_empty());
        browser.until("the nodes are listed", SOON, listed).await?;
        browser.find_all("treeitem", "").await?[0].click().await?;
        browser.find("heading", "Node 1 of C").await?;
        let choice = browser.select("[data-testid=drawn]").await?;
        let name = choice.text().await?;
        let grid = name.lines().find(|line| line.contains("grid")).unwrap_or_default().trim();
        choice.select_by_label(grid).await?;
        drawn(browser, "[data-testid=heat]", 1).await?;
        assert_eq!(count(browser, "[data-testid=heat] tbody tr").await?, 12);
        Ok(())
    })
    .await
}
