//! The strength order of all rivals as a Hasse diagram: a line leads from a rival down to one that is
//! never stronger, left out where it follows from lines that are known as well. Levels differ by the
//! line and by the word beside it.

use record::study::{Order, OrderLevel, Relation, Report};

use super::figure::Figure;
use super::{Section, and};

/// The distance of two rows, and of two places in a row, in pixels.
const STEP: usize = 88;
const ACROSS: usize = 150;

/// Rivals of equal strength, and the lines between them.
struct Diagram {
    classes: Vec<Vec<String>>,
    /// How far it is known that those of a class are equal; nothing where all stand alone.
    equal: Option<OrderLevel>,
    /// From the stronger to the weaker, by place.
    lines: Vec<(usize, usize, OrderLevel)>,
}

/// The diagram of the orders among these reports; `None` where fewer than two rivals are ordered.
#[must_use]
pub fn overview(reports: &[&Report]) -> Option<Section> {
    let orders: Vec<&Order> = reports
        .iter()
        .filter_map(|report| match report {
            Report::Order(order) => Some(order.as_ref()),
            _ => None,
        })
        .collect();
    let diagram = Diagram::of(&orders)?;
    Some(Section {
        heading: "The order of the relaxations".to_owned(),
        verdict: vec![diagram.words()],
        figure: Some(diagram.figure()),
        ..Section::default()
    })
}

fn word(level: OrderLevel) -> &'static str {
    match level {
        OrderLevel::Theorem => "theorem",
        OrderLevel::Certified => "certified",
        OrderLevel::Observed => "observed",
        OrderLevel::Undecided => "undecided",
    }
}

/// How the line of a level is drawn.
fn dashes(level: OrderLevel) -> &'static str {
    match level {
        OrderLevel::Theorem => "none",
        OrderLevel::Certified => "9 4",
        OrderLevel::Observed | OrderLevel::Undecided => "2 4",
    }
}

fn rank(level: OrderLevel) -> u8 {
    match level {
        OrderLevel::Theorem => 0,
        OrderLevel::Certified => 1,
        OrderLevel::Observed => 2,
        OrderLevel::Undecided => 3,
    }
}

impl Diagram {
    fn of(orders: &[&Order]) -> Option<Self> {
        let mut classes: Vec<Vec<String>> = Vec::new();
        let place = |classes: &[Vec<String>], letter: &String| {
            classes.iter().position(|class| class.contains(letter))
        };
        for letter in orders.iter().flat_map(|order| &order.rivals) {
            if place(&classes, letter).is_none() {
                classes.push(vec![letter.clone()]);
            }
        }
        for order in orders.iter().filter(|order| order.relation == Relation::Equal) {
            let [a, b] = [place(&classes, &order.rivals[0])?, place(&classes, &order.rivals[1])?];
            if a != b {
                let joined = classes.remove(a.max(b));
                classes[a.min(b)].extend(joined);
            }
        }
        let mut lines: Vec<(usize, usize, OrderLevel)> = Vec::new();
        for order in orders {
            let [a, b] = [place(&classes, &order.rivals[0])?, place(&classes, &order.rivals[1])?];
            let (from, to) = match order.relation {
                Relation::NeverWeaker => (a, b),
                Relation::NeverStronger => (b, a),
                _ => continue,
            };
            let known = lines.iter_mut().find(|line| (line.0, line.1) == (from, to));
            match known {
                Some(line) if rank(order.level) < rank(line.2) => line.2 = order.level,
                Some(_) => {}
                None => lines.push((from, to, order.level)),
            }
        }
        let whole = lines.clone();
        lines.retain(|line| !follows(&whole, *line));
        let equal = orders.iter().filter(|order| order.relation == Relation::Equal);
        let equal = equal.map(|order| order.level).max_by_key(|level| rank(*level));
        (orders.len() > 1 || !lines.is_empty() || classes.len() == 1).then_some(Self {
            classes,
            equal,
            lines,
        })
    }

    fn name(&self, class: usize) -> String {
        self.classes[class].join(" = ")
    }

    /// The lines as sentences, for who does not see them.
    fn words(&self) -> String {
        let line = |&(from, to, level): &(usize, usize, OrderLevel)| {
            format!("{} above {} ({})", self.name(from), self.name(to), word(level))
        };
        let lines: Vec<String> = self.lines.iter().map(line).collect();
        match lines.as_slice() {
            [] if self.classes.len() == 1 => match self.equal {
                Some(level) => format!("{} ({}).", self.name(0), word(level)),
                None => format!("{}.", self.name(0)),
            },
            [] => "No line can be drawn: none is known to be above another.".to_owned(),
            lines => format!("{}.", and(lines)),
        }
    }

    /// How many lines lead down from each class at most.
    fn heights(&self) -> Vec<usize> {
        let mut heights = vec![0; self.classes.len()];
        // Longest paths; a circle, which bounds of one instance cannot make, ends with the rounds.
        for _ in 0..self.classes.len() {
            for &(from, to, _) in &self.lines {
                heights[from] = heights[from].max(heights[to] + 1);
            }
        }
        heights
    }

    fn figure(&self) -> Figure {
        let heights = self.heights();
        let top = heights.iter().copied().max().unwrap_or(0);
        let row = |height: usize| heights.iter().filter(|own| **own == height).count();
        let widest = (0..=top).map(row).max().unwrap_or(1);
        let (width, height) = (widest * ACROSS, top * STEP + 56);
        let at = |class: usize| {
            let before = heights[..class].iter().filter(|own| **own == heights[class]).count();
            let own = row(heights[class]);
            let x = (width - own * ACROSS) / 2 + before * ACROSS + ACROSS / 2;
            (x, (top - heights[class]) * STEP + 28)
        };
        let line = |&(from, to, level): &(usize, usize, OrderLevel)| {
            let ((x1, y1), (x2, y2)) = (at(from), at(to));
            ([x1, y1 + 16, x2, y2 - 16], dashes(level))
        };
        let word = |&(from, to, level): &(usize, usize, OrderLevel)| {
            let ((x1, y1), (x2, y2)) = (at(from), at(to));
            (usize::midpoint(x1, x2) + 8, usize::midpoint(y1, y2) + 4, word(level).to_owned())
        };
        let name = |class: usize| (at(class).0, at(class).1 + 5, self.name(class));
        Figure {
            label: self.words(),
            size: (width, height),
            lines: self.lines.iter().map(line).collect(),
            words: self.lines.iter().map(word).collect(),
            names: (0..self.classes.len()).map(name).collect(),
            ..Figure::default()
        }
    }
}

/// Whether a line follows from two others that are known at least as well.
fn follows(
    lines: &[(usize, usize, OrderLevel)],
    (from, to, level): (usize, usize, OrderLevel),
) -> bool {
    let as_well = |a: usize, b: usize| {
        let known = |line: &&(usize, usize, OrderLevel)| (line.0, line.1) == (a, b);
        lines.iter().find(known).is_some_and(|line| rank(line.2) <= rank(level))
    };
    let places = lines.iter().map(|line| line.1);
    places.into_iter().any(|via| via != from && via != to && as_well(from, via) && as_well(via, to))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn order(rivals: [&str; 2], relation: Relation, level: OrderLevel) -> Report {
        let rivals = rivals.map(str::to_owned);
        Report::Order(Box::new(Order { rivals, relation, level, ..Order::default() }))
    }

    #[test]
    fn a_line_that_follows_is_left_out_unless_it_is_known_better() {
        use OrderLevel::{Certified, Observed, Theorem};
        let all = [
            order(["A", "B"], Relation::NeverStronger, Certified),
            order(["A", "C"], Relation::NeverStronger, Observed),
            order(["B", "C"], Relation::NeverStronger, Theorem),
            order(["A", "D"], Relation::Equal, Observed),
        ];
        let said = |all: &[Report]| {
            overview(&all.iter().collect::<Vec<_>>())
                .map_or_else(String::new, |s| s.verdict[0].clone())
        };
        assert_eq!(said(&all), "B above A = D (certified) and C above B (theorem).");
        // Seen only, B above A does not carry a theorem.
        let all = [
            order(["A", "B"], Relation::NeverStronger, Observed),
            order(["A", "C"], Relation::NeverStronger, Theorem),
            order(["B", "C"], Relation::NeverStronger, Observed),
        ];
        let section = overview(&all.iter().collect::<Vec<_>>()).unwrap_or_default();
        assert!(section.verdict[0].contains("C above A (theorem)"), "{section:?}");
        let figure = section.figure.unwrap_or_default().svg();
        assert_eq!(figure.matches("<line").count(), 3);
        assert!(figure.contains(">theorem<") && figure.contains("stroke-dasharray=\"2 4\""));
        assert!(overview(&[]).is_none());
    }
}
