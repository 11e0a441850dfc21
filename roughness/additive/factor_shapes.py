"""The distribution of one factor between its limits: triangular, uniform or a point."""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from roughness.errors import InputError
from roughness.survey.words import FACTORS

Floats = NDArray[np.float64]
SHAPES = ("triangular", "uniform")


@dataclass(frozen=True, slots=True)
class FactorShape:
    """One factor, for one reach (floats) or for many (arrays of one shape).

    Triangular with its mode at ``best``, or uniform, on [low, high]; a point where the two
    are equal. Textbook formulas, written without a division by a width that may be zero.
    """

    low: Floats
    best: Floats
    high: Floats
    uniform: bool

    @property
    def width(self) -> Floats:
        """High minus low."""
        return self.high - self.low

    @property
    def mean(self) -> Floats:
        """Expected value."""
        if self.uniform:
            return (self.low + self.high) / 2
        return (self.low + self.best + self.high) / 3

    @property
    def variance(self) -> Floats:
        """Variance, from widths alone, so that nothing cancels."""
        if self.uniform:
            return self.width**2 / 12
        return (self.width**2 - (self.best - self.low) * (self.high - self.best)) / 18

    @property
    def turn(self) -> Floats:
        """Angle at which the quantile function passes from one branch to the other."""
        if self.uniform:
            return np.zeros_like(self.width)
        width = np.where(self.width > 0, self.width, 1.0)
        return np.asarray(np.arcsin(np.sqrt((self.best - self.low) / width)))

    def at_angle(self, angle: Floats) -> Floats:
        """Return the quantile at p = sin(angle)^2.

        In the angle the quantile of a triangular factor is smooth up to both ends: its
        branches are a sine and a cosine.
        """
        width = self.width
        if not width.any():
            return self.low + np.zeros_like(angle)
        sine = np.sin(angle)
        if self.uniform:
            return np.asarray(self.low + width * sine * sine)
        up = self.best - self.low
        rising = self.low + sine * np.sqrt(width * up)
        falling = self.high - np.cos(angle) * np.sqrt(width * (self.high - self.best))
        before_mode = sine * sine * width <= up
        return np.asarray(np.where(before_mode, rising, falling))

    def below(self, value: Floats) -> Floats:
        """Return the probability of at most ``value``, for one reach and a factor with a width."""
        if self.uniform:
            return np.clip((value - self.low) / self.width, 0.0, 1.0)
        up, down = self.best - self.low, self.high - self.best
        share = np.full_like(value, down / self.width)
        if up > 0:
            above_low = np.clip(value - self.low, 0.0, up)
            share += above_low * (above_low / up) / self.width
        if down > 0:
            below_high = np.clip(self.high - value, 0.0, down)
            share -= below_high * (below_high / down) / self.width
        return share

    def shortfall(self, value: Floats) -> Floats:
        """Return E[max(value - X, 0)], for one reach and a factor with a width."""
        above_low = np.clip(value - self.low, 0.0, None)
        if self.uniform:
            inside = np.minimum(above_low, self.width)
            return np.asarray(inside**2 / (2 * self.width) + (above_low - inside))
        up, down = self.best - self.low, self.high - self.best
        rising = np.minimum(above_low, up)
        falling = np.clip(self.high - value, 0.0, None)
        # Divided before it is multiplied: a side may be too short for its product.
        left = rising**2 * (rising / (up if up > 0 else 1.0)) / (3 * self.width)
        right = falling**2 * (falling / (down if down > 0 else 1.0)) / (3 * self.width)
        return np.where(value <= self.best, left, value - self.mean + right)

    def masses(self, step: float) -> Floats:
        """Return masses at low, low + step, ... that keep the sum of one and the mean.

        Each bit of probability goes to its two neighbouring nodes in inverse proportion to
        the distance. The cumulated masses are differences of exact values, so rounding does
        not build up. One reach, with a width.
        """
        cells = int(np.ceil(self.width / step))
        at_zero = FactorShape(
            np.zeros_like(self.low), self.best - self.low, self.width, self.uniform
        )
        nodes = np.asarray(step * np.arange(-1, cells + 2), dtype=np.float64)
        return np.asarray(np.diff(at_zero.shortfall(nodes), 2) / step)


def factor_columns(
    low: ArrayLike, best: ArrayLike, high: ArrayLike, shape: str | Sequence[str]
) -> tuple[FactorShape, ...]:
    """Return the six factors in the order of publication.

    Parameters
    ----------
    low, best, high : array of shape (..., 6)
        Limits and chosen value, in the order of ``FACTORS``, dimensionless.
    shape : str or six str
        ``triangular`` or ``uniform``, for all or each.

    Raises
    ------
    InputError
        Not six columns, not in order, negative, or no finite number; unknown shape.
    """
    arrays = np.broadcast_arrays(*(np.asarray(a, dtype=np.float64) for a in (low, best, high)))
    lows, bests, highs = arrays
    if lows.ndim == 0 or lows.shape[-1] != len(FACTORS):
        raise InputError(f"factors of shape {lows.shape}", wanted=f"{len(FACTORS)} columns")
    if not (np.isfinite(highs).all() and (lows >= 0).all()):
        raise InputError("a factor is negative or no finite number", wanted="0 or more")
    if not ((lows <= bests) & (bests <= highs)).all():
        raise InputError("a factor is out of order", wanted="low <= best <= high")
    return tuple(
        FactorShape(lows[..., i], bests[..., i], highs[..., i], word == "uniform")
        for i, word in enumerate(_words(shape))
    )


def _words(shape: str | Sequence[str]) -> Iterable[str]:
    words = [shape] * len(FACTORS) if isinstance(shape, str) else list(shape)
    unknown = [word for word in words if word not in SHAPES]
    if unknown or len(words) != len(FACTORS):
        raise InputError(
            f"shape {(unknown or words)!r}", wanted=f"{' or '.join(SHAPES)}, one or six of them"
        )
    return words
