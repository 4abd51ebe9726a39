//! The mistakes that are made most: each gets a sentence that says what is wrong, where, and how
//! to mend it, and what was typed stays.

use std::time::Duration;

use hullward_tests_browser::Outcome;
use hullward_tests_browser::browser::{Browser, SOON};
use hullward_tests_browser::visit::{Source, visit};
use record::link::pack;
use serde_json::json;
use tokio::time::Instant;

use crate::lanes::{button, part, paste, status, text};

/// Five stops, made up.
const TABLE: &str = "\tAsh\tBirch\tCedar\tElm\nAsh\t0\t3\t14\t15\nBirch\t2\t0\t6\t5\n\
    Cedar\t5\t8\t0\t9\nElm\t9\t3\t2\t0\n";

/// Position labels, right as they stand.
const LABELS: &str = "Labels

data
  V  stops
  A ⊆ V × V  drives
  c_{i,j}  ∀ (i,j) ∈ A  minutes
  r ∈ V  depot
definitions
  n = |V|
minimise
  Σ_{(i,j) ∈ A} c_{i,j} x_{i,j}
subject to
  Σ_{j : (i,j) ∈ A} x_{i,j} = 1  ∀ i ∈ V  (leave)
  Σ_{i : (i,j) ∈ A} x_{i,j} = 1  ∀ j ∈ V  (enter)
  u_i − u_j + (n−1) x_{i,j} ≤ n − 2  ∀ (i,j) ∈ A : i ≠ r, j ≠ r  (order)
  x_{i,j} ∈ {0,1}  ∀ (i,j) ∈ A
  1 ≤ u_i ≤ n  ∀ i ∈ V
";

/// A scenario of the table and one rival in notation.
fn scenario(formulation: &str) -> String {
    format!(
        "hullward = 1\ntitle = \"Four stops\"\n[instance]\ntext = '''\n{TABLE}'''\n\
         [[rival]]\ntext = '''\n{formulation}'''\n"
    )
}

/// Opens a scenario of one rival whose labels have a piece replaced.
async fn open(browser: &Browser, piece: &str, by: &str) -> Outcome<()> {
    let wrong = LABELS.replace(piece, by);
    assert_ne!(wrong, LABELS, "{piece} stands in the labels");
    paste(browser, &scenario(&wrong)).await?;
    browser.shows("4 stops, 12 drives").await
}

/// Waits until a part of lane A shows all of these words, and gives its text.
async fn tells(browser: &Browser, name: &str, words: &[&str]) -> Outcome<String> {
    let all = async || {
        let told = text(browser, "A", name).await?;
        Ok(words.iter().all(|word| told.contains(word)))
    };
    browser.until(&format!("{name} of A tells {words:?}"), SOON, all).await?;
    text(browser, "A", name).await
}

/// What stands in lane A's notation.
async fn notation(browser: &Browser) -> Outcome<String> {
    let closed = "return !document.querySelector(arguments[0])";
    if browser.script_with(closed, vec![json!(part("A", "notation-text"))]).await? == true {
        button(browser, "A", "notation").await?.click().await?;
    }
    let field = browser.select(&part("A", "notation-text")).await?;
    Ok(field.prop("value").await?.unwrap_or_default())
}

/// A mistake in the notation is told in the lane with line and mend; the text is as it was typed.
async fn mistake(piece: &str, by: &str, words: &[&str]) -> Outcome<()> {
    visit(Source::File, async |browser| {
        open(browser, piece, by).await?;
        tells(browser, "failure", &["rival line"]).await?;
        let told = tells(browser, "failure", words).await?;
        assert!(notation(browser).await?.contains(by), "{told}");
        // Mended, the same lane runs.
        paste(browser, &scenario(LABELS)).await?;
        status(browser, "A", "root solved").await
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn an_unknown_name() -> Outcome<()> {
    mistake("c_{i,j} x_{i,j}\n", "c_{i,j} y_{i,j}\n", &["line 11", "y"]).await
}

#[tokio::test(flavor = "multi_thread")]
async fn a_product_of_two_variables() -> Outcome<()> {
    mistake("(n−1) x_{i,j} ≤", "(n−1) u_i x_{i,j} ≤", &["line 15", "product"]).await
}

#[tokio::test(flavor = "multi_thread")]
async fn an_index_from_the_wrong_set() -> Outcome<()> {
    mistake("≤ n  ∀ i ∈ V\n", "≤ n  ∀ i ∈ V\n  u_k ≤ 3  ∀ k ∈ {1..3}  (cap)\n", &["line 18", "u"])
        .await
}

#[tokio::test(flavor = "multi_thread")]
async fn a_milliard_of_rows() -> Outcome<()> {
    let begun = Instant::now();
    let labels: Vec<String> = (0..1_000).map(|k| format!("P{k}")).collect();
    let blocks = format!("V\n{}\n", labels.join("\n"));
    let formulation = "data\n  V\nminimise\n  Σ_{i ∈ V} z_i\nsubject to\n  \
        z_i + z_j ≥ z_k  ∀ i, j, k ∈ V : i ≠ j, j ≠ k, i ≠ k  (triangle)\n  z_i ≥ 0  ∀ i ∈ V\n";
    visit(Source::File, async |browser| {
        let scenario = scenario(formulation)
            .replace(TABLE, &blocks)
            .replace("[instance]", "[instance]\nreader = \"blocks\"");
        paste(browser, &scenario).await?;
        let size = ["(triangle)", "|V|·(|V| − 1)·(|V| − 2) = 997,002,000 rows", "on demand"];
        tells(browser, "failure", &size).await?;
        assert!(notation(browser).await?.contains("(triangle)"));
        Ok(())
    })
    .await?;
    assert!(begun.elapsed() < Duration::from_secs(60), "nothing hangs");
    Ok(())
}

#[tokio::test(flavor = "multi_thread")]
async fn a_depot_row_among_the_labels_leads_to_the_families_in_conflict() -> Outcome<()> {
    visit(Source::File, async |browser| {
        open(browser, "(i,j) ∈ A : i ≠ r, j ≠ r", "(i,j) ∈ A").await?;
        status(browser, "A", "root solved").await?;
        button(browser, "A", "run").await?.click().await?;
        let words = ["(enter) and (order) cannot hold together", "no smaller set"];
        tells(browser, "reason", &words).await?;
        status(browser, "A", "no solution exists").await?;
        browser.find("button", "order").await?.click().await?;
        let line = "const box = document.activeElement; \
                    return (box.value ?? '').slice(box.selectionStart, box.selectionEnd)";
        let order = async || {
            Ok(browser.script(line).await?.as_str().unwrap_or_default().ends_with("(order)"))
        };
        browser.until("the line of (order) is selected", SOON, order).await
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn an_infeasible_relaxation_names_its_rows() -> Outcome<()> {
    visit(Source::File, async |browser| {
        open(browser, "= 1  ∀ j ∈ V  (enter)", "= 2  ∀ j ∈ V  (enter)").await?;
        tells(browser, "reason", &["No point satisfies these rows", "enter[", "leave["]).await?;
        status(browser, "A", "the relaxation is infeasible").await
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn an_unbounded_model_names_its_direction() -> Outcome<()> {
    visit(Source::File, async |browser| {
        open(browser, "Σ_{(i,j) ∈ A} c_{i,j} x_{i,j}\n", "w\n").await?;
        tells(browser, "failure", &["w"]).await?;
        open(browser, "x_{i,j}\nsubject to\n", "x_{i,j} + w\nsubject to\n  w ∈ ℝ\n").await?;
        tells(browser, "reason", &["falls without end", "w down by 1", "Give one of"]).await?;
        status(browser, "A", "the relaxation is unbounded").await
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn a_link_cut_in_half_says_what_to_do() -> Outcome<()> {
    let whole = pack(&scenario(LABELS))?;
    visit(Source::File, async |browser| {
        paste(browser, TABLE).await?;
        browser.shows("4 stops, 12 drives").await?;
        let cut = &whole[..whole.len() / 2];
        browser.script_with("location.hash = arguments[0]", vec![json!(cut)]).await?;
        browser.shows("The page is as it was").await?;
        let told = browser.select("[data-testid=share-notice]").await?.text().await?;
        assert!(told.contains("cut") && told.contains("file"), "{told}");
        browser.shows("4 stops, 12 drives").await
    })
    .await
}

/// Five megabytes that are no table: the page keeps them, and answers within two seconds, or, on
/// a machine with other work, within half as long again as the browser takes to lay out as many
/// lines in a bare box.
#[tokio::test(flavor = "multi_thread")]
async fn noise_of_five_megabytes_is_answered_soon() -> Outcome<()> {
    visit(Source::File, async |browser| {
        status(browser, "C", "root solved").await?;
        let field = browser.find("textbox", "Paste a distance table").await?;
        let paste_noise = "
            const [field, done] = arguments;
            let state = 1, noise = '';
            const signs = 'abc xyz;,.\\t0123456789{}<>&\\n';
            while (noise.length < 5e6) {
              let piece = '';
              for (let k = 0; k < 1000; k++) {
                state = (state * 1103515245 + 12345) % 2147483648;
                piece += signs[state % signs.length];
              }
              noise += piece;
            }
            const plain = document.createElement('textarea');
            plain.wrap = 'off';
            document.body.append(plain);
            const before = performance.now();
            plain.value = noise;
            const laid = plain.scrollHeight && performance.now() - before;
            plain.remove();
            field.value = noise;
            field.scrollHeight;
            const begun = performance.now();
            if (document.querySelector('[data-testid=complaints]')) throw new Error('said before');
            field.dispatchEvent(new InputEvent('input', { bubbles: true }));
            const look = () => {
              const told = document.querySelector('[data-testid=complaints]');
              if (told) done([performance.now() - begun, laid, field.value.length, told.textContent]);
              else setTimeout(look, 20);
            };
            look();
        ";
        let said = browser.script_async(paste_noise, vec![serde_json::to_value(&field)?]).await?;
        let (answered, laid) = (said[0].as_f64(), said[1].as_f64());
        // Firefox takes two to three times as long as it does for a field that nobody listens to.
        let soon = |took| took <= 2_000.0 || laid.is_some_and(|laid| took <= 3.5 * laid);
        assert!(answered.is_some_and(soon), "{said}");
        assert_ne!(said[3], "", "what to do is said");
        assert_eq!(said[2], 5_000_000, "the text stays");
        paste(browser, TABLE).await?;
        browser.shows("4 stops, 12 drives").await
    })
    .await
}
