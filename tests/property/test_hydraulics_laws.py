"""Laws of geometry, uniform flow, composite n and conveyance."""

from itertools import pairwise

import numpy as np
import pytest
from hypothesis import assume, given
from hypothesis import strategies as st

from roughness.hydraulics.composite_relations import BOUNDED, composite_n, segments_of
from roughness.hydraulics.conveyance import (
    conveyance,
    equivalent_n,
    momentum_coefficient,
    velocity_head_coefficient,
)
from roughness.hydraulics.critical_depth import critical_depth_of_trapezoid
from roughness.hydraulics.flow_numbers import froude
from roughness.hydraulics.geometry import Floats, lines_between, water_below, water_over, within
from roughness.hydraulics.normal_depth import normal_depth_of_trapezoid, normal_levels
from roughness.hydraulics.resistance import (
    chezy_from_n,
    chezy_velocity,
    darcy_velocity,
    friction_factor_from_n,
    manning_velocity,
    n_from_chezy,
    n_from_friction_factor,
    n_from_velocity,
)
from roughness.hydraulics.roots import levels_to_try
from roughness.hydraulics.shapes import trapezoid
from roughness.hydraulics.unit_systems import METRIC, US


def numbers(low: float, high: float) -> st.SearchStrategy[float]:
    return st.floats(low, high, allow_nan=False)


ROUGH = numbers(0.01, 0.3)
SIZES = numbers(0.05, 50)
SLOPES = numbers(1e-6, 0.1)


@st.composite
def sections(draw: st.DrawFn) -> tuple[Floats, Floats]:
    """Beds that run from left to right between two ends of 10 m and more."""
    steps = draw(st.lists(numbers(0.01, 5.0), min_size=3, max_size=12))
    for wall in draw(st.sets(st.integers(0, len(steps) - 1), max_size=3)):
        # No two walls on one another: that would be a slit without width.
        if 0.0 not in steps[max(wall - 1, 0) : wall + 2]:
            steps[wall] = 0.0
    heights = draw(st.lists(numbers(0.0, 9.0), min_size=len(steps) - 1, max_size=len(steps) - 1))
    x = np.concatenate([[0.0], np.cumsum(steps)])
    return x, np.array([draw(numbers(10, 12)), *heights, draw(numbers(10, 12))])


LEVELS = numbers(0.0, 10.0)


@given(sections(), LEVELS, LEVELS)
def test_area_perimeter_and_width_of_water_never_shrink_as_it_rises(
    section: tuple[Floats, Floats], one: float, other: float
) -> None:
    low, high = (water_below(*section, level) for level in sorted((one, other)))
    assert low.area <= high.area + 1e-9
    assert low.perimeter <= high.perimeter + 1e-9
    assert low.width <= high.width + 1e-9


@given(sections(), LEVELS, st.lists(numbers(0, 1), max_size=5))
def test_more_points_on_the_same_bed_change_nothing(
    section: tuple[Floats, Floats], level: float, shares: list[float]
) -> None:
    x, z = section
    fine_x, fine_z = [x[0]], [z[0]]
    for i in range(len(x) - 1):
        for share in (*sorted(shares), 1.0):
            fine_x.append(x[i] + share * (x[i + 1] - x[i]))
            fine_z.append(z[i] + share * (z[i + 1] - z[i]))
    coarse, fine = water_below(x, z, level), water_below(fine_x, fine_z, level)
    assert fine.area == pytest.approx(coarse.area, abs=1e-9)
    # A level bed at the waterline may be told wet or dry by the last bit of a height.
    assume(abs(z - level).min() > 1e-6)
    assert fine.perimeter == pytest.approx(coarse.perimeter, abs=1e-9)
    assert fine.width == pytest.approx(coarse.width, abs=1e-9)


@given(sections(), LEVELS, st.lists(numbers(0, 1), max_size=4))
def test_parts_add_to_the_whole_section(
    section: tuple[Floats, Floats], level: float, shares: list[float]
) -> None:
    x, z = section
    limits = np.array([0.0, *sorted(shares), 1.0]) * x[-1]
    lines, whole = lines_between(x, z), water_below(x, z, level)
    cut = [water_over(within(lines, a, b), level) for a, b in pairwise(limits)]
    assert sum(part.area for part in cut) == pytest.approx(whole.area, abs=1e-9)
    assert sum(part.width for part in cut) == pytest.approx(whole.width, abs=1e-9)
    assume(abs(z - level).min() > 1e-6)
    # Limits on one another or on a wall leave parts without width, but no wall twice.
    assert sum(part.perimeter for part in cut) == pytest.approx(whole.perimeter, abs=1e-9)


@given(sections(), LEVELS)
def test_a_section_seen_in_a_mirror_holds_the_same_water(
    section: tuple[Floats, Floats], level: float
) -> None:
    x, z = section
    there, back = water_below(x, z, level), water_below(-x[::-1], z[::-1], level)
    assert back.area == pytest.approx(there.area, abs=1e-9)
    assert back.perimeter == pytest.approx(there.perimeter, abs=1e-9)


@given(sections(), LEVELS, numbers(-3, 3))
def test_leaning_the_bed_over_keeps_area_and_width(
    section: tuple[Floats, Floats], level: float, lean: float
) -> None:
    # Shearing moves every height sideways by as much, so that banks become overhangs.
    x, z = section
    upright, leaning = water_below(x, z, level), water_below(x + lean * z, z, level)
    assert leaning.area == pytest.approx(upright.area, abs=1e-9)
    assume(abs(z - level).min() > 1e-6)
    assert leaning.width == pytest.approx(upright.width, abs=1e-9)


@given(sections(), numbers(0.1, 9.9), numbers(0.01, 0.2), SLOPES)
def test_every_normal_level_carries_the_discharge(
    section: tuple[Floats, Floats], level: float, n: float, slope: float
) -> None:
    x, z = section
    base = float(z.min())

    def carried(depth: Floats) -> Floats:
        water = water_below(x, z - base, depth)
        return np.asarray(conveyance(n, water.area, water.perimeter))

    discharge = float(carried(np.asarray(level - base))) * slope**0.5 if level > base else 0.0
    assume(discharge > 1e-6)
    grid, jumps = levels_to_try(z - base, np.asarray(min(z[0], z[-1]) - base))
    found = normal_levels(carried, discharge, slope, grid, jumps)
    assert found.count >= 1
    roots = found.at[np.isfinite(found.at)]
    off = [abs(float(carried(root)) * slope**0.5 / discharge - 1) for root in roots]
    # Over a level bench K may leap past the discharge: that level is the lowest that carries it.
    leaps = [abs(float(root) - (z - base)).min() < 1e-9 for root in roots]
    assert all(miss < 1e-9 or leap for miss, leap in zip(off, leaps, strict=True))


@given(numbers(0.01, 5000), numbers(0, 200), numbers(0.01, 8), ROUGH, SLOPES)
def test_normal_depth_of_a_trapezoid_solves_its_equation_in_both_unit_systems(
    q: float, b: float, z: float, n: float, s: float
) -> None:
    depth = normal_depth_of_trapezoid(q, b, z, n, s)
    water = trapezoid(depth, b, z)
    assert water.area * manning_velocity(n, water.radius, s) == pytest.approx(q, rel=1e-12)
    in_feet = normal_depth_of_trapezoid(q * US.metre**3, b * US.metre, z, n, s, US)
    assert in_feet / US.metre == pytest.approx(depth, rel=1e-12)


@given(numbers(0.01, 5000), numbers(0.1, 200), numbers(0, 8), ROUGH, numbers(1.001, 3), SLOPES)
def test_more_n_is_more_depth(
    q: float, b: float, z: float, n: float, more: float, s: float
) -> None:
    depths = normal_depth_of_trapezoid(q, b, z, [n, n * more], s)
    assert depths[0] < depths[1] < depths[0] * more


@given(numbers(0.01, 5000), numbers(0, 200), numbers(0.01, 8))
def test_at_critical_depth_the_froude_number_is_one(q: float, b: float, z: float) -> None:
    water = trapezoid(critical_depth_of_trapezoid(q, b, z), b, z)
    assert froude(q / water.area, water.area, water.width) == pytest.approx(1, rel=1e-11)


@given(ROUGH, SIZES, SLOPES)
def test_all_four_equations_give_one_velocity_and_one_n(n: float, r: float, s: float) -> None:
    velocity = manning_velocity(n, r, s)
    f = friction_factor_from_n(n, r)
    assert chezy_velocity(chezy_from_n(n, r), r, s) == pytest.approx(velocity, rel=1e-13)
    assert darcy_velocity(f, r, s) == pytest.approx(velocity, rel=1e-13)
    assert n_from_chezy(chezy_from_n(n, r), r) == pytest.approx(n, rel=1e-13)
    assert n_from_friction_factor(f, r) == pytest.approx(n, rel=1e-13)
    assert n_from_velocity(velocity, r, s) == pytest.approx(n, rel=1e-13)
    feet = manning_velocity(n, r * US.metre, s, US)
    assert feet / US.metre == pytest.approx(velocity, rel=1e-12)
    assert friction_factor_from_n(n, r * US.metre, US) == pytest.approx(
        friction_factor_from_n(n, r, METRIC), rel=1e-12
    )


@st.composite
def segments(draw: st.DrawFn) -> tuple[list[float], list[float], list[float], list[float]]:
    count = draw(st.integers(1, 6))
    n = draw(st.lists(ROUGH, min_size=count, max_size=count))
    columns = [draw(st.lists(SIZES, min_size=count, max_size=count)) for _ in range(3)]
    return n, columns[0], columns[1], columns[2]


@given(segments())
def test_means_stay_between_the_least_and_the_greatest_n_and_keep_their_order(
    given_segments: tuple[list[float], list[float], list[float], list[float]],
) -> None:
    found = composite_n(segments_of(*given_segments))
    low, high = min(given_segments[0]), max(given_segments[0])
    for key in BOUNDED:
        assert low * (1 - 1e-12) <= found[key] <= high * (1 + 1e-12), key
    by_perimeter = ("felkel", "perimeter-mean", "horton-einstein", "pavlovskii")
    rising = [found[key] for key in by_perimeter]
    assert all(a <= b * (1 + 1e-12) for a, b in pairwise(rising))
    assert found["cox"] <= found["colebatch"] * (1 + 1e-12)
    assert found["lotter"] <= found["ida-engelund"] * (1 + 1e-12)


@given(segments())
def test_where_all_segments_agree_every_mean_is_their_n(
    given_segments: tuple[list[float], list[float], list[float], list[float]],
) -> None:
    n, *water = given_segments
    found = composite_n(segments_of([n[0]] * len(n), *water))
    assert all(found[key] == pytest.approx(n[0], rel=1e-12) for key in BOUNDED)


@given(segments())
def test_another_part_never_lowers_the_conveyance_and_coefficients_are_one_or_more(
    given_segments: tuple[list[float], list[float], list[float], list[float]],
) -> None:
    n, area, perimeter, _ = given_segments
    k = conveyance(n, area, perimeter)
    running = np.cumsum(k)
    assert (np.diff(running) >= 0).all()
    alpha, beta = velocity_head_coefficient(k, area), momentum_coefficient(k, area)
    assert 1 - 1e-12 <= beta <= alpha * (1 + 1e-12)
    # The n of the whole is Lotter's, since the parts' perimeters add to the whole.
    assert equivalent_n(k, area, perimeter) == pytest.approx(
        composite_n(segments_of(n, area, perimeter, 1.0))["lotter"], rel=1e-12
    )
