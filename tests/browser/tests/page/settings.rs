//! What a run begins with and what changes during it: a plan, the settings of a preset, rules.

use fantoccini::key::Key;
use hullward_tests_browser::Outcome;
use hullward_tests_browser::browser::{Browser, SOON};
use hullward_tests_browser::visit::{Source, visit};
use serde_json::json;

use crate::lanes::{button, part, paste, scattered, status, text};
use crate::share::copied_by_hand;

const STOPS: &str = "hullward = 1
title = \"Seven stops\"
[instance]
text = '''
\tAsh\tBirch\tCedar\tElm\tFir\tGorse\tHazel
Ash\t0\t3\t14\t15\t9\t8\t12
Birch\t2\t0\t6\t5\t3\t11\t7
Cedar\t5\t8\t0\t9\t7\t4\t13
Elm\t9\t3\t2\t0\t3\t12\t6
Fir\t8\t4\t6\t2\t0\t9\t5
Gorse\t7\t12\t5\t10\t8\t0\t3
Hazel\t11\t6\t12\t7\t4\t2\t0
'''
[[rival]]
from = \"atsp/labels\"
";

/// Types a plan into its box and leaves the box.
async fn plan(browser: &Browser, text: &str) -> Outcome<()> {
    let script = "const area = document.querySelector('[data-testid=plan]'); \
                  area.value = arguments[0]; area.dispatchEvent(new Event('change', { bubbles: true }))";
    browser.script_with(script, vec![json!(text)]).await?;
    Ok(())
}

/// Runs the first lane to its optimum.
async fn solved(browser: &Browser) -> Outcome<()> {
    button(browser, "A", "run").await?.click().await?;
    status(browser, "A", "26 is optimal").await
}

/// What a lane says of its search, whatever the case.
async fn told(browser: &Browser, words: &str) -> Outcome<()> {
    let script = "return document.querySelector('[data-lane=A]').textContent.toLowerCase()";
    let words = words.to_lowercase();
    let holds =
        async || Ok(browser.script(script).await?.as_str().unwrap_or_default().contains(&words));
    browser.until(&format!("the lane says {words}"), SOON, holds).await
}

#[tokio::test(flavor = "multi_thread")]
async fn a_plan_is_taken_and_one_that_breaks_rows_has_each_listed() -> Outcome<()> {
    visit(Source::File, async |browser| {
        paste(browser, STOPS).await?;
        browser.shows("7 stops").await?;
        status(browser, "A", "root solved").await?;
        solved(browser).await?;
        plan(browser, "Ash, Birch, Cedar, Elm, Fir, Gorse, Hazel").await?;
        status(browser, "A", "root solved").await?;
        solved(browser).await?;
        told(browser, "the plan that was given is one: 44").await?;
        plan(browser, "x[Ash, Birch] = 1\nx[Birch, Ash] = 1\nx[Elm, Fir] = 2").await?;
        status(browser, "A", "root solved").await?;
        solved(browser).await?;
        told(browser, "the plan that was given is not taken").await?;
        for words in [
            "x[Elm → Fir] = 2 is outside 0 to 1",
            "leave[Cedar]: the left side is 0, and = 1 is asked",
            "leave[Fir]: the left side is 0, and = 1 is asked",
            "enter[Elm]: the left side is 0, and = 1 is asked",
        ] {
            told(browser, words).await?;
        }
        Ok(())
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn a_preset_changes_how_every_rival_is_searched() -> Outcome<()> {
    visit(Source::File, async |browser| {
        paste(browser, STOPS).await?;
        browser.shows("7 stops").await?;
        status(browser, "A", "root solved").await?;
        let preset = browser.select("[data-testid=preset]").await?;
        assert_eq!(preset.prop("value").await?.as_deref(), Some("bare"));
        let nodes = async |wanted: &str| {
            status(browser, "A", "root solved").await?;
            solved(browser).await?;
            let nodes = text(browser, "A", "nodes").await?;
            assert_eq!(nodes == "1", wanted == "one", "{nodes} nodes");
            Ok::<(), Box<dyn std::error::Error>>(())
        };
        nodes("more").await?;
        preset.select_by_value("as a production solver would").await?;
        // With cuts and plans nothing is left to branch on.
        nodes("one").await?;
        let link = copied_by_hand(browser).await?;
        let fragment = link[link.find('#').unwrap_or(0)..].to_owned();
        let scenario = record::link::unpack(&fragment)?;
        assert!(scenario.contains("preset = \"production\""), "{scenario}");
        Ok(())
    })
    .await
}

/// A rule changed in the middle of a run is an act, and a link replays it.
#[tokio::test(flavor = "multi_thread")]
async fn a_rule_is_changed_during_a_run_and_replayed_from_a_link() -> Outcome<()> {
    let points = scattered(9);
    let scenario = format!(
        "hullward = 1\n[instance]\nreader = \"points\"\ntext = '''\n{points}'''\n\
         [[rival]]\nfrom = \"atsp/labels\"\n"
    );
    let figures = async |browser: &Browser| {
        let mut all = Vec::new();
        for name in ["bound", "nodes", "status"] {
            all.push(text(browser, "A", name).await?);
        }
        Ok::<Vec<String>, Box<dyn std::error::Error>>(all)
    };
    let acts = async |browser: &Browser| {
        let script = "return [...document.querySelectorAll(`${arguments[0]} li`)] \
                      .map((act) => act.firstChild.textContent)";
        let acts = browser.script_with(script, vec![part("A", "acts").into()]).await?;
        Ok::<Vec<String>, Box<dyn std::error::Error>>(serde_json::from_value(acts)?)
    };
    let (mut link, mut there) = (String::new(), Vec::new());
    visit(Source::File, async |browser| {
        paste(browser, &scenario).await?;
        browser.shows("9 stops").await?;
        status(browser, "A", "root solved").await?;
        for _ in 0..4 {
            button(browser, "A", "step").await?.click().await?;
            status(browser, "A", "paused").await?;
        }
        let open = "document.querySelector(arguments[0]).open = true";
        browser.script_with(open, vec![part("A", "change").into()]).await?;
        let select = browser.select(&part("A", "change-selection")).await?;
        select.select_by_value("depth first").await?;
        let one = async || Ok(acts(browser).await?.len() == 1);
        browser.until("the change is listed", SOON, one).await?;
        let said = acts(browser).await?;
        assert!(said[0].ends_with("nodes: next node: depth first"), "{said:?}");
        let nodes = browser.select(&part("A", "change-nodes")).await?;
        nodes.send_keys(&format!("40{}", char::from(Key::Tab))).await?;
        let two = async || Ok(acts(browser).await?.len() == 2);
        browser.until("the limit is listed", SOON, two).await?;
        button(browser, "A", "run").await?.click().await?;
        status(browser, "A", "node limit").await?;
        assert_eq!(text(browser, "A", "nodes").await?, "40");
        there = figures(browser).await?;
        link = copied_by_hand(browser).await?;
        Ok(())
    })
    .await?;
    let fragment = &link[link.find('#').unwrap_or(0)..];
    visit(Source::File, async |browser| {
        browser.script_with("location.hash = arguments[0]", vec![json!(fragment)]).await?;
        status(browser, "A", "paused").await?;
        button(browser, "A", "run").await?.click().await?;
        status(browser, "A", "node limit").await?;
        assert_eq!(figures(browser).await?, there);
        Ok(())
    })
    .await
}
