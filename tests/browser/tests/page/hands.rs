//! Every hand and every eye: the focus is never hidden, wider text is not cut, colours forced by the
//! system, less motion, paper.

use fantoccini::key::Key;
use hullward_tests_browser::Outcome;
use hullward_tests_browser::browser::{Browser, SOON};
use hullward_tests_browser::screen::Screen;
use hullward_tests_browser::visit::{Source, visit, visit_chromium};
use serde_json::{Value, json};

use crate::lanes::{button, status};

/// What has the focus, and whether some of it can be seen and pressed.
const FOCUSED: &str = "
    const element = document.activeElement;
    if (!element || element === document.body) return ['', true];
    const box = element.getBoundingClientRect();
    const left = Math.max(box.left, 0), right = Math.min(box.right, innerWidth);
    const top = Math.max(box.top, 0), bottom = Math.min(box.bottom, innerHeight);
    const shares = [0.1, 0.3, 0.5, 0.7, 0.9];
    const seen = left < right && top < bottom && shares.some((x) => shares.some((y) => {
      const at = document.elementFromPoint(left + x * (right - left), top + y * (bottom - top));
      return at && (element.contains(at) || at.contains(element));
    }));
    const name = element.getAttribute('aria-label') || element.textContent || element.outerHTML;
    return [name.trim().slice(0, 60), seen];
";

/// Tab through the page from its top, or back with Shift; gives what was met.
async fn walk(browser: &Browser, back: bool) -> Outcome<Vec<String>> {
    let keys = if back { [Key::Shift, Key::Tab] } else { [Key::Null, Key::Tab] };
    let keys: String = keys.into_iter().skip(usize::from(!back)).map(char::from).collect();
    let mut met = Vec::new();
    for _ in 0..120 {
        browser.select(":focus").await?.send_keys(&keys).await?;
        // A drawing brings a node into view a frame after it was chosen.
        let seen = async || Ok(browser.script(FOCUSED).await?[1] == true);
        let found = browser.script(FOCUSED).await?;
        let name = found[0].as_str().unwrap_or_default().to_owned();
        if name.is_empty() {
            break;
        }
        browser
            .until(&format!("{name:?} is not hidden where it has the focus"), SOON, seen)
            .await?;
        met.push(name);
    }
    Ok(met)
}

/// WCAG 2.2, 2.4.11: the axis that stays in view covers nothing that has the focus, on a desktop and
/// on a phone, forwards and backwards.
#[tokio::test(flavor = "multi_thread")]
async fn what_has_the_focus_is_never_hidden() -> Outcome<()> {
    visit_chromium(Source::File, async |browser| {
        status(browser, "C", "root solved").await?;
        for width in [1280, 390] {
            browser.look(Screen { width, dark: false }).await?;
            let first = "document.querySelector('a, button, input, select, textarea').focus()";
            browser.script(first).await?;
            let there = walk(browser, false).await?;
            assert!(there.len() > 60, "{width}: {there:?}");
            let back = walk(browser, true).await?;
            assert!(back.len() > 60, "{width}: {back:?}");
        }
        Ok(())
    })
    .await
}

/// WCAG 2.2, 1.4.12: with the spacing that a reader may set nothing is cut off, and words in
/// buttons stay within them.
#[tokio::test(flavor = "multi_thread")]
async fn wider_text_is_not_cut_off() -> Outcome<()> {
    visit(Source::File, async |browser| {
        status(browser, "C", "root solved").await?;
        let spaced = "
            const sheet = new CSSStyleSheet();
            sheet.replaceSync('* { line-height: 1.5 !important; letter-spacing: 0.12em !important; '
              + 'word-spacing: 0.16em !important; } p { margin-bottom: 2em !important; }');
            document.adoptedStyleSheets = [sheet];";
        browser.script(spaced).await?;
        let cut = "
            const page = document.documentElement;
            const cut = (each) => each.scrollWidth > each.clientWidth + 1 || each.scrollHeight > each.clientHeight + 1;
            const seen = [...document.querySelectorAll('button, summary, dt, dd, label, h1, h2, h3, p')]
              .filter((each) => each.offsetParent && getComputedStyle(each).overflow !== 'visible'
                && !each.classList.contains('unseen') && cut(each));
            return [page.scrollWidth - page.clientWidth, seen.map((each) => each.outerHTML.slice(0, 120))];";
        for width in [1280, 390] {
            browser.look(Screen { width, dark: false }).await?;
            let fits = async || Ok(browser.script(cut).await? == json!([0, []]));
            let found = browser.script(cut).await?;
            browser.until(&format!("all fits {width} pixels: {found}"), SOON, fits).await?;
        }
        Ok(())
    })
    .await
}

async fn media(browser: &Browser, media: &str, features: Value) -> Outcome<()> {
    let asked = json!({ "media": media, "features": features });
    browser.protocol("Emulation.setEmulatedMedia", asked).await?;
    Ok(())
}

/// With colours forced by the system every mark is drawn in one of its colours, and the marks of a
/// tree still differ by shape; nothing moves where less motion is asked for.
#[tokio::test(flavor = "multi_thread")]
async fn forced_colours_and_less_motion_are_respected() -> Outcome<()> {
    visit_chromium(Source::File, async |browser| {
        status(browser, "C", "root solved").await?;
        button(browser, "C", "run").await?.click().await?;
        status(browser, "C", "closed").await?;
        let features = json!([
            { "name": "forced-colors", "value": "active" },
            { "name": "prefers-reduced-motion", "value": "reduce" },
        ]);
        media(browser, "screen", features).await?;
        let colours = "
            const style = getComputedStyle(document.documentElement);
            const probe = document.createElement('p');
            document.body.append(probe);
            const of = (value) => { probe.style.color = value; return getComputedStyle(probe).color; };
            const system = ['Canvas', 'CanvasText', 'Highlight', 'GrayText', 'LinkText', 'ButtonText'].map(of);
            const names = ['paper', 'ink', 'soft', 'rule', 'edge', 'focus', 'hue-0', 'hue-1', 'hue-2', 'hue-3', 'hue-4', 'hue-5'];
            const foreign = names.filter((name) => !system.includes(of(style.getPropertyValue('--' + name))));
            probe.remove();
            const stop = document.querySelector('.stop');
            const moving = [...document.querySelectorAll('*')].filter((each) => {
              const { transitionDuration, animationName } = getComputedStyle(each);
              return transitionDuration !== '0s' || animationName !== 'none';
            });
            return [foreign, stop ? getComputedStyle(stop).fill === of('Canvas') : true, moving.length];";
        assert_eq!(browser.script(colours).await?, json!([[], false, 0]));
        browser.keep_view("forced-colours").await?;
        media(browser, "", json!([])).await
    })
    .await
}

/// On paper: A4 and Letter take the page without cutting it, and what can only be pressed stays away.
#[tokio::test(flavor = "multi_thread")]
async fn it_prints_to_a4_and_letter() -> Outcome<()> {
    visit_chromium(Source::File, async |browser| {
        status(browser, "C", "root solved").await?;
        for (name, width, height) in [("A4", 8.27, 11.69), ("Letter", 8.5, 11.0)] {
            let paper = json!({ "paperWidth": width, "paperHeight": height, "printBackground": true });
            let printed = browser.protocol("Page.printToPDF", paper).await?;
            let data = printed["data"].as_str().unwrap_or_default();
            assert!(data.starts_with("JVBERi"), "{name}: a PDF in base 64");
        }
        let pressed = "
            const page = document.documentElement;
            const shown = [...document.querySelectorAll('button:not(.link), textarea:not(.title, .lane-title)')]
              .filter((each) => each.offsetParent !== null).map((each) => each.outerHTML.slice(0, 100));
            return [page.scrollWidth - page.clientWidth, shown];";
        // The widths between the margins of A4 and of Letter, at 96 dots an inch.
        for width in [718, 740] {
            browser.look(Screen { width, dark: false }).await?;
            media(browser, "print", json!([])).await?;
            let fits = async || Ok(browser.script(pressed).await? == json!([0, []]));
            let found = browser.script(pressed).await?;
            browser.until(&format!("the page is fit for {width}: {found}"), SOON, fits).await?;
            assert!(browser.text().await?.contains("137.5"), "the bounds are printed");
            media(browser, "", json!([])).await?;
        }
        Ok(())
    })
    .await
}
