//! What the browser keeps: several scenarios by name, two tabs that do not overwrite each other, a
//! store that is full, and a page that is left in the middle.

use hullward_tests_browser::Outcome;
use hullward_tests_browser::browser::{Browser, SOON};
use hullward_tests_browser::visit::{Source, visit, visit_chromium};
use serde_json::json;

use crate::lanes::{button, paste, paste_long_work, status};
use crate::share::{press, reload, says};

const SCENARIO: &str = include_str!("../../fixtures/nine-points.toml");

async fn title(browser: &Browser, text: &str) -> Outcome<()> {
    let field = browser.select("[data-testid=title]").await?;
    browser.paste(&field, text).await
}

async fn has_title(browser: &Browser, text: &str) -> Outcome<()> {
    let script = "return document.querySelector('[data-testid=title]').value";
    let what = format!("the title is {text:?}");
    browser.until(&what, SOON, async || Ok(browser.script(script).await? == text)).await
}

/// Keeps the scenario under a name; the panel is open.
async fn keep(browser: &Browser, name: &str) -> Outcome<()> {
    let field = browser.select("[data-testid=kept-name]").await?;
    browser.paste(&field, name).await?;
    press(browser, "keep").await?;
    says(browser, &format!("Kept in this browser: {name}.")).await
}

/// Waits until the browser's store holds a text.
async fn stored(browser: &Browser, text: &str) -> Outcome<()> {
    let script = "return Object.values(localStorage).some((one) => one.includes(arguments[0]))";
    let what = format!("{text:?} is saved");
    let holds = async || Ok(browser.script_with(script, vec![json!(text)]).await? == true);
    browser.until(&what, SOON, holds).await
}

#[tokio::test(flavor = "multi_thread")]
async fn several_scenarios_are_kept_by_name() -> Outcome<()> {
    visit(Source::File, async |browser| {
        browser.shows("18 stops").await?;
        press(browser, "kept").await?;
        keep(browser, "The demo").await?;
        paste(browser, SCENARIO).await?;
        browser.shows("9 stops, 72 drives").await?;
        title(browser, "Nine").await?;
        keep(browser, "Nine points").await?;
        browser.find("button", "Open The demo").await?.click().await?;
        browser.shows("18 stops").await?;
        browser.find("button", "Open Nine points").await?.click().await?;
        browser.shows("9 stops, 72 drives").await?;
        has_title(browser, "Nine").await?;
        // What is deleted can be brought back.
        browser.find("button", "Delete The demo").await?.click().await?;
        browser.shows("The demo is deleted.").await?;
        assert!(browser.find_all("button", "Open The demo").await?.is_empty());
        press(browser, "kept-undo").await?;
        browser.find("button", "Rename The demo").await?.click().await?;
        let field = browser.select("[data-testid=kept-rename]").await?;
        browser.paste(&field, "The round").await?;
        browser.find("button", "Save name").await?.click().await?;
        browser.find("button", "Open The round").await?;
        // A name that is taken is replaced, and the button says so.
        let field = browser.select("[data-testid=kept-name]").await?;
        browser.paste(&field, "The round").await?;
        browser.find("button", "Replace the one of this name").await?.click().await?;
        says(browser, "Kept in this browser: The round.").await?;
        reload(browser).await?;
        press(browser, "kept").await?;
        browser.shows("2 scenarios kept by name").await?;
        browser.find("button", "Open The round").await?.click().await?;
        has_title(browser, "Nine").await
    })
    .await
}

/// What another tab does to the store, and the event by which the browser tells of it.
const OTHER_TAB: &str = "const key = 'hullward.scenario.1.a'; \
    localStorage.setItem(key, '41\\nhullward = 1\\ntitle = \"The other\"\\n'); \
    dispatchEvent(new StorageEvent('storage', { key }))";

#[tokio::test(flavor = "multi_thread")]
async fn a_second_tab_is_noticed_and_neither_overwrites_the_other() -> Outcome<()> {
    visit(Source::File, async |browser| {
        browser.shows("18 stops").await?;
        title(browser, "Mine at first").await?;
        stored(browser, "Mine at first").await?;
        browser.script(OTHER_TAB).await?;
        says(browser, "Another tab").await?;
        title(browser, "Mine").await?;
        says(browser, "Mine (second tab)").await?;
        stored(browser, "title = \"Mine\"").await?;
        stored(browser, "title = \"The other\"").await?;
        title(browser, "Mine again").await?;
        stored(browser, "title = \"Mine again\"").await?;
        stored(browser, "title = \"The other\"").await?;
        // This tab opens with its own; a new tab with the other's.
        reload(browser).await?;
        has_title(browser, "Mine again").await?;
        browser.script("sessionStorage.clear()").await?;
        reload(browser).await?;
        has_title(browser, "The other").await?;
        press(browser, "kept").await?;
        browser.find("button", "Open Mine (second tab)").await?;
        Ok(())
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn a_store_that_is_filled_is_said_and_nothing_is_lost() -> Outcome<()> {
    visit_chromium(Source::File, async |browser| {
        browser.shows("18 stops").await?;
        title(browser, "Kept before").await?;
        stored(browser, "Kept before").await?;
        let fill = "for (let size = 1 << 22; size > 0; size >>= 1) { \
                      for (let n = 0; ; n++) { \
                        try { localStorage.setItem(`fill ${size} ${n}`, 'x'.repeat(size)); } \
                        catch { break; } } }";
        browser.script(fill).await?;
        paste(browser, SCENARIO).await?;
        browser.shows("9 stops, 72 drives").await?;
        says(browser, "does not keep your changes").await?;
        stored(browser, "Kept before").await?;
        press(browser, "kept").await?;
        press(browser, "keep").await?;
        says(browser, "is not kept").await?;
        let catch =
            "HTMLAnchorElement.prototype.click = function () { globalThis.file = this.download; };";
        browser.script(catch).await?;
        press(browser, "save-offered").await?;
        let name = browser.script("return globalThis.file").await?;
        assert!(name.as_str().unwrap_or_default().ends_with(".hullward.toml"), "{name}");
        // With room again it is kept.
        let empty = "for (const key of Object.keys(localStorage)) \
                     if (key.startsWith('fill')) localStorage.removeItem(key)";
        browser.script(empty).await?;
        title(browser, "Kept after").await?;
        stored(browser, "Kept after").await
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn a_page_left_in_the_middle_of_a_run_opens_as_it_was() -> Outcome<()> {
    visit(Source::File, async |browser| {
        paste_long_work(browser).await?;
        button(browser, "A", "run").await?.click().await?;
        status(browser, "A", "searching").await?;
        browser.script("document.querySelector('[data-testid=turn-notes]').focus()").await?;
        title(browser, "In the middle").await?;
        reload(browser).await?;
        has_title(browser, "In the middle").await?;
        browser.shows("30 stops, 870 drives").await?;
        status(browser, "A", "root solved").await
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn first_steps_that_are_dismissed_never_come_back() -> Outcome<()> {
    visit(Source::File, async |browser| {
        browser.shows("What stands here is an example").await?;
        browser.still("[data-testid=dismiss-hints]").await?.click().await?;
        let gone = async || Ok(!browser.text().await?.contains("What stands here is an example"));
        browser.until("the first steps are gone", SOON, gone).await?;
        reload(browser).await?;
        browser.shows("Rivals, by the").await?;
        assert!(gone().await?);
        Ok(())
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn notes_read_as_they_are_meant_and_can_be_edited() -> Outcome<()> {
    visit(Source::File, async |browser| {
        let strong = "return document.querySelector('[data-testid=notes-read] strong').textContent";
        assert_eq!(browser.script(strong).await?, "All data here are invented");
        browser.still("[data-testid=turn-notes]").await?.click().await?;
        let field = browser.select("[data-testid=notes]").await?;
        browser.paste(&field, "Decided: **C**.\n\n- as its root is best\n").await?;
        browser.still("[data-testid=turn-notes]").await?.click().await?;
        let read =
            browser.script("return document.querySelector('[data-testid=notes-read]').innerHTML");
        assert_eq!(
            read.await?,
            "<p>Decided: <strong>C</strong>.</p><ul><li>as its root is best</li></ul>"
        );
        Ok(())
    })
    .await
}
