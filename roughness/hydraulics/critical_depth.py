"""Critical depth: where the Froude number is 1 and specific energy has an extreme.

Q^2 T = g A^3, with the velocity head coefficient taken as 1 (derived from the specific energy
y + Q^2 / (2 g A^2)). In plain open shapes there is one. Where the width grows at once, over a
level bench, there may be several; the one of least specific energy is then the control.
"""

from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

from roughness.hydraulics.geometry import Water
from roughness.hydraulics.roots import Crossings, bracketed_root, crossings
from roughness.hydraulics.shapes import circle, trapezoid
from roughness.hydraulics.unit_systems import METRIC, UnitSystem

Floats = NDArray[np.float64]


def section_factor(water: Water) -> Any:
    """Return A sqrt(A/T), which critical flow makes equal to Q / sqrt(g).

    Infinite where there is water but no surface, as in a full pipe; 0 where it is dry.
    """
    area, width = np.broadcast_arrays(
        np.asarray(water.area, np.float64), np.asarray(water.width, np.float64)
    )
    open_to_air = width > 0
    mean = np.divide(area, width, out=np.full(area.shape, np.inf), where=open_to_air)
    wet = area > 0
    found = np.where(wet, area, 0.0) * np.sqrt(np.where(wet, np.maximum(mean, 0.0), 0.0))
    return float(found) if found.ndim == 0 else found


def critical_levels(
    water_at: Any,
    discharge: ArrayLike,
    grid: Floats,
    jumps: NDArray[np.bool_],
    units: UnitSystem = METRIC,
) -> Crossings:
    """Return every critical level that the grid tells apart.

    Parameters
    ----------
    water_at : function of levels (levels, ...) and (...)
        The :class:`Water` of the whole section.
    discharge : float or array of shape (...)
        Q, above 0.
    grid, jumps
        As :func:`roughness.hydraulics.roots.levels_to_try` makes them.
    """
    wanted = np.asarray(discharge, dtype=np.float64) / np.sqrt(units.gravity)
    return crossings(lambda level: np.asarray(section_factor(water_at(level))), wanted, grid, jumps)


def specific_energy(
    depth: ArrayLike, area: ArrayLike, discharge: ArrayLike, units: UnitSystem = METRIC
) -> Any:
    """Return y + Q^2 / (2 g A^2): the head over the deepest point (alpha = 1)."""
    a, q = np.asarray(area, dtype=np.float64), np.asarray(discharge, dtype=np.float64)
    found = np.asarray(depth, dtype=np.float64) + (q / a) ** 2 / (2 * units.gravity)
    return float(found) if found.ndim == 0 else found


def critical_depth_of_trapezoid(
    discharge: ArrayLike,
    bottom_width: ArrayLike,
    side_slope: ArrayLike,
    units: UnitSystem = METRIC,
) -> Any:
    """Return the one critical depth of a trapezoid, rectangle or triangle.

    Q^2 (b + 2 z y) = g ((b + z y) y)^3, bracketed between 0 and the lesser of the depths that
    the rectangle and the triangle inside the section would need.

    Parameters
    ----------
    discharge, bottom_width, side_slope : float or array
        Q above 0, b and z not both 0; m and s (or ft and s).

    Returns
    -------
    float or array
        Depth; NaN where a number lies outside these domains.

    >>> round(critical_depth_of_trapezoid(50, 10, 2), 5)
    1.25093
    """
    q, b, z = np.broadcast_arrays(
        *(np.asarray(v, np.float64) for v in (discharge, bottom_width, side_slope))
    )
    usable = (q > 0) & (b >= 0) & (z >= 0) & (b + z > 0)
    with np.errstate(all="ignore"):
        of_rectangle = (q * q / (units.gravity * b * b)) ** (1 / 3)
        of_triangle = (2 * q * q / (units.gravity * z * z)) ** (1 / 5)
        high = np.fmin(of_rectangle, of_triangle) * (1 + 1e-9)
    wanted = q / np.sqrt(units.gravity)
    found = bracketed_root(
        lambda depth: np.asarray(section_factor(trapezoid(depth, b, z))) - wanted,
        np.zeros(high.shape),
        np.where(usable, high, np.nan),
    )
    return float(found) if found.ndim == 0 else found


def critical_depth_of_circle(
    discharge: ArrayLike, diameter: ArrayLike, units: UnitSystem = METRIC
) -> Any:
    """Return the one critical depth in a pipe: below full, since T goes to 0 there.

    Parameters
    ----------
    discharge, diameter : float or array
        Above 0; m and s (or ft and s).

    >>> round(critical_depth_of_circle(1.0, 1.0), 3)
    0.573
    """
    q, d = np.broadcast_arrays(np.asarray(discharge, np.float64), np.asarray(diameter, np.float64))
    wanted = q / np.sqrt(units.gravity)

    def miss(depth: Floats) -> Floats:
        # 1/Z instead of Z keeps the full pipe finite: 0.
        with np.errstate(all="ignore"):
            return np.asarray(1 / wanted - 1 / np.asarray(section_factor(circle(depth, d))))

    found = bracketed_root(miss, d * 1e-9, d * 1.0)
    return float(found) if found.ndim == 0 else found
