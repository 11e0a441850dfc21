"""A blend of lognormals against its closed form, and laws of weighing."""

from math import exp, log, log1p, sqrt

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from roughness.comparison.blending import Belief, blend, evidence_of_flow, prior_of_people

Z95 = 1.6448536269514722
Z84 = 0.994457883209753

beliefs = st.builds(
    Belief, median=st.floats(0.01, 0.5), sigma=st.floats(0.02, 0.8), what=st.just("a value")
)
some = st.lists(beliefs, min_size=1, max_size=4)


@given(beliefs, some)
def test_the_posterior_of_lognormals_is_the_closed_one(
    prior: Belief, evidence: list[Belief]
) -> None:
    # Precisions add; the middle of ln n is their weighted mean.
    every = [prior, *evidence]
    precision = sum(one.sigma**-2 for one in every)
    mu = sum(log(one.median) * one.sigma**-2 for one in every) / precision
    sigma = precision**-0.5
    found = blend(prior, evidence)
    assert found.p50 == pytest.approx(exp(mu), rel=1e-5)
    assert found.p05 == pytest.approx(exp(mu - Z95 * sigma), rel=2e-5)
    assert found.p95 == pytest.approx(exp(mu + Z95 * sigma), rel=2e-5)
    assert found.p84 == pytest.approx(exp(mu + Z84 * sigma), rel=2e-5)
    assert found.p16 == pytest.approx(exp(mu - Z84 * sigma), rel=2e-5)
    assert found.mean == pytest.approx(exp(mu + sigma**2 / 2), rel=1e-6)
    assert found.sd == pytest.approx(found.mean * sqrt(exp(sigma**2) - 1), rel=1e-5)


@given(beliefs, beliefs)
def test_evidence_moves_n_by_its_share_of_the_precision(prior: Belief, one: Belief) -> None:
    found = blend(prior, [one])
    closed = one.sigma**-2 / (one.sigma**-2 + prior.sigma**-2)
    assert found.share_of_evidence == pytest.approx(closed, abs=1e-5)
    distance = abs(log(one.median / prior.median)) / sqrt(prior.sigma**2 + one.sigma**2)
    assert found.apart == pytest.approx(distance, rel=1e-6, abs=1e-9)


@given(beliefs, some)
def test_the_curves_are_densities_and_the_order_of_evidence_does_not_matter(
    prior: Belief, evidence: list[Belief]
) -> None:
    every = [prior, *evidence]
    low = min(one.median * exp(-8 * one.sigma) for one in every)
    high = max(one.median * exp(8 * one.sigma) for one in every)
    logs = np.linspace(log(low), log(high), 20_001)
    n = np.exp(logs)
    found = blend(prior, evidence, at=n)
    for curve in (found.curves.prior, found.curves.evidence, found.curves.posterior):
        assert curve.sum() * (logs[1] - logs[0]) == pytest.approx(1.0, abs=1e-3)
    other = blend(prior, evidence[::-1], at=n)
    assert other.p50 == pytest.approx(found.p50, rel=1e-9)
    assert blend(prior, evidence, at=n).p50 == found.p50


@given(st.floats(0.015, 0.3), st.floats(0.1, 0.6))
def test_the_judged_n_is_the_mean_of_what_people_say(n: float, sigma: float) -> None:
    prior = prior_of_people(n, sigma)
    assert prior.median * exp(prior.sigma**2 / 2) == pytest.approx(n, rel=1e-12)


@given(st.floats(0.015, 0.3), st.floats(0.01, 0.6))
def test_evidence_of_a_flow_has_the_relative_error_it_was_measured_with(
    n: float, share: float
) -> None:
    evidence = evidence_of_flow(n, share * n)
    assert evidence.median == n
    assert evidence.sigma == pytest.approx(sqrt(log1p(share**2)), rel=1e-9)
