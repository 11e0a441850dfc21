"""Two people's folders of one survey meet: what is united, what is said, what is left alone."""

import json
import os
import shutil
from dataclasses import replace
from pathlib import Path
from typing import Any

import pytest
from pydantic import TypeAdapter

from roughness.__main__ import main
from roughness.commands.documents import MergeDocument
from roughness.desk.checking import check
from roughness.desk.folder import SurveyFolder
from roughness.desk.making import new_survey
from roughness.desk.merging import Merged, conflict_copies, merge, standing_conflicts
from roughness.desk.places import place_of
from roughness.desk.recording import Recorder, said
from roughness.desk.rows import rows
from roughness.errors import BrokenTrailError, InputError
from roughness.evidence.keeping import keep_copy
from roughness.survey.choices import Choice, VegetationChoice
from roughness.survey.stream import Part, Reach
from roughness.survey.words import Factor
from roughness.trail.data import Gate, SegmentShare
from roughness.trail.naming import file_name_for
from roughness.trail.review_data import Evidence
from roughness.trail.writing import append

Capture = pytest.CaptureFixture[str]
PART, FLOOD = "main channel", "design flood"
GRADES = {"irregularity": "minor", "vegetation": "small"}
FACTORS = {
    "base": {"grade": "gravel"},
    "irregularity": {"grade": "minor"},
    "variation": {"grade": "gradual"},
    "obstruction": {"grade": "negligible"},
    "vegetation": {"grade": "small"},
    "meander": {"grade": "minor"},
}


@pytest.fixture
def ann(tmp_path: Path) -> Path:
    survey = new_survey(tmp_path / "ann", "Ann", reaches=[Reach(reach="Weir"), Reach(reach="mill")])
    Recorder(survey, "Ann").add_part("Weir", Part(part=PART, setting="channel"))
    record(survey.folder, "Ann", "Weir")
    return survey.folder


@pytest.fixture
def bo(ann: Path, tmp_path: Path) -> Path:
    shutil.copytree(ann, tmp_path / "bo")
    return tmp_path / "bo"


def pen(folder: Path, by: str) -> Recorder:
    return Recorder(SurveyFolder(folder), by)


def record(folder: Path, by: str, reach: str) -> None:
    place = {"part": PART, "condition": FLOOD, "handbook": "usgs-wsp-2339", "setting": "channel"}
    pen(folder, by).record(reach, json.dumps(place | {"factors": FACTORS}).encode(), "file")


def choose(folder: Path, by: str, grade: str, factor: Factor = "vegetation") -> None:
    choice = VegetationChoice if factor == "vegetation" else Choice
    place = place_of(SurveyFolder(folder), "Weir", PART, FLOOD)
    pen(folder, by).choose(place, factor, choice(grade=grade))


def united(folder: Path, other: Path | None = None) -> Merged:
    return merge(SurveyFolder(folder), other)


def trails(folder: Path) -> dict[str, bytes]:
    return {
        str(path.relative_to(folder)): path.read_bytes() for path in sorted(folder.rglob("*.jsonl"))
    }


def everything(folder: Path) -> dict[str, bytes]:
    files = sorted(path for path in folder.rglob("*") if path.is_file())
    return {str(path): path.read_bytes() for path in files if path.name != ".lock"}


def file(reach: str) -> str:
    return f"{file_name_for(reach)}.jsonl"


def weir(folder: Path) -> Path:
    return folder / "reaches" / file("Weir")


def stops(folder: Path) -> list[str]:
    found = [f for row in rows(SurveyFolder(folder)) for f in row.findings]
    return [finding.says for finding in found if finding.rule == "merge-conflict"]


def test_both_directions_give_the_same_trails_and_merging_again_adds_nothing(
    ann: Path, bo: Path, tmp_path: Path
) -> None:
    choose(ann, "Ann", "medium")
    choose(bo, "Bo", "severe", "irregularity")
    shutil.copytree(ann, tmp_path / "ann2")
    united(ann, bo)
    united(bo, tmp_path / "ann2")
    assert trails(ann) == trails(bo)
    assert check(SurveyFolder(ann)).intact
    before = trails(ann)
    again = united(ann, bo)
    assert (again.united, again.not_taken) == ((), ())
    assert trails(ann) == before
    place = place_of(SurveyFolder(ann), "Weir", PART, FLOOD)
    plants, surface = place.at(None, "vegetation"), place.at(None, "irregularity")
    assert plants and plants.choice.grade == "medium"
    assert surface and surface.choice.grade == "severe"
    assert not stops(ann)


def test_where_one_side_holds_the_other_the_larger_one_is_taken_without_a_joining_line(
    ann: Path, bo: Path
) -> None:
    choose(bo, "Bo", "medium")
    (told,) = united(ann, bo).united
    assert (told.new_lines, told.joined) == (1, False)
    assert trails(ann) == trails(bo)
    before = trails(bo)
    assert united(bo, ann).united == ()
    assert trails(bo) == before


def test_one_factor_set_apart_is_a_stop_that_names_both_until_somebody_sets_it_again(
    ann: Path, bo: Path
) -> None:
    choose(ann, "Ann", "medium")
    choose(bo, "Bo", "large")
    assert united(ann, bo).not_taken == ()
    (says,) = stops(ann)
    assert "medium (Ann, 20" in says and "large (Bo, 20" in says
    assert check(SurveyFolder(ann)).intact and not check(SurveyFolder(ann)).passed
    (conflict,) = standing_conflicts(SurveyFolder(ann))
    assert (conflict.reach, conflict.part, conflict.condition) == ("Weir", PART, FLOOD)
    standing = place_of(SurveyFolder(ann), "Weir", PART, FLOOD).at(None, "vegetation")
    assert standing and f"{standing.choice.grade} by {standing.by} stands" in says
    choose(ann, "Cy", "medium")
    assert not stops(ann)
    united(bo, ann)
    assert not stops(bo)


def test_the_same_choice_on_both_sides_needs_nobody_to_choose(ann: Path, bo: Path) -> None:
    choose(ann, "Ann", "medium")
    choose(bo, "Bo", "medium")
    united(ann, bo)
    assert not stops(ann)


def test_a_whole_estimate_against_one_choice_is_a_conflict_about_that_factor(
    ann: Path, bo: Path
) -> None:
    choose(ann, "Ann", "large")
    record(bo, "Bo", "Weir")
    united(ann, bo)
    (says,) = stops(ann)
    assert says.startswith("The vegetation was set differently") and "small" in says


def test_a_factor_set_apart_is_told_also_where_another_condition_takes_it_over(
    ann: Path, bo: Path
) -> None:
    for folder, by, grade in ((ann, "Ann", "moderate"), (bo, "Bo", "severe")):
        choose(folder, by, grade, "irregularity")
    united(ann, bo)
    place = place_of(SurveyFolder(ann), "Weir", PART, "low flow")
    pen(ann, "Ann").choose(place, "vegetation", VegetationChoice(grade="small"))
    told = {
        row.condition.condition
        for row in rows(SurveyFolder(ann))
        if row.condition and any(f.rule == "merge-conflict" for f in row.findings)
    }
    assert told == {FLOOD, "low flow"}


def test_segments_set_apart_are_told_while_they_are_there(ann: Path, bo: Path) -> None:
    shares = (
        SegmentShare(name="Bed", perimeter_percent=60.0),
        SegmentShare(name="banks", perimeter_percent=40.0),
    )
    gate = Gate(part=PART, condition=FLOOD, handbook="usgs-wsp-2339", segments=shares)
    pen(ann, "Ann").set_gate("Weir", gate)
    united(bo, ann)
    for folder, by, grade in ((ann, "Ann", "medium"), (bo, "Bo", "large")):
        place = place_of(SurveyFolder(folder), "Weir", PART, FLOOD)
        choice = VegetationChoice(grade=grade)
        pen(folder, by).choose(place, "vegetation", choice, segment="bed")
    united(ann, bo)
    (says,) = stops(ann)
    assert says.lower().startswith("the vegetation of the segment bed was set differently")
    pen(ann, "Ann").set_gate("Weir", replace(gate, segments=None))
    assert not stops(ann)


def test_withdrawing_one_side_settles_it(ann: Path, bo: Path) -> None:
    choose(ann, "Ann", "medium")
    choose(bo, "Bo", "large")
    united(ann, bo)
    survey = SurveyFolder(ann)
    line = next(n for n in survey.reach_trail("Weir").lines if n.by == "Bo")
    pen(ann, "Bo").withdraw("Weir", line)
    assert not stops(ann)
    standing = place_of(SurveyFolder(ann), "Weir", PART, FLOOD).at(None, "vegetation")
    assert standing and standing.choice.grade == "medium"


def test_the_estimate_is_by_whoever_judged_last_wherever_that_stands_in_the_file(
    ann: Path, bo: Path
) -> None:
    lock, place = SurveyFolder(ann).lock, {"part": PART, "condition": FLOOD}
    data = place | {"handbook": "usgs-wsp-2339", "handbook_sha256": "c" * 64}
    for folder, by, factor, hours in (
        (ann, "Ann", "irregularity", (1, 2, 3)),
        (bo, "Bo", "vegetation", (4,)),
    ):
        for hour in hours:  # Ann's way is the longer one, Bo's word the later one
            choice = data | {"factor": factor, "choice": {"grade": GRADES[factor]}}
            at = f"2027-01-01T0{hour}:00:00Z"
            append(weir(folder), "choose", choice, by=by, at=at, lock=lock)
    united(ann, bo)
    assert SurveyFolder(ann).reach_trail("Weir").lines[-2].by == "Ann"
    row = next(row for row in rows(SurveyFolder(ann)) if row.reach.reach == "Weir")
    assert (row.estimated_by, row.estimated_at) == ("Bo", "2027-01-01T04:00:00Z")


def test_two_adopted_values_are_told_apart(ann: Path, bo: Path) -> None:
    pen(ann, "Ann").adopt("Weir", PART, FLOOD, 0.04, reason="calibrated")
    pen(bo, "Bo").adopt("Weir", PART, FLOOD, 0.05, reason="flood marks")
    united(ann, bo)
    (says,) = stops(ann)
    assert "0.040 (Ann" in says and "0.050 (Bo" in says


def test_reaches_that_both_sides_added_are_there_afterwards(ann: Path, bo: Path) -> None:
    pen(ann, "Ann").add_reach(Reach(reach="Ford"))
    pen(bo, "Bo").add_reach(Reach(reach="Bend"))
    record(bo, "Bo", "Bend")
    merged = united(ann, bo)
    assert [told.file for told in merged.united if told.is_new] == ["reaches/" + file("Bend")]
    assert {r.reach for r in SurveyFolder(ann).state.reaches} == {"Weir", "mill", "Ford", "Bend"}
    assert check(SurveyFolder(ann)).intact
    united(bo, ann)
    assert trails(ann) == trails(bo)


def test_one_name_begun_on_both_sides_is_refused_with_what_to_do_and_the_rest_is_united(
    ann: Path, bo: Path
) -> None:
    pen(ann, "Ann").add_reach(Reach(reach="Ford"))
    pen(bo, "Bo").add_reach(Reach(reach="ford"))
    choose(bo, "Bo", "medium")
    before = trails(ann)
    merged = united(ann, bo)
    assert [told.file for told in merged.united] == [f"reaches/{weir(ann).name}"]
    whys = " ".join(refused.why for refused in merged.not_taken)
    assert "begun apart" in whys and "another name" in whys
    changed = {name for name, raw in trails(ann).items() if before.get(name) != raw}
    assert changed == {f"reaches/{weir(ann).name}"}
    survey = SurveyFolder(bo)
    begun = next(n for n in survey.trail().lines if n.data.get("reach") == "ford")
    pen(bo, "Bo").withdraw(None, begun)
    pen(bo, "Bo").add_reach(Reach(reach="upper ford"))
    assert not united(ann, bo).not_taken
    assert check(SurveyFolder(ann)).intact
    names = {r.reach for r in SurveyFolder(ann).state.reaches}
    assert names == {"Weir", "mill", "Ford", "upper ford"}


def test_conflict_copies_inside_the_folder_are_found_united_and_left_for_their_owner(
    ann: Path, bo: Path
) -> None:
    choose(ann, "Ann", "medium")
    choose(bo, "Bo", "large")
    pen(bo, "Bo").add_reach(Reach(reach="Bend"))
    beside = weir(ann).with_name("Weir (Bo's copy in conflict).jsonl")
    shutil.copy(weir(bo), beside)
    shutil.copy(bo / "survey.jsonl", ann / "survey (1).jsonl")
    shutil.copy(bo / "reaches" / file("Bend"), ann / "reaches" / "other.jsonl")
    (ann / "notes.jsonl").write_text('{"a": 1}\n')
    copies = {beside, ann / "survey (1).jsonl", ann / "reaches" / "other.jsonl"}
    assert set(conflict_copies(SurveyFolder(ann))) == copies
    before = {path: path.read_bytes() for path in copies}
    merged = united(ann)
    assert set(merged.removable) == {str(path.relative_to(ann)) for path in copies}
    assert len(stops(ann)) == 1
    assert {path: path.read_bytes() for path in copies} == before
    assert conflict_copies(SurveyFolder(ann)) == ()
    united(bo, ann)
    assert SurveyFolder(bo).trail().lines == SurveyFolder(ann).trail().lines


def test_two_ends_that_a_sync_tool_put_into_one_file_are_joined(ann: Path, bo: Path) -> None:
    choose(ann, "Ann", "medium")
    choose(bo, "Bo", "large")
    last = weir(bo).read_bytes().splitlines(keepends=True)[-1]
    # As a line-by-line union leaves it, one line of it twice.
    weir(ann).write_bytes(weir(ann).read_bytes() + last + last)
    assert not check(SurveyFolder(ann)).intact
    (told,) = united(ann).united
    assert told.joined
    assert check(SurveyFolder(ann)).intact and len(stops(ann)) == 1
    united(bo, ann)
    assert weir(bo).read_bytes() == weir(ann).read_bytes()


def test_a_noted_end_stays_though_more_is_joined_later(ann: Path, bo: Path, tmp_path: Path) -> None:
    cy = Path(shutil.copytree(ann, tmp_path / "cy"))
    choose(ann, "Ann", "medium")
    choose(bo, "Bo", "severe", "irregularity")
    record(cy, "Cy", "mill")
    united(ann, bo)
    pen(ann, "Ann").note_heads("export")
    noted = SurveyFolder(ann).reach_trail("Weir").heads[0]
    choose(bo, "Bo", "moderate", "irregularity")
    united(ann, bo)
    united(ann, cy)
    assert noted in SurveyFolder(ann).reach_trail("Weir").by_hash
    assert check(SurveyFolder(ann)).intact
    united(bo, ann)
    assert trails(bo) == trails(ann)


def spoil_first_byte(path: Path) -> None:
    path.write_bytes(b"X" + path.read_bytes()[1:])


def spoil_middle(path: Path) -> None:
    path.write_bytes(path.read_bytes().replace(b"channel", b"Channel", 1))


def tear(path: Path) -> None:
    path.write_bytes(path.read_bytes()[:-9])


def make_newer(path: Path) -> None:
    path.write_bytes(path.read_bytes().replace(b'"format": 1', b'"format": 9', 1))


def make_link(path: Path) -> None:
    aside = path.with_suffix(".away")
    path.rename(aside)
    path.symlink_to(aside)


def make_empty(path: Path) -> None:
    path.write_bytes(b"")


def make_noise(path: Path) -> None:
    path.write_bytes(os.urandom(2000))


SPOILT = [spoil_first_byte, spoil_middle, tear, make_newer, make_link, make_empty, make_noise]


@pytest.mark.parametrize("spoil", SPOILT)
def test_a_single_trail_that_cannot_be_used_is_one_sentence_and_changes_nothing(
    spoil: Any, ann: Path, bo: Path, capsys: Capture
) -> None:
    choose(ann, "Ann", "medium")
    choose(bo, "Bo", "large")
    spoil(weir(bo))
    before = everything(ann)
    assert main(["merge", str(ann), str(weir(bo))]) == 2
    out, err = capsys.readouterr()
    assert out == "" and len(err.splitlines()) == 1 and str(weir(bo)) in err
    assert everything(ann) == before


@pytest.mark.parametrize("spoil", SPOILT)
def test_in_a_folder_the_other_trails_are_united_and_the_bad_one_is_named(
    spoil: Any, ann: Path, bo: Path, capsys: Capture
) -> None:
    choose(ann, "Ann", "medium")
    choose(bo, "Bo", "large")
    record(bo, "Bo", "mill")
    spoil(weir(bo))
    before = weir(ann).read_bytes()
    assert main(["merge", str(ann), str(bo)]) == 1
    out, err = capsys.readouterr()
    assert "reaches/mill.jsonl: 1 new line" in out
    assert weir(bo).name in err and len(err.splitlines()) == 1
    assert weir(ann).read_bytes() == before


@pytest.mark.parametrize("spoil", [spoil_first_byte, spoil_middle, make_newer])
def test_an_own_trail_that_cannot_be_used_is_not_written_to(
    spoil: Any, ann: Path, bo: Path
) -> None:
    choose(ann, "Ann", "small")
    choose(bo, "Bo", "large")
    spoil(weir(ann))
    before = everything(ann)
    assert any("reaches/" in refused.file for refused in united(ann, bo).not_taken)
    assert everything(ann) == before


def test_a_broken_trail_of_the_survey_itself_stops_everything(ann: Path, bo: Path) -> None:
    choose(bo, "Bo", "large")
    (ann / "survey.jsonl").write_bytes((ann / "survey.jsonl").read_bytes() + b"noise\n")
    before = everything(ann)
    with pytest.raises(BrokenTrailError, match="nothing was changed"):
        united(ann, bo)
    assert everything(ann) == before


def test_an_own_torn_tail_is_moved_aside_before_the_file_is_written_anew(
    ann: Path, bo: Path
) -> None:
    choose(bo, "Bo", "large")
    with weir(ann).open("ab") as out:
        out.write(b'{"prev": "half a li')
    assert united(ann, bo).repaired == 1
    assert weir(ann).read_bytes() == weir(bo).read_bytes()
    assert b"half a li" in weir(ann).with_name(f"{weir(ann).name}.torn").read_bytes()


def test_line_ends_that_a_tool_changed_are_mended(ann: Path, bo: Path) -> None:
    choose(ann, "Ann", "medium")
    choose(bo, "Bo", "severe", "irregularity")
    for name in trails(bo):
        (bo / name).write_bytes((bo / name).read_bytes().replace(b"\n", b"\r\n"))
    united(ann, bo)
    united(bo, ann)
    assert trails(ann) == trails(bo)
    assert not any(b"\r" in raw for raw in trails(bo).values())


def test_a_folder_may_be_reached_over_a_link_but_a_linked_trail_is_not_followed(
    ann: Path, bo: Path, tmp_path: Path
) -> None:
    choose(bo, "Bo", "medium")
    (tmp_path / "way").symlink_to(bo)
    (bo / "reaches" / "more.jsonl").symlink_to(weir(ann))
    merged = united(ann, tmp_path / "way")
    assert len(merged.united) == 1
    (refused,) = merged.not_taken
    assert "more.jsonl" in refused.file and "link" in refused.why


def test_another_survey_is_refused_whole(ann: Path, tmp_path: Path) -> None:
    other = new_survey(tmp_path / "other", "Di", reaches=[Reach(reach="Weir")]).folder
    before = everything(ann)
    with pytest.raises(InputError, match="another survey"):
        united(ann, other)
    merged = united(ann, weir(other))
    assert [refused.why for refused in merged.not_taken] == ["it belongs to another survey"]
    assert everything(ann) == before


@pytest.mark.parametrize("what", ["itself", "its trail", "missing", "empty folder", "text"])
def test_what_is_no_copy_is_refused(what: str, ann: Path, tmp_path: Path) -> None:
    (tmp_path / "empty").mkdir()
    (tmp_path / "text.txt").write_text("hello\n")
    other = {
        "itself": ann / "reaches" / "..",
        "its trail": weir(ann),
        "missing": tmp_path / "nothing",
        "empty folder": tmp_path / "empty",
        "text": tmp_path / "text.txt",
    }[what]
    before = everything(ann)
    assert main(["merge", str(ann), str(other)]) == 2
    assert everything(ann) == before


def test_evidence_and_handbooks_come_along_where_they_are_what_the_trails_say(
    ann: Path, bo: Path, tmp_path: Path
) -> None:
    kept = []
    for name in ("good", "spoilt", "here"):
        (tmp_path / f"{name}.txt").write_text(name)
        one = keep_copy(bo, tmp_path / f"{name}.txt")
        data = said(Evidence(file=one.file, sha256=one.sha256, size=one.size, name=one.name))
        append(weir(bo), "evidence", data, by="Bo", at="2026-06-01T10:00:00Z",
               lock=SurveyFolder(bo).lock)  # fmt: skip
        kept.append(one.file)
    (bo / kept[1]).write_text("swapped")
    (ann / kept[2]).write_text("taken")
    text = (bo / "handbooks" / "usgs-wsp-2339.toml").read_text("utf-8")
    (bo / "handbooks" / "usgs-wsp-2339.toml").write_text(text + "\n# ours\n", "utf-8")
    files = united(ann, bo).files
    assert files.copied == (kept[0],)
    assert (ann / kept[0]).read_text() == "good"
    assert not (ann / kept[1]).exists() and (ann / kept[2]).read_text() == "taken"
    assert any("not what the trail says" in why for why in files.left)
    assert any("another edition" in why for why in files.left)


def test_a_handbook_that_choices_rest_on_is_copied(ann: Path, bo: Path) -> None:
    (ann / "handbooks" / "usgs-wsp-2339.toml").unlink()
    choose(bo, "Bo", "medium")
    assert united(ann, bo).files.copied == ("handbooks/usgs-wsp-2339.toml",)


def test_the_command_says_what_it_did_and_leaves_with_one_while_a_conflict_stands(
    ann: Path, bo: Path, capsys: Capture
) -> None:
    choose(ann, "Ann", "medium")
    choose(bo, "Bo", "large")
    assert main(["merge", str(ann), str(bo)]) == 1
    out, err = capsys.readouterr()
    assert "1 new line, two ends joined" in out and "stop: Weir, main channel" in out
    assert err == ""
    assert main(["merge", str(ann), str(bo), "--json"]) == 1
    printed = TypeAdapter(MergeDocument).validate_json(capsys.readouterr().out, strict=True)
    assert printed.united == () and printed.conflicts[0].reach == "Weir"
    choose(ann, "Cy", "large")
    assert main(["merge", str(ann), str(bo)]) == 0
    assert capsys.readouterr().out == "nothing new\n"
