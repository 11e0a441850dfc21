"""Starting: nothing to open, a survey, an empty folder, something else, something broken."""

from pathlib import Path
from typing import Any

from roughness.desk.folder import SurveyFolder
from roughness.desk.identity import known_person


async def test_with_nothing_to_open_it_says_what_it_is_and_asks_for_a_name_once(
    open_app: Any,
) -> None:
    async with open_app(by=None) as keyboard:
        assert "Manning's n for every reach" in keyboard.words
        assert "Who is at the keyboard?" in keyboard.words
        await keyboard.type("Ada Brook")
        await keyboard.press("enter")
        assert keyboard.screen == "StartScreen"
    assert known_person() == "Ada Brook"
    async with open_app(by=None) as keyboard:
        assert "Who is at the keyboard?" not in keyboard.text


async def test_from_an_empty_folder_to_the_walk_and_back_by_keyboard_alone(
    open_app: Any, here: Path
) -> None:
    async with open_app(by=None) as keyboard:
        await keyboard.type("Ada\n2")
        await keyboard.type("brook\nSpring 2026\nAlder brook\n\n\nWeir pool\nOsier bend")
        await keyboard.press("tab", "enter")
        await keyboard.until("SurveyScreen")
        await keyboard.press()
        assert "2 reaches   0 estimated   2 to do" in keyboard.text
        await keyboard.press("plus", "1")
        await keyboard.type("knee-deep\n")
        await keyboard.press("enter", "enter", "enter")
        assert keyboard.screen == "SurveyScreen", keyboard.text
        await keyboard.press("enter", "1")
        await keyboard.type("design flood\n")
        await keyboard.press("enter", "right", "enter", "enter", "enter")
        assert "WalkScreen" in [type(screen).__name__ for screen in keyboard.app.screen_stack]
        while keyboard.screen != "SurveyScreen":
            await keyboard.press("escape")
        assert keyboard.selected == ("Weir pool", "main channel")
        assert "design flood" in keyboard.text.splitlines()[0]
        await keyboard.press("q")
    made = SurveyFolder(here / "brook")
    state = made.reach_state("Weir pool")
    assert state.visits[0].stage == "knee-deep"
    assert made.state.conditions[0].bank == "in bank"
    assert [part.part for part in state.parts] == ["main channel"]
    assert {line.by for line in made.trail().lines} == {"Ada"}
    assert [heads.why for _, heads in made.state.heads] == ["leaving"]


async def test_a_survey_in_the_folder_one_stands_in_opens(
    open_app: Any, survey: SurveyFolder, monkeypatch: Any
) -> None:
    monkeypatch.chdir(survey.folder)
    async with open_app() as keyboard:
        assert keyboard.screen == "SurveyScreen"


async def test_a_survey_of_late_is_offered_first(open_app: Any, survey: SurveyFolder) -> None:
    async with open_app(survey.folder) as keyboard:
        await keyboard.press("escape")
        assert "1  brook" in keyboard.text
        await keyboard.press("1")
        assert keyboard.screen == "SurveyScreen"


async def test_an_empty_folder_is_offered_to_become_a_survey(open_app: Any, here: Path) -> None:
    (here / "new").mkdir()
    async with open_app(here / "new") as keyboard:
        assert "New survey" in keyboard.text
        assert str(here / "new")[:20] in keyboard.text or "new" in keyboard.words


async def test_a_folder_without_a_survey_is_said_in_one_sentence(open_app: Any, here: Path) -> None:
    (here / "letters.txt").write_text("dear")
    async with open_app(here) as keyboard:
        assert "holds no survey (no survey.jsonl) and is not empty" in keyboard.words
    async with open_app(here / "letters.txt") as keyboard:
        assert "is a file; a survey is a folder" in keyboard.words


async def test_a_file_that_is_no_trail_is_said_in_one_sentence(open_app: Any, here: Path) -> None:
    (here / "survey.jsonl").write_bytes(b"\xff\x00 nothing\n")
    async with open_app(here) as keyboard:
        assert keyboard.screen == "StartScreen"
        assert "cannot be opened as a survey" in keyboard.words


async def test_the_demo_is_copied_and_the_walk_opens_on_the_copy(open_app: Any, here: Path) -> None:
    async with open_app() as keyboard:
        await keyboard.press("1", "enter")
        for _ in range(8):
            await keyboard.pilot.pause()
        assert "WalkScreen" in [type(screen).__name__ for screen in keyboard.app.screen_stack]
    assert (here / "roughness-demo" / "survey.jsonl").is_file()


async def test_what_cannot_be_made_keeps_everything_that_was_typed(
    open_app: Any, here: Path
) -> None:
    (here / "full").mkdir()
    (here / "full" / "letter.txt").write_text("dear")
    async with open_app() as keyboard:
        await keyboard.type("2full\nSpring\n")
        await keyboard.press("enter", "enter", "enter", "tab", "enter")
        await keyboard.done()
        assert "the folder is not empty" in keyboard.words
        assert "Spring" in keyboard.text
    assert [path.name for path in (here / "full").iterdir()] == ["letter.txt"]


async def test_reaches_come_from_a_file_and_every_bad_row_is_named(
    open_app: Any, here: Path
) -> None:
    (here / "list.csv").write_text('reach,slope\nWeir pool,0.002\nOsier bend,"0,003"\n')
    async with open_app() as keyboard:
        await keyboard.type("2brook\n\n\n\nlist.csv\n")
        await keyboard.press("tab", "enter")
        await keyboard.done()
        assert "line 3" in keyboard.words
        assert "write 0.003" in keyboard.words
        (here / "list.csv").write_text("reach,slope\nWeir pool,0.002\nOsier bend,0.003\n")
        await keyboard.press("enter")
        await keyboard.until("SurveyScreen")
        assert keyboard.screen == "SurveyScreen", keyboard.text
    assert SurveyFolder(here / "brook").reach("Osier bend").slope == 0.003
