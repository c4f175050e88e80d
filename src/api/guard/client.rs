//! Who asks: the holder of a key, or whoever is at the other end of the connection.

use std::net::{IpAddr, Ipv4Addr, Ipv6Addr};

use super::keys::KeyId;

/// The other end of the connection, as an extension of the request.
///
/// Never taken from a header: whoever sends the request writes its headers.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Peer(pub IpAddr);

/// One of those among whom the service is shared.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Client {
    /// The holder of a key, from wherever.
    Key(KeyId),
    /// Whoever has an address of this network.
    Network(IpAddr),
    /// Nobody known: the request did not come over a network.
    Unknown,
}

impl Client {
    /// Who has an address: one host for IPv4; for IPv6 the network of 64 bits that a host can choose within.
    #[must_use]
    pub fn at(peer: Option<Peer>) -> Self {
        Self::within(peer, 32, 64)
    }

    /// A client in a crowd, in which neighbours count as one so that the number of clients stays bounded.
    #[must_use]
    pub fn in_crowd(peer: Option<Peer>) -> Self {
        Self::within(peer, 16, 24)
    }

    fn within(peer: Option<Peer>, bits: u32, bits_of_six: u32) -> Self {
        match peer.map(|Peer(address)| address.to_canonical()) {
            None => Self::Unknown,
            Some(IpAddr::V4(address)) => {
                let mask = u32::MAX << (u32::BITS - bits);
                Self::Network(Ipv4Addr::from_bits(address.to_bits() & mask).into())
            }
            Some(IpAddr::V6(address)) => {
                let mask = u128::MAX << (u128::BITS - bits_of_six);
                Self::Network(Ipv6Addr::from_bits(address.to_bits() & mask).into())
            }
        }
    }
}
