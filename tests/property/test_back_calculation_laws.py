"""Laws of n from a measured flow over random reaches."""

from typing import Any

import numpy as np
import pytest
from hypothesis import assume, given
from hypothesis import strategies as st

from roughness.hydraulics.back_calculation import (
    back_calculate,
    n_of_uniform_flow,
    relative_sd,
    relative_sd_of_uniform_flow,
    section_factor,
)

G = 9.80665


@st.composite
def reaches(draw: st.DrawFn) -> dict[str, Any]:
    """Sections, and the water surface that an n of their own and the relation give them."""
    count = draw(st.integers(2, 6))
    area = np.array(draw(st.lists(st.floats(5, 80), min_size=count, max_size=count)))
    shape = np.array(draw(st.lists(st.floats(3, 12), min_size=count, max_size=count)))
    length = np.array(draw(st.lists(st.floats(10, 400), min_size=count - 1, max_size=count - 1)))
    n, velocity = draw(st.floats(0.015, 0.2)), draw(st.floats(0.2, 2.5))
    alpha = np.array(draw(st.lists(st.floats(1, 2), min_size=count, max_size=count)))
    flow = velocity * float(area.mean())
    level, perimeter = np.empty(count), shape * np.sqrt(area)
    head = alpha * (flow / area) ** 2 / (2 * G)
    z = section_factor(area, perimeter)
    level[-1] = draw(st.floats(-50, 500))
    for i in range(count - 2, -1, -1):
        friction = n**2 * flow**2 * length[i] / (z[i] * z[i + 1])
        drop = head[i] - head[i + 1]
        level[i] = level[i + 1] - drop + friction + (0.5 * drop if drop > 0 else -0.1 * drop)
    return {
        "n": n,
        "flow": flow,
        "sections": {
            "distance": np.concatenate([[0.0], length.cumsum()]),
            "area": area,
            "wetted_perimeter": perimeter,
            "water_level": level,
            "alpha": alpha,
        },
        "k": {"expansion_loss": 0.5, "contraction_loss": 0.1},
    }


def with_friction_to_see(reach: dict[str, Any]) -> float:
    """Keep to reaches whose friction the levels still show; return its head."""
    found = back_calculate(reach["flow"], **reach["sections"], **reach["k"])
    net = float(found.whole.net_head)
    assume(net > 1e-3 and (found.subreaches.net_head > 1e-4).all())
    return net


@given(reaches())
def test_the_n_of_a_computed_profile_is_found_again(reach: dict[str, Any]) -> None:
    with_friction_to_see(reach)
    found = back_calculate(reach["flow"], **reach["sections"], **reach["k"])
    assert found.whole.n == pytest.approx(reach["n"], rel=1e-7)
    assert found.subreaches.n == pytest.approx(np.full_like(found.subreaches.n, reach["n"]), 1e-6)


@given(reaches(), st.floats(-1000, 1000))
def test_datum_and_sense_of_the_distances_do_not_matter(
    reach: dict[str, Any], datum: float
) -> None:
    net = with_friction_to_see(reach)
    moved = dict(reach["sections"])
    moved["water_level"] = moved["water_level"] + datum
    moved["distance"] = 5000.0 - moved["distance"]
    found = back_calculate(reach["flow"], **moved, **reach["k"])
    assert found.whole.n == pytest.approx(reach["n"], rel=1e-9 / net + 1e-7)


@given(reaches(), st.floats(0.1, 10))
def test_a_scale_model_by_froudes_law_has_n_as_the_sixth_root_of_the_scale(
    reach: dict[str, Any], scale: float
) -> None:
    with_friction_to_see(reach)
    model = dict(reach["sections"])
    for name, power in {"distance": 1, "area": 2, "wetted_perimeter": 1, "water_level": 1}.items():
        model[name] = model[name] * scale**power
    found = back_calculate(reach["flow"] * scale**2.5, **model, **reach["k"])
    assert found.whole.n == pytest.approx(reach["n"] * scale ** (1 / 6), rel=1e-6)


@given(reaches())
def test_more_loss_leaves_less_for_friction(reach: dict[str, Any]) -> None:
    with_friction_to_see(reach)
    free = back_calculate(reach["flow"], **reach["sections"], expansion_loss=0.0)
    lossy = back_calculate(reach["flow"], **reach["sections"], expansion_loss=0.5)
    assert not lossy.whole.n > free.whole.n * (1 + 1e-12)


@given(reaches())
def test_the_errors_are_those_of_numeric_differentiation(reach: dict[str, Any]) -> None:
    net = with_friction_to_see(reach)
    # First order holds where a disturbance is small beside the head that friction takes.
    assume(float(np.abs(back_calculate(reach["flow"], **reach["sections"]).velocity_head).max())
           < 50 * net)  # fmt: skip
    found = back_calculate(reach["flow"], **reach["sections"], **reach["k"])
    step = 1e-6

    def ln_n(flow: float = 1.0, area: float = 1.0, end: int = 0, level: float = 0.0) -> float:
        sections = dict(reach["sections"])
        sections["area"] = sections["area"] * area
        sections["water_level"] = sections["water_level"].copy()
        sections["water_level"][end] += level
        moved = back_calculate(reach["flow"] * flow, **sections, **reach["k"])
        return float(np.log(moved.whole.n))

    by_flow = (ln_n(flow=1 + step) - ln_n(flow=1 - step)) / (2 * step)
    by_area = (ln_n(area=1 + step) - ln_n(area=1 - step)) / (2 * step)
    nudge = step * net
    by_ends = [
        (ln_n(end=e, level=nudge) - ln_n(end=e, level=-nudge)) / (2 * nudge) for e in (0, -1)
    ]
    whole = found.whole
    assert relative_sd(whole, discharge=1.0) == pytest.approx(abs(by_flow), rel=1e-3, abs=1e-3)
    assert relative_sd(whole, area=1.0) == pytest.approx(abs(by_area), rel=1e-3, abs=1e-3)
    assert relative_sd(whole, water_level=1.0) == pytest.approx(
        np.hypot(by_ends[0], by_ends[1]), rel=1e-3
    )
    together = relative_sd(whole, discharge=0.05, water_level=0.01, area=0.03)
    parts = np.array([0.05 * by_flow, 0.03 * by_area, 0.01 * by_ends[0], 0.01 * by_ends[1]])
    assert together == pytest.approx(np.sqrt((parts**2).sum()), rel=1e-3, abs=1e-4)


@given(st.floats(1, 500), st.floats(1, 200), st.floats(5, 90), st.floats(1e-5, 0.1))
def test_errors_at_one_section_are_those_of_numeric_differentiation(
    flow: float, area: float, perimeter: float, slope: float
) -> None:
    def ln_n(q: float = 1.0, a: float = 1.0, s: float = 1.0) -> float:
        return float(np.log(n_of_uniform_flow(flow * q, area * a, perimeter, slope * s)))

    up, down = 1 + 1e-6, 1 - 1e-6
    slopes = [ln_n(q=up) - ln_n(q=down), ln_n(a=up) - ln_n(a=down), ln_n(s=up) - ln_n(s=down)]
    by_q, by_a, by_s = (value / 2e-6 for value in slopes)
    expected = np.sqrt((0.05 * by_q) ** 2 + (0.03 * by_a) ** 2 + (0.1 * by_s) ** 2)
    found = relative_sd_of_uniform_flow(discharge=0.05, area=0.03, slope=0.1)
    assert found == pytest.approx(expected, rel=1e-6)


@given(st.lists(reaches(), min_size=2, max_size=4))
def test_many_events_at_once_are_each_alone(several: list[dict[str, Any]]) -> None:
    count = min(len(reach["sections"]["area"]) for reach in several)
    names = list(several[0]["sections"])
    stacked: dict[str, Any] = {
        name: np.stack([reach["sections"][name][:count] for reach in several]) for name in names
    }
    together = back_calculate([reach["flow"] for reach in several], **stacked)
    for row, reach in enumerate(several):
        alone = back_calculate(
            reach["flow"], **{name: reach["sections"][name][:count] for name in names}
        )
        assert together.whole.n[row] == pytest.approx(alone.whole.n, rel=1e-12, nan_ok=True)
        assert together.subreaches.n[row] == pytest.approx(
            alone.subreaches.n, rel=1e-12, nan_ok=True
        )


def test_an_energy_line_that_does_not_fall_has_no_n() -> None:
    flat = back_calculate(10.0, [0, 100], [20, 20], [15, 15], [5.0, 5.0])
    assert np.isnan(flat.whole.n)
    assert np.isnan(relative_sd(flat.whole, discharge=0.05))
