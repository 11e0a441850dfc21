"""Where somebody left: the reach that was touched last, and the question that is open there."""

from dataclasses import dataclass

from roughness.desk.folder import SurveyFolder
from roughness.desk.places import Place, Question
from roughness.errors import RoughnessError
from roughness.trail.lines import instant


@dataclass(frozen=True)
class LeftAt:
    """The place in a survey that was worked on last."""

    reach: str
    part: str
    condition: str


def left_at(survey: SurveyFolder) -> LeftAt | None:
    """Return where the last line about any part was written; None in a fresh survey."""
    latest = None
    for noted in survey.state.reaches:
        try:
            state = survey.reach_state(noted.reach)
        except RoughnessError:
            continue
        if state.last_touched is None:
            continue
        place = state.place(*state.last_touched)
        when = instant(place.last_at) if place else None
        if when is not None and (latest is None or when >= latest[0]):
            latest = when, LeftAt(noted.reach, *state.last_touched)
    return latest[1] if latest else None


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
