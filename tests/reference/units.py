"""Writes units.json: what the units of the service are in SI, computed by the library pint.

Run it with pint installed: python3 tests/reference/units.py > tests/reference/units.json
Each entry is a list of pairs [value in the unit, value in the coherent SI unit].
pint derives its customary units from the exact foot, pound, standard gravity and the International
Table calorie, independently of the service's table.
"""

import json
import math

import pint

ureg = pint.UnitRegistry()

LINEAR = {
    "length": ("m", {"mm": "mm", "m": "m", "cm": "cm", "km": "km", "in": "inch", "ft": "foot", "mi": "mile"}),
    "area": ("m**2", {"mm2": "mm**2", "cm2": "cm**2", "m2": "m**2", "in2": "inch**2", "ft2": "foot**2"}),
    "volume": ("m**3", {"mm3": "mm**3", "cm3": "cm**3", "L": "liter", "in3": "inch**3"}),
    "angle": ("rad", {"deg": "degree", "rad": "rad"}),
    "grade": ("rad", {"deg": "degree", "rad": "rad"}),
    "mass": ("kg", {"kg": "kg", "g": "gram", "t": "metric_ton", "lb": "pound"}),
    "force": ("N", {"N": "N", "kN": "kN", "daN": "daN", "lbf": "force_pound"}),
    "pressure": ("Pa", {"MPa": "MPa", "kPa": "kPa", "bar": "bar", "Pa": "Pa", "psi": "psi", "ksi": "kip / inch**2"}),
    "torque": ("N*m", {"N.m": "N*m", "kN.m": "kN*m", "N.mm": "N*mm", "lbf.in": "force_pound*inch", "lbf.ft": "force_pound*foot"}),
    "energy": ("J", {"kJ": "kJ", "J": "J", "MJ": "MJ", "kWh": "kWh", "Btu": "Btu_it", "ft.lbf": "foot*force_pound"}),
    "power": ("W", {"kW": "kW", "W": "W", "hp": "horsepower", "Btu/s": "Btu_it/s"}),
    "speed": ("m/s", {"m/s": "m/s", "km/h": "km/hour", "ft/s": "foot/s", "mph": "mph", "ft/min": "foot/minute"}),
    "rotational_speed": ("rad/s", {"rpm": "revolutions_per_minute", "rad/s": "rad/s"}),
    "acceleration": ("m/s**2", {"m/s2": "m/s**2", "g": "standard_gravity", "ft/s2": "foot/s**2"}),
    "angular_acceleration": ("rad/s**2", {"rad/s2": "rad/s**2"}),
    "time": ("s", {"s": "s", "ms": "ms", "min": "minute", "h": "hour"}),
    "temperature_difference": ("K", {"K": "K", "degF": "delta_degF"}),
    "moment_of_inertia": ("kg*m**2", {"kg.m2": "kg*m**2", "lb.ft2": "pound*foot**2", "lb.in2": "pound*inch**2"}),
    "power_flux": ("W/m**2", {"W/mm2": "W/mm**2", "kW/m2": "kW/m**2", "hp/in2": "horsepower/inch**2"}),
    "energy_flux": ("J/m**2", {"J/mm2": "J/mm**2", "Btu/in2": "Btu_it/inch**2"}),
    "pressure_velocity": ("Pa*m/s", {"MPa.m/s": "MPa*m/s", "psi.ft/min": "psi*foot/minute"}),
    "heat_transfer_coefficient": ("W/m**2/K", {"W/(m2.K)": "W/m**2/K", "Btu/(h.ft2.degF)": "Btu_it/hour/foot**2/delta_degF"}),
    "thermal_conductivity": ("W/m/K", {"W/(m.K)": "W/m/K", "Btu/(h.ft.degF)": "Btu_it/hour/foot/delta_degF"}),
    "specific_heat": ("J/kg/K", {"J/(kg.K)": "J/kg/K", "Btu/(lb.degF)": "Btu_it/pound/delta_degF"}),
    "density": ("kg/m**3", {"kg/m3": "kg/m**3", "g/cm3": "g/cm**3", "lb/in3": "pound/inch**3", "lb/ft3": "pound/foot**3"}),
    "specific_wear": ("m**3/J", {"mm3/MJ": "mm**3/MJ", "cm3/MJ": "cm**3/MJ", "in3/(hp.h)": "inch**3/horsepower/hour"}),
    "stiffness": ("N/m", {"N/mm": "N/mm", "lbf/in": "force_pound/inch"}),
    "line_compliance": ("m**3/Pa", {"mm3/MPa": "mm**3/MPa", "in3/psi": "inch**3/psi"}),
    "stop_frequency": ("1/s", {"1/h": "1/hour", "1/min": "1/minute"}),
}

TEMPERATURE = {"degC": "degC", "K": "kelvin", "degF": "degF"}


def main():
    points = {"ratio.1": [[1.0, 1.0]]}
    for dimension, (coherent, units) in LINEAR.items():
        for symbol, name in units.items():
            si = ureg.Quantity(1.0, name).to(coherent).magnitude
            points[f"{dimension}.{symbol}"] = [[1.0, si]]
    for symbol, name in TEMPERATURE.items():
        values = [20.0, 32.0, 451.0, 1000.0]
        points[f"temperature.{symbol}"] = [[v, ureg.Quantity(v, name).to("kelvin").magnitude] for v in values]
    # pint knows no slope: by the definition, rise over run times 100 is the tangent in percent.
    points["grade.%"] = [[v, math.atan(v / 100.0)] for v in (-12.0, 1.0, 6.0, 100.0)]
    print(json.dumps({"library": f"pint {pint.__version__}", "points": points}, indent=1, sort_keys=True))


main()
