//! A rival is opened to its notation, edited, and runs as it was written.

use fantoccini::elements::Element;
use fantoccini::key::Key;
use hullward_tests_browser::Outcome;
use hullward_tests_browser::browser::{Browser, SOON};
use hullward_tests_browser::screen::Screen;
use hullward_tests_browser::visit::{Source, visit};

use crate::lanes::{add, button, part, paste, status, text, value};

/// Two directions of a triangle: 1 + 4 + 5 = 10 one way, 2 + 6 + 3 = 11 the other.
const TRIANGLE: &str = "\tA\tB\tC\nA\t\t1\t2\nB\t3\t\t4\nC\t5\t6\t\n";

/// The assignment relaxation as the LaTeX source of a paper has it, below its data.
const ALIGN: &str = r"Assignment from a paper
data
  V  stops
  A ⊆ V × V  drives
  c_{ij}  ∀ (i,j) ∈ A  minutes
\begin{align}
\min \quad & \sum_{(i,j) \in A} 2 c_{ij} x_{ij} \\
\text{s.t.} \quad & \sum_{j : (i,j) \in A} x_{ij} = 1 && \forall i \in V \tag{leave} \\
& \sum_{i : (i,j) \in A} x_{ij} = 1 && \forall j \in V \tag{enter} \\
& x_{ij} \in \{0,1\} && \forall (i,j) \in A
\end{align}
";

async fn open(browser: &Browser, letter: &str) -> Outcome<Element> {
    button(browser, letter, "notation").await?.click().await?;
    // A shipped formulation is looked at first.
    button(browser, letter, "edit").await?.click().await?;
    browser.select(&part(letter, "notation-text")).await
}

/// What stands in a lane's box.
async fn typed(browser: &Browser, letter: &str) -> Outcome<String> {
    let script = "return document.querySelector(arguments[0]).value";
    let text = browser.script_with(script, vec![part(letter, "notation-text").into()]).await?;
    Ok(text.as_str().unwrap_or_default().to_owned())
}

/// Puts a text into a lane's box and waits until a part of the lane shows a word.
async fn write(
    browser: &Browser,
    letter: &str,
    script: &str,
    (name, word): (&str, &str),
) -> Outcome<()> {
    let field = browser.select(&part(letter, "notation-text")).await?;
    browser.paste(&field, script).await?;
    shows(browser, letter, (name, word)).await
}

async fn shows(browser: &Browser, letter: &str, (name, word): (&str, &str)) -> Outcome<()> {
    let shown = async || Ok(text(browser, letter, name).await?.contains(word));
    browser.until(&format!("{name} of {letter} shows {word:?}"), SOON, shown).await
}

#[tokio::test(flavor = "multi_thread")]
async fn a_changed_coefficient_runs_its_own_lane_anew_and_can_go_back() -> Outcome<()> {
    visit(Source::File, async |browser| {
        paste(browser, TRIANGLE).await?;
        browser.shows("3 stops, 6 drives").await?;
        for letter in ["A", "B", "C"] {
            status(browser, letter, "root solved").await?;
        }
        add(browser, "atsp/assignment").await?;
        status(browser, "D", "root solved").await?;
        let (before, other) = (value(browser, "D", "root-bound").await?, status_of(browser).await?);
        assert_eq!(before, Some(10.0));
        open(browser, "D").await?;
        shows(browser, "D", ("notation-state", "This is what the lane runs")).await?;
        let shipped = typed(browser, "D").await?;
        let doubled = shipped.replace("c_{i,j} x_{i,j}\n", "2 c_{i,j} x_{i,j}\n");
        assert_ne!(doubled, shipped, "{shipped}");
        write(browser, "D", &doubled, ("notation-state", "not used yet")).await?;
        assert_eq!(value(browser, "D", "root-bound").await?, before);
        button(browser, "D", "use").await?.click().await?;
        let is = |wanted: f64| {
            async move |browser: &Browser| {
                Ok(value(browser, "D", "root-bound").await? == Some(wanted))
            }
        };
        browser.until("the bound is doubled", SOON, async || is(20.0)(browser).await).await?;
        assert_eq!(status_of(browser).await?, other, "other lanes stay as they were");
        browser.shows("(edited)").await?;
        button(browser, "D", "restore").await?.click().await?;
        browser.until("the bound is back", SOON, async || is(10.0)(browser).await).await?;
        assert_eq!(typed(browser, "D").await?, shipped);
        // A mend that has a button is told once.
        let unknown = shipped.replace("c_{i,j} x_{i,j}\n", "c_{i,j} y_{i,j}\n");
        write(browser, "D", &unknown, ("notation-remarks", "Do this: make it a variable")).await?;
        let told = text(browser, "D", "notation-remarks").await?;
        assert_eq!(told.to_lowercase().matches("make it a variable").count(), 1, "{told}");
        Ok(())
    })
    .await
}

/// What the first lanes say of themselves.
async fn status_of(browser: &Browser) -> Outcome<Vec<String>> {
    let mut said = Vec::new();
    for letter in ["A", "B", "C"] {
        said.push(text(browser, letter, "status").await?);
        said.push(text(browser, letter, "root-bound").await?);
    }
    Ok(said)
}

#[tokio::test(flavor = "multi_thread")]
async fn what_is_wrong_is_underlined_and_mended_and_touches_no_lane() -> Outcome<()> {
    visit(Source::File, async |browser| {
        status(browser, "A", "root solved").await?;
        let bound = text(browser, "A", "root-bound").await?;
        let field = open(browser, "A").await?;
        shows(browser, "A", ("notation-state", "No errors")).await?;
        let sound = typed(browser, "A").await?;
        let unknown = sound.replace("c_{i,j} x_{i,j}", "c_{i,j} y_{i,j}");
        write(browser, "A", &unknown, ("notation-state", "keeps what it runs")).await?;
        shows(browser, "A", ("notation-remarks", "y")).await?;
        let marked = "return [...document.querySelectorAll('.script .error')].map(m => m.textContent).join()";
        assert!(browser.script(marked).await?.as_str().is_some_and(|it| it.contains('y')));
        assert_eq!(field.attr("aria-invalid").await?.as_deref(), Some("true"));
        button(browser, "A", "mend").await?;
        for screen in Screen::ALL {
            browser.look(screen).await?;
            browser.screenshot("notation", screen).await?;
        }
        // A click on the place puts the caret there.
        let place = browser.select(&part("A", "notation-remarks")).await?;
        place.find(fantoccini::Locator::Css("button")).await?.click().await?;
        let chosen = "const box = document.activeElement; \
                      return box.value.slice(box.selectionStart, box.selectionEnd)";
        assert!(browser.script(chosen).await?.as_str().is_some_and(|it| it.starts_with('y')));
        let product = sound.replace("c_{i,j} x_{i,j}", "c_{i,j} x_{i,j} x_{i,j}");
        write(browser, "A", &product, ("notation-remarks", "product")).await?;
        button(browser, "A", "use").await?.click().await?;
        assert_eq!(text(browser, "A", "root-bound").await?, bound);
        assert_eq!(typed(browser, "A").await?, product);
        Ok(())
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn what_is_typed_has_its_colours() -> Outcome<()> {
    visit(Source::File, async |browser| {
        status(browser, "A", "root solved").await?;
        open(browser, "A").await?;
        let text = "data\n  V  stops # of the 𝒳 round\n  q_i = 2  ∀ i ∈ V\nminimise\n  Σ_{i ∈ V} q_i x_i\n\
            subject to\n  x_i ≥ 1  ∀ i ∈ V  (each)\n  x_i ≥ 0  ∀ i ∈ V\n";
        write(browser, "A", text, ("notation-state", "No errors")).await?;
        let colours = "
            const of = (kind) => [...document.querySelectorAll(`.script .${kind}`)];
            const words = (kind) => of(kind).map((one) => one.textContent.trim()).join(' ');
            const plain = getComputedStyle(document.querySelector('.script pre')).color;
            const kinds = ['part', 'datum', 'variable', 'label', 'comment'];
            const told = (kind) => {
                const style = getComputedStyle(of(kind)[0]);
                return style.color !== plain || style.fontWeight > 400 || style.fontStyle !== 'normal';
            };
            return kinds.map((kind) => words(kind) + (of(kind).length && told(kind) ? '' : '!'));
        ";
        let shown = browser.script(colours).await?;
        let shown: Vec<&str> = shown.as_array().into_iter().flatten().filter_map(|w| w.as_str()).collect();
        let [parts, data, variables, labels, comments] = shown[..] else {
            return Err(format!("{shown:?}").into());
        };
        assert_eq!(parts, "data minimise subject to");
        assert!(data.split(' ').all(|word| matches!(word, "V" | "q")), "{data}");
        assert!(!variables.is_empty() && variables.split(' ').all(|word| word == "x"), "{variables}");
        assert_eq!((labels, comments), ("(each)", "# of the 𝒳 round"));
        Ok(())
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn an_own_rival_is_pasted_from_a_paper_and_runs() -> Outcome<()> {
    visit(Source::File, async |browser| {
        paste(browser, TRIANGLE).await?;
        browser.shows("3 stops, 6 drives").await?;
        browser.find("button", "Write my own").await?.click().await?;
        status(browser, "D", "root solved").await?;
        assert_eq!(value(browser, "D", "root-bound").await?, Some(10.0));
        shows(browser, "D", ("notation-state", "No errors")).await?;
        write(browser, "D", ALIGN, ("notation-state", "not used yet")).await?;
        button(browser, "D", "use").await?.click().await?;
        let doubled = async || Ok(value(browser, "D", "root-bound").await? == Some(20.0));
        browser.until("the pasted rival runs", SOON, doubled).await?;
        button(browser, "D", "duplicate").await?.click().await?;
        status(browser, "E", "root solved").await?;
        assert_eq!(value(browser, "E", "root-bound").await?, Some(20.0));
        // Without its rows the round costs nothing: families of an own text are switched as others are.
        let family = browser.select("[data-lane=E] [data-family=leave]").await?;
        family.select_by_value("out").await?;
        browser.select("[data-lane=E] [data-family=enter]").await?.select_by_value("out").await?;
        let free = async || Ok(value(browser, "E", "root-bound").await? == Some(0.0));
        browser.until("no rows are left", SOON, free).await?;
        assert_eq!(value(browser, "D", "root-bound").await?, Some(20.0));
        button(browser, "E", "remove").await?.click().await?;
        let gone = "return document.querySelector('[data-lane=E]') === null";
        browser
            .until("the copy is gone", SOON, async || Ok(browser.script(gone).await? == true))
            .await?;
        Ok(())
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn commands_become_signs_and_tab_is_no_trap() -> Outcome<()> {
    visit(Source::File, async |browser| {
        status(browser, "A", "root solved").await?;
        let field = open(browser, "A").await?;
        browser.paste(&field, " ").await?;
        field.send_keys(r"\in ").await?;
        assert_eq!(typed(browser, "A").await?, " ∈ ");
        field.send_keys(r"\fora").await?;
        shows(browser, "A", ("offers", "∀")).await?;
        field.send_keys(&char::from(Key::Tab).to_string()).await?;
        assert_eq!(typed(browser, "A").await?, " ∈ ∀");
        // Escape keeps the command; then Tab moves on as everywhere.
        field.send_keys(r" \sum").await?;
        field.send_keys(&char::from(Key::Escape).to_string()).await?;
        field.send_keys(&char::from(Key::Tab).to_string()).await?;
        assert_eq!(typed(browser, "A").await?, " ∈ ∀ \\sum");
        let away = "return document.activeElement.tagName !== 'TEXTAREA'";
        assert_eq!(browser.script(away).await?, true);
        Ok(())
    })
    .await
}

#[tokio::test(flavor = "multi_thread")]
async fn the_first_letters_of_a_name_in_scope_offer_the_name() -> Outcome<()> {
    visit(Source::Server, async |browser| {
        status(browser, "A", "root solved").await?;
        let field = open(browser, "A").await?;
        let named = "data\n  I  depots\n  demand_i = 1  ∀ i ∈ I  pieces\nminimise\n  \
            Σ_{i ∈ I} demand_i x_i\nsubject to\n  x_i ≥ 0  ∀ i ∈ I\n  ";
        write(browser, "A", named, ("notation-state", "No errors")).await?;
        field.send_keys("dem").await?;
        shows(browser, "A", ("offers", "demand")).await?;
        field.send_keys(&char::from(Key::Tab).to_string()).await?;
        assert_eq!(typed(browser, "A").await?, format!("{named}demand"));
        Ok(())
    })
    .await
}
