//! Steering by hand: what a person does to a search is listed, undone, and replayed from a link.

use hullward_tests_browser::Outcome;
use hullward_tests_browser::browser::{Browser, SOON};
use hullward_tests_browser::visit::{Source, visit};
use serde_json::json;

use crate::lanes::{part, paste, scattered, status, text};
use crate::share::copied_by_hand;

/// Selects an open node that may be branched on in the tree's text twin.
async fn select_open(browser: &Browser, letter: &str) -> Outcome<()> {
    let opened = "document.querySelector(`[data-lane=${arguments[0]}] .twin`).open = true";
    browser.script_with(opened, vec![json!(letter)]).await?;
    let press = "const items = [...document.querySelectorAll(`[data-lane=${arguments[0]}] .item`)]; \
                 const open = items.filter((item) => item.textContent.includes('open')); \
                 open[arguments[1]]?.click(); return open.length";
    let count = async |place: u64| {
        let made = browser.script_with(press, vec![json!(letter), json!(place)]).await?;
        Ok::<u64, Box<dyn std::error::Error>>(made.as_u64().unwrap_or(0))
    };
    let what = format!("{letter} has an open node");
    browser.until(&what, SOON, async || Ok(count(0).await? > 0)).await?;
    let said = "const said = document.querySelector('[data-testid=by-hand]')?.textContent ?? ''; \
                const open = document.querySelector('[data-testid=inspector]').textContent \
                    .includes('This node is open'); return open ? said : ''";
    for place in 0..count(0).await? {
        count(place).await?;
        let told = async || Ok(browser.script(said).await? != "");
        browser.until("the node is shown", SOON, told).await?;
        tokio::time::sleep(std::time::Duration::from_millis(300)).await;
        let said = browser.script(said).await?;
        if said.as_str().is_some_and(|said| said.starts_with("Branch on a variable")) {
            return Ok(());
        }
    }
    Err("no open node may be branched on".into())
}

async fn acts(browser: &Browser, letter: &str) -> Outcome<Vec<String>> {
    let script = "return [...document.querySelectorAll(`${arguments[0]} li`)] \
                  .map((act) => act.firstChild.textContent)";
    let acts = browser.script_with(script, vec![part(letter, "acts").into()]).await?;
    Ok(serde_json::from_value(acts)?)
}

async fn has_acts(browser: &Browser, letter: &str, count: usize) -> Outcome<()> {
    let what = format!("{letter} lists {count} acts");
    browser.until(&what, SOON, async || Ok(acts(browser, letter).await?.len() == count)).await
}

/// A round by subtours on demand that takes some nodes.
const SUBTOURS: &str = include_str!("../../fixtures/steered-subtours.toml");

/// What must be the same after a replay.
async fn figures(browser: &Browser, letter: &str) -> Outcome<[String; 4]> {
    let mut figures = [const { String::new() }; 4];
    for (figure, name) in figures.iter_mut().zip(["root-bound", "bound", "nodes", "status"]) {
        *figure = text(browser, letter, name).await?;
    }
    Ok(figures)
}

/// Rivals of a round of points: position labels, and subtours on demand.
fn scenario() -> String {
    let points = scattered(9);
    format!(
        "hullward = 1\ntitle = \"Steered\"\n[instance]\nreader = \"points\"\ntext = '''\n{points}'''\n\
         [[rival]]\nfrom = \"atsp/labels\"\n[[rival]]\nfrom = \"atsp/subtours\"\n"
    )
}

/// Presses a button of a lane, wherever the page is scrolled to.
async fn press_in(browser: &Browser, letter: &str, name: &str) -> Outcome<()> {
    let press = "document.querySelector(arguments[0]).click()";
    browser.script_with(press, vec![part(letter, name).into()]).await?;
    Ok(())
}

/// Presses the first button whose accessible name begins with `name`.
async fn press_named(browser: &Browser, name: &str) -> Outcome<()> {
    Ok(browser.find("button", name).await?.click().await?)
}

#[tokio::test(flavor = "multi_thread")]
async fn what_was_done_by_hand_is_replayed_from_a_link() -> Outcome<()> {
    let (mut link, mut there, mut listed) = (String::new(), None, Vec::new());
    visit(Source::File, async |browser| {
        paste(browser, &scenario()).await?;
        browser.shows("9 stops").await?;
        status(browser, "A", "root solved").await?;
        for _ in 0..3 {
            press_in(browser, "A", "step").await?;
            status(browser, "A", "paused").await?;
        }
        select_open(browser, "A").await?;
        press_named(browser, "Branch here on x[").await?;
        has_acts(browser, "A", 1).await?;
        assert!(acts(browser, "A").await?[0].contains(": branched node "));
        browser.shows("It will be branched on x[").await?;
        press_in(browser, "A", "step").await?;
        status(browser, "A", "paused").await?;
        select_open(browser, "A").await?;
        press_named(browser, "Close this subtree").await?;
        has_acts(browser, "A", 2).await?;
        press_in(browser, "A", "run").await?;
        status(browser, "A", "closed").await?;
        there = Some(figures(browser, "A").await?);
        listed = acts(browser, "A").await?;
        link = copied_by_hand(browser).await?;
        Ok(())
    })
    .await?;
    let fragment = &link[link.find('#').unwrap_or(0)..];
    visit(Source::File, async |browser| {
        browser.script_with("location.hash = arguments[0]", vec![json!(fragment)]).await?;
        has_acts(browser, "A", 2).await?;
        status(browser, "A", "paused").await?;
        assert_eq!(acts(browser, "A").await?, listed);
        press_in(browser, "A", "run").await?;
        status(browser, "A", "closed").await?;
        assert_eq!(Some(figures(browser, "A").await?), there);
        Ok(())
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn undo_brings_back_the_run_without_the_act() -> Outcome<()> {
    visit(Source::File, async |browser| {
        paste(browser, &scenario()).await?;
        browser.shows("9 stops").await?;
        status(browser, "A", "root solved").await?;
        for _ in 0..3 {
            press_in(browser, "A", "step").await?;
            status(browser, "A", "paused").await?;
        }
        let before = figures(browser, "A").await?;
        select_open(browser, "A").await?;
        press_named(browser, "Close this subtree").await?;
        has_acts(browser, "A", 1).await?;
        let closed = figures(browser, "A").await?;
        assert_ne!(closed, before);
        let same = async |expected: &[String; 4]| {
            let what = "the run is led there";
            browser.until(what, SOON, async || Ok(figures(browser, "A").await? == *expected)).await
        };
        browser.still("[data-testid=undo]").await?.click().await?;
        has_acts(browser, "A", 0).await?;
        same(&before).await?;
        browser.still("[data-testid=redo]").await?.click().await?;
        has_acts(browser, "A", 1).await?;
        same(&closed).await?;
        press_named(browser, "Forget all acts in A").await?;
        same(&before).await
    })
    .await
}

/// A stop was lost on the way: the link ran on past it.
#[tokio::test(flavor = "multi_thread")]
async fn a_stop_is_an_act_and_run_takes_it_back() -> Outcome<()> {
    visit(Source::File, async |browser| {
        paste(browser, &scattered(30)).await?;
        browser.shows("30 stops, 870 drives").await?;
        status(browser, "A", "root solved").await?;
        press_in(browser, "A", "run").await?;
        status(browser, "A", "searching").await?;
        press_in(browser, "A", "stop").await?;
        status(browser, "A", "stopped (by hand)").await?;
        has_acts(browser, "A", 1).await?;
        let nodes = text(browser, "A", "nodes").await?;
        let link = copied_by_hand(browser).await?;
        let fragment = &link[link.find('#').unwrap_or(0)..];
        browser.script_with("location.hash = arguments[0]", vec![json!(fragment)]).await?;
        browser.shows("Opened from the link").await?;
        status(browser, "A", "stopped (by hand)").await?;
        assert_eq!(text(browser, "A", "nodes").await?, nodes);
        press_in(browser, "A", "run").await?;
        has_acts(browser, "A", 0).await?;
        status(browser, "A", "searching").await
    })
    .await
}

/// Looks at every open node of a lane for a violated row and adds the first.
async fn add_a_row(browser: &Browser, letter: &str) -> Outcome<bool> {
    let twin = "document.querySelector(`[data-lane=${arguments[0]}] .twin`).open = true";
    browser.script_with(twin, vec![json!(letter)]).await?;
    let show = "const items = [...document.querySelectorAll(`[data-lane=${arguments[0]}] .item`)]; \
                const open = items.filter((item) => item.textContent.includes('open')); \
                open[arguments[1]]?.click(); return arguments[1] < open.length";
    for place in 0..40 {
        if browser.script_with(show, vec![json!(letter), json!(place)]).await? != true {
            break;
        }
        tokio::time::sleep(std::time::Duration::from_millis(300)).await;
        let press = "const add = document.querySelector('.add-row'); add?.click(); return !!add";
        if browser.script(press).await? == true {
            return Ok(true);
        }
    }
    Ok(false)
}

#[tokio::test(flavor = "multi_thread")]
async fn a_violated_row_is_added_by_hand() -> Outcome<()> {
    visit(Source::File, async |browser| {
        browser.shows("18 stops").await?;
        status(browser, "A", "root solved").await?;
        // The labels have no family on demand: their sets are shown, and that they are not added.
        browser.shows("cannot be added by hand").await?;
        paste(browser, SUBTOURS).await?;
        browser.shows("26 stops").await?;
        status(browser, "A", "root solved").await?;
        for _ in 0..24 {
            press_in(browser, "A", "step").await?;
            status(browser, "A", "paused").await?;
            if add_a_row(browser, "A").await? {
                has_acts(browser, "A", 1).await?;
                assert!(acts(browser, "A").await?[0].contains(": added "));
                return Ok(());
            }
        }
        Err("no open node showed a violated row".into())
    })
    .await
}

/// The rule by hand: no node has children before a person says on what.
#[tokio::test(flavor = "multi_thread")]
async fn by_hand_every_node_waits_for_a_person() -> Outcome<()> {
    visit(Source::File, async |browser| {
        paste(browser, &scenario()).await?;
        browser.shows("9 stops").await?;
        status(browser, "A", "root solved").await?;
        browser.select("[data-testid=rule]").await?.select_by_value("by hand").await?;
        status(browser, "A", "root solved").await?;
        press_in(browser, "A", "run").await?;
        status(browser, "A", "waits for a branching by hand").await?;
        assert_eq!(text(browser, "A", "nodes").await?, "1");
        press_named(browser, "Branch here on x[").await?;
        has_acts(browser, "A", 1).await?;
        press_in(browser, "A", "run").await?;
        let three = async || Ok(text(browser, "A", "nodes").await? == "3");
        browser.until("both children are solved", SOON, three).await?;
        status(browser, "A", "waits for a branching by hand").await
    })
    .await
}
