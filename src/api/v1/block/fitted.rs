//! Brakes as fitted to a machine.

use std::sync::Arc;

use serde::Deserialize;
use utoipa::ToSchema;

use super::brake::Brake;
use crate::api::measure::{Length, Torque};
use crate::api::parse::{At, Reader};
use crate::calc::case::stopping::entry_faults;
use crate::calc::fault::FaultCode;
use crate::calc::fitted::{Fitted as Entry, FittedParts, Place, Source};
use crate::calc::quantity::{Si, Torque as Moment};

/// Brakes of one kind on a machine. Give `brake` or `torque`, not both.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct Fitted {
    /// One brake, in all its parts.
    #[schema(nullable = false)]
    pub brake: Option<Brake>,
    /// Torque of one brake of known torque.
    #[schema(nullable = false)]
    pub torque: Option<Torque>,
    /// Brakes that act together, 1 (the default) to 1000.
    #[serde(default, deserialize_with = "crate::api::count::optional")]
    #[schema(nullable = false)]
    pub count: Option<u32>,
    /// Where they act: required on a vehicle, an error elsewhere.
    #[schema(nullable = false)]
    pub axle: Option<AxlePlace>,
    /// How many of them press the same disc, 1 if left out; divides `count`.
    #[serde(default, deserialize_with = "crate::api::count::optional")]
    #[schema(nullable = false)]
    pub brakes_per_disc: Option<u32>,
    /// Brake speed over wheel speed, or over that of the reference brake shaft; 1 if left out.
    #[schema(nullable = false)]
    pub speed_ratio: Option<f64>,
    /// Rolling radius of these wheels, if another than the machine's.
    #[schema(nullable = false)]
    pub rolling_radius: Option<Length>,
    /// Name of the control that presses them. Entries with the same name share one operator force.
    #[serde(default, deserialize_with = "crate::api::text::optional::<_, 100>")]
    #[schema(nullable = false, max_length = 100)]
    pub control: Option<String>,
    /// Part of the operator's force that reaches each of these brakes, above 0 and not above 1 (the default).
    #[schema(nullable = false)]
    pub operator_share: Option<f64>,
}

/// Where brakes act on a vehicle.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Deserialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum AxlePlace {
    /// On the front axle.
    Front,
    /// On the rear axle.
    Rear,
    /// On all axles alike.
    All,
}

impl Fitted {
    /// The entries that are meant.
    pub fn read_all(
        list: &[Self],
        is_vehicle: bool,
        at: &At<'_>,
        reader: &mut Reader,
    ) -> Option<Vec<Entry>> {
        let entries: Vec<Option<Entry>> = list
            .iter()
            .enumerate()
            .map(|(index, entry)| entry.read(is_vehicle, &at.index(index), reader))
            .collect();
        entries.into_iter().collect()
    }

    fn read(&self, is_vehicle: bool, at: &At<'_>, reader: &mut Reader) -> Option<Entry> {
        let source = self.source(at, reader);
        let has_source = source.is_some();
        let parts = FittedParts {
            count: reader.count(&at.member("count"), self.count, 1),
            place: self.axle.map(|place| match place {
                AxlePlace::Front => Place::Front,
                AxlePlace::Rear => Place::Rear,
                AxlePlace::All => Place::All,
            }),
            brakes_per_disc: reader.count(&at.member("brakes_per_disc"), self.brakes_per_disc, 1),
            speed_ratio: reader.ratio(&at.member("speed_ratio"), self.speed_ratio, 1.0),
            rolling_radius: reader
                .optional(&at.member("rolling_radius"), self.rolling_radius.as_ref()),
            control: self.control.clone(),
            operator_share: reader.ratio(&at.member("operator_share"), self.operator_share, 1.0),
            // Without a source: read on for the faults of the other members; the result is of no use.
            source: source.unwrap_or(Source::Torque(Moment::from_si(1.0))),
        };
        let found = entry_faults(is_vehicle, parts.place, parts.rolling_radius.is_some());
        reader.take(at, found.into_result(()));
        reader.take(at, Entry::new(parts)).filter(|_| has_source)
    }

    fn source(&self, at: &At<'_>, reader: &mut Reader) -> Option<Source> {
        match (&self.brake, &self.torque) {
            (Some(brake), None) => {
                brake.read(&at.member("brake"), reader).map(|brake| Source::Brake(Arc::new(brake)))
            }
            (None, Some(torque)) => {
                Some(Source::Torque(reader.quantity(&at.member("torque"), torque)))
            }
            (Some(_), Some(_)) => {
                reader.fault(
                    &at.member("torque"),
                    FaultCode::Conflict,
                    "give either this or brake, not both",
                );
                None
            }
            (None, None) => {
                reader.fault(at, FaultCode::Missing, "give brake or torque");
                None
            }
        }
    }
}
