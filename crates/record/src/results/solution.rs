//! A solution's entry as a flat list: the variable, its indices, the value.

use std::fmt;

use serde::de::{Deserialize, Deserializer, Error, SeqAccess, Visitor};
use serde::ser::{Serialize, SerializeSeq, Serializer};

use super::SolutionEntry;

/// One element of the flat list.
#[derive(serde::Deserialize)]
#[serde(untagged)]
enum Element {
    Value(f64),
    Name(String),
}

impl Serialize for SolutionEntry {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        if !serializer.is_human_readable() {
            return (&self.variable, &self.indices, self.value).serialize(serializer);
        }
        let mut list = serializer.serialize_seq(Some(self.indices.len() + 2))?;
        list.serialize_element(&self.variable)?;
        for index in &self.indices {
            list.serialize_element(index)?;
        }
        list.serialize_element(&self.value)?;
        list.end()
    }
}

impl<'de> Deserialize<'de> for SolutionEntry {
    fn deserialize<D: Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
        if deserializer.is_human_readable() {
            return deserializer.deserialize_seq(FlatList);
        }
        let (variable, indices, value) = Deserialize::deserialize(deserializer)?;
        Ok(Self { variable, indices, value })
    }
}

struct FlatList;

impl<'de> Visitor<'de> for FlatList {
    type Value = SolutionEntry;

    fn expecting(&self, formatter: &mut fmt::Formatter<'_>) -> fmt::Result {
        formatter.write_str("a list of a variable, its indices and a value")
    }

    fn visit_seq<A: SeqAccess<'de>>(self, mut list: A) -> Result<SolutionEntry, A::Error> {
        let mut names = Vec::new();
        let value = loop {
            match list.next_element()? {
                Some(Element::Name(name)) => names.push(name),
                Some(Element::Value(value)) => break value,
                None => return Err(A::Error::custom("the value is missing")),
            }
        };
        if names.is_empty() || list.next_element::<Element>()?.is_some() {
            return Err(A::Error::custom("the variable comes first, the value last"));
        }
        Ok(SolutionEntry { variable: names.remove(0), indices: names, value })
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn json_is_flat_and_comes_back() {
        let indices = vec!["Ash".to_owned(), "Birch".to_owned()];
        let entry = SolutionEntry { variable: "x".to_owned(), indices, value: 1.0 };
        let text = serde_json::to_string(&entry).expect("finite");
        assert_eq!(text, r#"["x","Ash","Birch",1.0]"#);
        assert_eq!(serde_json::from_str::<SolutionEntry>(&text).expect("whole"), entry);
        let bytes = postcard::to_allocvec(&entry).expect("finite");
        assert_eq!(postcard::from_bytes::<SolutionEntry>(&bytes), Ok(entry));
    }

    #[test]
    fn lists_of_another_shape_are_refused() {
        for text in ["[]", "[1.0]", r#"["x"]"#, r#"["x",1.0,2.0]"#, r#"["x",1.0,"y"]"#] {
            assert!(serde_json::from_str::<SolutionEntry>(text).is_err(), "{text}");
        }
    }
}
