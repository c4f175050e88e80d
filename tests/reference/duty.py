"""Writes duty.json: duties with fade, followed by a general ODE solver instead of the service's own steps.

Motion, bulk temperature and slab are one system of differential equations, solved by scipy's implicit Runge-Kutta
method (Radau) to a relative tolerance of 1e-8. Forces are balanced by bisection, air and materials are typed in
anew from their sources, the bulk follows dT/dt = (P - h(T) A (T - T_a))/(m c(T)), and the slab is a Fourier series
of the deviation from its mean (the eigenfunctions of a plate with insulated faces, 60 of them, the rest of the
series quasi-steady), with conductivity and specific heat held within a stop at the mean of its bulk temperatures.

What the requests mean is read from the requests. What is documented and not physics, the script follows: cooling
during a stop at the mean of its first and last speed (with fade) or at its mean speed over time (without), at the
speed of the event elsewhere; the slab's specific heat and conductivity held.

All data are invented for the test, but for the materials, which are those of the catalog.

Needs numpy and scipy. Run: python tests/reference/duty.py > tests/reference/duty.json
"""

import json
import math

import numpy as np
from scipy.integrate import quad, solve_ivp
from scipy.optimize import brentq

GRAVITY = 9.80665
ZERO_CELSIUS = 273.15
MODES = 60
ORDER = np.arange(1, MODES + 1)
TAIL = math.pi**2 / 6.0 - float(np.sum(1.0 / ORDER**2))
UNITS = {
    "mm": 1e-3, "m": 1.0, "km": 1e3, "km/h": 1.0 / 3.6, "m/s": 1.0, "kg": 1.0, "N": 1.0, "kN": 1e3, "s": 1.0,
    "kg.m2": 1.0, "N.m": 1.0, "rpm": math.pi / 30.0, "rad/s": 1.0, "m2": 1.0, "kg/m3": 1.0, "J/(kg.K)": 1.0,
    "W/(m.K)": 1.0, "W/(m2.K)": 1.0, "m/s2": 1.0, "rad/s2": 1.0, "deg": math.pi / 180.0, "mm3/MJ": 1e-15,
}


def si(measure, default=None):
    if measure is None:
        return default
    value, unit = measure["value"], measure["unit"]
    if unit == "degC":
        return value + ZERO_CELSIUS
    if unit == "%":
        return math.atan(value / 100.0)
    return value * UNITS[unit]


# Materials of the catalog, in degC. EN 1561 Annex A: mean specific heats from 20 degC, so c = d/dt [m(t) (t - 20)].
def iron_250_heat(t):
    if t < 200.0:
        return 460.0
    if t >= 600.0:
        return 535.0
    slope = 75.0 / 400.0
    return 460.0 + slope * (t - 200.0) + slope * (t - 20.0)


def iron_250_conductivity(t):
    return float(np.interp(t, [100, 200, 300, 400, 500], [48.5, 47.5, 46.5, 45.0, 44.5]))


# EN 1993-1-2:2005, 3.4.1 and Annex C.
def steel_heat(t):
    t = max(t, 20.0)
    if t < 600.0:
        return 425.0 + 0.773 * t - 1.69e-3 * t**2 + 2.22e-6 * t**3
    return 666.0 + 13002.0 / (738.0 - t)


def stainless_heat(t):
    t = min(max(t, 20.0), 1200.0)
    return 450.0 + 0.280 * t - 2.91e-4 * t**2 + 1.34e-7 * t**3


MATERIALS = {
    "gray_cast_iron": (7200.0, lambda t: 490.0, lambda t: 46.0, 0.55),
    "gray_cast_iron_250": (7200.0, iron_250_heat, iron_250_conductivity, 0.55),
    "carbon_steel": (7850.0, steel_heat, lambda t: 54.0 - 0.0333 * max(t, 20.0), 0.7),
    "stainless_steel_austenitic": (7850.0, stainless_heat, lambda t: 14.6 + 1.27e-2 * max(t, 20.0), 0.4),
}


def material(given):
    density, heat, conductivity, emissivity = MATERIALS.get(given.get("id"), (None, None, None, 0.55))
    density = si(given.get("density"), density)
    if "specific_heat" in given:
        heat = lambda t, value=si(given["specific_heat"]): value
    if "conductivity" in given:
        conductivity = lambda t, value=si(given["conductivity"]): value
    return density, heat, conductivity, given.get("emissivity", emissivity)


def air(temperature):
    """U.S. Standard Atmosphere 1976: conductivity and kinematic viscosity at 101 325 Pa."""
    viscosity = 1.458e-6 * temperature**1.5 / (temperature + 110.4)
    density = 101325.0 / (287.053 * temperature)
    conductivity = 2.64638e-3 * temperature**1.5 / (temperature + 245.4 * 10.0 ** (-12.0 / temperature))
    return conductivity, viscosity / density


class Entry:
    """One fitted entry: its torque, its fade, and the disc of one of its brakes."""

    def __init__(self, given, machine, ambient, start):
        self.count = given.get("count", 1)
        self.axle = given.get("axle")
        self.ratio = given.get("speed_ratio", 1.0)
        self.disc = None
        self.fade = []
        radius = si(given.get("rolling_radius"), machine.radius)
        self.per_way = machine.per_way(radius) * self.ratio
        if "torque" in given:
            self.force = si(given["torque"]) * self.per_way * self.count
            return
        brake = given["brake"]
        pad, lining, disc = brake["pad"], brake["lining"], brake["disc"]
        inner, outer = si(pad["inner_radius"]), si(pad["outer_radius"])
        faces = brake.get("faces", 2)
        torque = faces * lining["friction"]["nominal"] * si(brake["actuation"]["force"]) * 0.5 * (inner + outer)
        self.force = torque * self.per_way * self.count
        self.fade = [(si(point["temperature"]), point["factor"]) for point in lining.get("fade", [])]
        density, self.heat, self.conductivity, emissivity = material(disc["material"])
        swept = math.pi * (outer**2 - inner**2)
        thickness = si(disc["thickness"])
        self.density = density
        self.mass = si(disc.get("mass"), swept * thickness * density)
        self.depth = self.mass / (faces * density * swept)
        self.area = faces * swept + 2.0 * math.pi * outer * thickness
        self.radius = si(disc["outer_radius"])
        self.cooling = disc.get("cooling")
        self.emissivity = emissivity
        self.ambient = ambient
        brakes = given.get("brakes_per_disc", 1)
        share = 1.0
        if "conductivity" in lining:
            pads = 0.5 * (outer**2 - inner**2) * si(pad["angle"]) * brakes
            pad_effusivity = math.sqrt(si(lining["conductivity"]) * si(lining["density"]) * si(lining["specific_heat"]))
            celsius = start - ZERO_CELSIUS
            disc_effusivity = math.sqrt(self.conductivity(celsius) * density * self.heat(celsius))
            share = 1.0 / (1.0 + pads / swept * pad_effusivity / disc_effusivity)
        self.into_disc = share * brakes
        self.flux = 1.0 / (faces * swept)
        self.disc = disc
        self.bulk = start
        self.modes = np.zeros(MODES)
        self.hold(start)

    def hold(self, temperature):
        """Holds the slab's properties at a temperature."""
        celsius = temperature - ZERO_CELSIUS
        self.k, self.rho_c = self.conductivity(celsius), self.density * self.heat(celsius)
        self.rates = self.k / self.rho_c * (ORDER * math.pi / self.depth) ** 2

    def expect(self, energy):
        """Holds them at the mean of the bulk temperature and that after an energy of one brake, without cooling."""
        target = energy * self.into_disc / self.mass
        gain = lambda end: quad(self.heat, self.bulk - ZERO_CELSIUS, end - ZERO_CELSIUS, limit=200)[0] - target
        end = brentq(gain, self.bulk, self.bulk + target / 200.0 + 1.0)
        self.hold(0.5 * (self.bulk + end))

    def coefficient(self, temperature, way_speed, shaft_speed):
        if "coefficient" in self.cooling:
            return si(self.cooling["coefficient"])
        conductivity, viscosity = air(0.5 * (temperature + self.ambient))
        if self.cooling["model"] == "rotating_disc":
            length, reynolds = self.radius, shaft_speed * self.radius**2 / viscosity
            nusselt = 0.36 * math.sqrt(reynolds)
            if reynolds > 2.4e5:
                step = 0.015 * 2.4e5**0.8 - 0.36 * math.sqrt(2.4e5)
                nusselt = 0.015 * reynolds**0.8 - step * math.sqrt(2.4e5 / reynolds)
        else:
            length, reynolds = 2.0 * self.radius, way_speed * 2.0 * self.radius / viscosity
            nusselt = 0.70 * reynolds**0.55 if reynolds <= 2.4e5 else 0.04 * reynolds**0.8
        convection = max(nusselt * conductivity / length, 5.0)
        radiation = self.emissivity * 5.670374419e-8 * (temperature**2 + self.ambient**2) * (temperature + self.ambient)
        return convection + radiation

    def loss(self, temperature, speeds):
        if self.cooling is None:
            return 0.0
        return self.coefficient(temperature, *speeds) * self.area * (temperature - self.ambient)

    def warming(self, temperature, power, speeds):
        """dT/dt of the bulk under the power of one brake."""
        capacity = self.mass * self.heat(temperature - ZERO_CELSIUS)
        return (power * self.into_disc - self.loss(temperature, speeds)) / capacity

    def surface(self, bulk, modes, power):
        flux = power * self.into_disc * self.flux
        return bulk + float(np.sum(modes)) + flux * self.depth / self.k * 2.0 / math.pi**2 * TAIL

    def factor(self, surface):
        if not self.fade:
            return 1.0
        temperatures, factors = zip(*self.fade)
        return float(np.interp(surface, temperatures, factors))


class Machine:
    def __init__(self, given):
        self.given, self.kind = given, given["kind"]
        self.radius = si(given.get("rolling_radius"))
        self.is_shaft = self.kind == "shaft"

    def per_way(self, radius):
        given = self.given
        if self.kind == "vehicle":
            return 1.0 / radius
        if self.kind == "shaft":
            return 1.0
        if self.kind == "hoist":
            return given.get("gear_ratio", 1.0) * given.get("falls", 1.0) / si(given["drum_radius"])
        return given.get("gear_ratio", 1.0) / si(given["pulley_radius"])

    def inertia(self):
        """Translating mass (or inertia), and the factor for rotating masses."""
        given = self.given
        if self.kind == "vehicle":
            return si(given["mass"]), given.get("rotating_mass_factor", 1.0)
        if self.kind == "shaft":
            return si(given["inertia"]), 1.0
        turning = si(given.get("inertia"), 0.0) * self.per_way(None) ** 2
        if self.kind == "hoist":
            return si(given["load_mass"]) + si(given.get("counterweight_mass"), 0.0) + turning, 1.0
        return si(given["material_mass"]) + si(given.get("belt_mass"), 0.0) + turning, 1.0

    def retarding(self, event, speed):
        given = self.given
        if self.kind == "vehicle":
            slope = si(event.get("grade"), 0.0)
            weight = si(given["mass"]) * GRAVITY
            drag = 0.5 * si(given.get("air_density"), 1.225) * si(given.get("drag_area"), 0.0) * speed**2
            rolling = given.get("rolling_resistance", 0.0) * weight * math.cos(slope)
            return weight * math.sin(slope) + rolling + drag - si(event.get("drive_force"), 0.0)
        if self.kind == "shaft":
            return -si(given.get("driving_torque"), 0.0)
        efficiency = given.get("efficiency", 1.0)
        if self.kind == "hoist":
            driving = (si(given["load_mass"]) - si(given.get("counterweight_mass"), 0.0)) * GRAVITY
            driving = driving if event["direction"] == "lowering" else -driving
            resistance = 0.0
        else:
            incline, load = si(given["incline"]), si(given["material_mass"])
            driving = -load * GRAVITY * math.sin(incline)
            resistance = given.get("resistance", 0.0) * GRAVITY * (load * math.cos(incline) + si(given.get("belt_mass"), 0.0))
        return resistance - (driving * efficiency if driving >= 0.0 else driving / efficiency)

    def caps(self, event):
        """What each axle holds as a function of the total ground force; none where the tires do not limit."""
        given = self.given
        if self.kind != "vehicle" or "adhesion" not in given or "geometry" not in given:
            return None
        slope = si(event.get("grade"), 0.0)
        normal = si(given["mass"]) * GRAVITY * math.cos(slope)
        rolling = given.get("rolling_resistance", 0.0) * normal
        base = given["geometry"]
        length, height = si(base["wheelbase"]), si(base["center_of_gravity_height"])
        front = si(base["front_axle_to_center_of_gravity"])
        def limits(total):
            rear = (normal * front - height * (total + rolling)) / length
            return given["adhesion"] * (normal - rear), given["adhesion"] * rear
        return limits

    def balance(self, event, speed, full, fraction):
        """Deceleration and brake force of each axle; `full` is the hot force of each axle at full application."""
        mass, factor = self.inertia()
        retarding = self.retarding(event, speed)
        share = [part / sum(full) for part in full]
        def ground(total):
            inert = [part * (factor - 1.0) * (total + retarding) for part in share]
            forces = [fraction * part - taken for part, taken in zip(full, inert)]
            limits = self.caps(event)
            if limits is not None:
                forces = [min(force, limit) for force, limit in zip(forces, limits(total))]
            return forces, inert
        span = 2.0 * (sum(full) + abs(retarding)) * factor + 1.0
        total = brentq(lambda total: sum(ground(total)[0]) - total, -span, span, xtol=1e-10 * span, rtol=1e-14)
        forces, inert = ground(total)
        return (total + retarding) / mass, [force + taken for force, taken in zip(forces, inert)]

    def fraction_for(self, event, speed, full, wanted):
        """The fraction that gives a deceleration, at most 1."""
        gap = lambda fraction: self.balance(event, speed, full, fraction)[0] - wanted
        if gap(0.0) >= 0.0:
            return 0.0
        return 1.0 if gap(1.0) < 0.0 else brentq(gap, 0.0, 1.0, xtol=1e-13)


class Duty:
    def __init__(self, request):
        self.request = request
        self.machine = Machine(request["machine"])
        self.ambient = si(request.get("ambient_temperature"), 293.15)
        start = si(request.get("start_temperature"), self.ambient)
        self.entries = [Entry(given, self.machine, self.ambient, start) for given in request["fitted"]]
        self.fades = any(entry.fade for entry in self.entries)
        self.has_axles = "geometry" in request["machine"]
        self.time = 0.0
        self.longest = (0.0, 0.0)
        self.energy = [0.0] * len(self.entries)
        self.peak_bulk = [start] * len(self.entries)
        self.peak_surface = [start] * len(self.entries)
        self.lowest = [entry.factor(start) if entry.disc else 1.0 for entry in self.entries]

    def axle_forces(self, factors):
        """Hot force of each entry on each axle."""
        split = {"front": (1.0, 0.0), "rear": (0.0, 1.0), "all": (0.5, 0.5), None: (1.0, 0.0)}
        own = [split[entry.axle] if self.has_axles else (1.0, 0.0) for entry in self.entries]
        return [[entry.force * factor * part for part in parts] for entry, factor, parts in zip(self.entries, factors, own)]

    def powers(self, hot, brake, speed):
        """Power of one brake of each entry."""
        full = [sum(forces[axle] for forces in hot) for axle in (0, 1)]
        parts = []
        for entry, forces in zip(self.entries, hot):
            work = sum(brake[axle] * forces[axle] / full[axle] if full[axle] > 0.0 else 0.0 for axle in (0, 1))
            parts.append(work * speed / entry.count)
        return parts

    def speeds(self, entry, speed):
        return (0.0 if self.machine.is_shaft else speed, speed * entry.per_way)

    def idle(self, duration, speed):
        if duration <= 0.0:
            return
        for entry in self.entries:
            if entry.disc is None:
                continue
            entry.hold(entry.bulk)
            rate = lambda t, y: [entry.warming(y[0], 0.0, self.speeds(entry, speed))]
            if entry.cooling is not None:
                entry.bulk = solve_ivp(rate, (0, duration), [entry.bulk], method="Radau", rtol=1e-10, atol=1e-9).y[0, -1]
            entry.modes = entry.modes * np.exp(-entry.rates * duration)
        self.time += duration

    def state(self):
        return [value for entry in self.entries if entry.disc for value in (entry.bulk, *entry.modes)]

    def thermal(self, y, at):
        return y[at], y[at + 1 : at + 1 + MODES]

    def braked(self, duration, state, forces_at, cooled_at, until=None):
        """Solves motion and heat together while the brakes act; `forces_at(time, speed, hot)` gives the balance."""
        head = 2 + len(self.entries)
        discs = [index for index, entry in enumerate(self.entries) if entry.disc]
        def hot_powers(t, y):
            # The surface depends on the power through the tail of the series, and the power on the surface.
            powers = [0.0] * len(self.entries)
            for _ in range(3):
                factors = [1.0] * len(self.entries)
                for order, index in enumerate(discs):
                    bulk, modes = self.thermal(y, head + order * (MODES + 1))
                    factors[index] = self.entries[index].factor(self.entries[index].surface(bulk, modes, powers[index]))
                hot = self.axle_forces(factors)
                deceleration, brake = forces_at(t, y[0], hot)
                powers = self.powers(hot, brake, y[0])
            return deceleration, powers, factors
        def rate(t, y):
            deceleration, powers, _ = hot_powers(t, y)
            out = [-deceleration, y[0], *powers]
            for order, index in enumerate(discs):
                entry = self.entries[index]
                bulk, modes = self.thermal(y, head + order * (MODES + 1))
                out.append(entry.warming(bulk, powers[index], self.speeds(entry, cooled_at)))
                flux = powers[index] * entry.into_disc * entry.flux
                out.extend(-entry.rates * modes + 2.0 * flux / (entry.rho_c * entry.depth))
            return np.array(out)
        events = None
        if until is not None:
            events = lambda t, y: y[0] - until
            events.terminal, events.direction = True, -1
        scale = np.array([1.0, 10.0] + [1e4] * len(self.entries) + [10.0] * (len(state) - head))
        solved = solve_ivp(rate, (0.0, duration), state, method="Radau", rtol=1e-8, atol=1e-8 * scale, events=events, dense_output=True)
        assert solved.success
        end = solved.t[-1]
        for t in np.linspace(0.0, end, 161):
            y = solved.sol(t)
            _, powers, factors = hot_powers(t, y)
            for order, index in enumerate(discs):
                bulk, modes = self.thermal(y, head + order * (MODES + 1))
                surface = self.entries[index].surface(bulk, modes, powers[index])
                self.peak_bulk[index] = max(self.peak_bulk[index], bulk)
                self.peak_surface[index] = max(self.peak_surface[index], surface)
                self.lowest[index] = min(self.lowest[index], factors[index])
        return end, solved.y[:, -1], bool(events is not None and len(solved.t_events[0]))

    def leave(self, state):
        """Takes energies and temperatures over from the solver."""
        head = 2 + len(self.entries)
        for index in range(len(self.entries)):
            self.energy[index] += state[2 + index]
        discs = [entry for entry in self.entries if entry.disc]
        for order, entry in enumerate(discs):
            bulk, modes = self.thermal(state, head + order * (MODES + 1))
            entry.bulk, entry.modes = float(bulk), np.array(modes)

    def cold_factors(self):
        return [entry.factor(entry.surface(entry.bulk, entry.modes, 0.0)) if entry.disc else 1.0 for entry in self.entries]

    def stop(self, event):
        word = "rotational_" if self.machine.is_shaft else ""
        initial, final = si(event[f"initial_{word}speed"]), si(event.get(f"final_{word}speed"), 0.0)
        response = event.get("response", {})
        reaction, dead, build_up = (si(response.get(name), 0.0) for name in ("reaction_time", "dead_time", "build_up_time"))
        held = si(event.get("angular_deceleration" if self.machine.is_shaft else "deceleration"))
        mass, factor = self.machine.inertia()
        # Dead time: outside forces only, without friction of the brakes.
        free = lambda t, y: [-self.machine.retarding(event, y[0]) / (mass * factor), y[0]]
        at_end = lambda t, y: y[0] - final
        at_end.terminal, at_end.direction = True, -1
        speed, way, gone = initial, initial * reaction, reaction
        if dead > 0.0:
            solved = solve_ivp(free, (0, dead), [speed, way], rtol=1e-11, atol=1e-11, events=at_end)
            speed, way = solved.y[:, -1]
            gone += solved.t[-1]
            if len(solved.t_events[0]):
                self.idle(gone, initial)
                self.longest = max(self.longest, (way, gone))
                return
        self.idle(gone, initial)
        hot = self.axle_forces(self.cold_factors())
        full = [sum(forces[axle] for forces in hot) for axle in (0, 1)]
        applied = self.machine.fraction_for(event, speed, full, held) if held else 1.0
        def forces_at(fraction_at):
            def balance(t, v, hot):
                full = [sum(forces[axle] for forces in hot) for axle in (0, 1)]
                return self.machine.balance(event, v, full, fraction_at(t, v, full))
            return balance
        rising = lambda t, v, full: applied * t / build_up
        steady = lambda t, v, full: self.machine.fraction_for(event, v, full, held) if held else 1.0
        def follow(cooled_at, record):
            state = np.array([speed, way] + [0.0] * len(self.entries) + (self.state() if record else []))
            kept = None if record else [self.entries, self.peak_bulk[:], self.peak_surface[:], self.lowest[:]]
            lasted, over = 0.0, False
            if build_up > 0.0:
                lasted, state, over = self.braked(build_up, state, forces_at(rising), cooled_at, final)
            if not over:
                more, state, over = self.braked(3600.0, state, forces_at(steady), cooled_at, final)
                lasted += more
            assert over
            return lasted, state
        if self.fades:
            cooled_at = 0.5 * (speed + final)
            energy = 0.5 * mass * factor * (speed**2 - final**2)
            parts = self.powers(hot, full, 1.0)
            for entry, part in zip(self.entries, parts):
                if entry.disc:
                    entry.expect(energy * part / sum(full))
        else:
            # Friction does not depend on temperature: motion first, then heat with its mean speed.
            discs, self_entries = [entry.disc for entry in self.entries], self.entries
            for entry in self_entries:
                entry.disc = None
            lasted, state = follow(0.0, False)
            for entry, disc in zip(self_entries, discs):
                entry.disc = disc
            cooled_at = (state[1] - way) / lasted
            for index, entry in enumerate(self.entries):
                if entry.disc:
                    entry.expect(state[2 + index])
        lasted, state = follow(cooled_at, True)
        self.leave(state)
        self.time += lasted
        self.longest = max(self.longest, (float(state[1]), gone + lasted))

    def descent(self, event):
        speed, distance = si(event["speed"]), si(event["distance"])
        driving = -self.machine.retarding(event, speed)
        if driving <= 0.0:
            self.idle(distance / speed, speed)
            return
        hot = self.axle_forces(self.cold_factors())
        full = [sum(forces[axle] for forces in hot) for axle in (0, 1)]
        for entry, part in zip(self.entries, self.powers(hot, full, 1.0)):
            if entry.disc:
                entry.expect(driving * distance * part / sum(full))
        def hold(t, v, hot):
            full = [sum(forces[axle] for forces in hot) for axle in (0, 1)]
            assert sum(full) > driving
            return 0.0, [driving * part / sum(full) for part in full]
        state = np.array([speed, 0.0] + [0.0] * len(self.entries) + self.state())
        lasted, state, _ = self.braked(distance / speed, state, hold, speed)
        self.leave(state)
        self.time += lasted

    def follow(self):
        for _ in range(self.request.get("repeats", 1)):
            for event in self.request["events"]:
                kind = event["kind"]
                if kind == "stop":
                    self.stop(event)
                elif kind == "descent":
                    self.descent(event)
                elif kind == "stand":
                    self.idle(si(event["time"]), 0.0)
                else:
                    speed = si(event.get("speed") or event.get("rotational_speed"))
                    self.idle(si(event.get("time"), None) or si(event["distance"]) / speed, speed)
        fitted = []
        for index, entry in enumerate(self.entries):
            answer = {"energy": self.energy[index], "lowest_friction_factor": self.lowest[index]}
            if entry.disc:
                answer |= {
                    "peak_bulk": self.peak_bulk[index] - ZERO_CELSIUS,
                    "peak_surface": self.peak_surface[index] - ZERO_CELSIUS,
                    "end_bulk": entry.bulk - ZERO_CELSIUS,
                }
            fitted.append(answer)
        return {"duration": self.time, "longest": self.longest[0], "longest_time": self.longest[1], "fitted": fitted}


def q(value, unit):
    return {"value": value, "unit": unit}


def fade(*points):
    return [{"temperature": q(temperature, "degC"), "factor": factor} for temperature, factor in points]


def brake(force, radii, outer, thickness, disc_material, cooling, friction, points, **more):
    lining = {"friction": {"nominal": friction}}
    if points:
        lining["fade"] = fade(*points)
    lining |= more.get("lining", {})
    disc = {
        "material": disc_material, "outer_radius": q(outer, "mm"), "inner_radius": q(radii[0] - 10, "mm"),
        "thickness": q(thickness, "mm"), "construction": "solid",
    }
    if cooling is not None:
        disc["cooling"] = cooling
    disc |= more.get("disc", {})
    pad = {"shape": "annular_sector", "inner_radius": q(radii[0], "mm"), "outer_radius": q(radii[1], "mm"), "angle": q(60, "deg")}
    return {"pad": pad, "lining": lining, "disc": disc, "actuation": {"kind": "clamp_force", "force": q(force, "N")}}


def delays(reaction, dead, build_up):
    return {"reaction_time": q(reaction, "s"), "dead_time": q(dead, "s"), "build_up_time": q(build_up, "s")}


OWN = {"density": q(7200, "kg/m3"), "specific_heat": q(500, "J/(kg.K)"), "conductivity": q(48, "W/(m.K)")}
ORGANIC = ((100, 1.0), (300, 0.85), (450, 0.6))
SINTER = ((150, 0.95), (350, 1.05), (600, 0.8))
GIVEN = lambda value: {"coefficient": q(value, "W/(m2.K)")}
DISC = {"model": "rotating_disc"}
STREAM = {"model": "airstream"}
AXLES = {"wheelbase": q(2600, "mm"), "center_of_gravity_height": q(550, "mm"), "front_axle_to_center_of_gravity": q(1150, "mm")}


def vehicle(mass, **more):
    return {"kind": "vehicle", "mass": q(mass, "kg"), "rolling_radius": q(310, "mm")} | more


def stop(initial, final=0.0, **more):
    return {"kind": "stop", "initial_speed": q(initial, "km/h"), "final_speed": q(final, "km/h")} | more


def cases():
    front = brake(9000, (85, 130), 135, 22, OWN, GIVEN(45), 0.40, ORGANIC)
    rear = brake(4500, (85, 125), 130, 10, OWN, GIVEN(35), 0.38, SINTER)
    yield "a car with two kinds of brakes that fade differently", {
        "machine": vehicle(1500, rotating_mass_factor=1.05, rolling_resistance=0.012, drag_area=q(0.7, "m2")),
        "fitted": [{"brake": front, "count": 2, "axle": "front"}, {"brake": rear, "count": 2, "axle": "rear"}],
        "events": [stop(110, response=delays(0.5, 0.1, 0.3)), {"kind": "run", "speed": q(80, "km/h"), "time": q(35, "s")}],
        "repeats": 6,
    }
    iron = brake(11000, (90, 135), 140, 20, {"id": "gray_cast_iron_250"}, DISC, 0.42, ORGANIC)
    yield "snubs of iron discs that turn in still air", {
        "machine": vehicle(1700, rolling_resistance=0.01),
        "fitted": [{"brake": iron, "count": 4, "axle": "all"}],
        "events": [stop(120, 60, response=delays(0.0, 0.0, 0.2)), {"kind": "run", "speed": q(90, "km/h"), "distance": q(1.0, "km")}],
        "repeats": 8,
        "ambient_temperature": q(10, "degC"), "start_temperature": q(60, "degC"),
    }
    strong = brake(26000, (85, 130), 135, 24, OWN, GIVEN(50), 0.40, ((100, 1.0), (350, 0.7)))
    weak = brake(9000, (85, 125), 130, 10, {"id": "gray_cast_iron"}, GIVEN(40), 0.40, ((60, 1.0), (250, 0.5)))
    yield "tires at their limit while the brakes fade, downhill", {
        "machine": vehicle(1450, rotating_mass_factor=1.06, rolling_resistance=0.012, adhesion=0.65, geometry=AXLES),
        "fitted": [{"brake": strong, "count": 2, "axle": "front"}, {"brake": weak, "count": 2, "axle": "rear"}],
        "events": [stop(140, grade=q(-5, "%"), response=delays(0.3, 0.1, 0.4)), {"kind": "run", "speed": q(100, "km/h"), "time": q(20, "s")}],
        "repeats": 4,
    }
    steel = brake(12000, (80, 120), 125, 12, {"id": "carbon_steel"}, DISC, 0.40, ORGANIC)
    yield "an operator who holds a deceleration with fading brakes on steel discs", {
        "machine": vehicle(1300, rolling_resistance=0.015, drag_area=q(0.9, "m2")),
        "fitted": [{"brake": steel, "count": 4, "axle": "all"}],
        "events": [stop(100, 10, deceleration=q(3.0, "m/s2"), response=delays(0.2, 0.05, 0.5)), {"kind": "run", "speed": q(60, "km/h"), "time": q(25, "s")}],
        "repeats": 5,
    }
    bright = brake(5000, (90, 130), 140, 14, {"id": "gray_cast_iron_250"}, GIVEN(60), 0.38, ((80, 1.0), (250, 0.8), (400, 0.5)))
    stainless = brake(7000, (75, 115), 120, 12, {"id": "stainless_steel_austenitic"}, GIVEN(45), 0.45, SINTER)
    yield "a descent with an engine brake, then a stop with hot brakes", {
        "machine": vehicle(1800, rolling_resistance=0.01),
        "fitted": [{"brake": bright, "count": 2, "axle": "front"}, {"brake": stainless, "count": 2, "axle": "rear"}],
        "events": [
            {"kind": "descent", "speed": q(50, "km/h"), "distance": q(2.5, "km"), "grade": q(-9, "%"), "drive_force": q(-400, "N")},
            stop(50, grade=q(-9, "%"), response=delays(0.4, 0.1, 0.3)),
            {"kind": "stand", "time": q(120, "s")},
        ],
        "repeats": 2,
    }
    crane = brake(6000, (110, 170), 180, 16, {"id": "carbon_steel"}, DISC, 0.35, ((60, 1.0), (200, 0.8), (350, 0.6)))
    yield "a hoist with counterweight that lowers and raises", {
        "machine": {
            "kind": "hoist", "load_mass": q(6000, "kg"), "counterweight_mass": q(1500, "kg"), "drum_radius": q(300, "mm"),
            "falls": 2, "gear_ratio": 22, "efficiency": 0.9, "inertia": q(6, "kg.m2"),
        },
        "fitted": [{"brake": crane, "count": 2, "brakes_per_disc": 2}],
        "events": [
            {"kind": "run", "speed": q(1.2, "m/s"), "time": q(12, "s")},
            {"kind": "stop", "initial_speed": q(1.2, "m/s"), "direction": "lowering", "response": delays(0.1, 0.15, 0.3)},
            {"kind": "stand", "time": q(20, "s")},
            {"kind": "run", "speed": q(0.8, "m/s"), "time": q(10, "s")},
            {"kind": "stop", "initial_speed": q(0.8, "m/s"), "direction": "raising", "response": delays(0.1, 0.05, 0.3)},
            {"kind": "stand", "time": q(15, "s")},
        ],
        "repeats": 10,
    }
    spindle = brake(4000, (100, 150), 160, 12, OWN, GIVEN(30), 0.40, ((50, 1.0), (150, 0.75), (300, 0.6)),
                    lining={"conductivity": q(1.2, "W/(m.K)"), "density": q(2300, "kg/m3"), "specific_heat": q(1000, "J/(kg.K)")})
    yield "a driven shaft with a fast brake that fades and one of known torque", {
        "machine": {"kind": "shaft", "inertia": q(60, "kg.m2"), "driving_torque": q(80, "N.m")},
        "fitted": [{"brake": spindle, "speed_ratio": 1.5}, {"torque": q(150, "N.m")}],
        "events": [
            {"kind": "run", "rotational_speed": q(1200, "rpm"), "time": q(30, "s")},
            {"kind": "stop", "initial_rotational_speed": q(1200, "rpm"), "final_rotational_speed": q(100, "rpm"), "response": delays(0.0, 0.2, 0.4)},
            {"kind": "stop", "initial_rotational_speed": q(900, "rpm"), "angular_deceleration": q(8, "rad/s2"), "response": delays(0.0, 0.0, 0.4)},
            {"kind": "stand", "time": q(10, "s")},
        ],
        "repeats": 5,
    }
    belt = brake(9000, (120, 180), 190, 20, {"id": "stainless_steel_austenitic"}, DISC, 0.38, ((60, 1.0), (160, 0.7), (400, 0.6)))
    yield "a conveyor that runs downhill, held and stopped", {
        "machine": {
            "kind": "conveyor", "material_mass": q(14000, "kg"), "belt_mass": q(5000, "kg"), "incline": q(-8, "deg"),
            "resistance": 0.02, "pulley_radius": q(400, "mm"), "gear_ratio": 16, "efficiency": 0.94, "inertia": q(3, "kg.m2"),
        },
        "fitted": [{"brake": belt, "count": 1}],
        "events": [
            {"kind": "descent", "speed": q(2.0, "m/s"), "distance": q(30, "m")},
            {"kind": "stop", "initial_speed": q(2.5, "m/s"), "response": delays(0.1, 0.1, 0.5)},
            {"kind": "stand", "time": q(90, "s")},
        ],
        "repeats": 4,
    }
    short = brake(16000, (85, 130), 135, 12, {"id": "gray_cast_iron"}, STREAM, 0.42, ((30, 1.0), (120, 0.8), (300, 0.6)))
    yield "snubs that end while the torque still rises", {
        "machine": vehicle(1200, rolling_resistance=0.01),
        "fitted": [{"brake": short, "count": 4, "axle": "all"}],
        "events": [stop(60, 40, response=delays(0.2, 0.1, 1.2)), {"kind": "run", "speed": q(50, "km/h"), "time": q(5, "s")}],
        "repeats": 8,
    }
    vented = brake(10000, (90, 140), 145, 28, {"id": "gray_cast_iron"}, STREAM, 0.40, (),
                   disc={"construction": "ventilated", "mass": q(5.2, "kg")})
    yield "no fade: ventilated discs in the airstream, against drag", {
        "machine": vehicle(1600, rotating_mass_factor=1.04, rolling_resistance=0.012, drag_area=q(1.2, "m2")),
        "fitted": [{"brake": vented, "count": 4, "axle": "all"}],
        "events": [stop(70, 5, response=delays(0.5, 0.1, 0.4)), {"kind": "run", "speed": q(45, "km/h"), "time": q(30, "s")}],
        "repeats": 5,
    }
    rising = brake(3500, (85, 130), 135, 14, {"id": "gray_cast_iron_250"}, None, 0.40, ((20, 0.8), (150, 1.0), (250, 1.2)))
    yield "friction that rises with temperature, without cooling", {
        "machine": vehicle(1400),
        "fitted": [{"brake": rising, "count": 4, "axle": "all"}],
        "events": [stop(100, response=delays(0.0, 0.0, 0.0)), {"kind": "stand", "time": q(30, "s")}],
        "repeats": 3,
    }


def main():
    answers = []
    for name, request in cases():
        answers.append({"name": name, "request": request, "expected": Duty(request).follow()})
    print(json.dumps({"cases": answers}, indent=1))


if __name__ == "__main__":
    main()
