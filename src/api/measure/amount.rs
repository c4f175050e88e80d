//! An amount of any dimension, and the choice of units of an answer.

use serde::{Deserialize, Serialize};
use utoipa::ToSchema;

use super::Finite;
use crate::calc::quantity::{Amount, Dimension};
use crate::data::units::{self, System, Unit};

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
    const fn system(self) -> System {
        match self {
            Self::Si => System::Si,
            Self::Us => System::Us,
        }
    }

    /// The unit in which answers of this system state a dimension.
    #[must_use]
    pub fn unit_of(self, dimension: Dimension) -> &'static Unit {
        units::reported(dimension, self.system())
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
        let unit = report_units.unit_of(amount.dimension);
        Self { value: Finite(unit.of_si(amount.si)), unit: unit.symbol }
    }
}
