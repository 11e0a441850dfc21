"""Values, ranges, notes and measures in the walk; carrying over; what cannot be kept."""

import os
from typing import Any

import pytest

from roughness.desk.recording import Recorder
from roughness.quantities.ranges import Range
from roughness.trail.locking import SurveyLock


def range_of(someone: Any, factor: str) -> tuple[float | None, float | None, float | None]:
    choice = someone.place.at(None, factor).choice
    return choice.low, choice.best, choice.high


async def test_the_best_value_moves_within_its_range_and_is_kept_with_enter(open_walk: Any) -> None:
    async with open_walk() as someone:
        await someone.gate()
        await someone.press("6", "down", "down", "down", "right")
        assert "Not taken yet" in someone.text
        assert someone.grade("irregularity") is None
        await someone.press("enter")
        assert range_of(someone, "irregularity") == (None, 0.009, None)


async def test_a_range_beyond_what_is_published_needs_a_note(open_walk: Any) -> None:
    async with open_walk() as someone:
        await someone.gate()
        await someone.press("6", "down", "down", "down", "shift+right", "enter")
        assert "leaves what is published for moderate (0.006 to 0.01)" in someone.flat
        await someone.press("enter", "enter")
        assert "the note is empty" in someone.text
        assert someone.grade("irregularity") is None
        await someone.type("slumps")
        await someone.press("enter")
        assert range_of(someone, "irregularity") == (0.005, None, 0.011)
        assert someone.place.at(None, "irregularity").choice.note == "slumps"


async def test_low_best_and_high_can_be_typed(open_walk: Any) -> None:
    async with open_walk() as someone:
        await someone.gate()
        await someone.press("6", "down", "down", "down", "equals_sign")
        for value in ("0.007", "0,008"):
            await someone.type(value)
            await someone.press("enter")
        await someone.press("enter")
        assert "write 0.008" in someone.text
        await someone.press("up")
        await someone.press("ctrl+u")
        await someone.type("0.0075")
        await someone.press("enter", "enter", "enter")
        assert range_of(someone, "irregularity") == (0.007, 0.0075, None)


async def test_escape_drops_what_was_moved_and_says_so(open_walk: Any) -> None:
    async with open_walk() as someone:
        await someone.gate()
        await someone.press("6", "down", "down", "right", "escape")
        assert "not taken" in someone.text
        assert not someone.app.left
        await someone.press("escape")
        assert someone.app.left


async def test_a_measure_suggests_a_grade_and_enter_takes_it(open_walk: Any) -> None:
    async with open_walk() as someone:
        await someone.gate()
        await someone.press("6", "1", "1", "m")
        await someone.type("8%")
        await someone.press(*["enter"] * 4)
        assert "◆ blocked 8 %: minor" in someone.text
        assert someone.place.at(None, "obstruction") is None
        await someone.press("enter")
        choice = someone.place.at(None, "obstruction").choice
        assert (choice.grade, choice.blocked_percent) == (None, 8)


async def test_a_grade_against_its_measure_is_kept_with_both(open_walk: Any) -> None:
    async with open_walk() as someone:
        await someone.gate()
        await someone.press("6", "1", "1", "m")
        await someone.type("8%")
        await someone.press(*["enter"] * 4, "5")
        choice = someone.place.at(None, "obstruction").choice
        assert (choice.grade, choice.blocked_percent) == ("severe", 8)


async def test_a_measure_near_an_edge_offers_both_grades(open_walk: Any) -> None:
    async with open_walk() as someone:
        await someone.gate()
        await someone.press("6", "1", "1", "m")
        await someone.type("16")
        await someone.press(*["enter"] * 4)
        assert "near an edge, minor or appreciable; B takes both" in someone.text
        await someone.press("B", "enter")
        assert range_of(someone, "obstruction") == (0.005, 0.0175, None)
        resolved = [f for f in [someone.walk.course.place.at(None, "obstruction")] if f]
        assert "near the edge between minor and appreciable" in resolved[0].choice.note


async def test_an_impossible_measure_is_said_and_stays_typed(open_walk: Any) -> None:
    async with open_walk() as someone:
        await someone.gate()
        await someone.press("6", "1", "1", "m")
        await someone.type("180")
        await someone.press(*["enter"] * 4)
        assert "a share of the flow area from 0 to" in someone.text
        assert "180" in someone.text


async def test_sand_asks_for_its_regime_and_size(open_walk: Any) -> None:
    async with open_walk() as someone:
        await someone.gate()
        await someone.press("3")
        assert "upper regime only" in someone.flat
        assert someone.grade("base") is None
        await someone.press("right", "enter")
        await someone.type("0.4 mm")
        await someone.press("enter", "enter", "enter")
        choice = someone.place.at(None, "base").choice
        assert (choice.regime, choice.d50_mm) == ("upper", 0.4)
        assert "Irregularity" in someone.text


async def test_sand_of_no_published_size_takes_a_value_of_ones_own(open_walk: Any) -> None:
    async with open_walk() as someone:
        await someone.gate()
        await someone.press("3", "right", "right", "enter", "enter")
        await someone.type("0.03")
        await someone.press("enter")
        await someone.type("dunes")
        await someone.press("enter")
        choice = someone.place.at(None, "base").choice
        assert (choice.regime, choice.best, choice.note) == ("lower", 0.03, "dunes")


async def walked(
    open_walk: Any,
    reach: str,
    part: str = "main channel",
    keys: tuple[str, ...] = ("6", "2", "1", "2", "3", "1"),
) -> None:
    async with open_walk(reach=reach, part=part) as someone:
        await someone.gate()
        await someone.press(*keys, "escape")


async def test_a_whole_part_is_carried_over_and_confirmed_one_by_one(open_walk: Any) -> None:
    await walked(open_walk, "Weir pool")
    async with open_walk(size=(120, 40)) as someone:
        await someone.gate()
        await someone.press("C")
        assert "Weir pool, main channel: n" in someone.text
        await someone.press("enter")
        assert len(someone.place.unconfirmed) == 6
        assert "to confirm, from Weir pool" in someone.text
        await someone.press("enter")
        assert len(someone.place.unconfirmed) == 5
        await someone.press(*["enter"] * 5)
        assert someone.place.unconfirmed == ()
        assert "summary" in someone.text


async def test_one_factor_is_carried_over_and_stays_at_hand(open_walk: Any) -> None:
    await walked(open_walk, "Weir pool")
    async with open_walk() as someone:
        await someone.gate()
        await someone.press("c")
        assert someone.grade("base") == "cobble"
        assert someone.place.unconfirmed == ("base",)
        assert "To confirm, from Weir pool: ⏎ confirms it" in someone.flat
        await someone.press("5")
        assert someone.grade("base") == "gravel"
        assert someone.place.unconfirmed == ()


async def test_the_other_plain_is_a_source_too(open_walk: Any) -> None:
    await walked(open_walk, "Osier bend", "left flood plain", ("2", "2", "1", "4"))
    async with open_walk(part="right flood plain") as someone:
        await someone.gate()
        await someone.press("C")
        assert "Osier bend, left flood plain" in someone.text
        await someone.press("enter")
        assert someone.place.missing == ()


async def test_with_nothing_to_carry_the_walk_says_so(open_walk: Any) -> None:
    async with open_walk() as someone:
        await someone.gate()
        await someone.press("c")
        assert "nothing to carry over" in someone.text


async def test_somebody_elses_lock_is_said_and_the_choice_is_not_shown_as_taken(
    open_walk: Any, survey: Any
) -> None:
    async with open_walk() as someone:
        await someone.gate()
        survey.lock = SurveyLock(survey.folder, wait_s=0.05)
        with SurveyLock(survey.folder).held("Teodor", "2026-06-30T10:00:00+00:00"):
            await someone.press("6")
            assert "Teodor" in someone.text
            assert "✓" not in someone.text
            assert "1 of 6" in someone.text
        await someone.press("6")
        assert someone.grade("base") == "cobble"


async def test_a_broken_trail_is_said_and_nothing_is_taken(open_walk: Any, survey: Any) -> None:
    async with open_walk() as someone:
        await someone.gate()
        path = survey.reach_path("Osier bend")
        lines = path.read_bytes().splitlines(keepends=True)
        path.write_bytes(b"".join([*lines[:2], *lines[3:]]))
        await someone.press("6")
        assert "! " in someone.text
        assert "1 of 6" in someone.text
        assert "✓" not in someone.text


async def test_a_note_that_cannot_be_kept_stays_typed(open_walk: Any, survey: Any) -> None:
    async with open_walk() as someone:
        await someone.gate()
        await someone.press("6", "backspace", "n")
        await someone.type("stones")
        survey.lock = SurveyLock(survey.folder, wait_s=0.05)
        with SurveyLock(survey.folder).held("Teodor", "2026-06-30T10:00:00+00:00"):
            await someone.press("enter")
            assert "Teodor" in someone.text
            assert "stones" in someone.text
        await someone.press("enter")
        assert someone.place.at(None, "base").choice.note == "stones"


@pytest.mark.skipif(os.name == "nt", reason="the mode of a file does not bind there")
async def test_what_others_wrote_meanwhile_stays(open_walk: Any, survey: Any) -> None:
    async with open_walk() as someone:
        await someone.gate()
        other = Recorder(survey, "Teodor")
        from roughness.survey.choices import Choice

        other.choose(someone.place, "irregularity", Choice(grade="severe"))
        await someone.press("6")
        assert someone.grade("irregularity") == "severe"
        assert "Variation" in someone.text


async def test_keys_counted_for_a_whole_channel(open_walk: Any) -> None:
    """Depth typed with three keys, four Enters, one digit a factor."""
    async with open_walk() as someone:
        keys = ["1", "full_stop", "4", *["enter"] * 4, "6", "2", "1", "2", "3", "1"]
        await someone.press(*keys)
        assert someone.place.estimate() is not None
        assert someone.place.depth_m == 1.4
        assert isinstance(someone.place.estimate().n, Range)
        assert len(keys) == 13
