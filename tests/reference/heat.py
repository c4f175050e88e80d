"""Writes heat.json: temperatures of heated slabs and enthalpies, found without the service's formulas.

Slab: second-order finite differences in depth, an implicit Runge-Kutta method in time (scipy, Radau),
extrapolated from three grids (Richardson). The disagreement of the last two extrapolations is recorded.
Enthalpy: adaptive quadrature of the printed specific heats; inverse by Brent's method.

Needs numpy and scipy. Run: python tests/reference/heat.py > tests/reference/heat.json
"""

import json

import numpy as np
from scipy.integrate import quad, solve_ivp
from scipy.optimize import brentq


def slab(case, cells):
    """Rise of the heated and the insulated face at the sample times."""
    depth, k = case["depth"], case["conductivity"]
    capacity = case["density"] * case["specific_heat"]
    dx = depth / cells
    diffusivity = k / capacity
    main = np.full(cells + 1, -2.0)
    matrix = np.diag(main) + np.diag(np.ones(cells), 1) + np.diag(np.ones(cells), -1)
    matrix[0, 1] = 2.0
    matrix[-1, -2] = 2.0
    matrix *= diffusivity / dx**2

    state = np.zeros(cells + 1)
    samples = {}
    legs = [(a, b) for a, b in zip(case["nodes"], case["nodes"][1:]) if b[0] > a[0]]
    end = case["nodes"][-1][0]
    if max(case["times"]) > end:
        legs.append(([end, 0.0], [max(case["times"]), 0.0]))
    for (t0, q0), (t1, q1) in legs:
        def rate(t, y, t0=t0, q0=q0, t1=t1, q1=q1):
            dy = matrix @ y
            dy[-1] += 2.0 * (q0 + (q1 - q0) * (t - t0) / (t1 - t0)) / (capacity * dx)
            return dy
        inside = [t for t in case["times"] if t0 < t <= t1]
        at = sorted(set(inside + [t1]))
        found = solve_ivp(rate, (t0, t1), state, "Radau", at, jac=matrix, rtol=1e-10, atol=1e-10)
        assert found.success
        for i, t in enumerate(found.t):
            if t in inside:
                samples[t] = (found.y[-1, i], found.y[0, i])
        state = found.y[:, -1]
    return np.array([samples[t] for t in case["times"]])


def extrapolated(case):
    coarse, middle, fine = (slab(case, cells) for cells in (60, 120, 240))
    first, second = (4 * middle - coarse) / 3, (4 * fine - middle) / 3
    scale = np.abs(second).max()
    return second, float(np.abs(second - first).max() / scale)


IRON = {"density": 7200.0, "specific_heat": 500.0, "conductivity": 47.0}
STEEL = {"density": 7850.0, "specific_heat": 520.0, "conductivity": 42.0}
MMC = {"density": 2800.0, "specific_heat": 870.0, "conductivity": 170.0}

# Invented stops, chosen to cover thick and thin slabs, build-up, jumps, pulses and the time after.
SLABS = [
    {"name": "falling flux, car disc", **IRON, "depth": 0.0115,
     "nodes": [[0, 4.0e6], [4, 0]], "times": [0.25, 1.0, 2.0, 3.0, 4.0, 6.0]},
    {"name": "build-up, then falling", **IRON, "depth": 0.015,
     "nodes": [[0, 0], [0.3, 3.5e6], [5, 0]], "times": [0.1, 0.3, 0.6, 2.0, 5.0, 9.0]},
    {"name": "two pulses with jumps", **STEEL, "depth": 0.006,
     "nodes": [[0, 2.0e6], [1, 1.0e6], [1, 0], [2, 0], [2, 3.0e6], [2.5, 3.0e6]],
     "times": [0.5, 1.0, 1.02, 1.5, 2.0, 2.05, 2.5, 2.6, 4.0]},
    {"name": "thin slab, long stop", **MMC, "depth": 0.004,
     "nodes": [[0, 0], [1, 8.0e5], [20, 3.0e5], [30, 0]], "times": [0.5, 1.0, 10.0, 20.0, 29.0, 30.0, 31.0]},
    {"name": "thick slab, held flux", **IRON, "depth": 0.04,
     "nodes": [[0, 1.0e6], [3, 1.0e6]], "times": [0.5, 3.0, 10.0, 60.0]},
]


def steel_c(t):
    if t < 20: return steel_c(20)
    if t < 600: return 425 + 0.773 * t - 1.69e-3 * t**2 + 2.22e-6 * t**3
    if t < 735: return 666 + 13002 / (738 - t)
    if t < 900: return 545 + 17820 / (t - 731)
    return 650.0


def stainless_c(t):
    t = min(max(t, 20.0), 1200.0)
    return 450 + 0.280 * t - 2.91e-4 * t**2 + 1.34e-7 * t**3


HEATS = {"carbon_steel": steel_c, "stainless_steel_austenitic": stainless_c}
BREAKS = [20.0, 600.0, 735.0, 900.0, 1200.0]


def enthalpy(c, a, b):
    """Integral of c from a to b, cut where the formulas change."""
    low, high = min(a, b), max(a, b)
    cuts = [low] + [x for x in BREAKS if low < x < high] + [high]
    total = sum(quad(c, x, y, epsabs=1e-9, epsrel=1e-13, limit=400)[0] for x, y in zip(cuts, cuts[1:]))
    return total if b >= a else -total


def main():
    slabs = []
    for case in SLABS:
        rises, disagreement = extrapolated(case)
        slabs.append({**case, "surface": rises[:, 0].tolist(), "insulated": rises[:, 1].tolist(),
                      "disagreement": disagreement})
    enthalpies, inverses = [], []
    for name, c in HEATS.items():
        for a, b in [(20, 100), (20, 599), (20, 700), (650, 734), (700, 760), (20, 1100), (800, 300), (-50, 1500)]:
            enthalpies.append({"id": name, "from": a, "to": b, "enthalpy": enthalpy(c, a, b)})
        for start, heat in [(20, 2e5), (20, 5e5), (400, 3e5), (750, -2e5), (20, 1e6)]:
            end = brentq(lambda t: enthalpy(c, start, t) - heat, -270, 3000, xtol=1e-10, rtol=1e-14)
            inverses.append({"id": name, "start": start, "heat": heat, "end": end})
    print(json.dumps({"slabs": slabs, "enthalpies": enthalpies, "inverses": inverses}, indent=1))


main()
