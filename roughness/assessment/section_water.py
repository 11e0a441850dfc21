"""The water over a bed that is divided into stretches and parts, at one level or many."""

from typing import Final

import numpy as np
from numpy.typing import NDArray

from roughness.assessment.section_bed import Bed
from roughness.assessment.section_parts import Laid
from roughness.hydraulics.conveyance import conveyance
from roughness.hydraulics.geometry import (
    Lines,
    Water,
    lines_between,
    ratio,
    water_over_each,
    within,
)
from roughness.hydraulics.roots import levels_to_try

Floats = NDArray[np.float64]

# As many numbers at once as the processor's cache holds.
_BLOCK: Final = 1 << 18
_MOST_STEPS: Final = 8
_MOST_LEVELS: Final = 800


class DividedWater:
    """Area, perimeter and width of each stretch, and what the parts convey.

    Levels are heights over the lowest point, m. Stretches are on the last axis, then parts.
    """

    def __init__(self, bed: Bed, laid: Laid) -> None:
        stretches = [s for part in laid.parts for s in part.stretches]
        self._lines, self._starts = _cut(bed, [(s.left, s.right) for s in stretches])
        counts = [len(part.stretches) for part in laid.parts]
        self._firsts = np.concatenate([[0], np.cumsum(counts)[:-1]])
        self._single = np.array(counts) == 1
        self.n: dict[str, Floats] = {
            case: np.array([getattr(s.n, case) for s in stretches])
            for case in ("low", "best", "high")
        }
        steps = min(_MOST_STEPS, max(1, _MOST_LEVELS // len(bed.height)))
        self.grid, self.jumps = levels_to_try(bed.height, np.asarray(bed.top), steps)
        self._on_grid = self._stretches_at(self.grid)

    def stretches(self, level: Floats) -> Water:
        """Return the water over each stretch, (..., stretches)."""
        return self._on_grid if level is self.grid else self._stretches_at(level)

    def parts(self, level: Floats) -> Water:
        """Return the water in each part, (..., parts)."""
        water = self.stretches(level)
        return Water(*(self._by_part(v) for v in (water.area, water.perimeter, water.width)))

    def whole(self, level: Floats) -> Water:
        """Return the water of the whole section, (...)."""
        water = self.parts(level)
        return Water(*(v.sum(axis=-1) for v in (water.area, water.perimeter, water.width)))

    def part_n(self, level: Floats, case: str) -> Floats:
        """Return n of each part by equal velocity (Horton/Einstein), (..., parts); 0 where dry."""
        perimeter = np.asarray(self.stretches(level).perimeter)
        whole, n = self._by_part(perimeter), self.n[case]
        composite = np.asarray(ratio(self._by_part(perimeter * n**1.5), whole)) ** (2 / 3)
        # A part of one n has that n to the last digit.
        return np.where(self._single & (whole > 0), n[self._firsts], composite)

    def conveyances(self, level: Floats, case: str) -> Floats:
        """Return the conveyance of each part, m3/s, (..., parts)."""
        water, n = self.parts(level), self.part_n(level, case)
        return np.asarray(conveyance(np.where(n > 0, n, 1.0), water.area, water.perimeter))

    def of_part(self, part: int) -> slice:
        """Return where the stretches of a part stand on the last axis."""
        ends = [*self._firsts[1:], len(self.n["best"])]
        return slice(int(self._firsts[part]), int(ends[part]))

    def _by_part(self, values: Floats) -> Floats:
        return np.asarray(np.add.reduceat(values, self._firsts, axis=-1))

    def _stretches_at(self, level: Floats) -> Water:
        levels = np.asarray(level, dtype=np.float64)
        flat = levels.reshape(-1)
        size = max(1, _BLOCK // self._lines.x0.size)
        blocks = [self._block(flat[i : i + size]) for i in range(0, max(1, flat.size), size)]
        shape = (*levels.shape, len(self._starts))
        columns = zip(*blocks, strict=True)
        return Water(*(np.concatenate(column).reshape(shape) for column in columns))

    def _block(self, levels: Floats) -> tuple[Floats, Floats, Floats]:
        each = water_over_each(self._lines, levels)
        area, perimeter, width = (
            np.add.reduceat(v, self._starts, axis=-1)
            for v in (each.area, each.perimeter, each.width)
        )
        return area, perimeter, width


def _cut(bed: Bed, limits: list[tuple[float, float]]) -> tuple[Lines, NDArray[np.intp]]:
    """Return the lines of all stretches one after another, and where each stretch begins."""
    lines = lines_between(bed.x, bed.height)
    walls = [left for left, right in limits if left == right]
    cut = [
        _standing(lines, [left], True)
        if left == right
        else _standing(within(lines, left, right), walls, False)
        for left, right in limits
    ]
    kept = [_kept(piece) for piece in cut]
    columns = (
        np.concatenate([getattr(p, name)[keep] for p, keep in zip(cut, kept, strict=True)])
        for name in ("x0", "z0", "x1", "z1")
    )
    sizes = [int(keep.sum()) for keep in kept]
    return Lines(*columns), np.concatenate([[0], np.cumsum(sizes)[:-1]]).astype(np.intp)


def _standing(lines: Lines, at: list[float], kept: bool) -> Lines:
    """Return the lines with the walls at these distances alone (or without them)."""
    wall = (lines.x0 == lines.x1) & np.isin(lines.x0, at)
    return Lines(
        lines.x0,
        lines.z0,
        *(
            np.where(wall == kept, end, start)
            for start, end in ((lines.x0, lines.x1), (lines.z0, lines.z1))
        ),
    )


def _kept(lines: Lines) -> NDArray[np.bool_]:
    # A stretch without a line still needs a place: one line without length, never wet.
    has_length = (lines.x0 != lines.x1) | (lines.z0 != lines.z1)
    if not has_length.any():
        has_length[0] = True
    return np.asarray(has_length)
