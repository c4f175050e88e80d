//! Wear of pads by friction energy.

use super::method::Method;
use super::pad::Pad;
use super::quantity::{Length, Si, SpecificWear};

crate::method_sheet! {
    PAD_LIFE {
        id: "wear.pad_life",
        name: "Pad life in stops",
        equation: "N = A w / (K E_f)",
        symbols: [("N", "stops until the usable pad is worn off", "1"), ("A", "area of one pad", "m2"), ("w", "usable thickness", "m"),
            ("K", "specific wear", "m3/J"), ("E_f", "energy of one stop and face", "J")],
        valid: "Wear in proportion to energy: linings below their wear transition (resin-bonded ones about 200 to 250 degC).",
        accuracy: "That of the specific wear, which changes several times over with temperature and pairing.",
        source: "Energy law of wear, equal to Archard's law at constant friction; proportion to energy confirmed on vehicles in SAE 2009-01-1032.",
        provenance: Seen,
        worked: "Two pads of 40 cm2, 9 mm, 0.2 cm3/MJ, 50 kJ a stop for both: 7200 stops.",
    }
}

/// The sheets of this file.
pub static METHODS: &[&Method] = &[&PAD_LIFE];

/// Stops until `allowance` of the pad is worn off at `energy_per_face`, J a stop ([`PAD_LIFE`]).
///
/// None if nothing wears, or the number is beyond what can be held.
#[must_use]
pub fn pad_life_stops(
    pad: &Pad,
    allowance: Length,
    wear: SpecificWear,
    energy_per_face: f64,
) -> Option<f64> {
    let stops = pad.area().si() * allowance.si() / (wear.si() * energy_per_face);
    stops.is_finite().then_some(stops)
}
