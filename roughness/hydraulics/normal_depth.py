"""Normal depth: where the section's conveyance carries the discharge down the slope.

In uniform flow the energy line, the surface and the bed are parallel, and Q = K sqrt(S) with K
the conveyance. K grows with depth in plain open shapes, so there is one normal depth. Over a
level bench of an undivided section the wetted perimeter grows at once and K falls: several
depths may then carry the same discharge, which is a reason to divide the section. A pipe has
two near full flow.
"""

from typing import Any, Final

import numpy as np
from numpy.typing import ArrayLike, NDArray

from roughness.hydraulics.roots import Crossings, Of, bracketed_root, crossings
from roughness.hydraulics.shapes import circle, trapezoid
from roughness.hydraulics.unit_systems import METRIC, UnitSystem

Floats = NDArray[np.float64]

_BLOCK: Final = 8192
_NEWTON_STEPS: Final = 12
_CLOSE: Final = 4e-15
# Share of a pipe's diameter at which it conveys most: (1 - cos(theta/2))/2 with theta the root
# of 3 theta - 5 theta cos theta + 2 sin theta beside 302.4 degrees (derived).
_FULLEST: Final = 0.9381812161606071


def normal_levels(
    conveyance: Of,
    discharge: ArrayLike,
    slope: ArrayLike,
    grid: Floats,
    jumps: NDArray[np.bool_],
) -> Crossings:
    """Return every normal level that the grid tells apart.

    K(level) = Q / sqrt(S), solved between the grid's levels by bracketing.

    Parameters
    ----------
    conveyance : function of levels (levels, ...) and (...)
        K, m3/s (or ft3/s).
    discharge : float or array of shape (...)
        Q, above 0.
    slope : float or array of shape (...)
        S, above 0.
    grid, jumps
        As :func:`roughness.hydraulics.roots.levels_to_try` makes them.

    Returns
    -------
    Crossings
        None in a row whose section carries less at every level of the grid.
    """
    wanted = np.asarray(discharge, dtype=np.float64) / np.sqrt(np.asarray(slope, dtype=np.float64))
    return crossings(conveyance, wanted, grid, jumps)


def normal_depth_of_trapezoid(
    discharge: ArrayLike,
    bottom_width: ArrayLike,
    side_slope: ArrayLike,
    n: ArrayLike,
    slope: ArrayLike,
    units: UnitSystem = METRIC,
) -> Any:
    """Return the one normal depth of a trapezoid, rectangle or triangle.

    A^(5/3) P^(-2/3) = n Q / (Ku sqrt(S)); the left side grows with depth from 0 without end, so
    that exactly one depth solves it. Newton's steps in the logarithm of the depth, where the
    equation is nearly straight; a row that has not come to rest is bracketed instead.

    Parameters
    ----------
    discharge, bottom_width, side_slope, n, slope : float or array
        Q above 0, b and z not both 0, n above 0, slope above 0; m and s (or ft and s).

    Returns
    -------
    float or array
        Depth; NaN where a number lies outside these domains.

    >>> round(normal_depth_of_trapezoid(50, 10, 2, 0.035, 0.002), 5)
    2.08274
    """
    numbers = np.broadcast_arrays(
        *(np.asarray(v, np.float64) for v in (discharge, bottom_width, side_slope, n, slope))
    )
    rows = [np.ascontiguousarray(v).reshape(-1) for v in numbers]
    depth = np.empty(rows[0].shape)
    with np.errstate(all="ignore"):
        for start in range(0, depth.size, _BLOCK):
            q, b, z, rough, s = (row[start : start + _BLOCK] for row in rows)
            depth[start : start + _BLOCK] = _trapezoid_block(
                rough * q / (units.ku * np.sqrt(s)), b, z
            )
    found = depth.reshape(numbers[0].shape)
    return float(found) if found.ndim == 0 else found


def _trapezoid_block(factor: Floats, b: Floats, z: Floats) -> Floats:
    """Return y with A^(5/3) P^(-2/3) = factor, one row each."""
    usable = (factor > 0) & np.isfinite(factor) & (b >= 0) & (z >= 0) & (b + z > 0)
    wanted = np.log(np.where(usable, factor, 1.0))
    sides = 2 * np.sqrt(1 + z * z)
    # Between the wide rectangle and the triangle, whose depths have a closed form.
    wide = np.exp((wanted - np.log(b)) * 0.6)
    steep = np.exp((wanted - (5 * np.log(z) - 2 * np.log(sides)) / 3) * 0.375)
    depth = np.fmin(wide * (1 + wide / (b + z * wide)) ** 0.4, steep)
    step = np.full(depth.shape, np.inf)
    for _ in range(_NEWTON_STEPS):
        side = z * depth
        area, perimeter = (b + side) * depth, b + sides * depth
        miss = (5 * np.log(area) - 2 * np.log(perimeter)) / 3 - wanted
        rise = (5 * (b + 2 * side) / (b + side) - 2 * sides * depth / perimeter) / 3
        step = miss / rise
        depth = depth * np.exp(-step)
        if not (np.abs(step) > _CLOSE).any():
            break
    left = usable & ~(np.abs(step) <= 1e-12)
    depth[left] = _bracketed(factor[left], b[left], z[left])
    return np.where(usable, depth, np.nan)


def _bracketed(factor: Floats, b: Floats, z: Floats) -> Floats:
    def miss(depth: Floats) -> Floats:
        water = trapezoid(depth, b, z)
        return np.asarray(water.area * (water.area / water.perimeter) ** (2 / 3) - factor)

    low, high = np.full(factor.shape, 1e-12), np.full(factor.shape, 1.0)
    for _ in range(300):
        short = miss(high) < 0
        if not short.any():
            break
        high = np.where(short, high * 4, high)
    return bracketed_root(miss, low, high)


def normal_depths_of_circle(
    discharge: ArrayLike,
    diameter: ArrayLike,
    n: ArrayLike,
    slope: ArrayLike,
    units: UnitSystem = METRIC,
) -> Crossings:
    """Return the normal depths in a pipe that lies partly full: one, two, or none.

    Conveyance is greatest at 0.938 D, 7.6 % above that of the full pipe: a discharge between
    the two has two normal depths, a larger one none.

    Parameters
    ----------
    discharge, diameter, n, slope : float or array of shape (...)
        m and s (or ft and s).

    >>> normal_depths_of_circle(0.75, 1.0, 0.013, 0.001).count.item()
    1
    """
    q, d, rough, s = np.broadcast_arrays(
        *(np.asarray(v, np.float64) for v in (discharge, diameter, n, slope))
    )

    def conveyance(depth: Floats) -> Floats:
        water = circle(depth, d)
        return np.asarray(units.ku / rough * water.area * np.asarray(water.radius) ** (2 / 3))

    shares = np.array([0.0, _FULLEST, 1.0]).reshape(-1, *[1] * d.ndim)
    grid = shares * d
    return normal_levels(conveyance, q, s, grid, np.zeros((2, *d.shape), dtype=bool))
