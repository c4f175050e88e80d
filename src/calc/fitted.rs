//! Brakes as fitted to a machine: how many, where, and who presses them.

use std::sync::Arc;

use super::actuation::{Actuation, Chosen, Input, Pressing};
use super::brake::Brake;
use super::fault::{FaultCode, Faults};
use super::friction::FrictionCase;
use super::quantity::{Force, Length, Si, Torque, Volume};

/// What brakes.
#[derive(Debug, Clone, PartialEq)]
pub enum Source {
    /// A brake in all its parts.
    Brake(Arc<Brake>),
    /// One brake of known torque.
    Torque(Torque),
}

/// Where brakes act on a vehicle.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Place {
    /// On the front axle.
    Front,
    /// On the rear axle.
    Rear,
    /// On all axles alike.
    All,
}

/// An entry of fitted brakes, as given.
#[derive(Debug, Clone, PartialEq)]
pub struct FittedParts {
    /// One brake of the entry.
    pub source: Source,
    /// Brakes that act together, 1 to 1000.
    pub count: u32,
    /// Where, on a vehicle; none elsewhere.
    pub place: Option<Place>,
    /// How many of them press the same disc, 1 to `count`.
    pub brakes_per_disc: u32,
    /// Brake speed over wheel speed or over the speed of the reference shaft.
    pub speed_ratio: f64,
    /// Of these wheels, if another than the machine's.
    pub rolling_radius: Option<Length>,
    /// The control that presses them, if shared.
    pub control: Option<String>,
    /// The part of the operator's force that reaches these brakes, in (0, 1].
    pub operator_share: f64,
}

/// An entry of fitted brakes that can exist.
#[derive(Debug, Clone, PartialEq)]
pub struct Fitted(FittedParts);

impl Fitted {
    /// Checks the parts.
    ///
    /// # Errors
    /// Every part without a physical meaning.
    pub fn new(parts: FittedParts) -> Result<Self, Faults> {
        let mut faults = Faults::new();
        let counts = [("count", parts.count), ("brakes_per_disc", parts.brakes_per_disc)];
        for (member, count) in counts {
            faults.require(
                (1..=1000).contains(&count),
                member,
                FaultCode::OutOfRange,
                "must lie between 1 and 1000",
            );
        }
        if faults.is_empty() {
            let holds = parts.count.is_multiple_of(parts.brakes_per_disc);
            faults.require(
                holds,
                "brakes_per_disc",
                FaultCode::OutOfRange,
                "must divide count: each disc has the same number of brakes",
            );
        }
        faults.positive("speed_ratio", parts.speed_ratio);
        if let Some(radius) = parts.rolling_radius {
            faults.positive("rolling_radius", radius);
        }
        let holds = parts.operator_share > 0.0 && parts.operator_share <= 1.0;
        faults.require(
            holds,
            "operator_share",
            FaultCode::OutOfRange,
            "must lie above 0 and not above 1",
        );
        if let Source::Torque(torque) = &parts.source {
            faults.positive("torque", *torque);
        }
        faults.into_result(Self(parts))
    }

    /// The parts.
    #[must_use]
    pub const fn parts(&self) -> &FittedParts {
        &self.0
    }

    /// The brake, if it is given in its parts.
    #[must_use]
    pub fn brake(&self) -> Option<&Brake> {
        match &self.0.source {
            Source::Brake(brake) => Some(brake),
            Source::Torque(_) => None,
        }
    }

    /// The same entry with another number of brakes.
    ///
    /// # Errors
    /// A number that [`Self::new`] refuses.
    pub fn with_count(&self, count: u32) -> Result<Self, Faults> {
        Self::new(FittedParts { count, ..self.0.clone() })
    }

    /// The same entry with its friction multiplied, as hot linings have it. A known torque stays as it is.
    #[must_use]
    pub fn with_friction_factor(&self, factor: f64) -> Self {
        let source = match &self.0.source {
            Source::Brake(brake) => Source::Brake(Arc::new(brake.with_friction_factor(factor))),
            Source::Torque(torque) => Source::Torque(*torque),
        };
        Self(FittedParts { source, ..self.0.clone() })
    }

    fn actuation(&self) -> Option<&Actuation> {
        self.brake()?.parts().actuation.as_ref()
    }

    /// Friction coefficient in a case, if it has one.
    #[must_use]
    pub fn coefficient(&self, case: FrictionCase) -> Option<f64> {
        self.brake().map(|brake| brake.parts().lining.friction().at(case))
    }

    /// Torque of one brake in a case, pressed as `pressed` says.
    #[must_use]
    pub fn torque(&self, case: FrictionCase, pressed: Option<&Pressed>) -> Torque {
        match (&self.0.source, pressed) {
            (Source::Torque(torque), _) => *torque,
            (Source::Brake(brake), Some(pressed)) => {
                brake.torque(case, pressed.pressing.clamp_force)
            }
            (Source::Brake(_), None) => Torque::from_si(0.0),
        }
    }
}

/// What presses one brake of an entry, and why.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Pressed {
    /// What acts.
    pub pressing: Pressing,
    /// The input it came from.
    pub chosen: Chosen,
}

/// The friction cases that fitted brakes give results for.
#[must_use]
pub fn friction_cases(fitted: &[Fitted]) -> &'static [FrictionCase] {
    let has_range = |entry: &Fitted| {
        entry.brake().is_some_and(|brake| brake.parts().lining.friction().is_range())
    };
    if fitted.iter().any(has_range) { FrictionCase::RANGE } else { FrictionCase::SINGLE }
}

/// Finds what presses each entry: its own input, that of its shared control, or the maximum given.
///
/// None for an entry of known torque. Faults are placed below the list.
///
/// # Errors
/// An entry without any input, inputs that exclude each other, or different forces on one control.
pub fn press(fitted: &[Fitted]) -> Result<Vec<Option<Pressed>>, Faults> {
    let mut faults = Faults::new();
    let mut pressed = Vec::with_capacity(fitted.len());
    for (index, entry) in fitted.iter().enumerate() {
        let Some(brake) = entry.brake() else {
            pressed.push(None);
            continue;
        };
        let at = format!("{index}/brake/actuation");
        let Some(actuation) = &brake.parts().actuation else {
            faults.add(at, FaultCode::Missing, "is required here: it tells what presses the pads");
            continue;
        };
        let chosen = chosen(fitted, index, entry, actuation);
        match faults.part(&at, chosen) {
            Some(Some(chosen)) => {
                let pressing =
                    actuation.press(chosen.input, entry.0.operator_share, brake.parts().faces);
                pressed.push(Some(Pressed { pressing, chosen }));
            }
            Some(None) => faults.add(
                at,
                FaultCode::Missing,
                "needs an input that presses, or the maximum of one",
            ),
            None => {}
        }
    }
    faults.into_result(pressed)
}

/// The input of one entry, through its control where it has one.
fn chosen(
    fitted: &[Fitted],
    index: usize,
    entry: &Fitted,
    actuation: &Actuation,
) -> Result<Option<Chosen>, Faults> {
    let own = actuation.chosen(entry.0.operator_share)?;
    let is_operated = |chosen: &Chosen| matches!(chosen.input, Input::OperatorForce(_));
    let (Some(control), true) =
        (&entry.0.control, own.is_none_or(|own| own.is_maximum || is_operated(&own)))
    else {
        return Ok(own);
    };
    if actuation_has_no_operator(actuation) {
        return Ok(own);
    }
    let sharing = || {
        fitted
            .iter()
            .filter(|other| other.0.control.as_ref() == Some(control))
            .filter_map(Fitted::actuation)
    };
    let mut given = sharing().filter_map(|other| other.operator().0);
    if let Some(force) = given.next() {
        if given.any(|other| other.si().to_bits() != force.si().to_bits()) {
            let mut faults = Faults::new();
            let detail = format!(
                "control \"{control}\" has one operator: all its entries must give the same force, see entry {index}"
            );
            faults.add("", FaultCode::Differs, detail);
            return Err(faults);
        }
        return Ok(Some(Chosen { input: Input::OperatorForce(force), is_maximum: false }));
    }
    // No force given: the least that any entry of the control allows, unless this entry's line limits it further.
    let least = sharing()
        .filter_map(|other| other.operator().1)
        .min_by(|one, other| one.si().total_cmp(&other.si()));
    Ok(match (own, least) {
        (Some(own), Some(force)) if is_operated(&own) => {
            Some(Chosen { input: Input::OperatorForce(force), ..own })
        }
        (None, Some(force)) => {
            Some(Chosen { input: Input::OperatorForce(force), is_maximum: true })
        }
        (own, _) => own,
    })
}

fn actuation_has_no_operator(actuation: &Actuation) -> bool {
    match actuation {
        Actuation::Hydraulic(chain) => chain.parts().master_cylinder.is_none(),
        Actuation::Cable(_) => false,
        Actuation::ClampForce(_) | Actuation::Pneumatic(_) | Actuation::Spring(_) => true,
    }
}

/// Travel of the control of entry `index`: all brakes on it take their fluid through its cylinder.
///
/// `volumes` is the fluid of one brake of each entry.
#[must_use]
pub fn operator_stroke(
    fitted: &[Fitted],
    volumes: &[Option<Volume>],
    index: usize,
) -> Option<Length> {
    let entry = fitted.get(index)?;
    let Some(Actuation::Hydraulic(chain)) = entry.actuation() else { return None };
    let master = chain.parts().master_cylinder.as_ref()?;
    let mut total = 0.0;
    for (other_index, (other, volume)) in fitted.iter().zip(volumes).enumerate() {
        let shares = entry.0.control.is_some() && other.0.control == entry.0.control;
        if (other_index == index || shares)
            && matches!(other.actuation(), Some(Actuation::Hydraulic(_)))
        {
            total += f64::from(other.0.count) * other.0.operator_share * (*volume)?.si();
        }
    }
    Some(master.stroke(Volume::from_si(total)))
}

/// What acts on an entry that is applied by a fraction of its force, 0 to 1.
///
/// A spring stays as strong as it is: what opens the brake does not change.
#[must_use]
pub fn eased(entry: &Fitted, pressed: &Pressed, fraction: f64) -> Option<Pressing> {
    let full = pressed.pressing;
    let eased = needed(entry, Force::from_si(full.clamp_force.si() * fraction))?;
    Some(Pressing {
        spring_force: full.spring_force,
        release_pressure: full.release_pressure,
        ..eased
    })
}

/// The operator's force of an entry that must clamp with `clamp_force`: its share goes in.
#[must_use]
fn needed(entry: &Fitted, clamp_force: Force) -> Option<Pressing> {
    let brake = entry.brake()?;
    let mut needed = brake.parts().actuation.as_ref()?.needed(clamp_force, brake.parts().faces);
    needed.operator_force = needed.operator_force.map(|force| force / entry.0.operator_share);
    Some(needed)
}
