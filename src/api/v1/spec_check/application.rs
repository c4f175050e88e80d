//! What the brakes are for: machine, duties and the terms of the judgement. Shared by single checks and selections.

use serde::{Deserialize, Serialize};
use utoipa::ToSchema;

use super::duty::{Around, Duty};
use crate::api::measure::{Finite, ReportUnits, Temperature};
use crate::api::parse::{At, DefaultValue, Reader};
use crate::api::record::CheckName;
use crate::api::v1::block::machine::Machine;
use crate::api::v1::block::temperatures;
use crate::calc::case::spec_check::{Duty as MeantDuty, Input, Waiver as MeantWaiver};
use crate::calc::fault::{FaultCode, Faults};
use crate::calc::finding::NEAR_LIMIT_FROM;
use crate::calc::fitted::Fitted;
use crate::calc::machine::Machine as Braked;
use crate::calc::quantity::ThermodynamicTemperature;

/// A check that need not be assessed. Only one that lacks its inputs can be waived.
#[derive(Debug, Clone, PartialEq, Eq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct Waiver {
    /// Which check.
    pub check: CheckName,
    /// In which duty; in all if left out.
    #[serde(default, deserialize_with = "crate::api::count::optional")]
    #[schema(nullable = false)]
    pub duty_index: Option<u32>,
    /// On which entry of `fitted`; on all if left out.
    #[serde(default, deserialize_with = "crate::api::count::optional")]
    #[schema(nullable = false)]
    pub fitted_index: Option<u32>,
    /// Why, for the record.
    #[serde(deserialize_with = "crate::api::text::required::<_, 1000>")]
    #[schema(min_length = 1, max_length = 1000)]
    pub reason: String,
}

/// A waiver on record.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, ToSchema)]
pub struct RecordedWaiver {
    /// Which check.
    pub check: CheckName,
    /// In which duty.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub duty_index: Option<u32>,
    /// On which entry of `fitted`.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub fitted_index: Option<u32>,
    /// The caller's reason.
    pub reason: String,
    /// What came of it.
    pub effect: WaiverEffect,
}

/// What comes of a waiver.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum WaiverEffect {
    /// A check that could not be assessed does not count.
    Waived,
    /// There was no such check.
    WithoutEffect,
}

impl Waiver {
    fn read(&self) -> MeantWaiver {
        let index =
            |given: Option<u32>| given.map(|index| usize::try_from(index).unwrap_or(usize::MAX));
        MeantWaiver {
            check: self.check.0,
            duty_index: index(self.duty_index),
            fitted_index: index(self.fitted_index),
            reason: self.reason.clone(),
        }
    }

    /// The waiver as it goes on record.
    #[must_use]
    pub fn recorded(&self, has_effect: bool) -> RecordedWaiver {
        RecordedWaiver {
            check: self.check,
            duty_index: self.duty_index,
            fitted_index: self.fitted_index,
            reason: self.reason.clone(),
            effect: if has_effect { WaiverEffect::Waived } else { WaiverEffect::WithoutEffect },
        }
    }
}

/// The members of a request that say what the brakes are for.
#[derive(Debug, Clone, Copy)]
pub struct Application<'a> {
    /// What is braked.
    pub machine: &'a Machine,
    /// What the brakes are put through.
    pub duties: &'a [Duty],
    /// Temperature of the air.
    pub ambient_temperature: Option<&'a Temperature>,
    /// From this share of a limit on, a result counts as near it.
    pub near_limit_from: Option<f64>,
    /// What need not be assessed.
    pub waive: &'a [Waiver],
    /// Units of the answer.
    pub units: ReportUnits,
}

/// An application that was read.
#[derive(Debug, Clone)]
pub struct Meant {
    machine: Braked,
    duties: Vec<MeantDuty>,
    ambient_temperature: ThermodynamicTemperature,
    near_limit_from: f64,
    waivers: Vec<MeantWaiver>,
}

impl Meant {
    /// What is impossible about it, whatever brakes are fitted.
    #[must_use]
    pub fn faults(&self) -> Faults {
        self.clone().with(Vec::new()).application_faults()
    }

    /// The application with brakes to be judged for it.
    #[must_use]
    pub fn with(self, fitted: Vec<Fitted>) -> Input {
        Input {
            machine: self.machine,
            fitted,
            duties: self.duties,
            ambient_temperature: self.ambient_temperature,
            near_limit_from: self.near_limit_from,
            waivers: self.waivers,
        }
    }
}

impl Application<'_> {
    /// Whether brakes are sold for a vehicle, where they need an axle.
    #[must_use]
    pub const fn is_vehicle(&self) -> bool {
        matches!(self.machine, Machine::Vehicle(_))
    }

    /// Faults of an interval stand where the caller gave it as a frequency, those of a shaft's speed at its own member.
    #[must_use]
    pub fn as_given(&self, faults: Faults) -> Faults {
        let moved = |faults: Faults, (index, duty): (usize, &Duty)| match duty {
            Duty::RepeatedStops(duty) if duty.stop_frequency.is_some() => faults.moved(
                &format!("duties/{index}/interval"),
                &format!("duties/{index}/stop_frequency"),
            ),
            Duty::Rule(duty) if duty.max_rotational_speed.is_some() => faults.moved(
                &format!("duties/{index}/max_speed"),
                &format!("duties/{index}/max_rotational_speed"),
            ),
            Duty::Stop(_)
            | Duty::RepeatedStops(_)
            | Duty::Descent(_)
            | Duty::Hold(_)
            | Duty::Rule(_)
            | Duty::Procedure(_) => faults,
        };
        self.duties.iter().enumerate().fold(faults, moved)
    }

    /// The application that is meant.
    pub fn read(&self, at: &At<'_>, reader: &mut Reader) -> Option<Meant> {
        let machine = self.machine.read(&at.member("machine"), reader);
        let ambient = temperatures::ambient(self.ambient_temperature, at, reader);
        let around = Around { machine: self.machine, ambient, units: self.units };
        let at_duties = at.member("duties");
        let duties: Vec<Option<MeantDuty>> = self
            .duties
            .iter()
            .enumerate()
            .map(|(index, duty)| duty.read(around, &at_duties.index(index), reader))
            .collect();
        let at_near = at.member("near_limit_from");
        let near_limit_from = self.near_limit_from.unwrap_or_else(|| {
            reader.record(&at_near, DefaultValue::Number(Finite(NEAR_LIMIT_FROM)), None);
            NEAR_LIMIT_FROM
        });
        let at_waive = at.member("waive");
        for (index, waiver) in self.waive.iter().enumerate() {
            if waiver.reason.trim().is_empty() {
                let at = at_waive.index(index);
                reader.fault(&at.member("reason"), FaultCode::Missing, "must say why");
            }
        }
        Some(Meant {
            machine: machine?,
            duties: duties.into_iter().collect::<Option<_>>()?,
            ambient_temperature: ambient,
            near_limit_from,
            waivers: self.waive.iter().map(Waiver::read).collect(),
        })
    }
}
