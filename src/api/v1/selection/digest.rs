//! The digest of a large request, made of its parts, so that it never stands in memory as a whole once more.

use serde::Deserialize;
use serde_json::value::RawValue;
use sha2::{Digest as _, Sha256};

use crate::api::record::{canonical, digest_text};

/// The members of a selection that count, as written.
#[derive(Deserialize)]
struct Members<'a> {
    #[serde(borrow)]
    application: &'a RawValue,
    #[serde(borrow)]
    rank_by: Option<&'a RawValue>,
    #[serde(borrow)]
    report_units: Option<&'a RawValue>,
}

/// The digest in the making. The canonical form sorts members by name, so the candidates stand between two parts.
#[derive(Debug, Clone)]
pub(super) struct PartDigest {
    hash: Sha256,
    is_first: bool,
    rest: Vec<u8>,
}

impl PartDigest {
    /// Starts with all but the candidates.
    pub(super) fn new(body: &[u8]) -> Self {
        let members: Option<Members<'_>> = serde_json::from_slice(body).ok();
        let mut hash = Sha256::new();
        let mut rest = b"]".to_vec();
        if let Some(members) = members {
            hash.update(b"{\"application\":");
            hash.update(canonical_text(members.application.get()));
            for (name, value) in
                [("rank_by", members.rank_by), ("report_units", members.report_units)]
            {
                let Some(value) = value else { continue };
                rest.extend(format!(",\"{name}\":").into_bytes());
                rest.extend(canonical_text(value.get()));
            }
        }
        hash.update(b",\"candidates\":[");
        rest.push(b'}');
        Self { hash, is_first: true, rest }
    }

    /// Adds the next candidate, in its canonical form.
    pub(super) fn add(&mut self, candidate: &[u8]) {
        if !std::mem::take(&mut self.is_first) {
            self.hash.update(b",");
        }
        self.hash.update(candidate);
    }

    /// The digest of the whole request.
    pub(super) fn finish(self) -> String {
        digest_text(self.hash.chain_update(self.rest))
    }
}

/// The canonical form of a part, which is known to be JSON.
pub(super) fn canonical_text(part: &str) -> Vec<u8> {
    canonical(serde_json::from_str(part).unwrap_or_default())
}
