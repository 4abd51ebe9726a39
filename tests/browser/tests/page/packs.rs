//! A regression pack: saved, opened, and results held against it.

use hullward_tests_browser::Outcome;
use hullward_tests_browser::browser::{Browser, SOON};
use hullward_tests_browser::visit::{Source, visit_chromium};
use serde_json::Value;

use crate::lanes::{paste, status};
use crate::share::{CATCH, CAUGHT, SCENARIO, press, says};

/// Waits until the page says so of results beside records.
async fn held(browser: &Browser, words: &str) -> Outcome<()> {
    let script =
        "return document.querySelector('[data-testid=against-records]')?.textContent ?? ''";
    let there = async || {
        let text = browser.script(script).await?;
        Ok(text.as_str().is_some_and(|text| text.contains(words)))
    };
    browser.until(&format!("records: {words:?}"), SOON, there).await
}

#[tokio::test(flavor = "multi_thread")]
async fn a_pack_is_saved_opened_and_held_against() -> Outcome<()> {
    let folder = std::env::temp_dir().join(format!("hullward-packs-{}", std::process::id()));
    std::fs::create_dir_all(&folder)?;
    let file = folder.join("round.pack.json");
    let broken = folder.join("broken.json");
    std::fs::write(&broken, "{\"hullward_pack\": 7}")?;
    let outcome = visit_chromium(Source::File, async |browser| {
        paste(browser, SCENARIO).await?;
        browser.shows("9 stops, 72 drives").await?;
        for letter in ["A", "B", "C"] {
            status(browser, letter, "root solved").await?;
        }
        browser.script(CATCH).await?;
        press(browser, "pack").await?;
        let text = browser.script_async(CAUGHT, Vec::new()).await?;
        let text = text.as_str().unwrap_or_default();
        let pack: Value = serde_json::from_str(text)?;
        assert_eq!(pack["expected"].as_array().map(Vec::len), Some(3), "{text}");
        assert!(pack["expected"][0]["root_bound"].is_number(), "{text}");
        std::fs::write(&file, text)?;
        let input = browser.select("[data-testid=open-file]").await?;
        input.send_keys(&broken.display().to_string()).await?;
        says(browser, "broken.json is no pack").await?;
        input.send_keys(&file.display().to_string()).await?;
        says(browser, "Opened from round.pack.json").await?;
        held(browser, "A: as recorded.").await?;
        held(browser, "B: as recorded.").await?;
        // Invented distances of four stops in place of the nine.
        paste(browser, "\ta\tb\tc\td\na\t0\t3\t4\t5\nb\t3\t0\t6\t2\nc\t4\t6\t0\t7\nd\t5\t2\t7\t0")
            .await?;
        held(browser, "was recorded; columns").await?;
        press(browser, "forget-pack").await?;
        let gone = "return document.querySelector('[data-testid=against-records]') === null";
        browser
            .until("it is forgotten", SOON, async || Ok(browser.script(gone).await? == true))
            .await
    })
    .await;
    std::fs::remove_dir_all(&folder)?;
    outcome
}
