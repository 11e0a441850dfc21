"""Who did what and when, and what changed since an acceptance, in plain sentences."""

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, fields
from typing import Any, Final

from roughness.desk.folder import SurveyFolder
from roughness.desk.places import Place, place_of
from roughness.desk.verdicts import condition_at, holds, place_at, review_of, same_basis
from roughness.quantities.foreign_text import printable, same_name_key
from roughness.quantities.printing import show_n, show_value
from roughness.survey.stream import FlowCondition
from roughness.survey.words import INHERITED
from roughness.trail.lines import Line
from roughness.trail.ordering import before, in_order
from roughness.trail.reviews import CHANGING_KINDS
from roughness.trail.telling import describe_line


@dataclass(frozen=True, kw_only=True)
class Told:
    """One line of a trail as a sentence tells it."""

    at: str
    """Date and time with offset as its author's clock had it: a claim."""
    by: str
    says: str
    line: Line
    withdrawn: bool = False

    def __str__(self) -> str:
        gone = " (taken back later)" if self.withdrawn else ""
        return f"{self.at}, {self.by}: {self.says}{gone}."


def timeline(survey: SurveyFolder, reach: str) -> list[Told]:
    """Return every line of a reach's trail as a sentence, in the order of the graph."""
    trail = survey.reach_trail(reach)
    gone = survey.reach_state(reach).withdrawn
    return [_told(line, trail.by_hash, gone) for line in in_order(trail.lines)]


def _told(line: Line, known: Mapping[str, Line], gone: frozenset[str]) -> Told:
    return Told(
        at=shown_time(line.at),
        by=printable(line.by),
        says=_says(line, known),
        line=line,
        withdrawn=line.hash in gone,
    )


def _says(line: Line, known: Mapping[str, Line]) -> str:
    """Say what a line did; where it names another one, what that one did."""
    named = {"withdraw": "line", "answer": "question"}.get(line.kind)
    other = known.get(str(line.data.get(named))) if named else None
    if other is None:
        return describe_line(line)
    if line.kind == "withdraw":
        return f"took back {printable(other.by)}'s line: {_says(other, known)}"
    asked = printable(str(other.data.get("text", "")))
    return f"{describe_line(line)} (to {printable(other.by)}'s question: {asked})"


def shown_time(at: str) -> str:
    """Return the time of a line for people: ``2026-06-03 18:20 +02:00``."""
    text = printable(at).replace("t", "T").replace("z", "Z")
    day, _, clock = text.partition("T")
    offset = "UTC" if clock.endswith("Z") else clock[-6:]
    return f"{day} {clock[:5]} {offset}"


@dataclass(frozen=True, kw_only=True)
class Change:
    """Something that was said after an acceptance."""

    at: str
    by: str
    says: str
    weighs: bool
    """Whether it touches what was accepted; else it is only good to know."""

    def __str__(self) -> str:
        return f"{self.at}, {self.by}: {self.says}."


def since_acceptance(survey: SurveyFolder, place: Place) -> list[Change]:
    """Return what was said about a place since its last acceptance, line by line.

    Told are lines of the place itself and of what it takes over from other conditions, the
    flow condition, and last whether n comes out differently from the same choices. Empty
    where nobody accepted it or a return stands against that.
    """
    place = place_of(survey, place.reach.reach, place.part.part, place.condition.condition)
    acceptance = review_of(survey, place).acceptance
    if acceptance is None:
        return []
    accept, trail = acceptance.accept, survey.reach_trail(place.reach.reach)
    then = place_at(survey, place, accept.head)
    seen = before(trail.by_hash, [accept.head])
    gone = survey.reach_state(place.reach.reach).withdrawn
    found = [
        _change(line, place, then, trail.by_hash, gone)
        for line in in_order(trail.lines)
        if line.hash not in seen
        and line.hash != acceptance.line.hash
        and _concerns(line, place, trail.by_hash)
    ]
    found += _condition_change(survey, place, accept.condition_line)
    if same_basis(place, then) and not found and not holds(survey, place, acceptance):
        says = "the same choices give another n now: the handbook or the program was changed"
        found.append(Change(at="now", by="roughness", says=says, weighs=True))
    return found


_OF_THE_REACH: Final = ("evidence", "describe")


def _concerns(line: Line, place: Place, known: Mapping[str, Line]) -> bool:
    if line.kind == "withdraw":
        other = known.get(str(line.data.get("line")))
        return other is not None and _concerns(other, place, known)
    if line.kind == "answer":
        asked = known.get(str(line.data.get("question")))
        return asked is not None and _concerns(asked, place, known)
    if line.kind in _OF_THE_REACH and not line.data.get("part"):
        return True
    if same_name_key(str(line.data.get("part", ""))) != same_name_key(place.part.part):
        return False
    condition = line.data.get("condition")
    is_here = condition is None or same_name_key(str(condition)) == same_name_key(
        place.condition.condition
    )
    return is_here or _is_taken_over(line, place)


def _is_taken_over(line: Line, place: Place) -> bool:
    """Return whether a line under another condition may change what is inherited here."""
    if line.kind not in CHANGING_KINDS:
        return False
    return line.data.get("factor", INHERITED[0]) in INHERITED and any(
        one.inherited_from for q in place.questions if (one := place.at(*q))
    )


def _change(
    line: Line, place: Place, then: Place, known: Mapping[str, Line], gone: frozenset[str]
) -> Change:
    target = known.get(str(line.data.get("line"))) if line.kind == "withdraw" else line
    says = _says(line, known) + _was(line.data, then)
    taken_back = " (taken back later)" if line.hash in gone else ""
    touches = target is not None and target.kind in {*CHANGING_KINDS, "part"}
    return Change(
        at=shown_time(line.at),
        by=printable(line.by),
        says=says + taken_back,
        weighs=touches and line.hash not in gone and not same_basis(place, then),
    )


def _was(data: Mapping[str, Any], then: Place) -> str:
    """Say what was accepted for the factor that a choice is about."""
    factor = data.get("factor")
    if not data.get("choice") or factor is None:
        return ""
    standing = then.at(data.get("segment"), factor)
    if standing is None:
        return " (open when accepted)"
    told = [printable(standing.choice.grade)] if standing.choice.grade else []
    for word in ("low", "best", "high"):
        value = getattr(standing.choice, word)
        told += [f"{word} {show_value(value)}"] if value is not None else []
    told += [
        f"{word.replace('_', ' ')} {printable(str(value))}"
        for word, value in standing.choice.criteria().items()
    ]
    told += [f"note '{printable(standing.choice.note)}'"] if standing.choice.note else []
    return f" (accepted was {', '.join(told)})"


def _condition_change(
    survey: SurveyFolder, place: Place, line_then: str | None
) -> Iterator[Change]:
    name = place.condition.condition
    then, now = condition_at(survey, line_then), survey.state.condition(name)
    if then == now:
        return
    line = survey.state.condition_lines.get(now.condition) if now else None
    told = "; ".join(_differences(then, now)) or "it is not defined any more"
    yield Change(
        at=shown_time(line.at) if line else "now",
        by=printable(line.by) if line else "somebody",
        says=f"the flow condition {printable(name)} was changed: {told}",
        weighs=True,
    )


def _differences(then: FlowCondition | None, now: FlowCondition | None) -> Iterator[str]:
    if now is None:
        return
    for word in (field.name for field in fields(FlowCondition)):
        old, new = getattr(then, word, None), getattr(now, word)
        if old != new:
            was = "" if old is None else f", was {_shown(old)}"
            yield f"{word.replace('_', ' ')} {_shown(new)}{was}"


def _shown(value: object) -> str:
    if isinstance(value, float):
        return show_value(value)
    return "unknown" if value is None else printable(str(value))


def accepted_in_words(survey: SurveyFolder, place: Place) -> str | None:
    """Say who accepted a place, when and with which n; None where nobody did."""
    acceptance = review_of(survey, place).acceptance
    if acceptance is None:
        return None
    accept, line = acceptance.accept, acceptance.line
    told = (
        f"accepted by {printable(line.by)}, {shown_time(line.at)}, with n {show_n(accept.n.best)}"
    )
    told += f" ({show_n(accept.n.low)} to {show_n(accept.n.high)})"
    if accept.same_person:
        told += ", the one who estimated it"
    if accept.overruled:
        told += f"; overruled: {printable(accept.overruled)}"
    return told
