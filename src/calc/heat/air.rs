//! Air as it cools a disc: its properties, and a table of them for one that is followed through many steps.

/// Dry air at one atmosphere.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Air {
    /// Thermal conductivity, W/(m·K).
    pub conductivity: f64,
    /// Kinematic viscosity, m²/s.
    pub kinematic_viscosity: f64,
}

impl Air {
    /// Air at `temperature`, K: U.S. Standard Atmosphere 1976, viscosity read there, conductivity from memory.
    #[must_use]
    pub fn at(temperature: f64) -> Self {
        let raised = temperature * temperature.sqrt();
        let slope = 245.4 * libm::exp10(-12.0 / temperature);
        Self {
            conductivity: 2.646_38e-3 * raised / (temperature + slope),
            kinematic_viscosity: kinematic_viscosity(temperature),
        }
    }

    /// k/ν^n, to which a coefficient is proportional whose Nusselt number goes by Re^n.
    fn factor(&self, exponent: Exponent) -> f64 {
        self.conductivity * power(self.kinematic_viscosity, -exponent.value())
    }
}

/// Of air at `temperature`, K, in m²/s.
pub(super) fn kinematic_viscosity(temperature: f64) -> f64 {
    const ATMOSPHERE: f64 = 101_325.0; // Pa, exact by definition
    const GAS_CONSTANT: f64 = 287.053; // J/(kg·K)
    let viscosity = 1.458e-6 * temperature * temperature.sqrt() / (temperature + 110.4);
    viscosity * (GAS_CONSTANT / ATMOSPHERE * temperature)
}

/// A power of a positive number. Several times as quick as `pow`, which spares no effort for the last bit.
pub(super) fn power(base: f64, exponent: f64) -> f64 {
    libm::exp(exponent * libm::log(base))
}

/// Lowest temperature of the table, K.
const LOWEST: f64 = 200.0;
/// Width of its cells, K.
const WIDTH: f64 = 5.0;
/// Its cells: up to 1300 K, which is the mean of a disc at 2300 K and the air around.
const CELLS: u32 = 220;

/// The exponents of the Reynolds number in the correlations of cooling, as the columns of an [`AirTable`].
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Exponent {
    /// 0.5.
    Half,
    /// 0.55.
    Stream,
    /// 0.8.
    Turbulent,
}

impl Exponent {
    const ALL: [Self; 3] = [Self::Half, Self::Stream, Self::Turbulent];

    pub(super) const fn value(self) -> f64 {
        match self {
            Self::Half => 0.5,
            Self::Stream => 0.55,
            Self::Turbulent => 0.8,
        }
    }
}

/// What the temperature of the air makes of a coefficient, k/ν^n, by cubics over [`WIDTH`]; beside it by the formula.
///
/// A coefficient by the table is within 3e-7 of that by the formula, and several times as quick.
#[derive(Debug, Clone, PartialEq)]
pub struct AirTable {
    /// For each cell, for each exponent, the polynomial in the share of the cell.
    cells: Vec<[[f64; 4]; 3]>,
}

impl AirTable {
    /// Fills the table.
    #[must_use]
    pub fn new() -> Self {
        let node = |index: i32| {
            let air = Air::at(LOWEST + f64::from(index) * WIDTH);
            Exponent::ALL.map(|exponent| air.factor(exponent))
        };
        let nodes: Vec<[f64; 3]> = (-1..=CELLS.cast_signed() + 1).map(node).collect();
        Self { cells: nodes.windows(4).filter_map(cell).collect() }
    }

    /// k/ν^n at `temperature`, K.
    pub(super) fn factor(&self, temperature: f64, exponent: Exponent) -> f64 {
        let place = (temperature - LOWEST) / WIDTH;
        // Below the table the index is 0 and the share below 0, as also for NaN.
        #[expect(
            clippy::cast_possible_truncation,
            clippy::cast_sign_loss,
            reason = "saturates; what is beside the table goes by the formula"
        )]
        let index = place as u32;
        let share = place - f64::from(index);
        match self.cells.get(index as usize).filter(|_| share >= 0.0) {
            Some(columns) => {
                let [a, b, c, d] = columns[exponent as usize];
                a + share * (b + share * (c + share * d))
            }
            None => Air::at(temperature).factor(exponent),
        }
    }
}

impl Default for AirTable {
    fn default() -> Self {
        Self::new()
    }
}

/// The cubics through four nodes, over the share of the way from the second to the third.
fn cell(nodes: &[[f64; 3]]) -> Option<[[f64; 4]; 3]> {
    let &[before, from, to, after] = nodes else { return None };
    let cubic = |column: usize| {
        let [p, q, r, s] = [before[column], from[column], to[column], after[column]];
        let slope = r - p / 3.0 - 0.5 * q - s / 6.0;
        [q, slope, 0.5 * (p + r) - q, (s - p) / 6.0 + 0.5 * (q - r)]
    };
    Some([cubic(0), cubic(1), cubic(2)])
}
