//! One test's browser with the page open.

use fantoccini::ClientBuilder;
use fantoccini::wd::Capabilities;
use hyper_util::client::legacy::connect::HttpConnector;
use serde_json::json;
use tokio::sync::Mutex;

use crate::browser::Browser;
use crate::driver::chromedriver;
use crate::{Outcome, fault, server};

/// Where the page is opened from.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Source {
    /// The file, from disk.
    File,
    /// The server of `cargo xtask serve`.
    Server,
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
    let _turn = TURN.lock().await;
    let served = if source == Source::Server { Some(server::start().await?) } else { None };
    let address = match &served {
        Some(listening) => listening.said().to_owned(),
        None => format!("file://{}", server::one_file()?.display()),
    };
    let driver = chromedriver().await?;
    let client = ClientBuilder::new(HttpConnector::new())
        .capabilities(capabilities())
        .connect(driver.said())
        .await?;
    client.goto(&address).await?;
    let browser = Browser::new(client);
    browser.booted().await?;
    let outcome = test(&browser).await;
    browser.close().await?;
    outcome
}

fn capabilities() -> Capabilities {
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
    capabilities.insert("goog:chromeOptions".to_owned(), json!({ "args": arguments }));
    capabilities.insert("goog:loggingPrefs".to_owned(), json!({ "browser": "ALL" }));
    capabilities
}
