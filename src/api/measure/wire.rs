//! Reading and writing a measure.

use std::fmt;
use std::marker::PhantomData;

use serde::de::{self, DeserializeSeed, MapAccess, Visitor};
use serde::ser::SerializeStruct;
use serde::{Deserialize, Deserializer, Serialize, Serializer};

use super::{Finite, Kind, Measure};
use crate::calc::quantity::Dimension;
use crate::data::units::{self, Unit};

impl<K> Serialize for Measure<K> {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        let mut object = serializer.serialize_struct("Measure", 2)?;
        object.serialize_field("value", &Finite(self.value))?;
        object.serialize_field("unit", self.unit.symbol)?;
        object.end()
    }
}

impl<'de, K: Kind> Deserialize<'de> for Measure<K> {
    fn deserialize<D: Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
        deserializer.deserialize_struct("Measure", MEMBERS, MeasureVisitor(PhantomData))
    }
}

const MEMBERS: &[&str] = &["value", "unit"];

#[derive(Deserialize)]
#[serde(field_identifier, rename_all = "snake_case")]
enum Member {
    Value,
    Unit,
}

struct MeasureVisitor<K>(PhantomData<K>);

impl<'de, K: Kind> Visitor<'de> for MeasureVisitor<K> {
    type Value = Measure<K>;

    fn expecting(&self, formatter: &mut fmt::Formatter<'_>) -> fmt::Result {
        formatter.write_str("an object with value and unit")
    }

    fn visit_map<A: MapAccess<'de>>(self, mut map: A) -> Result<Self::Value, A::Error> {
        let (mut value, mut unit) = (None, None);
        while let Some(member) = map.next_key()? {
            match member {
                Member::Value if value.is_some() => {
                    return Err(de::Error::duplicate_field("value"));
                }
                Member::Unit if unit.is_some() => return Err(de::Error::duplicate_field("unit")),
                Member::Value => value = Some(map.next_value()?),
                Member::Unit => unit = Some(map.next_value_seed(UnitSeed(K::DIMENSION))?),
            }
        }
        let value = value.ok_or_else(|| de::Error::missing_field("value"))?;
        let unit = unit.ok_or_else(|| de::Error::missing_field("unit"))?;
        Ok(Measure { value, unit, kind: PhantomData })
    }
}

struct UnitSeed(Dimension);

impl<'de> DeserializeSeed<'de> for UnitSeed {
    type Value = &'static Unit;

    fn deserialize<D: Deserializer<'de>>(self, deserializer: D) -> Result<Self::Value, D::Error> {
        deserializer.deserialize_str(self)
    }
}

impl Visitor<'_> for UnitSeed {
    type Value = &'static Unit;

    fn expecting(&self, formatter: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(formatter, "a unit of {}", self.0.id())
    }

    fn visit_str<E: de::Error>(self, text: &str) -> Result<Self::Value, E> {
        units::find(self.0, text).ok_or_else(|| E::invalid_value(de::Unexpected::Str(text), &self))
    }
}
