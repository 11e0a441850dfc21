"""The table of n as files: columns, cells, what goes along, and what the survey notes."""

import csv
import io
import json
import stat
from pathlib import Path
from typing import Any

import pytest

from roughness.__main__ import main

# The order that models rely on.
COLUMNS = [
    "survey", "stream", "reach", "part", "setting", "condition", "growth", "from", "to",
    "part_from", "part_to", "n_low", "n_best", "n_high", "p05", "p16", "p50", "p84", "p95",
    "n_adopted", "adopted_reason", "status", "visited", "estimated_by", "estimated_at",
    "reviewed_by", "reviewed_at", "open_findings", "handbook", "handbook_sha256",
    "trail_head", "base_grade", "base_value", "base_note", "irregularity_grade",
    "irregularity_value", "irregularity_note", "variation_grade", "variation_value",
    "variation_note", "obstruction_grade", "obstruction_value", "obstruction_note",
    "vegetation_grade", "vegetation_value", "vegetation_note", "meander_grade",
    "meander_value", "meander_note",
]  # fmt: skip
FACTORS: dict[str, Any] = {
    "base": {"grade": "firm-soil", "note": '=1+1, "so" it\nis'},
    "irregularity": {"grade": "minor"},
    "variation": {"grade": "gradual"},
    "obstruction": {"blocked_percent": 3},
    "vegetation": {"grade": "medium"},
    "meander": {"grade": "minor"},
}
PLACED = {
    "handbook": "usgs-wsp-2339",
    "setting": "channel",
    "part": "main channel",
    "condition": "design flood",
    "factors": FACTORS,
}


@pytest.fixture(autouse=True)
def a_person_at_a_fresh_machine(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setenv("XDG_CONFIG_HOME", str(tmp_path / "config"))
    monkeypatch.setenv("ROUGHNESS_BY", "Ann Reeve")


@pytest.fixture
def survey(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> Path:
    (tmp_path / "reaches.csv").write_text("reach,from\nWillow bend,0.1\nFord,7\n", "utf-8")
    folder = tmp_path / "survey"
    words = ["new", str(folder), "--from", str(tmp_path / "reaches.csv"), "--stream", "Otter"]
    assert main(words) == 0
    assert record(folder, tmp_path, "Willow bend", PLACED) == 0
    capsys.readouterr()
    return folder


def record(survey: Path, tmp_path: Path, reach: str, document: dict[str, Any]) -> int:
    (tmp_path / "estimate.json").write_text(json.dumps(document), encoding="utf-8")
    return main(["record", str(survey), reach, str(tmp_path / "estimate.json")])


def exported(survey: Path, target: Path, *options: str) -> bytes:
    assert main(["export", str(survey), "-o", str(target), *options]) == 0
    return target.read_bytes()


def cells(raw: bytes) -> list[dict[str, str]]:
    return list(csv.DictReader(io.StringIO(raw.decode("utf-8"), newline="")))


def test_the_columns_are_the_agreed_ones_in_their_order(survey: Path, tmp_path: Path) -> None:
    raw = exported(survey, tmp_path / "n.csv")
    assert raw.split(b"\r\n")[0].decode() == ",".join(COLUMNS)
    document = json.loads(exported(survey, tmp_path / "n.json"))
    assert all(list(row) == COLUMNS for row in document["rows"])
    schema = json.loads((tmp_path / "n.csv.schema.json").read_text("utf-8"))
    assert [field["name"] for field in schema["fields"]] == COLUMNS
    assert schema["missingValues"] == [""]


def test_cells_have_full_precision_and_unknown_ones_are_empty(survey: Path, tmp_path: Path) -> None:
    willow, ford = cells(exported(survey, tmp_path / "n.csv"))
    assert float(willow["n_low"]) == pytest.approx(0.036, abs=1e-15)
    assert float(willow["n_high"]) == pytest.approx(0.066, abs=1e-15)
    assert willow["from"] == "0.1" and willow["to"] == ""
    assert willow["status"] == "estimated" and willow["n_adopted"] == willow["n_best"]
    assert (willow["base_grade"], willow["base_value"]) == ("firm-soil", "0.0285")
    assert willow["obstruction_grade"] == "negligible"
    assert willow["estimated_by"] == "Ann Reeve" and len(willow["trail_head"]) == 64
    assert willow["reviewed_by"] == ""
    assert ford["status"] == "unvisited"
    assert {ford[name] for name in ("part", "n_best", "n_adopted", "handbook", "base_grade")} == {
        ""
    }


def test_a_text_that_looks_like_a_formula_gets_one_apostrophe_in_csv_alone(
    survey: Path, tmp_path: Path
) -> None:
    note = FACTORS["base"]["note"]
    assert cells(exported(survey, tmp_path / "n.csv"))[0]["base_note"] == f"'{note}"
    document = json.loads(exported(survey, tmp_path / "n.json"))
    assert document["rows"][0]["base_note"] == note


@pytest.mark.parametrize("start", ["=", "+", "-", "@", "\t", "\r"])
def test_every_sign_that_starts_a_formula_is_caught(
    start: str, survey: Path, tmp_path: Path
) -> None:
    base = {"grade": "firm-soil", "note": f"{start}1"}
    record(survey, tmp_path, "Ford", PLACED | {"factors": FACTORS | {"base": base}})
    assert cells(exported(survey, tmp_path / "n.csv"))[1]["base_note"].startswith(f"'{start}")


def test_control_and_direction_signs_cannot_act_on_who_reads_the_file(
    survey: Path, tmp_path: Path
) -> None:
    base = {"grade": "firm-soil", "note": "a\x1b[2Jb\u202ec\0d"}
    record(survey, tmp_path, "Ford", PLACED | {"factors": FACTORS | {"base": base}})
    row = cells(exported(survey, tmp_path / "n.csv"))[1]
    assert row["base_note"] == "a\\u001b[2Jb\\u202ec\\u0000d"
    raw = exported(survey, tmp_path / "n.json")
    assert raw.isascii() and json.loads(raw)["rows"][1]["base_note"] == base["note"]


def test_the_same_state_gives_the_same_bytes(survey: Path, tmp_path: Path) -> None:
    for ending in ("csv", "json"):
        first = exported(survey, tmp_path / f"first.{ending}")
        assert exported(survey, tmp_path / f"second.{ending}") == first
    schemas = [(tmp_path / f"{name}.csv.schema.json").read_bytes() for name in ("first", "second")]
    assert schemas[0] == schemas[1]


def test_the_export_says_what_it_is_and_warns(survey: Path, tmp_path: Path) -> None:
    about = json.loads(exported(survey, tmp_path / "n.json"))["about"]
    assert (about["survey"], about["stream"]) == ("survey", "Otter")
    assert about["made_with"].startswith("roughness ")
    assert any("licensed practitioner" in caution for caution in about["cautions"])
    assert [book["key"] for book in about["handbooks"]] == ["usgs-wsp-2339"]
    assert len(about["handbooks"][0]["sha256"]) == 64
    assert "people" not in {column["name"] for column in about["columns"]}
    exported(survey, tmp_path / "n.csv")
    schema = json.loads((tmp_path / "n.csv.schema.json").read_text("utf-8"))
    assert schema["about"]["cautions"] == about["cautions"]


def test_bed_and_banks_share_a_cell_by_name(survey: Path, tmp_path: Path) -> None:
    banks = FACTORS | {"base": {"grade": "gravel", "best": 0.03}}
    told_apart = [
        {"name": "bed", "perimeter_percent": 60, "factors": FACTORS},
        {"name": "banks", "perimeter_percent": 40, "factors": banks},
    ]
    document = {key: value for key, value in PLACED.items() if key != "factors"}
    record(survey, tmp_path, "Ford", document | {"segments": told_apart})
    row = cells(exported(survey, tmp_path / "n.csv"))[1]
    assert row["base_grade"] == "bed: firm-soil; banks: gravel"
    assert row["base_value"] == "bed: 0.0285; banks: 0.03"
    assert row["status"] == "estimated"


def test_the_adopted_n_goes_out_with_its_reason_and_the_estimate_stays_the_estimators(
    survey: Path, tmp_path: Path
) -> None:
    place = ["--part", "main channel", "--condition", "design flood", "--by", "Bo Lind"]
    words = ["adopt", str(survey), "Willow bend", *place, "--n", "0.045", "--reason", "levels"]
    assert main(words) == 0
    row = cells(exported(survey, tmp_path / "n.csv"))[0]
    assert (row["n_adopted"], row["adopted_reason"]) == ("0.045", "levels")
    assert float(row["n_best"]) == pytest.approx(0.051)
    assert row["estimated_by"] == "Ann Reeve"


def test_rows_that_are_not_accepted_are_counted_or_left_out(
    survey: Path, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    exported(survey, tmp_path / "n.csv")
    assert "2 of 2 rows are not accepted\n" in capsys.readouterr().err
    assert cells(exported(survey, tmp_path / "n.csv", "--status", "accepted")) == []
    assert "not accepted" not in capsys.readouterr().err


def test_the_survey_notes_the_heads_once_and_a_cut_is_then_seen(
    survey: Path, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    exported(survey, tmp_path / "n.csv")
    lines = (survey / "survey.jsonl").read_bytes().splitlines()
    assert json.loads(lines[-1])["data"]["why"] == "export"
    exported(survey, tmp_path / "n.csv")
    assert len((survey / "survey.jsonl").read_bytes().splitlines()) == len(lines)
    trail = next((survey / "reaches").glob("willow*"))
    whole = trail.read_bytes().splitlines(keepends=True)
    trail.write_bytes(whole[0])
    capsys.readouterr()
    assert main(["check", str(survey)]) == 1
    assert "lines missing" in capsys.readouterr().out.replace("\n  ", " ")


def test_the_export_works_where_nobody_is_known_and_says_so(
    survey: Path,
    tmp_path: Path,
    monkeypatch: pytest.MonkeyPatch,
    capsys: pytest.CaptureFixture[str],
) -> None:
    monkeypatch.delenv("ROUGHNESS_BY")
    before = (survey / "survey.jsonl").read_bytes()
    exported(survey, tmp_path / "n.csv")
    assert "does not note this export: nobody" in capsys.readouterr().err
    assert (survey / "survey.jsonl").read_bytes() == before


def test_an_export_is_whole_or_not_there_and_as_public_as_other_files(
    survey: Path, tmp_path: Path
) -> None:
    exported(survey, tmp_path / "n.csv")
    (tmp_path / "plain").write_text("x")
    mode = stat.S_IMODE((tmp_path / "plain").stat().st_mode)
    assert stat.S_IMODE((tmp_path / "n.csv").stat().st_mode) == mode
    assert not [path.name for path in tmp_path.iterdir() if path.name.startswith(".")]
