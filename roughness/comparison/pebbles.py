"""Grain sizes from counted stones, with the error that comes from counting so few.

A percentile is read off the cumulative curve, straight between points over the logarithm of
size. Its sampling error follows from the binomial distribution: of N stones, the share finer
than the true d84 is 84 % with a standard error of sqrt(0.84 * 0.16 / N); the limits are the
sizes that the curve has at 84 % minus and plus 1.96 of these. Common practice, no source.
What the error of the person is, who picks the stones, is not in it.
"""

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Final

import numpy as np
from numpy.typing import ArrayLike

from roughness.comparison.constants import Numbers, numbers
from roughness.errors import InputError

PERCENTS: Final = (16, 50, 65, 75, 84, 90)
_NORMAL_95: Final = 1.96
SMALLEST_MM: Final = 1e-4
LARGEST_MM: Final = 20_000.0
_MOST_STONES: Final = 1_000_000


@dataclass(frozen=True, slots=True)
class Percentile:
    """One grain size of a count, mm; None where the count does not reach that far."""

    percent: int
    mm: float | None
    low_mm: float | None
    high_mm: float | None
    """Limits within which the size of the whole bed lies in 95 of 100 such counts."""


@dataclass(frozen=True, slots=True)
class PebbleCount:
    """The result of a count."""

    stones: int
    percentiles: tuple[Percentile, ...]

    def size_m(self, percent: int) -> float:
        """Return a size in m, NaN where the count does not tell it."""
        mm = next(p.mm for p in self.percentiles if p.percent == percent)
        return float("nan") if mm is None else mm / 1000


@dataclass(frozen=True, slots=True)
class _Curve:
    log_size: Numbers
    finer: Numbers
    """Share finer, 0 to 1, ascending."""

    def size(self, share: float, finest: float | None, coarsest: float) -> float | None:
        """Return the size at a share finer; the ends for shares that the curve does not reach."""
        if share < self.finer[0]:
            return finest
        if share > self.finer[-1]:
            return coarsest
        return float(np.exp(np.interp(share, self.finer, self.log_size)))


def from_stones(sizes_mm: ArrayLike) -> PebbleCount:
    """Return the sizes of a count in which every stone was measured.

    The stone of rank i among N stands at (i - 0.5)/N of the curve.

    Parameters
    ----------
    sizes_mm : sequence of float
        Middle axes, mm, in any order; two or more.

    Raises
    ------
    InputError
        Fewer than two stones, or a size that no stone has.

    >>> count = from_stones([8, 11, 16, 22, 32, 45, 64, 90])
    >>> round(count.percentiles[1].mm, 1)
    26.5
    """
    sizes = np.sort(numbers(sizes_mm).ravel())
    if len(sizes) < 2:
        raise InputError(f"{len(sizes)} stones are no count", wanted="100 or more are usual")
    _refuse_no_stones(sizes)
    finer = (np.arange(len(sizes)) + 0.5) / len(sizes)
    curve = _Curve(np.log(sizes), finer)
    return _read(curve, len(sizes), float(sizes[0]), float(sizes[-1]))


def from_classes(
    from_mm: Sequence[float], to_mm: Sequence[float], counts: Sequence[int]
) -> PebbleCount:
    """Return the sizes of a count tallied by size class.

    Parameters
    ----------
    from_mm, to_mm : sequence of float
        Limits of each class, mm, ascending, each beginning where the one before ends. The
        first may begin at 0 ("finer than"): sizes inside it are not told.
    counts : sequence of int
        Stones in each class.

    Raises
    ------
    InputError
        Classes with gaps or out of order, counts below 0, fewer than two stones.

    >>> count = from_classes([0, 8, 16, 32], [8, 16, 32, 64], [10, 20, 40, 30])
    >>> round(count.percentiles[1].mm, 2), count.stones
    (22.63, 100)
    """
    edges = _edges(from_mm, to_mm)
    stones = sum(counts)
    if any(n < 0 for n in counts) or not 2 <= stones <= _MOST_STONES:
        raise InputError(
            f"{stones} stones are no tally",
            wanted="counts of 0 or more by class, 100 or more in all",
        )
    finer = np.concatenate([[0.0], np.cumsum(counts) / stones])
    _refuse_no_stones(edges[1:])
    # Empty classes at both ends are no part of the curve; a first class from 0 has no size to
    # begin at.
    first = max(int(np.flatnonzero(finer <= 0)[-1]), int(edges[0] == 0))
    last = int(np.argmax(finer >= 1.0))
    curve = _Curve(np.log(edges[first : last + 1]), finer[first : last + 1])
    finest = float(edges[first]) if finer[first] == 0 else None
    return _read(curve, stones, finest, float(edges[last]))


def _edges(from_mm: Sequence[float], to_mm: Sequence[float]) -> Numbers:
    lower, upper = numbers(from_mm), numbers(to_mm)
    in_order = (
        len(lower) > 0
        and lower[0] >= 0
        and (lower < upper).all()
        and (lower[1:] == upper[:-1]).all()
    )
    if not in_order:
        raise InputError(
            "the size classes do not follow each other",
            wanted="each begins where the one before ends, from fine to coarse",
        )
    return np.concatenate([lower[:1], upper])


def _refuse_no_stones(sizes: Numbers) -> None:
    wrong = sizes[~((sizes >= SMALLEST_MM) & (sizes <= LARGEST_MM))]
    if len(wrong):
        raise InputError(
            f"a stone of {wrong[0]:g} mm", wanted=f"sizes of {SMALLEST_MM:g} to {LARGEST_MM:g} mm"
        )


def _read(curve: _Curve, stones: int, finest: float | None, coarsest: float) -> PebbleCount:
    found = []
    for percent in PERCENTS:
        share = percent / 100
        error = _NORMAL_95 * np.sqrt(share * (1 - share) / stones)
        at = [curve.size(s, finest, coarsest) for s in (share, share - error, share + error)]
        found.append(Percentile(percent, *at))
    return PebbleCount(stones, tuple(found))
