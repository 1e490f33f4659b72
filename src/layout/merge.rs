//! From edges to border pieces: chains without a branching, fans of spokes, positions in nanometres.

use crate::layout::FaceIdx;
use crate::layout::Layout;
use crate::layout::Piece;
use crate::layout::PieceIdx;
use crate::layout::Point;
use crate::layout::Positions;
use crate::layout::Spoke;
use crate::layout::Topology;
use crate::layout::VertexIdx;
use crate::layout::grid::Cell;
use crate::layout::grid::Grid;
use crate::layout::grid::side;
use crate::layout::half_edges::HalfEdges;
use crate::layout::half_edges::twin;
use crate::layout::label::Subdivision;

/// The layout of a merged subdivision.
pub(super) fn layout(merged: &Subdivision, grid: Grid) -> Layout {
    let half_edges = &merged.half_edges;
    let branching: Vec<usize> = (0..half_edges.vertices.len()).filter(|v| half_edges.fans[*v].len() != 2).collect();
    let chains = chains(half_edges, &branching);
    let pieces = chains.iter().map(|chain| piece(half_edges, &branching, chain)).collect();
    let topology = Topology { faces: merged.labels.clone(), pieces, fans: fans(half_edges, &branching, &chains) };
    let scale = i128::from(grid.snap) * i128::from(grid.snap);
    let positions = Positions {
        pieces: chains.iter().map(|chain| corners(half_edges, chain, grid)).collect(),
        vertices: branching.iter().map(|vertex| grid.point(half_edges.vertices[*vertex])).collect(),
        doubled_areas: half_edges.doubled_areas.iter().map(|area| area * scale).collect(),
    };
    Layout { topology, positions, parts: Vec::new() }
}

/// Half-edges in a row, from branching to branching; what is left then runs in closed curves.
fn chains(half_edges: &HalfEdges, branching: &[usize]) -> Vec<Vec<usize>> {
    let mut used = vec![false; half_edges.origin.len()];
    let spokes = branching.iter().flat_map(|vertex| half_edges.fans[*vertex].iter().copied());
    let mut chains = Vec::new();
    for first in spokes.chain(0..half_edges.origin.len()) {
        if !used[first] {
            let chain = chain(half_edges, first);
            chain.iter().for_each(|half_edge| (used[*half_edge], used[twin(*half_edge)]) = (true, true));
            chains.push(chain);
        }
    }
    chains
}

fn chain(half_edges: &HalfEdges, first: usize) -> Vec<usize> {
    let onward = |half_edge: &usize| {
        let straight = half_edges.fans[half_edges.target(*half_edge)].len() == 2;
        straight.then(|| half_edges.next[*half_edge]).filter(|next| *next != first)
    };
    std::iter::successors(Some(first), onward).collect()
}

fn piece(half_edges: &HalfEdges, branching: &[usize], chain: &[usize]) -> Piece {
    let (first, last) = (chain[0], chain[chain.len() - 1]);
    let start = branching.binary_search(&half_edges.origin[first]).ok();
    let end = branching.binary_search(&half_edges.target(last)).ok();
    Piece {
        left: FaceIdx(half_edges.face[first]),
        right: FaceIdx(half_edges.face[twin(first)]),
        ends: start.zip(end).map(|(start, end)| (VertexIdx(start), VertexIdx(end))),
    }
}

fn fans(half_edges: &HalfEdges, branching: &[usize], chains: &[Vec<usize>]) -> Vec<Vec<Spoke>> {
    let mut spokes = vec![None; half_edges.origin.len()];
    for (n, chain) in chains.iter().enumerate() {
        spokes[twin(chain[chain.len() - 1])] = Some(Spoke { piece: PieceIdx(n), outward: false });
        spokes[chain[0]] = Some(Spoke { piece: PieceIdx(n), outward: true });
    }
    branching
        .iter()
        .map(|vertex| half_edges.fans[*vertex].iter().filter_map(|spoke| spokes[*spoke]).collect())
        .collect()
}

/// Corners of a chain without the ones that lie straight on the way.
fn corners(half_edges: &HalfEdges, chain: &[usize], grid: Grid) -> Vec<Point> {
    let mut kept: Vec<Cell> = vec![half_edges.start(chain[0])];
    for pair in chain.windows(2) {
        let (before, corner, after) =
            (half_edges.start(pair[0]), half_edges.start(pair[1]), half_edges.start(twin(pair[1])));
        if side(before, corner, after) != 0 {
            kept.push(corner);
        }
    }
    kept.push(half_edges.start(twin(chain[chain.len() - 1])));
    kept.into_iter().map(|cell| grid.point(cell)).collect()
}
