//! Reads the fields of one TOML table and keeps every complaint with its place.

use std::collections::BTreeMap;
use std::ops::Range;

use toml::Spanned;
use toml::de::{DeTable, DeValue};

use super::nearest::nearest;
use crate::place::Finding;
use crate::scenario::Field;

/// Nested lists and tables of a study go no deeper.
const DEEPEST: u32 = 16;

/// A table of the document.
pub(super) type Table<'t> = DeTable<'t>;

/// What has been complained about so far.
#[derive(Debug, Default)]
pub(super) struct Findings(pub(super) Vec<Finding>);

impl Findings {
    /// Adds an error.
    pub(super) fn error(&mut self, code: &str, span: Range<usize>, message: String, mend: String) {
        self.0.push(Finding { error: true, code: code.to_owned(), span, message, mend });
    }

    /// Complains about every key that is not in `known`.
    pub(super) fn unknown_keys(&mut self, table: &Table<'_>, place: &str, known: &[&str]) {
        for key in table.keys() {
            let name: &str = key.get_ref();
            if known.contains(&name) {
                continue;
            }
            let mend = match nearest(name, known) {
                Some(near) => format!("did you mean `{near}`?"),
                None => format!("{place} knows {}", listed(known)),
            };
            let message = format!("{place} has no field `{name}`");
            self.error("unknown-key", key.span(), message, mend);
        }
    }

    fn wrong_type(&mut self, key: &str, value: &Spanned<DeValue<'_>>, wanted: &str) {
        let found = found(value.get_ref());
        let message = format!("`{key}` must be {wanted}, not {found}");
        let mend = match sample(wanted) {
            Some(sample) => format!("write {key} = {sample}"),
            None => format!("write [{key}]"),
        };
        self.error("wrong-type", value.span(), message, mend);
    }

    /// A string.
    pub(super) fn text(&mut self, table: &Table<'_>, key: &str) -> Option<String> {
        let value = table.get(key)?;
        let text = value.get_ref().as_str().map(str::to_owned);
        if text.is_none() {
            self.wrong_type(key, value, "a text");
        }
        text
    }

    /// True or false.
    pub(super) fn flag(&mut self, table: &Table<'_>, key: &str) -> Option<bool> {
        let value = table.get(key)?;
        let flag = value.get_ref().as_bool();
        if flag.is_none() {
            self.wrong_type(key, value, "true or false");
        }
        flag
    }

    /// A whole number in the range of its type.
    pub(super) fn whole<T: TryFrom<u64>>(&mut self, table: &Table<'_>, key: &str) -> Option<T> {
        let value = table.get(key)?;
        let Some(integer) = value.get_ref().as_integer() else {
            self.wrong_type(key, value, "a whole number");
            return None;
        };
        let number = u64::from_str_radix(integer.as_str(), integer.radix()).ok();
        let number = number.and_then(|number| T::try_from(number).ok());
        if number.is_none() {
            let message = format!("`{key}` is out of range: {}", integer.as_str());
            let most = u64::MAX >> (64 - 8 * size_of::<T>());
            self.error("range", value.span(), message, format!("0 to {most} is possible"));
        }
        number
    }

    /// A finite number, whole or not; −0 is read as 0.
    pub(super) fn number(&mut self, table: &Table<'_>, key: &str) -> Option<f64> {
        let value = table.get(key)?;
        let number = match value.get_ref() {
            DeValue::Integer(integer) if integer.radix() == 10 => integer.as_str().parse().ok(),
            DeValue::Float(float) => float.as_str().parse::<f64>().ok(),
            _ => {
                self.wrong_type(key, value, "a number");
                return None;
            }
        };
        let finite = number.filter(|number| number.is_finite()).map(|number| number + 0.0);
        if finite.is_none() {
            let message = format!("`{key}` must be a finite number");
            self.error("range", value.span(), message, "leave the line out for none".to_owned());
        }
        finite
    }

    /// A list of strings.
    pub(super) fn texts(&mut self, table: &Table<'_>, key: &str) -> Option<Vec<String>> {
        let value = table.get(key)?;
        let Some(list) = value.get_ref().as_array() else {
            self.wrong_type(key, value, "a list of texts");
            return None;
        };
        let mut texts = Vec::new();
        for item in list {
            match item.get_ref().as_str() {
                Some(text) => texts.push(text.to_owned()),
                None => self.wrong_type(key, item, "a list of texts"),
            }
        }
        Some(texts)
    }

    /// One of several words.
    pub(super) fn choice<T: Copy>(
        &mut self,
        table: &Table<'_>,
        key: &str,
        words: &[(&str, T)],
    ) -> Option<T> {
        let text = self.text(table, key)?;
        let span = table.get(key).map(Spanned::span).unwrap_or_default();
        self.word(&text, span, key, words)
    }

    /// What a word stands for.
    pub(super) fn word<T: Copy>(
        &mut self,
        word: &str,
        span: Range<usize>,
        key: &str,
        words: &[(&str, T)],
    ) -> Option<T> {
        let found = words.iter().find(|(known, _)| *known == word).map(|(_, value)| *value);
        if found.is_none() {
            let known: Vec<&str> = words.iter().map(|(known, _)| *known).collect();
            let mend = match nearest(word, &known) {
                Some(near) => format!("did you mean \"{near}\"?"),
                None => format!("it is one of {}", listed(&known)),
            };
            self.error("unknown-value", span, format!("`{key}` cannot be \"{word}\""), mend);
        }
        found
    }

    /// A table.
    pub(super) fn table<'d, 't>(
        &mut self,
        table: &'d Table<'t>,
        key: &str,
    ) -> Option<&'d Table<'t>> {
        let value = table.get(key)?;
        let found = value.get_ref().as_table();
        if found.is_none() {
            self.wrong_type(key, value, "a table");
        }
        found
    }

    /// The tables of `[[key]]` with their spans.
    pub(super) fn tables<'d, 't>(
        &mut self,
        table: &'d Table<'t>,
        key: &str,
    ) -> Vec<(&'d Table<'t>, Range<usize>)> {
        let Some(value) = table.get(key) else { return Vec::new() };
        let Some(list) = value.get_ref().as_array() else {
            let message = format!("`{key}` must be a list of tables");
            self.error("wrong-type", value.span(), message, format!("write [[{key}]]"));
            return Vec::new();
        };
        let mut tables = Vec::new();
        for item in list {
            match item.get_ref().as_table() {
                Some(found) => tables.push((found, item.span())),
                None => {
                    let message = format!("`{key}` must be a list of tables");
                    self.error("wrong-type", item.span(), message, format!("write [[{key}]]"));
                }
            }
        }
        tables
    }

    /// Any value of TOML but a date, as it is written.
    pub(super) fn field(&mut self, value: &Spanned<DeValue<'_>>, depth: u32) -> Option<Field> {
        if depth > DEEPEST {
            let message = "lists and tables are nested too deeply".to_owned();
            self.error("too-deep", value.span(), message, format!("{DEEPEST} levels are possible"));
            return None;
        }
        match value.get_ref() {
            DeValue::String(text) => Some(Field::Text(text.to_string())),
            DeValue::Boolean(flag) => Some(Field::Flag(*flag)),
            DeValue::Integer(integer) => {
                i64::from_str_radix(integer.as_str(), integer.radix()).ok().map(Field::Whole)
            }
            DeValue::Float(float) => {
                let number = float.as_str().parse::<f64>().ok().filter(|number| number.is_finite());
                number.map(|number| Field::Number(number + 0.0))
            }
            DeValue::Array(list) => list
                .iter()
                .map(|item| self.field(item, depth + 1))
                .collect::<Option<_>>()
                .map(Field::List),
            DeValue::Table(table) => self.fields(table, depth + 1).map(Field::Table),
            DeValue::Datetime(_) => None,
        }
        .or_else(|| {
            let message = "a study takes finite numbers, texts, lists and tables".to_owned();
            self.error("wrong-type", value.span(), message, "leave it out".to_owned());
            None
        })
    }

    /// Every field of a table as it is written.
    pub(super) fn fields(
        &mut self,
        table: &Table<'_>,
        depth: u32,
    ) -> Option<BTreeMap<String, Field>> {
        table
            .iter()
            .map(|(key, value)| Some((key.get_ref().to_string(), self.field(value, depth)?)))
            .collect()
    }
}

/// Names as a list in words.
fn listed(names: &[&str]) -> String {
    names.iter().map(|name| format!("`{name}`")).collect::<Vec<_>>().join(", ")
}

/// What stands there instead, in words.
fn found(value: &DeValue<'_>) -> &'static str {
    match value {
        DeValue::String(_) => "a text",
        DeValue::Integer(_) | DeValue::Float(_) => "a number",
        DeValue::Boolean(_) => "true or false",
        DeValue::Datetime(_) => "a date",
        DeValue::Array(_) => "a list",
        DeValue::Table(_) => "a table",
    }
}

/// What a value of a type looks like; a table is written under its heading.
fn sample(wanted: &str) -> Option<&'static str> {
    match wanted {
        "a text" => Some("\"…\""),
        "true or false" => Some("true"),
        "a list of texts" => Some("[\"…\", \"…\"]"),
        "a table" => None,
        _ => Some("1"),
    }
}
