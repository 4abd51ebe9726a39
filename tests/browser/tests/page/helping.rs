//! Help on the notation stands under the text that is written, and its examples are live.

use hullward_tests_browser::Outcome;
use hullward_tests_browser::browser::{Browser, SOON};
use hullward_tests_browser::screen::Screen;
use hullward_tests_browser::visit::{Source, visit};

use crate::lanes::{button, part, status};

async fn guide_shows(browser: &Browser, selector: &str, word: &str) -> Outcome<()> {
    let selector = format!("{} {selector}", part("A", "guide"));
    let script = "return document.querySelector(arguments[0])?.textContent ?? ''";
    let shown = async || {
        let text = browser.script_with(script, vec![selector.clone().into()]).await?;
        Ok(text.as_str().is_some_and(|text| text.contains(word)))
    };
    browser.until(&format!("{selector} shows {word:?}"), SOON, shown).await
}

#[tokio::test(flavor = "multi_thread")]
async fn an_example_is_read_while_it_is_changed() -> Outcome<()> {
    visit(Source::Server, async |browser| {
        status(browser, "A", "root solved").await?;
        button(browser, "A", "notation").await?.click().await?;
        button(browser, "A", "help").await?.click().await?;
        guide_shows(browser, "ul", "Families over subsets").await?;
        guide_shows(browser, "[data-testid=typeset]", "people").await?;
        let field = browser.select(&format!("{} textarea", part("A", "guide"))).await?;
        browser.paste(&field, "minimise\n  z + 2 w\nsubject to\n  z ≥ 1  (one)\n").await?;
        guide_shows(browser, "[data-testid=notation-remarks]", "not declared").await?;
        // A mend that is one click away, and the way back.
        browser.still(&format!("{} [data-testid=mend]", part("A", "guide"))).await?.click().await?;
        let gone = async || {
            let script = "return document.querySelector('[data-testid=guide] .errors') === null";
            Ok(browser.script(script).await? == true)
        };
        browser.until("the mend mends it", SOON, gone).await?;
        browser.find("button", "Back to the example").await?.click().await?;
        guide_shows(browser, "[data-testid=typeset]", "people").await?;
        Ok(())
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn every_section_opens_to_an_example_without_errors() -> Outcome<()> {
    visit(Source::Server, async |browser| {
        status(browser, "A", "root solved").await?;
        button(browser, "A", "notation").await?.click().await?;
        button(browser, "A", "help").await?.click().await?;
        guide_shows(browser, "ul", "Arithmetic on data").await?;
        let count = "return document.querySelectorAll('[data-testid=guide] h4 button').length";
        let count = browser.script(count).await?.as_u64().unwrap_or_default();
        assert_eq!(count, 11);
        for place in 1..count {
            let open = format!(
                "document.querySelectorAll('[data-testid=guide] h4 button')[{place}].click()"
            );
            browser.script(&open).await?;
            guide_shows(browser, "[data-testid=typeset]", "subject to").await?;
            let wrong = "return document.querySelector('[data-testid=guide] .errors') === null";
            assert_eq!(browser.script(wrong).await?, true, "section {place}");
        }
        Ok(())
    })
    .await
}

/// A variable that nothing holds: no error, but a pitfall.
const LOOSE: &str = "Loose

data
  V
minimise
  Σ_{i ∈ V} z_i
subject to
  z_i + w_i ≥ 1  ∀ i ∈ V  (one)
  z_i ≥ 0        ∀ i ∈ V
  w_i free       ∀ i ∈ V
";

/// The remarks of the editor list pitfalls beside errors, and each says what it means when asked.
#[tokio::test(flavor = "multi_thread")]
async fn a_pitfall_is_listed_and_says_what_it_means() -> Outcome<()> {
    visit(Source::File, async |browser| {
        status(browser, "A", "root solved").await?;
        button(browser, "A", "notation").await?.click().await?;
        button(browser, "A", "edit").await?.click().await?;
        let field = browser.select(&part("A", "notation-text")).await?;
        browser.paste(&field, LOOSE).await?;
        let remarks = part("A", "notation-remarks");
        let list = "return document.querySelector(arguments[0])?.textContent ?? ''";
        let holds = async |word: &str| {
            let text = browser.script_with(list, vec![remarks.clone().into()]).await?;
            Ok(text.as_str().is_some_and(|text| text.contains(word)))
        };
        let listed = async || holds("bounded nowhere").await;
        browser.until("the pitfall is listed", SOON, listed).await?;
        let errors = "return document.querySelectorAll(arguments[0] + ' .errors').length";
        let errors = browser.script_with(errors, vec![remarks.clone().into()]).await?;
        assert_eq!(errors, 0, "a pitfall is no error");
        let ask = browser.select(&format!("{remarks} [data-testid=meaning]")).await?;
        assert_eq!(ask.attr("aria-expanded").await?.as_deref(), Some("false"));
        ask.click().await?;
        let told = format!("{remarks} [data-testid=explanation]");
        browser.select(&told).await?;
        assert_eq!(ask.attr("aria-expanded").await?.as_deref(), Some("true"));
        let marked = "return document.querySelectorAll(arguments[0] + ' pre').length";
        assert_eq!(browser.script_with(marked, vec![told.clone().into()]).await?, 1);
        for screen in Screen::ALL {
            browser.look(screen).await?;
            browser.screenshot("meaning", screen).await?;
        }
        ask.click().await?;
        let gone = "return document.querySelector(arguments[0]) === null";
        let gone = async || Ok(browser.script_with(gone, vec![told.clone().into()]).await? == true);
        browser.until("the meaning is closed again", SOON, gone).await
    })
    .await
}
