"""Prior and evidence side by side: what is said, what is refused, what analogues count for."""

from math import exp, log

import numpy as np
import pytest

from roughness.additive import sigma_of_people
from roughness.comparison.analogues import analogues
from roughness.comparison.blending import (
    SIGMA_OF_ONE_ANALOGUE,
    Belief,
    blend,
    evidence_of_analogues,
    evidence_of_flow,
    prior_of_people,
)
from roughness.comparison.likeness import ReachFacts
from roughness.desk.measured_streams import measured_streams
from roughness.errors import InputError

PEOPLE = prior_of_people(0.05, sigma_of_people(0.05) or 0.0)
FLOW = evidence_of_flow(0.042, 0.004)


def test_a_measured_flow_weighs_more_than_what_people_differ_by() -> None:
    found = blend(PEOPLE, [FLOW])
    assert 0.042 < found.p50 < PEOPLE.median
    assert found.share_of_evidence > 0.85
    assert found.p95 - found.p05 < 0.014


def test_the_three_curves_share_one_axis_of_n() -> None:
    curves = blend(PEOPLE, [FLOW]).curves
    shapes = {curve.shape for curve in (curves.n, curves.prior, curves.evidence, curves.posterior)}
    assert shapes == {(401,)}
    peaks = [curves.n[int(np.argmax(c))] for c in (curves.prior, curves.posterior, curves.evidence)]
    assert peaks == sorted(peaks, reverse=True)


def test_the_curves_are_given_where_they_are_wanted() -> None:
    at = [0.03, 0.042, 0.06]
    curves = blend(PEOPLE, [FLOW], at=at).curves
    assert curves.n.tolist() == at
    height = 1 / (FLOW.sigma * (2 * np.pi) ** 0.5)
    assert curves.evidence[1] == pytest.approx(height, rel=1e-4)


def test_it_is_said_that_nobody_adopted_it() -> None:
    assert blend(PEOPLE, [FLOW]).says == (
        "The blend is shown to be looked at; nobody has adopted it.",
    )


def test_evidence_far_from_what_people_say_asks_for_the_reason_first() -> None:
    found = blend(PEOPLE, [evidence_of_flow(0.15, 0.01)])
    assert found.apart > 2
    assert "0.15" in found.says[0] and "find the reason before" in found.says[0]


def test_streams_that_are_alike_are_one_piece_of_evidence() -> None:
    wood = ReachFacts(setting="flood-plain", depth_m=1.0, plants=("trees",))
    alike = analogues(wood, measured_streams().streams).alike
    evidence = evidence_of_analogues(alike)
    assert evidence is not None
    assert 0.11 < evidence.median < 0.20
    assert evidence.sigma == SIGMA_OF_ONE_ANALOGUE
    assert evidence.what.startswith("measured streams: ") and "Flagon Bayou" in evidence.what
    many = evidence_of_analogues(alike * 5)
    assert many is not None
    assert many.median == pytest.approx(evidence.median)
    assert many.sigma == evidence.sigma


def test_the_error_of_an_analogue_spans_the_quartiles_of_a_channel_type() -> None:
    # Lee and Julien, composite resistance (abstract, second hand): quartile ratio under 2.3.
    quartile = 0.6744897501960817
    assert exp(2 * quartile * SIGMA_OF_ONE_ANALOGUE) == pytest.approx(2.3)


def test_streams_that_are_little_alike_are_no_evidence() -> None:
    steep = ReachFacts(setting="channel", d50_mm=2.0, slope=0.1, hydraulic_radius_m=0.2)
    alike = analogues(steep, measured_streams().streams).alike
    assert alike and evidence_of_analogues(alike) is None
    assert evidence_of_analogues(()) is None


@pytest.mark.parametrize(
    ("n", "sd"), [(0.0, 0.01), (-0.03, 0.01), (0.03, 0.0), (0.03, -0.01), (0.03, float("nan"))]
)
def test_a_value_without_error_cannot_be_weighed(n: float, sd: float) -> None:
    with pytest.raises(InputError, match="not above 0"):
        evidence_of_flow(n, sd)


@pytest.mark.parametrize("sigma", [0.0, 0.001, 4.0, float("nan")])
def test_an_error_that_nobody_has_is_refused(sigma: float) -> None:
    with pytest.raises(InputError, match=r"people: an error of .* in ln n cannot be weighed"):
        blend(Belief(median=0.05, sigma=sigma, what="people"), [FLOW])


def test_nothing_to_weigh_is_said() -> None:
    with pytest.raises(InputError, match="no evidence to weigh"):
        blend(PEOPLE, [])
    with pytest.raises(InputError, match="n is not above 0"):
        prior_of_people(0.0, 0.3)


def test_equal_middles_share_by_their_errors() -> None:
    one = Belief(median=0.04, sigma=0.3, what="people")
    found = blend(one, [Belief(median=0.04, sigma=0.1, what="flow")])
    assert found.share_of_evidence == pytest.approx(0.9, abs=1e-6)
    assert log(found.p50) == pytest.approx(log(0.04), abs=1e-6)
