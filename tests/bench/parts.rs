//! Invented machines and brakes, as the calculations take them.

use brakewright::calc::actuation::Actuation;
use brakewright::calc::brake::{Brake, BrakeParts};
use brakewright::calc::case::stopping;
use brakewright::calc::disc::{Construction, Disc, DiscMaterial, DiscMaterialParts, DiscParts};
use brakewright::calc::fitted::{Fitted, FittedParts, Place, Source};
use brakewright::calc::friction::Friction;
use brakewright::calc::lining::{Limit, Lining, LiningParts};
use brakewright::calc::machine::{
    Geometry, GeometryParts, Machine, Situation, Vehicle, VehicleParts,
};
use brakewright::calc::motion::{Delays, Demand};
use brakewright::calc::pad::Pad;
use brakewright::calc::pressure::PressureDistribution;
use brakewright::calc::quantity::{
    Angle, Area, Force, Length, Mass, MassDensity, Pressure, Si, Time,
};
use brakewright::data::disc_materials;

fn metres(value: f64) -> Length {
    Length::from_si(value)
}

/// A lining with a range of friction and a limit of pressure.
pub(crate) fn lining() -> Lining {
    let parts = LiningParts {
        max_pressure: Some(Limit::by_caller(Pressure::from_si(2.4e6))),
        ..LiningParts::of_friction(Friction::range(0.33, Some(0.38), 0.44).unwrap())
    };
    Lining::new(parts).unwrap()
}

/// A sector of 60 degrees.
pub(crate) fn sector_pad() -> Pad {
    Pad::annular_sector(metres(0.09), metres(0.135), Angle::from_si(1.05)).unwrap()
}

/// A round pad.
pub(crate) fn round_pad() -> Pad {
    Pad::round(metres(0.03), metres(0.11)).unwrap()
}

/// The outline of a sector, `count` points, half of them along each arc.
pub(crate) fn outline(count: u32) -> Vec<[f64; 2]> {
    let half = count / 2;
    let on_arc = |radius: f64, index: u32| {
        let angle = f64::from(index) / f64::from(half - 1) - 0.5;
        [radius * libm::cos(angle), radius * libm::sin(angle)]
    };
    let outer = (0..half).map(|index| on_arc(0.135, index));
    let inner = (0..half).rev().map(|index| on_arc(0.09, index));
    outer.chain(inner).collect()
}

/// A brake with a solid disc of gray cast iron.
pub(crate) fn brake(actuation: Option<Actuation>) -> Brake {
    let catalog = disc_materials::find("gray_cast_iron").unwrap().material.clone();
    let material = DiscMaterial::new(DiscMaterialParts {
        catalog: Some(catalog),
        density: None,
        specific_heat: None,
        conductivity: None,
        emissivity: None,
        max_temperature: None,
    });
    let disc = Disc::new(DiscParts {
        material: material.unwrap(),
        outer_radius: metres(0.14),
        inner_radius: metres(0.08),
        thickness: metres(0.02),
        construction: Construction::Solid,
        mass: None,
        cooling: None,
    });
    let parts = BrakeParts {
        pad: sector_pad(),
        lining: lining(),
        faces: 2,
        pressure_distribution: PressureDistribution::UniformWear,
        disc: Some(disc.unwrap()),
        actuation,
    };
    Brake::new(parts).unwrap()
}

fn axle(place: Place, clamp_force: f64) -> Fitted {
    let actuation = Actuation::ClampForce(Some(Force::from_si(clamp_force)));
    let parts = FittedParts {
        source: Source::Brake(std::sync::Arc::new(brake(Some(actuation)))),
        count: 2,
        place: Some(place),
        brakes_per_disc: 1,
        speed_ratio: 1.0,
        rolling_radius: None,
        control: None,
        operator_share: 1.0,
    };
    Fitted::new(parts).unwrap()
}

/// A car that stops from 30 m/s with a brake of its own on each axle.
pub(crate) fn stop(drag_area: f64) -> stopping::Input {
    let geometry = GeometryParts {
        wheelbase: metres(2.6),
        center_of_gravity_height: metres(0.55),
        front_axle_to_center_of_gravity: metres(1.2),
    };
    let vehicle = VehicleParts {
        mass: Mass::from_si(1500.0),
        rolling_radius: metres(0.3),
        rotating_mass_factor: 1.04,
        rolling_resistance: 0.012,
        drag_area: Area::from_si(drag_area),
        air_density: MassDensity::from_si(1.225),
        adhesion: Some(0.9),
        geometry: Some(Geometry::new(geometry).unwrap()),
    };
    let [none, build_up] = [0.0, 0.2].map(Time::from_si);
    stopping::Input {
        machine: Machine::Vehicle(Vehicle::new(vehicle).unwrap()),
        fitted: vec![axle(Place::Front, 9000.0), axle(Place::Rear, 4000.0)],
        situation: Situation::level(),
        demand: Demand {
            initial_speed: 30.0,
            final_speed: 0.0,
            delays: Delays::new(none, none, build_up).unwrap(),
            deceleration: None,
        },
    }
}
