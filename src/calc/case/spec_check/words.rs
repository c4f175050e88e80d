//! Checks in words: one sentence that a configurator can show.

use super::check::{Check, Status};
use crate::calc::finding::CheckCode;

/// What a check holds against its limit, as the subject of a sentence.
#[must_use]
pub const fn subject_of(code: CheckCode) -> &'static str {
    match code {
        CheckCode::Stops => "what drives the machine against its brakes",
        CheckCode::StoppingDistance => "the stopping distance",
        CheckCode::StoppingTime => "the stopping time",
        CheckCode::MeanDeceleration => "the mean deceleration",
        CheckCode::MeanFullyDevelopedDeceleration => "the mean fully developed deceleration",
        CheckCode::PeakDecelerationMinimum => "the deceleration reached",
        CheckCode::PeakDeceleration => "the highest deceleration",
        CheckCode::BrakingRatio => "the braking force over the weight",
        CheckCode::PadPeakPressure => "the peak pressure on the lining",
        CheckCode::RubbingSpeed => "the rubbing speed at the pad's outer radius",
        CheckCode::PressureVelocity => "mean pressure times rubbing speed",
        CheckCode::PowerFlux => "the highest friction power per pad area",
        CheckCode::EnergyFlux => "the friction energy per pad area",
        CheckCode::LinePressure => "the line pressure",
        CheckCode::OperatorForce => "the operator's force",
        CheckCode::OperatorStroke => "the travel of the control",
        CheckCode::ReleasePressure => "the release pressure",
        CheckCode::AirPressure => "the air pressure",
        CheckCode::Adhesion => "what the brakes of an axle ask of its tires",
        CheckCode::RearWheelLift => "the force that lifts the rear wheel",
        CheckCode::AxleLockOrder => "the order in which the axles lock",
        CheckCode::DiscBulkTemperature => "the bulk temperature of the disc",
        CheckCode::SurfaceTemperature => "the temperature of the rubbed surface",
        CheckCode::HoldingTorque => "what the brakes hold at rest",
        CheckCode::HoldingAdhesion => "what the tires hold at rest",
        CheckCode::PadLife => "the life of the pad",
    }
}

/// One sentence about a check.
#[must_use]
pub fn detail(check: &Check, status: Status) -> String {
    let what = subject_of(check.code);
    let used = check.compared().and_then(|compared| compared.utilization);
    let share =
        used.map_or_else(String::new, |used| format!(": {:.1} % of it is used", 100.0 * used));
    let heat = if check.hot { ", hot" } else { "" };
    match status {
        Status::Met => format!("{what}{heat} keeps within its limit{share}"),
        Status::NearLimit => format!("{what}{heat} comes close to its limit{share}"),
        Status::NotMet => format!("{what}{heat} does not keep within its limit{share}"),
        Status::NotAssessed if check.missing().is_empty() => {
            format!("{what} could not be judged, because the stop does not end")
        }
        Status::NotAssessed => format!("{what} could not be judged: inputs are missing"),
        Status::Waived => format!("{what} was not judged, for the reason that was given"),
    }
}
