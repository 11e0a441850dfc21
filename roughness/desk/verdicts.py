"""What an acceptance or a return rests on, and whether that is still what stands.

Compared is the whole place, not its own lines alone: a second condition changes with the
base that it takes over from the first. Notes, captions and questions are no change.
"""

from collections.abc import Iterator
from dataclasses import replace
from math import isclose

from roughness.assessment.estimate import Estimate
from roughness.custody.status import Standing, Status, status_of
from roughness.desk.folder import SurveyFolder
from roughness.desk.places import Place, place_in
from roughness.errors import RoughnessError
from roughness.quantities.foreign_text import same_name_key
from roughness.survey.stream import FlowCondition
from roughness.survey.words import Factor
from roughness.trail.kinds import read_data
from roughness.trail.review_data import Accept
from roughness.trail.review_state import Acceptance, ReviewState

# The same sums on another machine may end in another last bit.
_SAME_N = 1e-9


def review_of(survey: SurveyFolder, place: Place) -> ReviewState:
    """Return the review of a place."""
    state = survey.reach_state(place.reach.reach)
    return state.review(place.part.part, place.condition.condition)


def place_at(survey: SurveyFolder, place: Place, *heads: str) -> Place:
    """Return the same place as it was when ``heads`` were the last lines of the trail.

    Read with the handbooks and the list of conditions as they are now.
    """
    then = survey.reach_state_at(place.reach.reach, heads)
    return place_in(survey, place.reach, then, place.part.part, place.condition.condition)


def same_basis(one: Place, other: Place) -> bool:
    """Return whether value, range, grades, criteria and adopted n are the same in both."""
    return _basis(one) == _basis(other)


def _basis(place: Place) -> object:
    state, gate = place.state, place.state.gate if place.state else None
    adopted = state.adopted if state else None
    return (
        place.part.setting,
        same_name_key(place.asked_handbook),
        tuple((same_name_key(s.name), s.perimeter_percent) for s in place.segments),
        tuple(_chosen(place, *question) for question in place.questions),
        state and (state.measured, state.shape, state.dependence),
        gate and (gate.depth_m, gate.bank, gate.mobile_sand),
        adopted and (adopted.n, adopted.low, adopted.high),
    )


def _chosen(place: Place, segment: str | None, factor: Factor) -> object:
    standing = place.at(segment, factor)
    if standing is None:
        return None
    return factor, replace(standing.choice, note=None), standing.handbook_sha256


def holds(survey: SurveyFolder, place: Place, acceptance: Acceptance) -> bool:
    """Return whether what was accepted is what stands: basis, condition and n."""
    return rests(survey, place, acceptance) and same_n(acceptance.accept, _estimate(place))


def rests(survey: SurveyFolder, place: Place, acceptance: Acceptance) -> bool:
    """Return whether the acceptance rests on what stands, whatever n is computed from it."""
    accept = acceptance.accept
    if accept.head not in survey.reach_trail(place.reach.reach).by_hash:
        return False
    return same_condition(survey, place, accept) and same_basis(
        place, place_at(survey, place, accept.head)
    )


def same_n(accept: Accept, estimate: Estimate | None) -> bool:
    """Return whether n and its range are those that were accepted."""
    return estimate is not None and all(
        isclose(getattr(accept.n, word), getattr(estimate.n, word), rel_tol=_SAME_N)
        for word in ("low", "best", "high")
    )


def same_condition(survey: SurveyFolder, place: Place, accept: Accept) -> bool:
    """Return whether the flow condition says now what it said then."""
    then = condition_at(survey, accept.condition_line)
    return then == survey.state.condition(place.condition.condition)


def condition_at(survey: SurveyFolder, line_hash: str | None) -> FlowCondition | None:
    """Return what a line of the survey's trail said of a condition; None where it is not there."""
    line = survey.trail().by_hash.get(line_hash or "")
    if line is None or line.kind != "flow-condition":
        return None
    condition = read_data(False, line.kind, line.data, keep_unknown=True)
    assert isinstance(condition, FlowCondition)
    return condition


def status_in(survey: SurveyFolder, place: Place, *, complete: bool, visited: bool) -> Status:
    """Return the status of a place."""
    review = review_of(survey, place)
    acceptance, returned = review.acceptance, review.standing_return
    return status_of(
        Standing(
            visited=visited,
            complete=complete,
            accepted=acceptance is not None,
            unchanged_since_acceptance=bool(acceptance and holds(survey, place, acceptance)),
            returned=returned is not None,
            unchanged_since_return=bool(
                returned and same_basis(place, place_at(survey, place, *returned.line.prev))
            ),
            in_question=bool(review.open_questions) or review.asked_since_change,
        )
    )


def authors_of(survey: SurveyFolder, place: Place) -> tuple[str, ...]:
    """Return everybody who has a hand in the value as it stands, each once.

    Who chose, told bed and banks apart or adopted another n; where a consensus stands, also
    those whose estimates it was made from.
    """
    named = {same_name_key(name): name for name in _hands_in(survey, place)}
    return tuple(named.values())


def _hands_in(survey: SurveyFolder, place: Place) -> Iterator[str]:
    state = place.state
    standing = [one for question in place.questions if (one := place.at(*question))]
    yield from (one.by for one in standing)
    if state and place.segments and state.gate_line:
        yield state.gate_line.by
    if state and state.adopted:
        yield state.adopted.line.by
    review = review_of(survey, place)
    agreed = review.consensus
    if agreed and agreed.line.hash in {one.line for one in standing}:
        yield from (
            one.line.by for one in review.opinions if one.line.hash in agreed.consensus.opinions
        )
        before = place_at(survey, place, *agreed.line.prev)
        yield from (one.by for q in before.questions if (one := before.at(*q)))


def _estimate(place: Place) -> Estimate | None:
    try:
        return place.estimate()
    except RoughnessError:
        return None
