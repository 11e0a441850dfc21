"""Whether acceptances are still what they say: recomputed, compared, never replaced."""

from collections.abc import Iterator
from dataclasses import fields
from math import isclose

from roughness.assessment.estimate import Estimate
from roughness.custody.acceptance import is_among
from roughness.desk.folder import SurveyFolder
from roughness.desk.places import Place
from roughness.desk.rows import Row
from roughness.desk.verdicts import authors_of, place_at, rests, same_n
from roughness.errors import RoughnessError
from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import show_n
from roughness.trail.ordering import before
from roughness.trail.reading import Fault, Trail
from roughness.trail.review_data import Accept
from roughness.trail.review_state import Acceptance

# Percentiles are promised to this much, absolute, between machines and versions.
_SAME_SPREAD = 1e-6


def faults_of_order(trail: Trail) -> Iterator[Fault]:
    """Yield the lines that stand in the file before a line that they come after."""
    stood: set[str] = set()
    for line in trail.lines:
        late = [name for name in line.prev if name in trail.by_hash and name not in stood]
        stood.add(line.hash)
        if late:
            after = trail.by_hash[late[0]].number
            yield Fault(
                trail.file, line.number, f"out of order: it comes after line {after}, below it"
            )


def faults_of_acceptances(survey: SurveyFolder, found: list[Row]) -> Iterator[Fault]:
    """Yield what does not hold in the last acceptance of each place."""
    for row in found:
        acceptance = row.review.acceptance
        if acceptance is None:
            continue
        trail = survey.reach_trail(row.reach.reach)
        for what in _wrong(survey, row, trail, acceptance):
            place = f"{acceptance.accept.part} at {acceptance.accept.condition}"
            says = f"the acceptance of {printable(place)} {what}"
            yield Fault(trail.file, acceptance.line.number, says)


def _wrong(survey: SurveyFolder, row: Row, trail: Trail, acceptance: Acceptance) -> Iterator[str]:
    accept, line = acceptance.accept, acceptance.line
    if accept.head not in before(trail.by_hash, line.prev):
        yield "names a line as the end of the trail that is not before it"
        return
    if row.place is None:
        yield "cannot be recomputed: its handbook cannot be read"
        return
    if accept.condition_line and accept.condition_line not in survey.trail().by_hash:
        yield "names a line of survey.jsonl that is not there (truncated or not yet synced)"
    then = place_at(survey, row.place, accept.head)
    if not accept.same_person and is_among(line.by, authors_of(survey, then)):
        yield f"is by {printable(line.by)}, who estimated it, and does not say so"
    if rests(survey, row.place, acceptance):
        yield from _differs(then, accept)


def _differs(then: Place, accept: Accept) -> Iterator[str]:
    try:
        estimate = then.estimate()
    except RoughnessError as error:
        yield f"cannot be recomputed: {error}"
        return
    if estimate is None:
        yield "is of a place where a factor is open"
        return
    because = _because(then, accept)
    if not same_n(accept, estimate):
        one, other = accept.n, estimate.n
        told = f"{show_n(one.best)} ({show_n(one.low)} to {show_n(one.high)})"
        now = f"{show_n(other.best)} ({show_n(other.low)} to {show_n(other.high)})"
        yield f"says n {told}, recomputed it is {now}{because}"
    elif wrong := _other_spread(accept, estimate):
        yield f"says another {', '.join(wrong)} of the spread than recomputed{because}"


def _other_spread(accept: Accept, estimate: Estimate) -> list[str]:
    return [
        word
        for word in (field.name for field in fields(accept.spread))
        if not isclose(
            getattr(accept.spread, word),
            float(getattr(estimate.spread, word)),
            rel_tol=0,
            abs_tol=_SAME_SPREAD,
        )
    ]


def _because(then: Place, accept: Accept) -> str:
    if accept.handbook_sha256 == then.handbook.sha256:
        return f" (accepted with roughness {printable(accept.program)})"
    return f": the handbook {printable(accept.handbook)} is not the edition it was accepted with"
