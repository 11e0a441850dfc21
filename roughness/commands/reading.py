"""What was handed in as ``FILE`` or ``-``: its bytes, and how messages name it."""

import os
import sys
from pathlib import Path
from typing import BinaryIO

from roughness.errors import InputError
from roughness.quantities.foreign_text import printable

STANDARD_INPUT = "-"


def read_given(name: str, largest: int) -> tuple[bytes, str]:
    """Return the bytes of a file or of standard input, and its name for messages.

    Parameters
    ----------
    name : str
        Path of the file; ``-`` is standard input.
    largest : int
        No more bytes than this are taken; a larger file is refused without reading it whole.

    Raises
    ------
    InputError
        Where it is larger, or there is no standard input.
    OSError
        Where the file cannot be read.
    """
    if name == STANDARD_INPUT:
        if sys.stdin is None:
            raise InputError("there is no standard input", wanted="name a file")
        return _at_most(sys.stdin.buffer, largest, "standard input"), "standard input"
    if "\0" in name:
        raise InputError(f"{printable(name)} is no file name")
    where = printable(os.fspath(name))
    with Path(name).open("rb") as file:
        return _at_most(file, largest, where), where


def _at_most(file: BinaryIO, largest: int, where: str) -> bytes:
    raw = file.read(largest + 1)
    if len(raw) > largest:
        raise InputError(f"it is larger than {largest} bytes", where=where, wanted="a smaller file")
    return raw
