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
    const attempt = (act) => { try { act(); } catch { /* refused before it was asked for */ } };
    attempt(() => { script.src = elsewhere + 'script.js'; });
    document.head.append(script);
    const style = document.createElement('link');
    style.rel = 'stylesheet';
    style.href = elsewhere + 'style.css';
    document.head.append(style);
    const inline = document.createElement('script');
    attempt(() => { inline.textContent = 'globalThis.ranInline = true'; });
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
        let stopped: Vec<String> = serde_json::from_value(tried["stopped"].clone())?;
        for directive in ["connect-src", "img-src", "style-src-elem"] {
            assert!(stopped.iter().any(|one| one == directive), "{directive}: {stopped:?}");
        }
        // A script is stopped as a text that nobody trusts or, where that is not known, by its source.
        let script = ["require-trusted-types-for", "script-src-elem"];
        assert!(stopped.iter().any(|one| script.contains(&one.as_str())), "{stopped:?}");
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

/// Text that would become markup, or a worker, and the making of a second policy that allows it.
const TRUST: &str = "
    const refused = (act) => { try { act(); return false; } catch (error) { return error instanceof TypeError; } };
    return [
      refused(() => { document.body.innerHTML = '<b>bold</b>'; }),
      refused(() => new Worker('blob:null/anything')),
      refused(() => trustedTypes.createPolicy('other', { createHTML: (text) => text })),
      refused(() => trustedTypes.createPolicy('hullward', { createHTML: (text) => text })),
    ];
";

#[tokio::test(flavor = "multi_thread")]
async fn no_text_becomes_markup_or_a_script() -> Outcome<()> {
    visit_loudly(Source::File, async |browser| {
        // Firefox's driver runs a test's scripts apart from the page, beyond its policy.
        let bound =
            "return 'trustedTypes' in globalThis && !navigator.userAgent.includes('Firefox')";
        if browser.script(bound).await? == true {
            assert_eq!(browser.script(TRUST).await?, json!([true, true, true, true]));
        }
        Ok(())
    })
    .await
}
