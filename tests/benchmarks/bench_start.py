"""How long a whole process takes, against a bare interpreter in the same run.

    python tests/benchmarks/bench_start.py

Aims: ``--version`` at most 3 times, ``estimate`` at most 20 times the time of
``python -c pass``. The three are run in turn, so that a busy moment meets them all; medians
are compared. Compiled modules are kept in a folder of their own, as an installed program
has them; the first turn fills it and does not count.
"""

import json
import os
import statistics
import subprocess
import sys
import tempfile
import time
from pathlib import Path

TURNS = 21
AIMS = {"--version": 3.0, "estimate": 20.0}
ROOT = Path(__file__).parents[2]
ESTIMATE = {
    "handbook": "usgs-wsp-2339",
    "setting": "channel",
    "factors": {
        "base": {"grade": "firm-soil"},
        "irregularity": {"grade": "minor"},
        "variation": {"grade": "gradual"},
        "obstruction": {"blocked_percent": 8},
        "vegetation": {"grade": "small"},
        "meander": {"sinuosity": 1.3},
    },
}


def seconds(words: list[str], environment: dict[str, str]) -> float:
    """Return the time of one whole process."""
    started = time.perf_counter()
    subprocess.run([sys.executable, *words], env=environment, check=True, stdout=subprocess.DEVNULL)
    return time.perf_counter() - started


def main() -> None:
    """Measure and print medians and ratios."""
    with tempfile.TemporaryDirectory() as folder:
        file = Path(folder) / "estimate.json"
        file.write_text(json.dumps(ESTIMATE), encoding="utf-8")
        environment = {k: v for k, v in os.environ.items() if k != "PYTHONDONTWRITEBYTECODE"}
        environment |= {"PYTHONPATH": str(ROOT), "PYTHONPYCACHEPREFIX": str(Path(folder) / "pyc")}
        commands = {
            "bare": ["-c", "pass"],
            "--version": ["-m", "roughness", "--version"],
            "estimate": ["-m", "roughness", "estimate", str(file)],
        }
        turns = [
            {name: seconds(words, environment) for name, words in commands.items()}
            for _ in range(TURNS + 1)
        ][1:]
    medians = {name: statistics.median(turn[name] for turn in turns) for name in commands}
    print(f"{TURNS} turns; bare interpreter {medians['bare'] * 1e3:.1f} ms (median)")
    for name, aim in AIMS.items():
        ratio = medians[name] / medians["bare"]
        print(f"{name:<10} {medians[name] * 1e3:6.1f} ms, {ratio:5.1f} x bare (aim {aim:.0f} x)")


if __name__ == "__main__":
    main()
