"""Uniform flow by Manning, Chezy, Strickler and Darcy-Weisbach, and how they turn into another.

All take floats and arrays alike. R is the hydraulic radius A/P, S the slope of the energy
line (in uniform flow also of bed and water). The equations hold for fully rough flow, see
:mod:`roughness.hydraulics.flow_numbers`. n is the same number in metres and in feet.
"""

from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

from roughness.hydraulics.unit_systems import METRIC, UnitSystem


def _array(values: ArrayLike) -> NDArray[np.float64]:
    return np.asarray(values, dtype=np.float64)


def _plain(values: NDArray[np.float64]) -> Any:
    return float(values) if values.ndim == 0 else values


def manning_velocity(
    n: ArrayLike, radius: ArrayLike, slope: ArrayLike, units: UnitSystem = METRIC
) -> Any:
    """Return mean velocity by Manning's equation.

    V = (Ku/n) R^(2/3) S^(1/2). Manning 1891; in this form in Yen 2002, eq. 2 (seen in its
    abstract).

    Parameters
    ----------
    n : float or array
        Manning's n, s/m^(1/3), above 0.
    radius : float or array
        Hydraulic radius, m (or ft with ``units=US``).
    slope : float or array
        Slope of the energy line, m/m, 0 or more.

    Returns
    -------
    float or array
        m/s (or ft/s).

    >>> round(manning_velocity(0.035, 1.2, 0.002), 5)
    1.44289
    """
    return _plain(units.ku / _array(n) * _array(radius) ** (2 / 3) * np.sqrt(_array(slope)))


def n_from_velocity(
    velocity: ArrayLike, radius: ArrayLike, slope: ArrayLike, units: UnitSystem = METRIC
) -> Any:
    """Return n of a uniform reach from its mean velocity: Manning's equation solved for n.

    n = Ku R^(2/3) S^(1/2) / V (derived). Units as in :func:`manning_velocity`.
    """
    return _plain(units.ku / _array(velocity) * _array(radius) ** (2 / 3) * np.sqrt(_array(slope)))


def chezy_velocity(chezy: ArrayLike, radius: ArrayLike, slope: ArrayLike) -> Any:
    """Return mean velocity by Chezy's equation.

    V = C sqrt(R S), with C, R and V all in metres or all in feet (from memory).
    """
    return _plain(_array(chezy) * np.sqrt(_array(radius) * _array(slope)))


def chezy_from_n(n: ArrayLike, radius: ArrayLike, units: UnitSystem = METRIC) -> Any:
    """Return Chezy's C, m^(1/2)/s (or ft^(1/2)/s), that gives the same velocity as n.

    C = Ku R^(1/6) / n (derived). C in feet is C in metres over sqrt(0.3048).

    >>> round(chezy_from_n(0.035, 1.2), 4)
    29.453
    """
    return _plain(units.ku * _array(radius) ** (1 / 6) / _array(n))


def n_from_chezy(chezy: ArrayLike, radius: ArrayLike, units: UnitSystem = METRIC) -> Any:
    """Return the n that gives the same velocity as Chezy's C at this hydraulic radius.

    n = Ku R^(1/6) / C (derived); the relation is its own inverse.
    """
    return chezy_from_n(chezy, radius, units)


def friction_factor_from_n(n: ArrayLike, radius: ArrayLike, units: UnitSystem = METRIC) -> Any:
    """Return the Darcy-Weisbach friction factor f, without unit, that n amounts to.

    f = 8 g / C^2 = 8 g n^2 / (Ku^2 R^(1/3)). Derived; the constants 0.113 (metres) and 0.0927
    (feet) of its inverse are those of FHWA HDS-6, eq. 3.22 (seen).

    >>> round(friction_factor_from_n(0.035, 1.2), 7)
    0.0904384
    """
    return _plain(8 * units.gravity * (_array(n) / units.ku) ** 2 / _array(radius) ** (1 / 3))


def n_from_friction_factor(
    friction_factor: ArrayLike, radius: ArrayLike, units: UnitSystem = METRIC
) -> Any:
    """Return the n that a Darcy-Weisbach friction factor amounts to at this hydraulic radius.

    n = Ku R^(1/6) sqrt(f / (8 g)) (derived).

    >>> round(n_from_friction_factor(0.0904384275317, 1.2), 6)
    0.035
    """
    resistance = np.sqrt(_array(friction_factor) / (8 * units.gravity))
    return _plain(units.ku * _array(radius) ** (1 / 6) * resistance)


def darcy_velocity(
    friction_factor: ArrayLike, radius: ArrayLike, slope: ArrayLike, units: UnitSystem = METRIC
) -> Any:
    """Return mean velocity by Darcy-Weisbach with the hydraulic radius.

    V = sqrt(8 g R S / f); the diameter of the pipe equation is 4 R (from memory).
    """
    square = 8 * units.gravity * _array(radius) * _array(slope) / _array(friction_factor)
    return _plain(np.sqrt(square))


def strickler_from_n(n: ArrayLike) -> Any:
    """Return Strickler's K = 1/n, m^(1/3)/s; used with metres alone (from memory).

    >>> round(strickler_from_n(0.035), 4)
    28.5714
    """
    return _plain(1 / _array(n))


def n_from_strickler(strickler: ArrayLike) -> Any:
    """Return n = 1/K of Strickler's K, m^(1/3)/s (from memory)."""
    return strickler_from_n(strickler)


def strickler_velocity(strickler: ArrayLike, radius: ArrayLike, slope: ArrayLike) -> Any:
    """Return mean velocity, m/s, by V = K R^(2/3) S^(1/2) with R in m (from memory)."""
    return manning_velocity(n_from_strickler(strickler), radius, slope)
