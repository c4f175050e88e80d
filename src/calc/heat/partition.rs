//! Which part of the friction heat enters the disc, and through which area.

use super::substance::Substance;
use crate::calc::disc::Disc;
use crate::calc::fault::{FaultCode, Faults};
use crate::calc::quantity::{Area, Length, Si};
use crate::method_sheet;

/// Radii that differ by less than this share of the disc's radius are the same: they come from
/// different units and formulas, so their last digits may differ.
const SAME_RADIUS: f64 = 1e-9;

method_sheet! {
    SWEPT_RING {
        id: "heat.swept_ring",
        name: "Area that a pad sweeps on one face of the disc",
        equation: "A_swept = pi (r_o^2 - r_i^2)",
        symbols: [
            ("A_swept", "swept area per face", "m2"),
            ("r_o", "largest radius of the pad", "m"),
            ("r_i", "smallest radius of the pad", "m"),
        ],
        valid: "0 <= r_i < r_o, both within the disc.",
        accuracy: "Exact.",
        source: "Geometry.",
        provenance: Seen,
        worked: "r_i = 0.1 m, r_o = 0.2 m: pi 0.03 m2 = 0.0942478 m2.",
    }
    PARTITION {
        id: "heat.partition",
        name: "Share of the friction heat that enters the disc",
        equation: "gamma = 1 / (1 + (A_pad / A_swept) b_pad / b_disc), b = sqrt(k rho c)",
        symbols: [
            ("gamma", "share of the heat that enters the disc", "1"),
            ("A_pad", "summed pad area per face of the disc", "m2"),
            ("A_swept", "swept area per face", "m2"),
            ("b_pad", "thermal effusivity of the lining", "W.s0.5/(m2.K)"),
            ("b_disc", "thermal effusivity of the disc", "W.s0.5/(m2.K)"),
            ("k", "thermal conductivity", "W/(m.K)"),
            ("rho", "density", "kg/m3"),
            ("c", "specific heat capacity", "J/(kg.K)"),
        ],
        valid: "Both bodies thick against the depth that the heat reaches; equal mean contact temperature.",
        accuracy: "Exact for two half-spaces; published variants of this rule differ by some percent.",
        source: "Charron's partition with coverage of the track; half-space effusivities after Blok and Jaeger",
        provenance: Memory,
        worked: "Iron 48.5 W/(m.K), 7200 kg/m3, 500 J/(kg.K) with a pad of 1.0, 2200, 1000: full cover 0.8991, one fifth covered 0.9780.",
    }
}

/// The ring that pads sweep on one face of a disc ([`SWEPT_RING`]). Proof that it lies on its disc.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct SweptRing {
    inner_radius: Length,
    outer_radius: Length,
}

impl SweptRing {
    /// The ring between the smallest and largest radius of a pad on `disc`.
    ///
    /// # Errors
    /// Radii out of order, or a pad beyond the disc's inner or outer edge. The faults lie at the pad.
    pub fn new(inner_radius: Length, outer_radius: Length, disc: &Disc) -> Result<Self, Faults> {
        let mut faults = Faults::new();
        faults.not_negative("", inner_radius);
        let detail = "largest radius must be above the smallest";
        faults.require(outer_radius > inner_radius, "", FaultCode::NotAboveInnerRadius, detail);
        let margin = SAME_RADIUS * disc.outer_radius();
        let inside = inner_radius >= disc.inner_radius() - margin;
        let detail = "reaches below the inner radius of the disc";
        faults.require(inside, "", FaultCode::PadBeyondDisc, detail);
        let inside = outer_radius <= disc.outer_radius() + margin;
        let detail = "reaches beyond the outer radius of the disc";
        faults.require(inside, "", FaultCode::PadBeyondDisc, detail);
        faults.into_result(Self { inner_radius, outer_radius })
    }

    /// Smallest swept radius.
    #[must_use]
    pub const fn inner_radius(&self) -> Length {
        self.inner_radius
    }

    /// Largest swept radius.
    #[must_use]
    pub const fn outer_radius(&self) -> Length {
        self.outer_radius
    }

    /// Swept area per face ([`SWEPT_RING`]).
    #[must_use]
    pub fn area(&self) -> Area {
        let (inner, outer) = (self.inner_radius, self.outer_radius);
        std::f64::consts::PI * (outer - inner) * (outer + inner)
    }
}

/// Share of the friction heat that enters the disc, in (0, 1] ([`PARTITION`]).
///
/// `pad_area` is the summed area of the pads on one face of the disc.
#[must_use]
pub fn disc_share(pad_area: Area, swept_area: Area, lining: &Substance, disc: &Substance) -> f64 {
    let coverage = pad_area.si() / swept_area.si();
    1.0 / (1.0 + coverage * lining.effusivity() / disc.effusivity())
}
