//! The lining tables against the numbers that their sources print.
//!
//! Marks: seen = read in a copy of the source; memory = from memory of the named source.

use std::collections::BTreeSet;

use brakewright::calc::fault::FaultCode;
use brakewright::calc::friction::FrictionCase::{High, Low, Nominal};
use brakewright::calc::lining::{Given, Limit};
use brakewright::calc::method::Provenance;
use brakewright::calc::quantity::{Si, ZERO_CELSIUS};
use brakewright::data::linings::{self, LiningRow};
use brakewright::data::{friction_codes, linings::find};

#[track_caller]
fn row(id: &str) -> &'static LiningRow {
    find(id).unwrap()
}

/// Whether a limit of the catalog prints as `expected` after division by `unit`, within half of its last digit.
#[track_caller]
fn prints<Q: Si>(limit: Option<Limit<Q>>, unit: f64, offset: f64, expected: f64, half_digit: f64) {
    let limit = limit.unwrap();
    assert_eq!(limit.given, Given::Catalog);
    let found = limit.value.si() / unit - offset;
    assert!((found - expected).abs() <= half_digit, "{found} does not print as {expected}");
}

#[track_caller]
fn friction_is(id: &str, low: f64, nominal: f64, high: f64) {
    let friction = row(id).lining.friction();
    for (case, expected) in [(Low, low), (Nominal, nominal), (High, high)] {
        assert!((friction.at(case) - expected).abs() < 1e-15, "{id}");
    }
}

/// A row that could not be read would be missing without a sound: the text is counted apart.
#[test]
fn every_row_of_the_text_is_read() {
    let parsed = linings::parse(linings::TEXT).unwrap();
    assert_eq!(parsed.len(), linings::TEXT.matches("[[lining]]").count());
    assert_eq!(parsed, linings::all());
    let letters = friction_codes::parse(friction_codes::TEXT).unwrap();
    assert_eq!(&letters, friction_codes::table());
    assert_eq!(letters.letters.len(), 7);
    assert_eq!(letters.provenance, "seen");
}

/// 13 rows of Shigley, 6 of Juvinall & Marshek, 8 brake and 10 clutch rows of the Tribology Handbook.
#[test]
fn every_table_is_complete_and_every_row_says_where_it_comes_from() {
    let of = |word: &str| linings::all().iter().filter(|row| row.source.contains(word)).count();
    assert_eq!(of("Shigley"), 13);
    assert_eq!(of("Juvinall"), 6);
    assert_eq!(of("Table 8.10"), 8);
    assert_eq!(of("Table 7.4"), 10);
    assert_eq!(linings::all().len(), 37);
    let ids: BTreeSet<_> = linings::all().iter().map(|row| &row.id).collect();
    assert_eq!(ids.len(), 37);
    for row in linings::all() {
        let plain = |letter: char| matches!(letter, 'a'..='z' | '_');
        assert!(row.id.chars().all(plain), "{}", row.id);
        assert!(!row.name.is_empty() && row.source.len() > 20);
        let from_memory = row.source.contains("Shigley");
        assert_eq!(row.provenance == Provenance::Memory, from_memory, "{}", row.id);
        assert_eq!(row.lining.parts().origin.catalog_id.as_ref(), Some(&row.id));
        assert_eq!(row.lining.parts().origin.provenance, Some(row.provenance));
    }
}

/// A unit slipped or a degree taken for another shows here: each value is plausible for a lining.
#[test]
fn every_value_is_plausible() {
    for row in linings::all() {
        let parts = row.lining.parts();
        let id = &row.id;
        let within = |value: Option<f64>, low: f64, high: f64| {
            assert!(value.is_none_or(|value| (low..=high).contains(&value)), "{id}: {value:?}");
        };
        within(parts.max_pressure.map(|limit| limit.value.si()), 4e4, 1e7);
        within(parts.max_rubbing_speed.map(|limit| limit.value.si()), 15.0, 40.0);
        within(parts.max_power_flux.map(|limit| limit.value.si()), 1e5, 5e6);
        let continuous = parts.max_temperature_continuous.map(|limit| limit.value.si());
        let peak = parts.max_temperature_peak.map(|limit| limit.value.si());
        within(continuous, ZERO_CELSIUS + 70.0, ZERO_CELSIUS + 410.0);
        within(peak, ZERO_CELSIUS + 100.0, ZERO_CELSIUS + 820.0);
        assert!(continuous.zip(peak).is_none_or(|(continuous, peak)| continuous < peak), "{id}");
        within(parts.density.map(Si::si), 1000.0, 6000.0);
        let friction = row.lining.friction();
        let (low, high) = if row.is_wet { (0.04, 0.15) } else { (0.15, 0.63) };
        assert!(friction.at(Low) >= low && friction.at(High) <= high, "{id}");
        assert_eq!(row.printed.first().map(|(member, _)| *member), Some("friction"));
    }
}

#[test]
fn asbestos_is_marked_wherever_it_is_named() {
    for row in linings::all() {
        let named = row.id.contains("asbestos") && !row.id.contains("non_asbestos");
        assert_eq!(row.contains_asbestos, named, "{}", row.id);
        assert_eq!(row.lining.parts().origin.contains_asbestos, named);
    }
    assert_eq!(linings::all().iter().filter(|row| row.contains_asbestos).count(), 8);
}

/// Shigley, Table 16-3 (memory), with the rounded SI values beside the printed ones; ranges at the lower bound.
#[test]
fn classical_rows_convert_to_the_si_values_printed_beside_them() {
    let (mpa, celsius) = (1e6, ZERO_CELSIUS);
    let parts = row("sintered_metal_dry").parts();
    friction_is("sintered_metal_dry", 0.29, 0.31, 0.33);
    prints(parts.max_pressure, mpa, 0.0, 2.07, 0.005);
    prints(parts.max_temperature_peak, 1.0, celsius, 499.0, 0.5);
    prints(parts.max_temperature_continuous, 1.0, celsius, 299.0, 0.5);
    prints(parts.max_rubbing_speed, 1.0, 0.0, 18.3, 0.05);
    let parts = row("cermet").parts();
    friction_is("cermet", 0.32, 0.32, 0.32);
    assert!(!parts.friction.is_range());
    prints(parts.max_pressure, mpa, 0.0, 1.03, 0.005);
    prints(parts.max_temperature_peak, 1.0, celsius, 816.0, 0.5);
    prints(parts.max_temperature_continuous, 1.0, celsius, 399.0, 0.5);
    assert_eq!(parts.max_rubbing_speed, None);
    let parts = row("rigid_molded_asbestos_pads").parts();
    prints(parts.max_pressure, mpa, 0.0, 5.17, 0.005);
    prints(parts.max_temperature_continuous, 1.0, celsius, 227.0, 0.5);
    prints(parts.max_rubbing_speed, 1.0, 0.0, 24.4, 0.05);
    let parts = row("rigid_molded_non_asbestos").parts();
    friction_is("rigid_molded_non_asbestos", 0.33, 0.48, 0.63);
    prints(parts.max_pressure, mpa, 0.0, 0.69, 0.005);
    prints(parts.max_temperature_continuous, 1.0, celsius, 260.0, 0.5);
    let parts = row("woven_cotton").parts();
    prints(parts.max_temperature_peak, 1.0, celsius, 110.0, 0.5);
    prints(parts.max_temperature_continuous, 1.0, celsius, 77.0, 0.5);
    let parts = row("resilient_paper_wet").parts();
    prints(parts.max_pressure, mpa, 0.0, 2.76, 0.005);
    prints(parts.max_temperature_peak, 1.0, celsius, 149.0, 0.5);
    prints(parts.max_pressure_velocity, mpa, 0.0, 17.5, 0.05);
    assert_eq!(parts.max_temperature_continuous, None);
    let printed = &row("sintered_metal_dry").printed;
    assert!(printed.contains(&("max_pressure", "300-400 psi".to_owned())));
}

/// Juvinall & Marshek, 5th ed., p. 750 (seen), which prints kPa and degrees Celsius beside.
#[test]
fn the_dry_rows_of_juvinall_and_marshek_convert_to_their_si_column() {
    for (id, kilopascal, half_digit, celsius) in [
        ("molded_juvinall", 1030.0, 5.0, 204.0),
        ("woven_juvinall", 345.0, 0.5, 204.0),
        ("sintered_metal_juvinall", 1030.0, 5.0, 232.0),
        ("cork_juvinall", 55.0, 0.5, 82.0),
        ("wood_juvinall", 345.0, 0.5, 93.0),
        ("cast_iron_on_hard_steel_juvinall", 690.0, 5.0, 260.0),
    ] {
        let parts = row(id).parts();
        prints(parts.max_pressure, 1e3, 0.0, kilopascal, half_digit);
        prints(parts.max_temperature_continuous, 1.0, ZERO_CELSIUS, celsius, 0.5);
        assert_eq!(parts.max_temperature_peak, None);
    }
    friction_is("sintered_metal_juvinall", 0.15, 0.30, 0.45);
}

/// The Tribology Handbook, 2nd ed., Tables 8.10, 8.11, 7.4 and 7.5 (seen).
#[test]
fn the_tribology_handbook_rows_hold_what_it_prints() {
    let exact = 1e-9;
    let parts = row("resin_pad_tribology").parts();
    friction_is("resin_pad_tribology", 0.32, 0.32, 0.32);
    prints(parts.max_pressure, 1e6, 0.0, 5.5, exact);
    prints(parts.max_temperature_peak, 1.0, ZERO_CELSIUS, 650.0, exact);
    prints(parts.max_temperature_continuous, 1.0, ZERO_CELSIUS, 300.0, exact);
    let thermal = |parts: brakewright::calc::lining::LiningParts| {
        (parts.conductivity.map(Si::si), parts.specific_heat.map(Si::si), parts.density.map(Si::si))
    };
    assert_eq!(thermal(parts), (Some(0.80), Some(1250.0), Some(2000.0)));
    let parts = row("sintered_facing_tribology").parts();
    prints(parts.max_pressure, 1e3, 0.0, 350.0, exact);
    prints(parts.max_power_flux, 1e6, 0.0, 1.7, exact);
    assert_eq!(thermal(parts), (Some(16.0), Some(420.0), Some(6000.0)));
    let parts = row("molded_facing_tribology").parts();
    prints(parts.max_power_flux, 1e6, 0.0, 0.6, exact);
    assert_eq!(thermal(parts), (Some(0.80), Some(1250.0), Some(2800.0)));
    let parts = row("cermet_facing_tribology").parts();
    prints(parts.max_power_flux, 1e6, 0.0, 4.0, exact);
    assert_eq!(parts.max_temperature_peak, None);
    prints(row("cermet_pad_tribology").parts().max_pressure, 1e6, 0.0, 5.9, exact);
    assert!(row("paper_facing_in_oil_tribology").is_wet);
}

/// SAE J866, Table 1 (seen).
#[test]
fn friction_codes_give_the_bounds_of_their_first_letter() {
    for (code, low, middle, high) in [
        ("DD", 0.15, 0.20, 0.25),
        ("EF", 0.25, 0.30, 0.35),
        ("FF", 0.35, 0.40, 0.45),
        ("FE", 0.35, 0.40, 0.45),
        ("GZ", 0.45, 0.50, 0.55),
    ] {
        let friction = friction_codes::friction_code(code).unwrap();
        assert!(friction.is_range());
        for (case, expected) in [(Low, low), (Nominal, middle), (High, high)] {
            assert!((friction.at(case) - expected).abs() < 1e-15, "{code}");
        }
    }
}

#[test]
fn friction_codes_without_two_bounds_and_unknown_ones_are_refused() {
    let refused = |code: &str| {
        let faults = friction_codes::friction_code(code).unwrap_err();
        let [fault] = faults.as_slice() else { panic!("{code}: one fault expected") };
        (fault.code, fault.detail.clone())
    };
    for (code, reason) in [
        ("CF", "not over 0.15, without a lower bound"),
        ("HF", "over 0.55, without an upper bound"),
        ("ZZ", "unclassified"),
    ] {
        let (fault, detail) = refused(code);
        assert_eq!(fault, FaultCode::UnboundedFrictionCode);
        assert!(detail.contains(reason), "{detail}");
    }
    for code in ["", "F", "ff", "Ff", "FFF", "FA", "AF", "F ", "ＦＦ"] {
        assert_eq!(refused(code).0, FaultCode::UnknownId, "{code}");
    }
}

#[test]
fn a_mistyped_identifier_finds_its_neighbor_and_nonsense_finds_none() {
    assert_eq!(linings::closest("sintered_metal_dri"), Some("sintered_metal_dry"));
    assert_eq!(linings::closest("sintered-metal-wet"), Some("sintered_metal_wet"));
    assert_eq!(linings::closest("cermett"), Some("cermet"));
    assert_eq!(linings::closest("0000"), None);
    assert_eq!(linings::closest(""), None);
    assert_eq!(find("sintered_metal_dri"), None);
}

#[test]
fn a_wrong_table_is_refused_with_the_row() {
    let table = |row: &str| {
        let source = "[sources.s]\ntext = \"t\"\nprovenance = \"seen\"\n";
        linings::parse(&format!("{source}[[lining]]\nid = \"a\"\nname = \"A\"\n{row}"))
    };
    assert!(table("source = \"s\"\nfriction = \"0.3\"").is_ok());
    for (row, reason) in [
        ("source = \"t\"\nfriction = \"0.3\"", "a: its source is not listed"),
        ("source = \"s\"\nfriction = \"0.4-0.3\"", "NotInOrder"),
        ("source = \"s\"\nfriction = \"x\"", "x:"),
        ("source = \"s\"\nfriction = \"0.3\"\nmax_pressure = \"3 degF\"", "not its unit"),
        ("source = \"s\"\nfriction = \"0.3\"\nmax_pressure = \"3\"", "no unit"),
        ("source = \"s\"\nfriction = \"0.3\"\nmax_pressure = \"4-3 psi\"", "not a range"),
        ("source = \"s\"\nfriction = \"0.3\"\nmax_pressure = \"0 psi\"", "max_pressure"),
        ("source = \"s\"\nfriction = \"0.3\"\ndensity = \"1-2 SG\"", "one value"),
        ("source = \"s\"\nfriction = \"0.3\"\nmax_presure = \"3 psi\"", "max_presure"),
    ] {
        let error = table(row).unwrap_err();
        assert!(error.contains(reason), "{error}");
    }
}
