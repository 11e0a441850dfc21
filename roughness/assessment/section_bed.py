"""The bed of a section as arrays, or why it is none: order, crossings, ends, absurd units."""

from dataclasses import dataclass
from typing import Final

import numpy as np
from numpy.typing import NDArray

from roughness.errors import InputError
from roughness.quantities.printing import show_value
from roughness.survey.sections import Section, Trapezoid

Floats = NDArray[np.float64]

FARTHEST_M: Final = 1e6
NARROWEST_M: Final = 1e-3
# Banks of a trapezoid go on upwards; this high there is no river.
_TRAPEZOID_HEIGHT_M: Final = 1000.0
_BLOCK: Final = 512


@dataclass(frozen=True, slots=True)
class Bed:
    """Points from the left end to the right end, heights over the lowest of them."""

    x: Floats
    height: Floats
    datum: float
    """Level of the lowest point, m."""

    @property
    def top(self) -> float:
        """Height of the lower end: above it the water would run out."""
        return float(min(self.height[0], self.height[-1]))

    @property
    def overhangs(self) -> tuple[int, ...]:
        """Numbers (from 1) of the points where the line begins to run backwards."""
        back = np.diff(self.x) < 0
        first = back & ~np.concatenate([[False], back[:-1]])
        return tuple((np.flatnonzero(first) + 1).tolist())


def bed_of(section: Section, where: str) -> Bed:
    """Return the bed of a section.

    Raises
    ------
    InputError
        Both or neither of points and trapezoid; fewer than three points; a point twice; not
        from left to right; a line that crosses itself; ends that hold no water.
    """
    if (section.points is None) == (section.trapezoid is None):
        both = "both points and a trapezoid" if section.points else "neither points nor a trapezoid"
        raise InputError(f"there are {both}", where=where, wanted="one of them is due")
    if section.trapezoid is not None:
        return _bed_of_trapezoid(section.trapezoid, f"{where}: trapezoid")
    place = f"{where}: points"
    points = np.array(section.points, dtype=np.float64).reshape(-1, 2)
    _refuse_few_or_far(points, place)
    x, z = points[:, 0], points[:, 1]
    _refuse_twice(x, z, place)
    _refuse_backwards(x, z, place)
    _refuse_crossings(x, z, place)
    datum = float(z.min())
    bed = Bed(x, z - datum, datum)
    if bed.top <= 0:
        raise InputError(
            "an end of the section is its lowest point, so that it holds no water",
            where=place,
            wanted="survey both banks, from left to right looking downstream",
        )
    return bed


def _bed_of_trapezoid(shape: Trapezoid, place: str) -> Bed:
    b, z = shape.bottom_width_m, shape.side_slope
    if not 0 <= b <= FARTHEST_M:
        raise InputError(
            f"a bottom width of {show_value(b)} m", where=place, wanted="0 or more is due"
        )
    if not 0 <= z <= 1000:
        raise InputError(
            f"a side slope of {show_value(z)}",
            where=place,
            wanted="horizontal for 1 vertical is due, 0 for a rectangle",
        )
    if max(b, z) < NARROWEST_M:
        raise InputError(
            f"bottom width and side slope are both under {show_value(NARROWEST_M)}",
            where=place,
            wanted="one of them is above 0",
        )
    top = _TRAPEZOID_HEIGHT_M
    x = np.array([-z * top, 0.0, b, b + z * top])
    height = np.array([top, 0.0, 0.0, top])
    kept = slice(None) if b > 0 else [0, 1, 3]
    return Bed(x[kept], height[kept], 0.0)


def _refuse_few_or_far(points: Floats, place: str) -> None:
    if len(points) < 3:
        few = "one point is" if len(points) == 1 else f"{len(points)} points are"
        raise InputError(
            f"{few} no section",
            where=place,
            wanted="at least three are due: bank, bed, bank",
        )
    far = np.flatnonzero((np.abs(points) > FARTHEST_M).any(axis=1))
    if far.size:
        i = int(far[0])
        raise InputError(
            f"point {i + 1} lies at {_at(points[i, 0], points[i, 1])}",
            where=place,
            wanted=f"m from the left end and m of height are due, at most {FARTHEST_M:.0f}",
        )


def _refuse_twice(x: Floats, z: Floats, place: str) -> None:
    same = np.flatnonzero((np.diff(x) == 0) & (np.diff(z) == 0))
    if same.size:
        i = int(same[0])
        raise InputError(
            f"the points {i + 1} and {i + 2} are the same, {_at(x[i], z[i])}",
            where=place,
            wanted="leave one out",
        )


def _refuse_backwards(x: Floats, z: Floats, place: str) -> None:
    if x[-1] - x[0] >= NARROWEST_M:
        return
    if (np.diff(x) <= 0).all() and x[-1] < x[0]:
        raise InputError(
            "the points run from right to left",
            where=place,
            wanted="list them from left to right looking downstream",
        )
    raise InputError(
        f"the last point, {_at(x[-1], z[-1])}, does not lie to the right of the first,"
        f" {_at(x[0], z[0])}",
        where=place,
        wanted="sort them from left to right looking downstream",
    )


def _refuse_crossings(x: Floats, z: Floats, place: str) -> None:
    """Refuse a line that crosses or touches itself: its points are not in order."""
    met = _crossing(x, z)
    if met is None:
        return
    i, j = met
    raise InputError(
        f"the points are not in order: the line from point {i + 1} to {i + 2} meets the one from"
        f" point {j + 1} to {j + 2}",
        where=place,
        wanted="list them along the bed, from left to right looking downstream",
    )


def _crossing(x: Floats, z: Floats) -> tuple[int, int] | None:
    """Return the first two lines that meet elsewhere than in the point they share.

    Lines can meet only over a distance that some line runs over backwards or straight up.
    """
    x0, x1 = x[:-1], x[1:]
    low, high = np.minimum(x0, x1), np.maximum(x0, x1)
    turned = np.flatnonzero(x1 <= x0)
    doubtful = np.zeros(len(x0), dtype=bool)
    for i in turned:
        doubtful |= (low <= high[i]) & (high >= low[i])
    which = np.flatnonzero(doubtful)
    for start in range(0, len(which), _BLOCK):
        rows = which[start : start + _BLOCK]
        meets = _meet(x, z, rows[:, None], which[None, :]) & (rows[:, None] < which[None, :])
        if meets.any():
            i, j = np.argwhere(meets)[0]
            return int(rows[i]), int(which[j])
    return None


def _meet(x: Floats, z: Floats, i: NDArray[np.intp], j: NDArray[np.intp]) -> NDArray[np.bool_]:
    """Tell which lines i and j meet; neighbours only where one runs back on the other."""

    def side(a: NDArray[np.intp], b: NDArray[np.intp], c: NDArray[np.intp]) -> Floats:
        return np.asarray(np.sign((x[b] - x[a]) * (z[c] - z[a]) - (z[b] - z[a]) * (x[c] - x[a])))

    def beside(c: NDArray[np.intp], a: NDArray[np.intp]) -> NDArray[np.bool_]:
        """Tell whether point c lies in the box around the line from a."""
        in_x = (np.minimum(x[a], x[a + 1]) <= x[c]) & (x[c] <= np.maximum(x[a], x[a + 1]))
        in_z = (np.minimum(z[a], z[a + 1]) <= z[c]) & (z[c] <= np.maximum(z[a], z[a + 1]))
        return np.asarray(in_x & in_z)

    i, j = np.broadcast_arrays(i, j)
    a0, a1 = side(i, i + 1, j), side(i, i + 1, j + 1)
    b0, b1 = side(j, j + 1, i), side(j, j + 1, i + 1)
    crossing = (a0 * a1 < 0) & (b0 * b1 < 0)
    touching = (
        ((a0 == 0) & beside(j, i))
        | ((a1 == 0) & beside(j + 1, i))
        | ((b0 == 0) & beside(i, j))
        | ((b1 == 0) & beside(i + 1, j))
    )
    # Neighbours share the point j = i + 1; they run back on one another where another end of
    # one lies on the other.
    back = ((a1 == 0) & beside(j + 1, i)) | ((b0 == 0) & beside(i, j))
    return np.asarray(np.where(j == i + 1, back, crossing | touching))


def _at(x: float, z: float) -> str:
    return f"[{show_value(float(x))}, {show_value(float(z))}]"
