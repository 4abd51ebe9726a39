//! The catalogue is looked through by family and by word; an entry in full joins the rivals, or a
//! copy of it does, open to be edited.

use hullward_tests_browser::Outcome;
use hullward_tests_browser::browser::{Browser, SOON};
use hullward_tests_browser::screen::Screen;
use hullward_tests_browser::visit::{Source, visit};

use crate::lanes::status;

async fn holds(browser: &Browser, selector: &str, word: &str) -> Outcome<()> {
    let script = "return document.querySelector(arguments[0])?.textContent ?? ''";
    let shown = async || {
        let text = browser.script_with(script, vec![selector.into()]).await?;
        Ok(text.as_str().is_some_and(|text| text.contains(word)))
    };
    browser.until(&format!("{selector} shows {word:?}"), SOON, shown).await
}

async fn search(browser: &Browser, words: &str) -> Outcome<()> {
    let field = browser.select("[data-testid=search]").await?;
    browser.paste(&field, words).await
}

/// How many lanes there are, and in how many of them a text can be typed.
async fn lanes(browser: &Browser, wanted: [u64; 2]) -> Outcome<()> {
    let script = "return ['', ' [data-testid=notation-text]'] \
        .map(one => document.querySelectorAll('[data-testid=lane]' + one).length)";
    let there = async || {
        let found = browser.script(script).await?;
        Ok(found[0] == wanted[0] && found[1].as_u64() >= Some(wanted[1]))
    };
    browser.until(&format!("{wanted:?} lanes and boxes"), SOON, there).await
}

#[tokio::test(flavor = "multi_thread")]
async fn the_catalogue_is_searched_and_an_entry_joins() -> Outcome<()> {
    visit(Source::Server, async |browser| {
        status(browser, "C", "root solved").await?;
        let before =
            browser.script("return document.querySelectorAll('[data-testid=lane]').length");
        let before = before.await?.as_u64().unwrap_or_default();
        let none = "return document.querySelector('[data-testid=shelf]') === null";
        assert_eq!(browser.script(none).await?, true, "nothing is made before it is opened");
        browser.still("[data-testid=browse]").await?.click().await?;
        holds(browser, "[data-testid=shelf] [role=status]", "188 formulations in all").await?;
        holds(browser, "[data-testid=shelf]", "Position labels (Miller").await?;

        search(browser, "cornuejols 1980 radii").await?;
        holds(browser, "[data-testid=shelf] [role=status]", "2 formulations").await?;
        holds(browser, "[data-testid=shelf]", "facility location, uncapacitated").await?;
        search(browser, "no such thing").await?;
        holds(browser, "[data-testid=shelf] [role=status]", "0 formulations").await?;

        search(browser, "desrochers lifted round trip").await?;
        browser
            .find("button", "Lifted position labels (Desrochers & Laporte 1991)")
            .await?
            .click()
            .await?;
        holds(browser, "[data-testid=entry] [data-testid=typeset]", "subject to").await?;
        for words in [
            "Operations Research Letters 10 (1991) 27-36",
            "2n + (n−1)n rows",
            "never weaker than “Position labels”",
            "now stronger, now weaker than “One-commodity flow”",
            "the drive back",
            "Compared in",
            "distance table, points in the plane, TSPLIB file",
        ] {
            holds(browser, "[data-testid=entry] dl", words).await?;
        }
        for screen in Screen::ALL {
            browser.look(screen).await?;
            browser.screenshot("catalogue", screen).await?;
            let wide = "return document.documentElement.scrollWidth <= window.innerWidth";
            assert_eq!(browser.script(wide).await?, true, "{screen:?}");
        }
        browser.look(Screen::ALL[0]).await?;
        browser.still("[data-testid=use]").await?.click().await?;
        lanes(browser, [before + 1, 0]).await?;
        browser.still("[data-testid=copy-entry]").await?.click().await?;
        lanes(browser, [before + 2, 1]).await?;
        let title =
            "return [...document.querySelectorAll('[data-testid=rival-title]')].at(-1).value";
        assert_eq!(browser.script(title).await?, "Lifted position labels (copy)");
        Ok(())
    })
    .await
}
