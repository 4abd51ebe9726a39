//! A node is chosen with the mouse or with the keyboard alone, and shown in full.

use fantoccini::key::Key;
use hullward_tests_browser::Outcome;
use hullward_tests_browser::browser::Browser;
use hullward_tests_browser::visit::{Source, visit};

use crate::lanes::{button, part, status, value};

/// Clicks the root's mark: it stands at the root bound, the leftmost of the tree.
const CLICK_ROOT: &str = "
    const canvas = document.querySelector(arguments[0]);
    const box = canvas.getBoundingClientRect();
    for (let x = 0; x < box.width; x += 3) for (let y = 0; y < box.height; y += 3) {
      canvas.dispatchEvent(new MouseEvent('click', {
        bubbles: true, clientX: box.left + x, clientY: box.top + y,
      }));
      if (document.querySelector('[data-testid=inspector]')) return true;
    }
    return false;
";

async fn inspected(browser: &Browser, letter: &str) -> Outcome<()> {
    let bound = browser.select("[data-testid=node-bound]").await?.attr("value").await?;
    let bound: Option<f64> = bound.and_then(|text| text.parse().ok());
    assert_eq!(bound, value(browser, letter, "root-bound").await?);
    let checked = browser.select("[data-testid=node-checked]").await?.text().await?;
    assert!(checked.contains("checked exactly"), "{checked}");
    Ok(())
}

#[tokio::test(flavor = "multi_thread")]
async fn a_click_on_the_root_shows_its_bound_and_values() -> Outcome<()> {
    visit(Source::File, async |browser| {
        status(browser, "A", "root solved").await?;
        let clicked = browser.script_with(CLICK_ROOT, vec![part("A", "tree").into()]).await?;
        assert_eq!(clicked, true);
        inspected(browser, "A").await?;
        let values = browser.find("table", "fractional").await?.text().await?;
        assert!(values.contains("reduced cost") && values.contains('→'), "{values}");
        Ok(())
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn the_keyboard_alone_reaches_a_node_of_the_tree() -> Outcome<()> {
    visit(Source::File, async |browser| {
        status(browser, "B", "root solved").await?;
        button(browser, "B", "step").await?.send_keys(&Key::Enter.to_string()).await?;
        status(browser, "B", "paused").await?;
        let tree = browser.select(&part("B", "tree")).await?;
        tree.send_keys(&Key::Down.to_string()).await?;
        browser.find("heading", "Node 1 of B").await?;
        tree.send_keys(&Key::Enter.to_string()).await?;
        let focused = "return document.activeElement.textContent";
        assert_eq!(browser.script(focused).await?, "Node 1 of B, the root");
        inspected(browser, "B").await
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn the_text_twin_is_a_tree_with_the_same_nodes() -> Outcome<()> {
    visit(Source::File, async |browser| {
        status(browser, "A", "root solved").await?;
        button(browser, "A", "step").await?.click().await?;
        status(browser, "A", "paused").await?;
        let twin = browser.select(&format!("{} summary", part("A", "twin"))).await?;
        twin.click().await?;
        browser.find("tree", "Nodes of A").await?;
        let items = browser.find_all("treeitem", "").await?;
        assert!(items.len() >= 3, "the root and its two children");
        assert_eq!(twin.text().await?, format!("{} nodes as a list", items.len()));
        items[0].click().await?;
        inspected(browser, "A").await
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn duals_stand_by_family_and_gains_beside_the_fractional_values() -> Outcome<()> {
    visit(Source::File, async |browser| {
        status(browser, "B", "root solved").await?;
        for _ in 0..3 {
            button(browser, "B", "step").await?.click().await?;
            status(browser, "B", "paused").await?;
        }
        let tree = browser.select(&part("B", "tree")).await?;
        tree.send_keys(&Key::Down.to_string()).await?;
        browser.find("heading", "Node 1 of B").await?;
        browser.still("[data-testid=node-families] summary").await?.click().await?;
        browser.shows("Duals say what a unit of a right-hand side buys").await?;
        let table = browser.select("[data-testid=node-families] table").await?.text().await?;
        for family in ["leave", "enter", "supply", "capacity"] {
            assert!(table.contains(family), "{table}");
        }
        browser.shows("expected ↓ ↑").await
    })
    .await
}
