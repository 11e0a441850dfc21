"""Which grades a measured number leaves, at every edge of every criterion."""

import math
from typing import Any

import pytest
from hypothesis import given
from hypothesis import strategies as st

from roughness import load_handbook
from roughness.errors import InputError, UnknownNameError
from roughness.handbook import Candidates, candidates, gap_around
from roughness.survey.words import Factor, Plants, Setting

COWAN, SCS, WSP = "cowan-1956", "scs-1963", "usgs-wsp-2339"


def left(key: str, factor: Factor, setting: Setting = "channel", **criteria: Any) -> Candidates:
    return candidates(load_handbook(key), setting, factor, criteria)


def below(value: float) -> float:
    return math.nextafter(value, -math.inf)


def above(value: float) -> float:
    return math.nextafter(value, math.inf)


SINUOSITY = [
    (1.0, "minor", "minor"),
    (below(1.2), "minor", "minor"),
    (1.2, "appreciable", "appreciable"),
    (below(1.5), "appreciable", "appreciable"),
    (1.5, "severe", "appreciable"),
    (above(1.5), "severe", "severe"),
    (4.0, "severe", "severe"),
]


@pytest.mark.parametrize(("sinuosity", "cowan", "wsp"), SINUOSITY)
def test_sinuosity_chooses_by_the_limits_of_each_publication(
    sinuosity: float, cowan: str, wsp: str
) -> None:
    assert left(COWAN, "meander", sinuosity=sinuosity).grades == (cowan,)
    assert left(SCS, "meander", sinuosity=sinuosity).grades == (cowan,)
    assert left(WSP, "meander", sinuosity=sinuosity).grades == (wsp,)


BLOCKED = [
    (0, "none"),
    (above(0), "negligible"),
    (below(5), "negligible"),
    (5, "minor"),
    (below(15), "minor"),
    (15, "appreciable"),
    (50, "appreciable"),
]


@pytest.mark.parametrize(("blocked", "grade"), BLOCKED)
@pytest.mark.parametrize("setting", ["channel", "flood-plain"])
def test_blocked_percent_chooses_by_the_published_limits(
    setting: Setting, blocked: float, grade: str
) -> None:
    assert left(WSP, "obstruction", setting, blocked_percent=blocked).grades == (grade,)


def test_a_channel_blocked_by_more_than_half_is_severe() -> None:
    assert left(WSP, "obstruction", blocked_percent=above(50)).grades == ("severe",)
    assert left(WSP, "obstruction", blocked_percent=100).grades == ("severe",)


def test_a_flood_plain_blocked_by_more_than_half_has_no_published_grade() -> None:
    found = left(WSP, "obstruction", "flood-plain", blocked_percent=above(50))
    assert found.grades == ()
    assert found.beyond
    assert "split the part" in found.advice


@pytest.mark.parametrize("key", [COWAN, SCS])
def test_without_published_limits_a_blocked_percentage_is_noted_and_chooses_nothing(
    key: str,
) -> None:
    found = left(key, "obstruction", blocked_percent=8)
    assert (found.grades, found.says, found.beyond) == ((), "blocked 8 %", False)
    assert "publishes no limits" in found.advice


SIZES = [
    (0.062, "sand"),
    (0.2, "sand"),
    (1.0, "sand"),
    (above(1.0), "coarse-sand"),
    (2.0, "coarse-sand"),
    (above(2.0), "gravel"),
    (64.0, "gravel"),
    (above(64.0), "cobble"),
    (256.0, "cobble"),
    (above(256.0), "boulder"),
    (4000.0, "boulder"),
]


@pytest.mark.parametrize(("d50_mm", "grade"), SIZES)
@pytest.mark.parametrize("setting", ["channel", "flood-plain"])
def test_the_median_size_chooses_the_material(setting: Setting, d50_mm: float, grade: str) -> None:
    assert left(WSP, "base", setting, d50_mm=d50_mm).grades == (grade,)


def test_silt_and_clay_choose_nothing_and_say_so() -> None:
    found = left(WSP, "base", d50_mm=below(0.062))
    assert found.grades == ()
    assert "silt or clay" in found.advice
    assert not found.beyond


@pytest.mark.parametrize("key", [COWAN, SCS])
def test_without_published_sizes_d50_chooses_nothing(key: str) -> None:
    assert left(key, "base", d50_mm=34).grades == ()


def test_nothing_is_published_for_sand_outside_the_published_sizes() -> None:
    sand = load_handbook(WSP).grade("channel", "base", "sand")
    assert sand.published_at(below(0.2)) is None
    assert sand.published_at(above(1.0)) is None


@pytest.mark.parametrize(("d50_mm", "n"), [(0.25, 0.0145), (0.7, 0.024), (0.9, 0.0255)])
def test_sand_between_published_sizes_is_interpolated_linearly(d50_mm: float, n: float) -> None:
    at = load_handbook(WSP).grade("channel", "base", "sand").published_at(d50_mm)
    assert at is not None
    assert at.is_point
    assert at.best == pytest.approx(n, abs=1e-12)


def test_a_material_without_sizes_keeps_its_published_range_at_any_size() -> None:
    cobble = load_handbook(WSP).grade("channel", "base", "cobble")
    assert cobble.published_at(100) == cobble.published


# Depth over height: ratio, kind of plants, setting, grades in the order of the table.
DEPTH_RATIOS = [
    (2.0, "turf", "channel", ("small",)),
    (9.0, "turf", "channel", ("small",)),
    (1.99, "turf", "channel", ("medium",)),
    (1.21, "turf", "channel", ("medium",)),
    (1.2, "turf", "channel", ("medium", "large")),
    (1.0, "turf", "channel", ("medium", "large")),
    (0.99, "turf", "channel", ("large",)),
    (0.8, "turf", "channel", ("large",)),
    (0.79, "turf", "channel", ("large", "very-large")),
    (0.5, "turf", "channel", ("large", "very-large")),
    (0.49, "turf", "channel", ("very-large",)),
    (3.0, "seedlings", "channel", ("small",)),
    (2.99, "seedlings", "channel", ("medium",)),
    (2.0, "seedlings", "channel", ("medium",)),
    (1.99, "seedlings", "channel", ("medium", "large")),
    (3.01, "stemmy", "channel", ("small", "medium")),
    (3.0, "stemmy", "channel", ("medium",)),
    (2.0, "stemmy", "channel", ("medium",)),
    (1.99, "stemmy", "channel", ("medium", "large")),
    (2.0, "crops", "channel", ()),
    (2.0, "crops", "flood-plain", ("large",)),
    (1.99, "crops", "flood-plain", ("large", "very-large")),
    (1.0, "crops", "flood-plain", ("large", "very-large")),
    (0.99, "crops", "flood-plain", ("very-large",)),
    (1.5, "turf", "flood-plain", ("medium",)),
]


@pytest.mark.parametrize(("ratio", "plants", "setting", "grades"), DEPTH_RATIOS)
def test_depth_over_height_leaves_the_grades_of_the_kind_of_plants(
    ratio: float, plants: Plants, setting: Setting, grades: tuple[str, ...]
) -> None:
    found = left(WSP, "vegetation", setting, depth_m=ratio, vegetation_height_m=1.0, plants=plants)
    assert found.grades == grades


COWAN_RATIOS = [
    (3.01, "turf", ("none", "low")),
    (3.0, "turf", ("low",)),
    (2.0, "turf", ("low",)),
    (1.5, "turf", ("medium",)),
    (1.0, "turf", ("medium", "high")),
    (0.6, "turf", ("high", "very-high")),
    (0.49, "turf", ("very-high",)),
    (4.01, "seedlings", ("none", "low")),
    (3.0, "seedlings", ("low",)),
    (2.99, "seedlings", ("medium",)),
    (1.9, "stemmy", ("medium", "high")),
    (3.1, "stemmy", ("low", "medium")),
]


@pytest.mark.parametrize(("ratio", "plants", "grades"), COWAN_RATIOS)
@pytest.mark.parametrize("key", [COWAN, SCS])
def test_past_the_last_class_of_a_kind_the_next_grade_of_the_table_is_a_candidate_too(
    key: str, ratio: float, plants: Plants, grades: tuple[str, ...]
) -> None:
    found = left(key, "vegetation", depth_m=ratio, vegetation_height_m=1.0, plants=plants)
    assert found.grades == grades


def test_a_ratio_of_two_written_decimals_is_not_moved_by_float_noise() -> None:
    # 0.6 / 0.2 is 2.9999999999999996 in binary.
    found = left(WSP, "vegetation", depth_m=0.6, vegetation_height_m=0.2, plants="seedlings")
    assert found.grades == ("small",)


def test_depth_and_height_without_a_kind_of_plants_ask_for_it() -> None:
    found = left(WSP, "vegetation", depth_m=2.0, vegetation_height_m=1.0)
    assert found.grades == ()
    assert found.says.startswith("depth 2.00 times")
    assert "kind of plants" in found.advice


@pytest.mark.parametrize(
    ("factor", "criteria"),
    [
        ("base", {}),
        ("base", {"regime": "upper"}),
        ("irregularity", {}),
        ("variation", {}),
        ("obstruction", {"acting_together": True, "edges": "sharp"}),
        ("vegetation", {"plants": "turf"}),
        ("vegetation", {"depth_m": 1.2, "plants": "turf"}),
        ("meander", {}),
    ],
)
def test_what_was_not_measured_chooses_nothing(factor: Factor, criteria: dict[str, Any]) -> None:
    found = left(WSP, factor, **criteria)
    assert (found.grades, found.says, found.near) == ((), "", ())


NEAR = [
    ("meander", {"sinuosity": 1.14}, ()),
    ("meander", {"sinuosity": 1.15}, ("minor", "appreciable")),
    ("meander", {"sinuosity": 1.25}, ("minor", "appreciable")),
    ("meander", {"sinuosity": 1.26}, ()),
    ("meander", {"sinuosity": 1.45}, ("appreciable", "severe")),
    ("meander", {"sinuosity": 1.55}, ("appreciable", "severe")),
    ("meander", {"sinuosity": 1.56}, ()),
    ("obstruction", {"blocked_percent": 0}, ()),
    ("obstruction", {"blocked_percent": 1}, ()),
    ("obstruction", {"blocked_percent": 3.9}, ()),
    ("obstruction", {"blocked_percent": 4}, ("negligible", "minor")),
    ("obstruction", {"blocked_percent": 6}, ("negligible", "minor")),
    ("obstruction", {"blocked_percent": 8}, ()),
    ("obstruction", {"blocked_percent": 12}, ("minor", "appreciable")),
    ("obstruction", {"blocked_percent": 18}, ("minor", "appreciable")),
    ("obstruction", {"blocked_percent": 40}, ("appreciable", "severe")),
    ("obstruction", {"blocked_percent": 60}, ("appreciable", "severe")),
    ("obstruction", {"blocked_percent": 61}, ()),
    (
        "vegetation",
        {"depth_m": 2.2, "vegetation_height_m": 1, "plants": "turf"},
        ("small", "medium"),
    ),
    ("vegetation", {"depth_m": 2.3, "vegetation_height_m": 1, "plants": "turf"}, ()),
    ("vegetation", {"depth_m": 1.7, "vegetation_height_m": 1, "plants": "turf"}, ()),
    ("base", {"d50_mm": 63.9}, ()),
]


@pytest.mark.parametrize(("factor", "criteria", "grades"), NEAR)
def test_near_a_class_edge_both_grades_are_offered(
    factor: Factor, criteria: dict[str, Any], grades: tuple[str, ...]
) -> None:
    assert left(WSP, factor, **criteria).near == grades


@pytest.mark.parametrize(
    ("factor", "criteria", "names"),
    [
        ("meander", {"sinuosity": below(1.0)}, "sinuosity"),
        ("meander", {"sinuosity": math.nan}, "sinuosity"),
        ("meander", {"channel_length_m": 0.0, "valley_length_m": 10}, "channel_length_m"),
        ("meander", {"channel_length_m": 10, "valley_length_m": -1}, "valley_length_m"),
        ("meander", {"channel_length_m": 90, "valley_length_m": 100}, "shorter"),
        ("meander", {"channel_length_m": 90}, "valley_length_m is due"),
        ("meander", {"valley_length_m": 90}, "channel_length_m is due"),
        ("obstruction", {"blocked_percent": -1}, "blocked_percent"),
        ("obstruction", {"blocked_percent": above(100)}, "blocked_percent"),
        ("base", {"d50_mm": 0}, "d50_mm"),
        ("base", {"d50_mm": math.inf}, "d50_mm"),
        ("vegetation", {"depth_m": 0, "vegetation_height_m": 1}, "depth_m"),
        ("vegetation", {"depth_m": 1, "vegetation_height_m": -2}, "vegetation_height_m"),
        ("vegetation", {"perimeter_percent": 101}, "perimeter_percent"),
    ],
)
def test_an_impossible_number_is_refused_by_its_name_and_place(
    factor: Factor, criteria: dict[str, Any], names: str
) -> None:
    with pytest.raises(InputError, match=names) as refused:
        candidates(load_handbook(WSP), "channel", factor, criteria, where="row 7")
    assert str(refused.value).startswith("row 7: ")


def test_an_unknown_kind_of_plants_names_the_nearest_and_the_known_ones() -> None:
    with pytest.raises(UnknownNameError, match="did you mean 'seedlings'") as refused:
        left(WSP, "vegetation", plants="seedling")
    assert "turf, stemmy, seedlings and crops" in str(refused.value)


def test_lengths_stand_for_sinuosity() -> None:
    found = left(WSP, "meander", channel_length_m=600, valley_length_m=500)
    assert found.grades == ("appreciable",)
    assert found.says == "sinuosity 1.200 from the lengths"


@pytest.mark.parametrize("sinuosity", [1.3, 1.29, 1.287])
def test_a_sinuosity_that_is_the_rounded_ratio_of_its_lengths_is_no_contradiction(
    sinuosity: float,
) -> None:
    found = left(WSP, "meander", sinuosity=sinuosity, channel_length_m=1287, valley_length_m=1000)
    assert found.grades == ("appreciable",)


@pytest.mark.parametrize("sinuosity", [1.2, 1.4, 1.28, 1.286])
def test_a_sinuosity_that_its_lengths_contradict_is_refused(sinuosity: float) -> None:
    with pytest.raises(InputError, match=r"the lengths give 1\.287"):
        left(WSP, "meander", sinuosity=sinuosity, channel_length_m=1287, valley_length_m=1000)


@given(st.floats(1, 1e6), st.sampled_from([COWAN, SCS, WSP]))
def test_any_possible_sinuosity_leaves_exactly_one_grade(sinuosity: float, key: str) -> None:
    assert len(left(key, "meander", sinuosity=sinuosity).grades) == 1


@given(st.floats(0, 100), st.floats(0, 100))
def test_more_blocked_is_never_a_lower_grade(one: float, other: float) -> None:
    handbook = load_handbook(WSP)
    ranks = [
        handbook.rank(
            "channel", "obstruction", left(WSP, "obstruction", blocked_percent=b).grades[0]
        )
        for b in sorted((one, other))
    ]
    assert ranks == sorted(ranks)


@given(
    st.sampled_from([COWAN, SCS, WSP]),
    st.sampled_from(["turf", "stemmy", "seedlings"]),
    st.tuples(st.floats(0.01, 20), st.floats(0.01, 20)).map(sorted),
)
def test_deeper_water_over_the_same_plants_is_never_a_rougher_grade(
    key: str, plants: Plants, depths: list[float]
) -> None:
    handbook = load_handbook(key)
    ranks = [
        [handbook.rank("channel", "vegetation", grade) for grade in found.grades]
        for depth in depths
        if (found := left(key, "vegetation", depth_m=depth, vegetation_height_m=1, plants=plants))
    ]
    assert all(ranks)
    assert min(ranks[0]) >= min(ranks[1])
    assert max(ranks[0]) >= max(ranks[1])


@given(st.floats(1, 3), st.sampled_from([COWAN, WSP]))
def test_the_union_near_an_edge_holds_the_candidate_itself(sinuosity: float, key: str) -> None:
    found = left(key, "meander", sinuosity=sinuosity)
    assert not found.near or set(found.grades) <= set(found.near)


GAPS = [
    (WSP, "channel", "obstruction", 0.0175, (0.015, 0.020)),
    (WSP, "channel", "obstruction", 0.035, (0.030, 0.040)),
    (WSP, "channel", "obstruction", 0.0151, (0.015, 0.020)),
    (WSP, "channel", "obstruction", 0.015, None),
    (WSP, "channel", "obstruction", 0.020, None),
    (WSP, "channel", "obstruction", 0.0045, None),  # printed 0.004, then 0.005
    (WSP, "channel", "obstruction", 0.055, None),  # above all that is published
    (WSP, "flood-plain", "obstruction", 0.0195, None),
    (WSP, "channel", "variation", 0.007, (0.005, 0.010)),
    (WSP, "channel", "irregularity", 0.0055, None),
    (WSP, "channel", "vegetation", 0.001, None),  # below all that is published
    (COWAN, "channel", "irregularity", 0.007, (0.005, 0.010)),
    (COWAN, "channel", "meander", 1.07, (1.0, 1.15)),
    (WSP, "channel", "base", 0.0335, None),  # materials are not degrees of one scale
    (COWAN, "channel", "base", 0.026, None),
    (WSP, "flood-plain", "meander", 1.07, None),  # no such table on flood plains
]


@pytest.mark.parametrize(("key", "setting", "factor", "value", "gap"), GAPS)
def test_a_value_between_two_published_ranges_lies_in_a_gap(
    key: str, setting: Setting, factor: Factor, value: float, gap: tuple[float, float] | None
) -> None:
    assert gap_around(load_handbook(key), setting, factor, value) == gap
