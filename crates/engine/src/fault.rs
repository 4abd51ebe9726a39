//! Errors that no reader or checker makes: of the scenario as a whole.

use record::file::nearest;
use record::results::ErrorReport;

/// An error without a place in a text.
pub(crate) fn fault(place: &str, message: impl Into<String>) -> ErrorReport {
    ErrorReport { message: message.into(), complaints: Vec::new(), place: place.to_owned() }
}

/// A name that is not known, with the nearest that is.
pub(crate) fn unknown(place: &str, what: &str, name: &str, known: &[&str]) -> ErrorReport {
    let hint = match nearest(name, known) {
        Some(near) => format!("did you mean \"{near}\"?"),
        None if known.is_empty() => "there is none".to_owned(),
        None => format!("there are {}", known.join(", ")),
    };
    fault(place, format!("there is no {what} \"{name}\": {hint}"))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn an_unknown_name_comes_with_the_nearest_or_with_all() {
        let known = ["leave", "enter"];
        assert_eq!(
            unknown("rival", "family", "leav", &known).message,
            "there is no family \"leav\": did you mean \"leave\"?"
        );
        assert_eq!(
            unknown("rival", "family", "subtour", &known).message,
            "there is no family \"subtour\": there are leave, enter"
        );
    }
}
