"""Where a function of depth crosses a value: bracketed, so that it always converges.

Rows lead and are solved at once; a row is done when no number lies between its brackets that
could be told apart.
"""

from collections.abc import Callable
from dataclasses import dataclass
from typing import Final

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]
Of = Callable[[Floats], Floats]

_MOST_STEPS: Final = 200
_NARROW: Final = 4 * np.finfo(np.float64).eps


def bracketed_root(of: Of, low: Floats, high: Floats) -> Floats:
    """Return where a continuous function crosses 0 between two values.

    Inverse quadratic steps where they are safe, halving else (Chandrupatla 1997, Adv. Eng.
    Software 28; from memory), so the bracket holds the root at every step.

    Parameters
    ----------
    of : function of an array of shape (...)
        Keeps the shape.
    low, high : array of shape (...)
        Of opposite sign, or one of them 0.

    Returns
    -------
    array of shape (...)
        NaN where the signs do not differ.
    """
    with np.errstate(all="ignore"):
        return _chandrupatla(of, np.array(low, dtype=np.float64), np.array(high, dtype=np.float64))


def _chandrupatla(of: Of, b: Floats, a: Floats) -> Floats:
    fa, fb = of(a), of(b)
    bad = ~(np.sign(fa) * np.sign(fb) <= 0)
    c, fc = a, fa
    t = np.full(a.shape, 0.5)
    best = np.where(np.abs(fa) < np.abs(fb), a, b)
    done = bad | (fa == 0) | (fb == 0)
    for _ in range(_MOST_STEPS):
        if done.all():
            break
        x = a + t * (b - a)
        fx = of(x)
        same = np.sign(fx) == np.sign(fa)
        c, fc = np.where(same, a, b), np.where(same, fa, fb)
        b, fb = np.where(same, b, a), np.where(same, fb, fa)
        a, fa = x, fx
        nearer = np.where(np.abs(fa) < np.abs(fb), a, b)
        best = np.where(done, best, nearer)
        narrow = _NARROW * np.abs(nearer) / np.abs(b - a)
        done |= (fx == 0) | (narrow >= 0.5) | (a == b)
        t = np.clip(
            _step(a, fa, b, fb, c, fc), np.minimum(narrow, 0.5), 1 - np.minimum(narrow, 0.5)
        )
    return np.where(bad, np.nan, best)


def _step(a: Floats, fa: Floats, b: Floats, fb: Floats, c: Floats, fc: Floats) -> Floats:
    """Return the next point between a (0) and b (1)."""
    xi, phi = (a - b) / (c - b), (fa - fb) / (fc - fb)
    safe = (phi * phi < xi) & ((1 - phi) ** 2 < 1 - xi)
    quadratic = fa / (fb - fa) * fc / (fb - fc) + (c - a) / (b - a) * fa / (fc - fa) * fb / (
        fc - fb
    )
    return np.where(safe & np.isfinite(quadratic), quadratic, 0.5)


@dataclass(frozen=True, slots=True)
class Crossings:
    """Where a function takes a value, row by row."""

    at: Floats
    """Shape (most, ...): ascending, then NaN."""

    @property
    def count(self) -> NDArray[np.intp]:
        """How many there are in each row; 0 where the value is not met."""
        return np.asarray(np.isfinite(self.at).sum(axis=0))

    @property
    def lowest(self) -> Floats:
        """The lowest one of each row, NaN where there is none."""
        return np.asarray(self.at[0])

    @property
    def highest(self) -> Floats:
        """The highest one of each row, NaN where there is none."""
        last = np.maximum(self.count - 1, 0)
        return np.asarray(np.take_along_axis(self.at, last[None], axis=0)[0])


def crossings(of: Of, target: Floats, grid: Floats, jumps: NDArray[np.bool_]) -> Crossings:
    """Return everywhere that a function of level takes a value, as far as the grid tells.

    Parameters
    ----------
    of : function of an array of levels of shape (levels, ...)
        Also of shape (...).
    target : array of shape (...)
        The value wanted.
    grid : array of shape (levels, ...)
        Ascending levels. Two crossings between neighbours are not seen.
    jumps : array of shape (levels - 1, ...)
        Where the function may jump between neighbours: the water just covers a level bench. A
        jump down over the value is no crossing; a jump up is, for no lower level reaches it.

    Returns
    -------
    Crossings
    """
    over = of(grid) - target
    up, down = (over[:-1] < 0) & (over[1:] >= 0), (over[:-1] >= 0) & (over[1:] < 0)
    met = up | (down & ~jumps)
    most = max(1, int(np.count_nonzero(met, axis=0).max(initial=0)))
    order = np.argsort(~met, axis=0, kind="stable")[:most]
    found = np.take_along_axis(met, order, axis=0)
    low = np.take_along_axis(grid[:-1], order, axis=0)
    high = np.take_along_axis(grid[1:], order, axis=0)
    root = bracketed_root(lambda level: of(level) - target, low, high)
    return Crossings(np.where(found, root, np.nan))


def levels_to_try(heights: Floats, top: Floats, steps: int = 8) -> tuple[Floats, NDArray[np.bool_]]:
    """Return levels between and beside the heights of a section's points.

    Parameters
    ----------
    heights : array of shape (..., points)
        Heights of the points over the lowest one.
    top : array of shape (...)
        The highest level that the section holds.
    steps : int
        Levels tried between neighbouring heights.

    Returns
    -------
    tuple of arrays
        Levels (levels, ...), ascending, and where the function may jump between two of them
        (levels - 1, ...): just over each height.
    """
    sorted_heights = np.sort(np.minimum(heights, top[..., None]), axis=-1)
    stops = np.concatenate([sorted_heights, top[..., None]], axis=-1)
    gaps = np.diff(stops, axis=-1)[..., None]
    # Just over a height by as little as arithmetic with the section's size still carries.
    just = np.minimum(gaps, top[..., None, None] * 1e-12)
    share = np.arange(steps) / steps
    between = stops[..., :-1, None] + just + (gaps - just) * share
    levels = np.concatenate([stops[..., :-1, None], between], axis=-1)
    grid = np.concatenate([levels.reshape(*levels.shape[:-2], -1), top[..., None]], axis=-1)
    jumps = np.zeros(grid.shape[-1] - 1, dtype=bool)
    jumps[:: steps + 1] = True
    grid = np.moveaxis(grid, -1, 0)
    return grid, np.broadcast_to(
        jumps.reshape(-1, *[1] * (grid.ndim - 1)), (len(jumps), *grid.shape[1:])
    )
