"""A survey from the command line: made, recorded, listed, shown, adopted, checked."""

import json
import os
import subprocess
import sys
import time
from pathlib import Path
from typing import Any

import pytest

from roughness.__main__ import main
from roughness.desk.folder import SurveyFolder

# By the handbook's tables: 0.025-0.032 + 0.001-0.005 + 0 + 0-0.004 + 0.010-0.025, times 1.
CHANNEL: dict[str, Any] = {
    "handbook": "usgs-wsp-2339",
    "setting": "channel",
    "part": "main channel",
    "condition": "design flood",
    "factors": {
        "base": {"grade": "firm-soil", "note": "stiff clay in the banks"},
        "irregularity": {"grade": "minor"},
        "variation": {"grade": "gradual"},
        "obstruction": {"grade": "negligible"},
        "vegetation": {"grade": "medium"},
        "meander": {"grade": "minor"},
    },
}
REACHES = "reach,from,to,slope,owner\nWillow bend,0,120,0.002,x\nMill/Weir 2,120,400.5,,y\n"


@pytest.fixture(autouse=True)
def a_person_at_a_fresh_machine(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setenv("XDG_CONFIG_HOME", str(tmp_path / "config"))
    monkeypatch.setenv("ROUGHNESS_BY", "Ann Reeve")


@pytest.fixture
def survey(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> Path:
    (tmp_path / "reaches.csv").write_text(REACHES, encoding="utf-8")
    folder = tmp_path / "survey"
    assert main(["new", str(folder), "--from", str(tmp_path / "reaches.csv")]) == 0
    capsys.readouterr()
    return folder


def written(tmp_path: Path, **changes: Any) -> str:
    file = tmp_path / "estimate.json"
    file.write_text(json.dumps(CHANNEL | changes), encoding="utf-8")
    return str(file)


def recorded(survey: Path, tmp_path: Path, reach: str = "Willow bend", **changes: Any) -> int:
    return main(["record", str(survey), reach, written(tmp_path, **changes)])


def test_new_makes_a_survey_and_names_the_columns_it_does_not_use(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    (tmp_path / "reaches.csv").write_text(REACHES, encoding="utf-8")
    words = ["new", str(tmp_path / "s"), "--from", str(tmp_path / "reaches.csv")]
    assert main([*words, "--name", "Lower brook", "--stream", "Otter brook"]) == 0
    out, err = capsys.readouterr()
    assert out == f"made {tmp_path / 's'} with 2 reaches\n"
    assert err == "columns that are not used: owner\n"
    main(["list", str(tmp_path / "s")])
    out, _ = capsys.readouterr()
    assert out.startswith("Lower brook, Otter brook\n")
    assert "Mill/Weir 2, from 120 to 400.5 (unit not said)" in out


def test_new_takes_geojson_from_standard_input(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    feature = {
        "type": "Feature",
        "geometry": {"type": "Point", "coordinates": [7.5, 47.5]},
        "properties": {"reach": "Ford", "slope": 0.001},
    }
    text = json.dumps({"type": "FeatureCollection", "features": [feature]})
    run = subprocess.run(
        [sys.executable, "-m", "roughness", "new", str(tmp_path / "s"), "--from", "-"],
        input=text,
        capture_output=True,
        text=True,
        check=False,
    )
    assert (run.returncode, run.stderr) == (0, "")
    assert main(["show", str(tmp_path / "s"), "ford"]) == 0
    assert "slope 0.001" in capsys.readouterr().out


def test_new_asks_nothing_without_a_terminal_and_leaves_the_author_open(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.delenv("ROUGHNESS_BY")
    assert main(["new", str(tmp_path / "s")]) == 0
    assert {line.by for line in SurveyFolder(tmp_path / "s").trail().lines} == {"nobody named"}


def test_new_leaves_a_full_folder_as_it_is(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    (tmp_path / "s").mkdir()
    (tmp_path / "s" / "photo.jpg").write_bytes(b"x")
    assert main(["new", str(tmp_path / "s")]) == 2
    assert "not empty" in capsys.readouterr().err
    assert [path.name for path in (tmp_path / "s").iterdir()] == ["photo.jpg"]


def test_list_prints_n_range_status_and_findings_in_80_columns(
    survey: Path, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    recorded(survey, tmp_path)
    capsys.readouterr()
    assert main(["list", str(survey)]) == 0
    out, err = capsys.readouterr()
    row = next(line for line in out.splitlines() if "main channel" in line)
    assert row.split()[:7] == [
        "main", "channel", "design", "flood", "0.051", "0.036-0.066", "estimated",
    ]  # fmt: skip
    assert "ask" in row
    assert "no part yet" in out and "unvisited" in out
    assert all(len(line) <= 80 for line in out.splitlines())
    assert err.startswith("n is a judgement")


def test_list_as_json_has_values_in_full_and_neither_head_nor_path(
    survey: Path, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    recorded(survey, tmp_path)
    capsys.readouterr()
    assert main(["list", str(survey), "--json"]) == 0
    rows = json.loads(capsys.readouterr().out)
    assert [set(row) for row in rows] == 2 * [
        {"reach", "part", "condition", "n", "status", "open_findings"}
    ]
    assert rows[0]["n"] == pytest.approx({"low": 0.036, "best": 0.051, "high": 0.066})
    assert set(rows[0]["open_findings"][0]) == {"level", "rule", "factor", "says"}
    assert rows[1] == {
        "reach": "Mill/Weir 2",
        "part": None,
        "condition": None,
        "n": None,
        "status": "unvisited",
        "open_findings": [],
    }


def test_a_stop_finding_ends_with_status_1_through_every_verb(
    survey: Path, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    factors = CHANNEL["factors"] | {"base": {"grade": "firm-soil", "best": 0.06}}
    assert recorded(survey, tmp_path, factors=factors) == 1
    assert "stop: " in capsys.readouterr().out
    place = ["--part", "main channel", "--condition", "design flood"]
    for words in (
        ["list", str(survey)],
        ["show", str(survey), "Willow bend"],
        ["check", str(survey)],
        ["adopt", str(survey), "Willow bend", *place, "--n", "0.05", "--reason", "levels"],
        ["export", str(survey), "-o", str(tmp_path / "n.csv")],
        ["estimate", str(estimate_alone(tmp_path, factors=factors))],
    ):
        assert main(words) == 1, words
    assert main(["show", str(survey), "Mill/Weir 2"]) == 0


def estimate_alone(tmp_path: Path, **changes: Any) -> Path:
    document = {k: v for k, v in CHANNEL.items() if k not in ("part", "condition")} | changes
    file = tmp_path / "alone.json"
    file.write_text(json.dumps(document), encoding="utf-8")
    return file


def test_estimate_prints_the_document_in_full_precision(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    assert main(["estimate", str(estimate_alone(tmp_path))]) == 0
    document = json.loads(capsys.readouterr().out)
    assert list(document) == [
        "n", "spread", "people", "factors", "findings", "reasoning", "handbook",
    ]  # fmt: skip
    assert document["n"] == pytest.approx({"low": 0.036, "best": 0.051, "high": 0.066})
    assert len(document["handbook"]["sha256"]) == 64


def test_record_says_what_was_kept_and_record_as_json_gives_the_line(
    survey: Path, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    assert recorded(survey, tmp_path) == 0
    out = capsys.readouterr().out
    assert out.startswith("kept for Willow bend, line 2 (")
    assert "n 0.051, range 0.036 to 0.066" in out
    words = ["record", str(survey), "Willow bend", written(tmp_path, condition="low flow")]
    assert main([*words, "--json", "--by", "Bo Lind"]) == 0
    kept = json.loads(capsys.readouterr().out)
    assert (kept["by"], kept["condition"]) == ("Bo Lind", "low flow")
    last = (survey / "reaches").glob("willow*").__next__().read_bytes().splitlines()[-1]
    assert json.loads(last)["by"] == "Bo Lind"


def test_show_tells_reasons_and_every_line_of_the_trail(
    survey: Path, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    recorded(survey, tmp_path)
    capsys.readouterr()
    assert main(["show", str(survey), "willow  BEND", "--trail"]) == 0
    out = capsys.readouterr().out
    for told in (
        "n 0.051, range 0.036 to 0.066",
        "Spread of the choices:",
        "What experienced people differ by:",
        "from memory",
        "note: stiff clay in the banks",
        "Ann Reeve",
        "Reasoning:",
        "beginning of Willow bend",
        "estimate of main channel at design flood",
    ):
        assert told in out
    assert all(len(line) <= 80 for line in out.splitlines())
    assert main(["show", str(survey), "willow bend", "--trail", "--json"]) == 0
    document = json.loads(capsys.readouterr().out)
    assert [line["kind"] for line in document["trail"]] == ["begin", "estimate"]
    assert document["places"][0]["choices"][0]["by"] == "Ann Reeve"


def test_show_marks_what_was_withdrawn_and_says_what_is_missing(
    survey: Path, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    from roughness.desk.folder import SurveyFolder
    from roughness.desk.places import place_of
    from roughness.desk.recording import Recorder
    from roughness.survey.choices import BaseChoice, Choice
    from roughness.survey.stream import FlowCondition, Part
    from roughness.trail.data import Gate

    pen = Recorder(SurveyFolder(survey), "Ann Reeve")
    pen.add_condition(FlowCondition(condition="design flood"))
    pen.add_part("Willow bend", Part(part="main channel", setting="channel"))
    gate = Gate(
        part="main channel", condition="design flood", handbook="usgs-wsp-2339", depth_m=1.5
    )
    pen.set_gate("Willow bend", gate)
    place = place_of(pen.survey, "Willow bend", "main channel", "design flood")
    pen.choose(place, "base", BaseChoice(grade="gravel"))
    taken_back = pen.choose(place, "irregularity", Choice(grade="minor"))
    pen.withdraw("Willow bend", taken_back)
    assert main(["show", str(survey), "Willow bend", "--trail", "--units", "us"]) == 0
    out = capsys.readouterr().out
    assert "Mean depth: 4.9 ft" in out
    assert "Missing: irregularity, variation, obstruction, vegetation, meander" in out
    assert "irregularity of main channel at design flood: minor (withdrawn)" in out


def test_an_unknown_reach_names_the_nearest(
    survey: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    assert main(["show", str(survey), "Wilow bend"]) == 2
    assert "did you mean 'Willow bend'" in capsys.readouterr().err


def test_adopted_n_goes_to_the_model_and_keeps_its_reason(
    survey: Path, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    recorded(survey, tmp_path)
    words = ["adopt", str(survey), "Willow bend", "--part", "main channel", "--condition"]
    assert main([*words, "design flood", "--n", "0.045", "--reason", "levels of June"]) == 0
    assert main([*words, "desing flood", "--n", "0.045", "--reason", "levels"]) == 2
    assert "did you mean 'design flood'" in capsys.readouterr().err
    main(["list", str(survey)])
    assert "adopted 0.045: levels of June" in capsys.readouterr().out


def test_segments_of_a_recorded_estimate_count_as_complete(
    survey: Path, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    told_apart = [
        {"name": "bed", "perimeter_percent": 60, "factors": CHANNEL["factors"]},
        {
            "name": "banks",
            "perimeter_percent": 40,
            "factors": CHANNEL["factors"] | {"base": {"grade": "gravel"}},
        },
    ]
    document = {k: v for k, v in CHANNEL.items() if k != "factors"} | {"segments": told_apart}
    file = tmp_path / "segments.json"
    file.write_text(json.dumps(document), encoding="utf-8")
    assert main(["record", str(survey), "Willow bend", str(file)]) == 0
    capsys.readouterr()
    main(["list", str(survey), "--json"])
    row = json.loads(capsys.readouterr().out)[0]
    assert row["status"] == "estimated" and row["n"]["low"] < row["n"]["best"]


def test_check_finds_a_changed_line_and_writes_nothing(
    survey: Path, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    recorded(survey, tmp_path)
    assert main(["check", str(survey)]) == 0
    assert capsys.readouterr().out.endswith("intact\n")
    trail = next((survey / "reaches").glob("willow*.jsonl"))
    trail.write_bytes(trail.read_bytes().replace(b"Ann Reeve", b"Ben Reeve", 1))
    before = {path: path.read_bytes() for path in survey.rglob("*") if path.is_file()}
    assert main(["check", str(survey), "--json"]) == 1
    document = json.loads(capsys.readouterr().out)
    assert document["intact"] is False
    assert {fault["file"] for fault in document["broken"]} == {f"reaches/{trail.name}"}
    assert {path: path.read_bytes() for path in survey.rglob("*") if path.is_file()} == before


@pytest.mark.parametrize("raw", [b"", b"\xff\xfe", b"no line of a trail\n"])
def test_a_survey_without_its_own_trail_is_never_taken_for_an_empty_one(
    raw: bytes, survey: Path, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    (survey / "survey.jsonl").write_bytes(raw)
    for words in (["list", str(survey)], ["export", str(survey), "-o", str(tmp_path / "n.json")]):
        assert main(words) == 1
        assert "reaches may be missing here: survey.jsonl" in capsys.readouterr().err
    assert main(["check", str(survey), "--json"]) == 1
    assert json.loads(capsys.readouterr().out)["intact"] is False
    assert recorded(survey, tmp_path) == 2


def test_a_reach_whose_file_is_gone_is_a_stop_and_not_intact(
    survey: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    next((survey / "reaches").glob("willow*.jsonl")).unlink()
    assert main(["list", str(survey)]) == 1
    assert "Willow bend" in capsys.readouterr().out
    assert main(["check", str(survey)]) == 1
    assert ".jsonl: is not there" in capsys.readouterr().out


def test_a_torn_tail_is_intact_and_the_next_writer_says_that_it_moved_it(
    survey: Path, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    recorded(survey, tmp_path)
    trail = next((survey / "reaches").glob("willow*.jsonl"))
    with trail.open("ab") as file:
        file.write(b'{"prev": "ab')
    capsys.readouterr()
    assert main(["check", str(survey)]) == 0
    assert "cut off" in capsys.readouterr().err
    assert recorded(survey, tmp_path) == 0
    assert ".torn" in capsys.readouterr().err
    assert main(["check", str(survey)]) == 0
    assert capsys.readouterr().err == ""


@pytest.mark.skipif(os.name == "nt", reason="another lock there")
def test_record_gives_up_on_a_busy_survey_after_five_seconds(
    survey: Path, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    import fcntl

    with (survey / ".lock").open("a+b") as lock:
        fcntl.flock(lock, fcntl.LOCK_EX)
        started = time.monotonic()
        assert recorded(survey, tmp_path) == 2
    assert 4.5 < time.monotonic() - started < 10
    assert "busy" in capsys.readouterr().err


def test_a_reader_that_has_enough_sees_no_traceback(survey: Path) -> None:
    script = f"{sys.executable} -m roughness show {survey} 'Willow bend' --trail | head -1"
    run = subprocess.run(["sh", "-c", script], capture_output=True, text=True, check=False)
    assert run.stdout.startswith("Willow bend") and run.stderr == ""
    script = f"{sys.executable} -m roughness tables usgs-wsp-2339 | head -1"
    run = subprocess.run(["sh", "-c", script], capture_output=True, text=True, check=False)
    assert run.stdout.startswith("usgs-wsp-2339") and run.stderr == ""


@pytest.mark.skipif(not Path("/dev/full").exists(), reason="no such device here")
def test_output_that_cannot_be_written_is_said_and_ends_with_status_2(survey: Path) -> None:
    script = f"{sys.executable} -m roughness list {survey} > /dev/full"
    run = subprocess.run(["sh", "-c", script], capture_output=True, text=True, check=False)
    assert run.returncode == 2
    assert run.stderr.splitlines()[-1] == "roughness: output: no space left on device"
    assert "Traceback" not in run.stderr and "Exception" not in run.stderr


def test_names_print_on_a_terminal_that_knows_ascii_alone(survey: Path, tmp_path: Path) -> None:
    (tmp_path / "more.csv").write_text("reach\nhêtre 🌳\n", encoding="utf-8")
    main(["new", str(tmp_path / "t"), "--from", str(tmp_path / "more.csv")])
    for options, tree in (([], b"\\U0001f333"), (["--json"], b"\\ud83c\\udf33")):
        run = subprocess.run(
            [sys.executable, "-m", "roughness", "list", str(tmp_path / "t"), *options],
            capture_output=True,
            env=os.environ | {"PYTHONIOENCODING": "ascii"},
            check=False,
        )
        assert run.returncode == 0 and run.stdout.isascii()
        assert tree in run.stdout


def test_record_reads_standard_input(survey: Path) -> None:
    run = subprocess.run(
        [sys.executable, "-m", "roughness", "record", str(survey), "Willow bend", "-"],
        input=json.dumps(CHANNEL),
        capture_output=True,
        text=True,
        check=False,
    )
    assert (run.returncode, run.stderr) == (0, "")
    assert run.stdout.startswith("kept for Willow bend")


@pytest.mark.skipif(os.name == "nt", reason="no pseudo terminals there")
def test_new_asks_once_for_a_name_where_there_is_a_terminal(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    import pty

    monkeypatch.delenv("ROUGHNESS_BY")
    for folder, answer in (("first", b"Ann Reeve\n"), ("second", b"")):
        ours, theirs = pty.openpty()
        os.write(ours, answer)
        run = subprocess.run(
            [sys.executable, "-m", "roughness", "new", str(tmp_path / folder)],
            stdin=theirs,
            stderr=theirs,
            stdout=subprocess.PIPE,
            timeout=60,
            check=False,
        )
        os.close(theirs)
        os.close(ours)
        assert run.returncode == 0
        first = (tmp_path / folder / "survey.jsonl").read_bytes().splitlines()[0]
        assert json.loads(first)["by"] == "Ann Reeve"


def test_show_marks_what_was_adopted_taken_over_and_carried(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    from roughness.desk.making import copy_demo

    copy_demo(tmp_path / "demo")
    main(["show", str(tmp_path / "demo"), "Meadow bends"])
    out = capsys.readouterr().out
    flat = " ".join(out.split())
    assert "Adopted: n 0.058, low 0.052, high 0.064. February flood" in flat
    assert "taken over from the flow condition spring high flow" in flat
    assert "carried over from Meadow bends, left flood plain, design flood; not confirmed" in flat
    assert all(len(line) <= 80 for line in out.splitlines())
    main(["show", str(tmp_path / "demo"), "Spring head"])
    assert "no part of the cross-section was described yet" in capsys.readouterr().out
