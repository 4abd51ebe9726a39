//! Scenarios that the browser keeps by name: how one is stored and listed.

/// What the names of their places in the browser's store begin with; the rest is the id.
pub(crate) const PLACE: &str = "hullward.kept.1.";

/// A scenario kept by name.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) struct Kept {
    /// Its name.
    pub(crate) name: String,
    /// When it was kept, in milliseconds since 1970.
    pub(crate) time: u64,
    /// The scenario file.
    pub(crate) text: String,
}

impl Kept {
    /// As it is stored: time and name in a line of their own, then the text.
    pub(crate) fn print(&self) -> String {
        let name = self.name.replace(['\r', '\n'], " ");
        format!("{} {}\n{}", self.time, name.trim(), self.text)
    }

    /// From what is stored; `None` when it is not what [`Kept::print`] gives.
    pub(crate) fn parse(stored: &str) -> Option<Self> {
        let (head, text) = stored.split_once('\n')?;
        let (time, name) = head.split_once(' ')?;
        Some(Self { name: name.to_owned(), time: time.parse().ok()?, text: text.to_owned() })
    }
}

/// A line of the list.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) struct Entry {
    /// Its id.
    pub(crate) id: String,
    /// Its name.
    pub(crate) name: String,
    /// When it was kept, in milliseconds since 1970.
    pub(crate) time: u64,
    /// How long it is, in bytes.
    pub(crate) bytes: usize,
}

/// The list, the one kept last first.
pub(crate) fn listed(mut entries: Vec<Entry>) -> Vec<Entry> {
    entries.sort_by(|a, b| b.time.cmp(&a.time).then_with(|| a.id.cmp(&b.id)));
    entries
}

/// The id under which a name is kept: the one it has, else one that is not taken.
pub(crate) fn id_for(name: &str, time: u64, entries: &[Entry]) -> String {
    if let Some(entry) = entries.iter().find(|entry| entry.name == name.trim()) {
        return entry.id.clone();
    }
    let taken = |id: &String| entries.iter().any(|entry| entry.id == *id);
    let mut id = time;
    while taken(&id.to_string()) {
        id += 1;
    }
    id.to_string()
}

/// A size in words.
pub(crate) fn size_words(bytes: usize) -> String {
    format!("{} KB", bytes.div_ceil(1024))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn entry(id: &str, name: &str, time: u64) -> Entry {
        Entry { id: id.to_owned(), name: name.to_owned(), time, bytes: 10 }
    }

    #[test]
    fn what_is_kept_reads_back() {
        let kept =
            Kept { name: "Round 7, North".to_owned(), time: 12, text: "hullward = 1\n".to_owned() };
        assert_eq!(Kept::parse(&kept.print()), Some(kept.clone()));
        let lines = Kept { name: " two\nlines ".to_owned(), ..kept };
        assert_eq!(Kept::parse(&lines.print()).unwrap().name, "two lines");
        assert_eq!(Kept::parse("hullward = 1\n"), None);
        assert_eq!(Kept::parse(""), None);
    }

    #[test]
    fn a_name_keeps_its_place_and_a_new_one_takes_no_others() {
        let entries = [entry("5", "North", 5), entry("9", "South", 9)];
        assert_eq!(id_for("North", 9, &entries), "5");
        assert_eq!(id_for("East", 9, &entries), "10");
        let order: Vec<String> =
            listed(entries.to_vec()).into_iter().map(|entry| entry.name).collect();
        assert_eq!(order, ["South", "North"]);
        assert_eq!((size_words(1), size_words(2049)), ("1 KB".to_owned(), "3 KB".to_owned()));
    }
}
