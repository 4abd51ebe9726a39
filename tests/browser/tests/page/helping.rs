//! Help on the notation stands under the text that is written, and its examples are live.

use hullward_tests_browser::Outcome;
use hullward_tests_browser::browser::{Browser, SOON};
use hullward_tests_browser::visit::{Source, visit};

use crate::lanes::{button, part};

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
        button(browser, "A", "notation").await?.click().await?;
        button(browser, "A", "help").await?.click().await?;
        guide_shows(browser, "ul", "Families over subsets").await?;
        guide_shows(browser, "[data-testid=typeset]", "people").await?;
        let field = browser.select(&format!("{} textarea", part("A", "guide"))).await?;
        browser.paste(&field, "minimise\n  z + 2 w\nsubject to\n  z ≥ 1  (one)\n").await?;
        guide_shows(browser, "[data-testid=notation-remarks]", "not declared").await?;
        // A mend that is one click away, and the way back.
        browser
            .select(&format!("{} [data-testid=mend]", part("A", "guide")))
            .await?
            .click()
            .await?;
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
