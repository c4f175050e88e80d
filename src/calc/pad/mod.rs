//! Pads: every outline reduces to seven integrals over its area and its smallest radius.
//!
//! Lengths are measured in the plane of the disc, r from the disc axis. A sector and a round pad lie
//! symmetrically about the x axis.

pub mod elliptic;
mod outline;
mod polygon;
mod round;
mod sector;

pub use outline::{OUTLINE_UNIFORM_PRESSURE, OUTLINE_UNIFORM_WEAR};
pub use round::{ROUND_UNIFORM_PRESSURE, ROUND_UNIFORM_WEAR};
pub use sector::{SECTOR_UNIFORM_PRESSURE, SECTOR_UNIFORM_WEAR};

use super::fault::{FaultCode, Faults};
use super::method::Method;
use super::quantity::{Angle, Area, Length, Si, Volume};

/// The sheets of this folder.
pub static METHODS: &[&Method] = &[
    &SECTOR_UNIFORM_WEAR,
    &SECTOR_UNIFORM_PRESSURE,
    &ROUND_UNIFORM_WEAR,
    &ROUND_UNIFORM_PRESSURE,
    &OUTLINE_UNIFORM_WEAR,
    &OUTLINE_UNIFORM_PRESSURE,
];

/// How the outline of a pad was given.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum PadKind {
    /// A sector of a ring.
    AnnularSector,
    /// A full circle.
    Round,
    /// A polygon.
    Outline,
}

impl PadKind {
    /// The name on the wire.
    #[must_use]
    pub const fn as_str(self) -> &'static str {
        match self {
            Self::AnnularSector => "annular_sector",
            Self::Round => "round",
            Self::Outline => "outline",
        }
    }
}

/// The integrals over a pad's area that carry every result about it.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct PadIntegrals {
    /// A = ∫dA, m².
    pub area: Area,
    /// I = ∫dA/r, m.
    pub area_per_radius: Length,
    /// J = ∫r dA, m³.
    pub radius_moment: Volume,
    /// X = ∫x dA, m³.
    pub x_moment: Volume,
    /// Y = ∫y dA, m³.
    pub y_moment: Volume,
    /// W = ∫x/r dA, m².
    pub x_per_radius: Area,
    /// V = ∫y/r dA, m².
    pub y_per_radius: Area,
}

/// One pad: the area that one face of the disc is rubbed by.
///
/// Proof that the outline is physical: a positive finite area that stays clear of the axis.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Pad {
    kind: PadKind,
    integrals: PadIntegrals,
    smallest_radius: Length,
    largest_radius: Length,
    angular_width: Angle,
    wear_allowance: Option<Length>,
}

/// How far a pad reaches, seen from the axis.
struct Extent {
    smallest_radius: f64, // m
    largest_radius: f64,  // m
    angular_width: f64,   // rad
}

impl Pad {
    /// A pad whose integrals overflow or vanish has no answer.
    fn checked(kind: PadKind, integrals: PadIntegrals, extent: &Extent) -> Result<Self, Faults> {
        let above_zero = [
            integrals.area.si(),
            integrals.area_per_radius.si(),
            integrals.radius_moment.si(),
            extent.smallest_radius,
            extent.largest_radius,
            extent.angular_width,
        ];
        let finite = [
            integrals.x_moment.si(),
            integrals.y_moment.si(),
            integrals.x_per_radius.si(),
            integrals.y_per_radius.si(),
        ];
        let holds = above_zero.iter().all(|value| *value > 0.0 && value.is_finite())
            && finite.iter().all(|value| value.is_finite());
        let mut faults = Faults::new();
        let detail = "the pad is too small, too large or too thin to be computed";
        faults.require(holds, "", FaultCode::OutOfRange, detail);
        faults.into_result(Self {
            kind,
            integrals,
            smallest_radius: Length::from_si(extent.smallest_radius),
            largest_radius: Length::from_si(extent.largest_radius),
            angular_width: Angle::from_si(extent.angular_width),
            wear_allowance: None,
        })
    }

    /// The same pad with the thickness that may wear off, above 0.
    ///
    /// # Errors
    /// An allowance that is not above 0, at `wear_allowance`.
    pub fn with_wear_allowance(mut self, allowance: Length) -> Result<Self, Faults> {
        let mut faults = Faults::new();
        faults.positive("wear_allowance", allowance);
        self.wear_allowance = Some(allowance);
        faults.into_result(self)
    }

    /// How the outline was given.
    #[must_use]
    pub const fn kind(&self) -> PadKind {
        self.kind
    }

    /// The area of the pad.
    #[must_use]
    pub const fn area(&self) -> Area {
        self.integrals.area
    }

    /// All seven integrals.
    #[must_use]
    pub const fn integrals(&self) -> &PadIntegrals {
        &self.integrals
    }

    /// The distance of the axis from the nearest point of the pad.
    #[must_use]
    pub const fn smallest_radius(&self) -> Length {
        self.smallest_radius
    }

    /// The distance of the axis from the farthest point of the pad.
    #[must_use]
    pub const fn largest_radius(&self) -> Length {
        self.largest_radius
    }

    /// The angle that the pad spans, seen from the axis: up to a full turn.
    #[must_use]
    pub const fn angular_width(&self) -> Angle {
        self.angular_width
    }

    /// The thickness that may wear off, if it was given.
    #[must_use]
    pub const fn wear_allowance(&self) -> Option<Length> {
        self.wear_allowance
    }
}
