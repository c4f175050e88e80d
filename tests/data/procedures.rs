//! The published test cycles against their printed parameters.

use brakewright::calc::case::duty_cycle::{Event, Gap, procedure};
use brakewright::calc::motion::Delays;
use brakewright::data::procedures;

use crate::support::close::assert_close;

#[test]
fn every_row_can_be_read_and_names_its_source() {
    let rows = procedures::parse(procedures::TEXT).unwrap();
    assert!(rows.len() >= 13);
    for (index, row) in rows.iter().enumerate() {
        assert!(
            !row.source.is_empty() && !row.name.is_empty() && !row.steps.is_empty(),
            "{}",
            row.id
        );
        assert!(rows.iter().skip(index + 1).all(|other| other.id != row.id), "{}", row.id);
    }
}

/// 49 CFR 571.135 S7.13 [seen]: per kg a snub from 120 to 60 km/h takes 416.7 J in 5.56 s (reference file 2a).
#[test]
fn the_heating_snubs_take_their_published_energy_and_time() {
    let row = procedures::find("us_571_135_heating_snubs").unwrap();
    let events = procedure::events(row, 250.0 / 3.6, Delays::NONE);
    assert_eq!(events.len(), 29);
    let Event::Stop { demand, .. } = events[0] else { panic!("{:?}", events[0]) };
    let energy = 0.5 * (demand.initial_speed.powi(2) - demand.final_speed.powi(2));
    assert_close(energy, 416.7, 2e-4);
    assert_close(
        (demand.initial_speed - demand.final_speed) / demand.deceleration.unwrap(),
        5.56,
        1e-3,
    );
    // A slow vehicle starts at 80 % of its maximum.
    let Event::Stop { demand, .. } = procedure::events(row, 30.0, Delays::NONE)[0] else {
        panic!()
    };
    assert_close(demand.initial_speed, 24.0, 1e-15);
}

/// 49 CFR 571.121 S5.4.2 [seen]: each deceleration takes 5.70 s and removes 91 % of the energy at 50 mph.
#[test]
fn the_air_brake_fade_takes_its_published_time() {
    let row = procedures::find("us_571_121_fade").unwrap();
    let Event::Stop { demand, .. } = procedure::events(row, 0.0, Delays::NONE)[0] else { panic!() };
    assert_close(
        (demand.initial_speed - demand.final_speed) / demand.deceleration.unwrap(),
        5.70,
        1e-3,
    );
    assert_close(1.0 - (demand.final_speed / demand.initial_speed).powi(2), 0.91, 1e-3);
}

/// 49 CFR 571.105 S5.1.4 [seen]: 5.87 s and 258 ft (light), 2.93 s (heavy).
#[test]
fn the_hydraulic_fade_takes_its_published_time_and_way() {
    let stop = |id| match procedure::events(procedures::find(id).unwrap(), 0.0, Delays::NONE)[0] {
        Event::Stop { demand, .. } => demand,
        Event::Run { .. } | Event::Descent { .. } | Event::Space { .. } | Event::Stand { .. } => {
            panic!()
        }
    };
    let light = stop("us_571_105_fade_light");
    assert_close(light.initial_speed / light.deceleration.unwrap(), 5.87, 1e-3);
    assert_close(
        light.initial_speed.powi(2) / (2.0 * light.deceleration.unwrap()) / 0.3048,
        258.0,
        1e-3,
    );
    let heavy = stop("us_571_105_fade_heavy");
    assert_close(
        (heavy.initial_speed - heavy.final_speed) / heavy.deceleration.unwrap(),
        2.93,
        2e-3,
    );
}

/// Type-I [seen]: 60 to 30 km/h is 104.2 kJ/t in 2.78 s.
#[test]
fn the_type_1_cycle_takes_its_published_energy() {
    let row = procedures::find("eu_type_1_m3_n2_n3").unwrap();
    let Event::Stop { demand, .. } = procedure::events(row, 100.0, Delays::NONE)[0] else {
        panic!()
    };
    assert_close(0.5 * (demand.initial_speed.powi(2) - demand.final_speed.powi(2)), 104.2, 5e-4);
    assert_close(
        (demand.initial_speed - demand.final_speed) / demand.deceleration.unwrap(),
        2.78,
        1e-3,
    );
}

/// Each row runs as a duty: speed never falls but in a stop, within a row and before what comes after it.
#[test]
fn every_row_is_a_duty_that_can_be_driven() {
    for row in procedures::all() {
        let events = procedure::events(row, 50.0, Delays::NONE);
        for pair in events.windows(2) {
            assert!(pair[1].speeds().0 >= pair[0].speeds().1, "{}: {pair:?}", row.id);
        }
        let is_gap = |event: Option<&Event>| matches!(event, Some(Event::Space { .. }));
        assert!(!is_gap(events.first()) && !is_gap(events.last()), "{}", row.id);
    }
}

/// 49 CFR 571.121 S5.4.2 [seen]: the stop comes one minute after the last deceleration, from 20 mph.
#[test]
fn the_air_brake_stop_comes_a_minute_after_the_decelerations() {
    let events = procedure::events(procedures::find("us_571_121_fade").unwrap(), 0.0, Delays::NONE);
    let [.., Event::Space { gap, speed }, Event::Stop { demand, .. }] = events.as_slice() else {
        panic!()
    };
    assert_eq!(*gap, Gap::Time(60.0));
    // On the way the vehicle is driven up from the 15 mph of the last deceleration.
    assert_close(*speed, 17.5 * 0.447_04, 1e-12);
    assert_close(demand.initial_speed, 20.0 * 0.447_04, 1e-12);
}
