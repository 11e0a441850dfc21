"""The numbers that tell what kind of flow it is: Froude, Reynolds, fully rough."""

from typing import Any, Final

import numpy as np
from numpy.typing import ArrayLike, NDArray

from roughness.hydraulics.unit_systems import FOOT_M, METRIC, UnitSystem

VISCOSITY: Final = 1.1386e-6
"""Kinematic viscosity of water at 15 degrees C, m2/s (from memory)."""
ROUGH_LIMIT: Final = 1.9e-13
"""n^6 sqrt(R S), R in ft, from which on flow is fully rough: Henderson 1966 (from memory)."""


def _array(values: ArrayLike) -> NDArray[np.float64]:
    return np.asarray(values, dtype=np.float64)


def _plain(values: Any) -> Any:
    return values.item() if values.ndim == 0 else values


def froude(
    velocity: ArrayLike,
    area: ArrayLike,
    top_width: ArrayLike,
    units: UnitSystem = METRIC,
    *,
    alpha: ArrayLike = 1.0,
) -> Any:
    """Return the Froude number of the whole section.

    Fr = V sqrt(alpha) / sqrt(g A/T): with the mean depth A/T, neither the hydraulic radius nor
    the greatest depth (from memory). Below 1 the flow is subcritical.

    Parameters
    ----------
    velocity, area, top_width : float or array
        Mean velocity V, flow area A, width T at the surface, in m (or ft) and s.
    alpha : float or array
        Velocity head coefficient; 1 unless said.

    >>> round(froude(1.69474665688, 29.5027, 18.33094), 4)
    0.4266
    """
    mean_depth = _array(area) / _array(top_width)
    return _plain(_array(velocity) * np.sqrt(_array(alpha) / (units.gravity * mean_depth)))


def reynolds(velocity: ArrayLike, radius: ArrayLike, viscosity: float = VISCOSITY) -> Any:
    """Return the Reynolds number with the hydraulic radius: Re = V R / nu.

    Some books take 4 R, which makes it four times as large (from memory). All in m and s, or
    all in ft and s with the viscosity in ft2/s. Open channels at 1 m/s and 1 m have about 10^6.

    >>> round(reynolds(1.0, 1.0) / 1e6, 2)
    0.88
    """
    return _plain(_array(velocity) * _array(radius) / viscosity)


def rough_number(
    n: ArrayLike, radius: ArrayLike, slope: ArrayLike, units: UnitSystem = METRIC
) -> Any:
    """Return n^6 sqrt(R S) with R in feet, whatever units R comes in.

    Henderson 1966 (from memory). The limit usually printed for metres is rounded by 5 %, so
    one limit in feet serves both.

    >>> f"{rough_number(0.035, 1.2, 0.002):.4e}"
    '1.6312e-10'
    """
    feet = _array(radius) / units.metre / FOOT_M
    return _plain(_array(n) ** 6 * np.sqrt(feet * _array(slope)))


def is_fully_rough(
    n: ArrayLike, radius: ArrayLike, slope: ArrayLike, units: UnitSystem = METRIC
) -> Any:
    """Tell whether n depends on the wall alone, as Manning's equation takes it to.

    n^6 sqrt(R S) >= 1.9e-13, R in ft; the limit corresponds to a roughness Reynolds number of
    100 with n = 0.031 ks^(1/6), ks in ft (derived).
    """
    return _plain(np.asarray(rough_number(n, radius, slope, units)) >= ROUGH_LIMIT)


def roughness_reynolds(
    ks: ArrayLike,
    radius: ArrayLike,
    slope: ArrayLike,
    units: UnitSystem = METRIC,
    viscosity: float = VISCOSITY,
) -> Any:
    """Return Re* = sqrt(g R S) ks / nu; walls are fully rough above 70 (Nikuradse, memory).

    One textbook prints 60 (seen second hand).

    >>> round(roughness_reynolds(0.15, 1.2, 0.002))
    20211
    """
    shear_velocity = np.sqrt(units.gravity * _array(radius) * _array(slope))
    return _plain(shear_velocity * _array(ks) / viscosity)
