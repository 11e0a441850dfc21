"""Percentiles of n between 'each factor errs by itself' and 'all err together'.

F = (1 - d) F_independent + d F_together. In ``together`` every factor stands at the same
quantile, so n there is known exactly for each p = sin(angle)^2; every n of the range belongs
to one such angle. The percentiles are found along that angle: looked for on a net, on finer
nets, and polished by secants that stay inside a bracket.
"""

from collections.abc import Sequence

import numpy as np

from roughness.additive.combining import combine
from roughness.additive.factor_shapes import FactorShape, Floats
from roughness.additive.independent import Distribution, independent

_FIRST_NET, _FINER_NET, _FINER_NETS = 65, 17, 2
# Polishing ends when no percentile moves by more than this in n, mostly after two steps.
_SETTLED, _MOST_STEPS = 2e-8, 60
_AT_ONCE = 256
# A width below this cannot move n by 1e-6 and is a point to the grid (never to `together`).
_NO_WIDTH = 1e-12


def row_quantiles(factors: Sequence[FactorShape], p: Floats, dependence: float) -> Floats:
    """Return the quantiles of one reach's n at the probabilities ``p``, shape (len(p),).

    Parameters
    ----------
    factors : six FactorShape
        One reach's factors.
    p : array of shape (k,)
        Probabilities from 0 to 1.
    dependence : float
        d, from 0 to 1.
    """
    live = [factor for factor in factors[:-1] if factor.width > _NO_WIDTH]
    multiplier = factors[-1]
    number_live = len(live) + (multiplier.width > _NO_WIDTH)
    if dependence == 1 or number_live < 2:
        return together(factors, np.arcsin(np.sqrt(p)))
    points = sum(float(f.mean) for f in factors[:-1] if f.width <= _NO_WIDTH)
    if multiplier.width <= _NO_WIDTH:
        middle = multiplier.mean
        multiplier = FactorShape(middle, middle, middle, False)
    search = _Search(factors, independent(live, points, multiplier), dependence)
    blocks = [p[i : i + _AT_ONCE] for i in range(0, len(p), _AT_ONCE)]
    return np.concatenate([search.quantiles(block) for block in blocks])


def together(factors: Sequence[FactorShape], angle: Floats) -> Floats:
    """Return n with every factor at its quantile for p = sin(angle)^2; exact."""
    return combine([factor.at_angle(angle) for factor in factors])


class _Search:
    """Finds the angle at which the mixture reaches a probability."""

    def __init__(
        self, factors: Sequence[FactorShape], alone: Distribution, dependence: float
    ) -> None:
        self.factors, self.alone, self.dependence = factors, alone, dependence

    def quantiles(self, p: Floats) -> Floats:
        angle, slope = self._on_nets(p)
        angle = self._polished(p, angle, slope)
        at_end = (p == 0) | (p == 1)
        return together(self.factors, np.where(at_end, np.arcsin(np.sqrt(p)), angle))

    def _polished(self, p: Floats, angle: Floats, slope: Floats) -> Floats:
        left, right = np.zeros_like(p), np.full_like(p, np.pi / 2)
        n = together(self.factors, angle)
        reached = self._mixed(self.alone.below(n), angle)
        for _ in range(_MOST_STEPS):
            left = np.where(reached <= p, angle, left)
            right = np.where(reached >= p, angle, right)
            step = angle + (p - reached) / slope
            moved = np.where((step < left) | (step > right), (left + right) / 2, step)
            n_before, n = n, together(self.factors, moved)
            if np.abs(n - n_before).max() < _SETTLED:
                return moved
            now = self._mixed(self.alone.below(n), moved)
            rise, run = now - reached, moved - angle
            usable = rise * run > 0
            slope = np.where(usable, rise / np.where(usable, run, 1.0), slope)
            angle, reached = moved, now
        return angle

    def _on_nets(self, p: Floats) -> tuple[Floats, Floats]:
        net = np.broadcast_to(np.linspace(0.0, np.pi / 2, _FIRST_NET), (len(p), _FIRST_NET))
        first = self._roughly(net[0])
        left, right, under, over = _around(p, net, np.broadcast_to(first, net.shape))
        for _ in range(_FINER_NETS):
            net = np.linspace(left, right, _FINER_NET, axis=-1)
            left, right, under, over = _around(p, net, self._roughly(net))
        # Where the function is flat, the step must not run away.
        rise = np.maximum(over - under, 1e-12)
        share = np.clip((p - under) / rise, 0.0, 1.0)
        return left + share * (right - left), rise / (right - left)

    def _roughly(self, angle: Floats) -> Floats:
        return self._mixed(self.alone.roughly_below(together(self.factors, angle)), angle)

    def _mixed(self, alone: Floats, angle: Floats) -> Floats:
        return np.asarray((1 - self.dependence) * alone + self.dependence * np.sin(angle) ** 2)


def _around(p: Floats, net: Floats, reached: Floats) -> tuple[Floats, Floats, Floats, Floats]:
    """Return the two neighbours on each row's net between which it reaches its ``p``."""
    at = np.clip((reached <= p[:, None]).sum(axis=1), 1, net.shape[1] - 1)
    rows = np.arange(len(p))
    return net[rows, at - 1], net[rows, at], reached[rows, at - 1], reached[rows, at]
