//! Where a constraint family stands in the notation that it comes from.

/// The line of a family, in UTF-16 units from its first character to its end; `None` where no
/// line carries its name as a label.
pub(crate) fn of_family(text: &str, name: &str) -> Option<(u32, u32)> {
    let labels = [format!("({name})"), format!("\\tag{{{name}}}"), format!("\\tag*{{{name}}}")];
    let mut start = 0;
    for line in text.split_inclusive('\n') {
        let inside = line.trim_end();
        let ended = inside.trim_end_matches(['\\', ';']).trim_end();
        if ended.ends_with(&labels[0]) || labels[1..].iter().any(|label| line.contains(label)) {
            let indent = inside.len() - inside.trim_start().len();
            return Some((units(&text[..start + indent]), units(&text[..start + inside.len()])));
        }
        start += line.len();
    }
    None
}

fn units(text: &str) -> u32 {
    u32::try_from(text.encode_utf16().count()).unwrap_or(u32::MAX)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_family_is_found_by_its_label() {
        let text = "Σ x = 1  ∀ i  (leave)\n  Σ x = 1  (enter) \\\\\n u \\le 3 \\tag{order} \\\\\n";
        let of = |name| {
            let (start, end) = of_family(text, name)?;
            let units: Vec<u16> = text.encode_utf16().collect();
            String::from_utf16(&units[start as usize..end as usize]).ok()
        };
        assert_eq!(of("leave").as_deref(), Some("Σ x = 1  ∀ i  (leave)"));
        assert_eq!(of("enter").as_deref(), Some("Σ x = 1  (enter) \\\\"));
        assert_eq!(of("order").as_deref(), Some("u \\le 3 \\tag{order} \\\\"));
        assert_eq!(of("row 3"), None);
    }
}
