//! The plate: its sizes, how it is built and how it is cooled.

use super::DiscMaterial;
use crate::calc::fault::{FaultCode, Faults};
use crate::calc::quantity::{HeatTransfer, Length, Mass};

/// How a disc is built.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Construction {
    /// One plate.
    Solid,
    /// Two plates with vanes between them; its mass does not follow from its thickness.
    Ventilated,
}

impl Construction {
    /// The name on the wire.
    #[must_use]
    pub const fn as_str(self) -> &'static str {
        match self {
            Self::Solid => "solid",
            Self::Ventilated => "ventilated",
        }
    }
}

/// How a disc gives its heat to the air.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Cooling {
    /// A given total heat transfer coefficient, radiation included.
    Coefficient(HeatTransfer),
    /// Estimated for a free disc on its own speed.
    RotatingDisc,
    /// Estimated for a disc in the airstream of a vehicle.
    Airstream,
}

/// What a caller says of a disc.
#[derive(Debug, Clone, PartialEq)]
pub struct DiscParts {
    /// What it is made of.
    pub material: DiscMaterial,
    /// Outer radius of the plate.
    pub outer_radius: Length,
    /// Inner radius of the plate; 0 for a full plate.
    pub inner_radius: Length,
    /// Thickness over both faces.
    pub thickness: Length,
    /// How it is built.
    pub construction: Construction,
    /// Mass of the rubbed ring alone, without hat.
    pub mass: Option<Mass>,
    /// How it gives its heat to the air.
    pub cooling: Option<Cooling>,
}

/// A disc. Proof that its sizes have a physical meaning.
#[derive(Debug, Clone, PartialEq)]
pub struct Disc(DiscParts);

impl Disc {
    /// The disc of `parts`.
    ///
    /// # Errors
    /// All faults: a size or mass not above zero, an inner radius below zero, radii out of order, a
    /// heat transfer coefficient below zero.
    pub fn new(parts: DiscParts) -> Result<Self, Faults> {
        let mut faults = Faults::new();
        faults.positive("outer_radius", parts.outer_radius);
        faults.not_negative("inner_radius", parts.inner_radius);
        if faults.is_empty() {
            let above = parts.outer_radius > parts.inner_radius;
            let detail = "must be above the inner radius";
            faults.require(above, "outer_radius", FaultCode::NotAboveInnerRadius, detail);
        }
        faults.positive("thickness", parts.thickness);
        if let Some(mass) = parts.mass {
            faults.positive("mass", mass);
        }
        if let Some(Cooling::Coefficient(coefficient)) = parts.cooling {
            faults.not_negative("cooling/coefficient", coefficient);
        }
        faults.into_result(Self(parts))
    }

    /// What it is made of.
    #[must_use]
    pub const fn material(&self) -> &DiscMaterial {
        &self.0.material
    }

    /// Outer radius of the plate.
    #[must_use]
    pub const fn outer_radius(&self) -> Length {
        self.0.outer_radius
    }

    /// Inner radius of the plate.
    #[must_use]
    pub const fn inner_radius(&self) -> Length {
        self.0.inner_radius
    }

    /// Thickness over both faces.
    #[must_use]
    pub const fn thickness(&self) -> Length {
        self.0.thickness
    }

    /// How it is built.
    #[must_use]
    pub const fn construction(&self) -> Construction {
        self.0.construction
    }

    /// Mass of the rubbed ring, where given.
    #[must_use]
    pub const fn mass(&self) -> Option<Mass> {
        self.0.mass
    }

    /// How it gives its heat to the air, where given.
    #[must_use]
    pub const fn cooling(&self) -> Option<Cooling> {
        self.0.cooling
    }
}
