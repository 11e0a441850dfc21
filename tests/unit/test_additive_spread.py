"""The spread of the choices: shapes of what goes in and out, ends, refusals."""

import numpy as np
import pytest

from roughness.additive import quantiles, spread
from roughness.errors import InputError

LOW = [0.020, 0.001, 0.0, 0.002, 0.004, 1.0]
BEST = [0.025, 0.004, 0.003, 0.005, 0.010, 1.15]
HIGH = [0.032, 0.008, 0.006, 0.012, 0.022, 1.3]


def test_one_reach_gives_floats() -> None:
    found = spread(LOW, BEST, HIGH)
    assert all(type(getattr(found, name)) is float for name in found.__slots__)


def test_many_reaches_give_arrays_with_the_same_digits() -> None:
    rows = spread(*(np.tile(v, (2, 3, 1)) for v in (LOW, BEST, HIGH)))
    one = spread(LOW, BEST, HIGH)
    for name in one.__slots__:
        assert getattr(rows, name).shape == (2, 3)
        assert np.ptp(getattr(rows, name)) == 0
        assert getattr(rows, name)[0, 0] == pytest.approx(getattr(one, name), rel=1e-13)


def test_no_reach_at_all_gives_empty_columns() -> None:
    assert spread(np.empty((0, 6)), np.empty((0, 6)), np.empty((0, 6))).p50.shape == (0,)


def test_second_run_gives_the_same_digits() -> None:
    assert spread(LOW, BEST, HIGH) == spread(LOW, BEST, HIGH)


def test_points_have_no_spread() -> None:
    found = spread(BEST, BEST, BEST)
    assert found.sd == 0
    assert [found.mean, found.p05, found.p50, found.p95] == pytest.approx([0.047 * 1.15] * 4)


def test_ends_are_the_envelope() -> None:
    assert quantiles(LOW, BEST, HIGH, [0, 1]) == pytest.approx([0.027, 0.080 * 1.3], abs=1e-15)


def test_many_probabilities_are_searched_as_few_are() -> None:
    p = np.linspace(0, 1, 1001)
    found = quantiles(LOW, BEST, HIGH, p)
    assert found[500] == pytest.approx(spread(LOW, BEST, HIGH).p50, abs=1e-7)
    assert (np.diff(found) > 0).all()


def test_a_width_near_nothing_is_no_trouble() -> None:
    high = [0.02 + 1e-15, 1e-300, 0.03, 0.0, 0.0, 1.0 + 1e-15]
    low = [0.02, 0.0, 0.0, 0.0, 0.0, 1.0]
    assert quantiles(low, low, high, [0.5], shape="uniform") == pytest.approx([0.035], abs=1e-9)


def test_each_factor_may_have_its_own_shape() -> None:
    mixed = ["uniform", *["triangular"] * 5]
    assert spread(LOW, BEST, HIGH, shape=mixed).sd > spread(LOW, BEST, HIGH).sd
    assert spread(LOW, BEST, HIGH, shape=mixed).sd < spread(LOW, BEST, HIGH, shape="uniform").sd


def test_erring_together_spreads_wider_than_erring_apart() -> None:
    apart, between, alike = (spread(LOW, BEST, HIGH, dependence=d) for d in (0.0, 0.5, 1.0))
    assert alike.p05 < between.p05 < apart.p05 < apart.p95 < between.p95 < alike.p95
    assert apart.sd < between.sd < alike.sd


@pytest.mark.parametrize("dependence", [-0.1, 1.1, float("nan")])
def test_dependence_outside_0_to_1_is_refused(dependence: float) -> None:
    with pytest.raises(InputError, match="0 to 1"):
        spread(LOW, BEST, HIGH, dependence=dependence)


@pytest.mark.parametrize("p", [-0.1, 1.1, float("nan")])
def test_probability_outside_0_to_1_is_refused(p: float) -> None:
    with pytest.raises(InputError, match="probability"):
        quantiles(LOW, BEST, HIGH, [p])
