"""A survey's folder as it is read: trails, states and handbooks, read again when a file changed."""

import os
from collections.abc import Iterable
from dataclasses import dataclass, field, replace
from functools import cached_property
from pathlib import Path

from roughness.errors import RecordError, UnknownNameError
from roughness.handbook import Handbook
from roughness.quantities.foreign_text import nearest, printable, same_name_key
from roughness.quantities.printing import enumerate_words
from roughness.shelf.handbooks import handbook_for
from roughness.survey.stream import Reach
from roughness.survey.words import Setting
from roughness.trail.conflicts import Conflict, conflicts
from roughness.trail.data import NotedReach
from roughness.trail.folding import fold_reach, fold_survey
from roughness.trail.locking import SurveyLock
from roughness.trail.naming import reach_trail, survey_trail
from roughness.trail.ordering import up_to
from roughness.trail.reading import Trail, read_trail
from roughness.trail.state import ReachState, SurveyState

USUAL_HANDBOOK = "usgs-wsp-2339"
_MOST_SUGGESTED = 12


@dataclass(frozen=True)
class _Seen:
    """A file as it was read; what it says is folded when somebody asks."""

    stamp: tuple[int, int, int]
    trail: Trail
    at: dict[tuple[str, ...], ReachState] = field(default_factory=dict)
    """What it said at earlier heads."""

    @cached_property
    def of_survey(self) -> SurveyState:
        return fold_survey(self.trail)

    @cached_property
    def of_reach(self) -> ReachState:
        return fold_reach(self.trail)

    @cached_property
    def conflicts(self) -> tuple[Conflict, ...]:
        return conflicts(self.trail)

    @cached_property
    def by_name(self) -> dict[str, NotedReach]:
        return {same_name_key(noted.reach): noted for noted in self.of_survey.reaches}


class SurveyFolder:
    """A survey on disk. Reading never writes; what was read is kept until the file changes.

    Parameters
    ----------
    folder : Path
        The survey's folder.

    Raises
    ------
    RecordError
        Where the folder holds no survey.
    """

    def __init__(self, folder: Path) -> None:
        self.folder = folder
        self.lock = SurveyLock(folder)
        self._seen: dict[Path, _Seen] = {}
        self._handbook_files: frozenset[tuple[str, int, int]] = frozenset()
        self._served: dict[tuple[str, Setting], Handbook] = {}
        if not survey_trail(folder).is_file():
            raise RecordError(
                f"{printable(str(folder))} holds no survey (no survey.jsonl);"
                " `roughness new` makes one"
            )

    @property
    def handbooks(self) -> Path:
        """The folder with the agency's own tables and copies of those that were used.

        Raises
        ------
        RecordError
            Where it is a link: links are not followed in a survey.
        """
        folder = self.folder / "handbooks"
        if folder.is_symlink():
            raise RecordError("handbooks is a link; links are not followed in a survey")
        return folder

    @property
    def path(self) -> Path:
        """The survey's own trail."""
        return survey_trail(self.folder)

    def trail(self) -> Trail:
        """Return the survey's own trail."""
        return self._look(self.path).trail

    @property
    def state(self) -> SurveyState:
        """What the survey's own trail says now."""
        return self._look(self.path).of_survey

    def noted_reach(self, name: str) -> NotedReach:
        """Return a reach as the survey lists it.

        Raises
        ------
        UnknownNameError
            Names the nearest reach.
        """
        reach = self._look(self.path).by_name.get(same_name_key(name))
        if reach is None:
            names = [printable(r.reach) for r in self.state.reaches]
            few = f"known are {enumerate_words(names[:_MOST_SUGGESTED])}" if names else "none yet"
            hint = nearest(name, names)
            raise UnknownNameError(
                f"the survey has no reach {printable(name)!r}",
                wanted=f"{hint}? {few}" if hint else few,
            )
        return reach

    def reach_path(self, name: str) -> Path:
        """Return the file of a reach's trail."""
        return reach_trail(self.folder, self.noted_reach(name).file)

    def reach_trail(self, name: str) -> Trail:
        """Return the trail of a reach."""
        return self._look(self.reach_path(name)).trail

    def reach_state(self, name: str) -> ReachState:
        """Return what the trail of a reach says now.

        Raises
        ------
        RecordError
            Where the file is not there or cannot be read.
        """
        return self._look(self.reach_path(name)).of_reach

    def reach_state_at(self, name: str, heads: Iterable[str]) -> ReachState:
        """Return what the trail of a reach said when ``heads`` were its last lines."""
        seen, wanted = self._look(self.reach_path(name)), tuple(sorted(heads))
        if wanted == seen.trail.heads:
            return seen.of_reach
        if wanted not in seen.at:
            seen.at[wanted] = fold_reach(up_to(seen.trail, wanted))
        return seen.at[wanted]

    def conflicts(self, name: str) -> tuple[Conflict, ...]:
        """Return what people said apart in united copies of a reach's trail, not yet settled."""
        return self._look(self.reach_path(name)).conflicts

    def reach(self, name: str) -> Reach:
        """Return a reach with its distances and slope: its own trail's word, else the survey's."""
        listed, own = self.noted_reach(name), self.reach_state(name).reach
        return replace(
            own,
            reach=listed.reach,
            reach_from=listed.reach_from if own.reach_from is None else own.reach_from,
            reach_to=listed.reach_to if own.reach_to is None else own.reach_to,
            slope=listed.slope if own.slope is None else own.slope,
            position=listed.position if own.position is None else own.position,
            note=own.note or listed.note,
        )

    def handbook_for(self, key: str | None, setting: Setting) -> tuple[Handbook, str]:
        """Return the handbook that serves ``setting``, and the key that was asked for."""
        asked = key or self.state.described.handbook or USUAL_HANDBOOK
        files = _files_in(self.handbooks)
        if files != self._handbook_files:
            self._handbook_files, self._served = files, {}
        if (asked, setting) not in self._served:
            self._served[asked, setting], _ = handbook_for(asked, setting, self.handbooks)
        return self._served[asked, setting], asked

    def kept(self, path: Path, trail: Trail) -> None:
        """Take over a trail that was just written, so that it is not read once more."""
        self._seen[path] = _Seen(_stamp(path), trail)

    def _look(self, path: Path) -> _Seen:
        seen = self._seen.get(path)
        stamp = _stamp(path)
        if seen is None or seen.stamp != stamp:
            seen = _Seen(stamp, read_trail(path, seen.trail if seen else None))
            self._seen[path] = seen
        return seen


def _stamp(path: Path) -> tuple[int, int, int]:
    """Return what changes when a file is written or replaced."""
    try:
        status = path.stat()
    except OSError:
        return (0, 0, 0)
    return status.st_ino, status.st_size, status.st_mtime_ns


def _files_in(folder: Path) -> frozenset[tuple[str, int, int]]:
    """Return what tells whether a file of the folder changed."""
    try:
        entries = [(entry.name, entry.stat()) for entry in os.scandir(folder)]
    except OSError:
        return frozenset()
    return frozenset((name, status.st_mtime_ns, status.st_size) for name, status in entries)
