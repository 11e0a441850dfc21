"""What the survey screen does with the selected line: walk, add, adopt, undo, export."""

import asyncio
from collections.abc import Awaitable, Callable
from pathlib import Path
from typing import TYPE_CHECKING, Any, Final

from textual.screen import Screen

from roughness.errors import RoughnessError
from roughness.quantities.foreign_text import printable
from roughness.screens import survey_forms
from roughness.screens.evidence import EvidenceScreen
from roughness.screens.evidence_forms import About
from roughness.screens.export_form import export_form, write_export
from roughness.screens.menu import Confirm, Menu
from roughness.screens.opinion import second_opinion
from roughness.screens.survey_lines import SurveyLine
from roughness.screens.timeline import TimelineScreen
from roughness.screens.uniting import Uniting
from roughness.survey.stream import Part
from roughness.survey.words import USUAL_PARTS
from roughness.trail.lines import Line, instant
from roughness.trail.telling import describe_line, withdrawable

if TYPE_CHECKING:
    from roughness.screens.survey import SurveyScreen

_VISIT, _CONDITION, _PART, _REACH, _NOTE = range(5)
_TO_ADD: Final = (
    "a visit",
    "a flow condition",
    "a part of the cross-section",
    "a reach",
    "a note on the reach",
)
_OWN_PART: Final = "a part with a name of its own"


class Adding:
    """Runs the dialogs of a survey screen, one at a time."""

    def __init__(self, screen: "SurveyScreen") -> None:
        self._screen = screen

    def walk(self) -> None:
        """Open the walk for the selected line, asking first for what is missing."""
        self._run(self._walk)

    def add(self) -> None:
        """Offer what can be added."""
        self._run(self._add)

    def adopt(self) -> None:
        """Ask for an n and its reason."""
        self._run(self._adopt)

    def undo(self) -> None:
        """Ask, then withdraw."""
        self._run(self._undo)

    def export(self) -> None:
        """Ask for a file name and write it."""
        self._run(self._export)

    def timeline(self) -> None:
        """Open the trail of the reach in sentences."""
        line = self._screen.selected
        if line is not None:
            self._screen.app.push_screen(TimelineScreen(self._screen.survey, line.key[0]))

    def opinion(self) -> None:
        """Let a second person judge the selected part blind."""
        self._run(lambda: second_opinion(self._screen))

    def unite(self, uniting: Uniting) -> None:
        """Unite what was written apart."""
        self._run(uniting.unite)

    def evidence(self) -> None:
        """Open the photos and documents of the reach."""
        line, screen = self._screen.selected, self._screen
        if line is not None:
            about = About(reach=line.key[0], part=line.key[1] or None, condition=screen.condition)
            screen.app.push_screen(EvidenceScreen(screen.pen, about, screen.drop))

    # -- one dialog after the other -----------------------------------------------------------

    def _run(self, steps: Callable[[], Awaitable[None]]) -> None:
        self._screen.run_worker(self._said(steps), exclusive=True, group="dialog")

    async def _said(self, steps: Callable[[], Awaitable[None]]) -> None:
        try:
            await steps()
        except RoughnessError as error:
            self._say(str(error))

    def _say(self, sentence: str, *, wrong: bool = True) -> None:
        severity: Any = "warning" if wrong else "information"
        self._screen.notify(printable(sentence), severity=severity, timeout=8, markup=False)

    async def _ask(self, dialog: Screen[Any]) -> Any:
        return await self._screen.app.push_screen_wait(dialog)

    def _kept(self, at: tuple[str, str] | None = None) -> None:
        self._screen.look_for_changes()
        self._screen.draw(at=at)

    async def _walk(self) -> None:
        line = self._screen.selected or await self._first_reach()
        if line is None:
            return
        reach, part = line.key
        part = part or await self._first_part(reach)
        if not part:
            return
        condition = line.row.condition.condition if line.row.condition else self._screen.condition
        condition = condition or await self._ask(survey_forms.condition_form(self._screen.pen))
        if condition:
            self._screen.condition = condition
            self._kept((reach, part))
            self.open_walk(reach, part, condition)

    def open_walk(self, reach: str, part: str, condition: str) -> None:
        """Open the walk; coming back refreshes the survey screen."""
        from roughness.screens.walk import WalkScreen

        screen = self._screen
        screen.app.push_screen(
            WalkScreen(screen.survey, screen.pen, reach, part, condition, drop=screen.drop)
        )

    async def _first_reach(self) -> SurveyLine | None:
        name = await self._ask(survey_forms.reach_form(self._screen.pen))
        if not name:
            return None
        self._kept((name, ""))
        return self._screen.selected

    async def _first_part(self, reach: str) -> str:
        known = {part.part for part in self._screen.survey.reach_state(reach).parts}
        usual = [part for part in USUAL_PARTS if part not in known]
        picked = await self._ask(
            Menu(
                f"Which part of {printable(reach)}?",
                [*usual, _OWN_PART],
                says="Each part of the cross-section has an n of its own.",
            )
        )
        if picked is None:
            return ""
        pen = self._screen.pen
        if picked == len(usual):
            own = await self._ask(survey_forms.part_form(pen, reach))
            return str(own or "")
        pen.add_part(reach, Part(part=usual[picked], setting=USUAL_PARTS[usual[picked]]))
        return str(usual[picked])

    async def _add(self) -> None:
        picked = await self._ask(Menu("Add", _TO_ADD))
        line, pen = self._screen.selected, self._screen.pen
        if picked == _CONDITION:
            condition = await self._ask(survey_forms.condition_form(pen))
            self._screen.condition = condition or self._screen.condition
            self._kept()
        elif picked == _REACH or (picked is not None and line is None):
            name = await self._ask(survey_forms.reach_form(pen))
            self._kept((name, "") if name else None)
        elif picked == _VISIT and line is not None:
            visit = await self._ask(survey_forms.visit_form(pen, line.key[0]))
            self._kept()
            if visit:
                self._say(f"Visit {visit} to {line.key[0]} noted.", wrong=False)
        elif picked == _NOTE and line is not None:
            await self._ask(survey_forms.note_form(pen, line.row.reach))
            self._kept()
        elif picked == _PART and line is not None:
            part = await self._first_part(line.key[0])
            self._kept((line.key[0], part) if part else None)

    async def _adopt(self) -> None:
        line = self._screen.selected
        if line is None or line.row.part is None or line.row.condition is None:
            self._say("n is adopted for a part under a flow condition: pick a line that has both.")
            return
        await self._ask(survey_forms.adopt_form(self._screen.pen, line))
        self._kept()

    async def _undo(self) -> None:
        found = self._last_own_line()
        if found is None:
            self._say("There is nothing of yours to take back here.")
            return
        reach, line = found
        minute = line.at[:16].replace("T", " ")
        where = f"Reach {printable(reach)}: " if reach else "The survey: "
        told = f"{where}{describe_line(line)}.\nSaid {printable(minute)}; the record keeps both."
        if await self._ask(Confirm("Take this back?", told)):
            self._screen.pen.withdraw(reach, line)
            self._kept()
            self._say(f"Taken back: {describe_line(line)}.", wrong=False)

    def _last_own_line(self) -> tuple[str | None, Line] | None:
        """Return the later of this person's last lines about the reach and the survey."""
        survey, by = self._screen.survey, self._screen.pen.by
        of_survey = withdrawable(survey.state, by)
        line = self._screen.selected
        reach = line.key[0] if line else None
        of_reach = withdrawable(survey.reach_state(reach), by) if reach else None
        if of_reach is None or of_survey is None:
            return (reach, of_reach) if of_reach else (None, of_survey) if of_survey else None
        first, last = instant(of_survey.at), instant(of_reach.at)
        later = first is not None and last is not None and first > last
        return (None, of_survey) if later else (reach, of_reach)

    async def _export(self) -> None:
        pen = self._screen.pen
        target: Path | None = await self._ask(export_form(pen))
        if target is None:
            return
        if target.exists():
            told = f"{printable(str(target))} is there already and would be replaced."
            if not await self._ask(Confirm("Replace the file?", told)):
                return
        self._say("Writing...", wrong=False)
        said = await asyncio.to_thread(write_export, pen.survey, target)
        pen.note_heads("export")
        self._say(said, wrong=False)
