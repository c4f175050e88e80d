"""Writes chain.json: one request and, worked by other means, all that follows from it.

From the force on a pedal through master cylinders, calipers and pads to torque, axle loads, distance,
energy and temperature, at low, nominal and high friction. All data of the vehicle are invented.

Pads: the uniform-wear and uniform-pressure integrals by adaptive quadrature. Motion: braking.py (root
search and numerical integration). Heat: finite volumes of our own, implicit in time, on two grids with
Richardson extrapolation, fed with the friction power of the integrated stop.

Needs numpy and scipy. Run: python tests/reference/chain.py > tests/reference/chain.json
"""

import json
import math

import numpy as np
from scipy.integrate import quad, solve_ivp
from scipy.optimize import brentq, minimize_scalar
from scipy.sparse import diags

from braking import G, System, follow, highest


def measure(value, unit):
    return {"value": value, "unit": unit}


REQUEST = {
    "machine": {
        "kind": "vehicle", "mass": measure(2850, "kg"), "rolling_radius": measure(0.342, "m"),
        "rotating_mass_factor": 1.05, "rolling_resistance": 0.013, "adhesion": 0.5,
        "geometry": {"wheelbase": measure(3.1, "m"), "center_of_gravity_height": measure(0.78, "m"),
                     "front_axle_to_center_of_gravity": measure(1.48, "m")},
    },
    "fitted": [
        {
            "axle": "front", "count": 2, "control": "pedal", "operator_share": 0.6,
            "brake": {
                "pad": {"shape": "annular_sector", "inner_radius": measure(98, "mm"),
                        "outer_radius": measure(146, "mm"), "angle": measure(58, "deg")},
                "lining": {"friction": {"low": 0.30, "nominal": 0.37, "high": 0.45},
                           "max_pressure": measure(6, "MPa"), "conductivity": measure(0.9, "W/(m.K)"),
                           "density": measure(2300, "kg/m3"), "specific_heat": measure(1050, "J/(kg.K)")},
                "pressure_distribution": "uniform_wear",
                "disc": {"material": {"density": measure(7150, "kg/m3"), "specific_heat": measure(510, "J/(kg.K)"),
                                      "conductivity": measure(47, "W/(m.K)")},
                         "outer_radius": measure(150, "mm"), "inner_radius": measure(90, "mm"),
                         "thickness": measure(26, "mm"), "construction": "ventilated", "mass": measure(5.6, "kg")},
                "actuation": {"kind": "hydraulic", "piston_diameter": measure(45, "mm"), "pistons_per_side": 2,
                              "efficiency": 0.97, "threshold_pressure": measure(0.6, "bar"),
                              "running_clearance": measure(0.15, "mm"), "compliance": measure(520, "mm3/MPa"),
                              "master_cylinder": {"bore": measure(16, "mm"), "lever_ratio": 4.6, "efficiency": 0.82,
                                                  "operator_force": measure(460, "N"), "max_stroke": measure(110, "mm")}},
            },
        },
        {
            "axle": "rear", "count": 2, "control": "pedal", "operator_share": 0.4,
            "brake": {
                "pad": {"shape": "annular_sector", "inner_radius": measure(104, "mm"),
                        "outer_radius": measure(141, "mm"), "angle": measure(44, "deg")},
                "lining": {"friction": {"low": 0.30, "nominal": 0.36, "high": 0.42},
                           "max_pressure": measure(6, "MPa"), "conductivity": measure(0.8, "W/(m.K)"),
                           "density": measure(2150, "kg/m3"), "specific_heat": measure(1000, "J/(kg.K)")},
                "pressure_distribution": "uniform_pressure",
                "disc": {"material": {"id": "gray_cast_iron_250"}, "outer_radius": measure(145, "mm"),
                         "inner_radius": measure(95, "mm"), "thickness": measure(12, "mm"), "construction": "solid"},
                "actuation": {"kind": "hydraulic", "piston_diameter": measure(44, "mm"), "pistons_per_side": 1,
                              "efficiency": 0.96, "threshold_pressure": measure(0.7, "bar"),
                              "running_clearance": measure(0.18, "mm"), "compliance": measure(310, "mm3/MPa"),
                              "master_cylinder": {"bore": measure(16, "mm"), "lever_ratio": 4.6, "efficiency": 0.82,
                                                  "operator_force": measure(460, "N")}},
            },
        },
    ],
    "initial_speed": measure(31, "m/s"), "grade": measure(-4, "%"),
    "response": {"reaction_time": measure(0.9, "s"), "dead_time": measure(0.12, "s"), "build_up_time": measure(0.35, "s")},
    "ambient_temperature": measure(25, "degC"), "start_temperature": measure(170, "degC"),
}
# EN 1561 Annex A, EN-GJL-250 (from memory): what the catalog row prints.
IRON = {"density": 7200.0, "mean_specific_heat": [(200.0, 460.0), (600.0, 535.0)], "from": 20.0,
        "conductivity": [(100.0, 48.5), (200.0, 47.5), (300.0, 46.5), (400.0, 45.0), (500.0, 44.5)]}

SI = {"kg": 1, "m": 1, "mm": 1e-3, "deg": math.pi / 180, "MPa": 1e6, "bar": 1e5, "N": 1, "mm3/MPa": 1e-15,
      "W/(m.K)": 1, "J/(kg.K)": 1, "kg/m3": 1, "m/s": 1, "s": 1, "%": 0.01, "degC": 1}


def si(quantity):
    return quantity["value"] * SI[quantity["unit"]]


def circle(diameter):
    return math.pi * diameter**2 / 4


def pad(brake):
    """Area, arm, peak pressure per clamp force: quadrature over the radius of the assumed pressure."""
    inner, outer, angle = (si(brake["pad"][n]) for n in ("inner_radius", "outer_radius", "angle"))
    shape = (lambda r: 1.0 / r) if brake["pressure_distribution"] == "uniform_wear" else (lambda r: 1.0)
    over = lambda f: angle * quad(lambda r: f(r) * r, inner, outer, epsabs=0, epsrel=1e-13)[0]
    force, moment = over(shape), over(lambda r: shape(r) * r)
    return {"inner": inner, "outer": outer, "area": over(lambda r: 1.0), "arm": moment / force,
            "peak_per_force": shape(inner) / force}


def pressed(entry):
    """Line pressure, clamp force and fluid of one brake."""
    chain = entry["brake"]["actuation"]
    master = chain["master_cylinder"]
    at_cylinder = si(master["operator_force"]) * entry["operator_share"] * master["lever_ratio"] * master["efficiency"]
    pressure = at_cylinder / circle(si(master["bore"]))
    piston = circle(si(chain["piston_diameter"])) * chain["pistons_per_side"]
    clamp = (pressure - si(chain["threshold_pressure"])) * piston * chain["efficiency"]
    fluid = 2 * piston * si(chain["running_clearance"]) + si(chain["compliance"]) * pressure
    return {"line_pressure": pressure, "clamp_force": clamp, "fluid_volume": fluid}


def interpolated(points, x):
    return float(np.interp(x, [p[0] for p in points], [p[1] for p in points]))


class Constant:
    def __init__(self, material):
        self.density, self.c, self.k = (si(material[n]) for n in ("density", "specific_heat", "conductivity"))

    def enthalpy(self, celsius):
        return self.c * celsius

    def specific_heat(self, celsius):
        return self.c

    def conductivity(self, celsius):
        return self.k


class Tabled:
    density = IRON["density"]

    def enthalpy(self, celsius):
        return interpolated(IRON["mean_specific_heat"], celsius) * (celsius - IRON["from"])

    def specific_heat(self, celsius):
        step = 1e-3
        return (self.enthalpy(celsius + step) - self.enthalpy(celsius - step)) / (2 * step)

    def conductivity(self, celsius):
        return interpolated(IRON["conductivity"], celsius)


def effusivity(k, density, c):
    return math.sqrt(k * density * c)


def slab_peak(depth, k, capacity, flux, corners, cells):
    """Highest surface rise of a slab, insulated behind: cell means, second-order fluxes, Radau in time."""
    dx = depth / cells
    main = np.full(cells, -2.0)
    main[0] = main[-1] = -1.0
    matrix = diags([np.ones(cells - 1), main, np.ones(cells - 1)], [-1, 0, 1], format="csc") * (k / capacity / dx**2)
    state, best = np.zeros(cells), (0.0, 0.0)
    for start, end in zip(corners, corners[1:]):
        def rate(t, y):
            dy = matrix @ y
            dy[-1] += flux(t) / (capacity * dx)
            return dy
        found = solve_ivp(rate, (start, end), state, "Radau", jac=matrix, rtol=1e-9, atol=1e-9, dense_output=True)
        assert found.success
        # The surface from the two last cell means and the flux: the parabola through them.
        surface = lambda t: (lambda y: (9 * y[-1] - y[-2]) / 8 + 3 * flux(t) * dx / (8 * k))(found.sol(t))
        times = np.linspace(start, end, 400)
        values = [surface(t) for t in times]
        i = int(np.argmax(values))
        inner = minimize_scalar(lambda t: -surface(t), bounds=(times[max(i - 1, 0)], times[min(i + 1, 399)]), method="bounded",
                                options={"xatol": 1e-10})
        best = max(best, (values[i], times[i]), (-inner.fun, inner.x))
        state = found.y[:, -1]
    return best[0]


def heat(entry, shape, energy, power, corners):
    brake, start = entry["brake"], si(REQUEST["start_temperature"])
    disc = brake["disc"]
    material = Tabled() if "id" in disc["material"] else Constant(disc["material"])
    swept = math.pi * (shape["outer"] ** 2 - shape["inner"] ** 2)
    mass = si(disc["mass"]) if "mass" in disc else swept * si(disc["thickness"]) * material.density
    lining = effusivity(*(si(brake["lining"][n]) for n in ("conductivity", "density", "specific_heat")))
    iron = effusivity(material.conductivity(start), material.density, material.specific_heat(start))
    share = 1 / (1 + shape["area"] / swept * lining / iron)
    taken = share * energy / mass
    end = brentq(lambda t: material.enthalpy(t) - material.enthalpy(start) - taken, start, 2000.0, xtol=1e-12)
    middle = (start + end) / 2
    depth = mass / (2 * material.density * swept)
    k, capacity = material.conductivity(middle), material.density * material.specific_heat(middle)
    flux = lambda t: share * power(t) / (2 * swept)
    coarse, fine = (slab_peak(depth, k, capacity, flux, corners, cells) for cells in (150, 300))
    return {"disc_share": share, "disc_bulk_rise": end - start,
            "surface_peak_temperature": start + fine + (fine - coarse) / 3, "grids_differ_by": abs(fine - coarse)}


def case(name):
    machine = REQUEST["machine"]
    mass, slope = si(machine["mass"]), math.atan(si(REQUEST["grade"]))
    normal = mass * G * math.cos(slope)
    geometry = tuple(si(machine["geometry"][n]) for n in
                     ("wheelbase", "center_of_gravity_height", "front_axle_to_center_of_gravity"))
    radius = si(machine["rolling_radius"])
    shapes = [pad(entry["brake"]) for entry in REQUEST["fitted"]]
    presses = [pressed(entry) for entry in REQUEST["fitted"]]
    coefficients = [entry["brake"]["lining"]["friction"][name] for entry in REQUEST["fitted"]]
    torques = [2 * mu * press["clamp_force"] * shape["arm"] for mu, press, shape in zip(coefficients, presses, shapes)]
    system = System(mass=mass, translating=mass, demand=tuple(2 * t / radius for t in torques),
                    rotating=machine["rotating_mass_factor"] - 1, outside=-mass * G * math.sin(slope),
                    resistance=machine["rolling_resistance"] * normal, normal=normal, adhesion=machine["adhesion"],
                    geometry=geometry)
    v0 = si(REQUEST["initial_speed"])
    reaction, dead, build_up = (si(REQUEST["response"][n]) for n in ("reaction_time", "dead_time", "build_up_time"))
    stop = follow(system, v0, 0.0, reaction, dead, build_up)
    begin_time, begin_speed, begin_way = stop["begin"]
    peak, (_, ground, _, normals, _) = highest(stop, lambda s: s[0])
    slips = any(g > system.adhesion * n * (1 - 1e-9) for g, n in zip(ground, normals))
    braking_time, braking_way = stop["time"] - begin_time, stop["way"] - begin_way

    def brakes_at(time):
        """Brake force of each axle and speed, from the first torque on."""
        clock = begin_time + time
        leg = next((leg for leg in reversed(stop["legs"]) if leg.start <= clock + 1e-15), stop["legs"][0])
        since = min(max(clock - leg.start, 0.0), leg.length)
        speed = max(float(leg.at(since)[0]), 0.0)
        return system.balance(leg.fraction(since, speed), speed)[2], speed

    corners = [0.0, build_up, braking_time]
    # Where a limit of the tires takes over the power has an edge; the integration restarts there.
    sampled = np.linspace(0.0, build_up, 2001)
    def capped(time):
        a, force, _, loads = system.balance(time / build_up, brakes_at(time)[1])
        return tuple(f >= system.adhesion * n * (1 - 1e-12) for f, n in zip(force, loads))
    for low, high in zip(sampled, sampled[1:]):
        if capped(low) != capped(high):
            before = capped(low)
            for _ in range(45):
                middle = (low + high) / 2
                low, high = (middle, high) if capped(middle) == before else (low, middle)
            corners.append(float(high))
    corners = sorted(corners)
    fitted = []
    for i, (entry, shape) in enumerate(zip(REQUEST["fitted"], shapes)):
        energy = stop["work"][i] / 2
        course = lambda t, i=i: brakes_at(t)[0][i] * brakes_at(t)[1] / 2
        # The power as a smooth function between the corners, sampled once: the conduction asks for it often.
        tables = [(a, b, np.polynomial.Chebyshev.interpolate(np.vectorize(course), 24, domain=[a + 1e-13, b - 1e-13]))
                  for a, b in zip(corners, corners[1:])]
        power = lambda t, tables=tables: float(next(p for a, b, p in tables if t <= b or b == tables[-1][1])(t))
        peak_power = highest(stop, lambda s, i=i: s[2][i] * s[4] / 2)[0]
        fitted.append({
            "coefficient": coefficients[i], "torque": torques[i], **presses[i],
            "mean_pressure": presses[i]["clamp_force"] / shape["area"],
            "peak_pressure": presses[i]["clamp_force"] * shape["peak_per_force"],
            "pad_area": shape["area"], "effective_radius": shape["arm"],
            "energy": energy, "energy_per_face": energy / 2, "energy_flux": energy / 2 / shape["area"],
            "mean_power": energy / braking_time, "peak_power": peak_power,
            "peak_power_flux": peak_power / 2 / shape["area"], "rubbing_speed": highest(stop, lambda s: s[4])[0] / radius * shape["outer"],
            **heat(entry, shape, energy, power, corners),
        })
    return {
        "friction_case": name, "limited_by": "adhesion" if slips else "brake",
        "total_time": stop["time"], "total_distance": stop["way"],
        "time_from_control": stop["time"] - reaction, "distance_from_control": stop["way"] - v0 * reaction,
        "braking_time": braking_time, "braking_distance": braking_way,
        "mean_deceleration": begin_speed**2 / (2 * braking_way),
        "mean_fully_developed_deceleration": ((0.8 * v0) ** 2 - (0.1 * v0) ** 2)
        / (2 * (stop["marks"]["low"] - stop["marks"]["high"])),
        "peak_deceleration": peak,
        "axles": [{"brake_force": g, "normal_force": n, "adhesion_used": g / n} for g, n in zip(ground, normals)],
        "kinetic_translation": mass * begin_speed**2 / 2,
        "kinetic_rotation": mass * (machine["rotating_mass_factor"] - 1) * begin_speed**2 / 2,
        "grade_or_load": system.outside * braking_way, "resistance": system.resistance * braking_way,
        "brake_energy": sum(stop["work"]), "fitted": fitted,
    }


def stroke():
    """Travel of the pedal: fluid of all brakes on it, each through its share of the force."""
    total = 0.0
    for entry in REQUEST["fitted"]:
        master = entry["brake"]["actuation"]["master_cylinder"]
        total += master["lever_ratio"] * entry["operator_share"] * entry["count"] * pressed(entry)["fluid_volume"] / circle(si(master["bore"]))
    return total


def main():
    cases = [case(name) for name in ("low", "nominal", "high")]
    print(json.dumps({"note": "all data of the request invented; see chain.py", "request": REQUEST,
                      "operator_stroke": stroke(), "friction_cases": cases}, indent=1))


main()
