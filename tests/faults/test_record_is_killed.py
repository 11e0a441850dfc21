"""`record` under kill -9: what exited with 0 is in the trail, which always hangs together."""

import json
import subprocess
import sys
from pathlib import Path

import pytest

from roughness.desk.making import new_survey
from roughness.survey.stream import Reach

if not hasattr(sys, "getwindowsversion"):
    KILLS = 200
else:
    pytest.skip("this test forks and kills", allow_module_level=True)

DOCUMENT = {
    "part": "main channel",
    "condition": "design flood",
    "handbook": "cowan-1956",
    "setting": "channel",
    "factors": {
        "base": {"grade": "earth", "note": "x" * 3000},
        "irregularity": {"grade": "minor"},
        "variation": {"grade": "gradual"},
        "obstruction": {"grade": "negligible"},
        "vegetation": {"grade": "low"},
        "meander": {"grade": "minor"},
    },
}


def test_every_record_that_was_said_to_be_kept_is_there_after_two_hundred_kills(
    tmp_path: Path,
) -> None:
    survey = new_survey(tmp_path / "s", "Ada", reaches=[Reach(reach="Mill weir")]).folder
    file = tmp_path / "estimate.json"
    file.write_text(json.dumps(DOCUMENT))
    program = Path(__file__).with_name("recorder.py")
    words = [sys.executable, str(program), str(survey), str(file), str(KILLS), "7"]
    run = subprocess.run(words, capture_output=True, text=True, check=True, timeout=300)
    report = json.loads(run.stdout.splitlines()[-1])
    assert report["said"] > KILLS / 4
    assert report["there"] > report["said"]
    assert report["short"] == 0 and report["broken"] == 0
