"""Writes repeated.json: repeated stops with temperature-dependent discs, followed by a general ODE solver.

One interval is m c(T) dT/dt = P(t) - h(T, v) A (T - T_a): heated while braking and cooled at the mean speed of the
stop, then cooled at the mean of initial and final speed. scipy's Radau to 1e-11 relative; the steady interval by
Brent's method on the temperature at its start. The stop itself is the closed form of a constant deceleration after
a linear build-up. Materials, air and correlations are those typed in for duty.py from their sources.

All data are invented for the test, but for the materials, which are those of the catalog.

Needs numpy and scipy. Run: python tests/reference/repeated.py > tests/reference/repeated.json
"""

import json
import math

from scipy.integrate import solve_ivp
from scipy.optimize import brentq

from duty import DISC, STREAM, ZERO_CELSIUS, Entry, Machine, brake, delays, q, si, vehicle


class Repeated:
    def __init__(self, request):
        self.request = request
        self.machine = Machine(request["machine"])
        self.ambient = si(request.get("ambient_temperature"), 293.15)
        self.start = si(request.get("start_temperature"), self.ambient)
        self.entry = Entry(request["fitted"][0], self.machine, self.ambient, self.start)
        self.initial = si(request["initial_speed"])
        self.final = si(request.get("final_speed"), 0.0)
        self.build_up = si(request["response"]["build_up_time"])
        mass, factor = self.machine.inertia()
        # No speed-dependent resistance: the deceleration rises linearly and then stays.
        free = self.machine.retarding(request, 0.0) / (mass * factor)
        rise = self.entry.force / (mass * factor) / self.build_up
        asked = self.initial
        self.between = 0.5 * (asked + self.final)
        # Where torque begins: the dead time has gone by under the outside forces alone.
        self.initial = asked - free * si(request["response"]["dead_time"])
        self.full = free + rise * self.build_up
        self.speed = lambda t: self.initial - free * min(t, self.build_up) - 0.5 * rise * min(t, self.build_up) ** 2 - self.full * max(t - self.build_up, 0.0)
        self.braking = self.build_up + (self.speed(self.build_up) - self.final) / self.full
        way = self.initial * self.build_up - free * self.build_up**2 / 2.0 - rise * self.build_up**3 / 6.0
        way += (self.speed(self.build_up) ** 2 - self.final**2) / (2.0 * self.full)
        self.mean = way / self.braking
        self.interval = si(request["interval"])

    def swing(self, start):
        """Highest temperature of an interval, and that at its end."""
        entry, force = self.entry, self.entry.force / self.entry.count
        hot, slow = (self.mean, self.mean * entry.per_way), self.between
        heated = lambda t, y: [entry.warming(y[0], force * min(t / self.build_up, 1.0) * self.speed(t), hot)]
        turns = lambda t, y: heated(t, y)[0]
        turns.direction = -1
        settings = {"method": "Radau", "rtol": 1e-11, "atol": 1e-9}
        first = solve_ivp(heated, (0.0, self.build_up), [start], events=turns, **settings)
        second = solve_ivp(heated, (self.build_up, self.braking), [first.y[0, -1]], events=turns, **settings)
        cooled = lambda t, y: [entry.warming(y[0], 0.0, (slow, slow * entry.per_way))]
        rest = solve_ivp(cooled, (0.0, self.interval - self.braking), [second.y[0, -1]], **settings)
        tops = [y[0] for solved in (first, second) for y in solved.y_events[0]]
        return max([start, second.y[0, -1], *tops]), rest.y[0, -1]

    def follow(self):
        trough = brentq(lambda start: self.swing(start)[1] - start, self.ambient, 2900.0, xtol=1e-7)
        steady = self.swing(trough)
        temperature, reached = self.start, None
        limit = si(self.request["fitted"][0]["brake"]["lining"]["max_temperature_continuous"])
        count = self.request["stop_count"]
        for stop in range(1, 400):
            peak, temperature = self.swing(temperature)
            if stop == count:
                after = (peak, temperature)
            if reached is None and peak >= limit:
                reached = stop
            if stop >= count and (reached is not None or steady[0] < limit):
                break
        celsius = lambda value: value - ZERO_CELSIUS
        answer = {
            "steady_bulk_peak": celsius(steady[0]), "steady_bulk_trough": celsius(steady[1]),
            "peak_after_stops": celsius(after[0]), "trough_after_stops": celsius(after[1]),
        }
        if reached is not None:
            answer["stops_to_continuous_limit"] = reached
        return answer


def case(name, disc_material, cooling, interval, count, limit, final=0.0, force=8000, machine=None):
    lining = {"max_temperature_continuous": q(limit, "degC")}
    fitted = brake(force, (90, 135), 140, 20, disc_material, cooling, 0.40, (), lining=lining)
    return name, {
        "machine": machine or vehicle(1500, rolling_resistance=0.012),
        "fitted": [{"brake": fitted, "count": 4, "axle": "all"}],
        "initial_speed": q(90, "km/h"), "final_speed": q(final, "km/h"), "response": delays(0.4, 0.1, 0.3),
        "interval": q(interval, "s"), "stop_count": count,
        "ambient_temperature": q(15, "degC"), "start_temperature": q(40, "degC"),
    }


def main():
    iron, steel = {"id": "gray_cast_iron_250"}, {"id": "carbon_steel"}
    chosen = [
        case("iron, turning disc, short interval", iron, DISC, 45, 12, 400),
        case("iron, turning disc, long interval", iron, DISC, 600, 3, 150),
        case("iron, airstream, short interval", iron, STREAM, 30, 20, 250),
        case("iron, airstream, long interval", iron, STREAM, 400, 4, 160),
        case("steel, turning disc, short interval", steel, DISC, 90, 15, 400, 30.0),
        case("steel, turning disc, long interval", steel, DISC, 900, 2, 140),
        case("steel, airstream, short interval", steel, STREAM, 25, 30, 280, 20.0),
        case("steel, airstream, long interval", steel, STREAM, 300, 5, 120),
        case("iron, airstream, braking most of the time", iron, STREAM, 12, 40, 500, 0.0, 3000),
    ]
    answers = [{"name": name, "request": request, "expected": Repeated(request).follow()} for name, request in chosen]
    print(json.dumps({"cases": answers}, indent=1))


if __name__ == "__main__":
    main()
