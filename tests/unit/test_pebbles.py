"""Grain sizes from counted stones."""

import math

import numpy as np
import pytest

from roughness.comparison import PebbleCount, from_classes, from_stones
from roughness.comparison.pebbles import Percentile
from roughness.errors import InputError


def at(count: PebbleCount, percent: int) -> Percentile:
    return next(p for p in count.percentiles if p.percent == percent)


def test_a_size_is_read_off_the_curve_over_the_logarithm_as_numpy_does() -> None:
    sizes = np.random.default_rng(7).lognormal(3.5, 0.8, 137)
    count = from_stones(sizes)
    for percent in (16, 50, 65, 75, 84, 90):
        expected = math.exp(np.quantile(np.log(sizes), percent / 100, method="hazen"))
        assert at(count, percent).mm == pytest.approx(expected, rel=1e-12)


def test_the_sampling_error_covers_the_true_size_in_95_of_100_counts() -> None:
    random = np.random.default_rng(11)
    true = math.exp(3.5 + 0.8 * 0.99445788)  # 84 % of a normal distribution lie below this
    hits = 0
    for _ in range(400):
        found = at(from_stones(random.lognormal(3.5, 0.8, 100)), 84)
        assert found.low_mm is not None and found.high_mm is not None
        hits += found.low_mm <= true <= found.high_mm
    assert 0.92 <= hits / 400 <= 0.98


def test_more_stones_narrow_the_error_as_the_root_of_their_number() -> None:
    few, many = (
        at(from_classes([8, 16, 32, 64], [16, 32, 64, 128], [n, 2 * n, 2 * n, n]), 50)
        for n in (10, 1000)
    )
    assert few.mm == many.mm == pytest.approx(32.0)
    widths = [math.log(p.high_mm / p.low_mm) for p in (few, many) if p.low_mm and p.high_mm]
    assert widths[0] / widths[1] == pytest.approx(10, rel=0.01)


def test_a_tally_gives_what_the_stones_spread_evenly_in_their_classes_give() -> None:
    edges = [8.0, 16.0, 32.0, 64.0]
    counts = [300, 500, 200]
    stones = np.concatenate(
        [
            np.exp(np.linspace(math.log(low), math.log(high), n, endpoint=False))
            for low, high, n in zip(edges, edges[1:], counts, strict=False)
        ]
    )
    tally = from_classes(edges[:-1], edges[1:], counts)
    for percent in (16, 50, 84):
        assert at(tally, percent).mm == pytest.approx(at(from_stones(stones), percent).mm, rel=0.01)


def test_sizes_inside_an_open_class_are_not_told() -> None:
    count = from_classes([0, 2, 4], [2, 4, 8], [30, 40, 30])
    assert at(count, 16).mm is None and math.isnan(count.size_m(16))
    assert at(count, 84).mm == pytest.approx(4 * 2 ** ((0.84 - 0.70) / 0.30))


def test_empty_classes_change_nothing() -> None:
    plain = from_classes([4, 8], [8, 16], [10, 10])
    more = from_classes([1, 2, 4, 8, 16, 32], [2, 4, 8, 16, 32, 64], [0, 0, 10, 10, 0, 0])
    assert more == plain


@pytest.mark.parametrize("sizes", [[], [3], [3, 0], [3, -4], [3, float("nan")], [3, 1e9]])
def test_what_is_no_count_is_refused(sizes: list[float]) -> None:
    with pytest.raises(InputError):
        from_stones(sizes)


@pytest.mark.parametrize(
    ("low", "high", "counts"),
    [
        ([8, 32], [16, 64], [1, 2]),
        ([16, 8], [32, 16], [1, 2]),
        ([8, 16], [16, 32], [0, 1]),
        ([8, 16], [16, 32], [-1, 5]),
        ([], [], []),
        ([-8, 16], [16, 32], [4, 5]),
    ],
)
def test_a_tally_with_gaps_or_nothing_in_it_is_refused(
    low: list[float], high: list[float], counts: list[int]
) -> None:
    with pytest.raises(InputError):
        from_classes(low, high, counts)
