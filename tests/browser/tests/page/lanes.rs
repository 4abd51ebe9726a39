//! What the tests read off a lane, and the optimum of a small round by trying every one.

use fantoccini::elements::Element;
use hullward_tests_browser::Outcome;
use hullward_tests_browser::browser::Browser;

/// The selector of a part of a lane, by the part's name in the page.
pub(crate) fn part(letter: &str, name: &str) -> String {
    format!("[data-lane={letter}] [data-testid={name}]")
}

/// The text of a part of a lane; empty while it is not there.
pub(crate) async fn text(browser: &Browser, letter: &str, name: &str) -> Outcome<String> {
    let script = "return document.querySelector(arguments[0])?.textContent ?? ''";
    let text = browser.script_with(script, vec![part(letter, name).into()]).await?;
    Ok(text.as_str().unwrap_or_default().to_owned())
}

/// The number that a part of a lane shows in full, if it shows one.
pub(crate) async fn value(browser: &Browser, letter: &str, name: &str) -> Outcome<Option<f64>> {
    let script = "return document.querySelector(`${arguments[0]} data`)?.value ?? null";
    let value = browser.script_with(script, vec![part(letter, name).into()]).await?;
    Ok(value.as_str().and_then(|text| text.parse().ok()))
}

/// Waits until the sentence on a lane's state holds a word.
pub(crate) async fn status(browser: &Browser, letter: &str, word: &str) -> Outcome<()> {
    let what = format!("lane {letter} says {word:?}");
    let limit = std::time::Duration::from_secs(60);
    browser.until(&what, limit, async || said(browser, letter, word).await).await
}

async fn said(browser: &Browser, letter: &str, word: &str) -> Outcome<bool> {
    Ok(text(browser, letter, "status").await?.contains(word))
}

/// A button of a lane, once it stands still.
pub(crate) async fn button(browser: &Browser, letter: &str, name: &str) -> Outcome<Element> {
    browser.still(&part(letter, name)).await
}

/// Puts a text into the instance's box and waits until it is read: the lanes are those of the text
/// before until then, roots solved and all.
pub(crate) async fn paste(browser: &Browser, text: &str) -> Outcome<()> {
    let field = browser.find("textbox", "Paste a distance table").await?;
    browser.paste(&field, text).await?;
    let busy = "return document.querySelector('.instance').getAttribute('aria-busy') === 'true'";
    let read = async || Ok(browser.script(busy).await? == false);
    browser.until("the text is read", std::time::Duration::from_secs(60), read).await
}

/// Adds a rival from the catalogue.
pub(crate) async fn add(browser: &Browser, id: &str) -> Outcome<()> {
    browser.select("[data-testid=catalogue]").await?.select_by_value(id).await?;
    Ok(browser.still("[data-testid=add]").await?.click().await?)
}

/// Pastes a round of so many scattered stops that its labels are searched for long, and waits for
/// its roots.
pub(crate) async fn paste_long_work(browser: &Browser) -> Outcome<()> {
    paste(browser, &scattered(30)).await?;
    browser.shows("30 stops, 870 drives").await?;
    for letter in ["A", "B", "C"] {
        status(browser, letter, "root solved").await?;
    }
    Ok(())
}

/// Points scattered by a linear congruential generator (Knuth's MMIX multiplier).
pub(crate) fn scattered(stops: u32) -> String {
    let mut state: u64 = 2026;
    let mut next = || {
        state =
            state.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695_040_888_963_407);
        (state >> 33) % 1000
    };
    (1..=stops).map(|stop| format!("S{stop} {} {}\n", next(), next())).collect()
}

/// The length of a shortest round, by trying every order. `None` stands for no drive.
pub(crate) fn shortest(matrix: &[Vec<Option<f64>>]) -> Option<f64> {
    let mut left: Vec<usize> = (1..matrix.len()).collect();
    shortest_through(matrix, 0, &mut left)
}

fn shortest_through(matrix: &[Vec<Option<f64>>], at: usize, left: &mut Vec<usize>) -> Option<f64> {
    if left.is_empty() {
        return matrix[at][0];
    }
    let mut best = None;
    for place in 0..left.len() {
        let next = left.remove(place);
        let rest = shortest_through(matrix, next, left);
        left.insert(place, next);
        if let (Some(drive), Some(rest)) = (matrix[at][next], rest) {
            let length = drive + rest;
            if best.is_none_or(|best| length < best) {
                best = Some(length);
            }
        }
    }
    best
}

#[test]
fn the_shortest_round_of_a_square_goes_around_it() {
    let away =
        |a: usize, b: usize| if a == b { None } else { Some([0.0, 1.0, 1.5, 1.0][b.abs_diff(a)]) };
    let matrix: Vec<Vec<_>> = (0..4).map(|a| (0..4).map(|b| away(a, b)).collect()).collect();
    assert_eq!(shortest(&matrix), Some(4.0));
}
