//! Graphs: DIMACS files for colouring, and SteinLib.

use std::collections::BTreeSet;

use crate::MAX_STOPS;
use crate::cells::{Cell, Separator, split};
use crate::complaint::{Complaints, excerpt, plural};
use crate::instance::{Datum, Instance, Points, Reader};
use crate::number::{Number, parse};
use crate::square::counted;
use crate::text::{Line, lines};

/// A graph as it is read.
struct Graph<'s, 'a> {
    sink: &'s mut Complaints<'a>,
    n: usize,
    edges: BTreeSet<(usize, usize)>,
    rows: Vec<Vec<String>>,
    costs: Vec<Number>,
    again: usize,
}

impl Graph<'_, '_> {
    fn error(&mut self, span: std::ops::Range<usize>, message: String, mend: &str) {
        if self.sink.is_full() {
            self.sink.count_error();
        } else {
            self.sink.error(span, "not-understood", message, mend);
        }
    }

    fn vertex(&mut self, cell: Option<&Cell>, line: &Line) -> Option<usize> {
        let value = cell.and_then(|cell| cell.text.parse::<usize>().ok());
        let value = value.filter(|value| (1..=self.n).contains(value));
        if value.is_none() {
            let text = cell.map_or_else(|| excerpt(line.text.trim()), |cell| excerpt(&cell.text));
            let span = cell.map_or(line.span(), |cell| cell.span.clone());
            let message = format!("`{text}` is no vertex of the {}", self.n);
            self.error(
                span,
                message,
                "Write vertices as whole numbers from 1, and their number above.",
            );
        }
        value
    }

    /// A line of an edge; one that was there before, also the other way round, is counted.
    fn edge(&mut self, cells: &[Cell], line: &Line, both: bool) {
        let (Some(i), Some(j)) = (self.vertex(cells.get(1), line), self.vertex(cells.get(2), line))
        else {
            return;
        };
        if i == j {
            return self.error(
                line.span(),
                format!("{i} is joined to itself"),
                "Leave the line out.",
            );
        }
        if !self.edges.insert(if i < j || !both { (i, j) } else { (j, i) }) {
            self.again += 1;
            return;
        }
        self.rows.push(vec![i.to_string(), j.to_string()]);
    }

    fn count(&mut self, cell: Option<&Cell>, line: &Line) {
        let n = cell.and_then(|cell| cell.text.parse::<usize>().ok());
        match n.filter(|n| (1..=MAX_STOPS).contains(n)) {
            Some(n) => self.n = n,
            None => {
                let message = "the number of vertices is missing or too large".to_owned();
                let mend = format!("Give a whole number from 1 to {MAX_STOPS}.");
                self.error(line.span(), message, &mend);
            }
        }
    }
}

fn begin<'s, 'a>(sink: &'s mut Complaints<'a>) -> Graph<'s, 'a> {
    Graph { sink, n: 0, edges: BTreeSet::new(), rows: Vec::new(), costs: Vec::new(), again: 0 }
}

/// Reads `p edge n m` and lines `e i j`; `c` begins a remark. O(length · log).
pub(super) async fn dimacs<'a>(
    text: &'a str,
    sink: &mut Complaints<'a>,
) -> Option<(Instance, Vec<String>)> {
    let mut graph = begin(sink);
    let mut title = String::new();
    let mut said = None;
    for line in lines(text) {
        let cells = split(&line, Separator::Space);
        graph.sink.spend(2 * cells.len()).await;
        match cells.first().map_or("", |cell| &*cell.text) {
            "" | "n" | "x" | "d" | "v" => {}
            "c" => {
                if let (Some("FILE:"), Some(name)) =
                    (cells.get(1).map(|cell| &*cell.text), cells.get(2))
                {
                    title = excerpt(name.text.trim_end_matches(".col"));
                }
            }
            "p" => {
                graph.count(cells.get(2), &line);
                said = cells.get(3).and_then(|cell| cell.text.parse::<usize>().ok());
            }
            "e" => graph.edge(&cells, &line, true),
            other => {
                let message = format!("a line cannot begin with `{}`", excerpt(other));
                graph.error(line.span(), message, "Lines begin with c, p, n or e.");
            }
        }
    }
    if graph.n == 0 && graph.sink.errors() == 0 {
        let mend = "Begin with `p edge`, the number of vertices and of edges.";
        graph.error(0..0, "there is no line `p edge`".to_owned(), mend);
    }
    if graph.sink.errors() > 0 {
        return None;
    }
    Some(colouring(graph, title, said))
}

/// The instance of a graph to be coloured, of which a line says how many edges it has.
fn colouring(graph: Graph<'_, '_>, title: String, said: Option<usize>) -> (Instance, Vec<String>) {
    let (n, edges) = (graph.n, graph.rows.len());
    let mut facts =
        vec![format!("{}, {}.", plural(n, "vertex", "vertices"), plural(edges, "edge", "edges"))];
    if graph.again > 0 {
        facts.push(format!(
            "{} again or the other way round: each counts once.",
            plural(graph.again, "edge is listed", "edges are listed")
        ));
    }
    if let Some(said) = said.filter(|&said| said != edges && said != edges + graph.again) {
        facts.push(format!("The line `p` announces {said} edges."));
    }
    let mut instance = Instance::new(Reader::Graph);
    instance.title = title;
    let colours = first_fit(n, &graph.edges);
    facts.push(format!(
        "h = {colours}: so many colours takes the first that is free, vertex by vertex; w = 1 at every vertex."
    ));
    let ones = counted(n).into_iter().map(|vertex| (vec![vertex], Number::ONE)).collect();
    instance.set("w", Datum::Table { arity: 1, cells: ones });
    instance.set("h", Datum::Number(colours.into()));
    instance.set("V", Datum::Labels(counted(n)));
    instance.set("E", Datum::Tuples { arity: 2, rows: graph.rows });
    (instance, facts)
}

/// How many colours are used where each vertex, those of most edges first, takes the first that
/// no neighbour has. O(n · n).
fn first_fit(n: usize, edges: &BTreeSet<(usize, usize)>) -> usize {
    let mut beside = vec![Vec::new(); n + 1];
    for &(i, j) in edges {
        beside[i].push(j);
        beside[j].push(i);
    }
    let mut order: Vec<usize> = (1..=n).collect();
    order.sort_by_key(|&vertex| std::cmp::Reverse(beside[vertex].len()));
    let mut colour = vec![0; n + 1];
    for vertex in order {
        let taken: BTreeSet<usize> = beside[vertex].iter().map(|&other| colour[other]).collect();
        colour[vertex] = (1..=n).find(|one| !taken.contains(one)).unwrap_or(n);
    }
    colour.into_iter().max().unwrap_or(0)
}

/// What a SteinLib file holds beside its graph.
#[derive(Default)]
struct Steiner {
    title: String,
    terminals: Vec<String>,
    root: Option<String>,
    directed: bool,
    places: Vec<(f64, f64)>,
    counts: [Option<usize>; 2],
}

/// Reads sections Comment, Graph, Terminals and Coordinates; others are passed over.
pub(super) async fn steiner<'a>(
    text: &'a str,
    sink: &mut Complaints<'a>,
) -> Option<(Instance, Vec<String>)> {
    let mut graph = begin(sink);
    let mut file = Steiner::default();
    let mut section = String::new();
    for line in lines(text) {
        let cells = split(&line, Separator::Space);
        graph.sink.spend(2 * cells.len()).await;
        let word = |at: usize| cells.get(at).map_or(String::new(), |cell| cell.text.to_lowercase());
        match (section.as_str(), word(0).as_str()) {
            (_, "" | "33d32945") => {}
            (_, "section") => section = word(1),
            (_, "end") => section.clear(),
            (_, "eof") => break,
            ("comment", "name") => {
                file.title = cells.get(1).map_or_else(String::new, |cell| excerpt(&cell.text));
            }
            ("graph", _) => file.graph(&mut graph, &cells, &line),
            ("terminals", _) => file.terminal(&mut graph, &cells, &line),
            ("coordinates", "dd") => file.places.extend(place(&cells)),
            ("", other) => {
                let message = format!("`{}` stands in no section", excerpt(other));
                graph.error(
                    line.span(),
                    message,
                    "Write `SECTION Graph` before it and `END` behind.",
                );
            }
            _ => {}
        }
    }
    file.finish(graph)
}

fn place(cells: &[Cell]) -> Option<(f64, f64)> {
    let number = |at: usize| Some(parse(&cells.get(at)?.text, false).ok()?.to_f64().value() + 0.0);
    Some((number(2)?, number(3)?))
}

impl Steiner {
    fn graph(&mut self, graph: &mut Graph, cells: &[Cell], line: &Line) {
        let said = cells.get(1).and_then(|cell| cell.text.parse::<usize>().ok());
        match cells[0].text.to_lowercase().as_str() {
            "nodes" => graph.count(cells.get(1), line),
            "edges" | "arcs" => self.counts[0] = said,
            kind @ ("e" | "a") => {
                self.directed |= kind == "a";
                let before = graph.rows.len();
                graph.edge(cells, line, kind == "e");
                if graph.rows.len() == before {
                    return;
                }
                let cost = cells.get(3).map(|cell| (cell, parse(&cell.text, false)));
                match cost {
                    None => graph.costs.push(Number::ONE),
                    Some((_, Ok(cost))) => graph.costs.push(cost),
                    Some((cell, Err(why))) => {
                        let message = format!("`{}` is not a number", excerpt(&cell.text));
                        graph.error(cell.span.clone(), message, why.mend());
                    }
                }
            }
            "obstacles" => {}
            other => {
                let message = format!("a line of the graph cannot begin with `{}`", excerpt(other));
                graph.error(line.span(), message, "Lines begin with Nodes, Edges, E or A.");
            }
        }
    }

    fn terminal(&mut self, graph: &mut Graph, cells: &[Cell], line: &Line) {
        let kind = cells[0].text.to_lowercase();
        if kind == "terminals" {
            self.counts[1] = cells.get(1).and_then(|cell| cell.text.parse().ok());
        } else if let Some(vertex) = graph.vertex(cells.get(1), line) {
            let label = vertex.to_string();
            if kind.starts_with("root") {
                self.root = Some(label);
            } else if !self.terminals.contains(&label) {
                self.terminals.push(label);
            }
        }
    }

    fn finish(self, mut graph: Graph) -> Option<(Instance, Vec<String>)> {
        self.complain(&mut graph);
        if graph.sink.errors() > 0 {
            return None;
        }
        let ties = graph.rows.len();
        let ties =
            if self.directed { plural(ties, "arc", "arcs") } else { plural(ties, "edge", "edges") };
        let mut facts = vec![format!(
            "{}, {ties}, {}.",
            plural(graph.n, "vertex", "vertices"),
            plural(self.terminals.len(), "terminal", "terminals")
        )];
        if graph.again > 0 {
            let again = plural(graph.again, "edge is listed", "edges are listed");
            facts.push(format!("{again} again: the first counts."));
        }
        let instance = self.instance(graph, &mut facts);
        Some((instance, facts))
    }

    fn complain(&self, graph: &mut Graph) {
        if graph.sink.errors() == 0 && self.terminals.is_empty() {
            let mend = "Add a section Terminals with a line `T` for each.";
            graph.error(0..0, "there is no terminal".to_owned(), mend);
        }
        let found = [graph.rows.len() + graph.again, self.terminals.len()];
        for (said, found) in self.counts.into_iter().zip(found) {
            if let Some(said) = said.filter(|&said| said != found && graph.sink.errors() == 0) {
                let message = format!("{said} lines are announced, {found} are there");
                graph.error(0..0, message, "Paste the whole file, or mend the count.");
            }
        }
    }

    fn instance(self, graph: Graph, facts: &mut Vec<String>) -> Instance {
        let mut instance = Instance::new(Reader::Steiner);
        instance.title = self.title;
        instance.set("V", Datum::Labels(counted(graph.n)));
        let (mut arcs, mut costs) = (graph.rows.clone(), graph.costs);
        if !self.directed {
            instance.set("E", Datum::Tuples { arity: 2, rows: graph.rows });
            let back = |edge: &Vec<String>| vec![edge[1].clone(), edge[0].clone()];
            arcs.extend(arcs.iter().map(back).collect::<Vec<_>>());
            costs.extend_from_within(..);
            facts.push("A holds both directions of each edge, at the same c.".to_owned());
        }
        let cells = arcs.iter().cloned().zip(costs).collect();
        instance.set("A", Datum::Tuples { arity: 2, rows: arcs });
        instance.set("c", Datum::Table { arity: 2, cells });
        match (self.root, self.terminals.first()) {
            (Some(root), _) => instance.set("r", Datum::Element(root)),
            (None, Some(first)) => {
                facts.push(format!("r is {first}, the first terminal."));
                instance.assume("r", Datum::Element(first.clone()));
            }
            _ => {}
        }
        instance.set("R", Datum::Labels(self.terminals));
        if self.places.len() == graph.n {
            instance.points = Some(Points { places: self.places, geographic: false });
        }
        instance
    }
}
