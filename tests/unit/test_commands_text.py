"""Text tables, paragraphs and lengths as a terminal of 80 columns shows them."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from roughness.commands.lengths import show_length, show_stretch
from roughness.commands.plain_tables import cells_wide, fitted, table, wrapped
from roughness.survey.stream import Reach

TEXT = st.text(st.characters(codec="utf-8", exclude_categories=("Cc", "Cs", "Zl", "Zp")))


@given(TEXT, st.integers(1, 40))
def test_a_fitted_text_takes_exactly_its_width(text: str, width: int) -> None:
    assert cells_wide(fitted(text, width)) == width
    assert cells_wide(fitted(text, width, right=True)) == width


@given(TEXT, st.integers(10, 80))
def test_wrapping_loses_no_word_and_no_line_is_too_wide(text: str, width: int) -> None:
    lines = wrapped(text, "- ", "  ", width=width)
    assert all(cells_wide(line) <= width for line in lines)
    assert "".join("".join(line[2:].split()) for line in lines) == "".join(text.split())


def test_columns_line_up_and_the_widest_gives_way_first() -> None:
    rows = [["part", "n"], ["a long name of a part", "0.035"], ["水路", "0.1"]]
    lines = table(rows, give=(0,), indent=2, width=20)
    assert lines == ["  part         n", "  a long name… 0.035", "  水路         0.1"]


def test_columns_that_may_not_be_cut_stay_whole() -> None:
    assert table([["abcdef", "0.035"]], give=(0,), width=7) == ["abc… 0.035"]
    assert table([], give=(0,)) == []


@pytest.mark.parametrize(
    ("unit", "units", "shown"),
    [
        ("m", None, "120.5 m"),
        ("m", "metric", "120.5 m"),
        ("m", "us", "395.3 ft"),
        ("ft", "metric", "36.7 m"),
        ("km", "us", "74.875 mi"),
        ("mi", "metric", "193.926 km"),
    ],
)
def test_lengths_are_shown_in_the_units_that_were_asked_for(
    unit: str, units: str | None, shown: str
) -> None:
    assert show_length(120.5, unit, units) == shown


def test_a_stretch_says_its_unit_or_that_nobody_said_it() -> None:
    reach = Reach(reach="Ford", reach_from=0.0, reach_to=1200.0)
    assert show_stretch(reach, "m", "us") == "Ford, from 0 ft to 3937 ft"
    assert show_stretch(reach, None, "us") == "Ford, from 0 to 1200 (unit not said)"
    assert show_stretch(Reach(reach="Ford\u202e"), "m", None) == "Ford\\u202e"
