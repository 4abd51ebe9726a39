//! The one file: the template with its parts filled in, and the policy that lets the browser run
//! these very parts and nothing else.
//!
//! The Content-Security-Policy names each script and the style by the SHA-256 of its text, allows
//! WebAssembly and workers made from the page itself, and names no source of requests: `default-src
//! 'none'` then stands for `connect-src` too, so the page can send nothing anywhere. Where trusted
//! types are known, no text becomes markup or a script; the boot script alone names the workers'.

use base64::Engine as _;
use base64::engine::general_purpose::STANDARD;
use sha2::{Digest, Sha256};

use crate::fault::Fault;
use crate::pack::Pack;

/// What goes into the template.
#[derive(Debug, Clone, Copy)]
pub(crate) struct Parts<'a> {
    /// The style sheet.
    pub(crate) style: &'a str,
    /// The page module and the scripts of both workers.
    pub(crate) page: &'a Pack,
    /// The engine module.
    pub(crate) engine: &'a Pack,
    /// The second LP code's module.
    pub(crate) opinion: &'a Pack,
    /// The page module's glue, a script.
    pub(crate) page_glue: &'a str,
    /// The decoder and the boot script.
    pub(crate) boot: &'a str,
}

/// Fills the template. Each part stands in it once, as `{{name}}`.
pub(crate) fn assemble(template: &str, parts: &Parts<'_>) -> Result<String, Fault> {
    if parts.style.to_ascii_lowercase().contains("</style") {
        return Err(Fault::new("web/style.css holds `</style`, which would end it in the page"));
    }
    let page_glue = inline_script(parts.page_glue);
    let boot = inline_script(parts.boot);
    let policy = policy(&[&page_glue, &boot], parts.style);
    fill(
        template,
        &[
            ("policy", &policy),
            ("style", parts.style),
            ("page", &element(parts.page)),
            ("engine", &element(parts.engine)),
            ("opinion", &element(parts.opinion)),
            ("page-glue", &page_glue),
            ("boot", &boot),
        ],
    )
}

/// A pack as the rest of an element that has begun: how to take it apart, then the pack itself.
fn element(pack: &Pack) -> String {
    let Pack { text, lengths, streams, .. } = pack;
    format!("data-lengths=\"{lengths}\" data-streams=\"{streams}\">{text}")
}

/// The page up to the engine: all that must have arrived before it opens.
pub(crate) fn up_to_the_engine(file: &str) -> &str {
    file.split_once("<script type=\"application/octet-stream\" id=\"pack-engine\"")
        .map_or(file, |(first, _)| first)
}

/// Replaces each `{{name}}` by its value, in one pass, so that a value is never filled itself.
fn fill(template: &str, values: &[(&str, &str)]) -> Result<String, Fault> {
    let mut filled = String::new();
    let mut rest = template;
    let mut used = vec![false; values.len()];
    while let Some((before, after)) = rest.split_once("{{") {
        let (name, behind) = after
            .split_once("}}")
            .ok_or_else(|| Fault::new("web/index.html opens {{ and does not close it"))?;
        let place = values.iter().position(|(known, _)| *known == name).ok_or_else(|| {
            Fault::new(format!("web/index.html asks for an unknown part {name:?}"))
        })?;
        if used[place] {
            return Err(Fault::new(format!("web/index.html asks for {name:?} twice")));
        }
        used[place] = true;
        filled.push_str(before);
        filled.push_str(values[place].1);
        rest = behind;
    }
    if let Some(place) = used.iter().position(|used| !used) {
        return Err(Fault::new(format!("web/index.html does not ask for {:?}", values[place].0)));
    }
    filled.push_str(rest);
    Ok(filled)
}

/// A script as it may stand inside `<script>`: without the character sequences that end it or
/// change how HTML reads it. In JavaScript text `\x3c` is `<` wherever these can occur (strings,
/// templates, regular expressions); in comments it does not matter.
fn inline_script(script: &str) -> String {
    let mut inlined = String::with_capacity(script.len());
    let mut rest = script;
    while let Some(at) = rest.find('<') {
        let (before, from) = rest.split_at(at);
        inlined.push_str(before);
        let changes_html = ["</script", "<script", "<!--"]
            .iter()
            .any(|mark| from.get(..mark.len()).is_some_and(|text| text.eq_ignore_ascii_case(mark)));
        inlined.push_str(if changes_html { "\\x3c" } else { "<" });
        rest = &from[1..];
    }
    inlined.push_str(rest);
    inlined
}

/// The page's Content-Security-Policy.
fn policy(scripts: &[&str], style: &str) -> String {
    let hashes: Vec<String> = scripts.iter().map(|script| source_hash(script)).collect();
    format!(
        "default-src 'none'; script-src {} 'wasm-unsafe-eval'; worker-src blob:; style-src {}; \
         img-src data: blob:; base-uri 'none'; form-action 'none'; \
         require-trusted-types-for 'script'; trusted-types hullward",
        hashes.join(" "),
        source_hash(style),
    )
}

/// How a policy names a text.
fn source_hash(text: &str) -> String {
    format!("'sha256-{}'", STANDARD.encode(Sha256::digest(text.as_bytes())))
}

#[cfg(test)]
mod tests {
    use std::sync::LazyLock;

    use super::*;

    const TEMPLATE: &str = include_str!("../../../web/index.html");

    static PACK: LazyLock<Pack> = LazyLock::new(|| Pack {
        text: "AAAA".to_owned(),
        lengths: "1,2,3".to_owned(),
        streams: "6,0".to_owned(),
        size: 3,
    });

    fn parts<'a>() -> Parts<'a> {
        Parts {
            style: "body { margin: 0 }",
            page: &PACK,
            engine: &PACK,
            opinion: &PACK,
            page_glue: "let wasm_bindgen = '</script><!-- {{boot}}';",
            boot: "start();",
        }
    }

    /// The texts between `open` and the next `close`, in order.
    fn between<'a>(file: &'a str, open: &str, close: &str) -> Vec<&'a str> {
        file.split(open).skip(1).filter_map(|rest| rest.split(close).next()).collect()
    }

    // The value of the digest of "abc": FIPS 180-4, example for SHA-256, written in base64.
    #[test]
    fn a_text_is_named_by_its_digest() {
        assert_eq!(source_hash("abc"), "'sha256-ungWv48Bz+pBQUDeXa4iI7ADYaOWF3qctBD/YfIAFa0='");
    }

    #[test]
    fn the_policy_names_the_scripts_and_the_style_as_they_stand_in_the_file() {
        let file = assemble(TEMPLATE, &parts()).expect("the template takes the parts");
        let policy = between(&file, "Content-Security-Policy\" content=\"", "\"")[0];
        let scripts = between(&file, "<script>", "</script>");
        assert_eq!(scripts.len(), 2);
        for text in scripts.iter().chain(&between(&file, "<style>", "</style>")) {
            assert!(policy.contains(&source_hash(text)), "{text}");
        }
        assert!(policy.starts_with("default-src 'none'; "));
        assert!(!policy.contains("unsafe-inline") && !policy.contains("connect-src"));
    }

    #[test]
    fn the_policy_comes_first_and_the_charset_early_enough() {
        let file = assemble(TEMPLATE, &parts()).expect("the template takes the parts");
        let head = file.split_once("<head>").expect("a head").1.trim_start();
        assert!(head.starts_with("<meta http-equiv=\"Content-Security-Policy\""));
        // HTML, "Specifying the document's character encoding": within the first 1024 bytes.
        assert!(file.find("<meta charset").is_some_and(|at| at < 900));
    }

    #[test]
    fn what_the_page_opens_with_comes_before_the_engine() {
        let file = assemble(TEMPLATE, &parts()).expect("the template takes the parts");
        let first = up_to_the_engine(&file);
        assert!(first.len() < file.len());
        assert!(first.contains("id=\"pack-page\"") && first.ends_with("start();</script>\n"));
    }

    #[test]
    fn nothing_in_the_template_is_fetched() {
        for attribute in [" src=", "url(", "@import", "http://", "https://"] {
            let svg_name = TEMPLATE.replace("http://www.w3.org/2000/svg", "");
            assert!(!svg_name.contains(attribute), "{attribute}");
        }
    }

    #[test]
    fn scripts_cannot_end_early() {
        assert_eq!(
            inline_script("a = '</SCRIPT>' < b; c = `<!--<script>é<`"),
            "a = '\\x3c/SCRIPT>' < b; c = `\\x3c!--\\x3cscript>é<`"
        );
        let file = assemble(TEMPLATE, &parts()).expect("the template takes the parts");
        assert_eq!(file.matches("</script>").count(), 5);
        assert!(file.contains("{{boot}}'"), "a value is not filled itself");
    }

    #[test]
    fn a_template_must_ask_for_each_part_once() {
        assert!(fill("{{a}}", &[("a", "1")]).is_ok_and(|text| text == "1"));
        for template in ["", "{{a}}{{a}}", "{{b}}{{a}}", "{{a}}{{"] {
            assert!(fill(template, &[("a", "1")]).is_err(), "{template:?}");
        }
    }

    #[test]
    fn a_style_that_ends_itself_is_refused() {
        let hostile = Parts { style: "a{}</STYLE><script>", ..parts() };
        assert!(assemble(TEMPLATE, &hostile).is_err());
    }
}
