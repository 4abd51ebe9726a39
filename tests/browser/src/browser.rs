//! Finding, typing, waiting.
//!
//! Elements are found as assistive technology finds them: by role and accessible name, in the
//! browser's own accessibility tree.

use std::time::Duration;

use fantoccini::elements::Element;
use fantoccini::{Client, Locator};
use serde_json::{Value, json};
use tokio::time::{Instant, sleep};

use crate::devtools::{Computed, Post};
use crate::visit::Kind;
use crate::{Outcome, fault, memory};

/// How long to wait for what should come soon.
pub const SOON: Duration = Duration::from_secs(15);

const BETWEEN_LOOKS: Duration = Duration::from_millis(50);
/// Looks in a row at which a control that is clicked, and the page around it, must be the same.
const STILL: u32 = 4;
const MARK: &str = "data-found-by-test";

/// A browser with the page open.
#[derive(Debug)]
pub struct Browser {
    client: Client,
    kind: Kind,
    group: Option<u32>,
}

/// Elements that may have a role, where the browser's tree of accessibility cannot be asked.
fn candidates(role: &str) -> String {
    let native = match role {
        "button" => "button, summary",
        "textbox" => "textarea, input:not([type]), input[type=text]",
        "combobox" => "select",
        "heading" => "h1, h2, h3, h4",
        "table" => "table",
        "radio" => "input[type=radio]",
        "checkbox" => "input[type=checkbox]",
        "link" => "a[href]",
        _ => "[role]",
    };
    format!("{native}, [role={role}]")
}

impl Browser {
    /// A browser whose processes are of this group.
    pub(crate) fn new(client: Client, kind: Kind, group: Option<u32>) -> Self {
        Self { client, kind, group }
    }

    /// Bytes of memory that the process of the page holds, its workers' included, as the operating
    /// system counts them.
    ///
    /// # Errors
    /// That the system does not say.
    pub fn memory_taken(&self) -> Outcome<u64> {
        memory::of_renderers(self.group.ok_or_else(|| fault("the driver has ended"))?)
    }

    pub(crate) fn kind(&self) -> Kind {
        self.kind
    }

    pub(crate) async fn resize(&self, width: u32) -> Outcome<()> {
        Ok(self.client.set_window_size(width, 1000).await?)
    }

    pub(crate) async fn close(self) -> Outcome<()> {
        Ok(self.client.close().await?)
    }

    /// Waits until the boot script has opened the page.
    pub(crate) async fn booted(&self) -> Outcome<()> {
        self.until("the page opens", SOON, async || {
            let state = self.script("return document.documentElement.dataset.boot ?? ''").await?;
            if state == "failed" {
                return Err(fault(format!("the page did not open: {}", self.text().await?)));
            }
            Ok(state == "done")
        })
        .await
    }

    /// Goes to an address and waits until the page there has opened.
    ///
    /// # Errors
    /// Those of the driver; that the page does not open.
    pub async fn go(&self, address: &str) -> Outcome<()> {
        self.client.goto(address).await?;
        self.booted().await
    }

    /// Makes the page's processor so many times slower; Chromium alone can.
    ///
    /// # Errors
    /// Those of the driver.
    pub async fn slow_down(&self, times: u32) -> Outcome<()> {
        self.protocol("Emulation.setCPUThrottlingRate", json!({ "rate": times })).await.map(drop)
    }

    /// Runs a script and returns what it returns.
    ///
    /// # Errors
    /// What the script throws.
    pub async fn script(&self, script: &str) -> Outcome<Value> {
        self.script_with(script, Vec::new()).await
    }

    /// Runs a script with arguments, its `arguments`.
    ///
    /// # Errors
    /// What the script throws.
    pub async fn script_with(&self, script: &str, arguments: Vec<Value>) -> Outcome<Value> {
        Ok(self.client.execute(script, arguments).await?)
    }

    /// Runs a script that hands its result to its last argument, a function.
    ///
    /// # Errors
    /// What the script throws, or that it takes longer than half a minute.
    pub async fn script_async(&self, script: &str, arguments: Vec<Value>) -> Outcome<Value> {
        Ok(self.client.execute_async(script, arguments).await?)
    }

    /// A command of the browser's own protocol.
    ///
    /// # Errors
    /// Those of the driver.
    pub async fn protocol(&self, method: &str, parameters: Value) -> Outcome<Value> {
        self.post(Post::protocol(method, &parameters)).await
    }

    pub(crate) async fn post(&self, command: Post) -> Outcome<Value> {
        Ok(self.client.issue_cmd(command).await?)
    }

    /// Seconds that scripts of the page have taken so far, as the browser's own clock of tasks says.
    ///
    /// # Errors
    /// Those of the driver.
    pub async fn script_seconds(&self) -> Outcome<f64> {
        self.protocol("Performance.enable", json!({})).await?;
        let metrics = self.protocol("Performance.getMetrics", json!({})).await?;
        let all = metrics["metrics"].as_array().map(Vec::as_slice).unwrap_or_default();
        let script = all.iter().find(|metric| metric["name"] == "ScriptDuration");
        let seconds = script.and_then(|metric| metric["value"].as_f64());
        seconds.ok_or_else(|| fault("the browser measures no scripts"))
    }

    pub(crate) async fn picture(&self) -> Outcome<Vec<u8>> {
        Ok(self.client.screenshot().await?)
    }

    /// The page's text as it is seen.
    ///
    /// # Errors
    /// Those of the driver.
    pub async fn text(&self) -> Outcome<String> {
        let text = self.script("return document.body.innerText").await?;
        Ok(text.as_str().unwrap_or_default().to_owned())
    }

    /// Warnings and errors that the console has shown since it was last asked; Firefox's driver does
    /// not tell them.
    ///
    /// # Errors
    /// Those of the driver.
    pub async fn console(&self) -> Outcome<Vec<String>> {
        if self.kind == Kind::Firefox {
            return Ok(Vec::new());
        }
        let entries = self.client.issue_cmd(Post::console()).await?;
        let bad = |entry: &&Value| entry["level"] == "SEVERE" || entry["level"] == "WARNING";
        let entries = entries.as_array().map(Vec::as_slice).unwrap_or_default();
        Ok(entries.iter().filter(bad).map(|entry| entry["message"].to_string()).collect())
    }

    /// Waits until `holds`.
    ///
    /// # Errors
    /// That it did not within the limit, or what `holds` meets.
    pub async fn until(
        &self,
        what: &str,
        limit: Duration,
        holds: impl AsyncFn() -> Outcome<bool>,
    ) -> Outcome<()> {
        let begun = Instant::now();
        while !holds().await? {
            if begun.elapsed() > limit {
                let seen = self.text().await?;
                return Err(fault(format!("after {limit:?} still not: {what}. Seen:\n{seen}")));
            }
            sleep(BETWEEN_LOOKS).await;
        }
        Ok(())
    }

    /// Waits until the page shows a text.
    ///
    /// # Errors
    /// That it does not soon.
    pub async fn shows(&self, text: &str) -> Outcome<()> {
        let what = format!("the page shows {text:?}");
        self.until(&what, SOON, async || Ok(self.text().await?.contains(text))).await
    }

    /// The element with this role whose accessible name holds `name`; waits for it. The first in
    /// the order of the document if there are more.
    ///
    /// # Errors
    /// That there is none soon.
    pub async fn find(&self, role: &str, name: &str) -> Outcome<Element> {
        let begun = Instant::now();
        loop {
            if let Some(first) = self.find_all(role, name).await?.into_iter().next()
                && self.is_still(role, &first).await?
            {
                return Ok(first);
            }
            if begun.elapsed() > SOON {
                let seen = self.text().await?;
                return Err(fault(format!("there is no {role} named {name:?}. Seen:\n{seen}")));
            }
            sleep(BETWEEN_LOOKS).await;
        }
    }

    /// Whether a button stands still, as one that is clicked must; others need not.
    async fn is_still(&self, role: &str, element: &Element) -> Outcome<bool> {
        if role != "button" {
            return Ok(true);
        }
        let before = self.place(element).await?;
        for _ in 0..STILL {
            sleep(BETWEEN_LOOKS).await;
            if before.is_null() || self.place(element).await? != before {
                return Ok(false);
            }
        }
        Ok(true)
    }

    /// All elements with this role whose accessible names hold `name`, as they are now.
    ///
    /// # Errors
    /// Those of the driver.
    pub async fn find_all(&self, role: &str, name: &str) -> Outcome<Vec<Element>> {
        self.named(role, |found| found.contains(name)).await
    }

    /// All elements with this role that have no accessible name.
    ///
    /// # Errors
    /// Those of the driver.
    pub async fn nameless(&self, role: &str) -> Outcome<Vec<Element>> {
        self.named(role, |found| found.trim().is_empty()).await
    }

    /// As [`Browser::named`], by WebDriver alone.
    async fn computed(&self, role: &str, fits: impl Fn(&str) -> bool) -> Outcome<Vec<Element>> {
        let mut found = Vec::new();
        for element in self.client.find_all(Locator::Css(&candidates(role))).await? {
            // An element that has gone since is not found.
            let has = self.ask(&element, "computedrole").await.unwrap_or_default();
            let name = self.ask(&element, "computedlabel").await.unwrap_or_default();
            if has == role && fits(&name) && element.is_displayed().await.unwrap_or(false) {
                found.push(element);
            }
        }
        Ok(found)
    }

    async fn ask(&self, element: &Element, what: &'static str) -> Outcome<String> {
        let element = element.element_id().to_string();
        let said = self.client.issue_cmd(Computed { element, what }).await?;
        Ok(said.as_str().unwrap_or_default().to_owned())
    }

    async fn named(&self, role: &str, fits: impl Fn(&str) -> bool) -> Outcome<Vec<Element>> {
        if self.kind == Kind::Firefox {
            return self.computed(role, fits).await;
        }
        let document = self.protocol("DOM.getDocument", json!({ "depth": 0 })).await?;
        let query = json!({ "nodeId": document["root"]["nodeId"], "role": role });
        let found = self.protocol("Accessibility.queryAXTree", query).await?;
        let fits = |node: &&Value| {
            node["ignored"] != true && fits(node["name"]["value"].as_str().unwrap_or_default())
        };
        let nodes = found["nodes"].as_array().map(Vec::as_slice).unwrap_or_default();
        let ids: Vec<&Value> =
            nodes.iter().filter(fits).map(|node| &node["backendDOMNodeId"]).collect();
        self.mark(&json!(ids)).await?;
        Ok(self.client.find_all(Locator::Css(&format!("[{MARK}]"))).await?)
    }

    /// Marks these elements, and no other, with an attribute by which WebDriver can find them.
    async fn mark(&self, ids: &Value) -> Outcome<()> {
        self.script_with(
            "for (const one of document.querySelectorAll(`[${arguments[0]}]`)) \
             one.removeAttribute(arguments[0])",
            vec![json!(MARK)],
        )
        .await?;
        let pushed = json!({ "backendNodeIds": ids });
        let pushed = self.protocol("DOM.pushNodesByBackendIdsToFrontend", pushed).await?;
        for node in pushed["nodeIds"].as_array().map(Vec::as_slice).unwrap_or_default() {
            let marked = json!({ "nodeId": node, "name": MARK, "value": "" });
            self.protocol("DOM.setAttributeValue", marked).await?;
        }
        Ok(())
    }

    /// The first element of a CSS selector; waits for it.
    ///
    /// # Errors
    /// That there is none soon.
    pub async fn select(&self, selector: &str) -> Outcome<Element> {
        let wait = self.client.wait().at_most(SOON).every(BETWEEN_LOOKS);
        wait.for_element(Locator::Css(selector))
            .await
            .map_err(|error| fault(format!("nothing matches {selector}: {error}")))
    }

    /// As [`Browser::select`], once it stands still: roots that are solved make the page above a
    /// control longer, and a click in that moment would meet what stood there before.
    ///
    /// # Errors
    /// As [`Browser::select`], or that it moves for long.
    pub async fn still(&self, selector: &str) -> Outcome<Element> {
        let (mut before, mut looks) = (Value::Null, 0);
        let begun = Instant::now();
        loop {
            let element = self.select(selector).await?;
            let now = self.place(&element).await?;
            looks = if now == before && !now.is_null() { looks + 1 } else { 0 };
            if looks == STILL {
                return Ok(element);
            }
            if begun.elapsed() > SOON {
                return Err(fault(format!("{selector} does not stand still")));
            }
            before = now;
            sleep(BETWEEN_LOOKS).await;
        }
    }

    /// Brings an element into view and says where it stands in the document and in the window.
    async fn place(&self, element: &Element) -> Outcome<Value> {
        let script = "const [element] = arguments; \
                      if (!element.isConnected) return null; \
                      element.scrollIntoView({ block: 'nearest' }); \
                      const box = element.getBoundingClientRect(); \
                      return [box.x, box.y, box.width, box.height, scrollY, \
                      document.documentElement.scrollHeight]";
        let place = self.script_with(script, vec![serde_json::to_value(element)?]).await;
        // The element may have been replaced since it was found.
        Ok(place.unwrap_or(Value::Null))
    }

    /// Puts a text into a field as a paste does: at once, with the event that pages hear.
    ///
    /// # Errors
    /// Those of the driver.
    pub async fn paste(&self, field: &Element, text: &str) -> Outcome<()> {
        let script = "const [field, text] = arguments; field.focus(); field.select(); \
                      document.execCommand('insertText', false, text);";
        self.script_with(script, vec![serde_json::to_value(field)?, json!(text)]).await?;
        Ok(())
    }
}
