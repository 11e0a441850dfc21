"""A program that forks `roughness record` and kills it at random moments.

python recorder.py SURVEY FILE ROUNDS SEED   reports as JSON what was said and what is there
"""

import io
import json
import os
import random
import signal
import sys
import time
from pathlib import Path

from roughness.__main__ import main
from roughness.trail.naming import file_name_for, reach_trail
from roughness.trail.reading import read_trail

REACH = "Mill weir"


def record_until_killed(survey: str, document: bytes, said: int) -> None:
    """Record again and again; each exit status 0 is told to the parent as one byte."""
    sys.stdout = io.StringIO()
    while True:
        sys.stdin = io.TextIOWrapper(io.BytesIO(document))
        if main(["record", survey, REACH, "-", "--by", "Ada"]) == 0:
            os.write(said, b".")


def killed(survey: str, document: bytes, after_s: float) -> int:
    """Return how many records a process said to be kept before it was killed."""
    reading, writing = os.pipe()
    child = os.fork()
    if not child:
        record_until_killed(survey, document, writing)
    os.close(writing)
    time.sleep(after_s)
    os.kill(child, signal.SIGKILL)
    os.waitpid(child, 0)
    with os.fdopen(reading, "rb") as pipe:
        return len(pipe.read())


def run(survey: str, document: bytes, rounds: int, seed: int) -> dict[str, int]:
    """Return what was said to be kept, what is there, and how often a trail was broken."""
    moments, path = random.Random(seed), reach_trail(Path(survey), file_name_for(REACH))
    said = broken = short = 0
    there = sum(line.kind == "estimate" for line in read_trail(path).lines)
    for _ in range(rounds):
        told = killed(survey, document, moments.uniform(0.0, 0.04))
        trail = read_trail(path)
        now = sum(line.kind == "estimate" for line in trail.lines)
        said, short, there = said + told, short + (now < there + told), now
        broken += not trail.intact or trail.to_be_merged
    return {"said": said, "there": there, "short": short, "broken": broken}


if __name__ == "__main__":
    where, file, count, first = sys.argv[1:]
    # Everything a record needs is loaded once, so that the kills meet the writing itself.
    raw = Path(file).read_bytes()
    main(["record", where, REACH, file, "--by", "Ada"])
    sys.stdout.write("\n" + json.dumps(run(where, raw, int(count), int(first))))
