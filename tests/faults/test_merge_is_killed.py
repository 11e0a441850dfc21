"""A merge that is killed at any moment leaves each trail as it was or as it shall be."""

import json
import shutil
import subprocess
import sys
from pathlib import Path

from roughness.__main__ import main
from roughness.desk.checking import check
from roughness.desk.folder import SurveyFolder
from roughness.desk.making import new_survey
from roughness.desk.recording import Recorder
from roughness.survey.stream import Reach

REACHES = 40


def described(folder: Path, by: str) -> None:
    pen = Recorder(SurveyFolder(folder), by)
    for number in range(REACHES):
        pen.describe_reach(f"reach-{number}", note=f"seen by {by}")
    pen.add_reach(Reach(reach=f"added-by-{by.lower()}"))


def trails(folder: Path) -> dict[str, bytes]:
    return {str(p.relative_to(folder)): p.read_bytes() for p in folder.rglob("*.jsonl")}


def test_each_trail_is_old_or_new_and_merging_again_completes_it(tmp_path: Path) -> None:
    reaches = [Reach(reach=f"reach-{number}") for number in range(REACHES)]
    ann = new_survey(tmp_path / "ann", "Ann", reaches=reaches).folder
    bo = Path(shutil.copytree(ann, tmp_path / "bo"))
    described(ann, "Ann")
    described(bo, "Bo")
    whole = Path(shutil.copytree(ann, tmp_path / "whole"))
    assert main(["merge", str(whole), str(bo), "--json"]) == 0
    old, new, met = trails(ann), trails(whole), set[int]()
    for step in range(5):
        mine = Path(shutil.copytree(ann, tmp_path / f"ann-{step}"))
        begun = {path: path.stat().st_ino for path in mine.rglob("*.jsonl")}
        process = subprocess.Popen([sys.executable, "-m", "roughness", "merge", mine, bo],
                                   stdout=subprocess.PIPE, stderr=subprocess.PIPE)  # fmt: skip
        while process.poll() is None:
            if sum(path.stat().st_ino != was for path, was in begun.items()) > 8 * step:
                break
        process.kill()
        process.communicate()
        now = trails(mine)
        assert all(raw in (old.get(name), new[name]) for name, raw in now.items())
        met.add(sum(raw == new[name] for name, raw in now.items()))
        # The survey names no reach whose trail is not there yet.
        assert check(SurveyFolder(mine)).intact
        assert main(["merge", str(mine), str(bo), "--json"]) == 0
        assert trails(mine) == new
    assert any(0 < count < len(new) for count in met), "no kill met the merge at work"


def test_a_disk_that_takes_nothing_leaves_every_trail_as_it_was(tmp_path: Path) -> None:
    ann = new_survey(tmp_path / "ann", "Ann", reaches=[Reach(reach="weir")]).folder
    bo = Path(shutil.copytree(ann, tmp_path / "bo"))
    Recorder(SurveyFolder(ann), "Ann").describe_reach("weir", note="x" * 3000)
    Recorder(SurveyFolder(bo), "Bo").describe_reach("weir", note="y" * 3000)
    old = trails(ann)
    limited = (
        "import resource, signal, sys; signal.signal(signal.SIGXFSZ, signal.SIG_IGN);"
        "resource.setrlimit(resource.RLIMIT_FSIZE, (4096, 4096));"
        "from roughness.__main__ import main; sys.exit(main(sys.argv[1:]))"
    )
    words = [sys.executable, "-c", limited, "merge", str(ann), str(bo)]
    run = subprocess.run(words, capture_output=True, text=True, check=False)
    assert run.returncode == 2
    assert "not kept" in run.stderr and len(run.stderr.splitlines()) == 1
    assert trails(ann) == old
    assert not list(ann.rglob("*.part"))
    assert main(["merge", str(ann), str(bo)]) == 0
    assert json.loads((ann / "reaches" / "weir.jsonl").read_bytes().splitlines()[-1])["prev"]
