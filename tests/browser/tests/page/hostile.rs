//! Scenarios made to do harm, opened from a link or pasted: markup stays text, and whatever is
//! unpacked, nested or repeated leaves a page that answers. And the way from nothing of one's own
//! to two rivals that run is short.

use std::fmt::Write as _;

use hullward_tests_browser::Outcome;
use hullward_tests_browser::browser::{Browser, SOON};
use hullward_tests_browser::visit::{Source, visit};
use record::file::print;
use record::link::pack;
use record::scenario::{InstanceText, Rival, Scenario};
use serde_json::json;

use crate::lanes::{button, part, paste, status, text};
use crate::share::{press, reload, says};

/// What would run if one of them became an element.
const MARKUP: [&str; 4] = [
    "<img src=x onerror=globalThis.ran=1>",
    "<script>globalThis.ran=1</script>",
    "a\"><svg onload=globalThis.ran=1>",
    "[a](javascript:globalThis.ran=1)",
];

/// A rival of the round with text of the file wherever the notation takes free text.
const OWN: &str = "Assignment

data
  V  stops <script>globalThis.ran=1</script>
  A ⊆ V × V  drives
  c_{i,j}  ∀ (i,j) ∈ A  minutes <img src=x onerror=globalThis.ran=1>
minimise
  Σ_{(i,j) ∈ A} c_{i,j} x_{i,j}
subject to
  Σ_{j : (i,j) ∈ A} x_{i,j} = 1  ∀ i ∈ V  (leave)
  Σ_{i : (i,j) ∈ A} x_{i,j} = 1  ∀ j ∈ V  (enter)
  x_{i,j} ∈ {0,1}  ∀ (i,j) ∈ A
";

/// A round of invented distances, its stops named by `name`.
fn table(stops: usize, name: impl Fn(usize) -> String) -> String {
    let mut table = String::new();
    for stop in 0..stops {
        let _ = write!(table, "\t{}", name(stop));
    }
    for from in 0..stops {
        let _ = write!(table, "\n{}", name(from));
        for to in 0..stops {
            let _ = write!(table, "\t{}", (from * 7 + to * 11) % 23 + usize::from(from != to));
        }
    }
    table
}

fn rival(from: &str) -> Rival {
    Rival { from: Some(from.to_owned()), ..Rival::default() }
}

/// A scenario with markup in every text that it has.
fn marked() -> Scenario {
    let instance = InstanceText {
        title: MARKUP[1].to_owned(),
        text: table(MARKUP.len(), |stop| MARKUP[stop].to_owned()),
        ..InstanceText::default()
    };
    let titled = |title: &str, from: &str| Rival { title: title.to_owned(), ..rival(from) };
    let wrong = OWN.replace("(leave)", MARKUP[0]).replace("x_{i,j} =", "<script> =");
    let own = |text: String| Rival { text: Some(text), ..Rival::default() };
    Scenario {
        title: MARKUP[0].to_owned(),
        notes: MARKUP.join("\n"),
        further_instances: vec![InstanceText { title: MARKUP[3].to_owned(), ..instance.clone() }],
        instance: Some(instance),
        rivals: vec![
            titled(MARKUP[0], "atsp/labels"),
            titled(MARKUP[2], "atsp/cuts"),
            own(OWN.to_owned()),
            own(wrong),
        ],
        ..Scenario::default()
    }
}

/// Elements that only markup from outside could have made, and whether any of it ran.
const FOREIGN: &str = "
    const foreign = 'img, body script, iframe, object, embed, [onerror], [onload], \
        [href^=\"javascript:\" i], [src^=\"javascript:\" i]';
    const found = [...document.querySelectorAll(foreign)].map((one) => one.outerHTML.slice(0, 200));
    if (globalThis.ran !== undefined) found.push('it ran');
    return found;
";

/// Every text of the page: as it stands in the document, and in its fields.
const TEXTS: &str = "
    const fields = [...document.querySelectorAll('input, textarea')].map((one) => one.value);
    return [document.body.textContent, ...fields].join('\\n');
";

/// Markup in fields stands there as it was given.
async fn in_fields(browser: &Browser) -> Outcome<()> {
    browser.still("[data-testid=turn-notes]").await?.click().await?;
    for (name, markup) in
        [("title", MARKUP[0]), ("notes", MARKUP[2]), ("instance-title", MARKUP[1])]
    {
        let value = browser.select(&format!("[data-testid={name}]")).await?.prop("value").await?;
        assert!(value.as_deref().is_some_and(|value| value.contains(markup)), "{name}: {value:?}");
    }
    for (letter, markup) in [("A", MARKUP[0]), ("B", MARKUP[2])] {
        let title = browser.select(&part(letter, "rival-title")).await?.prop("value").await?;
        assert_eq!(title.as_deref(), Some(markup));
    }
    Ok(())
}

/// Waits for the marked scenario's lanes and looks at what became of its texts.
async fn harmless(browser: &Browser, before: &serde_json::Value) -> Outcome<()> {
    browser.shows("4 stops, 12 drives").await?;
    for letter in ["A", "B", "C"] {
        status(browser, letter, "root solved").await?;
    }
    button(browser, "A", "run").await?.click().await?;
    status(browser, "A", "closed").await?;
    // The notation of C, with its remarks, as it is typed and as it is typeset.
    button(browser, "C", "notation").await?.click().await?;
    let set = async || Ok(!text(browser, "C", "typeset").await?.is_empty());
    browser.until("C is typeset", SOON, set).await?;
    let failed = async || Ok(!text(browser, "D", "failure").await?.is_empty());
    browser.until("what is wrong with D is told", SOON, failed).await?;
    in_fields(browser).await?;
    let texts = browser.script(TEXTS).await?;
    for markup in MARKUP {
        assert!(texts.as_str().unwrap_or_default().contains(markup), "{markup} shows as text");
    }
    assert_eq!(browser.script(FOREIGN).await?, *before);
    Ok(())
}

#[tokio::test(flavor = "multi_thread")]
async fn markup_in_a_pasted_scenario_stays_text() -> Outcome<()> {
    visit(Source::File, async |browser| {
        let before = browser.script(FOREIGN).await?;
        paste(browser, &print(&marked())).await?;
        harmless(browser, &before).await?;
        // A field of no scenario is complained of by its name.
        paste(browser, "hullward = 1\n\"<img src=x onerror=globalThis.ran=1>\" = 1\n").await?;
        browser.shows("has no field <img src=x onerror=globalThis.ran=1>").await?;
        assert_eq!(browser.script(FOREIGN).await?, before);
        Ok(())
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn markup_in_a_link_stays_text() -> Outcome<()> {
    visit(Source::File, async |browser| {
        let before = browser.script(FOREIGN).await?;
        let link = pack(&print(&marked()))?;
        browser.script_with("location.hash = arguments[0]", vec![json!(link)]).await?;
        says(browser, "Opened from the link").await?;
        harmless(browser, &before).await?;
        reload(browser).await?;
        says(browser, "Opened from the link").await?;
        harmless(browser, &before).await
    })
    .await
}

/// Puts a text of any length into the instance's box.
async fn put(browser: &Browser, text: &str) -> Outcome<()> {
    let script = "const field = document.querySelector('[data-testid=instance-text]'); \
                  field.value = arguments[0]; \
                  field.dispatchEvent(new InputEvent('input', { bubbles: true }));";
    browser.script_with(script, vec![json!(text)]).await?;
    Ok(())
}

/// A round of so many stops and two rivals.
fn plain(stops: usize) -> Scenario {
    let text = table(stops, |stop| format!("P{stop}"));
    let instance = InstanceText { text, ..InstanceText::default() };
    Scenario {
        title: format!("Plain {stops}"),
        instance: Some(instance),
        rivals: vec![rival("atsp/labels"), rival("atsp/cuts")],
        ..Scenario::default()
    }
}

/// The page answers, and opens a round of so many stops and solves its roots soon.
async fn lives(browser: &Browser, stops: usize) -> Outcome<()> {
    assert_eq!(browser.script("return 6 * 7").await?, 42);
    put(browser, &print(&plain(stops))).await?;
    let drives = stops * (stops - 1);
    browser.shows(&format!("{stops} stops, {drives} drives")).await?;
    let solved = async || {
        let size = text(browser, "B", "size").await?;
        let both = [text(browser, "A", "status").await?, text(browser, "B", "status").await?];
        let of_this = size.contains(&format!("{drives} columns"));
        Ok(of_this && both.iter().all(|said| said.contains("root solved")))
    };
    browser.until(&format!("the roots of {stops} stops are solved"), SOON, solved).await
}

/// Waits until the text in the box is complained of.
async fn complains(browser: &Browser, words: &str) -> Outcome<()> {
    let script = "return document.querySelector('[data-testid=complaints]')?.textContent ?? ''";
    let said = async || Ok(browser.script(script).await?.as_str().unwrap_or("").contains(words));
    browser.until(&format!("{words:?} is complained of"), SOON, said).await
}

#[tokio::test(flavor = "multi_thread")]
async fn links_that_unpack_to_much_or_to_nothing_leave_the_page_alive() -> Outcome<()> {
    // 64 MiB, deflated by the browser itself.
    let bomb = "
        const done = arguments[arguments.length - 1];
        const piece = new TextEncoder().encode('# a scenario\\n'.padEnd(1 << 20));
        const pieces = new Blob(Array(64).fill(piece)).stream();
        new Response(pieces.pipeThrough(new CompressionStream('deflate-raw'))).bytes()
          .then((bytes) => done(bytes.toBase64({ alphabet: 'base64url', omitPadding: true })));
    ";
    let mut state: u64 = 7;
    let letters = b"ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789-_";
    let mut random = || {
        state = state.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1);
        char::from(letters[(state >> 58) as usize])
    };
    let noise: String = (0..6_000).map(|_| random()).collect();
    visit(Source::File, async |browser| {
        let bomb = browser.script_async(bomb, Vec::new()).await?;
        let bomb = bomb.as_str().ok_or("the bomb was not packed")?.to_owned();
        assert!(bomb.len() < 1 << 20, "{} characters", bomb.len());
        let links = [(bomb, "too long for a link"), (noise, "cut short or damaged")];
        for (stops, (packed, words)) in (4..).zip(links) {
            let hash = json!(format!("#s1.{packed}"));
            browser.script_with("location.hash = arguments[0]", vec![hash]).await?;
            says(browser, words).await?;
            lives(browser, stops).await?;
        }
        Ok(())
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn nesting_without_end_leaves_the_page_alive() -> Outcome<()> {
    const DEEP: usize = 100_000;
    let lists = format!("title = {}{}", "[".repeat(DEEP), "]".repeat(DEEP));
    let tables = format!("title = {}1{}", "{a=".repeat(DEEP), "}".repeat(DEEP));
    let dotted = format!("{}a = 1", "a.".repeat(DEEP));
    let heading = format!("[{}a]", "a.".repeat(DEEP));
    visit(Source::File, async |browser| {
        for (stops, text) in (4..).zip([lists, tables, dotted, heading]) {
            put(browser, &format!("hullward = 1\n{text}\n")).await?;
            complains(browser, "too deeply").await?;
            lives(browser, stops).await?;
        }
        let deep = format!("{}x_{{i,j}}{} = 1", "(".repeat(DEEP), ")".repeat(DEEP));
        wrong_rival(browser, "x_{i,j} = 1", &deep).await?;
        lives(browser, 4).await
    })
    .await
}

/// Opens a rival in which a piece is another, waits until it is refused, and opens its notation.
async fn wrong_rival(browser: &Browser, piece: &str, by: &str) -> Outcome<()> {
    let wrong = OWN.replacen(piece, by, 1);
    assert_ne!(wrong, OWN, "{piece} stands in the rival");
    let own = Rival { text: Some(wrong), ..Rival::default() };
    put(browser, &print(&Scenario { rivals: vec![own], ..plain(3) })).await?;
    let refused = async || Ok(text(browser, "A", "failure").await?.contains("rival line"));
    browser.until("the rival is refused", SOON, refused).await?;
    button(browser, "A", "notation").await?.click().await?;
    Ok(())
}

#[tokio::test(flavor = "multi_thread")]
async fn names_without_end_leave_the_page_alive() -> Outcome<()> {
    let long = "n".repeat(1_000_000);
    visit(Source::File, async |browser| {
        wrong_rival(browser, "x_{i,j}\n", &format!("{long}_{{i,j}}\n")).await?;
        lives(browser, 4).await?;
        put(browser, &table(3, |stop| format!("{long}{stop}"))).await?;
        lives(browser, 5).await
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn rivals_and_acts_without_end_leave_the_page_alive() -> Outcome<()> {
    let one = "[[rival]]\nfrom = \"atsp/labels\"\n";
    let act = "[[rival.act]]\nafter = 1\ndo = \"close\"\nnode = 2\n";
    let start = print(&Scenario { rivals: Vec::new(), ..plain(3) });
    let (head, run) = start.split_at(start.find("[run]").unwrap_or(start.len()));
    visit(Source::File, async |browser| {
        put(browser, &format!("{head}{}{run}", one.repeat(100_000))).await?;
        complains(browser, "there are 100000 [[rival]] tables").await?;
        lives(browser, 4).await?;
        put(browser, &format!("{head}{one}{}{run}", act.repeat(100_000))).await?;
        complains(browser, "there are 100000 [[act]] tables").await?;
        lives(browser, 5).await
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn limits_at_their_ends_leave_the_page_alive() -> Outcome<()> {
    let refused = [
        ("nodes = -1", "nodes is out of range"),
        ("seconds = nan", "seconds must be a finite number"),
        ("seconds = inf", "seconds must be a finite number"),
        ("seconds = -1e308", "seconds must not be negative"),
        ("best_known = nan", "best_known must be a finite number"),
        ("iterations = 18446744073709551616", "iterations is out of range"),
    ];
    visit(Source::File, async |browser| {
        for (line, words) in refused {
            put(browser, &format!("hullward = 1\n[run]\n{line}\n")).await?;
            complains(browser, words).await?;
        }
        lives(browser, 4).await?;
        for seed in [1 << 63, u64::MAX] {
            put(browser, &print(&Scenario { seed, ..plain(5) })).await?;
            browser.shows("5 stops, 20 drives").await?;
            lives(browser, 6).await?;
        }
        // More seconds than a browser can wait for are no limit, and none that has passed.
        let mut endless = plain(7);
        endless.run.seconds = 1e308;
        put(browser, &print(&endless)).await?;
        browser.shows("7 stops, 42 drives").await?;
        status(browser, "A", "root solved").await?;
        button(browser, "A", "run").await?.click().await?;
        status(browser, "A", "closed").await?;
        assert_eq!(text(browser, "A", "notice").await?, "");
        lives(browser, 4).await
    })
    .await
}

/// Counts what a person does: one for a paste, one for a click.
async fn act<T>(actions: &mut u32, done: impl Future<Output = Outcome<T>>) -> Outcome<T> {
    *actions += 1;
    done.await
}

#[tokio::test(flavor = "multi_thread")]
async fn from_nothing_to_two_rivals_that_run_in_six_actions() -> Outcome<()> {
    visit(Source::File, async |browser| {
        let mut actions = 0;
        act(&mut actions, paste(browser, &table(8, |stop| format!("P{stop}")))).await?;
        // Another rival of one's own choice: its list is opened, it is chosen, it joins.
        let list = browser.select("[data-testid=catalogue]").await?;
        act(&mut actions, async { Ok(list.click().await?) }).await?;
        act(&mut actions, async { Ok(list.select_by_value("atsp/multi-commodity").await?) })
            .await?;
        act(&mut actions, press(browser, "add")).await?;
        browser.shows("8 stops, 56 drives").await?;
        for letter in ["A", "D"] {
            status(browser, letter, "root solved").await?;
        }
        act(&mut actions, press(browser, "run-all")).await?;
        assert!(actions <= 6, "{actions} actions");
        for letter in ["A", "D"] {
            let left = async || {
                let said = text(browser, letter, "status").await?;
                Ok(!said.is_empty() && !said.contains("root solved"))
            };
            browser.until(&format!("{letter} leaves its root"), SOON, left).await?;
            status(browser, letter, "closed").await?;
        }
        Ok(())
    })
    .await
}
