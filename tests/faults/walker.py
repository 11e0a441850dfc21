"""A program that walks a part in forked processes and kills them at random moments.

python walker.py SURVEY ROUNDS SEED   reports as JSON what was taken and what is there
"""

import asyncio
import json
import os
import random
import signal
import sys
import time
from pathlib import Path

from textual.app import App

from roughness.desk.folder import SurveyFolder
from roughness.desk.recording import Recorder
from roughness.screens.walk import WalkScreen
from roughness.trail.reading import read_trail

REACH, PART, CONDITION = "Mill weir", "main channel", "design flood"
# Go back to the factor before, take a grade there, go back, take another one.
KEYS = ("backspace", "1", "backspace", "2", "backspace", "3")


class OnlyTheWalk(App[None]):
    """The walk without the screens around it."""

    def __init__(self, folder: Path) -> None:
        super().__init__()
        survey = SurveyFolder(folder)
        self.walk = WalkScreen(survey, Recorder(survey, "Ada"), REACH, PART, CONDITION)

    def on_mount(self) -> None:
        """Open the walk."""
        self.push_screen(self.walk)


async def walk_until_killed(folder: Path, said: int) -> None:
    """Take grade after grade; what the walk shows as taken is told to the parent."""
    app = OnlyTheWalk(folder)
    async with app.run_test(size=(80, 24)) as pilot:
        await pilot.pause()
        os.write(said, b"started\n")
        begin = 2 * random.SystemRandom().randrange(3)
        while True:
            for key in KEYS[begin:] + KEYS[:begin]:
                await pilot.press(key)
                await app.workers.wait_for_complete([])
                state = app.walk.survey.reach_state(REACH)
                os.write(said, state.effective[-1].hash.encode() + b"\n")


def killed(folder: Path, after_s: float) -> list[str]:
    """Return the hashes that a walk had taken before it was killed."""
    reading, writing = os.pipe()
    child = os.fork()
    if not child:
        asyncio.run(walk_until_killed(folder, writing))
    os.close(writing)
    with os.fdopen(reading, "rb", buffering=0) as pipe:
        told = pipe.read(8)  # the walk is on the screen
        time.sleep(after_s)
        os.kill(child, signal.SIGKILL)
        os.waitpid(child, 0)
        rest = told + pipe.readall()
    return [line for line in rest.decode().splitlines()[1:] if len(line) == 64]


def run(folder: Path, rounds: int, seed: int) -> dict[str, int]:
    """Return how many choices were taken, lost, and how often the trail was broken."""
    moments, path = random.Random(seed), SurveyFolder(folder).reach_path(REACH)
    taken = lost = broken = 0
    for _ in range(rounds):
        told = killed(folder, moments.uniform(0.0, 0.4))
        trail = read_trail(path)
        taken += len(set(told))
        lost += sum(name not in trail.by_hash for name in told)
        broken += not trail.intact or trail.to_be_merged
    lines = len(read_trail(path).lines)
    return {"taken": taken, "lines": lines, "lost": lost, "broken": broken}


if __name__ == "__main__":
    where, count, first = sys.argv[1:]
    print(json.dumps(run(Path(where), int(count), int(first))))
