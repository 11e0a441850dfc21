"""What the report tells of second people: opinions side by side, signatures found good or bad."""

import json
import re
import shutil
import subprocess
from html import unescape
from pathlib import Path
from typing import Any

import pytest

from roughness.desk.making import new_survey
from roughness.desk.opinions import give_opinion
from roughness.desk.places import place_of
from roughness.desk.recording import Recorder
from roughness.desk.reviewing import Reviewer
from roughness.desk.rows import rows
from roughness.reports.survey_report import survey_report
from roughness.survey.choices import (
    BaseChoice,
    Choice,
    Factors,
    Judgement,
    MeanderChoice,
    ObstructionChoice,
    VegetationChoice,
)
from roughness.survey.stream import FlowCondition, Part, Reach

CHANNEL, FLOOD = "main channel", "design flood"
FACTORS: dict[str, Any] = {
    "base": {"grade": "gravel", "note": "bar at the bend"},
    "irregularity": {"grade": "minor", "note": "seen"},
    "variation": {"grade": "gradual"},
    "obstruction": {"grade": "negligible"},
    "vegetation": {"grade": "medium", "note": "reeds"},
    "meander": {"grade": "minor"},
}
ESTIMATE = {
    "part": CHANNEL,
    "condition": FLOOD,
    "handbook": "usgs-wsp-2339",
    "setting": "channel",
    "factors": FACTORS,
}
SECOND = Judgement(
    handbook="usgs-wsp-2339",
    setting="channel",
    factors=Factors(
        base=BaseChoice(grade="gravel"),
        irregularity=Choice(grade="minor"),
        variation=Choice(grade="gradual"),
        obstruction=ObstructionChoice(grade="negligible"),
        vegetation=VegetationChoice(grade="large"),
        meander=MeanderChoice(grade="minor"),
    ),
)


@pytest.fixture(autouse=True)
def config(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setenv("XDG_CONFIG_HOME", str(tmp_path / "config"))
    monkeypatch.setenv("ROUGHNESS_ALLOWED_SIGNERS", str(tmp_path / "allowed"))


@pytest.fixture
def ada(tmp_path: Path) -> Recorder:
    pen = Recorder(new_survey(tmp_path / "s", "Ada", reaches=[Reach(reach="Weir")]), "Ada")
    pen.add_condition(FlowCondition(condition=FLOOD))
    pen.add_part("Weir", Part(part=CHANNEL, setting="channel"))
    pen.record("Weir", json.dumps(ESTIMATE).encode(), "test")
    return pen


def told(pen: Recorder) -> str:
    page = survey_report(pen.survey, rows(pen.survey)).decode("utf-8")
    return re.sub(r"\s+", " ", unescape(re.sub(r"<[^>]+>", " ", page)))


def test_a_second_opinion_stands_beside_the_first_by_factor(ada: Recorder) -> None:
    assert "Second opinions" not in told(ada)
    place = place_of(ada.survey, "Weir", CHANNEL, FLOOD)
    give_opinion(Recorder(ada.survey, "Bo"), place, SECOND, note="willows <all over>")
    text = told(ada)
    assert "Bo , " in text and "without seeing the first estimate: n 0.074 beside 0.054" in text
    assert "willows <all over>" in text
    assert "n4 vegetation medium, 0.0175 large, 0.0375 +0.020" in text
    assert "1 place with a second opinion" in text and "differ most in the vegetation" in text


@pytest.mark.skipif(shutil.which("ssh-keygen") is None, reason="no ssh-keygen here")
def test_a_signature_is_told_with_what_was_found_of_it(ada: Recorder, tmp_path: Path) -> None:
    key = tmp_path / "key"
    words = ["ssh-keygen", "-q", "-t", "ed25519", "-N", "", "-C", "", "-f", str(key)]
    subprocess.run(words, check=True)
    Reviewer(Recorder(ada.survey, "Bo")).accept(rows(ada.survey)[0], overruling="seen", key=key)
    public = key.with_suffix(".pub").read_text("utf-8")
    assert public.split()[1] in told(ada)
    assert "not verified when this page was made" in told(ada)
    (tmp_path / "allowed").write_text(f'"Bo" {public}', "utf-8")
    assert "verified by the list of keys of whoever made this page" in told(ada)
    assert str(tmp_path) not in told(ada)
    trail = ada.survey.reach_path("Weir")
    trail.write_text(trail.read_text("utf-8").replace('"by": "Bo"', '"by": "Al"'), "utf-8")
    assert "WRONG, it does not fit" in told(ada)
