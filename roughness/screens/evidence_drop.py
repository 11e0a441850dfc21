"""A folder that files are dropped into: what stood still in it waits to be offered."""

import os
from collections import deque
from collections.abc import Callable
from pathlib import Path
from time import monotonic

from roughness.errors import InputError
from roughness.evidence.watching import Watcher
from roughness.quantities.foreign_text import printable


class DropFolder:
    """The folder that somebody watches while the survey is open; none at first.

    Nothing in it is opened, moved or removed here.

    Parameters
    ----------
    clock : function
        Tells the time in seconds from any start.
    """

    def __init__(self, clock: Callable[[], float] = monotonic) -> None:
        self.clock = clock
        self._watcher: Watcher | None = None
        self._waiting: deque[Path] = deque()

    @property
    def folder(self) -> Path | None:
        """What is watched."""
        return self._watcher.folder if self._watcher else None

    @property
    def waiting(self) -> int:
        """How many files wait to be offered."""
        return len(self._waiting)

    def watch(self, folder: Path, survey: Path, *, only_new: bool) -> None:
        """Watch a folder from now on; it is made where only its last name is missing.

        Parameters
        ----------
        folder : Path
            The folder.
        survey : Path
            The survey's folder, which it must be apart from.
        only_new : bool
            Whether what lies there now is passed over.

        Raises
        ------
        InputError
            Where it is no folder, cannot be read or lies inside the survey.
        """
        checked_apart(folder, survey)
        where = printable(str(folder))
        try:
            if not folder.exists():
                folder.mkdir()
            with os.scandir(folder):  # whether it may be read is known from reading alone
                pass
        except FileNotFoundError:
            raise InputError(
                "the folder above it is not there", where=where, wanted="name a folder that is"
            ) from None
        except NotADirectoryError:
            raise InputError("it is a file, not a folder", where=where) from None
        except (OSError, ValueError) as error:
            why = error.strerror if isinstance(error, OSError) else error
            raise InputError(f"it cannot be watched ({why})", where=where) from None
        self._watcher, self._waiting = Watcher(folder, only_new=only_new), deque()

    def stop(self) -> None:
        """Watch nothing any more; what waited is passed over."""
        self._watcher, self._waiting = None, deque()

    def look(self) -> None:
        """Look into the folder once."""
        if self._watcher is not None:
            found = self._watcher.look(self.clock())
            self._waiting.extend(path for path in found if path not in self._waiting)

    def next(self) -> Path | None:
        """Take the next file that waits and is still there."""
        while self._waiting:
            path = self._waiting.popleft()
            if os.path.lexists(path):
                return path
        return None


def checked_apart(folder: Path, survey: Path) -> None:
    """See that a folder lies outside the survey.

    Raises
    ------
    InputError
        Where it is the survey or inside it: what lies there is the survey's own already.
    """
    try:
        inside = folder.resolve().is_relative_to(survey.resolve())
    except (OSError, ValueError, RuntimeError):
        raise InputError("the folder cannot be found", where=printable(str(folder))) from None
    if inside:
        raise InputError(
            "it lies inside the survey",
            where=printable(str(folder)),
            wanted="name a folder beside it; what is taken is copied into the survey",
        )
