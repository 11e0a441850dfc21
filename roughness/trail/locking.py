"""Who may write to a survey right now: an operating-system lock on ``SURVEY/.lock``.

The lock is held for one append and goes with the process that holds it, however that
ends. The text in the file (who, where, since) only informs.
"""

import errno
import os
import sys
import time
from collections.abc import Iterator
from contextlib import contextmanager, suppress
from dataclasses import dataclass
from pathlib import Path

from roughness.errors import BusyError, RecordError
from roughness.trail.presence import Present, presences, write_presences

LOCK_FILE = ".lock"
USUAL_WAIT_S = 5.0
_PAUSE_S = 0.01
_HELD_BY_ANOTHER = {errno.EAGAIN, errno.EWOULDBLOCK, errno.EACCES, errno.EDEADLK}
_NO_LOCKS_HERE = {errno.ENOLCK, errno.ENOSYS, errno.EOPNOTSUPP, errno.ENOTSUP, errno.EINVAL}

if sys.platform == "win32":
    import msvcrt

    # A byte far beyond the text: a locked byte cannot even be read there.
    _LOCKED_BYTE = 1 << 30

    def _try_lock(handle: int) -> None:
        os.lseek(handle, _LOCKED_BYTE, os.SEEK_SET)
        msvcrt.locking(handle, msvcrt.LK_NBLCK, 1)

    def _unlock(handle: int) -> None:
        os.lseek(handle, _LOCKED_BYTE, os.SEEK_SET)
        msvcrt.locking(handle, msvcrt.LK_UNLCK, 1)
else:
    import fcntl

    def _try_lock(handle: int) -> None:
        fcntl.flock(handle, fcntl.LOCK_EX | fcntl.LOCK_NB)

    def _unlock(handle: int) -> None:
        fcntl.flock(handle, fcntl.LOCK_UN)


@dataclass(frozen=True)
class SurveyLock:
    """The lock of one survey.

    Parameters
    ----------
    survey : Path
        The survey's folder.
    wait_s : float
        How long to wait for somebody else, in seconds.
    """

    survey: Path
    wait_s: float = USUAL_WAIT_S

    @contextmanager
    def held(self, by: str, at: str) -> Iterator[bool]:
        """Hold the lock; yields False where the file system has none and all go on unlocked.

        Raises
        ------
        BusyError
            Where somebody else held it longer than ``wait_s``; names who, as far as known.
        RecordError
            Where the survey's folder is not there or may not be written to.
        """
        with self._opened() as handle:
            locked = self._locked(handle)
            me = Present.here(by, at, writing=True)
            others = [one for one in presences(handle) if not one.writing] if locked else []
            if locked:
                write_presences(handle, [me, *others])
            try:
                yield locked
            finally:
                if locked:
                    write_presences(handle, others)
                    with suppress(OSError):
                        _unlock(handle)

    def enter(self, by: str, at: str) -> tuple[Present, ...]:
        """Note that this process has the survey open; returns who else has.

        Nothing is noted where the folder cannot be written to: then nobody can disturb.
        """
        return self._noted(add=Present.here(by, at))

    def leave(self) -> None:
        """Take back what :meth:`enter` noted."""
        self._noted(add=None)

    def others(self) -> tuple[Present, ...]:
        """Return who else has the survey open, as far as is known; writes nothing."""
        try:
            raw = (self.survey / LOCK_FILE).read_bytes()
        except OSError:
            return ()
        return tuple(one for one in Present.read_all(raw) if not one.is_me and one.may_live)

    def _noted(self, add: Present | None) -> tuple[Present, ...]:
        try:
            with self._opened() as handle:
                self._locked(handle)
                others = [one for one in presences(handle) if not one.is_me and one.may_live]
                write_presences(handle, [*others, *([add] if add else [])])
        except RecordError:
            return self.others()
        return tuple(others)

    @contextmanager
    def _opened(self) -> Iterator[int]:
        flags = os.O_RDWR | os.O_CREAT | getattr(os, "O_NOFOLLOW", 0) | getattr(os, "O_CLOEXEC", 0)
        try:
            handle = os.open(self.survey / LOCK_FILE, flags, 0o666)
        except FileNotFoundError:
            raise RecordError(f"there is no folder {self.survey.name!r} to write to") from None
        except OSError as error:
            raise RecordError(
                f"the survey {self.survey.name!r} cannot be written to ({error.strerror})"
            ) from None
        try:
            yield handle
        finally:
            os.close(handle)

    def _locked(self, handle: int) -> bool:
        deadline = time.monotonic() + self.wait_s
        while True:
            try:
                _try_lock(handle)
            except OSError as error:
                if error.errno in _NO_LOCKS_HERE:
                    return False
                if error.errno not in _HELD_BY_ANOTHER:
                    raise RecordError(f"the survey cannot be locked ({error.strerror})") from None
                if time.monotonic() >= deadline:
                    raise self._busy(handle) from None
                time.sleep(_PAUSE_S)
            else:
                return True

    def _busy(self, handle: int) -> BusyError:
        holder = next((one for one in presences(handle) if one.writing), None)
        who = f"{holder} is writing" if holder else "another program is writing"
        return BusyError(
            f"the survey {self.survey.name!r} is busy: {who};"
            f" nothing was written after waiting {self.wait_s:g} s, try again"
        )
