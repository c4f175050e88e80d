//! Published test cycles: sequences of stops and descents, each with its source.

use std::sync::LazyLock;

use serde::Deserialize;

use super::nearest::nearest;
use super::units;
use crate::calc::method::Provenance;
use crate::calc::quantity::Dimension;

/// The table as text.
pub const TEXT: &str = include_str!("procedures.toml");

/// A published test cycle.
#[derive(Debug, Clone, PartialEq)]
pub struct ProcedureRow {
    /// Identifier.
    pub id: String,
    /// Name.
    pub name: String,
    /// Where it is published, with its clause.
    pub source: String,
    /// Whether the source was read.
    pub provenance: Provenance,
    /// What else belongs to it.
    pub note: String,
    /// What is done, in order. Numbers are SI.
    pub steps: Vec<ProcedureStep>,
}

/// A part of a test cycle. Numbers are SI.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum ProcedureStep {
    /// Stops or snubs that are alike.
    Stops {
        /// How many.
        count: u32,
        /// Speed at the start, m/s.
        initial_speed: f64,
        /// Share of the vehicle's maximum speed that is taken instead if it is lower.
        share_of_max_speed: Option<f64>,
        /// Speed at the end as a share of that at the start.
        final_share: f64,
        /// Held, m/s².
        deceleration: f64,
        /// From the start of one to that of the next.
        spacing: Spacing,
        /// From the start of the last one to the next step.
        then: Spacing,
    },
    /// A descent at a speed held by the brakes.
    Descent {
        /// m/s.
        speed: f64,
        /// Angle, negative downhill, rad.
        grade: f64,
        /// m.
        distance: f64,
    },
}

/// What lies between the starts of two stops.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Spacing {
    /// s.
    Time(f64),
    /// m.
    Distance(f64),
}

static ROWS: LazyLock<Vec<ProcedureRow>> = LazyLock::new(|| parse(TEXT).unwrap_or_default());

/// Every row, in the order of the table.
#[must_use]
pub fn all() -> &'static [ProcedureRow] {
    &ROWS
}

/// The row with an identifier.
#[must_use]
pub fn find(id: &str) -> Option<&'static ProcedureRow> {
    ROWS.iter().find(|row| row.id == id)
}

/// The identifier most like `id`, if one is much like it.
#[must_use]
pub fn closest(id: &str) -> Option<&'static str> {
    nearest(id, all().iter().map(|row| row.id.as_str()))
}

/// Reads the table.
///
/// # Errors
/// What is wrong, and in which row.
pub fn parse(text: &str) -> Result<Vec<ProcedureRow>, String> {
    let table: Table = toml::from_str(text).map_err(|error| error.to_string())?;
    let row = |entry: Entry| {
        let id = entry.id.clone();
        entry.into_row().map_err(|error| format!("{id}: {error}"))
    };
    table.procedure.into_iter().map(row).collect()
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct Table {
    procedure: Vec<Entry>,
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct Entry {
    id: String,
    name: String,
    source: String,
    provenance: String,
    note: String,
    step: Vec<StepEntry>,
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields, tag = "kind", rename_all = "snake_case")]
enum StepEntry {
    Stops {
        count: u32,
        initial_speed: String,
        share_of_max_speed: Option<f64>,
        final_speed: Option<String>,
        final_share: Option<f64>,
        deceleration: String,
        spacing: String,
        then: Option<String>,
    },
    Descent {
        speed: String,
        grade: String,
        distance: String,
    },
}

impl Entry {
    fn into_row(self) -> Result<ProcedureRow, String> {
        let provenance =
            Provenance::named(&self.provenance).ok_or("provenance must be seen or memory")?;
        let steps = self.step.into_iter().map(StepEntry::into_step).collect::<Result<_, _>>()?;
        let Self { id, name, source, note, .. } = self;
        Ok(ProcedureRow { id, name, source, provenance, note, steps })
    }
}

impl StepEntry {
    fn into_step(self) -> Result<ProcedureStep, String> {
        Ok(match self {
            Self::Stops {
                count,
                initial_speed,
                share_of_max_speed,
                final_speed,
                final_share,
                deceleration,
                spacing,
                then,
            } => {
                let initial = printed(Dimension::Speed, &initial_speed)?;
                let final_share = match (final_speed, final_share) {
                    (Some(speed), None) => printed(Dimension::Speed, &speed)? / initial,
                    (None, Some(share)) => share,
                    _ => return Err("give final_speed or final_share".to_owned()),
                };
                let between = |text: &str| {
                    printed(Dimension::Time, text)
                        .map(Spacing::Time)
                        .or_else(|_| printed(Dimension::Length, text).map(Spacing::Distance))
                };
                let spacing = between(&spacing)?;
                let then = then.map_or(Ok(spacing), |then| between(&then))?;
                let deceleration = printed(Dimension::Acceleration, &deceleration)?;
                let initial_speed = initial;
                ProcedureStep::Stops {
                    count,
                    initial_speed,
                    share_of_max_speed,
                    final_share,
                    deceleration,
                    spacing,
                    then,
                }
            }
            Self::Descent { speed, grade, distance } => ProcedureStep::Descent {
                speed: printed(Dimension::Speed, &speed)?,
                grade: printed(Dimension::Grade, &grade)?,
                distance: printed(Dimension::Length, &distance)?,
            },
        })
    }
}

/// A number with its unit, as printed, in SI.
fn printed(dimension: Dimension, text: &str) -> Result<f64, String> {
    let wrong = || format!("{text}: not a number with a unit of {}", dimension.id());
    let (number, unit) = text.split_once(' ').ok_or_else(wrong)?;
    let unit = units::find(dimension, unit).ok_or_else(wrong)?;
    number.parse().map(|number| unit.to_si(number)).map_err(|_| wrong())
}
