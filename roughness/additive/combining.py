"""The additive method itself: n = (n0 + n1 + n2 + n3 + n4) m."""

from collections.abc import Mapping, Sequence
from typing import TypeVar

import numpy as np
from numpy.typing import NDArray

from roughness.quantities.ranges import Range
from roughness.survey.words import FACTORS, Factor

_DECIMALS = 15
Number = TypeVar("Number", float, NDArray[np.float64])


def combine(columns: Sequence[Number]) -> Number:
    """Add the five adding factors and multiply by the sixth.

    Parameters
    ----------
    columns : six floats, or six arrays that broadcast
        The factors in the order of ``FACTORS``, dimensionless (n in s/m^(1/3)).

    Returns
    -------
    float or array
        Manning's n; rounded to 15 decimals.

    Notes
    -----
    Cowan 1956, Estimating hydraulic roughness coefficients, Agricultural Engineering 37(7).

    >>> combine((0.02, 0.005, 0.005, 0.0, 0.005, 1.15))
    0.04025
    """
    base, irregularity, variation, obstruction, vegetation, multiplier = columns
    n = (base + irregularity + variation + obstruction + vegetation) * multiplier
    # Table values are decimals: their sum is shown and exported as 0.076, not as
    # 0.07600000000000001. Rounding keeps the order of low, best and high.
    rounded = np.round(n, _DECIMALS)
    return rounded if isinstance(n, np.ndarray) else float(rounded)


def envelope(ranges: Mapping[Factor, Range]) -> Range:
    """Return n with all factors at their low, best and high values.

    Parameters
    ----------
    ranges : mapping
        A range for each of the six factors.

    Returns
    -------
    Range
        The widest range that the factors' ranges allow.
    """
    six = [ranges[factor] for factor in FACTORS]
    return Range(
        combine([r.low for r in six]),
        combine([r.best for r in six]),
        combine([r.high for r in six]),
    )
