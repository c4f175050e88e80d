"""Writes the requests of spec_check/*.json. All machines, brakes and duties in them are invented.

`limits.json` holds for each check a request just inside its limit, one just outside, and one in which the input is
missing that the check needs: the limit comes from the actual value that `spec_check.py` works out.

Run: python tests/reference/spec_check_corpus.py [group ...], then spec_check.py --corpus [group ...].
"""

import copy
import json
import sys

from spec_check import HERE, SpecCheck

INVENTED = "invented"


def q(value, unit):
    return {"value": value, "unit": unit}


# --- parts -----------------------------------------------------------------------------------------

LINING = {
    "friction": {"low": 0.33, "nominal": 0.38, "high": 0.44}, "max_pressure": q(9, "MPa"),
    "max_rubbing_speed": q(40, "m/s"), "max_temperature_continuous": q(350, "degC"), "max_temperature_peak": q(650, "degC"),
}
THERMAL = {"conductivity": q(1.1, "W/(m.K)"), "density": q(2300, "kg/m3"), "specific_heat": q(1000, "J/(kg.K)")}
FADE = {"fade": [{"temperature": q(100, "degC"), "factor": 1.0}, {"temperature": q(250, "degC"), "factor": 0.9},
                 {"temperature": q(500, "degC"), "factor": 0.6}]}
RISING = {"fade": [{"temperature": q(60, "degC"), "factor": 1.0}, {"temperature": q(300, "degC"), "factor": 1.25}]}


def lining(**more):
    made = {**LINING, **more}
    return {name: value for name, value in made.items() if value is not None}


def sector(inner, outer, angle, wear=None):
    pad = {"shape": "annular_sector", "inner_radius": q(inner, "mm"), "outer_radius": q(outer, "mm"), "angle": q(angle, "deg")}
    return pad | ({"wear_allowance": q(wear, "mm")} if wear else {})


def disc(inner, outer, thickness, material="gray_cast_iron", mass=None, cooling=None, **more):
    made = {"material": {"id": material}, "outer_radius": q(outer, "mm"), "inner_radius": q(inner, "mm"),
            "thickness": q(thickness, "mm"), "construction": "ventilated" if mass else "solid", **more}
    if mass:
        made["mass"] = q(mass, "kg")
    if cooling:
        made["cooling"] = {"model": cooling} if isinstance(cooling, str) else {"coefficient": q(cooling, "W/(m2.K)")}
    return made


def pedal(force=None, bore=20.6, ratio=4.8, **more):
    given = {"bore": q(bore, "mm"), "lever_ratio": ratio, "efficiency": 0.85, **more}
    return given | ({"operator_force": q(force, "N")} if force else {})


def hydraulic(piston, master=None, pistons=1, **more):
    given = {"kind": "hydraulic", "piston_diameter": q(piston, "mm"), "pistons_per_side": pistons, "efficiency": 0.96,
             "threshold_pressure": q(0.5, "bar"), **more}
    return given | ({"master_cylinder": master} if master else {})


def clamp(force):
    return {"kind": "clamp_force", "force": q(force, "N")}


def spring(force, rate=None, wear=None, **more):
    given = {"kind": "spring", "spring_force": q(force, "N"), "force_ratio": 1.0, "efficiency": 0.95, **more}
    if rate:
        given["spring_rate"] = q(rate, "N/mm")
    if wear:
        given["pad_wear_travel"] = q(wear, "mm")
    return given


def brake(pad, lining, actuation, disc=None, **more):
    return {"pad": pad, "lining": lining, "actuation": actuation, **({"disc": disc} if disc else {}), **more}


def car(adhesion=0.8, geometry=(2.6, 0.55, 1.15), mass=1500, **more):
    machine = {"kind": "vehicle", "mass": q(mass, "kg"), "rolling_radius": q(0.31, "m"), **more}
    if adhesion:
        machine["adhesion"] = adhesion
    if geometry:
        machine["geometry"] = {"wheelbase": q(geometry[0], "m"), "center_of_gravity_height": q(geometry[1], "m"),
                               "front_axle_to_center_of_gravity": q(geometry[2], "m")}
    return machine


def front(force=260, actuation=None, count=2, given=None, cooling="airstream", mass=6.5, **more):
    made = brake(sector(95, 140, 55, 10), given or lining(**THERMAL), actuation or hydraulic(54, pedal(force)),
                 disc(80, 142, 24, mass=mass, cooling=cooling))
    return {"brake": made, "count": count, "axle": "front", "control": "pedal", **more}


def rear(force=260, actuation=None, count=2, given=None, cooling="airstream", **more):
    made = brake(sector(95, 128, 45, 9), given or lining(**THERMAL), actuation or hydraulic(36, pedal(force)),
                 disc(85, 130, 10, "gray_cast_iron_250", cooling=cooling))
    return {"brake": made, "count": count, "axle": "rear", "control": "pedal", **more}


def stop(speed, unit="km/h", require=None, delays=(0.5, 0.1, 0.3), **more):
    names = ("reaction_time", "dead_time", "build_up_time")
    response = {name: q(value, "s") for name, value in zip(names, delays) if value}
    duty = {"kind": "stop", "initial_speed": q(speed, unit), **({"response": response} if response else {}), **more}
    return duty | ({"require": require} if require else {})


def repeated(speed, interval, count=None, final=None, require=None, delays=(0.3, 0.1, 0.25), **more):
    duty = stop(speed, require=require, delays=delays, **more) | {"kind": "repeated_stops", "interval": q(interval, "s")}
    if count:
        duty["stop_count"] = count
    if final:
        duty["final_speed"] = q(final, "km/h")
    return duty


def descent(speed, grade, distance, **more):
    return {"kind": "descent", "speed": q(speed, "km/h"), "grade": q(grade, "%"), "distance": q(distance, "km"), **more}


def hold(grade=None, factor=None, **more):
    duty = {"kind": "hold", **more}
    if grade is not None:
        duty["grade"] = q(grade, "%")
    if factor:
        duty["require"] = {"min_holding_factor": factor}
    return duty


def request(machine, fitted, duties, **more):
    return {"ref": INVENTED, "machine": machine, "fitted": fitted, "duties": duties, **more}


REQUIRE = {"max_distance": q(90, "m"), "max_time": q(6, "s"), "min_mean_deceleration": q(4.5, "m/s2"),
           "min_mean_fully_developed_deceleration": q(5, "m/s2"), "min_peak_deceleration": q(5, "m/s2"),
           "max_deceleration": q(11, "m/s2"), "min_braking_ratio": 0.45}
AXLES = {"no_wheel_lock": True, "front_locks_first": True, "no_rear_wheel_lift": True}


# --- vehicles ----------------------------------------------------------------------------------------


def vehicles():
    yield "two axles, all demands", request(car(), [front(), rear()], [stop(100, require=REQUIRE | AXLES), hold(18)])
    yield "downhill, uphill and against drag", request(
        car(rotating_mass_factor=1.05, rolling_resistance=0.012, drag_area=q(0.7, "m2")), [front(), rear()],
        [stop(110, grade=q(-8, "%"), require=REQUIRE), stop(80, grade=q(6, "%"), require=REQUIRE), stop(130, final_speed=q(40, "km/h"), require={"max_time": q(9, "s")})])
    yield "on a slippery road the tires limit", request(
        car(0.3, rotating_mass_factor=1.04), [front(), rear()],
        [stop(60, require={"max_distance": q(80, "m"), "no_wheel_lock": True, "min_braking_ratio": 0.2}), hold(12), hold(-12)])
    yield "no adhesion given", request(car(None), [front(), rear()], [stop(80, require=REQUIRE | AXLES), hold(10)])
    yield "no geometry given", request(car(0.7, None), [front(), rear()], [stop(80, require=REQUIRE | AXLES), hold(10)])
    everywhere = front(count=4)
    everywhere["axle"] = "all"
    yield "brakes on all wheels without geometry", request(
        car(0.6, None), [everywhere], [stop(80, require=REQUIRE | {"no_wheel_lock": True}), hold(-15, 1.2)])
    yield "brakes on all wheels with geometry", request(
        car(0.75, rolling_resistance=0.015), [everywhere], [stop(90, require=REQUIRE | AXLES), hold(15)])
    parking = {"brake": brake(sector(95, 128, 45), lining(), {"kind": "cable", "lever_ratio": 6, "cable_efficiency": 0.8, "caliper_ratio": 9, "caliper_efficiency": 0.85,
               "operator_force": q(300, "N"), "max_operator_force": q(400, "N")}), "count": 2, "axle": "rear"}
    yield "a parking brake holds, a circuit fails", request(
        car(0.8), [front(), rear(), parking],
        [stop(100, uses=[{"fitted_index": 0, "count": 2}, {"fitted_index": 1, "count": 2}], require=REQUIRE),
         hold(20, 1.5, uses=[{"fitted_index": 2, "count": 2}]), hold(-16, uses=[{"fitted_index": 2, "count": 1}]),
         stop(70, name="front circuit only", uses=[{"fitted_index": 0, "count": 2}], require={"min_mean_deceleration": q(2.44, "m/s2")}),
         stop(70, name="one front, one rear", uses=[{"fitted_index": 0, "count": 1}, {"fitted_index": 1, "count": 1}], require={"max_distance": q(95, "m")})])
    yield "a gentle stop that the driver holds", request(
        car(0.8, rotating_mass_factor=1.03), [front(400), rear(400)], [stop(70, deceleration=q(2.5, "m/s2"), require=REQUIRE | AXLES)])
    yield "a gentle stop that the brake cannot reach", request(
        car(0.8), [front(90), rear(90)], [stop(70, deceleration=q(9, "m/s2"), require={"min_peak_deceleration": q(3, "m/s2")})])
    yield "a short tall vehicle lifts its rear", request(
        car(1.0, (1.2, 0.9, 0.55), 280), [front(70, count=1), rear(15, count=1) | {"control": "foot"}], [stop(30, require={"no_rear_wheel_lift": True, "max_distance": q(12, "m")})])
    yield "different linings on the axles", request(
        car(0.8), [front(given=lining(friction={"low": 0.28, "nominal": 0.35, "high": 0.46})), rear(given=lining(friction={"low": 0.36, "nominal": 0.4, "high": 0.42}))],
        [stop(100, require=AXLES | {"max_deceleration": q(9, "m/s2")})])
    yield "friction of a single value", request(
        car(0.9), [front(given=lining(friction={"nominal": 0.36})), rear(given=lining(friction={"nominal": 0.36}))], [stop(90, require=REQUIRE | AXLES), hold(12)])
    yield "too weak downhill", request(car(0.8), [front(8), rear(8)], [hold(-9), stop(40, grade=q(-20, "%"))])
    yield "a tight bound for near limits and another ambient", request(
        car(0.8), [front(), rear()], [stop(100, require=REQUIRE, start_temperature=q(120, "degC"))], ambient_temperature=q(38, "degC"), near_limit_from=0.5)
    yield "a held deceleration against drag", request(
        car(0.8, drag_area=q(2.5, "m2"), rolling_resistance=0.012), [front(400), rear(400)], [stop(110, deceleration=q(2.5, "m/s2"), delays=(0.5, 0.1, 0), require=REQUIRE)])
    yield "a waiver with reason, one without effect", request(
        car(0.8), [front(given=lining(max_rubbing_speed=None)), rear()], [stop(90, require={"max_distance": q(100, "m"), "min_pad_life_stops": 20000})],
        waive=[{"check": "rubbing_speed", "fitted_index": 0, "reason": "invented: seen in a test"}, {"check": "pad_life", "duty_index": 0, "reason": "invented: a race car"},
               {"check": "stopping_distance", "reason": "invented: without effect"}])
    yield "units of the United States", request(
        {"kind": "vehicle", "mass": q(3300, "lb"), "rolling_radius": q(12.2, "in"), "adhesion": 0.7,
         "geometry": {"wheelbase": q(8.5, "ft"), "center_of_gravity_height": q(21, "in"), "front_axle_to_center_of_gravity": q(3.8, "ft")}},
        [front(), rear()], [stop(60, "mph", require={"max_distance": q(230, "ft"), "max_deceleration": q(25, "ft/s2")}), hold(9)])


# --- other machines -----------------------------------------------------------------------------------


def hoist(**more):
    return {"kind": "hoist", "load_mass": q(5000, "kg"), "drum_radius": q(0.25, "m"), "falls": 2, "gear_ratio": 24.5, "inertia": q(0.9, "kg.m2"), **more}


def crane_brake(force=6500, given=None, actuation=None, cooling=20, **more):
    return brake(sector(130, 190, 40, 8), given or lining(**THERMAL), actuation or spring(force, 120, 2, release_travel=q(1, "mm"), release_piston_diameter=q(60, "mm"), max_release_pressure=q(6, "MPa")),
                 disc(110, 195, 20, "carbon_steel", cooling=cooling), **more)


def machines():
    shaft = {"kind": "shaft", "inertia": q(40, "kg.m2"), "driving_torque": q(120, "N.m")}
    spindle = {"brake": brake(sector(110, 160, 45, 8), lining(**THERMAL), clamp(2600), disc(95, 165, 16, cooling="rotating_disc")), "count": 1}
    turning = {"kind": "stop", "initial_rotational_speed": q(1200, "rpm"), "response": {"dead_time": q(0.2, "s"), "build_up_time": q(0.4, "s")}}
    yield "a driven shaft", request(shaft, [spindle], [turning | {"require": {"max_time": q(60, "s")}}, hold(factor=1.5)])
    yield "a shaft with a fast brake, stopped again and again", request(
        shaft, [spindle | {"speed_ratio": 1.8}], [{**turning, "kind": "repeated_stops", "interval": q(300, "s"), "stop_count": 6, "final_rotational_speed": q(100, "rpm"),
        "require": {"min_pad_life_stops": 500}}, hold()])
    yield "a hoist, lowering and raising", request(
        hoist(efficiency=0.92), [{"brake": crane_brake(), "count": 1}],
        [stop(0.4, "m/s", direction="lowering", delays=(0, 0.15, 0.25), require={"max_distance": q(0.5, "m"), "max_time": q(2, "s"), "max_deceleration": q(5, "m/s2"), "min_mean_deceleration": q(0.2, "m/s2")}),
         stop(0.3, "m/s", direction="raising", delays=(0, 0.05, 0.25), require={"max_deceleration": q(12, "m/s2")}), hold(factor=1.25)])
    yield "a hoist with a counterweight", request(
        hoist(counterweight_mass=q(3200, "kg")), [{"brake": crane_brake(2600), "count": 1, "speed_ratio": 1.0}],
        [stop(0.8, "m/s", direction="lowering", delays=(0, 0.2, 0.2)), stop(0.8, "m/s", direction="raising", delays=(0, 0.2, 0.2), require={"max_time": q(3, "s")}), hold(factor=1.5)])
    yield "a hoist too weak to hold", request(hoist(), [{"brake": crane_brake(900), "count": 1}], [hold(factor=1.25)])
    conveyor = {"kind": "conveyor", "material_mass": q(14000, "kg"), "belt_mass": q(5000, "kg"), "resistance": 0.02, "pulley_radius": q(400, "mm"),
                "gear_ratio": 16, "efficiency": 0.94, "inertia": q(3, "kg.m2")}
    belt = {"brake": brake(sector(120, 180, 50, 10), lining(**THERMAL), {"kind": "pneumatic", "chamber_area": q(60, "cm2"), "air_pressure": q(5, "bar"), "max_air_pressure": q(6, "bar"),
            "return_spring_force": q(150, "N"), "force_ratio": 2.2, "efficiency": 0.92}, disc(110, 190, 20, "stainless_steel_austenitic", cooling="rotating_disc")), "count": 1}
    yield "a conveyor uphill", request(conveyor | {"incline": q(8, "deg")}, [belt], [stop(2.5, "m/s", delays=(0, 0.1, 0.5), require={"max_distance": q(4, "m"), "max_deceleration": q(6, "m/s2")}), hold(factor=1.5)])
    yield "a conveyor downhill, held", request(
        conveyor | {"incline": q(-8, "deg")}, [belt],
        [{"kind": "descent", "speed": q(2, "m/s"), "distance": q(300, "m")}, stop(2.5, "m/s", delays=(0, 0.1, 0.5)), hold(factor=1.25)])


# --- actuations and pads ------------------------------------------------------------------------------


def actuations():
    one = lambda actuation, given=None, pad=None, **more: {"brake": brake(pad or sector(95, 140, 55, 10), given or lining(), actuation, disc(80, 142, 24, mass=6.5), **more), "count": 2, "axle": "front"}
    duties = [stop(60, require={"max_deceleration": q(9, "m/s2")}), hold(8)]
    yield "line pressure given", request(car(), [one(hydraulic(54, line_pressure=q(60, "bar"), max_line_pressure=q(90, "bar")))], duties)
    yield "only the highest line pressure given", request(car(), [one(hydraulic(54, max_line_pressure=q(60, "bar")))], duties)
    yield "line pressure and what the operator needs for it", request(
        car(), [one(hydraulic(54, pedal(max_operator_force=q(500, "N"), max_stroke=q(120, "mm")), line_pressure=q(50, "bar"), running_clearance=q(0.2, "mm"), compliance=q(400, "mm3/MPa")))], duties)
    shared = hydraulic(54, pedal(260, max_operator_force=q(300, "N"), max_stroke=q(150, "mm")), running_clearance=q(0.15, "mm"), compliance=q(300, "mm3/MPa"), max_line_pressure=q(8, "MPa"))
    behind = hydraulic(36, pedal(260), running_clearance=q(0.15, "mm"), compliance=q(200, "mm3/MPa"))
    yield "one pedal on two axles", request(car(), [front(actuation=shared, operator_share=0.6), rear(actuation=behind, operator_share=0.4)], [stop(80, require=REQUIRE), hold(10)])
    yield "a pedal held to a deceleration", request(
        car(), [front(actuation=shared), rear(actuation=behind)], [stop(80, deceleration=q(3, "m/s2"))])
    unknown = hydraulic(36, pedal(260))
    yield "a pedal whose stroke depends on an unknown volume", request(car(), [front(actuation=shared), rear(actuation=unknown)], [stop(80)])
    cable = {"kind": "cable", "lever_ratio": 5, "cable_efficiency": 0.8, "caliper_ratio": 8, "caliper_efficiency": 0.9}
    yield "only the highest hand force given", request(car(), [one(cable | {"max_operator_force": q(250, "N")})], duties)
    yield "air with its spring", request(car(), [one({"kind": "pneumatic", "chamber_area": q(40, "cm2"), "max_air_pressure": q(8, "bar"), "force_ratio": 4, "efficiency": 0.9})], duties)
    yield "springs without wear", request(car(), [one(spring(9000))], duties)
    yield "springs, worn and released", request(
        car(), [one(spring(9000, 400, 3, release_travel=q(1.5, "mm"), release_piston_diameter=q(55, "mm"), max_release_pressure=q(4.5, "MPa")))], duties)
    round_pad = {"shape": "round", "radius": q(26, "mm"), "center_radius": q(112, "mm")}
    yield "round pads", request(car(), [one(clamp(12000), pad=round_pad), one(clamp(9000), pad=round_pad, pressure_distribution="uniform_pressure")], duties)
    drawn = {"shape": "outline", "unit": "mm", "points": [[85, -40], [128, -50], [141, 4], [125, 46], [102, 28], [83, 41]]}
    yield "outlined pads, one face each", request(
        car(), [one(clamp(14000), pad=drawn, faces=1, given=lining(max_pressure_velocity=q(60, "MPa.m/s"), max_power_flux=q(12, "W/mm2"), max_energy_flux=q(20, "J/mm2"))),
                one(clamp(14000), pad=drawn, pressure_distribution="uniform_pressure")], duties)
    yield "a published lining and a friction code", request(
        car(), [one(clamp(9000), given={"id": "sintered_metal_dry"}), one(clamp(9000), given={"friction_code": "FF", "max_pressure": q(5, "MPa"), "max_rubbing_speed": q(30, "m/s"),
                "max_temperature_continuous": q(300, "degC"), "max_temperature_peak": q(500, "degC")})], duties)


# --- heat ----------------------------------------------------------------------------------------------


def heat():
    fading = lambda maker, points=FADE, **more: maker(given=lining(**THERMAL, **points, specific_wear=q(120, "mm3/MJ"), max_power_flux=q(15, "W/mm2"), max_energy_flux=q(40, "J/mm2")), **more)
    after = [stop(100, require=REQUIRE), hold(20, 1.5)]
    yield "repeated stops, then hot", request(car(0.8), [fading(front), fading(rear)], [repeated(100, 60, 12, require={"min_pad_life_stops": 5000}), *after])
    yield "repeated stops until steady", request(car(0.8), [fading(front), fading(rear)], [repeated(80, 90, final=20), *after])
    yield "friction that rises when hot", request(car(0.9), [fading(front, RISING), fading(rear, RISING)], [repeated(90, 60, 10), stop(100, require=REQUIRE), hold(20)])
    yield "repeated stops, then a held stop when hot", request(
        car(0.8), [fading(front, force=500), fading(rear, force=500)], [repeated(100, 60, 6), stop(100, deceleration=q(3, "m/s2"), require={"max_distance": q(200, "m")})])
    yield "a long descent, then hot", request(car(0.8, rolling_resistance=0.012, drag_area=q(0.7, "m2")), [fading(front), fading(rear)], [descent(40, -7, 6), *after])
    yield "a descent between other duties", request(car(0.8), [front(), rear()], [stop(60), descent(30, -10, 2, start_temperature=q(80, "degC"), name="steep"), hold(10)])
    yield "a descent that drag holds alone", request(car(0.8, drag_area=q(3, "m2"), rolling_resistance=0.02), [front(), rear()], [descent(80, -1, 2)])
    # In a cycle the service couples friction to temperature; duty.json checks that. Here the linings do not fade.
    yield "a published test cycle", request(car(0.8), [front(), rear()], [{"kind": "procedure", "id": "eu_type_1_m1", "max_speed": q(170, "km/h")}, *after])
    yield "another published test cycle", request(car(0.8), [front(), rear()], [{"kind": "procedure", "id": "eu_type_1_m3_n2_n3", "max_speed": q(70, "km/h")}, hold(15)])
    yield "a published descent", request(car(0.8), [front(), rear()], [{"kind": "procedure", "id": "un_type_2"}, *after])
    yield "no disc, no limits of temperature", request(
        car(0.8), [{"brake": brake(sector(95, 140, 55), {"friction": {"nominal": 0.4}}, clamp(9000)), "count": 2, "axle": "front"}], [stop(60)])
    yield "the disc limits, two brakes on it", request(
        {"kind": "shaft", "inertia": q(120, "kg.m2")},
        [{"brake": brake(sector(110, 160, 45, 8), lining(**THERMAL, max_temperature_continuous=q(600, "degC")), clamp(2600),
          disc(95, 165, 16, "aluminum_composite")), "count": 2, "brakes_per_disc": 2}],
        [{"kind": "stop", "initial_rotational_speed": q(1500, "rpm"), "response": {"build_up_time": q(0.3, "s")}}])
    yield "a limit below ambient", request(
        car(0.8), [front(given=lining(max_temperature_continuous=q(30, "degC"))), rear()], [stop(60)], ambient_temperature=q(35, "degC"))
    yield "a hoist that lowers again and again", request(
        hoist(), [{"brake": crane_brake(given=lining(**THERMAL, **FADE), cooling="rotating_disc"), "count": 1}],
        [repeated(1, 20, 30, direction="lowering") | {"initial_speed": q(0.4, "m/s")},
         {"kind": "descent", "direction": "lowering", "speed": q(0.3, "m/s"), "distance": q(20, "m")},
         stop(0.4, "m/s", direction="lowering", delays=(0, 0.15, 0.25)), hold(factor=1.25)])


# --- each check inside, outside, missing -----------------------------------------------------------------

FULL = {"min_mean_deceleration": q(0.1, "m/s2"), "min_mean_fully_developed_deceleration": q(0.1, "m/s2"), "min_peak_deceleration": q(0.1, "m/s2"),
        "max_deceleration": q(30, "m/s2"), "max_distance": q(900, "m"), "max_time": q(90, "s"), "min_braking_ratio": 0.01,
        "min_pad_life_stops": 1, "no_wheel_lock": True, "front_locks_first": True, "no_rear_wheel_lift": True}


def base():
    master = pedal(260, max_operator_force=q(1000, "N"), max_stroke=q(500, "mm"))
    act = hydraulic(54, master, running_clearance=q(0.15, "mm"), compliance=q(300, "mm3/MPa"), max_line_pressure=q(50, "MPa"))
    given = lining(**THERMAL, max_pressure=q(50, "MPa"), max_rubbing_speed=q(90, "m/s"), max_pressure_velocity=q(900, "MPa.m/s"), max_power_flux=q(90, "W/mm2"),
                   max_energy_flux=q(900, "J/mm2"), specific_wear=q(100, "mm3/MJ"))
    behind = hydraulic(24, pedal(260), running_clearance=q(0.15, "mm"), compliance=q(200, "mm3/MPa"))
    return request(car(0.95), [front(actuation=act, given=given), rear(actuation=behind, given=lining(**THERMAL, specific_wear=q(100, "mm3/MJ")))], [stop(100, require=dict(FULL)), hold(18, 0.1)])


def air_base():
    given = base()
    given["fitted"][0]["brake"]["actuation"] = {"kind": "pneumatic", "chamber_area": q(40, "cm2"), "air_pressure": q(6, "bar"), "max_air_pressure": q(8, "bar"), "force_ratio": 4, "efficiency": 0.9}
    return given


def spring_base():
    return request(hoist(), [{"brake": crane_brake(), "count": 1}], [hold(factor=0.5)])


def at(document, path, value=None, remove=False):
    *way, last = [int(part) if part.isdigit() else part for part in path.strip("/").split("/")]
    for part in way:
        document = document[part]
    if remove:
        del document[last]
    else:
        document[last] = value


FRONT, LINED = "/fitted/0/brake", "/fitted/0/brake/lining"
REQ = "/duties/0/require"
# code: (base, pointer of the limit, unit and SI size of it, what a missing input removes)
LIMITED = {
    "stopping_distance": (base, f"{REQ}/max_distance", ("m", 1), "/machine/adhesion"),
    "stopping_time": (base, f"{REQ}/max_time", ("s", 1), "/machine/adhesion"),
    "mean_deceleration": (base, f"{REQ}/min_mean_deceleration", ("m/s2", 1), "/machine/geometry"),
    "mean_fully_developed_deceleration": (base, f"{REQ}/min_mean_fully_developed_deceleration", ("m/s2", 1), "/machine/adhesion"),
    "peak_deceleration_minimum": (base, f"{REQ}/min_peak_deceleration", ("m/s2", 1), "/machine/geometry"),
    "peak_deceleration": (base, f"{REQ}/max_deceleration", ("m/s2", 1), None),
    "braking_ratio": (base, f"{REQ}/min_braking_ratio", (None, 1), "/machine/adhesion"),
    "pad_peak_pressure": (base, f"{LINED}/max_pressure", ("MPa", 1e6), f"{LINED}/max_pressure"),
    "rubbing_speed": (base, f"{LINED}/max_rubbing_speed", ("m/s", 1), f"{LINED}/max_rubbing_speed"),
    "pressure_velocity": (base, f"{LINED}/max_pressure_velocity", ("MPa.m/s", 1e6), f"{LINED}/max_pressure_velocity"),
    "power_flux": (base, f"{LINED}/max_power_flux", ("W/mm2", 1e6), f"{LINED}/max_power_flux"),
    "energy_flux": (base, f"{LINED}/max_energy_flux", ("J/mm2", 1e6), f"{LINED}/max_energy_flux"),
    "line_pressure": (base, f"{FRONT}/actuation/max_line_pressure", ("MPa", 1e6), f"{FRONT}/actuation/max_line_pressure"),
    "operator_force": (base, f"{FRONT}/actuation/master_cylinder/max_operator_force", ("N", 1), f"{FRONT}/actuation/master_cylinder/max_operator_force"),
    "operator_stroke": (base, f"{FRONT}/actuation/master_cylinder/max_stroke", ("mm", 1e-3), (f"{FRONT}/actuation/running_clearance", f"{FRONT}/actuation/compliance")),
    "release_pressure": (spring_base, f"{FRONT}/actuation/max_release_pressure", ("MPa", 1e6), f"{FRONT}/actuation/release_piston_diameter"),
    "air_pressure": (air_base, f"{FRONT}/actuation/max_air_pressure", ("MPa", 1e6), f"{FRONT}/actuation/max_air_pressure"),
    "disc_bulk_temperature": (base, f"{LINED}/max_temperature_continuous", ("degC", 1), f"{LINED}/max_temperature_continuous"),
    "surface_temperature": (base, f"{LINED}/max_temperature_peak", ("degC", 1), f"{FRONT}/disc"),
    "holding_torque": (base, "/duties/1/require/min_holding_factor", (None, 1), None),
    "pad_life": (base, f"{REQ}/min_pad_life_stops", (None, 1), f"{LINED}/specific_wear"),
}


def find(given, code, duty):
    found = [c for c in SpecCheck(given).run()["checks"] if c["code"] == code and c["duty_index"] == duty and c.get("fitted_index", 0) == 0]
    return found[0]


def limits():
    for code, (maker, pointer, (unit, size), missing) in LIMITED.items():
        duty = 1 if code == "holding_torque" else 0
        found = find(maker(), code, duty)
        ambient = 20.0
        for word, used in (("inside", 0.999), ("outside", 1.001)):
            least = "/min_" in pointer
            if "temperature" in code:
                limit = ambient + (found["actual"] - ambient) / used
            else:
                limit = found["actual"] * used if least else found["actual"] / used
            if code == "pad_life":
                limit = int(limit) if used < 1 else int(limit) + 1
            given = maker()
            at(given, pointer, limit if unit is None else q(float(f"{limit / size:.12g}"), unit))
            yield f"{code}, {word}", given
        if missing:
            given = maker()
            for path in [missing] if isinstance(missing, str) else missing:
                at(given, path, remove=True)
            yield f"{code}, missing", given
    yield from searched()


def searched():
    """Checks whose limit follows from the physics: an input is moved until the utilization is just inside or outside."""
    from scipy.optimize import brentq

    def grip(value):
        given = base()
        given["machine"]["adhesion"] = value
        return given

    def tall(value):
        given = base()
        given["machine"]["geometry"]["center_of_gravity_height"] = q(value, "m")
        given["machine"]["adhesion"] = 1.6
        # The front brakes alone: a rear wheel about to lift could not brake anyway.
        given["duties"][0]["uses"] = [{"fitted_index": 0, "count": 2}]
        del given["duties"][0]["require"]["front_locks_first"]
        for entry in given["fitted"]:
            entry["brake"]["actuation"]["master_cylinder"]["operator_force"] = q(600, "N")
        return given

    def steep(value):
        given = base()
        given["duties"][1]["grade"] = q(value, "%")
        return given

    def downhill(value):
        given = base()
        for entry in given["fitted"]:
            entry["brake"]["actuation"]["master_cylinder"]["operator_force"] = q(value, "N")
            del entry["brake"]["disc"]  # a stop that hardly ends would melt any
        given["duties"] = [stop(60, grade=q(-10, "%"), delays=(0, 0, 0.3)), hold(-10)]
        return given

    def balance(value):
        given = base()
        given["fitted"][1]["brake"]["actuation"]["piston_diameter"] = q(value, "mm")
        return given

    for code, maker, low, high, missing in (
            ("adhesion", grip, 0.3, 1.5, "/machine/adhesion"), ("rear_wheel_lift", tall, 0.3, 2.2, "/machine/geometry"),
            ("holding_adhesion", steep, 5, 95, "/machine/adhesion"), ("axle_lock_order", balance, 15, 60, "/machine/adhesion"),
            ("stops", downhill, 20, 120, None)):
        duty = 1 if code.startswith("holding") else 0
        for word, used in (("inside", 0.999), ("outside", 1.001)):
            value = brentq(lambda x: find(maker(x), code, duty)["utilization"] - used, low, high, xtol=1e-7)
            given = maker(float(f"{value:.7g}"))
            yield f"{code}, {word}", given
        if missing:
            given = base()
            at(given, missing, remove=True)
            yield f"{code}, missing", given


def main():
    folder = HERE / "spec_check"
    folder.mkdir(exist_ok=True)
    wanted = sys.argv[1:]
    for group in (vehicles, machines, actuations, heat, limits):
        if wanted and group.__name__ not in wanted:
            continue
        cases = [{"name": name, "request": copy.deepcopy(given)} for name, given in group()]
        lines = ",\n".join(json.dumps(case) for case in cases)
        (folder / f"{group.__name__}.json").write_text(f'{{"note": "all data invented", "cases": [\n{lines}\n]}}\n')


if __name__ == "__main__":
    main()
