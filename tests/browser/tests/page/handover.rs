//! A rival is taken away from the page as the command writes it.

use std::path::Path;

use hullward_tests_browser::Outcome;
use hullward_tests_browser::browser::{Browser, SOON};
use hullward_tests_browser::visit::{Source, visit_chromium};
use tokio::process::Command;

use crate::lanes::{button, status, text};
use crate::share::{CATCH, CAUGHT};

/// The scenario that the page opens with.
const DEMO: &str = "scenarios/mobile-library-round.toml";

/// What a button of a lane's menu saves: the file's name and its text.
async fn taken(browser: &Browser, letter: &str, form: &str) -> Outcome<(String, String)> {
    browser.script("globalThis.file = ''").await?;
    button(browser, letter, form).await?.click().await?;
    let saved = async || Ok(browser.script("return globalThis.file").await? != "");
    browser.until(&format!("{form} of {letter} is saved"), SOON, saved).await?;
    let name = browser.script("return globalThis.file").await?;
    let saved = browser.script_async(CAUGHT, Vec::new()).await?;
    let both = [name, saved].map(|it| it.as_str().unwrap_or_default().to_owned());
    let [name, saved] = both;
    Ok((name, saved))
}

/// What the command writes of a rival of the demo.
async fn written(letter: &str, form: &str) -> Outcome<String> {
    let mut command = Command::new(env!("CARGO"));
    command.current_dir(Path::new(env!("CARGO_MANIFEST_DIR")).join("../.."));
    command.args(["run", "--quiet", "--package", "hullward-command", "--"]);
    let output = command.args(["write", DEMO, "--rival", letter, "--as", form]).output().await?;
    if !output.status.success() {
        return Err(String::from_utf8_lossy(&output.stderr).into());
    }
    Ok(String::from_utf8(output.stdout)?)
}

#[tokio::test(flavor = "multi_thread")]
async fn a_rival_is_taken_away_as_the_command_writes_it() -> Outcome<()> {
    visit_chromium(Source::File, async |browser| {
        status(browser, "C", "root solved").await?;
        browser.script(CATCH).await?;
        for letter in ["A", "C"] {
            browser
                .still(&format!("[data-lane={letter}] [data-testid=take] summary"))
                .await?
                .click()
                .await?;
            for (ending, form) in [("mps", "mps"), ("tex", "latex"), ("txt", "text")] {
                let (name, saved) = taken(browser, letter, ending).await?;
                assert!(
                    name.starts_with(letter) && name.ends_with(&format!(".{ending}")),
                    "{name}"
                );
                assert!(saved == written(letter, form).await?, "{letter} as {form}:\n{saved}");
            }
        }
        let said = text(browser, "C", "taken").await?;
        assert!(said.starts_with("C ") && said.contains("is saved"), "{said}");
        let (name, saved) = taken(browser, "C", "alone").await?;
        let scenario = record::file::parse(&saved).scenario.unwrap_or_default();
        assert!(name.ends_with(".hullward.toml"), "{name}");
        assert_eq!(scenario.rivals.len(), 1);
        assert_eq!(scenario.rivals[0].from.as_deref(), Some("atsp/subtours"));
        assert!(scenario.instance.is_some());
        Ok(())
    })
    .await
}
