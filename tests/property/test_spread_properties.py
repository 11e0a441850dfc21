"""What must hold for the spread whatever the factors are."""

from typing import Any

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from roughness.additive import combine, quantiles, shares_of_variance, spread

# Ours, no source: how far a percentile may be from the truth; two of them are compared.
EXACT = 1e-6
P = (0.05, 0.16, 0.50, 0.84, 0.95)
Factors = tuple[Any, Any, Any]

values = st.floats(0, 0.1)
multipliers = st.floats(0.9, 2.0)
dependences = st.floats(0, 1)
shapes = st.lists(st.sampled_from(["triangular", "uniform"]), min_size=6, max_size=6)


def triples(value: st.SearchStrategy[float]) -> st.SearchStrategy[list[float]]:
    three = st.lists(value, min_size=3, max_size=3).map(sorted)
    at_low = st.lists(value, min_size=2, max_size=2).map(lambda v: [min(v), min(v), max(v)])
    at_high = st.lists(value, min_size=2, max_size=2).map(lambda v: [min(v), max(v), max(v)])
    return three | at_low | at_high | value.map(lambda v: [v, v, v])


@st.composite
def factors(draw: st.DrawFn, multiplier: st.SearchStrategy[float] = multipliers) -> Factors:
    rows = [draw(triples(values)) for _ in range(5)] + [draw(triples(multiplier))]
    low, best, high = np.array(rows).T
    return low, best, high


def percentiles(result: Any) -> list[float]:
    return [result.p05, result.p16, result.p50, result.p84, result.p95]


@settings(deadline=None)
@given(factors(), shapes, dependences)
def test_percentiles_are_ordered_and_inside_the_envelope(
    six: Factors, shape: list[str], d: float
) -> None:
    low, best, high = six
    result = spread(low, best, high, shape=shape, dependence=d)
    ladder = [combine(low), *percentiles(result), combine(high)]
    assert (np.diff(ladder) >= -1e-12).all()
    assert combine(low) - 1e-12 <= result.mean <= combine(high) + 1e-12
    # No distribution on a range has a deviation of more than half of it.
    assert 0 <= result.sd <= (combine(high) - combine(low)) / 2 + 1e-12


@settings(deadline=None)
@given(factors(), shapes, dependences, st.integers(0, 5), st.integers(0, 2), st.floats(0, 0.05))
def test_raising_any_value_lowers_no_percentile(
    six: Factors, shape: list[str], d: float, factor: int, which: int, by: float
) -> None:
    before = quantiles(*six, P, shape=shape, dependence=d)
    raised = [column.copy() for column in six]
    raised[which][factor] += by
    for higher in range(which + 1, 3):
        raised[higher][factor] = max(raised[higher][factor], raised[which][factor])
    after = quantiles(raised[0], raised[1], raised[2], P, shape=shape, dependence=d)
    assert (after >= before - EXACT).all()
    for old, new in zip(six, raised, strict=True):
        assert combine(new) >= combine(old)


@settings(deadline=None)
@given(factors(), shapes)
def test_full_dependence_adds_the_factors_percentiles_times_the_multipliers(
    six: Factors, shape: list[str]
) -> None:
    each = []
    for i in range(6):
        alone = np.zeros((3, 6))
        alone[:, 5] = 1.0
        alone[:, i] = [column[i] for column in six]
        if i == 5:
            alone[:, 0] = 1.0
        each.append(quantiles(alone[0], alone[1], alone[2], P, shape=shape, dependence=0.0))
    found = quantiles(*six, P, shape=shape, dependence=1.0)
    assert found == pytest.approx(sum(each[:5]) * each[5], rel=1e-12)


@settings(deadline=None)
@given(factors(), st.integers(0, 5), st.floats(0, 0.05))
def test_widening_a_factor_never_narrows_the_envelope(six: Factors, factor: int, by: float) -> None:
    low, best, high = (column.copy() for column in six)
    low[factor], high[factor] = max(0.0, low[factor] - by), high[factor] + by
    ends, wider = (quantiles(*f, [0, 1], dependence=0.5) for f in (six, (low, best, high)))
    assert wider[0] <= ends[0] + 1e-15
    assert wider[1] >= ends[1] - 1e-15


@settings(deadline=None)
@given(factors(), shapes, dependences, st.floats(0.2, 3))
def test_scaling_the_adding_factors_scales_every_percentile(
    six: Factors, shape: list[str], d: float, scale: float
) -> None:
    by = np.array([scale] * 5 + [1.0])
    once = quantiles(*six, P, shape=shape, dependence=d)
    low, best, high = (column * by for column in six)
    scaled = quantiles(low, best, high, P, shape=shape, dependence=d)
    assert scaled == pytest.approx(scale * once, abs=EXACT * max(1, scale))


@settings(deadline=None, max_examples=25)
@given(factors(), shapes, dependences)
def test_percentiles_move_little_when_the_mixture_is_made_by_hand(
    six: Factors, shape: list[str], d: float
) -> None:
    """F at a found percentile is (1 - d) F_independent + d F_together, read off finely."""
    p = np.linspace(0, 1, 401)
    alone = quantiles(*six, p, shape=shape, dependence=0.0)
    joint = quantiles(*six, p, shape=shape, dependence=1.0)
    found = quantiles(*six, P, shape=shape, dependence=d)
    if alone[-1] - alone[0] > 1e-3:
        mixed = (1 - d) * np.interp(found, alone, p) + d * np.interp(found, joint, p)
        assert mixed == pytest.approx(P, abs=5e-3)


@settings(deadline=None)
@given(factors(st.just(1.15)), shapes)
def test_shares_are_parts_of_one_where_the_multiplier_is_fixed(
    six: Factors, shape: list[str]
) -> None:
    shares = shares_of_variance(*six, shape=shape)
    assert ((shares >= 0) & (shares <= 1 + 1e-12)).all()
    varies = (six[2] - six[0])[:5].max() > 1e-100
    assert shares.sum() == pytest.approx(1.0 if varies else shares.sum())


@settings(deadline=None)
@given(factors(), shapes)
def test_shares_with_a_live_multiplier_stay_below_one(six: Factors, shape: list[str]) -> None:
    shares = shares_of_variance(*six, shape=shape)
    assert (shares >= 0).all()
    assert shares.sum() <= 1 + 1e-12
