//! What a pad carries: force, pressure and torque.

use crate::calc::brake::{Spot, check_faces, lining_bound, remark_lining, remark_pad};
use crate::calc::fault::{FaultCode, Faults};
use crate::calc::finding::{CheckCode, Remarks};
use crate::calc::friction::FrictionCase;
use crate::calc::lining::Lining;
use crate::calc::pad::Pad;
use crate::calc::pressure::{
    FRICTION_TORQUE, PressureDistribution, friction_force_per_face, mean_pressure, torque_per_face,
};
use crate::calc::quantity::{Area, Force, Length, Pressure, Si, Torque};

/// A pad with its lining, as given.
#[derive(Debug, Clone, PartialEq)]
pub struct Input {
    /// One pad.
    pub pad: Pad,
    /// Its material.
    pub lining: Lining,
    /// Friction faces, 1 to 1000.
    pub faces: u32,
    /// How the pressure spreads.
    pub pressure_distribution: PressureDistribution,
    /// Clamp force; none: the one at which the peak pressure equals the lining's maximum.
    pub clamp_force: Option<Force>,
}

/// What the pad carries.
#[derive(Debug, Clone)]
pub struct Outcome {
    /// Area of one pad.
    pub pad_area: Area,
    /// Radius at which the friction force acts.
    pub effective_radius: Length,
    /// Distance of the force center from the axis.
    pub pressure_center_radius: Length,
    /// Clamp force.
    pub clamp_force: Force,
    /// Mean pressure.
    pub mean_pressure: Pressure,
    /// Highest pressure.
    pub peak_pressure: Pressure,
    /// Results that depend on friction.
    pub friction_cases: Vec<CaseOutcome>,
    /// What is to be said about them.
    pub remarks: Remarks,
}

/// What the pad carries at one friction.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct CaseOutcome {
    /// Which.
    pub friction_case: FrictionCase,
    /// Friction coefficient.
    pub coefficient: f64,
    /// Friction force of one face.
    pub friction_force_per_face: Force,
    /// Torque of one face.
    pub torque_per_face: Torque,
    /// Torque of all faces.
    pub torque: Torque,
}

/// What is impossible about the members beside pad and lining. Members are those of the request.
#[must_use]
pub fn faults(faces: u32, clamp_force: Option<Force>) -> Faults {
    let mut faults = Faults::new();
    check_faces(&mut faults, faces);
    if let Some(force) = clamp_force {
        faults.positive("clamp_force", force);
    }
    faults
}

/// Computes what a pad carries.
///
/// # Errors
/// No clamp force and no pressure limit to find one by, or a count of faces out of range.
pub fn evaluate(input: &Input) -> Result<Outcome, Faults> {
    let mut faults = faults(input.faces, input.clamp_force);
    let at_limit = || {
        let limit = input.lining.parts().max_pressure?;
        Some(input.pressure_distribution.clamp_force_at_peak(&input.pad, limit.value))
    };
    let Some(clamp_force) = input.clamp_force.or_else(at_limit) else {
        faults.add(
            "clamp_force",
            FaultCode::Missing,
            "give this, or lining/max_pressure to find it from",
        );
        return Err(faults);
    };
    let outcome = computed(input, clamp_force);
    faults.into_result(outcome)
}

fn computed(input: &Input, clamp_force: Force) -> Outcome {
    let (pad, distribution) = (&input.pad, input.pressure_distribution);
    let effective_radius = distribution.effective_radius(pad);
    let peak_pressure = distribution.peak_pressure(pad, clamp_force);
    let case = |&friction_case: &FrictionCase| {
        let coefficient = input.lining.friction().at(friction_case);
        let torque_per_face = torque_per_face(coefficient, clamp_force, effective_radius);
        CaseOutcome {
            friction_case,
            coefficient,
            friction_force_per_face: friction_force_per_face(coefficient, clamp_force),
            torque_per_face,
            torque: Torque::from_si(torque_per_face.si() * f64::from(input.faces)),
        }
    };
    Outcome {
        pad_area: pad.area(),
        effective_radius,
        pressure_center_radius: distribution.pressure_center_radius(pad),
        clamp_force,
        mean_pressure: mean_pressure(pad, clamp_force),
        peak_pressure,
        friction_cases: input.lining.friction().cases().iter().map(case).collect(),
        remarks: remarks(input, peak_pressure),
    }
}

fn remarks(input: &Input, peak_pressure: Pressure) -> Remarks {
    let mut remarks = Remarks::new();
    remarks.method(input.pressure_distribution.method(input.pad.kind()));
    remarks.method(&FRICTION_TORQUE);
    remark_pad(&mut remarks, &input.pad, None);
    remark_lining(&mut remarks, &input.lining, None);
    // At the lining's own limit the pressure equals it by choice: no warning for what was asked.
    let bound = lining_bound(&input.lining, CheckCode::PadPeakPressure);
    if let (Some(bound), Some(_)) = (bound, input.clamp_force) {
        let spot = Spot { fitted_index: None, friction_case: None };
        bound.hold(&mut remarks, peak_pressure.si(), spot, 0.0);
    }
    remarks
}
