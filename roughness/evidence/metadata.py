"""When and where a photo was taken, by the word of its own metadata (EXIF).

Source of the tags and their meaning: CIPA DC-008 / JEITA CP-3451 (EXIF), sections 4.6.5 and
4.6.6. Nothing is added: a time that came without its offset from UTC stays without, and a
place that is not wholly told (a sign or a number missing) is no place.
"""

import re
from collections.abc import Mapping
from dataclasses import dataclass
from datetime import datetime
from pathlib import Path
from typing import Any, Final

from PIL import Image

from roughness.errors import InputError
from roughness.evidence.opening import NOT_AN_IMAGE, opened_image

_EXIF_IFD: Final = 0x8769
_GPS_IFD: Final = 0x8825
_TAKEN, _OFFSET = 0x9003, 0x9011  # DateTimeOriginal, OffsetTimeOriginal
_LATITUDE, _LONGITUDE = (1, 2), (3, 4)  # each the tag of its reference and of its value
_DATUM = 18
_WGS_84 = re.compile(r"WGS[ -]?(19)?84\b.*", re.IGNORECASE)


@dataclass(frozen=True, kw_only=True)
class Told:
    """What a photo says about itself."""

    taken_at: str | None = None
    """``2026-06-30T14:03:22+02:00``; without the offset where the photo does not tell it."""
    position: tuple[float, float] | None = None
    """Longitude and latitude, degrees, WGS 84."""
    width: int = 0
    """In pixels, as stored."""
    height: int = 0


def read_metadata(path: Path) -> Told | None:
    """Return what a photo tells of itself; None for a file that is no picture known here.

    Only the head of the file is read, never the picture.

    Raises
    ------
    InputError
        Where the file is a picture whose head cannot be read.
    """
    try:
        with opened_image(path) as image:
            exif = _exif(image)
            return Told(
                taken_at=_taken_at(exif.get_ifd(_EXIF_IFD)),
                position=_position(exif.get_ifd(_GPS_IFD)),
                width=image.width,
                height=image.height,
            )
    except InputError as error:
        if error.what == NOT_AN_IMAGE:
            return None
        raise


def _exif(image: Image.Image) -> Image.Exif:
    """Return the metadata at the head of the file, if there is any.

    A PNG may also carry it behind the picture; the library would unfold all of that to get
    there, so it is not looked for.
    """
    if image.format == "PNG" and "exif" not in image.info:
        return Image.Exif()
    return image.getexif()


def _taken_at(tags: Mapping[int, Any]) -> str | None:
    text = _text(tags.get(_TAKEN))
    try:
        taken = datetime.strptime(text, "%Y:%m:%d %H:%M:%S")
    except ValueError:  # blanks and zeros are how cameras write that they do not know
        return None
    offset = _text(tags.get(_OFFSET))
    known = re.fullmatch(r"[+-](0\d|1[0-4]):[0-5]\d", offset)
    return taken.isoformat() + (offset if known else "")


def _position(tags: Mapping[int, Any]) -> tuple[float, float] | None:
    datum = _text(tags.get(_DATUM))
    if datum and not _WGS_84.fullmatch(datum):
        return None  # in another datum the same numbers lie hundreds of metres away
    latitude = _degrees(tags, _LATITUDE, "N", "S", 90)
    longitude = _degrees(tags, _LONGITUDE, "E", "W", 180)
    return None if latitude is None or longitude is None else (longitude, latitude)


def _degrees(
    tags: Mapping[int, Any], where: tuple[int, int], plus: str, minus: str, most: int
) -> float | None:
    sign = {plus: 1, minus: -1}.get(_text(tags.get(where[0])).upper())
    try:
        degrees, minutes, seconds = (float(one) for one in tags.get(where[1], ()))
    except (TypeError, ValueError, ZeroDivisionError, OverflowError):
        return None
    value = degrees + minutes / 60 + seconds / 3600
    # NaN (a zero denominator) fails every comparison.
    ordered = degrees >= 0 and 0 <= minutes < 60 and 0 <= seconds < 60
    if sign is None or not (ordered and value <= most):
        return None
    return round(sign * value, 7)  # 1e-7 degrees are a centimetre


def _text(value: Any) -> str:
    if isinstance(value, bytes):
        value = value.decode("ascii", "replace")
    return value.strip("\0 ") if isinstance(value, str) else ""
