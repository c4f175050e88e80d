//! Quantities on the wire: `{"value": 95, "unit": "mm"}`, one type and one closed set of units per dimension.

mod amount;
mod kinds;
mod schema;
mod wire;

use std::fmt;
use std::marker::PhantomData;

pub use amount::{AnyAmount, ReportUnits};
pub use kinds::*;

pub use super::finite::Finite;
use crate::calc::quantity::{Dimension, Si};
use crate::data::magnitude::{self, Magnitude};
use crate::data::units::{self, Unit};

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

    /// The sizes that the service accepts.
    #[must_use]
    pub const fn accepted() -> Magnitude {
        magnitude::of(K::DIMENSION)
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
        let unit = report_units.unit_of(dimension);
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
