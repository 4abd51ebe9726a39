//! What is pasted is read, or it is said what is wrong, where, and how to mend it.

use hullward_tests_browser::Outcome;
use hullward_tests_browser::visit::{Source, visit};

use crate::lanes::{paste, status, text, value};

const TSPLIB: &str = include_str!("../../fixtures/eight-stops.atsp");

const SCENARIO: &str = include_str!("../../fixtures/nine-points.toml");

const BROKEN: &str = "\tYard\tBrook\tChapel\nYard\t\t7\t12\nBrook\t8\t\tsix\nChapel\t13\t5\t\n";

#[tokio::test(flavor = "multi_thread")]
async fn a_tsplib_file_is_understood_and_drawn() -> Outcome<()> {
    visit(Source::File, async |browser| {
        paste(browser, TSPLIB).await?;
        browser.shows("8 stops, 56 drives").await?;
        for letter in ["A", "B", "C"] {
            status(browser, letter, "root solved").await?;
        }
        browser.select("[data-testid=drawing] svg").await?;
        Ok(())
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn a_tsplib_file_is_opened_by_its_button() -> Outcome<()> {
    visit(Source::File, async |browser| {
        let path = concat!(env!("CARGO_MANIFEST_DIR"), "/fixtures/eight-stops.atsp");
        browser.select("[data-testid=file]").await?.send_keys(path).await?;
        browser.shows("8 stops, 56 drives").await
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn a_scenario_brings_its_own_rivals() -> Outcome<()> {
    visit(Source::File, async |browser| {
        paste(browser, SCENARIO).await?;
        browser.shows("9 stops, 72 drives").await?;
        status(browser, "B", "root solved").await?;
        assert!(browser.text().await?.contains("Multi-commodity flow"));
        Ok(())
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn a_broken_table_is_complained_of_by_line_and_column() -> Outcome<()> {
    visit(Source::File, async |browser| {
        status(browser, "A", "root solved").await?;
        let bound = text(browser, "A", "root-bound").await?;
        paste(browser, BROKEN).await?;
        let list = browser.find("group", "Remarks on the text").await?;
        let complaint = list.text().await?;
        assert!(complaint.contains("line 3"), "{complaint}");
        assert!(complaint.contains("six"), "{complaint}");
        let field = browser.find("textbox", "Paste a distance table").await?;
        assert_eq!(field.attr("aria-invalid").await?.as_deref(), Some("true"));
        // The place can be shown in the text, and the lanes keep what they had.
        browser.find("button", "Show in the text").await?.click().await?;
        let chosen = "const box = document.activeElement; \
                      return box.value.slice(box.selectionStart, box.selectionEnd)";
        assert_eq!(browser.script(chosen).await?, "six");
        assert_eq!(text(browser, "A", "root-bound").await?, bound);
        paste(browser, &BROKEN.replace("six", "6")).await?;
        browser.shows("3 stops, 6 drives").await?;
        assert_eq!(field.attr("aria-invalid").await?.as_deref(), Some("false"));
        Ok(())
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn nonsense_never_takes_the_page_down() -> Outcome<()> {
    visit(Source::File, async |browser| {
        for nonsense in ["no table at all", "NaN\t-\u{221e}\n\u{0}\t\u{202e}", "<b>1</b>\t2", ""] {
            paste(browser, nonsense).await?;
        }
        paste(browser, TSPLIB).await?;
        browser.shows("8 stops, 56 drives").await
    })
    .await
}

/// Invented: two tools of values 5 and 4, weights 3 and 2, at most 4; two thirds of the first beside
/// the second, by hand: 4 + 5 · 2/3.
const TOOLS: &str = "NAME tools
OBJSENSE
    MAX
ROWS
 N value
 L weight
COLUMNS
    M1 'MARKER' 'INTORG'
    a value 5 weight 3
    b value 4 weight 2
    M2 'MARKER' 'INTEND'
RHS
    RHS weight 4
BOUNDS
 UP BND a 1
 UP BND b 1
ENDATA
";

#[tokio::test(flavor = "multi_thread")]
async fn a_model_in_mps_becomes_a_rival_beside_the_others() -> Outcome<()> {
    visit(Source::File, async |browser| {
        status(browser, "C", "root solved").await?;
        paste(browser, TOOLS).await?;
        status(browser, "D", "root solved").await?;
        let bound = value(browser, "D", "root-bound").await?;
        assert!(bound.is_some_and(|bound| (bound - (4.0 + 10.0 / 3.0)).abs() < 0.01), "{bound:?}");
        browser.shows("18 stops, 306 drives").await
    })
    .await
}
