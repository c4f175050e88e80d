//! Fluid pressure on caliper pistons, with or without a master cylinder.

use std::f64::consts::PI;

use super::{Input, Pressing, conflict, given_not_negative, given_positive, ratios};
use crate::calc::fault::{FaultCode, Faults};
use crate::calc::quantity::{Area, Force, Length, LineCompliance, Pressure, Si, Volume};

crate::method_sheet! {
    CHAIN {
        id: "actuation.hydraulic",
        name: "Hydraulic chain from operator to clamp force",
        equation: "p = F_op s i eta_mc / A_mc; F = (p - p_0) A_p n eta, not below 0; V = faces n A_p c + C p; x = i sum(s V) / A_mc",
        symbols: [("F_op", "operator force", "N"), ("s", "brake's share of it", "1"), ("i", "lever ratio", "1"),
            ("eta_mc, eta", "efficiency of lever with master cylinder, of the caliper", "1"), ("A_mc, A_p", "bore and piston area", "m2"),
            ("n", "pistons per side", "1"), ("p, p_0", "line and threshold pressure", "Pa"), ("F", "clamp force", "N"),
            ("V", "fluid of one brake", "m3"), ("c", "running clearance per face", "m"), ("C", "compliance of one brake's line", "m3/Pa"), ("x", "travel of the control", "m")],
        valid: "Steady pressure, air-free fluid; the same for floating and opposed calipers.",
        accuracy: "Exact under these assumptions; efficiencies and compliance are the caller's.",
        source: "Hydraulic gain of a caliper brake (Limpert, Brake Design and Safety; from memory), volume by displacement.",
        provenance: Memory,
        worked: "400 N, ratio 4.5, eta 0.9 x 0.95, bore 22.2 mm: 39.7597 bar; piston 54 mm, p_0 0.7 bar, eta 0.97: 8677.16 N.",
    }
}

/// A lever and its master cylinder, as given.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct MasterCylinderParts {
    /// Bore diameter.
    pub bore: Length,
    /// Force at the cylinder over force at the control.
    pub lever_ratio: f64,
    /// Of lever and cylinder, in (0, 1].
    pub efficiency: f64,
    /// Force of the operator.
    pub operator_force: Option<Force>,
    /// Most force that may be asked of the operator.
    pub max_operator_force: Option<Force>,
    /// Most travel of the control.
    pub max_stroke: Option<Length>,
}

/// A lever and its master cylinder that can exist.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct MasterCylinder(MasterCylinderParts);

impl MasterCylinder {
    /// Checks the parts.
    ///
    /// # Errors
    /// Every part without a physical meaning.
    pub fn new(parts: MasterCylinderParts) -> Result<Self, Faults> {
        let mut faults = Faults::new();
        faults.positive("bore", parts.bore);
        ratios(&mut faults, &[("lever_ratio", parts.lever_ratio)]);
        faults.efficiency("efficiency", parts.efficiency);
        given_not_negative(&mut faults, &[("operator_force", parts.operator_force)]);
        given_positive(&mut faults, &[("max_operator_force", parts.max_operator_force)]);
        given_positive(&mut faults, &[("max_stroke", parts.max_stroke)]);
        faults.into_result(Self(parts))
    }

    /// The parts.
    #[must_use]
    pub const fn parts(&self) -> &MasterCylinderParts {
        &self.0
    }

    /// Area of the bore.
    #[must_use]
    pub fn area(&self) -> Area {
        circle(self.0.bore)
    }

    /// Line pressure per operator force, 1/m².
    fn gain(&self, share: f64) -> f64 {
        share * self.0.lever_ratio * self.0.efficiency / self.area().si()
    }

    /// Travel of the control that displaces `volume`.
    #[must_use]
    pub fn stroke(&self, volume: Volume) -> Length {
        Length::from_si(self.0.lever_ratio * volume.si() / self.area().si())
    }
}

/// A hydraulic chain, as given.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct HydraulicParts {
    /// Of each piston.
    pub piston_diameter: Length,
    /// Pistons on one side of the disc, 1 to 100.
    pub pistons_per_side: u32,
    /// Of the caliper, in (0, 1].
    pub efficiency: f64,
    /// Pressure at which the pads begin to press.
    pub threshold_pressure: Pressure,
    /// Pressure at the caliper.
    pub line_pressure: Option<Pressure>,
    /// Most pressure that the parts may see.
    pub max_line_pressure: Option<Pressure>,
    /// Between pad and disc, per face.
    pub running_clearance: Option<Length>,
    /// Volume taken up by one brake's line, hoses and caliper per pressure.
    pub compliance: Option<LineCompliance>,
    /// The operator's part of the chain.
    pub master_cylinder: Option<MasterCylinder>,
}

/// A hydraulic chain that can exist.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Hydraulic(HydraulicParts);

impl Hydraulic {
    /// Checks the parts.
    ///
    /// # Errors
    /// Every part without a physical meaning.
    pub fn new(parts: HydraulicParts) -> Result<Self, Faults> {
        let mut faults = Faults::new();
        faults.positive("piston_diameter", parts.piston_diameter);
        let holds = (1..=100).contains(&parts.pistons_per_side);
        faults.require(
            holds,
            "pistons_per_side",
            FaultCode::OutOfRange,
            "must lie between 1 and 100",
        );
        faults.efficiency("efficiency", parts.efficiency);
        faults.not_negative("threshold_pressure", parts.threshold_pressure);
        given_not_negative(&mut faults, &[("line_pressure", parts.line_pressure)]);
        given_positive(&mut faults, &[("max_line_pressure", parts.max_line_pressure)]);
        given_not_negative(&mut faults, &[("running_clearance", parts.running_clearance)]);
        given_not_negative(&mut faults, &[("compliance", parts.compliance)]);
        faults.into_result(Self(parts))
    }

    /// The parts.
    #[must_use]
    pub const fn parts(&self) -> &HydraulicParts {
        &self.0
    }

    pub(super) fn given(&self) -> Result<Option<Input>, Faults> {
        let operator = self.0.master_cylinder.and_then(|master| master.0.operator_force);
        match (self.0.line_pressure, operator) {
            (Some(_), Some(_)) => Err(conflict("line_pressure", "master_cylinder/operator_force")),
            (Some(pressure), None) => Ok(Some(Input::LinePressure(pressure))),
            (None, operator) => Ok(operator.map(Input::OperatorForce)),
        }
    }

    /// The weaker of the maxima given.
    pub(super) fn maximum(&self, share: f64) -> Option<Input> {
        let line =
            self.0.max_line_pressure.map(|pressure| (pressure.si(), Input::LinePressure(pressure)));
        let operator = self.0.master_cylinder.and_then(|master| {
            let force = master.0.max_operator_force?;
            Some((force.si() * master.gain(share), Input::OperatorForce(force)))
        });
        [line, operator]
            .into_iter()
            .flatten()
            .min_by(|one, other| one.0.total_cmp(&other.0))
            .map(|(_, input)| input)
    }

    fn force_per_pressure(&self) -> f64 {
        circle(self.0.piston_diameter).si() * f64::from(self.0.pistons_per_side) * self.0.efficiency
    }

    fn volume(&self, pressure: f64, faces: u32) -> Option<Volume> {
        if self.0.running_clearance.is_none() && self.0.compliance.is_none() {
            return None;
        }
        let pistons = f64::from(faces) * f64::from(self.0.pistons_per_side);
        let clearance = self.0.running_clearance.map_or(0.0, Si::si);
        let displaced = pistons * circle(self.0.piston_diameter).si() * clearance;
        Some(Volume::from_si(displaced + self.0.compliance.map_or(0.0, Si::si) * pressure))
    }

    pub(super) fn press(&self, input: Input, share: f64, faces: u32) -> Pressing {
        let (pressure, operator_force) = match (input, &self.0.master_cylinder) {
            (Input::LinePressure(pressure), master) => {
                let force = master.map(|master| Force::from_si(pressure.si() / master.gain(share)));
                (pressure.si(), force)
            }
            (Input::OperatorForce(force), Some(master)) => {
                (force.si() * master.gain(share), Some(force))
            }
            _ => (0.0, None),
        };
        let effective = (pressure - self.0.threshold_pressure.si()).max(0.0);
        Pressing {
            line_pressure: Some(Pressure::from_si(pressure)),
            operator_force,
            fluid_volume: self.volume(pressure, faces),
            ..Pressing::by(Force::from_si(effective * self.force_per_pressure()))
        }
    }

    pub(super) fn needed(&self, clamp_force: Force, faces: u32) -> Pressing {
        let pressure =
            clamp_force.si() / self.force_per_pressure() + self.0.threshold_pressure.si();
        Pressing {
            line_pressure: Some(Pressure::from_si(pressure)),
            operator_force: self
                .0
                .master_cylinder
                .map(|master| Force::from_si(pressure / master.gain(1.0))),
            fluid_volume: self.volume(pressure, faces),
            ..Pressing::by(clamp_force)
        }
    }
}

fn circle(diameter: Length) -> Area {
    Area::from_si(0.25 * PI * diameter.si() * diameter.si())
}
