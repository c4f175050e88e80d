//! A cable from the operator's lever to the caliper.

use super::{Input, Pressing, given_not_negative, given_positive, ratios};
use crate::calc::fault::Faults;
use crate::calc::quantity::{Force, Si};

crate::method_sheet! {
    CHAIN {
        id: "actuation.cable",
        name: "Cable chain from operator to clamp force",
        equation: "F = F_op s i eta_cable i_cal eta_cal",
        symbols: [("F_op", "operator force", "N"), ("s", "brake's share of it", "1"), ("i, i_cal", "ratio of lever, of caliper", "1"),
            ("eta_cable, eta_cal", "efficiency of cable, of caliper", "1"), ("F", "clamp force", "N")],
        valid: "Steady pull; cable friction as one efficiency, exp(-mu theta) for a bent housing.",
        accuracy: "Exact under these assumptions; efficiencies are the caller's.",
        source: "Lever law; rope friction by Euler.",
        provenance: Memory,
        worked: "100 N, ratio 4, 0.8, caliper 10 at 0.9: 2880 N.",
    }
}

/// A cable chain, as given.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct CableParts {
    /// Cable force over operator force.
    pub lever_ratio: f64,
    /// Of the cable, in (0, 1].
    pub cable_efficiency: f64,
    /// Clamp force over cable force.
    pub caliper_ratio: f64,
    /// Of the caliper, in (0, 1].
    pub caliper_efficiency: f64,
    /// Force of the operator.
    pub operator_force: Option<Force>,
    /// Most force that may be asked of the operator.
    pub max_operator_force: Option<Force>,
}

/// A cable chain that can exist.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Cable(CableParts);

impl Cable {
    /// Checks the parts.
    ///
    /// # Errors
    /// Every part without a physical meaning.
    pub fn new(parts: CableParts) -> Result<Self, Faults> {
        let mut faults = Faults::new();
        ratios(
            &mut faults,
            &[("lever_ratio", parts.lever_ratio), ("caliper_ratio", parts.caliper_ratio)],
        );
        faults.efficiency("cable_efficiency", parts.cable_efficiency);
        faults.efficiency("caliper_efficiency", parts.caliper_efficiency);
        given_not_negative(&mut faults, &[("operator_force", parts.operator_force)]);
        given_positive(&mut faults, &[("max_operator_force", parts.max_operator_force)]);
        faults.into_result(Self(parts))
    }

    /// The parts.
    #[must_use]
    pub const fn parts(&self) -> &CableParts {
        &self.0
    }

    fn gain(&self) -> f64 {
        self.0.lever_ratio
            * self.0.cable_efficiency
            * self.0.caliper_ratio
            * self.0.caliper_efficiency
    }

    pub(super) fn press(&self, input: Input, share: f64) -> Pressing {
        let force =
            if let Input::OperatorForce(force) = input { force } else { Force::from_si(0.0) };
        Pressing {
            operator_force: Some(force),
            ..Pressing::by(Force::from_si(force.si() * share * self.gain()))
        }
    }

    pub(super) fn needed(&self, clamp_force: Force) -> Pressing {
        let operator_force = Force::from_si(clamp_force.si() / self.gain());
        Pressing { operator_force: Some(operator_force), ..Pressing::by(clamp_force) }
    }
}
