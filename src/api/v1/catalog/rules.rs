//! `GET /v1/rules`: the published braking requirements.

use std::sync::LazyLock;

use axum::body::Body;
use axum::extract::Path;
use axum::http::{HeaderMap, Response};
use serde::Serialize;
use utoipa::ToSchema;

use super::{Catalog, Provenance};
use crate::api::measure::{Acceleration, Finite, Force, Grade, Length, ReportUnits, Speed, Time};
use crate::api::problem::Problem;
use crate::data::rules::{
    self, Clock, ControlForce, DistanceLimit, FromSpeed, HoldTest, MachineKind, RuleRow,
    RuleTest as Test, StopTest,
};

/// The published braking requirements.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct RuleList {
    /// In the order of the table.
    pub items: Vec<RuleItem>,
}

/// A published braking requirement: its parameters. The requirement's own text decides; a calculation does not replace
/// its test.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct RuleItem {
    /// Identifier.
    pub id: String,
    /// Name for people.
    pub name: String,
    /// Who published it, with the clause.
    pub source: String,
    /// How it was found.
    pub provenance: Provenance,
    /// What it applies to.
    pub category: String,
    /// The kinds of machine that it applies to.
    pub machines: Vec<RuleMachine>,
    /// What else belongs to it.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub note: Option<String>,
    /// Force of a hand on the control.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub hand_force: Option<RuleControlForce>,
    /// Force of a foot on the control.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub foot_force: Option<RuleControlForce>,
    /// What is demanded; each that applies, and each limit of it by itself.
    pub tests: Vec<RuleTest>,
}

/// A kind of machine, as in `machine.kind` of a request.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum RuleMachine {
    /// On wheels.
    Vehicle,
    /// A turning shaft.
    Shaft,
    /// A load on a rope.
    Hoist,
    /// Material on a belt, or a circulating rope.
    Conveyor,
}

/// The force on a control that a test may use.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct RuleControlForce {
    /// What the test uses at least; no limit of the brake.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub min: Option<Force>,
    /// The limit.
    pub max: Force,
}

/// What a test demands.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum RuleTestKind {
    /// To stop within the limits that are there; without any, that it stops. `clock` is there, and `initial_speed`,
    /// `share_of_max_speed` or both.
    Stop,
    /// To hold at rest on a slope: `grade` and `both_ways` are there.
    HoldOnSlope,
    /// To hold the load of a machine at rest: `min_holding_factor` is there.
    HoldLoad,
    /// Braking force over weight, drawn by a cable or on a tester: `min_force_over_weight` is there.
    ForceOverWeight,
}

/// When distance and time of a stop start to count.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum RuleClock {
    /// When the operator starts to move the control: without reaction.
    Control,
    /// At the signal to stop: with everything that follows it.
    Signal,
}

/// A demand of a rule. Which members are there depends on its kind.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct RuleTest {
    /// What it demands.
    pub kind: RuleTestKind,
    /// Speed at the start.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub initial_speed: Option<Speed>,
    /// Share of the machine's maximum speed at the start; beside `initial_speed` the lower of both.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, value_type = f64)]
    pub share_of_max_speed: Option<Finite>,
    /// Only for machines with a maximum speed above this.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub max_speed_above: Option<Speed>,
    /// Only for machines with a maximum speed of at most this.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub max_speed_up_to: Option<Speed>,
    /// The rated load is multiplied by this. The counterweight stays as it is.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, value_type = f64)]
    pub load_factor: Option<Finite>,
    /// When distance and time start to count.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub clock: Option<RuleClock>,
    /// Longest distance.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub max_distance: Option<Length>,
    /// Longest distance in dependence on the speed.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub max_distance_formula: Option<RuleDistance>,
    /// Longest time.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub max_time: Option<Time>,
    /// Least mean deceleration.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub min_mean_deceleration: Option<Acceleration>,
    /// Least mean fully developed deceleration.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub min_mean_fully_developed_deceleration: Option<Acceleration>,
    /// Least deceleration to be attained at some time of the stop.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub min_peak_deceleration: Option<Acceleration>,
    /// Largest deceleration at any time of the stop.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub max_deceleration: Option<Acceleration>,
    /// Least braking force over weight in the stop.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, value_type = f64)]
    pub min_braking_ratio: Option<Finite>,
    /// Slope.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub grade: Option<Grade>,
    /// Whether the slope is to be held facing uphill and facing downhill.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub both_ways: Option<bool>,
    /// Least braking torque over the torque to be held.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, value_type = f64)]
    pub min_holding_factor: Option<Finite>,
    /// Least braking force over weight.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, value_type = f64)]
    pub min_force_over_weight: Option<Finite>,
}

/// A longest distance S from a speed v: S = t v + v^2/(2 a).
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct RuleDistance {
    /// As printed, with the units of the distance and of the speed V; `V2` is its square.
    pub text: String,
    /// The time t.
    pub time: Time,
    /// The deceleration a; if it is not there, S = t v.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub deceleration: Option<Acceleration>,
}

static CATALOG: LazyLock<Catalog> = LazyLock::new(|| {
    let list = RuleList { items: items() };
    Catalog::new("rules", &list, &list.items, |item| &item.id)
});

/// List the published braking requirements.
///
/// Parameters of laws, rules and standards: speeds, distances, decelerations, forces and slopes, each row with its
/// clause.
#[utoipa::path(
    get, path = "/rules", tag = "Catalog", operation_id = "rules",
    responses((status = OK, description = "Every requirement.", body = RuleList)),
)]
pub(super) async fn rules(headers: HeaderMap) -> Response<Body> {
    CATALOG.list(&headers)
}

/// Show a published braking requirement.
///
/// One row of the list.
#[utoipa::path(
    get, path = "/rules/{id}", tag = "Catalog", operation_id = "rule",
    params(("id" = String, Path, description = "Identifier of the requirement.", example = "cfr49_571_135_s7_5")),
    responses((status = OK, description = "The requirement.", body = RuleItem)),
)]
pub(super) async fn rule(
    Path(id): Path<String>,
    headers: HeaderMap,
) -> Result<Response<Body>, Problem> {
    CATALOG.row(&id, &headers)
}

fn items() -> Vec<RuleItem> {
    rules::all().iter().map(item).collect()
}

fn item(row: &RuleRow) -> RuleItem {
    RuleItem {
        id: row.id.clone(),
        name: row.name.clone(),
        source: row.source.clone(),
        provenance: row.provenance.into(),
        category: row.category.clone(),
        machines: row.machines.iter().map(|kind| (*kind).into()).collect(),
        note: row.note.clone(),
        hand_force: row.hand_force.map(Into::into),
        foot_force: row.foot_force.map(Into::into),
        tests: row.tests.iter().map(test).collect(),
    }
}

impl From<MachineKind> for RuleMachine {
    fn from(kind: MachineKind) -> Self {
        match kind {
            MachineKind::Vehicle => Self::Vehicle,
            MachineKind::Shaft => Self::Shaft,
            MachineKind::Hoist => Self::Hoist,
            MachineKind::Conveyor => Self::Conveyor,
        }
    }
}

impl From<Clock> for RuleClock {
    fn from(clock: Clock) -> Self {
        match clock {
            Clock::Control => Self::Control,
            Clock::Signal => Self::Signal,
        }
    }
}

impl From<ControlForce> for RuleControlForce {
    fn from(force: ControlForce) -> Self {
        let report = |newtons| Force::report_si(newtons, ReportUnits::Si);
        Self { min: force.least.map(report), max: report(force.most) }
    }
}

fn test(test: &Test) -> RuleTest {
    match test {
        Test::Stop(stop_test) => stop(stop_test),
        Test::Hold(HoldTest::Slope { grade, is_both_ways }) => RuleTest {
            grade: Some(Grade::report_si(*grade, ReportUnits::Si)),
            both_ways: Some(*is_both_ways),
            ..empty(RuleTestKind::HoldOnSlope)
        },
        Test::Hold(HoldTest::Load { load_factor, min_holding_factor, .. }) => RuleTest {
            load_factor: not_one(*load_factor),
            min_holding_factor: Some(Finite(*min_holding_factor)),
            ..empty(RuleTestKind::HoldLoad)
        },
        Test::ForceOverWeight(ratio) => RuleTest {
            min_force_over_weight: Some(Finite(*ratio)),
            ..empty(RuleTestKind::ForceOverWeight)
        },
    }
}

fn stop(stop: &StopTest) -> RuleTest {
    let (initial, share) = match stop.from {
        FromSpeed::Fixed(speed) => (Some(speed), None),
        FromSpeed::ShareOfMaxSpeed { share, at_most } => (at_most, Some(share)),
    };
    let speed = |si: Option<f64>| si.map(|si| Speed::report_si(si, ReportUnits::Si));
    let rate = |si: Option<f64>| si.map(|si| Acceleration::report_si(si, ReportUnits::Si));
    let (max_distance, max_distance_formula) = distance(stop.max_distance.as_ref());
    let limits = &stop.limits;
    RuleTest {
        initial_speed: speed(initial),
        share_of_max_speed: share.map(Finite),
        max_speed_above: speed(stop.max_speed_above),
        max_speed_up_to: speed(stop.max_speed_up_to),
        load_factor: not_one(stop.load_factor),
        clock: Some(stop.clock.into()),
        max_distance,
        max_distance_formula,
        max_time: limits.max_time.map(|seconds| Time::report_si(seconds, ReportUnits::Si)),
        min_mean_deceleration: rate(limits.min_mean_deceleration),
        min_mean_fully_developed_deceleration: rate(limits.min_mean_fully_developed_deceleration),
        min_peak_deceleration: rate(limits.min_peak_deceleration),
        max_deceleration: rate(limits.max_deceleration),
        min_braking_ratio: limits.min_braking_ratio.map(Finite),
        ..empty(RuleTestKind::Stop)
    }
}

fn distance(limit: Option<&DistanceLimit>) -> (Option<Length>, Option<RuleDistance>) {
    match limit {
        None => (None, None),
        Some(DistanceLimit::Fixed(metres)) => {
            (Some(Length::report_travel(*metres, ReportUnits::Si)), None)
        }
        Some(DistanceLimit::Formula(formula)) => {
            let deceleration = formula.deceleration();
            let formula = RuleDistance {
                text: formula.text.clone(),
                time: Time::report_si(formula.linear, ReportUnits::Si),
                deceleration: deceleration
                    .map(|rate| Acceleration::report_si(rate, ReportUnits::Si)),
            };
            (None, Some(formula))
        }
    }
}

/// A factor that changes something.
fn not_one(factor: f64) -> Option<Finite> {
    (factor > 1.0).then_some(Finite(factor))
}

const fn empty(kind: RuleTestKind) -> RuleTest {
    RuleTest {
        kind,
        initial_speed: None,
        share_of_max_speed: None,
        max_speed_above: None,
        max_speed_up_to: None,
        load_factor: None,
        clock: None,
        max_distance: None,
        max_distance_formula: None,
        max_time: None,
        min_mean_deceleration: None,
        min_mean_fully_developed_deceleration: None,
        min_peak_deceleration: None,
        max_deceleration: None,
        min_braking_ratio: None,
        grade: None,
        both_ways: None,
        min_holding_factor: None,
        min_force_over_weight: None,
    }
}
