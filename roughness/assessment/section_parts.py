"""The parts of a section and their segments laid side by side, or why they do not fit."""

from dataclasses import dataclass
from itertools import pairwise
from typing import Final

import numpy as np
from numpy.typing import NDArray

from roughness.assessment.section_bed import Bed
from roughness.errors import InputError
from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import show_n, show_value
from roughness.quantities.ranges import Range, point
from roughness.survey.sections import Roughness, Section, SectionPart

Floats = NDArray[np.float64]

_HIGHEST_N: Final = 1.0
_SAME_M: Final = 1e-9


@dataclass(frozen=True, slots=True)
class Stretch:
    """A stretch of the bed with one n, between two distances."""

    left: float
    right: float
    n: Range


@dataclass(frozen=True, slots=True)
class LaidPart:
    """One part with the stretches that make it up, from left to right."""

    part: SectionPart
    stretches: tuple[Stretch, ...]
    n_unused: bool
    """Whether the part's own n is left no stretch by its segments."""


@dataclass(frozen=True, slots=True)
class Laid:
    """All parts of a section, from left to right without gaps."""

    parts: tuple[LaidPart, ...]
    has_range: bool
    """Whether any n has a range, so that low and high are asked for."""


def lay_parts(section: Section, bed: Bed, where: str) -> Laid:
    """Return the parts side by side, each with its stretches of one n.

    Raises
    ------
    InputError
        No part; two of one name; overlaps, gaps and parts that leave an end out; n missing or
        out of order.
    """
    if not section.parts:
        raise InputError("there is no part", where=f"{where}: parts", wanted="at least one is due")
    # The banks of a trapezoid go on upwards, and the outermost parts with them.
    ends = (float(bed.x.min()), float(bed.x.max()))
    if section.trapezoid is not None:
        ends = (-np.inf, np.inf)
    placed = _in_order(section.parts, ends, where)
    _refuse_names(section.parts, where)
    edges = _edges(placed, ends, bed, where)
    parts = tuple(
        _lay(part, left, right, bed, where)
        for (part, _, _), (left, right) in zip(placed, pairwise(edges), strict=True)
    )
    given = [n for part in section.parts for n in _all_n(part)]
    return Laid(parts, any(isinstance(n, Roughness) and _is_wide(n) for n in given))


Placed = tuple[SectionPart, float, float]


def _in_order(
    parts: tuple[SectionPart, ...], ends: tuple[float, float], where: str
) -> list[Placed]:
    for key, outermost in (("from", "leftmost"), ("to", "rightmost")):
        open_parts = [p for p in parts if (p.from_ if key == "from" else p.to) is None]
        if len(open_parts) > 1:
            raise InputError(
                f"{len(open_parts)} parts say no {key!r}",
                where=f"{where}: parts",
                wanted=f"only the {outermost} part may leave it out",
            )
    placed = [
        (
            p,
            -np.inf if p.from_ is None else p.from_,
            np.inf if p.to is None else p.to,
        )
        for p in parts
    ]
    for part, left, right in placed:
        if not left < right:
            raise InputError(
                f"it runs from {show_value(left)} to {show_value(right)} m",
                where=_place(where, part),
                wanted="'from' must be less than 'to'",
            )
        if right <= ends[0] or left >= ends[1]:
            raise InputError(
                f"it runs from {_limit(left)} to {_limit(right)}, beside the section",
                where=_place(where, part),
                wanted=f"the section reaches from {_limit(ends[0])} to {_limit(ends[1])}",
            )
    return sorted(placed, key=lambda p: p[1])


def _refuse_names(parts: tuple[SectionPart, ...], where: str) -> None:
    names = [part.name for part in parts]
    for name in names:
        if names.count(name) > 1:
            raise InputError(
                f"two parts are named {printable(name)!r}",
                where=f"{where}: parts",
                wanted="give each part its own name",
            )


def _edges(placed: list[Placed], ends: tuple[float, float], bed: Bed, where: str) -> list[float]:
    """Return the limits between the parts, with those of the section at both ends."""
    place = f"{where}: parts"
    for (one, _, right), (other, left, _) in pairwise(placed):
        if abs(left - right) > _SAME_M:
            what = "overlap" if left < right else "leave a gap"
            raise InputError(
                f"{printable(one.name)!r} and {printable(other.name)!r} {what} between"
                f" {_limit(min(left, right))} and {_limit(max(left, right))}",
                where=place,
                wanted="one part must end where the next begins",
            )
    first, last = placed[0], placed[-1]
    is_short = first[1] > ends[0] + _SAME_M or last[2] < ends[1] - _SAME_M
    if is_short and np.isfinite(ends).all():
        raise InputError(
            f"they reach from {_limit(first[1])} to {_limit(last[2])}, the section from"
            f" {_limit(ends[0])} to {_limit(ends[1])}",
            where=place,
            wanted="they must cover it from end to end",
        )
    return [*(max(left, bed.x.min()) for _, left, _ in placed), float(bed.x.max())]


def _lay(part: SectionPart, left: float, right: float, bed: Bed, where: str) -> LaidPart:
    """Return a part's stretches; the outermost parts end with the section."""
    place = _place(where, part)
    own = None if part.n is None else _range(part.n, f"{place}.n")
    if not part.segments:
        if own is None:
            raise InputError("n is missing", where=place, wanted="a number, or low, best and high")
        return LaidPart(part, (Stretch(left, right, own),), n_unused=False)
    found: list[Stretch] = []
    for stretch in _segments(part, left, right, bed, place):
        reached = found[-1].right if found else left
        if stretch.left < reached - _SAME_M:
            raise InputError(
                f"segments overlap between {_limit(stretch.left)} and {_limit(reached)}",
                where=place,
                wanted="one segment must end where the next begins",
            )
        if stretch.left > reached + _SAME_M:
            found.append(Stretch(reached, stretch.left, _rest(own, reached, stretch.left, place)))
            reached = stretch.left
        found.append(Stretch(reached, stretch.right, stretch.n))
    if found[-1].right < right - _SAME_M:
        found.append(Stretch(found[-1].right, right, _rest(own, found[-1].right, right, place)))
    unused = own is not None and len(found) == len(part.segments)
    return LaidPart(part, tuple(found), n_unused=unused)


def _segments(part: SectionPart, left: float, right: float, bed: Bed, place: str) -> list[Stretch]:
    """Return the segments as given, in order; limits on the part's own are the part's.

    A segment without width is a vertical wall.
    """
    found = []
    for i, segment in enumerate(part.segments or ()):
        at = f"{place}.segments.{i}"
        start = left if segment.from_ is None or segment.from_ == part.from_ else segment.from_
        end = right if segment.to is None or segment.to == part.to else segment.to
        if not (start < end or (start == end and _is_wall(bed, start))):
            raise InputError(
                f"it runs from {_limit(start)} to {_limit(end)}",
                where=at,
                wanted="'from' must be less than 'to', or both where a vertical wall stands",
            )
        if start < left - _SAME_M or end > right + _SAME_M:
            raise InputError(
                f"it runs from {_limit(start)} to {_limit(end)}, outside its part",
                where=at,
                wanted=f"the part reaches from {_limit(left)} to {_limit(right)}",
            )
        found.append(Stretch(start, end, _range(segment.n, f"{at}.n")))
    return sorted(found, key=lambda stretch: (stretch.left, stretch.right))


def _is_wall(bed: Bed, distance: float) -> bool:
    return bool(((bed.x[:-1] == distance) & (bed.x[1:] == distance)).any())


def _rest(own: Range | None, left: float, right: float, place: str) -> Range:
    if own is None:
        raise InputError(
            f"its segments leave {_limit(left)} to {_limit(right)} without n",
            where=place,
            wanted="cover the part with segments, or give it an n for the rest",
        )
    return own


def _range(n: float | Roughness, place: str) -> Range:
    if not isinstance(n, Roughness):
        _refuse_value(n, place)
        return point(n)
    low, high = (n.best if limit is None else limit for limit in (n.low, n.high))
    for value in (low, n.best, high):
        _refuse_value(value, place)
    if not low <= n.best <= high:
        raise InputError(
            f"low {show_value(low)}, best {show_value(n.best)} and high {show_value(high)} are not"
            " in order",
            where=place,
            wanted="low <= best <= high",
        )
    return Range(low, n.best, high)


def _refuse_value(n: float, place: str) -> None:
    if 0 < n <= _HIGHEST_N:
        return
    wanted = f"above 0 and at most {show_value(_HIGHEST_N)} s/m^(1/3) is due"
    if n >= 5:
        wanted = f"if it is Strickler's K, write n = 1/K = {show_n(1 / n)}"
    raise InputError(f"n is {show_value(n)}", where=place, wanted=wanted)


def _all_n(part: SectionPart) -> list[float | Roughness]:
    given = [part.n, *(segment.n for segment in part.segments or ())]
    return [n for n in given if n is not None]


def _is_wide(n: Roughness) -> bool:
    return n.low is not None or n.high is not None


def _place(where: str, part: SectionPart) -> str:
    return f"{where}: part {printable(part.name)!r}"


def _limit(distance: float) -> str:
    if np.isinf(distance):
        return "the left end" if distance < 0 else "the right end"
    return f"{show_value(float(distance))} m"
