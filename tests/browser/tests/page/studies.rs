//! The studies of the evidence: asked at a button, answered in words, kept with the scenario.

use hullward_tests_browser::Outcome;
use hullward_tests_browser::browser::{Browser, SOON};
use hullward_tests_browser::screen::Screen;
use hullward_tests_browser::visit::{Source, visit};

use crate::lanes::{paste, status, value};

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

/// A second question once gave the first one up without a word. It waits for it, can be taken back, and is
/// asked when the first is at its end or stopped.
#[tokio::test(flavor = "multi_thread")]
async fn what_is_asked_meanwhile_waits_its_turn() -> Outcome<()> {
    visit(Source::File, async |browser| {
        status(browser, "A", "root solved").await?;
        for kind in ["growth", "order", "cuts", "numerics"] {
            browser.still(&format!("[data-testid=study-{kind}]")).await?.click().await?;
        }
        let words = "return [...document.querySelectorAll('[data-study] .heading button')]\
            .map(button => button.innerText).filter(words => words !== 'Ask').join()";
        let waits = async |wanted: &str| Ok(browser.script(words).await? == wanted);
        let three = "Do not ask,Do not ask,Stop,Do not ask";
        browser.until("three wait", SOON, async || waits(three).await).await?;
        browser.still("[data-testid=study-cuts]").await?.click().await?;
        let two = "Do not ask,Stop,Do not ask";
        browser.until("one is taken back", SOON, async || waits(two).await).await?;
        browser.still("[data-testid=study-growth]").await?.click().await?;
        let answered = "Ask again,Ask again";
        browser.until("the others are answered", 4 * SOON, async || waits(answered).await).await?;
        let answers = "return document.querySelectorAll('[data-study=order] .finding, [data-study=numerics] .finding').length";
        assert!(browser.script(answers).await?.as_u64() >= Some(2), "both are answered");
        Ok(())
    })
    .await
}

/// Four machines with a constant that is far too large: the study finds the least that the data prove, and its
/// button makes of it a rival of its own, with a better bound; the first stays as it was.
#[tokio::test(flavor = "multi_thread")]
async fn a_tightened_rival_is_added_with_its_better_bound() -> Outcome<()> {
    let scenario = "hullward = 1\n[instance]\ntext = '''\nmachine cost load\na 5 4\nb 6 3\nc 7 8\nd 8 2\n'''\n\
        [[rival]]\ntitle = \"Loose\"\ntext = '''\nLoose\ndata\n machine\n cost_i ∀ i ∈ machine\n load_i ∀ i ∈ machine\n\
        minimise\n Σ_{i ∈ machine} cost_i y_i\nsubject to\n Σ_{i ∈ machine} x_i ≥ 6 (work)\n\
        x_i ≤ 1000 y_i ∀ i ∈ machine (open)\n x_i ≤ load_i ∀ i ∈ machine (most)\n x_i ≥ 0 ∀ i ∈ machine\n\
        y_i ∈ {0,1} ∀ i ∈ machine\n'''\n";
    visit(Source::File, async |browser| {
        paste(browser, scenario).await?;
        status(browser, "A", "root solved").await?;
        ask(browser, "tightening").await?;
        browser.still("[data-study=tightening] [data-testid=derived]").await?.click().await?;
        status(browser, "B", "root solved").await?;
        // Four units by a and two by b, 5 · 4/1000 + 6 · 2/1000; where the loads stand in the rows, six by c, 7 · 6/8.
        let bounds =
            [value(browser, "A", "root-bound").await?, value(browser, "B", "root-bound").await?];
        assert_eq!(bounds, [Some(0.032), Some(5.25)]);
        Ok(())
    })
    .await
}
