"""What a review shows on the command line and in the exported table."""

import csv
import json
from pathlib import Path

import pytest

from roughness.__main__ import main
from roughness.desk.folder import SurveyFolder
from roughness.desk.making import copy_demo
from roughness.desk.recording import Recorder
from roughness.desk.reviewing import Reviewer
from roughness.desk.rows import Row, rows
from roughness.trail.lines import Line

HAY = "Hay meadow"


@pytest.fixture(autouse=True)
def a_person_at_a_fresh_machine(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setenv("XDG_CONFIG_HOME", str(tmp_path / "config"))
    monkeypatch.setenv("ROUGHNESS_BY", "Mo Vale")


@pytest.fixture
def rea(tmp_path: Path) -> Reviewer:
    return Reviewer(Recorder(copy_demo(tmp_path / "demo"), "Rea Quist"))


def row_of(survey: SurveyFolder, part: str = "main channel") -> Row:
    return next(
        row for row in rows(survey) if row.reach.reach == HAY and row.part and row.part.part == part
    )


def reviewed(rea: Reviewer) -> Line:
    """Ask, answer a finding, accept one row and return another; return the acceptance."""
    row = row_of(rea.survey)
    assert row.place is not None
    rea.ask(row.place, "[red]which[/red] bends?", factor="meander")
    asked = next(finding for finding in row.findings if finding.level == "ask")
    rea.answer_finding(row.place, asked, "counted once, see the sheet")
    plain = row_of(rea.survey, "right flood plain").place
    assert plain is not None
    rea.return_(plain, "a value without a word")
    return rea.accept(row_of(rea.survey), overruling="known stream")


def test_show_tells_verdict_questions_and_answers(
    rea: Reviewer, capsys: pytest.CaptureFixture[str]
) -> None:
    reviewed(rea)
    main(["show", str(rea.survey.folder), HAY])
    text = " ".join(capsys.readouterr().out.split())
    assert "Reviewed: accepted main channel at design flood" in text
    assert "overruling what stood against it: known stream" in text
    assert "Reviewed: returned right flood plain at design flood: a value without a word" in text
    assert "Rea Quist: meander: [red]which[/red] bends? (open)" in text
    assert "Rea Quist: counted once, see the sheet" in text


def test_show_as_json_tells_the_same(rea: Reviewer, capsys: pytest.CaptureFixture[str]) -> None:
    line = reviewed(rea)
    main(["show", str(rea.survey.folder), HAY, "--json"])
    place = json.loads(capsys.readouterr().out)["places"][0]
    assert (place["status"], place["reviewed_by"], place["reviewed_at"]) == (
        "accepted", "Rea Quist", line.at,
    )  # fmt: skip
    (question,) = place["questions"]
    assert (question["factor"], question["answers"]) == ("meander", [])
    assert "counted once, see the sheet" in [one["answered"] for one in place["findings"]]


def test_list_shows_the_status_and_only_what_is_open(
    rea: Reviewer, capsys: pytest.CaptureFixture[str]
) -> None:
    before = len(row_of(rea.survey).findings)
    reviewed(rea)
    main(["list", str(rea.survey.folder), "--json"])
    listed = [one for one in json.loads(capsys.readouterr().out) if one["reach"] == HAY]
    by_part = {(one["part"], one["condition"]): one for one in listed}
    channel = by_part["main channel", "design flood"]
    assert channel["status"] == "accepted"
    assert len(channel["open_findings"]) == before - 1
    assert by_part["right flood plain", "design flood"]["status"] == "returned"


def test_check_keeps_an_answered_finding_with_its_answer(
    rea: Reviewer, capsys: pytest.CaptureFixture[str]
) -> None:
    reviewed(rea)
    main(["check", str(rea.survey.folder), "--json"])
    document = json.loads(capsys.readouterr().out)
    assert document["intact"] is True
    answers = [one["answered"] for one in document["findings"] if one["answered"]]
    assert answers == ["counted once, see the sheet"]
    main(["check", str(rea.survey.folder)])
    assert "answered: counted once, see the sheet" in capsys.readouterr().out


def test_export_takes_only_what_is_accepted_where_that_is_wanted(
    rea: Reviewer, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    line = reviewed(rea)
    target = tmp_path / "n.csv"
    main(["export", str(rea.survey.folder), "-o", str(target), "--status", "accepted"])
    assert "not accepted" not in capsys.readouterr().err
    with target.open(encoding="utf-8", newline="") as file:
        accepted = list(csv.DictReader(file))
    assert {cells["status"] for cells in accepted} == {"accepted"}
    (cells,) = [cells for cells in accepted if cells["reach"] == HAY]
    assert (cells["reviewed_by"], cells["reviewed_at"]) == ("Rea Quist", line.at)
    main(["export", str(rea.survey.folder), "-o", str(target)])
    every = len(rows(rea.survey))
    others = every - len(accepted)
    assert f"{others} of {every} rows are not accepted" in capsys.readouterr().err
