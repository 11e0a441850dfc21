"""Measures as people type them."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from roughness.errors import InputError
from roughness.quantities.measures import Quantity, read_known_measure, read_measure


@pytest.mark.parametrize(
    ("text", "quantity", "value"),
    [
        ("8%", "percent", 8.0),
        (" 8 % ", "percent", 8.0),
        ("8", "percent", 8.0),
        ("1.3x", "ratio", 1.3),
        ("1.2", "ratio", 1.2),
        ("34 mm", "size", 34.0),
        ("34", "size", 34.0),
        ("3.4 cm", "size", 34.0),
        ("1 in", "size", 25.4),
        ("0.6 m", "length", 0.6),
        ("60cm", "length", 0.6),
        ("2 ft", "length", 0.6096),
        ("2 feet", "length", 0.6096),
        (".5", "length", 0.5),
        ("0.2 %", "slope", 0.002),
        ("2 ‰", "slope", 0.002),
        ("0.002", "slope", 0.002),
        ("0.035", "roughness", 0.035),
        ("0", "percent", 0.0),
    ],
)
def test_a_measure_is_read_in_the_unit_that_is_kept(
    text: str, quantity: Quantity, value: float
) -> None:
    assert read_measure(text, quantity) == value


@pytest.mark.parametrize("text", ["1,3", "0,6 m", "1,200"])
def test_a_comma_is_refused_with_what_to_write(text: str) -> None:
    with pytest.raises(InputError) as refused:
        read_measure(text, "length", "depth")
    assert f"write {text.replace(',', '.')}" in str(refused.value)
    assert str(refused.value).startswith("depth: ")


@pytest.mark.parametrize("text", ["", "deep", "nan", "inf", "1e5", "1.2.3", "٣", "9" * 60, "--1"])
def test_what_is_no_number_is_refused(text: str) -> None:
    with pytest.raises(InputError):
        read_measure(text, "length")


def test_a_unit_of_another_kind_is_refused_with_an_example() -> None:
    with pytest.raises(InputError, match="'mm' does not fit here; write it like 8 %"):
        read_measure("8 mm", "percent")


def test_a_negative_number_is_refused() -> None:
    with pytest.raises(InputError, match="negative"):
        read_measure("-1", "length")


def test_nothing_typed_is_unknown_and_not_nought() -> None:
    assert read_known_measure("  ", "length") is None
    assert read_known_measure("0", "percent") == 0.0


@given(st.floats(0.001, 900).map(lambda x: round(x, 3)))
def test_a_depth_in_feet_is_the_same_depth_in_metres(feet: float) -> None:
    assert read_measure(f"{feet} ft", "length") == pytest.approx(feet * 0.3048, rel=1e-11)


@given(st.text(max_size=60))
def test_whatever_is_typed_is_a_number_or_one_sentence(text: str) -> None:
    try:
        assert read_measure(text, "length") >= 0
    except InputError as refused:
        assert "\n" not in str(refused)
