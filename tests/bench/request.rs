//! Invented requests, one for each endpoint.

use serde_json::{Value, json};

fn quantity(value: f64, unit: &str) -> Value {
    json!({"value": value, "unit": unit})
}

fn brake(actuation: &Value) -> Value {
    let mut brake = pad_capacity();
    brake["actuation"] = actuation.clone();
    brake["disc"] = json!({
        "material": {"id": "gray_cast_iron"}, "outer_radius": quantity(140.0, "mm"),
        "inner_radius": quantity(80.0, "mm"), "thickness": quantity(20.0, "mm"), "construction": "solid",
    });
    brake
}

/// A pad and its lining.
pub(crate) fn pad_capacity() -> Value {
    json!({
        "pad": {"shape": "annular_sector", "inner_radius": quantity(90.0, "mm"),
            "outer_radius": quantity(135.0, "mm"), "angle": quantity(60.0, "deg")},
        "lining": {"friction": {"low": 0.33, "nominal": 0.38, "high": 0.44}, "max_pressure": quantity(2.4, "MPa")},
    })
}

/// A hydraulic brake and a torque.
pub(crate) fn actuation_force() -> Value {
    let hydraulic = json!({
        "kind": "hydraulic", "piston_diameter": quantity(54.0, "mm"), "efficiency": 0.97,
        "max_line_pressure": quantity(100.0, "bar"),
    });
    json!({"brake": brake(&hydraulic), "torque": quantity(800.0, "N.m")})
}

/// A car with a brake of its own on each axle.
pub(crate) fn stop(drag_area: f64) -> Value {
    let fitted = |axle: &str, force: f64| {
        let clamp = json!({"kind": "clamp_force", "force": quantity(force, "kN")});
        json!({"brake": brake(&clamp), "axle": axle, "count": 2})
    };
    json!({
        "machine": {
            "kind": "vehicle", "mass": quantity(1500.0, "kg"), "rolling_radius": quantity(300.0, "mm"),
            "rotating_mass_factor": 1.04, "rolling_resistance": 0.012, "drag_area": quantity(drag_area, "m2"),
            "adhesion": 0.9,
            "geometry": {"wheelbase": quantity(2.6, "m"), "center_of_gravity_height": quantity(0.55, "m"),
                "front_axle_to_center_of_gravity": quantity(1.2, "m")},
        },
        "fitted": [fitted("front", 9.0), fitted("rear", 4.0)],
        "initial_speed": quantity(108.0, "km/h"),
        "response": {"build_up_time": quantity(0.2, "s")},
    })
}

/// The same car stopped ten times over.
pub(crate) fn duty_cycle() -> Value {
    let stop = stop(0.7);
    json!({
        "machine": stop["machine"], "fitted": stop["fitted"],
        "events": [
            {"kind": "stop", "initial_speed": quantity(108.0, "km/h")},
            {"kind": "stand", "time": quantity(60.0, "s")},
        ],
        "repeats": 10,
    })
}

/// The same car, pressed by its pedal, with a stop and a hold and every limit that its lining and pedal can have.
pub(crate) fn spec_check() -> Value {
    let pedal = |force: f64| {
        json!({
            "kind": "hydraulic", "piston_diameter": quantity(54.0, "mm"), "efficiency": 0.97,
            "max_line_pressure": quantity(100.0, "bar"), "running_clearance": quantity(0.15, "mm"),
            "master_cylinder": {"bore": quantity(22.2, "mm"), "lever_ratio": 4.5, "efficiency": 0.9,
                "operator_force": quantity(force, "N"), "max_operator_force": quantity(500.0, "N"),
                "max_stroke": quantity(150.0, "mm")},
        })
    };
    let fitted = |axle: &str| {
        let mut brake = brake(&pedal(350.0));
        brake["pad"]["wear_allowance"] = quantity(9.0, "mm");
        brake["lining"] = json!({
            "friction": {"low": 0.33, "nominal": 0.38, "high": 0.44}, "max_pressure": quantity(6.0, "MPa"),
            "max_rubbing_speed": quantity(30.0, "m/s"), "max_pressure_velocity": quantity(90.0, "MPa.m/s"),
            "max_power_flux": quantity(30.0, "W/mm2"), "max_energy_flux": quantity(60.0, "J/mm2"),
            "max_temperature_continuous": quantity(350.0, "degC"), "max_temperature_peak": quantity(550.0, "degC"),
            "specific_wear": quantity(120.0, "mm3/MJ"),
        });
        json!({"brake": brake, "axle": axle, "count": 2, "control": "pedal"})
    };
    json!({
        "ref": "bench, invented", "machine": stop(0.0)["machine"],
        "fitted": [fitted("front"), fitted("rear")],
        "duties": [
            {"kind": "stop", "name": "emergency stop", "initial_speed": quantity(80.0, "km/h"),
                "response": {"reaction_time": quantity(0.7, "s"), "build_up_time": quantity(0.2, "s")},
                "require": {"max_distance": quantity(60.0, "m"), "max_time": quantity(6.0, "s"),
                    "min_mean_deceleration": quantity(4.0, "m/s2"),
                    "min_mean_fully_developed_deceleration": quantity(4.5, "m/s2"),
                    "min_peak_deceleration": quantity(5.0, "m/s2"), "max_deceleration": quantity(12.0, "m/s2"),
                    "min_braking_ratio": 0.5, "min_pad_life_stops": 1000.0, "no_wheel_lock": true,
                    "front_locks_first": true, "no_rear_wheel_lift": true}},
            {"kind": "hold", "name": "on the ramp", "grade": quantity(20.0, "%"),
                "require": {"min_holding_factor": 1.5}},
        ],
    })
}

/// The car judged for one stop: what a configurator asks for each of many choices.
pub(crate) fn choice() -> Value {
    let stop = stop(0.0);
    json!({
        "machine": stop["machine"], "fitted": stop["fitted"],
        "duties": [{"kind": "stop", "initial_speed": quantity(108.0, "km/h"),
            "response": {"build_up_time": quantity(0.2, "s")}, "require": {"max_distance": quantity(70.0, "m")}}],
    })
}

/// Choices of the car's brakes, one clamp force each; every `wrong_every`-th has a unit of another dimension.
pub(crate) fn selection(count: u32, wrong_every: Option<u32>) -> Value {
    let asked = choice();
    let candidate = |index: u32| {
        let mut fitted = asked["fitted"].clone();
        let force = &mut fitted[0]["brake"]["actuation"]["force"];
        force["value"] = json!(9.0 + f64::from(index) / f64::from(count));
        if wrong_every.is_some_and(|every| index.is_multiple_of(every)) {
            force["unit"] = json!("kg");
        }
        json!({"ref": format!("candidate {index}"), "fitted": fitted})
    };
    let candidates: Vec<Value> = (0..count).map(candidate).collect();
    json!({"application": {"machine": asked["machine"], "duties": asked["duties"]}, "candidates": candidates})
}

/// A body with an unknown member, a unit of another dimension and a missing member.
pub(crate) fn faulty_pad_capacity() -> Value {
    let mut body = pad_capacity();
    body["pad"]["inner_radius"]["unit"] = json!("kg");
    body["facets"] = json!(2);
    body["pad"].as_object_mut().unwrap().remove("angle");
    body
}
