"""The list of reaches: what it shows, how it is filtered and sorted, what it never hides."""

from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest
from textual.containers import VerticalScroll

from roughness.desk.folder import SurveyFolder
from roughness.desk.making import new_survey
from roughness.desk.recording import Recorder
from roughness.screens.reach_list import ReachList
from roughness.survey.stream import FlowCondition, Part, Reach

SIZES = [(80, 24), (120, 40)]


def line_of(text: str, word: str) -> str:
    return next(line for line in text.splitlines() if word in line)


@pytest.mark.parametrize("size", SIZES)
async def test_every_reach_is_a_line_with_part_bar_and_status(
    open_app: Any, survey: SurveyFolder, size: tuple[int, int]
) -> None:
    async with open_app(survey.folder, size=size) as keyboard:
        told = keyboard.text
        assert "3 reaches   1 estimated   2 to do" in told
        estimated = line_of(told, "Weir pool")
        assert all(sign in estimated for sign in ("channel", "├", "━", "█", "┤", "? 1 ask"))
        assert "incomplete" in line_of(told, "Osier bend")
        assert "no part yet" in line_of(told, "Mill race")


@pytest.mark.parametrize("size", SIZES)
async def test_the_keys_stand_in_the_last_line_and_nothing_is_wider_than_the_screen(
    open_app: Any, survey: SurveyFolder, size: tuple[int, int]
) -> None:
    async with open_app(survey.folder, size=size) as keyboard:
        for keys in ((), ("plus",), ("escape", "g"), ("escape", "question_mark")):
            await keyboard.press(*keys)
            lines = keyboard.text.splitlines()
            assert len(lines) == size[1]
            screen = keyboard.app.screen
            shown = [w for w in screen.walk_children() if w.display and w.region.area]
            assert len(shown) > 2
            for widget in shown:
                scrolls = any(isinstance(up, VerticalScroll) for up in widget.ancestors)
                assert scrolls or screen.region.contains_region(widget.region), widget
        await keyboard.press("escape")
        assert "⏎ walk" in keyboard.text.splitlines()[-1]
        assert "? help" in keyboard.text.splitlines()[-1]


async def test_the_cursor_is_on_the_place_last_worked_on(
    open_app: Any, pen: Recorder, grades: Any, judged: Callable[..., None]
) -> None:
    judged(pen, "Osier bend", {"vegetation": "small"})
    async with open_app(pen.survey.folder) as keyboard:
        assert keyboard.selected == ("Osier bend", "main channel")


async def test_the_filter_follows_the_typing_and_escape_shows_all_again(
    open_app: Any, survey: SurveyFolder
) -> None:
    async with open_app(survey.folder) as keyboard:
        await keyboard.press("slash")
        await keyboard.type("BEND")
        assert "Osier bend" in keyboard.text
        assert "Mill race" not in keyboard.text
        await keyboard.press("enter", "escape")
        assert "Mill race" in keyboard.text
        assert keyboard.screen == "SurveyScreen"


async def test_the_filter_finds_a_status(open_app: Any, survey: SurveyFolder) -> None:
    async with open_app(survey.folder) as keyboard:
        await keyboard.type("/to do")
        listed = keyboard.app.screen.query_one(ReachList).visible_reaches()
        assert listed == ["Mill race"]


async def test_weak_points_come_first_and_stream_order_comes_back(
    open_app: Any, pen: Recorder, grades: Any, judged: Callable[..., None]
) -> None:
    pen.add_part("Mill race", Part(part="main channel", setting="channel"))
    judged(
        pen,
        "Mill race",
        grades | {"irregularity": "moderate", "variation": "alternating-frequently"},
    )
    async with open_app(pen.survey.folder) as keyboard:
        await keyboard.press("w")
        shown = keyboard.app.screen.query_one(ReachList).visible_reaches()
        assert shown[0] == "Mill race", keyboard.text
        assert "weak points first" in keyboard.text
        await keyboard.press("w")
        shown = keyboard.app.screen.query_one(ReachList).visible_reaches()
        assert shown == ["Weir pool", "Osier bend", "Mill race"]


async def test_the_selected_line_tells_n_range_spread_and_what_weighs_most(
    open_app: Any, survey: SurveyFolder
) -> None:
    async with open_app(survey.folder) as keyboard:
        await keyboard.press("home")
        assert "Weir pool, channel: n 0.040 (0.0" in keyboard.words
        assert "spread of choices" in keyboard.words
        assert "? ask: The vegetation drives n" in keyboard.words


async def test_a_jump_between_neighbours_is_said_on_the_selected_line(
    open_app: Any, pen: Recorder, grades: Any, judged: Callable[..., None]
) -> None:
    judged(pen, "Osier bend", grades | {"base": "boulder", "vegetation": "large"})
    async with open_app(pen.survey.folder) as keyboard:
        await keyboard.press("home", "down")
        assert keyboard.selected[0] == "Osier bend"
        assert "n jumps from" in keyboard.words


async def test_another_flow_condition_is_shown_with_f(open_app: Any, pen: Recorder) -> None:
    pen.add_condition(FlowCondition(condition="winter", growth="leaf-off"))
    async with open_app(pen.survey.folder) as keyboard:
        assert "design flood" in keyboard.text.splitlines()[0]
        await keyboard.press("f")
        assert "winter" in keyboard.text.splitlines()[0]
        assert "0 estimated" in keyboard.text
        pen.add_condition(FlowCondition(condition="after mowing", growth="after cutting"))
        await keyboard.press("f", "3")
        assert "after mowing" in keyboard.text.splitlines()[0]


async def test_names_with_markup_emoji_and_directions_are_harmless(
    open_app: Any, tmp_path: Path
) -> None:
    names = [
        "[red]Weir[/red] [@click=app.quit]x[/]",
        "Osier 🌿 bend 👩‍🌾",
        "a/../b:c",
        "水路の長い名前です",
    ]
    survey = new_survey(tmp_path / "s", "[b]Runa[/b]", reaches=[Reach(reach=n) for n in names])
    async with open_app(survey.folder, by="[b]Runa[/b]") as keyboard:
        for name in names:
            assert name[:6] in keyboard.text
        for key in ("u", "escape", "l", "escape", "plus", "1"):
            await keyboard.press(key)
        assert "Visit to [red]Weir" in keyboard.text
        assert "[b]Runa[/b]" in keyboard.text


async def test_control_characters_in_a_trail_are_spelled_out(open_app: Any, pen: Recorder) -> None:
    pen.describe(note="a", stream="Alder\x1b[2J\u202e")
    async with open_app(pen.survey.folder) as keyboard:
        assert "Alder\\u001b[2J\\u202e" in keyboard.text
        assert "\x1b" not in keyboard.text


async def test_a_broken_trail_is_read_only_and_said(open_app: Any, survey: SurveyFolder) -> None:
    path = survey.reach_path("Weir pool")
    raw = path.read_bytes().splitlines(keepends=True)
    path.write_bytes(b"".join([*raw[:2], *raw[3:]]))
    before = path.read_bytes()
    async with open_app(survey.folder) as keyboard:
        await keyboard.press("home")
        assert "! 2 stop" in line_of(keyboard.text, "Weir pool")
        assert "The trail is broken" in keyboard.words
        assert "read-only" in keyboard.words
        await keyboard.press("plus", "1", *["enter"] * 6)
        assert keyboard.screen == "Form"
        assert "Weir pool" in keyboard.text
    assert path.read_bytes() == before


async def test_a_survey_whose_own_trail_is_broken_says_so(
    open_app: Any, survey: SurveyFolder
) -> None:
    raw = survey.path.read_bytes().splitlines(keepends=True)
    survey.path.write_bytes(b"".join([*raw[:3], *raw[4:]]))
    async with open_app(survey.folder) as keyboard:
        assert "read-only, the survey's trail is broken" in keyboard.text


async def test_what_somebody_else_writes_appears(
    open_app: Any, survey: SurveyFolder, grades: Any, judged: Callable[..., None]
) -> None:
    async with open_app(survey.folder) as keyboard:
        other = Recorder(SurveyFolder(survey.folder), "Teodor")
        judged(other, "Osier bend", grades)
        other.add_reach(Reach(reach="Low bridge"))
        keyboard.survey_screen.look_for_changes()
        await keyboard.press()
        assert "4 reaches   2 estimated   2 to do" in keyboard.text
        assert "Low bridge" in keyboard.text


async def test_who_else_is_in_is_shown(open_app: Any, survey: SurveyFolder) -> None:
    note = (
        '{"by": "Teodor", "host": "other-laptop", "pid": 7, "since": "2026-06-03T18:20:00+02:00"}\n'
    )
    (survey.folder / ".lock").write_text(note)
    async with open_app(survey.folder) as keyboard:
        assert "also in this survey: Teodor on other-laptop" in keyboard.text


async def test_a_long_survey_is_read_while_one_moves_and_reading_can_be_stopped(
    open_app: Any, tmp_path: Path
) -> None:
    reaches = [Reach(reach=f"Reach {number:03}") for number in range(150)]
    survey = new_survey(tmp_path / "long", "Runa", reaches=reaches)
    async with open_app(survey.folder) as keyboard:
        screen = keyboard.survey_screen
        await keyboard.press("escape")
        if screen.lines.unread:
            assert keyboard.screen == "SurveyScreen"
            await keyboard.press("end")
            assert "Reach 149" not in screen.lines.unread
        assert keyboard.screen in ("SurveyScreen", "StartScreen")


async def test_leaving_notes_the_ends_of_the_trails(open_app: Any, survey: SurveyFolder) -> None:
    async with open_app(survey.folder) as keyboard:
        await keyboard.press("escape")
        assert keyboard.screen == "StartScreen"
    _, noted = SurveyFolder(survey.folder).state.heads[-1]
    assert noted.why == "leaving"
    assert noted.heads["Weir pool"] == survey.reach_trail("Weir pool").heads[0]
