//! A scenario leaves the page as a link or a file and comes back the same; the browser keeps it.

use hullward_tests_browser::Outcome;
use hullward_tests_browser::browser::{Browser, SOON};
use hullward_tests_browser::visit::{Source, visit, visit_chromium};
use record::file::parse;
use record::link::{pack, unpack};
use record::scenario::Scenario;
use serde_json::json;

use crate::lanes::{paste, status, value};

pub(crate) const SCENARIO: &str = include_str!("../../fixtures/nine-points.toml");

/// Keeps what the page saves, for headless Chromium has nobody to ask where to.
pub(crate) const CATCH: &str = "const make = URL.createObjectURL; globalThis.blob = null; \
    URL.createObjectURL = (blob) => { globalThis.blob = blob; return make.call(URL, blob); }; \
    HTMLAnchorElement.prototype.click = function () { globalThis.file = this.download; };";

/// The text of what was kept.
pub(crate) const CAUGHT: &str = "globalThis.blob.text().then(arguments[arguments.length - 1])";

pub(crate) async fn press(browser: &Browser, name: &str) -> Outcome<()> {
    Ok(browser.still(&format!("[data-testid={name}]")).await?.click().await?)
}

/// A scenario without what it says of its results.
fn without_results(text: &str) -> Option<Scenario> {
    parse(text).scenario.map(|scenario| Scenario { engine: None, digest: None, ..scenario })
}

/// What is said about links, files and the store.
pub(crate) async fn says(browser: &Browser, words: &str) -> Outcome<()> {
    let script = "return document.querySelector('[data-testid=share-notice]').textContent";
    let what = format!("the notice says {words:?}");
    browser
        .until(&what, SOON, async || {
            Ok(browser.script(script).await?.as_str().unwrap_or_default().contains(words))
        })
        .await
}

/// Opens the page anew in the same browser.
pub(crate) async fn reload(browser: &Browser) -> Outcome<()> {
    browser
        .script(
            "document.documentElement.dataset.before = ''; setTimeout(() => location.reload(), 0)",
        )
        .await?;
    let opened = "return document.documentElement?.dataset.before === undefined && document.documentElement?.dataset.boot === 'done'";
    browser
        .until("the page opens anew", SOON, async || Ok(browser.script(opened).await? == true))
        .await
}

async fn bounds(browser: &Browser) -> Outcome<Vec<Option<f64>>> {
    let mut bounds = Vec::new();
    for letter in ["A", "B"] {
        status(browser, letter, "root solved").await?;
        bounds.push(value(browser, letter, "root-bound").await?);
    }
    Ok(bounds)
}

/// Waits for the bounds of another scenario, whose lanes may take the place of lanes with bounds.
async fn bounds_become(browser: &Browser, expected: &[Option<f64>]) -> Outcome<()> {
    browser
        .until("the same root bounds", SOON, async || Ok(bounds(browser).await? == expected))
        .await
}

/// A link copied where the browser does not let the page copy.
pub(crate) async fn copied_by_hand(browser: &Browser) -> Outcome<String> {
    browser.script("navigator.clipboard.writeText = () => Promise.reject(new Error('no'))").await?;
    press(browser, "copy-link").await?;
    browser.shows("whoever has it can read them").await?;
    press(browser, "copy-now").await?;
    let field = browser.select("[data-testid=link-field]").await?;
    let chosen = "const field = document.activeElement; \
                  return field.value.slice(field.selectionStart, field.selectionEnd)";
    let link = field.prop("value").await?.unwrap_or_default();
    let all = async || Ok(browser.script(chosen).await? == json!(link));
    browser.until("the link is selected", SOON, all).await?;
    press(browser, "copy-cancel").await?;
    Ok(link)
}

#[tokio::test(flavor = "multi_thread")]
async fn a_link_opens_to_the_same_root_bounds() -> Outcome<()> {
    let mut link = String::new();
    let mut there = Vec::new();
    visit(Source::File, async |browser| {
        paste(browser, SCENARIO).await?;
        browser.shows("9 stops, 72 drives").await?;
        there = bounds(browser).await?;
        link = copied_by_hand(browser).await?;
        Ok(())
    })
    .await?;
    assert_eq!(without_results(&unpack(&link)?), parse(SCENARIO).scenario);
    assert!(there.iter().all(Option::is_some), "{there:?}");
    let fragment = &link[link.find('#').unwrap_or(0)..];
    visit(Source::File, async |browser| {
        browser.script_with("location.hash = arguments[0]", vec![json!(fragment)]).await?;
        says(browser, "Opened from the link").await?;
        bounds_become(browser, &there).await?;
        // The page opened with the link in its address shows the same.
        reload(browser).await?;
        says(browser, "Opened from the link").await?;
        bounds_become(browser, &there).await
    })
    .await
}

/// What the page says of results that were there when the link was made.
async fn verdict(browser: &Browser, words: &str) -> Outcome<()> {
    let script = "return document.querySelector('[data-testid=verdict]').textContent";
    let what = format!("the verdict says {words:?}");
    let said = async || Ok(browser.script(script).await?.as_str().unwrap_or("").contains(words));
    browser.until(&what, std::time::Duration::from_secs(60), said).await
}

/// Opens a scenario by a link in the address.
pub(crate) async fn open_link(browser: &Browser, scenario: &Scenario) -> Outcome<()> {
    let link = pack(&record::file::print(scenario))?;
    browser.script_with("location.hash = arguments[0]", vec![json!(link)]).await?;
    says(browser, "Opened from the link").await
}

#[tokio::test(flavor = "multi_thread")]
async fn a_link_says_whether_the_results_are_the_same() -> Outcome<()> {
    visit(Source::File, async |browser| {
        paste(browser, SCENARIO).await?;
        browser.shows("9 stops, 72 drives").await?;
        bounds(browser).await?;
        crate::lanes::button(browser, "B", "run").await?.click().await?;
        status(browser, "B", "closed").await?;
        let link = copied_by_hand(browser).await?;
        let made = parse(&unpack(&link)?).scenario.ok_or("the link holds no scenario")?;
        let digest = made.digest.clone().ok_or("the link has no digest")?;
        assert!(digest.contains('/') && made.engine.is_some(), "{digest}");
        open_link(browser, &made).await?;
        verdict(browser, "Same results so far as when this was made; B came further then.").await?;
        crate::lanes::button(browser, "B", "run").await?.click().await?;
        verdict(browser, "Same results as when this was made.").await?;
        // One digit of the search's digest is another, and an older engine is said to have made it.
        let mut words: Vec<String> = digest.split(' ').map(str::to_owned).collect();
        let last = if words[1].pop() == Some('0') { '1' } else { '0' };
        words[1].push(last);
        let tampered = words.join(" ");
        let engine = Some("0.0.1".to_owned());
        open_link(browser, &Scenario { digest: Some(tampered), engine, ..made }).await?;
        verdict(browser, "made with engine 0.0.1").await?;
        bounds(browser).await?;
        crate::lanes::button(browser, "B", "run").await?.click().await?;
        verdict(browser, "Differs from the results that this was made with: B, the search").await
    })
    .await
}

/// A teammate sends the scenario back with one distance and one limit changed.
#[tokio::test(flavor = "multi_thread")]
async fn what_a_link_changes_is_told() -> Outcome<()> {
    visit(Source::File, async |browser| {
        paste(browser, SCENARIO).await?;
        browser.shows("9 stops, 72 drives").await?;
        bounds(browser).await?;
        let mine =
            parse(&unpack(&copied_by_hand(browser).await?)?).scenario.ok_or("no scenario")?;
        open_link(browser, &mine).await?;
        says(browser, "Opened from the link").await?;
        let told = "return document.querySelector('[data-testid=changes]')?.textContent ?? ''";
        assert_eq!(browser.script(told).await?, "", "nothing was changed");
        let mut theirs = mine;
        theirs.run.nodes = 77;
        let gone = theirs.rivals.pop().ok_or("no rival")?;
        open_link(browser, &theirs).await?;
        says(browser, "2 changes to what was here").await?;
        let told = browser.script(told).await?.to_string();
        assert!(told.contains("nodes = 77") && told.contains(" is gone."), "{gone:?}: {told}");
        Ok(())
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn a_link_is_copied_where_the_browser_allows_it() -> Outcome<()> {
    visit_chromium(Source::File, async |browser| {
        let keep = "navigator.clipboard.writeText = async (text) => { globalThis.copied = text; }";
        browser.script(keep).await?;
        press(browser, "copy-link").await?;
        press(browser, "copy-now").await?;
        says(browser, "copied").await?;
        let link = browser.script("return globalThis.copied").await?;
        let link = link.as_str().unwrap_or_default();
        let scenario = parse(&unpack(link)?).scenario.ok_or("the link holds no scenario")?;
        assert_eq!(scenario.rivals.len(), 3);
        let focus = browser.script("return document.activeElement.id").await?;
        assert_eq!(focus, "copy-link");
        Ok(())
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn a_link_that_cannot_be_opened_leaves_the_page_as_it_is() -> Outcome<()> {
    let whole = pack(SCENARIO)?;
    let cut = whole[..whole.len() / 2].to_owned();
    visit(Source::File, async |browser| {
        let title = browser.select("[data-testid=title]").await?;
        let before = title.prop("value").await?;
        for fragment in [cut.as_str(), "#s9.AAAA"] {
            browser.script_with("location.hash = arguments[0]", vec![json!(fragment)]).await?;
            says(browser, "The page is as it was").await?;
            assert_eq!(title.prop("value").await?, before);
        }
        says(browser, "newer version").await?;
        reload(browser).await?;
        says(browser, "newer version").await?;
        status(browser, "C", "root solved").await
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn the_browser_keeps_what_was_changed() -> Outcome<()> {
    visit(Source::File, async |browser| {
        paste(browser, SCENARIO).await?;
        browser.shows("9 stops, 72 drives").await?;
        let kept =
            "return Object.values(localStorage).some((text) => text.includes('hullward = 1'))";
        browser
            .until("it is saved", SOON, async || Ok(browser.script(kept).await? == true))
            .await?;
        reload(browser).await?;
        says(browser, "Restored from this browser").await?;
        browser.shows("9 stops, 72 drives").await?;
        press(browser, "start-from-demo").await?;
        browser.shows("18 stops").await?;
        // The demo took its place; Undo brings it back.
        press(browser, "undo").await?;
        browser.shows("9 stops, 72 drives").await?;
        let other =
            "dispatchEvent(new StorageEvent('storage', { key: Object.keys(localStorage)[0] }))";
        browser.script(other).await?;
        says(browser, "Another tab").await
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn a_full_store_is_said_and_breaks_nothing() -> Outcome<()> {
    visit(Source::File, async |browser| {
        let full = "Storage.prototype.setItem = () => { \
                    throw new DOMException('full', 'QuotaExceededError'); }";
        browser.script(full).await?;
        paste(browser, SCENARIO).await?;
        says(browser, "does not keep your changes").await?;
        browser.shows("9 stops, 72 drives").await?;
        assert!(bounds(browser).await?.iter().all(Option::is_some));
        Ok(())
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn a_file_is_saved_and_opened() -> Outcome<()> {
    let folder = std::env::temp_dir().join(format!("hullward-share-{}", std::process::id()));
    std::fs::create_dir_all(&folder)?;
    let file = folder.join("mine.hullward.toml");
    let broken = folder.join("broken.toml");
    std::fs::write(&broken, "hullward = 1\ntitel = \"x\"\n")?;
    let outcome = visit_chromium(Source::File, async |browser| {
        paste(browser, SCENARIO).await?;
        browser.shows("9 stops, 72 drives").await?;
        let there = bounds(browser).await?;
        browser.script(CATCH).await?;
        press(browser, "save-file").await?;
        let name = browser.script("return globalThis.file").await?;
        assert!(name.as_str().unwrap_or_default().ends_with(".hullward.toml"), "{name}");
        let text = browser.script_async(CAUGHT, Vec::new()).await?;
        let text = text.as_str().unwrap_or_default();
        assert_eq!(without_results(text), parse(SCENARIO).scenario);
        std::fs::write(&file, text)?;
        browser.script("document.querySelector('[data-testid=notes]').focus()").await?;
        let input = browser.select("[data-testid=open-file]").await?;
        input.send_keys(&broken.display().to_string()).await?;
        says(browser, "Line 2, column 1").await?;
        input.send_keys(&file.display().to_string()).await?;
        says(browser, "Opened from mine.hullward.toml").await?;
        bounds_become(browser, &there).await
    })
    .await;
    std::fs::remove_dir_all(&folder)?;
    outcome
}

#[tokio::test(flavor = "multi_thread")]
async fn a_change_is_undone_by_button_and_by_key() -> Outcome<()> {
    visit(Source::File, async |browser| {
        status(browser, "C", "root solved").await?;
        let lanes = "return document.querySelectorAll('[data-testid=lane]').length";
        let has = async |count: u64| {
            let what = format!("{count} lanes");
            browser.until(&what, SOON, async || Ok(browser.script(lanes).await? == count)).await
        };
        crate::lanes::add(browser, "atsp/labels").await?;
        has(4).await?;
        press(browser, "undo").await?;
        has(3).await?;
        let key = "document.activeElement.dispatchEvent(new KeyboardEvent('keydown', \
                   { key: 'z', ctrlKey: true, shiftKey: arguments[0], bubbles: true, cancelable: true }))";
        browser.script_with(key, vec![json!(true)]).await?;
        has(4).await?;
        browser.script_with(key, vec![json!(false)]).await?;
        has(3).await
    })
    .await
}
