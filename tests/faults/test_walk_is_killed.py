"""The walk under kill -9: every grade that it showed as taken is in the trail."""

import json
import subprocess
import sys
from pathlib import Path

import pytest

from roughness.desk.making import new_survey
from roughness.desk.places import place_of
from roughness.desk.recording import Recorder
from roughness.survey.choices import BaseChoice
from roughness.survey.stream import FlowCondition, Part, Reach
from roughness.trail.data import Gate

if hasattr(sys, "getwindowsversion"):
    pytest.skip("this test forks and kills", allow_module_level=True)

KILLS = 200


def test_every_grade_that_was_taken_is_there_after_two_hundred_kills(tmp_path: Path) -> None:
    reach, part, condition = "Mill weir", "main channel", "design flood"
    pen = Recorder(new_survey(tmp_path / "s", "Ada", reaches=[Reach(reach=reach)]), "Ada")
    pen.add_condition(FlowCondition(condition=condition))
    pen.add_part(reach, Part(part=part, setting="channel"))
    pen.set_gate(reach, Gate(part=part, condition=condition, handbook="usgs-wsp-2339"))
    place = place_of(pen.survey, reach, part, condition)
    pen.choose(place, "base", BaseChoice(grade="gravel"))
    program = Path(__file__).with_name("walker.py")
    words = [sys.executable, str(program), str(pen.survey.folder), str(KILLS), "11"]
    run = subprocess.run(words, capture_output=True, text=True, check=True, timeout=600)
    report = json.loads(run.stdout.splitlines()[-1])
    assert report["taken"] > KILLS / 4
    assert report["lines"] > KILLS / 8  # so many kills met a walk that was writing
    assert report["lost"] == 0 and report["broken"] == 0
