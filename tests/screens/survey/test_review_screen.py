"""A reviewer at the keyboard: the weakest first, the page, questions and answers."""

import shutil
from pathlib import Path
from typing import Any

import pytest
from textual.widgets import Input, OptionList

from roughness.desk.folder import SurveyFolder
from roughness.desk.recording import Recorder
from roughness.desk.rows import Row, rows
from roughness.desk.weakness import order
from roughness.shelf.places import demo_folder
from roughness.trail.data import Gate, SegmentShare

FLOOD, CHANNEL, BOOK = "design flood", "main channel", "usgs-wsp-2339"
BOTH_SIZES = pytest.mark.parametrize("size", [(80, 24), (120, 40)])


@pytest.fixture
def demo(tmp_path: Path) -> Path:
    return Path(shutil.copytree(demo_folder(), tmp_path / "demo"))


def row_of(survey: SurveyFolder, reach: str = "Weir pool") -> Row:
    again = SurveyFolder(survey.folder)
    return next(row for row in rows(again) if row.reach.reach == reach and row.condition)


async def opened_page(keyboard: Any) -> None:
    """Open the page of the reach that is estimated."""
    await keyboard.press("r")
    await keyboard.until("ReviewScreen")
    for _ in range(200):
        if "Reading" not in keyboard.text:
            break
        await keyboard.pilot.pause(0.01)
    screen = keyboard.app.screen
    at = next(i for i, row in enumerate(screen.places.rows) if row.reach.reach == "Weir pool")
    screen.query_one(OptionList).highlighted = at
    await keyboard.press("enter")
    assert keyboard.screen == "ReviewPage"


def to_line(keyboard: Any, sort: str) -> None:
    """Put the cursor on the first line of a page that is a finding, a question or the sum."""
    screen = keyboard.app.screen
    at = next(
        i
        for i, line in enumerate(screen._lines)
        if {
            "finding": line.finding is not None and line.finding.level == "ask",
            "asked": line.asked is not None,
            "sum": not (line.finding or line.asked or line.question),
        }[sort]
    )
    screen.query_one(OptionList).highlighted = at


# -- the order and the page -----------------------------------------------------------------


@BOTH_SIZES
async def test_the_weakest_place_stands_first_and_says_why(
    open_app: Any, demo: Path, size: Any
) -> None:
    survey = SurveyFolder(demo)
    weakest = order(survey, rows(survey))[0]
    async with open_app(demo, "Rea", size=size) as keyboard:
        await keyboard.press("r")
        await keyboard.until("ReviewScreen")
        await keyboard.press()
        lines = [line for line in keyboard.text.splitlines() if " 1 " in line]
        assert any(weakest.reach.reach in line for line in lines)
        assert "has neither note nor photo" in keyboard.words
        assert "what experienced people differ by (from memory)" in keyboard.words
        assert weakest.open[0].says[:40] in keyboard.words
        assert "estimated" in keyboard.text
        assert max(map(len, keyboard.text.splitlines())) <= size[0]


@BOTH_SIZES
async def test_a_page_shows_n_its_range_who_and_what_drives_it(
    open_app: Any, survey: SurveyFolder, size: Any
) -> None:
    estimate = row_of(survey).estimate
    assert estimate
    async with open_app(survey.folder, "Rea", size=size) as keyboard:
        await opened_page(keyboard)
        for told in ("n 0.", "spread 0.", "people 0.", "Estimated by Runa", "drives n", "█"):
            assert told in keyboard.text
        for entry in estimate.factors:
            assert f"{entry.symbol:2} {entry.factor}" in keyboard.text
        assert keyboard.text.count(" % ") >= len(estimate.factors)
        # The cursor starts where the reviewer should look first, and says it in full.
        assert "neither note nor photo backs it" in keyboard.words


async def test_every_weak_point_of_the_demo_is_met_in_the_order_of_the_screen(
    open_app: Any, demo: Path
) -> None:
    found = rows(SurveyFolder(demo))
    planted = {f.says for row in found for f in row.findings if f.level in ("stop", "ask")}
    half = sum(row.place is not None for row in found) // 2
    assert len(planted) > 10
    async with open_app(demo, "Rea", size=(120, 40)) as keyboard:
        await keyboard.press("r")
        await keyboard.until("ReviewScreen")
        await keyboard.press("enter")
        met = set()
        for _ in range(half):
            for at, line in enumerate(keyboard.app.screen._lines):
                if line.finding is None or line.finding.level == "tell":
                    continue
                keyboard.app.screen.query_one(OptionList).highlighted = at
                await keyboard.press()
                met |= {says for says in planted if says in keyboard.words}
            await keyboard.press("right")
        assert planted <= met


async def test_right_and_left_go_through_the_weak_places_without_the_list(
    open_app: Any, demo: Path
) -> None:
    async with open_app(demo, "Rea") as keyboard:
        await keyboard.press("r")
        await keyboard.until("ReviewScreen")
        await keyboard.press("enter")
        first = keyboard.text.splitlines()[0]
        await keyboard.press("left")
        assert "This is the weakest place." in keyboard.text
        await keyboard.press("right")
        assert keyboard.text.splitlines()[0] != first
        await keyboard.press("pageup")
        assert keyboard.text.splitlines()[0] == first


async def test_a_reach_without_any_part_says_so_and_opens_nothing(
    open_app: Any, survey: SurveyFolder
) -> None:
    async with open_app(survey.folder, "Rea") as keyboard:
        await keyboard.press("r")
        await keyboard.until("ReviewScreen")
        assert "no part yet" in keyboard.text
        screen = keyboard.app.screen
        at = next(i for i, row in enumerate(screen.places.rows) if row.part is None)
        screen.query_one(OptionList).highlighted = at
        await keyboard.press("enter")
        assert keyboard.screen == "ReviewScreen"
        assert "nothing to review yet" in keyboard.words


# -- questions and answers ------------------------------------------------------------------


async def test_a_question_on_a_factor_is_asked_answered_and_gone_on_from(
    open_app: Any, survey: SurveyFolder
) -> None:
    async with open_app(survey.folder, "Rea") as keyboard:
        await opened_page(keyboard)
        factor = keyboard.app.screen.factor
        await keyboard.press("i")
        await keyboard.type("before leaf-out?\n")
        assert "in review" in keyboard.text
        asked = row_of(survey).review.questions[0]
        assert (asked.question.segment, asked.question.factor) == factor
        assert asked.is_open
        to_line(keyboard, "asked")
        await keyboard.press("enter")
        await keyboard.type("yes, in March\n")
        assert not row_of(survey).review.questions[0].is_open
        assert "› Rea" in keyboard.text
        await keyboard.press("i")
        await keyboard.type("and in summer?\n")
        thread = row_of(survey).review.threads()[0]
        assert [one.question.text for one in thread] == ["before leaf-out?", "and in summer?"]
        await keyboard.press("escape", "escape")
        assert keyboard.screen == "SurveyScreen"
        assert "in review" in keyboard.text


async def test_a_question_on_the_sum_is_about_the_whole_part(
    open_app: Any, survey: SurveyFolder
) -> None:
    async with open_app(survey.folder, "Rea") as keyboard:
        await opened_page(keyboard)
        to_line(keyboard, "sum")
        await keyboard.press("i")
        assert "Inquire about the whole part" in keyboard.words
        await keyboard.type("why one n?\n")
        assert row_of(survey).review.questions[0].question.factor is None


async def test_a_finding_that_asks_is_answered_from_the_page(
    open_app: Any, survey: SurveyFolder
) -> None:
    before = row_of(survey).open
    assert any(finding.level == "ask" for finding in before)
    async with open_app(survey.folder, "Rea") as keyboard:
        await opened_page(keyboard)
        to_line(keyboard, "finding")
        await keyboard.press("enter")
        await keyboard.press("enter")
        assert "the answer is empty" in keyboard.words
        await keyboard.type("seen on the photos\n")
        assert "✓ ask: seen on the photos" in keyboard.text
    assert len(row_of(survey).open) == len(before) - 1


async def test_leaving_a_question_writes_nothing(open_app: Any, survey: SurveyFolder) -> None:
    async with open_app(survey.folder, "Rea") as keyboard:
        await opened_page(keyboard)
        await keyboard.press("i")
        await keyboard.type("what")
        await keyboard.press("escape")
        assert keyboard.screen == "ReviewPage"
    assert not row_of(survey).review.questions


async def test_what_looks_like_markup_in_a_question_is_shown_as_it_was_typed(
    open_app: Any, survey: SurveyFolder
) -> None:
    async with open_app(survey.folder, "Rea") as keyboard:
        await opened_page(keyboard)
        await keyboard.press("i")
        keyboard.app.screen.query_one(Input).value = "[bold]why[/bold] \x1b[2J?"
        await keyboard.press("enter")
        to_line(keyboard, "asked")
        await keyboard.press()
        assert "[bold]why[/bold]" in keyboard.text
        assert "\x1b" not in keyboard.text


async def test_handbook_timeline_and_help_open_from_the_page(
    open_app: Any, survey: SurveyFolder
) -> None:
    async with open_app(survey.folder, "Rea") as keyboard:
        await opened_page(keyboard)
        for key, screen in (
            ("h", "HandbookScreen"),
            ("l", "TimelineScreen"),
            ("question_mark", "HelpScreen"),
            ("space", "HelpScreen"),
        ):
            await keyboard.press(key)
            assert keyboard.screen == screen
            await keyboard.press("escape")
            assert keyboard.screen == "ReviewPage"


async def test_the_filter_finds_what_stands_where_and_keeps_the_order(
    open_app: Any, survey: SurveyFolder
) -> None:
    async with open_app(survey.folder, "Rea") as keyboard:
        await opened_page(keyboard)
        await keyboard.press("a", "enter", "escape", "slash")
        await keyboard.type("accepted")
        assert "Weir pool" in keyboard.text
        assert "Osier bend" not in keyboard.text
        await keyboard.press("enter", "enter")
        assert keyboard.screen == "ReviewPage"
        await keyboard.press("escape", "escape")
        assert keyboard.screen == "ReviewScreen"
        assert "Osier bend" in keyboard.text


async def test_a_page_of_a_part_with_bed_and_banks_apart_shows_each_of_their_factors(
    open_app: Any, pen: Recorder
) -> None:
    shares = (
        SegmentShare(name="bed", perimeter_percent=60),
        SegmentShare(name="banks", perimeter_percent=40),
    )
    pen.set_gate("Weir pool", Gate(part=CHANNEL, condition=FLOOD, handbook=BOOK, segments=shares))
    async with open_app(pen.survey.folder, "Rea", size=(120, 40)) as keyboard:
        await opened_page(keyboard)
        for told in ("base bed", "base banks", "vegetation banks", "bed 0.0", "banks 0.0"):
            assert told in keyboard.text
        ledger = [line[1:22] for line in keyboard.text.splitlines()[6:20]]
        assert sum("variation" in line for line in ledger) == 1


async def test_a_trail_that_is_destroyed_meanwhile_is_said_and_nothing_is_accepted(
    open_app: Any, pen: Recorder
) -> None:
    path = pen.survey.reach_path("Weir pool")
    async with open_app(pen.survey.folder, "Rea") as keyboard:
        await opened_page(keyboard)
        path.unlink()
        keyboard.app.screen._look()
        await keyboard.press()
        assert "cannot be read any more" in keyboard.words
        await keyboard.press("a")
        if keyboard.screen == "Confirm":
            await keyboard.press("enter")
        assert keyboard.screen == "ReviewPage"
        assert "!" in keyboard.text
        await keyboard.press("i")
        await keyboard.type("why?\n")
        assert keyboard.screen == "Form"
        assert "why?" in keyboard.text
        await keyboard.press("escape", "right", "left", "escape", "escape")
        assert keyboard.screen == "SurveyScreen"
    assert not path.exists()


async def test_words_and_signs_carry_the_meaning_without_colour(
    open_app: Any, survey: SurveyFolder, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setenv("NO_COLOR", "1")
    async with open_app(survey.folder, "Rea") as keyboard:
        await opened_page(keyboard)
        line = next(x for x in keyboard.text.splitlines() if " n4 vegetation" in x)
        assert line.lstrip().startswith("?")
        assert "? ask: The vegetation drives n" in keyboard.text
