"""A copy in ``SURVEY/evidence``: there whole under its hash, or not there at all."""

import hashlib
import os
import secrets
from collections.abc import Iterator
from contextlib import contextmanager, suppress
from dataclasses import dataclass
from pathlib import Path
from typing import Final

from roughness.errors import InputError, NotKeptError, RecordError
from roughness.evidence.holding import held
from roughness.evidence.naming import (
    EVIDENCE,
    checked_ending,
    name_as_it_came,
    stored_name,
)
from roughness.evidence.sources import LARGEST_BYTES, Source, opened_source
from roughness.trail.writing import sync_folder

_AT_ONCE: Final = 1 << 20


@dataclass(frozen=True, kw_only=True)
class KeptFile:
    """A file that is in the survey's evidence."""

    file: str
    """Relative to the survey's folder: ``evidence/<12 hex>-<name>``."""
    sha256: str
    size: int
    """In bytes."""
    name: str
    """As it came, for people."""
    is_new: bool
    """False where the same bytes were there already: no second copy was made."""


def keep_copy(survey: Path, source: Path, largest: int = LARGEST_BYTES) -> KeptFile:
    """Copy a file into the survey's evidence; the file itself is not touched.

    What counts is what was written: hash and size are taken from the bytes of the copy.

    Parameters
    ----------
    survey : Path
        The survey's folder.
    source : Path
        The file.
    largest : int
        The largest size in bytes.

    Raises
    ------
    InputError
        Where the file cannot be taken; nothing was written.
    RecordError
        Where ``evidence`` is no folder of the survey, or holds other bytes under this name.
    NotKeptError
        Where the disk did not take it; nothing half-written stays.
    """
    checked_ending(source.name)
    with opened_source(source, largest) as opened, _aside(evidence_folder(survey)) as aside:
        try:
            sha256, size = _copied(opened, aside, largest)
            opened.refuse_changed()
            there = _same_bytes(survey, sha256, size)
            if there is None:
                _put(aside, survey / stored_name(sha256, source.name), sha256, size)
        except OSError as error:
            raise _not_kept(source.name, error) from None
    return KeptFile(
        file=there or stored_name(sha256, source.name),
        sha256=sha256,
        size=size,
        name=opened.name,
        is_new=there is None,
    )


def evidence_folder(survey: Path) -> Path:
    """Return the folder, made where it is missing.

    Raises
    ------
    RecordError
        Where it is a link or a file.
    """
    folder = survey / EVIDENCE
    if folder.is_symlink():
        raise RecordError(f"{EVIDENCE} is a link; links are not followed in a survey")
    try:
        folder.mkdir(exist_ok=True)
    except OSError as error:
        raise RecordError(f"{EVIDENCE} cannot be made in the survey ({error.strerror})") from None
    return folder


@contextmanager
def _aside(folder: Path) -> Iterator[Path]:
    """Make a hidden file beside those that are kept; it is gone afterwards."""
    aside = folder / f".{secrets.token_hex(8)}.part"
    try:
        # As public as any other file of this person: the system takes off what they hide.
        os.close(os.open(aside, os.O_WRONLY | os.O_CREAT | os.O_EXCL, 0o666))
    except OSError as error:
        raise _not_kept("the file", error) from None
    try:
        yield aside
    finally:
        with suppress(OSError):
            aside.unlink()


def _copied(source: Source, aside: Path, largest: int) -> tuple[str, int]:
    """Copy all bytes and wait until the disk has them; return their hash and number."""
    digest, size = hashlib.sha256(), 0
    with aside.open("wb") as copy:
        while piece := source.file.read(_AT_ONCE):
            size += len(piece)
            if size > largest:  # a file that grows while it is read would never end
                raise InputError("the file grows while it is read", where=source.name)
            digest.update(piece)
            copy.write(piece)
        copy.flush()
        os.fsync(copy.fileno())
    return digest.hexdigest(), size


def _same_bytes(survey: Path, sha256: str, size: int) -> str | None:
    """Return the file that holds these bytes already, whatever name they came under."""
    found = sorted((survey / EVIDENCE).glob(f"{sha256[:12]}-*"))
    files = [f"{EVIDENCE}/{path.name}" for path in found]
    return next((file for file in files if held(survey, file, sha256, size) == "ok"), None)


def _put(aside: Path, target: Path, sha256: str, size: int) -> None:
    """Give the copy its name; a file that stands there is never written over."""
    file = f"{EVIDENCE}/{target.name}"
    # Somebody else may have put the same bytes there just now: putting them again is harmless.
    if os.path.lexists(target) and held(target.parents[1], file, sha256, size) != "ok":
        raise RecordError(
            f"{file} is there with other bytes than its name says;"
            " move it out of the folder and attach again"
        )
    aside.replace(target)
    sync_folder(target.parent)


def _not_kept(name: str, error: OSError) -> NotKeptError:
    return NotKeptError(
        f"not kept: {name_as_it_came(name)} could not be copied ({error.strerror or error});"
        " nothing was changed"
    )
