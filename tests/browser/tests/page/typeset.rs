//! A formulation is set as mathematics beside its text, row by row as it is typed.

use hullward_tests_browser::Outcome;
use hullward_tests_browser::browser::{Browser, SOON};
use hullward_tests_browser::screen::Screen;
use hullward_tests_browser::visit::{Source, visit};
use serde_json::json;

use crate::lanes::{button, part, status, text};

/// What the rows of A say, joined by newlines; a row that is wrong begins with `!`, the caret's
/// with `>`.
const ROWS: &str = "
    const rows = document.querySelectorAll('[data-lane=A] [data-testid=typeset] .line');
    const sign = (row) => (row.classList.contains('active') ? '>' : '') +
        (row.classList.contains('wrong') ? '!' : '');
    return [...rows].map((row) => sign(row) + row.textContent).join('\\n');
";

async fn rows(browser: &Browser) -> Outcome<String> {
    Ok(browser.script(ROWS).await?.as_str().unwrap_or_default().to_owned())
}

async fn row_is(browser: &Browser, what: &str, is: impl Fn(&str) -> bool) -> Outcome<()> {
    let holds = async || Ok(rows(browser).await?.lines().any(&is));
    browser.until(&format!("{what}: {}", rows(browser).await?), SOON, holds).await
}

/// Changes the text of A.
async fn change(browser: &Browser, from: &str, to: &str) -> Outcome<()> {
    let field = browser.select(&part("A", "notation-text")).await?;
    let text = browser.script_with("return arguments[0].value", vec![json!(field)]).await?;
    let text = text.as_str().unwrap_or_default();
    assert!(text.contains(from), "{from:?} is not in {text}");
    browser.paste(&field, &text.replacen(from, to, 1)).await
}

#[tokio::test(flavor = "multi_thread")]
async fn a_shipped_formulation_is_looked_at_as_mathematics_before_it_is_edited() -> Outcome<()> {
    visit(Source::File, async |browser| {
        status(browser, "A", "root solved").await?;
        button(browser, "A", "notation").await?.click().await?;
        row_is(browser, "the order rows are set", |row| row.ends_with("(order)")).await?;
        let look = "const all = [...document.querySelectorAll('[data-testid=typeset] math *')]; \
            const drawn = document.querySelector('[data-testid=typeset] munder').getBoundingClientRect(); \
            return all.length > 100 && drawn.height > 30 && !document.querySelector('.script') && \
            all.every((one) => one.namespaceURI === 'http://www.w3.org/1998/Math/MathML')";
        assert_eq!(browser.script(look).await?, true);
        for screen in Screen::ALL {
            browser.look(screen).await?;
            browser.screenshot("typeset", screen).await?;
            let fits = "const page = document.documentElement; const set = document.querySelector('.set'); \
                return page.scrollWidth === page.clientWidth && \
                (page.clientWidth > 1000 || set.scrollWidth > set.clientWidth)";
            let fits = async || Ok(browser.script(fits).await? == true);
            browser.until("only the formulation scrolls sideways", SOON, fits).await?;
        }
        Ok(())
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn rows_follow_the_text_and_the_caret() -> Outcome<()> {
    visit(Source::File, async |browser| {
        status(browser, "A", "root solved").await?;
        button(browser, "A", "notation").await?.click().await?;
        button(browser, "A", "edit").await?.click().await?;
        row_is(browser, "the enter rows are set", |row| row.ends_with("(enter)")).await?;
        // What is typed is text, never markup.
        change(browser, "stops\n", "stops <img src=x onerror=alert(1)> here\n").await?;
        row_is(browser, "the remark is shown as it is", |row| row.contains("<img src=x")).await?;
        assert_eq!(browser.script("return document.querySelector('.set img')").await?, json!(null));
        // A line that cannot be read stands as typed; the others stay set.
        change(browser, "x_{i,j} = 1", "x_{i,j} = = 1").await?;
        row_is(browser, "the broken row", |row| row.contains("!") && row.contains("x_{i,j} = = 1"))
            .await?;
        let all = rows(browser).await?;
        assert!(all.lines().any(|row| row.starts_with('∑') && row.ends_with("(enter)")), "{all}");
        // The caret's row is marked, and a click on a row puts the caret there.
        let to = "const [field, word] = arguments; const at = field.value.indexOf(word); \
                  field.setSelectionRange(at, at); field.click();";
        let field = browser.select(&part("A", "notation-text")).await?;
        browser.script_with(to, vec![json!(field), json!("(enter)")]).await?;
        row_is(browser, "the caret's row", |row| row.starts_with('>') && row.ends_with("(enter)"))
            .await?;
        let click = "[...document.querySelectorAll('.set .line')] \
                     .find((row) => row.textContent.endsWith('(order)')).click()";
        browser.script(click).await?;
        let chosen = "const box = document.activeElement; \
                      return box.value.slice(box.selectionStart, box.selectionEnd)";
        let chosen = browser.script(chosen).await?;
        assert!(chosen.as_str().is_some_and(|it| it.starts_with("u_i − u_j")), "{chosen}");
        assert!(text(browser, "A", "notation-state").await?.contains("1 error"));
        Ok(())
    })
    .await
}
