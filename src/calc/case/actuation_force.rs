//! What must press so that one brake gives a torque.

use crate::calc::actuation::{Actuation, Chosen, Input as Driving, Pressing};
use crate::calc::brake::{Brake, Spot};
use crate::calc::fault::{FaultCode, Faults};
use crate::calc::finding::{Finding, Notice, Remarks, Severity, Subject, WarningCode};
use crate::calc::friction::FrictionCase;
use crate::calc::pressure::{FRICTION_TORQUE, mean_pressure};
use crate::calc::quantity::{Amount, Dimension, Force, Length, Pressure, Si, Torque};

/// A brake and the torque asked of it.
#[derive(Debug, Clone, PartialEq)]
pub struct Input {
    /// The brake.
    pub brake: Brake,
    /// Torque demanded of this one brake.
    pub torque: Torque,
}

/// What must press.
#[derive(Debug, Clone)]
pub struct Outcome {
    /// Results once per friction case.
    pub friction_cases: Vec<CaseOutcome>,
    /// What is to be said about them.
    pub remarks: Remarks,
}

/// What must press at one friction.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct CaseOutcome {
    /// Which.
    pub friction_case: FrictionCase,
    /// Friction coefficient.
    pub coefficient: f64,
    /// Clamp force that gives the torque.
    pub clamp_force: Force,
    /// Mean pressure; of a spring brake with new pads.
    pub mean_pressure: Pressure,
    /// Highest pressure; of a spring brake with new pads.
    pub peak_pressure: Pressure,
    /// Highest pressure over the lining's maximum, if that is known.
    pub pressure_utilization: Option<f64>,
    /// What acts in the chain, if one is given.
    pub needed: Option<Pressing>,
    /// Travel of the control, if the chain tells.
    pub operator_stroke: Option<Length>,
}

/// What is impossible about a demand. Members are those of the request.
#[must_use]
pub fn faults(torque: Torque, actuation: Option<&Actuation>) -> Faults {
    let mut faults = Faults::new();
    faults.positive("torque", torque);
    if let Some(member) = actuation.and_then(given_input) {
        let detail = "is what this calculation finds: leave it out, or give its maximum instead";
        faults.add(format!("brake/actuation/{member}"), FaultCode::NotApplicable, detail);
    }
    faults
}

/// Finds what must press.
///
/// # Errors
/// A torque that is not positive, or a chain that already has the input to be found.
pub fn evaluate(input: &Input) -> Result<Outcome, Faults> {
    let faults = faults(input.torque, input.brake.parts().actuation.as_ref());
    let mut remarks = Remarks::new();
    input.brake.remark(&mut remarks, None);
    remarks.method(&FRICTION_TORQUE);
    let cases = input.brake.parts().lining.friction().cases();
    let friction_cases = cases.iter().map(|&case| computed(input, case, &mut remarks)).collect();
    faults.into_result(Outcome { friction_cases, remarks })
}

/// The input that a chain has but should leave open.
fn given_input(actuation: &Actuation) -> Option<&'static str> {
    match actuation {
        Actuation::ClampForce(force) => force.map(|_| "force"),
        Actuation::Hydraulic(chain) => {
            let operator =
                chain.parts().master_cylinder.and_then(|master| master.parts().operator_force);
            let line = chain.parts().line_pressure.map(|_| "line_pressure");
            line.or_else(|| operator.map(|_| "master_cylinder/operator_force"))
        }
        Actuation::Cable(chain) => chain.parts().operator_force.map(|_| "operator_force"),
        Actuation::Pneumatic(chain) => chain.parts().air_pressure.map(|_| "air_pressure"),
        Actuation::Spring(chain) => chain.parts().spring_force.map(|_| "spring_force"),
    }
}

fn computed(input: &Input, case: FrictionCase, remarks: &mut Remarks) -> CaseOutcome {
    let parts = input.brake.parts();
    let clamp_force = input.brake.clamp_force_for(case, input.torque);
    let needed =
        parts.actuation.as_ref().map(|actuation| actuation.needed(clamp_force, parts.faces));
    let highest = needed.map_or(clamp_force, |needed| needed.highest_clamp_force);
    let peak_pressure = input.brake.peak_pressure(highest);
    let operator_stroke = needed.and_then(|needed| stroke(parts.actuation.as_ref()?, &needed));
    let spot = Spot { fitted_index: None, friction_case: Some(case) };
    input.brake.hold_pressing(remarks, &needed.unwrap_or(Pressing::by(clamp_force)), spot);
    input.brake.hold_stroke(remarks, operator_stroke, spot);
    remark_shortfall(remarks, input, case);
    CaseOutcome {
        friction_case: case,
        coefficient: parts.lining.friction().at(case),
        clamp_force,
        mean_pressure: mean_pressure(&parts.pad, highest),
        peak_pressure,
        pressure_utilization: parts
            .lining
            .parts()
            .max_pressure
            .map(|limit| peak_pressure.si() / limit.value.si()),
        needed,
        operator_stroke,
    }
}

/// Travel of the control for this one brake.
fn stroke(actuation: &Actuation, needed: &Pressing) -> Option<Length> {
    let Actuation::Hydraulic(chain) = actuation else { return None };
    Some(chain.parts().master_cylinder.as_ref()?.stroke(needed.fluid_volume?))
}

/// Says by how much the maxima given fall short of the demand.
fn remark_shortfall(remarks: &mut Remarks, input: &Input, case: FrictionCase) {
    let parts = input.brake.parts();
    let Some(actuation) = &parts.actuation else { return };
    let Ok(Some(Chosen { input: driving, .. })) = actuation.chosen(1.0) else { return };
    let reached = input.brake.torque(case, actuation.press(driving, 1.0, parts.faces).clamp_force);
    if reached >= input.torque {
        return;
    }
    let member = match driving {
        Driving::Clamp(_) | Driving::SpringForce(_) => "actuation",
        Driving::LinePressure(_) => "actuation/max_line_pressure",
        Driving::AirPressure(_) => "actuation/max_air_pressure",
        Driving::OperatorForce(_) if matches!(actuation, Actuation::Cable(_)) => {
            "actuation/max_operator_force"
        }
        Driving::OperatorForce(_) => "actuation/master_cylinder/max_operator_force",
    };
    let share = 100.0 * (1.0 - reached.si() / input.torque.si());
    let worst = remarks
        .findings()
        .iter()
        .any(|known| known.code == WarningCode::Notice(Notice::DemandNotReached));
    // Cases come from low to high friction: the first shortfall is the largest.
    if !worst {
        remarks.find(Finding {
            code: WarningCode::Notice(Notice::DemandNotReached),
            severity: Severity::Exceeded,
            subject: Subject::Brake { fitted_index: None, input: member },
            friction_case: Some(case),
            actual: Some(Amount::new(Dimension::Torque, reached)),
            limit: Some(Amount::new(Dimension::Torque, input.torque)),
            detail: format!(
                "at its maximum the actuation falls short of the demanded torque by {share:.1} %"
            ),
        });
    }
}
