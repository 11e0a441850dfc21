"""Attaching photos and documents to a reach, from the desk and from the command line."""

import json
import os
from pathlib import Path
from typing import Any

import pytest
from PIL import Image

from roughness.__main__ import main
from roughness.desk.attaching import attach, recaption
from roughness.desk.evidence_lists import evidence_faults, evidence_of, unlisted_evidence
from roughness.desk.folder import SurveyFolder
from roughness.desk.making import new_survey
from roughness.desk.recording import Recorder
from roughness.errors import InputError, RecordError, UnknownNameError
from roughness.survey.stream import FlowCondition, Part, Reach, Visit

TAKEN = "2026:06:30 14:03:22"


@pytest.fixture
def pen(tmp_path: Path) -> Recorder:
    reaches = [Reach(reach="Weir"), Reach(reach="Mill")]
    pen = Recorder(new_survey(tmp_path / "s", "Ada", reaches=reaches), "Ada")
    pen.add_condition(FlowCondition(condition="design flood"))
    pen.add_part("Weir", Part(part="mill race", setting="channel"))
    pen.note_visit("Weir", Visit(visit="2026-06-30"))
    return pen


def photo(path: Path, colour: str = "green", *, offset: str = "+02:00") -> Path:
    exif = Image.Exif()
    exif.get_ifd(0x8769).update({0x9003: TAKEN, 0x9011: offset})
    exif.get_ifd(0x8825).update({1: "N", 2: (47.0, 30.0, 36.0), 3: "E", 4: (8.0, 15.0, 0.0)})
    Image.new("RGB", (60, 40), colour).save(path, exif=exif)
    return path


def tree(folder: Path) -> dict[str, bytes]:
    return {str(p): p.read_bytes() for p in sorted(folder.rglob("*")) if p.is_file()}


def lines(pen: Recorder, reach: str = "Weir") -> list[dict[str, Any]]:
    trail = pen.survey.reach_trail(reach)
    return [dict(line.data) for line in trail.lines if line.kind == "evidence"]


def test_a_photo_is_copied_and_one_line_says_all_that_is_known_of_it(
    pen: Recorder, tmp_path: Path
) -> None:
    source = photo(tmp_path / "DSC 0042.jpg")
    attached = attach(
        pen,
        "weir",
        source,
        caption="  left bank, willows ",
        factors=["vegetation", "base", "vegetation"],
        part="Main Channel",
        condition="Design flood",
        visit="2026-06-30",
    )
    said = dict(attached.line.data)
    assert said["file"] == f"evidence/{said['sha256'][:12]}-dsc-0042.jpg"
    assert (pen.survey.folder / said["file"]).read_bytes() == source.read_bytes()
    assert said | {"file": "", "sha256": ""} == {
        "file": "",
        "sha256": "",
        "size": source.stat().st_size,
        "name": "DSC 0042.jpg",
        "caption": "left bank, willows",
        "factors": ["base", "vegetation"],
        "part": "main channel",
        "condition": "design flood",
        "visit": "2026-06-30",
        "taken_at": "2026-06-30T14:03:22+02:00",
        "position": [8.25, 47.51],
    }
    assert (attached.is_new, attached.tells) == (True, ())
    assert len(lines(pen)) == 1


def test_a_position_can_be_left_out_of_the_trail_and_it_is_said_what_stays(
    pen: Recorder, tmp_path: Path
) -> None:
    attached = attach(pen, "Weir", photo(tmp_path / "a.jpg"), with_position=False)
    assert "position" not in attached.line.data
    assert attached.tells == (
        "its position is not in the trail, but still in the copy: that stays as it came",
    )


def test_a_time_without_offset_is_kept_so_and_said(pen: Recorder, tmp_path: Path) -> None:
    attached = attach(pen, "Weir", photo(tmp_path / "a.jpg", offset=""))
    assert attached.line.data["taken_at"] == "2026-06-30T14:03:22"
    assert "without its offset" in attached.tells[0]


def test_the_same_photo_again_replaces_the_caption_and_keeps_the_rest(
    pen: Recorder, tmp_path: Path
) -> None:
    source = photo(tmp_path / "a.jpg")
    attach(pen, "Weir", source, caption="old", factors=["base"])
    again = attach(pen, "Weir", source.rename(tmp_path / "b.jpg"), caption="new")
    assert not again.is_new
    (item,) = evidence_of(pen.survey, "Weir")
    assert (item.evidence.caption, item.evidence.factors) == ("new", ("base",))
    assert item.evidence.name == "a.jpg"
    assert len(list((pen.survey.folder / "evidence").iterdir())) == 1
    assert len(lines(pen)) == 2


def test_the_same_photo_again_with_nothing_new_writes_nothing(
    pen: Recorder, tmp_path: Path
) -> None:
    source = photo(tmp_path / "a.jpg")
    first = attach(pen, "Weir", source, caption="bank")
    before = tree(pen.survey.folder)
    assert attach(pen, "Weir", source, caption="bank").line == first.line
    assert tree(pen.survey.folder) == before


def test_one_photo_of_two_reaches_is_one_file(pen: Recorder, tmp_path: Path) -> None:
    source = photo(tmp_path / "a.jpg")
    one, two = attach(pen, "Weir", source), attach(pen, "Mill", source)
    assert one.line.data["file"] == two.line.data["file"]
    assert two.is_new


def test_words_are_replaced_kept_or_taken_away(pen: Recorder, tmp_path: Path) -> None:
    sha256 = attach(
        pen, "Weir", photo(tmp_path / "a.jpg"), caption="bank", factors=["base"], part="mill race"
    ).line.data["sha256"]
    recaption(pen, "Weir", sha256, caption="bed", part="")
    (item,) = evidence_of(pen.survey, "Weir")
    assert (item.evidence.caption, item.evidence.part) == ("bed", None)
    assert item.evidence.factors == ("base",)
    assert item.evidence.position == (8.25, 47.51)
    recaption(pen, "Weir", sha256, caption="", factors=[])
    (item,) = evidence_of(pen.survey, "Weir")
    assert (item.evidence.caption, item.evidence.factors) == (None, None)
    with pytest.raises(InputError, match="has no evidence"):
        recaption(pen, "Mill", sha256, caption="x")


@pytest.mark.parametrize(
    ("words", "wanted"),
    [
        ({"part": "mill rce"}, "did you mean 'mill race'"),
        ({"condition": "desing flood"}, "did you mean 'design flood'"),
        ({"visit": "2026-07-30"}, "did you mean '2026-06-30'"),
        ({"factors": ["vegetatoin"]}, "did you mean 'vegetation'"),
    ],
)
def test_unknown_words_are_refused_with_the_nearest_and_nothing_is_written(
    pen: Recorder, tmp_path: Path, words: dict[str, Any], wanted: str
) -> None:
    before = tree(pen.survey.folder)
    with pytest.raises(UnknownNameError) as caught:
        attach(pen, "Weir", photo(tmp_path / "a.jpg"), **words)
    assert wanted in str(caught.value)
    assert tree(pen.survey.folder) == before


def test_what_promises_a_picture_and_is_none_is_refused(pen: Recorder, tmp_path: Path) -> None:
    source = tmp_path / "a.jpg"
    source.write_text("gauge read 0.84 m")
    before = tree(pen.survey.folder)
    with pytest.raises(InputError, match="no picture"):
        attach(pen, "Weir", source)
    assert tree(pen.survey.folder) == before
    tells = attach(pen, "Weir", source.rename(tmp_path / "a.txt")).tells
    assert tells == ("kept as a document: it is known by its hash and not shown here",)


def test_a_photo_that_is_cut_off_is_kept_and_it_is_said(pen: Recorder, tmp_path: Path) -> None:
    source = tmp_path / "a.jpg"
    exif = Image.Exif()
    exif.get_ifd(0x8769)[0x9003] = TAKEN
    Image.effect_noise((200, 150), 80).save(source, exif=exif)
    source.write_bytes(source.read_bytes()[:-2000])
    attached = attach(pen, "Weir", source)
    assert attached.line.data["taken_at"] == "2026-06-30T14:03:22"
    assert any("cut off or damaged" in tell for tell in attached.tells)


def test_no_copy_stays_where_the_trail_cannot_take_the_line(pen: Recorder, tmp_path: Path) -> None:
    path = pen.survey.reach_path("Weir")
    path.write_bytes(path.read_bytes() + b'{"prev":"' + b"0" * 64 + b'"}\n')
    before = tree(pen.survey.folder)
    with pytest.raises(RecordError, match="read-only"):
        attach(pen, "Weir", photo(tmp_path / "a.jpg"))
    assert tree(pen.survey.folder) == before


def test_evidence_says_what_it_is_about(pen: Recorder, tmp_path: Path) -> None:
    attach(pen, "Weir", photo(tmp_path / "a.jpg", "red"))
    attach(pen, "Weir", photo(tmp_path / "b.jpg", "blue"), part="mill race", factors=["base"])
    whole, race = evidence_of(pen.survey, "Weir")
    assert whole.supports("main channel", "design flood", "vegetation")
    assert race.supports("Mill race", "any", "base")
    assert not race.supports("mill race", "any", "vegetation")
    assert not race.supports("main channel", "any", "base")


def test_missing_and_changed_files_are_found_and_named(pen: Recorder, tmp_path: Path) -> None:
    one = attach(pen, "Weir", photo(tmp_path / "a.jpg", "red")).line.data["file"]
    two = attach(pen, "Mill", photo(tmp_path / "b.jpg", "blue")).line.data["file"]
    assert list(evidence_faults(pen.survey)) == []
    (pen.survey.folder / one).unlink()
    copy = pen.survey.folder / two
    raw = bytearray(copy.read_bytes())
    raw[-10] ^= 1
    copy.write_bytes(raw)
    found = {(f.file, f.line, f.what) for f in evidence_faults(SurveyFolder(pen.survey.folder))}
    assert found == {
        (one, 0, "the file is missing; it belongs to Weir"),
        (two, 0, "it is not the file that was attached (its bytes differ); it belongs to Mill"),
    }
    assert [item.may_be_shown for item in evidence_of(pen.survey, "Weir")] == [False]


def test_every_flipped_byte_of_a_photo_is_found(pen: Recorder, tmp_path: Path) -> None:
    file = attach(pen, "Weir", photo(tmp_path / "a.jpg")).line.data["file"]
    copy = pen.survey.folder / file
    whole = copy.read_bytes()
    for at in range(0, len(whole), 7):
        copy.write_bytes(whole[:at] + bytes([whole[at] ^ 0x10]) + whole[at + 1 :])
        assert [item.held for item in evidence_of(pen.survey, "Weir")] == ["changed"]
    copy.write_bytes(whole)
    assert [item.held for item in evidence_of(pen.survey, "Weir")] == ["ok"]


def test_attaching_a_lost_photo_again_puts_it_back(pen: Recorder, tmp_path: Path) -> None:
    source = photo(tmp_path / "a.jpg")
    file = attach(pen, "Weir", source).line.data["file"]
    (pen.survey.folder / file).unlink()
    attach(pen, "Weir", source.rename(tmp_path / "found again.jpg"))
    assert list(evidence_faults(pen.survey)) == []


def test_withdrawn_evidence_is_neither_missed_nor_unlisted(pen: Recorder, tmp_path: Path) -> None:
    attached = attach(pen, "Weir", photo(tmp_path / "a.jpg"))
    pen.withdraw("Weir", attached.line)
    assert evidence_of(pen.survey, "Weir") == ()
    assert unlisted_evidence(pen.survey) == ()
    (pen.survey.folder / attached.line.data["file"]).unlink()
    assert list(evidence_faults(pen.survey)) == []


def test_files_that_no_trail_names_are_told(pen: Recorder, tmp_path: Path) -> None:
    attach(pen, "Weir", photo(tmp_path / "a.jpg"))
    (pen.survey.folder / "evidence" / "stray.jpg").write_bytes(b"x")
    assert unlisted_evidence(pen.survey) == ("evidence/stray.jpg",)
    path = pen.survey.reach_path("Mill")
    whole = path.read_bytes()
    path.write_bytes(whole + b"not a line\n")
    assert unlisted_evidence(pen.survey) == ()  # the broken line may have named it
    path.unlink()
    assert unlisted_evidence(pen.survey) == ()


def test_check_names_a_swapped_photo_and_tells_of_a_stray_file(
    pen: Recorder, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    file = attach(pen, "Weir", photo(tmp_path / "a.jpg", "red")).line.data["file"]
    (pen.survey.folder / "evidence" / "stray.jpg").write_bytes(b"x")
    assert main(["check", str(pen.survey.folder), "--json"]) == 0
    told = capsys.readouterr()
    assert json.loads(told.out)["intact"] is True
    assert told.err.startswith("evidence/stray.jpg: no reach names it")
    photo(pen.survey.folder / file, "blue")
    assert main(["check", str(pen.survey.folder), "--json"]) == 1
    said = json.loads(capsys.readouterr().out)
    assert (said["intact"], [fault["file"] for fault in said["broken"]]) == (False, [file])


# -- the verb ---------------------------------------------------------------------------


def run(*words: object) -> int:
    return main(["attach", *map(str, words)])


def test_the_verb_attaches_several_files_and_says_what_was_kept(
    pen: Recorder, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    files = [photo(tmp_path / "a.jpg", "red"), photo(tmp_path / "b.jpg", "blue")]
    words = [pen.survey.folder, "Weir", *files, "--caption", "bank", "--factor", "base"]
    assert run(*words, "--factor", "vegetation", "--by", "Bo", "--json") == 0
    said = json.loads(capsys.readouterr().out)
    assert [one["name"] for one in said] == ["a.jpg", "b.jpg"]
    assert all(one["by"] == "Bo" and one["factors"] == ["base", "vegetation"] for one in said)
    assert run(*words, "--without-position", "--by", "Bo") == 0
    out = capsys.readouterr().out
    assert "kept for Weir" in out
    assert "\x1b" not in out
    assert all("position" not in line for line in lines(pen)[2:])


def test_one_unfit_file_among_several_is_refused_before_the_first_is_copied(
    pen: Recorder, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    before = tree(pen.survey.folder)
    good, bad = photo(tmp_path / "a.jpg"), tmp_path / "b.exe"
    bad.write_bytes(b"MZ")
    assert run(pen.survey.folder, "Weir", good, bad, "--by", "Bo") == 2
    out = capsys.readouterr()
    assert out.out == ""
    assert out.err.startswith("roughness: b.exe: files ending in .exe are not taken")
    assert out.err.count("\n") == 1
    assert tree(pen.survey.folder) == before


def test_hidden_signs_in_a_file_name_reach_no_terminal(
    pen: Recorder, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    source = photo(tmp_path / "a\x1b[2J\u202egpj.jpg")
    assert run(pen.survey.folder, "Weir", source, "--by", "Bo") == 0
    out = capsys.readouterr()
    assert "\x1b" not in out.out + out.err
    assert "\u202e" not in out.out + out.err
    assert lines(pen)[0]["name"] == "a\\u001b[2J\\u202egpj.jpg"


@pytest.mark.skipif(os.name == "nt", reason="names are text there")
def test_a_name_that_is_no_text_is_kept_as_something_that_is(pen: Recorder, tmp_path: Path) -> None:
    source = photo(tmp_path / "a.jpg").rename(os.fsdecode(os.fsencode(tmp_path) + b"/\xff.jpg"))
    attach(pen, "Weir", source)
    assert lines(pen)[0]["name"] == "\\udcff.jpg"
