//! What presses the pads: each chain forward (input to clamp force) and inverse (clamp force to input).

pub mod cable;
pub mod hydraulic;
pub mod pneumatic;
pub mod spring;

pub use cable::{Cable, CableParts};
pub use hydraulic::{Hydraulic, HydraulicParts, MasterCylinder, MasterCylinderParts};
pub use pneumatic::{Pneumatic, PneumaticParts};
pub use spring::{Spring, SpringParts};

use super::fault::{FaultCode, Faults};
use super::method::Method;
use super::quantity::{Force, Pressure, Si, Volume};

/// The chain from an input to the force with which one pad presses on the disc.
///
/// In a floating caliper the far pad carries the same force by reaction.
#[derive(Debug, Clone, PartialEq)]
pub enum Actuation {
    /// The clamp force itself.
    ClampForce(Option<Force>),
    /// Fluid pressure on caliper pistons.
    Hydraulic(Hydraulic),
    /// A cable from the operator.
    Cable(Cable),
    /// Air pressure on a chamber.
    Pneumatic(Pneumatic),
    /// Applied by a spring, released by pressure.
    Spring(Spring),
}

/// What drives a chain.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Input {
    /// The clamp force itself.
    Clamp(Force),
    /// Hydraulic pressure at the caliper.
    LinePressure(Pressure),
    /// Force of the operator on the control, before the brake's share of it.
    OperatorForce(Force),
    /// Air pressure at the chamber.
    AirPressure(Pressure),
    /// The spring with new pads.
    SpringForce(Force),
}

/// The input of a chain and whether its maximum stands in for one that was not given.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Chosen {
    /// What drives the chain.
    pub input: Input,
    /// Whether it is the maximum given.
    pub is_maximum: bool,
}

/// What acts on one brake.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Pressing {
    /// Clamp force to count on: with worn pads where wear takes force away.
    pub clamp_force: Force,
    /// Highest clamp force: with new pads.
    pub highest_clamp_force: Force,
    /// Hydraulic pressure at the caliper, if there is one.
    pub line_pressure: Option<Pressure>,
    /// Air pressure at the chamber, if there is one.
    pub air_pressure: Option<Pressure>,
    /// Force of the operator on the control, before the brake's share, if there is one.
    pub operator_force: Option<Force>,
    /// Spring force with new pads, if there is one.
    pub spring_force: Option<Force>,
    /// Pressure that opens the brake, if the chain tells.
    pub release_pressure: Option<Pressure>,
    /// Fluid taken up by one brake, if the chain tells.
    pub fluid_volume: Option<Volume>,
}

impl Pressing {
    /// A clamp force without a chain.
    #[must_use]
    pub const fn by(clamp_force: Force) -> Self {
        Self {
            clamp_force,
            highest_clamp_force: clamp_force,
            line_pressure: None,
            air_pressure: None,
            operator_force: None,
            spring_force: None,
            release_pressure: None,
            fluid_volume: None,
        }
    }
}

impl Actuation {
    /// What drives the chain: the input given, else the maximum given; none if neither is.
    ///
    /// `share` is the part of the operator's force that reaches this brake.
    ///
    /// # Errors
    /// Two inputs that exclude each other.
    pub fn chosen(&self, share: f64) -> Result<Option<Chosen>, Faults> {
        let given = |input: Option<Input>| input.map(|input| Chosen { input, is_maximum: false });
        let maximum = |input: Option<Input>| input.map(|input| Chosen { input, is_maximum: true });
        Ok(match self {
            Self::ClampForce(force) => given(force.map(Input::Clamp)),
            Self::Hydraulic(chain) => {
                given(chain.given()?).or_else(|| maximum(chain.maximum(share)))
            }
            Self::Cable(chain) => given(chain.parts().operator_force.map(Input::OperatorForce))
                .or_else(|| maximum(chain.parts().max_operator_force.map(Input::OperatorForce))),
            Self::Pneumatic(chain) => given(chain.parts().air_pressure.map(Input::AirPressure))
                .or_else(|| maximum(chain.parts().max_air_pressure.map(Input::AirPressure))),
            Self::Spring(chain) => given(chain.parts().spring_force.map(Input::SpringForce)),
        })
    }

    /// The operator's force given, and the most of it, where the chain has an operator.
    #[must_use]
    pub fn operator(&self) -> (Option<Force>, Option<Force>) {
        match self {
            Self::Hydraulic(chain) => {
                chain.parts().master_cylinder.as_ref().map_or((None, None), |master| {
                    (master.parts().operator_force, master.parts().max_operator_force)
                })
            }
            Self::Cable(chain) => (chain.parts().operator_force, chain.parts().max_operator_force),
            Self::ClampForce(_) | Self::Pneumatic(_) | Self::Spring(_) => (None, None),
        }
    }

    /// What `input` does to one brake with `faces` friction faces. An input that the chain lacks does nothing.
    #[must_use]
    pub fn press(&self, input: Input, share: f64, faces: u32) -> Pressing {
        match self {
            Self::ClampForce(_) => Pressing::by(if let Input::Clamp(force) = input {
                force
            } else {
                Force::from_si(0.0)
            }),
            Self::Hydraulic(chain) => chain.press(input, share, faces),
            Self::Cable(chain) => chain.press(input, share),
            Self::Pneumatic(chain) => chain.press(input),
            Self::Spring(chain) => chain.press(input),
        }
    }

    /// What must act so that the clamp force to count on is `clamp_force`.
    #[must_use]
    pub fn needed(&self, clamp_force: Force, faces: u32) -> Pressing {
        match self {
            Self::ClampForce(_) => Pressing::by(clamp_force),
            Self::Hydraulic(chain) => chain.needed(clamp_force, faces),
            Self::Cable(chain) => chain.needed(clamp_force),
            Self::Pneumatic(chain) => chain.needed(clamp_force),
            Self::Spring(chain) => chain.needed(clamp_force),
        }
    }

    /// Whether the chain has efficiencies and all of them are 1.
    #[must_use]
    #[expect(
        clippy::float_cmp,
        reason = "exactly 1 is the default that means: losses not considered"
    )]
    pub fn is_lossless(&self) -> bool {
        match self {
            Self::ClampForce(_) => false,
            Self::Hydraulic(chain) => {
                let master = chain.parts().master_cylinder.as_ref();
                chain.parts().efficiency == 1.0
                    && master.is_none_or(|master| master.parts().efficiency == 1.0)
            }
            Self::Cable(chain) => {
                chain.parts().cable_efficiency * chain.parts().caliper_efficiency == 1.0
            }
            Self::Pneumatic(chain) => chain.parts().efficiency == 1.0,
            Self::Spring(chain) => chain.parts().efficiency == 1.0,
        }
    }

    /// The sheet of the chain; none for a clamp force.
    #[must_use]
    pub const fn method(&self) -> Option<&'static Method> {
        match self {
            Self::ClampForce(_) => None,
            Self::Hydraulic(_) => Some(&hydraulic::CHAIN),
            Self::Cable(_) => Some(&cable::CHAIN),
            Self::Pneumatic(_) => Some(&pneumatic::CHAIN),
            Self::Spring(_) => Some(&spring::CHAIN),
        }
    }
}

/// The sheets of this folder.
pub static METHODS: &[&Method] =
    &[&hydraulic::CHAIN, &cable::CHAIN, &pneumatic::CHAIN, &spring::CHAIN];

/// Demands ratios above zero.
fn ratios(faults: &mut Faults, ratios: &[(&str, f64)]) {
    for (member, ratio) in ratios {
        faults.positive(member, *ratio);
    }
}

/// Demands given values above zero.
fn given_positive<Q: Si>(faults: &mut Faults, values: &[(&str, Option<Q>)]) {
    for (member, value) in values {
        if let Some(value) = value {
            faults.positive(member, *value);
        }
    }
}

/// Demands given values of zero or more.
fn given_not_negative<Q: Si>(faults: &mut Faults, values: &[(&str, Option<Q>)]) {
    for (member, value) in values {
        if let Some(value) = value {
            faults.not_negative(member, *value);
        }
    }
}

/// The fault of two inputs that exclude each other.
fn conflict(member: &str, other: &str) -> Faults {
    let mut faults = Faults::new();
    faults.add(member, FaultCode::Conflict, format!("give either this or {other}, not both"));
    faults
}
