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

/// A body with an unknown member, a unit of another dimension and a missing member.
pub(crate) fn faulty_pad_capacity() -> Value {
    let mut body = pad_capacity();
    body["pad"]["inner_radius"]["unit"] = json!("kg");
    body["facets"] = json!(2);
    body["pad"].as_object_mut().unwrap().remove("angle");
    body
}
