"""Programs that write to a trail, for tests that run two of them or kill them.

python writer.py append SURVEY FILE NAME COUNT   append COUNT lines
python writer.py killed SURVEY ROUNDS SEED       kill appending processes, report as JSON
python writer.py hold SURVEY                     hold the lock until killed
python writer.py limited SURVEY FILE BYTES       append until no file may grow further
"""

import json
import os
import random
import resource
import signal
import sys
import time
from pathlib import Path

from roughness.errors import RecordError
from roughness.trail.locking import SurveyLock
from roughness.trail.naming import reach_trail
from roughness.trail.reading import read_trail
from roughness.trail.writing import append, begin

AT = "2026-06-03T18:20:00+02:00"
BEGIN = {"format": 1, "survey": "ab" * 16, "reach": "mill weir"}
LINES_A_TRAIL = 200


def choice(number: int) -> dict[str, object]:
    note = f"number {number} " + "x" * (number * 37 % 600)
    return {
        "part": "main channel",
        "condition": "design flood",
        "factor": "irregularity",
        "choice": {"grade": "minor", "note": note},
        "handbook": "ours",
        "handbook_sha256": "c" * 64,
    }


def append_lines(survey: Path, file: str, by: str, count: int) -> None:
    """Append, saying each hash on standard output after it was kept."""
    path, lock, known = reach_trail(survey, file), SurveyLock(survey, wait_s=30), None
    for number in range(count):
        kept = append(path, "choose", choice(number), by=by, at=AT, lock=lock, known=known)
        known = kept.trail
        os.write(1, kept.line.hash.encode() + b"\n")


def kill_writers(survey: Path, rounds: int, seed: int) -> None:
    """Fork a writer, kill it after a random moment, look whether all it said is there."""
    moments = random.Random(seed)
    said, lost, broken, torn = 0, 0, 0, 0
    for number in range(rounds):
        file = f"r{number // 10}"
        if number % 10 == 0:
            begin(reach_trail(survey, file), BEGIN, by="Ann", at=AT, lock=SurveyLock(survey))
        told = killed_writer(survey, file, moments.uniform(0, 0.03))
        trail = read_trail(reach_trail(survey, file))
        said += len(told)
        lost += sum(name not in trail.by_hash for name in told)
        broken += not trail.intact or trail.to_be_merged
        torn += bool(trail.torn)
    print(json.dumps({"said": said, "lost": lost, "broken": broken, "torn": torn}))


def killed_writer(survey: Path, file: str, after_s: float) -> list[str]:
    """Return what a writer said to be kept before it was killed."""
    reading, writing = os.pipe()
    child = os.fork()
    if not child:
        os.dup2(writing, 1)
        append_lines(survey, file, "Ann", LINES_A_TRAIL)
        os._exit(0)
    os.close(writing)
    time.sleep(after_s)
    os.kill(child, signal.SIGKILL)
    os.waitpid(child, 0)
    with os.fdopen(reading, "rb") as pipe:
        return pipe.read().decode().split()


def hold(survey: Path) -> None:
    """Hold the lock until killed."""
    with SurveyLock(survey).held("Bo", AT):
        print("held", flush=True)
        time.sleep(60)


def append_until_refused(survey: Path, file: str, limit: int) -> None:
    """Append while no file may grow beyond ``limit`` bytes; say what was refused."""
    resource.setrlimit(resource.RLIMIT_FSIZE, (limit, limit))
    try:
        append_lines(survey, file, "Ann", LINES_A_TRAIL)
    except RecordError as error:
        print(type(error).__name__, error)


if __name__ == "__main__":
    verb, where, *more = sys.argv[1:]
    match verb:
        case "append":
            append_lines(Path(where), more[0], more[1], int(more[2]))
        case "killed":
            kill_writers(Path(where), int(more[0]), int(more[1]))
        case "hold":
            hold(Path(where))
        case "limited":
            append_until_refused(Path(where), more[0], int(more[1]))
