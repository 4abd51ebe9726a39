//! The page is left open for a day: what was run again and again takes no more memory than before.
//! `HULLWARD_MINUTES=30 cargo test -p hullward-tests-browser --test page lasting -- --nocapture` for
//! half an hour.

use std::time::Duration;

use hullward_tests_browser::Outcome;
use hullward_tests_browser::browser::Browser;
use hullward_tests_browser::visit::{Source, visit_chromium};
use serde_json::json;
use tokio::time::Instant;

use crate::lanes::{button, status};

/// Rounds after which everything that is kept for good has been made.
const FIRST: u32 = 6;
/// What memory may grow by, beside a tenth: what a collector leaves lying differs by so much.
const SLACK: u64 = 48 << 20;

/// Leaves the first family of a rival out and takes it in again, which loads the rival twice, and
/// runs it to its end.
async fn anew(browser: &Browser, letter: &str) -> Outcome<()> {
    let family = format!("[data-lane={letter}] select[data-family]");
    let state = browser.script(&format!("return document.querySelector('{family}').value")).await?;
    for state in ["out", state.as_str().unwrap_or_default()] {
        browser.select(&family).await?.select_by_value(state).await?;
        // The root of before is on screen until the change is taken in.
        tokio::time::sleep(Duration::from_millis(200)).await;
        status(browser, letter, "root solved").await?;
    }
    button(browser, letter, "run").await?.click().await?;
    status(browser, letter, "closed").await
}

async fn round(browser: &Browser) -> Outcome<()> {
    anew(browser, "B").await?;
    anew(browser, "C").await
}

async fn taken(browser: &Browser) -> Outcome<u64> {
    browser.protocol("HeapProfiler.collectGarbage", json!({})).await?;
    tokio::time::sleep(Duration::from_millis(300)).await;
    browser.memory_taken()
}

#[tokio::test(flavor = "multi_thread")]
#[allow(clippy::print_stdout, reason = "a measurement is printed")]
async fn memory_stays_where_it_was() -> Outcome<()> {
    let minutes = std::env::var("HULLWARD_MINUTES").ok().and_then(|text| text.parse().ok());
    let whole = Duration::from_secs_f64(60.0 * minutes.unwrap_or(0.5));
    visit_chromium(Source::File, async |browser| {
        status(browser, "C", "root solved").await?;
        for _ in 0..FIRST {
            round(browser).await?;
        }
        let (begun, before) = (Instant::now(), taken(browser).await?);
        let mut rounds = 0;
        while begun.elapsed() < whole {
            round(browser).await?;
            rounds += 1;
        }
        let after = taken(browser).await?;
        println!("{rounds} rounds: {} MB, then {} MB", before >> 20, after >> 20);
        assert!(rounds > 3 && after < before + before / 10 + SLACK, "{before} then {after} bytes");
        Ok(())
    })
    .await
}
