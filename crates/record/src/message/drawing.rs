//! Ways to draw a solution.

use serde::{Deserialize, Serialize};

/// A way to draw a solution.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Drawing {
    /// The variables that it shows, with their indices' kind: "x on the map".
    pub name: String,
    /// What is drawn.
    pub picture: Picture,
}

/// What is drawn of a solution.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub enum Picture {
    /// Arcs and values at stops.
    Map {
        /// The arcs with their value.
        arcs: Vec<Arc>,
        /// Values at stops, by place in [`InstanceReport::stops`](super::InstanceReport::stops).
        at: Vec<(u32, f64)>,
    },
    /// Values over time, one series a variable.
    Bars {
        /// The periods.
        periods: Vec<i64>,
        /// A variable and its value in each period; `None` where it has none.
        series: Vec<(String, Vec<Option<f64>>)>,
    },
    /// Values by pair.
    Grid {
        /// The labels of the rows.
        rows: Vec<String>,
        /// The labels of the columns.
        columns: Vec<String>,
        /// Row, column and value, where it is not 0.
        cells: Vec<(u32, u32, f64)>,
    },
    /// Lengths on one scale, strip below strip: jobs on machines over time (Gantt 1919), pieces
    /// in bins.
    Strips {
        /// The strips from the top.
        strips: Vec<Strip>,
        /// Whether a part stands at its own start, over time; else parts follow one another.
        time: bool,
    },
    /// Vertices without places of their own, what joins them, and values along arcs.
    Graph {
        /// The vertices.
        vertices: Vec<Vertex>,
        /// Pairs that a row joins, by place in the vertices.
        edges: Vec<(u32, u32)>,
        /// Values along pairs; [`Arc::from`] and [`Arc::to`] are places in the vertices.
        arcs: Vec<Arc>,
    },
}

/// One strip of lengths.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Strip {
    /// What it stands for: a machine, a bin.
    pub name: String,
    /// Where its room ends.
    pub limit: Option<f64>,
    /// What lies in it.
    pub parts: Vec<Part>,
}

/// A length in a strip.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Part {
    /// What it stands for: a job, a piece.
    pub name: String,
    /// Where it begins.
    pub from: f64,
    /// Where it ends.
    pub to: f64,
    /// The value of its column.
    pub value: f64,
    /// Its column.
    pub column: u32,
}

/// A vertex of a graph.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Vertex {
    /// Its label.
    pub label: String,
    /// The class with the greatest value; empty where a vertex has one value.
    pub class: String,
    /// The value at the vertex; none where values stand along arcs only.
    pub value: Option<f64>,
}

/// A cycle of pairs, such as one of negative length.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Cycle {
    /// Its stops in order; the first is not repeated.
    pub stops: Vec<String>,
    /// The sum along it.
    pub total: f64,
}

/// An arc to draw, by stops or by vertices.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Arc {
    /// Where from, by place in [`InstanceReport::stops`](super::InstanceReport::stops) or among the
    /// vertices.
    pub from: u32,
    /// Where to.
    pub to: u32,
    /// The value.
    pub value: f64,
    /// Its column; none for an arc that stands for a row.
    pub column: Option<u32>,
}
