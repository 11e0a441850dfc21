"""Adding, adopting, undoing, exporting: what is asked, what is kept, what is refused."""

import csv
from pathlib import Path
from typing import Any

from roughness.desk.folder import SurveyFolder
from roughness.desk.recording import Recorder


async def test_a_value_is_adopted_with_a_reason_and_stands_beside_the_estimate(
    open_app: Any, survey: SurveyFolder
) -> None:
    async with open_app(survey.folder) as keyboard:
        await keyboard.press("home", "g")
        await keyboard.type("0.041\n0.035\n0.05\n\n")
        assert "the reason is empty" in keyboard.words
        await keyboard.type("flood marks of May\n")
        assert keyboard.screen == "SurveyScreen", keyboard.text
        assert "adopted 0.041; the estimate is n 0.040" in keyboard.words
        assert "adopted because: flood marks of May" in keyboard.words
        assert "◆" in keyboard.text
    adopted = (
        SurveyFolder(survey.folder).reach_state("Weir pool").place("main channel", "design flood")
    )
    assert adopted is not None and adopted.adopted is not None
    assert (adopted.adopted.n, adopted.adopted.low, adopted.adopted.high) == (0.041, 0.035, 0.05)


async def test_a_decimal_comma_is_named_and_nothing_typed_is_lost(
    open_app: Any, survey: SurveyFolder
) -> None:
    async with open_app(survey.folder) as keyboard:
        await keyboard.press("home", "g")
        await keyboard.type("0,041\n\n\nbecause\n")
        assert "n '0,041' is no number; write 0.041" in keyboard.words
        assert "because" in keyboard.words
    assert "adopt" not in survey.reach_path("Weir pool").read_text()


async def test_undo_says_what_it_takes_back_and_escape_leaves_it(
    open_app: Any, survey: SurveyFolder
) -> None:
    async with open_app(survey.folder) as keyboard:
        await keyboard.press("home", "u")
        assert "meander of main channel at design flood: minor" in keyboard.words
        await keyboard.press("escape")
        assert "1 estimated" in keyboard.text
        await keyboard.press("u", "enter")
        assert "0 estimated" in keyboard.text
    state = SurveyFolder(survey.folder).reach_state("Weir pool")
    assert len(state.withdrawn) == 1


async def test_undo_takes_back_only_what_the_same_person_wrote(
    open_app: Any, survey: SurveyFolder
) -> None:
    async with open_app(survey.folder, by="Teodor") as keyboard:
        await keyboard.press("home", "u")
        assert keyboard.screen == "SurveyScreen"
        assert "nothing of yours" in keyboard.words


async def test_the_table_is_written_beside_the_survey_and_never_inside(
    open_app: Any, survey: SurveyFolder
) -> None:
    target = survey.folder.parent / "brook-n.csv"
    async with open_app(survey.folder) as keyboard:
        await keyboard.press("e")
        assert "calibrate it to observed flows" in keyboard.words
        await keyboard.press("enter")
        await keyboard.app.workers.wait_for_complete()
        await keyboard.press()
        assert "3 rows written to" in keyboard.words
    rows = list(csv.DictReader(target.read_text(encoding="utf-8").splitlines()))
    assert [row["reach"] for row in rows] == ["Weir pool", "Osier bend", "Mill race"]
    async with open_app(survey.folder) as keyboard:
        await keyboard.press("e", "end", *["backspace"] * 90)
        await keyboard.type(str(survey.folder / "evidence" / "n.csv"))
        await keyboard.press("enter")
        assert "inside the survey's own folder" in keyboard.words
        assert keyboard.screen == "Form"


async def test_a_table_that_is_there_is_replaced_only_when_confirmed(
    open_app: Any, survey: SurveyFolder
) -> None:
    target = survey.folder.parent / "brook-n.csv"
    target.write_text("mine")
    async with open_app(survey.folder) as keyboard:
        await keyboard.press("e", "enter")
        assert "would be replaced" in keyboard.words
        await keyboard.press("escape")
    assert target.read_text() == "mine"


async def test_a_part_with_a_name_of_its_own_is_asked_how_it_is_judged(
    open_app: Any, survey: SurveyFolder
) -> None:
    async with open_app(survey.folder) as keyboard:
        await keyboard.press("end", "plus", "3", "4")
        await keyboard.type("side arm\n")
        await keyboard.press("right", "enter", "enter", "enter")
        assert keyboard.selected == ("Mill race", "side arm")
    (part,) = SurveyFolder(survey.folder).reach_state("Mill race").parts
    assert (part.part, part.setting) == ("side arm", "flood-plain")


async def test_a_reach_with_a_name_that_is_there_is_refused_where_it_was_typed(
    open_app: Any, survey: SurveyFolder
) -> None:
    async with open_app(survey.folder) as keyboard:
        await keyboard.press("plus", "4")
        await keyboard.type("WEIR pool\n\n\n\n\n\n")
        assert "the survey has the reach 'Weir pool' already" in keyboard.words
        assert keyboard.screen == "Form"


async def test_the_timeline_tells_everything_and_marks_what_was_taken_back(
    open_app: Any, pen: Recorder
) -> None:
    state = pen.survey.reach_state("Weir pool")
    pen.withdraw("Weir pool", state.effective[-1])
    async with open_app(pen.survey.folder) as keyboard:
        await keyboard.press("home", "l")
        assert keyboard.screen == "TimelineScreen"
        assert "taken back: meander of main channel" in keyboard.words
        assert "beginning of Weir pool" in keyboard.words
        await keyboard.press("escape")
        assert keyboard.screen == "SurveyScreen"


async def test_help_explains_keys_and_words_on_every_screen(
    open_app: Any, survey: SurveyFolder
) -> None:
    async with open_app(survey.folder) as keyboard:
        for keys, word in (((), "shared"), (("h",), "published"), (("escape", "l"), "trail")):
            await keyboard.press(*keys, "question_mark")
            assert keyboard.screen == "HelpScreen", keys
            assert word in keyboard.words or "KEYS" in keyboard.words
            await keyboard.press("escape")


async def test_a_full_survey_folder_that_cannot_be_written_to_says_so(
    open_app: Any, survey: SurveyFolder, monkeypatch: Any
) -> None:
    path: Path = survey.reach_path("Mill race")
    path.unlink()
    async with open_app(survey.folder) as keyboard:
        await keyboard.press("end", "enter")
        assert keyboard.screen == "SurveyScreen"
        assert "is not there" in keyboard.words


async def test_lengths_typed_as_metres_are_recorded_as_metres(
    open_app: Any, survey: SurveyFolder
) -> None:
    async with open_app(survey.folder) as keyboard:
        await keyboard.press("plus", "4")
        assert "From, m" in keyboard.text
        await keyboard.type("Ford\n320\n700\n0.004\n\n\n")
        assert keyboard.screen == "SurveyScreen", keyboard.text
    state = SurveyFolder(survey.folder).state
    ford = state.reach("Ford")
    assert state.described.length_unit == "m"
    assert ford is not None and (ford.reach_from, ford.reach_to) == (320, 700)


async def test_a_note_on_the_reach_is_kept_and_an_empty_one_takes_it_back(
    open_app: Any, survey: SurveyFolder
) -> None:
    async with open_app(survey.folder) as keyboard:
        await keyboard.press("home", "plus", "5")
        await keyboard.type("narrows at the weir\n")
        assert SurveyFolder(survey.folder).reach("Weir pool").note == "narrows at the weir"
        await keyboard.press("plus", "5", "ctrl+u")
        await keyboard.type("\n")
    assert SurveyFolder(survey.folder).reach("Weir pool").note is None
