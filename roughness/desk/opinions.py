"""A second estimate by somebody who did not see the first, and what it is good for.

The first estimate is what stood before a consensus, else what stands; a second opinion
never changes it. A consensus does, with its reason.
"""

import json
from typing import Any, Final

from roughness.assessment.assessing import assess
from roughness.assessment.reading import judgement_from
from roughness.custody.acceptance import is_among
from roughness.desk.folder import SurveyFolder
from roughness.desk.places import Place
from roughness.desk.recording import Recorder, said
from roughness.desk.rows import visit_of
from roughness.desk.verdicts import authors_of, review_of
from roughness.errors import InputError
from roughness.quantities.foreign_text import checked_name, printable, same_name_key
from roughness.quantities.strict_json import read_json
from roughness.survey.choices import Judgement
from roughness.survey.words import factors_of
from roughness.trail.lines import Line

FORMAT: Final = 1
_ABOUT: Final = (
    "A second opinion on n, made without seeing the first. Fill in who you are ('by') and, in"
    " 'estimate', a grade or a measured criterion for each factor, as `roughness estimate`"
    " takes it; `roughness tables` shows the grades. A note says why the n is as it is."
)
_FIELDS: Final = frozenset(
    {"second_opinion", "about", "survey", "reach", "part", "condition", "visit", "depth_m"}
    | {"slope", "by", "note", "estimate"}
)
# What was seen on the visit. Its note, like any note, may tell what the first one thought.
_VISIT_FACTS: Final = ("visit", "on", "stage", "growth", "flood_marks")


def blind_file(survey: SurveyFolder, place: Place) -> bytes:
    """Return a document to hand to another person: no value, grade, note or name of the first.

    It holds reach, part, flow condition, handbook, setting, facts of the visit, the mean
    depth and the slope, and an estimate to be filled in. Bed and banks told apart are a
    judgement of the first too and are left out; so are photos, whose names may tell.
    """
    document = {
        "second_opinion": FORMAT,
        "about": _ABOUT,
        "survey": survey.state.survey,
        "reach": place.reach.reach,
        "part": place.part.part,
        "condition": said(place.condition),
        "visit": facts_of_visit(survey, place),
        "depth_m": place.depth_m,
        "slope": place.reach.slope,
        "by": "",
        "note": "",
        "estimate": {
            "handbook": place.asked_handbook,
            "setting": place.part.setting,
            "factors": {factor: {} for factor in factors_of(place.part.setting)},
        },
    }
    return (json.dumps(document, ensure_ascii=False, indent=2) + "\n").encode()


def facts_of_visit(survey: SurveyFolder, place: Place) -> dict[str, Any]:
    """Return what may be told of the visit: its name, date, stage, growth and flood marks."""
    visit = visit_of(survey.reach_state(place.reach.reach), place)
    facts = {word: getattr(visit, word) for word in _VISIT_FACTS} if visit else {}
    return {word: fact for word, fact in facts.items() if fact is not None}


def take_opinion(survey: SurveyFolder, raw: bytes, where: str, by: str | None = None) -> Line:
    """Take in a filled blind file as an ``opinion`` line of the person who filled it.

    Parameters
    ----------
    survey : SurveyFolder
        The survey the file was made for.
    raw : bytes
        The document of :func:`blind_file`, filled in.
    where : str
        How messages name it.
    by : str, optional
        Who filled it in, where the file does not say so itself.

    Raises
    ------
    InputError
        Where it is of another survey, does not fit, or is by one who made the first estimate.
    RecordError
        Where it was not written.
    """
    document = _document(survey, raw, where)
    pen = Recorder(survey, _author(document, where, by))
    reach, part = (_text(document, word, where) for word in ("reach", "part"))
    condition = document.get("condition")
    named = condition.get("condition") if isinstance(condition, dict) else condition
    if not isinstance(named, str):
        raise InputError("a text in quotes is due", where=f"{where}: condition.condition")
    place = pen.known_place(reach, part, named)
    judgement = judgement_from(document.get("estimate"), f"{where}: estimate")
    note = document.get("note") or None
    if note is not None and not isinstance(note, str):
        raise InputError("a text in quotes is due", where=f"{where}: note")
    return give_opinion(pen, place, judgement, note=note, where=where)


def give_opinion(
    pen: Recorder, place: Place, judgement: Judgement, *, note: str | None = None, where: str = ""
) -> Line:
    """Record a second estimate by ``pen.by``; see :func:`take_opinion`."""
    where = where or "second opinion"
    place = pen.known_place(place.reach.reach, place.part.part, place.condition.condition)
    refuse_first_author(pen, place, where)
    data = _checked(pen, place, judgement, where) | ({"note": note} if note else {})
    return pen.say_of_reach(place.reach.reach, "opinion", data)


def refuse_first_author(pen: Recorder, place: Place, where: str = "second opinion") -> None:
    """See that there is a first estimate, and that it is by other people than ``pen.by``.

    Raises
    ------
    InputError
        Where there is none, or this person has a hand in it.
    """
    if not any(place.at(*question) for question in place.questions):
        raise InputError("there is no first estimate yet", where=where, wanted="record this as it")
    if is_among(pen.by, authors_of(pen.survey, place)):
        raise InputError(
            f"{printable(pen.by)} made the first estimate", where=where, wanted="another person"
        )


def agree(
    pen: Recorder, place: Place, judgement: Judgement, *, reason: str, where: str = "consensus"
) -> Line:
    """Record what people agreed on, with the reason; it replaces every choice of the place."""
    opinions = review_of(pen.survey, place).opinion_of_each
    if not opinions:
        raise InputError("nobody gave a second opinion here", where=where)
    if not reason.strip():
        raise InputError("the reason is empty", where=where, wanted="say why this was agreed on")
    data = _checked(pen, place, judgement, where) | {
        "reason": reason.strip(),
        "opinions": [one.line.hash for one in opinions],
    }
    return pen.say_of_reach(place.reach.reach, "consensus", data)


def _checked(pen: Recorder, place: Place, judgement: Judgement, where: str) -> dict[str, Any]:
    if judgement.setting != place.part.setting:
        raise InputError(
            f"the setting is {judgement.setting}, that of the part is {place.part.setting}",
            where=where,
            wanted="both must be the same",
        )
    handbook, _ = pen.survey.handbook_for(judgement.handbook, judgement.setting)
    assess(handbook, judgement, where)
    pen.keep_handbooks(judgement.handbook, handbook.key)
    return {
        "part": place.part.part,
        "condition": place.condition.condition,
        "handbook_sha256": handbook.sha256,
        "estimate": said(judgement),
    }


def _document(survey: SurveyFolder, raw: bytes, where: str) -> dict[str, Any]:
    document = read_json(raw, where)
    if not isinstance(document, dict) or document.get("second_opinion") != FORMAT:
        raise InputError("it is no second opinion", where=where, wanted="a filled blind file")
    unknown = sorted(set(document) - _FIELDS)
    if unknown:
        raise InputError(
            f"the key {printable(unknown[0])!r} is not known",
            where=where,
            wanted=f"one of {', '.join(sorted(_FIELDS))}",
        )
    if document.get("survey") != survey.state.survey:
        raise InputError("it was made for another survey", where=where)
    return document


def _author(document: dict[str, Any], where: str, by: str | None) -> str:
    in_file = _text(document, "by", where) if document.get("by") else None
    if in_file and by and same_name_key(in_file) != same_name_key(by):
        raise InputError(
            f"it is by {printable(in_file)}, not by {printable(by)}", where=f"{where}: by"
        )
    name = in_file or by
    if not name:
        raise InputError("it does not say by whom it is", where=f"{where}: by", wanted="your name")
    return checked_name(name, "name of the author", f"{where}: by")


def _text(document: dict[str, Any], key: str, where: str) -> str:
    text = document.get(key)
    if not isinstance(text, str):
        raise InputError("a text in quotes is due", where=f"{where}: {key}")
    return checked_name(text, f"name of the {key}", f"{where}: {key}")
