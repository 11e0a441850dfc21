"""Measurements for independent estimates: read, and refused where nothing has such values."""

from dataclasses import fields
from itertools import pairwise
from typing import Final

from roughness.assessment.reading import read_strictly
from roughness.comparison.pebbles import LARGEST_MM, SMALLEST_MM
from roughness.errors import InputError
from roughness.quantities.printing import show_value
from roughness.quantities.strict_json import read_json
from roughness.survey.cross_check import CrossCheck, Judged, StemSample

# Smallest and largest value that a stream can have, and what is meant: a value beyond is mostly
# one in another unit. Ours, no source.
_POSSIBLE: Final[dict[str, tuple[float, float, str]]] = {
    "slope": (1e-7, 0.5, "a fall in m per m along the channel: 2 % is 0.02"),
    "hydraulic_radius_m": (1e-3, 100, "metres"),
    "depth_m": (1e-3, 200, "metres"),
    "max_depth_m": (1e-3, 300, "metres"),
    "area_m2": (1e-4, 1e6, "square metres"),
    "velocity_ms": (1e-4, 30, "metres per second"),
    "gradation": (1, 100, "sqrt(d84/d16), 1 or more"),
}
_POSSIBLE_MM: Final = (SMALLEST_MM, LARGEST_MM, "millimetres")
_SIZES: Final = ("d16_mm", "d50_mm", "d65_mm", "d75_mm", "d84_mm", "d90_mm")
_LARGEST_N: Final = 10.0


def read_cross_check(raw: bytes, where: str) -> CrossCheck:
    """Read the JSON text of a cross-check; ``where`` names it in messages.

    Raises
    ------
    InputError
        For anything that is not such a document: one sentence with the field.
    """
    return cross_check_from(read_json(raw, where), where)


def cross_check_from(document: object, where: str) -> CrossCheck:
    """Read a parsed JSON document; errors as :func:`read_cross_check`."""
    if not isinstance(document, dict):
        raise InputError("no JSON object", where=where, wanted='write it like {"d84_mm": 90}')
    given = read_strictly(CrossCheck, document, where)
    assert isinstance(given, CrossCheck)
    return given


def checked_cross_check(given: CrossCheck, where: str) -> None:
    """Refuse what no stream has.

    Raises
    ------
    InputError
        The first impossible value, with its field and what would be right.
    """
    for field in fields(CrossCheck):
        value = getattr(given, field.name)
        if isinstance(value, int | float):
            _refuse_impossible(field.name, value, where)
    _refuse_disorder(given, where)
    for name, judged in (("base", given.base), ("n", given.n)):
        if judged is not None:
            _refuse_judged(judged, f"{where}: {name}")
    if given.pebble_count_mm is not None and given.pebble_tally is not None:
        raise InputError(
            "the stones are there one by one and by class",
            where=f"{where}: pebble_tally",
            wanted="give one of pebble_count_mm and pebble_tally",
        )
    if given.stems is not None:
        _refuse_stems(given.stems, given.depth_m, f"{where}: stems")


def _refuse_impossible(name: str, value: float, where: str) -> None:
    least, most, meant = _POSSIBLE.get(name, _POSSIBLE_MM)
    if value <= 0:
        raise InputError(
            f"{show_value(value)} cannot be measured",
            where=f"{where}: {name}",
            wanted="above 0 is due; leave out what is unknown",
        )
    if not least <= value <= most:
        raise InputError(
            f"{value:g} is no value of a stream",
            where=f"{where}: {name}",
            wanted=f"it is meant in {meant}" if name != "gradation" else f"it is {meant}",
        )


def _refuse_disorder(given: CrossCheck, where: str) -> None:
    known = [(name, getattr(given, name)) for name in _SIZES if getattr(given, name) is not None]
    for (finer, small), (coarser, large) in pairwise(known):
        if large < small:
            raise InputError(
                f"{coarser} {show_value(large)} is below {finer} {show_value(small)}",
                where=f"{where}: {coarser}",
                wanted="a greater share is finer than the larger size; check for swapped values",
            )
    for larger, of in (("depth_m", "hydraulic_radius_m"), ("max_depth_m", "depth_m")):
        above, below = getattr(given, larger), getattr(given, of)
        if above is not None and below is not None and above < below:
            raise InputError(
                f"{larger} {show_value(above)} is below {of} {show_value(below)}",
                where=f"{where}: {larger}",
                wanted="hydraulic radius, mean depth and largest depth rise in this order",
            )


def _refuse_judged(judged: Judged, where: str) -> None:
    if not 0 < judged.low <= judged.best <= judged.high <= _LARGEST_N:
        shown = ", ".join(show_value(n) for n in (judged.low, judged.best, judged.high))
        raise InputError(
            f"low, best, high are {shown}",
            where=where,
            wanted=f"values of n above 0 and up to {show_value(_LARGEST_N)}, in this order",
        )


def _refuse_stems(stems: StemSample, depth_m: float | None, where: str) -> None:
    if depth_m is None:
        raise InputError("counted stems need the depth", where=where, wanted="give depth_m too")
    for name in ("area_m2", "n_boundary", "drag"):
        value = getattr(stems, name)
        if not 0 < value <= 1e6:
            raise InputError(
                f"{show_value(value)} cannot be used", where=f"{where}.{name}", wanted="above 0"
            )
    if not stems.counted:
        raise InputError("no stems were counted", where=where, wanted="leave stems out")
    for row, counted in enumerate(stems.counted):
        height = counted.height_m
        wrong = not 0 <= counted.number <= 1_000_000 or not 0 < counted.diameter_m <= 20
        if wrong or (height is not None and not 0 < height <= 200):
            raise InputError(
                "this class of stems cannot be used",
                where=f"{where}.counted.{row}",
                wanted="a number of 0 or more, a diameter (and height) in m above 0",
            )
