//! The stop itself: every machine reduced to one motion, braked through delays and what the tires carry.
//!
//! One coordinate serves all machines: the way of a vehicle, load or belt (m), or the angle of a shaft (rad).
//! Numbers here are coherent SI `f64` along that coordinate; a *force* is then N or N·m and a *mass* kg or kg·m².

mod forces;
mod integrate;
mod lock;
mod path;
mod run_back;
mod stop;

pub use forces::{Axle, Forces, Instant, LimitedBy, Wheelbase};
pub use lock::{LockFactors, lock_factors};
pub use path::{Path, Phase, PhaseTotals, Point};
pub use run_back::RunBack;
pub use stop::{Delays, Demand, Ending, Stop, stop};

use super::method::Method;

/// The unit of the coordinate in which a machine moves.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Coordinate {
    /// A way, m.
    Way,
    /// An angle, rad.
    Angle,
}

/// A machine as its brakes see it, at one grade and one outside drive.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Reduced {
    /// What the coordinate measures.
    pub coordinate: Coordinate,
    /// Mass or inertia that brake forces at the contact decelerate.
    pub mass: f64,
    /// Rotating masses braked directly, as a share of `mass`: the rotating mass factor less one.
    pub rotating: f64,
    /// The part of `mass` that moves along a line, for the split of the kinetic energy.
    pub translating: f64,
    /// Constant force from outside, positive when it drives.
    pub outside: f64,
    /// What part of a resisting `outside` drives the machine back from rest: losses that add to it on the way
    /// forward take from it on the way back, so the square of the drive's efficiency. 1 without losses.
    pub reversal: f64,
    /// Constant resistance, always against the motion.
    pub resistance: f64,
    /// Resistance per speed squared.
    pub drag: f64,
    /// What carries the brake forces; none where no tire limits them.
    pub tires: Option<Tires>,
}

/// The contact of a vehicle with the ground.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Tires {
    /// Weight normal to the ground, N.
    pub normal_force: f64,
    /// Adhesion of tire and ground; none: not limited.
    pub adhesion: Option<f64>,
    /// Where the weight acts; none: the axles are not told apart.
    pub wheelbase: Option<Wheelbase>,
}

impl Reduced {
    /// All that resists less all that drives, without brakes, at `speed`.
    #[must_use]
    pub fn retarding(&self, speed: f64) -> f64 {
        self.resistance + self.drag * speed * speed - self.outside
    }

    /// What drives against the brakes at `speed`, 0 if nothing does.
    #[must_use]
    pub fn driving(&self, speed: f64) -> f64 {
        let retarding = self.retarding(speed);
        if retarding < 0.0 { -retarding } else { 0.0 }
    }

    /// What has to be decelerated in all.
    #[must_use]
    pub fn inertia(&self) -> f64 {
        self.mass * (1.0 + self.rotating)
    }

    /// The force that would move the machine backwards from rest; 0 if none does.
    #[must_use]
    pub fn reversing(&self) -> f64 {
        (-self.outside * self.reversal - self.resistance).max(0.0)
    }
}

crate::method_sheet! {
    PHASES {
        id: "motion.phases",
        name: "Stop through reaction, dead time, build-up and full braking",
        equation: "reaction: v = v_0; then m_e dv/dt = F_out(v) - B(t) with B = 0 in the dead time, B_full t/t_b in the build-up, then B_full, or what holds the deceleration asked for; s = integral of v dt",
        symbols: [("m_e", "effective mass or inertia", "kg or kg.m2"), ("v", "speed along the coordinate", "m/s or rad/s"),
            ("F_out", "outside forces, positive when driving", "N or N.m"), ("B", "brake force", "N or N.m"),
            ("t_b", "build-up time", "s"), ("s", "distance or angle", "m or rad")],
        valid: "Rigid drive; torque constant after build-up; a stop may end in any phase.",
        accuracy: "Closed form (cubic pieces) where no force depends on speed; else Dormand-Prince 5(4), within 1e-6 of an outside solver.",
        source: "Newton's second law; phases as in ISO 611 and UN R13 practice (clause numbers from memory); verified against an ODE solver.",
        provenance: Memory,
        worked: "30 m/s, dead time 0.9 s, build-up 0.4 s, 7 m/s2: 97.2390476 m in 5.3857143 s.",
    }
    DRAG {
        id: "motion.speed_dependent_resistance",
        name: "Stop against a resistance that grows with speed squared",
        equation: "m_e dv/dt = F_out - B - C v^2, C = rho c_d A / 2",
        symbols: [("C", "half air density times drag area", "N.s2/m2"), ("rho", "air density", "kg/m3"), ("c_d A", "drag area", "m2")],
        valid: "Still air; constant drag area.",
        accuracy: "Integrated, within 1e-9 of the closed form of a free stop; t = m/sqrt(AC) [atan(v0 sqrt(C/A)) - atan(v1 sqrt(C/A))].",
        source: "Newton's drag law; closed form by separation of variables.",
        provenance: Seen,
        worked: "m 1500 kg, A 7000 N, C 0.45 N.s2/m2, 55 m/s: 11.1001211 s, 296.1629807 m.",
    }
    MEAN_FULLY_DEVELOPED {
        id: "motion.mean_fully_developed_deceleration",
        name: "Mean fully developed deceleration",
        equation: "d_m = (v_b^2 - v_e^2) / (2 (s_e - s_b)), v_b = 0.8 v_0, v_e = 0.1 v_0",
        symbols: [("d_m", "mean fully developed deceleration", "m/s2"), ("v_0", "initial speed", "m/s"),
            ("s_b, s_e", "distance at v_b, v_e", "m")],
        valid: "Final speed not above 0.1 v_0.",
        accuracy: "Exact.",
        source: "UN R13 Annex 4 paragraph 1.1.2; directive 71/320/EEC annex II.",
        provenance: Seen,
        worked: "Constant 5 m/s2 from 20 m/s: s_e - s_b = 25.2 m, d_m = (256 - 4)/50.4 = 5 m/s2.",
    }
    AXLE_FORCES {
        id: "motion.axle_forces",
        name: "Axle loads and ground forces under braking",
        equation: "N_r = (m g cos(b) l_f - h (sum F + R)) / L; N_f = m g cos(b) - N_r; F_i = T_i/r - s_i (k-1) m a <= mu N_i; sum F + R <= m g cos(b) l_f/h",
        symbols: [("N", "normal force of an axle", "N"), ("F", "ground force of an axle", "N"), ("R", "rolling resistance", "N"),
            ("h", "height of the center of gravity", "m"), ("L", "wheelbase", "m"), ("l_f", "front axle to center of gravity", "m"),
            ("k", "rotating mass factor", "1"), ("mu", "adhesion", "1"), ("s_i", "axle's share of the demanded torque", "1")],
        valid: "Two axles, rigid suspension, steady braking; air drag at the center of gravity; wheel pitch reaction neglected.",
        accuracy: "Exact solution of the piecewise-linear balance under these assumptions.",
        source: "Statics of the braked two-axle vehicle (Limpert, Brake Design and Safety; from memory); verified by hand.",
        provenance: Memory,
        worked: "L 2.6, l_f 1.2, h 0.55 m, mu 0.8, level: front brakes only 0.5185185 g, rear only 0.3157895 g.",
    }
    LOCK_ORDER {
        id: "motion.lock_order",
        name: "Which axle reaches its adhesion first",
        equation: "lambda_i: factor on all brake torques at which F_i = mu N_i; the smaller locks first",
        symbols: [("lambda_i", "factor at which the axle locks", "1")],
        valid: "As for the axle forces; defined even if nothing locks.",
        accuracy: "Exact.",
        source: "Adhesion utilization of UN R13 Annex 10 and 49 CFR 571.135 S7.4 in another form.",
        provenance: Seen,
        worked: "L 2.6, l_f 1.2, h 0.55 m, mu 0.8, front share 0.65: rear first, at 0.7111111 g.",
    }
}

/// The sheets of this folder.
pub static METHODS: &[&Method] =
    &[&PHASES, &DRAG, &MEAN_FULLY_DEVELOPED, &AXLE_FORCES, &LOCK_ORDER];
