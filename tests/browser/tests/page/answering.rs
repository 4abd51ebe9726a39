//! The page stays quick while long work runs.

use hullward_tests_browser::Outcome;
use hullward_tests_browser::browser::{Browser, SOON};
use hullward_tests_browser::visit::{Source, visit, visit_chromium};
use serde_json::{Value, json};

use crate::lanes::{add, button, part, paste, paste_long_work, scattered, status};

/// Milliseconds from a click on Stop to the lane's saying that it has stopped.
const STOP: &str = "
    const [stop, state, done] = arguments;
    const sentence = document.querySelector(state);
    const begun = performance.now();
    new MutationObserver((_, observer) => {
      if (!sentence.textContent.startsWith('stopped')) return;
      observer.disconnect();
      done(performance.now() - begun);
    }).observe(sentence, { characterData: true, childList: true, subtree: true });
    document.querySelector(stop).click();
";

/// A round whose flow for every stop is one long LP.
const LONG_LP_STOPS: u32 = 40;

const WATCH_TASKS: &str = "
    globalThis.longTasks = [];
    new PerformanceObserver((list) => {
      for (const entry of list.getEntries()) longTasks.push(Math.round(entry.duration));
    }).observe({ type: 'longtask' });
";

const LONG_TASK: &str = "
    setTimeout(() => {
      const begun = performance.now();
      while (performance.now() - begun < 80);
    });
";

#[tokio::test(flavor = "multi_thread")]
async fn stop_acts_within_a_tenth_of_a_second() -> Outcome<()> {
    visit(Source::File, async |browser| {
        paste_long_work(browser).await?;
        button(browser, "A", "run").await?.click().await?;
        status(browser, "A", "searching").await?;
        let places = vec![json!(part("A", "stop")), json!(part("A", "status"))];
        let took = browser.script_async(STOP, places).await?;
        assert!(took.as_f64().is_some_and(|took| took <= 100.0), "{took} ms");
        Ok(())
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn stop_acts_as_soon_during_one_long_lp() -> Outcome<()> {
    visit(Source::File, async |browser| {
        paste(browser, &scattered(LONG_LP_STOPS)).await?;
        browser.shows("40 stops, 1,560 drives").await?;
        status(browser, "A", "root solved").await?;
        add(browser, "atsp/multi-commodity").await?;
        status(browser, "D", "solving the relaxation").await?;
        let places = vec![json!(part("D", "stop")), json!(part("D", "status"))];
        let took = browser.script_async(STOP, places).await?;
        assert!(took.as_f64().is_some_and(|took| took <= 100.0), "{took} ms");
        Ok(())
    })
    .await
}

/// What was seen in each of some spells, until one without a long task.
async fn spells(browser: &Browser) -> Outcome<Vec<Value>> {
    let mut seen = Vec::new();
    while seen.len() < 3 && seen.last().is_none_or(|tasks| *tasks != json!([])) {
        browser.script("longTasks.length = 0").await?;
        tokio::time::sleep(std::time::Duration::from_secs(3)).await;
        seen.push(browser.script("return longTasks").await?);
    }
    Ok(seen)
}

// A machine that does other work as well may hold up a task now and then; what is the page's own
// fault shows in each of three spells.
#[tokio::test(flavor = "multi_thread")]
async fn no_task_of_the_page_is_long_while_a_tree_grows() -> Outcome<()> {
    visit_chromium(Source::File, async |browser| {
        paste_long_work(browser).await?;
        browser.script(WATCH_TASKS).await?;
        button(browser, "A", "run").await?.click().await?;
        let seen = spells(browser).await?;
        assert_eq!(seen.last(), Some(&json!([])), "milliseconds: {seen:?}");
        // A long task would have been seen.
        browser.script(LONG_TASK).await?;
        let seen = async || Ok(browser.script("return longTasks.length").await? == 1);
        browser.until("the test's own long task is seen", SOON, seen).await
    })
    .await
}
