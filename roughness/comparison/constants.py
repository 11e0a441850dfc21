"""Exact units and the constants that formulas share.

Every coefficient is kept in the unit in which it was published and converted exactly, so that
n is the same number whichever unit a formula was printed in.
"""

from typing import Final

import numpy as np
from numpy.typing import ArrayLike, NDArray

from roughness.hydraulics.unit_systems import FOOT_M, STANDARD_GRAVITY

FOOT: Final = FOOT_M
INCH: Final = 0.0254
"""m, exact."""
G: Final = STANDARD_GRAVITY

Numbers = NDArray[np.float64]


def numbers(values: ArrayLike) -> Numbers:
    """Return floats of any shape as an array; NaN is unknown."""
    return np.asarray(values, dtype=np.float64)


def n_from_friction(radius_m: ArrayLike, inverse_root_f: ArrayLike) -> Numbers:
    """Return Manning's n for a Darcy-Weisbach f given as 1/sqrt(f).

    n = R^(1/6) sqrt(f / 8g), from V = sqrt(8 g R S / f) and Manning's equation (derived).

    Parameters
    ----------
    radius_m : float or array
        Hydraulic radius, m.
    inverse_root_f : float or array
        1/sqrt(f). At or below 0, which a logarithm gives where grains stand out of the flow,
        there is no n.

    Returns
    -------
    float or array
        n, s/m^(1/3); NaN where there is none.

    >>> round(float(n_from_friction(1.2, 1 / 0.0904384275317**0.5)), 9)
    0.035
    """
    inverse = numbers(inverse_root_f)
    usable = np.where(inverse > 0, inverse, np.nan)
    return numbers(numbers(radius_m) ** (1 / 6) / (np.sqrt(8 * G) * usable))
