"""Conflicts of united copies, told where they bear on what stands for a place."""

from collections.abc import Iterable, Iterator

from roughness.desk.places import Place, Question
from roughness.findings import Finding
from roughness.findings.merge_conflict import Word, merge_conflict
from roughness.findings.wording import factor_value, in_words
from roughness.quantities.foreign_text import printable, same_name_key
from roughness.quantities.printing import show_n
from roughness.survey.choices import Choice
from roughness.survey.words import Factor
from roughness.trail.conflicts import Conflict, Side
from roughness.trail.data import Adopt
from roughness.trail.telling import describe_line


def conflict_findings(place: Place, found: Iterable[Conflict]) -> Iterator[Finding]:
    """Yield a finding for each conflict that bears on the place.

    A conflict about a factor bears on every place where one of its sides stands, so also
    where it is inherited, and on its own place while the factor is open there.
    """
    for conflict in found:
        if _bears_on(place, conflict):
            words = [
                Word(_says(side, conflict), side.line.by, side.line.at) for side in conflict.sides
            ]
            yield merge_conflict(_about(conflict), conflict.factor, words)


def conflict_at(place: Place, question: Question, found: Iterable[Conflict]) -> Conflict | None:
    """Return the conflict that is settled by choosing this factor again at this place."""
    here = _key(place.part.part, place.condition.condition)
    segment, factor = question
    return next(
        (
            conflict
            for conflict in found
            if conflict.factor == factor
            and _key(conflict.part, conflict.condition) == here
            and same_name_key(conflict.segment or "") == same_name_key(segment or "")
        ),
        None,
    )


def sides_in_words(conflict: Conflict) -> str:
    """Say who said what: ``small (Ann), large (Bo)``."""
    told = [f"{_says(side, conflict)} ({side.line.by})" for side in conflict.sides]
    return printable(", ".join(told))


def _bears_on(place: Place, conflict: Conflict) -> bool:
    is_here = _key(place.part.part, place.condition.condition) == _key(
        conflict.part, conflict.condition
    )
    if conflict.factor is None:
        return is_here
    if same_name_key(place.part.part) != same_name_key(conflict.part):
        return False
    lines = {side.line.hash for side in conflict.sides}
    standing = [
        place.at(zone, factor)
        for zone, factor in place.questions
        if factor == conflict.factor and _is_zone(zone, conflict)
    ]
    return any(one.line in lines if one else is_here for one in standing)


def _is_zone(zone: str | None, conflict: Conflict) -> bool:
    if conflict.segment is None:
        return True
    return zone is not None and same_name_key(zone) == same_name_key(conflict.segment)


def _key(part: str, condition: str) -> tuple[str, str]:
    return same_name_key(part), same_name_key(condition)


def _about(conflict: Conflict) -> str:
    segment = f" of the segment {conflict.segment}" if conflict.segment else ""
    return f"the {conflict.about}{segment}"


def _says(side: Side, conflict: Conflict) -> str:
    if isinstance(side.said, Adopt):
        return show_n(side.said.n)
    if conflict.factor is None:
        return f"'{describe_line(side.line)}'"
    return _choice_in_words(conflict.factor, side.said)


def _choice_in_words(factor: Factor, choice: Choice | None) -> str:
    if choice is None:
        return "left open"
    values = [v for v in (choice.low, choice.best, choice.high) if v is not None]
    told = [in_words(choice.grade)] if choice.grade else []
    told += [" to ".join(factor_value(factor, value) for value in values)] if values else []
    measured = [f"{key.replace('_', ' ')} {value}" for key, value in choice.criteria().items()]
    return " ".join(told or measured) or "no grade"
