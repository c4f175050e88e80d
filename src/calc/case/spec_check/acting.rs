//! The brakes that act in a duty.

use crate::calc::fault::{FaultCode, Faults};
use crate::calc::fitted::{Fitted, Pressed};

/// Brakes of an entry that act in a duty.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Use {
    /// Which entry of the fitted brakes.
    pub fitted_index: usize,
    /// How many of its brakes, 1 to all; none: all.
    pub count: Option<u32>,
}

/// The entries that act, with what presses them.
#[derive(Debug, Clone)]
pub(super) struct Acting {
    /// For each of them, its place among all fitted entries.
    pub(super) indices: Vec<usize>,
    /// The entries, with as many brakes as act.
    pub(super) fitted: Vec<Fitted>,
    /// What presses each.
    pub(super) pressed: Vec<Option<Pressed>>,
}

impl Acting {
    /// Those that are used; all if nothing is said. Faults are placed below the duty.
    ///
    /// # Errors
    /// An index beyond the entries or twice, more brakes than there are, or a part of a disc's brakes.
    pub(super) fn new(
        fitted: &[Fitted],
        pressed: &[Option<Pressed>],
        uses: Option<&[Use]>,
    ) -> Result<Self, Faults> {
        let Some(uses) = uses else {
            return Ok(Self {
                indices: (0..fitted.len()).collect(),
                fitted: fitted.to_vec(),
                pressed: pressed.to_vec(),
            });
        };
        let mut faults = Faults::new();
        let holds = (1..=fitted.len()).contains(&uses.len());
        let detail = "must name 1 entry of fitted or more, each once";
        faults.require(holds, "uses", FaultCode::WrongCount, detail);
        let mut acting = Self { indices: Vec::new(), fitted: Vec::new(), pressed: Vec::new() };
        for (place, one) in uses.iter().enumerate().take(fitted.len()) {
            let at = format!("uses/{place}");
            faults.part(&at, acting.add(fitted, pressed, one));
        }
        faults.into_result(acting)
    }

    fn add(
        &mut self,
        fitted: &[Fitted],
        pressed: &[Option<Pressed>],
        one: &Use,
    ) -> Result<(), Faults> {
        let mut faults = Faults::new();
        let index = one.fitted_index;
        let found = fitted.get(index).zip(pressed.get(index));
        let Some((entry, pressed)) = found.filter(|_| !self.indices.contains(&index)) else {
            let detail = "must be the index of an entry of fitted, each named once";
            faults.add("fitted_index", FaultCode::OutOfRange, detail);
            return Err(faults);
        };
        let count = one.count.unwrap_or(entry.parts().count);
        let holds = (1..=entry.parts().count).contains(&count);
        let detail = "must be 1 or more, and not above the count of the entry";
        faults.require(holds, "count", FaultCode::OutOfRange, detail);
        faults.into_result(())?;
        // What can be wrong with a smaller number is that it takes a part of a disc's brakes.
        let entry =
            entry.with_count(count).map_err(|faults| faults.moved("brakes_per_disc", "count"))?;
        self.indices.push(index);
        self.fitted.push(entry);
        self.pressed.push(*pressed);
        Ok(())
    }

    /// The same brakes with each entry's friction multiplied; none if that changes nothing.
    pub(super) fn hot(&self, factors: &[f64]) -> Option<Self> {
        let factor = |index: &usize| factors.get(*index).copied().unwrap_or(1.0);
        let changes = self.indices.iter().any(|index| factor(index).to_bits() != 1.0_f64.to_bits());
        let entries = self.fitted.iter().zip(&self.indices);
        let fitted =
            || entries.map(|(entry, index)| entry.with_friction_factor(factor(index))).collect();
        changes.then(|| Self {
            indices: self.indices.clone(),
            fitted: fitted(),
            pressed: self.pressed.clone(),
        })
    }

    /// The entry of all fitted ones that an entry of these is.
    pub(super) fn index(&self, acting: usize) -> usize {
        self.indices.get(acting).copied().unwrap_or(acting)
    }
}
