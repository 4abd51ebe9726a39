//! Maximum flow by blocking flows in level networks (Dinic 1970), with floating capacities:
//! `O(V²E)` at worst, far less on the sparse networks of fractional points.

/// No arc, no level.
const NONE: u32 = u32::MAX;

/// A network; arcs come in pairs `2k`, `2k + 1`, each the reverse of the other.
#[derive(Debug, Clone)]
pub(crate) struct Network {
    first: Vec<u32>,
    next: Vec<u32>,
    head: Vec<u32>,
    room: Vec<f64>,
    level: Vec<u32>,
    current: Vec<u32>,
    /// Rooms up to this count as none.
    tolerance: f64,
    /// Arcs looked at so far.
    pub(crate) ticks: u64,
}

impl Network {
    /// A network without arcs.
    pub(crate) fn new(nodes: usize, tolerance: f64) -> Self {
        Self {
            first: vec![NONE; nodes],
            next: Vec::new(),
            head: Vec::new(),
            room: Vec::new(),
            level: vec![NONE; nodes],
            current: Vec::new(),
            tolerance,
            ticks: 0,
        }
    }

    /// Adds an arc from `u` to `v` and one back.
    pub(crate) fn join(&mut self, (u, v): (usize, usize), there: f64, back: f64) {
        for (tail, head, room) in [(u, v, there), (v, u, back)] {
            let arc = id(self.head.len());
            self.next.push(self.first[tail]);
            self.first[tail] = arc;
            self.head.push(id(head));
            self.room.push(room);
        }
    }

    /// Sends as much as possible from `source` to `sink`.
    pub(crate) fn send(&mut self, source: usize, sink: usize) {
        while self.levels(source, sink) {
            self.current.clone_from(&self.first);
            self.block(source, sink);
        }
    }

    /// The nodes that `source` still reaches: the smallest source side of a minimum cut.
    pub(crate) fn reached(&self, source: usize) -> Vec<bool> {
        self.search(source, |arc| arc)
    }

    /// The nodes that still reach `sink`: all others are the largest source side.
    pub(crate) fn reaching(&self, sink: usize) -> Vec<bool> {
        self.search(sink, |arc| arc ^ 1)
    }

    /// Nodes reached from `start`, where an arc can be used when `side` of it has room.
    fn search(&self, start: usize, side: fn(u32) -> u32) -> Vec<bool> {
        let mut seen = vec![false; self.first.len()];
        let mut stack = vec![start];
        seen[start] = true;
        while let Some(node) = stack.pop() {
            let mut arc = self.first[node];
            while arc != NONE {
                let head = self.head[arc as usize] as usize;
                if !seen[head] && self.room[side(arc) as usize] > self.tolerance {
                    seen[head] = true;
                    stack.push(head);
                }
                arc = self.next[arc as usize];
            }
        }
        seen
    }

    /// Numbers the nodes by distance from `source`; whether `sink` is reached.
    fn levels(&mut self, source: usize, sink: usize) -> bool {
        self.level.fill(NONE);
        self.level[source] = 0;
        let mut queue = vec![source];
        let mut at = 0;
        while at < queue.len() {
            let node = queue[at];
            at += 1;
            let mut arc = self.first[node];
            while arc != NONE {
                self.ticks += 1;
                let head = self.head[arc as usize] as usize;
                if self.level[head] == NONE && self.room[arc as usize] > self.tolerance {
                    self.level[head] = self.level[node] + 1;
                    queue.push(head);
                }
                arc = self.next[arc as usize];
            }
        }
        self.level[sink] != NONE
    }

    /// A blocking flow in the level network.
    fn block(&mut self, source: usize, sink: usize) {
        let mut path: Vec<u32> = Vec::new();
        let mut node = source;
        loop {
            if node == sink {
                node = self.augment(&mut path);
            }
            if let Some(arc) = self.admissible(node) {
                path.push(arc);
                node = self.head[arc as usize] as usize;
                continue;
            }
            self.level[node] = NONE;
            let Some(arc) = path.pop() else { return };
            node = self.head[(arc ^ 1) as usize] as usize;
        }
    }

    /// The next arc of `node` with room to the next level.
    fn admissible(&mut self, node: usize) -> Option<u32> {
        loop {
            let arc = self.current[node];
            if arc == NONE {
                return None;
            }
            self.ticks += 1;
            let level = self.level[self.head[arc as usize] as usize];
            let next = level != NONE && level == self.level[node] + 1;
            if next && self.room[arc as usize] > self.tolerance {
                return Some(arc);
            }
            self.current[node] = self.next[arc as usize];
        }
    }

    /// Fills a path and cuts it back to its first full arc; the node to go on from.
    fn augment(&mut self, path: &mut Vec<u32>) -> usize {
        let mut amount = f64::INFINITY;
        for &arc in path.iter() {
            let room = self.room[arc as usize];
            amount = if room < amount { room } else { amount };
        }
        for &arc in path.iter() {
            self.room[arc as usize] -= amount;
            self.room[(arc ^ 1) as usize] += amount;
        }
        let full = path.iter().position(|&arc| self.room[arc as usize] <= self.tolerance);
        let cut = full.unwrap_or(0);
        let node = self.head[(path[cut] ^ 1) as usize] as usize;
        path.truncate(cut);
        node
    }
}

fn id(index: usize) -> u32 {
    u32::try_from(index).unwrap_or(NONE)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The six-node example with two paths that must be rerouted: the flow is 5.
    #[test]
    fn a_flow_is_rerouted() {
        let mut network = Network::new(6, 1e-12);
        let arcs = [
            (0, 1, 3.0),
            (0, 2, 2.0),
            (1, 2, 5.0),
            (1, 3, 2.0),
            (2, 4, 3.0),
            (3, 5, 2.0),
            (4, 5, 3.0),
        ];
        for (u, v, room) in arcs {
            network.join((u, v), room, 0.0);
        }
        network.send(0, 5);
        let into: f64 = [5, 6].iter().map(|&k: &usize| network.room[2 * k + 1]).sum();
        assert!((into - 5.0).abs() < 1e-12);
        assert_eq!(network.reached(0), [true, false, false, false, false, false]);
        assert_eq!(network.reaching(5), [false, false, false, false, false, true]);
    }

    #[test]
    fn capacities_of_both_ways_count() {
        let mut network = Network::new(4, 1e-12);
        network.join((0, 1), 1.0, 1.0);
        network.join((2, 1), 0.5, 0.25);
        network.join((2, 3), 9.0, 9.0);
        network.send(0, 3);
        assert_eq!(network.reached(0), [true, true, false, false]);
        assert_eq!(network.reaching(3), [false, false, true, true]);
    }
}
