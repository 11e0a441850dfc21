"""The guide's page on sections: its example runs, its table is that of the code."""

import json
import re
from pathlib import Path

import pytest

import roughness
from roughness.__main__ import main
from roughness.hydraulics.composite_relations import RELATIONS

PAGE = (Path(roughness.__file__).parent / "guide" / "sections.md").read_text(encoding="utf-8")


def test_the_example_runs_and_every_n_gives_its_level(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    (example,) = re.findall(r"^```json\n(.*?)^```", PAGE, flags=re.MULTILINE | re.DOTALL)
    file = tmp_path / "section.json"
    file.write_text(example, encoding="utf-8")
    assert main(["section", str(file)]) == 0
    printed = json.loads(capsys.readouterr().out)
    levels = [printed[case]["water_level_m"] for case in ("low", "best", "high")]
    assert levels[0] < levels[1] < levels[2]
    assert all(part["best"]["area_m2"] > 0 for part in printed["parts"])


def test_every_relation_stands_in_the_table_and_no_other() -> None:
    assert re.findall(r"^\| `([a-z-]+)` \|", PAGE, flags=re.MULTILINE) == list(RELATIONS)


def test_the_range_of_relations_that_it_tells_is_what_is_printed(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    document = {
        "trapezoid": {"bottom_width_m": 6, "side_slope": 2},
        "slope": 0.002,
        "depth_m": 1.5,
        "parts": [{"n": 0.03, "segments": [{"to": 0, "n": 0.05}, {"from": 6, "n": 0.08}]}],
    }
    file = tmp_path / "section.json"
    file.write_text(json.dumps(document), encoding="utf-8")
    assert main(["section", str(file)]) == 0
    says = json.loads(capsys.readouterr().out)["findings"][0]["says"]
    assert "0.031 (lotter)" in says and "0.053 (pavlovskii)" in says
    assert "0.031 (`lotter`)" in PAGE and "0.053 (`pavlovskii`)" in " ".join(PAGE.split())
