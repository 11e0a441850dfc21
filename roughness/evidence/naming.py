"""The file of a piece of evidence: a name that every file system takes, led by its hash."""

import re
import unicodedata
from pathlib import Path
from typing import Final

from roughness.errors import InputError, RecordError
from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import enumerate_words

EVIDENCE: Final = "evidence"
PHOTO_ENDINGS: Final = ("jpg", "jpeg", "png", "webp")
"""Endings of files that must be a picture which can be shown here."""
DOCUMENT_ENDINGS: Final = (
    *("tif", "tiff", "heic", "heif", "avif", "dng", "bmp", "gif"),
    *("pdf", "txt", "md", "csv", "tsv", "json", "geojson", "gpx", "kml"),
    *("odt", "ods", "docx", "xlsx", "m4a", "mp3", "wav", "ogg", "mp4", "mov"),
)
"""Endings of files that are kept by their hash and never opened here."""

_LONGEST_SLUG = 60
_LONGEST_NAME = 120
_STORED = re.compile(r"evidence/[0-9a-f]{12}-[^/\\:\x00-\x1f\x7f]{1,200}")


def ending_of(name: str) -> str:
    """Return what stands behind the last point, in small letters; empty where there is none."""
    return Path(name).suffix[1:].lower()


def checked_ending(name: str) -> str:
    """Return the ending of a file that may become evidence.

    Raises
    ------
    InputError
        Where files of this ending are not taken: a web page or a program, for example, may
        do more than be looked at when a reviewer opens it.
    """
    ending = ending_of(name)
    if ending in PHOTO_ENDINGS or ending in DOCUMENT_ENDINGS:
        return ending
    what = f"files ending in .{printable(ending)} are" if ending else "a file without ending is"
    raise InputError(
        f"{what} not taken as evidence",
        where=name_as_it_came(name),
        wanted=f"taken are {enumerate_words([*PHOTO_ENDINGS, *DOCUMENT_ENDINGS])}",
    )


def stored_name(sha256: str, name: str) -> str:
    """Return where a file is kept, relative to the survey's folder.

    >>> stored_name("0123456789abcdef" * 4, "Große Weide (2).JPG")
    'evidence/0123456789ab-groe-weide-2.jpg'
    """
    letters = unicodedata.normalize("NFKD", Path(name).stem).encode("ascii", "ignore").decode()
    slug = re.sub(r"[^a-z0-9]+", "-", letters.lower()).strip("-")[:_LONGEST_SLUG].strip("-")
    return f"{EVIDENCE}/{sha256[:12]}-{slug or 'file'}.{checked_ending(name)}"


def name_as_it_came(name: str) -> str:
    """Return the name of a file for people: nothing hidden in it, of a bearable length."""
    shown = printable(Path(name).name)
    return shown if len(shown) <= _LONGEST_NAME else f"{shown[: _LONGEST_NAME - 3]}..."


def is_stored_name(file: str) -> bool:
    """Whether a trail may name this as the file of a piece of evidence."""
    return _STORED.fullmatch(file) is not None


def stored_path(survey: Path, file: str) -> Path:
    """Return the file of a piece of evidence by the name that a trail gives it.

    Raises
    ------
    RecordError
        Where the name would lead out of the survey's evidence or through a link.
    """
    if not is_stored_name(file):
        raise RecordError(f"{printable(file)!r} is no file name of evidence; it is not opened")
    path = survey / file
    if path.parent.is_symlink() or path.is_symlink():
        raise RecordError(f"{file} is a link; links are not followed in a survey")
    return path
