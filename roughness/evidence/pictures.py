"""Small pictures for reports and screens: new pixels, upright, without any metadata."""

import io
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path
from typing import Final, NamedTuple

from PIL import Image, ImageOps

from roughness.errors import InputError
from roughness.evidence.naming import name_as_it_came
from roughness.evidence.opening import opened_image, refuse_too_large

_QUALITY: Final = 80
_WHITE: Final = (255, 255, 255)
UPPER_HALF: Final = "▀"

Colour = tuple[int, int, int]
"""Red, green and blue, each from 0 to 255."""


@dataclass(frozen=True, kw_only=True)
class Thumbnail:
    """A small picture, encoded anew."""

    media_type: str
    data: bytes
    width: int
    height: int


class Cells(NamedTuple):
    """Neighbouring cells of a terminal line that look the same."""

    text: str
    """The upper half block, once for each cell."""
    above: Colour
    """The colour of the block itself."""
    below: Colour | None
    """The colour behind it; None below the last line of a picture of odd height."""


def thumbnail(path: Path, longest_side: int = 640) -> Thumbnail:
    """Return a picture as a small JPEG, the same bytes for the same picture and library.

    Parameters
    ----------
    path : Path
        JPEG, PNG or WebP.
    longest_side : int
        In pixels; a smaller picture is not made larger.

    Raises
    ------
    InputError
        Where it is no such picture, cut off, damaged or too large.
    """
    small = _small(path, (longest_side, longest_side))
    out = io.BytesIO()
    small.save(out, "JPEG", quality=_QUALITY, optimize=True)
    return Thumbnail(
        media_type="image/jpeg", data=out.getvalue(), width=small.width, height=small.height
    )


def half_blocks(path: Path, columns: int, rows: int) -> tuple[tuple[Cells, ...], ...]:
    """Return a picture as lines for a terminal, two pixels above each other in a cell.

    A cell is taken to be twice as high as wide, so that the picture keeps its proportions.

    Parameters
    ----------
    path : Path
        JPEG, PNG or WebP.
    columns, rows : int
        The room there is, in cells.

    Returns
    -------
    tuple of tuple of Cells
        At most ``rows`` lines of at most ``columns`` cells.

    Raises
    ------
    InputError
        As :func:`thumbnail`; or where there is no room at all.
    """
    if columns < 1 or rows < 1:
        raise InputError("there is no room for a picture", wanted="make the window larger")
    small = _small(path, (columns, 2 * rows), enlarge=True)
    lines = list(_lines(small))
    return tuple(tuple(_runs(lines, y)) for y in range(0, len(lines), 2))


def _lines(image: Image.Image) -> Iterator[list[Colour]]:
    raw = image.tobytes()
    pixels = list(zip(raw[0::3], raw[1::3], raw[2::3], strict=True))
    for start in range(0, len(pixels), image.width):
        yield pixels[start : start + image.width]


def _runs(lines: list[list[Colour]], y: int) -> Iterator[Cells]:
    """Join neighbours of one line that look the same."""
    above = lines[y]
    below = lines[y + 1] if y + 1 < len(lines) else [None] * len(above)
    cells = list(zip(above, below, strict=True))
    start = 0
    for x in range(1, len(cells) + 1):
        if x == len(cells) or cells[x] != cells[start]:
            yield Cells(UPPER_HALF * (x - start), *cells[start])
            start = x


def _small(path: Path, room: tuple[int, int], *, enlarge: bool = False) -> Image.Image:
    """Return the picture upright, opaque and small, as pixels that carry nothing else."""
    with opened_image(path) as image:
        refuse_too_large(image, name_as_it_came(path.name))
        turned = image.getexif().get(0x0112, 1) in (5, 6, 7, 8)
        # Only a JPEG heeds this: it is unfolded at half, a quarter or an eighth of its size.
        image.draft(None, room[::-1] if turned else room)
        upright = ImageOps.exif_transpose(image)
        small = _fitted(_opaque(upright), room, enlarge=enlarge)
        return Image.frombytes("RGB", small.size, small.tobytes())


def _fitted(image: Image.Image, room: tuple[int, int], *, enlarge: bool) -> Image.Image:
    scale = min(room[0] / image.width, room[1] / image.height)
    if scale >= 1 and not enlarge:
        return image
    size = [max(1, round(side * scale)) for side in image.size]
    return image.resize((size[0], size[1]), Image.Resampling.LANCZOS, reducing_gap=3.0)


def _opaque(image: Image.Image) -> Image.Image:
    """Return the picture in red, green and blue; what is see-through shows white paper."""
    if image.mode.startswith("I;16"):
        image = image.convert("I").point(lambda value: value * (1 / 256)).convert("L")
    if not image.has_transparency_data:
        return image.convert("RGB")
    layer = image.convert("RGBA")
    paper = Image.new("RGBA", layer.size, (*_WHITE, 255))
    return Image.alpha_composite(paper, layer).convert("RGB")
