//! One brake.

use serde::Deserialize;
use utoipa::ToSchema;

use super::actuation::Actuation;
use super::disc::Disc;
use super::lining::Lining;
use super::pad::Pad;
use crate::api::parse::{At, Reader};
use crate::calc::brake::{Brake as Whole, BrakeParts, check_faces};
use crate::calc::fault::Faults;
use crate::calc::pressure::PressureDistribution as Spread;

/// One brake: its pads, lining, disc and actuation.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct Brake {
    /// One pad.
    pub pad: Pad,
    /// Its friction material.
    pub lining: Lining,
    /// Friction faces of the brake, 2 if left out: one caliper with two pads. With a disc 1 or 2.
    #[serde(default, deserialize_with = "crate::api::count::optional")]
    #[schema(nullable = false)]
    pub faces: Option<u32>,
    /// How the pressure spreads over the pad.
    #[schema(nullable = false)]
    pub pressure_distribution: Option<PressureDistribution>,
    /// What the pads rub on.
    #[schema(nullable = false)]
    pub disc: Option<Disc>,
    /// What presses the pads.
    #[schema(nullable = false)]
    pub actuation: Option<Actuation>,
}

/// How the pressure spreads over the pad.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Deserialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum PressureDistribution {
    /// Pressure times radius is constant: a run-in pad. The default; it gives the lower torque.
    UniformWear,
    /// The pressure is the same everywhere: a new pad on a stiff backing.
    UniformPressure,
}

impl PressureDistribution {
    /// The distribution that is meant, or the default, which goes on record.
    pub fn read(given: Option<Self>, at: &At<'_>, reader: &mut Reader) -> Spread {
        let given = given.map(|given| match given {
            Self::UniformWear => Spread::UniformWear,
            Self::UniformPressure => Spread::UniformPressure,
        });
        reader.word(at, given, Spread::UniformWear, Spread::UniformWear.as_str())
    }
}

impl Brake {
    /// The brake that is meant.
    pub fn read(&self, at: &At<'_>, reader: &mut Reader) -> Option<Whole> {
        let pad = self.pad.read(&at.member("pad"), reader);
        let lining = self.lining.read(&at.member("lining"), reader);
        let faces = reader.count(&at.member("faces"), self.faces, 2);
        let mut faults = Faults::new();
        check_faces(&mut faults, faces);
        reader.take(at, faults.into_result(()));
        let at_distribution = at.member("pressure_distribution");
        let pressure_distribution =
            PressureDistribution::read(self.pressure_distribution, &at_distribution, reader);
        let disc = self.disc.as_ref().map(|disc| disc.read(&at.member("disc"), reader));
        let actuation = self
            .actuation
            .as_ref()
            .map(|actuation| actuation.read(&at.member("actuation"), reader));
        let (pad, lining) = (pad?, lining?);
        // A part that was given but could not be read ends here; its faults are known.
        let disc = disc.map(|read| read.ok_or(())).transpose().ok()?;
        let actuation = actuation.map(|read| read.ok_or(())).transpose().ok()?;
        reader.take(
            at,
            Whole::new(BrakeParts { pad, lining, faces, pressure_distribution, disc, actuation }),
        )
    }
}
