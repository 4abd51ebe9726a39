//! Studies over several instances, and the results of a team's own solver pasted beside them.

use hullward_tests_browser::Outcome;
use hullward_tests_browser::browser::{Browser, SOON};
use hullward_tests_browser::visit::{Source, visit, visit_chromium};
use serde_json::json;

use crate::data::TWO;
use crate::lanes::{paste, status};

/// What a study shows, once it has an answer that holds `words`.
async fn answered(browser: &Browser, kind: &str, words: &str) -> Outcome<String> {
    let script = "return document.querySelector(`[data-study=${arguments[0]}]`).textContent";
    let said = async || {
        let text = browser.script_with(script, vec![kind.into()]).await?;
        Ok::<_, Box<dyn std::error::Error>>(text.as_str().unwrap_or_default().to_owned())
    };
    let what = format!("{kind} says {words:?}");
    browser.until(&what, 4 * SOON, async || Ok(said().await?.contains(words))).await?;
    said().await
}

async fn two_days(browser: &Browser) -> Outcome<()> {
    paste(browser, TWO).await?;
    browser.shows("3 stops, 6 drives").await?;
    status(browser, "B", "root solved").await
}

#[tokio::test(flavor = "multi_thread")]
async fn a_study_is_asked_of_the_chosen_instance_or_of_all() -> Outcome<()> {
    visit_chromium(Source::File, async |browser| {
        two_days(browser).await?;
        let whose = "return [...document.querySelectorAll('[data-study=ladder] [data-testid=study-part] summary')]
            .map((summary) => summary.textContent.split(' – ')[0])";
        browser.still("[data-testid=study-ladder]").await?.click().await?;
        answered(browser, "ladder", "Of Monday.").await?;
        assert_eq!(browser.script(whose).await?, json!([]));
        browser.still("[data-testid=study-ladder-all]").await?.click().await?;
        answered(browser, "ladder", "Tuesday – ").await?;
        assert_eq!(browser.script(whose).await?, json!(["Monday", "Tuesday"]));
        // The record tells which answer is of which day.
        let keep = "URL.createObjectURL = (blob) => { blob.text().then((text) => { globalThis.saved = text; }); return '#'; }";
        browser.script(keep).await?;
        browser.still("[data-testid=record-markdown]").await?.click().await?;
        let saved = async || {
            let text = browser.script("return globalThis.saved ?? ''").await?;
            let text = text.as_str().unwrap_or_default().to_owned();
            Ok(text.contains("(Monday)") && text.contains("(Tuesday)"))
        };
        browser.until("the record names both days", SOON, saved).await
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn results_of_the_teams_own_solver_are_pasted_and_summed_up() -> Outcome<()> {
    visit(Source::File, async |browser| {
        two_days(browser).await?;
        let field = browser.select("[data-testid=production-text]").await?;
        // B may have no plan of 9 on Monday: its proved bound is 10.
        let pasted = "instance\trival\tbound\tplan\tnodes\ttime\n\
            Monday\tA\t10\t10\t70\t3\nMonday\tB\t9\t9\t3\t1\n\
            Tuesday\tA\t62\t62\t900\t15\nTuesday\tB\t62\t62\t1\t3\n";
        browser.paste(&field, pasted).await?;
        browser.still("[data-testid=study-production]").await?.click().await?;
        let said = answered(browser, "production", "4 pasted results").await?;
        // Shifted by a second: A √(4 · 16) − 1 = 7 s, B √(2 · 4) − 1 = 1.828 s.
        assert!(said.contains("1.828"), "{said}");
        answered(browser, "production", "better than the bound that is proved here").await?;
        // The table is of the scenario: undone and redone, and in its link.
        browser.find("button", "Undo: ").await?.click().await?;
        browser.find("button", "Redo: ").await?.click().await?;
        assert_eq!(field.prop("value").await?.as_deref(), Some(pasted));
        // What cannot be read is told by its line.
        browser.paste(&field, &pasted.replace("\t900\t", "\tmany\t")).await?;
        browser.shows("have changed since: ask again").await?;
        browser.still("[data-testid=study-production]").await?.click().await?;
        let said = answered(browser, "production", "line 4").await?;
        assert!(said.contains("many"), "{said}");
        browser.paste(&field, "what is this").await?;
        browser.still("[data-testid=study-production]").await?.click().await?;
        answered(browser, "production", "headings").await?;
        Ok(())
    })
    .await
}

/// A flow whose capacities are left out is the assignment alone, of which no theorem of the catalogue
/// speaks under that name.
#[tokio::test(flavor = "multi_thread")]
async fn the_order_on_all_instances_is_summed_up_above_each() -> Outcome<()> {
    visit(Source::File, async |browser| {
        let rivals = TWO.replace(
            "from = \"atsp/subtours\"\n",
            "from = \"atsp/one-commodity\"\nfamilies = { capacity = \"out\" }\n",
        );
        paste(browser, &rivals).await?;
        browser.shows("3 stops, 6 drives").await?;
        status(browser, "B", "root solved").await?;
        browser.still("[data-testid=study-order-all]").await?.click().await?;
        let said = answered(browser, "order", "of 2 instances").await?;
        let table =
            "return [...document.querySelectorAll('[data-study=order] > .finding tbody th')]
            .map((head) => head.textContent)";
        assert_eq!(browser.script(table).await?, json!(["Monday", "Tuesday"]), "{said}");
        Ok(())
    })
    .await
}
