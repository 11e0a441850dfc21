"""Channel and flood plains together: conveyances add, velocities differ.

The section is divided by vertical lines where the depth changes abruptly; each part has its
own n, area and wetted perimeter (without the water-to-water lines) and carries its share of
the flow at the common slope. Momentum that is exchanged over those lines is left out.
Parts are on the last axis.
"""

from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

from roughness.hydraulics.geometry import ratio
from roughness.hydraulics.unit_systems import METRIC, UnitSystem

Floats = NDArray[np.float64]


def _array(values: ArrayLike) -> Floats:
    return np.asarray(values, dtype=np.float64)


def _plain(values: Any) -> Any:
    found = np.asarray(values)
    return float(found) if found.ndim == 0 else found


def conveyance(
    n: ArrayLike, area: ArrayLike, perimeter: ArrayLike, units: UnitSystem = METRIC
) -> Any:
    """Return the conveyance of each part, K = (Ku/n) A R^(2/3), so that Q = K sqrt(S).

    From memory; derived from Manning's equation.

    Parameters
    ----------
    n, area, perimeter : float or array of shape (...)
        Of each part, m (or ft); a dry part conveys 0.

    Returns
    -------
    float or array of shape (...)
        m3/s (or ft3/s).

    >>> round(conveyance(0.03, 30, 14), 2)
    1662.12
    """
    radius = np.asarray(ratio(area, perimeter))
    return _plain(units.ku * _array(area) * radius ** (2 / 3) / _array(n))


def velocity_head_coefficient(conveyances: ArrayLike, area: ArrayLike) -> Any:
    """Return alpha (Coriolis): kinetic energy against that of one mean velocity.

    alpha = sum(K^3/A^2) / (K^3/A^2), from sum(V^3 A)/(V^3 A) with V = K sqrt(S)/A (derived).
    Within a part the velocity is taken as one. 1.03 to 1.36 in straight prismatic channels,
    above 2 in very irregular sections (a public teaching text on velocity coefficients, seen).

    Parameters
    ----------
    conveyances, area : array of shape (..., parts)
        A part without area counts nothing.

    Returns
    -------
    float or array of shape (...)
        1 or more; NaN where no part conveys.

    >>> round(velocity_head_coefficient([241.999, 1662.119, 322.666], [20, 30, 20]), 4)
    2.3171
    """
    return _coefficient(conveyances, area, 3)


def momentum_coefficient(conveyances: ArrayLike, area: ArrayLike) -> Any:
    """Return beta (Boussinesq): momentum against that of one mean velocity.

    beta = sum(K^2/A) / (K^2/A) (derived); as :func:`velocity_head_coefficient`, and nearer 1.

    >>> round(momentum_coefficient([241.999, 1662.119, 322.666], [20, 30, 20]), 4)
    1.4148
    """
    return _coefficient(conveyances, area, 2)


def _coefficient(conveyances: ArrayLike, area: ArrayLike, power: int) -> Any:
    k, a = np.broadcast_arrays(_array(conveyances), _array(area))
    with np.errstate(invalid="ignore", divide="ignore"):
        # Shares of the whole, so that a nearly dry section keeps its digits.
        of_flow = k / k.sum(axis=-1, keepdims=True)
        of_area = a / a.sum(axis=-1, keepdims=True)
        speed = np.divide(of_flow, of_area, out=np.zeros(k.shape), where=of_area > 0)
        found = (of_area * speed**power).sum(axis=-1)
        return _plain(np.where(k.sum(axis=-1) > 0, found, np.nan))


def equivalent_n(
    conveyances: ArrayLike, area: ArrayLike, perimeter: ArrayLike, units: UnitSystem = METRIC
) -> Any:
    """Return the n that the whole section would need to convey as much: for display alone.

    n = Ku A R^(2/3) / K with the sums over the parts: Lotter's relation (derived). It may lie
    below the n of every part, because the whole is given a hydraulic radius that no part has;
    that is an effect of dividing and is shown as it is.

    Parameters
    ----------
    conveyances, area, perimeter : array of shape (..., parts)

    >>> round(equivalent_n([241.999, 1662.119, 322.666], [20, 30, 20], [21, 14, 21]), 5)
    0.03648
    """
    a, p = _array(area).sum(axis=-1), _array(perimeter).sum(axis=-1)
    whole = units.ku * a * np.asarray(ratio(a, p)) ** (2 / 3)
    carried = _array(conveyances).sum(axis=-1)
    return _plain(
        np.divide(whole, carried, out=np.full(np.shape(carried), np.nan), where=carried > 0)
    )
