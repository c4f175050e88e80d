//! How a disc gives off heat between stops: by a given coefficient, or by correlations for air and radiation.

use std::f64::consts::PI;

use super::air::{Air, AirTable, Exponent, kinematic_viscosity, power};
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

/// A branch of a correlation: factor and exponent of the Reynolds number.
type Branch = (f64, Exponent);

/// A correlation of the Nusselt number, below and above [`TRANSITION`].
struct Correlation {
    slow: Branch,
    fast: Branch,
}

/// Of a disc that turns in still air; above the transition less [`excess`].
const TURNING: Correlation =
    Correlation { slow: (0.36, Exponent::Half), fast: (0.015, Exponent::Turbulent) };
/// Of a disc in a stream.
const STREAM: Correlation =
    Correlation { slow: (0.70, Exponent::Stream), fast: (0.04, Exponent::Turbulent) };

fn branch_at((factor, exponent): Branch, reynolds: f64) -> f64 {
    factor * power(reynolds, exponent.value())
}

/// How much lower the laminar branch of a turning disc lies at the transition: its laminar center stays, and falls
/// with the root of the Reynolds number.
fn excess() -> f64 {
    branch_at(TURNING.fast, TRANSITION) - branch_at(TURNING.slow, TRANSITION)
}

/// Mean Nusselt number of a free disc at a rotational Reynolds number ([`ROTATING_DISC`]).
#[must_use]
pub fn nusselt_of_rotating_disc(reynolds: f64) -> f64 {
    if reynolds <= TRANSITION {
        return TURNING.slow.0 * reynolds.sqrt();
    }
    branch_at(TURNING.fast, reynolds) - excess() * (TRANSITION / reynolds).sqrt()
}

/// Nusselt number of a disc in an airstream ([`AIRSTREAM`]).
#[must_use]
pub fn nusselt_of_airstream(reynolds: f64) -> f64 {
    branch_at(if reynolds <= TRANSITION { STREAM.slow } else { STREAM.fast }, reynolds)
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
        let air = Air::at(self.film(temperature));
        (nusselt_per_length(&air) * air.conductivity).max(FREE_CONVECTION)
    }

    /// Temperature of the air at a disc, K.
    fn film(&self, temperature: f64) -> f64 {
        f64::midpoint(temperature, self.ambient).max(1.0)
    }

    /// Heat flow per temperature above ambient, W/K.
    #[must_use]
    pub fn conductance(&self, temperature: f64, speeds: Speeds) -> f64 {
        self.coefficient(temperature, speeds) * self.area
    }

    /// None where a coefficient is given.
    fn flow(&self, speeds: Speeds) -> Option<Flow> {
        let (radius, diameter) = (self.outer_radius, 2.0 * self.outer_radius);
        match self.cooling {
            Cooling::Coefficient(_) => None,
            Cooling::RotatingDisc => {
                Some(Flow::new(&TURNING, speeds.shaft * radius, radius, excess()))
            }
            Cooling::Airstream => Some(Flow::new(&STREAM, speeds.way, diameter, 0.0)),
        }
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

/// What speeds make of the convection of a surface: a factor of k/ν^n of the air for each branch.
#[derive(Debug, Clone, Copy, PartialEq)]
struct Flow {
    /// Speed times length, m²/s: over the kinematic viscosity the Reynolds number.
    reach: f64,
    slow: Branch,
    fast: Branch,
    /// What the laminar center takes off above the transition.
    less: f64,
}

impl Flow {
    fn new(correlation: &Correlation, speed: f64, length: f64, excess: f64) -> Self {
        let reach = speed * length;
        let of = |branch: Branch| (branch_at(branch, reach) / length, branch.1);
        Self {
            reach,
            slow: of(correlation.slow),
            fast: of(correlation.fast),
            less: excess * (TRANSITION / reach).sqrt() / length,
        }
    }

    /// The coefficient of convection, W/(m²·K), in air at a film temperature in K.
    fn convection(&self, film: f64, air: &AirTable) -> f64 {
        let viscosity = kinematic_viscosity(film);
        let branch = |(factor, exponent): Branch| factor * air.factor(film, exponent);
        if self.reach <= TRANSITION * viscosity {
            branch(self.slow)
        } else if self.less > 0.0 {
            branch(self.fast) - branch((self.less * viscosity, Exponent::Half))
        } else {
            branch(self.fast)
        }
    }
}

/// A surface at speeds that are held while many temperatures are asked for.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct HeldSurface<'a> {
    surface: CoolingSurface,
    speeds: Speeds,
    /// None: by the formulas themselves.
    in_air: Option<(&'a AirTable, Flow)>,
}

impl<'a> HeldSurface<'a> {
    /// By the formulas.
    #[must_use]
    pub const fn new(surface: CoolingSurface, speeds: Speeds) -> Self {
        Self { surface, speeds, in_air: None }
    }

    /// By the table, within 1e-7 of the formulas and several times as quick.
    #[must_use]
    pub fn in_air(surface: CoolingSurface, speeds: Speeds, air: &'a AirTable) -> Self {
        Self { surface, speeds, in_air: surface.flow(speeds).map(|flow| (air, flow)) }
    }

    /// The speeds that are held.
    #[must_use]
    pub const fn speeds(&self) -> Speeds {
        self.speeds
    }

    /// Ambient temperature, K.
    #[must_use]
    pub const fn ambient(&self) -> f64 {
        self.surface.ambient
    }

    /// Heat flow per temperature above ambient, W/K, at a disc temperature in K.
    #[must_use]
    pub fn conductance(&self, temperature: f64) -> f64 {
        let surface = &self.surface;
        let Some((air, flow)) = &self.in_air else {
            return surface.conductance(temperature, self.speeds);
        };
        let convection = flow.convection(surface.film(temperature), air).max(FREE_CONVECTION);
        let radiation = radiation_coefficient(surface.emissivity, temperature, surface.ambient);
        (convection + radiation) * surface.area
    }
}
