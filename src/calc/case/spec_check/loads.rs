//! What a stop does to each brake that acts, against the limits of lining, disc and actuation.

use super::bench::Bench;
use super::check::{Check, Compared, Judged, worst};
use super::stopped::Stopped;
use crate::calc::actuation::{Actuation, Pressing};
use crate::calc::brake::Brake;
use crate::calc::case::stop_energy::{BrakeLoad, limits::hottest};
use crate::calc::case::stopping::{self, CaseOutcome};
use crate::calc::finding::{CheckCode, Subject};
use crate::calc::fitted::{Fitted, friction_cases, operator_stroke};
use crate::calc::friction::FrictionCase;
use crate::calc::motion::Ending;
use crate::calc::quantity::{Amount, Dimension, Si};

/// The input that gives the limit of a check on a lining.
const LINING_LIMITS: [(CheckCode, &str); 6] = [
    (CheckCode::PadPeakPressure, "lining/max_pressure"),
    (CheckCode::RubbingSpeed, "lining/max_rubbing_speed"),
    (CheckCode::PressureVelocity, "lining/max_pressure_velocity"),
    (CheckCode::PowerFlux, "lining/max_power_flux"),
    (CheckCode::DiscBulkTemperature, "lining/max_temperature_continuous"),
    (CheckCode::SurfaceTemperature, "lining/max_temperature_peak"),
];

/// A value of one brake, or the inputs that it lacks.
pub(super) type Found = Result<f64, Vec<Subject>>;

impl Bench<'_> {
    /// A check of a brake against the limit that its parts give. Where they do not and the check applies anyway, the
    /// limit is missing; else there is no check.
    pub(super) fn on_brake(
        &self,
        (acting, brake): (usize, &Brake),
        code: CheckCode,
        applies: bool,
        found: impl IntoIterator<Item = (FrictionCase, Found)>,
    ) -> Option<Check> {
        let wanted =
            LINING_LIMITS.iter().find(|(known, _)| *known == code).map(|(_, input)| *input);
        let bound = brake.bound(code);
        let lacks_lining = code == CheckCode::DiscBulkTemperature
            && brake.parts().lining.parts().max_temperature_continuous.is_none();
        let missing = (bound.is_none() || lacks_lining)
            .then(|| wanted.map(|input| self.at_brake(acting, input)))
            .flatten();
        if bound.is_none() && !applies {
            return None;
        }
        let judge = |found: Found| match (bound, found) {
            (Some(bound), Ok(actual)) => {
                let compared = if actual.is_finite() {
                    Compared::at_most(actual, bound.limit, self.ambient.si())
                } else {
                    Compared::beyond(Some(bound.limit))
                };
                match &missing {
                    // The disc's own limit is kept, but that of its lining is not known.
                    Some(missing) if compared.is_within => Judged::Lacking(vec![missing.clone()]),
                    _ => Judged::Compared(compared),
                }
            }
            (_, Err(lacking)) => Judged::Lacking(missing.iter().cloned().chain(lacking).collect()),
            (None, Ok(_)) => Judged::Lacking(missing.iter().cloned().collect()),
        };
        let cases = found.into_iter().map(|(case, found)| (case, judge(found)));
        let (friction_case, judged) = worst(cases)?;
        Some(Check {
            fitted_index: Some(self.acting.index(acting)),
            friction_case,
            limit_at: bound.map(|bound| self.at_brake(acting, bound.input)).or(missing),
            ..self.check(code, judged)
        })
    }

    /// The same with the value of the one case that counts; the case is told where there are several.
    pub(super) fn of_one_case(
        &self,
        at: (usize, &Brake),
        code: CheckCode,
        (case, value): (FrictionCase, f64),
    ) -> Option<Check> {
        let check = self.on_brake(at, code, false, [(case, Ok(value))])?;
        let tells_case = friction_cases(&self.acting.fitted).len() > 1;
        Some(Check { friction_case: tells_case.then_some(case), ..check })
    }

    /// The checks of what presses a brake: pad pressure, and the maxima of its actuation.
    pub(super) fn on_pressing(
        &self,
        checks: &mut Vec<Check>,
        acting: usize,
        applies: bool,
        pressings: &[(FrictionCase, Vec<Option<Pressing>>)],
    ) {
        let Some(entry) = self.acting.fitted.get(acting) else { return };
        let Some(brake) = entry.brake() else { return };
        let mut hold = |code, applies, value: &dyn Fn(&Pressing, &[Option<Pressing>]) -> Found| {
            let found = pressings.iter().filter_map(|(case, all)| {
                let own = all.get(acting).copied().flatten()?;
                Some((*case, value(&own, all)))
            });
            checks.extend(self.on_brake((acting, brake), code, applies, found));
        };
        hold(CheckCode::PadPeakPressure, applies, &|own, _| {
            Ok(brake.peak_pressure(own.highest_clamp_force).si())
        });
        let unknown = |input| Err(vec![self.at_brake(acting, input)]);
        hold(CheckCode::LinePressure, false, &|own, _| {
            own.line_pressure
                .map_or_else(|| unknown("actuation/line_pressure"), |found| Ok(found.si()))
        });
        hold(CheckCode::AirPressure, false, &|own, _| {
            own.air_pressure
                .map_or_else(|| unknown("actuation/air_pressure"), |found| Ok(found.si()))
        });
        hold(CheckCode::OperatorForce, false, &|own, _| {
            let input = operator_input(brake);
            own.operator_force.map_or_else(|| unknown(input), |found| Ok(found.si()))
        });
        hold(CheckCode::ReleasePressure, false, &|own, _| {
            let Some(pressure) = own.release_pressure else {
                return unknown("actuation/release_piston_diameter");
            };
            match release_input(brake) {
                Some(input) => unknown(input),
                None => Ok(pressure.si()),
            }
        });
        hold(CheckCode::OperatorStroke, false, &|_, all| self.stroke(acting, all));
    }

    fn stroke(&self, acting: usize, all: &[Option<Pressing>]) -> Found {
        let volumes: Vec<_> = all.iter().map(|one| one.as_ref()?.fluid_volume).collect();
        if let Some(stroke) = operator_stroke(&self.acting.fitted, &volumes, acting) {
            return Ok(stroke.si());
        }
        let entries = self.acting.fitted.iter().zip(&volumes).enumerate();
        let own = self.acting.fitted.get(acting).and_then(|entry| entry.parts().control.as_ref());
        let shares = |(index, entry): (usize, &Fitted)| {
            index == acting || (own.is_some() && entry.parts().control.as_ref() == own)
        };
        let lacking = entries.filter(|(index, (entry, volume))| {
            let is_hydraulic = matches!(
                entry.brake().and_then(|brake| brake.parts().actuation.as_ref()),
                Some(Actuation::Hydraulic(_))
            );
            is_hydraulic && volume.is_none() && shares((*index, entry))
        });
        Err(lacking.map(|(index, _)| self.at_brake(index, "actuation/running_clearance")).collect())
    }
}

/// The operator's force that a chain lacks.
fn operator_input(brake: &Brake) -> &'static str {
    match &brake.parts().actuation {
        Some(Actuation::Hydraulic(_)) => "actuation/master_cylinder/operator_force",
        _ => "actuation/operator_force",
    }
}

/// What a spring chain lacks for the pressure that opens it: without its stroke the pressure comes out too low.
fn release_input(brake: &Brake) -> Option<&'static str> {
    let Some(Actuation::Spring(chain)) = &brake.parts().actuation else { return None };
    let parts = chain.parts();
    match (parts.spring_rate, parts.release_travel) {
        (None, _) => Some("actuation/spring_rate"),
        (_, None) => Some("actuation/release_travel"),
        _ => None,
    }
}

impl Stopped<'_> {
    /// Adds the checks of each brake.
    pub(super) fn on_brakes(&self, checks: &mut Vec<Check>) {
        let pressings: Vec<(FrictionCase, Vec<Option<Pressing>>)> =
            self.cases().iter().map(|case| (case.friction_case, self.pressings(case))).collect();
        for (acting, entry, brake) in self.bench.brakes() {
            self.bench.on_pressing(checks, acting, true, &pressings);
            self.on_rubbing(checks, (acting, entry, brake), &pressings);
            self.on_flux(checks, (acting, brake));
            self.on_heat(checks, (acting, brake));
            self.on_wear(checks, (acting, brake));
        }
    }

    fn pressings(&self, case: &CaseOutcome) -> Vec<Option<Pressing>> {
        let acting = &self.bench.acting;
        let entries = acting.fitted.iter().zip(&acting.pressed);
        entries
            .map(|(entry, pressed)| stopping::acting(entry, pressed.as_ref(), &case.stop))
            .collect()
    }

    fn on_rubbing(
        &self,
        checks: &mut Vec<Check>,
        (acting, entry, brake): (usize, &Fitted, &Brake),
        pressings: &[(FrictionCase, Vec<Option<Pressing>>)],
    ) {
        // A stop that does not end may go ever faster: its brakes are not judged.
        let speed = |case: &CaseOutcome| -> Found {
            let speed = stopping::highest_brake_speed(&self.input.stop, entry, &case.stop);
            if is_over(case) { Ok(speed) } else { Err(Vec::new()) }
        };
        let speeds: Vec<(FrictionCase, Found)> =
            self.cases().iter().map(|case| (case.friction_case, speed(case))).collect();
        let rubbing = speeds
            .iter()
            .map(|(case, speed)| (*case, speed.clone().map(|speed| brake.rubbing_speed(speed))));
        checks.extend(self.bench.on_brake((acting, brake), CheckCode::RubbingSpeed, true, rubbing));
        let products = speeds.iter().zip(pressings).filter_map(|((case, speed), (_, all))| {
            let own = all.get(acting).copied().flatten()?;
            let product = |speed| brake.pressure_velocity(speed, own.highest_clamp_force);
            Some((*case, speed.clone().map(product)))
        });
        let code = CheckCode::PressureVelocity;
        checks.extend(self.bench.on_brake((acting, brake), code, false, products));
    }

    /// The load on a brake in each case that ends.
    pub(super) fn loads(&self, acting: usize) -> impl Iterator<Item = (FrictionCase, BrakeLoad)> {
        self.outcome.friction_cases.iter().filter_map(move |case| {
            let load = case.energies.as_ref()?.fitted.get(acting)?.brake?;
            Some((case.friction_case, load))
        })
    }

    fn on_flux(&self, checks: &mut Vec<Check>, (acting, brake): (usize, &Brake)) {
        // Where something drives, low friction takes up the most energy: each case counts.
        let loads: Vec<(FrictionCase, BrakeLoad)> = self.loads(acting).collect();
        let mut hold = |code, value: fn(&BrakeLoad) -> f64| {
            let found = loads.iter().map(|(case, load)| (*case, Ok(value(load))));
            checks.extend(self.bench.on_brake((acting, brake), code, false, found));
        };
        hold(CheckCode::PowerFlux, |load| load.peak_power_flux.si());
        hold(CheckCode::EnergyFlux, |load| load.energy_flux.si());
    }

    fn on_heat(&self, checks: &mut Vec<Check>, (acting, brake): (usize, &Brake)) {
        let is_repeated = self.input.interval.is_some();
        let missing = self.bench.missing_of_heat(acting, brake, is_repeated);
        for (place, code) in
            [CheckCode::DiscBulkTemperature, CheckCode::SurfaceTemperature].into_iter().enumerate()
        {
            let found: Vec<(FrictionCase, Found)> = if missing.is_empty() {
                self.loads(acting)
                    .map(|(case, load)| (case, self.temperature(&load, place == 1)))
                    .collect()
            } else {
                vec![(FrictionCase::Nominal, Err(missing.clone()))]
            };
            let found = if found.is_empty() {
                vec![(FrictionCase::Nominal, Err(Vec::new()))]
            } else {
                found
            };
            checks.extend(self.bench.on_brake((acting, brake), code, true, found));
        }
    }

    /// Whether the heat of a load ends at temperatures that are followed.
    pub(super) fn has_an_end(&self, load: &BrakeLoad) -> bool {
        let is_endless = load
            .repeated
            .is_some_and(|repeated| repeated.steady.is_none() && self.input.stop_count.is_none());
        !is_endless && !load.overheats
    }

    /// The highest temperature of bulk or surface, K; without end where stops heat a disc beyond any steady state.
    fn temperature(&self, load: &BrakeLoad, is_surface: bool) -> Found {
        if !self.has_an_end(load) {
            return Ok(f64::INFINITY);
        }
        let [(_, surface), (_, bulk)] = hottest(self.input, load);
        if is_surface { surface } else { bulk }.ok_or_else(Vec::new)
    }

    fn on_wear(&self, checks: &mut Vec<Check>, (acting, brake): (usize, &Brake)) {
        let Some(least) = self.limits.min_pad_life_stops else { return };
        let limit = Amount { dimension: Dimension::Ratio, si: least };
        let wanted = [
            (brake.parts().lining.parts().specific_wear.is_none(), "lining/specific_wear"),
            (brake.parts().pad.wear_allowance().is_none(), "pad/wear_allowance"),
        ];
        let missing: Vec<Subject> = wanted
            .into_iter()
            .filter(|(is_missing, _)| *is_missing)
            .map(|(_, input)| self.bench.at_brake(acting, input))
            .collect();
        let judge = |load: &BrakeLoad| {
            if !missing.is_empty() {
                return Judged::Lacking(missing.clone());
            }
            Judged::Compared(match load.pad_life_stops {
                Some(stops) => Compared::at_least(stops, limit),
                None => Compared::boundless(limit),
            })
        };
        let found = worst(self.loads(acting).map(|(case, load)| (case, judge(&load))));
        let (friction_case, judged) = found.unwrap_or((None, Judged::Lacking(missing.clone())));
        checks.push(Check {
            fitted_index: Some(self.bench.acting.index(acting)),
            friction_case,
            limit_at: Some(self.bench.at_duty("require/min_pad_life_stops")),
            ..self.bench.check(CheckCode::PadLife, judged)
        });
    }
}

const fn is_over(case: &CaseOutcome) -> bool {
    matches!(case.stop.ending, Ending::Reached(_))
}
