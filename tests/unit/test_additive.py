"""The additive method: combination, envelope, shares, what people differ by."""

import math

import numpy as np
import pytest

from roughness.additive import combine, envelope, people, shares_of_variance
from roughness.errors import InputError
from roughness.quantities.printing import show_n
from roughness.quantities.ranges import Range, point
from roughness.survey.words import FACTORS


def test_combine_adds_five_and_multiplies_by_the_sixth() -> None:
    assert combine((0.028, 0.005, 0.01, 0.02, 0.025, 1.15)) == pytest.approx(0.1012, abs=1e-15)


def test_combine_takes_columns_as_it_takes_floats() -> None:
    columns = [np.array([0.02, 0.03]), *[np.array([0.001, 0.002])] * 4, np.array([1.0, 1.3])]
    rows = [combine([float(c[i]) for c in columns]) for i in range(2)]
    assert combine(columns).tolist() == rows


def test_a_sum_on_a_rounding_edge_prints_as_the_decimal_sum() -> None:
    assert show_n(combine((0.02, 0.0055, 0.005, 0.004, 0.001, 1.0))) == "0.036"


def test_envelope_has_all_lows_all_bests_all_highs() -> None:
    six = [Range(0.02, 0.025, 0.03), *[Range(0.0, 0.001, 0.002)] * 4, Range(1.0, 1.15, 1.3)]
    found = envelope(dict(zip(FACTORS, six, strict=True)))
    assert (found.low, found.best, found.high) == pytest.approx((0.02, 0.029 * 1.15, 0.038 * 1.3))


def test_envelope_of_points_is_a_point() -> None:
    assert envelope({factor: point(1.0) for factor in FACTORS}).is_point


def test_shares_are_those_of_the_variances_where_the_multiplier_is_fixed() -> None:
    low, best, high = [0.0, 0, 0, 0, 0, 1], [0.0, 0, 0.01, 0.02, 0, 1], [0.0, 0, 0.02, 0.04, 0, 1]
    assert shares_of_variance(low, best, high) == pytest.approx([0, 0, 0.2, 0.8, 0, 0])


def test_shares_are_zero_where_nothing_varies() -> None:
    six = [0.02, 0, 0, 0, 0, 1]
    assert shares_of_variance(six, six, six).tolist() == [0.0] * 6


def test_shares_with_a_live_multiplier_leave_out_what_only_both_explain() -> None:
    # By hand: S uniform on (0, 1), m uniform on (1, 3); Var S = 1/12, Var m = 1/3,
    # Var n = 1/36 + 4/12 + 1/12 = 4/9; shares 3/4 and 3/16.
    low, high = [0.0, 0, 0, 0, 0, 1], [1.0, 0, 0, 0, 0, 3]
    found = shares_of_variance(low, low, high, shape="uniform")
    assert found == pytest.approx([3 / 4, 0, 0, 0, 0, 3 / 16])


def test_shares_take_rows() -> None:
    low, high = np.zeros((3, 2, 6)), np.ones((3, 2, 6))
    assert shares_of_variance(low, low, high).shape == (3, 2, 6)


def test_people_have_the_mean_that_was_given() -> None:
    limits = people(0.05)
    assert limits is not None
    middle = (math.log(limits.p05) + math.log(limits.p95)) / 2
    sigma = (math.log(limits.p95) - math.log(limits.p05)) / (2 * 1.6448536269514722)
    assert math.exp(middle + sigma**2 / 2) == pytest.approx(0.05, rel=1e-12)
    # 0.582 + 0.10 ln 0.05, the published relation (US Army Corps of Engineers 1986, Research
    # Document 26; from memory), evaluated with 40 digits.
    assert sigma == pytest.approx(0.282426772645, rel=1e-11)
    assert limits.provenance == "memory"


@pytest.mark.parametrize("n", [0.0, 0.002, math.exp(-5.82)])
def test_people_say_nothing_below_the_relation(n: float) -> None:
    assert people(n) is None


@pytest.mark.parametrize(
    ("low", "best", "high", "shape", "says"),
    [
        ([0.0] * 5, [0.0] * 5, [0.0] * 5, "triangular", "6 columns"),
        ([-0.1, 0, 0, 0, 0, 1], [0.0] * 5 + [1], [0.0] * 5 + [1], "triangular", "negative"),
        ([0.0] * 5 + [1], [0.2] + [0.0] * 4 + [1], [0.1] + [0.0] * 4 + [1], "triangular", "order"),
        ([math.nan] + [0.0] * 5, [0.0] * 6, [0.0] * 6, "triangular", "negative or no finite"),
        ([0.0] * 6, [0.0] * 6, [math.inf] + [0.0] * 5, "triangular", "finite"),
        ([0.0] * 6, [0.0] * 6, [0.0] * 6, "normal", "triangular or uniform"),
        ([0.0] * 6, [0.0] * 6, [0.0] * 6, ["uniform"] * 5, "one or six"),
    ],
)
def test_factors_that_cannot_be_used_are_refused(
    low: list[float], best: list[float], high: list[float], shape: str | list[str], says: str
) -> None:
    with pytest.raises(InputError, match=says):
        shares_of_variance(low, best, high, shape=shape)
