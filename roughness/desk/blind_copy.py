"""A survey of one place, made for somebody who judges it without seeing the first estimate.

It holds what a blind file holds (see :func:`roughness.desk.opinions.blind_file`) and the
photos, under names that tell nothing: no value, grade, note, caption or name of the first.
"""

import shutil
from contextlib import suppress
from pathlib import Path
from typing import Final

from roughness.desk.attaching import attach
from roughness.desk.evidence_lists import Item, evidence_of
from roughness.desk.folder import SurveyFolder
from roughness.desk.making import new_survey
from roughness.desk.opinions import facts_of_visit
from roughness.desk.places import Place, place_of
from roughness.desk.recording import Recorder
from roughness.desk.whole_files import write_whole
from roughness.errors import RoughnessError
from roughness.evidence.naming import ending_of
from roughness.shelf.folders import contents
from roughness.survey.choices import Judgement
from roughness.survey.stream import Reach, Visit
from roughness.trail.data import Gate

COPIED_BY: Final = "copied from the survey"


def blind_copy(survey: SurveyFolder, place: Place, folder: Path) -> SurveyFolder:
    """Make a survey in ``folder`` with the bare facts of one place.

    Bed and banks told apart, moving sand and what was measured for factors are judgements
    of the first too and are left out; so are notes, captions, and who said anything.

    Parameters
    ----------
    survey : SurveyFolder
        Where the place is; nothing is written there.
    place : Place
        A part of a reach under a flow condition.
    folder : Path
        Empty or not there yet, for nobody else to read.

    Raises
    ------
    RoughnessError
        Where something cannot be read or written.
    """
    reach, part, condition = place.reach, place.part, place.condition
    made = new_survey(folder, COPIED_BY, name="second opinion")
    for path in contents(survey.handbooks).files.values():
        write_whole(made.handbooks / path.name, path.read_bytes())
    pen = Recorder(made, COPIED_BY)
    described = survey.state.described
    known = {"handbook": described.handbook, "length_unit": described.length_unit}
    if known := {word: said for word, said in known.items() if said is not None}:
        pen.describe(**known)
    pen.add_condition(condition)
    pen.add_reach(_bare(reach))
    pen.add_part(reach.reach, part)
    visit = facts_of_visit(survey, place)
    if visit:
        pen.note_visit(reach.reach, Visit(**visit))
    gate = place.state.gate if place.state else None
    pen.set_gate(
        reach.reach,
        Gate(
            part=part.part,
            condition=condition.condition,
            handbook=place.asked_handbook,
            depth_m=place.depth_m,
            bank=gate.bank if gate else None,
            visit=visit.get("visit"),
        ),
    )
    _copy_photos(survey, place, pen)
    return made


def judged(made: SurveyFolder, place: Place) -> tuple[Place, Judgement]:
    """Return what somebody chose in a blind copy: the place there, and its judgement."""
    found = place_of(made, place.reach.reach, place.part.part, place.condition.condition)
    return found, found.judgement()


def _bare(reach: Reach) -> Reach:
    """Return the reach without its note, which may say what the first thought."""
    return Reach(
        reach=reach.reach,
        reach_from=reach.reach_from,
        reach_to=reach.reach_to,
        slope=reach.slope,
        position=reach.position,
    )


def _copy_photos(survey: SurveyFolder, place: Place, pen: Recorder) -> None:
    """Attach the pictures that are about the place, numbered in the order they came."""
    number = 0
    for item in evidence_of(survey, place.reach.reach):
        if item.may_be_shown and item.supports(place.part.part, place.condition.condition):
            number += 1
            _copy_photo(item, number, place.reach.reach, pen)


def _copy_photo(item: Item, number: int, reach: str, pen: Recorder) -> None:
    name = f"photo {number}.{ending_of(item.evidence.file)}"
    renamed = pen.survey.folder.parent / name
    # A picture that cannot be copied is one less to look at, and no reason not to judge.
    with suppress(RoughnessError, OSError):
        shutil.copyfile(item.path, renamed, follow_symlinks=False)
        attach(pen, reach, renamed, with_position=False)
    renamed.unlink(missing_ok=True)
