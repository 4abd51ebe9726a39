//! Names made from headings: journal notation knows letters and digits, spreadsheets more.

use crate::facts::is_unit;

/// A heading as a name.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) struct Name {
    /// Letters and digits, a letter first.
    pub(crate) text: String,
    /// The unit that stood in parentheses or after `in`; may be empty.
    pub(crate) unit: String,
}

impl Name {
    /// What is to be said where the name is not the heading itself.
    pub(crate) fn note(&self, heading: &str) -> Option<String> {
        let unit = if self.unit.is_empty() { String::new() } else { format!(", in {}", self.unit) };
        (self.text != heading)
            .then(|| format!("The heading `{heading}` became the name {}{unit}.", self.text))
    }
}

/// The name that a heading makes: `Setup cost (EUR)` is `SetupCost`, in EUR. `None` when the
/// heading holds no letter outside its parentheses.
pub(crate) fn name(heading: &str) -> Option<Name> {
    let (body, unit) = unit_apart(heading.trim());
    let mut text = String::new();
    for word in body.split(|c: char| !c.is_alphanumeric()) {
        if text.is_empty() {
            text.push_str(word.trim_start_matches(|c: char| !c.is_alphabetic()));
            continue;
        }
        let mut chars = word.chars();
        let first = chars.next().into_iter().flat_map(char::to_uppercase);
        text.extend(first.filter(|c| c.is_alphanumeric()));
        text.push_str(chars.as_str());
    }
    (!text.is_empty()).then(|| Name { text, unit: unit.to_owned() })
}

/// A heading without its unit, and the unit.
fn unit_apart(heading: &str) -> (&str, &str) {
    for (open, close) in [('(', ')'), ('[', ']')] {
        if let Some((body, rest)) = heading.split_once(open)
            && let Some((unit, _)) = rest.split_once(close)
        {
            return (body, unit.trim());
        }
    }
    match heading.rsplit_once(" in ") {
        Some((body, unit)) if unit.split_whitespace().next().is_some_and(is_unit) => {
            (body, unit.trim())
        }
        _ => (heading, ""),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn headings_become_names() {
        for (heading, text, unit) in [
            ("cost", "cost", ""),
            ("cost (EUR)", "cost", "EUR"),
            ("Setup cost [€/lot]", "SetupCost", "€/lot"),
            ("holding in EUR", "holding", "EUR"),
            ("cost in EUR per day", "cost", "EUR per day"),
            ("time in hand", "timeInHand", ""),
            ("2nd_shift", "ndShift", ""),
            ("2 shift", "shift", ""),
            (" Lärm-pegel ", "LärmPegel", ""),
        ] {
            let found = name(heading).unwrap();
            assert_eq!((found.text.as_str(), found.unit.as_str()), (text, unit), "{heading}");
        }
        assert!(name("(EUR)").is_none() && name("12").is_none() && name("").is_none());
        assert_eq!(name("cost").unwrap().note("cost"), None);
        assert_eq!(
            name("unit cost (EUR)").unwrap().note("unit cost (EUR)").unwrap(),
            "The heading `unit cost (EUR)` became the name unitCost, in EUR."
        );
    }

    proptest! {
        #[test]
        fn names_are_letters_and_digits(heading in "\\PC{0,20}") {
            if let Some(name) = name(&heading) {
                prop_assert!(name.text.starts_with(char::is_alphabetic));
                prop_assert!(name.text.chars().all(char::is_alphanumeric), "{}", name.text);
            }
        }
    }
}
