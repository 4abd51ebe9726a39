//! Places for the vertices of a graph that has none: joined vertices pull, all push (Fruchterman,
//! Reingold 1991). It starts from a circle in the order of a depth-first walk, so the same graph
//! has the same drawing every time.

use crate::map::Point;

/// Rounds of moves; each takes `O(vertices² + edges)`.
const ROUNDS: u32 = 150;
/// Beyond so many vertices the circle stays.
const MOST: usize = 120;

/// Places of so many vertices with these edges between them, all within the unit square.
#[must_use]
pub fn places(vertices: usize, edges: &[(u32, u32)]) -> Vec<Point> {
    let mut places = circle(vertices, edges);
    if vertices > MOST || edges.is_empty() {
        return places;
    }
    let apart = 0.8 / (vertices as f64).sqrt();
    for round in 0..ROUNDS {
        let reach = 0.1 * f64::from(ROUNDS - round) / f64::from(ROUNDS);
        let moves = moves(&places, edges, apart);
        for (place, (x, y)) in places.iter_mut().zip(moves) {
            let length = (x * x + y * y).sqrt();
            if length > 0.0 {
                let step = if length < reach { 1.0 } else { reach / length };
                *place = (inside(place.0 + x * step), inside(place.1 + y * step));
            }
        }
    }
    places
}

/// The force on each vertex.
fn moves(places: &[Point], edges: &[(u32, u32)], apart: f64) -> Vec<Point> {
    let mut moves = vec![(0.0, 0.0); places.len()];
    for (one, &(x, y)) in places.iter().enumerate() {
        for (other, &(a, b)) in places.iter().enumerate().skip(one + 1) {
            let (dx, dy) = (x - a, y - b);
            let square = dx * dx + dy * dy + 1e-9;
            let push = apart * apart / square;
            add(&mut moves[one], (dx * push, dy * push));
            add(&mut moves[other], (-dx * push, -dy * push));
        }
    }
    for &(one, other) in edges {
        let (one, other) = (one as usize, other as usize);
        let (Some(&(x, y)), Some(&(a, b))) = (places.get(one), places.get(other)) else {
            continue;
        };
        let (dx, dy) = (a - x, b - y);
        let pull = (dx * dx + dy * dy).sqrt() / apart;
        add(&mut moves[one], (dx * pull, dy * pull));
        add(&mut moves[other], (-dx * pull, -dy * pull));
    }
    moves
}

fn add(sum: &mut Point, by: Point) {
    sum.0 += by.0;
    sum.1 += by.1;
}

fn inside(value: f64) -> f64 {
    let value = if value > 0.0 { value } else { 0.0 };
    if value < 1.0 { value } else { 1.0 }
}

/// The vertices on a circle, each near those it is joined to.
fn circle(vertices: usize, edges: &[(u32, u32)]) -> Vec<Point> {
    let mut places = vec![(0.5, 0.5); vertices];
    let (mut x, mut y) = (0.5, 0.0);
    // A turn by one vertex, without a platform's sine: the half-angle form of a small turn.
    let half = std::f64::consts::PI / vertices.max(3) as f64;
    let tangent = half * (1.0 + half * half / 3.0 * (1.0 + half * half * 0.4));
    let scale = 1.0 / (1.0 + tangent * tangent);
    let (cosine, sine) = ((1.0 - tangent * tangent) * scale, 2.0 * tangent * scale);
    for vertex in walk(vertices, edges) {
        places[vertex] = (0.5 + x, 0.5 + y);
        (x, y) = (x * cosine - y * sine, x * sine + y * cosine);
    }
    places
}

/// The vertices in the order of a depth-first walk.
fn walk(vertices: usize, edges: &[(u32, u32)]) -> Vec<usize> {
    let mut near = vec![Vec::new(); vertices];
    for &(one, other) in edges {
        let (one, other) = (one as usize, other as usize);
        if one < vertices && other < vertices {
            near[one].push(other);
            near[other].push(one);
        }
    }
    let (mut order, mut seen) = (Vec::with_capacity(vertices), vec![false; vertices]);
    let mut waiting: Vec<usize> = (0..vertices).rev().collect();
    while let Some(vertex) = waiting.pop() {
        if !std::mem::replace(&mut seen[vertex], true) {
            order.push(vertex);
            waiting.extend(near[vertex].iter().rev());
        }
    }
    order
}

#[cfg(test)]
mod tests {
    use super::*;

    fn distance(places: &[Point], one: usize, other: usize) -> f64 {
        let (dx, dy) = (places[one].0 - places[other].0, places[one].1 - places[other].1);
        (dx * dx + dy * dy).sqrt()
    }

    #[test]
    fn joined_vertices_stand_nearer_than_the_ends_of_a_path() {
        let path: Vec<(u32, u32)> = (0..7).map(|vertex| (vertex, vertex + 1)).collect();
        let places = places(8, &path);
        assert!(path.iter().all(|&(a, b)| {
            distance(&places, a as usize, b as usize) < distance(&places, 0, 7)
        }));
    }

    #[test]
    fn vertices_never_leave_the_square_nor_fall_together() {
        let wheel: Vec<(u32, u32)> = (1..30).map(|vertex| (0, vertex)).collect();
        let places = places(30, &wheel);
        for (one, &(x, y)) in places.iter().enumerate() {
            assert!((0.0..=1.0).contains(&x) && (0.0..=1.0).contains(&y));
            assert!((0..one).all(|other| distance(&places, one, other) > 0.01), "{places:?}");
        }
    }

    #[test]
    fn none_one_and_edges_out_of_range_are_places_too() {
        assert!(places(0, &[]).is_empty());
        assert_eq!(places(1, &[(0, 4)]).len(), 1);
    }
}
