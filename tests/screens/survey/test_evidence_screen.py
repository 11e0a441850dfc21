"""Photos and documents attached on the screens: by path, or from a folder that is watched."""

import os
import re
from pathlib import Path
from typing import Any

import pytest
from PIL import Image

from roughness.desk.evidence_lists import Item, evidence_of
from roughness.desk.folder import SurveyFolder
from roughness.evidence.pictures import UPPER_HALF
from roughness.screens.evidence_forms import factors_in, path_in

REACH = "Osier bend"
SIZES = [(80, 24), (120, 40)]


def photo(path: Path, size: tuple[int, int] = (40, 30)) -> Path:
    Image.new("RGB", size, (20, 90, 20)).save(path)
    return path


def held(survey: SurveyFolder) -> tuple[Item, ...]:
    return evidence_of(SurveyFolder(survey.folder), REACH)


async def settled(keyboard: Any) -> None:
    """Wait for what is read or copied aside."""
    await keyboard.press()
    for worker in list(keyboard.app.workers):
        if worker.group in ("reading", "aside", "picture"):
            await worker.wait()
    await keyboard.press()


async def at_reach(keyboard: Any) -> None:
    if keyboard.selected[0] != REACH:
        await keyboard.press("down")
    assert keyboard.selected[0] == REACH


async def at_evidence(keyboard: Any) -> None:
    await at_reach(keyboard)
    await keyboard.press("p")
    await settled(keyboard)
    assert keyboard.screen == "EvidenceScreen"


async def attach_by_path(keyboard: Any, path: str, caption: str = "", factors: str = "") -> None:
    """Fill in what is asked; where the file is refused the form stays open."""
    await keyboard.press("plus", "1")
    for field, typed in (("file", path), ("caption", caption), ("factors", factors)):
        if typed:
            keyboard.app.screen.query_one(f"#{field}").value = typed
    await keyboard.press(*["enter"] * 6)
    await keyboard.done()
    await settled(keyboard)


@pytest.mark.parametrize("size", SIZES)
async def test_a_photo_is_attached_by_its_path_with_caption_and_factors(
    open_app: Any, survey: SurveyFolder, here: Path, size: tuple[int, int]
) -> None:
    photo(here / "bend.jpg")
    async with open_app(survey.folder, size=size) as keyboard:
        await at_evidence(keyboard)
        assert "No photo or document yet" in keyboard.words
        await attach_by_path(keyboard, "bend.jpg", "the willows", "veg, base")
        (item,) = held(survey)
        assert (item.evidence.caption, item.held) == ("the willows", "ok")
        assert item.evidence.factors == ("base", "vegetation")
        assert (item.evidence.part, item.evidence.condition) == ("main channel", "design flood")
        assert "the willows" in keyboard.words and "1 in all" in keyboard.words
        assert item.evidence.sha256[:12] in keyboard.words
        assert all(len(line) <= size[0] for line in keyboard.text.splitlines())
        assert "⏎ look" in keyboard.text.splitlines()[-1]
        await keyboard.press("enter")
        await settled(keyboard)
        assert keyboard.screen == "PhotoScreen" and UPPER_HALF in keyboard.text
    assert (here / "bend.jpg").is_file()


async def test_missing_and_changed_files_are_told_in_the_list(
    open_app: Any, survey: SurveyFolder, here: Path
) -> None:
    async with open_app(survey.folder) as keyboard:
        await at_evidence(keyboard)
        for at, name in enumerate(("gone.jpg", "swapped.jpg", "kept.jpg")):
            photo(here / name, (20 + at, 20))
            await attach_by_path(keyboard, name, name)
        gone, swapped, _ = (item.path for item in held(survey))
        gone.unlink()
        photo(swapped, (60, 60))
        await keyboard.press("escape")
        await at_evidence(keyboard)
        lines = keyboard.text.splitlines()
        for name, state in (("gone", "! missing"), ("swapped", "! changed"), ("kept", "ok")):
            assert any(name in line and state in line for line in lines), state


async def test_what_cannot_be_taken_is_a_sentence_and_nothing_is_written(
    open_app: Any, survey: SurveyFolder, here: Path
) -> None:
    target = photo(here / "real.jpg")
    (here / "link.jpg").symlink_to(target)
    (here / "text.jpg").write_text("no picture at all")
    (here / "page.html").write_text("<script>")
    with (here / "huge.jpg").open("wb") as huge:
        huge.truncate(4_000_000_000)  # sparse: it takes no room on the disk
    (here / "folder.jpg").mkdir()
    os.mkfifo(here / "pipe.jpg")
    trail = survey.reach_path(REACH).read_bytes()
    async with open_app(survey.folder) as keyboard:
        await at_evidence(keyboard)
        for path, told in (
            ("link.jpg", "a link"),
            ("text.jpg", "no picture"),
            ("page.html", "not taken as evidence"),
            ("huge.jpg", "4 000 MB"),
            ("folder.jpg", "a folder"),
            ("pipe.jpg", "a pipe"),
            ("../nothing.jpg", "there is no such file"),
            ("", "no path was typed"),
        ):
            await attach_by_path(keyboard, path)
            assert keyboard.screen == "Form" and told in keyboard.words, path
            await keyboard.press("escape")
        await keyboard.press("plus", "1")
        await keyboard.type("real.jpg")
        await keyboard.press("enter", "enter")
        await keyboard.type("turbulence")
        await keyboard.press("enter", "enter", "enter", "enter")
        await keyboard.done()
        assert "turbulence" in keyboard.words and "vegetation" in keyboard.words
    assert survey.reach_path(REACH).read_bytes() == trail
    assert not any((survey.folder / "evidence").iterdir())


async def test_a_name_with_control_characters_is_spelled_out(
    open_app: Any, survey: SurveyFolder, here: Path
) -> None:
    photo(here / "a\x1b[2Jb.jpg")
    drop = here / "drop"
    drop.mkdir()
    (here / "a\x1b[2Jb.jpg").rename(drop / "a\x1b[2Jb.jpg")
    async with open_app(survey.folder) as keyboard:
        clock = await watching(keyboard, "drop")
        clock.passes(keyboard, 3)
        await keyboard.press()
        assert "\\u001b" in keyboard.words
        assert not re.search("[\x00-\x09\x0b-\x1f\x7f]", keyboard.text)


async def test_caption_and_factors_are_said_anew(
    open_app: Any, survey: SurveyFolder, here: Path
) -> None:
    photo(here / "bend.jpg")
    async with open_app(survey.folder) as keyboard:
        await at_evidence(keyboard)
        await attach_by_path(keyboard, "bend.jpg", "wrong", "base")
        await keyboard.press("n", "shift+tab", "home")
        caption = keyboard.app.screen.query_one("#caption")
        caption.focus()
        caption.value = "right"
        factors = keyboard.app.screen.query_one("#factors")
        factors.value = ""
        await keyboard.press("enter", "enter", "left", "enter", "enter")
        await settled(keyboard)
    (item,) = held(survey)
    assert item.evidence.caption == "right"
    assert item.evidence.factors is None and item.evidence.part is None


# -- the watched folder ----------------------------------------------------------------------


class Clock:
    """A time that passes when it is told to."""

    now = 1000.0

    def passes(self, keyboard: Any, seconds: float) -> None:
        """Let time pass with a look each second, as the screen itself would."""
        for _ in range(int(seconds)):
            self.now += 1.0
            screen = next(s for s in keyboard.app.screen_stack if hasattr(s, "look_into_drop"))
            screen.look_into_drop()


async def watching(keyboard: Any, folder: str) -> Clock:
    """Open the evidence and watch a folder, by a clock of the test's own."""
    clock = Clock()
    keyboard.survey_screen.drop.clock = lambda: clock.now
    await at_evidence(keyboard)
    await keyboard.press("plus", "2")
    keyboard.app.screen.query_one("#folder").value = folder
    await keyboard.press("down", "enter")
    await keyboard.press("enter")
    return clock


async def test_a_file_in_the_watched_folder_is_offered_once_it_stood_still(
    open_app: Any, survey: SurveyFolder, here: Path
) -> None:
    async with open_app(survey.folder) as keyboard:
        clock = await watching(keyboard, "drop")
        assert (here / "drop").is_dir() and "watching drop" in keyboard.words
        whole = photo(here / "whole.jpg", (300, 200)).read_bytes()
        growing = here / "drop" / "slow.jpg"
        step = len(whole) // 4 + 1
        for start in range(0, len(whole), step):  # a camera that copies slowly
            with growing.open("ab") as file:
                file.write(whole[start : start + step])
            clock.passes(keyboard, 1)
            await keyboard.press()
            assert keyboard.screen == "EvidenceScreen", "offered while it grew"
        clock.passes(keyboard, 2)
        await keyboard.press()
        assert keyboard.screen == "Form" and "New in the folder: slow.jpg" in keyboard.words
        assert not held(survey), "attached without being taken"
        await keyboard.type("the weir")
        await keyboard.press(*["enter"] * 5)
        await keyboard.done()
        await settled(keyboard)
        (item,) = held(survey)
        assert item.evidence.caption == "the weir" and item.path.read_bytes() == whole
        assert growing.is_file()
        clock.passes(keyboard, 5)
        await keyboard.press()
        assert keyboard.screen == "EvidenceScreen", "offered twice"


async def test_an_offer_that_is_left_attaches_nothing_and_the_next_one_follows(
    open_app: Any, survey: SurveyFolder, here: Path
) -> None:
    drop = here / "drop"
    drop.mkdir()
    for at, name in enumerate(("a.jpg", "b.jpg", "c.jpg")):
        photo(drop / name, (20 + at, 20))
    async with open_app(survey.folder) as keyboard:
        clock = await watching(keyboard, "drop")
        clock.passes(keyboard, 3)
        await keyboard.press()
        assert "New in the folder: a.jpg" in keyboard.words
        (drop / "b.jpg").unlink()
        await keyboard.press("escape")
        await settled(keyboard)
        assert "New in the folder: c.jpg" in keyboard.words
        await keyboard.press("escape")
        await settled(keyboard)
        clock.passes(keyboard, 3)
        await keyboard.press()
        assert keyboard.screen == "EvidenceScreen"
    assert not held(survey)


async def test_a_hostile_file_in_the_watched_folder_is_refused_in_the_form(
    open_app: Any, survey: SurveyFolder, here: Path
) -> None:
    drop = here / "drop"
    drop.mkdir()
    (drop / "bad.jpg").write_text("no picture")
    (drop / "link.jpg").symlink_to(photo(here / "real.jpg"))
    async with open_app(survey.folder) as keyboard:
        clock = await watching(keyboard, "drop")
        clock.passes(keyboard, 3)
        await keyboard.press()
        await keyboard.press(*["enter"] * 5)
        await keyboard.done()
        assert keyboard.screen == "Form" and "no picture" in keyboard.words
        await keyboard.press("escape")
        await settled(keyboard)
        assert keyboard.screen == "EvidenceScreen"  # the link is never offered
    assert not held(survey)


@pytest.mark.parametrize(
    ("folder", "told"),
    [
        ("{survey}", "inside the survey"),
        ("{survey}/evidence", "inside the survey"),
        ("by-link/evidence", "inside the survey"),
        ("no/such/folder", "the folder above it is not there"),
        ("file.txt", "it is a file"),
        ("", "no path was typed"),
    ],
)
async def test_a_folder_that_cannot_be_watched_is_refused(
    open_app: Any, survey: SurveyFolder, here: Path, folder: str, told: str
) -> None:
    (here / "by-link").symlink_to(survey.folder)
    (here / "file.txt").write_text("x")
    async with open_app(survey.folder) as keyboard:
        await watching(keyboard, folder.format(survey=survey.folder))
        assert keyboard.screen == "Form" and told in keyboard.words
        assert keyboard.survey_screen.drop.folder is None


async def test_the_folder_stays_watched_for_the_session_until_it_is_stopped(
    open_app: Any, survey: SurveyFolder
) -> None:
    async with open_app(survey.folder) as keyboard:
        await watching(keyboard, "drop")
        await keyboard.press("escape")
        await at_evidence(keyboard)
        assert "watching drop" in keyboard.words
        await keyboard.press("plus")
        assert "stop watching drop" in keyboard.words
        await keyboard.press("2")
        assert "watching" not in keyboard.words


# -- the walk --------------------------------------------------------------------------------


async def test_the_walk_counts_the_photos_of_the_factor_and_attaches_to_it(
    open_app: Any, survey: SurveyFolder, here: Path
) -> None:
    photo(here / "bend.jpg")
    async with open_app(survey.folder) as keyboard:
        await at_reach(keyboard)
        await keyboard.press("enter")
        if keyboard.screen == "GateForm":
            await keyboard.press(*["enter"] * 4)
        assert keyboard.screen == "WalkScreen" and "2 of 6" in keyboard.words
        assert "photo" not in " ".join(keyboard.words.split()[:60])
        await keyboard.press("p")
        await settled(keyboard)
        assert "irregularity" in keyboard.text.splitlines()[0]
        await attach_by_path(keyboard, "bend.jpg", "banks", "")
        assert held(survey)[0].evidence.factors == ("irregularity",)
        assert "•" in keyboard.text
        await keyboard.press("escape")
        assert keyboard.screen == "WalkScreen"
        assert "1 photo or document: p" in keyboard.words
        await keyboard.press("1")
        assert "3 of 6" in keyboard.words and "photo or document" not in keyboard.words


def test_factors_are_read_by_their_first_letters() -> None:
    assert factors_in(" b, VEG meander;o") == ["base", "vegetation", "meander", "obstruction"]
    assert factors_in("v, x") == ["v", "x"]
    assert factors_in(" ") == []


def test_paths_are_read_as_a_terminal_types_them(here: Path) -> None:
    assert path_in("'a b.jpg'") == Path("a b.jpg")
    assert path_in('"a b.jpg" ') == Path("a b.jpg")
    assert path_in("a\\ b\\(2\\).jpg") == Path("a b(2).jpg")
    (here / "odd\\ name.jpg").touch()
    assert path_in("odd\\ name.jpg") == Path("odd\\ name.jpg")
