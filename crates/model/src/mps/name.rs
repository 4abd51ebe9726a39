//! Names: indexed ones taken apart, ours made safe for other readers and unique.

use std::collections::BTreeMap;

/// Takes `x[Ash,Birch]` or `x(Ash,Birch)` apart into `x` and its labels. `None` for any
/// other name.
pub(super) fn split(name: &str) -> Option<(&str, Vec<&str>)> {
    let open = name.find(['[', '('])?;
    let (base, rest) = name.split_at(open);
    let close = if rest.starts_with('[') { ']' } else { ')' };
    let inside = rest[1..].strip_suffix(close)?;
    let labels: Vec<&str> = inside.split(',').collect();
    let plain = |text: &str| !text.is_empty() && !text.contains(['[', ']', '(', ')']);
    (plain(base) && labels.iter().all(|label| plain(label))).then_some((base, labels))
}

/// Names brought together by what stands before their index: one group a variable or family.
pub(super) struct Group<'a> {
    pub(super) base: &'a str,
    /// Places in the list of names, with their labels.
    pub(super) members: Vec<(usize, Vec<&'a str>)>,
}

/// Groups in the order of their first names. `O(n log n)`.
pub(super) fn groups<'a>(names: impl Iterator<Item = &'a str>) -> Vec<Group<'a>> {
    let mut out: Vec<Group<'a>> = Vec::new();
    let mut places: BTreeMap<&'a str, usize> = BTreeMap::new();
    for (at, name) in names.enumerate() {
        let (base, labels) = split(name).unwrap_or((name, Vec::new()));
        let place = *places.entry(base).or_insert(out.len());
        if place == out.len() {
            out.push(Group { base, members: Vec::new() });
        }
        out[place].members.push((at, labels));
    }
    out
}

/// Makes names without blanks, quotes and control characters, none twice.
#[derive(Debug, Default)]
pub(super) struct Names {
    /// The names given, each with the last number that was added to it.
    taken: BTreeMap<String, usize>,
    /// How many members without labels each base has had.
    bare: BTreeMap<String, usize>,
    /// How many names are not as they were wanted.
    pub(super) changed: usize,
}

impl Names {
    /// A base of names: of a variable or a family; `indexed` if it has more than one member, or
    /// one with labels.
    pub(super) fn base(&mut self, wanted: &str, indexed: bool) -> String {
        let mut name = safe(wanted, "'\"");
        if name.starts_with(['*', '$']) {
            name.replace_range(..1, "_");
        }
        if indexed || split(&name).is_some() {
            name = safe(&name, "[]()");
        }
        let name = self.unique(name);
        self.changed += usize::from(name != wanted);
        name
    }

    /// The name of a member of a base. Bases are all made before members. Further members
    /// without labels are numbered from 2.
    pub(super) fn member(&mut self, base: &str, labels: &[&str]) -> String {
        if labels.is_empty() {
            let count = self.bare.entry(base.to_owned()).or_insert(0);
            *count += 1;
            if *count == 1 {
                return base.to_owned();
            }
            let wanted = format!("{base}[{count}");
            self.changed += 1;
            return format!("{}]", self.unique(wanted));
        }
        let safe: Vec<String> = labels.iter().map(|label| safe(label, "'\",[]()")).collect();
        let wanted = format!("{base}[{}", safe.join(","));
        let name = self.unique(wanted.clone());
        let renamed = name != wanted || safe.iter().zip(labels).any(|(a, b)| a != b);
        self.changed += usize::from(renamed);
        format!("{name}]")
    }

    /// The name, or the name with `~2`, `~3`, … where it is taken.
    fn unique(&mut self, wanted: String) -> String {
        let mut times = self.taken.get(&wanted).copied().unwrap_or(0);
        let mut name = wanted.clone();
        while self.taken.contains_key(&name) {
            times += 1;
            name = format!("{wanted}~{times}");
        }
        if name != wanted {
            self.taken.insert(wanted, times);
        }
        self.taken.insert(name.clone(), 1);
        name
    }
}

/// The text with `_` for blanks, control characters and `unwanted` ones; `_` if it is empty.
pub(super) fn safe(text: &str, unwanted: &str) -> String {
    let bad = |c: char| c.is_whitespace() || c.is_control() || unwanted.contains(c);
    let out: String = text.chars().map(|c| if bad(c) { '_' } else { c }).collect();
    if out.is_empty() { "_".to_owned() } else { out }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn indexed_names_come_apart() {
        assert_eq!(split("x[Ash,Birch]"), Some(("x", vec!["Ash", "Birch"])));
        assert_eq!(split("flow(1)"), Some(("flow", vec!["1"])));
        for name in ["x", "x[]", "[1]", "x[1", "x[1)", "x[1,]", "x(1)(2)", "x[a]b", "x[[1]]"] {
            assert_eq!(split(name), None, "{name}");
        }
    }

    #[test]
    fn groups_bring_names_together() {
        let groups = groups(["x[1]", "y", "x[2]"].into_iter());
        let bases: Vec<_> = groups.iter().map(|g| (g.base, g.members.len())).collect();
        assert_eq!(bases, [("x", 2), ("y", 1)]);
    }

    #[test]
    fn names_are_safe_and_unique() {
        let mut names = Names::default();
        assert_eq!(names.base("row 3", false), "row_3");
        assert_eq!(names.base("row_3", false), "row_3~2");
        assert_eq!(names.base("row_3", false), "row_3~3");
        assert_eq!(names.base("row_3~2", false), "row_3~2~2");
        assert_eq!(names.base("a*b~$", false), "a*b~$");
        assert_eq!(names.base("$x", false), "_x");
        assert_eq!(names.base("", false), "_");
        assert_eq!(names.base("x[1]", false), "x_1_");
        assert_eq!(names.member("x", &["New York", "a,b"]), "x[New_York,a_b]");
        assert_eq!(names.member("x", &["New_York", "a_b"]), "x[New_York,a_b~2]");
        assert_eq!(names.changed, 9);
    }
}
