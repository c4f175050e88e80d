//! A published requirement: its tests as stops and holds, the worst of each check kept.

use super::bench::Bench;
use super::check::{Check, Compared, Judged};
use super::duty::{DutyNumbers, Limb};
use super::held::Held;
use super::judge::{Trial, stop};
use super::require::{self, HoldLimits, StopLimits};
use crate::calc::fault::Faults;
use crate::calc::finding::{CheckCode, Remarks, Subject};
use crate::calc::fitted::friction_cases;
use crate::calc::machine::{HOLDING, Machine, Situation};
use crate::calc::motion::{Delays, Demand};
use crate::calc::quantity::{
    Amount, Angle, Dimension, STANDARD_GRAVITY, Si, ThermodynamicTemperature,
};
use crate::data::rules::{
    Clock, ControlForce, HoldTest, MachineKind, Resolution, ResolvedStop, RuleRow, RuleTest,
};

/// A requirement and what is known of the machine for it.
pub(super) struct Ruled<'a> {
    pub(super) bench: &'a Bench<'a>,
    pub(super) row: &'a RuleRow,
    pub(super) delays: Option<Delays>,
    pub(super) max_speed: Option<f64>,
    pub(super) operated_by: Option<Limb>,
    pub(super) start: ThermodynamicTemperature,
}

/// Whether a requirement is meant for a machine.
#[must_use]
pub fn applies(row: &RuleRow, machine: &Machine) -> bool {
    row.machines.contains(&match machine {
        Machine::Vehicle(_) => MachineKind::Vehicle,
        Machine::Shaft(_) => MachineKind::Shaft,
        Machine::Hoist(_) => MachineKind::Hoist,
        Machine::Conveyor(_) => MachineKind::Conveyor,
    })
}

/// Whether a requirement has a test for a machine of a maximum speed, or may have one.
#[must_use]
pub fn has_a_test(row: &RuleRow, max_speed: Option<f64>) -> bool {
    let is_meant = |found: &Resolution| !matches!(found, Resolution::NotApplicable(_));
    row.resolve(max_speed).iter().any(is_meant)
}

/// Whether a requirement that limits the control force has a limit for what moves the control, if that is said.
#[must_use]
pub fn has_force_for(row: &RuleRow, operated_by: Option<Limb>) -> bool {
    let (hand, foot) = (row.hand_force.is_some(), row.foot_force.is_some());
    match operated_by {
        Some(Limb::Hand) => hand || !foot,
        Some(Limb::Foot) => foot || !hand,
        None => true,
    }
}

impl Ruled<'_> {
    /// All checks of the requirement.
    pub(super) fn checks(
        &self,
        numbers: &mut DutyNumbers,
        remarks: &mut Remarks,
    ) -> Result<Vec<Check>, Faults> {
        let mut checks = Vec::new();
        for (test, resolution) in self.row.tests.iter().zip(self.row.resolve(self.max_speed)) {
            let found = match resolution {
                Resolution::Stop(test) => self.stop(&test, numbers, remarks)?,
                Resolution::Hold(test) => {
                    remarks.method(&HOLDING);
                    self.hold(&test, numbers)
                }
                Resolution::ForceOverWeight(least) => self.force_over_weight(least),
                Resolution::MaxSpeedNeeded => self.unknown_speed(test),
                Resolution::NotApplicable(_) => Vec::new(),
            };
            merge(&mut checks, found);
        }
        merge(&mut checks, self.control_forces());
        Ok(checks)
    }

    /// The machine as it is, and with the load that the requirement asks for: a counterweight may balance the larger one.
    fn loaded(&self, factor: f64) -> Vec<Machine> {
        let machine = self.bench.machine;
        let loaded =
            (factor.to_bits() != 1.0_f64.to_bits()).then(|| machine.with_load_factor(factor));
        std::iter::once(machine.clone()).chain(loaded).collect()
    }

    fn stop(
        &self,
        test: &ResolvedStop,
        numbers: &mut DutyNumbers,
        remarks: &mut Remarks,
    ) -> Result<Vec<Check>, Faults> {
        let mut checks = Vec::new();
        for machine in self.loaded(test.load_factor) {
            let bench = Bench { machine: &machine, ..*self.bench };
            merge(&mut checks, self.stop_with(&bench, test, numbers, remarks)?);
        }
        Ok(checks)
    }

    fn stop_with(
        &self,
        bench: &Bench<'_>,
        test: &ResolvedStop,
        numbers: &mut DutyNumbers,
        remarks: &mut Remarks,
    ) -> Result<Vec<Check>, Faults> {
        let limits = StopLimits {
            max_distance: test.max_distance,
            max_time: test.limits.max_time,
            min_mean_deceleration: test.limits.min_mean_deceleration,
            min_mean_fully_developed_deceleration: test
                .limits
                .min_mean_fully_developed_deceleration,
            min_peak_deceleration: test.limits.min_peak_deceleration,
            max_deceleration: test.limits.max_deceleration,
            min_braking_ratio: test.limits.min_braking_ratio,
            clock: match test.clock {
                Clock::Control => require::Clock::Control,
                Clock::Signal => require::Clock::Signal,
            },
            ..StopLimits::default()
        };
        let demand = Demand {
            initial_speed: test.speed,
            final_speed: 0.0,
            delays: self.delays.unwrap_or(Delays::NONE),
            deceleration: None,
        };
        let trial = Trial {
            situation: Situation::level(),
            demand,
            limits: &limits,
            repeating: None,
            start: self.start,
            has_response: self.delays.is_some(),
        };
        let mut checks = stop(bench, &trial, numbers, remarks)?;
        for check in &mut checks {
            self.limit_by_rule(check);
        }
        Ok(checks)
    }

    /// The limits of a requirement stand in its row.
    fn limit_by_rule(&self, check: &mut Check) {
        if matches!(check.limit_at, Some(Subject::Duty { .. })) {
            check.limit_at = Some(self.bench.at_duty("id"));
        }
    }

    fn hold(&self, test: &HoldTest, numbers: &mut DutyNumbers) -> Vec<Check> {
        let (situations, limits, load_factor) = match *test {
            HoldTest::Slope { grade, is_both_ways } => {
                let at = |grade| Situation { grade: Angle::from_si(grade), ..Situation::level() };
                let situations =
                    if is_both_ways { vec![at(grade), at(-grade)] } else { vec![at(grade)] };
                (situations, HoldLimits::default(), 1.0)
            }
            HoldTest::Load { load_factor, min_holding_factor, is_of_hoisting_torque } => {
                let losses = self.bench.machine.hoisting_over_gravity();
                let losses = if is_of_hoisting_torque { losses } else { 1.0 };
                let limits = HoldLimits { min_holding_factor: min_holding_factor * losses };
                (vec![Situation::level()], limits, load_factor)
            }
        };
        let mut checks = Vec::new();
        for machine in self.loaded(load_factor) {
            let bench = Bench { machine: &machine, ..*self.bench };
            for situation in &situations {
                let limit_at = self.bench.at_duty("id");
                let held = Held { bench: &bench, situation, limits: &limits, limit_at };
                numbers.holds.push(held.numbers());
                merge(&mut checks, held.checks());
            }
        }
        checks
    }

    /// Brake force over weight, as a tester or a cable finds it: without what the tires hold.
    fn force_over_weight(&self, least: f64) -> Vec<Check> {
        let situation = Situation::level();
        let limits = HoldLimits::default();
        let limit_at = self.bench.at_duty("id");
        let held = Held { bench: self.bench, situation: &situation, limits: &limits, limit_at };
        let [front, rear] = held.available();
        let limit = Amount { dimension: Dimension::Ratio, si: least };
        let weight =
            self.bench.machine.vehicle().map(|vehicle| vehicle.mass().si() * STANDARD_GRAVITY);
        let judged = weight.map_or(Judged::Lacking(Vec::new()), |weight| {
            Judged::Compared(Compared::at_least((front + rear) / weight, limit))
        });
        let cases = friction_cases(&self.bench.acting.fitted);
        let mut checks = vec![Check {
            friction_case: cases.first().copied().filter(|_| cases.len() > 1),
            limit_at: Some(self.bench.at_duty("id")),
            ..self.bench.check(CheckCode::BrakingRatio, judged)
        }];
        held.on_brakes(&mut checks);
        checks
    }

    /// The checks of a stop whose speed is not known.
    fn unknown_speed(&self, test: &RuleTest) -> Vec<Check> {
        let RuleTest::Stop(stop) = test else { return Vec::new() };
        let limits = &stop.limits;
        let wanted = [
            (true, CheckCode::Stops),
            (stop.max_distance.is_some(), CheckCode::StoppingDistance),
            (limits.max_time.is_some(), CheckCode::StoppingTime),
            (limits.min_mean_deceleration.is_some(), CheckCode::MeanDeceleration),
            (
                limits.min_mean_fully_developed_deceleration.is_some(),
                CheckCode::MeanFullyDevelopedDeceleration,
            ),
            (limits.min_peak_deceleration.is_some(), CheckCode::PeakDecelerationMinimum),
            (limits.max_deceleration.is_some(), CheckCode::PeakDeceleration),
            (limits.min_braking_ratio.is_some(), CheckCode::BrakingRatio),
        ];
        let is_shaft = matches!(self.bench.machine, Machine::Shaft(_));
        let member = if is_shaft { "max_rotational_speed" } else { "max_speed" };
        let missing = vec![self.bench.at_duty(member)];
        let wanted = wanted.into_iter().filter(|(is_wanted, _)| *is_wanted);
        let lacking = |code, fitted_index| Check {
            fitted_index,
            limit_at: Some(self.bench.at_duty("id")),
            ..self.bench.check(code, Judged::Lacking(missing.clone()))
        };
        let of_machine = wanted.map(|(_, code)| lacking(code, None));
        let of_every_stop = [
            CheckCode::PadPeakPressure,
            CheckCode::RubbingSpeed,
            CheckCode::DiscBulkTemperature,
            CheckCode::SurfaceTemperature,
        ];
        let of_brakes = self
            .bench
            .acting
            .indices
            .iter()
            .flat_map(|index| of_every_stop.map(|code| lacking(code, Some(*index))));
        of_machine.chain(of_brakes).collect()
    }

    /// The operator's force on each control against what the requirement allows.
    fn control_forces(&self) -> Vec<Check> {
        let (hand, foot) = (self.row.hand_force, self.row.foot_force);
        let most = |force: Option<ControlForce>| force.map(|force| force.most);
        let (limit, is_sure) = match self.operated_by {
            Some(Limb::Hand) => (most(hand), true),
            Some(Limb::Foot) => (most(foot), true),
            None => match (most(hand), most(foot)) {
                (Some(hand), Some(foot)) => (Some(hand.min(foot)), false),
                (hand, foot) => (hand.or(foot), hand.is_some() != foot.is_some()),
            },
        };
        let Some(limit) = limit else { return Vec::new() };
        let limit = Amount { dimension: Dimension::Force, si: limit };
        let force = |acting: usize| {
            let pressed = self.bench.acting.pressed.get(acting).copied().flatten();
            pressed.and_then(|pressed| pressed.pressing.operator_force)
        };
        let judge = |acting: usize| match force(acting) {
            None => Judged::Lacking(vec![self.bench.at_brake(acting, "actuation")]),
            Some(force) => {
                let compared = Compared::at_most(force.si(), limit, 0.0);
                if compared.is_within || is_sure {
                    Judged::Compared(compared)
                } else {
                    Judged::Lacking(vec![self.bench.at_duty("operated_by")])
                }
            }
        };
        let check = |(acting, ..): (usize, &crate::calc::fitted::Fitted, _)| Check {
            fitted_index: Some(self.bench.acting.index(acting)),
            limit_at: Some(self.bench.at_duty("id")),
            ..self.bench.check(CheckCode::OperatorForce, judge(acting))
        };
        self.bench.brakes().map(check).collect()
    }
}

/// Adds checks, keeping the worse of those that are about the same.
pub(super) fn merge(checks: &mut Vec<Check>, found: Vec<Check>) {
    for check in found {
        let same = |known: &&mut Check| {
            known.code == check.code && known.fitted_index == check.fitted_index
        };
        match checks.iter_mut().find(same) {
            Some(known) if check.judged.is_worse_than(&known.judged) => *known = check,
            Some(_) => {}
            None => checks.push(check),
        }
    }
}
