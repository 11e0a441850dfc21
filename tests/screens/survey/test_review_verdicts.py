"""A reviewer's verdicts at the keyboard: accepted, over a stop, returned, taken back."""

import re
import shutil
import subprocess
from pathlib import Path
from typing import Any

import pytest
from textual.widgets import OptionList

from roughness.desk.folder import SurveyFolder
from roughness.desk.places import place_of
from roughness.desk.recording import Recorder
from roughness.desk.rows import Row, rows
from roughness.survey.choices import Choice, ObstructionChoice
from roughness.survey.stream import Part, Visit

FLOOD, CHANNEL, BOOK = "design flood", "main channel", "usgs-wsp-2339"


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


@pytest.mark.skipif(shutil.which("ssh-keygen") is None, reason="ssh-keygen is not installed")
async def test_who_has_a_key_signs_what_is_accepted_and_is_told_so_first(
    open_app: Any, survey: SurveyFolder, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    key = tmp_path / "key"
    words = ["ssh-keygen", "-q", "-t", "ed25519", "-N", "", "-C", "", "-f", str(key)]
    subprocess.run(words, check=True)
    monkeypatch.setenv("ROUGHNESS_SIGNING_KEY", str(key))
    async with open_app(survey.folder, "Rea") as keyboard:
        await opened_page(keyboard)
        await keyboard.press("a")
        assert "It will be signed with" in keyboard.words
        await keyboard.press("enter")
        await said(keyboard, "Accepted:")
    acceptance = row_of(survey).review.acceptance
    assert acceptance is not None and acceptance.accept.signature is not None


async def test_a_key_that_does_not_sign_leaves_the_value_unaccepted(
    open_app: Any, survey: SurveyFolder, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setenv("ROUGHNESS_SIGNING_KEY", str(tmp_path / "not-there"))
    async with open_app(survey.folder, "Rea") as keyboard:
        await opened_page(keyboard)
        await keyboard.press("a", "enter")
        await keyboard.until("ReviewPage")
        await said(keyboard, "not-there")
    assert row_of(survey).review.acceptance is None


async def said(keyboard: Any, words: str) -> None:
    """Wait until the screen says something that is made aside."""
    for _ in range(400):
        if words in keyboard.words:
            return
        await keyboard.pilot.pause(0.01)
    raise AssertionError(keyboard.text)
