"""Where two people said different things about the same without seeing each other.

Whether one line has seen another is told by the graph alone, never by clocks. A conflict
is settled when somebody who has seen both sides says the same thing anew, or when the
lines of one side are withdrawn.
"""

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass, replace
from itertools import combinations, pairwise
from typing import Any, Final

from roughness.errors import InputError
from roughness.quantities.foreign_text import same_name_key
from roughness.survey.choices import Judgement
from roughness.survey.words import FACTORS, Factor
from roughness.trail.ancestry import Ancestry
from roughness.trail.data import Adopt, Choose, Gate, SegmentShare
from roughness.trail.kinds import read_data
from roughness.trail.lines import Line
from roughness.trail.ordering import in_order, withdrawn
from roughness.trail.places import PLACE_KINDS
from roughness.trail.reading import Trail

SETUP: Final = "setup"
"""What is asked before the factors."""
ADOPTED: Final = "adopted n"


@dataclass(frozen=True, kw_only=True)
class Side:
    """What one of the lines in conflict says about the matter."""

    line: Line
    said: Any
    """A choice (None: left open), a gate, a judgement, or an adopted value."""
    handbook: str | None
    """The key of the handbook it was said by; None for an adopted value."""


@dataclass(frozen=True, kw_only=True)
class Conflict:
    """Two or more lines that say different things and have not seen each other."""

    part: str
    condition: str
    segment: str | None
    """None: the whole part."""
    factor: Factor | None
    """None: ``about`` is no factor."""
    about: str
    """The factor, ``setup`` or ``adopted n``."""
    sides: tuple[Side, ...]
    """In the order of the trail; until somebody chooses, the last one stands."""

    @property
    def standing(self) -> Side:
        """The side that the state shows."""
        return self.sides[-1]


_Told = tuple[Line, Any]
_Matter = tuple[str, str]
"""Segment as names are compared ("": the whole part), and factor, setup or adopted n."""


def conflicts(trail: Trail) -> tuple[Conflict, ...]:
    """Return the conflicts that nobody settled, place by place in order of appearance."""
    if all(line.prev == (before.hash,) for before, line in pairwise(trail.lines)):
        return ()
    ordered = in_order(trail.lines)
    ancestry = Ancestry(ordered)
    places: dict[tuple[str, str], list[_Told]] = {}
    for line, data in _told(ordered):
        key = same_name_key(data.part), same_name_key(data.condition)
        places.setdefault(key, []).append((line, data))
    return tuple(found for told in places.values() for found in _in_place(told, ancestry))


def _told(ordered: Sequence[Line]) -> Iterator[_Told]:
    gone = withdrawn(ordered)
    for line in ordered:
        if line.kind not in PLACE_KINDS or line.hash in gone:
            continue
        try:
            yield line, read_data(True, line.kind, line.data, keep_unknown=True)
        except InputError:
            continue  # without effect, and listed as such by the fold


def _in_place(told: Sequence[_Told], ancestry: Ancestry) -> Iterator[Conflict]:
    for matter in _matters(told):
        unseen: list[_Told] = []
        for line, data in told:
            if _speaks_of(data, matter):
                unseen = [one for one in unseen if not ancestry.comes_after(line.hash, one[0].hash)]
                unseen.append((line, data))
        sides = [
            Side(line=line, said=_said(data, matter), handbook=_handbook(data))
            for line, data in unseen
        ]
        if any(not _agree(one, other) for one, other in combinations(sides, 2)):
            yield _conflict(told, matter, sides)


def _matters(told: Iterable[_Told]) -> list[_Matter]:
    """Return everything that is spoken of: segment by segment, factors as published."""
    found: dict[_Matter, None] = {("", SETUP): None}
    for _, data in told:
        if isinstance(data, Choose):
            found[same_name_key(data.segment or ""), data.factor] = None
        elif isinstance(data, Adopt):
            found["", ADOPTED] = None
        elif not isinstance(data, Gate):
            found |= dict.fromkeys(
                (segment, factor)
                for segment in _segments(data.estimate)
                for factor in FACTORS
                if _chosen(data.estimate, segment, factor) is not None
            )
    return sorted(found, key=lambda matter: (matter[0], _RANK[matter[1]]))


_RANK: Final = {about: place for place, about in enumerate((SETUP, *FACTORS, ADOPTED))}


def _speaks_of(data: Any, matter: _Matter) -> bool:
    segment, about = matter
    if isinstance(data, Choose):
        return (same_name_key(data.segment or ""), data.factor) == (segment, about)
    if isinstance(data, Gate | Adopt):
        return about == (SETUP if isinstance(data, Gate) else ADOPTED)
    return about != ADOPTED  # a whole estimate replaces all the rest


def _said(data: Any, matter: _Matter) -> Any:
    if isinstance(data, Choose):
        return data.choice
    if isinstance(data, Gate | Adopt):
        return data
    segment, about = matter
    return data.estimate if about == SETUP else _chosen(data.estimate, segment, about)


def _segments(judgement: Judgement) -> list[str]:
    return [same_name_key(s.name) for s in judgement.segments or ()] or [""]


def _chosen(judgement: Judgement, segment: str, factor: str) -> Any:
    by_name = {same_name_key(s.name): s.factors for s in judgement.segments or ()}
    factors = by_name.get(segment) if segment else judgement.factors
    return getattr(factors, factor) if factors else None


def _handbook(data: Any) -> str | None:
    if isinstance(data, Adopt):
        return None
    key: str = data.handbook if isinstance(data, Choose | Gate) else data.estimate.handbook
    return key


def _agree(one: Side, other: Side) -> bool:
    """Return whether nobody has to choose between the two; notes may differ."""
    gate, judgement = one.said, other.said
    if isinstance(gate, Judgement) and isinstance(judgement, Gate):
        gate, judgement = judgement, gate
    if isinstance(gate, Gate) and isinstance(judgement, Judgement):
        same = gate.measured in (None, judgement.measured)
        same = same and (gate.segments or ()) == _shares(judgement)
    else:
        same = _basis(one.said) == _basis(other.said)
    return same and one.handbook == other.handbook


def _basis(said: Any) -> object:
    if isinstance(said, Judgement):
        return said.setting, _shares(said), said.measured, said.shape, said.dependence
    if isinstance(said, Gate):
        return said.depth_m, said.bank, said.mobile_sand, said.segments, said.measured
    if isinstance(said, Adopt):
        return said.n, said.low, said.high
    return said and replace(said, note=None)


def _shares(judgement: Judgement) -> tuple[SegmentShare, ...]:
    return tuple(
        SegmentShare(name=s.name, perimeter_percent=s.perimeter_percent)
        for s in judgement.segments or ()
    )


def _conflict(told: Sequence[_Told], matter: _Matter, sides: Sequence[Side]) -> Conflict:
    key, about = matter
    names = [data.segment for _, data in told if isinstance(data, Choose) and data.segment]
    names += [
        segment.name
        for _, data in told
        if not isinstance(data, Choose | Gate | Adopt)
        for segment in data.estimate.segments or ()
    ]
    return Conflict(
        part=told[0][1].part,
        condition=told[0][1].condition,
        segment=next((name for name in names if same_name_key(name) == key), None),
        factor=next((factor for factor in FACTORS if factor == about), None),
        about=about,
        sides=tuple(sides),
    )
