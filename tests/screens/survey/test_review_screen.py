"""A reviewer at the keyboard: the weakest first, questions, answers, verdicts."""

import re
import shutil
from pathlib import Path
from typing import Any

import pytest
from textual.widgets import Input, OptionList

from roughness.desk.folder import SurveyFolder
from roughness.desk.places import place_of
from roughness.desk.recording import Recorder
from roughness.desk.rows import Row, rows
from roughness.desk.weakness import order
from roughness.shelf.places import demo_folder
from roughness.survey.choices import Choice, ObstructionChoice
from roughness.survey.stream import Part, Visit
from roughness.trail.data import Gate, SegmentShare

FLOOD, CHANNEL, BOOK = "design flood", "main channel", "usgs-wsp-2339"
BOTH_SIZES = pytest.mark.parametrize("size", [(80, 24), (120, 40)])


@pytest.fixture
def demo(tmp_path: Path) -> Path:
    return Path(shutil.copytree(demo_folder(), tmp_path / "demo"))


def row_of(survey: SurveyFolder, reach: str = "Weir pool") -> Row:
    again = SurveyFolder(survey.folder)
    return next(row for row in rows(again) if row.reach.reach == reach and row.condition)


def give_note(pen: Recorder, note: str, factor: Any = "vegetation", **more: Any) -> None:
    place = place_of(pen.survey, "Weir pool", CHANNEL, FLOOD)
    standing = place.at(None, factor)
    assert standing
    choice: Choice = type(standing.choice)(grade=standing.choice.grade, note=note, **more)
    pen.choose(place, factor, choice)


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


# -- verdicts -------------------------------------------------------------------------------


async def test_accepting_names_the_place_and_n_first_and_is_told_on_every_screen(
    open_app: Any, survey: SurveyFolder
) -> None:
    async with open_app(survey.folder, "Rea") as keyboard:
        await opened_page(keyboard)
        await keyboard.press("a")
        for told in ("Weir pool, main channel, design flood", "n 0.", "estimated by Runa"):
            assert told in keyboard.words
        count = sum(finding.level == "ask" for finding in row_of(survey).open)
        assert count > 0
        assert re.search(rf"{count} findings? that asks? ha(s|ve) no answer", keyboard.words)
        await keyboard.press("escape")
        assert row_of(survey).status == "estimated"
        await keyboard.press("a", "enter")
        assert row_of(survey).status == "accepted"
        assert "Accepted by Rea" in keyboard.words
        await keyboard.press("escape", "escape")
        line = next(x for x in keyboard.text.splitlines() if "Weir pool" in x)
        assert line.rstrip().endswith("accepted")


async def test_whoever_estimated_cannot_accept_and_reads_why(
    open_app: Any, survey: SurveyFolder
) -> None:
    async with open_app(survey.folder, "RUNA ") as keyboard:
        await opened_page(keyboard)
        await keyboard.press("a")
        assert keyboard.screen == "ReviewPage"
        assert "cannot accept it too" in keyboard.words
    assert row_of(survey).status == "estimated"


async def test_one_person_may_do_both_where_the_survey_says_so(
    open_app: Any, pen: Recorder
) -> None:
    pen.describe(same_person_may_accept=True)
    async with open_app(pen.survey.folder, "Runa") as keyboard:
        await opened_page(keyboard)
        await keyboard.press("a", "enter")
        assert "the one who estimated it" in keyboard.words
    assert row_of(pen.survey).status == "accepted"


async def test_a_stop_is_accepted_over_only_with_a_reason(open_app: Any, pen: Recorder) -> None:
    place = place_of(pen.survey, "Weir pool", CHANNEL, FLOOD)
    choice = ObstructionChoice(grade="minor", best=0.09, high=0.1)
    pen.choose(place, "obstruction", choice)
    async with open_app(pen.survey.folder, "Rea") as keyboard:
        await opened_page(keyboard)
        await keyboard.press("a")
        assert "A finding stops main channel of Weir pool" in keyboard.words
        await keyboard.press("enter")
        assert keyboard.screen == "Form"
        assert row_of(pen.survey).status == "estimated"
        await keyboard.type("calibrated\n")
        assert keyboard.screen == "ReviewPage"
    acceptance = row_of(pen.survey).review.acceptance
    assert acceptance
    assert acceptance.accept.overruled == "calibrated"


async def test_a_return_asks_why_and_says_it_to_the_crew(
    open_app: Any, survey: SurveyFolder
) -> None:
    async with open_app(survey.folder, "Rea") as keyboard:
        await opened_page(keyboard)
        await keyboard.press("t", "enter")
        assert "the reason is empty" in keyboard.words
        await keyboard.type("count the logs\n")
        assert row_of(survey).status == "returned"
        assert "Returned by Rea" in keyboard.words
        await keyboard.press("escape", "escape")
        assert "returned" in keyboard.text


async def test_what_changed_since_it_was_accepted_is_told_line_by_line(
    open_app: Any, pen: Recorder, judged: Any
) -> None:
    async with open_app(pen.survey.folder, "Rea") as keyboard:
        await opened_page(keyboard)
        assert "d changed" not in keyboard.text
        await keyboard.press("a", "enter", "d")
        assert "WHAT TOUCHES WHAT WAS ACCEPTED Nothing." in keyboard.words
        await keyboard.press("escape")
        judged(Recorder(SurveyFolder(pen.survey.folder), "Runa"), "Weir pool", {
            "vegetation": "medium"
        })  # fmt: skip
        keyboard.app.screen._look()
        await keyboard.press()
        assert "changed since acceptance" in keyboard.words
        await keyboard.press("d")
        assert "Runa: vegetation of main channel" in keyboard.words
        assert "accepted was small" in keyboard.words
        await keyboard.press("escape", "escape", "escape")
        line = next(x for x in keyboard.text.splitlines() if "Weir pool" in x)
        assert "changed since" in line


async def test_all_without_findings_are_accepted_in_one_step_after_a_list(
    open_app: Any, pen: Recorder, judged: Any, grades: Any
) -> None:
    give_note(pen, "grass to the knee", "base")
    for factor in grades:
        give_note(pen, "seen and counted", factor)
    for reach in ("Weir pool", "Mill race"):
        pen.note_visit(reach, Visit(visit="June", on="2026-06-03", growth="leaf-on"))
    pen.add_part("Mill race", Part(part=CHANNEL, setting="channel"))
    judged(pen, "Mill race", grades)
    assert not [f for f in row_of(pen.survey).open if f.level != "tell"]
    assert [f for f in row_of(pen.survey, "Mill race").open if f.level == "ask"]
    async with open_app(pen.survey.folder, "Rea") as keyboard:
        await keyboard.press("r")
        await keyboard.until("ReviewScreen")
        await keyboard.press("A")
        assert "1 value has no open finding" in keyboard.words
        assert "Weir pool, channel, design flood" in keyboard.words
        assert [row.reach.reach for row in keyboard.app.screen._rows] == ["Weir pool"]
        await keyboard.press("escape")
        assert row_of(pen.survey).status == "estimated"
        await keyboard.press("A", "enter")
        assert row_of(pen.survey).status == "accepted"
        assert row_of(pen.survey, "Mill race").status == "estimated"
        await keyboard.press("A")
        assert "Nothing can be accepted in one step" in keyboard.words


async def test_undo_says_which_line_it_takes_back_first(
    open_app: Any, survey: SurveyFolder
) -> None:
    async with open_app(survey.folder, "Rea") as keyboard:
        await opened_page(keyboard)
        await keyboard.press("u")
        assert "nothing of yours to take back" in keyboard.words
        await keyboard.press("a", "enter", "u")
        assert "Take this back?" in keyboard.text
        await keyboard.press("enter")
        assert row_of(survey).status == "estimated"


async def test_what_somebody_else_writes_meanwhile_is_seen_before_it_is_accepted(
    open_app: Any, pen: Recorder, judged: Any
) -> None:
    async with open_app(pen.survey.folder, "Rea") as keyboard:
        await opened_page(keyboard)
        await keyboard.press("a")
        judged(Recorder(SurveyFolder(pen.survey.folder), "Runa"), "Weir pool", {
            "vegetation": "medium"
        })  # fmt: skip
        await keyboard.press("enter")
        assert "was changed since it was read" in keyboard.words
        assert "n4 vegetation   0.01" in keyboard.text
    assert row_of(pen.survey).status == "estimated"


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
