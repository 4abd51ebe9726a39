//! One test's browser with the page open.

use fantoccini::ClientBuilder;
use fantoccini::wd::Capabilities;
use hyper_util::client::legacy::connect::HttpConnector;
use serde_json::json;
use tokio::sync::Mutex;

use crate::browser::Browser;
use crate::driver::{chromedriver, geckodriver};
use crate::tasks::CATEGORIES;
use crate::{Outcome, fault, server};

/// Where the page is opened from.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Source {
    /// The file, from disk.
    File,
    /// The server of `cargo xtask serve`.
    Server,
}

/// The browser under test.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Kind {
    /// Chromium, by chromedriver.
    Chromium,
    /// Firefox, by geckodriver: asked for by `HULLWARD_BROWSER=firefox`.
    Firefox,
}

impl Kind {
    fn wanted() -> Self {
        let firefox = std::env::var("HULLWARD_BROWSER").is_ok_and(|name| name == "firefox");
        if firefox { Self::Firefox } else { Self::Chromium }
    }
}

/// As [`visit`], for tests that measure or colour by Chromium's own protocol, or reach into the
/// page's own scripts, from which Firefox's driver keeps those of tests apart: under another browser
/// they are left out.
///
/// # Errors
/// As [`visit`].
#[allow(clippy::print_stdout, reason = "a test that is left out says so")]
pub async fn visit_chromium<F>(source: Source, test: F) -> Outcome<()>
where
    F: AsyncFnOnce(&Browser) -> Outcome<()>,
{
    if Kind::wanted() == Kind::Chromium {
        return visit(source, test).await;
    }
    println!("LEFT OUT: it needs Chromium's own protocol");
    Ok(())
}

/// As [`visit_chromium`], with the browser's trace on, for [`Browser::tasks`].
///
/// # Errors
/// As [`visit`].
#[allow(clippy::print_stdout, reason = "a test that is left out says so")]
pub async fn visit_traced<F>(source: Source, test: F) -> Outcome<()>
where
    F: AsyncFnOnce(&Browser) -> Outcome<()>,
{
    if Kind::wanted() == Kind::Chromium {
        return visit_with(source, chromium(true), test).await;
    }
    println!("LEFT OUT: it needs Chromium's own protocol");
    Ok(())
}

/// One browser at a time: tests measure how soon the page answers.
static TURN: Mutex<()> = Mutex::const_new(());

/// Opens the page in a browser of its own and does `test`; then the console must have said nothing
/// bad. The browser is ended however the test ends.
///
/// # Errors
/// What the test finds, or why the page could not be opened.
pub async fn visit<F>(source: Source, test: F) -> Outcome<()>
where
    F: AsyncFnOnce(&Browser) -> Outcome<()>,
{
    visit_loudly(source, async |browser| {
        test(browser).await?;
        let complaints = browser.console().await?;
        if complaints.is_empty() { Ok(()) } else { Err(fault(complaints.join("\n"))) }
    })
    .await
}

/// As [`visit`], for tests that make the browser complain.
///
/// # Errors
/// As [`visit`].
pub async fn visit_loudly<F>(source: Source, test: F) -> Outcome<()>
where
    F: AsyncFnOnce(&Browser) -> Outcome<()>,
{
    let capabilities = match Kind::wanted() {
        Kind::Chromium => chromium(false),
        Kind::Firefox => firefox(),
    };
    visit_with(source, capabilities, test).await
}

async fn visit_with<F>(source: Source, capabilities: Capabilities, test: F) -> Outcome<()>
where
    F: AsyncFnOnce(&Browser) -> Outcome<()>,
{
    let _turn = TURN.lock().await;
    let served = if source == Source::Server { Some(server::start().await?) } else { None };
    let address = match &served {
        Some(listening) => listening.said().to_owned(),
        None => format!("file://{}", server::one_file()?.display()),
    };
    let kind = Kind::wanted();
    let driver = match kind {
        Kind::Chromium => chromedriver().await?,
        Kind::Firefox => geckodriver().await?,
    };
    let client = ClientBuilder::new(HttpConnector::new())
        .capabilities(capabilities)
        .connect(driver.said())
        .await?;
    client.goto(&address).await?;
    let browser = Browser::new(client, kind, driver.group());
    browser.booted().await?;
    let outcome = test(&browser).await;
    browser.close().await?;
    outcome
}

fn firefox() -> Capabilities {
    let mut capabilities = Capabilities::new();
    let binary = ["/usr/bin/firefox-esr", "/usr/bin/firefox"].into_iter();
    let binary = binary.into_iter().find(|path| std::path::Path::new(path).exists());
    let arguments = ["-headless", "-width", "1280", "-height", "1000"];
    let options = json!({ "binary": binary, "args": arguments });
    capabilities.insert("moz:firefoxOptions".to_owned(), options);
    capabilities
}

fn chromium(traced: bool) -> Capabilities {
    let mut capabilities = Capabilities::new();
    let arguments = [
        "--headless=new",
        "--no-sandbox",
        "--disable-gpu",
        "--disable-dev-shm-usage",
        "--disable-background-networking",
        "--disable-component-update",
        "--no-first-run",
        "--window-size=1280,900",
    ];
    let mut options = json!({ "args": arguments });
    let mut logs = json!({ "browser": "ALL" });
    if traced {
        logs["performance"] = "ALL".into();
        let traced =
            json!({ "enableNetwork": false, "enablePage": false, "traceCategories": CATEGORIES });
        options["perfLoggingPrefs"] = traced;
    }
    capabilities.insert("goog:chromeOptions".to_owned(), options);
    capabilities.insert("goog:loggingPrefs".to_owned(), logs);
    capabilities
}
