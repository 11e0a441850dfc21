"""Reading, verifying and folding a trail of 10,000 lines against plain `json.loads` of them.

`python tests/benchmarks/bench_trail.py` prints medians of one run and their ratios.
"""

import json
import statistics
import tempfile
import time
from collections.abc import Callable
from pathlib import Path

from roughness.trail.folding import fold_reach
from roughness.trail.lines import encoded, hash_of
from roughness.trail.reading import read_trail

LINES, ROUNDS = 10_000, 7
AT = "2026-06-03T18:20:00.000+02:00"
GRADES = ("smooth", "minor", "moderate", "severe")


def trail_of(count: int) -> bytes:
    """Return a reach's trail in which one factor is chosen again and again."""
    begin = {"format": 1, "survey": "ab" * 16, "reach": "mill weir"}
    lines = [encoded((), AT, "Ann", "begin", begin)]
    for number in range(count - 1):
        choice = {
            "part": "main channel",
            "condition": f"flood {number % 7}",
            "factor": "irregularity",
            "choice": {"grade": GRADES[number % 4], "note": f"seen from the left bank, {number}"},
            "handbook": "usgs-wsp-2339",
            "handbook_sha256": "c" * 64,
        }
        lines.append(encoded((hash_of(lines[-1]),), AT, "Ann", "choose", choice))
    return b"\n".join(lines) + b"\n"


def median_ms(work: Callable[[], object]) -> float:
    """Return the median time of a piece of work in milliseconds."""
    times = []
    for _ in range(ROUNDS):
        start = time.perf_counter()
        work()
        times.append(time.perf_counter() - start)
    return statistics.median(times) * 1000


def main() -> None:
    """Measure and print."""
    with tempfile.TemporaryDirectory() as folder:
        path = Path(folder) / "mill-weir.jsonl"
        path.write_bytes(trail_of(LINES))
        raw = path.read_bytes().splitlines()
        plain = median_ms(lambda: [json.loads(line) for line in raw])
        read = median_ms(lambda: read_trail(path))
        trail = read_trail(path)
        fold = median_ms(lambda: fold_reach(trail))
        again = median_ms(lambda: read_trail(path, trail))
    print(f"{LINES} lines, {sum(map(len, raw)) / 1e6:.1f} MB, median of {ROUNDS}")
    print(f"json.loads of each line      {plain:7.1f} ms")
    for name, value in (("read and verify", read), ("fold", fold), ("read again, grown", again)):
        print(f"{name:<28} {value:7.1f} ms   {value / plain:.2f}x")


if __name__ == "__main__":
    main()
