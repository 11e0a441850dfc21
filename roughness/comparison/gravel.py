"""n of gravel and boulder beds from grain size, with and without the depth of flow.

Fitted to clean, straight field reaches. They give a base value for a bed without plants, but
hold some of the banks' and the shape's resistance too: adding irregularity and variation to
them counts part of it twice. Sizes are of the middle axis, in m; R is the hydraulic radius, m.
"""

import numpy as np
from numpy.typing import ArrayLike

from roughness.comparison.constants import FOOT, G, Numbers, n_from_friction, numbers

# 0.0926 of the publication, where R and d are in feet, for metres: 0.112878.
_LIMERINOS = 0.0926 / FOOT ** (1 / 6)
_HEY_FLAT = 11.1


def _log10(ratio: ArrayLike) -> Numbers:
    """Return log10, and NaN for what is not above 0."""
    known = numbers(ratio)
    return np.log10(np.where(known > 0, known, np.nan))


def _limerinos(radius_m: ArrayLike, size_m: ArrayLike, constant: float) -> Numbers:
    radius = numbers(radius_m)
    below = constant + 2.0 * _log10(radius / numbers(size_m))
    return numbers(_LIMERINOS * radius ** (1 / 6) / np.where(below > 0, below, np.nan))


def limerinos_d84(radius_m: ArrayLike, d84_m: ArrayLike) -> Numbers:
    """Return n = 0.0926 R^(1/6) / (1.16 + 2.0 log10(R/d84)), lengths in feet.

    Includes the bed of clean reaches. 50 measurements at 11 streams; R/d84 0.90 to 68.55,
    R 1 to 11 ft (memory), Froude number below 1. Published error: none seen. Limerinos 1970,
    USGS WSP 1898-B; seen as eq. 3.19 of FHWA HDS-6.

    >>> round(float(limerinos_d84(1.0, 0.09)), 7)
    0.0347154
    """
    return _limerinos(radius_m, d84_m, 1.16)


def limerinos_d50(radius_m: ArrayLike, d50_m: ArrayLike) -> Numbers:
    """Return n = 0.0926 R^(1/6) / (0.35 + 2.0 log10(R/d50)), lengths in feet.

    As :func:`limerinos_d84`, for R/d50 1.90 to 177; constants seen second hand.

    >>> round(float(limerinos_d50(1.0, 0.045)), 7)
    0.0370872
    """
    return _limerinos(radius_m, d50_m, 0.35)


def bray_d50(d50_m: ArrayLike) -> Numbers:
    """Return n = 0.0593 d50^0.179 (m).

    Includes the bed of clean reaches. 67 gravel reaches of Alberta at the 2-year flood.
    Published error: none seen. Bray 1979, seen second hand.

    >>> round(float(bray_d50(0.045)), 7)
    0.0340392
    """
    return numbers(0.0593 * numbers(d50_m) ** 0.179)


def bray_d65(d65_m: ArrayLike) -> Numbers:
    """Return n = 0.0561 d65^0.176 (m). As :func:`bray_d50`, from memory.

    >>> round(float(bray_d65(0.060)), 7)
    0.0341914
    """
    return numbers(0.0561 * numbers(d65_m) ** 0.176)


def bray_d90(d90_m: ArrayLike) -> Numbers:
    """Return n = 0.0495 d90^0.160 (m). As :func:`bray_d50`, seen second hand.

    >>> round(float(bray_d90(0.110)), 7)
    0.0347719
    """
    return numbers(0.0495 * numbers(d90_m) ** 0.160)


def bray_log(radius_m: ArrayLike, depth_m: ArrayLike, d50_m: ArrayLike) -> Numbers:
    """Return n from 1/sqrt(f) = 0.248 + 2.36 log10(d/d50), d the mean depth.

    As :func:`bray_d50`, from memory.

    >>> round(float(bray_log(1.0, 1.0, 0.045)), 7)
    0.0329499
    """
    log = _log10(numbers(depth_m) / numbers(d50_m))
    return n_from_friction(radius_m, 0.248 + 2.36 * log)


def hey_shape(radius_m: ArrayLike, max_depth_m: ArrayLike) -> Numbers:
    """Return a = 11.1 (R/ymax)^-0.314, ymax the largest depth of the section.

    11.1 (a wide rectangle) to 13.46. Hey 1979, from memory.

    >>> round(float(hey_shape(1.0, 1.5)), 4)
    12.6071
    """
    return numbers(_HEY_FLAT * (numbers(radius_m) / numbers(max_depth_m)) ** -0.314)


def hey(radius_m: ArrayLike, d84_m: ArrayLike, shape: ArrayLike = _HEY_FLAT) -> Numbers:
    """Return n from 1/sqrt(f) = 2.03 log10(a R / (3.5 d84)).

    Includes the bed of straight reaches and riffles. Published error: none seen. Hey 1979;
    with a = 11.1 seen second hand, :func:`hey_shape` from memory.

    >>> round(float(hey(1.0, 0.09)), 7), round(float(hey(1.0, 0.09, hey_shape(1.0, 1.5))), 7)
    (0.0359505, 0.0347099)
    """
    ratio = numbers(shape) * numbers(radius_m) / (3.5 * numbers(d84_m))
    return n_from_friction(radius_m, 2.03 * _log10(ratio))


def griffiths(radius_m: ArrayLike, d50_m: ArrayLike) -> Numbers:
    """Return n from 1/sqrt(f) = 0.76 + 1.98 log10(R/d50), for beds that do not move.

    Includes the bed of clean reaches. Gravel rivers of New Zealand, R/d50 1 to 200 (memory).
    Published error: none seen. Griffiths 1981; constants seen second hand.

    >>> round(float(griffiths(1.0, 0.045)), 7)
    0.0329478
    """
    log = _log10(numbers(radius_m) / numbers(d50_m))
    return n_from_friction(radius_m, 0.76 + 1.98 * log)


def bathurst(radius_m: ArrayLike, depth_m: ArrayLike, d84_m: ArrayLike) -> Numbers:
    """Return n from sqrt(8/f) = 4 + 5.62 log10(d/d84), d the mean depth.

    Includes the bed of steep reaches of gravel and boulders. Slopes 0.004 to 0.04 (seen),
    d/d84 below 10 (memory); error up to 25 to 35 % (seen). Bathurst 1985; constants seen
    second hand.

    >>> round(float(bathurst(1.0, 1.0, 0.09)), 7)
    0.0323301
    """
    log = _log10(numbers(depth_m) / numbers(d84_m))
    return n_from_friction(radius_m, (4 + 5.62 * log) / np.sqrt(8))


def gravel_power(radius_m: ArrayLike, d84_m: ArrayLike) -> Numbers:
    """Return n from 1/sqrt(f) = 1.9 (R/d84)^(1/4).

    Includes the bed of gravel reaches. FHWA HDS-6, eq. 3.20, seen; whose it is could not be
    seen, nor an error.

    >>> round(float(gravel_power(1.0, 0.09)), 7)
    0.0325463
    """
    return n_from_friction(radius_m, 1.9 * (numbers(radius_m) / numbers(d84_m)) ** 0.25)


def gravel_log(radius_m: ArrayLike, d84_m: ArrayLike) -> Numbers:
    """Return n from 1/sqrt(f) = 1.1 + 2.0 log10(R/d84). FHWA HDS-6, eq. 3.21, seen.

    >>> round(float(gravel_log(1.0, 0.09)), 7)
    0.0353751
    """
    log = _log10(numbers(radius_m) / numbers(d84_m))
    return n_from_friction(radius_m, 1.1 + 2.0 * log)


def ferguson(
    radius_m: ArrayLike, d84_m: ArrayLike, deep: float = 6.5, shallow: float = 2.5
) -> Numbers:
    """Return n from sqrt(8/f) = a1 a2 x / sqrt(a1^2 + a2^2 x^(5/3)), x = R/d84.

    Includes the bed of gravel and boulder reaches, shallow flow too. Tested for x from 0.1 to
    above 30; errors up to a factor of 2 (seen). Deep flow tends to a power of 1/6, shallow
    flow to sqrt(8/f) = a2 x. Ferguson 2007; a1 = 6.5 and a2 = 2.5 seen second hand; the pairs
    7.5, 2.36 and 5.5, 2.2 carry the same name.

    >>> round(float(ferguson(1.0, 0.09)), 7)
    0.034839
    """
    x = numbers(radius_m) / numbers(d84_m)
    root = deep * shallow * x / np.sqrt(deep**2 + shallow**2 * x ** (5 / 3))
    return n_from_friction(radius_m, root / np.sqrt(8))


def rickenmann_recking_velocity(
    unit_discharge_m2s: ArrayLike, slope: ArrayLike, d84_m: ArrayLike
) -> Numbers:
    """Return mean velocity, m/s, from the discharge per metre of width.

    U** = 1.443 q**^0.60 [1 + (q**/43.78)^0.8214]^-0.2435 with q** = q / sqrt(g S d84^3) and
    U** = U / sqrt(g S d84). Total resistance of 2,890 field values (memory). Rickenmann and
    Recking 2011, from memory.

    >>> round(float(rickenmann_recking_velocity(2.0, 0.004, 0.09)), 5)
    1.87852
    """
    drop, size = G * numbers(slope), numbers(d84_m)
    q = numbers(unit_discharge_m2s) / np.sqrt(drop * size**3)
    return numbers(_velocity_number(q) * np.sqrt(drop * size))


def rickenmann_recking(depth_m: ArrayLike, d84_m: ArrayLike) -> Numbers:
    """Return n of a wide channel by Rickenmann and Recking 2011 at a known depth.

    At a known depth the slope cancels: depth/d84 = q**/U** is solved for q** by halving (it
    grows with q**), and n = h^(2/3) / (U** sqrt(g d84)). Includes the whole resistance. From
    memory, as :func:`rickenmann_recking_velocity`.

    >>> round(float(rickenmann_recking(1.06466750044, 0.09)), 6)
    0.035104
    """
    depth, size = numbers(depth_m), numbers(d84_m)
    relative = depth / size
    low, high = np.full(relative.shape, -30.0), np.full(relative.shape, 60.0)
    for _ in range(80):
        middle = (low + high) / 2
        q = np.exp(middle)
        below = q / _velocity_number(q) < relative
        low, high = np.where(below, middle, low), np.where(below, high, middle)
    velocity = _velocity_number(np.exp((low + high) / 2))
    return numbers(depth ** (2 / 3) / (velocity * np.sqrt(G * size)))


def _velocity_number(q: Numbers) -> Numbers:
    return numbers(1.443 * q**0.60 * (1 + (q / 43.78) ** 0.8214) ** -0.2435)
