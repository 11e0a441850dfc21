"""The file of a reach: a name that every file system takes, inside the survey's folder."""

import hashlib
import re
import unicodedata
from pathlib import Path

from roughness.errors import RecordError
from roughness.quantities.foreign_text import printable

SURVEY_TRAIL = "survey.jsonl"
REACHES = "reaches"
_PLAIN = re.compile(r"[a-z0-9-]{1,40}")
FILE_NAME = r"[a-z0-9-]{1,49}"
"""A plain name, or a slug of at most 40 signs, ``-`` and 8 hexadecimal digits."""
# Names that one widespread operating system keeps for devices, whatever their ending.
_DEVICES = {"con", "prn", "aux", "nul"} | {f"{d}{i}" for d in ("com", "lpt") for i in range(1, 10)}


def file_name_for(reach: str) -> str:
    """Return the file name of a reach, without its ending.

    >>> file_name_for("mill-weir"), file_name_for("Mill/Weir 2")
    ('mill-weir', 'mill-weir-2-1a697aa7')
    """
    if _PLAIN.fullmatch(reach) and reach not in _DEVICES:
        return reach
    letters = unicodedata.normalize("NFKD", reach).encode("ascii", "ignore").decode()
    slug = re.sub(r"[^a-z0-9]+", "-", letters.lower()).strip("-")[:40].strip("-")
    digits = hashlib.sha256(reach.encode("utf-8", "surrogatepass")).hexdigest()[:8]
    return f"{slug or 'reach'}-{digits}"


def survey_trail(survey: Path) -> Path:
    """Return the file of the survey's own trail."""
    return survey / SURVEY_TRAIL


def reach_trail(survey: Path, file: str) -> Path:
    """Return the trail of a reach by the file name that the survey's trail notes.

    Raises
    ------
    RecordError
        Where the name would lead out of the survey or through a link.
    """
    path = survey / REACHES / f"{file}.jsonl"
    if not re.fullmatch(FILE_NAME, file) or file in _DEVICES:
        raise RecordError(f"{printable(file)!r} is no file name of a reach; it is not opened")
    if path.parent.is_symlink() or path.is_symlink():
        raise RecordError(f"{shown(path)} is a link; links are not followed in a survey")
    return path


def shown(path: Path) -> str:
    """Return the file as messages name it: relative to the survey's folder."""
    inside = f"{REACHES}/{path.name}" if path.parent.name == REACHES else path.name
    return printable(inside)
