"""Area, wetted perimeter and width of the water in a section given by points.

The bed is one line from the left end to the right end, looking downstream. It may run
backwards under an overhang, rise to islands, have several low points and vertical walls; it
must not cross itself. Water stands at one level wherever the bed lies below it.

Rows lead: ``x`` and ``z`` have shape (..., points), a level (...), so many sections at one
stage, and one section at many stages, are one call. Sections of fewer points are filled up by
repeating their last one, which adds nothing.
"""

import math
from dataclasses import dataclass
from typing import Any, Final

import numpy as np
from numpy.typing import ArrayLike, NDArray

Floats = NDArray[np.float64]

# Numbers worked on at once: what the processor's cache holds with all that is made from them.
_BLOCK: Final = 1 << 14
_LEAST: Final = float(np.finfo(np.float64).tiny)


@dataclass(frozen=True, slots=True)
class Water:
    """The water in a section or a part of it, arrays of one shape (or floats)."""

    area: Any
    """Flow area, square of the unit of length."""
    perimeter: Any
    """Wetted perimeter: bed and walls alone, neither the surface nor water against water."""
    width: Any
    """Width at the surface, dA/dz."""

    @property
    def radius(self) -> Any:
        """Hydraulic radius A/P; 0 where it is dry."""
        return ratio(self.area, self.perimeter)

    @property
    def mean_depth(self) -> Any:
        """Mean depth A/T; 0 where it is dry."""
        return ratio(self.area, self.width)


@dataclass(frozen=True, slots=True)
class Lines:
    """The straight lines of a bed by their ends, each of shape (..., lines)."""

    x0: Floats
    z0: Floats
    x1: Floats
    z1: Floats

    def rows(self, axes: int, start: int, stop: int) -> "Lines":
        """Return a block of the first of ``axes`` axes, where the lines have that axis."""
        ends = (self.x0, self.z0, self.x1, self.z1)
        return Lines(*(_rows(end, axes, start, stop) for end in ends))


def ratio(above: ArrayLike, below: ArrayLike) -> Any:
    """Return above/below, and 0 where below is not above 0."""
    top, bottom = np.broadcast_arrays(np.asarray(above, float), np.asarray(below, float))
    found = np.divide(top, bottom, out=np.zeros(bottom.shape), where=bottom > 0)
    return float(found) if found.ndim == 0 else found


def lines_between(x: ArrayLike, z: ArrayLike) -> Lines:
    """Return the lines from each point to the next, (..., points - 1)."""
    across, height = np.asarray(x, dtype=np.float64), np.asarray(z, dtype=np.float64)
    return Lines(across[..., :-1], height[..., :-1], across[..., 1:], height[..., 1:])


def water_over(lines: Lines, level: ArrayLike) -> Water:
    """Return area, wetted perimeter and width of the water over the lines of a bed.

    A line is wet in the share (h0 + h1) / (|d0| + |d1|) of its length, where d is the level
    minus the bed at an end and h is d where positive, else 0: all of it, none, or the part
    below the waterline. Over that share stands the mean depth (h0 + h1)/2. Lines that run
    backwards count negative in area and width, which is what an overhang takes away (derived).

    Parameters
    ----------
    lines : Lines
        Arrays of shape (..., lines).
    level : float or array of shape (...)
        Water level, in the unit and datum of z.

    Returns
    -------
    Water
        Arrays of shape (...), or floats. A level line at the water level is dry.

    >>> water_over(lines_between([0, 0, 4, 4], [2, 0, 0, 2]), 1.5)
    Water(area=6.0, perimeter=7.0, width=4.0)
    """
    surface = np.asarray(level, dtype=np.float64)[..., None]
    shape = np.broadcast_shapes(surface.shape, lines.x0.shape)
    if len(shape) < 2:
        return _summed(lines, surface)
    step = max(1, _BLOCK * shape[0] // max(1, math.prod(shape)))
    blocks = [
        _summed(lines.rows(len(shape), i, i + step), _rows(surface, len(shape), i, i + step))
        for i in range(0, max(1, shape[0]), step)
    ]
    if len(blocks) == 1:
        return blocks[0]
    columns = ([getattr(b, name) for b in blocks] for name in ("area", "perimeter", "width"))
    return Water(*(np.concatenate(column) for column in columns))


def _summed(lines: Lines, surface: Floats) -> Water:
    each = _over_each(lines, surface)
    return Water(_sum(each.area), _sum(each.perimeter), _sum(each.width))


def water_over_each(lines: Lines, level: ArrayLike) -> Water:
    """Return area, wetted perimeter and width over each line by itself, (..., lines).

    As :func:`water_over`; what stands over a line that runs backwards is negative.
    """
    return _over_each(lines, np.asarray(level, dtype=np.float64)[..., None])


def _over_each(lines: Lines, surface: Floats) -> Water:
    d0, d1 = surface - lines.z0, surface - lines.z1
    depths = np.maximum(d0, 0) + np.maximum(d1, 0)
    reach = np.abs(d0) + np.abs(d1)
    # A level line at the waterline has neither depth nor reach: 0 / least is dry.
    wet = depths / np.maximum(reach, _LEAST)
    run, rise = lines.x1 - lines.x0, lines.z1 - lines.z0
    width = run * wet
    return Water(width * depths * 0.5, np.sqrt(run * run + rise * rise) * wet, width)


def _rows(values: Floats, axes: int, start: int, stop: int) -> Floats:
    """Return a block of the first of ``axes`` axes, where the array has that axis."""
    return values if values.ndim < axes or values.shape[0] == 1 else values[start:stop]


def water_below(x: ArrayLike, z: ArrayLike, level: ArrayLike) -> Water:
    """Return area, wetted perimeter and width of a section from its points.

    Parameters
    ----------
    x, z : array of shape (..., points)
        Distance from the left end and height of each point.
    level : float or array of shape (...)
        Water level; nothing is assumed beyond the ends, see :func:`lower_end`.
    """
    return water_over(lines_between(x, z), level)


def within(lines: Lines, left: ArrayLike, right: ArrayLike) -> Lines:
    """Return the lines cut off at lateral limits, for a part of the section.

    A wall that stands on a limit belongs to the part on whose side its water is. Limits cut
    the water by vertical lines, which are not wetted perimeter.

    Parameters
    ----------
    lines : Lines
        Arrays of shape (..., lines).
    left, right : float or array of shape (...)
        Distances of the limits; an axis of parts may be added to both, if it is added to the
        lines too.

    Returns
    -------
    Lines
        Of the same shape; what lies outside has no length.
    """
    start = np.asarray(left, dtype=np.float64)[..., None]
    end = np.asarray(right, dtype=np.float64)[..., None]
    x0, x1 = np.clip(lines.x0, start, end), np.clip(lines.x1, start, end)
    z0, z1 = _height_at(lines, x0, x0 != x1), _height_at(lines, x1, x0 != x1)
    wall = _walls_inside(lines, start, end)
    flat = np.where(wall, lines.z0, z0)
    return Lines(x0, flat, x1, np.where(wall, lines.z1, np.where(x0 != x1, z1, flat)))


def _height_at(lines: Lines, x: Floats, cut: NDArray[np.bool_]) -> Floats:
    """Return the bed's height at a distance on each line, where the line is cut there."""
    run = np.where(cut, lines.x1 - lines.x0, 1.0)
    along = np.where(cut, x - lines.x0, 0.0)
    height = lines.z0 + along / run * (lines.z1 - lines.z0)
    return np.where(cut & (x == lines.x1), lines.z1, height)


def _walls_inside(lines: Lines, start: Floats, end: Floats) -> NDArray[np.bool_]:
    """Tell which vertical lines stand in the part: going down, their water is to the right."""
    wall, down = lines.x0 == lines.x1, lines.z1 < lines.z0
    after = np.where(down, lines.x0 >= start, lines.x0 > start)
    before = np.where(down, lines.x0 < end, lines.x0 <= end)
    found: NDArray[np.bool_] = wall & after & before
    return found


def lower_end(z: ArrayLike) -> Any:
    """Return the height of the lower end of each section, (...): water above it runs out."""
    height = np.asarray(z, dtype=np.float64)
    return np.minimum(height[..., 0], height[..., -1])


def separate_waters(z: ArrayLike, level: float) -> int:
    """Return how many waters stand beside each other at this level in one section.

    More than one where an island parts the water, or where the level stands in a hollow that
    the main water need not reach.

    >>> separate_waters([3, 0, 2, 0, 3], 1.0)
    2
    """
    depth = level - np.asarray(z, dtype=np.float64)
    wet = depth > 0
    return int(np.count_nonzero(wet[1:] & ~wet[:-1]) + bool(wet[0]))


def _sum(values: Floats) -> Any:
    total = values.sum(axis=-1)
    return float(total) if total.ndim == 0 else total
