//! Finds a member that an object names twice.

use std::collections::HashSet;
use std::fmt;

use serde::de::{DeserializeSeed, Deserializer, Error, MapAccess, SeqAccess, Visitor};

use crate::api::pointer;

/// The pointer of the first member that repeats an earlier one of its object, in reading order.
///
/// `body` must be JSON within the parser's depth limit; of anything else only the readable part is searched.
pub(super) fn first(body: &[u8]) -> Option<String> {
    let mut walk = Walk::default();
    let mut deserializer = serde_json::Deserializer::from_slice(body);
    let outcome = walk.deserialize(&mut deserializer);
    (outcome.is_err() && walk.found).then(|| pointer::fragment(&walk.path))
}

/// The place reached, and whether it is a repetition.
#[derive(Default)]
struct Walk {
    path: Vec<String>,
    found: bool,
}

impl<'de> DeserializeSeed<'de> for &mut Walk {
    type Value = ();

    fn deserialize<D: Deserializer<'de>>(self, deserializer: D) -> Result<(), D::Error> {
        deserializer.deserialize_any(self)
    }
}

impl<'de> Visitor<'de> for &mut Walk {
    type Value = ();

    fn expecting(&self, formatter: &mut fmt::Formatter<'_>) -> fmt::Result {
        formatter.write_str("JSON")
    }

    fn visit_map<A: MapAccess<'de>>(self, mut map: A) -> Result<(), A::Error> {
        let mut names = HashSet::new();
        while let Some(name) = map.next_key::<String>()? {
            self.path.push(name.clone());
            if !names.insert(name) {
                self.found = true;
                return Err(A::Error::custom("duplicate member"));
            }
            map.next_value_seed(&mut *self)?;
            self.path.pop();
        }
        Ok(())
    }

    fn visit_seq<A: SeqAccess<'de>>(self, mut sequence: A) -> Result<(), A::Error> {
        for index in 0_usize.. {
            self.path.push(index.to_string());
            if sequence.next_element_seed(&mut *self)?.is_none() {
                self.path.pop();
                break;
            }
            self.path.pop();
        }
        Ok(())
    }

    fn visit_bool<E>(self, _: bool) -> Result<(), E> {
        Ok(())
    }

    fn visit_i64<E>(self, _: i64) -> Result<(), E> {
        Ok(())
    }

    fn visit_u64<E>(self, _: u64) -> Result<(), E> {
        Ok(())
    }

    fn visit_f64<E>(self, _: f64) -> Result<(), E> {
        Ok(())
    }

    fn visit_str<E>(self, _: &str) -> Result<(), E> {
        Ok(())
    }

    fn visit_unit<E>(self) -> Result<(), E> {
        Ok(())
    }
}
