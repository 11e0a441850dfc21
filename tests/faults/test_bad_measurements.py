"""Measurements that no stream has: one sentence with the field, exit status 2, no output."""

import json
from pathlib import Path
from typing import Any

import pytest

from roughness.__main__ import main

STEMS: dict[str, Any] = {
    "counted": [{"number": 40, "diameter_m": 0.1}],
    "area_m2": 450,
    "n_boundary": 0.035,
    "drag": 11,
}
TALLY = {"from_mm": 8, "to_mm": 16, "count": 60}

WRONG: dict[str, tuple[Any, str, str]] = {
    "slope of 0": ({"slope": 0}, "slope", "0 cannot be measured; above 0 is due"),
    "negative slope": ({"slope": -0.01}, "slope", "-0.01 cannot be measured"),
    "slope in percent": ({"slope": 2.5}, "slope", "2 % is 0.02"),
    "radius of 0": ({"hydraulic_radius_m": 0}, "hydraulic_radius_m", "leave out what is unknown"),
    "size in micrometres": ({"d50_mm": 45000}, "d50_mm", "it is meant in millimetres"),
    "d84 below d50": (
        {"d50_mm": 90, "d84_mm": 45},
        "d84_mm",
        "d84_mm 45 is below d50_mm 90; a greater share is finer",
    ),
    "d16 above d90": ({"d16_mm": 90, "d90_mm": 45}, "d90_mm", "is below d16_mm 90"),
    "depth below radius": (
        {"depth_m": 0.5, "hydraulic_radius_m": 1},
        "depth_m",
        "depth_m 0.5 is below hydraulic_radius_m 1",
    ),
    "gradation below 1": ({"gradation": 0.5}, "gradation", "1 or more"),
    "stones in metres": ({"d50_mm": 1e-5}, "d50_mm", "it is meant in millimetres"),
    "text for a number": ({"slope": "0.01"}, "slope", "a number is due"),
    "decimal comma": ({"d50_mm": "4,5"}, "d50_mm", "with a point: 4.5"),
    "boolean": ({"slope": True}, "slope", "true does not fit"),
    "unknown key": ({"d48_mm": 3}, "", "did you mean 'd84_mm'"),
    "unknown setting": ({"setting": "flood plain"}, "setting", "did you mean 'flood-plain'"),
    "one stone": ({"pebble_count_mm": [30]}, "pebble_count_mm", "1 stones are no count"),
    "stone of 0": ({"pebble_count_mm": [30, 0]}, "pebble_count_mm", "a stone of 0 mm"),
    "gap in the tally": (
        {"pebble_tally": [TALLY, TALLY | {"from_mm": 32, "to_mm": 64}]},
        "pebble_tally",
        "do not follow each other",
    ),
    "huge tally": ({"pebble_tally": [TALLY | {"count": 10**30}]}, "pebble_tally", "no tally"),
    "count twice": (
        {"pebble_count_mm": [3, 4], "pebble_tally": [TALLY]},
        "pebble_tally",
        "give one of",
    ),
    "range out of order": (
        {"base": {"low": 0.05, "best": 0.04, "high": 0.06}},
        "base",
        "low, best, high are 0.05, 0.04, 0.06",
    ),
    "range without best": ({"n": {"low": 0.05, "high": 0.06}}, "n.best", "it is missing"),
    "unknown channel type": ({"channel_type": "canyon of lava"}, "channel_type", "prints them all"),
    "channel type of many": ({"channel_type": "earth"}, "channel_type", "name one of"),
    "stems without depth": ({"stems": STEMS}, "stems", "give depth_m too"),
    "stems without drag": (
        {"depth_m": 1, "stems": STEMS | {"drag": 0}},
        "stems.drag",
        "0 cannot be used; above 0",
    ),
    "no stems": ({"depth_m": 1, "stems": STEMS | {"counted": []}}, "stems", "no stems"),
    "stem without width": (
        {"depth_m": 1, "stems": STEMS | {"counted": [{"number": 4, "diameter_m": 0}]}},
        "stems.counted.0",
        "cannot be used",
    ),
    "retardance": ({"retardance": "F"}, "retardance", "one of A, B, C, D, E"),
    "list": ([1, 2], "", "no JSON object"),
}


@pytest.mark.parametrize("name", WRONG)
def test_what_no_stream_has_is_refused_in_one_sentence(
    name: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    given, field, says = WRONG[name]
    file = tmp_path / "c.json"
    file.write_text(json.dumps(given), encoding="utf-8")
    assert main(["crosscheck", str(file)]) == 2
    out, err = capsys.readouterr()
    assert out == "" and err.count("\n") == 1
    assert f"c.json: {field}" in err and says in err


@pytest.mark.parametrize(
    "text", ["", "{", '{"slope": NaN}', '{"slope": 1e999}', '{"slope": 1, "slope": 2}', "null"]
)
def test_text_that_is_no_such_document_is_refused(
    text: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    file = tmp_path / "c.json"
    file.write_text(text, encoding="utf-8")
    assert main(["crosscheck", str(file)]) == 2
    out, err = capsys.readouterr()
    assert out == "" and err.startswith("roughness: ") and err.count("\n") == 1
