"""Handbooks and schemas as the command line prints them; the demo survey."""

import json
from pathlib import Path

import pytest
from pydantic import TypeAdapter

from roughness.__main__ import main
from roughness.commands.schema import NAMES
from roughness.findings import rule_table
from roughness.shelf.handbooks import handbook_keys, load_handbook
from roughness.shelf.places import demo_folder, tables_folder

Capture = pytest.CaptureFixture[str]


@pytest.fixture(autouse=True)
def a_person_at_a_fresh_machine(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setenv("XDG_CONFIG_HOME", str(tmp_path / "config"))
    monkeypatch.setenv("ROUGHNESS_BY", "Ann Reeve")


@pytest.fixture
def survey(tmp_path: Path, capsys: Capture) -> Path:
    assert main(["new", str(tmp_path / "s")]) == 0
    capsys.readouterr()
    return tmp_path / "s"


def with_own_handbook(survey: Path, key: str) -> Path:
    text = (tables_folder() / "cowan-1956.toml").read_text("utf-8")
    file = survey / "handbooks" / "own.toml"
    file.write_text(text.replace('key = "cowan-1956"', f'key = "{key}"'), encoding="utf-8")
    return file


def test_all_handbooks_are_listed_with_what_they_are_for(capsys: Capture) -> None:
    assert main(["tables"]) == 0
    out = capsys.readouterr().out
    assert [line for line in out.splitlines() if not line.startswith(" ")] == list(handbook_keys())
    assert "for channel and flood-plain; shipped" in out


@pytest.mark.parametrize("key", handbook_keys())
def test_every_row_is_printed_with_range_criterion_source_and_provenance(
    key: str, capsys: Capture
) -> None:
    assert main(["tables", key]) == 0
    out = capsys.readouterr().out
    assert all(len(line) <= 80 for line in out.splitlines())
    flat = " ".join(out.split())
    handbook = load_handbook(key)
    for tables in handbook.tables.values():
        for table in tables.values():
            for grade in table.grades:
                assert f"{grade.key}: " in flat
                assert grade.criterion in flat
                assert f"{grade.source}; values {grade.provenance}" in flat
                for one in grade.measured:
                    assert f"measured: {one.criterion} {one.interval}" in flat


def test_a_handbook_as_json_holds_the_published_figures(capsys: Capture) -> None:
    assert main(["tables", "cowan-1956", "--json"]) == 0
    document = json.loads(capsys.readouterr().out)
    base = next(t for t in document["tables"] if t["factor"] == "base")
    earth = next(g for g in base["grades"] if g["key"] == "earth")
    # Cowan (1956), table 5-5 of Chow (1959): earth 0.020.
    assert (earth["low"], earth["high"]) == (0.020, 0.020)
    assert main(["tables", "--json"]) == 0
    assert [book["key"] for book in json.loads(capsys.readouterr().out)] == list(handbook_keys())


def test_a_survey_adds_its_own_tables_without_code(survey: Path, capsys: Capture) -> None:
    with_own_handbook(survey, "our-agency-2024")
    assert main(["tables", "--survey", str(survey)]) == 0
    assert "our-agency-2024\n" in (out := capsys.readouterr().out)
    assert "for channel; the survey's own" in out
    assert main(["tables", "our-agency-2024", "--survey", str(survey)]) == 0
    assert capsys.readouterr().out.startswith("our-agency-2024: Cowan")
    assert main(["tables", "our-agency-2024"]) == 2


def test_a_handbook_file_that_cannot_be_used_hides_no_other(survey: Path, capsys: Capture) -> None:
    file = with_own_handbook(survey, "our-agency-2024")
    file.write_text(file.read_text("utf-8") + "\n[channel.base", encoding="utf-8")
    assert main(["tables", "--survey", str(survey)]) == 1
    out, err = capsys.readouterr()
    assert all(f"{key}\n" in out for key in handbook_keys())
    assert "handbooks/own.toml" in err and "not TOML" in err
    assert main(["check", str(survey)]) == 1
    assert "not TOML" in capsys.readouterr().out


def test_an_estimate_may_use_the_tables_of_a_survey(
    survey: Path, tmp_path: Path, capsys: Capture
) -> None:
    with_own_handbook(survey, "our-agency-2024")
    factors = {
        "base": {"grade": "earth"},
        "irregularity": {"grade": "minor"},
        "variation": {"grade": "gradual"},
        "obstruction": {"grade": "negligible"},
        "vegetation": {"grade": "low"},
        "meander": {"grade": "minor"},
    }
    file = tmp_path / "e.json"
    document = {"handbook": "our-agency-2024", "setting": "channel", "factors": factors}
    file.write_text(json.dumps(document), encoding="utf-8")
    assert main(["estimate", str(file)]) == 2
    capsys.readouterr()
    assert main(["estimate", str(file), "--survey", str(survey)]) == 0
    assert json.loads(capsys.readouterr().out)["handbook"]["key"] == "our-agency-2024"


@pytest.mark.parametrize("name", NAMES)
def test_every_schema_is_a_json_schema_whose_references_resolve(name: str, capsys: Capture) -> None:
    assert main(["schema", name]) == 0
    text = capsys.readouterr().out
    schema = json.loads(text)
    assert schema["$schema"].startswith("https://json-schema.org/")
    assert schema["title"]
    referred = {part.split('"')[0] for part in text.split('"#/$defs/')[1:]}
    assert referred <= set(schema.get("$defs", {}))


def test_the_output_schema_names_exactly_what_estimate_prints(
    tmp_path: Path, capsys: Capture
) -> None:
    factors = {
        "base": {"grade": "firm-soil"},
        "irregularity": {"grade": "minor"},
        "obstruction": {"grade": "minor"},
        "vegetation": {"grade": "small"},
    }
    file = tmp_path / "e.json"
    document = {"handbook": "usgs-wsp-2339", "setting": "flood-plain", "factors": factors}
    file.write_text(json.dumps(document), encoding="utf-8")
    assert main(["estimate", str(file)]) == 0
    printed = json.loads(capsys.readouterr().out)
    main(["schema", "estimate-output"])
    schema = json.loads(capsys.readouterr().out)
    assert set(schema["required"]) == set(printed)
    assert set(printed) <= set(schema["properties"])
    for key, name in (("spread", "Spread"), ("people", "People"), ("handbook", "HandbookUsed")):
        assert set(schema["$defs"][name]["properties"]) == set(printed[key])
    # A segment is named only where bed and banks are told apart.
    assert set(schema["$defs"]["FactorEstimate"]["properties"]) - {"segment"} == set(
        printed["factors"][0]
    )


def test_list_and_check_print_what_their_schemas_promise(survey: Path, capsys: Capture) -> None:
    from roughness.commands.documents import CheckDocument, Listed

    main(["list", str(survey), "--json"])
    TypeAdapter(tuple[Listed, ...]).validate_json(capsys.readouterr().out, strict=True)
    main(["check", str(survey), "--json"])
    TypeAdapter(CheckDocument).validate_json(capsys.readouterr().out, strict=True)


def test_the_schema_of_findings_lists_every_rule_with_its_source(capsys: Capture) -> None:
    main(["schema", "findings"])
    rules = json.loads(capsys.readouterr().out)["rules"]
    assert [rule["key"] for rule in rules] == [rule.key for rule in rule_table()]
    assert all(rule["source"] and rule["meaning"] for rule in rules)


def test_the_demo_is_a_copy_that_prints_its_table_and_says_it_is_invented(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: Capture
) -> None:
    original = {p: p.read_bytes() for p in demo_folder().rglob("*") if p.is_file()}
    monkeypatch.chdir(tmp_path)
    assert main(["demo"]) == 0
    out, err = capsys.readouterr()
    assert "invented" in out.splitlines()[-1]
    assert "copied to roughness-demo" in err
    assert all(len(line) <= 80 for line in out.splitlines())
    main(["list", "roughness-demo"])
    assert out.startswith(capsys.readouterr().out)
    assert main(["demo"]) == 0
    again, err = capsys.readouterr()
    assert again == out and "used as it is" in err
    assert {p: p.read_bytes() for p in demo_folder().rglob("*") if p.is_file()} == original


def test_the_demo_leaves_a_folder_that_holds_something_else_alone(
    tmp_path: Path, capsys: Capture
) -> None:
    (tmp_path / "mine").mkdir()
    (tmp_path / "mine" / "notes.txt").write_text("x", encoding="utf-8")
    assert main(["demo", str(tmp_path / "mine")]) == 2
    assert "not empty" in capsys.readouterr().err
    assert [path.name for path in (tmp_path / "mine").iterdir()] == ["notes.txt"]
