//! Sizes, light and dark, screenshots.

use std::fs;
use std::path::PathBuf;

use serde_json::json;

use crate::browser::Browser;
use crate::visit::Kind;
use crate::{Outcome, server};

/// How the page is looked at.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Screen {
    /// Width in CSS pixels.
    pub width: u32,
    /// Whether the reader's system is dark.
    pub dark: bool,
}

impl Screen {
    /// A desktop and a phone, light and dark.
    pub const ALL: [Screen; 4] = [
        Screen { width: 1280, dark: false },
        Screen { width: 1280, dark: true },
        Screen { width: 390, dark: false },
        Screen { width: 390, dark: true },
    ];

    fn name(self) -> String {
        format!("{}-{}", self.width, if self.dark { "dark" } else { "light" })
    }
}

impl Browser {
    /// Looks at the page so from now on; in Firefox only by the width, in the colours that the
    /// machine has.
    ///
    /// # Errors
    /// Those of the driver.
    pub async fn look(&self, screen: Screen) -> Outcome<()> {
        if self.kind() == Kind::Firefox {
            return self.resize(screen.width).await;
        }
        let size = json!({
            "width": screen.width, "height": 900, "deviceScaleFactor": 1, "mobile": false
        });
        self.protocol("Emulation.setDeviceMetricsOverride", size).await?;
        let scheme = if screen.dark { "dark" } else { "light" };
        let media = json!({ "features": [{ "name": "prefers-color-scheme", "value": scheme }] });
        self.protocol("Emulation.setEmulatedMedia", media).await?;
        Ok(())
    }

    /// Saves what is seen in `tests/browser/screens` under a name and the screen's.
    ///
    /// # Errors
    /// Those of the driver and of writing the file.
    pub async fn screenshot(&self, name: &str, screen: Screen) -> Outcome<PathBuf> {
        let folder = server::root().join("tests/browser/screens");
        fs::create_dir_all(&folder)?;
        let path = folder.join(format!("{name}-{}.png", screen.name()));
        fs::write(&path, self.whole_page(screen).await?)?;
        Ok(path)
    }

    /// Saves what is in view as it is, in `tests/browser/screens` under a name.
    ///
    /// # Errors
    /// Those of the driver and of writing the file.
    pub async fn keep_view(&self, name: &str) -> Outcome<()> {
        let folder = server::root().join("tests/browser/screens");
        fs::create_dir_all(&folder)?;
        Ok(fs::write(folder.join(format!("{name}.png")), self.picture().await?)?)
    }

    /// A picture of the whole page, from its top to its end.
    async fn whole_page(&self, screen: Screen) -> Outcome<Vec<u8>> {
        if self.kind() == Kind::Firefox {
            return self.picture().await;
        }
        let height = self.script("return document.documentElement.scrollHeight").await?;
        let height = height.as_u64().unwrap_or(900).max(900);
        let size = json!({
            "width": screen.width, "height": height, "deviceScaleFactor": 1, "mobile": false
        });
        self.protocol("Emulation.setDeviceMetricsOverride", size).await?;
        let picture = self.picture().await?;
        self.look(screen).await?;
        Ok(picture)
    }
}
