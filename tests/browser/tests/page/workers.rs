//! A worker that fails or is killed is replaced, and the page goes on.

use std::time::Duration;

use hullward_tests_browser::Outcome;
use hullward_tests_browser::browser::{Browser, SOON};
use hullward_tests_browser::visit::{Source, visit_chromium};

use crate::lanes::{add, button, paste_long_work, status, text};

/// Makes the page's later engine workers known to the test.
const KEEP_WORKERS: &str = "
    globalThis.workersOfTest = [];
    const Plain = globalThis.Worker;
    globalThis.Worker = class extends Plain {
      constructor(...given) { super(...given); if (given[0] === hullward.scripts.engine) workersOfTest.push(this); }
    };
";

/// Adds a rival and runs it, so that its worker is known, and waits until it searches.
async fn running_lane(browser: &Browser) -> Outcome<()> {
    paste_long_work(browser).await?;
    browser.script(KEEP_WORKERS).await?;
    add(browser, "atsp/labels").await?;
    status(browser, "D", "root solved").await?;
    button(browser, "D", "run").await?.click().await?;
    status(browser, "D", "searching").await
}

#[tokio::test(flavor = "multi_thread")]
async fn a_worker_that_fails_is_replaced_and_its_tree_grown_again() -> Outcome<()> {
    visit_chromium(Source::File, async |browser| {
        running_lane(browser).await?;
        let grown = async |least: u64| Ok(nodes(browser).await? >= least);
        browser.until("a tree of some size", SOON, async || grown(50).await).await?;
        let before = nodes(browser).await?;
        // What is no request makes the worker fail, and say so.
        browser.script("workersOfTest.at(-1).postMessage('no request')").await?;
        let noticed = async || Ok(!text(browser, "D", "notice").await?.is_empty());
        browser.until("the lane says that its worker failed", SOON, noticed).await?;
        let started = browser.script("return workersOfTest.length").await?;
        assert_eq!(started, 2, "one worker in place of the other");
        browser.until("the tree is grown again", SOON, async || grown(before).await).await?;
        goes_on(browser).await
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn a_worker_that_does_not_answer_to_stop_is_replaced() -> Outcome<()> {
    visit_chromium(Source::File, async |browser| {
        running_lane(browser).await?;
        browser.script("workersOfTest.at(-1).terminate()").await?;
        button(browser, "D", "stop").await?.click().await?;
        let noticed = async || Ok(text(browser, "D", "notice").await?.contains("Stop"));
        browser.until("the lane says why", Duration::from_secs(5), noticed).await?;
        goes_on(browser).await
    })
    .await
}

/// How many nodes the lane says that it has solved.
async fn nodes(browser: &Browser) -> Outcome<u64> {
    let shown = text(browser, "D", "nodes").await?;
    Ok(shown.chars().filter(char::is_ascii_digit).collect::<String>().parse().unwrap_or(0))
}

/// The lane can be run on, and the others are as they were.
async fn goes_on(browser: &Browser) -> Outcome<()> {
    let able = async || {
        let run = button(browser, "D", "run").await?;
        let stop = button(browser, "D", "stop").await?;
        let mut free = false;
        for one in [run, stop] {
            free |= one.attr("aria-disabled").await?.as_deref() == Some("false");
        }
        Ok(free)
    };
    browser.until("the lane can be used again", SOON, able).await?;
    assert!(text(browser, "A", "status").await?.contains("root solved"));
    Ok(())
}
