"""A measured flow read from text and held to what can be measured at all."""

from collections.abc import Iterator, Sequence
from itertools import pairwise
from typing import Any, Final

from roughness.assessment.reading import read_strictly
from roughness.assessment.wet_sections import above_zero, wet_section
from roughness.errors import InputError
from roughness.quantities.printing import show_value
from roughness.quantities.strict_json import read_json
from roughness.survey.measured_flow import CheckedFlow, MeasuredFlow

_MOST_SECTIONS: Final = 1000
_MOST_EVENTS: Final = 1000
_LARGEST_SLOPE: Final = 1.0


def read_measured_flows(raw: bytes, where: str) -> tuple[CheckedFlow, ...] | CheckedFlow:
    """Read the JSON text of one measured flow, or of a list of them.

    Parameters
    ----------
    raw : bytes
        A JSON object, or a list of at most 1000: the events of one reach, or of several.
    where : str
        Names it in messages.

    Raises
    ------
    InputError
        For anything that is not such a document, or cannot be measured: one sentence.
    """
    document = read_json(raw, where)
    if not isinstance(document, list):
        return _flow_from(document, where)
    if not 0 < len(document) <= _MOST_EVENTS:
        raise InputError(
            f"a list of {len(document)} flows", where=where, wanted=f"1 to {_MOST_EVENTS} are due"
        )
    return tuple(_flow_from(one, flow_of(where, i)) for i, one in enumerate(document, 1))


def flow_of(where: str, number: int) -> str:
    """Return how messages name one flow of a list."""
    return f"{where}: flow {number}"


def _flow_from(document: Any, where: str) -> CheckedFlow:
    if not isinstance(document, dict):
        raise InputError("no JSON object", where=where, wanted='it starts with {"discharge_m3s":')
    flow = read_strictly(MeasuredFlow, document, where)
    assert isinstance(flow, MeasuredFlow)
    return checked_flow(flow, where)


def checked_flow(flow: MeasuredFlow, where: str) -> CheckedFlow:
    """Return a measured flow with its sections as they were wetted.

    Raises
    ------
    InputError
        What no flow can have: one sentence with the field and what would be right.
    """
    above_zero(flow.discharge_m3s, f"{where}: discharge_m3s", "the discharge in m3/s")
    if not 0 < len(flow.sections) <= _MOST_SECTIONS:
        raise InputError(
            f"{len(flow.sections)} sections",
            where=f"{where}: sections",
            wanted=f"1 to {_MOST_SECTIONS} are due",
        )
    _check_losses_and_errors(flow, where)
    if len(flow.sections) == 1:
        _check_slope(flow.slope, where)
    else:
        _check_places(flow, where)
    return CheckedFlow(
        discharge_m3s=flow.discharge_m3s,
        sections=tuple(
            wet_section(section, flow.discharge_m3s, f"{where}: section {number}")
            for number, section in enumerate(flow.sections, 1)
        ),
        slope=flow.slope,
        expansion_loss=flow.expansion_loss,
        contraction_loss=flow.contraction_loss,
        errors=flow.errors,
    )


def _check_losses_and_errors(flow: MeasuredFlow, where: str) -> None:
    for name in ("expansion_loss", "contraction_loss"):
        value = getattr(flow, name)
        if not 0 <= value <= 1:
            raise InputError(
                f"{show_value(value)} is no part of a velocity head",
                where=f"{where}: {name}",
                wanted="0 to 1",
            )
    alone = len(flow.sections) == 1
    for name, unit in (
        ("discharge_percent", "%"),
        ("area_percent", "%"),
        ("slope_percent", "%"),
        ("water_level_m", "m"),
    ):
        value = getattr(flow.errors, name)
        if value is None:
            continue
        place = f"{where}: errors.{name}"
        if value < 0 or (unit == "%" and value >= 100):
            wanted = "0 or more" if unit == "m" else "0 to below 100"
            raise InputError(
                f"{show_value(value)} {unit} is no error", where=place, wanted=f"{wanted} is due"
            )
        if name == ("water_level_m" if alone else "slope_percent"):
            wanted = "slope_percent with one section, water_level_m with more"
            raise InputError("it does not count here", where=place, wanted=wanted)


def _check_slope(slope: float | None, where: str) -> None:
    place = f"{where}: slope"
    if slope is None:
        raise InputError(
            "it is missing", where=place, wanted="one section needs the slope, or give two sections"
        )
    above_zero(slope, place, "metres of fall a metre, such as 0.002; water runs downhill")
    if slope > _LARGEST_SLOPE:
        raise InputError(
            f"{show_value(slope)} is too steep", where=place, wanted="metres of fall a metre"
        )


def _check_places(flow: MeasuredFlow, where: str) -> None:
    if flow.slope is not None:
        raise InputError(
            "it does not count here",
            where=f"{where}: slope",
            wanted="leave it out: with two sections or more the water levels say it",
        )
    for name in ("distance_m", "water_level_m"):
        for number, section in enumerate(flow.sections, 1):
            if getattr(section, name) is None:
                raise InputError(
                    "it is missing",
                    where=f"{where}: section {number}, {name}",
                    wanted="due where there are two sections or more",
                )
    distances = [s.distance_m for s in flow.sections if s.distance_m is not None]
    steps = list(_steps(distances))
    for number, step in enumerate(steps, 2):
        if step == 0 or (step > 0) != (steps[0] > 0):
            raise InputError(
                f"the distance {show_value(distances[number - 1])} m does not follow"
                f" {show_value(distances[number - 2])} m",
                where=f"{where}: section {number}, distance_m",
                wanted="sections from upstream to downstream, their distances all growing or all"
                " falling",
            )


def _steps(distances: Sequence[float]) -> Iterator[float]:
    return (b - a for a, b in pairwise(distances))
