//! Products, absolute values, a greatest of several and implications: the message shows the rows
//! that say the same, a click writes them, and the lane then runs to the optimum known by hand.

use hullward_tests_browser::Outcome;
use hullward_tests_browser::browser::{Browser, SOON};
use hullward_tests_browser::screen::Screen;
use hullward_tests_browser::visit::{Source, visit};

use crate::lanes::{button, part, paste, status, text, value};

/// Three stops, made up.
const TABLE: &str = "\tAsh\tBirch\tCedar\nAsh\t\t1\t2\nBirch\t3\t\t4\nCedar\t5\t6\t\n";

/// A text, what its message must show, and its optimum by hand.
struct Case {
    text: &'static str,
    shows: &'static [&'static str],
    optimum: f64,
}

const CASES: [Case; 5] = [
    // a binary by a binary: three pairs earn 2 each, and each of the three costs 1
    Case {
        text: "data\n  V\nmaximise\n  Σ_{i ∈ V, j ∈ V : i < j} 2 x_i x_j − Σ_{i ∈ V} x_i\nsubject to\n  \
            Σ_{i ∈ V} x_i ≤ 3  (three)\n  x_i ∈ {0,1}  ∀ i ∈ V\n",
        shows: &["w_{i,j} ≤ x_i", "w_{i,j} ≤ x_j", "w_{i,j} ≥ x_j + x_i − 1"],
        optimum: 3.0,
    },
    // a binary by what has two bounds: 4 each where it is chosen, of which there are two
    Case {
        text: "data\n  V\nmaximise\n  Σ_{i ∈ V} y_i s_i\nsubject to\n  Σ_{i ∈ V} y_i ≤ 2  (two)\n  \
            0 ≤ s_i ≤ 4  ∀ i ∈ V\n  y_i ∈ {0,1}  ∀ i ∈ V\n",
        shows: &["w_i ≤ 4 y_i", "w_i ≤ s_i"],
        optimum: 8.0,
    },
    // |s − 1| with a sum of 9: 0 + 2 + 4 or 2 + 2 + 2
    Case {
        text: "data\n  V\nminimise\n  Σ_{i ∈ V} |s_i − 1|\nsubject to\n  Σ_{i ∈ V} s_i = 9  (nine)\n  \
            0 ≤ s_i ≤ 6  ∀ i ∈ V\n",
        shows: &["≥ s_i − 1"],
        optimum: 6.0,
    },
    // the greatest of s and 9 − 2 s is least where they meet, at 3
    Case {
        text: "data\n  V\nminimise\n  Σ_{i ∈ V} max(s_i, 9 − 2 s_i)\nsubject to\n  \
            Σ_{i ∈ V} s_i ≥ 1  (one)\n  0 ≤ s_i ≤ 6  ∀ i ∈ V\n",
        shows: &["w_i ≥ s_i", "w_i ≥ 9 − 2 s_i"],
        optimum: 9.0,
    },
    // two are chosen and held to 1, the third earns 5
    Case {
        text: "data\n  V\nmaximise\n  Σ_{i ∈ V} s_i\nsubject to\n  y_i = 1 ⟹ s_i ≤ 1  ∀ i ∈ V  (short)\n  \
            Σ_{i ∈ V} y_i ≥ 2  (two)\n  0 ≤ s_i ≤ 5  ∀ i ∈ V\n  y_i ∈ {0,1}  ∀ i ∈ V\n",
        shows: &["1 − y_i"],
        optimum: 7.0,
    },
];

/// What lane D's remarks say.
async fn remarks(browser: &Browser) -> Outcome<String> {
    text(browser, "D", "notation-remarks").await
}

async fn linearise(browser: &Browser, case: &Case) -> Outcome<()> {
    let field = browser.select(&part("D", "notation-text")).await?;
    browser.paste(&field, case.text).await?;
    let shows = async || {
        let told = remarks(browser).await?;
        Ok(case.shows.iter().all(|row| told.contains(row)))
    };
    browser.until(&format!("the rows {:?} of {}", case.shows, case.text), SOON, shows).await?;
    if case.optimum < 4.0 {
        for screen in Screen::ALL {
            browser.look(screen).await?;
            browser.screenshot("linearise", screen).await?;
        }
    }
    button(browser, "D", "mend").await?.click().await?;
    let sound = async || Ok(text(browser, "D", "notation-state").await?.contains("No errors"));
    browser.until(&format!("the rows mend {}", case.text), SOON, sound).await?;
    button(browser, "D", "use").await?.click().await?;
    // The relaxations of these rows have the optimum's value, and no two that follow have the same.
    let bound = async || Ok(value(browser, "D", "root-bound").await? == Some(case.optimum));
    browser.until(&format!("the root of {}", case.text), SOON, bound).await?;
    button(browser, "D", "run").await?.click().await?;
    status(browser, "D", &format!("{} is optimal", case.optimum)).await
}

#[tokio::test(flavor = "multi_thread")]
async fn rows_are_shown_and_written_by_a_click() -> Outcome<()> {
    visit(Source::File, async |browser| {
        paste(browser, TABLE).await?;
        browser.shows("3 stops, 6 drives").await?;
        browser.find("button", "Write my own").await?.click().await?;
        status(browser, "D", "root solved").await?;
        for case in &CASES {
            linearise(browser, case).await?;
        }
        Ok(())
    })
    .await
}
