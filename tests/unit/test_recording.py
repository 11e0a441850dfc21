"""What is written to a survey: one checked line at a time, and what is refused."""

import json
from pathlib import Path
from typing import Any

import pytest

from roughness.desk.checking import check
from roughness.desk.folder import SurveyFolder
from roughness.desk.making import new_survey
from roughness.desk.places import place_of
from roughness.desk.recording import Recorder
from roughness.desk.rows import rows
from roughness.errors import InputError, RecordError
from roughness.shelf.places import tables_folder
from roughness.survey.choices import BaseChoice
from roughness.survey.stream import FlowCondition, Part, Reach, Visit
from roughness.trail.data import Gate, SegmentShare
from roughness.trail.lines import hash_of

DOCUMENT: dict[str, Any] = {
    "part": "main channel",
    "condition": "design flood",
    "handbook": "usgs-wsp-2339",
    "setting": "channel",
    "factors": {
        "base": {"grade": "gravel"},
        "irregularity": {"grade": "minor"},
        "variation": {"grade": "gradual"},
        "obstruction": {"grade": "negligible"},
        "vegetation": {"grade": "small"},
        "meander": {"grade": "minor"},
    },
}


@pytest.fixture
def pen(tmp_path: Path) -> Recorder:
    survey = new_survey(tmp_path / "s", "Ada", reaches=[Reach(reach="Weir"), Reach(reach="Mill")])
    return Recorder(survey, "Ada")


def raw(**changes: Any) -> bytes:
    return json.dumps(DOCUMENT | changes).encode()


def tree(folder: Path) -> dict[str, bytes]:
    return {str(p): p.read_bytes() for p in sorted(folder.rglob("*")) if p.is_file()}


def test_a_recorded_estimate_is_one_line_and_stands_in_the_table(pen: Recorder) -> None:
    before = len(pen.survey.reach_trail("Weir").lines)
    _, estimate = pen.record("weir ", raw(), "file")
    assert len(pen.survey.reach_trail("Weir").lines) == before + 1
    row = next(row for row in rows(pen.survey) if row.reach.reach == "Weir")
    assert row.estimate is not None and row.estimate.n == estimate.n
    assert (row.status, row.estimated_by) == ("estimated", "Ada")


def test_a_part_and_a_condition_that_record_made_are_asked_about(pen: Recorder) -> None:
    pen.record("Weir", raw(), "file")
    rules = [finding.rule for finding in rows(pen.survey)[0].findings]
    assert "made-by-record" in rules
    pen.add_part("Weir", Part(part="main channel", setting="channel"))
    pen.add_condition(FlowCondition(condition="Design flood"))
    rules = [finding.rule for finding in rows(pen.survey)[0].findings]
    assert "made-by-record" not in rules


@pytest.mark.parametrize(
    ("changes", "named"),
    [
        ({"part": ""}, "part"),
        ({"part": 3}, "part"),
        ({"condition": "a\u202eb"}, "condition"),
        ({"setting": "flood-plain"}, "variation"),
        ({"factors": {}}, "missing"),
    ],
)
def test_what_does_not_fit_is_refused_and_nothing_is_written(
    pen: Recorder, changes: dict[str, Any], named: str
) -> None:
    before = tree(pen.survey.folder)
    with pytest.raises(InputError, match=named):
        pen.record("Weir", raw(**changes), "file")
    assert tree(pen.survey.folder) == before


def test_an_estimate_without_part_or_condition_is_refused(pen: Recorder) -> None:
    for key in ("part", "condition"):
        document = {k: v for k, v in DOCUMENT.items() if k != key}
        with pytest.raises(InputError, match=key):
            pen.record("Weir", json.dumps(document).encode(), "file")


def test_a_part_keeps_its_setting(pen: Recorder) -> None:
    pen.add_part("Weir", Part(part="main channel", setting="flood-plain"))
    with pytest.raises(InputError, match="setting"):
        pen.record("Weir", raw(), "file")


def test_adopting_needs_a_known_place_a_value_in_order_and_a_reason(pen: Recorder) -> None:
    pen.record("Weir", raw(), "file")
    place = ("Weir", "main channel", "design flood")
    for n, low, high, reason in [
        (0.04, None, None, " "),
        (0.0, None, None, "r"),
        (-1.0, None, None, "r"),
        (40.0, None, None, "r"),
        (0.04, 0.05, None, "r"),
        (0.04, None, 0.03, "r"),
    ]:
        with pytest.raises(InputError):
            pen.adopt(*place, n, low=low, high=high, reason=reason)
    with pytest.raises(InputError, match="main channel"):
        pen.adopt("Weir", "main chanel", "design flood", 0.04, reason="r")
    with pytest.raises(InputError, match="Weir"):
        pen.adopt("Wier", "main channel", "design flood", 0.04, reason="r")
    pen.adopt(*place, 0.04, reason="calibrated to the flood of May")
    row = rows(pen.survey)[0]
    assert row.n_adopted == 0.04 and row.estimate is not None and row.estimate.n.best != 0.04


def test_a_withdrawn_line_has_no_effect_but_stays(pen: Recorder) -> None:
    pen.record("Weir", raw(), "file")
    line = pen.adopt("Weir", "main channel", "design flood", 0.04, reason="r")
    pen.withdraw("Weir", line)
    assert rows(pen.survey)[0].adopted is None
    assert line.hash in pen.survey.reach_trail("Weir").by_hash


def test_a_reach_that_was_taken_back_can_be_added_again(pen: Recorder) -> None:
    noted = pen.add_reach(Reach(reach="Ford"))
    pen.withdraw(None, noted)
    assert pen.survey.state.reach("Ford") is None
    pen.add_reach(Reach(reach="Ford", slope=0.004))
    again = SurveyFolder(pen.survey.folder)
    found = again.state.reach("Ford")
    assert found is not None and found.slope == 0.004
    assert len(again.reach_trail("Ford").lines) == 1
    assert check(again).intact


def test_a_used_handbook_is_copied_into_the_survey_once(pen: Recorder) -> None:
    pen.record("Weir", raw(), "file")
    (copy,) = pen.survey.handbooks.glob("*.toml")
    first = copy.stat().st_mtime_ns
    pen.record("Mill", raw(), "file")
    assert copy.stat().st_mtime_ns == first


@pytest.mark.parametrize(
    "gate",
    [
        {"depth_m": 0.0},
        {"depth_m": -1.0},
        {"segments": (SegmentShare(name="bed", perimeter_percent=100),)},
        {
            "segments": (
                SegmentShare(name="bed", perimeter_percent=80),
                SegmentShare(name="banks", perimeter_percent=40),
            )
        },
    ],
)
def test_answers_that_cannot_be_are_refused(pen: Recorder, gate: dict[str, Any]) -> None:
    with pytest.raises(InputError):
        pen.set_gate("Weir", Gate(part="p", condition="c", handbook="usgs-wsp-2339", **gate))


def test_names_and_dates_are_checked(pen: Recorder) -> None:
    with pytest.raises(InputError, match="date"):
        pen.note_visit("Weir", Visit(visit="spring", on="30.6.2026"))
    with pytest.raises(InputError, match="already"):
        pen.add_reach(Reach(reach=" WEIR"))
    with pytest.raises(InputError, match="tolerance"):
        pen.add_condition(FlowCondition(condition="c", tolerance_cm=0))
    with pytest.raises(InputError):
        pen.add_part("Weir", Part(part="p", setting="channel", part_from=4.0, part_to=3.0))


def test_names_of_all_kinds_are_kept_whole_and_harmless_as_file_names(pen: Recorder) -> None:
    names = ["a/b", "..", "C:\\x", "con", "[bold]x[/]", "🏞️ pool", "<b>&", "a" * 120, "Ünïcode"]
    for name in names:
        pen.add_reach(Reach(reach=name))
    again = SurveyFolder(pen.survey.folder)
    assert [reach.reach for reach in again.state.reaches][2:] == names
    files = list((pen.survey.folder / "reaches").iterdir())
    assert len(files) == len(names) + 2
    assert all(file.suffix == ".jsonl" and file.stem != "con" for file in files)
    assert check(again).intact


def test_the_state_read_again_is_the_state_in_memory(pen: Recorder) -> None:
    pen.record("Weir", raw(), "file")
    place = place_of(pen.survey, "Weir", "main channel", "design flood")
    pen.choose(place, "base", BaseChoice(grade="cobble"))
    again = SurveyFolder(pen.survey.folder)
    assert again.reach_state("Weir") == pen.survey.reach_state("Weir")


def test_two_open_windows_see_each_others_lines(pen: Recorder) -> None:
    other = Recorder(SurveyFolder(pen.survey.folder), "Bo")
    pen.record("Weir", raw(), "file")
    other.adopt("Weir", "main channel", "design flood", 0.04, reason="r")
    pen.adopt("Weir", "main channel", "design flood", 0.05, reason="r")
    assert len(pen.survey.reach_trail("Weir").heads) == 1
    assert rows(other.survey)[0].n_adopted == 0.05


def test_a_broken_trail_is_read_only_and_named(pen: Recorder) -> None:
    pen.record("Weir", raw(), "file")
    path = pen.survey.reach_path("Weir")
    path.write_bytes(path.read_bytes().replace(b"Weir", b"Wehr"))
    survey = SurveyFolder(pen.survey.folder)
    with pytest.raises(RecordError, match="weir"):
        Recorder(survey, "Ada").record("Weir", raw(), "file")
    report = check(survey)
    assert not report.intact and any("weir" in fault.file for fault in report.broken)
    assert [row.reach.reach for row in rows(survey)] == ["Weir", "Mill"]


def test_check_finds_missing_files_cut_trails_and_changed_handbooks(pen: Recorder) -> None:
    pen.record("Weir", raw(), "file")
    pen.record("Mill", raw(), "file")
    assert check(pen.survey).intact
    pen.note_heads("leaving")
    path = pen.survey.reach_path("Weir")
    lines = path.read_bytes().splitlines(keepends=True)
    path.write_bytes(b"".join(lines[:-1]))
    assert any(
        "lines missing" in fault.what for fault in check(SurveyFolder(path.parents[1])).broken
    )
    path.write_bytes(b"".join(lines))
    assert check(SurveyFolder(path.parents[1])).intact
    pen.survey.reach_path("Mill").unlink()
    assert any("mill" in f.file for f in check(SurveyFolder(path.parents[1])).broken)


def test_a_changed_copy_of_a_shipped_handbook_is_found(pen: Recorder) -> None:
    pen.record("Weir", raw(), "file")
    (copy,) = pen.survey.handbooks.glob("*.toml")
    copy.write_bytes(copy.read_bytes().replace(b"low = 0.028", b"low = 0.018"))
    report = check(SurveyFolder(pen.survey.folder))
    assert any("edition" in fault.what for fault in report.broken)


def test_noted_heads_are_not_noted_twice(pen: Recorder) -> None:
    assert pen.note_heads("leaving") is not None
    assert pen.note_heads("leaving") is None


def test_an_unusable_handbook_is_named_by_its_file_and_line(pen: Recorder) -> None:
    (pen.survey.handbooks / "own.toml").write_text('key = "own"\nbest = = 1\n', encoding="utf-8")
    (fault,) = check(SurveyFolder(pen.survey.folder)).broken
    assert (fault.file, fault.line) == ("handbooks/own.toml", 2)
    assert "not TOML" in fault.what and "column 8" in fault.what


def test_a_linked_handbooks_folder_is_a_fault_and_hides_no_other(
    pen: Recorder, tmp_path: Path
) -> None:
    path = pen.survey.reach_path("Weir")
    path.write_bytes(path.read_bytes() + b"no line\n")
    pen.survey.handbooks.rename(tmp_path / "elsewhere")
    (pen.survey.folder / "handbooks").symlink_to(tmp_path / "elsewhere", target_is_directory=True)
    faults = {fault.file: fault.what for fault in check(SurveyFolder(pen.survey.folder)).broken}
    assert "is a link" in faults["handbooks"] and len(faults) == 2


def test_an_agencys_table_that_changed_after_use_is_named_by_its_file(pen: Recorder) -> None:
    pen.record("Weir", raw(), "file")
    (copy,) = pen.survey.handbooks.glob("*.toml")
    own = copy.with_name("our-tables.toml")
    own.write_bytes(copy.read_bytes().replace(b'key = "usgs-wsp-2339"', b'key = "our-tables"', 1))
    pen.record("Weir", raw().replace(b"usgs-wsp-2339", b"our-tables"), "file")
    assert check(SurveyFolder(pen.survey.folder)).intact
    own.write_bytes(own.read_bytes() + b"\n# revised\n")
    faults = check(SurveyFolder(pen.survey.folder)).broken
    assert {fault.file for fault in faults} == {"handbooks/our-tables.toml"}
    assert all("another edition of our-tables" in fault.what for fault in faults)


def test_a_survey_that_a_newer_version_wrote_is_read_only_in_its_reaches_too(pen: Recorder) -> None:
    lines: list[bytes] = []
    for line in pen.survey.path.read_bytes().splitlines():
        document = json.loads(line) | {"prev": hash_of(lines[-1]) if lines else None}
        document["data"] |= {"format": 2} if not lines else {}
        lines.append(json.dumps(document).encode())
    pen.survey.path.write_bytes(b"".join(line + b"\n" for line in lines))
    before = tree(pen.survey.folder)
    with pytest.raises(RecordError, match=r"format 2.*nothing was written"):
        pen.record("Weir", raw(), "file")
    assert tree(pen.survey.folder) == before


def test_an_agencys_table_that_changed_after_its_use_stops_what_was_chosen_from_it(
    pen: Recorder,
) -> None:
    text = (tables_folder() / "usgs-wsp-2339.toml").read_text(encoding="utf-8")
    own = pen.survey.handbooks / "ours.toml"
    own.write_text(text.replace('"usgs-wsp-2339"', '"ours"'), encoding="utf-8")
    pen.record("Weir", raw(handbook="ours"), "file")
    assert not rows(pen.survey)[0].stands_stopped
    own.write_text(own.read_text(encoding="utf-8").replace("low = 0.028", "low = 0.029"))
    row = rows(SurveyFolder(pen.survey.folder))[0]
    assert "other-edition" in [finding.rule for finding in row.findings]
    assert row.stands_stopped
