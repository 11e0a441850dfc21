"""n of sand beds, which their own bed forms decide: two regimes, and the test between them.

Between the regimes n has two values: an interval is told, never a mean. Includes grains and
bed forms, so it is the base value of a sand bed.
"""

import numpy as np
from numpy.typing import ArrayLike

from roughness.comparison.constants import FOOT, G, Numbers, numbers

SAND_M = (0.000062, 0.002)
"""Smallest and largest sand, m."""
STEEP = 0.006
"""Above this slope the upper regime alone is found."""
LOWER_ENDS, UPPER_BEGINS = 0.8, 1.25
"""Where the transition begins and ends, as shares of the limiting grain Froude number."""
QUARTZ = 2.65
"""Density of the grains over that of water."""


def brownlie_lower(
    radius_m: ArrayLike, d50_m: ArrayLike, slope: ArrayLike, gradation: ArrayLike
) -> Numbers:
    """Return n = 1.6940 (R/d50)^0.1374 S^0.1112 sg^0.1605 * 0.034 d50^0.167 (last d50 in ft).

    Ripples and dunes. d50 0.062 to 2 mm, geometric standard deviation sg below 5. Published
    error: none known. Brownlie 1983, from memory; its exponents agree with those of his depth
    form, the coefficients to 0.6 % (derived).

    >>> round(float(brownlie_lower(2.0, 0.0004, 0.0003, 1.6)), 6)
    0.026814
    """
    return _brownlie(1.6940, (0.1374, 0.1112, 0.1605), radius_m, d50_m, slope, gradation)


def brownlie_upper(
    radius_m: ArrayLike, d50_m: ArrayLike, slope: ArrayLike, gradation: ArrayLike
) -> Numbers:
    """Return n = 1.0213 (R/d50)^0.0662 S^0.0395 sg^0.1282 * 0.034 d50^0.167 (last d50 in ft).

    Flat bed, standing waves, antidunes. Domain, source and mark as :func:`brownlie_lower`.

    >>> round(float(brownlie_upper(2.0, 0.0004, 0.0003, 1.6)), 7)
    0.0155322
    """
    return _brownlie(1.0213, (0.0662, 0.0395, 0.1282), radius_m, d50_m, slope, gradation)


def _brownlie(
    coefficient: float,
    powers: tuple[float, float, float],
    radius_m: ArrayLike,
    d50_m: ArrayLike,
    slope: ArrayLike,
    gradation: ArrayLike,
) -> Numbers:
    size = numbers(d50_m)
    form = (numbers(radius_m) / size) ** powers[0] * numbers(slope) ** powers[1]
    grains = 0.034 * (size / FOOT) ** 0.167
    return numbers(coefficient * form * numbers(gradation) ** powers[2] * grains)


def regime_number(velocity_ms: ArrayLike, d50_m: ArrayLike, slope: ArrayLike) -> Numbers:
    """Return the grain Froude number over its limiting value 1.74 S^(-1/3).

    Fg = V / sqrt((s - 1) g d50). Below 0.8 the lower regime, above 1.25 the upper one, both
    are possible between; on slopes above 0.006 the upper one alone. Brownlie 1983, from
    memory.

    >>> round(float(regime_number(0.8, 0.0004, 0.0003)), 4)
    0.3826
    """
    grain = numbers(velocity_ms) / np.sqrt((QUARTZ - 1) * G * numbers(d50_m))
    return numbers(grain / (1.74 * numbers(slope) ** (-1 / 3)))


def stream_power(radius_m: ArrayLike, slope: ArrayLike, velocity_ms: ArrayLike) -> Numbers:
    """Return stream power per area of bed, gamma R S V with gamma = 9806.65 N/m3, W/m2.

    >>> round(float(stream_power(0.9144, 0.001, 1.2192)), 4)
    10.9328
    """
    return numbers(1000 * G * numbers(radius_m) * numbers(slope) * numbers(velocity_ms))
