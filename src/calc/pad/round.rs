//! Round pads, by exact integrals.

use std::f64::consts::PI;

use super::elliptic::{CompleteIntegrals, complete};
use super::{Extent, Pad, PadIntegrals, PadKind};
use crate::calc::fault::{FaultCode, Faults};
use crate::calc::quantity::{Area, Length, Si, Volume};
use crate::method_sheet;

method_sheet! {
    ROUND_UNIFORM_WEAR {
        id: "pad.round.uniform_wear",
        name: "Round pad, uniform wear",
        equation: "p r = p_max (e - R);  r_e/e = pi/(4 (K - D));  F = p_max (e - R) pi R^2/r_e;  r_F = r_e 4/(3 pi) (2 K - (1 + m) D);  m = (R/e)^2",
        symbols: [
            ("p", "pressure at the radius r", "Pa"),
            ("p_max", "peak pressure, at the point nearest to the axis", "Pa"),
            ("R", "radius of the pad", "m"),
            ("e", "distance of the pad's center from the axis", "m"),
            ("m", "parameter of the elliptic integrals", "1"),
            ("K", "complete elliptic integral of the first kind", "1"),
            ("D", "complete elliptic integral (K - E)/m", "1"),
            ("F", "clamp force", "N"),
            ("r_e", "effective radius: arm of the friction force", "m"),
            ("r_F", "distance of the force center from the axis", "m"),
        ],
        valid: "0 < R < e; a run-in pad on a flat, stiff backing",
        accuracy: "exact for the assumed pressure. The table of 1972 that handbooks reprint (Fazekas, On Circular Spot Brakes, J. Eng. Ind. 94) gives effective radii up to 3.4 % smaller at the same model; no pressure field reproduces it for small pads, and it is not used here. Torque at a given peak pressure is the same either way.",
        source: "integrals of p r = const over a circle (Orthwein, Clutches and Brakes, 2nd ed., ch. 1, seen), derived and checked by quadrature; K and D: Abramowitz & Stegun, section 17.6 (from memory)",
        provenance: Memory,
        worked: "R 0.5 in, e 2 in: r_e/e = 0.992062; 350 psi peak: F = 207.82 lbf",
    }
    ROUND_UNIFORM_PRESSURE {
        id: "pad.round.uniform_pressure",
        name: "Round pad, uniform pressure",
        equation: "p = p_max;  F = p_max pi R^2;  r_e/e = 4/(9 pi) ((5 + 3 m) K - (1 + 7 m) D);  r_F = e;  m = (R/e)^2",
        symbols: [
            ("p", "pressure", "Pa"),
            ("p_max", "peak pressure, everywhere", "Pa"),
            ("R", "radius of the pad", "m"),
            ("e", "distance of the pad's center from the axis", "m"),
            ("m", "parameter of the elliptic integrals", "1"),
            ("K", "complete elliptic integral of the first kind", "1"),
            ("D", "complete elliptic integral (K - E)/m", "1"),
            ("F", "clamp force", "N"),
            ("r_e", "effective radius: arm of the friction force", "m"),
            ("r_F", "distance of the force center from the axis", "m"),
        ],
        valid: "0 < R < e; a new pad on a flat, stiff backing",
        accuracy: "exact for the assumed pressure. The table of 1972 that handbooks reprint (Fazekas, On Circular Spot Brakes, J. Eng. Ind. 94) is not of this distribution either, and is not used here.",
        source: "integrals of constant pressure over a circle, derived and checked by quadrature; K and D: Abramowitz & Stegun, section 17.6 (from memory)",
        provenance: Memory,
        worked: "R/e = 0.5: r_e/e = 1.031592",
    }
}

impl Pad {
    /// A full circle of `radius` whose center lies `center_radius` from the axis, on the x axis.
    ///
    /// See [`ROUND_UNIFORM_WEAR`] and [`ROUND_UNIFORM_PRESSURE`].
    ///
    /// # Errors
    /// Every fault of `radius` and `center_radius`; a pad that reaches the axis; integrals that overflow.
    pub fn round(radius: Length, center_radius: Length) -> Result<Self, Faults> {
        let mut faults = Faults::new();
        faults.positive("radius", radius);
        faults.positive("center_radius", center_radius);
        let (radius, center) = (radius.si(), center_radius.si());
        if faults.is_empty() {
            let detail = "must lie below the center radius: the pad may not reach the axis";
            faults.require(radius < center, "radius", FaultCode::PadReachesAxis, detail);
        }
        if !faults.is_empty() {
            return Err(faults);
        }
        let extent = Extent {
            smallest_radius: center - radius,
            largest_radius: center + radius,
            angular_width: 2.0 * libm::asin(radius / center),
        };
        Self::checked(PadKind::Round, integrals(radius, center), &extent)
    }
}

/// Radius and distance of the center, m.
fn integrals(radius: f64, center: f64) -> PadIntegrals {
    let ratio = radius / center;
    let complement = ((1.0 - ratio) * (1.0 + ratio)).sqrt();
    let CompleteIntegrals { k, d } = complete(ratio, complement);
    let parameter = ratio * ratio;
    let square = radius * radius;
    let area = PI * square;
    let pressure_ratio =
        4.0 / (9.0 * PI) * ((5.0 + 3.0 * parameter) * k - (1.0 + 7.0 * parameter) * d);
    PadIntegrals {
        area: Area::from_si(area),
        area_per_radius: Length::from_si(4.0 * (k - d) * ratio * radius),
        radius_moment: Volume::from_si(area * center * pressure_ratio),
        x_moment: Volume::from_si(area * center),
        y_moment: Volume::from_si(0.0),
        x_per_radius: Area::from_si(4.0 / 3.0 * square * (2.0 * k - (1.0 + parameter) * d)),
        y_per_radius: Area::from_si(0.0),
    }
}
