"""Files that are there whole or not at all: written aside, synced, then renamed."""

import os
import tempfile
from collections.abc import Callable
from contextlib import suppress
from pathlib import Path
from typing import BinaryIO

from roughness.errors import InputError, NotKeptError
from roughness.quantities.foreign_text import printable


def write_whole(path: Path, content: bytes | Callable[[BinaryIO], None]) -> None:
    """Write ``path`` as a whole; what stood there before stays until the new file is safe.

    Parameters
    ----------
    path : Path
        The file; its folder must be there.
    content : bytes or function
        What it holds, or a function that writes it into an open file.

    Raises
    ------
    NotKeptError
        Where the disk did not take it; nothing half-written stays behind.
    """
    aside: Path | None = None
    try:
        handle, name = tempfile.mkstemp(prefix=".", suffix=".part", dir=path.parent)
        aside = Path(name)
        with os.fdopen(handle, "wb") as file:
            content(file) if callable(content) else file.write(content)
            file.flush()
            os.fsync(file.fileno())
        # mkstemp makes files for one person alone; a result is as public as any other file.
        aside.chmod(0o666 & ~_mask())
        aside.replace(path)
        aside = None
    except OSError as error:
        raise NotKeptError(
            f"not kept: {printable(path.name)} could not be written"
            f" ({error.strerror or error}); nothing was changed"
        ) from None
    finally:
        if aside is not None:
            with suppress(OSError):
                aside.unlink()


def refuse_place(target: Path, survey: Path) -> None:
    """Say no to a result that would lie inside the survey's own folder, or where a folder is.

    Raises
    ------
    InputError
        Before anything is computed or written.
    """
    where, folder = printable(str(target)), target.parent.resolve()
    if folder == survey.resolve() or survey.resolve() in folder.parents:
        raise InputError(
            "it lies inside the survey's own folder", where=where, wanted="write it elsewhere"
        )
    if target.is_dir():
        raise InputError("it is a folder", where=where, wanted="name a file")


def _mask() -> int:
    mask = os.umask(0)
    os.umask(mask)
    return mask
