//! API keys. The service knows only their SHA-256, so whoever reads its files cannot call it.

use std::fmt;
use std::sync::{Arc, PoisonError, RwLock};

use axum::http::HeaderMap;
use axum::http::header::AUTHORIZATION;
use sha2::{Digest, Sha256};
use subtle::{Choice, ConstantTimeEq as _};

/// Most keys of a file: each request is compared with all of them.
pub const MOST_KEYS: usize = 1000;

/// Most lines at fault that one refusal names.
const MOST_FAULTS: usize = 5;

/// Bytes of a SHA-256.
const DIGEST: usize = 32;

/// What tells the holders of keys apart: the beginning of the key's digest.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub struct KeyId(u64);

/// The digests of the keys that open the service; at least one.
#[derive(Clone, PartialEq, Eq)]
pub struct Keys(Vec<[u8; DIGEST]>);

impl fmt::Debug for Keys {
    fn fmt(&self, formatter: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(formatter, "Keys({})", self.0.len())
    }
}

impl Keys {
    /// Reads a list of keys: the SHA-256 of one a line, in hexadecimal; `#` begins a comment.
    ///
    /// # Errors
    /// A sentence that names the lines at fault, or says that there is no key. It repeats nothing of the text.
    pub fn parse(text: &str) -> Result<Self, String> {
        let lines = text.lines().map(|line| line.split('#').next().unwrap_or_default().trim());
        let numbered = lines.zip(1..).filter(|(line, _): &(&str, usize)| !line.is_empty());
        let mut keys = Vec::new();
        let mut faults = Vec::new();
        for (line, number) in numbered {
            match digest(line) {
                Some(key) => keys.push(key),
                None => faults.push(number.to_string()),
            }
        }
        if !faults.is_empty() {
            let more = if faults.len() > MOST_FAULTS { " and others" } else { "" };
            faults.truncate(MOST_FAULTS);
            let lines = faults.join(", ");
            return Err(format!(
                "line {lines}{more}: not the SHA-256 of a key in 64 hexadecimal digits"
            ));
        }
        match keys.len() {
            0 => Err("it holds no key".to_owned()),
            1..=MOST_KEYS => Ok(Self(keys)),
            count => Err(format!("it holds {count} keys; {MOST_KEYS} is the most")),
        }
    }

    /// How many there are.
    #[must_use]
    pub fn count(&self) -> usize {
        self.0.len()
    }

    /// Whose key it is. Takes the same time whichever key it is, and if it is none.
    fn find(&self, key: &[u8]) -> Option<KeyId> {
        let digest: [u8; DIGEST] = Sha256::digest(key).into();
        let known = self.0.iter().fold(Choice::from(0), |known, key| known | key.ct_eq(&digest));
        bool::from(known).then_some(KeyId(u64::from_be_bytes(*digest.first_chunk()?)))
    }
}

/// The bytes of 64 hexadecimal digits.
fn digest(text: &str) -> Option<[u8; DIGEST]> {
    if text.len() != 2 * DIGEST {
        return None;
    }
    let mut bytes = [0; DIGEST];
    for (byte, pair) in bytes.iter_mut().zip(text.as_bytes().chunks_exact(2)) {
        let [high, low] = pair else { return None };
        let digit = |digit: u8| char::from(digit).to_digit(16);
        *byte = u8::try_from(digit(*high)? * 16 + digit(*low)?).ok()?;
    }
    Some(bytes)
}

/// The keys in force; all copies share them.
#[derive(Debug, Clone)]
pub struct KeyRing(Arc<RwLock<Keys>>);

impl KeyRing {
    /// Puts keys in force.
    #[must_use]
    pub fn new(keys: Keys) -> Self {
        Self(Arc::new(RwLock::new(keys)))
    }

    /// Puts other keys in force, from the next request on.
    pub fn replace(&self, keys: Keys) {
        *self.0.write().unwrap_or_else(PoisonError::into_inner) = keys;
    }

    /// Whose key a request carries as `Authorization: Bearer` (RFC 6750, 2.1); none if it carries no key in force.
    #[must_use]
    pub fn holder(&self, headers: &HeaderMap) -> Option<KeyId> {
        let mut credentials = headers.get_all(AUTHORIZATION).iter();
        let (Some(credential), None) = (credentials.next(), credentials.next()) else {
            return None;
        };
        let (scheme, key) = credential.to_str().ok()?.split_once(' ')?;
        let key = scheme.eq_ignore_ascii_case("bearer").then_some(key.trim())?;
        self.0.read().unwrap_or_else(PoisonError::into_inner).find(key.as_bytes())
    }
}
