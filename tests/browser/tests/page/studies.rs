//! The studies of the evidence: asked at a button, answered in words, kept with the scenario.

use hullward_tests_browser::Outcome;
use hullward_tests_browser::browser::{Browser, SOON};
use hullward_tests_browser::screen::Screen;
use hullward_tests_browser::visit::{Source, visit};

use crate::lanes::{paste, status};

/// Two directions of a triangle: 10 one way, 11 the other.
const TRIANGLE: &str = "\tA\tB\tC\nA\t\t1\t2\nB\t3\t\t4\nC\t5\t6\t\n";

/// Asks a study at its button; what is answered.
pub(crate) async fn ask(browser: &Browser, kind: &str) -> Outcome<String> {
    browser.still(&format!("[data-testid=study-{kind}]")).await?.click().await?;
    let script = "const study = document.querySelector(`[data-study=${arguments[0]}]`); \
                  return study.querySelector('.finding') ? study.innerText : ''";
    let what = format!("{kind} is answered");
    browser
        .until(&what, 4 * SOON, async || Ok(!said(browser, script, kind).await?.is_empty()))
        .await?;
    said(browser, script, kind).await
}

async fn said(browser: &Browser, script: &str, kind: &str) -> Outcome<String> {
    let text = browser.script_with(script, vec![kind.into()]).await?;
    Ok(text.as_str().unwrap_or_default().to_owned())
}

#[tokio::test(flavor = "multi_thread")]
async fn each_question_is_answered_and_goes_into_the_record() -> Outcome<()> {
    visit(Source::File, async |browser| {
        paste(browser, TRIANGLE).await?;
        browser.shows("3 stops, 6 drives").await?;
        for letter in ["A", "B", "C"] {
            status(browser, letter, "root solved").await?;
        }
        let court = ask(browser, "equivalence").await?;
        assert!(
            court.contains("A and C admit the same plans: every plan of this instance"),
            "{court}"
        );
        let order = ask(browser, "order").await?;
        assert!(order.contains("C ⪰ A: C is never weaker than A – theorem"), "{order}");
        // The order of all is drawn, and told in words.
        assert!(order.contains(" above ") && order.contains("(theorem)"), "{order}");
        browser.select("[data-study=order] svg[role=img]").await?;
        let wider = ["symmetry", "variability", "infeasibility"];
        let kinds = ["ladder", "families", "tightening", "cuts", "numerics"];
        for kind in kinds.into_iter().chain(wider) {
            let said = ask(browser, kind).await?;
            assert!(said.contains("Position labels"), "{kind}: {said}");
        }
        for screen in Screen::ALL {
            browser.look(screen).await?;
            browser.screenshot("studies", screen).await?;
        }
        // What was answered does not hold for another instance, and says so.
        paste(browser, &TRIANGLE.replace('4', "9")).await?;
        browser.shows("have changed since: ask again").await?;
        Ok(())
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn a_study_stops_at_once_and_is_kept_with_the_scenario() -> Outcome<()> {
    visit(Source::File, async |browser| {
        status(browser, "A", "root solved").await?;
        browser.still("[data-testid=study-growth]").await?.click().await?;
        browser.select("[data-testid=study-doing]").await?;
        browser.still("[data-testid=study-growth]").await?.click().await?;
        let gone = "return document.querySelector('[data-testid=study-doing]') === null";
        browser.until("it stops", SOON, async || Ok(browser.script(gone).await? == true)).await?;
        // What was asked for belongs to the scenario, and is taken back as any change is.
        browser.find("button", "Undo: study that was asked for").await?.click().await?;
        browser.shows("How do they compare as the instance grows?").await?;
        Ok(())
    })
    .await
}
