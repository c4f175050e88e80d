//! The slab in finite volumes: surface and insulated face for any history of the flux, step by step.
//!
//! What is marched is the deviation from the slab's mean, so that the heat content stays exactly what was put in,
//! whatever the mesh. Of it the parabola that a lasting flux would leave is taken off in closed form; only the rest,
//! which is small and dies out, is left to the mesh. Each step is the L-stable two-stage method of Alexander (SIAM J. Numer. Anal. 14 (1977) 1006,
//! γ = 1 − 1/√2, from memory; its order is checked in the tests), implicit, for a flux that is linear within it.

use crate::calc::quantity::{Length, Si};

/// Cells of a slab, finest at the heated face.
const CELLS: usize = 24;
/// Width of the first cell over the depth.
const FIRST: f64 = 1.0 / 80.0;
/// Each cell is this much wider than the one before: the sum of the widths is the depth for 24 cells.
const GROWTH: f64 = 1.092_900_069_192_532_8;
/// 1 − 1/√2.
const GAMMA: f64 = 1.0 - std::f64::consts::FRAC_1_SQRT_2;

crate::method_sheet! {
    SLAB_VOLUMES {
        id: "heat.slab_volumes",
        name: "Slab temperatures under any flux, in finite volumes",
        equation: "rho c w_i dT_i/dt = k (T_(i-1) - T_i)/d_(i-1) - k (T_i - T_(i+1))/d_i + q at the heated face, less the parabola q L (3 X^2 - 1)/(6 k)",
        symbols: [("T_i", "temperature of a cell", "K"), ("w_i, d_i", "width of a cell, distance of two centers", "m"), ("L", "depth", "m"), ("X", "height above the insulated face over the depth", "1"),
            ("q", "heat flux into the face", "W/m2"), ("k", "thermal conductivity", "W/(m.K)"), ("rho c", "heat capacity per volume", "J/(m3.K)")],
        valid: "One slab depth behind each heated face, the other face insulated; properties held within a stop.",
        accuracy: "Energy to rounding; peaks within 1e-4 of the rise of the closed series, the first instants of a jump within 0.5 %.",
        source: "Finite volumes; implicit two-stage method of Alexander, SIAM J. Numer. Anal. 14 (1977) 1006 (from memory).",
        provenance: Memory,
        worked: "Constant flux, Fo = 0.5: surface 0.8319, insulated face 0.3348 over q L/k.",
    }
}

/// The temperatures in a slab as deviations from its mean, K.
#[derive(Debug, Clone, PartialEq)]
pub struct SlabVolumes {
    depth: f64,
    widths: [f64; CELLS],
    /// Over distance of the centers and width of the cell, to the cell before and to the next, 1/m².
    couplings: [[f64; CELLS]; 2],
    /// The parabola of a lasting flux, averaged over each cell, over the flux times depth over conductivity.
    parabola: [f64; CELLS],
    /// Temperature gradient at the heated face, K/m.
    gradient: f64,
    /// What deviates from the parabola, K.
    rest: [f64; CELLS],
    /// Of the last step: the next is often as long.
    matrix: Matrix,
}

/// What changes of a slab's temperatures as it goes through steps.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Deviations {
    gradient: f64,
    rest: [f64; CELLS],
}

/// A step in time with its flux and the slab's properties, all SI.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct SlabStep {
    /// s.
    pub duration: f64,
    /// Flux into the face at the start, W/m².
    pub flux_at_start: f64,
    /// Flux into the face at the end, W/m².
    pub flux_at_end: f64,
    /// W/(m·K).
    pub conductivity: f64,
    /// Density times specific heat, J/(m³·K).
    pub volumetric_heat: f64,
}

impl SlabVolumes {
    /// A slab of one temperature.
    #[must_use]
    pub fn new(depth: Length) -> Self {
        let depth = depth.si();
        let mut widths = [0.0; CELLS];
        let mut width = FIRST;
        let mut sum = 0.0;
        for cell in &mut widths {
            *cell = width;
            sum += width;
            width *= GROWTH;
        }
        // The growth is rounded: the widths fill the depth exactly.
        let widths = widths.map(|width| width / sum * depth);
        Self {
            depth,
            widths,
            couplings: couplings(&widths),
            parabola: parabola(&widths, depth),
            gradient: 0.0,
            rest: [0.0; CELLS],
            matrix: Matrix::unit(),
        }
    }

    /// The temperatures as they are, to come back to by [`Self::restore`].
    #[must_use]
    pub const fn deviations(&self) -> Deviations {
        Deviations { gradient: self.gradient, rest: self.rest }
    }

    /// Takes up temperatures of the same slab again.
    pub const fn restore(&mut self, deviations: Deviations) {
        (self.gradient, self.rest) = (deviations.gradient, deviations.rest);
    }

    /// The heated face above the mean, K.
    #[must_use]
    pub fn surface(&self) -> f64 {
        let [first, second, ..] = self.rest;
        let [width, next, ..] = self.widths;
        self.gradient * self.depth / 3.0 + at_flat_face((first, width), (second, next))
    }

    /// The insulated face above the mean (negative while heated), K.
    #[must_use]
    pub fn insulated_face(&self) -> f64 {
        let [.., second, first] = self.rest;
        let [.., next, width] = self.widths;
        -self.gradient * self.depth / 6.0 + at_flat_face((first, width), (second, next))
    }

    /// The mean of the deviations over the depth, K: zero but for rounding.
    #[must_use]
    pub fn mean(&self) -> f64 {
        let scale = self.gradient * self.depth;
        let cells = self.rest.iter().zip(self.parabola).zip(self.widths);
        cells.map(|((rest, parabola), width)| (rest + scale * parabola) * width).sum::<f64>()
            / self.depth
    }

    /// Goes through a step. A jump of the flux, or of the conductivity, is taken at its start.
    pub fn advance(&mut self, step: &SlabStep) {
        if step.duration <= 0.0 {
            return;
        }
        let [from, to] =
            [step.flux_at_start, step.flux_at_end].map(|flux| flux / step.conductivity);
        self.take_off(from - self.gradient);
        let factor = GAMMA * step.duration * step.conductivity / step.volumetric_heat;
        if factor.to_bits() != self.matrix.factor.to_bits() {
            self.matrix.eliminate(&self.couplings, factor);
        }
        let gain = -GAMMA * (to - from) * self.depth;
        let mut stage = self.rest;
        self.add_source(&mut stage, gain);
        self.matrix.solve(&mut stage);
        for (value, start) in stage.iter_mut().zip(&self.rest) {
            *value = start + (1.0 - GAMMA) / GAMMA * (*value - start);
        }
        self.add_source(&mut stage, gain);
        self.matrix.solve(&mut stage);
        self.rest = stage;
        self.gradient = to;
    }

    /// Lets the parabola of a further gradient stand in for a part of the rest: the temperatures stay as they are.
    fn take_off(&mut self, gradient: f64) {
        let mut rest = self.rest;
        self.add_source(&mut rest, -gradient * self.depth);
        self.rest = rest;
    }

    fn add_source(&self, cells: &mut [f64; CELLS], gain: f64) {
        for (value, parabola) in cells.iter_mut().zip(&self.parabola) {
            *value += gain * parabola;
        }
    }
}

/// What couples each cell with the one before and with the next; nothing beyond the ends.
fn couplings(widths: &[f64; CELLS]) -> [[f64; CELLS]; 2] {
    let mut couplings = [[0.0; CELLS]; 2];
    let [to_before, to_next] = &mut couplings;
    let pairs = widths.iter().zip(widths.iter().skip(1));
    for (((width, next), here), there) in pairs.zip(to_next).zip(to_before.iter_mut().skip(1)) {
        let distance = 0.5 * (width + next);
        *here = 1.0 / (distance * width);
        *there = 1.0 / (distance * next);
    }
    couplings
}

/// (3X² − 1)/6 averaged over each cell, X the height above the insulated face over the depth.
fn parabola(widths: &[f64; CELLS], depth: f64) -> [f64; CELLS] {
    let integral = |height: f64| (height * height * height - height) / 6.0;
    let mut top = 1.0_f64;
    widths.map(|width| {
        let bottom = top - width / depth;
        let mean = (integral(top) - integral(bottom)) / (top - bottom);
        top = bottom;
        mean
    })
}

/// The value at a face with no gradient, by the parabola through the means of the two cells next to it.
fn at_flat_face((first, width): (f64, f64), (second, next): (f64, f64)) -> f64 {
    let far = width + next;
    let near_mean = width * width / 3.0;
    let far_mean = (far * far * far - width * width * width) / (3.0 * next);
    first - (second - first) * near_mean / (far_mean - near_mean)
}

/// Half of the cells: they are eliminated from both faces towards the middle, two chains at once, each of which waits
/// for itself only.
const HALF: usize = CELLS / 2;

/// I − γ·Δt·A of the conduction A, ready to be solved: tridiagonal, eliminated once for both stages.
#[derive(Debug, Clone, PartialEq)]
struct Matrix {
    /// γ·Δt times the diffusivity, m².
    factor: f64,
    /// From either face inwards, for each cell of the heated and of the insulated half.
    rows: [[Row; 2]; HALF],
    /// What the two innermost cells, eliminated up to each other, are solved by.
    middle: f64,
}

/// A row after elimination. Products instead of quotients: they are several times as quick, and each row waits for the one before.
#[derive(Debug, Clone, Copy, PartialEq)]
struct Row {
    /// Of the pivot.
    inverse: f64,
    /// Coupling with the cell outside, over the pivot.
    outer: f64,
    /// Coupling with the cell inside, over the pivot.
    inner: f64,
}

impl Matrix {
    const fn unit() -> Self {
        let row = Row { inverse: 1.0, outer: 0.0, inner: 0.0 };
        Self { factor: 0.0, rows: [[row; 2]; HALF], middle: 1.0 }
    }

    fn eliminate(&mut self, [to_before, to_next]: &[[f64; CELLS]; 2], factor: f64) {
        self.factor = factor;
        // What a cell keeps to itself, over its pivot: followed as such, and not as 1 − coupling, it does not cancel
        // however long the step.
        let mut kept = [1.0; 2];
        let heated = to_before.iter().zip(to_next);
        let insulated = to_next.iter().zip(to_before).rev();
        for (rows, sides) in self.rows.iter_mut().zip(heated.zip(insulated)) {
            for ((row, kept), (outer, inner)) in
                rows.iter_mut().zip(&mut kept).zip([sides.0, sides.1])
            {
                let own = 1.0 + factor * outer * *kept;
                row.inverse = 1.0 / (own + factor * inner);
                row.outer = -factor * outer * row.inverse;
                row.inner = -factor * inner * row.inverse;
                *kept = own * row.inverse;
            }
        }
        let [one, other] = kept;
        self.middle = 1.0 / (one + other - one * other); // 1 less the product of the innermost couplings
    }

    fn solve(&self, values: &mut [f64; CELLS]) {
        let (heated, insulated) = values.split_at_mut(HALF);
        let mut outside = [0.0; 2];
        let cells = heated.iter_mut().zip(insulated.iter_mut().rev());
        for ([one, other], (value, opposite)) in self.rows.iter().zip(cells) {
            outside = [
                *value * one.inverse - outside[0] * one.outer,
                *opposite * other.inverse - outside[1] * other.outer,
            ];
            [*value, *opposite] = outside;
        }
        // The innermost two depend on each other only; what is inside of each follows from that.
        let couplings = self.rows[HALF - 1].map(|row| row.inner);
        let mut inside = [
            (outside[1] - couplings[1] * outside[0]) * self.middle,
            (outside[0] - couplings[0] * outside[1]) * self.middle,
        ];
        let cells = heated.iter_mut().zip(insulated.iter_mut().rev());
        for ([one, other], (value, opposite)) in self.rows.iter().zip(cells).rev() {
            inside = [*value - one.inner * inside[0], *opposite - other.inner * inside[1]];
            [*value, *opposite] = inside;
        }
    }
}
