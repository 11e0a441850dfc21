"""From a measured number to the grades it leaves. It suggests; it never decides."""

import math
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import Any, Final, get_args

from roughness.errors import InputError, UnknownNameError
from roughness.handbook.classes import CRITERION_OF, Criterion, Interval
from roughness.handbook.tables import FactorTable, Handbook
from roughness.quantities.foreign_text import nearest, printable
from roughness.quantities.printing import enumerate_words, rounded, show_value
from roughness.survey.words import Factor, Plants, Setting

# How far from a class edge the other class is offered too (common practice, no source):
# absolute for sinuosity and depth over height, a share of the limit for what is blocked.
NEAR_SINUOSITY: Final = 0.05
NEAR_DEPTH_RATIO: Final = 0.2
NEAR_BLOCKED_SHARE: Final = 0.2
_FLOAT_NOISE = 1e-9
# Decimals that a sinuosity is at least written with where it is compared with its lengths.
_FEWEST_DECIMALS = 1


@dataclass(frozen=True, slots=True)
class Candidates:
    """The grades that a measured criterion leaves, in the order of the table."""

    grades: tuple[str, ...] = ()
    """Empty where nothing was measured or the publication gives no class for it."""
    says: str = ""
    """What was measured, in words: ``blocked 8 %``."""
    near: tuple[str, ...] = ()
    """Both grades where the number lies near a class edge."""
    beyond: bool = False
    """Whether the number lies above everything that is published."""
    advice: str = ""
    """Why there is no grade, and what to do; empty where there is one."""


@dataclass(frozen=True, slots=True)
class _Reading:
    says: str
    value: float | None = None
    plants: Plants | None = None
    missing: str = ""


def candidates(
    handbook: Handbook,
    setting: Setting,
    factor: Factor,
    criteria: Mapping[str, Any],
    *,
    where: str = "",
) -> Candidates:
    """Return the grades that the measured criteria of one factor leave.

    Parameters
    ----------
    handbook : Handbook
    setting, factor : str
    criteria : mapping
        What was measured, by field name of the factor's choice (``blocked_percent``,
        ``sinuosity``, ``d50_mm``, ...). Fields that measure nothing are passed over.
    where : str
        Place of the choice, for messages.

    Returns
    -------
    Candidates
        No grades where nothing was measured, the handbook publishes no class for it, or
        the number lies outside of them all (then ``advice`` says what to do).

    Raises
    ------
    InputError
        For a number that cannot be: a sinuosity below 1, a percentage outside 0 to 100,
        a size or length that is not above 0, a channel shorter than its valley.
    """
    read = _READERS.get(factor)
    try:
        reading = read(criteria) if read else None
    except InputError as error:
        raise type(error)(error.what, where=where, wanted=error.wanted) from None
    if reading is None:
        return Candidates()
    if reading.value is None:
        return Candidates(says=reading.says, advice=reading.missing)
    return _classify(handbook, setting, factor, reading)


def _classify(
    handbook: Handbook, setting: Setting, factor: Factor, reading: _Reading
) -> Candidates:
    table, criterion = handbook.table(setting, factor), CRITERION_OF[factor]
    value, classes = reading.value or 0.0, _classes(table, criterion, reading.plants)
    if not classes:
        kind = f" for {reading.plants}" if reading.plants else ""
        advice = f"{handbook.key} publishes no limits of {criterion}{kind}: choose the grade"
        return Candidates(says=reading.says, advice=advice)
    near = _in_order(table, {key for key, i in classes if _touches(i, value, criterion)})
    inside = {key for key, interval in classes if value in interval}
    beyond = all(interval.lies_below(value) for _, interval in classes)
    beneath = all(interval.lies_above(value) for _, interval in classes)
    advice = table.says_above if beyond else table.says_below if beneath else ""
    if not inside and not advice:
        inside = _around(table, criterion, classes, value)
    return Candidates(
        grades=_in_order(table, inside),
        says=reading.says,
        near=near if len(near) > 1 else (),
        beyond=beyond and bool(advice),
        advice=advice,
    )


def _classes(
    table: FactorTable, criterion: Criterion, plants: Plants | None
) -> list[tuple[str, Interval]]:
    return [
        (grade.key, measured.interval)
        for grade in table.grades
        for measured in grade.measured
        if measured.criterion == criterion and measured.plants == plants
    ]


def _around(
    table: FactorTable, criterion: Criterion, classes: list[tuple[str, Interval]], value: float
) -> set[str]:
    """Return both neighbours of a value that no class holds.

    Past the last class of either side the neighbour is the next grade of the table: nothing
    is published there that would tell the two apart.
    """
    below = [(i.high, key) for key, i in classes if i.lies_below(value)]
    above = [(-i.low, key) for key, i in classes if i.lies_above(value)]
    found = {max(side)[1] for side in (below, above) if side}
    if below and above:
        return found
    # Deeper water over plants is smoother; more blockage, longer bends, larger stones rougher.
    rougher = bool(below) != (criterion == "depth_over_height")
    keys = [grade.key for grade in table.grades if not grade.lower_bound]
    at = keys.index(next(iter(found))) + (1 if rougher else -1)
    return found | ({keys[at]} if 0 <= at < len(keys) else set())


def _in_order(table: FactorTable, keys: set[str]) -> tuple[str, ...]:
    return tuple(grade.key for grade in table.grades if grade.key in keys)


def _touches(interval: Interval, value: float, criterion: Criterion) -> bool:
    """Whether a class holds ``value`` or has an edge near it."""
    if value in interval:
        return True
    edge = interval.low if interval.lies_above(value) else interval.high
    within = {
        "sinuosity": NEAR_SINUOSITY,
        "depth_over_height": NEAR_DEPTH_RATIO,
        "blocked_percent": NEAR_BLOCKED_SHARE * edge,
    }.get(criterion, 0.0)
    return within > 0 and abs(value - edge) <= within + _FLOAT_NOISE


def _number(criteria: Mapping[str, Any], field: str, domain: Interval, wanted: str) -> float | None:
    given = criteria.get(field)
    if given is None:
        return None
    value = float(given)
    if not math.isfinite(value) or value not in domain:
        raise InputError(f"{field} is {given}", wanted=wanted)
    return value


_PERCENT = Interval(0, 100, True, True)
_POSITIVE = Interval(0, math.inf, False, False)
_FROM_ONE = Interval(1, math.inf, True, False)


def _read_base(criteria: Mapping[str, Any]) -> _Reading | None:
    d50 = _number(criteria, "d50_mm", _POSITIVE, "a size in mm above 0 is due")
    return None if d50 is None else _Reading(f"d50 {show_value(d50)} mm", d50)


def _read_obstruction(criteria: Mapping[str, Any]) -> _Reading | None:
    wanted = "a share of the flow area from 0 to 100 is due"
    blocked = _number(criteria, "blocked_percent", _PERCENT, wanted)
    return None if blocked is None else _Reading(f"blocked {show_value(blocked)} %", blocked)


def _read_vegetation(criteria: Mapping[str, Any]) -> _Reading | None:
    _number(criteria, "perimeter_percent", _PERCENT, "a share from 0 to 100 is due")
    depth = _number(criteria, "depth_m", _POSITIVE, "a mean depth in m above 0 is due")
    height = _number(criteria, "vegetation_height_m", _POSITIVE, "a height in m above 0 is due")
    plants = criteria.get("plants")
    if plants is not None and plants not in get_args(Plants):
        known = f"known are {enumerate_words(get_args(Plants))}"
        near = nearest(str(plants), get_args(Plants))
        raise UnknownNameError(
            f"plants is {printable(str(plants))!r}", wanted=f"{near}? {known}" if near else known
        )
    if depth is None or height is None:
        return None
    ratio = _without_noise(depth / height)
    says = f"depth {rounded(ratio, 2)} times the height of the plants"
    if plants is None:
        return _Reading(says, missing="say what kind of plants: the classes differ by it")
    return _Reading(f"{says} ({plants})", ratio, plants)


def _read_meander(criteria: Mapping[str, Any]) -> _Reading | None:
    wanted = "channel length over valley length, 1 or more, is due"
    given = _number(criteria, "sinuosity", _FROM_ONE, wanted)
    from_lengths = _length_ratio(criteria, needed=given is None)
    if given is None:
        if from_lengths is None:
            return None
        return _Reading(f"sinuosity {rounded(from_lengths, 3)} from the lengths", from_lengths)
    if from_lengths is not None and abs(given - from_lengths) > _half_last_decimal(given):
        raise InputError(
            f"sinuosity is {show_value(given)}, the lengths give {rounded(from_lengths, 3)}",
            wanted="one of the three numbers is wrong: correct it or leave it out",
        )
    return _Reading(f"sinuosity {show_value(given)}", given)


def _length_ratio(criteria: Mapping[str, Any], *, needed: bool) -> float | None:
    wanted = "a length in m above 0 is due"
    along = _number(criteria, "channel_length_m", _POSITIVE, wanted)
    straight = _number(criteria, "valley_length_m", _POSITIVE, wanted)
    if along is None or straight is None:
        if needed and (along is not None or straight is not None):
            given, other = "channel_length_m", "valley_length_m"
            if along is None:
                given, other = other, given
            raise InputError(f"{given} stands alone", wanted=f"{other} is due beside it")
        return None
    if along < straight:
        raise InputError(
            f"channel_length_m {show_value(along)} is shorter than "
            f"valley_length_m {show_value(straight)}",
            wanted="a channel is at least as long as its valley",
        )
    return _without_noise(along / straight)


def _half_last_decimal(value: float) -> float:
    decimals = len(show_value(value).partition(".")[2])
    return 0.5 * 10.0 ** -max(decimals, _FEWEST_DECIMALS) + _FLOAT_NOISE


def _without_noise(ratio: float) -> float:
    """Round to twelve digits: 0.6 m over 0.2 m is 3, not 2.9999999999999996."""
    return float(f"{ratio:.12g}")


_READERS: Final[dict[Factor, Callable[[Mapping[str, Any]], _Reading | None]]] = {
    "base": _read_base,
    "obstruction": _read_obstruction,
    "vegetation": _read_vegetation,
    "meander": _read_meander,
}
