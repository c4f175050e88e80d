"""Works out a whole specification check from its request alone, apart from the service.

Reads a request (JSON) and prints every check: code, duty, entry, status, friction case, hot, actual value, limit and
utilization in coherent SI (temperatures in degC). Sections named here are those of the model that the service
documents; nothing is taken from the service but the rows of its tables (materials, linings, test cycles).

Motion: the forces on the axles solved regime by regime, speed, distance and work by scipy's Runge-Kutta method of order
8 (`braking.py`). Bulk temperature: an ordinary differential equation with the heat content of the material, marched by
a Runge-Kutta method of order 4. Surface temperature: a Fourier series of the plate with one insulated face under a flux
linear between many samples. What the documents leave open is a convention, marked "convention" where it is chosen.

Needs numpy and scipy. Run: python tests/reference/spec_check.py < request.json
With --corpus [group ...]: works out the requests of spec_check/*.json and writes spec_check_expected.json.
"""

import json
import math
import pathlib
import re
import sys
import tomllib

import numpy as np
from scipy.integrate import quad
from scipy.optimize import brentq
from scipy.special import ellipe, ellipk

from braking import G, System, follow, highest
from duty import air

HERE = pathlib.Path(__file__).parent
DATA = HERE.parent.parent / "src" / "data"
ZERO = 273.15
STEFAN_BOLTZMANN = 5.670374419e-8

# --- Units: coherent SI, temperatures in degC -------------------------------------------------

FACTORS = {
    "mm": 1e-3, "cm": 1e-2, "m": 1.0, "km": 1e3, "in": 0.0254, "ft": 0.3048, "mi": 1609.344,
    "mm2": 1e-6, "cm2": 1e-4, "m2": 1.0, "in2": 0.0254**2, "ft2": 0.3048**2, "mm3": 1e-9, "cm3": 1e-6, "L": 1e-3,
    "deg": math.pi / 180, "rad": 1.0, "kg": 1.0, "g": 1e-3, "t": 1e3, "lb": 0.45359237,
    "N": 1.0, "kN": 1e3, "daN": 10.0, "lbf": 0.45359237 * G, "MPa": 1e6, "kPa": 1e3, "bar": 1e5, "Pa": 1.0,
    "psi": 0.45359237 * G / 0.0254**2, "N.m": 1.0, "kN.m": 1e3, "N.mm": 1e-3, "lbf.ft": 0.45359237 * G * 0.3048,
    "m/s": 1.0, "km/h": 1 / 3.6, "ft/s": 0.3048, "mph": 0.44704, "ft/min": 0.00508, "rpm": math.pi / 30, "rad/s": 1.0,
    "m/s2": 1.0, "ft/s2": 0.3048, "rad/s2": 1.0, "s": 1.0, "ms": 1e-3, "min": 60.0, "h": 3600.0,
    "kg.m2": 1.0, "lb.ft2": 0.45359237 * 0.3048**2, "W/mm2": 1e6, "kW/m2": 1e3, "J/mm2": 1e6, "MPa.m/s": 1e6,
    "psi.ft/min": 0.45359237 * G / 0.0254**2 * 0.00508, "W/(m2.K)": 1.0, "W/(m.K)": 1.0, "J/(kg.K)": 1.0,
    "kg/m3": 1.0, "g/cm3": 1e3, "mm3/MJ": 1e-15, "cm3/MJ": 1e-12, "N/mm": 1e3, "lbf/in": 0.45359237 * G / 0.0254,
    "mm3/MPa": 1e-15,
}


def si(measure, default=None):
    if measure is None:
        return default
    return in_si(measure["value"], measure["unit"])


def in_si(value, unit):
    if unit == "degC":
        return value
    if unit == "K":
        return value - ZERO
    if unit == "degF":
        return (value - 32.0) / 1.8
    if unit == "%":
        return math.atan(value / 100.0)
    if unit == "g":  # a mass nowhere here: the acceleration of gravity
        return value * G
    return value * FACTORS[unit]


def printed(text):
    """A value of a table as printed; of a range its two ends."""
    numbers, unit = re.fullmatch(r"([-0-9.]+(?:-[0-9.]+)?) *(.*)", text).groups()
    ends = re.findall(r"(?:^-)?[0-9.]+", numbers)
    return [in_si(float(end), unit) if unit else float(end) for end in ends]


# --- Section 1: pad --------------------------------------------------------------------------


class Pad:
    """Area, arm, clamp force per peak pressure, and the radii between which it rubs."""

    def __init__(self, given, wear):
        shape = given["shape"]
        if shape == "annular_sector":
            inner, outer, angle = (si(given[n]) for n in ("inner_radius", "outer_radius", "angle"))
            area = angle * (outer**2 - inner**2) / 2
            inverse, moment = angle * (outer - inner), angle * (outer**3 - inner**3) / 3
        elif shape == "round":
            radius, center = si(given["radius"]), si(given["center_radius"])
            inner, outer, x = center - radius, center + radius, radius / center
            area = math.pi * radius**2
            k, e = ellipk(x * x), ellipe(x * x)
            inverse = area / (center * math.pi * x * x / (4 * (e - (1 - x * x) * k)))
            moment = area * center * 4 / (9 * math.pi * x * x) * ((1 + 7 * x * x) * e - (1 - x * x) * (1 + 3 * x * x) * k)
        else:
            points = [(x * FACTORS[given["unit"]], y * FACTORS[given["unit"]]) for x, y in given["points"]]
            inner, outer, area, inverse, moment = outline(points)
        self.inner, self.outer, self.area = inner, outer, area
        self.arm = area / inverse if wear else moment / area
        self.force_per_pressure = inner * inverse if wear else area
        self.wear_allowance = si(given.get("wear_allowance"))


def outline(points):
    """Smallest and largest radius, area, integrals of 1/r and r: quadrature along each edge of the fields r̂ and r·r/3."""
    area = inverse = moment = 0.0
    smallest = math.inf
    for (x1, y1), (x2, y2) in zip(points, points[1:] + points[:1]):
        dx, dy = x2 - x1, y2 - y1
        turn = x1 * y2 - x2 * y1
        radius = lambda t: math.hypot(x1 + t * dx, y1 + t * dy)
        foot = min(max(-(x1 * dx + y1 * dy) / (dx * dx + dy * dy), 0.0), 1.0)
        smallest = min(smallest, radius(foot))
        area += turn / 2
        inverse += turn * quad(lambda t: 1 / radius(t), 0, 1, epsabs=0, epsrel=1e-12, points=[foot])[0]
        moment += turn / 3 * quad(radius, 0, 1, epsabs=0, epsrel=1e-12, points=[foot])[0]
    largest = max(math.hypot(x, y) for x, y in points)
    return smallest, largest, abs(area), abs(inverse), abs(moment)


# --- Lining -----------------------------------------------------------------------------------

LIMITS = ("max_pressure", "max_rubbing_speed", "max_pressure_velocity", "max_power_flux", "max_energy_flux",
          "max_temperature_continuous", "max_temperature_peak", "specific_wear", "conductivity", "density", "specific_heat")


class Lining:
    def __init__(self, given):
        row = {}
        if "id" in given:
            rows = tomllib.loads((DATA / "linings.toml").read_text())["lining"]
            row = next(row for row in rows if row["id"] == given["id"])
        for name in LIMITS:
            value = si(given.get(name), min(printed(row[name])) if name in row else None)
            setattr(self, name, value)
        if "friction" in given:
            friction = given["friction"]
            low, nominal, high = (friction.get(n) for n in ("low", "nominal", "high"))
        elif "friction_code" in given:
            letters = tomllib.loads((DATA / "friction_codes.toml").read_text())["letter"]
            letter = next(letter for letter in letters if letter["letter"] == given["friction_code"][0])
            low, nominal, high = letter["low"], None, letter["high"]
        else:
            ends = printed(row["friction"])
            low, nominal, high = (ends[0], None, ends[-1]) if len(ends) > 1 else (None, ends[0], None)
        if nominal is None:
            nominal = (low + high) / 2
        self.is_range = low is not None or high is not None
        self.friction = {"low": nominal if low is None else low, "nominal": nominal, "high": nominal if high is None else high}
        self.fade = [(si(point["temperature"]), point["factor"]) for point in given.get("fade", [])]

    def factor(self, temperature):
        if not self.fade or temperature is None:
            return 1.0
        temperatures, factors = zip(*self.fade)
        return float(np.interp(temperature, temperatures, factors))


# --- Disc material and disc (section 6) -------------------------------------------------------


class Material:
    def __init__(self, given):
        row = {}
        if "id" in given:
            rows = tomllib.loads((DATA / "disc_materials.toml").read_text())["material"]
            row = next(row for row in rows if row["id"] == given["id"])
        self.density = si(given.get("density"), row.get("density", {}).get("value"))
        self.emissivity = given.get("emissivity", row.get("emissivity", 0.55))
        self.max_temperature = si(given.get("max_temperature"), row.get("max_temperature", {}).get("value"))
        heat = {"value": si(given["specific_heat"])} if "specific_heat" in given else row["specific_heat"]
        conductivity = {"value": si(given["conductivity"])} if "conductivity" in given else row["conductivity"]
        self.conductivity = curve(conductivity)
        if "mean" in heat:
            mean, base = curve({"table": heat["mean"]}), heat["mean_from"]
            self.enthalpy = lambda t: mean(t) * (t - base)
        else:
            self.own = curve(heat)
            cuts = [piece["from"] for piece in heat.get("pieces", [])]
            self.enthalpy = lambda t: integral(self.own, 20.0, t, cuts)

    def specific_heat(self, t):
        if hasattr(self, "own"):
            return self.own(t)
        step = 1e-4
        return (self.enthalpy(t + step) - self.enthalpy(t - step)) / (2 * step)

    def after(self, start, heat):
        """Temperature after a heat per mass."""
        target = self.enthalpy(start) + heat
        end = brentq(lambda t: self.enthalpy(t) - target, start - 1, start + heat / 200 + 10, xtol=1e-10)
        return end


def curve(row):
    if "value" in row:
        return lambda t: row["value"]
    if "table" in row:
        xs, ys = zip(*row["table"])
        return lambda t: float(np.interp(t, xs, ys))
    pieces = row["pieces"]

    def value(t):
        t = min(max(t, pieces[0]["from"]), pieces[-1]["to"])
        piece = next(piece for piece in pieces if t <= piece["to"])
        pole = piece.get("pole")
        return sum(a * t**n for n, a in enumerate(piece["polynomial"])) + (pole["factor"] / (t - pole["at"]) if pole else 0.0)

    return value


def integral(function, low, high, cuts):
    edges = sorted({low, high, *(c for c in cuts if min(low, high) < c < max(low, high))}, reverse=high < low)
    return sum(quad(function, a, b, epsabs=1e-9, epsrel=1e-12)[0] for a, b in zip(edges, edges[1:]))


class Disc:
    def __init__(self, given, pad, lining, faces, brakes):
        self.material = Material(given["material"])
        swept = math.pi * (pad.outer**2 - pad.inner**2)
        thickness = si(given["thickness"])
        self.mass = si(given.get("mass"))
        if self.mass is None and given["construction"] == "solid":
            self.mass = swept * thickness * self.material.density
        self.radius = si(given["outer_radius"])
        self.faces, self.brakes, self.swept, self.pads = faces, brakes, swept, pad.area * brakes
        self.cooling_area = faces * swept + 2 * math.pi * pad.outer * thickness
        self.cooling = given.get("cooling")
        self.lining = lining
        if self.mass:
            self.depth = self.mass / (faces * self.material.density * swept)

    def share(self, start):
        """Charron with coverage; what enters the disc of the power of one brake times the brakes pressing it."""
        lining = self.lining
        if None in (lining.conductivity, lining.density, lining.specific_heat):
            return self.brakes
        pad = math.sqrt(lining.conductivity * lining.density * lining.specific_heat)
        m = self.material
        disc = math.sqrt(m.conductivity(start) * m.density * m.specific_heat(start))
        return self.brakes / (1 + self.pads / self.swept * pad / disc)

    def coefficient(self, temperature, ambient, way_speed, turning):
        if self.cooling is None:
            return 0.0
        if "coefficient" in self.cooling:
            return si(self.cooling["coefficient"])
        t, a = temperature + ZERO, ambient + ZERO
        conductivity, viscosity = air((t + a) / 2)
        if self.cooling["model"] == "rotating_disc":
            length, reynolds = self.radius, turning * self.radius**2 / viscosity
            nusselt = 0.36 * math.sqrt(reynolds)
            if reynolds > 2.4e5:
                nusselt = 0.015 * reynolds**0.8 - (0.015 * 2.4e5**0.8 - 0.36 * math.sqrt(2.4e5)) * math.sqrt(2.4e5 / reynolds)
        else:
            length = 2 * self.radius
            reynolds = way_speed * length / viscosity
            nusselt = 0.70 * reynolds**0.55 if reynolds <= 2.4e5 else 0.04 * reynolds**0.8
        radiation = self.material.emissivity * STEFAN_BOLTZMANN * (t * t + a * a) * (t + a)
        return max(nusselt * conductivity / length, 5.0) + radiation

    def march(self, start, seconds, power, ambient, speeds, steps):
        """Bulk temperature over time with heat entering (a function of time), by order-4 Runge-Kutta; all values."""
        def rate(t, temperature):
            loss = self.coefficient(temperature, ambient, *speeds) * self.cooling_area * (temperature - ambient)
            return (power(t) - loss) / (self.mass * self.material.specific_heat(temperature))
        h, temperature, values = seconds / steps, start, [start]
        for n in range(steps):
            t = n * h
            k1 = rate(t, temperature)
            k2 = rate(t + h / 2, temperature + h / 2 * k1)
            k3 = rate(t + h / 2, temperature + h / 2 * k2)
            k4 = rate(t + h, temperature + h * k3)
            temperature += h / 6 * (k1 + 2 * k2 + 2 * k3 + k4)
            values.append(temperature)
        return values

    def surface_rise(self, middle, times, entering):
        """Highest rise of the surface under heat (W into the disc) linear between samples."""
        k = self.material.conductivity(middle)
        capacity = self.material.density * self.material.specific_heat(middle)
        order = np.arange(1, 401)
        rates = k / capacity * (order * math.pi / self.depth) ** 2
        tail = math.pi**2 / 6 - float(np.sum(1.0 / order**2))
        flux = np.asarray(entering) / (self.faces * self.swept)
        modes, mean, highest = np.zeros(400), 0.0, 0.0
        gain = 2 / (capacity * self.depth)
        for t0, t1, q0, q1 in zip(times, times[1:], flux, flux[1:]):
            if t1 <= t0:
                continue
            slope, length = (q1 - q0) / (t1 - t0), t1 - t0
            decay = np.exp(-rates * length)
            modes = modes * decay + gain * (q0 * (1 - decay) / rates + slope * (length / rates - (1 - decay) / rates**2))
            mean += (q0 + q1) / 2 * length / (capacity * self.depth)
            highest = max(highest, mean + float(modes.sum()) + q1 * self.depth / k * 2 / math.pi**2 * tail)
        return highest


# --- Section 2: actuation -----------------------------------------------------------------------


def circle(diameter):
    return math.pi * diameter**2 / 4


class Chain:
    """One brake's actuation: clamp forces at full application and what gives a part of them."""

    def __init__(self, given, share):
        self.given, self.kind, self.operator_share = given, given["kind"], share
        self.efficiency = given.get("efficiency", 1.0)
        self.pressure = self.air = self.operator = None
        kind = self.kind
        if kind == "clamp_force":
            self.stopping = self.pressing = si(given["force"])
        elif kind == "hydraulic":
            self.piston = circle(si(given["piston_diameter"])) * given.get("pistons_per_side", 1)
            self.threshold = si(given.get("threshold_pressure"), 0.0)
            master = given.get("master_cylinder")
            self.master = master
            if master:
                self.gain = master.get("lever_ratio", 1.0) * master.get("efficiency", 1.0) * share / circle(si(master["bore"]))
            operator = si(master.get("operator_force")) if master else None
            pressure = si(given.get("line_pressure"))
            if pressure is None and operator is None:
                pressure = si(given.get("max_line_pressure"))
                if pressure is None:
                    operator = si(master["max_operator_force"])
            self.full_pressure = pressure if pressure is not None else operator * self.gain
            self.stopping = self.pressing = max(self.full_pressure - self.threshold, 0.0) * self.piston * self.efficiency
        elif kind == "cable":
            self.gain = share * math.prod(given.get(n, 1.0) for n in ("lever_ratio", "cable_efficiency", "caliper_ratio", "caliper_efficiency"))
            operator = si(given.get("operator_force"), si(given.get("max_operator_force")))
            self.stopping = self.pressing = operator * self.gain
        elif kind == "pneumatic":
            self.gain = given.get("force_ratio", 1.0) * self.efficiency
            pressure = si(given.get("air_pressure"), si(given.get("max_air_pressure")))
            force = pressure * si(given["chamber_area"]) - si(given.get("return_spring_force"), 0.0)
            self.stopping = self.pressing = max(force, 0.0) * self.gain
        else:
            self.gain = given.get("force_ratio", 1.0) * self.efficiency
            new = si(given["spring_force"])
            lost = si(given.get("spring_rate"), 0.0) * si(given.get("pad_wear_travel"), 0.0)
            self.pressing, self.stopping = new * self.gain, (new - lost) * self.gain

    def pressed(self, fraction):
        """Clamp force at a fraction, springs with new pads: what wear would take is still there (convention)."""
        return fraction * self.stopping + self.pressing - self.stopping

    def at(self, fraction):
        """Pressures and operator force that give a fraction of the full clamp force."""
        found = {}
        given, clamp = self.given, fraction * self.stopping
        if self.kind == "hydraulic":
            found["line_pressure"] = self.threshold + clamp / (self.piston * self.efficiency) if fraction < 1 else self.full_pressure
            if self.master:
                found["operator_force"] = found["line_pressure"] / self.gain
        elif self.kind == "cable":
            found["operator_force"] = clamp / self.gain
        elif self.kind == "pneumatic":
            found["air_pressure"] = (clamp / self.gain + si(given.get("return_spring_force"), 0.0)) / si(given["chamber_area"])
        return found

    def volume(self, line_pressure, faces):
        clearance, compliance = si(self.given.get("running_clearance")), si(self.given.get("compliance"))
        if clearance is None and compliance is None:
            return None
        return faces * self.piston * (clearance or 0.0) + (compliance or 0.0) * line_pressure

    def release_pressure(self):
        given = self.given
        if "release_piston_diameter" not in given:
            return None
        force = si(given["spring_force"]) + si(given.get("spring_rate"), 0.0) * si(given.get("release_travel"), 0.0)
        return force / (circle(si(given["release_piston_diameter"])) * self.efficiency)


# --- One fitted entry ---------------------------------------------------------------------------


class Entry:
    def __init__(self, given, index, machine):
        self.index, self.given = index, given
        self.count = given.get("count", 1)
        self.axle = given.get("axle")
        self.control = given.get("control")
        self.ratio = given.get("speed_ratio", 1.0)
        self.radius = si(given.get("rolling_radius"), si(machine.get("rolling_radius")))
        self.per_way = shaft_per_way(machine, self.radius) * self.ratio
        brake = given["brake"]
        self.faces = brake.get("faces", 2)
        self.pad = Pad(brake["pad"], brake.get("pressure_distribution", "uniform_wear") == "uniform_wear")
        self.lining = Lining(brake["lining"])
        self.chain = Chain(brake["actuation"], given.get("operator_share", 1.0))
        self.disc = Disc(brake["disc"], self.pad, self.lining, self.faces, given.get("brakes_per_disc", 1)) if "disc" in brake else None

    def force(self, case, factor):
        """Force along the way (or torque at the reference shaft) of all brakes of the entry, worn springs."""
        mu = self.lining.friction[case] * factor
        return self.count * self.faces * mu * self.chain.stopping * self.pad.arm * self.per_way

    def pointer(self, rest):
        return f"#/fitted/{self.index}/brake/{rest}"

    def lining_pointer(self, name):
        return self.pointer(f"lining/{name}")


# --- Section 3: machines --------------------------------------------------------------------------


def shaft_per_way(machine, radius=None):
    kind = machine["kind"]
    if kind == "vehicle":
        return 1.0 / radius
    if kind == "shaft":
        return 1.0
    if kind == "hoist":
        return machine.get("gear_ratio", 1.0) * machine.get("falls", 1.0) / si(machine["drum_radius"])
    return machine.get("gear_ratio", 1.0) / si(machine["pulley_radius"])


def with_losses(force, efficiency):
    return force * efficiency if force > 0 else force / efficiency


class Exact(System):
    """The balance of `braking.py` with its root found regime by regime: held by torque or at the limit, per axle."""

    lift = True

    def limits(self, ground):
        if self.adhesion is None:
            return [math.inf, math.inf]
        if not self.geometry:
            return [self.adhesion * self.normal, math.inf]
        front, rear = self.normals(ground)
        return [self.adhesion * max(front, 0.0), self.adhesion * max(rear, 0.0)]

    def balance(self, fraction, speed):
        total = sum(self.demand)
        shares = [d / total if total else 0.0 for d in self.demand]
        retarding = self.retarding(speed)

        def wheels(ground):
            taken = [s * self.rotating * (ground + retarding) for s in shares]
            force = [min(fraction * d - t, m) for d, t, m in zip(self.demand, taken, self.limits(ground))]
            return force, taken

        # The sum less `ground` falls and is piecewise linear: a chord between two points of one piece is exact.
        low, high = -abs(retarding) - 1.0, total + self.normal * 4 + abs(retarding) + 1.0
        gap = lambda g: sum(wheels(g)[0]) - g
        at_low, at_high = gap(low), gap(high)
        ground = high
        for turn in range(200):
            ground = low + (high - low) * at_low / (at_low - at_high)
            if turn % 3 == 2:
                ground = (low + high) / 2
            found = gap(ground)
            if abs(found) <= 1e-13 * (total + self.normal + abs(retarding)) or high - low <= 1e-15 * abs(high):
                break
            if found > 0:
                low, at_low = ground, found
            else:
                high, at_high = ground, found
        if self.geometry and self.lift:
            base, height, front = self.geometry
            most = self.normal * front / height - self.resistance
            if ground > most:
                force, taken = wheels(most)
                factor = most / sum(force)
                force = [f * factor for f in force] if self.adhesion is None else [most - force[1], force[1]]
                ground = most
                return (ground + retarding) / self.mass, force, [f + t for f, t in zip(force, taken)], self.normals(ground)
        force, taken = wheels(ground)
        normals = self.normals(ground) if self.geometry else (self.normal, 0.0)
        return (ground + retarding) / self.mass, force, [f + t for f, t in zip(force, taken)], normals


def system_of(machine, duty, forces_per_axle):
    kind, efficiency = machine["kind"], machine.get("efficiency", 1.0)
    if kind == "vehicle":
        mass, slope = si(machine["mass"]), si(duty.get("grade"), 0.0)
        normal = mass * G * math.cos(slope)
        base = machine.get("geometry")
        built = dict(
            mass=mass, translating=mass, rotating=machine.get("rotating_mass_factor", 1.0) - 1.0,
            outside=si(duty.get("drive_force"), 0.0) - mass * G * math.sin(slope),
            resistance=machine.get("rolling_resistance", 0.0) * normal,
            drag=0.5 * si(machine.get("air_density"), 1.225) * si(machine.get("drag_area"), 0.0),
            normal=normal, adhesion=machine.get("adhesion"),
            geometry=base and tuple(si(base[n]) for n in ("wheelbase", "center_of_gravity_height", "front_axle_to_center_of_gravity")))
    elif kind == "shaft":
        built = dict(mass=si(machine["inertia"]), translating=0.0, outside=si(machine.get("driving_torque"), 0.0))
    elif kind == "hoist":
        per = shaft_per_way(machine)
        load, counter = si(machine["load_mass"]), si(machine.get("counterweight_mass"), 0.0)
        down = 1.0 if duty.get("direction") == "lowering" else -1.0
        built = dict(mass=load + counter + si(machine.get("inertia"), 0.0) * per**2, translating=load + counter,
                     outside=with_losses(down * (load - counter) * G, efficiency))
    else:
        per, slope = shaft_per_way(machine), si(machine["incline"])
        load, belt = si(machine["material_mass"]), si(machine.get("belt_mass"), 0.0)
        built = dict(mass=load + belt + si(machine.get("inertia"), 0.0) * per**2, translating=load + belt,
                     outside=with_losses(-load * G * math.sin(slope), efficiency),
                     resistance=machine.get("resistance", 0.0) * G * (load * math.cos(slope) + belt))
    return Exact(demand=tuple(forces_per_axle), **built)


# --- Judgement ------------------------------------------------------------------------------------

RANGE = ("low", "nominal", "high")


class Check:
    """One reading of one check; the worst of several readings is reported."""

    def __init__(self, code, actual=None, limit=None, utilization=None, met=None, missing=(), entry=None):
        self.code, self.actual, self.limit, self.utilization = code, actual, limit, utilization
        self.missing, self.entry = list(missing), entry
        self.met = met if met is not None else (utilization is not None and utilization <= 1)
        self.case, self.hot, self.tied_case, self.tied_hot = None, False, False, False

    def badness(self):
        if self.missing:
            return (2, 0.0)
        if self.utilization is None:
            return (3, 0.0) if not self.met else (0, 0.0)
        return (1, self.utilization)


def at_most(code, actual, limit, **more):
    utilization = actual / limit if limit > 0 else math.inf
    return Check(code, actual, limit, utilization, **more)


def at_least(code, actual, limit, **more):
    if actual <= 0:
        return Check(code, actual, limit, None, met=False, **more)
    return Check(code, actual, limit, limit / actual, **more)


def temperature(code, actual, limit, ambient, **more):
    if limit <= ambient:
        return Check(code, actual, limit, None, met=False, **more)
    return Check(code, actual, limit, max((actual - ambient) / (limit - ambient), 0.0), **more)


class SpecCheck:
    def __init__(self, request):
        self.request = request
        self.machine = request["machine"]
        self.kind = self.machine["kind"]
        self.ambient = si(request.get("ambient_temperature"), 20.0)
        self.entries = [Entry(given, index, self.machine) for index, given in enumerate(request["fitted"])]
        self.cases = RANGE if any(entry.lining.is_range for entry in self.entries) else ("nominal",)
        self.near = request.get("near_limit_from", 0.9)

    # Which brakes act.

    def acting(self, duty):
        if "uses" not in duty:
            return [(entry, entry.count) for entry in self.entries]
        return [(self.entries[use["fitted_index"]], use.get("count", self.entries[use["fitted_index"]].count)) for use in duty["uses"]]

    def factors(self, hot):
        """Fade factor of each entry; `hot` holds the temperature of each entry's disc, or nothing."""
        if hot is None:
            return [1.0] * len(self.entries)
        return [entry.lining.factor(hot[entry.index]) for entry in self.entries]

    def per_axle(self, forces):
        """Splits the force of each entry over the axles: [front or all, rear]."""
        parts = []
        for entry, force in forces:
            if "geometry" not in self.machine or entry.axle == "front" or self.kind != "vehicle":
                parts.append((force, 0.0))
            else:
                parts.append((0.0, force) if entry.axle == "rear" else (force / 2, force / 2))
        return parts

    def forces(self, acting, case, factors):
        found = []
        for entry, count in acting:
            found.append((entry, entry.force(case, factors[entry.index]) * count / entry.count))
        return found

    def system(self, duty, acting, case, factors, rear_case=None):
        parts = self.per_axle(self.forces(acting, case, factors))
        if rear_case:
            behind = self.per_axle(self.forces(acting, rear_case, factors))
            parts = [(front, rear) for (front, _), (_, rear) in zip(parts, behind)]
        return system_of(self.machine, duty, [sum(p[i] for p in parts) for i in (0, 1)]), parts

    # All duties.

    def run(self):
        duties = self.request["duties"]
        self.peaks, self.open = [None] * len(self.entries), set()
        answers = {}
        for turn in ("heating", "other"):
            for index, duty in enumerate(duties):
                heating = duty["kind"] in ("repeated_stops", "descent", "procedure")
                if heating == (turn == "heating"):
                    answers[index] = self.judge(index, duty)
        checks = [check for index in range(len(duties)) for check in answers[index]
                  if index not in self.open or check.code == "stops"]
        return self.answer(checks)

    def judge(self, index, duty):
        readings = {}
        heats = any(d["kind"] in ("repeated_stops", "descent", "procedure") for d in self.request["duties"])
        states = [None]
        if duty["kind"] in ("stop", "hold") and heats and any(entry.lining.fade for entry in self.entries):
            states.append(self.peaks)
        for hot in states:
            for case in self.cases:
                for check, wanted in self.reading(duty, case, hot):
                    if len(self.cases) == 1:
                        wanted = "any"
                    if wanted in ("any", "worst") or wanted == case:
                        check.case, check.hot = case, hot is not None
                        if wanted == "any" and len(self.cases) > 1:
                            check.tied_case = True
                        key = (check.code, check.entry)
                        readings.setdefault(key, []).append(check)
        answers = []
        for check in readings.values():
            worst = max(check, key=Check.badness)
            loose = 2e-3 if "temperature" in worst.code else 1e-6
            for other in check:
                same = worst.utilization is None or abs(worst.utilization - (other.utilization or 0)) <= loose * worst.utilization
                if other is not worst and worst.badness()[0] == other.badness()[0] and same:
                    worst.tied_case |= other.case != worst.case
                    worst.tied_hot |= other.hot != worst.hot
            worst.duty = index
            answers.append(worst)
        return answers

    def reading(self, duty, case, hot):
        acting, factors = self.acting(duty), self.factors(hot)
        kind = duty["kind"]
        if kind == "hold":
            return self.hold(duty, acting, case, factors)
        if kind == "descent":
            return self.descent(duty, acting, case, factors)
        if kind == "procedure":
            return self.procedure(duty, acting, case, factors)
        return self.stops(duty, acting, case, factors)

    # Section 4: the stop.

    def follow(self, duty, acting, case, factors):
        turns = self.kind == "shaft"
        v0 = si(duty["initial_rotational_speed" if turns else "initial_speed"])
        v1 = si(duty.get("final_rotational_speed" if turns else "final_speed"), 0.0)
        response = duty.get("response", {})
        delays = [si(response.get(n), 0.0) for n in ("reaction_time", "dead_time", "build_up_time")]
        wanted = si(duty.get("angular_deceleration" if turns else "deceleration"))
        system, parts = self.system(duty, acting, case, factors)
        stop = follow(system, v0, v1, *delays, wanted)
        return stop, system, parts, v0, v1

    def sampled(self, stop, samples=1500):
        """While torque acts: times since its beginning, and (deceleration, ground, brake, normals, speed, fraction)."""
        system, start = stop["system"], stop["begin"][0]
        times, states = [], []
        for leg in stop["legs"]:
            for t in np.linspace(0.0, leg.length, samples):
                v = max(float(leg.at(t)[0]), 0.0)
                fraction = leg.fraction(t, v)
                times.append(leg.start - start + t)
                states.append((*system.balance(fraction, v), v, fraction))
        return times, states

    def stops(self, duty, acting, case, factors):
        stop, system, parts, v0, v1 = self.follow(duty, acting, case, factors)
        found = [(self.reaches(system, v1), "low")]
        require = duty.get("require", {})
        if not stop["reached"]:
            # What cannot be worked out because the machine does not stop is not compared.
            self.open.add(self.request["duties"].index(duty))
            return found
        begin_time, begin_speed, begin_way = stop["begin"]
        braking_time, braking_way = stop["time"] - begin_time, stop["way"] - begin_way
        times, states = self.sampled(stop)
        # Where a limit holds the deceleration at its peak, the largest demand within the peak counts.
        top = max(s[0] for s in states)
        peak = max((s for s in states if s[0] >= top * (1 - 1e-9)), key=lambda s: s[5])
        found += self.motion_checks(require, stop, system, peak, begin_speed, braking_way, v0, v1)
        found += self.axle_checks(duty, require, acting, case, factors, system, peak)
        # A deceleration that the operator holds takes a part of the force; else the full force presses.
        held = "deceleration" in duty or "angular_deceleration" in duty
        fraction = max(s[5] for s in states) if held else 1.0
        found += self.press_checks(acting, fraction)
        top_speed = max(s[4] for s in states)
        thermal = [self.brake_course(entry, count, part, system, times, states) for (entry, count), part in zip(acting, parts)]
        peaks = [self.peak_power(count, part, system, stop) for (_, count), part in zip(acting, parts)]
        found += self.rubbing_checks(acting, top_speed, fraction)
        for (entry, count), (energy, powers), peak_power in zip(acting, thermal, peaks):
            found += self.flux_checks(entry, energy, peak_power)
            found += self.life_checks(entry, require, energy)
            if duty["kind"] == "repeated_stops":
                heat = self.repeated(entry, duty, times, powers, braking_way / braking_time, (v0 + v1) / 2, braking_time)
            else:
                heat = self.single(entry, duty, times, powers, energy)
            found += self.heat_checks(entry, heat, duty["kind"] == "repeated_stops")
        return found

    def reaches(self, system, v1):
        driving = -system.retarding(v1)
        if driving <= 0:
            return Check("stops", 0.0, self.available(system, v1), 0.0)
        available = self.available(system, v1)
        return at_most("stops", driving, available)

    def available(self, system, speed):
        """Brake force as limited, what the rotating masses take included."""
        return sum(system.balance(1.0, speed)[2])

    def knows_wheels(self):
        if self.kind != "vehicle":
            return []
        missing = []
        if "adhesion" not in self.machine:
            missing.append("#/machine/adhesion")
        single = len(self.entries) == 1 and self.entries[0].axle == "all"
        if "geometry" not in self.machine and not single:
            missing.append("#/machine/geometry")
        return missing

    def motion_checks(self, require, stop, system, peak, begin_speed, braking_way, v0, v1):
        missing, found = self.knows_wheels(), []

        def judged(code, name, compare, actual, case="low", needs=missing):
            if name not in require:
                return
            limit = require[name] if isinstance(require[name], float | int) else si(require[name])
            if needs:
                found.append((Check(code, missing=needs, limit=limit), case))
            elif actual is not None:
                found.append((compare(code, actual, limit), case))

        judged("stopping_distance", "max_distance", at_most, stop["way"])
        judged("stopping_time", "max_time", at_most, stop["time"])
        mean = (begin_speed**2 - v1**2) / (2 * braking_way)
        judged("mean_deceleration", "min_mean_deceleration", at_least, mean)
        if "high" in stop["marks"] and "low" in stop["marks"]:
            way = stop["marks"]["low"] - stop["marks"]["high"]
            developed = ((0.8 * v0) ** 2 - (0.1 * v0) ** 2) / (2 * way)
            judged("mean_fully_developed_deceleration", "min_mean_fully_developed_deceleration", at_least, developed)
        judged("peak_deceleration_minimum", "min_peak_deceleration", at_least, peak[0])
        judged("peak_deceleration", "max_deceleration", at_most, peak[0], "high")
        if system.mass and self.kind == "vehicle":
            judged("braking_ratio", "min_braking_ratio", at_least, sum(peak[1]) / (system.mass * G))
        return found

    def axle_checks(self, duty, require, acting, case, factors, system, peak):
        found, machine = [], self.machine
        no_axles = [] if "geometry" in machine else ["#/machine/geometry"]
        no_grip = [] if "adhesion" in machine else ["#/machine/adhesion"]
        if require.get("no_wheel_lock"):
            missing = self.knows_wheels()
            if missing:
                found.append((Check("adhesion", missing=missing), "high"))
            else:
                fraction = peak[5]
                pairs = [(fraction * d, system.adhesion * n) for d, n in zip(system.demand, peak[3]) if d > 0]
                worst = max(pairs, key=lambda pair: pair[0] / pair[1] if pair[1] > 0 else math.inf)
                found.append((at_most("adhesion", *worst), "high"))
        if require.get("no_rear_wheel_lift"):
            if no_axles:
                found.append((Check("rear_wheel_lift", missing=no_axles), "high"))
            else:
                base, height, front = system.geometry
                free = Exact(**{name: getattr(system, name) for name in System.__dataclass_fields__})
                free.lift = False
                ground = sum(free.balance(peak[5], peak[4])[1]) + system.resistance
                found.append((at_most("rear_wheel_lift", ground, system.normal * front / height), "high"))
        if require.get("front_locks_first"):
            missing = no_grip + no_axles
            if missing:
                found.append((Check("axle_lock_order", missing=missing), "worst"))
            else:
                ratio = self.lock_ratio(system, peak[4])
                mixed, _ = self.system(duty, acting, "low", factors, "high")
                ratio = max(ratio, self.lock_ratio(mixed, peak[4]))
                check = at_most("axle_lock_order", ratio, 1.0)
                check.tied_case = len(self.cases) > 1
                found.append((check, "worst"))
        return found

    def lock_ratio(self, system, speed):
        """Common factor at which the front axle reaches its limit over that of the rear, nothing capped."""
        base, height, front = system.geometry
        mu, total = system.adhesion, sum(system.demand)
        shares = [d / total for d in system.demand]
        carried = (system.normal * front - height * system.resistance) / base  # rear load without brake force
        k, retarding = 1 + system.rotating, system.retarding(speed)
        steep = shares[0] - mu * height / base
        ground_front = mu * (system.normal - carried) / steep if steep > 0 else math.inf
        ground_rear = mu * carried / (shares[1] + mu * height / base) if shares[1] > 0 else math.inf
        factor = lambda ground: (k * ground + (k - 1) * retarding) / total
        if math.isinf(ground_rear):
            return 0.0
        return factor(ground_front) / factor(ground_rear)

    # Sections 1 and 2: what presses.

    def press_checks(self, acting, fraction, moving=True):
        found = []
        for entry, _ in acting:
            at = entry.index
            limit = entry.lining.max_pressure
            if limit is None and moving:
                found.append((Check("pad_peak_pressure", missing=[entry.lining_pointer("max_pressure")], entry=at), "any"))
            elif limit is not None:
                pressure = entry.chain.pressed(fraction) / entry.pad.force_per_pressure
                found.append((at_most("pad_peak_pressure", pressure, limit, entry=at), "any"))
            given, values = entry.chain.given, entry.chain.at(fraction)
            master = given.get("master_cylinder", {})
            for code, holder, name in (("line_pressure", given, "max_line_pressure"), ("air_pressure", given, "max_air_pressure"),
                                       ("operator_force", given, "max_operator_force"), ("operator_force", master, "max_operator_force")):
                if name in holder:
                    found.append((at_most(code, values[code], si(holder[name]), entry=at), "any"))
            if "max_stroke" in master:
                found.append((self.stroke_check(entry, acting, fraction, si(master["max_stroke"])), "any"))
            if "max_release_pressure" in given:
                pressure = entry.chain.release_pressure()
                if pressure is None:
                    missing = [entry.pointer("actuation/release_piston_diameter")]
                    found.append((Check("release_pressure", missing=missing, entry=at), "any"))
                else:
                    found.append((at_most("release_pressure", pressure, si(given["max_release_pressure"]), entry=at), "any"))
        return found

    def stroke_check(self, entry, acting, fraction, limit):
        stroke, missing = 0.0, []
        for other, count in acting:
            if other is not entry and (entry.control is None or other.control != entry.control):
                continue
            volume = other.chain.volume(other.chain.at(fraction)["line_pressure"], other.faces)
            if volume is None:
                # Convention: a compliance would do as well; the clearance is named.
                missing.append(other.pointer("actuation/running_clearance"))
                continue
            master = other.chain.master
            stroke += master.get("lever_ratio", 1.0) * other.chain.operator_share * count * volume / circle(si(master["bore"]))
        if missing:
            return Check("operator_stroke", missing=missing, entry=entry.index)
        return at_most("operator_stroke", stroke, limit, entry=entry.index)

    # Section 5: energy and speed.

    def brake_course(self, entry, count, part, system, times, states):
        """Energy and power over time of one brake of an entry: its share of the axle's brake force by torque times speed."""
        shares = [p / d if d else 0.0 for p, d in zip(part, system.demand)]
        powers = [sum(b * s for b, s in zip(state[2], shares)) * state[4] / count for state in states]
        energy = float(np.sum(np.diff(times) * (np.array(powers[1:]) + np.array(powers[:-1])) / 2))
        return energy, powers

    def peak_power(self, count, part, system, stop):
        shares = [p / d if d else 0.0 for p, d in zip(part, system.demand)]
        return highest(stop, lambda s: sum(b * x for b, x in zip(s[2], shares)) * s[4])[0] / count

    def rubbing_checks(self, acting, speed, fraction):
        found = []
        for entry, _ in acting:
            turning, at = speed * entry.per_way, entry.index
            limit = entry.lining.max_rubbing_speed
            if limit is None:
                found.append((Check("rubbing_speed", missing=[entry.lining_pointer("max_rubbing_speed")], entry=at), "any"))
            else:
                found.append((at_most("rubbing_speed", turning * entry.pad.outer, limit, entry=at), "any"))
            limit = entry.lining.max_pressure_velocity
            if limit is not None:
                mean = entry.chain.pressed(fraction) / entry.pad.area
                found.append((at_most("pressure_velocity", mean * turning * entry.pad.arm, limit, entry=at), "any"))
        return found

    def flux_checks(self, entry, energy, peak_power):
        found, lining = [], entry.lining
        for code, value, limit in (("power_flux", peak_power, lining.max_power_flux), ("energy_flux", energy, lining.max_energy_flux)):
            if limit is not None:
                found.append((at_most(code, value / entry.faces / entry.pad.area, limit, entry=entry.index), "worst"))
        return found

    # Section 8: wear.

    def life_checks(self, entry, require, energy):
        if "min_pad_life_stops" not in require:
            return []
        missing = []
        if entry.lining.specific_wear is None:
            missing.append(entry.lining_pointer("specific_wear"))
        if entry.pad.wear_allowance is None:
            missing.append(entry.pointer("pad/wear_allowance"))
        if missing:
            return [(Check("pad_life", missing=missing, entry=entry.index), "worst")]
        life = entry.pad.area * entry.pad.wear_allowance / (entry.lining.specific_wear * energy / entry.faces)
        return [(at_least("pad_life", life, require["min_pad_life_stops"], entry=entry.index), "worst")]

    # Section 6: heat.

    def single(self, entry, duty, times, powers, energy):
        disc = entry.disc
        if disc is None or disc.mass is None:
            return None
        start = si(duty.get("start_temperature"), self.ambient)
        share = disc.share(start)
        end = disc.material.after(start, share * energy / disc.mass)
        rise = disc.surface_rise((start + end) / 2, times, [share * p for p in powers])
        return end, start + rise

    def repeated(self, entry, duty, times, powers, mean_speed, between, braking_time, start=None, count=None):
        """Highest bulk temperature and the surface peak over the stops; without a count: the steady interval."""
        disc = entry.disc
        if disc is None or disc.mass is None:
            return None
        start = si(duty.get("start_temperature"), self.ambient) if start is None else start
        interval = si(duty["interval"]) if "interval" in duty else 1 / (duty["stop_frequency"]["value"] / FACTORS[duty["stop_frequency"]["unit"][2:]])
        count = duty.get("stop_count") if count is None else count
        share = disc.share(start)
        power = lambda t: share * float(np.interp(t, times, powers))
        speeds = lambda v: (0.0 if self.kind == "shaft" else v, v * entry.per_way)

        def swing(trough):
            heated = disc.march(trough, braking_time, power, self.ambient, speeds(mean_speed), 160)
            cooled = disc.march(heated[-1], interval - braking_time, lambda t: 0.0, self.ambient, speeds(between), 60)
            return max(heated), heated[-1], cooled[-1]

        if count is None:
            trough = brentq(lambda t: swing(t)[2] - t, self.ambient, 2900.0, xtol=1e-6)
            top, end, _ = swing(trough)
            rise = disc.surface_rise((trough + end) / 2, times, [share * p for p in powers])
            self.left = trough
            return top, trough + rise, [top]
        # A row of equal stops runs monotonically to its steady interval: the hottest is the first or the last.
        trough, tops, surfaces = start, [], []
        for number in range(count):
            top, end, after = swing(trough)
            tops.append(top)
            if number in (0, count - 1):
                surfaces.append(trough + disc.surface_rise((trough + end) / 2, times, [share * p for p in powers]))
            trough = after
        self.left = trough
        return max(tops), max(surfaces)

    def heat_checks(self, entry, heat, heating):
        found, at, lining = [], entry.index, entry.lining
        disc_missing = [] if heat is not None else [entry.pointer("disc")]
        if entry.disc is not None and entry.disc.mass is None:
            disc_missing = [entry.pointer("disc/mass")]
        if heating and heat is not None:
            self.peaks[at] = max(heat[0], self.peaks[at] if self.peaks[at] is not None else -math.inf)
        missing = disc_missing + ([] if lining.max_temperature_continuous is not None else [entry.lining_pointer("max_temperature_continuous")])
        if missing:
            found.append((Check("disc_bulk_temperature", missing=missing, entry=at), "worst"))
        else:
            limits = [lining.max_temperature_continuous, entry.disc.material.max_temperature]
            limit = min(value for value in limits if value is not None)
            found.append((temperature("disc_bulk_temperature", heat[0], limit, self.ambient, entry=at), "worst"))
        missing = disc_missing + ([] if lining.max_temperature_peak is not None else [entry.lining_pointer("max_temperature_peak")])
        if missing:
            found.append((Check("surface_temperature", missing=missing, entry=at), "worst"))
        else:
            found.append((temperature("surface_temperature", heat[1], lining.max_temperature_peak, self.ambient, entry=at), "worst"))
        return found

    def descent(self, duty, acting, case, factors, start=None):
        speed, distance = si(duty["speed"]), si(duty["distance"])
        system, parts = self.system(duty, acting, case, factors)
        driving = max(-system.retarding(speed), 0.0)
        total = sum(system.demand)
        found, seconds = [], distance / speed
        hottest, hot = {}, [None] * len(self.entries)
        for (entry, count), part in zip(acting, parts):
            power = driving * speed * sum(part) / total / count
            energy = power * seconds
            # The energy flux of a lining is a limit for one stop; a descent is none.
            flux = [item for item in self.flux_checks(entry, energy, power) if item[0].code != "energy_flux"]
            for check, _ in flux:
                check.tied_case = len(self.cases) > 1  # the same at every friction but for how the brakes share it
            found += flux
            disc = entry.disc
            heat = None
            if disc is not None and disc.mass is not None:
                begin = si(duty.get("start_temperature"), self.ambient) if start is None else start[entry.index]
                entering = disc.share(begin) * power
                speeds = (0.0 if self.kind == "shaft" else speed, speed * entry.per_way)
                values = disc.march(begin, seconds, lambda t: entering, self.ambient, speeds, 400)
                end = values[-1]
                # The gradient through the disc follows the heat without delay: conductivity at the bulk temperature.
                k = disc.material.conductivity(max(values))
                surface = max(values) + entering / (disc.faces * disc.swept) * disc.depth / (3 * k)
                heat = max(values), surface
                hot[entry.index] = end
            found += self.heat_checks(entry, heat, True)
        hot_factors = [entry.lining.factor(hot[entry.index]) * f for entry, f in zip(self.entries, factors)]
        faded, _ = self.system(duty, acting, case, hot_factors)
        # The brakes hold the speed with the fraction that they need, most at the end.
        fraction = driving / sum(faded.demand)
        found += self.press_checks(acting, fraction)
        found += self.rubbing_checks(acting, speed, fraction)
        check = at_most("stops", driving, self.available(faded, speed))
        check.tied_hot = True  # convention: judged hot by its nature
        found.append((check, "low"))
        return found

    def procedure(self, duty, acting, case, factors):
        rows = tomllib.loads((DATA / "procedures.toml").read_text())["procedure"]
        row = next(row for row in rows if row["id"] == duty["id"])
        found = []
        for step in row["step"]:
            if step["kind"] == "descent":
                held = {"speed": as_measure(step["speed"]), "grade": as_measure(step["grade"]), "distance": as_measure(step["distance"])}
                found += self.descent({**duty, **held}, acting, case, factors)
                continue
            speed = printed(step["initial_speed"])[0]
            if "share_of_max_speed" in step:
                speed = min(speed, step["share_of_max_speed"] * si(duty["max_speed"]))
            final = printed(step["final_speed"])[0] if "final_speed" in step else speed * step["final_share"]
            measure = lambda value, unit: {"value": value, "unit": unit}
            stop = {"kind": "repeated_stops", "initial_speed": measure(speed, "m/s"), "final_speed": measure(final, "m/s"),
                    "deceleration": as_measure(step["deceleration"]), "interval": as_measure(step["spacing"]), "stop_count": step["count"]}
            assert len(row["step"]) == 1 and "then" not in step and stop["interval"]["unit"] == "s"
            found += self.stops({**duty, **stop}, acting, case, factors)
            # The deceleration of the cycle is what the brakes must give at least.
            missing, limit = self.knows_wheels(), si(stop["deceleration"])
            if missing:
                found.append((Check("peak_deceleration_minimum", missing=missing, limit=limit), "low"))
            else:
                system, _ = self.system(duty, acting, case, factors)
                found.append((at_least("peak_deceleration_minimum", system.balance(1.0, final)[0], limit), "low"))
        return found

    # Section 7: hold.

    def hold(self, duty, acting, case, factors):
        machine, found = self.machine, []
        system, parts = self.system(duty, acting, case, factors)
        slope = si(duty.get("grade"), 0.0)
        if self.kind == "vehicle":
            required = si(machine["mass"]) * G * abs(math.sin(slope))
        elif self.kind == "shaft":
            required = abs(si(machine.get("driving_torque"), 0.0))
        elif self.kind == "hoist":
            required = abs(si(machine["load_mass"]) - si(machine.get("counterweight_mass"), 0.0)) * G
        else:
            required = si(machine["material_mass"]) * G * abs(math.sin(si(machine["incline"])))
        wanted = duty.get("require", {}).get("min_holding_factor", 1.0)
        available = sum(system.demand)
        if required > 0:
            found.append((at_least("holding_torque", available / required, wanted), "low"))
        else:
            found.append((Check("holding_torque", None, wanted, 0.0), "low"))
        if self.kind == "vehicle":
            missing = self.knows_wheels()
            if missing:
                found.append((Check("holding_adhesion", missing=missing), "low"))
            else:
                normals = [system.normal, 0.0]
                if system.geometry:
                    base, height, front = system.geometry
                    # At rest the ground carries the weight along the slope: uphill (positive) loads the rear axle.
                    rear = (system.normal * front + height * system.mass * G * math.sin(slope)) / base
                    normals = [system.normal - rear, rear]
                held = sum(min(d, system.adhesion * n) for d, n in zip(system.demand, normals))
                if required > 0:
                    found.append((at_most("holding_adhesion", required, held), "low"))
                else:
                    found.append((Check("holding_adhesion", required, held, 0.0), "low"))
        return found + self.press_checks(acting, 1.0, moving=False)

    # Section 9: the answer.

    def answer(self, checks):
        waivers = self.request.get("waive", [])
        listed = []
        for check in checks:
            item = {"code": check.code, "duty_index": check.duty}
            if check.entry is not None:
                item["fitted_index"] = check.entry
            if check.missing:
                waived = any(w["check"] == check.code and w.get("duty_index", check.duty) == check.duty
                             and w.get("fitted_index", check.entry) == check.entry for w in waivers)
                listed.append(item | {"status": "waived" if waived else "not_assessed", "missing": check.missing})
                continue
            over = not check.met
            near = check.utilization is not None and check.utilization >= self.near
            item["status"] = "not_met" if over else "near_limit" if near else "met"
            if check.case and not check.tied_case:
                item["friction_case"] = check.case
            if not check.tied_hot:
                item["hot"] = check.hot
            for name in ("actual", "limit", "utilization"):
                if getattr(check, name) is not None:
                    item[name] = getattr(check, name)
            listed.append(item)
        statuses = {item["status"] for item in listed}
        verdict = "fail" if "not_met" in statuses else "incomplete" if "not_assessed" in statuses else "pass"
        answer = {"verdict": verdict, "checks": listed}
        if self.open:
            answer["open_duties"] = sorted(self.open)
        bare = [item for item in listed if item["status"] == "not_met" and "utilization" not in item]
        rated = [item for item in listed if "utilization" in item]
        if bare:
            answer["governing"] = {n: bare[0][n] for n in ("code", "duty_index", "fitted_index") if n in bare[0]}
        elif rated:
            top = max(item["utilization"] for item in rated)
            near = lambda item: 1e-3 if "temperature" in item["code"] else 1e-6
            first = [item for item in rated if item["utilization"] >= top * (1 - near(item))]
            if len(first) == 1:
                answer["governing"] = {n: first[0][n] for n in ("code", "duty_index", "fitted_index") if n in first[0]}
        return answer


def as_measure(text):
    number, unit = text.split(" ", 1)
    return {"value": float(number), "unit": unit}


def corpus(wanted):
    """Works out the requests of the groups named (all if none) and keeps what is known of the others."""
    target = HERE / "spec_check_expected.json"
    groups = {}
    for path in sorted((HERE / "spec_check").glob("*.json")):
        if not wanted or path.stem in wanted:
            cases = json.loads(path.read_text())["cases"]
            groups[path.stem] = [{"name": case["name"], **SpecCheck(case["request"]).run()} for case in cases]
    known = json.loads(target.read_text()) if wanted else {}
    groups = known | groups
    groups["note"] = "Written by spec_check.py --corpus. Coherent SI, temperatures in degC."
    lines = [f"{json.dumps(group)}: [\n" + ",\n".join(json.dumps(case) for case in cases) + "\n]" for group, cases in groups.items() if group != "note"]
    target.write_text(f'{{"note": {json.dumps(groups["note"])},\n' + ",\n".join(lines) + "}\n")


def main():
    if "--corpus" in sys.argv:
        corpus(sys.argv[sys.argv.index("--corpus") + 1 :])
    else:
        print(json.dumps(SpecCheck(json.load(sys.stdin)).run(), indent=1))


if __name__ == "__main__":
    main()
