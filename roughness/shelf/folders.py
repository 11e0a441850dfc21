"""The handbook files of one folder. A file is read and parsed once, until it changes."""

from collections.abc import Callable
from dataclasses import dataclass, field
from functools import lru_cache
from pathlib import Path
from typing import NamedTuple, TypeVar

from roughness.errors import HandbookError
from roughness.handbook.parsing import hash_of, parse_handbook, read_key
from roughness.handbook.tables import Handbook
from roughness.quantities.foreign_text import printable
from roughness.quantities.strict_toml import LARGEST

_MOST_KEPT = 64
_T = TypeVar("_T")


class _Edition(NamedTuple):
    """A file as it is now: another time or size is another edition."""

    path: Path
    changed: int
    size: int


@dataclass(frozen=True, slots=True)
class Contents:
    """What the handbook files of a folder say about themselves."""

    files: dict[str, Path] = field(default_factory=dict)
    """File by handbook key; a file's name need not be its key."""
    claimed_twice: dict[str, HandbookError] = field(default_factory=dict)
    """Keys that two files have."""
    unread: list[HandbookError] = field(default_factory=list)
    """Why other files do not even tell their key."""


def contents(folder: Path | None) -> Contents:
    """Return the handbook files of ``folder``; none where there is no such folder."""
    found = Contents()
    if folder is None or not folder.is_dir():
        return found
    for path in sorted(folder.glob("*.toml")):
        if path.name.startswith(".") or not path.is_file():
            continue
        try:
            key = _once(_key, path, folder)
        except HandbookError as error:
            found.unread.append(error)
            continue
        if key in found.files:
            found.claimed_twice[key] = HandbookError(
                f"the key {printable(key)!r} is that of {_shown(found.files[key])} too",
                where=_shown(path),
                wanted="each handbook needs a key of its own",
            )
        found.files.setdefault(key, path)
    return found


def handbook_in(path: Path, folder: Path) -> Handbook:
    """Return the parsed file ``path`` of ``folder``.

    Raises
    ------
    HandbookError
        Where it cannot be used, in one sentence.
    """
    return _once(_parsed, path, folder)


def hash_in(path: Path, folder: Path) -> str:
    """Return the sha256 of a handbook file, line ends taken as LF."""
    return _once(_hash, path, folder)


def _once(kept: Callable[[_Edition], _T], path: Path, folder: Path) -> _T:
    if not path.resolve().is_relative_to(folder.resolve()):
        raise HandbookError(
            "it is a link that leads out of the folder",
            where=_shown(path),
            wanted="put the file itself there",
        )
    state = path.stat()
    return kept(_Edition(path, state.st_mtime_ns, state.st_size))


@lru_cache(_MOST_KEPT)
def _key(edition: _Edition) -> str:
    return read_key(_bytes_of(edition), _shown(edition.path))


@lru_cache(_MOST_KEPT)
def _hash(edition: _Edition) -> str:
    return hash_of(_bytes_of(edition))


@lru_cache(_MOST_KEPT)
def _parsed(edition: _Edition) -> Handbook:
    return parse_handbook(_bytes_of(edition), _shown(edition.path))


def _bytes_of(edition: _Edition) -> bytes:
    """Read no more of a file than shows that it is too large."""
    try:
        with edition.path.open("rb") as file:
            return file.read(LARGEST + 1)
    except OSError as error:
        raise HandbookError(
            f"it cannot be read ({error.strerror})", where=_shown(edition.path)
        ) from None


def _shown(path: Path) -> str:
    return printable(f"{path.parent.name}/{path.name}")
