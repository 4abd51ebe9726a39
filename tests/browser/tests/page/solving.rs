//! From the opened page to proved optima.

use hullward_tests_browser::Outcome;
use hullward_tests_browser::visit::{Source, visit};

use crate::lanes::{button, paste, paste_long_work, shortest, status, text, value};

const TSPLIB: &str = include_str!("../../fixtures/eight-stops.atsp");

/// The matrix of the file: its last eight lines, the diagonal aside.
fn matrix() -> Vec<Vec<Option<f64>>> {
    let rows: Vec<&str> = TSPLIB.lines().filter(|line| line.starts_with([' ', '9'])).collect();
    let cell = |(column, text): (usize, &str), row: usize| {
        if row == column { None } else { text.parse().ok() }
    };
    let read = |(row, line): (usize, &&str)| {
        line.split_whitespace().enumerate().map(|entry| cell(entry, row)).collect()
    };
    rows.iter().enumerate().map(read).collect()
}

#[tokio::test(flavor = "multi_thread")]
async fn the_empty_page_is_the_demo_solved_to_its_checked_root_bounds() -> Outcome<()> {
    visit(Source::File, async |browser| {
        let mut bounds = Vec::new();
        for letter in ["A", "B", "C"] {
            status(browser, letter, "root solved").await?;
            assert_eq!(text(browser, letter, "checked").await?, "checked", "{letter}");
            bounds.push(value(browser, letter, "root-bound").await?);
        }
        assert!(bounds.iter().all(Option::is_some), "{bounds:?}");
        // Theorems (Padberg and Sung 1991): subtours imply the flow, and the flow the labels.
        assert!(bounds.is_sorted(), "{bounds:?}");
        Ok(())
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn a_pasted_file_is_solved_to_optimality_by_every_rival() -> Outcome<()> {
    visit(Source::Server, async |browser| {
        let expected = shortest(&matrix()).unwrap_or(f64::NAN);
        paste(browser, TSPLIB).await?;
        browser.shows("8 stops, 56 drives").await?;
        for letter in ["A", "B", "C"] {
            status(browser, letter, "root solved").await?;
        }
        browser.find("button", "Run all").await?.click().await?;
        for letter in ["A", "B", "C"] {
            status(browser, letter, "closed").await?;
            let said = text(browser, letter, "status").await?;
            assert!(said.contains(&format!("{expected} is optimal")), "{letter}: {said}");
        }
        let best = browser.select("[data-testid=best]").await?.text().await?;
        assert!(best.contains(&expected.to_string()), "{best}");
        Ok(())
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn a_search_pauses_steps_and_goes_on() -> Outcome<()> {
    visit(Source::File, async |browser| {
        paste_long_work(browser).await?;
        button(browser, "A", "step").await?.click().await?;
        status(browser, "A", "paused").await?;
        button(browser, "A", "run").await?.click().await?;
        status(browser, "A", "searching").await?;
        button(browser, "A", "pause").await?.click().await?;
        status(browser, "A", "paused").await?;
        let nodes = text(browser, "A", "nodes").await?;
        tokio::time::sleep(std::time::Duration::from_millis(500)).await;
        assert_eq!(text(browser, "A", "nodes").await?, nodes, "it stands still");
        button(browser, "A", "step").await?.click().await?;
        let moved = async || Ok(text(browser, "A", "nodes").await? != nodes);
        browser.until("a step moves on", hullward_tests_browser::browser::SOON, moved).await
    })
    .await
}
