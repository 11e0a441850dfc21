"""What two people wrote apart, told on the survey screen, and united when somebody says so."""

import asyncio
import os
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING, Final

from roughness.desk.folder import SurveyFolder
from roughness.desk.merging import (
    Merged,
    StandingConflict,
    conflict_copies,
    merge,
    standing_conflicts,
)
from roughness.errors import RoughnessError
from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import enumerate_words
from roughness.screens.help import HelpScreen
from roughness.screens.menu import Confirm
from roughness.trail.naming import REACHES, shown

if TYPE_CHECKING:
    from roughness.screens.survey import SurveyScreen

_MOST_NAMED: Final = 3
_Stamp = tuple[str, int, int]


@dataclass(frozen=True)
class _Outcome:
    """What came of uniting, and what is left to be settled."""

    merged: Merged
    conflicts: tuple[StandingConflict, ...]


class Uniting:
    """Looks for copies that a synced folder made, and for trails with two ends."""

    def __init__(self, screen: "SurveyScreen") -> None:
        self._screen = screen
        self._strangers: frozenset[_Stamp] = frozenset()
        self._copies: tuple[str, ...] = ()

    def look(self) -> None:
        """Look for files beside the survey's own; they are read aside, and only when new."""
        found = _strangers(self._screen.survey)
        if found != self._strangers:
            self._strangers = found
            self._screen.run_worker(self._read(), exclusive=True, group="copies")

    async def _read(self) -> None:
        folder = self._screen.survey.folder
        try:
            # A reader of its own, since it runs aside.
            found = await asyncio.to_thread(lambda: conflict_copies(SurveyFolder(folder)))
        except RoughnessError:
            found = ()  # the screen says already why the survey cannot be read
        self._copies = tuple(shown(path) for path in found)
        self._screen.draw()
        self._screen.refresh_bindings()

    def sentence(self) -> str:
        """Say which key unites what lies apart; empty where nothing does."""
        told = [*self._told_copies(), *self._told_ends()]
        return f"M unites: {'; '.join(told)}" if told else ""

    def _told_copies(self) -> Iterator[str]:
        count = len(self._copies)
        if count:
            files = "1 copy holds" if count == 1 else f"{count} copies hold"
            yield f"{files} what this survey lacks"

    def _told_ends(self) -> Iterator[str]:
        ends = self._ends()
        if ends:
            more = f" and {len(ends) - 1} more" if len(ends) > 1 else ""
            yield f"two people wrote apart to {printable(ends[0])}{more}"

    def _ends(self) -> list[str]:
        own = ["the survey's own list"] if self._screen.survey.trail().to_be_merged else []
        return [*own, *self._screen.lines.two_ends]

    async def unite(self) -> None:
        """Say what would be done, do it, and tell what came of it."""
        screen, folder = self._screen, self._screen.survey.folder
        if not await screen.app.push_screen_wait(
            Confirm("Unite what was written apart?", self._plan())
        ):
            return

        def aside() -> _Outcome:
            survey = SurveyFolder(folder)
            return _Outcome(merge(survey), tuple(standing_conflicts(survey)))

        outcome = await asyncio.to_thread(aside)
        self._strangers = frozenset()
        screen.look_for_changes()
        screen.draw()
        await screen.app.push_screen_wait(HelpScreen("United", "\n\n".join(_told(outcome))))

    def _plan(self) -> str:
        what = [*self._copies, *(f"the two ends of {printable(end)}" for end in self._ends())]
        named = what[:_MOST_NAMED]
        named += [f"{len(what) - _MOST_NAMED} more"] if len(what) > _MOST_NAMED else []
        return (
            f"Taken in: {enumerate_words(named)}.\n"
            "The lines that the survey lacks are added to its trails; no line is changed or lost,"
            " and the copies stay where they are. Where people set the same thing differently"
            " both stay, and you are asked to choose in the walk."
        )


def _told(outcome: _Outcome) -> Iterator[str]:
    merged = outcome.merged
    lines = sum(one.new_lines for one in merged.united)
    files = enumerate_words([one.file for one in merged.united])
    new = "1 new line" if lines == 1 else f"{lines} new lines"
    yield f"{new}; written anew: {files}." if files else "There was nothing new."
    for refused in merged.not_taken:
        yield f"! Left as it is: {printable(refused.file)}: {printable(refused.why)}"
    if merged.removable:
        names = printable(enumerate_words(merged.removable))
        yield f"Nothing that the survey lacks is left in {names}: you may remove it."
    if merged.repaired:
        yield "A line that was cut off was moved aside, to a file ending in .torn."
    for one in outcome.conflicts:
        where = f"{one.reach}, {one.part}, {one.condition}"
        yield f"! To be settled in the walk: {printable(where)}: {printable(one.says)}"
    if not outcome.conflicts:
        yield "Nobody set the same thing differently: there is nothing to settle."


def _strangers(survey: SurveyFolder) -> frozenset[_Stamp]:
    """Return the trails in the survey's folder that it does not name, by name, size and time."""
    own = {survey.path.name} | {f"{noted.file}.jsonl" for noted in survey.state.reaches}
    folders = (survey.folder, survey.folder / REACHES)
    return frozenset(
        stamp for folder in folders for stamp in _trails_in(folder) if stamp[0] not in own
    )


def _trails_in(folder: Path) -> Iterator[_Stamp]:
    try:
        with os.scandir(folder) as entries:
            for entry in entries:
                if entry.name.endswith(".jsonl") and not entry.name.startswith("."):
                    status = entry.stat(follow_symlinks=False)
                    yield entry.name, status.st_size, status.st_mtime_ns
    except OSError:
        return
