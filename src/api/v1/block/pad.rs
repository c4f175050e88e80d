//! The pad's outline.

use serde::Deserialize;
use utoipa::ToSchema;

use crate::api::measure::{Angle, Length};
use crate::api::parse::{At, Reader};
use crate::calc::fault::Faults;
use crate::calc::pad::Pad as Shape;
use crate::calc::quantity::Si;
use crate::{only_word, tagged_union};

tagged_union! {
    /// The outline of one pad in the plane of the disc.
    Pad by "shape" {
        "annular_sector" => AnnularSector(AnnularSectorPad),
        "round" => Round(RoundPad),
        "outline" => Outline(OutlinePad),
    }
}

only_word! {
    /// Says that the pad is an annular sector.
    AnnularSectorShape = "annular_sector";
    /// Says that the pad is round.
    RoundShape = "round";
    /// Says that the pad is a free outline.
    OutlineShape = "outline";
}

/// A pad between two radii and two rays.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct AnnularSectorPad {
    /// The shape.
    pub shape: AnnularSectorShape,
    /// Smallest radius, from the disc axis.
    pub inner_radius: Length,
    /// Largest radius, from the disc axis; above the inner radius.
    pub outer_radius: Length,
    /// Angle between the rays, up to 360 deg: a full ring.
    pub angle: Angle,
    /// Usable thickness that may wear away.
    #[schema(nullable = false)]
    pub wear_allowance: Option<Length>,
}

/// A round pad that stays clear of the disc axis.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct RoundPad {
    /// The shape.
    pub shape: RoundShape,
    /// Radius of the pad itself.
    pub radius: Length,
    /// From the disc axis to the pad's center; above the pad's radius.
    pub center_radius: Length,
    /// Usable thickness that may wear away.
    #[schema(nullable = false)]
    pub wear_allowance: Option<Length>,
}

/// A pad within a simple polygon. The disc axis is the origin and lies outside.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct OutlinePad {
    /// The shape.
    pub shape: OutlineShape,
    /// Unit of the points.
    pub unit: OutlineUnit,
    /// Corners in order, each as x and y; either winding, 3 to 1000 of them.
    #[schema(min_items = 3, max_items = 1000)]
    pub points: Vec<OutlinePoint>,
    /// Usable thickness that may wear away.
    #[schema(nullable = false)]
    pub wear_allowance: Option<Length>,
}

/// A corner: x and y from the disc axis.
#[derive(Debug, Clone, Copy, PartialEq, Deserialize, ToSchema)]
#[schema(value_type = Vec<f64>, min_items = 2, max_items = 2)]
pub struct OutlinePoint(pub [f64; 2]);

/// Unit of the points of an outline. The UCUM and Recommendation 20 codes of these units are not accepted here.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Deserialize, ToSchema)]
pub enum OutlineUnit {
    /// Millimetre.
    #[serde(rename = "mm")]
    Millimetre,
    /// Metre.
    #[serde(rename = "m")]
    Metre,
    /// Centimetre.
    #[serde(rename = "cm")]
    Centimetre,
    /// Inch.
    #[serde(rename = "in")]
    Inch,
    /// Foot.
    #[serde(rename = "ft")]
    Foot,
}

impl OutlineUnit {
    const fn symbol(self) -> &'static str {
        match self {
            Self::Millimetre => "mm",
            Self::Metre => "m",
            Self::Centimetre => "cm",
            Self::Inch => "in",
            Self::Foot => "ft",
        }
    }
}

impl Pad {
    /// The pad that is meant.
    pub fn read(&self, at: &At<'_>, reader: &mut Reader) -> Option<Shape> {
        let (made, wear_allowance) = match self {
            Self::AnnularSector(pad) => (pad.read(at, reader), pad.wear_allowance),
            Self::Round(pad) => (pad.read(at, reader), pad.wear_allowance),
            Self::Outline(pad) => (pad.read(at, reader), pad.wear_allowance),
        };
        let allowance = reader.optional(&at.member("wear_allowance"), wear_allowance.as_ref());
        let shape = reader.take(at, made)?;
        match allowance {
            Some(allowance) => reader.take(at, shape.with_wear_allowance(allowance)),
            None => Some(shape),
        }
    }
}

impl AnnularSectorPad {
    fn read(&self, at: &At<'_>, reader: &mut Reader) -> Result<Shape, Faults> {
        Shape::annular_sector(
            reader.quantity(&at.member("inner_radius"), &self.inner_radius),
            reader.quantity(&at.member("outer_radius"), &self.outer_radius),
            reader.quantity(&at.member("angle"), &self.angle),
        )
    }
}

impl RoundPad {
    fn read(&self, at: &At<'_>, reader: &mut Reader) -> Result<Shape, Faults> {
        Shape::round(
            reader.quantity(&at.member("radius"), &self.radius),
            reader.quantity(&at.member("center_radius"), &self.center_radius),
        )
    }
}

impl OutlinePad {
    fn read(&self, at: &At<'_>, reader: &mut Reader) -> Result<Shape, Faults> {
        let at = at.member("points");
        let mut metres = |index: usize, coordinate: f64| {
            let measure = Length::new(coordinate, self.unit.symbol());
            measure.map_or(f64::NAN, |measure| reader.quantity(&at.index(index), &measure).si())
        };
        let points = self.points.iter().enumerate();
        let points: Vec<[f64; 2]> = points
            .map(|(index, point)| point.0.map(|coordinate| metres(index, coordinate)))
            .collect();
        Shape::outline(&points)
    }
}
