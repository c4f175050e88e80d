//! Quantities on the wire: `{"value": 95, "unit": "mm"}`, one type and one closed set of units per dimension.

use std::borrow::Cow;
use std::fmt;
use std::marker::PhantomData;

use serde::de::{self, DeserializeSeed, MapAccess, Visitor};
use serde::ser::{Error as _, SerializeStruct};
use serde::{Deserialize, Deserializer, Serialize, Serializer};
use utoipa::openapi::RefOr;
use utoipa::openapi::extensions::Extensions;
use utoipa::openapi::schema::{AdditionalProperties, ObjectBuilder, Schema, Type};
use utoipa::{PartialSchema, ToSchema};

use crate::calc::quantity::{self, Amount, Dimension, Si};
use crate::data::units::{self, Unit};

/// The system of units of an answer.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default, Deserialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum ReportUnits {
    /// SI units in their usual engineering sizes.
    #[default]
    Si,
    /// United States customary units.
    Us,
}

impl ReportUnits {
    /// The unit in which answers of this system state a dimension.
    #[must_use]
    pub fn unit_of(self, dimension: Dimension) -> Option<&'static Unit> {
        let fits = |unit: &&Unit| match self {
            Self::Si => unit.is_si,
            Self::Us => unit.is_us,
        };
        units::of(dimension).iter().find(fits)
    }
}

/// What a wire quantity measures.
pub trait Kind: 'static {
    /// The dimension in the unit table.
    const DIMENSION: Dimension;
    /// The name of the schema.
    const NAME: &'static str;
    /// What it is, for the description.
    const MEANING: &'static str;
    /// The largest magnitude accepted, in coherent SI units.
    const LARGEST: f64;
    /// The type inside the calculation.
    type Quantity: Si;
}

/// The smallest magnitude accepted beside zero, in coherent SI units.
pub const SMALLEST: f64 = 1e-30;

macro_rules! kinds {
    ($($name:ident: $quantity:ty, $largest:literal, $meaning:literal;)*) => {
        /// Markers of the dimensions.
        pub mod kind {
            $(
                #[doc = $meaning]
                #[derive(Debug, Clone, Copy, PartialEq, Eq)]
                pub enum $name {}
            )*
        }

        $(
            impl Kind for kind::$name {
                const DIMENSION: Dimension = Dimension::$name;
                const NAME: &'static str = stringify!($name);
                const MEANING: &'static str = $meaning;
                const LARGEST: f64 = $largest;
                type Quantity = $quantity;
            }

            #[doc = $meaning]
            pub type $name = Measure<kind::$name>;
        )*
    };
}

kinds! {
    Length: quantity::Length, 1e6, "A length.";
    Area: quantity::Area, 1e6, "An area.";
    Volume: quantity::Volume, 1e6, "A volume.";
    Angle: quantity::Angle, 1e9, "A plane angle.";
    Grade: quantity::Angle, 1e2, "A slope: percent of rise over run, or the angle. Positive uphill in the direction of travel.";
    Mass: quantity::Mass, 1e9, "A mass.";
    Force: quantity::Force, 1e12, "A force.";
    Pressure: quantity::Pressure, 1e12, "A pressure; of fluids and air above the surroundings.";
    Torque: quantity::Torque, 1e12, "A torque.";
    Energy: quantity::Energy, 1e15, "An energy.";
    Power: quantity::Power, 1e15, "A power.";
    Speed: quantity::Velocity, 1e4, "A speed along a line.";
    RotationalSpeed: quantity::AngularVelocity, 1e6, "A rotational speed.";
    Acceleration: quantity::Acceleration, 1e6, "An acceleration or deceleration; `g` is the standard acceleration of free fall.";
    AngularAcceleration: quantity::AngularAcceleration, 1e9, "An angular acceleration or deceleration.";
    Time: quantity::Time, 1e9, "A time.";
    Temperature: quantity::ThermodynamicTemperature, 1e4, "A temperature on its scale.";
    TemperatureDifference: quantity::TemperatureInterval, 1e4, "A difference of temperatures.";
    MomentOfInertia: quantity::MomentOfInertia, 1e12, "A moment of inertia.";
    PowerFlux: quantity::PowerFlux, 1e15, "A power per area.";
    EnergyFlux: quantity::EnergyFlux, 1e15, "An energy per area.";
    PressureVelocity: quantity::PressureVelocity, 1e15, "A pressure times a rubbing speed.";
    HeatTransferCoefficient: quantity::HeatTransfer, 1e9, "A heat transfer coefficient.";
    ThermalConductivity: quantity::ThermalConductivity, 1e6, "A thermal conductivity.";
    SpecificHeat: quantity::SpecificHeatCapacity, 1e9, "A specific heat capacity.";
    Density: quantity::MassDensity, 1e6, "A density.";
    SpecificWear: quantity::SpecificWear, 1.0, "A worn volume per friction energy.";
    Stiffness: quantity::Stiffness, 1e15, "A force per travel.";
    LineCompliance: quantity::LineCompliance, 1.0, "A volume that a brake line takes up per pressure.";
    StopFrequency: quantity::Frequency, 1e3, "A number of stops per time.";
}

/// A number with its unit.
pub struct Measure<K> {
    value: f64,
    unit: &'static Unit,
    kind: PhantomData<K>,
}

impl<K> Clone for Measure<K> {
    fn clone(&self) -> Self {
        *self
    }
}

impl<K> Copy for Measure<K> {}

impl<K> PartialEq for Measure<K> {
    fn eq(&self, other: &Self) -> bool {
        self.value == other.value && self.unit == other.unit
    }
}

impl<K> fmt::Debug for Measure<K> {
    fn fmt(&self, formatter: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(formatter, "{} {}", self.value, self.unit.symbol)
    }
}

/// Stands in for a unit should the table lack one; a test proves that it does not.
static COHERENT: Unit = Unit {
    dimension: Dimension::Ratio,
    symbol: "1",
    is_si: true,
    is_us: true,
    ucum: Some("1"),
    recommendation_20: Some("C62"),
    conversion: units::Conversion::Linear(1.0),
    exact: "1",
    name: "one",
    variant: "ONE",
};

impl<K: Kind> Measure<K> {
    /// `value` of the unit named `symbol`.
    #[must_use]
    pub fn new(value: f64, symbol: &str) -> Option<Self> {
        Some(Self { value, unit: units::find(K::DIMENSION, symbol)?, kind: PhantomData })
    }

    /// The number as written.
    #[must_use]
    pub const fn value(&self) -> f64 {
        self.value
    }

    /// The unit as written.
    #[must_use]
    pub const fn unit(&self) -> &'static Unit {
        self.unit
    }

    /// The quantity inside the calculation.
    #[must_use]
    pub fn quantity(&self) -> K::Quantity {
        K::Quantity::from_si(self.unit.to_si(self.value))
    }

    /// A result, in the units of the answer.
    #[must_use]
    pub fn report(quantity: K::Quantity, report_units: ReportUnits) -> Self {
        Self::in_units_of(K::DIMENSION, quantity.si(), report_units)
    }

    /// The same from a number of coherent SI units.
    #[must_use]
    pub fn report_si(si: f64, report_units: ReportUnits) -> Self {
        Self::in_units_of(K::DIMENSION, si, report_units)
    }

    fn in_units_of(dimension: Dimension, si: f64, report_units: ReportUnits) -> Self {
        let unit = report_units.unit_of(dimension).unwrap_or(&COHERENT);
        Self { value: unit.of_si(si), unit, kind: PhantomData }
    }
}

impl Length {
    /// A way travelled, m: reported in metres or feet.
    #[must_use]
    pub fn report_travel(metres: f64, report_units: ReportUnits) -> Self {
        Self::in_units_of(Dimension::Travel, metres, report_units)
    }
}

impl<K> Serialize for Measure<K> {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        let mut object = serializer.serialize_struct("Measure", 2)?;
        object.serialize_field("value", &Finite(self.value))?;
        object.serialize_field("unit", self.unit.symbol)?;
        object.end()
    }
}

/// The words by which a number that JSON cannot hold is told from other failures to write an answer.
pub const NOT_FINITE: &str = "a number of the answer is not finite";

/// A bare number of an answer. Writing one that is not finite fails instead of giving `null`.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Finite(pub f64);

impl Serialize for Finite {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        if self.0.is_finite() {
            serializer.serialize_f64(self.0)
        } else {
            Err(S::Error::custom(NOT_FINITE))
        }
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

impl<K: Kind> PartialSchema for Measure<K> {
    fn schema() -> RefOr<Schema> {
        let units = units::of(K::DIMENSION);
        let variants: Vec<&str> = units.iter().map(|unit| unit.variant).collect();
        let unit = ObjectBuilder::new()
            .schema_type(Type::String)
            .enum_values(Some(units.iter().map(|unit| unit.symbol)))
            .description(Some("The unit's plain symbol. Its UCUM code and its UN/ECE Recommendation 20 common code are accepted, too; `GET /v1/units` lists them."))
            .extensions(Some(Extensions::builder().add("x-enum-varnames", variants).build()));
        let value =
            ObjectBuilder::new().schema_type(Type::Number).description(Some("How many units."));
        ObjectBuilder::new()
            .description(Some(description::<K>()))
            .property("value", value)
            .property("unit", unit)
            .required("value")
            .required("unit")
            .additional_properties(Some(AdditionalProperties::FreeForm(false)))
            .into()
    }
}

fn description<K: Kind>() -> String {
    let coherent = units::of(K::DIMENSION).iter().find(|unit| {
        matches!(
            unit.conversion,
            units::Conversion::Linear(1.0) | units::Conversion::Scale { factor: 1.0, offset: 0.0 }
        )
    });
    let unit = coherent.map_or("coherent SI units", |unit| unit.symbol);
    format!(
        "{} Accepted up to {:e} {unit} in magnitude, and 0 or at least {SMALLEST:e}.",
        K::MEANING,
        K::LARGEST
    )
}

impl<K: Kind> ToSchema for Measure<K> {
    fn name() -> Cow<'static, str> {
        Cow::Borrowed(K::NAME)
    }
}

/// A number of any dimension with its unit; pure ratios have unit `1`.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct AnyAmount {
    /// How many units.
    #[schema(value_type = f64)]
    pub value: Finite,
    /// The unit's plain symbol.
    pub unit: &'static str,
}

impl AnyAmount {
    /// An amount in the units of the answer.
    #[must_use]
    pub fn report(amount: Amount, report_units: ReportUnits) -> Self {
        let unit = report_units.unit_of(amount.dimension).unwrap_or(&COHERENT);
        Self { value: Finite(unit.of_si(amount.si)), unit: unit.symbol }
    }
}
