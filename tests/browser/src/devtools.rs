//! Commands beyond what the client knows: chromedriver's way to the browser's own protocol and its
//! console, and WebDriver's way to the role and name of an element.

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

    /// What was traced.
    pub(crate) fn trace() -> Self {
        Self { endpoint: "se/log", body: json!({ "type": "performance" }) }
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

/// A GET of what the browser computes of an element, `computedrole` or `computedlabel`.
#[derive(Debug)]
pub(crate) struct Computed {
    /// The element's reference.
    pub(crate) element: String,
    /// What is asked for.
    pub(crate) what: &'static str,
}

impl WebDriverCompatibleCommand for Computed {
    fn endpoint(&self, base: &Url, session: Option<&str>) -> Result<Url, ParseError> {
        let session = session.unwrap_or_default();
        base.join(&format!("session/{session}/element/{}/{}", self.element, self.what))
    }

    fn method_and_body(&self, _: &Url) -> (Method, Option<String>) {
        (Method::GET, None)
    }
}
