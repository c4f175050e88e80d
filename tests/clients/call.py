"""Calls a running service through the generated client. The expected numbers are those of the example files."""

import json
import pathlib
import sys
from typing import Any

from brakewright_client import Client
from brakewright_client.api.calculations import pad_capacity, stopping
from brakewright_client.models import (
    Angle,
    AngleUnit,
    AnnularSectorPad,
    AnnularSectorShape,
    Friction,
    Length,
    LengthUnit,
    Lining,
    PadCapacityAnswer,
    PadCapacityRequest,
    Pressure,
    PressureUnit,
    Problem,
    StoppingAnswer,
    StoppingRequest,
)
from brakewright_client.types import Unset

BASE, EXAMPLES = sys.argv[1], pathlib.Path(sys.argv[2])


def example(name: str) -> Any:
    return json.loads((EXAMPLES / f"{name}.json").read_text())


def same(what: str, actual: object, expected: object) -> None:
    assert actual == expected, f"{what}: {actual} is not {expected}"


def sector() -> AnnularSectorPad:
    return AnnularSectorPad(
        shape=AnnularSectorShape.ANNULAR_SECTOR,
        inner_radius=Length(value=150, unit=LengthUnit.MILLIMETRE),
        outer_radius=Length(value=210, unit=LengthUnit.MILLIMETRE),
        angle=Angle(value=40, unit=AngleUnit.DEGREE),
    )


def by_hand(client: Client) -> None:
    expected = example("pad-capacity/hoist_caliper_at_its_limit")["response"]["results"]
    lining = Lining(
        friction=Friction(low=0.33, nominal=0.38, high=0.44),
        max_pressure=Pressure(value=2.4, unit=PressureUnit.MEGAPASCAL),
    )
    answer = pad_capacity.sync(client=client, body=PadCapacityRequest(pad=sector(), lining=lining))
    assert isinstance(answer, PadCapacityAnswer), answer
    torque = answer.results.friction_cases[0].torque
    same("torque", torque.value, expected["friction_cases"][0]["torque"]["value"])


def outline(client: Client) -> None:
    file = example("pad-capacity/rotor_pad_outline")
    answer = pad_capacity.sync(client=client, body=PadCapacityRequest.from_dict(file["request"]))
    assert isinstance(answer, PadCapacityAnswer), answer
    same("area", answer.results.pad_area.value, file["response"]["results"]["pad_area"]["value"])


def stop(client: Client) -> None:
    file = example("stopping/tractor_on_a_ramp")
    answer = stopping.sync(client=client, body=StoppingRequest.from_dict(file["request"]))
    assert isinstance(answer, StoppingAnswer), answer
    distance = answer.results.friction_cases[0].total_distance
    assert not isinstance(distance, Unset)
    expected = file["response"]["results"]["friction_cases"][0]["total_distance"]["value"]
    same("distance", distance.value, expected)


def refused(client: Client) -> None:
    expected = example("pad-capacity/impossible_sizes")["response"]
    request = PadCapacityRequest.from_dict(example("pad-capacity/impossible_sizes")["request"])
    answer = pad_capacity.sync_detailed(client=client, body=request)
    same("status", answer.status_code, 422)
    problem = answer.parsed
    assert isinstance(problem, Problem), problem
    assert not isinstance(problem.errors, Unset) and problem.errors is not None
    same("pointer", problem.errors[0].pointer, expected["errors"][0]["pointer"])
    same("count", problem.error_count, expected["error_count"])


with Client(base_url=BASE) as service:
    for check in (by_hand, outline, stop, refused):
        check(service)
print("Python: four calls answered as expected")
