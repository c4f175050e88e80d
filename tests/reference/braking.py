"""A braked machine solved numerically: what stops.py and chain.py share. No formula of the service is used.

The ground forces of the axles come from a root search on the balance of forces; speed, distance and work
come from an adaptive Runge-Kutta method of order 8 (scipy, DOP853) with event location. Coherent SI
throughout; a force is N along a way or N m about a shaft.
"""

import math
from dataclasses import dataclass

import numpy as np
from scipy.integrate import solve_ivp
from scipy.optimize import brentq, minimize_scalar

G = 9.80665
RTOL, ATOL = 1e-12, 1e-12


@dataclass
class System:
    """A machine with its brakes at full application."""

    mass: float  # kg or kg m2 that the ground force decelerates
    translating: float  # kg, 0 for a shaft
    demand: tuple  # brake force of the front axle (or all) and the rear axle
    rotating: float = 0.0  # rotating mass factor less one
    outside: float = 0.0  # positive when it drives
    resistance: float = 0.0
    drag: float = 0.0
    normal: float = 0.0  # weight normal to the ground
    adhesion: float | None = None
    geometry: tuple | None = None  # wheelbase, height, front axle to center of gravity

    @property
    def inertia(self):
        return self.mass * (1.0 + self.rotating)

    def retarding(self, speed):
        return self.resistance + self.drag * speed * speed - self.outside

    def normals(self, ground):
        base, height, front = self.geometry
        rear = (self.normal * front - height * (ground + self.resistance)) / base
        return self.normal - rear, rear

    def balance(self, fraction, speed):
        """Deceleration, ground forces, brake forces and normal forces with a fraction of the torque."""
        total_demand = sum(self.demand)
        shares = [d / total_demand if total_demand else 0.0 for d in self.demand]
        retarding = self.retarding(speed)

        def wheels(ground):
            deceleration = (ground + retarding) / self.mass
            taken = [s * self.rotating * self.mass * deceleration for s in shares]
            force = [fraction * d - t for d, t in zip(self.demand, taken)]
            if self.adhesion is not None:
                if self.geometry:
                    force = [min(f, self.adhesion * n) for f, n in zip(force, self.normals(ground))]
                else:
                    force[0] = min(force[0], self.adhesion * self.normal)
            return force, taken

        scale = total_demand + abs(retarding) + self.normal + 1.0
        ground = brentq(lambda g: sum(wheels(g)[0]) - g, -4.0 * scale, 4.0 * scale, xtol=1e-13 * scale, rtol=1e-15)
        lifted = False
        if self.geometry:
            base, height, front = self.geometry
            most = self.normal * front / height - self.resistance
            if ground > most:
                ground, lifted = most, True
        force, taken = wheels(ground)
        if lifted and self.adhesion is not None:
            force = [ground - min(force[1], 0.0), min(force[1], 0.0)]
        if lifted and self.adhesion is None:
            factor = ground / sum(force)
            force = [f * factor for f in force]
        normals = self.normals(ground) if self.geometry else (self.normal, 0.0)
        brake = [f + t for f, t in zip(force, taken)]
        return (ground + retarding) / self.mass, force, brake, normals

    def fraction_for(self, deceleration, speed):
        if self.balance(1.0, speed)[0] < deceleration:
            return None
        if self.balance(0.0, speed)[0] >= deceleration:
            return 0.0
        return brentq(lambda f: self.balance(f, speed)[0] - deceleration, 0.0, 1.0, xtol=1e-15, rtol=1e-14)


@dataclass
class Leg:
    """A part of the stop under one law for the applied fraction."""

    name: str
    start: float
    solution: object
    fraction: object  # of time since the start of the leg and speed
    length: float

    def at(self, time):
        return self.solution(time)


def follow(system, v0, v1, reaction, dead, build_up, deceleration=None):
    """The stop: legs, end state, and marks where the speed falls through 0.8 and 0.1 of v0."""
    state = np.array([v0, v0 * reaction, 0.0, 0.0, 0.0])  # speed, way, work front, work rear, resistance
    clock = reaction
    legs, marks, reached = [], {}, False
    begin = None

    def leg(name, fraction, length, acts):
        nonlocal state, clock, reached

        def rate(t, y):
            v = y[0]
            a, _, brake, _ = system.balance(fraction(t, v), max(v, 0.0))
            work = [b * v if acts else 0.0 for b in brake]
            lost = (system.resistance + system.drag * v * v) * v if acts else 0.0
            return [-a, v, work[0], work[1], lost]

        def falls_to(target):
            def event(t, y):
                return y[0] - target
            event.direction = -1
            return event

        end = falls_to(v1)
        end.terminal = True
        high, low = falls_to(0.8 * v0), falls_to(0.1 * v0)
        found = solve_ivp(rate, (0.0, length), state, "DOP853", events=(end, high, low), rtol=RTOL,
                          atol=ATOL, max_step=length / 24, dense_output=True)
        assert found.success, found.message
        for event, key in ((1, "high"), (2, "low")):
            if len(found.t_events[event]):
                marks[key] = float(found.y_events[event][-1][1])
        lasted = float(found.t[-1])
        if acts:
            legs.append(Leg(name, clock, found.sol, fraction, lasted))
        state = found.y[:, -1]
        if len(found.t_events[0]):
            reached = True
            state[0] = v1
        clock += lasted

    if dead > 0:
        leg("dead", lambda t, v: 0.0, dead, False)
    modulated = False
    if not reached:
        begin = (clock, state[0], state[1])
        full = 1.0
        if deceleration is not None:
            fraction = system.fraction_for(deceleration, state[0])
            modulated, full = fraction is not None, 1.0 if fraction is None else fraction
        if build_up > 0:
            leg("build_up", lambda t, v: full * t / build_up, build_up, True)
        if not reached:
            if modulated and system.drag > 0:
                hold = lambda t, v: system.fraction_for(deceleration, max(v, 0.0))
                leg("full", hold, (state[0] - v1) / deceleration * 1.001, True)
            else:
                slowest = system.balance(full, v1)[0]
                if slowest <= 0:
                    return {"reached": False, "system": system, "fraction": full, "speed": state[0]}
                leg("full", lambda t, v: full, (state[0] - v1) / slowest * 1.001, True)
    else:
        begin = (clock, v1, state[1])
        full = 1.0
    if v1 <= 0.1 * v0 and "low" not in marks:
        marks["low"] = state[1]
    return {"reached": reached, "time": clock, "way": float(state[1]), "work": state[2:4].tolist(),
            "resistance_work": float(state[4]), "begin": begin, "legs": legs, "marks": marks,
            "modulated": modulated, "fraction": full, "system": system}


def highest(stop, value):
    """The highest value of a function of (deceleration, ground, brake, normal, speed) while torque acts, and where."""
    system, best = stop["system"], (-math.inf, None)
    for leg in stop["legs"]:
        def state(t, leg=leg):
            v = max(float(leg.at(t)[0]), 0.0)
            return (*system.balance(leg.fraction(t, v), v), v)
        times = np.linspace(0.0, leg.length, 401)
        values = [value(state(t)) for t in times]
        i = int(np.argmax(values))
        low, high = times[max(i - 1, 0)], times[min(i + 1, 400)]
        inner = minimize_scalar(lambda t: -value(state(t)), bounds=(low, high), method="bounded",
                                options={"xatol": 1e-12 * leg.length})
        for t in (times[i], inner.x, 0.0, leg.length):
            if value(state(t)) > best[0] * (1 + 1e-12 if best[0] > 0 else 1 - 1e-12):
                best = (value(state(t)), state(t))
    return best


def run_back(stop, since_dead, build_up):
    """What follows rest at the end of the stop if something reverses the machine. No adhesion limit here."""
    system = stop["system"]
    reversing = -system.outside - system.resistance
    demand = sum(system.demand) * stop["fraction"]

    def holds(time):
        if time < 0:
            return 0.0
        return demand * (min(time / build_up, 1.0) if build_up > 0 else 1.0)

    if reversing <= 0 or (since_dead >= 0 and holds(since_dead) >= reversing):
        return None
    if demand <= reversing:
        return {}
    rate = lambda t, y: [(reversing - holds(since_dead + t)) / system.inertia, y[0]]
    rest = lambda t, y: y[0]
    rest.terminal, rest.direction = True, -1
    # Integrated from corner to corner of the brake's force.
    corners = sorted({max(-since_dead, 0.0), max(build_up - since_dead, 0.0)} - {0.0})
    state, clock, peak = [0.0, 0.0], 0.0, 0.0
    for until in [*corners, 1e4]:
        found = solve_ivp(rate, (clock, until), state, "DOP853", events=rest, rtol=RTOL, atol=1e-14,
                          dense_output=True)
        times = np.linspace(clock, found.t[-1], 2001)
        speeds = found.sol(times)[0]
        i = int(np.argmax(speeds))
        low, high = times[max(i - 1, 0)], times[min(i + 1, 2000)]
        top = minimize_scalar(lambda t: -found.sol(t)[0], bounds=(low, high), method="bounded",
                              options={"xatol": 1e-12})
        peak = max(peak, float(speeds[i]), float(-top.fun))
        clock, state = float(found.t[-1]), found.y[:, -1].tolist()
        if len(found.t_events[0]):
            return {"time": clock, "distance": state[1], "peak_speed": peak}
    raise AssertionError("the brake never holds")
