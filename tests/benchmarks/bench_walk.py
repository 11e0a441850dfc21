"""Key press to painted screen in the walk: median and 99th percentile, in milliseconds.

Run as a script::

    python tests/benchmarks/bench_walk.py

Each key is sent to the running application without a terminal; the clock stops when every
message it caused is handled and the screen was composed anew. Kinds of keys: arrows (mark a
row), left and right (move a value), digits (keep a line on the disk, go on), Backspace.
"""

import asyncio
import statistics
import tempfile
import time
from pathlib import Path

from textual.app import App

from roughness.desk.making import new_survey
from roughness.desk.recording import Recorder
from roughness.screens.walk import WalkScreen
from roughness.survey.stream import FlowCondition, Part, Reach
from roughness.trail.data import Gate, SegmentShare

ROUNDS = 20
CONDITION, PART = "design flood", "main channel"
KINDS = {
    "arrow": ("down", "down", "up"),
    "value": ("right", "left"),
    "digit": ("6", "2", "2", "1", "1", "2", "1", "2", "2", "1"),
    "back": ("backspace",) * 10,
}


class OnlyTheWalk(App[None]):
    """The walk without the screens around it."""

    def __init__(self, pen: Recorder) -> None:
        super().__init__()
        self.pen = pen

    def on_mount(self) -> None:
        self.push_screen(WalkScreen(self.pen.survey, self.pen, "Osier bend", PART, CONDITION))


def made(folder: Path) -> Recorder:
    survey = new_survey(folder / "brook", "Runa", reaches=[Reach(reach="Osier bend")])
    pen = Recorder(survey, "Runa")
    pen.add_condition(FlowCondition(condition=CONDITION))
    pen.add_part("Osier bend", Part(part=PART, setting="channel"))
    shares = (
        SegmentShare(name="bed", perimeter_percent=60.0),
        SegmentShare(name="banks", perimeter_percent=40.0),
    )
    gate = Gate(
        part=PART, condition=CONDITION, handbook="usgs-wsp-2339", depth_m=1.4, segments=shares
    )
    pen.set_gate("Osier bend", gate)
    return pen


async def measure(size: tuple[int, int]) -> dict[str, list[float]]:
    found: dict[str, list[float]] = {kind: [] for kind in KINDS}
    with tempfile.TemporaryDirectory() as folder:
        app = OnlyTheWalk(made(Path(folder)))
        async with app.run_test(size=size) as pilot:
            await pilot.pause()
            for _ in range(ROUNDS):
                for kind, keys in KINDS.items():
                    for key in keys:
                        started = time.perf_counter()
                        await pilot._press_keys([key])
                        found[kind].append((time.perf_counter() - started) * 1000)
    return found


def main() -> None:
    for size in ((80, 24), (120, 40)):
        found = asyncio.run(measure(size))
        print(f"{size[0]}x{size[1]}   keys   median ms   99 %")
        for kind, times in found.items():
            ordered = sorted(times)
            worst = ordered[min(len(ordered) - 1, int(len(ordered) * 0.99))]
            print(f"  {kind:7} {len(times):5} {statistics.median(times):10.1f} {worst:7.1f}")


if __name__ == "__main__":
    main()
