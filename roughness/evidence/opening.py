"""Opening a picture from outside: known formats alone, within limits, every fault a sentence."""

import struct
import warnings
import zlib
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path
from typing import Final

from PIL import Image, UnidentifiedImageError

from roughness.errors import InputError
from roughness.evidence.naming import name_as_it_came
from roughness.evidence.sources import opened_source

# Not TIFF: its decoder writes what it dislikes of a file over whatever is on the screen.
FORMATS: Final = ("JPEG", "PNG", "WEBP")
NOT_AN_IMAGE: Final = "it is no picture of a kind that can be shown here"

MOST_PIXELS: Final = 50_000_000
"""A picture is unfolded whole before it is made small: 50 million pixels take 200 MB."""
MOST_PIXELS_OF_JPEG: Final = 120_000_000
"""A JPEG is made small while it is unfolded."""
MOST_PIXELS_TO_KEEP: Final = 400_000_000
"""Beyond this a file is no photo but a trap, and not even its head is read."""

# The library refuses twice this number, and warns from once of it on.
Image.MAX_IMAGE_PIXELS = MOST_PIXELS_TO_KEEP // 2


# What decoders raise on bytes that were made to hurt them; anything else is our own mistake.
_DAMAGED: Final = (
    OSError,
    SyntaxError,
    ValueError,
    EOFError,
    TypeError,
    LookupError,
    ArithmeticError,
    AttributeError,
    MemoryError,
    RuntimeError,
    struct.error,
    zlib.error,
)


@contextmanager
def opened_image(path: Path) -> Iterator[Image.Image]:
    """Open a picture; the body of the ``with`` may decode it.

    Raises
    ------
    InputError
        Where it is no picture (``what`` is then :data:`NOT_AN_IMAGE`), or something in the
        body finds that it is cut off, damaged or too large.
    """
    name = name_as_it_came(path.name)
    with opened_source(path) as source:
        try:
            with (
                # What the library warns of (odd metadata, sizes) is judged here instead.
                warnings.catch_warnings(action="ignore"),
                Image.open(source.file, formats=FORMATS) as image,
            ):
                yield image
        except InputError:
            raise
        except UnidentifiedImageError:
            raise InputError(NOT_AN_IMAGE, where=name, wanted="JPEG, PNG or WebP") from None
        except Image.DecompressionBombError:
            raise _too_many(name, "far too many pixels", MOST_PIXELS_TO_KEEP) from None
        except _DAMAGED as error:
            why = str(error).split("\n", 1)[0][:80] or type(error).__name__
            raise InputError(
                f"the picture is cut off or damaged ({why})",
                where=name,
                wanted="copy it from the camera again",
            ) from None


def refuse_too_large(image: Image.Image, name: str) -> None:
    """Refuse a picture that would take too much memory to unfold.

    Raises
    ------
    InputError
        Names its size and the limit.
    """
    most = MOST_PIXELS_OF_JPEG if image.format in ("JPEG", "MPO") else MOST_PIXELS
    pixels = image.width * image.height
    if pixels > most:
        raise _too_many(name, f"{pixels / 1e6:.1f} million pixels and is not shown", most)


def _too_many(name: str, pixels: str, most: int) -> InputError:
    return InputError(
        f"the picture has {pixels}", where=name, wanted=f"at most {most // 1_000_000} million"
    )
