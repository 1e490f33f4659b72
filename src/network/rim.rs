//! The order of contacts round the rims.

use crate::device::ContactIdx;
use crate::layout::FaceLabel;
use crate::network::Network;
use crate::network::boundary::Hand;
use crate::network::boundary::Walker;

/// Contacts rim by rim, clockwise round the outer ones; each rim begins with its first contact of the device file.
/// A contact inside the mesa lies on no rim and is left out.
pub fn rim_order(network: &Network) -> Vec<Vec<ContactIdx>> {
    let topology = &network.topology;
    let inside = |face: crate::layout::FaceIdx| topology.faces[face.0] != FaceLabel::Vacuum;
    let walker = Walker { topology, inside, hand: Hand::Right };
    let mut rims: Vec<_> = walker.loops().iter().map(|walk| contacts_along(network, walk)).collect();
    rims.retain(|rim| !rim.is_empty());
    rims.sort();
    rims
}

fn contacts_along(network: &Network, walk: &[(crate::layout::PieceIdx, bool)]) -> Vec<ContactIdx> {
    let mut found = Vec::new();
    for &(piece, forward) in walk {
        let piece = &network.topology.pieces[piece.0];
        let inner = if forward { piece.right } else { piece.left };
        if let FaceLabel::Contact(contact) = network.topology.faces[inner.0]
            && !found.contains(&contact)
        {
            found.push(contact);
        }
    }
    let first = (0..found.len()).min_by_key(|&at| found[at]).unwrap_or(0);
    found.rotate_left(first);
    found
}
