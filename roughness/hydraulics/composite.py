"""One n for a part of a section whose bed and banks differ.

Each segment has its own n and its own wetted perimeter (or its share of it: only ratios
count). Water-to-water lines are never wetted perimeter. These relations are for segments
within one part; between channel and flood plains conveyances add instead.
"""

from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

from roughness.errors import InputError


def horton_einstein(n: ArrayLike, perimeter: ArrayLike) -> Any:
    """Return composite n when the mean velocity is the same in all segments.

    n = (sum P_i n_i^1.5 / P)^(2/3). Horton 1933; Einstein 1934 (from memory).

    Parameters
    ----------
    n : array of shape (..., segments)
        Manning's n of each segment, s/m^(1/3).
    perimeter : array of shape (..., segments)
        Wetted perimeter of each segment, in any one unit, or its share.

    Returns
    -------
    float or array of shape (...)

    Raises
    ------
    InputError
        A perimeter below 0 or a sum of 0.

    >>> round(horton_einstein([0.08, 0.03, 0.06], [21, 14, 21]), 7)
    0.0616187
    """
    return _power_mean(n, perimeter, 1.5)


def pavlovskii(n: ArrayLike, perimeter: ArrayLike) -> Any:
    """Return composite n when the resisting forces of the segments add.

    n = (sum P_i n_i^2 / P)^(1/2). Pavlovskii 1931; Muehlhofer 1933; Einstein and Banks 1950
    (from memory). Parameters, result and errors as in :func:`horton_einstein`.
    """
    return _power_mean(n, perimeter, 2.0)


def perimeter_mean(n: ArrayLike, perimeter: ArrayLike) -> Any:
    """Return the mean of n weighted by wetted perimeter.

    n = sum P_i n_i / P. The weighting that FHWA-TS-84-204 (Arcement and Schneider 1984)
    describes for trapezoidal and V-shaped channels with bed and banks of different material.
    Parameters, result and errors as in :func:`horton_einstein`.
    """
    return _power_mean(n, perimeter, 1.0)


def weights(perimeter: ArrayLike) -> NDArray[np.float64]:
    """Return each segment's share of the wetted perimeter, (..., segments), adding to 1."""
    lengths = np.asarray(perimeter, dtype=np.float64)
    total = lengths.sum(axis=-1, keepdims=True)
    if not (np.isfinite(lengths).all() and (lengths >= 0).all() and (total > 0).all()):
        raise InputError(
            "the wetted perimeters of the segments cannot be used",
            wanted="none below 0, and a sum above 0",
        )
    return np.asarray(lengths / total)


def _power_mean(n: ArrayLike, perimeter: ArrayLike, power: float) -> Any:
    values = np.asarray(n, dtype=np.float64)
    mean = np.asarray((weights(perimeter) * values**power).sum(axis=-1) ** (1 / power))
    return float(mean) if mean.ndim == 0 else mean
