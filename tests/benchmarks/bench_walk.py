"""Key press to painted screen in the walk: median and 99th percentile, in milliseconds.

Run as a script::

    python tests/benchmarks/bench_walk.py

Each key is sent to the running application without a terminal; the clock stops when the last
change it caused was drawn as the bytes that a terminal would get. Kinds of keys: arrows (mark
a row), left and right (move a value), digits (keep a line on the disk, go on), Backspace.
"""

import asyncio
import statistics
import tempfile
import time
from pathlib import Path

from rich.console import RenderableType
from textual._compositor import CompositorUpdate
from textual.app import App
from textual.screen import Screen

from roughness.desk.making import new_survey
from roughness.desk.recording import Recorder
from roughness.screens.walk import WalkScreen
from roughness.survey.stream import FlowCondition, Part, Reach
from roughness.trail.data import Gate, SegmentShare

REACHES = [f"reach {number}" for number in range(1, 21)]
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
        self.pen, self.painted = pen, 0.0

    async def walk(self, reach: str) -> None:
        """Open the walk of another reach."""
        await self.push_screen(WalkScreen(self.pen.survey, self.pen, reach, PART, CONDITION))

    def _display(self, screen: Screen[object], renderable: RenderableType | None) -> None:
        """Draw what a terminal would get, and look at the clock."""
        super()._display(screen, renderable)
        if isinstance(renderable, CompositorUpdate):
            renderable.render_segments(self.console)
            self.painted = time.perf_counter()


def made(folder: Path) -> Recorder:
    survey = new_survey(folder / "brook", "Runa", reaches=[Reach(reach=name) for name in REACHES])
    pen = Recorder(survey, "Runa")
    pen.add_condition(FlowCondition(condition=CONDITION))
    shares = (
        SegmentShare(name="bed", perimeter_percent=60.0),
        SegmentShare(name="banks", perimeter_percent=40.0),
    )
    gate = Gate(
        part=PART, condition=CONDITION, handbook="usgs-wsp-2339", depth_m=1.4, segments=shares
    )
    for name in REACHES:
        pen.add_part(name, Part(part=PART, setting="channel"))
        pen.set_gate(name, gate)
    return pen


async def measure(size: tuple[int, int]) -> dict[str, list[float]]:
    found: dict[str, list[float]] = {kind: [] for kind in KINDS}
    with tempfile.TemporaryDirectory() as folder:
        app = OnlyTheWalk(made(Path(folder)))
        async with app.run_test(size=size) as pilot:
            for name in REACHES:
                await app.walk(name)
                await pilot.pause()
                for kind, keys in KINDS.items():
                    for key in keys:
                        started = time.perf_counter()
                        await pilot.press(key)
                        await pilot.pause()
                        if app.painted > started:
                            found[kind].append((app.painted - started) * 1000)
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
