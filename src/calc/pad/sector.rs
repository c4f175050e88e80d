//! Pads in the shape of a sector of a ring.

use std::f64::consts::TAU;

use super::{Extent, Pad, PadIntegrals, PadKind};
use crate::calc::fault::{FaultCode, Faults};
use crate::calc::quantity::{Angle, Area, Length, Si, Volume};
use crate::method_sheet;

method_sheet! {
    SECTOR_UNIFORM_WEAR {
        id: "pad.annular_sector.uniform_wear",
        name: "Annular sector pad, uniform wear",
        equation: "p r = p_max r_i;  F = theta p_max r_i (r_o - r_i);  r_e = (r_o + r_i)/2;  r_F = r_e 2 sin(theta/2)/theta",
        symbols: [
            ("p", "pressure at the radius r", "Pa"),
            ("p_max", "peak pressure, at the inner radius", "Pa"),
            ("r_i", "inner radius", "m"),
            ("r_o", "outer radius", "m"),
            ("theta", "included angle", "rad"),
            ("F", "clamp force", "N"),
            ("r_e", "effective radius: arm of the friction force", "m"),
            ("r_F", "distance of the force center from the axis", "m"),
        ],
        valid: "0 < r_i < r_o, 0 < theta <= 2 pi; a run-in pad on a flat, stiff backing",
        accuracy: "exact for the assumed pressure; the lower, cautious torque of the two distributions",
        source: "Shigley, Mechanical Engineering Design, 8th/9th ed., section 16-6, eqs 16-28 to 16-37 (from memory); p r = const: Orthwein, Clutches and Brakes, 2nd ed., ch. 1 (seen)",
        provenance: Memory,
        worked: "r_i 3.875 in, r_o 5.5 in, 108 deg: r_e 4.6875 in, r_F 4.0237 in (Shigley, example 16-3)",
    }
    SECTOR_UNIFORM_PRESSURE {
        id: "pad.annular_sector.uniform_pressure",
        name: "Annular sector pad, uniform pressure",
        equation: "p = p_max;  F = theta/2 p_max (r_o^2 - r_i^2);  r_e = 2/3 (r_o^3 - r_i^3)/(r_o^2 - r_i^2);  r_F = r_e 2 sin(theta/2)/theta",
        symbols: [
            ("p", "pressure", "Pa"),
            ("p_max", "peak pressure, everywhere", "Pa"),
            ("r_i", "inner radius", "m"),
            ("r_o", "outer radius", "m"),
            ("theta", "included angle", "rad"),
            ("F", "clamp force", "N"),
            ("r_e", "effective radius: arm of the friction force", "m"),
            ("r_F", "distance of the force center from the axis", "m"),
        ],
        valid: "0 < r_i < r_o, 0 < theta <= 2 pi; a new pad on a flat, stiff backing",
        accuracy: "exact for the assumed pressure",
        source: "Shigley, Mechanical Engineering Design, 8th/9th ed., section 16-6, eqs 16-28 to 16-37",
        provenance: Memory,
        worked: "r_i 100 mm, r_o 150 mm: r_e 126.6667 mm (Bhandari, Design of Machine Elements, example 12.12)",
    }
}

/// A full turn may come out of a unit conversion a little too large, or be written with ten digits.
const FULL_TURN_ALLOWANCE: f64 = 1e-9; // relative

impl Pad {
    /// A sector of a ring, symmetrical about the x axis; `angle` in (0, 2π], 2π being a full ring.
    ///
    /// See [`SECTOR_UNIFORM_WEAR`] and [`SECTOR_UNIFORM_PRESSURE`].
    ///
    /// # Errors
    /// Every fault of `inner_radius`, `outer_radius` and `angle`; integrals that overflow.
    pub fn annular_sector(
        inner_radius: Length,
        outer_radius: Length,
        angle: Angle,
    ) -> Result<Self, Faults> {
        let mut faults = Faults::new();
        faults.positive("inner_radius", inner_radius);
        faults.positive("outer_radius", outer_radius);
        let (inner, outer) = (inner_radius.si(), outer_radius.si());
        if faults.is_empty() {
            let detail = "must lie above the inner radius";
            let holds = outer > inner;
            faults.require(holds, "outer_radius", FaultCode::NotAboveInnerRadius, detail);
        }
        let below_full_turn = angle.si() <= TAU * (1.0 + FULL_TURN_ALLOWANCE);
        if below_full_turn || angle.si().is_nan() {
            faults.positive("angle", angle);
        } else {
            faults.add("angle", FaultCode::OutOfRange, "must not be above 360 deg");
        }
        if !faults.is_empty() {
            return Err(faults);
        }
        let angle = angle.si().min(TAU);
        let extent = Extent { smallest_radius: inner, largest_radius: outer, angular_width: angle };
        Self::checked(PadKind::AnnularSector, integrals(inner, outer, angle), &extent)
    }
}

/// Radii in m, angle in rad. Differences of powers are split into factors, so that a narrow ring stays exact.
fn integrals(inner: f64, outer: f64, angle: f64) -> PadIntegrals {
    let width = outer - inner;
    // A full ring balances about the axis; sin π in binary would leave a trace of the angle's rounding.
    let chord = if angle < TAU { 2.0 * libm::sin(angle / 2.0) } else { 0.0 };
    let half_square_difference = width * (outer + inner) / 2.0;
    let third_cube_difference = width * (outer * outer + outer * inner + inner * inner) / 3.0;
    PadIntegrals {
        area: Area::from_si(angle * half_square_difference),
        area_per_radius: Length::from_si(angle * width),
        radius_moment: Volume::from_si(angle * third_cube_difference),
        x_moment: Volume::from_si(chord * third_cube_difference),
        y_moment: Volume::from_si(0.0),
        x_per_radius: Area::from_si(chord * half_square_difference),
        y_per_radius: Area::from_si(0.0),
    }
}
