"""One spread, warm, against sampling with numpy, in one run: ``python bench_spread.py``.

The sampler draws the live factors 20,000 times from numpy's triangular generator and takes
the five percentiles; its own error is some hundred times the spread's. Read the ratios: the
milliseconds are those of the machine. Below 1 the spread is faster.
"""

import sys
import time
from collections.abc import Callable
from functools import partial
from pathlib import Path

import numpy as np
from numpy.typing import NDArray

sys.path.insert(0, str(Path(__file__).resolve().parents[2]))

from roughness.additive import spread

DRAWS, REPETITIONS = 20_000, 500
LOW = np.array([0.020, 0.001, 0.0, 0.002, 0.004, 1.0])
BEST = np.array([0.025, 0.004, 0.003, 0.005, 0.010, 1.15])
HIGH = np.array([0.032, 0.008, 0.006, 0.012, 0.022, 1.3])
LIVE = {
    "all six": (0, 1, 2, 3, 4, 5),
    "five adding": (0, 1, 2, 3, 4),
    "three adding": (0, 3, 4),
    "two adding": (0, 4),
    "two adding, multiplier": (0, 4, 5),
    "one adding, multiplier": (0, 5),
    "one adding": (4,),
    "multiplier": (5,),
}
Columns = tuple[NDArray[np.float64], NDArray[np.float64], NDArray[np.float64]]


def with_live(live: tuple[int, ...]) -> Columns:
    """Return the example with all but the live factors set to their best value."""
    mask = np.isin(np.arange(6), live)
    return np.where(mask, LOW, BEST), BEST, np.where(mask, HIGH, BEST)


def sampled(columns: Columns, rng: np.random.Generator) -> NDArray[np.float64]:
    """Return the five percentiles by drawing only the factors that have a range."""
    drawn = [
        rng.triangular(a, c, b, DRAWS) if b > a else c for a, c, b in zip(*columns, strict=True)
    ]
    return np.asarray(np.percentile(sum(drawn[:5]) * drawn[5], [5, 16, 50, 84, 95]))


def alternated(first: Callable[[], object], second: Callable[[], object]) -> NDArray[np.float64]:
    """Return milliseconds of both, (2, repetitions), taken in turns so that load hits both."""
    times = np.empty((2, REPETITIONS))
    for _ in range(20):
        first(), second()
    for i in range(REPETITIONS):
        for row, run in enumerate((first, second)):
            start = time.perf_counter()
            run()
            times[row, i] = (time.perf_counter() - start) * 1e3
    return times


def main() -> None:
    """Print a table of medians, 99th percentiles and their ratios."""
    rng = np.random.default_rng(7)
    print(f"{'live factors':24} {'spread ms':>16} {'20,000 draws ms':>16} {'ratio':>11}")
    print(f"{'':24} {'median':>9}{'p99':>7} {'median':>9}{'p99':>7} {'median':>6}{'p99':>5}")
    for name, live in LIVE.items():
        columns = with_live(live)
        times = alternated(partial(spread, *columns), partial(sampled, columns, rng))
        (ours, theirs), (ours99, theirs99) = np.percentile(times, [50, 99], axis=1)
        print(
            f"{name:24} {ours:9.3f}{ours99:7.2f} {theirs:9.3f}{theirs99:7.2f} "
            f"{ours / theirs:6.2f}{ours99 / theirs99:5.1f}"
        )


if __name__ == "__main__":
    main()
