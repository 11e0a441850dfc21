"""n from the height of a wall's roughness, and the older laws of Bazin and Kutter.

ks is the equivalent sand roughness. The log laws hold for fully rough flow and for walls that
the water covers several times (R/ks above about 4).
"""

from typing import Any, Final

import numpy as np
from numpy.typing import ArrayLike, NDArray

from roughness.hydraulics.unit_systems import METRIC, UnitSystem

KEULEGAN: Final = 12.2
"""Constant a of the log law for a usual shape of section; 11 to 13.5 (from memory)."""
LOG_LAW: Final = 5.75
"""ln 10 over a von Karman constant of 0.400 (from memory)."""


def _array(values: ArrayLike) -> NDArray[np.float64]:
    return np.asarray(values, dtype=np.float64)


def _plain(values: NDArray[np.float64]) -> Any:
    return float(values) if values.ndim == 0 else values


def n_from_roughness_height(
    radius: ArrayLike, ks: ArrayLike, units: UnitSystem = METRIC, *, shape: float = KEULEGAN
) -> Any:
    """Return n of a fully rough wall by the log law.

    n = Ku R^(1/6) / (5.75 sqrt(g) log10(a R / ks)). Keulegan 1938 (from memory).

    Parameters
    ----------
    radius, ks : float or array
        Hydraulic radius and equivalent sand roughness, both in m (or both in ft).
    shape : float
        a, 11 to 13.5 with the shape of the section.

    Returns
    -------
    float or array
        n; NaN where a R does not exceed ks, which no log law covers.

    >>> round(n_from_roughness_height(1.2, 0.15), 7)
    0.0287763
    """
    ratio = shape * _array(radius) / _array(ks)
    log = np.log10(ratio, out=np.full_like(ratio, np.nan), where=ratio > 1)
    return _plain(units.ku * _array(radius) ** (1 / 6) / (LOG_LAW * np.sqrt(units.gravity) * log))


def roughness_height_from_n(
    radius: ArrayLike, n: ArrayLike, units: UnitSystem = METRIC, *, shape: float = KEULEGAN
) -> Any:
    """Return the equivalent sand roughness that n amounts to: the log law solved for ks.

    ks = a R / 10^(Ku R^(1/6) / (5.75 sqrt(g) n)) (derived). NaN where it exceeds R: such an n
    does not come from the grains of a wall.
    """
    power = units.ku * _array(radius) ** (1 / 6) / (LOG_LAW * np.sqrt(units.gravity) * _array(n))
    ks = shape * _array(radius) / 10**power
    return _plain(np.where(ks > _array(radius), np.nan, ks))


def n_from_white_colebrook(radius: ArrayLike, ks: ArrayLike) -> Any:
    """Return n by C = 18 log10(12 R / ks), metres: the rough limit of White-Colebrook.

    From memory; 0.4 % above :func:`n_from_roughness_height` at R/ks = 8.

    >>> round(n_from_white_colebrook(1.2, 0.15), 7)
    0.0288909
    """
    ratio = 12 * _array(radius) / _array(ks)
    log = np.log10(ratio, out=np.full_like(ratio, np.nan), where=ratio > 1)
    return _plain(_array(radius) ** (1 / 6) / (18 * log))


def n_from_power_of_roughness(ks: ArrayLike) -> Any:
    """Return n by the power form ks^(1/6) / 26, ks in m.

    Constant 26 seen second hand, fitted for 10 < R/ks < 500, where it stays within 8 % of the
    log law.

    >>> round(n_from_power_of_roughness(0.15), 7)
    0.0280355
    """
    return _plain(_array(ks) ** (1 / 6) / 26)


def n_from_bazin(radius: ArrayLike, bazin: ArrayLike) -> Any:
    """Return n by Bazin's law, metres.

    C = 87 / (1 + m/sqrt(R)), so n = R^(1/6) (1 + m/sqrt(R)) / 87. Bazin 1897 (from memory);
    classes of m: 0.06, 0.16, 0.46, 0.85, 1.30, 1.75 m^(1/2), from planed boards to rough earth.

    >>> round(n_from_bazin(1.2, 1.30), 7)
    0.0259103
    """
    r = _array(radius)
    return _plain(r ** (1 / 6) * (1 + _array(bazin) / np.sqrt(r)) / 87)


def chezy_from_kutter(n: ArrayLike, radius: ArrayLike, slope: ArrayLike) -> Any:
    """Return Chezy's C, m^(1/2)/s, by Ganguillet and Kutter, metres, slopes above 0.0001.

    C = (23 + 0.00155/S + 1/n) / (1 + (23 + 0.00155/S) n / sqrt(R)) (from memory). Its n is near
    Manning's and equal to it at R = 1 m.

    >>> round(chezy_from_kutter(0.035, 1.2, 0.002), 4)
    29.7487
    """
    of_slope = 23 + 0.00155 / _array(slope)
    roughness = _array(n)
    below = 1 + of_slope * roughness / np.sqrt(_array(radius))
    return _plain((of_slope + 1 / roughness) / below)
