//! A property over the whole temperature scale: pieces, continued by constants.

use super::piece::Piece;
use crate::calc::fault::{FaultCode, Faults};

/// A printed point: Celsius temperature and value in the coherent SI unit of the property.
pub type Point = (f64, f64);

/// A property over temperature, in its coherent SI unit; the temperature is in °C, as sources print it.
///
/// Proof that the property is finite and above zero at every temperature, so that its integral rises.
/// Outside the published range it stays constant. At a jump between pieces the upper piece holds.
#[derive(Debug, Clone, PartialEq)]
pub struct Curve {
    start: f64,
    below: f64,
    /// Each piece with its integral over its own range.
    pieces: Vec<(Piece, f64)>,
    above: f64,
}

impl Curve {
    /// The same value at every temperature.
    ///
    /// # Errors
    /// A value that is not finite and above zero.
    pub fn constant(value: f64) -> Result<Self, Faults> {
        let mut faults = Faults::new();
        positive(&mut faults, value);
        faults.into_result(Self { start: 0.0, below: value, pieces: Vec::new(), above: value })
    }

    /// Straight lines between points, constant outside.
    ///
    /// # Errors
    /// No point, temperatures that do not rise, or a value that is not finite and above zero.
    pub fn table(points: &[Point]) -> Result<Self, Faults> {
        let (&(start, below), &(_, above)) = ends(points)?;
        let mut faults = Faults::new();
        all_positive(&mut faults, points);
        let pieces = pairs(points).map(|(from, to)| Piece::line(from, to)).collect();
        Self::joined(faults, start, below, pieces, above)
    }

    /// Mean values m(θ) "from `base` °C to θ": the integral from `base` is m(θ)(θ − base), m straight
    /// between the points and constant outside; the property itself is the derivative of that.
    ///
    /// # Errors
    /// No point, temperatures that do not rise from `base`, or mean values that no positive property has.
    pub fn mean_from(base: f64, points: &[Point]) -> Result<Self, Faults> {
        let (&(start, below), &(_, above)) = ends(points)?;
        let mut faults = Faults::new();
        let detail = "a mean value needs a temperature above the base";
        faults.require(start > base, "", FaultCode::NotInOrder, detail);
        all_positive(&mut faults, points);
        let pieces = pairs(points).map(|(from, to)| local(base, from, to)).collect();
        Self::joined(faults, start, below, pieces, above)
    }

    /// Formulas by ranges that follow each other, constant outside.
    ///
    /// # Errors
    /// No piece, ranges that do not rise or do not meet, a pole in its range, or a value not above zero.
    pub fn pieces(pieces: Vec<Piece>) -> Result<Self, Faults> {
        let (first, last) = ends(&pieces)?;
        let (start, below, above) = (first.from, first.at(first.from), last.at(last.to));
        Self::joined(Faults::new(), start, below, pieces, above)
    }

    fn joined(
        mut faults: Faults,
        start: f64,
        below: f64,
        pieces: Vec<Piece>,
        above: f64,
    ) -> Result<Self, Faults> {
        let mut end = start;
        for piece in &pieces {
            // Ranges are copied from the same text, so their ends must be the same number.
            let meets = piece.from.total_cmp(&end).is_eq() && piece.to > piece.from;
            let detail = "temperatures must rise, and ranges must follow each other";
            faults.require(meets, "", FaultCode::NotInOrder, detail);
            let detail = "must be above 0 in its whole range, without a pole in it";
            faults.require(piece.is_positive(), "", FaultCode::OutOfRange, detail);
            end = piece.to;
        }
        faults.require(start.is_finite() && end.is_finite(), "", FaultCode::OutOfRange, FINITE);
        let whole = |piece: Piece| (piece, piece.integral(piece.from, piece.to));
        let pieces = pieces.into_iter().map(whole).collect();
        faults.into_result(Self { start, below, pieces, above })
    }

    /// The property at `theta` °C.
    #[must_use]
    pub fn at(&self, theta: f64) -> f64 {
        if theta < self.start {
            return self.below;
        }
        let piece = self.pieces.iter().find(|(piece, _)| theta < piece.to);
        piece.map_or(self.above, |(piece, _)| piece.at(theta))
    }

    /// The integral up to `theta` °C from a temperature that is the same for every call.
    pub(super) fn integral(&self, theta: f64) -> f64 {
        if theta < self.start {
            return self.below * (theta - self.start);
        }
        let mut sum = 0.0;
        let mut end = self.start;
        for (piece, whole) in &self.pieces {
            if theta < piece.to {
                return sum + piece.integral(piece.from, theta);
            }
            sum += whole;
            end = piece.to;
        }
        sum + self.above * (theta - end)
    }
}

const FINITE: &str = "must be a finite number";

fn positive(faults: &mut Faults, value: f64) {
    faults.positive("", value);
    faults.require(value < f64::INFINITY, "", FaultCode::OutOfRange, FINITE);
}

fn all_positive(faults: &mut Faults, points: &[Point]) {
    for &(_, value) in points {
        positive(faults, value);
    }
}

fn ends<T>(list: &[T]) -> Result<(&T, &T), Faults> {
    list.first().zip(list.last()).ok_or_else(|| {
        let mut faults = Faults::new();
        faults.add("", FaultCode::WrongCount, "needs at least one entry");
        faults
    })
}

fn pairs(points: &[Point]) -> impl Iterator<Item = (Point, Point)> + '_ {
    points.iter().copied().zip(points.iter().copied().skip(1))
}

/// The property between two mean values: the derivative of m(θ)(θ − base) with m straight.
fn local(base: f64, from: Point, to: Point) -> Piece {
    let slope = (to.1 - from.1) / (to.0 - from.0);
    let derivative = |point: Point| (point.0, point.1 + slope * (point.0 - base));
    Piece::line(derivative(from), derivative(to))
}
