//! Which file of a library a text looks like: by its keywords, or by counts that add up.

use crate::complaint::Complaints;
use crate::instance::Reader;
use crate::pace::Pace;
use crate::text::lines;

use super::scheduling::jobs;
use super::stream::{Stream, is_prose};

/// The reader whose counts add up exactly, or whose keywords are there. O(length).
pub(crate) async fn guess(text: &str, pace: &Pace) -> Option<Reader> {
    let all = lines(text);
    let mut filled = all.iter().filter(|line| !line.is_blank());
    let begins = |line: &str, words: &[&str]| {
        let mut found = line.split_whitespace();
        words.iter().all(|word| found.next().is_some_and(|w| w.eq_ignore_ascii_case(word)))
    };
    let first = filled.next()?.text;
    if begins(first, &["33D32945"])
        || all.iter().take(100).any(|line| begins(line.text, &["SECTION", "Graph"]))
    {
        return Some(Reader::Steiner);
    }
    if all
        .iter()
        .take(400)
        .any(|line| begins(line.text, &["p", "edge"]) || begins(line.text, &["p", "col"]))
    {
        return Some(Reader::Graph);
    }
    let marked = |c: char| c.is_alphabetic() || c == '#' || c == '+';
    for line in all.iter().filter(|line| !line.text.starts_with(marked)) {
        pace.spend(line.text.len()).await;
        if line.text.split_whitespace().any(|word| !is_number(word)) {
            return None;
        }
    }
    let mut unheard = Complaints::new("", pace);
    let prose = first.trim_start().starts_with(['#', '+']) || begins(first, &["instance"]);
    let stream = Stream::new(text, prose, &mut unheard).await;
    if stream.cells.iter().any(|cell| !is_number(&cell.text)) {
        return None;
    }
    let rows = all.iter().filter(|line| !is_prose(line.text, prose));
    let rows = rows.map(|line| line.text.split_whitespace().count()).filter(|&n| n > 0);
    let rows: Vec<usize> = rows.collect();
    let width = *rows.first()?;
    let even = rows.iter().all(|&other| other == width);
    if even && width == rows.len() {
        return None;
    }
    by_counts(&stream, width, even)
}

fn is_number(text: &str) -> bool {
    text.eq_ignore_ascii_case("capacity")
        || text.bytes().all(|byte| byte.is_ascii_digit() || b"+-.eE".contains(&byte))
}

/// `width` is the number of cells of the first line; `even` whether it is that of all.
fn by_counts(stream: &Stream, width: usize, even: bool) -> Option<Reader> {
    let counts = Counts { stream, total: stream.cells.len() };
    match width {
        1 => counts.one(),
        2 => counts.two(even),
        3 => counts.three(),
        _ => (width == 20 && jobs(stream).is_some()).then_some(Reader::Tardiness),
    }
}

/// Each kind by its first line and the length that it leads one to expect.
struct Counts<'c, 's, 'a> {
    stream: &'c Stream<'s, 'a>,
    total: usize,
}

impl Counts<'_, '_, '_> {
    fn whole(&self, at: usize) -> Option<usize> {
        self.stream.cells.get(at)?.text.parse().ok()
    }

    /// Whether the text has `factor` times `count` numbers and `more`.
    fn is(&self, factor: usize, count: usize, more: usize) -> bool {
        factor.checked_mul(count).and_then(|size| size.checked_add(more)) == Some(self.total)
    }

    fn one(&self) -> Option<Reader> {
        let n = self.whole(0).filter(|&n| n > 0)?;
        let numbered = || (0..n).all(|k| self.whole(1 + 3 * k) == Some(k + 1));
        if n > 1 && self.is(2 * n.min(1 << 20), n, 1) {
            return Some(Reader::Quadratic);
        }
        if n > 1 && self.is(3, n, 2) && numbered() {
            return Some(Reader::Knapsack);
        }
        if self.walks(|n, m| n.checked_mul(m)?.checked_add(n)?.checked_add(m)?.checked_add(3)) {
            return Some(Reader::MultiKnapsack);
        }
        let gap =
            |m: usize, n: usize| m.checked_mul(n)?.checked_mul(2)?.checked_add(m)?.checked_add(2);
        self.walks(gap).then_some(Reader::Assignment)
    }

    fn two(&self, even: bool) -> Option<Reader> {
        let (first, second) = (self.whole(0).filter(|&n| n > 0)?, self.whole(1));
        if first > 1 && self.is(2, first, 2) {
            return Some(Reader::Knapsack);
        }
        let second = second.filter(|&n| n > 0 && !even)?;
        if first < self.total && self.is(first + 1, second, 2 + 2 * first) {
            return Some(Reader::Sites);
        }
        let mut at = 0_usize;
        while let (Some(n), Some(m)) = (self.whole(at), self.whole(at + 1)) {
            let size = n.checked_mul(m).and_then(|size| size.checked_mul(2));
            let Some(size) = size.filter(|&size| size > 0) else { break };
            at = at.checked_add(size)?.checked_add(2)?;
        }
        (at == self.total && (first > 1 || second > 1)).then_some(Reader::JobShop)
    }

    fn three(&self) -> Option<Reader> {
        let n = self.whole(0)?;
        let vertex = |at: usize| self.whole(at).is_some_and(|v| (1..=n).contains(&v));
        let graph = |m: usize| (0..m).all(|k| vertex(3 + 3 * k) && vertex(4 + 3 * k));
        let (second, third) = (self.whole(1)?, self.whole(2));
        if second > 1
            && second.saturating_add(1) >= n
            && third.is_some_and(|p| p <= n)
            && self.is(3, second, 3)
            && graph(second)
        {
            return Some(Reader::Medians);
        }
        let routing = n > 2 && second < n && self.is(3, n, 3) && self.whole(3) == Some(0);
        routing.then_some(Reader::Routing)
    }

    /// Whether a file that begins with the number of its instances has room for exactly those,
    /// their sizes following from the two numbers that each begins with.
    fn walks(&self, size: impl Fn(usize, usize) -> Option<usize>) -> bool {
        let (Some(count), mut at) = (self.whole(0), 1_usize) else { return false };
        for _ in 0..count {
            let head = self.whole(at).zip(self.whole(at + 1));
            let size = head.and_then(|(one, other)| size(one, other));
            match size.and_then(|size| at.checked_add(size)) {
                Some(next) if next <= self.total => at = next,
                _ => return false,
            }
        }
        count > 0 && at == self.total
    }
}
