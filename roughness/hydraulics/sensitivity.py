"""How far depth and velocity follow n at the same discharge and slope, to first order."""

from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from roughness.hydraulics.geometry import Water


def depth_exponent(depth: ArrayLike, water: Water, perimeter_growth: ArrayLike) -> Any:
    """Return e of depth ~ n^e in a section near its normal depth.

    e = 1 / (y ((5/3) T/A - (2/3) P'/P)), from A^(5/3) P^(-2/3) ~ n (derived). A wide channel
    has 0.6, a triangle 0.375.

    Parameters
    ----------
    depth : float or array
        Normal depth y.
    water : Water
        The section at that depth.
    perimeter_growth : float or array
        P' = dP/dy; in a trapezoid 2 sqrt(1 + z^2).

    >>> from roughness.hydraulics.shapes import trapezoid
    >>> water = trapezoid(2.08273579475, 10, 2)
    >>> round(depth_exponent(2.08273579475, water, 2 * 5**0.5), 6)
    0.544881
    """
    widening = 5 / 3 * np.asarray(water.width) / water.area
    lengthening = 2 / 3 * np.asarray(perimeter_growth) / water.perimeter
    found = np.asarray(1 / (np.asarray(depth, dtype=np.float64) * (widening - lengthening)))
    return float(found) if found.ndim == 0 else found


def velocity_exponent(depth: ArrayLike, water: Water, perimeter_growth: ArrayLike) -> Any:
    """Return e of velocity ~ n^e: minus depth times T/A times the exponent of the depth (derived).

    A wide channel has -0.6.
    """
    y = np.asarray(depth, dtype=np.float64)
    of_depth = depth_exponent(y, water, perimeter_growth)
    found = np.asarray(-y * water.width / water.area * of_depth)
    return float(found) if found.ndim == 0 else found
