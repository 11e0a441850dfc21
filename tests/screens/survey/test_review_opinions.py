"""Second opinions at the keyboard: a blind file out, a filled one in, side by side, agreed."""

import json
from pathlib import Path
from typing import Any

import pytest
from textual.widgets import Input, OptionList

from roughness.desk.folder import SurveyFolder
from roughness.desk.places import place_of
from roughness.desk.recording import Recorder
from roughness.desk.rows import Row, rows
from roughness.survey.choices import BaseChoice
from roughness.trail.data import Gate, SegmentShare

FLOOD = "design flood"
BOTH_SIZES = pytest.mark.parametrize("size", [(80, 24), (120, 40)])


def row_of(survey: SurveyFolder) -> Row:
    again = SurveyFolder(survey.folder)
    return next(row for row in rows(again) if row.reach.reach == "Weir pool" and row.condition)


async def opened_page(keyboard: Any) -> None:
    await keyboard.press("r")
    await keyboard.until("ReviewScreen")
    await keyboard.press()
    screen = keyboard.app.screen
    at = next(i for i, row in enumerate(screen.places.rows) if row.reach.reach == "Weir pool")
    screen.query_one(OptionList).highlighted = at
    await keyboard.press("enter")
    assert keyboard.screen == "ReviewPage"


def filled(blind: Path, grades: dict[str, str], by: str = "Teodor") -> Path:
    """Fill a blind file in as another person would, and save it beside it."""
    document = json.loads(blind.read_text(encoding="utf-8"))
    document["by"] = by
    document["note"] = "willows seen from the bridge"
    document["estimate"]["factors"] = {factor: {"grade": key} for factor, key in grades.items()}
    back = blind.with_name("back.json")
    back.write_text(json.dumps(document), encoding="utf-8")
    return back


async def handed_out(keyboard: Any, here: Path) -> Path:
    await keyboard.press("o", "1")
    keyboard.app.screen.query_one(Input).value = "blind.json"
    await keyboard.press("enter")
    assert "Written:" in keyboard.words
    return here / "blind.json"


async def taken_in(keyboard: Any, file: Path) -> None:
    await keyboard.press("o", "2")
    keyboard.app.screen.query_one("#file", Input).value = str(file)
    await keyboard.press("enter", "enter")


async def test_the_blind_file_tells_nothing_of_the_first_and_lies_outside_the_survey(
    open_app: Any, survey: SurveyFolder, here: Path
) -> None:
    async with open_app(survey.folder, "Rea") as keyboard:
        await opened_page(keyboard)
        await keyboard.press("o", "1")
        assert "nothing of the first estimate" in keyboard.words
        keyboard.app.screen.query_one(Input).value = str(survey.folder / "blind.json")
        await keyboard.press("enter")
        assert "inside the survey's own folder" in keyboard.words
        assert keyboard.screen == "Form"
        await keyboard.press("escape")
        blind = await handed_out(keyboard, here)
    text = blind.read_text(encoding="utf-8")
    assert "Weir pool" in text
    assert "Runa" not in text
    assert "firm-soil" not in text
    assert not (survey.folder / "blind.json").exists()


async def test_a_file_that_is_there_is_replaced_only_after_saying_so(
    open_app: Any, survey: SurveyFolder, here: Path
) -> None:
    (here / "blind.json").write_text("mine", encoding="utf-8")
    async with open_app(survey.folder, "Rea") as keyboard:
        await opened_page(keyboard)
        await keyboard.press("o", "1")
        keyboard.app.screen.query_one(Input).value = "blind.json"
        await keyboard.press("enter")
        assert "Replace the file?" in keyboard.words
        await keyboard.press("escape")
    assert (here / "blind.json").read_text(encoding="utf-8") == "mine"


@BOTH_SIZES
async def test_a_filled_file_is_taken_in_and_laid_beside_the_first(
    open_app: Any, survey: SurveyFolder, grades: Any, here: Path, size: Any
) -> None:
    n = row_of(survey).n_adopted
    async with open_app(survey.folder, "Rea", size=size) as keyboard:
        await opened_page(keyboard)
        blind = await handed_out(keyboard, here)
        await taken_in(keyboard, filled(blind, grades | {"vegetation": "large"}))
        assert "by Teodor" in keyboard.words
        await keyboard.press("o", "3")
        assert keyboard.screen == "BesideScreen"
        assert "Teodor notes: willows seen from the bridge" in keyboard.words
        line = next(x for x in keyboard.text.splitlines() if "≠" in x)
        for told in ("vegetation", "small", "large", "+0."):
            assert told in line
        for told in ("0.006 (0.002–0.010)", "0.0375 (0.025–0.050)", "+0.032"):
            assert told in keyboard.text
        assert max(map(len, keyboard.text.splitlines())) <= size[0]
        await keyboard.press("escape", "escape")
        # In the list the disagreement is one of the parts of the score.
        assert "opinion" in keyboard.words
    assert row_of(survey).n_adopted == n


async def test_an_opinion_of_whoever_made_the_first_estimate_is_refused(
    open_app: Any, survey: SurveyFolder, grades: Any, here: Path
) -> None:
    async with open_app(survey.folder, "Rea") as keyboard:
        await opened_page(keyboard)
        blind = await handed_out(keyboard, here)
        await taken_in(keyboard, filled(blind, grades, by="Runa"))
        assert "Runa made the first estimate" in keyboard.words
        assert keyboard.app.screen.query_one("#file", Input).value.endswith("back.json")
        await keyboard.press("escape")
        await taken_in(keyboard, here / "nowhere.json")
        assert "it cannot be read" in keyboard.words
    assert not row_of(survey).review.opinions


async def test_what_was_agreed_on_is_recorded_factor_by_factor_with_a_reason(
    open_app: Any, survey: SurveyFolder, grades: Any, here: Path
) -> None:
    async with open_app(survey.folder, "Rea") as keyboard:
        await opened_page(keyboard)
        await keyboard.press("o", "4")
        assert "Nobody gave a second opinion" in keyboard.words
        blind = await handed_out(keyboard, here)
        other = grades | {"vegetation": "large", "base": "gravel"}
        await taken_in(keyboard, filled(blind, other))
        await keyboard.press("o", "4")
        screen = keyboard.app.screen
        at = list(grades).index("vegetation")
        screen.query_one(f"#at{at}").focus()
        await keyboard.press("right")
        screen.query_one("#reason", Input).focus()
        await keyboard.press("enter")
        assert "the reason is empty" in keyboard.words
        await keyboard.type("seen together\n")
        assert "Agreed:" in keyboard.words
    row = row_of(survey)
    assert row.place
    assert {f: s.choice.grade for (z, f) in row.place.questions if (s := row.place.at(z, f))} == (
        grades | {"vegetation": "large"}
    )
    assert row.review.consensus
    assert row.review.consensus.consensus.reason == "seen together"


async def test_agreement_over_the_survey_stands_beside_what_was_published(
    open_app: Any, survey: SurveyFolder, grades: Any, here: Path
) -> None:
    async with open_app(survey.folder, "Rea") as keyboard:
        await opened_page(keyboard)
        await keyboard.press("o", "5")
        assert "Nobody gave a second opinion in this survey" in keyboard.words
        blind = await handed_out(keyboard, here)
        await taken_in(keyboard, filled(blind, grades | {"vegetation": "large"}))
        await keyboard.press("o", "5")
        assert "1 place with a second opinion" in keyboard.words
        assert "people differ most in the vegetation" in keyboard.words
        assert "from memory" in keyboard.words


async def test_the_list_offers_second_opinions_too(open_app: Any, pen: Recorder) -> None:
    async with open_app(pen.survey.folder, "Rea") as keyboard:
        await keyboard.press("r")
        await keyboard.until("ReviewScreen")
        await keyboard.press("o")
        # The cursor is on a reach without any part: what is about the survey is offered.
        assert "agreement over the survey" in keyboard.words
        assert "write the blind file" not in keyboard.words
        await keyboard.press("escape", "down", "o")
        assert "write the blind file" in keyboard.words
        await keyboard.press("escape")
        assert keyboard.screen == "ReviewScreen"


async def test_who_told_bed_and_banks_apart_still_sees_what_both_chose(
    open_app: Any, pen: Recorder, grades: Any, here: Path
) -> None:
    shares = (
        SegmentShare(name="bed", perimeter_percent=60),
        SegmentShare(name="banks", perimeter_percent=40),
    )
    gate = Gate(part="main channel", condition=FLOOD, handbook="usgs-wsp-2339", segments=shares)
    pen.set_gate("Weir pool", gate)
    place = place_of(pen.survey, "Weir pool", "main channel", FLOOD)
    pen.choose(place, "base", BaseChoice(grade="cobble"), segment="bed")
    async with open_app(pen.survey.folder, "Rea") as keyboard:
        await opened_page(keyboard)
        blind = await handed_out(keyboard, here)
        await taken_in(keyboard, filled(blind, grades))
        await keyboard.press("o", "3")
        assert "bed: cobble" in keyboard.text
        assert "banks: firm-soil" in keyboard.text
        assert "only n can be subtracted" in keyboard.words
        await keyboard.press("escape", "o", "4")
        await keyboard.press("right")
        keyboard.app.screen.query_one("#whole").focus()
        await keyboard.press("right", "enter")
        await keyboard.type("one n is enough\n")
        assert "Agreed:" in keyboard.words
    row = row_of(pen.survey)
    assert row.place
    assert not row.place.segments
