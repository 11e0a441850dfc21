"""What an estimate is, from the choices: definitions of range, basis, segments, findings."""

import copy
import json
from typing import Any

import pytest

from roughness import estimate
from roughness.assessment.estimate import Estimate, FactorEstimate

GOOD: dict[str, Any] = {
    "handbook": "usgs-wsp-2339",
    "setting": "channel",
    "factors": {
        "base": {"grade": "gravel"},
        "irregularity": {"grade": "minor"},
        "variation": {"grade": "gradual"},
        "obstruction": {"grade": "negligible"},
        "vegetation": {"grade": "small"},
        "meander": {"grade": "minor"},
    },
}


def with_choice(factor: str, **choice: Any) -> Estimate:
    document = copy.deepcopy(GOOD)
    document["factors"][factor] = choice
    return estimate(document)


def of(factor: str, result: Estimate) -> FactorEstimate:
    return next(entry for entry in result.factors if entry.factor == factor)


@pytest.mark.parametrize(
    ("choice", "low", "best", "high"),
    [
        ({"grade": "minor"}, 0.005, 0.010, 0.015),
        ({"grade": "minor", "best": 0.012}, 0.005, 0.012, 0.015),
        ({"grade": "minor", "best": 0.018, "note": "a weir"}, 0.005, 0.018, 0.018),
        ({"grade": "minor", "best": 0.004, "note": "round"}, 0.004, 0.004, 0.015),
        ({"grade": "minor", "low": 0.008}, 0.008, 0.010, 0.015),
        ({"grade": "minor", "low": 0.012}, 0.012, 0.012, 0.015),
        ({"grade": "minor", "high": 0.008}, 0.005, 0.008, 0.008),
        ({"grade": "minor", "low": 0.017}, 0.017, 0.017, 0.017),
        ({"grade": "minor", "edges": "rounded"}, 0.005, 0.005 + 0.01 / 6, 0.015),
        ({"grade": "minor", "edges": "sharp"}, 0.005, 0.015 - 0.01 / 6, 0.015),
        ({"best": 0.013, "low": 0.01, "high": 0.02, "note": "counted"}, 0.010, 0.013, 0.020),
    ],
)
def test_what_is_not_given_comes_from_the_published_range(
    choice: dict[str, Any], low: float, best: float, high: float
) -> None:
    entry = of("obstruction", with_choice("obstruction", **choice))
    assert (entry.low, entry.best, entry.high) == pytest.approx((low, best, high), abs=1e-12)


def test_n_is_the_sum_times_the_multiplier_at_low_best_and_high() -> None:
    result = with_choice("meander", sinuosity=1.3)
    sums = [
        sum(getattr(entry, side) for entry in result.factors[:5])
        for side in ("low", "best", "high")
    ]
    assert (result.n.low, result.n.best, result.n.high) == pytest.approx([s * 1.15 for s in sums])
    assert of("meander", result).basis == "measured"


@pytest.mark.parametrize(
    ("choice", "expected"),
    [
        ({"grade": "minor", "best": 0.018}, "outside-published-range"),
        ({"grade": "minor", "best": 0.018, "note": "  "}, "outside-published-range"),
        ({"grade": "minor", "best": 0.018, "note": "a weir"}, "outside-published-range-noted"),
        ({"grade": "minor", "blocked_percent": 30}, "grade-against-criterion"),
        ({"blocked_percent": 14}, "near-class-edge"),
    ],
)
def test_findings_come_from_the_choices(choice: dict[str, Any], expected: str) -> None:
    result = with_choice("obstruction", **choice)
    assert expected in [finding.rule for finding in result.findings]
    assert result.stands_stopped == (expected == "outside-published-range")


def test_a_measurement_of_the_part_feeds_findings_and_chooses_nothing() -> None:
    plain = estimate(GOOD)
    measured = estimate(GOOD | {"measured": {"d50_mm": 120.0, "slope": 0.02}})
    assert measured.n == plain.n
    rules = [finding.rule for finding in measured.findings]
    assert "grade-against-criterion" in rules and "slope-steep" in rules


def test_sand_of_a_known_size_is_a_point_between_the_published_sizes() -> None:
    entry = of("base", with_choice("base", d50_mm=0.35, regime="upper"))
    assert entry.grade == "sand"
    assert (entry.low, entry.best, entry.high) == pytest.approx((0.0185,) * 3)


def test_a_handbook_without_plains_hands_them_over_and_says_so() -> None:
    document = copy.deepcopy(GOOD) | {"handbook": "cowan-1956", "setting": "flood-plain"}
    del document["factors"]["variation"], document["factors"]["meander"]
    result = estimate(document)
    assert result.handbook.key == "usgs-wsp-2339"
    assert "handbook-handed-over" in [finding.rule for finding in result.findings]


def segmented(bed: dict[str, Any], banks: dict[str, Any], percent: float = 60) -> Estimate:
    document = {key: value for key, value in GOOD.items() if key != "factors"}
    return estimate(
        document
        | {
            "segments": [
                {"name": "bed", "perimeter_percent": percent, "factors": bed},
                {"name": "banks", "perimeter_percent": 100 - percent, "factors": banks},
            ]
        }
    )


def test_bed_and_banks_come_together_by_equal_velocity() -> None:
    banks = copy.deepcopy(GOOD["factors"]) | {"vegetation": {"grade": "large"}}
    result = segmented(GOOD["factors"], banks)
    assert result.segments is not None
    bed, bank = result.segments
    for side in ("low", "best", "high"):
        n_bed, n_bank = getattr(bed.n, side), getattr(bank.n, side)
        expected = (0.6 * n_bed**1.5 + 0.4 * n_bank**1.5) ** (2 / 3)
        assert getattr(result.n, side) == pytest.approx(expected, rel=1e-12)
    assert sum(entry.share_of_variance for entry in result.factors) == pytest.approx(1)
    assert {entry.segment for entry in result.factors} == {"bed", "banks"}


def test_the_grain_of_the_bed_says_nothing_about_the_banks() -> None:
    gravel = copy.deepcopy(GOOD["factors"]) | {"base": {"grade": "gravel"}}
    soil = copy.deepcopy(GOOD["factors"]) | {"base": {"grade": "firm-soil"}}
    for bed, banks, contradicted in ((gravel, soil, False), (soil, gravel, True)):
        document = {key: value for key, value in GOOD.items() if key != "factors"}
        document["measured"] = {"d50_mm": 40}
        document["handbook"] = "usgs-wsp-2339"
        document["segments"] = [
            {"name": "bed", "perimeter_percent": 60, "factors": bed},
            {"name": "banks", "perimeter_percent": 40, "factors": banks},
        ]
        found = [f.rule for f in estimate(document).findings if "D50" in f.says]
        assert found == (["grade-against-criterion"] if contradicted else [])


def test_what_bed_and_banks_have_in_common_is_found_once() -> None:
    bed = copy.deepcopy(GOOD["factors"]) | {
        "variation": {"grade": "alternating-occasionally"},
        "meander": {"grade": "appreciable"},
    }
    banks = copy.deepcopy(bed) | {"irregularity": {"grade": "moderate"}}
    found = [f.says for f in segmented(bed, banks).findings]
    bends = [says for says in found if "the flow shifting in the bends" in says]
    assert len(bends) == 1 and bends[0].startswith("Variation of the section")
    assert [says for says in found if says.startswith("banks: Irregularity adds 0.008")]


def test_equal_segments_give_the_n_of_the_undivided_part() -> None:
    whole, halves = estimate(GOOD), segmented(GOOD["factors"], GOOD["factors"], 50)
    assert halves.n.best == pytest.approx(whole.n.best, rel=1e-12)
    for name in ("p05", "p16", "p50", "p84", "p95"):
        assert getattr(halves.spread, name) == pytest.approx(getattr(whole.spread, name), abs=1e-9)


def test_the_document_is_what_the_contract_names() -> None:
    document = json.loads(json.dumps(with_choice("obstruction", blocked_percent=8).as_document()))
    assert set(document) == {
        "n", "spread", "people", "factors", "findings", "reasoning", "handbook"
    }  # fmt: skip
    assert set(document["n"]) == {"low", "best", "high"}
    assert set(document["spread"]) == {"mean", "sd", "p05", "p16", "p50", "p84", "p95"}
    assert set(document["people"]) == {"p05", "p95", "source", "provenance"}
    assert set(document["factors"][0]) == {
        "factor", "symbol", "grade", "low", "best", "high", "published", "share_of_variance",
        "basis", "source", "note",
    }  # fmt: skip
    assert set(document["handbook"]) == {"key", "title", "year", "sha256"}
    assert document["people"]["provenance"] == "memory"
    assert len(document["reasoning"]) >= 8


def test_what_people_differ_by_is_wider_than_the_spread_of_the_choices() -> None:
    result = estimate(GOOD)
    assert result.people is not None
    assert result.people.p05 < result.spread.p05 and result.people.p95 > result.spread.p95


def test_the_same_input_gives_the_same_digits() -> None:
    assert estimate(GOOD).as_document() == estimate(json.dumps(GOOD)).as_document()


@pytest.mark.parametrize(("grade", "marked"), [("severe", True), ("minor", False)])
def test_a_value_that_was_only_remembered_says_so_beside_itself(grade: str, marked: bool) -> None:
    factors = {
        "base": {"grade": "gravel"},
        "irregularity": {"grade": "minor"},
        "variation": {"grade": "gradual"},
        "obstruction": {"grade": grade},
        "vegetation": {"grade": "small"},
        "meander": {"grade": "minor"},
    }
    handbook = {"handbook": "usgs-wsp-2339", "setting": "channel"}
    found = estimate(handbook | {"factors": factors})
    (obstruction,) = (entry for entry in found.factors if entry.factor == "obstruction")
    (told,) = (line for line in found.reasoning if line.startswith("Obstruction n3"))
    assert ("from memory" in obstruction.source) is marked
    assert ("from memory" in told) is marked
