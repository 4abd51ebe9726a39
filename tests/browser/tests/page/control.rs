//! A search steered to the next plan and past its limit, its log saved as a file, and all rows that a
//! plan breaks.

use fantoccini::key::Key;
use hullward_tests_browser::Outcome;
use hullward_tests_browser::browser::{Browser, SOON};
use hullward_tests_browser::visit::{Source, visit, visit_chromium};
use record::event::Event;
use record::file::parse;
use record::log::decode;
use serde_json::json;

use crate::lanes::{button, part, paste, scattered, status, text};
use crate::share::{CATCH, says};

fn scenario(run: &str) -> String {
    format!(
        "hullward = 1\n[instance]\nreader = \"points\"\ntext = '''\n{}'''\n\
         [[rival]]\nfrom = \"atsp/labels\"\n[run]\n{run}\n",
        scattered(9)
    )
}

async fn opened(browser: &Browser, run: &str) -> Outcome<()> {
    paste(browser, &scenario(run)).await?;
    browser.shows("9 stops").await?;
    // The lane of before stands here until then, and its root is solved as well.
    browser.shows("74 rows").await?;
    status(browser, "A", "root solved").await
}

/// What the page saves in place of what it would download, as bytes.
async fn saved(browser: &Browser) -> Outcome<(String, Vec<u8>)> {
    browser.script(CATCH).await?;
    button(browser, "A", "save-log").await?.click().await?;
    let there =
        async || Ok(browser.script("return globalThis.blob !== null").await? == json!(true));
    browser.until("a file is saved", SOON, there).await?;
    let name = browser.script("return globalThis.file").await?;
    let read = "const done = arguments[arguments.length - 1]; \
        globalThis.blob.arrayBuffer().then((b) => done([...new Uint8Array(b)]))";
    let bytes = browser.script_async(read, Vec::new()).await?;
    Ok((name.as_str().unwrap_or_default().to_owned(), serde_json::from_value(bytes)?))
}

#[tokio::test(flavor = "multi_thread")]
async fn a_log_is_saved_by_the_page_and_proved_once_it_is_opened() -> Outcome<()> {
    let file = std::env::temp_dir().join(format!("hullward-{}-page.log", std::process::id()));
    let outcome = visit_chromium(Source::File, async |browser| {
        opened(browser, "").await?;
        button(browser, "A", "run").await?.click().await?;
        status(browser, "A", "optimal").await?;
        let (name, bytes) = saved(browser).await?;
        assert!(name.starts_with("A ") && name.ends_with(".log"), "{name}");
        let log = decode(&bytes)?;
        let solved = log.events.iter().filter(|event| matches!(event, Event::Solved { .. }));
        let nodes = text(browser, "A", "nodes").await?;
        let digits: String = nodes.chars().filter(char::is_ascii_digit).collect();
        assert_eq!(solved.count().to_string(), digits, "{nodes}");
        let ground = log.ground.ok_or("it says what it rests on")?;
        let of = parse(&ground.scenario).scenario.ok_or("its scenario is read")?;
        assert_eq!(of.rivals[0].from.as_deref(), Some("atsp/labels"));
        std::fs::write(&file, bytes)?;
        let input = browser.select("[data-testid=open-file]").await?;
        input.send_keys(&file.display().to_string()).await?;
        says(browser, "Proved again: no plan is better than").await
    })
    .await;
    let _ = std::fs::remove_file(file);
    outcome
}

#[tokio::test(flavor = "multi_thread")]
async fn a_search_stands_still_at_the_next_plan_and_goes_on_past_its_limit() -> Outcome<()> {
    visit(Source::File, async |browser| {
        opened(browser, "nodes = 12\nheuristics = []\nselection = \"depth first\"").await?;
        button(browser, "A", "next-plan").await?.click().await?;
        let rests = async || {
            let said = text(browser, "A", "status").await?;
            Ok(said.contains("paused") || said.contains("node limit"))
        };
        browser.until("it rests", SOON, rests).await?;
        button(browser, "A", "run").await?.click().await?;
        status(browser, "A", "node limit").await?;
        let open = "document.querySelector(arguments[0]).open = true";
        browser.script_with(open, vec![part("A", "change").into()]).await?;
        let nodes = browser.select(&part("A", "change-nodes")).await?;
        // The key: Firefox types the character for tabs and stays where it is.
        nodes.send_keys(&format!("0{}", char::from(Key::Tab))).await?;
        status(browser, "A", "optimal").await
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn all_rows_that_a_plan_breaks_can_be_seen() -> Outcome<()> {
    visit(Source::File, async |browser| {
        let legs = |a: u32| (0..9).filter(move |b| *b != a).map(move |b| (a, b));
        let names: Vec<String> = scattered(9)
            .lines()
            .filter_map(|line| line.split_whitespace().next().map(str::to_owned))
            .collect();
        let lines: String = (0..9)
            .flat_map(legs)
            .map(|(a, b)| format!("x[{}, {}] = 3\n", names[a as usize], names[b as usize]))
            .collect();
        opened(browser, &format!("plan = '''\n{lines}'''")).await?;
        button(browser, "A", "run").await?.click().await?;
        status(browser, "A", "optimal").await?;
        let count = async || {
            let script = "return document.querySelectorAll(`${arguments[0]} li`).length";
            Ok(browser.script_with(script, vec![part("A", "all-broken").into()]).await?
                == json!(70))
        };
        // 72 bounds and 18 stops, of which twenty are told at once.
        browser.until("the others are listed", SOON, count).await
    })
    .await
}
