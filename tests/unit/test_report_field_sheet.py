"""The sheet to take along: the keys of the walk, no values of n, something for every reach."""

import re
import shutil
from pathlib import Path

import pytest

from roughness.__main__ import main
from roughness.desk.folder import SurveyFolder
from roughness.desk.making import new_survey
from roughness.desk.offers import offers
from roughness.desk.places import place_of
from roughness.desk.recording import Recorder
from roughness.reports.field_sheet import field_sheet
from roughness.shelf.places import demo_folder, tables_folder
from roughness.survey.stream import FlowCondition, Part, Reach
from roughness.trail.data import Gate

_GRADE = re.compile(r'<td class="key">([^<]+)</td><td><strong>([^<]+)</strong>')


@pytest.fixture
def pen(tmp_path: Path) -> Recorder:
    reaches = [Reach(reach="Ford <b>"), Reach(reach="Weir")]
    pen = Recorder(new_survey(tmp_path / "s", "Ada", reaches=reaches), "Ada")
    pen.add_condition(FlowCondition(condition="low flow", bank="in bank"))
    pen.add_part("Weir", Part(part="mill race", setting="channel"))
    return pen


def sheets(page: bytes) -> list[str]:
    return page.decode("utf-8").split('<section class="sheet">')[1:]


def test_every_reach_has_a_sheet_with_its_own_parts(pen: Recorder) -> None:
    ford, weir = sheets(field_sheet(pen.survey))
    assert "Ford &lt;b&gt;" in ford and "main channel" in ford
    assert "mill race" in weir and "main channel" not in weir


def test_flood_plains_are_asked_about_only_where_they_may_be_wetted(pen: Recorder) -> None:
    assert "left flood plain" not in sheets(field_sheet(pen.survey))[0]
    pen.add_condition(FlowCondition(condition="flood", bank="over bank"))
    ford = sheets(field_sheet(pen.survey))[0]
    assert "left flood plain" in ford and "main channel, low flow" in ford
    assert "left flood plain, low flow" not in ford


def test_a_survey_without_reaches_has_one_sheet_for_any_reach(tmp_path: Path) -> None:
    (sheet,) = sheets(field_sheet(new_survey(tmp_path / "s", "Ada")))
    assert "Reach: ____" in sheet and "right flood plain" in sheet


def test_the_number_before_a_grade_takes_it_in_the_walk(pen: Recorder) -> None:
    place = place_of(pen.survey, "Weir", "mill race", "low flow")
    told = _GRADE.findall(sheets(field_sheet(pen.survey))[1])
    walked = [
        (str(at) if at <= 9 else "↓", offer.grade.name)
        for question in place.questions
        for at, offer in enumerate(offers(place, question).grades, start=1)
    ]
    assert told == walked and len(told) > 25


def test_a_part_that_was_judged_by_another_handbook_shows_that_ones_grades(tmp_path: Path) -> None:
    shutil.copytree(demo_folder(), tmp_path / "demo")
    survey = SurveyFolder(tmp_path / "demo")
    used = {
        noted.reach: {place.handbook for place in survey.reach_state(noted.reach).places.values()}
        for noted in survey.state.reaches
    }
    assert {"cowan-1956"} in used.values()
    for name, sheet in zip(used, sheets(field_sheet(survey)), strict=True):
        if used[name]:
            assert all(f"({key})" in sheet for key in used[name] if key)


def test_values_of_n_are_left_off_unless_they_are_asked_for(pen: Recorder) -> None:
    assert "0.028" not in field_sheet(pen.survey).decode()
    assert "0.028 to 0.035" in field_sheet(pen.survey, with_ranges=True).decode()


def test_it_reminds_of_what_cannot_be_made_up_for_at_the_desk(pen: Recorder) -> None:
    told = field_sheet(pen.survey).decode()
    for words in ("upstream and downstream", "scale in the picture", "Flood marks", "100 stones"):
        assert words in told


def test_the_verb_writes_it_and_leaves_the_survey_as_it_is(pen: Recorder, tmp_path: Path) -> None:
    before = {p: p.read_bytes() for p in pen.survey.folder.rglob("*") if p.is_file()}
    target = tmp_path / "sheet.html"
    assert main(["fieldsheet", str(pen.survey.folder), "-o", str(target)]) == 0
    assert target.read_bytes() == field_sheet(pen.survey)
    assert before == {p: p.read_bytes() for p in pen.survey.folder.rglob("*") if p.is_file()}


def test_a_reach_that_cannot_be_read_is_said_and_has_its_sheet_still(pen: Recorder) -> None:
    pen.survey.reach_path("Weir").unlink()
    weir = sheets(field_sheet(pen.survey))[1]
    assert "Its record cannot be read" in weir and "main channel" in weir


def test_a_handbook_that_is_gone_leaves_the_sheet_by_the_usual_one(pen: Recorder) -> None:
    folder = pen.survey.handbooks
    folder.mkdir(exist_ok=True)
    usual = (tables_folder() / "cowan-1956.toml").read_text("utf-8")
    (folder / "agency.toml").write_text(usual.replace('"cowan-1956"', '"agency"', 1), "utf-8")
    gate = Gate(part="mill race", condition="low flow", handbook="agency")
    pen.set_gate("Weir", gate)
    assert "(agency)" in sheets(field_sheet(SurveyFolder(pen.survey.folder)))[1]
    (folder / "agency.toml").unlink()
    weir = sheets(field_sheet(SurveyFolder(pen.survey.folder)))[1]
    assert "agency" in weir and "(usgs-wsp-2339)" in weir
