//! Commands of chromedriver beyond WebDriver: the browser's own protocol, and its console.

use fantoccini::wd::WebDriverCompatibleCommand;
use http::Method;
use serde_json::{Value, json};
use url::{ParseError, Url};

/// A POST to an endpoint of the session.
#[derive(Debug)]
pub(crate) struct Post {
    endpoint: &'static str,
    body: Value,
}

impl Post {
    /// A command of the browser's protocol, such as `Emulation.setEmulatedMedia`.
    pub(crate) fn protocol(method: &str, parameters: &Value) -> Self {
        Self { endpoint: "goog/cdp/execute", body: json!({ "cmd": method, "params": parameters }) }
    }

    /// What the console has said since it was last asked.
    pub(crate) fn console() -> Self {
        Self { endpoint: "se/log", body: json!({ "type": "browser" }) }
    }
}

impl WebDriverCompatibleCommand for Post {
    fn endpoint(&self, base: &Url, session: Option<&str>) -> Result<Url, ParseError> {
        base.join(&format!("session/{}/{}", session.unwrap_or_default(), self.endpoint))
    }

    fn method_and_body(&self, _: &Url) -> (Method, Option<String>) {
        (Method::POST, Some(self.body.to_string()))
    }
}
