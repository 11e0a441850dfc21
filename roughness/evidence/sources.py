"""Opening a file from outside: a plain file, not too large, and the same until it was read."""

import os
import stat
from collections.abc import Iterator
from contextlib import contextmanager
from dataclasses import dataclass
from pathlib import Path
from typing import BinaryIO, Final

from roughness.errors import InputError
from roughness.evidence.naming import name_as_it_came

LARGEST_BYTES: Final = 200_000_000
"""Files above this are not taken: a survey travels by mail and through synced folders."""

# Without O_NONBLOCK, opening a pipe that nobody writes to would wait for ever.
_READ = (
    os.O_RDONLY
    | getattr(os, "O_BINARY", 0)
    | getattr(os, "O_NOFOLLOW", 0)
    | getattr(os, "O_NONBLOCK", 0)
    | getattr(os, "O_CLOEXEC", 0)
)
_KINDS = (
    (stat.S_ISLNK, "a link", "name the file that it leads to"),
    (stat.S_ISDIR, "a folder", "name the files in it"),
    (stat.S_ISFIFO, "a pipe", "name a file"),
    (stat.S_ISSOCK, "a socket", "name a file"),
    (stat.S_ISCHR, "a device", "name a file"),
    (stat.S_ISBLK, "a device", "name a file"),
)


@dataclass(frozen=True)
class Source:
    """A plain file from outside, open for reading."""

    file: BinaryIO
    name: str
    """As it came, for people."""
    opened_as: tuple[int, int]
    """Size in bytes and time of the last change, ns, when it was opened."""

    def refuse_changed(self) -> None:
        """See that nobody wrote to it since it was opened.

        Raises
        ------
        InputError
            Where somebody did: what was read may be half of one state, half of another.
        """
        if _stamp(os.fstat(self.file.fileno())) != self.opened_as:
            raise InputError(
                "the file changed while it was read",
                where=self.name,
                wanted="wait until it is written, then try again",
            )


@contextmanager
def opened_source(path: Path, largest: int = LARGEST_BYTES) -> Iterator[Source]:
    """Open a plain file for reading.

    A link is not followed, not even one that a person names: what is copied is what the
    name says. Links among the folders above it are those of the person's own machine.

    Parameters
    ----------
    path : Path
        The file.
    largest : int
        The largest size in bytes, checked before anything is read.

    Raises
    ------
    InputError
        Where it is no plain file, cannot be read, is empty or too large.
    """
    name = name_as_it_came(path.name or str(path))
    try:
        # Looked at before it is opened: opening a device alone may do something.
        _refuse_not_plain(path.lstat(), name)
        handle = os.open(path, _READ)
    except (OSError, ValueError) as error:
        raise _unreadable(name, error) from None
    with os.fdopen(handle, "rb") as file:
        before = os.fstat(file.fileno())
        _refuse_not_plain(before, name)
        _refuse_size(before.st_size, largest, name)
        yield Source(file, name, _stamp(before))


def _refuse_not_plain(status: os.stat_result, name: str) -> None:
    for is_one, what, wanted in _KINDS:
        if is_one(status.st_mode):
            raise InputError(f"it is {what}, not a file", where=name, wanted=wanted)
    if not stat.S_ISREG(status.st_mode):
        raise InputError("it is not a plain file", where=name, wanted="name a file")


def _refuse_size(size: int, largest: int, name: str) -> None:
    if size == 0:
        raise InputError("the file is empty", where=name, wanted="was it written to the end?")
    if size > largest:
        raise InputError(
            f"the file has {size / 1e6:,.0f} MB".replace(",", " "),
            where=name,
            wanted=f"at most {largest / 1e6:g} MB; keep a smaller copy as evidence",
        )


def _stamp(status: os.stat_result) -> tuple[int, int]:
    return status.st_size, status.st_mtime_ns


def _unreadable(name: str, error: OSError | ValueError) -> InputError:
    if isinstance(error, FileNotFoundError):
        return InputError("there is no such file", where=name, wanted="name a file that is there")
    why = error.strerror if isinstance(error, OSError) else str(error)
    return InputError(f"the file cannot be read ({why or 'no reason given'})".lower(), where=name)
