"""n of grass linings by retardance class: grass that bends lies flatter the faster the flow."""

from typing import Any, Final, Literal, get_args

import numpy as np
from numpy.typing import ArrayLike, NDArray

from roughness.hydraulics.unit_systems import FOOT_M as _FOOT

Retardance = Literal["A", "B", "C", "D", "E"]
RETARDANCES: Final[tuple[Retardance, ...]] = get_args(Retardance)

CURVE_INDEX: Final[dict[Retardance, float]] = {
    "A": 10.0,
    "B": 7.64,
    "C": 5.60,
    "D": 4.44,
    "E": 2.88,
}
"""Temple's index of each class, from memory. A is tall dense grass (weeping lovegrass, 30 in
high, seen), E short sparse grass (Bermuda grass, 1.5 in high, seen)."""
KOUWEN: Final[dict[Retardance, float]] = {"A": 15.8, "B": 23.0, "C": 30.2, "D": 34.6, "E": 37.7}
_FLATTEST: Final = 36.0
"""Largest velocity times radius of the relation, ft2/s."""


def _array(values: ArrayLike) -> NDArray[np.float64]:
    return np.asarray(values, dtype=np.float64)


def _plain(values: NDArray[np.float64]) -> Any:
    return float(values) if values.ndim == 0 else values


def curve_index(height_m: ArrayLike, stems_per_m2: ArrayLike) -> Any:
    """Return Temple's retardance curve index from the height and number of stems.

    CI = 2.5 (h sqrt(M))^(1/3); h sqrt(M) has no unit. Temple and others 1987, USDA AH 667,
    from memory.

    >>> round(curve_index(0.67 * 0.3048, 400 / 0.3048**2), 5)
    5.93802
    """
    return _plain(2.5 * np.cbrt(_array(height_m) * np.sqrt(_array(stems_per_m2))))


def lowest_vr(index: ArrayLike) -> Any:
    """Return the smallest velocity times radius of the relation, m2/s: 0.0025 CI^2.5 ft2/s.

    Below it n stays what it is there. Source and mark as :func:`n_of_grass`.
    """
    return _plain(0.0025 * _array(index) ** 2.5 * _FOOT**2)


def n_of_grass(index: ArrayLike, vr_m2s: ArrayLike) -> Any:
    """Return n of grass from its curve index and velocity times hydraulic radius.

    n = exp{CI [0.0133 (ln VR)^2 - 0.0954 ln VR + 0.297] - 4.16}, VR in ft2/s, from
    0.0025 CI^2.5 (below it: that limit) to 36. Includes soil and grass of a lined channel.
    Temple and others 1987, USDA Agriculture Handbook 667, from memory.

    Parameters
    ----------
    index : float or array
        Curve index; :data:`CURVE_INDEX` by class.
    vr_m2s : float or array
        Mean velocity times hydraulic radius, m2/s.

    Returns
    -------
    float or array
        n; NaN above the largest VR.

    >>> round(n_of_grass(CURVE_INDEX["C"], 1.0 * 0.3048**2), 6)
    0.082348
    """
    ci, vr = _array(index), _array(vr_m2s) / _FOOT**2
    log = np.log(np.maximum(vr, 0.0025 * ci**2.5))
    n = np.exp(ci * (0.0133 * log**2 - 0.0954 * log + 0.297) - 4.16)
    return _plain(np.where(vr > _FLATTEST, np.nan, n))


def n_of_grass_at_slope(retardance: Retardance, radius_m: ArrayLike, slope: ArrayLike) -> Any:
    """Return n of a grass lining from hydraulic radius and slope.

    n = R^(1/6) / (c + 19.97 log10(R^1.4 S^0.4)), R in ft, c by class. Includes soil and grass.
    Kouwen's relation as FHWA HEC-15 used it, from memory. NaN where shallow flow leaves
    nothing below the line.

    >>> round(n_of_grass_at_slope("C", 0.3048, 0.02), 7)
    0.0601373
    """
    radius = _array(radius_m) / _FOOT
    below = KOUWEN[retardance] + 19.97 * np.log10(radius**1.4 * _array(slope) ** 0.4)
    return _plain(radius ** (1 / 6) / np.where(below > 0, below, np.nan))
