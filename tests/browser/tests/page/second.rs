//! The second opinion beside the root bounds.

use hullward_tests_browser::Outcome;
use hullward_tests_browser::browser::Browser;
use hullward_tests_browser::visit::{Source, visit, visit_chromium};
use record::opinion::{Relaxation, RelaxationColumn};
use record::wire::write_relaxation;
use serde_json::json;

use crate::lanes::{add, status, text, value};

/// From now on every relaxation that is handed to the second LP code is replaced by another. A
/// relaxation begins with whether it is maximised (0: it is not); requests that begin with 0 are
/// one byte long.
const FALSIFY: &str = "
    const plain = Worker.prototype.postMessage;
    const other = new Uint8Array(arguments[0]);
    Worker.prototype.postMessage = function (message, ...rest) {
      const relaxation = message instanceof Uint8Array && message.length > 1 && message[0] === 0;
      return plain.call(this, relaxation ? other : message, ...rest);
    };
";

/// Whether a sentence names a number, but for so much.
fn names(sentence: &str, number: f64, near: f64) -> bool {
    let close = |word: &str| word.parse().is_ok_and(|other: f64| (other - number).abs() < near);
    sentence.split(' ').map(|word| word.trim_end_matches('.')).any(close)
}

/// Waits for the second opinion of a lane, and gives the verdict.
async fn verdict(browser: &Browser, letter: &str) -> Outcome<String> {
    let there = format!("[data-lane={letter}] [data-testid=second]");
    let element = browser.select(&there);
    Ok(element.await?.attr("data-verdict").await?.unwrap_or_default())
}

#[tokio::test(flavor = "multi_thread")]
async fn another_code_agrees_with_the_three_roots_of_the_demo() -> Outcome<()> {
    visit(Source::File, async |browser| {
        for letter in ["A", "B", "C"] {
            status(browser, letter, "root solved").await?;
            assert_eq!(verdict(browser, letter).await?, "agrees", "{letter}");
            let bound = value(browser, letter, "root-bound").await?.unwrap_or_default();
            let said = text(browser, letter, "second").await?;
            assert!(said.starts_with("A second LP code agrees: "), "{letter}: {said}");
            assert!(names(&said, bound, 0.1), "{said}, not {bound}");
        }
        Ok(())
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn what_another_code_says_of_a_falsified_relaxation_is_a_disagreement() -> Outcome<()> {
    visit_chromium(Source::File, async |browser| {
        // min 42 x, 1 ≤ x ≤ 2: below every bound of the demo.
        let column = RelaxationColumn { cost: 42.0, lower: 1.0, upper: 2.0 };
        let falsified = Relaxation { columns: vec![column], ..Relaxation::default() };
        verdict(browser, "C").await?;
        let bytes = write_relaxation(&falsified)?;
        browser.script_with(FALSIFY, vec![json!(bytes)]).await?;
        add(browser, "atsp/labels").await?;
        status(browser, "D", "root solved").await?;
        assert_eq!(verdict(browser, "D").await?, "refuted");
        let said = text(browser, "D", "second").await?;
        let bound = value(browser, "D", "root-bound").await?.unwrap_or_default();
        assert!(said.starts_with("A second LP code disagrees: 42, against "), "{said}");
        assert!(said.contains("The exact check supports"), "{said}");
        assert!(names(&said, bound, 1e-6), "{said}, not {bound}");
        // The bound stays ours.
        assert_eq!(value(browser, "A", "root-bound").await?, Some(bound));
        Ok(())
    })
    .await
}
