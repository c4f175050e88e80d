//! What holds for every request: physics that no unit system changes, and no body that breaks the service.

use std::f64::consts::PI;
use std::sync::LazyLock;

use proptest::prelude::*;
use proptest::test_runner::TestCaseResult;
use serde_json::{Value, json};
use tokio::runtime::{Builder, Runtime};

use super::v1::common::{
    ACTUATION_FORCE, PAD_CAPACITY, STOP_ENERGY, STOPPING, assert_conforms, assert_problem,
    assert_same_physics, bytes_or_problem, case, conveyor, disc, hoist, of, q, shaft, with,
};

static RUNTIME: LazyLock<Runtime> =
    LazyLock::new(|| Builder::new_current_thread().enable_all().build().unwrap());

fn ask(path: &str, body: &Value) -> (u16, Value) {
    // Each test thread enters a runtime of its own turn: the lock is only held for one request.
    static TURN: std::sync::Mutex<()> = std::sync::Mutex::new(());
    let _turn = TURN.lock().unwrap_or_else(std::sync::PoisonError::into_inner);
    RUNTIME.block_on(bytes_or_problem(path, &body.to_string()))
}

/// The answer to a request that must have one, as described.
fn answer(path: &str, body: &Value) -> Value {
    let (status, answer) = ask(path, body);
    assert_eq!(status, 200, "{body}\n{answer}");
    assert_conforms(path, &answer);
    answer
}

fn close(one: f64, other: f64, relative: f64) -> TestCaseResult {
    let bound = relative * one.abs().max(other.abs());
    prop_assert!((one - other).abs() <= bound, "{} and {}", one, other);
    Ok(())
}

/// Writes quantities in the units of one system; the factors are the definitions of inch, pound and gravity.
#[derive(Clone, Copy)]
struct Units {
    is_us: bool,
}

const POUND: f64 = 0.453_592_37;
const POUND_FORCE: f64 = POUND * 9.806_65;

impl Units {
    fn of(self, si: (f64, &str), us: (f64, &str)) -> Value {
        if self.is_us { q(us.0, us.1) } else { q(si.0, si.1) }
    }

    fn length(self, metres: f64) -> Value {
        self.of((metres * 1e3, "mm"), (metres / 0.0254, "in"))
    }

    fn force(self, newtons: f64) -> Value {
        self.of((newtons, "N"), (newtons / POUND_FORCE, "lbf"))
    }

    fn mass(self, kilograms: f64) -> Value {
        self.of((kilograms, "kg"), (kilograms / POUND, "lb"))
    }

    fn speed(self, speed: f64) -> Value {
        self.of((speed * 3.6, "km/h"), (speed / 0.447_04, "mph"))
    }

    fn pressure(self, pascals: f64) -> Value {
        let psi = POUND_FORCE / (0.0254 * 0.0254);
        self.of((pascals / 1e6, "MPa"), (pascals / psi, "psi"))
    }

    fn temperature(self, celsius: f64) -> Value {
        self.of((celsius, "degC"), (celsius.mul_add(1.8, 32.0), "degF"))
    }

    fn system(self) -> &'static str {
        if self.is_us { "us" } else { "si" }
    }
}

/// A pad, its friction and the clamp force, in SI.
#[derive(Debug, Clone, Copy)]
struct Pressed {
    inner: f64,
    width: f64,
    degrees: f64,
    friction: f64,
    spread: f64,
    faces: u32,
    clamp: f64,
}

prop_compose! {
    fn pressed()(
        inner in 0.03..0.4_f64, width in 0.01..0.2_f64, degrees in 5.0..359.0_f64, friction in 0.1..0.7_f64,
        spread in 0.0..0.2_f64, faces in 1..=2_u32, clamp in 100.0..1e5_f64,
    ) -> Pressed {
        Pressed { inner, width, degrees, friction, spread, faces, clamp }
    }
}

impl Pressed {
    fn pad(&self, units: Units) -> Value {
        json!({
            "shape": "annular_sector", "inner_radius": units.length(self.inner),
            "outer_radius": units.length(self.inner + self.width), "angle": q(self.degrees, "deg"),
        })
    }

    fn lining(&self, units: Units) -> Value {
        json!({
            "friction": {"low": self.friction, "high": self.friction + self.spread},
            "max_pressure": units.pressure(2e6), "max_rubbing_speed": units.speed(20.0),
            "max_temperature_peak": units.temperature(300.0),
        })
    }

    fn capacity(&self, units: Units) -> Value {
        json!({
            "report_units": units.system(), "pad": self.pad(units), "lining": self.lining(units),
            "faces": self.faces, "clamp_force": units.force(self.clamp),
        })
    }

    fn brake(&self, units: Units) -> Value {
        let radius = |metres: f64| units.length(metres);
        json!({
            "pad": self.pad(units), "lining": self.lining(units), "faces": self.faces,
            "disc": {"material": {"id": "gray_cast_iron"}, "inner_radius": radius(self.inner * 0.9),
                "outer_radius": radius((self.inner + self.width) * 1.1), "thickness": radius(0.03)},
            "actuation": {"kind": "clamp_force", "force": units.force(self.clamp)},
        })
    }
}

/// A vehicle on a road, with two axles.
#[derive(Debug, Clone, Copy)]
struct Road {
    mass: f64,
    radius: f64,
    rotating: f64,
    rolling: f64,
    drag: f64,
    adhesion: f64,
    speed: f64,
    percent: f64,
    delays: [f64; 3],
    brake_force: [f64; 2],
}

prop_compose! {
    fn road()(
        mass in 100.0..4e4_f64, radius in 0.2..0.6_f64, rotating in 1.0..1.2_f64, rolling in 0.0..0.03_f64,
        drag in prop_oneof![Just(0.0), 0.1..5.0_f64], adhesion in 0.2..1.1_f64, speed in 2.0..40.0_f64, percent in -5.0..8.0_f64,
        delays in [0.0..1.5_f64, 0.0..0.6, 0.0..0.8], share in [0.1..0.6_f64, 0.1..0.6],
    ) -> Road {
        let brake_force = share.map(|share| share * mass * 9.8);
        Road { mass, radius, rotating, rolling, drag, adhesion, speed, percent, delays, brake_force }
    }
}

impl Road {
    fn body(&self, units: Units, fitted: &Value) -> Value {
        let [reaction, dead, build_up] = self.delays.map(|delay| q(delay, "s"));
        json!({
            "report_units": units.system(),
            "machine": {
                "kind": "vehicle", "mass": units.mass(self.mass), "rolling_radius": units.length(self.radius),
                "rotating_mass_factor": self.rotating, "rolling_resistance": self.rolling, "adhesion": self.adhesion,
                "drag_area": units.of((self.drag, "m2"), (self.drag / 0.3048 / 0.3048, "ft2")),
                "geometry": {"wheelbase": units.length(2.6), "center_of_gravity_height": units.length(0.55),
                    "front_axle_to_center_of_gravity": units.length(1.2)},
            },
            "fitted": fitted, "initial_speed": units.speed(self.speed), "grade": q(self.percent, "%"),
            "response": {"reaction_time": reaction, "dead_time": dead, "build_up_time": build_up},
        })
    }

    fn torques(&self, units: Units) -> Value {
        let entry = |force: f64, axle: &str| {
            let torque = force * self.radius;
            let torque = units.of((torque, "N.m"), (torque / POUND_FORCE / 0.3048, "lbf.ft"));
            json!({"torque": torque, "axle": axle})
        };
        json!([entry(self.brake_force[0], "front"), entry(self.brake_force[1], "rear")])
    }

    /// The vehicle with known torques.
    fn stop(&self, units: Units) -> Value {
        self.body(units, &self.torques(units))
    }
}

const SI: Units = Units { is_us: false };
const US: Units = Units { is_us: true };

/// What two roundings of every input and some cancellation leave.
const CONVERTED: f64 = 1e-9;

/// What is left where air resistance is integrated: steps fall elsewhere when an input moves by a rounding, and the
/// power course that heats a surface is divided along them.
const INTEGRATED: f64 = 1e-5;

proptest! {
    #![proptest_config(ProptestConfig { cases: 32, max_shrink_iters: 64, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn the_unit_system_of_a_pad_never_changes_physics(pressed in pressed()) {
        let [si, us] = [SI, US].map(|units| answer(PAD_CAPACITY, &pressed.capacity(units)));
        assert_same_physics(&si, &us, CONVERTED);
    }

    #[test]
    fn the_unit_system_of_a_demand_never_changes_physics(pressed in pressed(), torque in 1.0..1e4_f64) {
        let body = |units: Units| {
            let mut brake = pressed.brake(units);
            brake["actuation"].as_object_mut().unwrap().shift_remove("force");
            let torque = units.of((torque, "N.m"), (torque / POUND_FORCE / 0.0254, "lbf.in"));
            json!({"report_units": units.system(), "brake": brake, "torque": torque})
        };
        let [si, us] = [SI, US].map(|units| answer(ACTUATION_FORCE, &body(units)));
        assert_same_physics(&si, &us, CONVERTED);
    }

    #[test]
    fn torque_is_linear_in_friction_force_and_faces(pressed in pressed(), factor in 0.2..2.0_f64) {
        let torque = |pressed: Pressed| {
            of(&case(&answer(PAD_CAPACITY, &pressed.capacity(SI)), "low")["torque"], "N.m")
        };
        let base = torque(pressed);
        close(torque(Pressed { friction: pressed.friction * factor, ..pressed }), factor * base, 1e-12)?;
        close(torque(Pressed { clamp: pressed.clamp * factor, ..pressed }), factor * base, 1e-12)?;
        close(torque(Pressed { faces: 2 * pressed.faces, ..pressed }), 2.0 * base, 1e-12)?;
    }

    #[test]
    fn pressing_for_a_torque_and_the_torque_of_that_pressure_agree(pressed in pressed(), torque in 1.0..1e4_f64) {
        let mut brake = pressed.brake(SI);
        brake["actuation"].as_object_mut().unwrap().shift_remove("force");
        let body = json!({"brake": brake, "torque": q(torque, "N.m")});
        let needed = answer(ACTUATION_FORCE, &body);
        for name in ["low", "nominal", "high"] {
            let clamp = case(&needed, name)["clamp_force"].clone();
            let given = answer(PAD_CAPACITY, &with(&pressed.capacity(SI), "/clamp_force", clamp));
            close(of(&case(&given, name)["torque"], "N.m"), torque, 1e-12)?;
            close(
                of(&given["results"]["peak_pressure"], "MPa"),
                of(&case(&needed, name)["peak_pressure"], "MPa"),
                1e-12,
            )?;
        }
    }

    #[test]
    fn more_delay_never_shortens_a_stop(road in road(), which in 0..3_usize, more in 0.001..1.0_f64) {
        let mut later = road;
        later.delays[which] += more;
        let [sooner, later] = [road, later].map(|road| {
            case(&answer(STOPPING, &road.stop(SI)), "nominal").clone()
        });
        for (member, unit) in [("total_time", "s"), ("total_distance", "m")] {
            let [sooner, later] = [&sooner, &later].map(|stop| of(&stop[member], unit));
            prop_assert!(later >= sooner * (1.0 - 1e-9), "{}: {} after {}", member, later, sooner);
        }
    }

    #[test]
    fn more_grade_never_lengthens_a_stop_uphill(road in road(), more in 0.1..10.0_f64) {
        // While tan b < 1/adhesion: here at most 0.18 against 0.9.
        let flat = Road { percent: road.percent.abs(), ..road };
        let steep = Road { percent: flat.percent + more, ..flat };
        let [flat, steep] = [flat, steep].map(|road| {
            of(&case(&answer(STOPPING, &road.stop(SI)), "nominal")["total_distance"], "m")
        });
        prop_assert!(steep <= flat * (1.0 + 1e-9), "{} on the steeper way, {}", steep, flat);
    }

    #[test]
    fn the_closed_form_and_the_integrated_stop_agree(road in road()) {
        // A trace of air resistance leaves the closed form for the integrator and changes next to nothing.
        let body = Road { drag: 0.0, ..road }.stop(SI);
        let nearly = with(&body, "/machine/drag_area", q(1e-9, "m2"));
        let [closed, integrated] =
            [body, nearly].map(|body| case(&answer(STOPPING, &body), "nominal").clone());
        for (member, unit) in [("total_time", "s"), ("total_distance", "m"), ("peak_deceleration", "m/s2")] {
            // Where an axle limit takes over within a step of the integrator, 1e-7 is left of it.
            close(of(&closed[member], unit), of(&integrated[member], unit), 1e-6)?;
        }
    }

    #[test]
    fn the_parts_of_a_stop_add_up(road in road()) {
        let stop = case(&answer(STOPPING, &road.stop(SI)), "nominal").clone();
        let phases = stop["phases"].as_array().unwrap();
        let sum = |member: &str, unit: &str| phases.iter().map(|phase| of(&phase[member], unit)).sum::<f64>();
        close(sum("time", "s"), of(&stop["total_time"], "s"), 1e-12)?;
        close(sum("distance", "m"), of(&stop["total_distance"], "m"), 1e-12)?;
        prop_assert_eq!(of(&phases.last().unwrap()["end_speed"], "m/s"), 0.0);
    }
}

proptest! {
    // Surface temperatures take long in a debug build: few cases, each of three frictions.
    #![proptest_config(ProptestConfig { cases: 8, max_shrink_iters: 16, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn the_unit_system_of_a_stop_never_changes_physics(road in road(), pressed in pressed()) {
        let body = |units: Units| {
            let brake = pressed.brake(units);
            let mut fitted = road.torques(units);
            fitted.as_array_mut().unwrap().push(json!({"brake": brake, "axle": "front", "count": 2}));
            road.body(units, &fitted)
        };
        for path in [STOPPING, STOP_ENERGY] {
            let [si, us] = [SI, US].map(|units| answer(path, &body(units)));
            assert_same_physics(&si, &us, if road.drag > 0.0 { INTEGRATED } else { CONVERTED });
        }
    }

    #[test]
    fn the_energies_of_the_brakes_add_up_and_the_balance_closes(road in road(), pressed in pressed(), count in 1..5_u32) {
        let mut fitted = road.torques(SI);
        let entry = json!({"brake": pressed.brake(SI), "axle": "all", "count": count, "speed_ratio": 1.3});
        fitted.as_array_mut().unwrap().push(entry);
        let answer = answer(STOP_ENERGY, &road.body(SI, &fitted));
        for name in ["low", "nominal", "high"] {
            let case = case(&answer, name);
            prop_assert_eq!(&case["reaches_final_speed"], true);
            let energy = |member: &str| of(&case[member], "kJ");
            let total = energy("brake_energy");
            let own = |index: usize| of(&case["fitted"][index]["energy"], "kJ");
            close(own(0) + own(1) + f64::from(count) * own(2), total, 1e-12)?;
            let kinetic = energy("kinetic_translation") + energy("kinetic_rotation");
            let balance = kinetic + energy("grade_or_load") - energy("resistance");
            prop_assert!((balance - total).abs() <= 1e-6 * kinetic, "{} and {}", balance, total);
            let entry = &case["fitted"][2];
            prop_assert!(of(&entry["peak_power"], "kW") >= of(&entry["mean_power"], "kW"));
            prop_assert!(of(&entry["surface_peak_temperature"], "degC") >= 20.0);
            let faces = f64::from(pressed.faces);
            close(of(&entry["energy_per_face"], "kJ") * faces, own(2), 1e-12)?;
            let area = pressed.degrees.to_radians() / 2.0
                * pressed.width * (2.0 * pressed.inner + pressed.width) * 1e6;
            close(of(&entry["energy_flux"], "J/mm2") * area / 1e3 * faces, own(2), 1e-9)?;
        }
    }
}

/// A pad of each shape.
fn pads() -> [Value; 3] {
    let wear = q(9.0, "mm");
    [
        json!({"shape": "annular_sector", "inner_radius": q(100.0, "mm"), "outer_radius": q(150.0, "mm"), "angle": q(60.0, "deg"), "wear_allowance": wear}),
        json!({"shape": "round", "radius": q(20.0, "mm"), "center_radius": q(125.0, "mm"), "wear_allowance": wear}),
        json!({"shape": "outline", "unit": "mm", "points": [[100, -30], [140, -42], [140, 42], [100, 30]]}),
    ]
}

/// A lining with every member.
fn full_lining() -> Value {
    json!({
        "friction": {"low": 0.33, "nominal": 0.38, "high": 0.44}, "max_pressure": q(2.4, "MPa"),
        "max_rubbing_speed": q(20.0, "m/s"), "max_pressure_velocity": q(10.0, "MPa.m/s"),
        "max_power_flux": q(3.0, "W/mm2"), "max_energy_flux": q(9.0, "J/mm2"),
        "max_temperature_continuous": q(250.0, "degC"), "max_temperature_peak": q(400.0, "degC"),
        "fade": [{"temperature": q(100.0, "degC"), "factor": 1.0}, {"temperature": q(400.0, "degC"), "factor": 0.7}],
        "specific_wear": q(120.0, "mm3/MJ"), "conductivity": q(1.0, "W/(m.K)"),
        "density": q(2200.0, "kg/m3"), "specific_heat": q(1000.0, "J/(kg.K)"),
    })
}

/// A chain of each kind, with every member but the input that it is to find.
fn chains() -> [Value; 4] {
    [
        json!({"kind": "hydraulic", "piston_diameter": q(54.0, "mm"), "pistons_per_side": 1, "efficiency": 0.97,
            "threshold_pressure": q(0.7, "bar"), "max_line_pressure": q(120.0, "bar"), "running_clearance": q(0.2, "mm"),
            "compliance": q(100.0, "mm3/MPa"),
            "master_cylinder": {"bore": q(22.2, "mm"), "lever_ratio": 4.5, "efficiency": 0.9,
                "max_operator_force": q(400.0, "N"), "max_stroke": q(120.0, "mm")}}),
        json!({"kind": "cable", "lever_ratio": 4, "cable_efficiency": 0.8, "caliper_ratio": 10,
            "caliper_efficiency": 0.9, "max_operator_force": q(200.0, "N")}),
        json!({"kind": "pneumatic", "chamber_area": q(120.0, "cm2"), "max_air_pressure": q(0.8, "MPa"),
            "return_spring_force": q(300.0, "N"), "force_ratio": 1.2, "efficiency": 0.9}),
        json!({"kind": "spring", "spring_rate": q(800.0, "N/mm"), "pad_wear_travel": q(2.0, "mm"),
            "release_travel": q(1.0, "mm"), "force_ratio": 1, "efficiency": 0.9,
            "release_piston_diameter": q(60.0, "mm"), "max_release_pressure": q(7.0, "MPa")}),
    ]
}

fn full_brake(pad: &Value, chain: &Value) -> Value {
    let mut plate = disc();
    plate["outer_radius"] = q(170.0, "mm");
    plate["mass"] = q(8.0, "kg");
    plate["cooling"] = json!({"coefficient": q(60.0, "W/(m2.K)")});
    json!({"pad": pad, "lining": full_lining(), "faces": 2, "disc": plate, "actuation": chain})
}

/// Stops of every machine, with brakes in their parts and with known torques.
fn stops() -> Vec<Value> {
    let [sector, round, outline] = pads();
    let [hydraulic, cable, air, mut spring] = chains();
    spring["spring_force"] = q(9.6, "kN");
    let road = Road {
        mass: 1500.0,
        radius: 0.3,
        rotating: 1.04,
        rolling: 0.012,
        drag: 0.7,
        adhesion: 0.8,
        speed: 25.0,
        percent: -4.0,
        delays: [0.7, 0.2, 0.3],
        brake_force: [5e3, 3e3],
    };
    let fitted = json!([
        {"brake": full_brake(&sector, &hydraulic), "axle": "front", "count": 2, "brakes_per_disc": 1, "speed_ratio": 1,
            "control": "pedal", "operator_share": 0.6, "rolling_radius": q(310.0, "mm")},
        {"brake": full_brake(&outline, &hydraulic), "axle": "rear", "count": 2, "control": "pedal", "operator_share": 0.4},
    ]);
    let mut vehicle = road.body(SI, &fitted);
    vehicle["drive_force"] = q(-200.0, "N");
    let held = with(&vehicle, "/deceleration", q(3.0, "m/s2"));
    let pressed = |body: Value, chain: &Value| {
        with(&body, "/fitted/0", json!({"brake": full_brake(&round, chain)}))
    };
    vec![
        vehicle,
        held,
        pressed(hoist(), &spring),
        pressed(conveyor(), &cable),
        pressed(shaft(), &air),
        shaft(),
        hoist(),
        conveyor(),
    ]
}

/// Bodies with as many members as there are, for all kinds of pads, chains and machines.
fn examples() -> Vec<(&'static str, Value)> {
    let mut found = Vec::new();
    for pad in &pads() {
        found.push((PAD_CAPACITY, json!({"ref": "a", "report_units": "us", "pad": pad, "lining": full_lining(), "faces": 2, "clamp_force": q(9.0, "kN")})));
        found.push((PAD_CAPACITY, json!({"pad": pad, "lining": {"id": "sintered_metal_dry"}, "pressure_distribution": "uniform_pressure"})));
    }
    for chain in &chains() {
        let brake = full_brake(&pads()[0], chain);
        found.push((ACTUATION_FORCE, json!({"brake": brake, "torque": q(700.0, "N.m")})));
    }
    for body in stops() {
        found.push((STOPPING, with(&body, "/trace", json!({"points": 20}))));
        let warm = with(&body, "/ambient_temperature", q(30.0, "degC"));
        found.push((STOP_ENERGY, with(&warm, "/start_temperature", q(80.0, "degC"))));
    }
    found
}

#[test]
fn every_example_of_these_properties_has_an_answer() {
    for (path, body) in examples() {
        answer(path, &body);
    }
}

/// The pointers of every value below the root.
fn places(value: &Value, at: &str, found: &mut Vec<String>) {
    if !at.is_empty() {
        found.push(at.to_owned());
    }
    match value {
        Value::Object(members) => {
            members.iter().for_each(|(name, part)| places(part, &format!("{at}/{name}"), found));
        }
        Value::Array(items) => {
            items.iter().enumerate().for_each(|(index, part)| {
                places(part, &format!("{at}/{index}"), found);
            });
        }
        Value::Null | Value::Bool(_) | Value::Number(_) | Value::String(_) => {}
    }
}

/// Demands an answer as described, without anything that is not a number, or a problem that is the request's.
fn survives(path: &str, body: &Value) -> TestCaseResult {
    let (status, answer) = ask(path, body);
    match status {
        200 => assert_conforms(path, &answer),
        400 | 422 => assert_problem(&answer),
        _ => prop_assert!(false, "{} for {} {}", status, path, body),
    }
    Ok(())
}

fn anything() -> impl Strategy<Value = Value> {
    let numbers = [
        0.0,
        -0.0,
        -1.0,
        1.0,
        2.0,
        0.5,
        1e-300,
        -1e-300,
        1e-30,
        1e-12,
        1e-6,
        1e6,
        1e15,
        -1e15,
        1e300,
        -1e300,
        f64::MAX,
        f64::MIN_POSITIVE,
        5e-324,
    ];
    let others = [
        json!(null),
        json!(""),
        json!("mm"),
        json!("0"),
        json!([]),
        json!({}),
        json!(true),
        json!([1, 2]),
        json!({"value": 1, "unit": "mm"}),
        json!({"value": 0, "unit": "m/s"}),
        json!({"value": 1e300, "unit": "N"}),
        json!(u64::MAX),
        json!(i64::MIN),
        json!("\u{0}\u{1F980}"),
    ];
    let numbers: Vec<Value> = numbers.iter().map(|number| json!(number)).collect();
    prop_oneof![3 => prop::sample::select(numbers), 1 => prop::sample::select(others.to_vec())]
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 200, max_shrink_iters: 256, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn no_replaced_value_breaks_the_service(
        (path, body) in prop::sample::select(examples()),
        changes in prop::collection::vec((any::<prop::sample::Index>(), anything()), 1..4),
    ) {
        let mut body = body;
        for (index, value) in changes {
            let mut found = Vec::new();
            places(&body, "", &mut found);
            if let Some(place) = body.pointer_mut(index.get(&found).as_str()) {
                *place = value;
            }
        }
        survives(path, &body)?;
    }

    #[test]
    fn no_scaled_number_breaks_the_service(
        (path, body) in prop::sample::select(examples()),
        changes in prop::collection::vec((any::<prop::sample::Index>(), -12.0..12.0_f64), 1..8),
    ) {
        let mut body = body;
        let mut found = Vec::new();
        places(&body, "", &mut found);
        found.retain(|at| body.pointer(at).is_some_and(Value::is_number));
        for (index, exponent) in changes {
            let place = body.pointer_mut(index.get(&found).as_str()).unwrap();
            *place = json!(place.as_f64().unwrap() * (exponent * 10.0_f64.ln()).exp());
        }
        survives(path, &body)?;
    }

    #[test]
    fn no_lost_member_breaks_the_service(
        (path, body) in prop::sample::select(examples()),
        changes in prop::collection::vec(any::<prop::sample::Index>(), 1..6),
    ) {
        let mut body = body;
        for index in changes {
            let mut found = Vec::new();
            places(&body, "", &mut found);
            if found.is_empty() {
                break;
            }
            let (parent, member) = index.get(&found).rsplit_once('/').unwrap();
            if let Some(Value::Object(members)) = body.pointer_mut(parent) {
                members.shift_remove(member);
            }
        }
        survives(path, &body)?;
    }
}

#[test]
fn the_pad_area_of_these_properties_is_that_of_the_answer() {
    // Guards the formula used above: a quarter ring of 100 to 150 mm has pi/4 · 12 500 mm².
    let pressed = Pressed {
        inner: 0.1,
        width: 0.05,
        degrees: 90.0,
        friction: 0.4,
        spread: 0.0,
        faces: 2,
        clamp: 1e3,
    };
    let answer = answer(PAD_CAPACITY, &pressed.capacity(SI));
    let area = of(&answer["results"]["pad_area"], "mm2");
    assert!((area - PI / 4.0 * 12_500.0).abs() < 1e-6);
}
