"""Key press to painted screen in a survey of 2,000 reaches, in a real terminal.

Run ``python tests/benchmarks/bench_survey_screen.py [REACHES] [PRESSES]``. The program runs in
a pseudo-terminal of 80x24; the time is taken from the key to the last byte of what it paints
(a pause of 25 ms ends a painting). The first table is taken while the survey is still read.
"""

import fcntl
import os
import pty
import select
import statistics
import struct
import sys
import tempfile
import termios
import time
from collections.abc import Iterable
from pathlib import Path
from random import Random
from typing import Any

from roughness.shelf.handbooks import load_handbook
from roughness.survey.words import FACTORS
from roughness.trail.lines import encoded, hash_of
from roughness.trail.naming import file_name_for

DOWN, PAGE, UP = b"\x1b[B", b"\x1b[6~", b"\x1b[A"
MARK = "›".encode()
QUIET_S = 0.025
PART, CONDITION, HANDBOOK = "main channel", "design flood", "usgs-wsp-2339"
AT, BY, ID = "2026-06-03T18:20:00+02:00", "Bench", "0" * 32


def trail(said: Iterable[tuple[str, dict[str, Any]]]) -> tuple[bytes, str]:
    """Return a trail's bytes and the hash of its first line."""
    lines: list[bytes] = []
    for kind, data in said:
        lines.append(encoded((hash_of(lines[-1]),) if lines else (), AT, BY, kind, data))
    return b"".join(line + b"\n" for line in lines), hash_of(lines[0])


def make_survey(folder: Path, reaches: int) -> None:
    """Write a survey, nine of ten reaches estimated, without waiting for the disk."""
    (folder / "reaches").mkdir(parents=True)
    handbook, random = load_handbook(HANDBOOK), Random(7)
    grades = {f: [g.key for g in handbook.grades("channel", f)] for f in FACTORS[1:]}
    own: list[tuple[str, dict[str, Any]]] = [
        ("begin", {"format": 1, "survey": ID, "name": "Long brook"}),
        ("describe", {"handbook": HANDBOOK}),
        ("flow-condition", {"condition": CONDITION, "growth": "leaf-on", "tolerance_cm": 30.0}),
    ]
    for number in range(reaches):
        name = f"Reach {number + 1:04}"
        said: list[tuple[str, dict[str, Any]]] = [
            ("begin", {"format": 1, "survey": ID, "reach": name}),
            ("part", {"part": PART, "setting": "channel"}),
        ]
        choices: dict[str, dict[str, Any]] = {
            "base": {"grade": "firm-soil", "best": round(random.uniform(0.0255, 0.0315), 4)},
            **{factor: {"grade": random.choice(keys)} for factor, keys in grades.items()},
        }
        place = {"part": PART, "condition": CONDITION, "handbook": HANDBOOK}
        for factor, choice in choices.items() if number % 10 else ():
            what = {"factor": factor, "choice": choice, "handbook_sha256": handbook.sha256}
            said.append(("choose", place | what))
        raw, first = trail(said)
        file = file_name_for(name)
        (folder / "reaches" / f"{file}.jsonl").write_bytes(raw)
        own.append(("reach", {"reach": name, "file": file, "first_line": first}))
    (folder / "survey.jsonl").write_bytes(trail(own)[0])


class Terminal:
    """The program in a pseudo-terminal of 80x24."""

    def __init__(self, folder: Path) -> None:
        self.pid, self.handle = pty.fork()
        if self.pid == 0:
            os.environ |= {"TERM": "xterm-256color", "XDG_CONFIG_HOME": str(folder.parent)}
            command = [sys.executable, "-m", "roughness", str(folder), "--by", BY]
            os.execv(sys.executable, command)
        fcntl.ioctl(self.handle, termios.TIOCSWINSZ, struct.pack("HHHH", 24, 80, 0, 0))

    def painted(self, wait_s: float = 2.0, quiet_s: float = QUIET_S) -> tuple[float, bytes]:
        """Return when the last byte of the next painting came, and its bytes."""
        last, seen = time.perf_counter(), b""
        while select.select([self.handle], [], [], quiet_s if seen else wait_s)[0]:
            seen += os.read(self.handle, 1 << 16)
            last = time.perf_counter()
        return last, seen

    def press(self, key: bytes) -> float:
        """Press a key; return the milliseconds until the screen stood."""
        started = time.perf_counter()
        os.write(self.handle, key)
        return (self.painted()[0] - started) * 1000

    def wait_for(self, text: bytes) -> None:
        """Wait until the screen says something."""
        seen = b""
        while text not in seen:
            seen = seen[-200:] + self.painted(quiet_s=0.001)[1]

    def moved(self, key: bytes) -> float:
        """Press a key; return the milliseconds until the cursor's mark was painted anew."""
        while select.select([self.handle], [], [], 0)[0]:
            os.read(self.handle, 1 << 16)
        started, seen = time.perf_counter(), b""
        os.write(self.handle, key)
        while MARK not in seen and select.select([self.handle], [], [], 5)[0]:
            seen += os.read(self.handle, 1 << 16)
        return (time.perf_counter() - started) * 1000


def told(name: str, times: list[float]) -> str:
    """Return median and 99th percentile in a line."""
    high = sorted(times)[min(len(times) - 1, int(len(times) * 0.99))]
    return f"{name:<34} median {statistics.median(times):6.1f} ms   p99 {high:6.1f} ms"


def main(reaches: int, presses: int) -> None:
    """Make the survey, open it, press keys, print the times."""
    with tempfile.TemporaryDirectory() as place:
        folder = Path(place) / "survey"
        make_survey(folder, reaches)
        started = time.perf_counter()
        terminal = Terminal(folder)
        terminal.wait_for(b"Reach 0001")
        print(f"{reaches} reaches: first lines after {time.perf_counter() - started:.2f} s")
        print(told("Down while reading", [terminal.moved(DOWN) for _ in range(presses // 4)]))
        while terminal.painted(wait_s=1.5, quiet_s=1.5)[1]:
            pass
        print(f"all read after {time.perf_counter() - started - 1.5:.1f} s")
        for name, key in (("Down", DOWN), ("Page Down", PAGE), ("Up", UP)):
            print(told(name, [terminal.press(key) for _ in range(presses)]))
        print(told("w (sort and back)", [terminal.press(b"w") for _ in range(presses // 4)]))
        terminal.press(b"/")
        print(
            told("typing a filter", [terminal.press(key) for key in (b"r", b"e", b"a", b"c", b"h")])
        )
        os.write(terminal.handle, b"\x11")
        os.waitpid(terminal.pid, 0)


if __name__ == "__main__":
    given = [int(word) for word in sys.argv[1:]] + [2000, 200][len(sys.argv) - 1 :]
    main(*given[:2])
