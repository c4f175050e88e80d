"""Writes stops.json: stops of all machines by numerical integration (braking.py), for varied requests.

Requests are drawn with a fixed seed; all numbers in them are invented. Expected values are SI.
Needs numpy and scipy. Run: python tests/reference/stops.py > tests/reference/stops.json
"""

import json
import math
import random

from scipy.optimize import brentq

from braking import G, System, follow, highest, run_back

RANDOM = random.Random(20260117)


def between(low, high, digits=4):
    return float(f"{RANDOM.uniform(low, high):.{digits}g}")


def measure(value, unit):
    return {"value": value, "unit": unit}


def value(request, name, default=0.0):
    return request[name]["value"] if name in request else default


# --- from a request to a system ---------------------------------------------------------------

def shaft_per_way(machine):
    if machine["kind"] == "hoist":
        return machine.get("gear_ratio", 1.0) * machine.get("falls", 1.0) / value(machine, "drum_radius")
    return machine.get("gear_ratio", 1.0) / value(machine, "pulley_radius")


def with_losses(force, efficiency):
    return force * efficiency if force > 0 else force / efficiency


def system_of(request):
    machine, kind = request["machine"], request["machine"]["kind"]
    mass_free = {"mass": 0.0, "translating": 0.0}
    if kind == "vehicle":
        mass, slope = value(machine, "mass"), math.atan(value(request, "grade") / 100.0)
        normal = mass * G * math.cos(slope)
        base = machine.get("geometry")
        built = dict(
            mass=mass, translating=mass, rotating=machine.get("rotating_mass_factor", 1.0) - 1.0,
            outside=value(request, "drive_force") - mass * G * math.sin(slope),
            resistance=machine.get("rolling_resistance", 0.0) * normal,
            drag=0.5 * value(machine, "air_density", 1.225) * value(machine, "drag_area"),
            normal=normal, adhesion=machine.get("adhesion"),
            geometry=base and (value(base, "wheelbase"), value(base, "center_of_gravity_height"),
                               value(base, "front_axle_to_center_of_gravity")),
        )
    elif kind == "shaft":
        built = mass_free | dict(mass=value(machine, "inertia"), outside=value(machine, "driving_torque"))
    elif kind == "hoist":
        per = shaft_per_way(machine)
        load, counter = value(machine, "load_mass"), value(machine, "counterweight_mass")
        down = 1.0 if request["direction"] == "lowering" else -1.0
        built = dict(mass=load + counter + value(machine, "inertia") * per**2, translating=load + counter,
                     outside=with_losses(down * (load - counter) * G, machine.get("efficiency", 1.0)))
    else:
        per, slope = shaft_per_way(machine), math.radians(value(machine, "incline"))
        load, belt = value(machine, "material_mass"), value(machine, "belt_mass")
        built = dict(mass=load + belt + value(machine, "inertia") * per**2, translating=load + belt,
                     outside=with_losses(-load * G * math.sin(slope), machine.get("efficiency", 1.0)),
                     resistance=machine.get("resistance", 0.0) * G * (load * math.cos(slope) + belt))
    forces = [entry_forces(machine, entry) for entry in request["fitted"]]
    return System(demand=tuple(sum(f[i] for f in forces) for i in (0, 1)), **built), forces


def entry_forces(machine, entry):
    kind = machine["kind"]
    if kind == "vehicle":
        per = 1.0 / value(entry, "rolling_radius", value(machine, "rolling_radius"))
    elif kind == "shaft":
        per = 1.0
    else:
        per = shaft_per_way(machine)
    force = value(entry, "torque") * entry.get("count", 1) * entry.get("speed_ratio", 1.0) * per
    if "geometry" not in machine or entry["axle"] == "front":
        return (force, 0.0)
    return (0.0, force) if entry["axle"] == "rear" else (force / 2, force / 2)


# --- expected values ----------------------------------------------------------------------------

def expected(request):
    system, forces = system_of(request)
    turns = request["machine"]["kind"] == "shaft"
    v0 = value(request, "initial_rotational_speed" if turns else "initial_speed")
    v1 = value(request, "final_rotational_speed" if turns else "final_speed")
    response = request.get("response", {})
    reaction, dead, build_up = (value(response, n) for n in ("reaction_time", "dead_time", "build_up_time"))
    wanted = value(request, "angular_deceleration" if turns else "deceleration", None)
    stop = follow(system, v0, v1, reaction, dead, build_up, wanted)
    if not stop["reached"]:
        answer = {"reaches_final_speed": False}
        if system.drag > 0:
            net = lambda v: system.balance(stop["fraction"], v)[0]
            answer["tending_speed"] = brentq(net, v1, 1e4, xtol=1e-12, rtol=1e-14)
        return answer
    begin_time, begin_speed, begin_way = stop["begin"]
    answer = {
        "reaches_final_speed": True, "total_time": stop["time"], "total_distance": stop["way"],
        "braking_time": stop["time"] - begin_time, "braking_distance": stop["way"] - begin_way,
        "kinetic": 0.5 * system.inertia * (begin_speed**2 - v1**2),
        "kinetic_translation": 0.5 * system.translating * (begin_speed**2 - v1**2),
        "grade_or_load": system.outside * (stop["way"] - begin_way),
        "resistance": stop["resistance_work"], "brake_energy": sum(stop["work"]),
    }
    if stop["legs"] and answer["braking_distance"] > 0:
        answer["mean_deceleration"] = (begin_speed**2 - v1**2) / (2 * answer["braking_distance"])
    closure = answer["kinetic"] + answer["grade_or_load"] - answer["resistance"] - answer["brake_energy"]
    assert abs(closure) < 1e-8 * (answer["kinetic"] + abs(answer["grade_or_load"]) + 1), closure
    if not turns and v1 <= 0.1 * v0 and "high" in stop["marks"]:
        way = stop["marks"]["low"] - stop["marks"]["high"]
        answer["mean_fully_developed_deceleration"] = ((0.8 * v0) ** 2 - (0.1 * v0) ** 2) / (2 * way)
    if stop["legs"]:
        peak, (_, ground, _, normals, _) = highest(stop, lambda s: s[0])
        answer["peak_deceleration"] = peak
        if system.geometry:
            answer["axles"] = [{"brake_force": g, "normal_force": n} for g, n in zip(ground, normals)]
        entries = []
        for force, entry in zip(forces, request["fitted"]):
            share = [f / d / entry.get("count", 1) if d else 0.0 for f, d in zip(force, system.demand)]
            power = highest(stop, lambda s, share=share: sum(b * x for b, x in zip(s[2], share)) * s[4])[0]
            entries.append({"energy": sum(w * x for w, x in zip(stop["work"], share)), "peak_power": power})
        answer["fitted"] = entries
    if v1 == 0 and system.adhesion is None:
        back = run_back(stop, stop["time"] - reaction - dead, build_up)
        if back is not None:
            answer["runs_back"] = True
            if back:
                answer["run_back"] = back
    return answer


# --- requests -----------------------------------------------------------------------------------

def delays(dead=True):
    response = {}
    if RANDOM.random() < 0.5:
        response["reaction_time"] = measure(between(0.3, 2.5, 3), "s")
    if dead and RANDOM.random() < 0.6:
        response["dead_time"] = measure(between(0.02, 0.4, 3), "s")
    if RANDOM.random() < 0.8:
        response["build_up_time"] = measure(between(0.05, 0.8, 3), "s")
    return {"response": response} if response else {}


def car(adhesion=False, geometry=False, drag=False, tall=False):
    mass = between(60, 300) if tall else between(300, 30000)
    machine = {"kind": "vehicle", "mass": measure(mass, "kg"), "rolling_radius": measure(between(0.2, 0.55), "m"),
               "rotating_mass_factor": between(1.0, 1.12), "rolling_resistance": between(0.0, 0.03)}
    if drag:
        machine["drag_area"] = measure(between(0.3, 7.0), "m2")
        machine["air_density"] = measure(between(1.0, 1.3), "kg/m3")
    if adhesion:
        machine["adhesion"] = between(0.15, 1.0)
    base = between(0.9, 1.3) if tall else between(1.8, 6.0)
    if geometry:
        machine["geometry"] = {
            "wheelbase": measure(base, "m"),
            "center_of_gravity_height": measure(base * between(0.6, 1.1) if tall else base * between(0.15, 0.35), "m"),
            "front_axle_to_center_of_gravity": measure(base * between(0.4, 0.6), "m")}
    return machine


def brakes(machine, strength, places=("front", "rear")):
    """Entries whose forces add up to `strength` times the weight."""
    weight = value(machine, "mass") * G
    parts = [RANDOM.uniform(0.3, 1.0) for _ in places]
    entries = []
    for place, part in zip(places, parts):
        entry = {"axle": place, "count": RANDOM.choice([1, 2, 4])}
        if RANDOM.random() < 0.3:
            entry["speed_ratio"] = between(0.5, 4.0)
        if RANDOM.random() < 0.3:
            entry["rolling_radius"] = measure(between(0.2, 0.5), "m")
        radius = value(entry, "rolling_radius", value(machine, "rolling_radius"))
        force = strength * weight * part / sum(parts)
        torque = force * radius / entry["count"] / entry.get("speed_ratio", 1.0)
        entry["torque"] = measure(float(f"{torque:.5g}"), "N.m")
        entries.append(entry)
    return entries


def vehicle(strength, places=("front", "rear"), grade=None, speed=None, final=None, **kind):
    machine = car(**kind)
    request = {"machine": machine, "fitted": brakes(machine, strength, places),
               "initial_speed": measure(speed or between(3, 50), "m/s"), **delays()}
    if grade is not None:
        request["grade"] = measure(grade, "%")
    if final:
        request["final_speed"] = measure(float(f"{request['initial_speed']['value'] * final:.4g}"), "m/s")
    return request


def shaft(drive, strength, final=None):
    inertia, speed = between(0.05, 200), between(20, 400)
    torque = inertia * between(2, 60)
    request = {"machine": {"kind": "shaft", "inertia": measure(inertia, "kg.m2"),
                           "driving_torque": measure(float(f"{drive * torque:.4g}"), "N.m")},
               "fitted": [{"torque": measure(float(f"{strength * torque / 2:.5g}"), "N.m"), "count": 2,
                           "speed_ratio": between(0.5, 3)}],
               "initial_rotational_speed": measure(speed, "rad/s"), **delays()}
    request["fitted"][0]["torque"]["value"] /= request["fitted"][0]["speed_ratio"]
    if final:
        request["final_rotational_speed"] = measure(float(f"{speed * final:.4g}"), "rad/s")
    return request


def hoist(direction, strength, efficiency=True, counterweight=False, dead=None):
    load = between(200, 20000)
    machine = {"kind": "hoist", "load_mass": measure(load, "kg"), "drum_radius": measure(between(0.1, 0.6), "m"),
               "falls": RANDOM.choice([1, 2, 4]), "gear_ratio": between(8, 60), "inertia": measure(between(0.05, 6), "kg.m2")}
    if efficiency:
        machine["efficiency"] = between(0.8, 1.0)
    if counterweight:
        machine["counterweight_mass"] = measure(float(f"{load * RANDOM.uniform(0.3, 0.8):.4g}"), "kg")
    needed = (load - value(machine, "counterweight_mass")) * G / shaft_per_way(machine)
    request = {"machine": machine, "fitted": [{"torque": measure(float(f"{strength * needed / 2:.5g}"), "N.m"), "count": 2}],
               "direction": direction, "initial_speed": measure(between(0.1, 2.0), "m/s"), **delays()}
    if dead:
        request.setdefault("response", {})["dead_time"] = measure(dead, "s")
    return request


def conveyor(incline, strength):
    load = between(500, 40000)
    machine = {"kind": "conveyor", "material_mass": measure(load, "kg"), "belt_mass": measure(between(300, 20000), "kg"),
               "incline": measure(incline, "deg"), "resistance": between(0.01, 0.04), "pulley_radius": measure(between(0.2, 0.7), "m"),
               "gear_ratio": between(6, 30), "efficiency": between(0.85, 1.0), "inertia": measure(between(0.1, 10), "kg.m2")}
    needed = load * G * 0.25 / shaft_per_way(machine)
    return {"machine": machine, "fitted": [{"torque": measure(float(f"{strength * needed:.5g}"), "N.m")}],
            "initial_speed": measure(between(0.5, 5), "m/s"), **delays()}


def modulated(wanted, **kind):
    request = vehicle(0.9, **kind)
    if kind.get("drag"):
        # With air resistance the answer to what a held deceleration builds up to is a convention: none here.
        request.get("response", {}).pop("build_up_time", None)
    return request | {"deceleration": measure(wanted, "m/s2")}


def requests():
    yield from (("plain", vehicle(between(0.2, 0.9))) for _ in range(4))
    yield from (("grade", vehicle(between(0.4, 0.9), grade=between(-15, 15))) for _ in range(5))
    yield from (("drag", vehicle(between(0.1, 0.9), drag=True, grade=between(-5, 8))) for _ in range(6))
    yield from (("drag to a speed", vehicle(between(0.3, 0.8), drag=True, final=0.4)) for _ in range(2))
    yield from (("adhesion without axle loads", vehicle(between(0.3, 1.4), adhesion=True, places=("all",), grade=g))
                for g in (None, -6.0, 4.0, None))
    yield from (("adhesion with axle loads", vehicle(between(0.3, 1.6), adhesion=True, geometry=True, grade=g))
                for g in (None, None, -8.0, -3.5, 5.0, 10.0, None, None))
    yield from (("adhesion, axle loads and drag", vehicle(between(0.3, 1.4), adhesion=True, geometry=True, drag=True, speed=between(15, 50)))
                for _ in range(4))
    yield from (("front brakes only", vehicle(between(0.4, 1.2), ("front",), adhesion=True, geometry=True)) for _ in range(3))
    yield from (("rear brakes only", vehicle(between(0.4, 1.2), ("rear",), adhesion=True, geometry=True)) for _ in range(2))
    yield from (("brakes on all axles", vehicle(between(0.4, 1.2), ("all", "front"), adhesion=True, geometry=True)) for _ in range(2))
    yield from (("axle loads without adhesion", vehicle(between(0.4, 0.9), geometry=True)) for _ in range(2))
    yield from (("lift without adhesion", vehicle(between(1.0, 2.0), ("front", "rear"), geometry=True, tall=True)) for _ in range(3))
    for adhesion in (1.1, 0.95, 1.15):
        request = vehicle(1.6, ("front", "rear"), adhesion=True, geometry=True, tall=True, grade=-4.0)
        request["machine"]["adhesion"] = adhesion
        yield "lift with adhesion", request
    yield from (("modulated", modulated(between(0.5, 4.0))) for _ in range(4))
    yield from (("modulated with adhesion", modulated(1.2, adhesion=True, geometry=True)) for _ in range(3))
    yield from (("modulated with drag", modulated(2.5, drag=True)) for _ in range(2))
    yield from (("drive force", vehicle(between(0.4, 0.8)) | {"drive_force": measure(f, "N")}) for f in (300.0, -250.0))
    yield from (("too weak downhill", vehicle(0.06, grade=-9.0, drag=d)) for d in (False, True, True))
    for sign in (1, 1):
        request = vehicle(0.3, grade=between(14, 25), speed=between(1, 3))
        request["response"] = {"dead_time": measure(2.5, "s"), "build_up_time": measure(between(0.1, 0.6), "s")}
        yield "runs back uphill", request
    yield from (("shaft", shaft(0.0, 1.0, f)) for f in (None, None, 0.3))
    yield from (("driven shaft", shaft(d, 1.0)) for d in (0.5, 0.9, -0.4))
    yield "shaft too weak", shaft(1.2, 1.0)
    yield "shaft held", shaft(0.2, 1.5) | {"angular_deceleration": measure(1.5, "rad/s2")}
    yield from (("lowering", hoist("lowering", between(1.2, 3.0), counterweight=c)) for c in (False, False, True, True))
    yield "lowering, too weak", hoist("lowering", 0.5)
    yield from (("raising", hoist("raising", between(1.2, 2.5), counterweight=c)) for c in (False, True))
    yield from (("raising, runs back", hoist("raising", between(1.3, 2.5), efficiency=False, dead=d)) for d in (0.6, 0.9))
    yield "raising, never held", hoist("raising", 0.7, efficiency=False, dead=0.8)
    yield from (("conveyor", conveyor(i, between(0.5, 2.0))) for i in (0.0, 8.0, 12.0, -3.0))
    yield from (("conveyor downhill", conveyor(i, 2.5)) for i in (-10.0, -14.0))


def main():
    cases = []
    for name, request in requests():
        cases.append({"name": f"{len(cases)}: {name}", "request": request, "expected": expected(request)})
    print(json.dumps({"note": "requests invented; see stops.py", "cases": cases}, indent=1))


main()
