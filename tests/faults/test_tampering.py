"""Whatever is done to a trail with all kinds of lines after an acceptance, check finds it."""

import hashlib
import json
import shutil
from collections.abc import Iterator
from pathlib import Path

import pytest

from roughness.assessment.reading import judgement_from
from roughness.desk.checking import check
from roughness.desk.folder import SurveyFolder
from roughness.desk.making import new_survey
from roughness.desk.merging import merge
from roughness.desk.opinions import agree, give_opinion
from roughness.desk.places import Place, place_of
from roughness.desk.recording import Recorder
from roughness.desk.reviewing import Reviewer
from roughness.desk.rows import Row, rows
from roughness.shelf.places import tables_folder
from roughness.survey.choices import BaseChoice, Judgement
from roughness.survey.stream import FlowCondition, Part, Reach, Visit
from roughness.trail.data import Gate
from roughness.trail.kinds import KINDS_OF_REACH
from roughness.trail.lines import encoded, hash_of
from roughness.trail.reading import Fault, verified

FLOOD, CHANNEL = "design flood", "main channel"
FACTORS = {
    "base": {"grade": "gravel"},
    "irregularity": {"grade": "minor"},
    "variation": {"grade": "gradual"},
    "obstruction": {"grade": "negligible"},
    "vegetation": {"grade": "medium", "note": "willows, seen leafless"},
    "meander": {"grade": "minor"},
}


def here(pen: Recorder) -> Place:
    return place_of(pen.survey, "Weir", CHANNEL, FLOOD)


def row(survey: SurveyFolder) -> Row:
    return next(row for row in rows(survey) if row.reach.reach == "Weir")


def judged(**changes: object) -> Judgement:
    document = {"handbook": "usgs-wsp-2339", "setting": "channel", "factors": FACTORS | changes}
    return judgement_from(document, "test")


def photo(pen: Recorder) -> None:
    content = b"not looked at by this test"
    sha = hashlib.sha256(content).hexdigest()
    (pen.survey.folder / "evidence" / f"{sha[:12]}-sheet.txt").write_bytes(content)
    data = {"file": f"evidence/{sha[:12]}-sheet.txt", "sha256": sha, "size": len(content)}
    pen.say_of_reach("Weir", "evidence", data | {"name": "sheet.txt"})


@pytest.fixture(scope="module")
def whole(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """A survey whose one reach has a line of every kind but a merge, the last an acceptance."""
    folder = tmp_path_factory.mktemp("tampering") / "s"
    ada = Recorder(new_survey(folder, "Ada", reaches=[Reach(reach="Weir")]), "Ada")
    ada.add_condition(FlowCondition(condition=FLOOD))
    ada.describe_reach("Weir", slope=0.002)
    ada.add_part("Weir", Part(part=CHANNEL, setting="channel"))
    ada.note_visit("Weir", Visit(visit="spring"))
    ada.set_gate("Weir", Gate(part=CHANNEL, condition=FLOOD, handbook="usgs-wsp-2339"))
    filed = {"part": CHANNEL, "condition": FLOOD, "handbook": "usgs-wsp-2339"}
    estimate = filed | {"setting": "channel", "factors": FACTORS}
    ada.record("Weir", json.dumps(estimate).encode(), "test")
    ada.choose(here(ada), "base", BaseChoice(grade="cobble"))
    photo(ada)
    give_opinion(Recorder(ada.survey, "Bo"), here(ada), judged())
    agree(ada, here(ada), judged(), reason="walked it together")
    ada.withdraw("Weir", ada.adopt("Weir", CHANNEL, FLOOD, 0.05, reason="gauged"))
    rea = Reviewer(Recorder(ada.survey, "Rea"))
    question = rea.ask(here(ada), "which gravel?", factor="base")
    Reviewer(ada).answer("Weir", question.hash, "that of the bar")
    finding = next(one for one in row(ada.survey).findings if one.level != "stop")
    Reviewer(ada).answer_finding(here(ada), finding, "known")
    rea.return_(here(ada), "look at the willows")
    rea.accept(row(ada.survey))
    return folder


@pytest.fixture
def survey(whole: Path) -> Iterator[Path]:
    """The survey, whole again after the test."""
    files = {path: path.read_bytes() for path in whole.rglob("*.jsonl")}
    yield whole
    for path, raw in files.items():
        path.write_bytes(raw)


def trail_of(folder: Path) -> Path:
    (path,) = (folder / "reaches").glob("*.jsonl")
    return path


def lines_of(path: Path) -> list[bytes]:
    return path.read_bytes().splitlines(keepends=True)


def found(folder: Path) -> list[Fault]:
    return list(check(SurveyFolder(folder)).broken)


def names(faults: list[Fault], path: Path, *lines: int) -> bool:
    """Whether a fault names the file and one of the lines, or what the survey noted of it."""
    return any(
        fault.file.endswith(path.name)
        and (fault.line in lines or "noted a line that is not there" in fault.what)
        for fault in faults
    )


def test_the_trail_has_a_line_of_every_kind_and_is_intact(survey: Path) -> None:
    kinds = {line.kind for line in SurveyFolder(survey).reach_trail("Weir").lines}
    assert kinds == set(KINDS_OF_REACH) - {"merge"}
    assert found(survey) == []


def test_every_line_changed_at_several_places_is_found_and_named(survey: Path) -> None:
    path = trail_of(survey)
    lines = lines_of(path)
    for at, line in enumerate(lines):
        for place in (0, line.index(b'"by"') + 8, len(line) // 2, len(line) - 3):
            changed = bytearray(line)
            changed[place] ^= 1
            path.write_bytes(b"".join([*lines[:at], bytes(changed), *lines[at + 1 :]]))
            assert names(found(survey), path, at + 1, at + 2), (at + 1, place)


def test_every_byte_of_every_line_changed_is_found_and_named(survey: Path) -> None:
    path = trail_of(survey)
    whole, head = path.read_bytes(), SurveyFolder(survey).state.heads[-1][1].heads["Weir"]
    last = whole.count(b"\n")
    for place in range(len(whole)):
        line = whole.count(b"\n", 0, place) + 1
        changed = bytearray(whole)
        changed[place] ^= 1 << (place % 8)
        trail = verified(bytes(changed), path.name)
        named = [fault.line for fault in trail.broken]
        if line == last:  # nothing comes after it, but the survey noted its hash
            assert named or head not in trail.by_hash, place
        else:
            assert set(named) & {line, line + 1}, place


def test_every_line_removed_is_found_and_named(survey: Path) -> None:
    path = trail_of(survey)
    lines = lines_of(path)
    for at in range(len(lines)):
        path.write_bytes(b"".join([*lines[:at], *lines[at + 1 :]]))
        assert names(found(survey), path, at + 1, at), at + 1


def test_every_truncation_after_the_acceptance_is_found_through_the_survey(survey: Path) -> None:
    path = trail_of(survey)
    lines = lines_of(path)
    for kept in range(1, len(lines)):
        path.write_bytes(b"".join(lines[:kept]))
        faults = found(survey)
        assert any("acceptance" in fault.what and "missing" in fault.what for fault in faults)


def test_every_two_lines_swapped_are_found_and_named(survey: Path) -> None:
    path = trail_of(survey)
    lines = lines_of(path)
    for one in range(len(lines)):
        for other in range(one + 1, len(lines)):
            swapped = list(lines)
            swapped[one], swapped[other] = swapped[other], swapped[one]
            path.write_bytes(b"".join(swapped))
            faults = found(survey)
            assert names(faults, path, *range(one + 1, other + 2)), (one + 1, other + 1)


def test_every_line_written_twice_is_found_and_named(survey: Path) -> None:
    path = trail_of(survey)
    lines = lines_of(path)
    for at in range(len(lines)):
        for to in (at + 1, len(lines)):
            path.write_bytes(b"".join([*lines[:to], lines[at], *lines[to:]]))
            assert names(found(survey), path, to + 1), (at + 1, to + 1)


def test_a_line_of_ones_own_put_in_anywhere_is_found_and_named(survey: Path) -> None:
    path = trail_of(survey)
    lines = lines_of(path)
    for at in range(1, len(lines)):
        prev = hash_of(lines[at - 1].rstrip(b"\n"))
        for data in ({"note": "it was ever so"}, {"slope": 0.5}):
            own = encoded((prev,), "2026-01-01T00:00:00Z", "Rea", "describe", data)
            path.write_bytes(b"".join([*lines[:at], own + b"\n", *lines[at:]]))
            # A line beside another one is what two people leave who wrote apart: a finding.
            said = [f.says for row in check(SurveyFolder(survey)).rows for f in row.findings]
            told = f"{path.name} has 2 ends (lines {at + 1} and "
            assert any(told in says for says in said), at + 1


def test_a_line_put_in_with_the_rest_of_the_chain_made_to_fit_is_found(survey: Path) -> None:
    path = trail_of(survey)
    lines = lines_of(path)
    for at in range(1, len(lines)):
        raws = [line.rstrip(b"\n") for line in lines[:at]]
        note = {"note": "it was ever so"}
        raws.append(encoded((hash_of(raws[-1]),), "2026-01-01T00:00:00Z", "Rea", "describe", note))
        for line in lines[at:]:
            said = json.loads(line)
            prev = (hash_of(raws[-1]),)
            raws.append(encoded(prev, said["at"], said["by"], said["kind"], said["data"]))
        path.write_bytes(b"".join(raw + b"\n" for raw in raws))
        assert names(found(survey), path), at + 1


def test_every_line_of_the_survey_but_the_last_changed_or_removed_is_found(survey: Path) -> None:
    path = survey / "survey.jsonl"
    lines = lines_of(path)
    for at, line in enumerate(lines[:-1]):
        changed = bytearray(line)
        changed[len(line) // 2] ^= 1
        path.write_bytes(b"".join([*lines[:at], bytes(changed), *lines[at + 1 :]]))
        assert any(f.file == path.name and f.line in (at + 1, at + 2) for f in found(survey))
        path.write_bytes(b"".join([*lines[:at], *lines[at + 1 :]]))
        assert any(f.file == path.name and f.line in (at, at + 1) for f in found(survey)), at + 1


@pytest.fixture
def merged(survey: Path, tmp_path: Path) -> Iterator[Path]:
    """The survey after two people wrote apart, were united, and the whole was accepted anew."""
    other = tmp_path / "other"
    shutil.copytree(survey, other)
    Recorder(SurveyFolder(other), "Bo").note_visit("Weir", Visit(visit="autumn"))
    Recorder(SurveyFolder(survey), "Ada").note_visit("Weir", Visit(visit="summer"))
    merge(SurveyFolder(survey), other)
    bo = Reviewer(Recorder(SurveyFolder(survey), "Cy"))
    bo.accept(row(bo.survey))
    yield survey


def test_an_acceptance_holds_over_a_merge_and_the_merge_is_guarded_as_any_line(
    merged: Path,
) -> None:
    path = trail_of(merged)
    lines = lines_of(path)
    kinds = [json.loads(line)["kind"] for line in lines]
    assert "merge" in kinds and found(merged) == []
    assert row(SurveyFolder(merged)).status == "accepted"
    for at in range(len(lines)):
        path.write_bytes(b"".join([*lines[:at], *lines[at + 1 :]]))
        assert found(merged), at + 1
        changed = bytearray(lines[at])
        changed[len(changed) // 2] ^= 1
        path.write_bytes(b"".join([*lines[:at], bytes(changed), *lines[at + 1 :]]))
        assert found(merged), at + 1


def test_a_number_changed_in_a_handbook_is_found_and_the_acceptance_named(
    tmp_path: Path,
) -> None:
    pen = Recorder(new_survey(tmp_path / "s", "Ada", reaches=[Reach(reach="Weir")]), "Ada")
    shipped = (tables_folder() / "usgs-wsp-2339.toml").read_text(encoding="utf-8")
    own = pen.survey.handbooks / "ours.toml"
    own.write_text(shipped.replace('"usgs-wsp-2339"', '"ours"', 1), encoding="utf-8")
    estimate = {"part": CHANNEL, "condition": FLOOD, "handbook": "ours", "setting": "channel"}
    pen.record("Weir", json.dumps(estimate | {"factors": FACTORS}).encode(), "test")
    Reviewer(Recorder(pen.survey, "Rea")).accept(row(pen.survey), overruling="x")
    assert found(pen.survey.folder) == []
    before = row(SurveyFolder(pen.survey.folder)).estimate
    medium = own.read_text(encoding="utf-8").replace("high = 0.025", "high = 0.0245")
    own.write_text(medium, encoding="utf-8")
    again = row(SurveyFolder(pen.survey.folder))
    assert again.estimate is not None and before is not None and again.estimate.n != before.n
    assert again.status == "changed since acceptance"
    says = [fault.what for fault in found(pen.survey.folder)]
    assert any("recomputed it is" in what and "not the edition" in what for what in says)
    assert any("another edition" in what for what in says)


@pytest.mark.parametrize(
    ("change", "word"),
    [
        ({"n": {"low": 0.03, "best": 0.031, "high": 0.2}}, "recomputed it is"),
        ({"spread": {"sd": 0.5}}, "another sd"),
        ({"head": "a" * 64}, "not before it"),
        ({"condition_line": "a" * 64}, "survey.jsonl"),
    ],
)
def test_an_acceptance_that_says_what_is_not_so_is_named(
    survey: Path, change: dict[str, dict[str, float]], word: str
) -> None:
    path = trail_of(survey)
    lines = lines_of(path)
    said = json.loads(lines[-1])
    for key, value in change.items():
        old = said["data"][key]
        said["data"][key] = old | value if isinstance(old, dict) else value
    prev = (hash_of(lines[-1].rstrip(b"\n")),)
    forged = encoded(prev, said["at"], "Zoe", "accept", said["data"])
    path.write_bytes(b"".join([*lines, forged + b"\n"]))
    faults = found(survey)
    assert any(fault.line == len(lines) + 1 and word in fault.what for fault in faults)


def test_an_acceptance_by_the_one_who_estimated_that_hides_it_is_named(survey: Path) -> None:
    path = trail_of(survey)
    lines = lines_of(path)
    said = json.loads(lines[-1])
    prev = (hash_of(lines[-1].rstrip(b"\n")),)
    forged = encoded(prev, said["at"], "ada", "accept", said["data"])
    path.write_bytes(b"".join([*lines, forged + b"\n"]))
    assert any("who estimated it" in fault.what for fault in found(survey))
