//! How the page is seen: from narrow to wide, light and dark; and what assistive technology hears.

use hullward_tests_browser::Outcome;
use hullward_tests_browser::browser::SOON;
use hullward_tests_browser::screen::Screen;
use hullward_tests_browser::visit::{Source, visit, visit_chromium};

use crate::lanes::{button, status};

const OVERFLOW: &str = "
    const page = document.documentElement;
    return page.scrollWidth - page.clientWidth;
";

#[tokio::test(flavor = "multi_thread")]
async fn nothing_is_cut_off_from_a_phone_to_a_wide_screen() -> Outcome<()> {
    visit(Source::File, async |browser| {
        status(browser, "C", "root solved").await?;
        for width in [320, 390, 768, 1280, 1920, 3840] {
            browser.look(Screen { width, dark: false }).await?;
            // Drawings take their new size a frame later.
            let fits = async || Ok(browser.script(OVERFLOW).await? == 0);
            browser.until(&format!("all fits {width} pixels"), SOON, fits).await?;
        }
        Ok(())
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn light_and_dark_differ_and_are_kept_as_pictures() -> Outcome<()> {
    visit_chromium(Source::File, async |browser| {
        status(browser, "C", "root solved").await?;
        button(browser, "C", "run").await?.click().await?;
        status(browser, "C", "closed").await?;
        let mut grounds = Vec::new();
        for screen in Screen::ALL {
            browser.look(screen).await?;
            let picture = browser.screenshot("demo", screen).await?;
            assert!(picture.metadata()?.len() > 10_000, "{}", picture.display());
            let ground = "return getComputedStyle(document.documentElement).backgroundColor + \
                          getComputedStyle(document.body).backgroundColor";
            grounds.push(browser.script(ground).await?.to_string());
        }
        assert_eq!(grounds[0], grounds[2]);
        assert_ne!(grounds[0], grounds[1]);
        Ok(())
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn everything_that_can_be_pressed_has_a_name() -> Outcome<()> {
    visit(Source::File, async |browser| {
        status(browser, "C", "root solved").await?;
        for role in ["button", "textbox", "combobox", "radio", "checkbox", "link", "tree"] {
            if let Some(element) = browser.nameless(role).await?.first() {
                return Err(format!("a {role} has no name: {}", element.html(false).await?).into());
            }
        }
        Ok(())
    })
    .await
}
