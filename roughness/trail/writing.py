"""One more line at the end of a trail: kept for certain, or said not to be kept."""

import os
from collections.abc import Mapping
from contextlib import suppress
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from roughness.errors import BrokenTrailError, NotKeptError, RecordError
from roughness.quantities.foreign_text import checked_name, printable
from roughness.trail.lines import Line, encoded, hash_of
from roughness.trail.locking import SurveyLock
from roughness.trail.naming import shown
from roughness.trail.reading import Trail, read_trail

_APPEND = (
    os.O_WRONLY
    | os.O_APPEND
    | getattr(os, "O_BINARY", 0)
    | getattr(os, "O_NOFOLLOW", 0)
    | getattr(os, "O_CLOEXEC", 0)
)


@dataclass(frozen=True)
class Kept:
    """A line that is on the disk."""

    line: Line
    trail: Trail
    """The trail with the line in it."""
    repaired: bytes = b""
    """A torn tail that was moved to ``NAME.jsonl.torn`` first."""
    locked: bool = True
    """False where the file system has no locks; say so, others may write at the same time."""


def begin(path: Path, data: Mapping[str, Any], *, by: str, at: str, lock: SurveyLock) -> Kept:
    """Write the first line of a new trail; its folder must be there.

    Raises
    ------
    RecordError
        Where the trail has lines already; or as :func:`append`.
    """
    with lock.held(by, at) as locked:
        known = read_trail(path) if path.exists() else Trail(shown(path))
        if known.lines or known.broken:
            raise RecordError(f"{known.file} is there already; nothing was written")
        _refuse_wrong_data("reach" in data, "begin", data)
        return _kept(path, known, ("begin", data), by=by, at=at, locked=locked)


def append(
    path: Path,
    kind: str,
    data: Mapping[str, Any],
    *,
    by: str,
    at: str,
    lock: SurveyLock,
    known: Trail | None = None,
) -> Kept:
    """Write one line at the end of a trail and wait until the disk has it.

    The lock is held for this one line, and the file is read again under it, so a line
    that somebody else wrote meanwhile is never passed over.

    Parameters
    ----------
    path : Path
        The trail.
    kind, data
        What the line says; a known kind's data must fit its published schema.
    by, at : str
        Who says so, and when (RFC 3339 with offset).
    lock : SurveyLock
        The survey's lock.
    known : Trail, optional
        The trail as it was read before; spares parsing it again.

    Raises
    ------
    InputError
        Where the data does not fit; nothing was written.
    BrokenTrailError
        Where the trail's lines do not hang together: it is read-only.
    BusyError
        Where somebody else is writing.
    NotKeptError
        Where the disk did not take the line; the file is as it was before.
    RecordError
        Where the trail is missing, has to be merged first, or was written by a newer version.
    """
    with lock.held(by, at) as locked:
        trail = read_trail(path, known)
        _refuse_read_only(trail)
        _refuse_wrong_data(trail.is_of_reach, kind, data)
        return _kept(path, trail, (kind, data), by=by, at=at, locked=locked)


def _refuse_read_only(trail: Trail) -> None:
    if trail.broken:
        more = f" (and {len(trail.broken) - 1} more)" if len(trail.broken) > 1 else ""
        raise BrokenTrailError(
            f"{trail.broken[0]}{more}; the trail is read-only until somebody decides"
        )
    if trail.newer:
        raise RecordError(f"{trail.newer}; nothing was written")
    if not trail.lines:
        raise RecordError(f"{trail.file} has no first line yet; nothing was written")
    if trail.to_be_merged:
        raise RecordError(
            f"{trail.file} has {len(trail.heads)} ends and is to be merged first;"
            " nothing was written"
        )


def _refuse_wrong_data(is_of_reach: bool, kind: str, data: Mapping[str, Any]) -> None:
    # pydantic is loaded only by who writes.
    from roughness.trail.kinds import kinds_of, read_data

    if kind in kinds_of(is_of_reach):
        read_data(is_of_reach, kind, data)


def _kept(
    path: Path,
    trail: Trail,
    said: tuple[str, Mapping[str, Any]],
    *,
    by: str,
    at: str,
    locked: bool,
) -> Kept:
    raw = encoded(trail.heads, at, checked_name(by, "name of the author"), *said)
    if trail.torn:
        save_torn(path, trail, at)
    _write(path, raw + b"\n", trail.size, is_new=not path.exists())
    after = read_trail(path, trail)
    return Kept(after.by_hash[hash_of(raw)], after, trail.torn, locked)


def save_torn(path: Path, trail: Trail, at: str) -> None:
    """Move the torn tail to its own file, first there, then away from here."""
    heading = f"# {printable(at)}: {len(trail.torn)} bytes from the end of {path.name}\n"
    beside = path.with_name(f"{path.name}.torn")
    try:
        old = beside.stat().st_size
    except OSError:
        old = 0
    _write(beside, heading.encode() + trail.torn + b"\n", old, is_new=not beside.exists())
    _cut(path, trail.size)


def _cut(path: Path, size: int) -> None:
    try:
        handle = os.open(path, _APPEND)
        try:
            os.ftruncate(handle, size)
            os.fsync(handle)
        finally:
            os.close(handle)
    except OSError as error:
        raise NotKeptError(f"{shown(path)} cannot be repaired ({error.strerror})") from None


def _write(path: Path, raw: bytes, size: int, *, is_new: bool) -> None:
    """Append ``raw`` to the file of ``size`` bytes, or leave the file as it was and say so."""
    try:
        handle = os.open(path, _APPEND | (os.O_CREAT | os.O_EXCL if is_new else 0), 0o666)
    except OSError as error:
        raise _not_kept(path, error.strerror) from None
    try:
        _write_and_sync(handle, raw)
        if is_new:
            sync_folder(path.parent)
    except OSError as error:
        taken_back = _taken_back(handle, size)
        if is_new and taken_back:
            with suppress(OSError):
                path.unlink()
        raise _not_kept(path, error.strerror, taken_back=taken_back) from None
    finally:
        os.close(handle)


def _write_and_sync(handle: int, raw: bytes) -> None:
    written = os.write(handle, raw)
    if written < len(raw):
        # What did not fit says by its own error why: a full disk, a quota.
        os.write(handle, raw[written:])
        raise OSError(0, f"only {written} of {len(raw)} bytes were taken at once")
    os.fsync(handle)


def _taken_back(handle: int, size: int) -> bool:
    try:
        os.ftruncate(handle, size)
        os.fsync(handle)
    except OSError:
        return False
    return True


def sync_folder(folder: Path) -> None:
    """Wait until the disk has what was made, renamed or removed in ``folder``."""
    if os.name == "nt":  # folders cannot be opened there
        return
    handle = os.open(folder, os.O_RDONLY)
    try:
        os.fsync(handle)
    finally:
        os.close(handle)


def _not_kept(path: Path, why: str | None, *, taken_back: bool = True) -> NotKeptError:
    state = (
        "the file is as it was before"
        if taken_back
        else "and part of it may stand at the end of the file"
    )
    return NotKeptError(
        f"not kept: {shown(path)} could not be written ({why or 'no reason given'}); {state}"
    )
