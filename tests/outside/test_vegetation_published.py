"""n of stems and grass against a published site and values computed outside this program.

How the constants are known is said beside each: seen, second hand, memory.
"""

import pytest

from roughness.hydraulics import grass, vegetation

FT = 0.3048


def test_thompson_creek_is_reproduced() -> None:
    # FHWA-TS-84-204, fig. 20, p. 38, Thompson Creek near Clara, Mississippi (seen): nb 0.025,
    # n1 0.005, n3 0.010, n4' 0.015; Vegd 0.0115 /ft, C* 22.7, R = depth 2.9 ft; printed n 0.20.
    boundary = 0.025 + 0.005 + 0.010 + 0.015
    assert boundary == pytest.approx(0.055)
    n = vegetation.n_with_stems(boundary, 0.0115 / FT, 22.7, 2.9 * FT)
    assert round(n, 2) == 0.20
    # With 40 digits and exact constants outside: 0.200170466012 (with the printed 1.49 and 64.4:
    # 0.200604).
    assert n == pytest.approx(0.200170466012, rel=1e-11)


def test_the_density_method_and_its_inverse_agree_with_a_separate_program() -> None:
    # n0 0.025, Vegd 0.0115 /ft, C* 11, R 2.9 ft; WSP 2339, eq. 7 (second hand).
    density, radius = 0.0115 / FT, 2.9 * FT
    n = vegetation.n_with_stems(0.025, density, 11.0, radius)
    assert n == pytest.approx(0.13629180765, rel=1e-11)
    assert vegetation.n4_of_stems(0.025, density, 11.0, radius) == pytest.approx(
        0.11129180765, rel=1e-10
    )
    assert vegetation.n_with_stems(0.0, density, 11.0, radius) == pytest.approx(
        0.133979314943, rel=1e-11
    )
    assert vegetation.density_from_n(n, 0.025, 11.0, radius) == pytest.approx(density, rel=1e-11)
    assert vegetation.n_with_stems(0.025, density, 11.0, 2 * radius) / n == pytest.approx(
        1.57121120783, rel=1e-10
    )


def test_density_of_a_synthetic_count() -> None:
    # Number times diameter (ft): 100x0.1, 40x0.25, 25x0.5, 10x1.0, 4x1.5, on 100 by 50 ft; the
    # sum is 48.5 ft and Vegd 0.0097 /ft = 0.0318241469816 /m (worked by hand).
    diameters = [d * FT for d in (0.1, 0.25, 0.5, 1.0, 1.5)]
    density = vegetation.vegetation_density([100, 40, 25, 10, 4], diameters, 5000 * FT**2)
    assert density == pytest.approx(0.0318241469816, rel=1e-11)


def test_rigid_stems_under_and_above_the_water() -> None:
    # Baptist and others 2007 (form and kappa 0.41 second hand): Cb 45, Cd 1, mD 1.5 /m, h 1 m;
    # C 3.60439254005 emergent, 12.6703966179 with k 0.4 m, computed outside.
    emergent = vegetation.n_with_submerged_stems(1 / 45, 1.5, 1.0, 2.0, 1.0)
    assert 1 / emergent == pytest.approx(3.60439254005, rel=1e-11)
    assert emergent == pytest.approx(vegetation.n_with_stems(1 / 45, 1.5, 1.0, 1.0), rel=1e-12)
    submerged = vegetation.n_with_submerged_stems(1 / 45, 1.5, 1.0, 0.4, 1.0)
    assert submerged == pytest.approx(0.0789241276465, rel=1e-11)


# Temple and others 1987, USDA AH 667 (memory): n at VR 1 and 5 ft2/s, lowest VR in ft2/s.
# Kouwen's relation as in FHWA HEC-15 (memory): n at R 1 ft, S 0.02. Computed outside.
GRASS: dict[grass.Retardance, tuple[float, float, float, float]] = {
    "A": (0.304221264067, 0.092467768294, 0.790569415042, 0.44870663793),
    "B": (0.150932886686, 0.0607636280674, 0.403341960684, 0.10605997414),
    "C": (0.0823480913433, 0.0422690017046, 0.185528261998, 0.0601372538812),
    "D": (0.0583485949635, 0.0343869741462, 0.103847831911, 0.0475542207873),
    "E": (0.036712425931, 0.0260531185987, 0.0351901589152, 0.0414445453076),
}


@pytest.mark.parametrize("retardance", grass.RETARDANCES)
def test_grass_of_each_class(retardance: grass.Retardance) -> None:
    slow, fast, lowest, sloping = GRASS[retardance]
    index = grass.CURVE_INDEX[retardance]
    assert grass.n_of_grass(index, 1 * FT**2) == pytest.approx(slow, rel=1e-10)
    assert grass.n_of_grass(index, 5 * FT**2) == pytest.approx(fast, rel=1e-10)
    assert grass.lowest_vr(index) == pytest.approx(lowest * FT**2, rel=1e-10)
    assert grass.n_of_grass_at_slope(retardance, 1 * FT, 0.02) == pytest.approx(sloping, rel=1e-10)


def test_curve_index_from_height_and_number_of_stems() -> None:
    # h 0.67 ft, 400 stems a square foot: 5.93801934515 (Temple and others 1987, memory).
    index = grass.curve_index(0.67 * FT, 400 / FT**2)
    assert index == pytest.approx(5.93801934515, rel=1e-11)
