//! Repeated stops in one disc: its steady swing, and what a number of stops comes to.

use super::cooling::{CoolingSurface, Speeds};
use super::disc_heat::{Heating, heated_ring, of_one_stop, share_of};
use super::lumped::{LUMPED_DISC, LumpedDisc};
use super::repeated::{Interval, REPEATED_STOPS, Series, Swing};
use crate::calc::brake::Brake;
use crate::calc::finding::Remarks;
use crate::calc::quantity::{Si, ThermodynamicTemperature};

/// Stops that follow each other.
#[derive(Debug, Clone, Copy)]
pub struct Repeating<'a> {
    /// One of them; its start temperature is that before the first.
    pub heating: Heating<'a>,
    /// Speeds while braking.
    pub braking_speeds: Speeds,
    /// From the end of braking to the next first torque, s.
    pub rest: f64,
    /// Speeds meanwhile.
    pub resting_speeds: Speeds,
    /// Of the air.
    pub ambient: ThermodynamicTemperature,
    /// How many stops to follow.
    pub stop_count: Option<u32>,
    /// Whether to go on to the stop that first reaches the lining's continuous limit.
    pub finds_limit: bool,
    /// How many to follow at most, also in search of a limit.
    pub most_stops: u32,
}

/// What repeated stops do to a disc. Temperatures in K.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Repeated {
    /// The interval that ends where it began; none if none does below 3000 K.
    pub steady: Option<Swing>,
    /// Highest surface temperature of that interval.
    pub steady_surface_peak: Option<f64>,
    /// Highest surface temperature of the last stop of the count.
    pub surface_after_count: Option<f64>,
    /// The last stop of the count, and the stop that first reaches the lining's continuous limit.
    pub series: Series,
    /// Coefficient of cooling between stops, W/(m²·K), at the hottest bulk temperature found.
    pub coefficient: f64,
    /// How the disc cools.
    pub surface: CoolingSurface,
}

/// The surface by which the disc of a brake cools; none if that is not known.
#[must_use]
pub fn cooling_surface(brake: &Brake, ambient: ThermodynamicTemperature) -> Option<CoolingSurface> {
    let disc = brake.parts().disc.as_ref()?;
    let (ring, _) = heated_ring(brake)?;
    CoolingSurface::new(disc, &ring, brake.parts().faces, ambient)
}

/// Repeats a stop. None without a disc, its mass or its cooling.
#[must_use]
pub fn of_repeated_stops(brake: &Brake, repeating: &Repeating<'_>) -> Option<Repeated> {
    let heating = &repeating.heating;
    let material = brake.parts().disc.as_ref()?.material();
    let (ring, mass) = heated_ring(brake)?;
    let surface = cooling_surface(brake, repeating.ambient)?;
    let into_disc = share_of(brake, &ring, heating) * f64::from(heating.brakes_per_disc);
    let interval = Interval {
        heating: heating.power.iter().map(|(time, power)| (*time, power * into_disc)).collect(),
        braking_speeds: repeating.braking_speeds,
        rest: repeating.rest,
        resting_speeds: repeating.resting_speeds,
    };
    let disc = LumpedDisc {
        mass: mass.si(),
        specific_heat: material.specific_heat(),
        cooling: Some(surface),
    };
    let steady = interval.steady(&disc);
    let limit =
        brake.parts().lining.parts().max_temperature_continuous.map(|limit| limit.value.si());
    let start = heating.start.si();
    let first_peak = interval.swing(&disc, start).map_or(start, |swing| swing.peak);
    // The way to the steady state is monotone: a limit above both ends of it is never reached.
    let is_reached =
        |limit: &f64| steady.is_none_or(|steady| steady.peak.max(first_peak) >= *limit);
    let limit = limit.filter(|limit| repeating.finds_limit && is_reached(limit));
    let series = interval.series(&disc, start, repeating.stop_count, limit, repeating.most_stops);
    let surface_peak = |start: f64| {
        let start = ThermodynamicTemperature::from_si(start);
        let heat = of_one_stop(brake, &Heating { start, ..*heating }).ok()??;
        Some(heat.surface_peak_temperature.si())
    };
    let steady_surface_peak = steady.and_then(|steady| surface_peak(steady.trough));
    let surface_after_count = series.last_start.and_then(surface_peak);
    let hottest = steady.or(series.after_count).map_or(start, |swing| swing.peak);
    let coefficient = surface.coefficient(hottest, repeating.resting_speeds);
    Some(Repeated {
        steady,
        steady_surface_peak,
        surface_after_count,
        series,
        coefficient,
        surface,
    })
}

/// Notes the methods behind repeated stops.
pub fn note_methods(remarks: &mut Remarks, repeated: &Repeated) {
    remarks.method(&REPEATED_STOPS);
    remarks.method(&LUMPED_DISC);
    for method in repeated.surface.methods() {
        remarks.method(method);
    }
}
