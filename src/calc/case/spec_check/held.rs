//! Brakes at rest: what they and the tires hold against what pulls.

use super::bench::Bench;
use super::check::{Check, Compared, Judged};
use super::duty::HoldNumbers;
use super::require::HoldLimits;
use crate::calc::case::stopping::{brake_forces, full_torques, total};
use crate::calc::finding::{CheckCode, Subject};
use crate::calc::fitted::{Pressed, friction_cases};
use crate::calc::friction::FrictionCase;
use crate::calc::machine::Situation;
use crate::calc::quantity::{Amount, Dimension};

/// A brake at rest, and what it is held against.
pub(super) struct Held<'a> {
    pub(super) bench: &'a Bench<'a>,
    pub(super) situation: &'a Situation,
    pub(super) limits: &'a HoldLimits,
    /// The input that gives the least factor.
    pub(super) limit_at: Subject,
}

impl Held<'_> {
    /// What is counted on at rest: the lowest friction.
    fn case(&self) -> FrictionCase {
        friction_cases(&self.bench.acting.fitted).first().copied().unwrap_or(FrictionCase::Nominal)
    }

    fn told_case(&self) -> Option<FrictionCase> {
        (friction_cases(&self.bench.acting.fitted).len() > 1).then_some(self.case())
    }

    /// Brake force along the coordinate, front (or all) and rear.
    pub(super) fn available(&self) -> [f64; 2] {
        let acting = self.bench.acting;
        let torques = full_torques(&acting.fitted, &acting.pressed, self.case());
        total(&brake_forces(self.bench.machine, &acting.fitted, &torques))
    }

    /// What must be held along the coordinate.
    pub(super) fn needed(&self) -> f64 {
        self.bench.machine.holding_force(self.situation)
    }

    /// The numbers behind the checks.
    pub(super) fn numbers(&self) -> HoldNumbers {
        let [front, rear] = self.available();
        HoldNumbers {
            friction_case: self.case(),
            hot: self.bench.hot,
            grade: self.bench.machine.vehicle().map(|_| self.situation.grade),
            needed: self.needed(),
            available: front + rear,
        }
    }

    /// All checks at rest.
    pub(super) fn checks(&self) -> Vec<Check> {
        let mut checks = vec![self.torque()];
        checks.extend(self.tires());
        self.on_brakes(&mut checks);
        checks
    }

    fn torque(&self) -> Check {
        let limit = Amount { dimension: Dimension::Ratio, si: self.limits.min_holding_factor };
        let (needed, [front, rear]) = (self.needed(), self.available());
        let compared = if needed > 0.0 {
            Compared::at_least((front + rear) / needed, limit)
        } else {
            Compared::boundless(limit)
        };
        Check {
            friction_case: self.told_case(),
            limit_at: Some(self.limit_at.clone()),
            ..self.bench.check(CheckCode::HoldingTorque, Judged::Compared(compared))
        }
    }

    /// What the tires of the braked axles hold; none but on wheels.
    fn tires(&self) -> Option<Check> {
        let vehicle = self.bench.machine.vehicle()?;
        let missing = self.bench.missing_of_tires(true, !self.bench.acts_on_all());
        let judged = match vehicle.adhesion() {
            Some(adhesion) if missing.is_empty() => {
                let normals = vehicle.normal_forces_at_rest(self.situation);
                let axles = self.available().into_iter().zip(normals);
                let held: f64 = axles.map(|(brake, normal)| brake.min(adhesion * normal)).sum();
                Judged::Compared(Compared::effort(Dimension::Force, self.needed(), held, true))
            }
            _ => Judged::Lacking(missing),
        };
        Some(Check {
            friction_case: self.told_case(),
            limit_at: Some(Subject::Request("machine/adhesion")),
            ..self.bench.check(CheckCode::HoldingAdhesion, judged)
        })
    }

    /// The limits of what presses each brake.
    pub(super) fn on_brakes(&self, checks: &mut Vec<Check>) {
        let pressed = self.bench.acting.pressed.iter();
        let pressings: Vec<_> = pressed
            .map(|pressed: &Option<Pressed>| pressed.map(|pressed| pressed.pressing))
            .collect();
        let pressings = [(self.case(), pressings)];
        for (acting, ..) in self.bench.brakes() {
            self.bench.on_pressing(checks, acting, false, &pressings);
        }
    }
}
