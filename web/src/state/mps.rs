//! A model in MPS among what is pasted: it is a rival, not an instance.

/// Whether a text is a whole model in MPS: it begins with `NAME`, `ROWS` or a section before them,
/// and has the headings `ROWS`, `COLUMNS` and `ENDATA` in lines of their own.
pub(crate) fn looks_like_mps(text: &str) -> bool {
    let lines = || text.lines().filter(|line| !line.starts_with('*') && !line.trim().is_empty());
    let first = lines().next().and_then(|line| line.split_whitespace().next());
    let begins = matches!(first, Some("NAME" | "ROWS" | "OBJSENSE"));
    let heads = |heading: &str| lines().any(|line| line.trim_end() == heading);
    begins && heads("ROWS") && heads("COLUMNS") && heads("ENDATA")
}

#[cfg(test)]
mod tests {
    use super::looks_like_mps;

    #[test]
    fn a_whole_model_is_told_from_tables_and_broken_ones() {
        let model = "* remark\nNAME tools\nROWS\n N cost\nCOLUMNS\nRHS\nENDATA\n";
        assert!(looks_like_mps(model));
        assert!(looks_like_mps(&model.replace('\n', "\r\n")));
        assert!(!looks_like_mps(&model.replace("ENDATA", "")));
        assert!(!looks_like_mps("NAME: br17\nTYPE: ATSP\nEOF\n"));
        assert!(!looks_like_mps("A 3 4\nB 1 2\n"));
    }
}
