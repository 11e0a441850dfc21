"""The spread of a part whose bed and banks are told apart.

The segments of one part are judged by one pair of eyes: they err together. Every percentile
of the part is the equal-velocity combination (Horton/Einstein) of the segments' same
percentiles.
"""

from collections.abc import Sequence

import numpy as np
from numpy.typing import ArrayLike

from roughness.additive.combining import combine
from roughness.additive.factor_shapes import Floats, factor_columns
from roughness.additive.quadrature import gauss_legendre
from roughness.additive.spreads import (
    PERCENTILES,
    USUAL_DEPENDENCE,
    Spread,
    as_spread,
    quantiles,
)
from roughness.hydraulics.composite import horton_einstein, weights
from roughness.quantities.ranges import Range

Segment = tuple[ArrayLike, ArrayLike, ArrayLike]
_NODES = 128


def envelope_of_segments(segments: Sequence[Segment], perimeter: ArrayLike) -> Range:
    """Return n of the part with all segments at their low, best and high values.

    Parameters
    ----------
    segments : sequence of (low, best, high)
        Six factors each, in the order of ``FACTORS``.
    perimeter : array of shape (segments,)
        Wetted perimeter of each segment, or its percentage: only ratios count.
    """
    low, best, high = (
        horton_einstein([combine(list(np.asarray(s[i], dtype=float))) for s in segments], perimeter)
        for i in range(3)
    )
    return Range(low, best, high)


def spread_of_segments(
    segments: Sequence[Segment],
    perimeter: ArrayLike,
    *,
    shape: str | Sequence[str] = "triangular",
    dependence: float = USUAL_DEPENDENCE,
) -> Spread:
    """Return the spread of n of a part from its segments, which err together.

    Parameters
    ----------
    segments, perimeter
        As in :func:`envelope_of_segments`.
    shape, dependence
        As in :func:`roughness.additive.spreads.spread`, within each segment.

    Returns
    -------
    Spread
        Percentiles as exact as the segments' own (1e-6 absolute). Mean and sd by
        Gauss-Legendre quadrature over the quantile, 128 nodes in arcsin(sqrt(p)): against 3,000
        nodes, on 60 random parts, off by at most 3e-8 (mean) and 2e-7 (sd) relative.
    """
    nodes, of_nodes = gauss_legendre(_NODES)
    angle = np.pi / 4 * (1 + nodes)
    weight = np.pi / 4 * of_nodes * np.sin(2 * angle)
    p = np.concatenate([PERCENTILES, np.sin(angle) ** 2])
    rows = [quantiles(*s, p, shape=shape, dependence=dependence) for s in segments]
    of_part = horton_einstein(np.stack(rows, axis=-1), perimeter)
    n = of_part[len(PERCENTILES) :]
    mean = weight @ n
    return as_spread(mean, np.sqrt(weight @ (n - mean) ** 2), of_part[: len(PERCENTILES)])


def shares_of_segments(
    segments: Sequence[Segment],
    perimeter: ArrayLike,
    *,
    shape: str | Sequence[str] = "triangular",
) -> Floats:
    """Return the share of each segment's factors in the variance of the part, first order.

    Factors are independent of each other; one factor errs alike in all segments. With a =
    (slope of n of the part in n of the segment) (slope of that n in the factor) (sd of the
    factor), all at the means, the variance is the sum over factors of the squared sum of a
    over segments, and a segment's share of a factor is its part of that sum.

    Parameters
    ----------
    segments, perimeter, shape
        As in :func:`spread_of_segments`.

    Returns
    -------
    array of shape (segments, 6)
        Adds to 1; all 0 where nothing varies.
    """
    columns = [factor_columns(*s, shape) for s in segments]
    means = np.array([[float(f.mean) for f in six] for six in columns])
    deviations = np.sqrt([[float(f.variance) for f in six] for six in columns])
    sums, multipliers = means[:, :-1].sum(axis=1), means[:, -1]
    n = sums * multipliers
    whole = horton_einstein(n, perimeter)
    slope = weights(perimeter) * np.sqrt(n / whole) if whole > 0 else np.zeros_like(n)
    inner = np.hstack([np.repeat(multipliers[:, None], 5, axis=1), sums[:, None]])
    a = slope[:, None] * inner * deviations
    by_factor = a.sum(axis=0)
    variance = (by_factor**2).sum()
    return np.asarray(a * by_factor / variance) if variance > 0 else np.zeros_like(a)
