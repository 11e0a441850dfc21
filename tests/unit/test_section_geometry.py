"""Water in sections given by points: walls, overhangs, islands, parts; and when to divide."""

import numpy as np
import pytest

from roughness.hydraulics.dividing import benches
from roughness.hydraulics.geometry import (
    Water,
    lines_between,
    lower_end,
    separate_waters,
    water_below,
    water_over,
    within,
)
from roughness.hydraulics.shapes import rectangle, trapezoid


def test_a_section_fills_to_the_waterline_on_sloping_banks() -> None:
    # Triangle 1:2, 1 m deep in a 2 m deep section: area 2, sides sqrt(5) each, width 4.
    water = water_below([-4, 0, 4], [2, 0, 2], 1.0)
    assert water.area == pytest.approx(2)
    assert water.perimeter == pytest.approx(2 * 5**0.5)
    assert water.width == pytest.approx(4)
    assert water.radius == pytest.approx(2 / (2 * 5**0.5))
    assert water.mean_depth == pytest.approx(0.5)


def test_vertical_walls_are_wetted_up_to_the_water() -> None:
    assert water_below([0, 0, 5, 5], [3, 0, 0, 3], 2.0) == Water(10, 9, 5)


def test_a_level_bench_at_the_waterline_is_dry_and_just_above_it_is_wet() -> None:
    x, z = [0, 0, 10, 10, 14, 14], [3, 1, 1, 0, 0, 3]
    assert water_below(x, z, 1.0).perimeter == pytest.approx(6)
    assert water_below(x, z, 1.0 + 1e-9).perimeter == pytest.approx(16)


def test_an_island_and_several_low_points_fill_at_one_level() -> None:
    x, z = [0, 0, 2, 2, 3, 3, 6, 6], [4, 0, 0, 2, 2, 1, 1, 4]
    # Two waters below the island's top at 2 m: 2 x 1.5 and 3 x 0.5; walls 1.5, 1.5, 0.5, 0.5.
    assert water_below(x, z, 1.5) == Water(4.5, 9, 5)
    assert separate_waters(z, 1.5) == 2
    # Above it one water: walls and beds 3, 2, 2, 1, 1, 3, 2.
    assert water_below(x, z, 3.0) == Water(13, 14, 6)
    assert separate_waters(z, 3.0) == 1


def test_under_an_overhang_there_is_water_but_no_surface() -> None:
    # A left bank undercut by 1 m, from 0 to 1 m height, under a lip of no thickness at 2 m.
    x, z = [0, 2, 2, 1, 1, 5, 5], [2, 2, 1, 1, 0, 0, 3]
    # Below the roof of the hollow the surface reaches into it: 4 m wide.
    assert water_below(x, z, 0.5) == Water(2, 5, 4)
    # Above it the hollow stays full: 1 m2, and the surface ends at the lip.
    assert water_below(x, z, 1.5) == Water(4 + 1.5, 0.5 + 1 + 1 + 4 + 1.5, 3)


def test_many_sections_and_many_stages_are_one_call() -> None:
    x = np.array([[0, 0, 5, 5], [-4, 0, 0, 4.0]])
    z = np.array([[3, 0, 0, 3], [2, 0, 0, 2.0]])
    each = [water_below(x[i], z[i], level) for level in (0.5, 1.0) for i in (0, 1)]
    at_once = water_below(x, z, np.array([[0.5, 0.5], [1.0, 1.0]]))
    assert at_once.area.shape == (2, 2)
    assert at_once.area.ravel().tolist() == [water.area for water in each]
    assert at_once.perimeter.ravel().tolist() == [water.perimeter for water in each]


def test_more_rows_than_are_worked_on_at_once_are_the_rows_one_by_one() -> None:
    rng = np.random.default_rng(7)
    x = np.sort(rng.uniform(0, 50, (3000, 12)), axis=-1)
    z, level = rng.uniform(0, 5, (3000, 12)), rng.uniform(1, 6, 3000)
    at_once = water_below(x, z, level)
    for i in (0, 1, 1499, 2999):
        one = water_below(x[i], z[i], level[i])
        assert (at_once.area[i], at_once.width[i]) == (one.area, one.width)
        assert at_once.perimeter[i] == one.perimeter
    many_stages = water_below(x[0], z[0], level)
    assert many_stages.area[2999] == water_below(x[0], z[0], level[2999]).area


def test_repeating_the_last_point_fills_up_a_row_and_adds_nothing() -> None:
    assert water_below([-4, 0, 4, 4, 4], [2, 0, 2, 2, 2], 1.0) == water_below(
        [-4, 0, 4], [2, 0, 2], 1.0
    )


def test_parts_share_the_area_and_the_bed_but_not_the_line_between_them() -> None:
    lines = lines_between([0, 0, 20, 20, 30, 30, 50, 50], [4, 2, 2, 0, 0, 2, 2, 4])
    left, channel, right = (
        water_over(within(lines, *limits), 3.0) for limits in ((0, 20), (20, 30), (30, 50))
    )
    assert left == Water(20, 21, 20) == right
    # The walls of the channel stand on the limits and belong to the channel.
    assert channel == Water(30, 14, 10)


def test_limits_inside_a_line_cut_it() -> None:
    lines = lines_between([-4, 0, 4], [2, 0, 2])
    part = water_over(within(lines, -1, 1), 1.0)
    assert part.area == pytest.approx(2 - 2 * 0.25)
    assert part.perimeter == pytest.approx(5**0.5)
    assert part.width == pytest.approx(2)


def test_a_part_that_is_dry_has_neither_radius_nor_depth() -> None:
    part = water_over(within(lines_between([0, 1, 9, 9], [3, 2, 0, 4]), 0, 1), 1.0)
    assert (part.area, part.perimeter, part.radius, part.mean_depth) == (0, 0, 0, 0)


def test_shapes_are_the_sections_of_their_points() -> None:
    assert trapezoid(1.5, 6, 2).area == pytest.approx(
        water_below([-4, 0, 6, 10], [2, 0, 0, 2], 1.5).area
    )
    assert rectangle(1.5, 6) == water_below([0, 0, 6, 6], [2, 0, 0, 2], 1.5)
    assert trapezoid(0.0, 6, 2) == Water(0, 0, 0)


def test_the_lower_end_is_where_water_would_run_out() -> None:
    assert lower_end([[3.0, 0.0, 2.5], [1.0, 0.0, 4.0]]).tolist() == [2.5, 1]


def test_a_shallow_plain_beside_a_deep_channel_is_a_reason_to_divide() -> None:
    # Bank edge at 20 m, 0.5 m deep there; the plain rises to the shore at 10 m.
    found = benches([0, 10, 20, 22, 30, 34], [3, 1.5, 1.0, 0, 0, 3], 1.5)
    assert [(b.at, b.depth, b.deepest) for b in found] == [(20, 0.5, 1.5)]
    assert found[0].width == pytest.approx(10)


@pytest.mark.parametrize(
    ("x", "z"),
    [
        ([-30, 0, 30], [3, 0, 3]),  # an even wide valley
        ([0, 0, 20, 20], [3, 0, 0, 3]),  # one bed
        ([0, 0, 4, 4, 14, 14], [3, 1, 1, 0, 0, 3]),  # a bench only 2.7 times as wide as deep
        ([0, 0, 30, 30, 40, 40], [3, 0.3, 0.3, 0, 0, 3]),  # a step, but no deep channel
    ],
)
def test_even_sections_and_narrow_benches_are_left_whole(x: list[float], z: list[float]) -> None:
    assert benches(x, z, 2.5) == ()
