//! Round trips: a matrix with a headline and labels.

use super::Class;
use super::draw::Draw;

/// Costs drawn for each direction.
pub(super) fn directed(size: u32, class: Class, seed: u64) -> String {
    let mut draw = Draw::new(seed);
    let points = draw.points(size, class);
    matrix(size as usize, |i, j| draw.cost(class, points[i], points[j]))
}

/// Costs that are the same both ways; of nearly symmetric ones that of one way.
pub(super) fn undirected(size: u32, class: Class, seed: u64) -> String {
    let mut draw = Draw::new(seed);
    let points = draw.points(size, class);
    let size = size as usize;
    let mut costs = vec![0; size * size];
    for i in 0..size {
        for j in 0..i {
            let cost = draw.cost(class, points[i], points[j]);
            costs[i * size + j] = cost;
            costs[j * size + i] = cost;
        }
    }
    matrix(size, |i, j| costs[i * size + j])
}

fn matrix(size: usize, mut cost: impl FnMut(usize, usize) -> i64) -> String {
    let mut text = String::from("stop");
    for j in 1..=size {
        text.push_str(&format!("\ts{j}"));
    }
    for i in 0..size {
        text.push_str(&format!("\ns{}", i + 1));
        for j in 0..size {
            let cell = if i == j { "-".to_owned() } else { cost(i, j).to_string() };
            text.push_str(&format!("\t{cell}"));
        }
    }
    text.push('\n');
    text
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn costs_both_ways_are_the_same_where_they_should_be() {
        for class in Class::ALL {
            let text = undirected(5, class, 3);
            let rows: Vec<Vec<&str>> =
                text.lines().skip(1).map(|line| line.split('\t').skip(1).collect()).collect();
            assert_eq!((rows.len(), rows[0].len()), (5, 5));
            for (i, row) in rows.iter().enumerate() {
                for (j, &cell) in row.iter().enumerate() {
                    assert_eq!(cell, rows[j][i]);
                    assert_eq!(cell == "-", i == j);
                }
            }
        }
    }
}
