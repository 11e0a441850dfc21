"""n from measured flow against computed profiles and a published reach.

The relation is that of Barnes 1967 (USGS Water-Supply Paper 1849) and Dalrymple and Benson
1967 (USGS TWRI 3-A2), both from memory: no published computation with all its areas,
perimeters and falls could be read. The profiles below were computed upstream by other programs
than this one (one with 40 digits), with the n that must be found again.
"""

from typing import Any

import numpy as np
import pytest

from roughness.hydraulics.back_calculation import back_calculate, n_of_uniform_flow

FT = 0.3048
KU = (1 / FT) ** (1 / 3)

# Rectangular sections 14, 11, 16 and 13 m wide on beds at 100.30, 100.20, 100.08 and 100.00 m,
# 30 m3/s, n 0.035, k 0.5 where the flow expands and 0 where it contracts.
FOUR_SECTIONS: dict[str, Any] = {
    "distance": [0.0, 50.0, 90.0, 150.0],
    "area": [24.3347749464155, 18.740480469306, 28.9435695129766, 23.4],
    "wetted_perimeter": [17.4763964209165, 14.4073600853284, 19.6179461891221, 16.6],
    "water_level": [102.038198210458, 101.903680042664, 101.888973094561, 101.8],
}
FLOW = 30.0


def first(count: int) -> dict[str, Any]:
    return {name: values[:count] for name, values in FOUR_SECTIONS.items()}


def test_n_of_a_computed_profile_is_found_again() -> None:
    found = back_calculate(FLOW, **FOUR_SECTIONS)
    assert found.whole.n == pytest.approx(0.035, rel=1e-11)
    assert found.subreaches.n == pytest.approx([0.035] * 3, rel=1e-10)
    assert found.whole.loss == pytest.approx(0.0379403236432, rel=1e-9)


def test_n_of_its_first_two_sections_is_the_same() -> None:
    assert back_calculate(FLOW, **first(2)).whole.n == pytest.approx(0.035, rel=1e-11)


def test_feet_give_the_same_n() -> None:
    feet: dict[str, Any] = {name: np.array(values) / FT for name, values in FOUR_SECTIONS.items()}
    feet["area"] = feet["area"] / FT
    found = back_calculate(FLOW / FT**3, **feet, gravity=9.80665 / FT)
    assert KU * found.whole.n == pytest.approx(0.035, rel=1e-11)


def test_without_velocity_heads_n_would_be_11_percent_too_high() -> None:
    # alpha 0 leaves the velocity heads out: wrong, and as wrong as published for this case.
    assert back_calculate(FLOW, **FOUR_SECTIONS, alpha=0.0).whole.n == pytest.approx(
        0.0387882281195, rel=1e-11
    )


def test_without_expansion_losses_n_would_be_9_percent_too_high() -> None:
    found = back_calculate(FLOW, **FOUR_SECTIONS, expansion_loss=0.0)
    assert found.whole.n == pytest.approx(0.0382706377664, rel=1e-11)


def test_one_section_with_a_slope_is_uniform_flow() -> None:
    # 24 * (24 / 15.2)^(2/3) * 0.0021^(1/2) / 38
    assert n_of_uniform_flow(38.0, 24.0, 15.2, 0.0021) == pytest.approx(0.0392448248328, rel=1e-11)


def test_other_computed_profiles_in_both_systems() -> None:
    four = back_calculate(
        89.543182,
        [0, 35, 77, 115],
        [42.0, 39.5, 44.0, 40.0],
        [24.5, 23.0, 26.0, 23.8],
        [12.40, 12.25, 12.13, 11.97],
    )
    assert four.whole.n == pytest.approx(0.038, rel=1e-8)
    assert four.velocity_head == pytest.approx([0.231748, 0.262011, 0.211159, 0.255502], abs=6e-7)
    two = back_calculate(62.985522, [0, 50], [30.0, 28.0], [19.0, 18.0], [8.0, 7.85])
    assert two.whole.n == pytest.approx(0.03, rel=1e-8)
    # ft, with the rounded constants 1.486 and 32.174 ft/s2
    three = back_calculate(
        8473.40458,
        [0, 180, 390],
        [1210.0, 1150.0, 1275.0],
        [152.0, 148.0, 160.0],
        [105.30, 104.72, 104.15],
        gravity=32.174,
    )
    assert 1.486 * three.whole.n == pytest.approx(0.045, rel=1e-8)


def test_reach_averages_of_the_columbia_at_vernita_come_near_the_published_n() -> None:
    """Barnes 1967, n 0.024: tabulated by il.water.usgs.gov/proj/nvalues, station 12464500 (seen).

    22 May 1949: 406308.8 ft3/s, 48566.7 ft2, R 27.94 ft, 8.37 ft/s, slope 0.000194. The published
    n comes from the sections one by one, so that averages come near it and do not meet it.
    """
    flow, area, radius = 406308.8 * FT**3, 48566.7 * FT**2, 27.94 * FT
    assert flow / area == pytest.approx(8.37 * FT, rel=1e-3)
    n = n_of_uniform_flow(flow, area, area / radius, 0.000194)
    assert n == pytest.approx(0.02278, abs=5e-6)
    assert n == pytest.approx(0.024, rel=0.06)
