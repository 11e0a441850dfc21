"""Normal depths and irregular sections in columns, against loops: ``python bench_hydraulics.py``.

The loops are run on a part of the rows and their time is scaled; scipy's only where it is
installed. The bound for sections is what numpy needs for the same sums with nothing checked,
written by hand into buffers that stay in the cache. Read the ratios: the seconds are those of
the machine.
"""

import math
import sys
import time
from collections.abc import Callable
from importlib import import_module
from importlib.util import find_spec
from itertools import pairwise
from pathlib import Path

import numpy as np
from numpy.typing import NDArray

sys.path.insert(0, str(Path(__file__).resolve().parents[2]))

from roughness.hydraulics.geometry import water_below
from roughness.hydraulics.normal_depth import normal_depth_of_trapezoid

Floats = NDArray[np.float64]
scipy = import_module("scipy.optimize") if find_spec("scipy") else None
DEPTHS, SECTIONS, POINTS, LOOPED = 1_000_000, 100_000, 100, 2_000
ROWS = 128


def seconds(run: Callable[[], object], times: int = 3) -> float:
    best = math.inf
    for _ in range(times):
        start = time.perf_counter()
        run()
        best = min(best, time.perf_counter() - start)
    return best


def trapezoids(rng: np.random.Generator) -> tuple[Floats, Floats, Floats, Floats, Floats]:
    columns = rng.uniform((0.1, 0.5, 0.0, 0.015), (500, 60, 4, 0.15), (DEPTHS, 4)).T
    q, b, z, n = columns
    return (q, b, z, n, 10 ** rng.uniform(-4, -1.5, DEPTHS))


def miss(y: float, q: float, b: float, z: float, n: float, s: float) -> float:
    area, perimeter = (b + z * y) * y, b + 2 * y * math.sqrt(1 + z * z)
    return area * (area / perimeter) ** (2 / 3) * math.sqrt(s) / n - q if y > 0 else -q


def bisected(row: tuple[float, ...]) -> float:
    low, high = 0.0, 100.0
    while high - low > 1e-12 * high:
        middle = (low + high) / 2
        low, high = (middle, high) if miss(middle, *row) < 0 else (low, middle)
    return low


def looped_section(x: list[float], z: list[float], level: float) -> tuple[float, float, float]:
    area = perimeter = width = 0.0
    for (x0, z0), (x1, z1) in pairwise(zip(x, z, strict=True)):
        d0, d1 = level - z0, level - z1
        if d0 <= 0 and d1 <= 0:
            continue
        share = 1.0 if min(d0, d1) >= 0 else max(d0, d1) / abs(d0 - d1)
        run = (x1 - x0) * share
        area += run * (max(d0, 0) + max(d1, 0)) / 2
        perimeter += math.hypot(run, (z1 - z0) * share)
        width += run
    return area, perimeter, width


def by_hand(x: Floats, z: Floats, level: Floats) -> list[tuple[Floats, ...]]:
    found: list[tuple[Floats, ...]] = []
    for i in range(0, len(x), ROWS):
        d = level[i : i + ROWS, None] - z[i : i + ROWS]
        run, rise = np.diff(x[i : i + ROWS]), np.diff(d)
        size = np.abs(d)
        np.maximum(d, 0, out=d)
        depth = d[:, 1:] + d[:, :-1]
        wet = depth / (size[:, 1:] + size[:, :-1])
        width = run * wet
        depth *= width
        run *= run
        rise *= rise
        run += rise
        np.sqrt(run, out=run)
        run *= wet
        found.append((depth.sum(axis=1) / 2, run.sum(axis=1), width.sum(axis=1)))
    return found


def main() -> None:
    rng = np.random.default_rng(1)
    columns = trapezoids(rng)
    tool = seconds(lambda: normal_depth_of_trapezoid(*columns)) / DEPTHS
    rows = [tuple(map(float, row)) for row in zip(*(c[:LOOPED] for c in columns), strict=True)]
    python = seconds(lambda: [bisected(row) for row in rows], 1) / LOOPED
    print(f"normal depths: {DEPTHS:,} in {tool * DEPTHS:.3f} s")
    print(f"  a bisection in plain Python takes {python / tool:.0f} times as long")
    if scipy is not None:
        brent = seconds(lambda: [scipy.brentq(miss, 0, 100, args=row) for row in rows], 1) / LOOPED
        print(f"  a loop over scipy's brentq takes {brent / tool:.0f} times as long")

    x = np.sort(rng.uniform(0, 100, (SECTIONS, POINTS)), axis=1)
    z, level = rng.uniform(0, 5, (SECTIONS, POINTS)), rng.uniform(1, 5, SECTIONS)
    tool = seconds(lambda: water_below(x, z, level)) / SECTIONS
    some = [(x[i].tolist(), z[i].tolist(), float(level[i])) for i in range(LOOPED)]
    python = seconds(lambda: [looped_section(*one) for one in some], 1) / LOOPED
    hand = seconds(lambda: by_hand(x, z, level)) / SECTIONS
    read = seconds(lambda: (x.sum(), z.sum())) / SECTIONS
    print(f"sections: {SECTIONS:,} of {POINTS} points in {tool * SECTIONS:.3f} s")
    print(f"  a loop in plain Python takes {python / tool:.0f} times as long")
    print(f"  numpy by hand takes {hand / tool:.2f}, reading the points {read / tool:.2f} of it")


if __name__ == "__main__":
    main()
