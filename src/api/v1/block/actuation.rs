//! What presses the pads.

use serde::Deserialize;
use utoipa::ToSchema;

use crate::api::measure::{Area, Force, Length, LineCompliance, Pressure, Stiffness};
use crate::api::parse::{At, Reader};
use crate::calc::actuation::{
    Actuation as Chain, Cable, CableParts, Hydraulic, HydraulicParts, MasterCylinder as Cylinder,
    MasterCylinderParts, Pneumatic, PneumaticParts, Spring, SpringParts,
};
use crate::calc::fault::Faults;
use crate::{only_word, tagged_union};

tagged_union! {
    /// The chain from an input to the clamp force: the force with which one pad presses on the disc. In a floating
    /// caliper the far pad carries the same force by reaction. With neither the input nor its maximum given there
    /// is nothing that presses; with the maximum alone, the maximum presses.
    Actuation by "kind" {
        "clamp_force" => ClampForce(ClampForceActuation),
        "hydraulic" => Hydraulic(HydraulicActuation),
        "cable" => Cable(CableActuation),
        "pneumatic" => Pneumatic(PneumaticActuation),
        "spring" => Spring(SpringActuation),
    }
}

only_word! {
    /// Says that the clamp force itself is given.
    ClampForceKind = "clamp_force";
    /// Says that fluid pressure presses.
    HydraulicKind = "hydraulic";
    /// Says that a cable presses.
    CableKind = "cable";
    /// Says that air pressure presses.
    PneumaticKind = "pneumatic";
    /// Says that a spring presses and pressure releases.
    SpringKind = "spring";
}

/// The clamp force itself.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct ClampForceActuation {
    /// The kind.
    pub kind: ClampForceKind,
    /// Force of one pad on the disc.
    #[schema(nullable = false)]
    pub force: Option<Force>,
}

/// Fluid pressure on caliper pistons. Give `line_pressure` or the master cylinder's `operator_force`, not both.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct HydraulicActuation {
    /// The kind.
    pub kind: HydraulicKind,
    /// Diameter of each piston.
    pub piston_diameter: Length,
    /// Pistons on one side of the disc, 1 (the default) to 100.
    #[serde(default, deserialize_with = "crate::api::count::optional")]
    #[schema(nullable = false)]
    pub pistons_per_side: Option<u32>,
    /// Efficiency of the caliper, above 0 and not above 1 (the default).
    #[schema(nullable = false)]
    pub efficiency: Option<f64>,
    /// Pressure at which the pads begin to press, 0 if left out.
    #[schema(nullable = false)]
    pub threshold_pressure: Option<Pressure>,
    /// Pressure at the caliper.
    #[schema(nullable = false)]
    pub line_pressure: Option<Pressure>,
    /// Most pressure that the parts may see.
    #[schema(nullable = false)]
    pub max_line_pressure: Option<Pressure>,
    /// Clearance between pad and disc, per face.
    #[schema(nullable = false)]
    pub running_clearance: Option<Length>,
    /// Volume taken up by one brake's lines, hoses and caliper per pressure.
    #[schema(nullable = false)]
    pub compliance: Option<LineCompliance>,
    /// The operator's part of the chain.
    #[schema(nullable = false)]
    pub master_cylinder: Option<MasterCylinder>,
}

/// A lever or pedal with its master cylinder.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct MasterCylinder {
    /// Diameter of the bore.
    pub bore: Length,
    /// Force at the cylinder over force at the control, 1 if left out.
    #[schema(nullable = false)]
    pub lever_ratio: Option<f64>,
    /// Efficiency of lever and cylinder, above 0 and not above 1 (the default).
    #[schema(nullable = false)]
    pub efficiency: Option<f64>,
    /// Force of the operator.
    #[schema(nullable = false)]
    pub operator_force: Option<Force>,
    /// Most force that may be asked of the operator.
    #[schema(nullable = false)]
    pub max_operator_force: Option<Force>,
    /// Most travel of the control.
    #[schema(nullable = false)]
    pub max_stroke: Option<Length>,
}

/// A cable from the operator's lever to the caliper.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct CableActuation {
    /// The kind.
    pub kind: CableKind,
    /// Cable force over operator force, 1 if left out.
    #[schema(nullable = false)]
    pub lever_ratio: Option<f64>,
    /// Efficiency of the cable, above 0 and not above 1 (the default).
    #[schema(nullable = false)]
    pub cable_efficiency: Option<f64>,
    /// Clamp force over cable force, 1 if left out.
    #[schema(nullable = false)]
    pub caliper_ratio: Option<f64>,
    /// Efficiency of the caliper, above 0 and not above 1 (the default).
    #[schema(nullable = false)]
    pub caliper_efficiency: Option<f64>,
    /// Force of the operator.
    #[schema(nullable = false)]
    pub operator_force: Option<Force>,
    /// Most force that may be asked of the operator.
    #[schema(nullable = false)]
    pub max_operator_force: Option<Force>,
}

/// Air pressure on a chamber.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct PneumaticActuation {
    /// The kind.
    pub kind: PneumaticKind,
    /// Effective area of the chamber.
    pub chamber_area: Area,
    /// Air pressure at the chamber.
    #[schema(nullable = false)]
    pub air_pressure: Option<Pressure>,
    /// Most pressure that the supply gives.
    #[schema(nullable = false)]
    pub max_air_pressure: Option<Pressure>,
    /// Force of the return spring, 0 if left out.
    #[schema(nullable = false)]
    pub return_spring_force: Option<Force>,
    /// Clamp force over push rod force, 1 if left out.
    #[schema(nullable = false)]
    pub force_ratio: Option<f64>,
    /// Efficiency, above 0 and not above 1 (the default).
    #[schema(nullable = false)]
    pub efficiency: Option<f64>,
}

/// Applied by a spring, released by pressure.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct SpringActuation {
    /// The kind.
    pub kind: SpringKind,
    /// Spring force with new pads, brake applied.
    #[schema(nullable = false)]
    pub spring_force: Option<Force>,
    /// Force lost per travel of the spring.
    #[schema(nullable = false)]
    pub spring_rate: Option<Stiffness>,
    /// Travel of the spring that is lost when both pads are worn.
    #[schema(nullable = false)]
    pub pad_wear_travel: Option<Length>,
    /// Travel of the spring to open the brake.
    #[schema(nullable = false)]
    pub release_travel: Option<Length>,
    /// Clamp force over spring force, 1 if left out.
    #[schema(nullable = false)]
    pub force_ratio: Option<f64>,
    /// Efficiency, above 0 and not above 1 (the default).
    #[schema(nullable = false)]
    pub efficiency: Option<f64>,
    /// Diameter of the piston that opens the brake.
    #[schema(nullable = false)]
    pub release_piston_diameter: Option<Length>,
    /// Most pressure that the supply gives.
    #[schema(nullable = false)]
    pub max_release_pressure: Option<Pressure>,
}

impl Actuation {
    /// The chain that is meant.
    pub fn read(&self, at: &At<'_>, reader: &mut Reader) -> Option<Chain> {
        let made = match self {
            Self::ClampForce(given) => given.read(at, reader).map(Chain::ClampForce),
            Self::Hydraulic(given) => given.read(at, reader).map(Chain::Hydraulic),
            Self::Cable(given) => given.read(at, reader).map(Chain::Cable),
            Self::Pneumatic(given) => given.read(at, reader).map(Chain::Pneumatic),
            Self::Spring(given) => given.read(at, reader).map(Chain::Spring),
        };
        reader.take(at, made)
    }
}

impl ClampForceActuation {
    fn read(
        &self,
        at: &At<'_>,
        reader: &mut Reader,
    ) -> Result<Option<crate::calc::quantity::Force>, Faults> {
        let force = reader.optional(&at.member("force"), self.force.as_ref());
        let mut faults = Faults::new();
        if let Some(force) = force {
            faults.not_negative("force", force);
        }
        faults.into_result(force)
    }
}

impl HydraulicActuation {
    fn read(&self, at: &At<'_>, reader: &mut Reader) -> Result<Hydraulic, Faults> {
        let cylinder = self.master_cylinder.as_ref();
        let at_cylinder = at.member("master_cylinder");
        let master_cylinder = cylinder.and_then(|cylinder| {
            let made = cylinder.read(&at_cylinder, reader);
            reader.take(&at_cylinder, made)
        });
        Hydraulic::new(HydraulicParts {
            piston_diameter: reader.quantity(&at.member("piston_diameter"), &self.piston_diameter),
            pistons_per_side: reader.count(
                &at.member("pistons_per_side"),
                self.pistons_per_side,
                1,
            ),
            efficiency: reader.ratio(&at.member("efficiency"), self.efficiency, 1.0),
            threshold_pressure: reader.or_default(
                &at.member("threshold_pressure"),
                self.threshold_pressure.as_ref(),
                0.0,
                "MPa",
            ),
            line_pressure: reader
                .optional(&at.member("line_pressure"), self.line_pressure.as_ref()),
            max_line_pressure: reader
                .optional(&at.member("max_line_pressure"), self.max_line_pressure.as_ref()),
            running_clearance: reader
                .optional(&at.member("running_clearance"), self.running_clearance.as_ref()),
            compliance: reader.optional(&at.member("compliance"), self.compliance.as_ref()),
            master_cylinder,
        })
    }
}

impl MasterCylinder {
    fn read(&self, at: &At<'_>, reader: &mut Reader) -> Result<Cylinder, Faults> {
        Cylinder::new(MasterCylinderParts {
            bore: reader.quantity(&at.member("bore"), &self.bore),
            lever_ratio: reader.ratio(&at.member("lever_ratio"), self.lever_ratio, 1.0),
            efficiency: reader.ratio(&at.member("efficiency"), self.efficiency, 1.0),
            operator_force: reader
                .optional(&at.member("operator_force"), self.operator_force.as_ref()),
            max_operator_force: reader
                .optional(&at.member("max_operator_force"), self.max_operator_force.as_ref()),
            max_stroke: reader.optional(&at.member("max_stroke"), self.max_stroke.as_ref()),
        })
    }
}

impl CableActuation {
    fn read(&self, at: &At<'_>, reader: &mut Reader) -> Result<Cable, Faults> {
        Cable::new(CableParts {
            lever_ratio: reader.ratio(&at.member("lever_ratio"), self.lever_ratio, 1.0),
            cable_efficiency: reader.ratio(
                &at.member("cable_efficiency"),
                self.cable_efficiency,
                1.0,
            ),
            caliper_ratio: reader.ratio(&at.member("caliper_ratio"), self.caliper_ratio, 1.0),
            caliper_efficiency: reader.ratio(
                &at.member("caliper_efficiency"),
                self.caliper_efficiency,
                1.0,
            ),
            operator_force: reader
                .optional(&at.member("operator_force"), self.operator_force.as_ref()),
            max_operator_force: reader
                .optional(&at.member("max_operator_force"), self.max_operator_force.as_ref()),
        })
    }
}

impl PneumaticActuation {
    fn read(&self, at: &At<'_>, reader: &mut Reader) -> Result<Pneumatic, Faults> {
        Pneumatic::new(PneumaticParts {
            chamber_area: reader.quantity(&at.member("chamber_area"), &self.chamber_area),
            air_pressure: reader.optional(&at.member("air_pressure"), self.air_pressure.as_ref()),
            max_air_pressure: reader
                .optional(&at.member("max_air_pressure"), self.max_air_pressure.as_ref()),
            return_spring_force: reader.or_default(
                &at.member("return_spring_force"),
                self.return_spring_force.as_ref(),
                0.0,
                "N",
            ),
            force_ratio: reader.ratio(&at.member("force_ratio"), self.force_ratio, 1.0),
            efficiency: reader.ratio(&at.member("efficiency"), self.efficiency, 1.0),
        })
    }
}

impl SpringActuation {
    fn read(&self, at: &At<'_>, reader: &mut Reader) -> Result<Spring, Faults> {
        let at_diameter = at.member("release_piston_diameter");
        let at_pressure = at.member("max_release_pressure");
        Spring::new(SpringParts {
            spring_force: reader.optional(&at.member("spring_force"), self.spring_force.as_ref()),
            spring_rate: reader.optional(&at.member("spring_rate"), self.spring_rate.as_ref()),
            pad_wear_travel: reader
                .optional(&at.member("pad_wear_travel"), self.pad_wear_travel.as_ref()),
            release_travel: reader
                .optional(&at.member("release_travel"), self.release_travel.as_ref()),
            force_ratio: reader.ratio(&at.member("force_ratio"), self.force_ratio, 1.0),
            efficiency: reader.ratio(&at.member("efficiency"), self.efficiency, 1.0),
            release_piston_diameter: reader
                .optional(&at_diameter, self.release_piston_diameter.as_ref()),
            max_release_pressure: reader.optional(&at_pressure, self.max_release_pressure.as_ref()),
        })
    }
}
