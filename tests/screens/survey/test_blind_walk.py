"""A second opinion on the screens: nothing of the first is seen; one line is written or none."""

import re
import tempfile
from pathlib import Path
from typing import Any

import pytest
from PIL import Image

from roughness.desk.agreement import side_by_side
from roughness.desk.attaching import attach
from roughness.desk.folder import SurveyFolder
from roughness.desk.making import new_survey
from roughness.desk.places import place_of
from roughness.desk.recording import Recorder
from roughness.desk.rows import rows
from roughness.quantities.printing import show_n
from roughness.screens.opinion_walk import SEEN
from roughness.survey.choices import CHOICES
from roughness.survey.stream import FlowCondition, Part, Reach, Visit
from roughness.trail.data import Gate, SegmentShare

WEIR, CHANNEL, FLOOD = "Weir pool", "main channel", "design flood"
# Free text of the first, each word of which would give something away.
SECRETS = ("zqxnote", "zqxcaption", "zqxname", "zqxreach", "zqxvisit", "zqxsegment", "Alrik")
FIRST: dict[str, tuple[str, dict[str, float]]] = {
    "base": ("gravel", {"low": 0.028, "best": 0.0293, "high": 0.031}),
    "irregularity": ("severe", {}),
    "variation": ("alternating-frequently", {}),
    "obstruction": ("appreciable", {}),
    "vegetation": ("large", {}),
    "meander": ("severe", {}),
}
OTHER: dict[str, tuple[str, dict[str, float]]] = {
    "base": ("firm-soil", {}),
    "irregularity": ("smooth", {}),
    "variation": ("gradual", {}),
    "obstruction": ("negligible", {}),
    "vegetation": ("small", {}),
    "meander": ("minor", {}),
}


def surveyed(
    folder: Path, first: dict[str, tuple[str, dict[str, float]]], photo: Path, tail: str = ""
) -> SurveyFolder:
    """A survey whose first reach Alrik judged, saying a lot about it."""
    author = f"Alrik{tail}"
    reaches = [Reach(reach=WEIR, slope=0.002, note=f"zqxreach{tail}"), Reach(reach="Osier bend")]
    pen = Recorder(new_survey(folder, author, name="brook", reaches=reaches), author)
    pen.add_condition(FlowCondition(condition=FLOOD))
    for reach in (WEIR, "Osier bend"):
        pen.add_part(reach, Part(part=CHANNEL, setting="channel"))
    visit = Visit(visit="2026-06-30", people=author, growth="leaf-on", note=f"zqxvisit{tail}")
    pen.note_visit(WEIR, visit)
    apart = [SegmentShare(name=n, perimeter_percent=50.0) for n in ("zqxsegment", "other")]
    segments = tuple(apart) if tail else None
    gate = Gate(part=CHANNEL, condition=FLOOD, handbook="usgs-wsp-2339", depth_m=1.4)
    gate = Gate(**{**vars(gate), "segments": segments, "mobile_sand": not tail})
    pen.set_gate(WEIR, gate)
    for factor, (grade, values) in first.items():
        choice = CHOICES[factor](grade=grade, note=f"zqxnote{tail}", **values)  # type: ignore
        for segment in ("zqxsegment", "other") if segments else (None,):
            place = place_of(pen.survey, WEIR, CHANNEL, FLOOD)
            pen.choose(place, factor, choice, segment=segment)  # type: ignore[arg-type]
    named = photo.with_name(f"zqxname{tail}.jpg")
    named.write_bytes(photo.read_bytes())
    attach(pen, WEIR, named, caption=f"zqxcaption{tail}", factors=["base"])
    return pen.survey


@pytest.fixture
def picture(tmp_path: Path) -> Path:
    Image.new("RGB", (40, 30), (20, 90, 20)).save(tmp_path / "shot.jpg")
    return tmp_path / "shot.jpg"


@pytest.fixture
def survey(tmp_path: Path, picture: Path) -> SurveyFolder:
    return surveyed(tmp_path / "brook", FIRST, picture)


@pytest.fixture(autouse=True)
def private(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    """Where blind copies are made and must not stay."""
    folder = tmp_path / "private"
    folder.mkdir()
    monkeypatch.setattr(tempfile, "tempdir", str(folder))
    return folder


async def ready(keyboard: Any) -> None:
    """Wait for what is copied or read aside."""
    await keyboard.press()
    for _ in range(300):
        if keyboard.screen != "SurveyScreen" or not keyboard.survey_screen._hidden:
            break
        await keyboard.pilot.pause(0.01)
    for worker in list(keyboard.app.workers):
        if worker.group in ("picture", "reading"):
            await worker.wait()
    await keyboard.press()


def told(keyboard: Any) -> str:
    """What was said in passing."""
    return " ".join(one.message for one in keyboard.app._notifications)


def line_of(keyboard: Any, word: str) -> str:
    lines: list[str] = keyboard.text.splitlines()
    return next(line for line in lines if word in line)


async def to_the_walk(keyboard: Any) -> None:
    assert keyboard.selected == (WEIR, CHANNEL)
    await keyboard.press("o")
    assert keyboard.screen == "Confirm"
    await keyboard.press("enter")
    await ready(keyboard)
    assert keyboard.screen == "GateForm", keyboard.words


async def through_everything(keyboard: Any) -> list[str]:
    """Walk blind to the end and look at every screen that can be reached; return what was seen."""
    seen: list[str] = []

    async def look(*keys: str) -> None:
        await keyboard.press(*keys)
        await ready(keyboard)
        seen.append(keyboard.text)

    await look("o")
    await keyboard.press("enter")
    await ready(keyboard)
    await look()
    await look(*["enter"] * 4)
    assert keyboard.screen == "WalkScreen" or keyboard.screen == "BlindWalk", keyboard.words
    for at in range(6):
        for key in (
            () if at else ("question_mark", "l", "h", "p", "n", "m", "equals_sign", "b", "u")
        ):
            await look("down", key)
            if keyboard.screen != "BlindWalk":
                await look("escape")
            assert keyboard.screen == "BlindWalk", (key, keyboard.words)
        for key in () if at else ("c", "C", "f", "g", "B", "space", "backspace"):
            await look(key)
            assert keyboard.screen == "BlindWalk", key
        await look("escape")
        if keyboard.screen == "Confirm":
            await look("escape")
        keyboard.app.screen.course.go_to_open()
        await look("2")
    assert "second opinion" in keyboard.words, keyboard.text
    for key in ("question_mark", "l", "h", "p", "u", "escape", "enter"):
        await look(key)
        assert keyboard.screen != "BlindWalk", key
        await look("escape")
        assert keyboard.screen == "BlindWalk", (key, keyboard.words)
    await look("space", "g", "f", "n")
    await keyboard.press("escape")
    return seen


async def test_no_word_of_the_first_is_seen_and_the_screens_are_the_same_whatever_it_said(
    open_app: Any, tmp_path: Path, picture: Path
) -> None:
    """Two surveys that differ in all that the first said look the same to the second."""
    seen = []
    for name, first, tail in (("a", FIRST, ""), ("b", OTHER, "q")):
        made = surveyed(tmp_path / name / "brook", first, picture, tail)
        async with open_app(made.folder, by="Tove") as keyboard:
            n = show_n(rows(made)[0].estimate.n.best)  # type: ignore[union-attr]
            assert f"n {n} (" in keyboard.text  # the first n is on the survey screen before
            texts = await through_everything(keyboard)
        assert len(texts) > 40
        for text in texts:
            assert not [secret for secret in SECRETS if secret in text], text
            assert ".0293" not in text and f"n {n} (" not in text, text
            assert all(len(line) <= 80 for line in text.splitlines())
        seen.append([re.sub(r"\d{4}-\d\d-\d\d \d\d:\d\d", "when", text) for text in texts])
    assert seen[0] == seen[1]


async def test_the_judgement_is_recorded_as_one_opinion_and_no_choice(
    open_app: Any, survey: SurveyFolder, private: Path
) -> None:
    before = survey.reach_trail(WEIR).lines
    n = rows(survey)[0].estimate.n  # type: ignore[union-attr]
    async with open_app(survey.folder, by="Tove") as keyboard:
        await to_the_walk(keyboard)
        assert list(private.iterdir())
        await keyboard.press(*["enter"] * 4)
        await keyboard.press(*"222222")
        assert "give it as your second opinion" in keyboard.words
        await keyboard.press("enter")
        assert keyboard.screen == "Form"
        await keyboard.press(*"wide", "enter", "enter")
        await ready(keyboard)
        assert keyboard.screen == "SurveyScreen" and "was recorded" in told(keyboard)
        assert "█" in line_of(keyboard, WEIR)  # what was hidden is shown again
    now = SurveyFolder(survey.folder)
    added = [line for line in now.reach_trail(WEIR).lines if line not in before]
    assert [(line.kind, line.by) for line in added] == [("opinion", "Tove")]
    assert added[0].data["note"] == "wide"
    assert added[0].data["estimate"]["measured"]["depth_m"] == 1.4
    assert rows(now)[0].estimate.n == n  # type: ignore[union-attr]
    place = place_of(now, WEIR, CHANNEL, FLOOD)
    assert side_by_side(now, place)
    assert not list(private.iterdir())


async def test_whoever_had_seen_the_first_is_asked_to_say_so(
    open_app: Any, survey: SurveyFolder
) -> None:
    async with open_app(survey.folder, by="Tove") as keyboard:
        await to_the_walk(keyboard)
        await keyboard.press(*["enter"] * 4, *"222222", "enter")
        await keyboard.press("enter", "right", "enter")
        await ready(keyboard)
    line = SurveyFolder(survey.folder).reach_trail(WEIR).lines[-1]
    assert line.kind == "opinion" and line.data["note"] == SEEN


async def test_leaving_in_the_middle_asks_first_and_records_nothing(
    open_app: Any, survey: SurveyFolder, private: Path
) -> None:
    trail = survey.reach_path(WEIR).read_bytes()
    async with open_app(survey.folder, by="Tove") as keyboard:
        await to_the_walk(keyboard)
        await keyboard.press(*["enter"] * 4, *"22")
        for key in ("escape", "q"):
            await keyboard.press(key)
            assert keyboard.screen == "Confirm" and "Nothing was recorded" in keyboard.words
            await keyboard.press("escape")
            assert keyboard.screen == "BlindWalk" and "3 of 6" in keyboard.words
        await keyboard.press("ctrl+q")
        assert keyboard.screen == "BlindWalk" and "not recorded yet" in told(keyboard)
        await keyboard.press("escape", "enter")
        await ready(keyboard)
        assert keyboard.screen == "SurveyScreen" and "nothing was written" in told(keyboard)
        assert survey.reach_path(WEIR).read_bytes() == trail
        assert not list(private.iterdir())
        await keyboard.press("o", "escape")  # hidden only while it is under way
        await ready(keyboard)
        assert "hidden" not in keyboard.words and "├" in keyboard.text


async def test_quitting_leaves_no_copy_behind(
    open_app: Any, survey: SurveyFolder, private: Path
) -> None:
    async with open_app(survey.folder, by="Tove") as keyboard:
        await to_the_walk(keyboard)
        await keyboard.press(*["enter"] * 4, "2", "ctrl+q", "ctrl+q")
    assert keyboard.app.return_code == 0
    assert not list(private.iterdir())


@pytest.mark.parametrize("by", ["Alrik", " alrik "])
async def test_it_is_refused_for_the_one_who_estimated(
    open_app: Any, survey: SurveyFolder, by: str
) -> None:
    async with open_app(survey.folder, by=by.strip()) as keyboard:
        await keyboard.press("o")
        assert keyboard.screen == "SurveyScreen"
        assert "made the first estimate" in told(keyboard)


async def test_it_needs_a_first_estimate_and_a_part(open_app: Any, survey: SurveyFolder) -> None:
    async with open_app(survey.folder, by="Tove") as keyboard:
        await keyboard.press("down", "o")
        assert "there is no first estimate yet" in told(keyboard)


async def test_the_list_shows_nothing_of_the_place_while_it_is_asked(
    open_app: Any, survey: SurveyFolder
) -> None:
    async with open_app(survey.folder, by="Tove", size=(120, 40)) as keyboard:
        assert "█" in line_of(keyboard, WEIR)
        await keyboard.press("o")
        line = line_of(keyboard, WEIR)
        assert "hidden: second opinion" in line and "█" not in line and "├" not in line
