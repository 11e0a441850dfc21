"""Normal and critical depth: none, one or several, and always found."""

from functools import partial

import numpy as np
import pytest

from roughness.hydraulics.conveyance import conveyance
from roughness.hydraulics.critical_depth import (
    critical_depth_of_trapezoid,
    critical_levels,
    section_factor,
    specific_energy,
)
from roughness.hydraulics.flow_numbers import froude, is_fully_rough, reynolds
from roughness.hydraulics.geometry import Floats, Water, water_below
from roughness.hydraulics.normal_depth import normal_depth_of_trapezoid, normal_levels
from roughness.hydraulics.roots import bracketed_root, levels_to_try
from roughness.hydraulics.shapes import trapezoid

# A channel 4 m wide and 1 m deep in the middle of a level bench of 2 x 20 m.
X = np.array([0, 0, 20, 20, 24, 24, 44, 44.0])
Z = np.array([4, 1, 1, 0, 0, 1, 1, 4.0])
GRID, JUMPS = levels_to_try(Z, np.array(4.0))


def whole_conveyance(level: Floats) -> Floats:
    water = water_below(X, Z, level)
    return np.asarray(water.area * np.asarray(water.radius) ** (2 / 3) / 0.03)


def test_a_root_is_bracketed_where_steps_would_leave_it() -> None:
    flat = np.array([0.5, 1.7])
    found = bracketed_root(lambda x: (x - flat) ** 9, np.zeros(2), np.full(2, 3.0))
    assert found == pytest.approx(flat, abs=1e-9)


def test_a_row_without_a_change_of_sign_has_no_root() -> None:
    found = bracketed_root(lambda x: x - np.array([1.0, 9.0]), np.zeros(2), np.full(2, 3.0))
    assert found[0] == 1 and np.isnan(found[1])


def test_over_a_level_bench_an_undivided_section_may_have_two_normal_depths() -> None:
    at_bank = float(whole_conveyance(np.array(1.0)))
    several = normal_levels(whole_conveyance, 0.9 * at_bank, 1.0, GRID, JUMPS)
    assert several.count == 2
    assert several.lowest < 1 < several.highest
    for level in (several.lowest, several.highest):
        assert whole_conveyance(level) == pytest.approx(0.9 * at_bank, rel=1e-12)
    one = normal_levels(whole_conveyance, 0.1 * at_bank, 1.0, GRID, JUMPS)
    assert one.count == 1


def test_a_discharge_that_no_level_carries_has_no_normal_depth() -> None:
    most = float(whole_conveyance(np.array(4.0)))
    none = normal_levels(whole_conveyance, most * 1.001, 1.0, GRID, JUMPS)
    assert none.count == 0 and np.isnan(none.lowest) and np.isnan(none.highest)


def test_over_a_level_bench_there_may_be_several_critical_depths() -> None:
    at_bank = float(section_factor(water_below(X, Z, 1.0)))
    found = critical_levels(partial(water_below, X, Z), at_bank * 0.9 * 9.80665**0.5, GRID, JUMPS)
    assert found.count == 2
    for level in (found.lowest, found.highest):
        assert section_factor(water_below(X, Z, level)) == pytest.approx(at_bank * 0.9, rel=1e-12)


def test_many_sections_with_their_own_discharges_are_solved_at_once() -> None:
    rng = np.random.default_rng(5)
    x = np.sort(rng.uniform(0, 60, (40, 15)), axis=-1)
    z = rng.uniform(0, 4, (40, 15))
    z[:, [0, -1]] = 5.0
    heights = z - z.min(axis=-1, keepdims=True)

    def carried(level: Floats) -> Floats:
        water = water_below(x, heights, level)
        return np.asarray(conveyance(0.04, water.area, water.perimeter))

    top = heights[:, 0]
    discharge = carried(top) * 0.05 * rng.uniform(0.01, 1.05, 40)
    grid, jumps = levels_to_try(heights, top)
    found = normal_levels(carried, discharge, 0.0025, grid, jumps)
    assert (found.count >= 1).tolist() == (discharge <= carried(top) * 0.05).tolist()
    solved = found.count > 0
    assert 20 < solved.sum() < 40
    again = carried(np.where(solved, found.highest, top)) * 0.05
    assert again[solved] == pytest.approx(discharge[solved], rel=1e-11)


def test_water_without_a_surface_has_no_critical_flow() -> None:
    assert section_factor(Water(1.0, 3.0, 0.0)) == float("inf")
    assert section_factor(Water(0.0, 0.0, 0.0)) == 0


def test_critical_depth_has_the_least_specific_energy() -> None:
    depth = critical_depth_of_trapezoid(50, 10, 2)
    least = specific_energy(depth, trapezoid(depth, 10, 2).area, 50)
    around = depth * np.array([0.99, 1.01])
    assert (specific_energy(around, trapezoid(around, 10, 2).area, 50) > least).all()


@pytest.mark.parametrize(
    ("q", "b", "z", "n", "s"), [(0, 5, 1, 0.03, 0.001), (5, 0, 0, 0.03, 0.001), (5, 5, 1, 0.03, 0)]
)
def test_outside_its_domain_a_trapezoid_has_no_depth(
    q: float, b: float, z: float, n: float, s: float
) -> None:
    assert np.isnan(normal_depth_of_trapezoid(q, b, z, n, s))


@pytest.mark.parametrize("b", [1e-9, 1e-3, 1.0, 1e6])
@pytest.mark.parametrize("z", [1e-9, 0.5, 1e3])
@pytest.mark.parametrize("q", [1e-9, 1.0, 1e9])
def test_absurd_trapezoids_still_have_their_depth(q: float, b: float, z: float) -> None:
    depth = normal_depth_of_trapezoid(q, b, z, 0.03, 0.001)
    water = trapezoid(depth, b, z)
    carried = water.area * water.radius ** (2 / 3) * 0.001**0.5 / 0.03
    assert carried == pytest.approx(q, rel=1e-12)


def test_a_depth_that_steps_do_not_reach_is_bracketed(monkeypatch: pytest.MonkeyPatch) -> None:
    columns = [1e-6, 1.0, 1e6], [0.0, 5.0, 300.0], [1.0, 0.0, 3.0]
    by_steps = normal_depth_of_trapezoid(*columns, 0.03, 0.001)
    monkeypatch.setattr("roughness.hydraulics.normal_depth._NEWTON_STEPS", 0)
    assert normal_depth_of_trapezoid(*columns, 0.03, 0.001) == pytest.approx(by_steps, rel=1e-12)


def test_water_a_metre_deep_and_a_metre_fast_is_turbulent_by_a_million() -> None:
    # Common practice, no source: the Reynolds number with R is then of the order of 10^6.
    assert reynolds(1.0, 1.0) == pytest.approx(1e6, rel=0.2)
    assert is_fully_rough(0.03, 1.0, 0.001)
    assert not is_fully_rough(0.010, 0.1, 1e-5)


def test_the_velocity_head_coefficient_raises_the_froude_number() -> None:
    assert froude(2, 10, 10, alpha=1.44) == pytest.approx(1.2 * froude(2, 10, 10))
