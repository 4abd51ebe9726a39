//! Amounts that keep to the limits of one case of several, as named blocks.

use super::Class;
use super::blocks::Blocks;
use super::draw::Draw;

/// Three amounts, `size` cases, each within 100; together they may come to what any case asks for,
/// and ten more.
pub(super) fn cases(size: u32, class: Class, seed: u64) -> Blocks {
    let mut draw = Draw::new(seed);
    let mut blocks = Blocks::new();
    let amounts = blocks.labels("D", 'd', 3);
    let cases = blocks.labels("K", 'k', size as usize);
    let mut least = vec![vec![0; amounts.len()]; cases.len()];
    for cell in least.iter_mut().flatten() {
        *cell = draw.amount(class, 0, 40);
    }
    blocks.column(("c", "i"), &amounts, |_| draw.below(21) - 14);
    blocks.column(("f", "k"), &cases, |_| draw.below(200));
    blocks.table(("l", "k, i"), (&cases, &amounts), |k, i| Some(least[k][i]));
    blocks.table(("h", "k, i"), (&cases, &amounts), |k, i| Some(least[k][i] + 5 + draw.below(30)));
    blocks.value("U", 100);
    let asked = least.iter().map(|case| case.iter().sum::<i64>()).max();
    blocks.value("Q", asked.unwrap_or(0) + 10);
    blocks
}
