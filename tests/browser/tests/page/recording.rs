//! What the page saves of a decision is what the command writes of the same scenario.

use std::path::{Path, PathBuf};

use hullward_tests_browser::Outcome;
use hullward_tests_browser::browser::{Browser, SOON};
use hullward_tests_browser::visit::{Source, visit_chromium};
use serde_json::Value;
use tokio::process::Command;

use crate::lanes::status;
use crate::share::{CATCH, CAUGHT, open_link};
use crate::studies::ask;

/// Two rivals on invented drives, their relaxations alone, and three studies in the page's order.
const SCENARIO: &str = "hullward = 1\ntitle = \"A small round\"\nseed = 7\nnotes = \"Decided: C.\"\n\n\
    [instance]\ntext = '''\n\tAsh\tBirch\tCedar\tDeal\nAsh\t\t4\t7\t3\nBirch\t5\t\t2\t6\nCedar\t8\t3\t\t4\nDeal\t2\t7\t5\t\n'''\n\n\
    [[rival]]\ntitle = \"Labels\"\nfrom = \"atsp/labels\"\n\n[[rival]]\ntitle = \"Subtours\"\nfrom = \"atsp/subtours\"\n\n[run]\nsearch = false\n\n\
    [[study]]\nkind = \"equivalence\"\n\n[[study]]\nkind = \"order\"\n\n[[study]]\nkind = \"ladder\"\n";

/// What a button saves: the file's name and its text.
async fn saved(browser: &Browser, button: &str) -> Outcome<(String, String)> {
    browser.script("globalThis.file = ''").await?;
    browser.still(&format!("[data-testid={button}]")).await?.click().await?;
    let is_saved = async || Ok(browser.script("return globalThis.file").await? != "");
    browser.until(&format!("{button} saves"), SOON, is_saved).await?;
    let name = browser.script("return globalThis.file").await?;
    let text = browser.script_async(CAUGHT, Vec::new()).await?;
    let [name, text] = [name, text].map(|it| it.as_str().unwrap_or_default().to_owned());
    Ok((name, text))
}

/// What the command writes of a file.
async fn written(file: &Path, form: &str, more: &[&str]) -> Outcome<String> {
    let mut command = Command::new(env!("CARGO"));
    command.current_dir(Path::new(env!("CARGO_MANIFEST_DIR")).join("../.."));
    command.args(["run", "--quiet", "--package", "hullward-command", "--", "write"]);
    let output = command.arg(file).args(["--as", form]).args(more).output().await?;
    if !output.status.success() {
        return Err(String::from_utf8_lossy(&output.stderr).into());
    }
    Ok(String::from_utf8(output.stdout)?)
}

/// The formulations were set in the record of the command alone; JSON, CSV, SVG
/// and a scenario without names could not be had from the page.
#[tokio::test(flavor = "multi_thread")]
async fn a_record_is_saved_as_the_command_writes_it() -> Outcome<()> {
    let scenario = record::file::parse(SCENARIO).scenario.ok_or("the scenario is read")?;
    let file = PathBuf::from(env!("CARGO_TARGET_TMPDIR")).join("recorded.toml");
    std::fs::write(&file, record::file::print(&scenario))?;
    visit_chromium(Source::File, async |browser| {
        open_link(browser, &scenario).await?;
        for letter in ["A", "B"] {
            status(browser, letter, "root solved").await?;
        }
        for kind in ["equivalence", "order", "ladder"] {
            ask(browser, kind).await?;
        }
        browser.script(CATCH).await?;
        let forms = [
            ("record-html", "report", ".html"),
            ("record-markdown", "markdown", ".md"),
            ("record-csv", "csv", ".csv"),
            ("record-svg", "svg", ".svg"),
        ];
        for (button, form, ending) in forms {
            let (name, text) = saved(browser, button).await?;
            assert!(name.starts_with("A small round") && name.ends_with(ending), "{name}");
            let wanted = written(&file, form, &[]).await?;
            same_lines(form, &text, &wanted);
        }
        let (_, html) = saved(browser, "record-html").await?;
        assert!(html.contains("<math") && html.contains("<msub>"), "formulations are set");
        assert!(html.contains("aria-label=\"Bounds of A on the way"), "ladders are drawn");
        same_object(&saved(browser, "record-json").await?.1, &written(&file, "json", &[]).await?)?;
        stripped(browser, &file).await
    })
    .await
}

/// The first line that differs, if one does.
fn same_lines(form: &str, page: &str, command: &str) {
    let differ = page.lines().zip(command.lines()).find(|(one, other)| one != other);
    assert_eq!(differ, None, "{form}");
    assert_eq!(page.len(), command.len(), "{form}");
}

/// The command adds results and studies in full; all else is the same.
fn same_object(page: &str, command: &str) -> Outcome<()> {
    let [page, command]: [Value; 2] = [serde_json::from_str(page)?, serde_json::from_str(command)?];
    for field in ["hullward_record", "engine", "intervals", "scenario", "record"] {
        assert!(page[field] == command[field] && !page[field].is_null(), "{field}: {page:#}");
    }
    assert_eq!(page["record"][0]["title"], "A small round");
    assert!(command["studies"].is_array(), "{command:#}");
    Ok(())
}

/// Names are replaced and costs multiplied as the command does; a factor that is none is refused in words.
async fn stripped(browser: &Browser, file: &Path) -> Outcome<()> {
    let (name, text) = saved(browser, "stripped").await?;
    assert!(name.ends_with(".hullward.toml") && !text.contains("Ash"), "{name}: {text}");
    assert_eq!(text, written(file, "stripped", &[]).await?);
    let factor = browser.select("[data-testid=stripped-factor]").await?;
    factor.clear().await?;
    factor.send_keys("2.5").await?;
    let (_, text) = saved(browser, "stripped").await?;
    assert_eq!(text, written(file, "stripped", &["--scale", "2.5"]).await?);
    factor.clear().await?;
    factor.send_keys("nothing").await?;
    browser.still("[data-testid=stripped]").await?.click().await?;
    browser.shows("the factor must be over 0, not nothing").await
}
