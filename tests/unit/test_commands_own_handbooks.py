"""An agency's own tables by an option, and surveys made where nobody was named."""

import json
from pathlib import Path

import pytest

from roughness.__main__ import main
from roughness.desk.folder import SurveyFolder
from roughness.desk.identity import NOBODY
from roughness.shelf.places import tables_folder


@pytest.fixture(autouse=True)
def nobody_known(monkeypatch: pytest.MonkeyPatch, tmp_path: Path) -> None:
    monkeypatch.delenv("ROUGHNESS_BY", raising=False)
    monkeypatch.setenv("XDG_CONFIG_HOME", str(tmp_path / "config"))


@pytest.fixture
def own(tmp_path: Path) -> Path:
    folder = tmp_path / "agency"
    folder.mkdir()
    text = (tables_folder() / "cowan-1956.toml").read_text(encoding="utf-8")
    file = folder / "ours.toml"
    file.write_text(text.replace('key = "cowan-1956"', 'key = "ours-2026"'), encoding="utf-8")
    return file


def test_an_own_handbook_is_used_from_its_file_or_its_folder(
    own: Path, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    grades = ["earth", "minor", "gradual", "negligible", "low", "minor"]
    names = ["base", "irregularity", "variation", "obstruction", "vegetation", "meander"]
    factors = {name: {"grade": grade} for name, grade in zip(names, grades, strict=True)}
    file = tmp_path / "e.json"
    file.write_text(json.dumps({"handbook": "ours-2026", "setting": "channel", "factors": factors}))
    for place in (own, own.parent):
        assert main(["estimate", str(file), "--handbook", str(place)]) == 0
        assert json.loads(capsys.readouterr().out)["handbook"]["key"] == "ours-2026"
        assert main(["tables", "ours-2026", "--handbook", str(place)]) == 0
        assert "0.020" in capsys.readouterr().out
    assert main(["estimate", str(file)]) == 2
    assert "ours-2026" in capsys.readouterr().err
    assert main(["estimate", str(file), "--handbook", str(tmp_path / "none.toml")]) == 2
    assert "no such file" in capsys.readouterr().err


def test_a_survey_can_be_made_where_nobody_is_known_but_nothing_is_judged_there(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    listed = tmp_path / "list.csv"
    listed.write_text("reach\nWeir\n")
    assert main(["new", str(tmp_path / "s"), "--from", str(listed)]) == 0
    survey = SurveyFolder(tmp_path / "s")
    assert {line.by for line in survey.trail().lines} == {NOBODY}
    words = ["adopt", str(tmp_path / "s"), "Weir", "--part", "p", "--condition", "c"]
    assert main([*words, "--n", "0.03", "--reason", "r"]) == 2
    assert "--by" in capsys.readouterr().err
