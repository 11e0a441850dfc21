"""Laws of the independent formulas: finite, in any unit the same, rougher with coarser grains."""

from itertools import pairwise

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from roughness.comparison import METHODS, Method, Streams, from_stones
from roughness.comparison import gravel as of_gravel
from roughness.comparison import sand as of_sand
from roughness.comparison import slope as of_slope
from roughness.hydraulics import grass, vegetation

FT = 0.3048
NOISE = 1 + 1e-12  # a size goes through a logarithm and back
KU = (1 / FT) ** (1 / 3)
G_FT = 9.80665 / FT

depths = st.floats(0.05, 20)
slopes = st.floats(1e-5, 0.2)
sizes = st.floats(2e-3, 2.0)
sands = st.floats(7e-5, 1.9e-3)
stretches = st.floats(1.01, 5)


def stream(depth: float, slope: float, d50: float) -> Streams:
    spread = {16: 0.5, 50: 1.0, 65: 1.3, 75: 1.6, 84: 1.9, 90: 2.1}
    grains = {f"d{percent}": d50 * factor for percent, factor in spread.items()}
    return Streams(
        setting="channel",
        slope=slope,
        radius=depth,
        depth=1.05 * depth,
        max_depth=1.5 * depth,
        area=20 * depth,
        roughness_height=d50,
        **grains,
    )


@pytest.mark.parametrize("method", METHODS, ids=lambda m: m.key)
@given(depth=depths, slope=slopes, d50=st.one_of(sizes, sands))
def test_inside_its_domain_every_formula_gives_a_finite_n_above_0(
    method: Method, depth: float, slope: float, d50: float
) -> None:
    streams = stream(depth, slope, d50)
    n = method.n(streams)
    if int(method.domain(streams, n)) == 0:
        assert np.isfinite(n) and n > 0
    else:
        assert method.why(streams, float(n))


@pytest.mark.parametrize("method", METHODS, ids=lambda m: m.key)
@given(rows=st.lists(st.tuples(depths, slopes, sizes), min_size=2, max_size=6))
def test_columns_give_what_single_reaches_give(
    method: Method, rows: list[tuple[float, float, float]]
) -> None:
    depth, slope, d50 = (np.array(column) for column in zip(*rows, strict=True))
    together = stream(depth, slope, d50)  # type: ignore[arg-type]
    n = method.n(together)
    domain = method.domain(together, n)
    for i, row in enumerate(rows):
        alone = stream(*row)
        one = method.n(alone)
        np.testing.assert_allclose(np.broadcast_to(n, (len(rows),))[i], one, rtol=1e-12)
        assert int(np.broadcast_to(domain, (len(rows),))[i]) == int(method.domain(alone, one))


GRAINS = [m for m in METHODS if m.includes == "grain" and "brownlie" not in m.key]


@pytest.mark.parametrize("method", GRAINS, ids=lambda m: m.key)
@given(depth=depths, slope=slopes, d50=sizes, stretch=stretches)
def test_coarser_grains_are_rougher_while_the_formula_holds(
    method: Method, depth: float, slope: float, d50: float, stretch: float
) -> None:
    fine, coarse = stream(depth, slope, d50), stream(depth, slope, d50 * stretch)
    n = [method.n(s) for s in (fine, coarse)]
    if not np.isnan(n).any():
        assert n[1] > n[0]


@given(depth=depths, slope=slopes, d50=sands, stretch=st.floats(1.01, 1.5))
def test_brownlies_n_rises_slowly_with_the_sand(
    depth: float, slope: float, d50: float, stretch: float
) -> None:
    for formula in (of_sand.brownlie_lower, of_sand.brownlie_upper):
        fine = formula(depth, d50, slope, 1.6)
        assert fine < formula(depth, d50 * stretch, slope, 1.6) < 1.1 * fine


@given(depth=depths, d84=sizes, slope=slopes)
def test_n_is_the_same_number_in_feet(depth: float, d84: float, slope: float) -> None:
    r, d = depth / FT, d84 / FT  # the published US forms, written here a second time
    x = r / d
    friction = KU * r ** (1 / 6) / np.sqrt(8 * G_FT)
    pairs = [
        (of_gravel.ferguson(depth, d84), _ferguson_us(r, d)),
        (of_slope.jarrett(depth, slope), 0.39 * slope**0.38 * r**-0.16),
        (of_slope.sauer(depth, slope), 0.11 * slope**0.18 * r**0.08),
        (of_gravel.gravel_power(depth, d84), friction / (1.9 * x**0.25)),
    ]
    below = 1.16 + 2 * np.log10(x)
    if below > 1e-3:
        pairs.append((of_gravel.limerinos_d84(depth, d84), 0.0926 * r ** (1 / 6) / below))
    for metric, us in pairs:
        assert float(metric) == pytest.approx(us, rel=1e-12)


def _ferguson_us(r: float, d: float) -> float:
    x = r / d
    root = 6.5 * 2.5 * x / np.sqrt(6.5**2 + 2.5**2 * x ** (5 / 3))
    return float(KU * r ** (1 / 6) / (np.sqrt(G_FT) * root))


@given(depth=depths, d84=sizes)
def test_rickenmann_and_recking_solved_for_depth_gives_its_own_discharge_back(
    depth: float, d84: float
) -> None:
    slope = 0.01
    n = float(of_gravel.rickenmann_recking(depth, d84))
    velocity = depth ** (2 / 3) * slope**0.5 / n
    forward = of_gravel.rickenmann_recking_velocity(velocity * depth, slope, d84)
    assert float(forward) == pytest.approx(velocity, rel=1e-9)


@given(n0=st.floats(0.01, 0.1), density=st.floats(1e-4, 1), drag=st.floats(0.5, 25), depth=depths)
def test_counted_stems_add_and_never_take_away(
    n0: float, density: float, drag: float, depth: float
) -> None:
    n = vegetation.n_with_stems(n0, density, drag, depth)
    alone = vegetation.n_with_stems(0.0, density, drag, depth)
    assert n >= n0
    assert vegetation.n4_of_stems(n0, density, drag, depth) <= alone * (1 + 1e-12)
    assert vegetation.n_with_stems(n0, density, drag, 2 * depth) > n
    assert vegetation.n_with_submerged_stems(n0, density, drag, 2 * depth, depth) == (
        pytest.approx(n, rel=1e-9)
    )


@given(
    retardance=st.sampled_from(grass.RETARDANCES),
    vr=st.floats(1e-4, 3.3),
    stretch=st.floats(1.0, 3),
)
def test_grass_lies_down_as_the_flow_grows(
    retardance: grass.Retardance, vr: float, stretch: float
) -> None:
    index = grass.CURVE_INDEX[retardance]
    n = grass.n_of_grass(index, [vr, min(vr * stretch, 3.3)])
    assert np.isfinite(n).all() and n[1] <= n[0] * (1 + 1e-12)


@given(stones=st.lists(st.floats(0.5, 5000), min_size=2, max_size=60), factor=st.floats(0.1, 3))
def test_sizes_of_a_count_are_in_order_and_scale_with_the_stones(
    stones: list[float], factor: float
) -> None:
    count, scaled = from_stones(stones), from_stones([s * factor for s in stones])
    mm = [p.mm for p in count.percentiles]
    assert all(a is not None and b is not None and a <= b * NOISE for a, b in pairwise(mm))
    for p, q in zip(count.percentiles, scaled.percentiles, strict=True):
        assert p.low_mm is not None and p.high_mm is not None and p.mm is not None
        assert p.low_mm <= p.mm * NOISE and p.mm <= p.high_mm * NOISE
        assert q.mm == pytest.approx(p.mm * factor, rel=1e-9)
