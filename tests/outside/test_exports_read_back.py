"""Exports read by readers that are not ours, against what the survey itself says.

CSV: the rules of RFC 4180 (sections 2.1 to 2.7) on the bytes, and Python's csv module.
Table Schema: https://specs.frictionlessdata.io/table-schema/ (fields with name and type,
types "string", "number", "any"; missingValues). JSON: RFC 8259 through Python's json module.
"""

import csv
import io
import json
import random
import re
from pathlib import Path
from typing import Any

import pytest

from roughness.__main__ import main

# RFC 4180, section 2, as one expression: fields with or without quotes, CRLF after each record.
_FIELD = r'(?:"(?:[^"]|"")*"|[^",\r\n]*)'
RFC_4180 = re.compile(rf"(?:{_FIELD}(?:,{_FIELD})*\r\n)+")
# Table Schema, "number": digits with an optional decimal point and exponent.
NUMBER = re.compile(r"-?\d+(\.\d+)?([eE][+-]?\d+)?")

NOTES = [
    'a "quoted" word',
    "two\nlines",
    "CRLF\r\nhere",
    "comma, semicolon; tab\there",
    "",
    "水 🌾",
]


@pytest.fixture(scope="module")
def survey(tmp_path_factory: pytest.TempPathFactory) -> Path:
    folder = tmp_path_factory.mktemp("exports")
    draw = random.Random(4180)
    names = [f"reach {i}, {draw.choice('äß水🌳')}" for i in range(12)]
    text = io.StringIO()
    writer = csv.writer(text)
    writer.writerow(["reach", "from", "to"])
    writer.writerows([name, 100 * i + draw.random(), 100 * (i + 1)] for i, name in enumerate(names))
    (folder / "reaches.csv").write_text(text.getvalue(), encoding="utf-8", newline="")
    by = ["--by", "Ann Reeve"]
    made = ["new", str(folder / "s"), "--from", str(folder / "reaches.csv"), *by]
    assert main(made) == 0
    for i, name in enumerate(names[:-2]):
        document = estimate(NOTES[i % len(NOTES)], 0.026 + 0.005 * draw.random())
        (folder / "e.json").write_text(json.dumps(document), encoding="utf-8")
        assert main(["record", str(folder / "s"), name, str(folder / "e.json"), *by]) == 0
    for file in ("n.csv", "n.json"):
        assert main(["export", str(folder / "s"), "-o", str(folder / file), *by]) == 0
    return folder


def estimate(note: str, base: float) -> dict[str, Any]:
    return {
        "handbook": "usgs-wsp-2339",
        "setting": "channel",
        "part": "main channel",
        "condition": "design flood",
        "factors": {
            "base": {"grade": "firm-soil", "best": base, "note": note},
            "irregularity": {"grade": "minor"},
            "variation": {"grade": "gradual"},
            "obstruction": {"grade": "negligible"},
            "vegetation": {"grade": "medium"},
            "meander": {"grade": "minor"},
        },
    }


def test_the_csv_file_obeys_rfc_4180(survey: Path) -> None:
    text = (survey / "n.csv").read_bytes().decode("utf-8")
    assert RFC_4180.fullmatch(text)
    assert not text.startswith("\ufeff")


def test_csv_and_json_say_the_same_to_the_last_bit(survey: Path) -> None:
    rows = json.loads((survey / "n.json").read_text("utf-8"))["rows"]
    with (survey / "n.csv").open(encoding="utf-8", newline="") as file:
        read = list(csv.DictReader(file, strict=True))
    assert len(read) == len(rows) == 12
    for cells, row in zip(read, rows, strict=True):
        for name, value in row.items():
            if value is None:
                assert cells[name] == ""
            elif isinstance(value, float):
                assert float(cells[name]) == value
            else:
                assert cells[name] == value


def test_numbers_are_those_of_the_list_and_of_the_sum_by_hand(
    survey: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    main(["list", str(survey / "s"), "--json"])
    listed = json.loads(capsys.readouterr().out)
    rows = json.loads((survey / "n.json").read_text("utf-8"))["rows"]
    for ours, row in zip(listed, rows, strict=True):
        assert ours["reach"] == row["reach"]
        if ours["n"]:
            assert [ours["n"][k] for k in ("low", "best", "high")] == [
                row["n_low"], row["n_best"], row["n_high"],
            ]  # fmt: skip
            bests = [row[f"{f}_value"] for f in ("base", "irregularity", "variation")]
            bests += [row["obstruction_value"], row["vegetation_value"]]
            assert row["n_best"] == pytest.approx(sum(bests) * row["meander_value"], rel=1e-14)
            assert row["n_low"] <= row["p05"] <= row["p50"] <= row["p95"] <= row["n_high"]


def test_every_cell_fits_the_type_that_the_table_schema_gives_its_column(survey: Path) -> None:
    schema = json.loads((survey / "n.csv.schema.json").read_text("utf-8"))
    types = {field["name"]: field["type"] for field in schema["fields"]}
    assert set(types.values()) <= {"string", "number", "any"}
    with (survey / "n.csv").open(encoding="utf-8", newline="") as file:
        reader = csv.DictReader(file, strict=True)
        assert list(reader.fieldnames or ()) == list(types)
        for cells in reader:
            for name, cell in cells.items():
                if types[name] == "number" and cell not in schema["missingValues"]:
                    assert NUMBER.fullmatch(cell), (name, cell)
