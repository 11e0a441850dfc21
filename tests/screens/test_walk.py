"""Walking a part: gate, factors, summary, and what is kept on the way."""

from typing import Any

import pytest
from textual import events
from textual.widgets import Input

from roughness.screens.walk_summary import summary_lines

BOTH_SIZES = pytest.mark.parametrize("size", [(80, 24), (120, 40)])


@BOTH_SIZES
async def test_a_channel_with_bed_and_banks_is_walked_to_its_summary(
    open_walk: Any, size: Any
) -> None:
    async with open_walk(size=size) as someone:
        await someone.gate(apart=True)
        assert "Base of the bed" in someone.text
        await someone.press("6")
        assert "Base of the banks" in someone.text
        await someone.press("2", "3", "1", "1", "1", "1", "3", "2", "2")
        assert someone.grade("base", "bed") == "cobble"
        assert someone.grade("base", "banks") == "firm-soil"
        assert someone.grade("irregularity", "bed") == "moderate"
        assert someone.grade("meander") == "appreciable"
        assert someone.place.missing == ()
        estimate = someone.place.estimate()
        assert estimate.segments[0].name == "bed"
        for told in ("n 0.062", "0.045 to 0.080", "summary", "Findings"):
            assert told in someone.text
        assert "What would narrow the range most: base of the bed" in someone.flat
        whole = [line.plain for line in summary_lines(someone.walk.course, unfolded=False)]
        assert "Reasoning" in whole


async def test_the_gate_is_one_line_and_says_what_was_answered(open_walk: Any) -> None:
    async with open_walk() as someone:
        await someone.gate("4.6 ft", apart=True)
        gate = someone.place.state.gate
        assert gate.depth_m == pytest.approx(4.6 * 0.3048)
        assert gate.bank == "over bank"
        assert gate.mobile_sand is None
        shares = {share.name: share.perimeter_percent for share in gate.segments}
        assert shares == {"bed": 60, "banks": 40}
        lines = someone.walk.survey.reach_trail("Osier bend").lines
        assert [line.kind for line in lines[4:]] == ["gate"]


async def test_the_whole_gate_can_be_skipped_with_enter(open_walk: Any) -> None:
    async with open_walk() as someone:
        await someone.press(*["enter"] * 4)
        assert someone.place.state.gate.depth_m is None
        assert "1 of 6" in someone.text
        assert "water" not in someone.text.splitlines()[8]


async def test_what_is_typed_faster_than_it_is_shown_is_not_lost(open_walk: Any) -> None:
    async with open_walk() as someone:
        for key, sign in (("1", "1"), ("full_stop", "."), ("4", "4"), *[("enter", "\r")] * 4):
            someone.app.post_message(events.Key(key, sign))
        await someone.pilot.pause()
        await someone.pilot.pause()
        assert someone.place.depth_m == 1.4


async def test_keys_typed_faster_than_they_are_shown_keep_their_order(open_walk: Any) -> None:
    async with open_walk() as someone:
        await someone.gate()
        fast = (("6", "6"), ("3", "3"), ("backspace", None), ("2", "2"), ("1", "1"))
        for key, sign in fast:
            someone.app.post_message(events.Key(key, sign))
        await someone.pilot.pause()
        await someone.pilot.pause()
        assert someone.grade("base") == "cobble"
        assert someone.grade("irregularity") == "minor"
        assert someone.grade("variation") == "gradual"


async def test_enter_takes_no_grade_that_nobody_marked(open_walk: Any) -> None:
    async with open_walk() as someone:
        await someone.press(*["enter"] * 6)
        assert len(someone.place.missing) == 6
        assert "no grade is marked yet" in someone.text


async def test_what_does_not_fit_in_the_gate_is_said_and_stays_typed(open_walk: Any) -> None:
    async with open_walk() as someone:
        await someone.type("1,4")
        await someone.press(*["enter"] * 4)
        assert "write 1.4" in someone.text
        assert someone.app.screen.query_one("#depth_m", Input).value == "1,4"
        assert someone.place.state is None


async def test_shares_follow_width_and_depth_until_somebody_types_them(open_walk: Any) -> None:
    async with open_walk() as someone:
        await someone.type("1")
        width = someone.app.screen.query_one("#width_m", Input)
        width.value = "8 m"
        await someone.press("enter", "enter", "enter", "right", "enter")
        assert someone.app.screen.query_one("#shares", Input).value == "bed 80, banks 20"


async def test_leaving_the_first_gate_leaves_the_walk_and_writes_nothing(open_walk: Any) -> None:
    async with open_walk() as someone:
        await someone.press("escape")
        assert someone.app.left
        assert someone.place.state is None


async def test_each_grade_shows_its_n_and_water_before_it_is_taken(open_walk: Any) -> None:
    async with open_walk() as someone:
        await someone.gate()
        await someone.press("6", "1", "1")
        line = next(line for line in someone.text.splitlines() if "3 minor" in line)
        assert "0.005–0.015" in line
        assert "0.050" in line
        assert "+20 cm" in line


async def test_a_row_beyond_nine_is_taken_with_arrows_and_enter(open_walk: Any) -> None:
    async with open_walk() as someone:
        await someone.gate()
        await someone.press("9", "backspace", "down", "down", "down", "enter")
        assert someone.grade("base") == "coarse-gravel-smooth"


async def test_two_plains_follow_from_the_summary_with_enter(open_walk: Any) -> None:
    async with open_walk() as someone:
        await someone.gate()
        await someone.press("6", "1", "1", "1", "1", "1")
        assert "on to left flood plain" in someone.text
        for part in ("left flood plain", "right flood plain"):
            await someone.press("enter")
            await someone.gate("0.6")
            await someone.press("2", "2", "1", "4")
            assert someone.walk.course.part == part
            assert someone.place.estimate() is not None
            assert "variation" not in {factor for _, factor in someone.place.questions}
        assert "All parts of this reach are done" in someone.text


async def test_a_choice_is_corrected_and_the_walk_goes_back_to_where_it_was(open_walk: Any) -> None:
    async with open_walk() as someone:
        await someone.gate()
        await someone.press("6", "1", "1", "backspace", "backspace", "3")
        assert someone.grade("irregularity") == "moderate"
        assert "Obstruction" in someone.text
        assert someone.grade("variation") == "gradual"


async def test_passing_over_what_stands_writes_nothing(open_walk: Any) -> None:
    async with open_walk() as someone:
        await someone.gate()
        await someone.press("6", "1", "1", "backspace", "backspace")
        before = len(someone.walk.survey.reach_trail("Osier bend").lines)
        await someone.press("enter", "enter")
        assert len(someone.walk.survey.reach_trail("Osier bend").lines) == before
        assert "Obstruction" in someone.text


async def test_leaving_in_the_middle_comes_back_to_the_same_question(open_walk: Any) -> None:
    async with open_walk() as someone:
        await someone.gate()
        await someone.press("6", "1", "escape")
        assert someone.app.left
    async with open_walk() as someone:
        assert "Variation" in someone.text
        assert "3 of 6" in someone.text


async def test_undo_says_what_it_takes_back_and_goes_there(open_walk: Any) -> None:
    async with open_walk() as someone:
        await someone.gate()
        await someone.press("6", "3", "u")
        assert "irregularity of main channel" in someone.text
        assert someone.grade("irregularity") == "moderate"
        await someone.press("enter")
        assert someone.grade("irregularity") is None
        assert someone.grade("base") == "cobble"
        assert "Irregularity" in someone.text


async def test_undo_is_left_with_escape(open_walk: Any) -> None:
    async with open_walk() as someone:
        await someone.gate()
        await someone.press("6", "u", "escape")
        assert someone.grade("base") == "cobble"


async def test_a_second_condition_asks_only_three_factors(open_walk: Any) -> None:
    async with open_walk() as someone:
        await someone.gate()
        await someone.press("6", "3", "1", "1", "4", "1")
        await someone.press("f")
        await someone.gate("0.8")
        assert "Obstruction" in someone.text
        assert "from design flood, leaf-on" in someone.text
        await someone.press("1", "2", "1")
        assert "summary" in someone.text
        kinds = set(someone.place.state.choices[None])
        assert kinds == {"obstruction", "vegetation", "meander"}
        assert someone.place.estimate().n.best < 0.06


async def test_an_inherited_factor_can_be_changed_for_the_second_condition_alone(
    open_walk: Any,
) -> None:
    async with open_walk() as someone:
        await someone.gate()
        await someone.press("6", "3", "1", "1", "4", "1", "f")
        await someone.gate("0.8")
        await someone.press("backspace", "backspace", "2")
        assert someone.grade("irregularity") == "minor"
        await someone.press("f")
        assert someone.grade("irregularity") == "moderate"


async def test_the_gate_opens_again_with_what_was_answered(open_walk: Any) -> None:
    async with open_walk() as someone:
        await someone.gate("1.4")
        await someone.press("6", "b")
        assert someone.app.screen.query_one("#depth_m", Input).value == "1.4 m"
        await someone.type("2")
        await someone.press(*["enter"] * 4)
        assert someone.place.depth_m == 2
        assert someone.grade("base") == "cobble"


async def test_the_note_of_the_driver_is_written_from_the_summary(open_walk: Any) -> None:
    async with open_walk() as someone:
        await someone.gate()
        await someone.press("6", "1", "1", "1", "1", "1")
        assert "No note says yet why it is cobble" in someone.flat
        assert "neither note nor photo backs it" in someone.flat
        await someone.press("n")
        await someone.type("100 stones")
        await someone.press("enter")
        assert someone.place.at(None, "base").choice.note == "100 stones"
        assert "Noted: 100 stones" in someone.flat
        assert "neither note nor photo backs it" not in someone.flat


async def test_another_n_is_adopted_from_the_summary_with_a_reason(open_walk: Any) -> None:
    async with open_walk() as someone:
        await someone.gate()
        await someone.press("6", "1", "1", "1", "1", "1", "g")
        await someone.type("0.045")
        await someone.press("enter", "enter", "enter")
        await someone.type("gauged")
        await someone.press("enter")
        assert someone.place.state.adopted.n == 0.045
        assert "Adopted for the model: 0.045 (gauged)" in someone.text


async def test_the_cautions_stand_on_the_summary(open_walk: Any) -> None:
    async with open_walk() as someone:
        await someone.gate()
        await someone.press("6", "1", "1", "1", "1", "1")
        assert "calibrate to observed flows" in someone.text
        assert "people differ by (from memory)" in someone.flat


async def test_the_factor_is_explained_with_a_question_mark(open_walk: Any) -> None:
    async with open_walk() as someone:
        await someone.gate()
        await someone.press("question_mark")
        assert "BED AND BANK MATERIAL" in someone.text
        await someone.press("escape")
        assert "1 of 6" in someone.text


@BOTH_SIZES
async def test_names_with_markup_and_slashes_are_shown_as_they_are(
    survey: Any, open_walk: Any, size: Any
) -> None:
    from roughness.desk.recording import Recorder
    from roughness.survey.stream import Reach

    Recorder(survey, "Runa").add_reach(Reach(reach="[b]Mill/race[/b] 🦆"))
    async with open_walk(reach="[b]Mill/race[/b] 🦆", size=size) as someone:
        await someone.press(*["enter"] * 4)
        assert "[b]Mill/race[/b] 🦆" in someone.text


@pytest.mark.parametrize("size", [(20, 5), (10, 30), (1, 1)])
async def test_a_terminal_made_tiny_and_large_again_does_not_end_the_walk(
    open_walk: Any, size: Any
) -> None:
    async with open_walk() as someone:
        await someone.gate()
        await someone.press("2")
        await someone.pilot.resize_terminal(*size)
        await someone.press("1")
        await someone.pilot.resize_terminal(80, 24)
        await someone.pilot.pause()
        assert "n so far" in someone.text
        assert someone.grade("base") == "firm-soil"
