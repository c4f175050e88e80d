//! How a disc gives off heat between stops: by a given coefficient, or by correlations for air and radiation.

use std::f64::consts::PI;

use super::partition::SweptRing;
use crate::calc::disc::{Cooling, Disc};
use crate::calc::method::Method;
use crate::calc::quantity::{Si, ThermodynamicTemperature};

crate::method_sheet! {
    COOLING_SURFACE {
        id: "heat.cooling_surface",
        name: "Heat given off by a disc",
        equation: "Q = h A (T - T_a); A = n pi (r_o^2 - r_i^2) + 2 pi r_o t, of the swept ring",
        symbols: [("Q", "heat flow", "W"), ("h", "heat transfer coefficient", "W/(m2.K)"), ("A", "cooling area", "m2"),
            ("T, T_a", "bulk and ambient temperature", "K"), ("n", "rubbed faces", "1"), ("r_i, r_o", "swept radii", "m"), ("t", "disc thickness", "m")],
        valid: "Uniform disc temperature; hat and vanes left out.",
        accuracy: "That of the coefficient: a given one is the total, radiation included.",
        source: "Newton's law of cooling; the area is common practice, no source.",
        provenance: Seen,
        worked: "100/150 mm, two faces, 20 mm thick: 2 pi (0.15^2 - 0.1^2) + 2 pi 0.15 0.02 = 0.0973894 m2.",
    }
    ROTATING_DISC {
        id: "heat.cooling.rotating_disc",
        name: "Convection of a free disc turning in still air",
        equation: "Nu = 0.36 Re^0.5 up to Re_c = 2.4e5; above, Nu = 0.015 Re^0.8 - (0.015 Re_c^0.8 - 0.36 Re_c^0.5) (Re_c/Re)^0.5; Re = w R^2/nu, h = Nu k/R",
        symbols: [("Nu", "mean Nusselt number", "1"), ("Re", "rotational Reynolds number", "1"), ("w", "disc speed", "rad/s"),
            ("R", "disc outer radius", "m"), ("nu", "kinematic viscosity of air at the film temperature", "m2/s"), ("k", "conductivity of air there", "W/(m.K)")],
        valid: "Open disc, still air; never below 5 W/(m2.K) of free convection (common practice, no source).",
        accuracy: "About 15 % on a free disc; wheels and guards change it much more.",
        source: "Laminar 0.36 after Cobb and Saunders 1956, turbulent 0.015 Re^0.8 after Dorfman (both from memory); mixed form derived so that both join.",
        provenance: Memory,
        worked: "Re 1e6: Nu 884.8.",
    }
    AIRSTREAM {
        id: "heat.cooling.airstream",
        name: "Convection of a disc in the airstream of a vehicle",
        equation: "Nu = 0.70 Re^0.55 up to Re = 2.4e5; Nu = 0.04 Re^0.8 above; Re = V D/nu, h = Nu k/D",
        symbols: [("Nu", "Nusselt number", "1"), ("Re", "Reynolds number", "1"), ("V", "vehicle speed", "m/s"), ("D", "disc outer diameter", "m"),
            ("nu", "kinematic viscosity of air at the film temperature", "m2/s"), ("k", "conductivity of air there", "W/(m.K)")],
        valid: "Solid disc in the stream; never below 5 W/(m2.K) of free convection (common practice, no source). The published branches do not meet: at Re 2.4e5 the coefficient jumps up by about a quarter.",
        accuracy: "An estimate: the stream at the disc differs from vehicle to vehicle.",
        source: "Design handbook correlations for brake rotors (Limpert, Brake Design and Safety, equations 3-28 and 3-29; from memory).",
        provenance: Memory,
        worked: "D 0.28 m, 30 m/s, film at 60 degC: Re 4.4527e5, h = 135.83 W/(m2.K).",
    }
    RADIATION {
        id: "heat.cooling.radiation",
        name: "Radiation of a disc as a coefficient",
        equation: "h_r = e s (T^2 + T_a^2) (T + T_a)",
        symbols: [("h_r", "coefficient of radiation", "W/(m2.K)"), ("e", "emissivity", "1"), ("s", "Stefan-Boltzmann constant, 5.670374419e-8", "W/(m2.K4)"), ("T, T_a", "disc and ambient temperature", "K")],
        valid: "Grey disc in large surroundings at ambient temperature.",
        accuracy: "Exact under these assumptions; the emissivity of a rubbed track is poorly known.",
        source: "Stefan-Boltzmann law.",
        provenance: Seen,
        worked: "e 0.55, 20 degC around, 300 degC: 11.197 W/(m2.K).",
    }
}

/// The sheets of this file.
pub static METHODS: &[&Method] = &[&COOLING_SURFACE, &ROTATING_DISC, &AIRSTREAM, &RADIATION];

/// Stefan-Boltzmann constant, W/(m²·K⁴), exact since 2019 to the digits given (CODATA 2018).
const STEFAN_BOLTZMANN: f64 = 5.670_374_419e-8;
/// Least convection of any warm disc, W/(m²·K): free convection, common practice, no source.
const FREE_CONVECTION: f64 = 5.0;
/// Reynolds number at which the published correlations change, both of the disc and of the stream.
const TRANSITION: f64 = 2.4e5;

/// How fast a disc turns and how fast its vehicle moves, both SI.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Speeds {
    /// rad/s.
    pub shaft: f64,
    /// m/s.
    pub way: f64,
}

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
        const ATMOSPHERE: f64 = 101_325.0; // Pa, exact by definition
        const GAS_CONSTANT: f64 = 287.053; // J/(kg·K)
        let raised = temperature * temperature.sqrt();
        let viscosity = 1.458e-6 * raised / (temperature + 110.4);
        let density = ATMOSPHERE / (GAS_CONSTANT * temperature);
        let slope = 245.4 * libm::exp10(-12.0 / temperature);
        Self {
            conductivity: 2.646_38e-3 * raised / (temperature + slope),
            kinematic_viscosity: viscosity / density,
        }
    }
}

/// A power of a positive number. Several times as quick as `pow`, which spares no effort for the last bit.
fn power(base: f64, exponent: f64) -> f64 {
    libm::exp(exponent * libm::log(base))
}

/// Mean Nusselt number of a free disc at a rotational Reynolds number ([`ROTATING_DISC`]).
#[must_use]
pub fn nusselt_of_rotating_disc(reynolds: f64) -> f64 {
    if reynolds <= TRANSITION {
        return 0.36 * reynolds.sqrt();
    }
    let excess = 0.015 * power(TRANSITION, 0.8) - 0.36 * TRANSITION.sqrt();
    0.015 * power(reynolds, 0.8) - excess * (TRANSITION / reynolds).sqrt()
}

/// Nusselt number of a disc in an airstream ([`AIRSTREAM`]).
#[must_use]
pub fn nusselt_of_airstream(reynolds: f64) -> f64 {
    if reynolds <= TRANSITION { 0.70 * power(reynolds, 0.55) } else { 0.04 * power(reynolds, 0.8) }
}

/// Radiation as a coefficient, W/(m²·K), between two temperatures in K ([`RADIATION`]).
#[must_use]
pub fn radiation_coefficient(emissivity: f64, temperature: f64, ambient: f64) -> f64 {
    emissivity
        * STEFAN_BOLTZMANN
        * (temperature * temperature + ambient * ambient)
        * (temperature + ambient)
}

/// The surface by which a disc gives off heat.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct CoolingSurface {
    cooling: Cooling,
    area: f64,
    outer_radius: f64,
    emissivity: f64,
    ambient: f64,
}

impl CoolingSurface {
    /// The surface of a disc with `faces` rubbed faces ([`COOLING_SURFACE`]). None if its cooling is not known.
    #[must_use]
    pub fn new(
        disc: &Disc,
        ring: &SweptRing,
        faces: u32,
        ambient: ThermodynamicTemperature,
    ) -> Option<Self> {
        let edge = 2.0 * PI * ring.outer_radius().si() * disc.thickness().si();
        Some(Self {
            cooling: disc.cooling()?,
            area: f64::from(faces) * ring.area().si() + edge,
            outer_radius: disc.outer_radius().si(),
            emissivity: disc.material().emissivity(),
            ambient: ambient.si(),
        })
    }

    /// Cooling area, m².
    #[must_use]
    pub const fn area(&self) -> f64 {
        self.area
    }

    /// Ambient temperature, K.
    #[must_use]
    pub const fn ambient(&self) -> f64 {
        self.ambient
    }

    /// Whether the coefficient is estimated by a model.
    #[must_use]
    pub const fn is_estimated(&self) -> bool {
        !matches!(self.cooling, Cooling::Coefficient(_))
    }

    /// Coefficient in all, W/(m²·K), at a disc temperature in K.
    #[must_use]
    pub fn coefficient(&self, temperature: f64, speeds: Speeds) -> f64 {
        let convection = match self.cooling {
            Cooling::Coefficient(total) => return total.si(),
            Cooling::RotatingDisc => self.convection(temperature, |air| {
                let reynolds =
                    speeds.shaft * self.outer_radius * self.outer_radius / air.kinematic_viscosity;
                nusselt_of_rotating_disc(reynolds) / self.outer_radius
            }),
            Cooling::Airstream => self.convection(temperature, |air| {
                let diameter = 2.0 * self.outer_radius;
                nusselt_of_airstream(speeds.way * diameter / air.kinematic_viscosity) / diameter
            }),
        };
        convection + radiation_coefficient(self.emissivity, temperature, self.ambient)
    }

    fn convection(&self, temperature: f64, nusselt_per_length: impl Fn(&Air) -> f64) -> f64 {
        let air = Air::at(f64::midpoint(temperature, self.ambient).max(1.0));
        (nusselt_per_length(&air) * air.conductivity).max(FREE_CONVECTION)
    }

    /// Heat flow per temperature above ambient, W/K.
    #[must_use]
    pub fn conductance(&self, temperature: f64, speeds: Speeds) -> f64 {
        self.coefficient(temperature, speeds) * self.area
    }

    /// The sheets behind the coefficient.
    #[must_use]
    pub fn methods(&self) -> &'static [&'static Method] {
        static GIVEN: &[&Method] = &[&COOLING_SURFACE];
        static TURNING: &[&Method] = &[&COOLING_SURFACE, &ROTATING_DISC, &RADIATION];
        static STREAM: &[&Method] = &[&COOLING_SURFACE, &AIRSTREAM, &RADIATION];
        match self.cooling {
            Cooling::Coefficient(_) => GIVEN,
            Cooling::RotatingDisc => TURNING,
            Cooling::Airstream => STREAM,
        }
    }
}
