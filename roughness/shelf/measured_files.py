"""The files of measured streams: those that travel with the program, and a survey's own."""

from collections.abc import Iterator
from pathlib import Path
from typing import Final, NamedTuple

from roughness.errors import InputError
from roughness.quantities.foreign_text import printable
from roughness.quantities.strict_toml import LARGEST
from roughness.shelf.places import tables_folder

FOLDER: Final = "measured"


class MeasuredFile(NamedTuple):
    """One file as it is."""

    where: str
    """Its name for messages."""
    raw: bytes
    """No more of it than shows that it is too large."""


def published_files() -> Iterator[MeasuredFile | InputError]:
    """Yield the files that travel with the program."""
    return files_in(tables_folder() / FOLDER)


def files_in(folder: Path) -> Iterator[MeasuredFile | InputError]:
    """Yield the ``*.toml`` of a folder by name, or why one is not read.

    Hidden files and folders are passed over, links out of the folder are not followed, and
    the folder need not exist.
    """
    if not folder.is_dir():
        return
    for path in sorted(folder.glob("*.toml")):
        if path.name.startswith(".") or not path.is_file():
            continue
        where = printable(f"{folder.name}/{path.name}")
        if not path.resolve().is_relative_to(folder.resolve()):
            wanted = "put the file itself there"
            yield InputError(
                "it is a link that leads out of the folder", where=where, wanted=wanted
            )
            continue
        try:
            with path.open("rb") as file:
                yield MeasuredFile(where, file.read(LARGEST + 1))
        except OSError as error:
            yield InputError(f"it cannot be read ({error.strerror})", where=where)
