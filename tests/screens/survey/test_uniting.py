"""What two people wrote apart: told on the survey screen, united there, settled in the walk."""

import shutil
from pathlib import Path
from typing import Any

import pytest

from roughness.desk.folder import SurveyFolder
from roughness.desk.places import place_of
from roughness.desk.recording import Recorder
from roughness.survey.choices import CHOICES
from roughness.survey.words import Factor

WEIR, CHANNEL, FLOOD = "Weir pool", "main channel", "design flood"
COPY = "weir pool (Tove's copy).jsonl"


def say(folder: Path, by: str, grade: str, factor: Factor = "vegetation") -> None:
    survey = SurveyFolder(folder)
    place = place_of(survey, WEIR, CHANNEL, FLOOD)
    Recorder(survey, by).choose(place, factor, CHOICES[factor](grade=grade))


def grade(folder: Path, factor: Factor = "vegetation") -> str | None:
    standing = place_of(SurveyFolder(folder), WEIR, CHANNEL, FLOOD).at(None, factor)
    return standing.choice.grade if standing else None


@pytest.fixture
def apart(survey: SurveyFolder, tmp_path: Path) -> Path:
    """Tove says large in her copy, Runa medium; a synced folder puts both trails here."""
    theirs = tmp_path / "theirs"
    shutil.copytree(survey.folder, theirs)
    say(theirs, "Tove", "large")
    say(survey.folder, "Runa", "medium")
    path = SurveyFolder(theirs).reach_path(WEIR)
    shutil.copy(path, survey.folder / "reaches" / COPY)
    return survey.folder


@pytest.fixture
def two_ends(apart: Path) -> Path:
    """The same where the synced folder put both into one file."""
    copy, path = apart / "reaches" / COPY, SurveyFolder(apart).reach_path(WEIR)
    known = path.read_bytes().splitlines(keepends=True)
    more = [line for line in copy.read_bytes().splitlines(keepends=True) if line not in known]
    path.write_bytes(b"".join([*known, *more]))
    copy.unlink()
    return apart


async def settled(keyboard: Any) -> None:
    """Wait for what is read or united aside."""
    await keyboard.press()
    for worker in list(keyboard.app.workers):
        if worker.group == "copies":
            await worker.wait()
    await keyboard.press()


async def unite(keyboard: Any) -> str:
    """Press M and Enter; return what is told afterwards."""
    await keyboard.press("M")
    assert keyboard.screen == "Confirm"
    await keyboard.press("enter")
    await keyboard.until("HelpScreen")
    await keyboard.press()
    told: str = keyboard.words
    await keyboard.press("escape")
    await settled(keyboard)
    return told


@pytest.mark.parametrize("size", [(80, 24), (120, 40)])
async def test_copies_are_told_and_united_when_somebody_says_so(
    open_app: Any, apart: Path, size: tuple[int, int]
) -> None:
    before = SurveyFolder(apart).reach_trail(WEIR).lines
    async with open_app(apart, size=size) as keyboard:
        keyboard.survey_screen.look_for_changes()
        await settled(keyboard)
        assert "M unites: 1 copy holds what this survey lacks" in keyboard.text
        await keyboard.press("M")
        assert COPY in keyboard.words and "no line is changed or lost" in keyboard.words
        await keyboard.press("escape")
        assert SurveyFolder(apart).reach_trail(WEIR).lines == before
        told = await unite(keyboard)
        assert "1 new line" in told and "you may remove it" in told
        assert "To be settled in the walk: Weir pool" in told
        assert "M unites" not in keyboard.text
        assert "! 1 stop" in next(line for line in keyboard.text.splitlines() if WEIR in line)
    now = SurveyFolder(apart).reach_trail(WEIR)
    assert {one.hash for one in before} < now.by_hash.keys() and len(now.heads) == 1
    assert (apart / "reaches" / COPY).is_file()


async def test_two_ends_in_one_file_are_told_and_joined(open_app: Any, two_ends: Path) -> None:
    async with open_app(two_ends) as keyboard:
        await settled(keyboard)
        assert "M unites: two people wrote apart to Weir pool" in keyboard.text
        await unite(keyboard)
        assert "M unites" not in keyboard.text
    assert len(SurveyFolder(two_ends).reach_trail(WEIR).heads) == 1


@pytest.mark.parametrize(("key", "wanted"), [("2", "small"), ("3", "medium"), ("4", "large")])
async def test_choosing_again_in_the_walk_settles_it_whichever_is_chosen(
    open_app: Any, apart: Path, key: str, wanted: str
) -> None:
    async with open_app(apart) as keyboard:
        keyboard.survey_screen.look_for_changes()
        await settled(keyboard)
        await unite(keyboard)
        await keyboard.press("up", "up", "enter")
        if keyboard.screen == "GateForm":
            await keyboard.press(*["enter"] * 4)
        assert "Said apart:" in keyboard.words and "5 of 6" in keyboard.words
        assert "medium (Runa)" in keyboard.words and "large (Tove)" in keyboard.words
        await keyboard.press(key)
        await keyboard.press("escape")
        await settled(keyboard)
        assert "stop" not in next(line for line in keyboard.text.splitlines() if WEIR in line)
    assert grade(apart) == wanted
    assert not SurveyFolder(apart).conflicts(WEIR)


async def test_a_copy_that_comes_while_the_survey_is_open_is_told(
    open_app: Any, apart: Path
) -> None:
    copy = apart / "reaches" / COPY
    later = copy.rename(apart.parent / "later.jsonl")
    async with open_app(apart) as keyboard:
        await settled(keyboard)
        assert "M unites" not in keyboard.text
        await keyboard.press("M")
        assert keyboard.screen == "SurveyScreen"  # there is nothing to unite
        later.rename(copy)
        keyboard.survey_screen.look_for_changes()
        await settled(keyboard)
        assert "M unites" in keyboard.text


async def test_files_that_are_no_copies_are_not_told(open_app: Any, survey: SurveyFolder) -> None:
    (survey.folder / "reaches" / "notes.jsonl").write_text('{"a": 1}\n')
    (survey.folder / "x\x1b[2J.jsonl").write_bytes(b"\xff\x00")
    async with open_app(survey.folder) as keyboard:
        keyboard.survey_screen.look_for_changes()
        await settled(keyboard)
        assert "M unites" not in keyboard.text
