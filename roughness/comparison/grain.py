"""n of the grains alone, from one grain size to the power of 1/6.

Candidates for the base value: nothing of banks, plants, bends or obstructions is in them.
They hold where the flow is many grains deep. Sizes are of the middle axis, in m.
"""

from numpy.typing import ArrayLike

from roughness.comparison.constants import FOOT, INCH, Numbers, numbers


def strickler(d50_m: ArrayLike) -> Numbers:
    """Return n = d50^(1/6) / 21.1 (m), the form of the 1923 paper.

    Includes the grains alone; gravel, flow many grains deep. In feet the factor is 0.0389.
    Published error: none known. Strickler 1923; 21.1 and 0.0389 seen second hand.

    >>> round(float(strickler(0.045)), 7)
    0.0282653
    """
    return numbers(numbers(d50_m) ** (1 / 6) / 21.1)


def strickler_0342(d50_m: ArrayLike) -> Numbers:
    """Return n = 0.0342 d50^(1/6) (ft), a second form under Strickler's name, 12 % lower.

    Domain as :func:`strickler`; from memory. Shown beside it, since publications that say
    "Strickler" may mean either.

    >>> round(float(strickler_0342(0.045)), 7)
    0.0248633
    """
    return numbers(0.0342 * (numbers(d50_m) / FOOT) ** (1 / 6))


def meyer_peter_mueller(d90_m: ArrayLike) -> Numbers:
    """Return n = d90^(1/6) / 26 (m).

    Includes the grains alone; sorted sand and gravel, armoured beds. Published error: none
    known. Meyer-Peter and Mueller 1948; 26 seen second hand.

    >>> round(float(meyer_peter_mueller(0.11)), 7)
    0.0266231
    """
    return numbers(numbers(d90_m) ** (1 / 6) / 26)


def lane_carlson(d75_m: ArrayLike) -> Numbers:
    """Return n = d75^(1/6) / 39 with d75 in inches.

    Includes the grains alone; canals lined with cobbles. Published error: none known. Lane
    and Carlson 1953, from memory.

    >>> round(float(lane_carlson(0.075)), 7)
    0.0307119
    """
    return numbers((numbers(d75_m) / INCH) ** (1 / 6) / 39)


def stone_bed_velocity(d90_m: ArrayLike) -> Numbers:
    """Return n = 0.034 d90^(1/6) (ft), for velocity and the size of stone that stays.

    Includes the grains alone; riprap and gravel. USACE EM 1110-2-1601, from memory.

    >>> round(float(stone_bed_velocity(0.11)), 7)
    0.0286885
    """
    return numbers(0.034 * (numbers(d90_m) / FOOT) ** (1 / 6))


def stone_bed_capacity(d90_m: ArrayLike) -> Numbers:
    """Return n = 0.038 d90^(1/6) (ft), for capacity: the safe side for water levels.

    Includes the grains alone; riprap and gravel. USACE EM 1110-2-1601, from memory.

    >>> round(float(stone_bed_capacity(0.11)), 7)
    0.0320637
    """
    return numbers(0.038 * (numbers(d90_m) / FOOT) ** (1 / 6))
