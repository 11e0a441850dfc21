"""Second opinions from the screens: hand out a blind file, take one in, compare, agree."""

from collections.abc import Awaitable, Callable, Mapping
from pathlib import Path
from typing import Any, Final

from textual.screen import Screen

from roughness.desk.agreement import agreement, side_by_side
from roughness.desk.opinions import blind_file, take_opinion
from roughness.desk.places import Place
from roughness.desk.recording import Recorder
from roughness.desk.rows import Row
from roughness.desk.whole_files import refuse_place, write_whole
from roughness.errors import InputError, RoughnessError
from roughness.quantities.foreign_text import printable
from roughness.quantities.strict_json import LARGEST
from roughness.screens.form import Field, Form
from roughness.screens.help import HelpScreen
from roughness.screens.menu import Confirm, Menu
from roughness.screens.review_accept import named
from roughness.screens.review_beside import BesideScreen, agreement_text
from roughness.screens.review_consensus import consensus_form
from roughness.screens.typed import text_or_none
from roughness.trail.naming import file_name_for

_NONE_YET: Final = "Nobody gave a second opinion here yet."
_Step = Callable[[], Awaitable[str | None]]


class Opinions:
    """Runs what `o` offers over a screen of the review.

    Parameters
    ----------
    screen : Screen
        With a method ``say`` for one sentence.
    pen : Recorder
        Who writes.
    row : function
        Returns the place at hand, or None.
    again : function
        Shows the screen anew after something was kept.
    """

    def __init__(
        self,
        screen: Any,
        pen: Recorder,
        row: Callable[[], Row | None],
        again: Callable[[], None],
    ) -> None:
        self._screen, self._pen, self._row, self._again = screen, pen, row, again

    def open(self) -> None:
        """Offer what can be done."""
        self._screen.run_worker(self._said(self._offer), exclusive=True, group="dialog")

    async def _said(self, steps: _Step) -> None:
        try:
            told = await steps()
        except RoughnessError as error:
            told = f"! {error}"
        self._again()
        if told:
            self._screen.say(told)

    async def _ask(self, dialog: Screen[Any]) -> Any:
        return await self._screen.app.push_screen_wait(dialog)

    async def _offer(self) -> str | None:
        row = self._row()
        told, steps = zip(*self._entries(row), strict=True)
        says = ""
        if row is not None and row.place is not None:
            count = len(row.review.opinion_of_each)
            says = f"{named(row)}. "
            says += f"Second opinions so far: {count}." if count else _NONE_YET
        picked = await self._ask(Menu("Second opinion", told, says=says))
        return None if picked is None else await steps[picked]()

    def _entries(self, row: Row | None) -> list[tuple[str, _Step]]:
        """Return what can be done; without a place only what is about the whole survey."""
        take = ("take a filled file in", self._take)
        over = ("agreement over the survey", self._over_survey)
        if row is None or row.place is None:
            return [take, over]
        place = row.place
        return [
            ("write the blind file for another person", lambda: self._write(place)),
            take,
            ("first and second side by side", lambda: self._beside(row)),
            ("record what was agreed on", lambda: self._consensus(row)),
            over,
        ]

    async def _write(self, place: Place) -> str | None:
        survey = self._pen.survey
        slug = file_name_for(f"{place.reach.reach} {place.part.part} {place.condition.condition}")

        def take(typed: Mapping[str, str]) -> Path:
            target = _path(typed["file"])
            refuse_place(target, survey.folder)
            return target

        form = Form(
            "Write the blind file",
            [Field(key="file", label="File", value=f"second-opinion-{slug}.json")],
            take,
            says="It holds the place and the facts of the visit, and nothing of the first"
            " estimate: no value, grade, note or name. Give it to another person to fill in.",
            does="write it",
        )
        target: Path | None = await self._ask(form)
        if target is None:
            return None
        if target.exists():
            told = f"{printable(str(target))} is there already and would be replaced."
            if not await self._ask(Confirm("Replace the file?", told)):
                return None
        write_whole(target, blind_file(survey, place))
        return f"Written: {printable(str(target.resolve()))}"

    async def _take(self) -> str | None:
        def take(typed: Mapping[str, str]) -> str:
            path = _path(typed["file"])
            name = printable(path.name)
            line = take_opinion(self._pen.survey, _bytes_of(path), name, text_or_none(typed["by"]))
            return f"{line.data['part']} at {line.data['condition']}, by {line.by}"

        form = Form(
            "Take a filled file in",
            [
                Field(key="file", label="File", hint="as it came back"),
                Field(key="by", label="By", hint="leave empty where the file says it"),
            ],
            take,
            says="A second opinion is kept beside the first estimate and changes no n.",
            does="take it in",
        )
        told: str | None = await self._ask(form)
        return f"Taken in: {printable(told)}." if told else None

    async def _beside(self, row: Row) -> str | None:
        assert row.place is not None
        found = side_by_side(self._pen.survey, row.place)
        if not found:
            return _NONE_YET
        await self._ask(BesideScreen(named(row), found))
        return None

    async def _consensus(self, row: Row) -> str | None:
        assert row.place is not None
        form = consensus_form(self._pen, row)
        if form is None:
            return _NONE_YET
        done = await self._ask(form)
        return f"Agreed: {named(row)}. It is estimated anew and not accepted." if done else None

    async def _over_survey(self) -> str | None:
        found = agreement(self._pen.survey)
        if found is None:
            return "Nobody gave a second opinion in this survey yet."
        await self._ask(HelpScreen("Agreement over the survey", agreement_text(found)))
        return None


def _path(typed: str) -> Path:
    if not typed.strip():
        raise InputError("no file is named", wanted="the name of a file")
    return Path(typed.strip()).expanduser()


def _bytes_of(path: Path) -> bytes:
    """Return a file's bytes, no more than a document may have and one."""
    try:
        with path.open("rb") as file:
            return file.read(LARGEST + 1)
    except OSError as error:
        raise InputError(
            f"it cannot be read ({error.strerror})", where=printable(str(path)), wanted="a file"
        ) from None
