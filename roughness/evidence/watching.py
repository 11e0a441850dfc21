"""Files that appear in a folder, taken once they stand still. Nothing is moved or opened."""

import os
from dataclasses import dataclass, field
from pathlib import Path
from typing import Final

STILL_S: Final = 2.0
"""How long size and time of a file must not change before it counts as written, s."""

_BEING_WRITTEN: Final = (".part", ".partial", ".crdownload", ".download", ".tmp", ".swp", "~")
_OF_THE_SYSTEM: Final = ("thumbs.db", "desktop.ini")

_Stamp = tuple[int, int, int]


@dataclass
class Watcher:
    """Looks into a folder again and again; each file is told once, when it stands still.

    A file that is written again later, or replaced by another of its name, is told again.
    Links, folders, hidden files and those that a program is still writing never are.

    Parameters
    ----------
    folder : Path
        The folder; those in it are not looked into.
    only_new : bool
        Whether what lies there at the first look is passed over.
    still_s : float
        How long a file must stand still, s.
    """

    folder: Path
    only_new: bool = False
    still_s: float = STILL_S
    _since: dict[str, tuple[_Stamp, float]] = field(default_factory=dict, repr=False)
    _told: dict[str, _Stamp] = field(default_factory=dict, repr=False)
    _has_looked: bool = field(default=False, repr=False)

    def look(self, now: float) -> tuple[Path, ...]:
        """Look once; return the files that have come to stand still, in order of names.

        Parameters
        ----------
        now : float
            The time in seconds, from any start. One that goes backwards only makes waiting
            begin anew.
        """
        found = _plain_files(self.folder)
        if self.only_new and not self._has_looked:
            self._told = dict(found)
        self._has_looked = True
        self._told = {name: stamp for name, stamp in self._told.items() if name in found}
        self._since = {name: self._seen(name, stamp, now) for name, stamp in found.items()}
        still = [name for name, stamp in sorted(found.items()) if self._is_due(name, stamp, now)]
        self._told |= {name: found[name] for name in still}
        return tuple(self.folder / name for name in still)

    def _seen(self, name: str, stamp: _Stamp, now: float) -> tuple[_Stamp, float]:
        before = self._since.get(name)
        if before is None or before[0] != stamp or before[1] > now:
            return stamp, now
        return before

    def _is_due(self, name: str, stamp: _Stamp, now: float) -> bool:
        return self._told.get(name) != stamp and now - self._since[name][1] >= self.still_s


def _plain_files(folder: Path) -> dict[str, _Stamp]:
    """Return the files that may be taken; an empty one is not written yet."""
    found: dict[str, _Stamp] = {}
    try:
        with os.scandir(folder) as entries:
            for entry in entries:
                if _may_be_taken(entry) and (stamp := _stamp(entry)):
                    found[entry.name] = stamp
    except OSError:
        return {}
    return found


def _may_be_taken(entry: "os.DirEntry[str]") -> bool:
    name = entry.name.lower()
    if name.startswith((".", "~$")) or name.endswith(_BEING_WRITTEN) or name in _OF_THE_SYSTEM:
        return False
    try:
        return entry.is_file(follow_symlinks=False)
    except OSError:
        return False


def _stamp(entry: "os.DirEntry[str]") -> _Stamp | None:
    try:
        status = entry.stat(follow_symlinks=False)
    except OSError:  # it went while we looked
        return None
    return (status.st_size, status.st_mtime_ns, status.st_ino) if status.st_size else None
