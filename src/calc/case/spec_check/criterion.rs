//! What each check compares, for people who recompute it: its symbols, its equation, and the methods behind it.

use crate::calc::finding::CheckCode;

/// How a value is held against its limit; utilization is 1 at the limit in each.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Sense {
    /// At most the limit: value over limit.
    AtMost,
    /// A temperature, at most the limit: rise above the surroundings over the allowed rise.
    RiseAtMost,
    /// At least the limit: limit over value.
    AtLeast,
    /// What is needed against what is available: the one over the other.
    Effort,
}

/// What a check compares. Equations are in the plain characters of the data sheets.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Criterion {
    /// How.
    pub sense: Sense,
    /// Symbol of the value.
    pub actual: &'static str,
    /// Symbol of the limit.
    pub limit: &'static str,
    /// The equation of the value; empty where only the methods can tell.
    pub equation: &'static str,
    /// What the symbols stand for, in words and symbols without brackets and signs.
    pub symbols: &'static str,
    /// Beginnings of the identifiers of the methods that find the value.
    pub methods: &'static [&'static str],
}

const MACHINE: &[&str] = &["machine.vehicle", "machine.shaft", "machine.hoist", "machine.conveyor"];
const EFFORT: &[&str] = &[
    "machine.vehicle",
    "machine.shaft",
    "machine.hoist",
    "machine.conveyor",
    "friction.torque",
    "lining.fade",
];
const MOTION: &[&str] = &[
    "motion.phases",
    "motion.speed",
    "machine.vehicle",
    "machine.shaft",
    "machine.hoist",
    "machine.conveyor",
];
const DEVELOPED: &[&str] =
    &["motion.mean_fully_developed", "motion.phases", "motion.speed", "machine.vehicle"];
const PRESSURE: &[&str] = &["pad.", "actuation."];
const ACTUATION: &[&str] = &["actuation."];
const TIRES: &[&str] = &["motion.axle_forces", "motion.phases", "machine.vehicle"];
const LOCK: &[&str] = &["motion.lock_order", "motion.axle_forces"];
const FLUX: &[&str] = &["energy.balance", "duty.", "friction.torque"];
const BULK: &[&str] = &[
    "energy.balance",
    "heat.swept_ring",
    "heat.partition",
    "heat.bulk_rise",
    "heat.enthalpy",
    "heat.lumped",
    "heat.repeated",
    "heat.cooling",
    "heat.descent",
    "duty.",
];
const SURFACE: &[&str] = &["energy.balance", "heat.", "duty."];

const fn criterion(
    sense: Sense,
    [actual, limit]: [&'static str; 2],
    equation: &'static str,
    symbols: &'static str,
    methods: &'static [&'static str],
) -> Criterion {
    Criterion { sense, actual, limit, equation, symbols, methods }
}

impl Criterion {
    /// The criterion of a check.
    #[must_use]
    #[expect(clippy::too_many_lines, reason = "a table: one entry for each check")]
    pub const fn of(code: CheckCode) -> Self {
        match code {
            CheckCode::StoppingDistance => criterion(
                Sense::AtMost,
                ["s", "s_max"],
                "s = integral of v dt",
                "v is the speed, t the time; counted from the signal, or from the control where a rule says so, to the final speed",
                MOTION,
            ),
            CheckCode::StoppingTime => criterion(
                Sense::AtMost,
                ["t", "t_max"],
                "t = t_end - t_start",
                "t counts from the signal, or from the control where a rule says so, to the final speed",
                MOTION,
            ),
            CheckCode::MeanDeceleration => criterion(
                Sense::AtLeast,
                ["d", "d_min"],
                "d = (v_b^2 - v_1^2)/(2 s_b)",
                "v_b is the speed at the first torque, v_1 the final one, s_b the distance between them",
                MOTION,
            ),
            CheckCode::MeanFullyDevelopedDeceleration => criterion(
                Sense::AtLeast,
                ["d_m", "d_min"],
                "d_m = (v_b^2 - v_e^2)/(2 (s_e - s_b))",
                "v_b is 0.8 of the initial speed, v_e one tenth of it, s_b and s_e the distances covered down to them",
                DEVELOPED,
            ),
            CheckCode::PeakDecelerationMinimum => criterion(
                Sense::AtLeast,
                ["d_p", "d_min"],
                "d_p = max(-dv/dt)",
                "d_p is the highest deceleration while torque acts; in a test cycle, that at full application where its brakes are weakest",
                MOTION,
            ),
            CheckCode::PeakDeceleration => criterion(
                Sense::AtMost,
                ["d_p", "d_max"],
                "d_p = max(-dv/dt)",
                "d_p is the highest deceleration while torque acts",
                MOTION,
            ),
            CheckCode::BrakingRatio => criterion(
                Sense::AtLeast,
                ["z", "z_min"],
                "z = sum F_i/(m g)",
                "F_i are the braking forces of the tires on the ground at their highest, m g is the weight",
                TIRES,
            ),
            CheckCode::Stops => criterion(
                Sense::Effort,
                ["F_d", "F_b"],
                "",
                "F_d is what drives the machine, F_b what the acting brakes give at full application; of a shaft both are torques",
                EFFORT,
            ),
            CheckCode::RubbingSpeed => criterion(
                Sense::AtMost,
                ["v_o", "v_max"],
                "v_o = w r_o",
                "w is the highest speed of the brake shaft, r_o the outer radius of the pad",
                MACHINE,
            ),
            CheckCode::PressureVelocity => criterion(
                Sense::AtMost,
                ["p_m v_e", "(p v)_max"],
                "p_m v_e = (F/A) w r_e",
                "F is the clamp force, A the area of a pad, w the highest speed of the brake shaft, r_e the effective radius",
                PRESSURE,
            ),
            CheckCode::PowerFlux => criterion(
                Sense::AtMost,
                ["q", "q_max"],
                "q = P/(n A)",
                "P is the highest friction power of the brake, n its number of friction faces, A the area of a pad",
                FLUX,
            ),
            CheckCode::EnergyFlux => criterion(
                Sense::AtMost,
                ["e", "e_max"],
                "e = E/(n A)",
                "E is the friction energy of the brake in one stop, n its number of friction faces, A the area of a pad",
                FLUX,
            ),
            CheckCode::DiscBulkTemperature => criterion(
                Sense::RiseAtMost,
                ["T_b", "T_max"],
                "",
                "T_b is the highest bulk temperature of the disc, T_a that of the air",
                BULK,
            ),
            CheckCode::SurfaceTemperature => criterion(
                Sense::RiseAtMost,
                ["T_s", "T_max"],
                "",
                "T_s is the highest temperature of the rubbed surface, T_a that of the air",
                SURFACE,
            ),
            CheckCode::PadLife => criterion(
                Sense::AtLeast,
                ["N", "N_min"],
                "N = A w/(K E_f)",
                "N is the number of stops, A the area of a pad, w its usable thickness, K the specific wear, E_f the energy of a face and stop",
                &["wear.", "energy.balance"],
            ),
            CheckCode::PadPeakPressure => criterion(
                Sense::AtMost,
                ["p_peak", "p_max"],
                "",
                "p_peak is the highest pressure on the lining at the clamp force that acts",
                PRESSURE,
            ),
            CheckCode::LinePressure => criterion(
                Sense::AtMost,
                ["p", "p_max"],
                "",
                "p is the hydraulic pressure at the caliper",
                ACTUATION,
            ),
            CheckCode::OperatorForce => criterion(
                Sense::AtMost,
                ["F_op", "F_max"],
                "",
                "F_op is the force on the control",
                ACTUATION,
            ),
            CheckCode::OperatorStroke => criterion(
                Sense::AtMost,
                ["x", "x_max"],
                "",
                "x is the travel of the control, of all brakes that it applies",
                ACTUATION,
            ),
            CheckCode::ReleasePressure => criterion(
                Sense::AtMost,
                ["p_release", "p_max"],
                "",
                "p_release opens the spring brake with new pads",
                ACTUATION,
            ),
            CheckCode::AirPressure => criterion(
                Sense::AtMost,
                ["p", "p_max"],
                "",
                "p is the air pressure at the chamber",
                ACTUATION,
            ),
            CheckCode::Adhesion => criterion(
                Sense::AtMost,
                ["F_i", "mu N_i"],
                "",
                "F_i is what the brakes of the worse axle ask of its tires, mu the adhesion, N_i the load of that axle",
                TIRES,
            ),
            CheckCode::RearWheelLift => criterion(
                Sense::AtMost,
                ["F", "F_lift"],
                "",
                "F is what retards the vehicle at the ground, F_lift what takes all load from its rear axle",
                TIRES,
            ),
            CheckCode::AxleLockOrder => criterion(
                Sense::AtMost,
                ["lambda_f/lambda_r", "1"],
                "",
                "lambda_f and lambda_r are the factors on all brake torques at which the front and the rear axle reach their adhesion",
                LOCK,
            ),
            CheckCode::HoldingAdhesion => criterion(
                Sense::Effort,
                ["H", "F_held"],
                "F_held = sum of min(T_i/r, mu N_i)",
                "H is what must be held; of each axle, T_i is the torque of its brakes, r the rolling radius, N_i its load; mu is the adhesion",
                &["machine.holding"],
            ),
            CheckCode::HoldingTorque => criterion(
                Sense::AtLeast,
                ["n", "n_min"],
                "n = B/H",
                "B is what the brakes hold at rest at the lowest friction, H what must be held",
                &["machine.holding", "friction.torque"],
            ),
        }
    }
}
