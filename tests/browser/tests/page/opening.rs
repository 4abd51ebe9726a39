//! The page opens by itself, from disk and served, and nothing leaves it.

use hullward_tests_browser::Outcome;
use hullward_tests_browser::visit::{Source, visit, visit_loudly};
use record::message::{Reply, Request};
use serde_json::json;

/// Requests that the browser has made for the page, beyond the page itself.
const REQUESTS: &str = "return performance.getEntriesByType('resource')
    .map((entry) => entry.name).filter((name) => !name.startsWith('blob:'))";

/// Tries every way out of a page; gives the directives by which the policy stopped them.
const WAYS_OUT: &str = "
    const done = arguments[arguments.length - 1];
    const stopped = new Set();
    document.addEventListener('securitypolicyviolation', (event) => {
      stopped.add(event.effectiveDirective);
    });
    const elsewhere = 'http://127.0.0.1:9/';
    const reached = [];
    const attempts = [
      fetch(elsewhere).then(() => reached.push('fetch'), () => {}),
      Promise.resolve(navigator.sendBeacon(elsewhere, 'x')),
    ];
    const picture = new Image();
    picture.src = elsewhere + 'picture.png';
    const script = document.createElement('script');
    script.src = elsewhere + 'script.js';
    document.head.append(script);
    const style = document.createElement('link');
    style.rel = 'stylesheet';
    style.href = elsewhere + 'style.css';
    document.head.append(style);
    const inline = document.createElement('script');
    inline.textContent = 'globalThis.ranInline = true';
    document.head.append(inline);
    Promise.allSettled(attempts).then(() => setTimeout(() => {
      if (globalThis.ranInline) reached.push('inline script');
      done({ reached, stopped: [...stopped].sort() });
    }, 500));
";

#[tokio::test(flavor = "multi_thread")]
async fn it_opens_from_disk() -> Outcome<()> {
    visit(Source::File, async |browser| {
        assert_eq!(browser.script("return location.protocol").await?, "file:");
        assert!(!browser.text().await?.trim().is_empty());
        assert_eq!(browser.script(REQUESTS).await?, json!([]));
        Ok(())
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn it_opens_from_a_server_and_asks_it_for_nothing_more() -> Outcome<()> {
    visit(Source::Server, async |browser| {
        assert_eq!(browser.script("return location.protocol").await?, "http:");
        assert_eq!(browser.script(REQUESTS).await?, json!([]));
        Ok(())
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn its_policy_closes_every_way_out() -> Outcome<()> {
    visit_loudly(Source::File, async |browser| {
        let tried = browser.script_async(WAYS_OUT, Vec::new()).await?;
        assert_eq!(tried["reached"], json!([]));
        let expected = json!(["connect-src", "img-src", "script-src-elem", "style-src-elem"]);
        assert_eq!(tried["stopped"], expected);
        Ok(())
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn a_worker_gets_the_compiled_engine_and_answers() -> Outcome<()> {
    for source in [Source::File, Source::Server] {
        visit(source, async |browser| {
            let envelope = browser.ask_worker(&Request::Warm).await?;
            assert!(matches!(&envelope.reply, Reply::Ready { engine } if !engine.is_empty()));
            Ok(())
        })
        .await?;
    }
    Ok(())
}
