//! Which axle locks first, and how far each is from locking.

use super::{Forces, Reduced};

/// The factor on all brake torques at which each axle reaches its adhesion; none if it never does.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct LockFactors {
    /// Of the front axle.
    pub front: Option<f64>,
    /// Of the rear axle.
    pub rear: Option<f64>,
}

impl LockFactors {
    /// Front factor over rear factor: at most 1 when the front axle locks first or both at once.
    ///
    /// None if neither locks; infinite if only the rear one does.
    #[must_use]
    pub fn front_over_rear(&self) -> Option<f64> {
        match (self.front, self.rear) {
            (Some(front), Some(rear)) => Some(front / rear),
            (Some(_), None) => Some(0.0),
            (None, Some(_)) => Some(f64::INFINITY),
            (None, None) => None,
        }
    }

    /// Whether the rear axle reaches its adhesion before the front one.
    #[must_use]
    pub fn rear_first(&self) -> bool {
        self.front_over_rear().is_some_and(|ratio| ratio > 1.0)
    }
}

/// The lock factors of a vehicle with known axle loads and adhesion, at `speed`.
///
/// `demand` is the brake force of each axle at full application. See [`super::LOCK_ORDER`].
#[must_use]
pub fn lock_factors(system: &Reduced, demand: [f64; 2], speed: f64) -> Option<LockFactors> {
    let tires = system.tires?;
    let (adhesion, base) = (tires.adhesion?, tires.wheelbase?);
    let total = demand[0] + demand[1];
    if total <= 0.0 {
        return None;
    }
    let (rotating, retarding) = (system.rotating, system.retarding(speed));
    let transfer = base.height / base.wheelbase;
    // Without caps, all linear in the factor: S = (λ·D − κ·R)/(1 + κ).
    let ground = (-rotating * retarding / (1.0 + rotating), total / (1.0 + rotating));
    let rear_normal = (
        tires.normal_force * base.front / base.wheelbase
            - transfer * (ground.0 + system.resistance),
        -transfer * ground.1,
    );
    let front_normal = (tires.normal_force - rear_normal.0, -rear_normal.1);
    let factor = |force: f64, normal: (f64, f64)| {
        let taken = force / total * rotating;
        let own = (-taken * (ground.0 + retarding), force - taken * ground.1);
        let gain = own.1 - adhesion * normal.1;
        (force > 0.0 && gain > 0.0).then(|| (adhesion * normal.0 - own.0) / gain)
    };
    Some(LockFactors {
        front: factor(demand[0], front_normal),
        rear: factor(demand[1], rear_normal),
    })
}

impl Forces {
    /// The lock factors of these brakes at `speed`.
    #[must_use]
    pub fn lock_factors(&self, speed: f64) -> Option<LockFactors> {
        lock_factors(&self.system, self.demand, speed)
    }
}
