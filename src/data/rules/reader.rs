//! The reader of the table.

use serde::Deserialize;

use super::{
    Clock, ControlForce, DistanceLimit, Formula, FromSpeed, HoldTest, MachineKind, RuleRow,
    RuleTest, StopLimits, StopTest,
};
use crate::calc::method::Provenance;
use crate::calc::quantity::Dimension;
use crate::data::printed::Printed;

/// Reads the table.
///
/// # Errors
/// What is wrong, and in which row.
pub fn parse(text: &str) -> Result<Vec<RuleRow>, String> {
    let table: Table = toml::from_str(text).map_err(|error| error.to_string())?;
    let row = |entry: Entry| {
        let id = entry.id.clone();
        entry.into_row().map_err(|error| format!("{id}: {error}"))
    };
    table.rule.into_iter().map(row).collect()
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct Table {
    rule: Vec<Entry>,
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct Entry {
    id: String,
    name: String,
    source: String,
    provenance: String,
    category: String,
    machines: Vec<MachineEntry>,
    note: Option<String>,
    hand_force: Option<String>,
    foot_force: Option<String>,
    test: Vec<TestEntry>,
}

#[derive(Deserialize)]
#[serde(rename_all = "snake_case")]
enum MachineEntry {
    Vehicle,
    Shaft,
    Hoist,
    Conveyor,
}

#[derive(Deserialize)]
#[serde(rename_all = "snake_case")]
enum ClockEntry {
    Control,
    Signal,
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields, tag = "kind", rename_all = "snake_case")]
enum TestEntry {
    Stop(Box<StopEntry>),
    /// Stops that differ in speed and distance only.
    StopTable {
        clock: ClockEntry,
        rows: Vec<(String, String)>,
    },
    Slope {
        grade: String,
        both_ways: bool,
    },
    Load {
        load_factor: Option<f64>,
        min_holding_factor: Option<f64>,
    },
    ForceOverWeight {
        at_least: f64,
    },
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct StopEntry {
    from: Option<String>,
    share_of_max_speed: Option<f64>,
    max_speed_above: Option<String>,
    max_speed_up_to: Option<String>,
    load_factor: Option<f64>,
    clock: ClockEntry,
    max_distance: Option<String>,
    max_time: Option<String>,
    min_mean_deceleration: Option<String>,
    min_mean_fully_developed_deceleration: Option<String>,
    min_peak_deceleration: Option<String>,
    max_deceleration: Option<String>,
    min_braking_ratio: Option<f64>,
}

impl Entry {
    fn into_row(self) -> Result<RuleRow, String> {
        let provenance =
            Provenance::named(&self.provenance).ok_or("provenance must be seen or memory")?;
        let mut tests = Vec::new();
        for test in self.test {
            tests.extend(test.into_tests()?);
        }
        if tests.is_empty() || self.machines.is_empty() {
            return Err("a row needs tests and machines".to_owned());
        }
        let hand_force = self.hand_force.as_deref().map(control_force).transpose()?;
        let foot_force = self.foot_force.as_deref().map(control_force).transpose()?;
        let machines = self.machines.into_iter().map(MachineKind::from).collect();
        let Self { id, name, source, category, note, .. } = self;
        Ok(RuleRow {
            id,
            name,
            source,
            provenance,
            category,
            machines,
            note,
            hand_force,
            foot_force,
            tests,
        })
    }
}

impl From<MachineEntry> for MachineKind {
    fn from(entry: MachineEntry) -> Self {
        match entry {
            MachineEntry::Vehicle => Self::Vehicle,
            MachineEntry::Shaft => Self::Shaft,
            MachineEntry::Hoist => Self::Hoist,
            MachineEntry::Conveyor => Self::Conveyor,
        }
    }
}

impl From<ClockEntry> for Clock {
    fn from(entry: ClockEntry) -> Self {
        match entry {
            ClockEntry::Control => Self::Control,
            ClockEntry::Signal => Self::Signal,
        }
    }
}

impl TestEntry {
    fn into_tests(self) -> Result<Vec<RuleTest>, String> {
        let test = match self {
            Self::Stop(stop) => RuleTest::Stop(stop.into_test()?),
            Self::StopTable { clock, rows } => return table(clock.into(), &rows),
            Self::Slope { grade, both_ways } => {
                let grade = single(Dimension::Grade, &grade)?;
                RuleTest::Hold(HoldTest::Slope { grade, is_both_ways: both_ways })
            }
            Self::Load { load_factor, min_holding_factor } => RuleTest::Hold(HoldTest::Load {
                load_factor: load_factor.unwrap_or(1.0),
                min_holding_factor: min_holding_factor.unwrap_or(1.0),
                is_of_hoisting_torque: min_holding_factor.is_some(),
            }),
            Self::ForceOverWeight { at_least } => RuleTest::ForceOverWeight(at_least),
        };
        Ok(vec![test])
    }
}

impl StopEntry {
    fn into_test(self) -> Result<StopTest, String> {
        let speed = |text: Option<String>| optional(Dimension::Speed, text.as_deref());
        let from = match (speed(self.from)?, self.share_of_max_speed) {
            (Some(speed), None) => FromSpeed::Fixed(speed),
            (at_most, Some(share)) => FromSpeed::ShareOfMaxSpeed { share, at_most },
            (None, None) => return Err("a stop needs from or share_of_max_speed".to_owned()),
        };
        let rate = |text: Option<String>| optional(Dimension::Acceleration, text.as_deref());
        Ok(StopTest {
            from,
            max_speed_above: speed(self.max_speed_above)?,
            max_speed_up_to: speed(self.max_speed_up_to)?,
            load_factor: self.load_factor.unwrap_or(1.0),
            clock: self.clock.into(),
            max_distance: self.max_distance.as_deref().map(distance).transpose()?,
            limits: StopLimits {
                max_time: optional(Dimension::Time, self.max_time.as_deref())?,
                min_mean_deceleration: rate(self.min_mean_deceleration)?,
                min_mean_fully_developed_deceleration: rate(
                    self.min_mean_fully_developed_deceleration,
                )?,
                min_peak_deceleration: rate(self.min_peak_deceleration)?,
                max_deceleration: rate(self.max_deceleration)?,
                min_braking_ratio: self.min_braking_ratio,
            },
        })
    }
}

fn table(clock: Clock, rows: &[(String, String)]) -> Result<Vec<RuleTest>, String> {
    let test = |(from, to): &(String, String)| {
        Ok(RuleTest::Stop(StopTest {
            from: FromSpeed::Fixed(single(Dimension::Speed, from)?),
            max_speed_above: None,
            max_speed_up_to: None,
            load_factor: 1.0,
            clock,
            max_distance: Some(DistanceLimit::Fixed(single(Dimension::Length, to)?)),
            limits: StopLimits::default(),
        }))
    };
    rows.iter().map(test).collect()
}

/// `20 ft` or `0.15 V + V2/130 [m, km/h]`.
fn distance(text: &str) -> Result<DistanceLimit, String> {
    if text.ends_with(']') {
        Formula::parse(text).map(DistanceLimit::Formula)
    } else {
        single(Dimension::Length, text).map(DistanceLimit::Fixed)
    }
}

/// `500 N`, or `65-500 N`.
fn control_force(text: &str) -> Result<ControlForce, String> {
    let printed = Printed::parse(text)?;
    let lower = printed.lower(Dimension::Force)?;
    let upper = printed.upper(Dimension::Force)?;
    Ok(upper.map_or(ControlForce { least: None, most: lower }, |most| ControlForce {
        least: Some(lower),
        most,
    }))
}

fn single(dimension: Dimension, text: &str) -> Result<f64, String> {
    Printed::parse(text)?.single(dimension)
}

fn optional(dimension: Dimension, text: Option<&str>) -> Result<Option<f64>, String> {
    text.map(|text| single(dimension, text)).transpose()
}
