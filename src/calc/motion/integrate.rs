//! Dormand-Prince 5(4) with dense output, for motions whose forces depend on speed.
//!
//! Own code of a published method, because a stop needs the exact instant at which a speed is reached and the
//! same bytes on every machine: the integrators on offer report fixed output grids only, or take powers from
//! the platform's mathematics library. Coefficients: Dormand and Prince, J. Comp. Appl. Math. 6 (1980) 19-26;
//! dense output: Hairer, Nørsett, Wanner, Solving Ordinary Differential Equations I, II.6 (from memory,
//! verified by the order of convergence and closed forms in the tests).

const RELATIVE_TOLERANCE: f64 = 1e-11;
/// More steps than any stop needs (a few dozen); a fence against endless work.
const MOST_STEPS: usize = 20_000;

const NODES: [f64; 6] = [0.2, 0.3, 0.8, 8.0 / 9.0, 1.0, 1.0];
const STAGES: [[f64; 6]; 6] = [
    [0.2, 0.0, 0.0, 0.0, 0.0, 0.0],
    [3.0 / 40.0, 9.0 / 40.0, 0.0, 0.0, 0.0, 0.0],
    [44.0 / 45.0, -56.0 / 15.0, 32.0 / 9.0, 0.0, 0.0, 0.0],
    [19372.0 / 6561.0, -25360.0 / 2187.0, 64448.0 / 6561.0, -212.0 / 729.0, 0.0, 0.0],
    [9017.0 / 3168.0, -355.0 / 33.0, 46732.0 / 5247.0, 49.0 / 176.0, -5103.0 / 18656.0, 0.0],
    [35.0 / 384.0, 0.0, 500.0 / 1113.0, 125.0 / 192.0, -2187.0 / 6784.0, 11.0 / 84.0],
];
const ERROR: [f64; 7] = [
    71.0 / 57600.0,
    0.0,
    -71.0 / 16695.0,
    71.0 / 1920.0,
    -17253.0 / 339_200.0,
    22.0 / 525.0,
    -1.0 / 40.0,
];
const DENSE: [f64; 7] = [
    -12_715_105_075.0 / 11_282_082_432.0,
    0.0,
    87_487_479_700.0 / 32_700_410_799.0,
    -10_690_763_975.0 / 1_880_347_072.0,
    701_980_252_875.0 / 199_316_789_632.0,
    -1_453_857_185.0 / 822_651_844.0,
    69_997_945.0 / 29_380_423.0,
];

/// One accepted step of a motion: speed and way as polynomials of the step's own time.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Step {
    /// Start, from the start of the integration.
    pub(super) start: f64,
    /// Length of the step as integrated; a stop may end inside it.
    pub(super) length: f64,
    speed: [f64; 5],
    way: [f64; 5],
}

fn interpolate(coefficients: &[f64; 5], share: f64) -> f64 {
    let [c0, c1, c2, c3, c4] = coefficients;
    let rest = 1.0 - share;
    c0 + share * (c1 + rest * (c2 + share * (c3 + rest * c4)))
}

impl Step {
    /// Speed at `time` after the start of the step.
    pub(super) fn speed_at(&self, time: f64) -> f64 {
        interpolate(&self.speed, time / self.length)
    }

    /// The same step, its way counted from `origin` before the integration began.
    pub(super) fn moved(mut self, origin: f64) -> Self {
        self.way[0] += origin;
        self
    }

    /// Way at `time` after the start of the step.
    pub(super) fn way_at(&self, time: f64) -> f64 {
        interpolate(&self.way, time / self.length)
    }
}

/// Integrates speed and way under `deceleration(time, speed)` from `speed` over `horizon`.
///
/// Ends early with the step in which the speed falls to `until`. None if the tolerance cannot be kept.
pub(super) fn integrate(
    deceleration: impl Fn(f64, f64) -> f64,
    speed: f64,
    horizon: f64,
    until: f64,
) -> Option<Vec<Step>> {
    let mut steps = Vec::new();
    let (mut time, mut speed, mut way) = (0.0, speed, 0.0);
    let scale = speed.abs().max(until.abs());
    let mut length = horizon / 8.0;
    for _ in 0..MOST_STEPS {
        if time >= horizon || length <= 0.0 {
            break;
        }
        length = length.min(horizon - time);
        let (step, error) = attempt(&deceleration, time, speed, way, length);
        let ratio = error / (RELATIVE_TOLERANCE * scale);
        if !ratio.is_finite() {
            return None;
        }
        if ratio <= 1.0 {
            let last = horizon - time - length <= 1e-14 * horizon;
            (speed, way) = (step.speed_at(length), step.way_at(length));
            time = if last { horizon } else { time + length };
            steps.push(step);
            if speed <= until || last {
                return Some(steps);
            }
        }
        length *= (0.9 / libm::pow(ratio.max(1e-10), 0.2)).clamp(0.2, 5.0);
    }
    (time >= horizon).then_some(steps)
}

fn attempt(
    deceleration: &impl Fn(f64, f64) -> f64,
    time: f64,
    speed: f64,
    way: f64,
    length: f64,
) -> (Step, f64) {
    let mut slopes = [[0.0; 2]; 7];
    slopes[0] = [-deceleration(time, speed), speed];
    let mut end = [speed, way];
    for (stage, (row, node)) in STAGES.iter().zip(NODES).enumerate() {
        end = [speed, way];
        for (weight, slope) in row.iter().zip(slopes) {
            end[0] += length * weight * slope[0];
            end[1] += length * weight * slope[1];
        }
        if let Some(slope) = slopes.get_mut(stage + 1) {
            *slope = [-deceleration(time + node * length, end[0]), end[0]];
        }
    }
    let weighted = |weights: &[f64; 7], part: fn(&[f64; 2]) -> f64| -> f64 {
        weights.iter().zip(&slopes).map(|(weight, slope)| weight * part(slope)).sum::<f64>()
            * length
    };
    let dense = |from: f64, to: f64, part: fn(&[f64; 2]) -> f64| {
        let difference = to - from;
        let bulge = length * part(&slopes[0]) - difference;
        [
            from,
            difference,
            bulge,
            difference - length * part(&slopes[6]) - bulge,
            weighted(&DENSE, part),
        ]
    };
    let step = Step {
        start: time,
        length,
        speed: dense(speed, end[0], |slope| slope[0]),
        way: dense(way, end[1], |slope| slope[1]),
    };
    (step, weighted(&ERROR, |slope| slope[0]).abs())
}
