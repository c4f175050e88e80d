//! One range of a property: a cubic in the Celsius temperature, perhaps with a pole outside the range.

use roots::{Roots, find_roots_quadratic};

/// A term factor/(θ − at).
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Pole {
    /// Numerator, in the unit of the property times K.
    pub factor: f64,
    /// Where the term grows without bound, °C; outside the range of its piece.
    pub at: f64,
}

/// A property from one Celsius temperature to a higher one: a0 + a1 θ + a2 θ² + a3 θ³ + factor/(θ − at).
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Piece {
    /// Where the range begins, °C.
    pub from: f64,
    /// Where it ends, °C.
    pub to: f64,
    /// a0 to a3, in the coherent SI unit of the property over powers of °C.
    pub polynomial: [f64; 4],
    /// The term with a pole.
    pub pole: Option<Pole>,
}

impl Piece {
    /// The straight line through two points (°C, value).
    pub(super) fn line(from: (f64, f64), to: (f64, f64)) -> Self {
        let slope = (to.1 - from.1) / (to.0 - from.0);
        let polynomial = [from.1 - slope * from.0, slope, 0.0, 0.0];
        Self { from: from.0, to: to.0, polynomial, pole: None }
    }

    /// The property at `theta` °C, which lies in the range.
    pub(super) fn at(&self, theta: f64) -> f64 {
        let [a0, a1, a2, a3] = self.polynomial;
        let pole = self.pole.map_or(0.0, |pole| pole.factor / (theta - pole.at));
        a0 + theta * (a1 + theta * (a2 + theta * a3)) + pole
    }

    /// The integral from `a` to `b` °C, both in the range.
    pub(super) fn integral(&self, a: f64, b: f64) -> f64 {
        let pole = self.pole.map_or(0.0, |pole| {
            pole.factor * libm::log1p((b - a) / (a - pole.at)) // ln((b − at)/(a − at))
        });
        self.antiderivative(b) - self.antiderivative(a) + pole
    }

    fn antiderivative(&self, theta: f64) -> f64 {
        let [a0, a1, a2, a3] = self.polynomial;
        theta * (a0 + theta * (a1 / 2.0 + theta * (a2 / 3.0 + theta * a3 / 4.0)))
    }

    /// Whether the property is finite and above zero in the whole range.
    ///
    /// Sufficient, not necessary: the least of the cubic plus the least of the pole term, which is
    /// monotonic because its pole lies outside.
    pub(super) fn is_positive(&self) -> bool {
        let Self { from, to, pole, .. } = *self;
        let clear = pole.is_none_or(|pole| pole.at < from || pole.at > to);
        let term = |theta: f64| pole.map_or(0.0, |pole| pole.factor / (theta - pole.at));
        let least = self.least_of_cubic() + term(from).min(term(to));
        let ends_are_finite = self.at(from).is_finite() && self.at(to).is_finite();
        clear && least > 0.0 && ends_are_finite
    }

    fn least_of_cubic(&self) -> f64 {
        let cubic = Self { pole: None, ..*self };
        let [_, a1, a2, a3] = self.polynomial;
        let ends = cubic.at(self.from).min(cubic.at(self.to));
        let turning = find_roots_quadratic(3.0 * a3, 2.0 * a2, a1);
        let inside = |least: f64, theta: f64| {
            if theta > self.from && theta < self.to { least.min(cubic.at(theta)) } else { least }
        };
        match turning {
            Roots::One([theta]) => inside(ends, theta),
            Roots::Two([first, second]) => inside(inside(ends, first), second),
            Roots::No(_) | Roots::Three(_) | Roots::Four(_) => ends,
        }
    }
}
