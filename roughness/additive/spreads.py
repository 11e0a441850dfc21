"""The spread of the choices: the distribution of n that follows from the factors' ranges."""

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from roughness.additive.factor_shapes import FactorShape, Floats, factor_columns
from roughness.additive.mixture import row_quantiles
from roughness.additive.moments import mean_and_variance
from roughness.errors import InputError

PERCENTILES = np.array([0.05, 0.16, 0.50, 0.84, 0.95])
# Ours, no source: half way between factors that err each by itself and all together.
USUAL_DEPENDENCE = 0.5


@dataclass(frozen=True, slots=True)
class Spread:
    """Mean, standard deviation and percentiles of n: floats for one reach, else arrays."""

    mean: Any
    sd: Any
    p05: Any
    p16: Any
    p50: Any
    p84: Any
    p95: Any


def spread(
    low: ArrayLike,
    best: ArrayLike,
    high: ArrayLike,
    *,
    shape: str | Sequence[str] = "triangular",
    dependence: float = USUAL_DEPENDENCE,
) -> Spread:
    """Return the spread of n that follows from the factors' ranges, the grades taken as right.

    It does not hold the chance of a wrong grade. No random numbers: the same digits on every
    run.

    Parameters
    ----------
    low, best, high : array of shape (..., 6)
        Limits and chosen value in the order of ``FACTORS``, n in s/m^(1/3).
    shape : str or six str
        ``triangular`` (mode at best) or ``uniform``, for all or for each factor.
    dependence : float
        How far the factors err together, 0 to 1: the distribution function is
        (1 - d) F_independent + d F_together.

    Returns
    -------
    Spread
        Percentiles right to 1e-6 absolute; mean and sd to 1e-12 relative.

    Raises
    ------
    InputError
        Ranges out of order, negative or not finite; unknown shape; dependence outside 0..1.
    """
    factors = factor_columns(low, best, high, shape)
    d = checked_dependence(dependence)
    mean, variance = mean_and_variance(factors, d)
    return as_spread(mean, np.sqrt(variance), _quantiles(factors, PERCENTILES, d))


def quantiles(
    low: ArrayLike,
    best: ArrayLike,
    high: ArrayLike,
    p: ArrayLike,
    *,
    shape: str | Sequence[str] = "triangular",
    dependence: float = USUAL_DEPENDENCE,
) -> Floats:
    """Return quantiles of n at the probabilities ``p``.

    Parameters
    ----------
    low, best, high, shape, dependence
        As in :func:`spread`.
    p : array of shape (k,)
        Probabilities from 0 to 1.

    Returns
    -------
    array of shape (..., k)
        Right to 1e-6 absolute for p from 0.001 to 0.999; in the last thousandths, where a
        wide factor stands beside a very narrow one, to 1e-5. At 0 and 1 the envelope.
    """
    probabilities = np.atleast_1d(np.asarray(p, dtype=np.float64))
    if not ((probabilities >= 0) & (probabilities <= 1)).all():
        raise InputError("a probability outside 0 to 1", wanted="0 to 1")
    factors = factor_columns(low, best, high, shape)
    return _quantiles(factors, probabilities, checked_dependence(dependence))


def as_spread(mean: Floats, sd: Floats, percentiles: Floats) -> Spread:
    """Return a Spread from arrays (...), (...) and (..., 5); floats where there is one row."""
    columns = (mean, sd, *np.moveaxis(percentiles, -1, 0))
    return Spread(*(float(c) if np.ndim(c) == 0 else c for c in columns))


def checked_dependence(dependence: float) -> float:
    """Return the dependence, or say that it is none."""
    if not 0 <= dependence <= 1:
        raise InputError(f"dependence {dependence}", wanted="0 to 1")
    return float(dependence)


def _quantiles(factors: Sequence[FactorShape], p: Floats, dependence: float) -> Floats:
    leading = factors[0].low.shape
    found = np.empty((*leading, len(p)))
    for row in np.ndindex(leading):
        of_row = [FactorShape(f.low[row], f.best[row], f.high[row], f.uniform) for f in factors]
        found[row] = row_quantiles(of_row, p, dependence)
    return found
