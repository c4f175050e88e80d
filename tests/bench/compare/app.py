"""A spec check as a team would write it for itself: FastAPI, pint for the units, numpy for the heat.

It judges a vehicle with hydraulic brakes on both axles, through stops without air drag and holds, and gives the same
checks as the service, worked out in closed form where there is one. It answers less: no warnings, cautions, methods or
lists of defaults, and it finds one fault at a time.

Run: uvicorn app:app
"""

import hashlib
import json
import math
import re
from functools import lru_cache
from typing import Annotated, Literal

import numpy as np
import pint
from fastapi import FastAPI, Request
from pydantic import BaseModel, BeforeValidator, ConfigDict, Field

G = 9.80665
AMBIENT = 20.0  # degC
NEAR = 0.9
CASES = ("low", "nominal", "high")
IRON = {"density": 7200.0, "specific_heat": 490.0, "conductivity": 46.0}
MATERIALS = {"gray_cast_iron": IRON}
MODES = np.arange(1, 51)
TAIL = math.pi**2 / 6 - float(np.sum(1.0 / MODES**2))
GAUSS_AT, GAUSS_WEIGHT = np.polynomial.legendre.leggauss(4)

units = pint.UnitRegistry(autoconvert_offset_to_baseunit=True)


@lru_cache
def unit(symbol):
    spelled = re.sub(r"(?<=[a-zA-Z])(\d)", r"**\1", symbol.replace(".", "*"))
    return units.Unit("percent" if symbol == "%" else spelled)


def in_si(wanted):
    target = units.Unit(wanted)

    def convert(given):
        return units.Quantity(given["value"], unit(given["unit"])).to(target).magnitude

    return Annotated[float, BeforeValidator(convert)]


Length, Area, Angle, Mass, Time = (in_si(u) for u in ("m", "m**2", "rad", "kg", "s"))
Force, Pressure, Speed, Deceleration = (in_si(u) for u in ("N", "Pa", "m/s", "m/s**2"))
PressureVelocity, PowerFlux, EnergyFlux = (in_si(u) for u in ("Pa*m/s", "W/m**2", "J/m**2"))
Temperature, SpecificWear, Grade = (in_si(u) for u in ("degC", "m**3/J", "dimensionless"))


class Model(BaseModel):
    model_config = ConfigDict(extra="forbid")


class Pad(Model):
    shape: Literal["annular_sector"]
    inner_radius: Length
    outer_radius: Length
    angle: Angle
    wear_allowance: Length


class Friction(Model):
    low: float = Field(gt=0)
    nominal: float = Field(gt=0)
    high: float = Field(gt=0)


class Lining(Model):
    friction: Friction
    max_pressure: Pressure
    max_rubbing_speed: Speed
    max_pressure_velocity: PressureVelocity
    max_power_flux: PowerFlux
    max_energy_flux: EnergyFlux
    max_temperature_continuous: Temperature
    max_temperature_peak: Temperature
    specific_wear: SpecificWear


class Master(Model):
    bore: Length
    lever_ratio: float
    efficiency: float
    operator_force: Force
    max_operator_force: Force
    max_stroke: Length


class Actuation(Model):
    kind: Literal["hydraulic"]
    piston_diameter: Length
    efficiency: float
    max_line_pressure: Pressure
    running_clearance: Length
    master_cylinder: Master


class MaterialRef(Model):
    id: Literal["gray_cast_iron"]


class Disc(Model):
    material: MaterialRef
    outer_radius: Length
    inner_radius: Length
    thickness: Length
    construction: Literal["solid"]


class Brake(Model):
    pad: Pad
    lining: Lining
    actuation: Actuation
    disc: Disc


class Fitted(Model):
    brake: Brake
    axle: Literal["front", "rear"]
    count: int = Field(gt=0)
    control: str


class Geometry(Model):
    wheelbase: Length
    center_of_gravity_height: Length
    front_axle_to_center_of_gravity: Length


class Vehicle(Model):
    kind: Literal["vehicle"]
    mass: Mass
    rolling_radius: Length
    rotating_mass_factor: float
    rolling_resistance: float
    drag_area: Area = Field(le=0)
    adhesion: float
    geometry: Geometry


class Response(Model):
    reaction_time: Time
    build_up_time: Time


class StopLimits(Model):
    max_distance: Length
    max_time: Time
    min_mean_deceleration: Deceleration
    min_mean_fully_developed_deceleration: Deceleration
    min_peak_deceleration: Deceleration
    max_deceleration: Deceleration
    min_braking_ratio: float
    min_pad_life_stops: float
    no_wheel_lock: bool
    front_locks_first: bool
    no_rear_wheel_lift: bool


class HoldLimits(Model):
    min_holding_factor: float


class Stop(Model):
    kind: Literal["stop"]
    name: str
    initial_speed: Speed
    response: Response
    require: StopLimits


class Hold(Model):
    kind: Literal["hold"]
    name: str
    grade: Grade
    require: HoldLimits


class SpecCheck(Model):
    ref: str | None = None
    machine: Vehicle
    fitted: list[Fitted]
    duties: list[Annotated[Stop | Hold, Field(discriminator="kind")]]


def circle(diameter):
    return math.pi * diameter**2 / 4


class Entry:
    """One fitted entry: what its pads, its pedal and its disc come to."""

    faces = 2

    def __init__(self, given, machine):
        self.given, self.per_way = given, 1 / machine.rolling_radius
        pad, actuation, disc = given.brake.pad, given.brake.actuation, given.brake.disc
        self.area = pad.angle * (pad.outer_radius**2 - pad.inner_radius**2) / 2
        self.arm = (pad.inner_radius + pad.outer_radius) / 2
        master = actuation.master_cylinder
        bore = circle(master.bore)
        self.line_pressure = master.operator_force * master.lever_ratio * master.efficiency / bore
        piston = circle(actuation.piston_diameter)
        self.clamp = self.line_pressure * piston * actuation.efficiency
        self.peak_pressure = self.clamp / (pad.inner_radius * pad.angle * (pad.outer_radius - pad.inner_radius))
        volume = self.faces * piston * actuation.running_clearance
        self.stroke = master.lever_ratio * given.count * volume / bore
        self.swept = math.pi * (pad.outer_radius**2 - pad.inner_radius**2)
        material = MATERIALS[disc.material.id]
        self.disc_mass = self.swept * disc.thickness * material["density"]
        self.depth = disc.thickness / self.faces
        self.capacity = material["density"] * material["specific_heat"]
        self.specific_heat, self.conductivity = material["specific_heat"], material["conductivity"]

    def force(self, case):
        friction = getattr(self.given.brake.lining.friction, case)
        return self.given.count * self.faces * friction * self.clamp * self.arm * self.per_way

    def bulk_rise(self, energy):
        return energy / (self.disc_mass * self.specific_heat)

    def surface_rise(self, times, powers):
        """Plate with an insulated back under a flux linear between nodes: the highest temperature of its face.

        Fourier series, its slow tail in closed form: marched from node to node, the peak then looked for on finer and
        finer grids beside the hottest node.
        """
        flux, lengths = powers / (self.faces * self.swept), np.diff(times)
        slopes, capacity = np.diff(flux) / lengths, self.capacity * self.depth
        rates = self.conductivity / self.capacity * (MODES * math.pi / self.depth) ** 2
        tail = self.depth / self.conductivity * 2 / math.pi**2 * TAIL

        def within(piece, t):
            """Modes and mean that a piece adds, and by which the modes have decayed, after times since its begin."""
            t, slope = t[:, None], slopes[piece][:, None]
            start, decay = flux[piece][:, None], np.exp(-rates * t)
            driven = 2 / capacity * (start * (1 - decay) / rates + slope * (t / rates - (1 - decay) / rates**2))
            return driven, decay, ((start + slope * t / 2) * t / capacity)[:, 0]

        driven, decay, heated = within(np.arange(len(lengths)), lengths)
        modes = [np.zeros(len(MODES))]
        for piece in range(len(lengths)):
            modes.append(modes[-1] * decay[piece] + driven[piece])
        modes, mean = np.array(modes), np.append(0.0, np.cumsum(heated))
        rises = mean + modes.sum(axis=1) + flux * tail
        hottest, best = int(np.argmax(rises)), float(rises.max())
        for piece in {max(hottest - 1, 0), min(hottest, len(lengths) - 1)}:
            low, high = 0.0, lengths[piece]
            for _ in range(3):
                t = np.linspace(low, high, 25)
                driven, decay, heated = within(np.full(25, piece), t)
                rises = mean[piece] + heated + (modes[piece] * decay + driven).sum(axis=1) + (flux[piece] + slopes[piece] * t) * tail
                at = int(np.argmax(rises))
                best, low, high = max(best, float(rises[at])), t[max(at - 1, 0)], t[min(at + 1, 24)]
        return best


class Road:
    """The vehicle on a slope with the forces of its brakes, at the friction asked for on each axle."""

    def __init__(self, machine, demand, slope=0.0):
        self.machine, self.demand, self.mass = machine, demand, machine.mass
        self.rotating = machine.rotating_mass_factor - 1.0
        self.weight = machine.mass * G * math.cos(slope)
        self.resistance = machine.rolling_resistance * self.weight
        geometry = machine.geometry
        self.base, self.height = geometry.wheelbase, geometry.center_of_gravity_height
        self.front = geometry.front_axle_to_center_of_gravity
        self.shares = [d / sum(demand) for d in demand]
        self.lift = self.weight * self.front / self.height

    def normals(self, ground):
        rear = (self.weight * self.front - self.height * (ground + self.resistance)) / self.base
        return self.weight - rear, rear

    def balance(self, fraction):
        """Ground force of all wheels and brake force of each axle, with a fraction of the pedal: which wheels lock?"""
        mu, k, r = self.machine.adhesion, self.rotating, self.resistance
        (front, rear), (share_front, share_rear) = self.demand, self.shares
        transfer = mu * self.height / self.base
        settled = mu * (self.weight * self.front - self.height * r) / self.base
        none = (fraction * (front + rear) - k * r) / (1 + k)
        rear_only = (fraction * front - share_front * k * r + settled) / (1 + share_front * k + transfer)
        front_only = (fraction * rear - share_rear * k * r + mu * self.weight - settled) / (1 + share_rear * k - transfer)
        for ground in (none, rear_only, front_only, mu * self.weight):
            limits = [mu * n for n in self.normals(ground)]
            taken = [s * k * (ground + r) for s in self.shares]
            held = [min(fraction * d - t, m) for d, t, m in zip(self.demand, taken, limits)]
            if abs(sum(held) - ground) <= 1e-9 * self.weight:
                return ground, [h + t for h, t in zip(held, taken)]
        raise ValueError("no balance of the axles found")

    def deceleration(self, fraction):
        return (self.balance(fraction)[0] + self.resistance) / self.mass

    def first_lock(self):
        """Fractions of the pedal from which the front and the rear axle lock, nothing capped."""
        mu, k, r = self.machine.adhesion, self.rotating, self.resistance
        carried = (self.weight * self.front - self.height * r) / self.base
        steep = self.shares[0] - mu * self.height / self.base
        front = mu * (self.weight - carried) / steep if steep > 0 else math.inf
        rear = mu * carried / (self.shares[1] + mu * self.height / self.base)
        return [((1 + k) * ground + k * r) / sum(self.demand) for ground in (front, rear)]


class Course:
    """A stop: build-up in pieces of linear deceleration, then a constant one."""

    def __init__(self, road, duty):
        build_up, speed = duty.response.build_up_time, duty.initial_speed
        cuts = sorted({0.0, 1.0, *(f for f in road.first_lock() if 0 < f < 1)})
        self.time, self.way = 0.0, 0.0
        self.nodes = []  # time, speed, brake force of each axle
        self.energies = np.zeros(2)
        for low, high in zip(cuts, cuts[1:]):
            length = (high - low) * build_up
            a0, a1 = road.deceleration(low), road.deceleration(high)
            jerk = (a1 - a0) / length
            b0, b1 = (np.array(road.balance(f)[1]) for f in (low, high))
            speed_at = lambda t: speed - a0 * t - jerk * t * t / 2
            force_at = lambda t: b0 + (b1 - b0) * (t / length)[:, None]
            t = length * (GAUSS_AT + 1) / 2
            self.energies += length / 2 * (GAUSS_WEIGHT * speed_at(t)) @ force_at(t)
            t = np.linspace(0.0, length, 33)
            self.nodes += zip(self.time + t, speed_at(t), force_at(t))
            self.way += speed * length - a0 * length**2 / 2 - jerk * length**3 / 6
            self.time += length
            speed = speed_at(length)
        if speed < 0.8 * duty.initial_speed:
            raise ValueError("a build-up this long is not handled")
        self.peak, forces = a1, b1
        last = speed / self.peak
        self.energies += forces * speed * last / 2
        self.nodes.append((self.time + last, 0.0, forces))
        self.time, self.way = self.time + last, self.way + speed * last / 2
        self.mean = duty.initial_speed**2 / (2 * self.way)
        delay = duty.response.reaction_time
        self.total_time, self.total_way = self.time + delay, self.way + delay * duty.initial_speed
        times, speeds, forces = zip(*self.nodes)
        times = np.array(times)
        kept = np.append(True, np.diff(times) > 0)
        self.times, self.powers = times[kept], (np.array(speeds)[:, None] * np.array(forces))[kept]


def at_most(actual, limit, unit="1"):
    return actual, limit, actual / limit, unit


def at_least(actual, limit, unit="1"):
    return actual, limit, limit / actual, unit


def temperature(actual, limit):
    return actual, limit, (actual - AMBIENT) / (limit - AMBIENT), "degC"


class Judge:
    """Collects readings of checks; the worst of each counts."""

    def __init__(self):
        self.found = {}

    def add(self, reading, code, duty, entry=None, case=None):
        known = self.found.get((code, duty, entry))
        if known is None or reading[2] > known[0][2]:
            self.found[code, duty, entry] = (reading, case)

    def listed(self):
        for (code, duty, entry), ((actual, limit, utilization, symbol), case) in self.found.items():
            status = "not_met" if not utilization <= 1 else "near_limit" if utilization >= NEAR else "met"
            check = {"code": code, "duty_index": duty, "status": status, "utilization": utilization,
                     "actual": {"value": actual, "unit": symbol}, "limit": {"value": limit, "unit": symbol}}
            if entry is not None:
                check["fitted_index"] = entry
            if case is not None:
                check["friction_case"] = case
            yield check


def axle_forces(entries, case_front, case_rear=None):
    cases = {"front": case_front, "rear": case_rear or case_front}
    forces = {"front": 0.0, "rear": 0.0}
    for entry in entries:
        forces[entry.given.axle] += entry.force(cases[entry.given.axle])
    return [forces["front"], forces["rear"]]


def pressing(judge, index, entries):
    for at, entry in enumerate(entries):
        actuation, lining = entry.given.brake.actuation, entry.given.brake.lining
        master = actuation.master_cylinder
        together = [e.stroke for e in entries if e is entry or e.given.control == entry.given.control]
        judge.add(at_most(entry.peak_pressure, lining.max_pressure, "Pa"), "pad_peak_pressure", index, at)
        judge.add(at_most(entry.line_pressure, actuation.max_line_pressure, "Pa"), "line_pressure", index, at)
        judge.add(at_most(master.operator_force, master.max_operator_force, "N"), "operator_force", index, at)
        judge.add(at_most(sum(together), master.max_stroke, "m"), "operator_stroke", index, at)


def stop(judge, index, duty, machine, entries):
    require = duty.require
    pressing(judge, index, entries)
    for case in CASES:
        road = Road(machine, axle_forces(entries, case))
        course = Course(road, duty)
        ground, forces = road.balance(1.0)
        note = lambda reading, code, entry=None: judge.add(reading, code, index, entry, case)
        # Nothing drives on the level.
        note(at_most(0.0, sum(forces), "N"), "stops")
        note(at_most(course.total_way, require.max_distance, "m"), "stopping_distance")
        note(at_most(course.total_time, require.max_time, "s"), "stopping_time")
        note(at_least(course.mean, require.min_mean_deceleration, "m/s2"), "mean_deceleration")
        limit = require.min_mean_fully_developed_deceleration
        note(at_least(course.peak, limit, "m/s2"), "mean_fully_developed_deceleration")
        note(at_least(course.peak, require.min_peak_deceleration, "m/s2"), "peak_deceleration_minimum")
        note(at_most(course.peak, require.max_deceleration, "m/s2"), "peak_deceleration")
        note(at_least(ground / (machine.mass * G), require.min_braking_ratio), "braking_ratio")
        if require.no_wheel_lock:
            pairs = [at_most(d, machine.adhesion * n, "N") for d, n in zip(road.demand, road.normals(ground))]
            note(max(pairs, key=lambda pair: pair[2]), "adhesion")
        if require.no_rear_wheel_lift:
            note(at_most(ground + road.resistance, road.lift, "N"), "rear_wheel_lift")
        if require.front_locks_first:
            for held in (road, Road(machine, axle_forces(entries, "low", "high"))):
                front, rear = held.first_lock()
                note(at_most(front / rear, 1.0), "axle_lock_order")
        for at, entry in enumerate(entries):
            axle = 0 if entry.given.axle == "front" else 1
            share = entry.force(case) / road.demand[axle] / entry.given.count
            energy, powers = course.energies[axle] * share, course.powers[:, axle] * share
            heat(note, at, entry, duty, energy, course.times, powers)
            if case == "high":
                flux(note, at, entry, energy, float(powers.max()))


def heat(note, at, entry, duty, energy, times, powers):
    lining, turning = entry.given.brake.lining, duty.initial_speed * entry.per_way
    note(at_most(turning * entry.given.brake.pad.outer_radius, lining.max_rubbing_speed, "m/s"), "rubbing_speed", at)
    velocity = entry.clamp / entry.area * turning * entry.arm
    note(at_most(velocity, lining.max_pressure_velocity, "Pa.m/s"), "pressure_velocity", at)
    life = entry.area * entry.given.brake.pad.wear_allowance / (lining.specific_wear * energy / entry.faces)
    note(at_least(life, duty.require.min_pad_life_stops), "pad_life", at)
    bulk, surface = AMBIENT + entry.bulk_rise(energy), AMBIENT + entry.surface_rise(times, powers)
    note(temperature(bulk, lining.max_temperature_continuous), "disc_bulk_temperature", at)
    note(temperature(surface, lining.max_temperature_peak), "surface_temperature", at)


def flux(note, at, entry, energy, peak_power):
    lining, rubbed = entry.given.brake.lining, entry.faces * entry.area
    note(at_most(peak_power / rubbed, lining.max_power_flux, "W/m2"), "power_flux", at)
    note(at_most(energy / rubbed, lining.max_energy_flux, "J/m2"), "energy_flux", at)


def hold(judge, index, duty, machine, entries):
    pressing(judge, index, entries)
    slope = math.atan(duty.grade)
    pull = machine.mass * G * math.sin(slope)
    geometry, weight = machine.geometry, machine.mass * G
    lever = geometry.front_axle_to_center_of_gravity * math.cos(slope) + geometry.center_of_gravity_height * math.sin(slope)
    rear = weight * lever / geometry.wheelbase
    normals = [weight * math.cos(slope) - rear, rear]
    for case in CASES:
        demand = axle_forces(entries, case)
        judge.add(at_least(sum(demand) / pull, duty.require.min_holding_factor), "holding_torque", index, case=case)
        held = sum(min(d, machine.adhesion * n) for d, n in zip(demand, normals))
        judge.add(at_most(pull, held, "N"), "holding_adhesion", index, case=case)


def digest(document):
    document = {name: value for name, value in document.items() if name != "ref"}
    canonical = json.dumps(document, sort_keys=True, separators=(",", ":"), ensure_ascii=False)
    return "sha256:" + hashlib.sha256(canonical.encode()).hexdigest()


app = FastAPI()


@app.post("/v1/spec-check")
async def spec_check(request: Request, asked: SpecCheck):
    entries = [Entry(given, asked.machine) for given in asked.fitted]
    judge = Judge()
    for index, duty in enumerate(asked.duties):
        (stop if duty.kind == "stop" else hold)(judge, index, duty, asked.machine, entries)
    checks = list(judge.listed())
    verdict = "fail" if any(check["status"] == "not_met" for check in checks) else "pass"
    governing = max(checks, key=lambda check: check["utilization"])
    results = {"verdict": verdict, "governing": governing, "checks": checks}
    return {"results": results, "record": {"ref": asked.ref, "input_digest": digest(await request.json())}}
