//! The published braking requirements: form and plausibility of the rows, and what they come to for a machine.

use brakewright::calc::method::Provenance;
use brakewright::data::rules::{
    self, Clock, ControlForce, DistanceLimit, FromSpeed, HoldTest, MachineKind, NotApplicable,
    Resolution, ResolvedStop, RuleRow, RuleTest, StopTest,
};

use crate::support::close::assert_close;

fn row(id: &str) -> &'static RuleRow {
    rules::find(id).unwrap_or_else(|| panic!("{id} is not there"))
}

fn stops() -> impl Iterator<Item = (&'static RuleRow, &'static StopTest)> {
    rules::all().iter().flat_map(|row| {
        row.tests.iter().filter_map(move |test| match test {
            RuleTest::Stop(stop) => Some((row, stop)),
            RuleTest::Hold(_) | RuleTest::ForceOverWeight(_) => None,
        })
    })
}

fn only_stop(id: &str, max_speed: Option<f64>) -> ResolvedStop {
    match row(id).resolve(max_speed).as_slice() {
        [Resolution::Stop(stop)] => *stop,
        other => panic!("{id}: {other:?}"),
    }
}

const KILOMETRE_PER_HOUR: f64 = 1.0 / 3.6; // m/s

#[test]
fn every_row_can_be_read_and_names_its_source() {
    let rows = rules::parse(rules::TEXT).unwrap();
    assert!(rows.len() > 100, "{}", rows.len());
    for (index, row) in rows.iter().enumerate() {
        for text in [&row.id, &row.name, &row.source, &row.category] {
            assert!(!text.is_empty() && text.trim() == text, "{}", row.id);
        }
        assert!(
            row.note.as_ref().is_none_or(|note| note.ends_with('.') && !note.contains("..")),
            "{}",
            row.id
        );
        let is_identifier =
            |byte: u8| byte.is_ascii_lowercase() || byte.is_ascii_digit() || byte == b'_';
        assert!(row.id.bytes().all(is_identifier), "{}", row.id);
        let after = rows.iter().skip(index + 1);
        assert!(after.clone().all(|other| other.id != row.id), "{} twice", row.id);
        assert!(after.clone().all(|other| other.name != row.name), "{} twice", row.name);
        assert_eq!(rules::find(&row.id), Some(row));
    }
    assert_eq!(rules::closest("cfr49_571_135_s7_55"), Some("cfr49_571_135_s7_5"));
}

/// The requirements whose text was not read, or only in part (reference file, part 12): nothing else is from memory,
/// and nothing of them passes for read.
#[test]
fn rows_from_memory_are_marked_and_no_others() {
    let memory: Vec<&str> = rules::all()
        .iter()
        .filter(|row| row.provenance == Provenance::Memory)
        .map(|row| row.id.as_str())
        .collect();
    let expected = [
        "cfr49_571_122_s6_5",
        "cfr49_571_122_s6_10",
        "un_r13_type_0_m2",
        "un_r13_type_0_m3",
        "un_r13_type_0_n1",
        "un_r13_type_0_n2",
        "un_r13_type_0_n3",
        "un_r13_parking",
        "un_r13h_type_0",
        "un_r13h_parking",
    ];
    assert_eq!(memory, expected);
}

/// Every number lies where such a machine can be: a factor of ten or a mistaken unit would not.
#[test]
fn numbers_are_of_a_sensible_size() {
    for row in rules::all() {
        for ControlForce { least, most } in [row.hand_force, row.foot_force].into_iter().flatten() {
            assert!((150.0..=700.0).contains(&most), "{}", row.id);
            assert!(least.is_none_or(|least| (50.0..most).contains(&least)), "{}", row.id);
        }
        for test in &row.tests {
            match test {
                RuleTest::Hold(HoldTest::Slope { grade, .. }) => {
                    assert!((0.17..0.30).contains(grade), "{}", row.id);
                    assert_eq!(row.machines, [MachineKind::Vehicle], "{}", row.id);
                }
                RuleTest::Hold(HoldTest::Load { load_factor, min_holding_factor, .. }) => {
                    let product = load_factor * min_holding_factor;
                    assert!((1.0..=1.25).contains(&product), "{}", row.id);
                    assert_eq!(row.machines, [MachineKind::Hoist], "{}", row.id);
                }
                RuleTest::ForceOverWeight(ratio) => {
                    assert!((0.14..=0.58).contains(ratio), "{}", row.id);
                }
                RuleTest::Stop(_) => {}
            }
        }
    }
    for (row, stop) in stops() {
        match stop.from {
            FromSpeed::Fixed(speed) => assert!((4.0..45.0).contains(&speed), "{}", row.id),
            FromSpeed::ShareOfMaxSpeed { share, at_most } => {
                assert!((0.8..=1.0).contains(&share), "{}", row.id);
                assert!(at_most.is_none_or(|speed| (11.0..45.0).contains(&speed)), "{}", row.id);
            }
        }
        assert!((1.0..=1.25).contains(&stop.load_factor), "{}", row.id);
        let limits = &stop.limits;
        let decelerations = [
            limits.min_mean_deceleration,
            limits.min_mean_fully_developed_deceleration,
            limits.min_peak_deceleration,
            limits.max_deceleration,
        ];
        for deceleration in decelerations.into_iter().flatten() {
            assert!((0.4..7.0).contains(&deceleration), "{}", row.id);
        }
        assert!(limits.min_braking_ratio.is_none_or(|ratio| (0.4..0.7).contains(&ratio)));
    }
}

/// A distance from a road speed stands for a mean deceleration between 0.1 and 0.75 of gravity.
#[test]
fn every_distance_from_a_road_speed_can_be_kept_on_a_road() {
    let mut count = 0;
    for row in rules::all() {
        for resolution in row.resolve(Some(60.0)) {
            let Resolution::Stop(ResolvedStop { speed, max_distance: Some(distance), .. }) =
                resolution
            else {
                continue;
            };
            // The crane's row counts from a maximum speed in feet a minute.
            if row.id == "cfr29_1910_179_travel" {
                continue;
            }
            let mean = 0.5 * speed * speed / distance;
            assert!((1.0..7.4).contains(&mean), "{}: {mean}", row.id);
            count += 1;
        }
    }
    assert!(count > 100, "{count}");
}

/// 49 CFR 571.135 S7.6 [seen]: for 125 < Vmax < 200 km/h from 80 % of it, above from 160 km/h.
#[test]
fn the_high_speed_test_is_for_fast_vehicles_and_starts_from_their_share() {
    let id = "cfr49_571_135_s7_6";
    assert_eq!(row(id).resolve(None), [Resolution::MaxSpeedNeeded]);
    assert!(row(id).needs_max_speed());
    let slow = [Resolution::NotApplicable(NotApplicable::OtherSpeedClass)];
    for speed in [90.0, 125.0] {
        assert_eq!(row(id).resolve(Some(speed * KILOMETRE_PER_HOUR)), slow, "{speed}");
    }
    for (max_speed, from) in [(126.0, 100.8), (150.0, 120.0), (200.0, 160.0), (260.0, 160.0)] {
        let stop = only_stop(id, Some(max_speed * KILOMETRE_PER_HOUR));
        assert_close(stop.speed, from * KILOMETRE_PER_HOUR, 1e-14);
        assert_close(stop.max_distance.unwrap(), 0.10 * from + 0.0067 * from * from, 1e-14);
    }
}

#[test]
fn a_printed_speed_out_of_reach_is_left_out() {
    let table = row("cfr49_571_121_table_2_column_1");
    assert!(!table.needs_max_speed());
    let is_stop = |resolution: &Resolution| matches!(resolution, Resolution::Stop(_));
    assert_eq!(table.resolve(None).iter().filter(|test| is_stop(test)).count(), 7);
    let mile_per_hour = 0.447_04;
    for (max_speed, count) in [(29.0, 0), (30.0, 1), (47.0, 4), (60.0, 7), (80.0, 7)] {
        let found = table.resolve(Some(max_speed * mile_per_hour));
        assert_eq!(found.iter().filter(|test| is_stop(test)).count(), count, "{max_speed} mph");
        let out = Resolution::NotApplicable(NotApplicable::AboveMaxSpeed);
        assert_eq!(found.iter().filter(|test| **test == out).count(), 7 - count);
    }
}

/// Regulation (EU) 2015/68, Annex II, point 3 [seen]: two classes, the border belongs to the slow one.
#[test]
fn a_tractor_meets_the_row_of_its_speed_class_only() {
    for (max_speed, slow, fast) in [(25.0, true, false), (30.0, true, false), (40.0, false, true)] {
        let applies = |id| {
            let found = row(id).resolve(Some(max_speed * KILOMETRE_PER_HOUR));
            !found.contains(&Resolution::NotApplicable(NotApplicable::OtherSpeedClass))
        };
        let found = (applies("eu_2015_68_up_to_30"), applies("eu_2015_68_above_30"));
        assert_eq!(found, (slow, fast), "{max_speed} km/h");
    }
}

/// A shaft's speed is in rad/s, which no printed road speed can cap; only distances are formulas in m/s.
#[test]
fn machines_without_wheels_have_no_road_speeds() {
    for (row, stop) in stops().filter(|(row, _)| row.machines != [MachineKind::Vehicle]) {
        let whole = FromSpeed::ShareOfMaxSpeed { share: 1.0, at_most: None };
        assert_eq!(stop.from, whole, "{}", row.id);
        assert!(stop.max_distance.is_none(), "{}", row.id);
        assert!(stop.max_speed_above.is_none() && stop.max_speed_up_to.is_none(), "{}", row.id);
    }
}

/// 49 CFR 571.135 [seen]: the test uses at least 65 N on the pedal, and at most 500 N.
#[test]
fn the_upper_end_of_a_range_of_force_is_the_limit() {
    let force = row("cfr49_571_135_s7_5").foot_force.unwrap();
    assert_eq!(force, ControlForce { least: Some(65.0), most: 500.0 });
    let force = row("cfr49_571_135_s7_12").hand_force.unwrap();
    assert_eq!(force, ControlForce { least: None, most: 400.0 });
}

#[test]
fn a_table_with_a_slip_is_refused_with_the_row_named() {
    let table = |test: &str| {
        format!(
            "[[rule]]\nid = \"slip\"\nname = \"n\"\nsource = \"s\"\nprovenance = \"seen\"\ncategory = \"c\"\n\
             machines = [\"vehicle\"]\n[[rule.test]]\n{test}"
        )
    };
    let fine = "kind = \"stop\"\nfrom = \"20 mph\"\nclock = \"control\"\n";
    assert!(rules::parse(&table(fine)).is_ok());
    for (slip, found) in [
        ("kind = \"stop\"\nclock = \"control\"", "needs from"),
        ("kind = \"stop\"\nfrom = \"20\"\nclock = \"control\"", "no unit"),
        ("kind = \"stop\"\nfrom = \"20 kg\"\nclock = \"control\"", "not its unit"),
        ("kind = \"slope\"\ngrade = \"10-20 %\"\nboth_ways = true", "one value"),
        (&format!("{fine}max_distance = \"0.1 V + V2/130\""), "130"),
        (&format!("{fine}max_distance = \"0.1 V + V3 [m, km/h]\""), "not a formula"),
        (&format!("{fine}max_distance = \"0.1 V [m, kg]\""), "not a formula"),
    ] {
        let fault = rules::parse(&table(slip)).unwrap_err();
        assert!(fault.starts_with("slip: ") && fault.contains(found), "{fault}");
    }
    for slip in [
        format!("{fine}max_speed = \"20 mph\""),
        fine.replace("control", "driver"),
        "kind = \"coast\"".to_owned(),
    ] {
        assert!(rules::parse(&table(&slip)).is_err(), "{slip}");
    }
    assert!(rules::parse(&table(fine).replace("seen", "heard")).is_err());
}

/// A formula keeps the words of its source.
#[test]
fn a_formula_is_kept_as_printed() {
    let RuleTest::Stop(stop) = &row("eu_2015_68_above_30").tests[0] else { panic!() };
    let Some(DistanceLimit::Formula(formula)) = &stop.max_distance else { panic!() };
    assert_eq!(formula.text, "0.15 V + V2/130 [m, km/h]");
    // 0.15 V is a delay of 0.54 s, V²/130 a deceleration of 130/25.92.
    assert_close(formula.linear, 0.54, 1e-14);
    assert_close(formula.deceleration().unwrap(), 130.0 / 25.92, 1e-14);
}

/// The reference file's table of what a distance includes [seen]: the rules for vehicles start at the control. Machines
/// that are stopped by a command count from it.
#[test]
fn distances_of_drivers_count_from_the_control() {
    let commanded =
        ["ilo_lift_b8_4_3", "wac_296_96_05150", "csa_z98_6_6_2", "uk_woodworking_run_down"];
    for (row, stop) in stops() {
        let expected =
            if commanded.contains(&row.id.as_str()) { Clock::Signal } else { Clock::Control };
        assert_eq!(stop.clock, expected, "{}", row.id);
        assert!(stop.max_distance.is_none() || stop.clock == Clock::Control, "{}", row.id);
    }
}

/// No row has it today: a printed speed for one class of speed only.
#[test]
fn a_printed_speed_for_one_class_needs_the_maximum_speed() {
    let rows = rules::parse(
        "[[rule]]\nid = \"i\"\nname = \"n\"\nsource = \"s\"\nprovenance = \"seen\"\ncategory = \"c\"\n\
         machines = [\"vehicle\"]\n[[rule.test]]\nkind = \"stop\"\nfrom = \"10 m/s\"\n\
         max_speed_up_to = \"20 m/s\"\nclock = \"control\"",
    )
    .unwrap();
    assert_eq!(rows[0].resolve(None), [Resolution::MaxSpeedNeeded]);
    let other = [Resolution::NotApplicable(NotApplicable::OtherSpeedClass)];
    assert_eq!(rows[0].resolve(Some(20.1)), other);
    let found = rows[0].resolve(Some(20.0));
    let [Resolution::Stop(stop)] = found[..] else { panic!("{found:?}") };
    assert_close(stop.speed, 10.0, 1e-15);
    let out = [Resolution::NotApplicable(NotApplicable::AboveMaxSpeed)];
    assert_eq!(rows[0].resolve(Some(9.9)), out);
}
