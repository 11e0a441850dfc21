"""Formulas of grain, slope and sand against values computed outside this program.

Each value was computed by a separate program with 40 digits from the constants named beside it
(metres, g = 9.80665 m/s2, 1 ft = 0.3048 m). How the constants are known is said too: "seen" in
the publication or a copy, "second hand" in a text that quotes it, "memory".
The case is R = 1 m, d50 45, d65 60, d75 75, d84 90, d90 110 mm, S = 0.004 unless said.
"""

from collections.abc import Callable
from typing import Any

import numpy as np
import pytest

from roughness.comparison import grain, gravel, sand, slope
from roughness.hydraulics.rough_walls import n_from_roughness_height

FT = 0.3048

VALUES: dict[str, tuple[Callable[[], Any], float]] = {
    # Strickler 1923: 21.1 (m), second hand.
    "Strickler, 1/21.1": (lambda: grain.strickler(0.045), 0.0282652586308),
    # The second form, 0.0342 (ft), memory.
    "Strickler, 0.0342 ft": (lambda: grain.strickler_0342(0.045), 0.0248633149451),
    # Meyer-Peter & Mueller 1948: 26, second hand.
    "Meyer-Peter & Mueller": (lambda: grain.meyer_peter_mueller(0.11), 0.0266231087532),
    # Lane & Carlson 1953: 39 with d75 = 2.952756 in, memory.
    "Lane & Carlson": (lambda: grain.lane_carlson(0.075), 0.0307118975779),
    # USACE EM 1110-2-1601: 0.034 and 0.038 with k = d90 = 0.360892 ft, memory.
    "EM 1110-2-1601, velocity": (lambda: grain.stone_bed_velocity(0.11), 0.0286885459785),
    "EM 1110-2-1601, capacity": (lambda: grain.stone_bed_capacity(0.11), 0.0320636690348),
    # Keulegan 1938: a = 12.2 second hand; R 1.2 m, ks 0.15 m.
    "log law": (lambda: n_from_roughness_height(1.2, 0.15), 0.0287763497297),
    # Limerinos 1970, USGS WSP 1898-B: 0.0926 (ft), 1.16, 2.0; seen as HDS-6 eq. 3.19.
    "Limerinos, d84": (lambda: gravel.limerinos_d84(1.0, 0.09), 0.0347154447556),
    # 0.35 + 2.0 log(R/d50), second hand.
    "Limerinos, d50": (lambda: gravel.limerinos_d50(1.0, 0.045), 0.0370872377782),
    # Bray 1979: d50 and d90 second hand, d65, slope and log memory.
    "Bray, d50": (lambda: gravel.bray_d50(0.045), 0.0340392304674),
    "Bray, d65": (lambda: gravel.bray_d65(0.060), 0.0341914470447),
    "Bray, d90": (lambda: gravel.bray_d90(0.110), 0.0347718685011),
    "Bray, slope": (lambda: slope.bray_slope(0.004), 0.0391379395177),
    "Bray, log": (lambda: gravel.bray_log(1.0, 1.0, 0.045), 0.0329499125717),
    # Hey 1979: a = 11.1 second hand (as 1.02 + 2.03 log), a of the largest depth memory.
    "Hey, a": (lambda: gravel.hey_shape(1.0, 1.5), 12.6071126695),
    "Hey": (lambda: gravel.hey(1.0, 0.09, gravel.hey_shape(1.0, 1.5)), 0.034709904688),
    "Hey, a = 11.1": (lambda: gravel.hey(1.0, 0.09), 0.0359504912314),
    # Griffiths 1981: 0.76, 1.98 second hand.
    "Griffiths": (lambda: gravel.griffiths(1.0, 0.045), 0.0329477898313),
    # Bathurst 1985: 4, 5.62 second hand.
    "Bathurst": (lambda: gravel.bathurst(1.0, 1.0, 0.09), 0.0323301486092),
    # FHWA HDS-6, p. 3.31, eqs 3.20 and 3.21: seen.
    "HDS-6 eq. 3.20": (lambda: gravel.gravel_power(1.0, 0.09), 0.0325463053831),
    "HDS-6 eq. 3.21": (lambda: gravel.gravel_log(1.0, 0.09), 0.0353751085631),
    # Ferguson 2007: 6.5, 2.5 second hand.
    "Ferguson": (lambda: gravel.ferguson(1.0, 0.09), 0.034838993615),
    # Rickenmann & Recking 2011, memory: q 2 m2/s.
    "Rickenmann & Recking, U": (
        lambda: gravel.rickenmann_recking_velocity(2.0, 0.004, 0.09),
        1.87852075804,
    ),
    "Rickenmann & Recking, n": (
        lambda: gravel.rickenmann_recking(1.06466750044, 0.09),
        0.0351040045342,
    ),
    # Brownlie 1983, memory: R 2 m, d50 0.4 mm, S 0.0003, gradation 1.6.
    "Brownlie, lower": (lambda: sand.brownlie_lower(2.0, 0.0004, 0.0003, 1.6), 0.0268139911781),
    "Brownlie, upper": (lambda: sand.brownlie_upper(2.0, 0.0004, 0.0003, 1.6), 0.0155321671066),
    # Jarrett 1984: 0.39, 0.38, -0.16 second hand: S 0.01, R 3 ft.
    "Jarrett": (lambda: slope.jarrett(3 * FT, 0.01), 0.0568493110996),
    # Sauer 1990 as cited in WSP 2441, memory: S 0.002, R 5 ft.
    "Sauer": (lambda: slope.sauer(5 * FT, 0.002), 0.0408785690278),
    # Lacey, memory: V = 10.8 R^(2/3) S^(1/3).
    "Lacey": (lambda: slope.lacey(0.004), 0.036890927682),
    # Dingman & Sharma 1997, abstract, seen: A 40 m2, R 1.5 m, S 0.003.
    "Dingman & Sharma, Q": (
        lambda: slope.dingman_sharma_discharge(40.0, 1.5, 0.003),
        62.8455628555,
    ),
    "Dingman & Sharma, n": (lambda: slope.dingman_sharma(40.0, 1.5, 0.003), 0.045681480562),
    # gamma R S V: R 3 ft, S 0.001, V 4 ft/s. By definition.
    "stream power": (lambda: sand.stream_power(3 * FT, 0.001, 4 * FT), 10.9328111666),
}


@pytest.mark.parametrize("name", VALUES)
def test_a_formula_gives_what_a_separate_program_gives(name: str) -> None:
    formula, value = VALUES[name]
    assert float(formula()) == pytest.approx(value, rel=1e-10)


def test_the_published_metric_constants_are_the_rounded_ones_of_the_us_forms() -> None:
    # FHWA HDS-6, eqs 3.19 and 3.22 (seen): 0.113 in metres beside 0.0927 in feet; the exact
    # 1/sqrt(8g) is 0.112900 and Limerinos' 0.0926 in metres 0.112878: all print as 0.113.
    from roughness.comparison.gravel import _LIMERINOS

    assert float(f"{_LIMERINOS:.3g}") == 0.113
    # Jarrett 1984 in metres is printed with 0.32 (second hand), exactly 0.322483.
    assert float(slope.jarrett(1.0, 1.0)) == pytest.approx(0.322483130486, rel=1e-11)
    assert float(slope.sauer(1.0, 1.0)) == pytest.approx(0.120968275129, rel=1e-11)
    # Strickler's 0.0389 in feet (second hand) is his 21.1 in metres.
    in_feet = float(grain.strickler(0.3048))
    assert float(f"{in_feet:.3g}") == 0.0389


def test_brownlies_n_is_that_of_his_depth_form() -> None:
    # y/d50 = 0.3724 q*^0.6539 S^-0.2542 sg^0.1050 and 0.2836 q*^0.6248 S^-0.2877 sg^0.08013
    # (memory), n computed from them outside: 0.02696944 and 0.01561633; 0.6 % is their rounding.
    lower = float(sand.brownlie_lower(2.0, 0.0004, 0.0003, 1.6))
    upper = float(sand.brownlie_upper(2.0, 0.0004, 0.0003, 1.6))
    assert lower == pytest.approx(0.0269694380491, rel=0.006)
    assert upper == pytest.approx(0.0156163295359, rel=0.006)


def test_two_formulas_of_the_same_streams_agree_on_the_depth() -> None:
    # For q = 2 m2/s the variable-power equation of Ferguson 2007 was solved outside for a depth
    # of 1.0567830581 m; Rickenmann & Recking give 1.0646675 m: 0.7 % apart.
    depth = 1.0567830581
    velocity = depth ** (2 / 3) * np.sqrt(0.004) / float(gravel.ferguson(depth, 0.09))
    assert velocity * depth == pytest.approx(2.0, rel=1e-9)


def test_shallow_flow_over_boulders_keeps_the_published_limit() -> None:
    # Ferguson 2007 at R = d84, sqrt(8/f) computed outside: 2.33336401551.
    n = float(gravel.ferguson(1.0, 1.0))
    assert 1 / (n * np.sqrt(9.80665)) == pytest.approx(2.33336401551, rel=1e-10)


def test_the_law_of_deep_flow_nears_the_power_of_one_sixth() -> None:
    # Exponent of U** in deep flow: 0.6 - 0.8214 * 0.2435 = 0.3999891; Manning's needs 0.4, so
    # doubling depth and d84 alike and going deep, n/d84^(1/6) stays: power 1/6 within 0.1 %.
    deep = [float(gravel.rickenmann_recking(h, 0.01)) for h in (500.0, 1000.0)]
    assert deep[1] / deep[0] == pytest.approx(1.0, abs=0.002)
