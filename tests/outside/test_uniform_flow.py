"""Uniform flow, conversions and shapes against values made by another program.

The values were computed with 40 digits by a separate program from the formulas named in the
docstrings of ``roughness.hydraulics``; constants 1 ft = 0.3048 m, g = 9.80665 m/s2. Published
figures they agree with: 0.113 and 0.0927 of FHWA HDS-6, eq. 3.22.
"""

from collections.abc import Callable
from typing import Any

import numpy as np
import pytest
from mpmath import mp

from roughness.hydraulics import conveyance as parts
from roughness.hydraulics import critical_depth as critical
from roughness.hydraulics import flow_numbers as numbers
from roughness.hydraulics import normal_depth as normal
from roughness.hydraulics import resistance as flow
from roughness.hydraulics import rough_walls as walls
from roughness.hydraulics import shapes
from roughness.hydraulics.composite_relations import composite_n, segments_of
from roughness.hydraulics.sensitivity import depth_exponent, velocity_exponent
from roughness.hydraulics.unit_systems import FOOT_M, METRIC, US, UnitSystem
from roughness.hydraulics.wide_channel import stage_change_wide

N, R, S = 0.035, 1.2, 0.002
R_FT = 3.937007874015748
KS, KS_FT = 0.15, 0.4921259842519685
Q, B, Z = 50.0, 10.0, 2.0
DEPTH = 2.08273579475


@pytest.mark.parametrize(
    ("found", "expected"),
    [
        (US.ku, 1.4859185775),
        (flow.manning_velocity(N, R, S), 1.44289407761),
        (flow.manning_velocity(N, R_FT, S, US), 4.73390445412),
        (flow.n_from_velocity(1.44289407761, R, S), N),
        (flow.chezy_from_n(N, R), 29.4529520253),
        (flow.chezy_from_n(N, R_FT, US), 53.3483938404),
        (flow.chezy_velocity(29.4529520253, R, S), 1.44289407761),
        (flow.friction_factor_from_n(N, R), 0.0904384275317),
        (flow.friction_factor_from_n(N, R_FT, US), 0.0904384275317),
        (flow.n_from_friction_factor(0.0904384275317, R), N),
        (flow.darcy_velocity(0.0904384275317, R, S), 1.44289407761),
        (flow.strickler_from_n(N), 28.5714285714),
        (flow.strickler_velocity(28.5714285714, R, S), 1.44289407761),
        (walls.n_from_roughness_height(R, KS), 0.0287763497297),
        (walls.n_from_roughness_height(R_FT, KS_FT, US), 0.0287763497297),
        (walls.n_from_white_colebrook(R, KS), 0.0288909146153),
        (walls.n_from_power_of_roughness(KS), 0.0280355143695),
        (walls.roughness_height_from_n(R, 0.02877634972968318), KS),
        (walls.n_from_bazin(R, 1.30), 0.0259103466486),
        (flow.chezy_from_n(walls.n_from_bazin(R, 1.30), R), 39.7853928728),
        (walls.chezy_from_kutter(N, R, S), 29.7486659605),
        (numbers.rough_number(N, R, S), 1.63119696838e-10),
        (numbers.rough_number(N, R_FT, S, US), 1.63119696838e-10),
        (numbers.roughness_reynolds(KS, R, S), 20210.917915),
    ],
)
def test_a_formula_gives_the_value_of_the_other_program(found: float, expected: float) -> None:
    assert found == pytest.approx(expected, rel=1e-11)


def test_rounded_coefficients_of_print_are_those_of_the_exact_units() -> None:
    # EM 1110-2-1601, chapter 5 (from memory): n = R^(1/6) / (23.85 + 21.95 log10(R/k)), feet.
    printed = R_FT ** (1 / 6) / (23.85 + 21.95 * np.log10(R_FT / KS_FT))
    assert printed == pytest.approx(0.0287728640055, rel=1e-11)
    assert walls.n_from_roughness_height(R_FT, KS_FT, US) == pytest.approx(printed, rel=2e-4)
    # FHWA HDS-6, eq. 3.22: 0.113 (metres) and 0.0927 (feet) times R^(1/6) sqrt(f).
    for units, constant in ((METRIC, 0.113), (US, 0.0927)):
        assert flow.n_from_friction_factor(1, 1, units) == pytest.approx(constant, rel=1e-3)


@pytest.mark.parametrize("units", [METRIC, US])
def test_the_trapezoid_of_the_other_program_has_its_depths_and_numbers(units: UnitSystem) -> None:
    m = units.metre
    depth = normal.normal_depth_of_trapezoid(Q * m**3, B * m, Z, N, S, units)
    assert depth == pytest.approx(DEPTH * m, rel=1e-11)
    water = shapes.trapezoid(depth, B * m, Z)
    velocity = Q * m**3 / water.area
    assert velocity == pytest.approx(1.69474665688 * m, rel=1e-11)
    assert numbers.froude(velocity, water.area, water.width, units) == pytest.approx(
        0.42658368789, rel=1e-11
    )
    assert numbers.reynolds(velocity, water.radius, 1.1386e-6 * m**2) == pytest.approx(
        2273632.95247, rel=1e-11
    )
    assert critical.critical_depth_of_trapezoid(Q * m**3, B * m, Z, units) == pytest.approx(
        1.25092591448 * m, rel=1e-11
    )
    assert critical.critical_depth_of_trapezoid(
        1765.7333360744294, 32.808398950131235, Z, US
    ) * FOOT_M == pytest.approx(1.25092591448, rel=1e-11)


# Channel between rough flood plains, and a trapezoid with rough banks: area, perimeter, n, depth.
OVERBANK = ([20, 30, 20], [21, 14, 21], [0.08, 0.03, 0.06], [1, 3, 1])
BANKS = (
    [2.25, 9.0, 2.25],
    [3.3541019662496847, 6.0, 3.3541019662496847],
    [0.05, 0.03, 0.08],
    [0.75, 1.5, 0.75],
)


@pytest.mark.parametrize(
    ("key", "overbank", "banks"),
    [
        ("horton-einstein", 0.0616186761353, 0.0505823689125),
        ("pavlovskii", 0.0630476010646, 0.0526679917953),
        ("lotter", 0.0364776346315, 0.0312928001812),
        ("cox", 0.0528571428571, 0.0416666666667),
        ("colebatch", 0.0549783386239, 0.0435833337846),
        ("krishnamurthy-christensen", 0.0407540952542, 0.0370582348012),
        ("felkel", 0.0518918918919, 0.0411257670448),
        ("ida-engelund", 0.0397808876967, 0.0339347893255),
        ("perimeter-mean", 0.06, 0.048475241575),
        ("yen-shear-velocity", 0.0569265969504, 0.0453270272916),
        ("yen-friction-slope", 0.0617897946969, 0.0504158359125),
    ],
)
def test_composite_n_by_every_relation(key: str, overbank: float, banks: float) -> None:
    for (area, perimeter, n, depth), expected in ((OVERBANK, overbank), (BANKS, banks)):
        found = composite_n(segments_of(n, area, perimeter, depth))
        assert found[key] == pytest.approx(expected, rel=1e-11)


def test_one_n_everywhere_may_come_out_lower_where_hydraulic_radii_differ() -> None:
    area, perimeter, _, depth = OVERBANK
    found = composite_n(segments_of(0.05, area, perimeter, depth))
    assert found["lotter"] == pytest.approx(0.0458481908569, rel=1e-11)


def test_conveyances_and_coefficients_of_the_overbank_section() -> None:
    area, perimeter, n, _ = OVERBANK
    k = parts.conveyance(n, area, perimeter)
    assert k.tolist() == pytest.approx([241.999132575, 1662.11912246, 322.6655101], rel=1e-11)
    assert k.sum() * np.sqrt(0.0009) == pytest.approx(66.8035129542, rel=1e-11)
    assert parts.velocity_head_coefficient(k, area) == pytest.approx(2.31714681989, rel=1e-11)
    assert parts.momentum_coefficient(k, area) == pytest.approx(1.41483004906, rel=1e-11)
    assert parts.equivalent_n(k, area, perimeter) == pytest.approx(0.0364776346315, rel=1e-11)


def test_the_compound_shape_has_the_parts_of_the_overbank_section() -> None:
    water = shapes.compound(3.0, 10.0, 0.0, 2.0, (20.0, 20.0), 0.0)
    assert water.area.tolist() == [20, 30, 20]
    assert water.perimeter.tolist() == [21, 14, 21]


def test_depth_follows_n_as_the_derivative_says() -> None:
    water, growth = shapes.trapezoid(DEPTH, B, Z), 2 * np.sqrt(5)
    assert depth_exponent(DEPTH, water, growth) == pytest.approx(0.54488055178, rel=1e-11)
    assert velocity_exponent(DEPTH, water, growth) == pytest.approx(-0.705107088805, rel=1e-11)
    more = normal.normal_depth_of_trapezoid(Q, B, Z, 1.2 * N, S)
    assert more / DEPTH == pytest.approx(1.1039, abs=5e-5)
    faster = shapes.trapezoid(DEPTH, B, Z).area / shapes.trapezoid(more, B, Z).area
    assert faster == pytest.approx(0.879018, abs=5e-7)
    assert 1 + stage_change_wide(1, 1, 1.2) == pytest.approx(1.11560062173, rel=1e-11)
    assert 1 / (1 + stage_change_wide(1, 1, 1.2)) == pytest.approx(0.896378130777, rel=1e-11)


def mp_pipe(y: Any) -> tuple[Any, Any, Any]:
    """Area, perimeter and width of a pipe of diameter 1 by integrating its chord."""
    chord: Callable[[Any], Any] = lambda h: 2 * mp.sqrt(h * (1 - h))  # noqa: E731
    return mp.quad(chord, [0, y / 2, y]), mp.acos(1 - 2 * y), chord(y)


@pytest.mark.parametrize("y", ["0.01", "0.3", "0.5", "0.938", "0.999"])
def test_a_pipe_has_the_area_of_its_chords(y: str) -> None:
    with mp.workdps(25):
        area, perimeter, width = map(float, mp_pipe(mp.mpf(y)))
    water = shapes.circle(float(y), 1.0)
    assert water.area == pytest.approx(area, rel=1e-11)
    assert water.perimeter == pytest.approx(perimeter, rel=1e-12)
    assert water.width == pytest.approx(width, rel=1e-12)


def test_depths_of_a_pipe_solve_their_equations_with_many_digits() -> None:
    # Critical depth by another road: root finding with 25 digits on the integrated chord.
    found = critical.critical_depth_of_circle(1.0, 1.0)
    with mp.workdps(25):
        area, _, width = mp_pipe(mp.mpf(found))
        assert float(width / (mp.mpf("9.80665") * area**3)) == pytest.approx(1.0, rel=1e-11)
    full = 0.25 * np.pi * 0.25 ** (2 / 3) / 0.013 * np.sqrt(0.001)
    # Greatest flow 1.0757 times the full pipe's (root of dK/dtheta, 25 digits).
    greatest = 1.07570612940046
    at = normal.normal_depths_of_circle(
        full * np.array([0.5, 1.05, greatest * 0.999999, greatest * 1.000001]), 1.0, 0.013, 0.001
    )
    assert at.count.tolist() == [1, 2, 2, 0]
    # Half the flow of the full pipe runs half full.
    assert at.lowest[0] == pytest.approx(0.5, rel=1e-12)
    assert at.lowest[1] < 0.938181 < at.highest[1]
