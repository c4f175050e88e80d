//! What is braked.

use serde::Deserialize;
use utoipa::ToSchema;

use crate::api::measure::{Angle, Area, Density, Length, Mass, MomentOfInertia, Torque};
use crate::api::parse::{At, Reader};
use crate::calc::fault::Faults;
use crate::calc::machine::{
    Conveyor, ConveyorParts, Geometry, GeometryParts, Hoist, HoistParts, Machine as Braked, Shaft,
    ShaftParts, Vehicle, VehicleParts,
};
use crate::{only_word, tagged_union};

tagged_union! {
    /// What is braked.
    Machine by "kind" {
        "vehicle" => Vehicle(VehicleMachine),
        "shaft" => Shaft(ShaftMachine),
        "hoist" => Hoist(HoistMachine),
        "conveyor" => Conveyor(ConveyorMachine),
    }
}

only_word! {
    /// Says that a vehicle on wheels is braked.
    VehicleKind = "vehicle";
    /// Says that a turning shaft is braked.
    ShaftKind = "shaft";
    /// Says that a load on a rope is braked.
    HoistKind = "hoist";
    /// Says that material on a belt is braked.
    ConveyorKind = "conveyor";
}

/// A vehicle on wheels.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct VehicleMachine {
    /// The kind.
    pub kind: VehicleKind,
    /// Mass in all.
    pub mass: Mass,
    /// Rolling radius of the wheels.
    pub rolling_radius: Length,
    /// Effective mass over mass: what the turning parts add. 1 (the default) to 100.
    #[schema(nullable = false)]
    pub rotating_mass_factor: Option<f64>,
    /// Rolling resistance over normal force, 0 (the default) to below 1.
    #[schema(nullable = false)]
    pub rolling_resistance: Option<f64>,
    /// Drag coefficient times frontal area, 0 if left out.
    #[schema(nullable = false)]
    pub drag_area: Option<Area>,
    /// Density of the air, 1.225 kg/m3 if left out.
    #[schema(nullable = false)]
    pub air_density: Option<Density>,
    /// Largest tire force over normal force, above 0 and not above 5. Left out: what the tires carry is not
    /// considered.
    #[schema(nullable = false)]
    pub adhesion: Option<f64>,
    /// Where the weight acts. Left out: axle loads are not considered.
    #[schema(nullable = false)]
    pub geometry: Option<VehicleGeometry>,
}

/// Where a vehicle's weight acts.
#[derive(Debug, Clone, Copy, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct VehicleGeometry {
    /// Distance of the axles.
    pub wheelbase: Length,
    /// Height of the center of gravity above ground.
    pub center_of_gravity_height: Length,
    /// From the front axle to the center of gravity, along the ground; less than the wheelbase.
    pub front_axle_to_center_of_gravity: Length,
}

/// A turning shaft.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct ShaftMachine {
    /// The kind.
    pub kind: ShaftKind,
    /// Moment of inertia of all that turns, referred to the brake shaft.
    pub inertia: MomentOfInertia,
    /// Torque from outside, positive when it keeps the shaft turning; 0 if left out.
    #[schema(nullable = false)]
    pub driving_torque: Option<Torque>,
}

/// A load on a rope.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct HoistMachine {
    /// The kind.
    pub kind: HoistKind,
    /// Load with hook and block.
    pub load_mass: Mass,
    /// Counterweight that moves as fast as the load, 0 if left out.
    #[schema(nullable = false)]
    pub counterweight_mass: Option<Mass>,
    /// Radius of the drum, to the middle of the rope.
    pub drum_radius: Length,
    /// Rope speed over load speed, 1 (the default) to 1000.
    #[schema(nullable = false)]
    pub falls: Option<f64>,
    /// Speed of the brake shaft over that of the drum, 1 if left out.
    #[schema(nullable = false)]
    pub gear_ratio: Option<f64>,
    /// Efficiency of gear and rope, above 0 and not above 1 (the default: friction is not counted on).
    #[schema(nullable = false)]
    pub efficiency: Option<f64>,
    /// Moment of inertia of what turns with the brake shaft, referred to it; 0 if left out.
    #[schema(nullable = false)]
    pub inertia: Option<MomentOfInertia>,
}

/// Material on a belt.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct ConveyorMachine {
    /// The kind.
    pub kind: ConveyorKind,
    /// Material on the belt.
    pub material_mass: Mass,
    /// Belt and idlers of both runs, 0 if left out.
    #[schema(nullable = false)]
    pub belt_mass: Option<Mass>,
    /// Slope of the belt, positive when material is carried uphill.
    pub incline: Angle,
    /// Resistance over normal force, 0 (the default) to below 1.
    #[schema(nullable = false)]
    pub resistance: Option<f64>,
    /// Radius of the driven pulley.
    pub pulley_radius: Length,
    /// Speed of the brake shaft over that of the pulley, 1 if left out.
    #[schema(nullable = false)]
    pub gear_ratio: Option<f64>,
    /// Efficiency of the drive, above 0 and not above 1 (the default: friction is not counted on).
    #[schema(nullable = false)]
    pub efficiency: Option<f64>,
    /// Moment of inertia of what turns with the brake shaft, referred to it; 0 if left out.
    #[schema(nullable = false)]
    pub inertia: Option<MomentOfInertia>,
}

impl Machine {
    /// The machine that is meant.
    pub fn read(&self, at: &At<'_>, reader: &mut Reader) -> Option<Braked> {
        let made = match self {
            Self::Vehicle(given) => given.read(at, reader).map(Braked::Vehicle),
            Self::Shaft(given) => given.read(at, reader).map(Braked::Shaft),
            Self::Hoist(given) => given.read(at, reader).map(Braked::Hoist),
            Self::Conveyor(given) => given.read(at, reader).map(Braked::Conveyor),
        };
        reader.take(at, made)
    }
}

impl VehicleMachine {
    fn read(&self, at: &At<'_>, reader: &mut Reader) -> Result<Vehicle, Faults> {
        let at_geometry = at.member("geometry");
        let geometry = self.geometry.and_then(|geometry| {
            let made = geometry.read(&at_geometry, reader);
            reader.take(&at_geometry, made)
        });
        Vehicle::new(VehicleParts {
            mass: reader.quantity(&at.member("mass"), &self.mass),
            rolling_radius: reader.quantity(&at.member("rolling_radius"), &self.rolling_radius),
            rotating_mass_factor: reader.ratio(
                &at.member("rotating_mass_factor"),
                self.rotating_mass_factor,
                1.0,
            ),
            rolling_resistance: reader.ratio(
                &at.member("rolling_resistance"),
                self.rolling_resistance,
                0.0,
            ),
            drag_area: reader.or_default(
                &at.member("drag_area"),
                self.drag_area.as_ref(),
                0.0,
                "m2",
            ),
            air_density: reader.or_default(
                &at.member("air_density"),
                self.air_density.as_ref(),
                1.225,
                "kg/m3",
            ),
            adhesion: self.adhesion,
            geometry,
        })
    }
}

impl VehicleGeometry {
    fn read(&self, at: &At<'_>, reader: &mut Reader) -> Result<Geometry, Faults> {
        let at_height = at.member("center_of_gravity_height");
        let at_front = at.member("front_axle_to_center_of_gravity");
        Geometry::new(GeometryParts {
            wheelbase: reader.quantity(&at.member("wheelbase"), &self.wheelbase),
            center_of_gravity_height: reader.quantity(&at_height, &self.center_of_gravity_height),
            front_axle_to_center_of_gravity: reader
                .quantity(&at_front, &self.front_axle_to_center_of_gravity),
        })
    }
}

impl ShaftMachine {
    fn read(&self, at: &At<'_>, reader: &mut Reader) -> Result<Shaft, Faults> {
        let at_torque = at.member("driving_torque");
        Shaft::new(ShaftParts {
            inertia: reader.quantity(&at.member("inertia"), &self.inertia),
            driving_torque: reader.or_default(&at_torque, self.driving_torque.as_ref(), 0.0, "N.m"),
        })
    }
}

impl HoistMachine {
    fn read(&self, at: &At<'_>, reader: &mut Reader) -> Result<Hoist, Faults> {
        let at_counterweight = at.member("counterweight_mass");
        Hoist::new(HoistParts {
            load_mass: reader.quantity(&at.member("load_mass"), &self.load_mass),
            counterweight_mass: reader.or_default(
                &at_counterweight,
                self.counterweight_mass.as_ref(),
                0.0,
                "kg",
            ),
            drum_radius: reader.quantity(&at.member("drum_radius"), &self.drum_radius),
            falls: reader.ratio(&at.member("falls"), self.falls, 1.0),
            gear_ratio: reader.ratio(&at.member("gear_ratio"), self.gear_ratio, 1.0),
            efficiency: reader.ratio(&at.member("efficiency"), self.efficiency, 1.0),
            inertia: reader.or_default(&at.member("inertia"), self.inertia.as_ref(), 0.0, "kg.m2"),
        })
    }
}

impl ConveyorMachine {
    fn read(&self, at: &At<'_>, reader: &mut Reader) -> Result<Conveyor, Faults> {
        Conveyor::new(ConveyorParts {
            material_mass: reader.quantity(&at.member("material_mass"), &self.material_mass),
            belt_mass: reader.or_default(
                &at.member("belt_mass"),
                self.belt_mass.as_ref(),
                0.0,
                "kg",
            ),
            incline: reader.quantity(&at.member("incline"), &self.incline),
            resistance: reader.ratio(&at.member("resistance"), self.resistance, 0.0),
            pulley_radius: reader.quantity(&at.member("pulley_radius"), &self.pulley_radius),
            gear_ratio: reader.ratio(&at.member("gear_ratio"), self.gear_ratio, 1.0),
            efficiency: reader.ratio(&at.member("efficiency"), self.efficiency, 1.0),
            inertia: reader.or_default(&at.member("inertia"), self.inertia.as_ref(), 0.0, "kg.m2"),
        })
    }
}
