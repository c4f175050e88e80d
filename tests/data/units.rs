//! The unit table against exact arithmetic and an outside library.

use std::collections::HashMap;

use brakewright::calc::quantity::Dimension;
use brakewright::data::magnitude;
use brakewright::data::units::{self, Scale, System, Unit};
use num_bigint::BigInt;
use num_rational::BigRational;

/// The contract's symbols, in its order: international units, then customary ones.
const CONTRACT: &[(&str, &str, &str)] = &[
    ("ratio", "1", "1"),
    ("length", "mm m cm km", "in ft mi"),
    ("area", "mm2 cm2 m2", "in2 ft2"),
    ("volume", "mm3 cm3 L", "in3"),
    ("angle", "deg rad", "deg rad"),
    ("grade", "% deg rad", "% deg rad"),
    ("mass", "kg g t", "lb"),
    ("force", "N kN daN", "lbf"),
    ("pressure", "MPa kPa bar Pa", "psi ksi"),
    ("torque", "N.m kN.m N.mm", "lbf.in lbf.ft"),
    ("energy", "kJ J MJ kWh", "Btu ft.lbf"),
    ("power", "kW W", "hp Btu/s"),
    ("speed", "m/s km/h", "ft/s mph ft/min"),
    ("rotational_speed", "rpm rad/s", "rpm"),
    ("acceleration", "m/s2 g", "ft/s2"),
    ("angular_acceleration", "rad/s2", "rad/s2"),
    ("time", "s ms min h", "s ms min h"),
    ("temperature", "degC K", "degF"),
    ("temperature_difference", "K", "degF"),
    ("moment_of_inertia", "kg.m2", "lb.ft2 lb.in2"),
    ("power_flux", "W/mm2 kW/m2", "hp/in2"),
    ("energy_flux", "J/mm2", "Btu/in2"),
    ("pressure_velocity", "MPa.m/s", "psi.ft/min"),
    ("heat_transfer_coefficient", "W/(m2.K)", "Btu/(h.ft2.degF)"),
    ("thermal_conductivity", "W/(m.K)", "Btu/(h.ft.degF)"),
    ("specific_heat", "J/(kg.K)", "Btu/(lb.degF)"),
    ("density", "kg/m3 g/cm3", "lb/in3 lb/ft3"),
    ("specific_wear", "mm3/MJ cm3/MJ", "in3/(hp.h)"),
    ("stiffness", "N/mm", "lbf/in"),
    ("line_compliance", "mm3/MPa", "in3/psi"),
    ("stop_frequency", "1/h 1/min", "1/h 1/min"),
];

/// π to 78 decimals (memory; any table of constants).
const PI: &str = "3.141592653589793238462643383279502884197169399375105820974944592307816406286209";

fn symbols(dimension: Dimension, is_in: impl Fn(&Unit) -> bool) -> String {
    let units = units::of(dimension).iter().filter(|unit| is_in(unit));
    units.map(|unit| unit.symbol).collect::<Vec<_>>().join(" ")
}

/// Dimension and symbol: how the reference file names a unit.
fn key(unit: &Unit) -> String {
    format!("{}.{}", unit.dimension.id(), unit.symbol)
}

#[test]
fn the_table_can_be_read() {
    assert_eq!(units::table().map(|units| units.len()), Ok(units::all().len()));
    assert_eq!(
        units::all().len(),
        include_str!("../../src/data/units.tsv").lines().filter(|l| !l.starts_with('#')).count()
    );
    assert!(units::all().len() > 90);
}

#[test]
fn the_symbols_are_those_of_the_contract_in_its_order() {
    let named = Dimension::ALL.iter().filter(|&&dimension| dimension != Dimension::Travel);
    assert_eq!(named.clone().count(), CONTRACT.len());
    for (dimension, (id, si, us)) in named.zip(CONTRACT) {
        assert_eq!(dimension.id(), *id);
        assert_eq!(symbols(*dimension, |unit| unit.is_si), *si, "{id}");
        assert_eq!(symbols(*dimension, |unit| unit.is_us), *us, "{id}");
    }
}

#[test]
fn answers_use_the_first_unit_of_a_system() {
    for (id, si, us) in CONTRACT {
        let dimension = *Dimension::ALL.iter().find(|dimension| dimension.id() == *id).unwrap();
        let first = |symbols: &'static str| symbols.split(' ').next().unwrap();
        assert_eq!(units::reported(dimension, System::Si).symbol, first(si));
        assert_eq!(units::reported(dimension, System::Us).symbol, first(us));
    }
    assert_eq!(units::reported(Dimension::Travel, System::Si).symbol, "m");
    assert_eq!(units::reported(Dimension::Travel, System::Us).symbol, "ft");
    assert_eq!(units::of(Dimension::Travel), units::of(Dimension::Length));
}

#[test]
fn a_text_names_one_unit_of_a_dimension() {
    for dimension in Dimension::ALL {
        let mut owners: HashMap<&str, &str> = HashMap::new();
        for unit in units::of(*dimension) {
            let codes = [Some(unit.symbol), unit.ucum, unit.recommendation_20];
            for text in codes.into_iter().flatten() {
                let owner = *owners.entry(text).or_insert(unit.symbol);
                assert_eq!(owner, unit.symbol, "{text} of {}", dimension.id());
                assert_eq!(units::find(*dimension, text), Some(unit));
            }
        }
    }
}

#[test]
fn symbols_and_names_of_one_enum_differ_by_more_than_case_or_punctuation() {
    for dimension in Dimension::ALL {
        let bare =
            |text: &str| text.replace(|c: char| !c.is_ascii_alphanumeric(), "").to_lowercase();
        for text in [|unit: &Unit| unit.symbol, |unit: &Unit| unit.variant] {
            let mut seen: Vec<_> =
                units::of(*dimension).iter().map(|unit| bare(text(unit))).collect();
            seen.sort();
            let all = seen.len();
            seen.dedup();
            assert_eq!(seen.len(), all, "{}", dimension.id());
        }
        for unit in units::of(*dimension) {
            assert!(unit.symbol.is_ascii());
            assert!(unit.variant.bytes().all(|byte| byte.is_ascii_uppercase() || byte == b'_'));
        }
    }
}

#[test]
fn every_factor_is_the_exact_expression_rounded_once() {
    let distance = |a: &BigRational, b: &BigRational| if a > b { a - b } else { b - a };
    for unit in units::all() {
        let exact = Expression::value(unit.exact);
        let error = |factor: f64| distance(&exact, &BigRational::from_float(factor).unwrap());
        let factor = unit.factor();
        let id = key(unit);
        assert!(error(factor) <= error(factor.next_up()), "{id}: {exact}");
        assert!(error(factor) <= error(factor.next_down()), "{id}: {exact}");
    }
}

/// 12 in = 304.8 mm, 60 mph = 88 ft/s, 12 lbf.in = 1 lbf.ft (by definition).
#[test]
fn a_round_number_of_one_unit_is_round_in_another() {
    let convert = |dimension, value, from, to| {
        let [from, to] = [from, to].map(|symbol| units::find(dimension, symbol).unwrap());
        to.of_si(from.to_si(value))
    };
    assert_eq!(convert(Dimension::Length, 12.0, "in", "mm"), 304.8);
    assert_eq!(convert(Dimension::Speed, 60.0, "mph", "ft/s"), 88.0);
    assert_eq!(convert(Dimension::Torque, 12.0, "lbf.in", "lbf.ft"), 1.0);
}

/// Anchors of the exact constants: inch 0.0254 m and pound 0.45359237 kg (1959, seen), standard
/// gravity 9.80665 m/s² (CGPM 1901, seen), Btu(IT) 1055.05585262 J (seen).
#[test]
fn the_exact_constants_are_those_of_the_agreements() {
    let factor = |dimension, symbol| units::find(dimension, symbol).map(Unit::factor);
    assert_eq!(factor(Dimension::Length, "in"), Some(0.0254));
    assert_eq!(factor(Dimension::Mass, "lb"), Some(0.453_592_37));
    assert_eq!(factor(Dimension::Acceleration, "g"), Some(9.806_65));
    assert_eq!(factor(Dimension::Energy, "Btu"), Some(1_055.055_852_62));
    assert_eq!(factor(Dimension::Force, "lbf"), Some(4.448_221_615_260_5));
}

/// Against pint (seen: `tests/reference/units.json`, written by `units.py`). 1e-12 leaves room for
/// the products of rounded factors inside that library.
#[test]
fn every_conversion_agrees_with_an_outside_library() {
    let reference = include_str!("../reference/units.json");
    let reference: serde_json::Value = serde_json::from_str(reference).unwrap();
    let points = reference["points"].as_object().unwrap();
    assert_eq!(points.len(), units::all().len());
    for unit in units::all() {
        let id = key(unit);
        for point in points[&id].as_array().unwrap() {
            let (value, si) = (point[0].as_f64().unwrap(), point[1].as_f64().unwrap());
            assert!((unit.to_si(value) / si - 1.0).abs() <= 1e-12, "{id}: {}", unit.to_si(value));
            assert!((unit.of_si(si) / value - 1.0).abs() <= 1e-12, "{id}: {}", unit.of_si(si));
        }
    }
}

/// Fixed points of the scales: 0 degC = 32 degF = 273.15 K, 100 degC = 212 degF, and both agree at
/// -40 (by definition).
#[test]
fn round_temperatures_stay_round() {
    let of = |symbol| units::find(Dimension::Temperature, symbol).unwrap();
    let (celsius, fahrenheit) = (of("degC"), of("degF"));
    for (c, f) in [(0.0, 32.0), (100.0, 212.0), (-40.0, -40.0), (300.0, 572.0), (260.0, 500.0)] {
        assert_eq!(celsius.of_si(fahrenheit.to_si(f)).to_bits(), f64::to_bits(c));
        assert_eq!(fahrenheit.of_si(celsius.to_si(c)).to_bits(), f64::to_bits(f));
    }
    for tenths in -2700..20_000_i32 {
        let value = f64::from(tenths) / 10.0;
        assert_eq!(celsius.of_si(celsius.to_si(value)), value);
        assert_eq!(fahrenheit.of_si(fahrenheit.to_si(value)), value);
    }
}

#[test]
fn a_round_number_of_any_unit_stays_round() {
    for unit in units::all() {
        for tenths in 1..5000_i32 {
            let value = f64::from(tenths) / 10.0;
            let si = unit.to_si(value);
            let back = unit.of_si(si);
            let is_steep = unit.dimension == Dimension::Grade && si > 1.0;
            assert!(is_steep || back == value, "{value} {} {back}", unit.symbol);
        }
    }
}

#[test]
fn a_unit_is_linear_unless_it_is_a_temperature_or_a_slope() {
    for unit in units::all() {
        let is_linear = matches!(unit.scale, Scale::Linear { .. });
        let id = key(unit);
        assert_eq!(
            !is_linear,
            ["temperature.degC", "temperature.degF", "grade.%"].contains(&id.as_str())
        );
    }
}

#[test]
fn every_unit_has_numbers_that_the_service_accepts() {
    for unit in units::all() {
        let accepted = magnitude::of(unit.dimension);
        assert!(accepted.contains(unit.to_si(1.0)), "{}", key(unit));
        assert!(accepted.contains(0.0));
        assert!(!accepted.contains(f64::NAN) && !accepted.contains(f64::INFINITY));
        assert!(
            !accepted.contains(accepted.most * 1.01) && !accepted.contains(accepted.least / 2.0)
        );
    }
}

/// Products, quotients, powers and brackets of decimal numbers and π, without rounding.
struct Expression<'a> {
    rest: &'a [u8],
}

impl Expression<'_> {
    fn value(text: &str) -> BigRational {
        let mut expression = Expression { rest: text.as_bytes() };
        let value = expression.product();
        assert!(expression.rest.is_empty(), "{text}");
        value
    }

    fn product(&mut self) -> BigRational {
        let mut value = self.power();
        loop {
            if self.takes(b'*') {
                value *= self.power();
            } else if self.takes(b'/') {
                value /= self.power();
            } else {
                return value;
            }
        }
    }

    fn power(&mut self) -> BigRational {
        let base = self.operand();
        if !self.takes(b'^') {
            return base;
        }
        match self.word().as_str() {
            "2" => &base * &base,
            "3" => &base * &base * &base,
            exponent => panic!("exponent {exponent}"),
        }
    }

    fn operand(&mut self) -> BigRational {
        if self.takes(b'(') {
            let value = self.product();
            assert!(self.takes(b')'));
            return value;
        }
        match self.word().as_str() {
            "pi" => decimal(PI),
            number => decimal(number),
        }
    }

    fn word(&mut self) -> String {
        let is_part = |byte: &u8| byte.is_ascii_alphanumeric() || *byte == b'.';
        let length = self.rest.iter().take_while(|byte| is_part(byte)).count();
        let (word, rest) = self.rest.split_at(length);
        self.rest = rest;
        String::from_utf8_lossy(word).into_owned()
    }

    fn takes(&mut self, byte: u8) -> bool {
        let found = self.rest.first() == Some(&byte);
        self.rest = if found { &self.rest[1..] } else { self.rest };
        found
    }
}

fn decimal(text: &str) -> BigRational {
    let (whole, part) = text.split_once('.').unwrap_or((text, ""));
    let digits = format!("{whole}{part}").parse::<BigInt>();
    let scale = format!("1{}", "0".repeat(part.len())).parse::<BigInt>();
    let (Ok(digits), Ok(scale)) = (digits, scale) else { panic!("number {text}") };
    BigRational::new(digits, scale)
}
