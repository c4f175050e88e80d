//! One brake: what rubs, on what, pressed by what.

use super::actuation::{Actuation, Pressing};
use super::disc::Disc;
use super::fault::{FaultCode, Faults};
use super::finding::{Caution, CheckCode, Comparison, Notice, Remarks, Severity, Subject};
use super::friction::FrictionCase;
use super::heat::partition::SweptRing;
use super::lining::{Given, Limit, Lining};
use super::method::Provenance;
use super::pad::Pad;
use super::pressure::{PressureDistribution, mean_pressure};
use super::quantity::{
    Amount, Dimension, Force, Length, Pressure, PressureVelocity, Si, Torque, Velocity,
};

/// A brake, as given.
#[derive(Debug, Clone, PartialEq)]
pub struct BrakeParts {
    /// One pad.
    pub pad: Pad,
    /// Its material.
    pub lining: Lining,
    /// Friction faces, 1 to 1000; one caliper with two pads has 2. With a disc 1 or 2.
    pub faces: u32,
    /// How the pressure spreads over the pad.
    pub pressure_distribution: PressureDistribution,
    /// What the pads rub on, if temperatures are wanted.
    pub disc: Option<Disc>,
    /// What presses, if forces are wanted.
    pub actuation: Option<Actuation>,
}

/// A brake that can exist.
#[derive(Debug, Clone, PartialEq)]
pub struct Brake(BrakeParts);

impl Brake {
    /// Checks that the parts fit each other.
    ///
    /// # Errors
    /// A face count out of range, or a pad that leaves its disc.
    pub fn new(parts: BrakeParts) -> Result<Self, Faults> {
        let mut faults = Faults::new();
        check_faces(&mut faults, parts.faces);
        if let Some(disc) = &parts.disc {
            let is_known = parts.faces <= 2;
            faults.require(
                is_known,
                "faces",
                FaultCode::OutOfRange,
                "must be 1 or 2 with a disc; several discs are several brakes",
            );
            faults.part(
                "pad",
                SweptRing::new(parts.pad.smallest_radius(), parts.pad.largest_radius(), disc),
            );
        }
        faults.into_result(Self(parts))
    }

    /// The parts.
    #[must_use]
    pub const fn parts(&self) -> &BrakeParts {
        &self.0
    }

    /// Radius at which the friction force acts.
    #[must_use]
    pub fn effective_radius(&self) -> Length {
        self.0.pressure_distribution.effective_radius(&self.0.pad)
    }

    /// Torque of the brake per clamp force, m.
    #[must_use]
    pub fn torque_per_clamp_force(&self, case: FrictionCase) -> f64 {
        f64::from(self.0.faces) * self.0.lining.friction().at(case) * self.effective_radius().si()
    }

    /// Torque of the brake at a clamp force.
    #[must_use]
    pub fn torque(&self, case: FrictionCase, clamp_force: Force) -> Torque {
        Torque::from_si(self.torque_per_clamp_force(case) * clamp_force.si())
    }

    /// Clamp force that gives a torque.
    #[must_use]
    pub fn clamp_force_for(&self, case: FrictionCase, torque: Torque) -> Force {
        Force::from_si(torque.si() / self.torque_per_clamp_force(case))
    }

    /// Highest pressure on the pad at a clamp force.
    #[must_use]
    pub fn peak_pressure(&self, clamp_force: Force) -> Pressure {
        self.0.pressure_distribution.peak_pressure(&self.0.pad, clamp_force)
    }

    /// Notes the methods of the pad and its remarks, for the brake that `at` names the inputs of.
    pub fn remark(&self, remarks: &mut Remarks, fitted_index: Option<usize>) {
        remarks.method(self.0.pressure_distribution.method(self.0.pad.kind()));
        remark_pad(remarks, &self.0.pad, fitted_index);
        remark_lining(remarks, &self.0.lining, fitted_index);
        if let Some(actuation) = &self.0.actuation {
            remark_actuation(remarks, actuation, fitted_index);
        }
    }

    /// Holds what acts on the brake against the lining's and the actuation's limits.
    pub fn compare_pressing(
        &self,
        remarks: &mut Remarks,
        index: Option<usize>,
        pressing: &Pressing,
        case: Option<FrictionCase>,
    ) {
        compare_peak_pressure(
            remarks,
            &self.0.lining,
            self.peak_pressure(pressing.highest_clamp_force),
            index,
            case,
        );
        for maximum in self.actuation_limits(pressing) {
            remarks.compare(maximum.comparison(index, case), 0.0);
        }
    }

    /// The actuation's own maxima with what acts.
    fn actuation_limits(&self, pressing: &Pressing) -> Vec<Maximum> {
        let pressure = |code, input, what, actual, limit| {
            Maximum::of(Dimension::Pressure, (code, input, what), actual, limit)
        };
        let operator = |input, limit| {
            let words = (CheckCode::OperatorForce, input, "the operator's force");
            Maximum::of(Dimension::Force, words, pressing.operator_force, limit)
        };
        let found = match &self.0.actuation {
            None | Some(Actuation::ClampForce(_)) => [None, None],
            Some(Actuation::Hydraulic(chain)) => {
                let (input, what) = ("actuation/max_line_pressure", "the line pressure");
                let master = chain
                    .parts()
                    .master_cylinder
                    .and_then(|master| master.parts().max_operator_force);
                [
                    pressure(
                        CheckCode::LinePressure,
                        input,
                        what,
                        pressing.line_pressure,
                        chain.parts().max_line_pressure,
                    ),
                    operator("actuation/master_cylinder/max_operator_force", master),
                ]
            }
            Some(Actuation::Cable(chain)) => {
                [operator("actuation/max_operator_force", chain.parts().max_operator_force), None]
            }
            Some(Actuation::Pneumatic(chain)) => {
                let (input, what) = ("actuation/max_air_pressure", "the air pressure");
                [
                    pressure(
                        CheckCode::AirPressure,
                        input,
                        what,
                        pressing.air_pressure,
                        chain.parts().max_air_pressure,
                    ),
                    None,
                ]
            }
            Some(Actuation::Spring(chain)) => {
                let (input, what) = ("actuation/max_release_pressure", "the release pressure");
                let limit = chain.parts().max_release_pressure;
                [
                    pressure(
                        CheckCode::ReleasePressure,
                        input,
                        what,
                        pressing.release_pressure,
                        limit,
                    ),
                    None,
                ]
            }
        };
        found.into_iter().flatten().collect()
    }

    /// Holds the travel of the control against its maximum.
    pub fn compare_stroke(
        &self,
        remarks: &mut Remarks,
        fitted_index: Option<usize>,
        stroke: Option<Length>,
        friction_case: Option<FrictionCase>,
    ) {
        let Some(Actuation::Hydraulic(chain)) = &self.0.actuation else { return };
        let limit = chain.parts().master_cylinder.and_then(|master| master.parts().max_stroke);
        let words = (
            CheckCode::OperatorStroke,
            "actuation/master_cylinder/max_stroke",
            "the travel of the control",
        );
        if let Some(maximum) = Maximum::of(Dimension::Length, words, stroke, limit) {
            remarks.compare(maximum.comparison(fitted_index, friction_case), 0.0);
        }
    }

    /// Holds the rubbing at the highest shaft speed against the lining's limits.
    pub fn compare_rubbing(
        &self,
        remarks: &mut Remarks,
        index: Option<usize>,
        shaft_speed: f64,
        clamp_force: Force,
        case: Option<FrictionCase>,
    ) {
        let lining = &self.0.lining;
        let rubbing = Velocity::from_si(shaft_speed * self.0.pad.largest_radius().si());
        compare_limit(
            remarks,
            lining.parts().max_rubbing_speed,
            Rated {
                code: CheckCode::RubbingSpeed,
                input: "lining/max_rubbing_speed",
                dimension: Dimension::Speed,
                what: "the rubbing speed at the pad's outer radius",
            },
            rubbing.si(),
            index,
            case,
        );
        let pressure = mean_pressure(&self.0.pad, clamp_force);
        let speed = shaft_speed * self.effective_radius().si();
        compare_limit(
            remarks,
            lining.parts().max_pressure_velocity,
            Rated {
                code: CheckCode::PressureVelocity,
                input: "lining/max_pressure_velocity",
                dimension: Dimension::PressureVelocity,
                what: "mean pressure times rubbing speed",
            },
            PressureVelocity::from_si(pressure.si() * speed).si(),
            index,
            case,
        );
    }
}

/// A maximum of an actuation with what acts.
struct Maximum {
    code: CheckCode,
    input: &'static str,
    what: &'static str,
    actual: Amount,
    limit: Amount,
}

impl Maximum {
    fn of<Q: Si>(
        dimension: Dimension,
        (code, input, what): (CheckCode, &'static str, &'static str),
        actual: Option<Q>,
        limit: Option<Q>,
    ) -> Option<Self> {
        let (actual, limit) = (Amount::new(dimension, actual?), Amount::new(dimension, limit?));
        Some(Self { code, input, what, actual, limit })
    }

    fn comparison(
        &self,
        fitted_index: Option<usize>,
        friction_case: Option<FrictionCase>,
    ) -> Comparison {
        let subject = Subject::Brake { fitted_index, input: self.input };
        Comparison {
            code: self.code,
            subject,
            friction_case,
            actual: self.actual,
            limit: self.limit,
            what: self.what,
        }
    }
}

/// Demands a sensible number of friction faces.
pub(crate) fn check_faces(faults: &mut Faults, faces: u32) {
    faults.require(
        (1..=1000).contains(&faces),
        "faces",
        FaultCode::OutOfRange,
        "must lie between 1 and 1000",
    );
}

/// A limit of a lining in words: its check, input, dimension and what is held against it.
#[derive(Debug, Clone, Copy)]
pub struct Rated {
    /// The check.
    pub code: CheckCode,
    /// The input that gives the limit, below the brake.
    pub input: &'static str,
    /// What is measured.
    pub dimension: Dimension,
    /// The value in words.
    pub what: &'static str,
}

/// Holds a value against a lining's limit, if there is one.
pub fn compare_limit<Q: Si>(
    remarks: &mut Remarks,
    limit: Option<Limit<Q>>,
    rated: Rated,
    actual: f64,
    index: Option<usize>,
    case: Option<FrictionCase>,
) {
    compare_limit_above(remarks, limit, rated, actual, (index, case), 0.0);
}

/// The same for temperatures, which count from `ambient`, K.
pub fn compare_limit_above<Q: Si>(
    remarks: &mut Remarks,
    limit: Option<Limit<Q>>,
    rated: Rated,
    actual: f64,
    at: (Option<usize>, Option<FrictionCase>),
    ambient: f64,
) {
    let Some(limit) = limit else { return };
    // A catalog row stands in for the member: then the row's identifier is what the caller wrote.
    let input = match limit.given {
        Given::Caller => rated.input,
        Given::Catalog => "lining/id",
    };
    let amount = |si| Amount { dimension: rated.dimension, si };
    let subject = Subject::Brake { fitted_index: at.0, input };
    let comparison = Comparison {
        code: rated.code,
        subject,
        friction_case: at.1,
        actual: amount(actual),
        limit: amount(limit.value.si()),
        what: rated.what,
    };
    remarks.compare(comparison, ambient);
}

/// Holds a peak pressure against the lining's maximum.
pub fn compare_peak_pressure(
    remarks: &mut Remarks,
    lining: &Lining,
    peak: Pressure,
    index: Option<usize>,
    case: Option<FrictionCase>,
) {
    let rated = Rated {
        code: CheckCode::PadPeakPressure,
        input: "lining/max_pressure",
        dimension: Dimension::Pressure,
        what: "the peak pressure on the lining",
    };
    compare_limit(remarks, lining.parts().max_pressure, rated, peak.si(), index, case);
}

/// Says what is unusual about a pad.
pub fn remark_pad(remarks: &mut Remarks, pad: &Pad, fitted_index: Option<usize>) {
    if pad.angular_width().si() > 120.0_f64.to_radians() {
        let subject = Subject::Brake { fitted_index, input: "pad" };
        let detail =
            "the pad spans more than 120 deg of the disc; even contact over that width is doubtful";
        remarks.notice(Notice::PadUnusuallyWide, Severity::Info, subject, detail);
    }
}

/// Says what is unusual or uncertain about a lining.
pub fn remark_lining(remarks: &mut Remarks, lining: &Lining, fitted_index: Option<usize>) {
    let subject = |input| Subject::Brake { fitted_index, input };
    let mut info =
        |code, input, detail: &str| remarks.notice(code, Severity::Info, subject(input), detail);
    if !lining.friction().is_range() {
        let detail =
            "one friction value serves as low, nominal and high: give a range to see the spread";
        info(Notice::FrictionRangeNotGiven, "lining/friction", detail);
    }
    if lining.friction().at(FrictionCase::High) > 0.8 {
        info(
            Notice::FrictionUnusuallyHigh,
            "lining/friction",
            "the friction coefficient is above 0.8, which few pairs reach",
        );
    }
    if lining.parts().origin.friction_code.is_some() {
        let detail = "the friction code identifies a class of lining in a bench test; it is not a rating of this brake";
        info(Notice::FrictionCodeIsNotARating, "lining/friction_code", detail);
    }
    if lining.parts().origin.provenance == Some(Provenance::Memory) {
        info(
            Notice::ValueFromMemory,
            "lining/id",
            "the lining's row was entered from memory of its source",
        );
        remarks.caution(Caution::FromMemory);
    }
    if lining.parts().origin.contains_asbestos {
        remarks.caution(Caution::Asbestos);
    }
}

fn remark_actuation(remarks: &mut Remarks, actuation: &Actuation, fitted_index: Option<usize>) {
    let subject = || Subject::Brake { fitted_index, input: "actuation" };
    if let Some(method) = actuation.method() {
        remarks.method(method);
    }
    if actuation.is_lossless() {
        let detail =
            "every efficiency of the actuation is 1: real chains lose 5 to 30 % of the force";
        remarks.notice(Notice::LosslessActuation, Severity::Info, subject(), detail);
    }
    if let Actuation::Spring(spring) = actuation
        && !spring.considers_wear()
    {
        let detail = "the spring force lost as the pads wear is not considered: give spring_rate and pad_wear_travel";
        remarks.notice(Notice::SpringWearNotConsidered, Severity::Info, subject(), detail);
    }
}
