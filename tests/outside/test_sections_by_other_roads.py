"""Sections by other roads: polygons in exact fractions, strips of water, many-digit roots.

None of these uses the tool's formula for a line under water: the polygon is clipped at the
waterline and its area taken from its corners (Sutherland and Hodgman's clipping, the shoelace
rule); the strips ask only how often a horizontal line meets the bed; depths are found again by
bisection with 30 digits. Published examples are named where they stand.
"""

import json
from fractions import Fraction
from itertools import pairwise
from pathlib import Path

import numpy as np
import pytest
from mpmath import mp, mpf

from roughness.__main__ import main
from roughness.hydraulics.critical_depth import critical_depth_of_trapezoid
from roughness.hydraulics.geometry import water_below
from roughness.hydraulics.normal_depth import normal_depth_of_trapezoid
from roughness.hydraulics.unit_systems import US

Points = list[tuple[Fraction, Fraction]]
ROOF = Fraction(100)


def random_bed(seed: int, lean: float) -> tuple[list[float], list[float]]:
    """A bed with walls, islands and hollows; leaning over, it has overhangs and no crossing."""
    rng = np.random.default_rng(seed)
    steps = rng.integers(0, 9, size=14) / 4
    heights = np.concatenate([[10], rng.integers(0, 33, size=13) / 4, [11]])
    x = np.concatenate([[0], np.cumsum(steps)]) + lean * heights
    return x.tolist(), heights.tolist()


def clipped(x: list[float], z: list[float], level: Fraction) -> Points:
    """The polygon over the bed, closed high above the ends, cut off at the level."""
    bed = [(Fraction(a), Fraction(b)) for a, b in zip(x, z, strict=True)]
    corners = [*bed, (bed[-1][0], ROOF), (bed[0][0], ROOF)]
    kept: Points = []
    for (x0, z0), (x1, z1) in pairwise([*corners, corners[0]]):
        if z0 <= level:
            kept.append((x0, z0))
        if (z0 <= level) != (z1 <= level):
            kept.append((x0 + (x1 - x0) * (level - z0) / (z1 - z0), level))
    return kept


def shoelace(corners: Points) -> Fraction:
    return (
        sum(
            (x0 * z1 - x1 * z0 for (x0, z0), (x1, z1) in pairwise([*corners, *corners[:1]])),
            Fraction(0),
        )
        / 2
    )


@pytest.mark.parametrize("lean", [0.0, 0.75, -1.5])
@pytest.mark.parametrize("seed", range(12))
def test_area_is_that_of_the_clipped_polygon(seed: int, lean: float) -> None:
    x, z = random_bed(seed, lean)
    for level in (0.3, 2.0, 4.125, 7.7, 9.9):
        area = shoelace(clipped(x, z, Fraction(level)))
        assert water_below(x, z, level).area == pytest.approx(float(area), rel=1e-12, abs=1e-12)


def width_by_crossings(x: list[float], z: list[float], height: float) -> float:
    """Width of the water at a height, from where a horizontal line meets the bed (even-odd)."""
    met = sorted(
        x0 + (x1 - x0) * (height - z0) / (z1 - z0)
        for (x0, z0), (x1, z1) in pairwise(zip(x, z, strict=True))
        if (z0 <= height) != (z1 <= height)
    )
    return sum(right - left for left, right in zip(met[::2], met[1::2], strict=True))


@pytest.mark.parametrize("lean", [0.0, 0.75, -1.5])
def test_width_and_area_are_those_of_horizontal_strips(lean: float) -> None:
    for seed in range(6):
        x, z = random_bed(seed, lean)
        level = 7.3
        water = water_below(x, z, level)
        assert water.width == pytest.approx(width_by_crossings(x, z, level), rel=1e-12)
        # Heights of the points are quarters: within a quarter the width is a straight line, so
        # that the middle of each strip is exact.
        low = np.arange(0, level, 0.25)
        high = np.minimum(low + 0.25, level)
        strips = [
            width_by_crossings(x, z, (a + b) / 2) * (b - a) for a, b in zip(low, high, strict=True)
        ]
        assert water.area == pytest.approx(sum(strips), rel=1e-12)


@pytest.mark.parametrize("lean", [0.0, 0.75, -1.5])
def test_wetted_perimeter_is_the_length_of_bed_below_the_level(lean: float) -> None:
    x, z = random_bed(3, lean)
    level, total = 5.05, mpf(0)
    with mp.workdps(30):
        for (x0, z0), (x1, z1) in pairwise(zip(x, z, strict=True)):
            ends = [(mpf(a), mpf(b)) for a, b in ((x0, z0), (x1, z1))]
            if (z0 < level) != (z1 < level):
                share = (mpf(level) - ends[0][1]) / (ends[1][1] - ends[0][1])
                cut = (ends[0][0] + share * (ends[1][0] - ends[0][0]), mpf(level))
                ends = [cut, ends[0] if z0 < level else ends[1]]
            if min(z0, z1) < level:
                total += mp.hypot(ends[1][0] - ends[0][0], ends[1][1] - ends[0][1])
    assert water_below(x, z, level).perimeter == pytest.approx(float(total), rel=1e-12)


@pytest.mark.parametrize("seed", range(8))
def test_normal_depth_is_that_of_a_bisection_with_thirty_digits(seed: int) -> None:
    rng = np.random.default_rng(seed)
    q, b, z = 10 ** rng.uniform(-2, 4), rng.uniform(0, 80), rng.uniform(0.01, 6)
    n, s = rng.uniform(0.01, 0.2), 10 ** rng.uniform(-5, -1.3)
    with mp.workdps(30):

        def miss(y: mpf) -> mpf:
            area, perimeter = (mpf(b) + mpf(z) * y) * y, b + 2 * y * mp.sqrt(1 + mpf(z) ** 2)
            return area ** (mpf(5) / 3) / perimeter ** (mpf(2) / 3) - mpf(n) * q / mp.sqrt(mpf(s))

        low, high = mpf(0), mpf(10) ** 4
        for _ in range(130):
            middle = (low + high) / 2
            low, high = (low, middle) if miss(middle) > 0 else (middle, high)
        expected = float(low)
    assert normal_depth_of_trapezoid(q, b, z, n, s) == pytest.approx(expected, rel=1e-13)


def test_the_textbook_trapezoid_has_its_printed_depths() -> None:
    # Chow 1959, Open-Channel Hydraulics, examples 6-2 and 4-2 (figures from memory): bottom
    # 20 ft, side slopes 2:1, slope 0.0016, n 0.025, 400 cfs: normal depth 3.36 ft, critical
    # depth 2.15 ft.
    assert normal_depth_of_trapezoid(400, 20, 2, 0.025, 0.0016, US) == pytest.approx(3.36, abs=5e-3)
    assert critical_depth_of_trapezoid(400, 20, 2, US) == pytest.approx(2.15, abs=5e-3)


def fractions_of_section(depth: float) -> tuple[float, float]:
    """Conveyance of channel and plain at a level, by clipped polygons and hand perimeters."""
    level = Fraction(depth)
    channel = float(shoelace(clipped([0, 0, 8, 8], [4, 0, 0, 4], level)))
    plain = float(shoelace(clipped([8, 8, 38, 41], [4, 1.5, 2.0, 4], level)))
    over = depth - 1.5
    lengths = np.hypot(30, 0.5), np.hypot(3, 2)
    wet = lengths[0] * min(1.0, over / 0.5) + lengths[1] * max(0.0, (depth - 2.0) / 2)
    # The channel's right bank is a wall up to the plain; above it stands water against water.
    return (
        channel * (channel / (8 + depth + 1.5)) ** (2 / 3) / 0.03,
        plain * (plain / wet) ** (2 / 3) / 0.07,
    )


@pytest.mark.parametrize("depth", [1.75, 2.4, 3.9])
def test_a_natural_section_on_the_command_line_conveys_what_its_polygons_do(
    depth: float, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    file = tmp_path / "section.json"
    document = {
        "points": [[0, 4], [0, 0], [8, 0], [8, 1.5], [38, 2.0], [41, 4]],
        "slope": 0.0016,
        "parts": [
            {"name": "main channel", "from": 0, "to": 8, "n": 0.03},
            {"name": "right flood plain", "setting": "flood-plain", "from": 8, "to": 41, "n": 0.07},
        ],
        "depth_m": depth,
    }
    file.write_text(json.dumps(document), encoding="utf-8")
    assert main(["section", str(file)]) == 0
    printed = json.loads(capsys.readouterr().out)
    expected = fractions_of_section(depth)
    assert [p["best"]["conveyance_m3s"] for p in printed["parts"]] == pytest.approx(
        expected, rel=1e-12
    )
    discharge = sum(expected) * 0.04
    assert printed["best"]["discharge_m3s"] == pytest.approx(discharge, rel=1e-12)
    # And back: that discharge stands at the depth it came from.
    del document["depth_m"]
    file.write_text(json.dumps(document | {"discharge_m3s": discharge}), encoding="utf-8")
    assert main(["section", str(file)]) == 0
    assert json.loads(capsys.readouterr().out)["best"]["depth_m"] == pytest.approx(depth, rel=1e-10)
