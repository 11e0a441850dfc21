"""Wrong input: one sentence, exit status 2, no traceback, and not a byte changed."""

import json
import os
import subprocess
import sys
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest

from roughness.__main__ import main

FACTORS: dict[str, Any] = {
    "base": {"grade": "firm-soil"},
    "irregularity": {"grade": "minor"},
    "variation": {"grade": "gradual"},
    "obstruction": {"grade": "negligible"},
    "vegetation": {"grade": "medium"},
    "meander": {"grade": "minor"},
}
ALONE: dict[str, Any] = {"handbook": "usgs-wsp-2339", "setting": "channel", "factors": FACTORS}
PLACED = ALONE | {"part": "main channel", "condition": "design flood"}


@pytest.fixture(autouse=True)
def a_person_at_a_fresh_machine(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setenv("XDG_CONFIG_HOME", str(tmp_path / "config"))
    monkeypatch.setenv("ROUGHNESS_BY", "Ann Reeve")


@pytest.fixture
def survey(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> Path:
    (tmp_path / "reaches.csv").write_text("reach\nWillow bend\n", encoding="utf-8")
    folder = tmp_path / "survey"
    assert main(["new", str(folder), "--from", str(tmp_path / "reaches.csv")]) == 0
    capsys.readouterr()
    return folder


Refused = Callable[..., str]


@pytest.fixture
def refused(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> Refused:
    """Run a command that must be refused; return its sentence."""

    def run(*words: str) -> str:
        before = tree(tmp_path)
        assert main(list(words)) == 2
        out, err = capsys.readouterr()
        assert out == ""
        assert tree(tmp_path) == before
        assert err.startswith("roughness: ") and err.endswith("\n")
        assert "Traceback" not in err
        return err

    return run


def tree(folder: Path) -> dict[str, bytes | None]:
    return {
        str(path.relative_to(folder)): path.read_bytes() if path.is_file() else None
        for path in folder.rglob("*")
    }


def with_factor(factor: str, choice: Any) -> str:
    return json.dumps(PLACED | {"factors": FACTORS | {factor: choice}})


def without(*keys: str) -> str:
    return json.dumps({key: value for key, value in PLACED.items() if key not in keys})


NESTED = "[" * 100 + "]" * 100
WRONG_TEXT: dict[str, tuple[str, str]] = {
    "unknown grade": (with_factor("vegetation", {"grade": "medum"}), "did you mean 'medium'"),
    "missing factor": (
        json.dumps(PLACED | {"factors": {k: v for k, v in FACTORS.items() if k != "obstruction"}}),
        "obstruction",
    ),
    "factor without a choice": (with_factor("obstruction", {}), "obstruction"),
    "text for a number": (
        with_factor("base", {"grade": "firm-soil", "best": "rough"}),
        "a number is due",
    ),
    "boolean for a number": (
        with_factor("base", {"grade": "firm-soil", "best": True}),
        "a number is due",
    ),
    "decimal comma": (with_factor("base", {"grade": "firm-soil", "best": "0,028"}), "0.028"),
    "NaN": (with_factor("base", {"grade": "firm-soil", "best": float("nan")}), "NaN"),
    "infinity": (with_factor("base", {"grade": "firm-soil", "best": float("inf")}), "Infinity"),
    "too large a number": (
        with_factor("base", {"grade": "firm-soil"}).replace(
            '"firm-soil"', '"firm-soil","best":1e999'
        ),
        "1e999",
    ),
    "negative": (
        with_factor("base", {"grade": "firm-soil", "best": -0.01, "low": -0.02, "note": "n"}),
        "base",
    ),
    "low above best": (
        with_factor("base", {"grade": "firm-soil", "low": 0.031, "best": 0.028}),
        "base",
    ),
    "best above high": (
        with_factor("base", {"grade": "firm-soil", "best": 0.03, "high": 0.028}),
        "base",
    ),
    "sinuosity below 1": (with_factor("meander", {"sinuosity": 0.9}), "sinuosity"),
    "blocked above 100": (with_factor("obstruction", {"blocked_percent": 101}), "blocked"),
    "unknown setting": (json.dumps(PLACED | {"setting": "chanel"}), "did you mean 'channel'"),
    "a multiplier on a flood plain": (json.dumps(PLACED | {"setting": "flood-plain"}), "flood"),
    "unknown handbook": (
        json.dumps(PLACED | {"handbook": "usgs-wsp-2338"}),
        "did you mean 'usgs-wsp-2339'",
    ),
    "unknown key": (json.dumps(PLACED | {"mesured": {}}), "did you mean 'measured'"),
    "repeated key": (json.dumps(PLACED)[:-1] + ', "setting": "channel"}', "twice"),
    "neither factors nor segments": (without("factors"), "factors or segments"),
    "no handbook": (without("handbook"), "handbook"),
    "empty": ("", "empty"),
    "blank": (" \n", "empty"),
    "not JSON": ("n = 0.03", "not JSON"),
    "cut JSON": ('{"handbook": ', "not JSON"),
    "a list": ("[]", "JSON object"),
    "half of a sign": (
        with_factor("base", {"grade": "firm-soil", "note": "a\ud800"}),
        "half of a surrogate pair",
    ),
    "deeply nested": (NESTED, "deeper"),
}


@pytest.mark.parametrize("verb", ["estimate", "record"])
@pytest.mark.parametrize("fault", WRONG_TEXT)
def test_wrong_estimates_are_refused_in_one_sentence(
    fault: str, verb: str, survey: Path, tmp_path: Path, refused: Refused
) -> None:
    text, told = WRONG_TEXT[fault]
    file = tmp_path / "estimate.json"
    file.write_text(text, encoding="utf-8")
    words = ["record", str(survey), "Willow bend"] if verb == "record" else ["estimate"]
    sentence = refused(*words, str(file))
    assert told in sentence
    assert sentence.count("\n") == 1


@pytest.mark.parametrize(
    ("raw", "told"),
    [
        (b'{"handbook": "\xff"}', "not UTF-8"),
        (json.dumps(PLACED).encode("utf-16"), "not UTF-8"),
        (b" " * ((1 << 20) + 1), "larger than"),
        (b'{"a": "\0"}', "not JSON"),
    ],
    ids=["latin", "utf-16", "huge", "NUL"],
)
def test_wrong_bytes_are_refused(
    raw: bytes, told: str, survey: Path, tmp_path: Path, refused: Refused
) -> None:
    file = tmp_path / "estimate.json"
    file.write_bytes(raw)
    assert told in refused("estimate", str(file))
    assert told in refused("record", str(survey), "Willow bend", str(file))


@pytest.mark.parametrize(
    ("changes", "told"),
    [
        ({"part": None}, "a text in quotes is due"),
        ({"part": ""}, "empty"),
        ({"part": "a\u202eb"}, "direction character"),
        ({"condition": "x" * 121}, "at most 120"),
        ({"condition": "a\x1b[2Jb"}, "control"),
    ],
)
def test_parts_and_conditions_need_a_name_that_can_be_read(
    changes: dict[str, Any], told: str, survey: Path, tmp_path: Path, refused: Refused
) -> None:
    file = tmp_path / "estimate.json"
    file.write_text(json.dumps(PLACED | changes), encoding="utf-8")
    sentence = refused("record", str(survey), "Willow bend", str(file))
    assert told in sentence
    assert sentence.replace("\n", "").isprintable()


def test_an_estimate_without_part_or_condition_is_not_recorded(
    survey: Path, tmp_path: Path, refused: Refused
) -> None:
    file = tmp_path / "estimate.json"
    for key in ("part", "condition"):
        file.write_text(without(key), encoding="utf-8")
        assert f"which {key}" in refused("record", str(survey), "Willow bend", str(file))


LISTS: dict[str, tuple[str, str]] = {
    "empty": ("", "empty"),
    "header alone": ("reach,from\n", "no reach"),
    "no column for the reach": ("raech,from\nA,1\n", "did you mean 'raech'"),
    "empty name": ("reach,from\n,1\n", "line 2"),
    "long name": (f"reach\n{'x' * 121}\n", "at most 120"),
    "control character": ("reach\na\x07b\n", "control or direction"),
    "direction character": ("reach\na\u202eb\n", "control or direction"),
    "duplicate": ("reach\nA\nB\nA\n", "line 4"),
    "equal after folding": ("reach\nStra\u00dfe\nSTRASSE\n", "line 3"),
    "equal after composing": ("reach\nhe\u0302tre\nh\u00eatre\n", "line 3"),
    "decimal comma": ('reach,slope\nA,"0,002"\n', "0.002"),
    "text for a number": ("reach,from\nA,far\n", "far"),
    "NaN": ("reach,from\nA,nan\n", "nan"),
    "infinity": ("reach,to\nA,inf\n", "inf"),
    "negative slope": ("reach,slope\nA,-0.1\n", "slope"),
    "semicolons": ("reach;from\nA;1\n", "commas"),
    "open quote": ('reach\n"A\n', "line"),
    "cells without a header": ("reach\nA,1\n", "cells"),
    "not GeoJSON": ('{"type": "Feature"}', "GeoJSON"),
    "cut GeoJSON": ('{"type": "Feat', "not JSON"),
}


@pytest.mark.parametrize("fault", LISTS)
def test_wrong_lists_of_reaches_make_no_survey(
    fault: str, tmp_path: Path, refused: Refused
) -> None:
    text, told = LISTS[fault]
    file = tmp_path / "reaches.csv"
    file.write_text(text, encoding="utf-8")
    sentence = refused("new", str(tmp_path / "s"), "--from", str(file))
    assert told in sentence
    assert sentence.replace("\n", "").isprintable()


def test_every_bad_row_is_named_at_once(tmp_path: Path, refused: Refused) -> None:
    file = tmp_path / "reaches.csv"
    file.write_text("reach,from\nA,x\nB,1\n,2\nb,3\n", encoding="utf-8")
    sentence = refused("new", str(tmp_path / "s"), "--from", str(file))
    assert all(line in sentence for line in ("line 2", "line 4", "line 5"))
    assert "line 3:" not in sentence


def test_a_list_that_is_not_utf_8_makes_no_survey(tmp_path: Path, refused: Refused) -> None:
    file = tmp_path / "reaches.csv"
    file.write_bytes("reach\nh\u00eatre\n".encode("latin-1"))
    assert "not UTF-8 (line 2)" in refused("new", str(tmp_path / "s"), "--from", str(file))


@pytest.mark.parametrize(
    "options",
    [
        ["--name", ""],
        ["--name", "x" * 121],
        ["--name", "a\u2066b"],
        ["--stream", "a\x00b"],
        ["--by", "a\nb"],
        ["--by", ""],
        ["--handbook", "cowan"],
        ["--from", "no-such-file.csv"],
    ],
)
def test_new_refuses_what_does_not_fit_and_makes_nothing(
    options: list[str], tmp_path: Path, refused: Refused
) -> None:
    refused("new", str(tmp_path / "deep" / "s"), *options)


def test_nothing_half_made_stays_where_a_reach_fails_in_the_middle(tmp_path: Path) -> None:
    """Two reaches of one name pass the list's check only where a caller skips it."""
    from roughness.desk.making import new_survey
    from roughness.errors import InputError
    from roughness.survey.stream import Reach

    reaches = [Reach(reach="A"), Reach(reach="B"), Reach(reach="a")]
    for folder in (tmp_path / "new" / "s", tmp_path / "there"):
        (tmp_path / "there").mkdir(exist_ok=True)
        with pytest.raises(InputError, match="already"):
            new_survey(folder, "Ann Reeve", reaches=reaches)
    assert [path.name for path in tmp_path.iterdir()] == ["there"]
    assert list((tmp_path / "there").iterdir()) == []


@pytest.mark.parametrize(
    ("options", "told"),
    [
        (["--n", "0,035"], "write 0.035"),
        (["--n", "nan"], "no number"),
        (["--n", "inf"], "no number"),
        (["--n", "rough"], "no number"),
        (["--n", "-0.03"], "no roughness"),
        (["--n", "0"], "no roughness"),
        (["--n", "35"], "no roughness"),
        (["--n", "0.035", "--low", "0.04"], "out of order"),
        (["--n", "0.035", "--high", "0.03"], "out of order"),
        (["--n", "0.035", "--reason", " "], "reason"),
    ],
)
def test_adopt_refuses_what_is_no_n(
    options: list[str],
    told: str,
    survey: Path,
    tmp_path: Path,
    refused: Refused,
    capsys: pytest.CaptureFixture[str],
) -> None:
    file = tmp_path / "estimate.json"
    file.write_text(json.dumps(PLACED), encoding="utf-8")
    assert main(["record", str(survey), "Willow bend", str(file)]) == 0
    capsys.readouterr()
    place = ["--part", "main channel", "--condition", "design flood", "--reason", "levels"]
    assert told in refused("adopt", str(survey), "Willow bend", *place, *options)


def test_wrong_words_are_refused(survey: Path, tmp_path: Path, refused: Refused) -> None:
    assert "did you mean 'list'" in refused("lst", str(survey))
    assert "did you mean 'estimate'" in refused("schema", "estmate")
    assert "did you mean 'cowan-1956'" in refused("tables", "cowan-1965")
    assert "no survey" in refused("list", str(tmp_path))
    assert "REACH" in refused("show", str(survey))
    assert "--colour" in refused("list", str(survey), "--colour")
    assert "\x1b" not in refused("list", str(survey), "--\x1b[2J")
    assert "\x1b" not in refused("list", "\x1b[2J")
    assert "no such file" in refused("estimate", str(tmp_path / "none.json"))
    assert "directory" in refused("estimate", str(tmp_path))
    assert "\x1b" not in refused("estimate", "\x1b[2J.json")
    assert "known are" in refused("show", str(survey), "\u202e")


@pytest.mark.parametrize(
    "target",
    ["n.xlsx", "n.parquet", "n.geojson", "n.txt", "n", "survey/n.csv", "x/../survey/n.csv"],
)
def test_export_refuses_a_file_it_cannot_or_must_not_write(
    target: str, survey: Path, tmp_path: Path, refused: Refused
) -> None:
    (tmp_path / "x").mkdir()
    refused("export", str(survey), "-o", str(tmp_path / target))


def test_export_follows_no_link_into_the_survey(
    survey: Path, tmp_path: Path, refused: Refused
) -> None:
    (tmp_path / "link").symlink_to(survey / "reaches", target_is_directory=True)
    assert "survey's own folder" in refused("export", str(survey), "-o", f"{tmp_path}/link/n.csv")


def test_export_into_a_folder_that_is_not_there_is_said(
    survey: Path, tmp_path: Path, refused: Refused
) -> None:
    assert "not kept" in refused("export", str(survey), "-o", str(tmp_path / "none" / "n.csv"))


ODD_NAMES = [
    "../../etc/passwd",
    "C:\\temp\\x",
    "a/b.c:d",
    "con",
    "[bold]n[/bold] <script>alert(1)</script>",
    "=SUM(A1)",
    "\U0001f469\u200d\U0001f33e \u6c34",
    "x" * 120,
    "-o",
    "100%s {0} $HOME",
]


def test_odd_names_are_harmless_in_files_and_in_every_output(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    features = [
        {"type": "Feature", "geometry": None, "properties": {"reach": name}} for name in ODD_NAMES
    ]
    file = tmp_path / "reaches.geojson"
    file.write_text(
        json.dumps({"type": "FeatureCollection", "features": features}), encoding="utf-8"
    )
    survey = tmp_path / "s"
    assert main(["new", str(survey), "--from", str(file)]) == 0
    names = {path.stem for path in (survey / "reaches").iterdir()}
    assert len(names) == len(ODD_NAMES)
    assert all(name.isascii() and name.replace("-", "").isalnum() for name in names)
    assert sorted(path.name for path in tmp_path.iterdir()) == ["reaches.geojson", "s"]
    (tmp_path / "e.json").write_text(json.dumps(PLACED), encoding="utf-8")
    for name in ODD_NAMES:
        words = ["record", str(survey), "--", name, str(tmp_path / "e.json")]
        assert main(words) == 0, name
    capsys.readouterr()
    for words in (["list", str(survey)], ["check", str(survey)], ["list", str(survey), "--json"]):
        assert main(words) == 0
        out = capsys.readouterr().out
        assert out.replace("\n", "").isprintable()
    assert main(["list", str(survey), "--json"]) == 0
    listed = json.loads(capsys.readouterr().out)
    assert [row["reach"] for row in listed] == ODD_NAMES
    assert main(["export", str(survey), "-o", str(tmp_path / "n.csv")]) == 0


def test_a_whole_process_ends_with_status_2_and_one_line(tmp_path: Path) -> None:
    (tmp_path / "e.json").write_bytes(b"{")
    environment = os.environ | {"PYTHONPATH": str(Path(__file__).parents[2])}
    for words in (["estimate", "e.json"], ["estimate", "-"], ["list", "none"], ["nonsense/x"]):
        run = subprocess.run(
            [sys.executable, "-m", "roughness", *words],
            cwd=tmp_path,
            env=environment,
            input=b"",
            capture_output=True,
            check=False,
        )
        assert (run.returncode, run.stdout) == (2, b"")
        assert run.stderr.count(b"\n") == 1 and run.stderr.startswith(b"roughness: ")
