"""Counted stems and grass: what cannot be used is refused, limits are kept."""

import math

import pytest

from roughness.errors import InputError
from roughness.hydraulics import grass, vegetation


def test_stems_shorter_than_the_depth_count_with_their_height() -> None:
    whole = vegetation.vegetation_density([10], [0.2], 100.0)
    half = vegetation.vegetation_density([10], [0.2], 100.0, [0.5], 1.0)
    taller = vegetation.vegetation_density([10], [0.2], 100.0, [5.0], 1.0)
    assert half == pytest.approx(whole / 2) and taller == pytest.approx(whole)


@pytest.mark.parametrize(
    ("stems", "diameter", "area"), [([5], [0.1], 0.0), ([-1], [0.1], 10.0), ([5], [-0.1], 10.0)]
)
def test_a_count_that_cannot_be_is_refused(
    stems: list[int], diameter: list[float], area: float
) -> None:
    with pytest.raises(InputError, match="counted stems cannot be used"):
        vegetation.vegetation_density(stems, diameter, area)


def test_heights_need_a_depth() -> None:
    with pytest.raises(InputError, match="without a depth"):
        vegetation.vegetation_density([5], [0.1], 10.0, [1.0])


def test_no_density_makes_n_smaller_than_the_boundarys() -> None:
    assert math.isnan(vegetation.density_from_n(0.03, 0.05, 11.0, 1.0))


def test_below_the_lowest_vr_grass_stands_as_it_is() -> None:
    index = grass.CURVE_INDEX["B"]
    lowest = grass.lowest_vr(index)
    assert grass.n_of_grass(index, lowest / 10) == grass.n_of_grass(index, lowest)
    assert math.isnan(grass.n_of_grass(index, 3.4))
    assert math.isnan(grass.n_of_grass_at_slope("A", 0.01, 0.001))
