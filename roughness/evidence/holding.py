"""Whether the evidence that trails name is still there, and still the same."""

import hashlib
import os
from collections.abc import Iterable
from functools import lru_cache
from pathlib import Path
from typing import Final, Literal

from roughness.errors import InputError, RecordError
from roughness.evidence.naming import EVIDENCE, stored_path
from roughness.evidence.sources import opened_source

Held = Literal["ok", "missing", "changed"]
_AT_ONCE: Final = 1 << 20


def held(survey: Path, file: str, sha256: str, size: int) -> Held:
    """Say whether a piece of evidence is there as it came; every byte of it is read.

    A file is read once and again only after its size, time or place on the disk changed.

    Parameters
    ----------
    survey : Path
        The survey's folder.
    file, sha256, size
        What the trail says of it.

    Returns
    -------
    Held
        ``missing`` where nothing stands there; ``changed`` where something else does, a
        link or a folder included.
    """
    try:
        path = stored_path(survey, file)
        status = path.lstat()
    except FileNotFoundError:
        return "missing"
    except (OSError, RecordError):
        return "changed"
    if status.st_size != size:
        return "changed"
    found = _hash(path, status.st_ino, status.st_size, status.st_mtime_ns, status.st_ctime_ns)
    return "ok" if found == sha256 else "changed"


def unlisted(survey: Path, listed: Iterable[str]) -> tuple[str, ...]:
    """Return what lies in the evidence folder and no trail names, in order of names.

    Parameters
    ----------
    survey : Path
        The survey's folder.
    listed : iterable of str
        The files that trails name, ``evidence/...``.
    """
    known = set(listed)
    try:
        names = sorted(entry.name for entry in os.scandir(survey / EVIDENCE))
    except OSError:
        return ()
    found = (f"{EVIDENCE}/{name}" for name in names)
    return tuple(file for file in found if file not in known)


@lru_cache(maxsize=4096)
def _hash(path: Path, *_stamp: int) -> str | None:
    digest = hashlib.sha256()
    try:
        with opened_source(path, _stamp[1] + 1) as source:
            while piece := source.file.read(_AT_ONCE):
                digest.update(piece)
    except (InputError, OSError):
        return None
    return digest.hexdigest()
