"""Whether the files of a survey changed, at the price of looking at their times."""

import os
from pathlib import Path

from roughness.desk.folder import SurveyFolder

_Stamp = tuple[int, int, int]


class FileWatch:
    """Remembers the files of a survey and tells which reaches changed since."""

    def __init__(self, survey: SurveyFolder) -> None:
        self._survey = survey
        self._seen = self._stamps()
        self._basis = self._what_rows_rest_on()

    def changed(self) -> list[str] | None:
        """Return the reaches whose files changed; None where nothing at all did.

        All of them where the flow conditions or the handbooks changed.
        """
        before, self._seen = self._seen, self._stamps()
        basis, self._basis = self._basis, self._what_rows_rest_on()
        if self._seen == before:
            return None
        reaches = self._survey.state.reaches
        if basis != self._basis:
            return [noted.reach for noted in reaches]
        touched = {file for file in self._seen | before if self._seen.get(file) != before.get(file)}
        return [noted.reach for noted in reaches if f"{noted.file}.jsonl" in touched]

    def _what_rows_rest_on(self) -> object:
        state = self._survey.state
        tables = _stamps_in(self._survey.handbooks, ".toml")
        return state.conditions, state.described.handbook, tables

    def _stamps(self) -> dict[str, _Stamp]:
        own = _stamps_in(self._survey.folder / "reaches", ".jsonl")
        return own | {"": _stamp(self._survey.path)} | _stamps_in(self._survey.handbooks, ".toml")


def _stamps_in(folder: Path, ending: str) -> dict[str, _Stamp]:
    try:
        with os.scandir(folder) as entries:
            return {
                entry.name: _of(entry.stat()) for entry in entries if entry.name.endswith(ending)
            }
    except OSError:
        return {}


def _stamp(path: Path) -> _Stamp:
    try:
        return _of(path.stat())
    except OSError:
        return (0, 0, 0)


def _of(status: os.stat_result) -> _Stamp:
    return status.st_ino, status.st_size, status.st_mtime_ns
