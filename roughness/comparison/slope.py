"""n of a whole reach from its slope and size: what banks and shape add is in it.

To be laid beside the whole n, never beside the base value.
"""

import numpy as np
from numpy.typing import ArrayLike

from roughness.comparison.constants import FOOT, Numbers, numbers


def jarrett(radius_m: ArrayLike, slope: ArrayLike) -> Numbers:
    """Return n = 0.39 S^0.38 R^-0.16 (R in ft; 0.322483 in m, often printed 0.32).

    Includes the whole resistance of stable, natural main channels without backwater and with
    little sediment. Slope 0.002 to 0.04, R 0.15 to 2.13 m (0.5 to 7 ft); abstracts of later
    papers say up to 0.052. 75 measurements at 21 streams; average standard error 28 %
    (memory), 29 % in a test at 32 other rivers (seen). Jarrett 1984; constants seen second
    hand.

    >>> round(float(jarrett(0.9144, 0.01)), 7)
    0.0568493
    """
    return numbers(0.39 * numbers(slope) ** 0.38 * (numbers(radius_m) / FOOT) ** -0.16)


def sauer(radius_m: ArrayLike, slope: ArrayLike) -> Numbers:
    """Return n = 0.11 S^0.18 R^0.08 (R in ft; 0.120968 in m).

    Includes the whole resistance of natural channels at high flow; S is that of the water
    surface, 0.0003 to 0.018, R up to 19 ft. Published error: none known. Sauer 1990, as cited
    in USGS WSP 2441, from memory.

    >>> round(float(sauer(1.524, 0.002)), 7)
    0.0408786
    """
    return numbers(0.11 * numbers(slope) ** 0.18 * (numbers(radius_m) / FOOT) ** 0.08)


def bray_slope(slope: ArrayLike) -> Numbers:
    """Return n = 0.104 S^0.177.

    Includes the whole resistance of 67 gravel reaches of Alberta at the 2-year flood. Bray
    1979, from memory; seen second hand rounded to 0.1 S^0.18.

    >>> round(float(bray_slope(0.004)), 7)
    0.0391379
    """
    return numbers(0.104 * numbers(slope) ** 0.177)


def lacey(slope: ArrayLike) -> Numbers:
    """Return n = S^(1/6) / 10.8, which V = 10.8 R^(2/3) S^(1/3) (m) implies.

    Canals in silt that are in regime, and nothing else. Lacey, from memory.

    >>> round(float(lacey(0.004)), 7)
    0.0368909
    """
    return numbers(numbers(slope) ** (1 / 6) / 10.8)


def dingman_sharma_discharge(area_m2: ArrayLike, radius_m: ArrayLike, slope: ArrayLike) -> Numbers:
    """Return Q = 1.564 A^1.173 R^0.400 S^(-0.0543 log10 S), m3/s.

    Flow within the banks of fairly straight channels; too large where Q is below 3 m3/s with
    a Froude number below 0.2. 520 measurements. Dingman and Sharma 1997, seen (the abstract;
    that the logarithm is to the base of ten is our reading).

    >>> round(float(dingman_sharma_discharge(40.0, 1.5, 0.003)), 4)
    62.8456
    """
    area, radius, drop = numbers(area_m2), numbers(radius_m), numbers(slope)
    power = -0.0543 * np.log10(drop)
    return numbers(1.564 * area**1.173 * radius**0.400 * drop**power)


def dingman_sharma(area_m2: ArrayLike, radius_m: ArrayLike, slope: ArrayLike) -> Numbers:
    """Return the n that :func:`dingman_sharma_discharge` implies in Manning's equation.

    >>> round(float(dingman_sharma(40.0, 1.5, 0.003)), 7)
    0.0456815
    """
    flow = dingman_sharma_discharge(area_m2, radius_m, slope)
    drive = numbers(area_m2) * numbers(radius_m) ** (2 / 3) * np.sqrt(numbers(slope))
    return numbers(drive / flow)
