"""A second opinion from the survey screen: asked for, walked blind, recorded or not."""

import asyncio
from dataclasses import replace
from pathlib import Path
from tempfile import TemporaryDirectory
from typing import TYPE_CHECKING, Any

from roughness.desk.blind_copy import blind_copy
from roughness.desk.folder import SurveyFolder
from roughness.desk.opinions import refuse_first_author
from roughness.desk.places import Place, place_of
from roughness.errors import InputError
from roughness.quantities.foreign_text import printable, same_name_key
from roughness.screens.menu import Confirm
from roughness.screens.survey_lines import SurveyLine

if TYPE_CHECKING:
    from roughness.screens.survey import SurveyScreen


async def second_opinion(screen: "SurveyScreen") -> None:
    """Let somebody judge the selected place blind, and record the judgement at its end.

    Raises
    ------
    RoughnessError
        Where the place cannot have one by this person; nothing was written.
    """
    place = _selected(screen)
    refuse_first_author(screen.pen, place)
    told = (
        f"You judge {printable(place.reach.reach)}, {printable(place.part.part)},"
        f" {printable(place.condition.condition)} anew, without seeing n, grades, notes or the"
        " name of whoever judged it first. It is recorded in one line at the end, or not at all."
    )
    screen.hide(place)
    try:
        if not await screen.app.push_screen_wait(Confirm("A second opinion, blind", told)):
            return
        given = await _walked(screen, place)
    finally:
        screen.hide(None)
    said = "recorded" if given else "not recorded: nothing was written"
    screen.notify(f"Your second opinion was {said}.", timeout=8)


async def _walked(screen: "SurveyScreen", place: Place) -> bool:
    """Walk a copy that lies where only this person can read, and take it away afterwards."""
    from roughness.screens.opinion_walk import BlindWalk

    with TemporaryDirectory(prefix="roughness-") as private:
        # With a reader of its own: copying photos may last, and runs aside.
        there = SurveyFolder(screen.survey.folder)
        copy = await asyncio.to_thread(blind_copy, there, place, Path(private) / "copy")
        walk = BlindWalk(copy, screen.pen, place)
        await screen.app.push_screen_wait(walk)
        return walk.given is not None


def _selected(screen: "SurveyScreen") -> Place:
    line = screen.selected
    if line is None or line.row.part is None or line.row.condition is None:
        raise InputError(
            "a second opinion is on a part under a flow condition",
            wanted="pick a line that has both",
        )
    condition = line.row.condition.condition
    return place_of(screen.survey, line.key[0], line.key[1], condition)


def without_first(line: SurveyLine, hidden: Place | None) -> SurveyLine:
    """Return the line as whoever judges blind may see it: no bar, number, finding or status."""
    row = line.row
    if hidden is None or row.part is None or row.condition is None:
        return line
    here: list[Any] = [row.reach.reach, row.part.part, row.condition.condition]
    there = [hidden.reach.reach, hidden.part.part, hidden.condition.condition]
    if list(map(same_name_key, here)) != list(map(same_name_key, there)):
        return line
    bare = type(row)(order=row.order, reach=replace(row.reach, note=None), part=row.part)
    return SurveyLine(row=bare, apart="hidden: second opinion")
