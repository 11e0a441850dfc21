"""When a part is two: a shallow plain beside a deep channel, in one part with one n.

One hydraulic radius for both says too little of the channel's velocity. Advice, not a rule
that decides: the person who knows the section divides it.
"""

from dataclasses import dataclass
from typing import Final

import numpy as np
from numpy.typing import ArrayLike, NDArray

DEEP: Final = 2.0
"""Greatest depth over the depth at the bank's edge, from which on a section is divided.

Davidian 1984, USGS TWRI 3-A15 (from memory).
"""
WIDE: Final = 5.0
"""Width of the plain over the depth at the bank's edge. Davidian 1984 (from memory)."""
ABRUPT: Final = 5.0
"""How many times steeper than the plain the bank is, to be told from an even slope.

Common practice, no source.
"""


@dataclass(frozen=True, slots=True)
class Bench:
    """A shallow plain that lies beside deeper water."""

    at: float
    """Distance of the bank's edge from the left end, where the section may be divided."""
    depth: float
    """Depth over the edge."""
    width: float
    """Width of the shallow water beyond the edge."""
    deepest: float
    """Greatest depth of the part."""


def benches(x: ArrayLike, z: ArrayLike, level: float) -> tuple[Bench, ...]:
    """Return the shallow plains at this level, at most one on each side of the deepest point.

    An edge is a point with depth d where the greatest depth is 2 d or more, the water beyond
    is nowhere deeper than d and 5 d wide or more, and the depth grows to 2 d on the side of the
    channel within a fifth of that width.

    Parameters
    ----------
    x, z : array of shape (points,)
        The bed, without overhangs.
    level : float

    Returns
    -------
    tuple of Bench
        The widest one of each side, left first.

    >>> benches([0, 0, 20, 20, 30, 30, 33, 33], [4, 2, 2, 0, 0, 2, 2, 4], 3.0)
    (Bench(at=20.0, depth=1.0, width=20.0, deepest=3.0),)
    """
    across = np.asarray(x, dtype=np.float64)
    depth = level - np.asarray(z, dtype=np.float64)
    low = int(np.argmax(depth))
    left = _widest(-across[low::-1], depth[low::-1])
    right = _widest(across[low:], depth[low:])
    found = [Bench(-left.at, left.depth, left.width, left.deepest)] if left else []
    return (*found, right) if right else tuple(found)


def _widest(x: NDArray[np.float64], depth: NDArray[np.float64]) -> Bench | None:
    """Look outward from the deepest point, which comes first."""
    best: Bench | None = None
    for i in range(1, len(x)):
        d = float(depth[i])
        if d <= 0 or depth[0] < DEEP * d:
            continue
        last, shore = _shore(x, depth, i)
        width, inward = shore - float(x[i]), int(np.flatnonzero(depth[:i] >= DEEP * d)[-1])
        bank = float(x[i]) - _where_at(x, depth, inward, DEEP * d)
        is_plain = depth[i : last + 1].max() <= d and width >= WIDE * d
        if is_plain and bank * ABRUPT <= width and (best is None or width > best.width):
            best = Bench(float(x[i]), d, width, float(depth[0]))
    return best


def _shore(x: NDArray[np.float64], depth: NDArray[np.float64], start: int) -> tuple[int, float]:
    """Return the last wet point of the water over ``start``, going outward, and where it ends."""
    dry = np.flatnonzero(depth[start:] <= 0)
    if dry.size == 0:
        return len(x) - 1, float(x[-1])
    last = start + int(dry[0]) - 1
    return last, _where_at(x, depth, last, 0.0)


def _where_at(x: NDArray[np.float64], depth: NDArray[np.float64], i: int, wanted: float) -> float:
    """Return where the depth falls to ``wanted``, between the points i and i + 1."""
    share = (depth[i] - wanted) / (depth[i] - depth[i + 1])
    return float(x[i] + share * (x[i + 1] - x[i]))
