"""Writes conversions.json: requests in US units and the same requests converted to SI by the library pint.

Beside them the factors from US answers to SI, also by pint. All data are invented.
Needs pint. Run: python tests/reference/conversions.py > tests/reference/conversions.json
"""

import json

import pint

ureg = pint.UnitRegistry()
Q = ureg.Quantity

# Symbol of the service: (name for pint, target for pint, SI symbol of the service).
UNITS = {
    "in": ("inch", "m", "m"), "ft": ("foot", "m", "m"), "lb": ("pound", "kg", "kg"), "lbf": ("force_pound", "N", "N"),
    "psi": ("force_pound / inch**2", "Pa", "Pa"), "lbf.ft": ("force_pound * foot", "N * m", "N.m"),
    "lbf.in": ("force_pound * inch", "N * m", "N.m"), "mph": ("mile / hour", "m / s", "m/s"), "ft2": ("foot**2", "m**2", "m2"),
    "degF": ("degF", "kelvin", "K"), "lb/in3": ("pound / inch**3", "kg / m**3", "kg/m3"),
    "Btu/(lb.degF)": ("Btu_it / pound / delta_degF", "J / kg / K", "J/(kg.K)"),
    "Btu/(h.ft.degF)": ("Btu_it / hour / foot / delta_degF", "W / m / K", "W/(m.K)"),
    "hp/in2": ("horsepower / inch**2", "W / m**2", None), "lb.ft2": ("pound * foot**2", "kg * m**2", "kg.m2"),
    "in3/psi": ("inch**3 / (force_pound / inch**2)", "mm**3 / MPa", "mm3/MPa"), "ft/min": ("foot / minute", "m / s", "m/s"),
    "ft/s2": ("foot / s**2", "m / s**2", "m/s2"),
}
# Units of answers. Energy and power of the service are kJ and kW.
ANSWERS = {
    "in": ("inch", "mm"), "ft": ("foot", "m"), "in2": ("inch**2", "mm**2"), "in3": ("inch**3", "mm**3"),
    "lbf": ("force_pound", "N"), "psi": ("force_pound / inch**2", "MPa"), "lbf.in": ("force_pound * inch", "N * m"),
    "Btu": ("Btu_it", "kJ"), "hp": ("horsepower", "kW"), "ft/s": ("foot / s", "m / s"), "ft/s2": ("foot / s**2", "m / s**2"),
    "hp/in2": ("horsepower / inch**2", "W / mm**2"), "Btu/in2": ("Btu_it / inch**2", "J / mm**2"), "s": ("s", "s"),
    "rpm": ("rpm", "rpm"),
}


def q(value, unit):
    return {"value": value, "unit": unit}


PAD = {"shape": "annular_sector", "inner_radius": q(3.875, "in"), "outer_radius": q(5.5, "in"), "angle": q(54, "deg")}
LINING = {"friction": {"low": 0.31, "nominal": 0.37, "high": 0.42}, "max_pressure": q(400, "psi"),
          "conductivity": q(0.55, "Btu/(h.ft.degF)"), "density": q(0.081, "lb/in3"), "specific_heat": q(0.24, "Btu/(lb.degF)")}
CHAIN = {"kind": "hydraulic", "piston_diameter": q(1.75, "in"), "pistons_per_side": 2, "efficiency": 0.96,
         "threshold_pressure": q(9, "psi"), "running_clearance": q(0.006, "in"), "compliance": q(0.00021, "in3/psi"),
         "master_cylinder": {"bore": q(0.75, "in"), "lever_ratio": 5.1, "efficiency": 0.8, "operator_force": q(95, "lbf")}}
DISC = {"material": {"density": q(0.26, "lb/in3"), "specific_heat": q(0.115, "Btu/(lb.degF)"), "conductivity": q(28, "Btu/(h.ft.degF)")},
        "outer_radius": q(5.6, "in"), "inner_radius": q(3.7, "in"), "thickness": q(0.9, "in"), "construction": "solid"}
STOP = {
    "machine": {"kind": "vehicle", "mass": q(4200, "lb"), "rolling_radius": q(12.6, "in"), "rotating_mass_factor": 1.04,
                "rolling_resistance": 0.012, "drag_area": q(8.1, "ft2"), "adhesion": 0.85,
                "geometry": {"wheelbase": q(9.2, "ft"), "center_of_gravity_height": q(22.5, "in"),
                             "front_axle_to_center_of_gravity": q(4.4, "ft")}},
    "fitted": [{"axle": "front", "count": 2, "brake": {"pad": PAD, "lining": LINING, "disc": DISC, "actuation": CHAIN}},
               {"axle": "rear", "count": 2, "torque": q(410, "lbf.ft")}],
    "initial_speed": q(65, "mph"), "drive_force": q(-30, "lbf"), "grade": q(-2.5, "%"),
    "response": {"reaction_time": q(0.8, "s"), "build_up_time": q(0.3, "s")},
}
WITHOUT_INPUT = CHAIN | {"master_cylinder": {k: v for k, v in CHAIN["master_cylinder"].items() if k != "operator_force"}}
REQUESTS = {
    "/v1/pad-capacity": {"pad": PAD, "lining": LINING, "clamp_force": q(3300, "lbf")},
    "/v1/actuation-force": {"brake": {"pad": PAD, "lining": LINING, "actuation": WITHOUT_INPUT}, "torque": q(9800, "lbf.in")},
    "/v1/stopping": STOP,
    "/v1/stop-energy": STOP | {"ambient_temperature": q(59, "degF"), "start_temperature": q(212, "degF")},
}


def converted(part):
    if isinstance(part, list):
        return [converted(item) for item in part]
    if not isinstance(part, dict):
        return part
    if set(part) == {"value", "unit"}:
        if part["unit"] not in UNITS:
            return part
        name, target, symbol = UNITS[part["unit"]]
        return q(Q(float(part["value"]), name).to(target).magnitude, symbol)
    return {member: converted(value) for member, value in part.items()}


def main():
    cases = [{"path": path, "us": request, "si": converted(request)} for path, request in REQUESTS.items()]
    factors = {symbol: Q(1.0, name).to(target).magnitude for symbol, (name, target) in ANSWERS.items()}
    print(json.dumps({"library": f"pint {pint.__version__}", "note": "requests invented", "cases": cases,
                      "factors": factors}, indent=1))


main()
