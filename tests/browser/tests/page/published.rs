//! Round trips of published size in the browser, with the seconds that they take. They take
//! minutes and depend on the clock, so they run where `HULLWARD_LONG` is set (`-- --nocapture`), with
//! the folder of the open data in `HULLWARD_DATA`.

#![expect(clippy::disallowed_types, reason = "these say how long the page takes")]

use std::time::{Duration, Instant};

use hullward_tests_browser::Outcome;
use hullward_tests_browser::visit::{Source, visit};

use crate::lanes::{button, part, paste, scattered, text};

/// Whether long tests are asked for.
fn long() -> bool {
    std::env::var_os("HULLWARD_LONG").is_some()
}

/// The status of the first lane, once it holds one of these words.
async fn until(
    browser: &hullward_tests_browser::browser::Browser,
    words: &[&str],
    limit: Duration,
) -> Outcome<String> {
    let holds = async || {
        let said = browser
            .script_with(
                "return document.querySelector(arguments[0])?.textContent ?? ''",
                vec![part("A", "status").into()],
            )
            .await?;
        let said = said.as_str().unwrap_or_default();
        Ok(words.iter().any(|word| said.contains(word)))
    };
    browser.until(&format!("A is {words:?}"), limit, holds).await?;
    text(browser, "A", "status").await
}

/// Six symmetric round trips of TSPLIB (Reinelt 1991) with their published optima, by subtours on
/// demand and blossoms.
const TRIPS: [(&str, &str); 6] = [
    ("eil51", "426"),
    ("berlin52", "7,542"),
    ("st70", "675"),
    ("eil76", "538"),
    ("rat99", "1,211"),
    ("kroA100", "21,282"),
];

#[tokio::test(flavor = "multi_thread")]
async fn up_to_a_hundred_stops_are_solved_to_the_published_optimum() -> Outcome<()> {
    if !long() {
        return Ok(());
    }
    let data = std::env::var("HULLWARD_DATA")?;
    for (name, optimum) in TRIPS {
        let file = std::fs::read_to_string(format!("{data}/tsplib/{name}.tsp"))?;
        let scenario = format!(
            "hullward = 1\n[instance]\nreader = \"tsplib\"\ntext = '''\n{file}\n'''\n\
             [[rival]]\nfrom = \"tsp/subtours\"\n[run]\nnodes = 0\ncuts = [\"blossom\"]\n"
        );
        visit(Source::File, async |browser| {
            paste(browser, &scenario).await?;
            let begun = Instant::now();
            until(browser, &["root solved"], Duration::from_secs(120)).await?;
            let root = begun.elapsed().as_secs_f64();
            button(browser, "A", "run").await?.click().await?;
            let begun = Instant::now();
            let said = until(browser, &["optimal", "limit"], Duration::from_secs(600)).await?;
            let search = begun.elapsed().as_secs_f64();
            println!("{name}: root {root:.1} s, search {search:.1} s: {said}");
            assert!(said.contains(optimum) && said.contains("optimal"), "{said}");
            Ok(())
        })
        .await?;
    }
    Ok(())
}

/// The subtour bound of 200 scattered points (invented) within five seconds.
#[tokio::test(flavor = "multi_thread")]
async fn the_subtour_bound_of_two_hundred_stops_is_there_within_five_seconds() -> Outcome<()> {
    if !long() {
        return Ok(());
    }
    let scenario = format!(
        "hullward = 1\n[instance]\nreader = \"points\"\ntext = '''\n{}'''\n\
         [[rival]]\nfrom = \"tsp/subtours\"\n",
        scattered(200)
    );
    visit(Source::File, async |browser| {
        paste(browser, &scenario).await?;
        let begun = Instant::now();
        until(browser, &["root solved"], Duration::from_secs(60)).await?;
        let took = begun.elapsed();
        println!("200 stops: {:.2} s", took.as_secs_f64());
        assert!(took < Duration::from_secs(5), "{took:?}");
        Ok(())
    })
    .await
}
