"""Choices carried over from a like place, marked until somebody confirms them here."""

from roughness.desk.folder import SurveyFolder
from roughness.desk.places import Place, Question, place_in, place_of
from roughness.desk.recording import Recorder
from roughness.errors import InputError
from roughness.trail.data import CarriedFrom, Gate
from roughness.trail.lines import Line


def sources(survey: SurveyFolder, place: Place) -> list[Place]:
    """Return where choices for this place may be carried from, the likeliest first.

    The same part of the neighbouring reaches, the nearest before this one in the survey's
    order first, then the other parts of this reach with the same setting; each under the
    same flow condition and with something chosen.
    """
    names = [noted.reach for noted in survey.state.reaches]
    here = names.index(place.reach.reach)
    near = [*reversed(names[max(0, here - 3) : here]), *names[here + 1 : here + 2]]
    condition = place.condition.condition
    found = [place_of(survey, name, place.part.part, condition) for name in near]
    state = survey.reach_state(place.reach.reach)
    found += [
        place_in(survey, place.reach, state, part.part, condition)
        for part in state.parts
        if part.part != place.part.part
    ]
    return [
        one
        for one in found
        if one.state and one.state.choices and one.part.setting == place.part.setting
    ]


def carry(pen: Recorder, place: Place, question: Question, source: Place) -> Line:
    """Carry one factor over; it stays marked until it is confirmed.

    Raises
    ------
    InputError
        Where nothing was chosen there.
    """
    segment, factor = question
    standing = source.at(segment, factor)
    if standing is None:
        raise InputError(f"{factor} is still open in {source.reach.reach}", wanted="choose it here")
    return pen.choose(place, factor, standing.choice, segment=segment, carried_from=_origin(source))


def carry_part(pen: Recorder, place: Place, source: Place) -> list[Line]:
    """Carry the whole part over: its segments, and every factor that is chosen there."""
    lines = []
    if place.segments != source.segments:
        gate = Gate(
            part=place.part.part,
            condition=place.condition.condition,
            handbook=place.asked_handbook,
            depth_m=place.depth_m,
            bank=place.condition.bank,
            segments=source.segments or None,
        )
        lines.append(pen.set_gate(place.reach.reach, gate))
        place = place_of(pen.survey, place.reach.reach, place.part.part, place.condition.condition)
    for question in place.questions:
        if source.at(*question) is not None:
            lines.append(carry(pen, place, question, source))
    return lines


def confirm(pen: Recorder, place: Place, question: Question) -> Line:
    """Say that a carried choice holds here."""
    segment, factor = question
    standing = place.at(segment, factor)
    if standing is None:
        raise InputError(f"{factor} is still open", wanted="choose it first")
    return pen.choose(place, factor, standing.choice, segment=segment)


def _origin(source: Place) -> CarriedFrom:
    return CarriedFrom(
        reach=source.reach.reach,
        part=source.part.part,
        condition=source.condition.condition,
    )
