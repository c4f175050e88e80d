//! The catalog of disc materials can be read, and each row means something.

use brakewright::calc::method::Provenance;
use brakewright::calc::quantity::{Si, ThermodynamicTemperature, ZERO_CELSIUS};
use brakewright::data::disc_materials::{TEXT, all, closest, find, parse};

fn celsius(value: f64) -> ThermodynamicTemperature {
    ThermodynamicTemperature::from_si(value + ZERO_CELSIUS)
}

#[test]
fn the_table_of_disc_materials_can_be_read() {
    let rows = parse(TEXT).unwrap();
    assert_eq!(rows.len(), 10);
    assert_eq!(rows, all());
}

#[test]
fn each_disc_material_is_named_sourced_and_plausible() {
    for row in all() {
        assert!(!row.name.is_empty() && !row.source.is_empty(), "{}", row.id);
        assert_eq!(all().iter().filter(|other| other.id == row.id).count(), 1, "{}", row.id);
        let substance = row.material.substance_at(celsius(300.0));
        // Wider than any solid a disc is made of; catches a slipped decimal point or unit.
        assert!((1500.0..9000.0).contains(&substance.density().si()), "{}", row.id);
        assert!((300.0..2000.0).contains(&substance.specific_heat().si()), "{}", row.id);
        assert!((5.0..250.0).contains(&substance.conductivity().si()), "{}", row.id);
        assert!(row.material.max_temperature().is_none_or(|limit| limit < celsius(1500.0)));
        let origin = row.material.origin().unwrap();
        assert_eq!((origin.id.as_str(), origin.provenance), (row.id.as_str(), row.provenance));
        let remembers = !origin.from_memory.is_empty();
        assert!(row.provenance == Provenance::Seen || remembers, "{}", row.id);
    }
}

#[test]
fn a_material_is_found_by_its_identifier_and_a_slip_is_answered_with_the_closest() {
    assert_eq!(find("carbon_steel").unwrap().provenance, Provenance::Seen);
    assert!(find("Carbon_Steel").is_none());
    assert_eq!(closest("grey_cast_iron"), Some("gray_cast_iron"));
    assert_eq!(closest("granite"), None);
}

#[test]
fn only_the_values_that_are_remembered_are_marked_so() {
    let remembered = |id: &str| find(id).unwrap().material.origin().unwrap().from_memory.clone();
    assert_eq!(remembered("carbon_steel"), ["emissivity"]);
    assert_eq!(remembered("aluminum_composite"), ["density", "specific_heat", "conductivity"]);
}

#[test]
fn a_table_with_a_foreign_unit_a_slip_or_a_bad_number_is_refused() {
    let broken = |from: &str, to: &str| parse(&TEXT.replacen(from, to, 1)).unwrap_err();
    assert!(broken("\"kg/m3\"", "\"g/cm3\"").contains("gray_cast_iron: unit g/cm3"));
    assert!(broken("7200.0", "-7200.0").contains("density must be above 0"));
    assert!(broken("[200.0, 460.0]", "[900.0, 460.0]").contains("temperatures must rise"));
    assert!(broken("at = 738.0", "at = 700.0").contains("without a pole"));
    assert!(broken("note =", "remark =").contains("unknown field"));
    assert!(broken("provenance = \"seen\"", "provenance = \"heard\"").contains("heard"));
}
