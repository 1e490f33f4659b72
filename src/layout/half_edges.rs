//! Half-edges: who comes next round a face, who comes next round a vertex.
//!
//! Half-edge 2e runs along edge e from `a` to `b`, half-edge 2e + 1 back; each has its face on its left hand.

use std::cmp::Ordering;

use crate::layout::edges::Edge;
use crate::layout::grid::Cell;
use crate::layout::grid::cross;
use crate::layout::grid::step;

/// Faces and fans of a set of edges that meet only at their ends.
#[derive(Clone, Debug)]
pub(super) struct HalfEdges {
    /// Positions of the vertices, sorted.
    pub(super) vertices: Vec<Cell>,
    /// Vertex at which each half-edge starts.
    pub(super) origin: Vec<usize>,
    /// Half-edge that follows round the face on the left.
    pub(super) next: Vec<usize>,
    /// Face on the left; face 0 is the unbounded one.
    pub(super) face: Vec<usize>,
    /// Half-edges that leave each vertex, anticlockwise, starting from straight down (not included) to the right.
    pub(super) fans: Vec<Vec<usize>>,
    /// Twice the area of each face in square pixels; zero for face 0.
    pub(super) doubled_areas: Vec<i128>,
}

/// The same edge the other way.
pub(super) fn twin(half_edge: usize) -> usize {
    half_edge ^ 1
}

impl HalfEdges {
    /// From edges sorted by their ends.
    pub(super) fn new(edges: &[Edge]) -> Self {
        let mut vertices: Vec<Cell> = edges.iter().flat_map(|edge| [edge.a, edge.b]).collect();
        vertices.sort_unstable();
        vertices.dedup();
        let vertex = |cell| vertices.partition_point(|other| *other < cell);
        let origin: Vec<usize> = edges.iter().flat_map(|edge| [vertex(edge.a), vertex(edge.b)]).collect();
        let fans = fans(&vertices, &origin);
        let next = next(&fans, origin.len());
        let mut half_edges = Self { vertices, origin, next, face: Vec::new(), fans, doubled_areas: Vec::new() };
        half_edges.find_faces();
        half_edges
    }

    /// Where a half-edge starts.
    pub(super) fn start(&self, half_edge: usize) -> Cell {
        self.vertices[self.origin[half_edge]]
    }

    /// Vertex at which a half-edge ends.
    pub(super) fn target(&self, half_edge: usize) -> usize {
        self.origin[twin(half_edge)]
    }

    /// The half-edges round the face on the left of `first`, starting with it.
    pub(super) fn cycle(&self, first: usize) -> impl Iterator<Item = usize> + '_ {
        let following = move |half_edge: &usize| Some(self.next[*half_edge]).filter(|next| *next != first);
        std::iter::successors(Some(first), following)
    }

    /// Cycles that run anticlockwise enclose a face each, in the order of their first half-edges; a clockwise one goes
    /// round a connected part of the edges and belongs to the face under its lowest vertex.
    fn find_faces(&mut self) {
        const NONE: usize = usize::MAX;
        self.face = vec![NONE; self.origin.len()];
        self.doubled_areas = vec![0];
        let mut seen = vec![false; self.origin.len()];
        let mut clockwise = Vec::new();
        for first in 0..self.origin.len() {
            if !seen[first] {
                let cycle: Vec<usize> = self.cycle(first).collect();
                cycle.iter().for_each(|half_edge| seen[*half_edge] = true);
                let area = cycle.iter().map(|half_edge| self.doubled_triangle(*half_edge)).sum();
                if area > 0 { self.give(&cycle, self.doubled_areas.len(), area) } else { clockwise.push((cycle, area)) }
            }
        }
        clockwise.sort_by_key(|(cycle, _)| self.lowest(cycle));
        for (cycle, area) in clockwise {
            // The edge below starts left of this part, so the part it belongs to has been given its face already.
            let face = self.edge_below(self.vertices[self.lowest(&cycle)]).map_or(0, |edge| self.face[2 * edge]);
            self.give(&cycle, face, if face == 0 { 0 } else { area });
        }
    }

    fn give(&mut self, cycle: &[usize], face: usize, area: i128) {
        cycle.iter().for_each(|half_edge| self.face[*half_edge] = face);
        self.doubled_areas.resize(self.doubled_areas.len().max(face + 1), 0);
        self.doubled_areas[face] += area;
    }

    fn lowest(&self, cycle: &[usize]) -> usize {
        cycle.iter().map(|half_edge| self.origin[*half_edge]).min().unwrap_or_default()
    }

    fn doubled_triangle(&self, half_edge: usize) -> i128 {
        cross(step((0, 0), self.start(half_edge)), step((0, 0), self.start(twin(half_edge))))
    }

    /// The first edge that a ray meets which goes down from `point`, a hair to the right of it.
    fn edge_below(&self, point: Cell) -> Option<usize> {
        let ends = |edge: usize| (self.start(2 * edge), self.start(2 * edge + 1));
        let below = |edge: &usize| {
            let (a, b) = ends(*edge);
            a.0 <= point.0 && point.0 < b.0 && cross(step(a, b), step(a, point)) > 0
        };
        (0..self.origin.len() / 2).filter(below).max_by(|one, other| higher_at(point.0, ends(*one), ends(*other)))
    }
}

/// Which of two edges that span `x` lies higher just right of it.
fn higher_at(x: i64, one: (Cell, Cell), other: (Cell, Cell)) -> Ordering {
    let (u, v) = (step(one.0, one.1), step(other.0, other.1));
    // Height times the edge's own extent along x.
    let height = |start: Cell, along: (i128, i128)| i128::from(start.1) * along.0 + along.1 * i128::from(x - start.0);
    let (high, low) = (height(one.0, u) * v.0, height(other.0, v) * u.0);
    high.cmp(&low).then_with(|| (u.1 * v.0).cmp(&(v.1 * u.0)))
}

fn fans(vertices: &[Cell], origin: &[usize]) -> Vec<Vec<usize>> {
    let mut fans = vec![Vec::new(); vertices.len()];
    origin.iter().enumerate().for_each(|(half_edge, vertex)| fans[*vertex].push(half_edge));
    let direction = |half_edge: usize| step(vertices[origin[half_edge]], vertices[origin[twin(half_edge)]]);
    for fan in &mut fans {
        fan.sort_by(|one, other| anticlockwise(direction(*one), direction(*other)));
    }
    fans
}

/// Order of directions: from just after straight down through right and up to straight down.
fn anticlockwise(u: (i128, i128), v: (i128, i128)) -> Ordering {
    let leftward = |d: (i128, i128)| d.0 < 0 || d.0 == 0 && d.1 < 0;
    leftward(u).cmp(&leftward(v)).then_with(|| 0.cmp(&cross(u, v)))
}

/// Arriving at a vertex, the face on the left goes on along the spoke that comes before the way back in the fan.
fn next(fans: &[Vec<usize>], half_edges: usize) -> Vec<usize> {
    let mut next = vec![0; half_edges];
    for fan in fans {
        for (n, spoke) in fan.iter().enumerate() {
            next[twin(*spoke)] = fan[(n + fan.len() - 1) % fan.len()];
        }
    }
    next
}
