//! The ground on which a duty is judged: machine, brakes that act, and the names of the inputs.

use super::acting::Acting;
use super::check::{Check, Judged};
use crate::calc::brake::Brake;
use crate::calc::finding::{CheckCode, Subject};
use crate::calc::fitted::{Fitted, Place};
use crate::calc::heat::disc_heat::heated_ring;
use crate::calc::machine::Machine;
use crate::calc::quantity::ThermodynamicTemperature;

/// What the checks of one duty have in common.
pub(super) struct Bench<'a> {
    pub(super) machine: &'a Machine,
    pub(super) duty_index: usize,
    pub(super) acting: &'a Acting,
    /// Whether the linings are as hot as the duties make them.
    pub(super) hot: bool,
    pub(super) ambient: ThermodynamicTemperature,
}

impl Bench<'_> {
    /// A check of this duty.
    pub(super) fn check(&self, code: CheckCode, judged: Judged) -> Check {
        Check {
            code,
            duty_index: self.duty_index,
            fitted_index: None,
            friction_case: None,
            hot: self.hot,
            judged,
            limit_at: None,
            waived: None,
        }
    }

    /// An input of the duty.
    pub(super) const fn at_duty(&self, input: &'static str) -> Subject {
        Subject::Duty { index: self.duty_index, input }
    }

    /// An input of the brake of an entry that acts.
    pub(super) fn at_brake(&self, acting: usize, input: &'static str) -> Subject {
        Subject::Brake { fitted_index: Some(self.acting.index(acting)), input }
    }

    /// The entries that act, with their brakes; every entry has one here.
    pub(super) fn brakes(&self) -> impl Iterator<Item = (usize, &Fitted, &Brake)> {
        let entries = self.acting.fitted.iter().enumerate();
        entries.filter_map(|(index, entry)| Some((index, entry, entry.brake()?)))
    }

    /// Whether one entry acts on all axles alike, so that their loads need not be known.
    pub(super) fn acts_on_all(&self) -> bool {
        let mut places = self.acting.fitted.iter().map(|entry| entry.parts().place);
        places.len() == 1 && places.all(|place| place == Some(Place::All))
    }

    /// What a vehicle lacks of adhesion and, where axles count, of geometry.
    pub(super) fn missing_of_tires(&self, adhesion: bool, axles: bool) -> Vec<Subject> {
        let Some(vehicle) = self.machine.vehicle() else { return Vec::new() };
        let wanted = [
            (adhesion && vehicle.adhesion().is_none(), "machine/adhesion"),
            (axles && !vehicle.has_geometry(), "machine/geometry"),
        ];
        let missing = wanted.into_iter().filter(|(is_missing, _)| *is_missing);
        missing.map(|(_, input)| Subject::Request(input)).collect()
    }

    /// What a brake lacks for temperatures; where it must cool, its cooling, too.
    pub(super) fn missing_of_heat(
        &self,
        acting: usize,
        brake: &Brake,
        cools: bool,
    ) -> Vec<Subject> {
        let at = |input| vec![self.at_brake(acting, input)];
        match &brake.parts().disc {
            None => at("disc"),
            Some(_) if heated_ring(brake).is_none() => at("disc/mass"),
            Some(disc) if cools && disc.cooling().is_none() => at("disc/cooling"),
            Some(_) => Vec::new(),
        }
    }
}
