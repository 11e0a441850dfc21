"""Where somebody left: the reach that was touched last, and the question that is open there."""

from collections.abc import Iterable, Iterator
from dataclasses import dataclass

from roughness.desk.folder import SurveyFolder
from roughness.desk.places import Place, Question, place_of
from roughness.errors import RoughnessError
from roughness.trail.lines import instant
from roughness.trail.state import PartState, ReachState


@dataclass(frozen=True)
class LeftAt:
    """The place in a survey that was worked on last."""

    reach: str
    part: str
    condition: str


def left_at(survey: SurveyFolder) -> LeftAt | None:
    """Return where the last line about any part was written; None in a fresh survey."""
    touched = ((state.last_touched, state, name) for name, state in _readable(survey))
    return _latest(
        (state.place(*last), LeftAt(name, *last)) for last, state, name in touched if last
    )


def left_unfinished(survey: SurveyFolder) -> LeftAt | None:
    """Return the part that was worked on last if something is open in it.

    Open is a question nobody answered or a choice nobody confirmed. Where nothing is, the part
    that was begun last and still lacks answers; None where all have them.
    """
    last = left_at(survey)
    if last is not None and open_question(_place(survey, last)) is not None:
        return last
    begun = (
        (place, LeftAt(name, place.part, place.condition))
        for name, state in _readable(survey)
        for place in state.places.values()
    )
    return _latest((place, at) for place, at in begun if _place(survey, at).missing)


def _place(survey: SurveyFolder, at: LeftAt) -> Place:
    return place_of(survey, at.reach, at.part, at.condition)


def _readable(survey: SurveyFolder) -> Iterator[tuple[str, ReachState]]:
    for noted in survey.state.reaches:
        try:
            yield noted.reach, survey.reach_state(noted.reach)
        except RoughnessError:
            continue


def _latest(places: Iterable[tuple[PartState | None, LeftAt]]) -> LeftAt | None:
    timed = [(instant(place.last_at), at) for place, at in places if place]
    known = [(when, at) for when, at in timed if when is not None]
    return max(reversed(known), key=lambda one: one[0])[1] if known else None


def open_question(place: Place) -> Question | None:
    """Return the first question nobody answered, then the first that is only carried over."""
    if place.missing:
        return place.missing[0]
    return next(
        (
            question
            for question in place.questions
            if (standing := place.at(*question)) and standing.carried_from
        ),
        None,
    )
