//! Rivals get other titles and another order; their runs go on.

use hullward_tests_browser::Outcome;
use hullward_tests_browser::browser::SOON;
use hullward_tests_browser::visit::{Source, visit};

use crate::lanes::{button, part, status, text, value};

#[tokio::test(flavor = "multi_thread")]
async fn rivals_are_renamed_and_moved_and_keep_their_runs() -> Outcome<()> {
    visit(Source::File, async |browser| {
        for letter in ["A", "B", "C"] {
            status(browser, letter, "root solved").await?;
        }
        button(browser, "C", "run").await?.click().await?;
        status(browser, "C", "closed").await?;
        let (bound, nodes) =
            (value(browser, "C", "root-bound").await?, text(browser, "C", "nodes").await?);
        let field = browser.select(&part("C", "rival-title")).await?;
        browser.paste(&field, "The strong one").await?;
        browser.script("document.activeElement.blur()").await?;
        // The title is in the table of evidence, and nothing was searched anew.
        browser.shows("C The strong one").await?;
        assert!(text(browser, "C", "status").await?.contains("closed"));
        button(browser, "C", "up").await?.click().await?;
        browser.shows("B The strong one").await?;
        let focus = "return document.activeElement.getAttribute('aria-label')";
        let kept = async || Ok(browser.script(focus).await? == "Move B up");
        browser.until("the button keeps the focus", SOON, kept).await?;
        button(browser, "B", "up").await?.click().await?;
        browser.shows("A The strong one").await?;
        assert!(text(browser, "A", "status").await?.contains("closed"));
        assert_eq!(value(browser, "A", "root-bound").await?, bound);
        assert_eq!(text(browser, "A", "nodes").await?, nodes);
        browser.still("[data-testid=undo]").await?.click().await?;
        browser.shows("B The strong one").await?;
        assert_eq!(text(browser, "B", "nodes").await?, nodes);
        button(browser, "B", "down").await?.click().await?;
        browser.shows("C The strong one").await
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn what_differs_between_two_rivals_is_told_in_words_and_lines() -> Outcome<()> {
    visit(Source::File, async |browser| {
        for letter in ["A", "B"] {
            status(browser, letter, "root solved").await?;
        }
        browser.still("[data-testid=differences] summary").await?.click().await?;
        browser.shows("Only A has the variables u (17 columns).").await?;
        browser.shows("Only B has the families (supply), 17 rows; (capacity), 306 rows.").await?;
        browser.shows("Lines of notation that only one of them has").await?;
        browser.find("combobox", "Second rival").await?.select_by_index(0).await?;
        browser.shows("A and A have the same sizes").await
    })
    .await
}
