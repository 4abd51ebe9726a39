//! Logs that were saved elsewhere are proved in the page; changed ones are refused; a proof stops.

use std::path::{Path, PathBuf};

use hullward_tests_browser::Outcome;
use hullward_tests_browser::browser::{Browser, SOON};
use hullward_tests_browser::visit::{Source, visit};
use record::event::{Event, Log, NodeNumber, NodeState};
use record::ground::Ground;
use record::log::{decode, encode, version};
use serde_json::json;

use crate::lanes::{button, part, paste, scattered, status, text};
use crate::share::says;

/// Saved by `hullward run --log`: seven invented stops, closed by general cuts.
const SAVED: &str = concat!(env!("CARGO_MANIFEST_DIR"), "/fixtures/seven-stops.log");

async fn open(browser: &Browser, file: &Path) -> Outcome<()> {
    let input = browser.select("[data-testid=open-file]").await?;
    Ok(input.send_keys(&file.display().to_string()).await?)
}

/// A file of this log in the folder for what tests leave behind.
fn written(name: &str, log: &Log) -> Outcome<PathBuf> {
    let file = std::env::temp_dir().join(format!("hullward-{}-{name}", std::process::id()));
    std::fs::write(&file, encode(log)?)?;
    Ok(file)
}

#[tokio::test(flavor = "multi_thread")]
async fn a_log_from_elsewhere_is_proved_and_a_changed_one_refused() -> Outcome<()> {
    let log = decode(&std::fs::read(SAVED)?)?;
    let changed = |change: &dyn Fn(&mut Log)| {
        let mut other = log.clone();
        change(&mut other);
        other
    };
    let dearer = changed(&|log| {
        for event in &mut log.events {
            if let Event::Incumbent { value, .. } = event {
                *value -= 1.0;
            }
        }
    });
    let stronger = changed(&|log| {
        if let Some(ground) = &mut log.ground {
            ground.evidence.cuts.cuts[2].side = "-1000".to_owned();
        }
    });
    let files = [written("dearer.log", &dearer)?, written("stronger.log", &stronger)?];
    let outcome = visit(Source::File, async |browser| {
        status(browser, "A", "root solved").await?;
        open(browser, Path::new(SAVED)).await?;
        says(browser, "seven-stops.log, Position labels").await?;
        says(browser, "Proved again: no plan is better than 26").await?;
        says(browser, "general cuts proved as well").await?;
        open(browser, &files[0]).await?;
        says(browser, "its plan costs 26, not 25").await?;
        open(browser, &files[1]).await?;
        says(browser, "rests on cut 3 (").await
    })
    .await;
    files.iter().try_for_each(std::fs::remove_file)?;
    outcome
}

/// A log of one node, said to be closed by a value that was given: the audit has all to do.
fn much_to_prove() -> Log {
    let scenario = format!(
        "hullward = 1\n[instance]\nreader = \"points\"\ntext = '''\n{}'''\n\
         [[rival]]\nfrom = \"atsp/labels\"\n[run]\nbest_known = 1.0\n",
        scattered(60)
    );
    let root = NodeNumber(1);
    let solved = Event::Solved {
        node: root,
        state: NodeState::Closed,
        bound: None,
        fractional: 9,
        iterations: 0,
        rows_added: 0,
        branch_column: None,
    };
    let events = vec![Event::Created { node: root, parent: None, branching: None }, solved];
    let ground = Some(Ground { scenario, ..Ground::default() });
    Log { version: version(ground.as_ref()), engine: "0.1.0".to_owned(), events, ground }
}

#[tokio::test(flavor = "multi_thread")]
async fn the_proof_of_a_log_says_how_far_it_is_and_stops() -> Outcome<()> {
    let mut log = much_to_prove();
    // A value below the relaxation is proved at once; one far above it never is within the limits.
    if let Some(ground) = &mut log.ground {
        ground.scenario = ground.scenario.replace("best_known = 1.0", "best_known = 100000.0");
    }
    let file = written("much.log", &log)?;
    let outcome = visit(Source::File, async |browser| {
        status(browser, "A", "root solved").await?;
        open(browser, &file).await?;
        let doing = async || {
            let script =
                "return document.querySelector('[data-testid=proving]')?.textContent ?? ''";
            let words = browser.script(script).await?;
            Ok(words.as_str().unwrap_or_default().contains("proving: 0 of 1 nodes"))
        };
        browser.until("the proof is under way", SOON, doing).await?;
        browser.script("document.querySelector('[data-testid=stop-proving]').click()").await?;
        says(browser, "stopped while proving: 0 of 1 nodes, so this is no proof").await?;
        let gone = "return document.querySelector('[data-testid=proving]') === null";
        assert_eq!(browser.script(gone).await?, json!(true));
        Ok(())
    })
    .await;
    std::fs::remove_file(file)?;
    outcome
}

/// Stop acts while the lane's own search is proved again, and Prove may be pressed once more.
#[tokio::test(flavor = "multi_thread")]
async fn the_proof_of_a_lane_stops() -> Outcome<()> {
    visit(Source::File, async |browser| {
        let points = scattered(9);
        let scenario = format!(
            "hullward = 1\n[instance]\nreader = \"points\"\ntext = '''\n{points}'''\n\
             [[rival]]\nfrom = \"atsp/labels\"\n"
        );
        paste(browser, &scenario).await?;
        browser.shows("9 stops").await?;
        status(browser, "A", "root solved").await?;
        button(browser, "A", "run").await?.click().await?;
        status(browser, "A", "optimal").await?;
        let script = "const press = (name) => \
            document.querySelector(arguments[0] + ` [data-testid=${name}]`).click(); \
            const done = arguments[1]; press('prove'); \
            setTimeout(() => { press('stop'); done(true) }, 60)";
        let lane = "[data-lane=A]";
        browser.script_async(script, vec![json!(lane)]).await?;
        let said = async || Ok(text(browser, "A", "notice").await?.contains("this is no proof"));
        browser.until("the proof is stopped", SOON, said).await?;
        button(browser, "A", "prove").await?.click().await?;
        let proved = async || {
            let found = browser.script_with(
                "return document.querySelector(arguments[0])?.textContent ?? ''",
                vec![part("A", "proved").into()],
            );
            Ok(found.await?.as_str().unwrap_or_default().contains("Proved again"))
        };
        browser.until("it is proved", 6 * SOON, proved).await
    })
    .await
}
