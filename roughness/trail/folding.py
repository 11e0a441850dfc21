"""From the lines of a trail to its state: a pure fold, the same wherever it is done.

The order comes from the graph alone. A withdrawn line has no effect, as if it had never
been written; a line of a kind that is not known here is listed and passed over.
"""

from dataclasses import dataclass, fields, replace
from typing import Any

from roughness.errors import InputError
from roughness.quantities.foreign_text import same_name_key
from roughness.survey.stream import FlowCondition, Part, Reach, Visit
from roughness.trail.data import (
    DescribeReach,
    DescribeSurvey,
    Heads,
    NotedReach,
)
from roughness.trail.kinds import kinds_of, read_data
from roughness.trail.lines import Line
from roughness.trail.ordering import in_order, withdrawn
from roughness.trail.places import PLACE_KINDS, PlaceBeingTold
from roughness.trail.reading import Fault, Trail
from roughness.trail.reviews import ReviewsBeingTold
from roughness.trail.state import ReachState, SurveyState


@dataclass(frozen=True)
class _Sorted:
    """The lines of a trail, sorted by what can be done with them."""

    told: tuple[tuple[Line, Any], ...]
    gone: frozenset[str]
    unknown: tuple[Line, ...]
    unusable: tuple[Fault, ...]

    @property
    def effective(self) -> tuple[Line, ...]:
        return tuple(line for line, _ in self.told)


def fold_reach(trail: Trail) -> ReachState:
    """Return what the trail of a reach says now."""
    lines = _sorted_out(trail, is_of_reach=True)
    reach, survey, first_line = Reach(reach=""), "", ""
    parts: dict[str, Part] = {}
    visits: dict[str, Visit] = {}
    places: dict[tuple[str, str], PlaceBeingTold] = {}
    reviews = ReviewsBeingTold()
    last = None
    for line, data in lines.told:
        reviews.tell(line, data)
        if line.kind in PLACE_KINDS:
            last = same_name_key(data.part), same_name_key(data.condition)
            place = places.setdefault(last, PlaceBeingTold(data.part, data.condition))
            place.tell(line, data)
        elif isinstance(data, Part):
            parts[same_name_key(data.part)] = data
        elif isinstance(data, Visit):
            visits[same_name_key(data.visit)] = data
        elif isinstance(data, DescribeReach):
            reach = replace(reach, **_said(line, data))
        elif line.kind == "begin":
            reach = replace(reach, reach=data.reach)
            survey, first_line = data.survey, line.hash
    return ReachState(
        reach=reach,
        survey=survey,
        first_line=first_line,
        parts=tuple(parts.values()),
        visits=tuple(visits.values()),
        places={key: place.state() for key, place in places.items()},
        reviews=reviews.states(trail.by_hash),
        evidence=reviews.evidence,
        last_touched=(places[last].part, places[last].condition) if last else None,
        effective=lines.effective,
        withdrawn=lines.gone,
        unknown=lines.unknown,
        unusable=lines.unusable,
    )


def fold_survey(trail: Trail) -> SurveyState:
    """Return what the survey's own trail says now."""
    lines = _sorted_out(trail, is_of_reach=False)
    state = SurveyState(
        effective=lines.effective,
        withdrawn=lines.gone,
        unknown=lines.unknown,
        unusable=lines.unusable,
    )
    conditions: dict[str, tuple[Line, FlowCondition]] = {}
    reaches: dict[str, NotedReach] = {}
    order: tuple[str, ...] = ()
    heads: list[tuple[Line, Heads]] = []
    described = DescribeSurvey()
    for line, data in lines.told:
        if isinstance(data, FlowCondition):
            conditions[same_name_key(data.condition)] = line, data
        elif isinstance(data, NotedReach):
            reaches[same_name_key(data.reach)] = data
        elif isinstance(data, DescribeSurvey):
            described = replace(described, **_said(line, data))
        elif isinstance(data, Heads):
            heads.append((line, data))
        elif line.kind == "order":
            order = tuple(same_name_key(name) for name in data.reaches)
        elif line.kind == "begin":
            state = replace(state, name=data.name, survey=data.survey, first_line=line.hash)
    return replace(
        state,
        described=described,
        conditions=tuple(condition for _, condition in conditions.values()),
        condition_lines={c.condition: line for line, c in conditions.values()},
        reaches=_along_the_stream(reaches, order),
        heads=tuple(heads),
    )


def _sorted_out(trail: Trail, *, is_of_reach: bool) -> _Sorted:
    ordered = in_order(trail.lines)
    gone = withdrawn(ordered)
    known = kinds_of(is_of_reach)
    told: list[tuple[Line, Any]] = []
    unknown, unusable = [], []
    for line in ordered:
        if line.hash in gone:
            continue
        if line.kind not in known:
            unknown.append(line)
            continue
        try:
            data = read_data(is_of_reach, line.kind, line.data, keep_unknown=True)
            if line.kind == "begin" and line.prev:
                raise InputError("a begin line that is not the first one")
            told.append((line, data))
        except InputError as error:
            unusable.append(Fault(trail.file, line.number, str(error)))
    return _Sorted(tuple(told), gone, tuple(unknown), tuple(unusable))


def _said(line: Line, data: DescribeReach | DescribeSurvey) -> dict[str, Any]:
    """Return the fields that a line names, so that those it is silent about stay."""
    return {f.name: getattr(data, f.name) for f in fields(data) if f.name in line.data}


def _along_the_stream(
    reaches: dict[str, NotedReach], order: tuple[str, ...]
) -> tuple[NotedReach, ...]:
    places = {name: place for place, name in enumerate(order)}
    by_order = sorted(reaches.items(), key=lambda item: places.get(item[0], len(places)))
    return tuple(reach for _, reach in by_order)
