//! A speed held by the brakes over a distance: power, temperature, and what is left at the end.

use super::bench::Bench;
use super::check::{Check, Compared, Judged};
use super::duty::DescentNumbers;
use super::loads::Found;
use crate::calc::actuation::Pressing;
use crate::calc::brake::Brake;
use crate::calc::case::stopping::{brake_forces, full_torques, total};
use crate::calc::finding::{CheckCode, Finding, Notice, Remarks, Severity, Subject};
use crate::calc::fitted::{Fitted, eased, friction_cases};
use crate::calc::friction::FrictionCase;
use crate::calc::heat::bulk::heated_depth;
use crate::calc::heat::cooling::Speeds;
use crate::calc::heat::disc_heat::{Heating, heated_ring, share_of};
use crate::calc::heat::disc_series::cooling_surface;
use crate::calc::heat::lumped::{LUMPED_DISC, LumpedDisc, Stretch};
use crate::calc::machine::Situation;
use crate::calc::method::Method;
use crate::calc::motion::{Coordinate, Forces};
use crate::calc::quantity::{Amount, Dimension, Si, ThermodynamicTemperature};

crate::method_sheet! {
    DESCENT {
        id: "heat.descent",
        name: "Disc temperature while the brakes hold a speed",
        equation: "P = (m g sin(d) - rolling - air + drive force) v, shared by torque times speed; bulk by the lumped disc; surface = bulk + q L/(3 k)",
        symbols: [("P", "power of all brakes", "W"), ("d", "slope, positive downhill", "rad"), ("v", "speed", "m/s"),
            ("q", "heat flux into a face", "W/m2"), ("L", "depth of the heated side", "m"), ("k", "conductivity of the disc", "W/(m.K)")],
        valid: "Constant speed and slope; long against the time that heat takes through the disc.",
        accuracy: "Exact under these assumptions; that of the cooling coefficient in practice.",
        source: "Energy balance; the excess of the surface is the steady rise of a slab under constant flux, other side insulated (Carslaw and Jaeger, Conduction of Heat in Solids).",
        provenance: Memory,
        worked: "q 1e5 W/m2, L 10 mm, k 50 W/(m.K): surface 6.667 K above the bulk.",
    }
}

/// The sheets of this file.
pub static METHODS: &[&Method] = &[&DESCENT];

/// What the rubbed surface is above the bulk under a flux that lasts ([`DESCENT`]), K: flux in W/m², depth in m,
/// conductivity in W/(m·K).
#[must_use]
pub fn surface_excess(flux: f64, depth: f64, conductivity: f64) -> f64 {
    flux * depth / (3.0 * conductivity)
}

/// A speed held over a distance.
pub(super) struct Descended<'a> {
    pub(super) bench: &'a Bench<'a>,
    pub(super) situation: &'a Situation,
    pub(super) speed: f64,
    pub(super) distance: f64,
    pub(super) start: ThermodynamicTemperature,
}

/// A descent at one friction.
pub(super) struct DescentCase {
    friction_case: FrictionCase,
    /// Force that drives.
    driving: f64,
    /// Brake force at full application, the linings as hot as they end.
    available: f64,
    is_held: bool,
    /// What acts on each entry at the end.
    pressings: Vec<Option<Pressing>>,
    /// Power of one brake of each entry, W.
    powers: Vec<f64>,
    /// Highest bulk and surface temperature of each entry, K, where they can be told.
    temperatures: Vec<Option<(f64, f64)>>,
    /// Whether heat changed the friction.
    hot: bool,
}

impl Descended<'_> {
    /// The descent in every friction case.
    pub(super) fn cases(&self) -> Vec<DescentCase> {
        friction_cases(&self.bench.acting.fitted).iter().map(|&case| self.case(case)).collect()
    }

    fn case(&self, friction_case: FrictionCase) -> DescentCase {
        let acting = self.bench.acting;
        let torques = full_torques(&acting.fitted, &acting.pressed, friction_case);
        let demands = brake_forces(self.bench.machine, &acting.fitted, &torques);
        let system = self.bench.machine.reduced(self.situation);
        let driving = system.driving(self.speed);
        let cold = Forces::new(system, total(&demands));
        let powers = self.powers(&cold, &demands, driving);
        let temperatures: Vec<Option<(f64, f64)>> = (self.bench.brakes().zip(&powers))
            .map(|((_, entry, brake), power)| self.temperatures(entry, brake, *power))
            .collect();
        let factors: Vec<f64> = self
            .bench
            .brakes()
            .zip(&temperatures)
            .map(|((_, _, brake), found)| {
                let bulk = found.map_or(self.start.si(), |(bulk, _)| bulk);
                let bulk = ThermodynamicTemperature::from_si(bulk);
                brake.parts().lining.fade_factor(bulk)
            })
            .collect();
        let hot_demands = demands.iter().zip(&factors);
        let hot_demands: Vec<[f64; 2]> =
            hot_demands.map(|(demand, factor)| demand.map(|force| force * factor)).collect();
        let hot = Forces::new(system, total(&hot_demands));
        let full = hot.at(1.0, self.speed);
        let fraction = hot.fraction_for(0.0, self.speed).unwrap_or(1.0).clamp(0.0, 1.0);
        let entries = acting.fitted.iter().zip(&acting.pressed);
        DescentCase {
            friction_case,
            driving,
            available: full.brake[0] + full.brake[1],
            is_held: full.total_ground() >= driving,
            pressings: entries
                .map(|(entry, pressed)| eased(entry, pressed.as_ref()?, fraction))
                .collect(),
            powers,
            temperatures,
            hot: factors.iter().any(|factor| factor.to_bits() != 1.0_f64.to_bits()),
        }
    }

    /// Power of one brake of each entry while all together hold the speed.
    fn powers(&self, forces: &Forces, demands: &[[f64; 2]], driving: f64) -> Vec<f64> {
        let fraction = if driving > 0.0 { forces.fraction_for(0.0, self.speed) } else { Some(0.0) };
        let brake = forces.at(fraction.unwrap_or(1.0), self.speed).brake;
        let totals = forces.demand;
        let share = |own: f64, total: f64| if total > 0.0 { own / total } else { 0.0 };
        let entries = self.bench.acting.fitted.iter().zip(demands);
        entries
            .map(|(entry, own)| {
                let force = brake[0].max(0.0) * share(own[0], totals[0])
                    + brake[1].max(0.0) * share(own[1], totals[1]);
                if driving > 0.0 {
                    force * self.speed / f64::from(entry.parts().count)
                } else {
                    0.0
                }
            })
            .collect()
    }

    fn speeds(&self, entry: &Fitted) -> Speeds {
        let parts = entry.parts();
        let per_coordinate = self.bench.machine.shaft_per_coordinate(parts.rolling_radius);
        let way = match self.bench.machine.coordinate() {
            Coordinate::Way => self.speed,
            Coordinate::Angle => 0.0,
        };
        Speeds { shaft: self.speed * per_coordinate * parts.speed_ratio, way }
    }

    /// Highest bulk and surface temperature of an entry's disc; without end beyond any that is followed.
    fn temperatures(&self, entry: &Fitted, brake: &Brake, power: f64) -> Option<(f64, f64)> {
        let material = brake.parts().disc.as_ref()?.material();
        let (ring, mass) = heated_ring(brake)?;
        let cooling = Some(cooling_surface(brake, self.bench.ambient)?);
        let brakes_per_disc = entry.parts().brakes_per_disc;
        let heating = Heating { energy: 0.0, power: &[], brakes_per_disc, start: self.start };
        let heat = power * share_of(brake, &ring, &heating) * f64::from(brakes_per_disc);
        let disc = LumpedDisc { mass: mass.si(), specific_heat: material.specific_heat(), cooling };
        let stretch = Stretch {
            duration: self.distance / self.speed,
            power_at_start: heat,
            power_at_end: heat,
            speeds: self.speeds(entry),
        };
        let Some((_, bulk)) = disc.after(self.start.si(), &stretch) else {
            return Some((f64::INFINITY, f64::INFINITY));
        };
        let faces = brake.parts().faces;
        let depth = heated_depth(mass, faces, material.density(), ring.area()).si();
        let flux = heat / (f64::from(faces) * ring.area().si());
        let conductivity =
            material.substance_at(ThermodynamicTemperature::from_si(bulk)).conductivity().si();
        Some((bulk, bulk + surface_excess(flux, depth, conductivity)))
    }

    /// All checks of the descent.
    pub(super) fn checks(&self, cases: &[DescentCase]) -> Vec<Check> {
        let mut checks: Vec<Check> =
            cases.first().map(|low| self.stops(low, cases.len())).into_iter().collect();
        let pressings: Vec<_> =
            cases.iter().map(|case| (case.friction_case, case.pressings.clone())).collect();
        for (acting, entry, brake) in self.bench.brakes() {
            self.bench.on_pressing(&mut checks, acting, true, &pressings);
            self.on_rubbing(&mut checks, (acting, entry, brake), cases);
            // At high friction, as for a stop. The energy per area belongs to a stop: a descent has none.
            let area = brake.parts().pad.area().si() * f64::from(brake.parts().faces);
            let flux =
                |high: &DescentCase| Some((high.friction_case, high.powers.get(acting)? / area));
            let check = cases.last().and_then(flux).and_then(|found| {
                self.bench.of_one_case((acting, brake), CheckCode::PowerFlux, found)
            });
            checks.extend(check);
            self.on_heat(&mut checks, (acting, brake), cases);
        }
        checks
    }

    fn on_rubbing(
        &self,
        checks: &mut Vec<Check>,
        (acting, entry, brake): (usize, &Fitted, &Brake),
        cases: &[DescentCase],
    ) {
        let speed = self.speeds(entry).shaft;
        let found = of_cases(cases, |_| Some(Ok(brake.rubbing_speed(speed))));
        checks.extend(self.bench.on_brake((acting, brake), CheckCode::RubbingSpeed, true, found));
        let found = of_cases(cases, |case| {
            let own = case.pressings.get(acting).copied().flatten()?;
            Some(Ok(brake.pressure_velocity(speed, own.highest_clamp_force)))
        });
        let code = CheckCode::PressureVelocity;
        checks.extend(self.bench.on_brake((acting, brake), code, false, found));
    }

    fn on_heat(
        &self,
        checks: &mut Vec<Check>,
        (acting, brake): (usize, &Brake),
        cases: &[DescentCase],
    ) {
        let missing = self.bench.missing_of_heat(acting, brake, true);
        let peaks = |case: &DescentCase| {
            let found = case.temperatures.get(acting).copied().flatten();
            found.ok_or_else(|| missing.clone())
        };
        let bulk = of_cases(cases, |case| Some(peaks(case).map(|(bulk, _)| bulk)));
        let surface = of_cases(cases, |case| Some(peaks(case).map(|(_, surface)| surface)));
        for (code, found) in
            [(CheckCode::DiscBulkTemperature, bulk), (CheckCode::SurfaceTemperature, surface)]
        {
            checks.extend(self.bench.on_brake((acting, brake), code, true, found));
        }
    }

    fn stops(&self, low: &DescentCase, cases: usize) -> Check {
        let compared = Compared::effort(Dimension::Force, low.driving, low.available, low.is_held);
        Check {
            friction_case: (cases > 1).then_some(low.friction_case),
            hot: low.hot,
            limit_at: Some(Subject::Request("fitted")),
            ..self.bench.check(CheckCode::Stops, Judged::Compared(compared))
        }
    }

    /// Says what is estimated or unknown.
    pub(super) fn note(&self, remarks: &mut Remarks) {
        for (acting, entry, brake) in self.bench.brakes() {
            let Some(surface) = cooling_surface(brake, self.bench.ambient) else { continue };
            remarks.method(&LUMPED_DISC);
            for method in surface.methods() {
                remarks.method(method);
            }
            if surface.is_estimated() {
                let subject =
                    Subject::Brake { fitted_index: Some(acting), input: "disc/cooling/model" };
                let detail = "the cooling comes from a correlation, not from a measurement on this machine; the coefficient at the start temperature is given";
                let code = Notice::CoolingEstimated;
                let mut finding = Finding::notice(code, Severity::Info, subject, detail);
                let dimension = Dimension::HeatTransferCoefficient;
                let coefficient = surface.coefficient(self.start.si(), self.speeds(entry));
                finding.actual = Some(Amount { dimension, si: coefficient });
                remarks.find_once(finding);
            }
        }
    }

    /// The numbers behind the checks.
    pub(super) fn numbers(&self, cases: &[DescentCase]) -> Vec<DescentNumbers> {
        let number = |case: &DescentCase| DescentNumbers {
            friction_case: case.friction_case,
            time: self.distance / self.speed,
            driving: case.driving,
            available: case.available,
            power: case.driving * self.speed,
        };
        cases.iter().map(number).collect()
    }

    /// Highest bulk and surface temperature of each entry over the cases, K.
    pub(super) fn hottest(cases: &[DescentCase], acting: usize) -> Option<(f64, f64)> {
        let found =
            cases.iter().filter_map(|case| case.temperatures.get(acting).copied().flatten());
        found.reduce(|one, other| (one.0.max(other.0), one.1.max(other.1)))
    }
}

fn of_cases(
    cases: &[DescentCase],
    value: impl Fn(&DescentCase) -> Option<Found>,
) -> Vec<(FrictionCase, Found)> {
    cases.iter().filter_map(|case| Some((case.friction_case, value(case)?))).collect()
}
