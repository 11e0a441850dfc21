"""What comes after a part: the other parts of the reach that are still open."""

from roughness.desk.folder import SurveyFolder
from roughness.desk.places import Place, place_in
from roughness.errors import RoughnessError


def open_parts(survey: SurveyFolder, place: Place) -> list[str]:
    """Return the other parts of the reach that lack a factor under the same condition.

    Flood plains are left out where the condition keeps to the bed. A part that cannot be
    read is left out too: the survey screen says why.
    """
    state = survey.reach_state(place.reach.reach)
    found = []
    for part in state.parts:
        dry = part.setting == "flood-plain" and place.condition.bank == "in bank"
        if dry or part.part == place.part.part:
            continue
        try:
            other = place_in(survey, place.reach, state, part.part, place.condition.condition)
        except RoughnessError:
            continue
        if other.missing:
            found.append(part.part)
    return found
