//! Facility location: sites and clients, the cost of opening and of serving, as named blocks.

use super::Class;
use super::draw::Draw;

/// Opening costs about as much as serving a few clients.
pub(super) fn sites(size: u32, class: Class, seed: u64) -> String {
    let (least, range) = match class {
        Class::Uniform => (60, 120),
        Class::Euclidean | Class::NearlySymmetric => (400, 600),
        Class::Clustered => (200, 600),
        Class::ZeroOne => (1, 3),
    };
    let mut draw = Draw::new(seed);
    let facilities = draw.points(size, class);
    let clients = draw.points(2 * size, class);
    let names = |letter: char, count: usize| -> Vec<String> {
        (1..=count).map(|i| format!("{letter}{i}")).collect()
    };
    let (sites, places) = (names('f', facilities.len()), names('c', clients.len()));
    let mut text = format!("I\n{}\n\nJ\n{}\n\nf by i\n", sites.join(" "), places.join(" "));
    for site in &sites {
        text.push_str(&format!("{site} {}\n", least + draw.below(range)));
    }
    text.push_str("\nc by i, j\n");
    for (site, &from) in sites.iter().zip(&facilities) {
        for (place, &to) in places.iter().zip(&clients) {
            text.push_str(&format!("{site} {place} {}\n", draw.cost(class, from, to)));
        }
    }
    text
}
