"""Each rule fires where it should and is silent in a neighbouring case."""

from dataclasses import replace
from typing import Any

import numpy as np
import pytest

from roughness.findings import RULES, Facts, Finding, find, nothing_chosen
from roughness.survey.words import FACTORS, Factor

Changes = dict[str, Any]
NAN = float("nan")

# A gravel channel that nothing can be said about: values, grades and measures agree.
QUIET: dict[Factor, Changes] = {
    "base": {"grade": "gravel", "rank": 4.0, "low": 0.028, "best": 0.032, "high": 0.035},
    "irregularity": {"grade": "minor", "rank": 1.0, "low": 0.001, "best": 0.003, "high": 0.005},
    "variation": {"grade": "gradual", "rank": 0.0, "low": 0.0, "best": 0.0, "high": 0.0},
    "obstruction": {"grade": "negligible", "rank": 1.0, "low": 0.0, "best": 0.002, "high": 0.004},
    "vegetation": {"grade": "small", "rank": 1.0, "low": 0.002, "best": 0.006, "high": 0.010},
    "meander": {"grade": "minor", "rank": 0.0, "low": 1.0, "best": 1.0, "high": 1.0},
}


def column(value: Any) -> np.ndarray[Any, Any]:
    return np.array([value])


def facts(changes: Changes | None = None) -> Facts:
    """Return one row: the quiet channel, changed; 'base.grade', 'base.number.d50_mm', 'slope'."""
    changes = dict(changes or {})
    factors = nothing_chosen(1)
    for factor in FACTORS:
        own = dict(QUIET[factor])
        own.setdefault("published_low", own["low"])
        own.setdefault("published_high", own["high"])
        criteria: dict[str, dict[str, Any]] = {"number": {}, "word": {}}
        for key in [key for key in changes if key.startswith(f"{factor}.")]:
            path = key.split(".")[1:]
            target = criteria[path[0]] if len(path) == 2 else own
            target[path[-1]] = changes.pop(key)
        factors[factor] = replace(
            factors[factor],
            **{name: column(value) for name, value in own.items()},
            numbers={name: column(value) for name, value in criteria["number"].items()},
            words={name: column(value) for name, value in criteria["word"].items()},
        )
    row: Changes = {
        "setting": "channel",
        "asked_handbook": "usgs-wsp-2339",
        "handbook": "usgs-wsp-2339",
        "slope_along": "",
        "n_low": 0.031,
        "n_best": 0.043,
        "n_high": 0.054,
    }
    unknown = "d50_mm d84_mm slope hydraulic_radius_m depth_m width_m vegetation_height_m"
    row |= dict.fromkeys(unknown.split(), NAN) | changes
    return Facts(factors=factors, **{name: column(value) for name, value in row.items()})


def findings(changes: Changes | None = None) -> list[Finding]:
    return find(facts(changes))[0]


PLAIN = {"setting": "flood-plain"}
SAND = {
    "base.grade": "sand",
    "base.low": 0.022,
    "base.best": 0.022,
    "base.high": 0.022,
    "base.published_low": 0.022,
    "base.published_high": 0.022,
}
OWN = {"base.own_best": True, "base.noted": True}
LOWER = SAND | {"base.word.regime": "lower"}
ROUGH_BANKS = {"irregularity.best": 0.008, "irregularity.high": 0.01}
ROUGH_BANKS |= {"irregularity.published_high": 0.01}
VARIES = {"variation.best": 0.003, "variation.high": 0.005, "variation.published_high": 0.005}
BENDS = {"meander.best": 1.15, "meander.high": 1.15, "meander.published_high": 1.15}
LOGS = {"obstruction.best": 0.010, "obstruction.high": 0.015, "obstruction.published_high": 0.015}
WOODS = {"vegetation.best": 0.03, "vegetation.high": 0.05, "vegetation.published_high": 0.05}
LEAFY = {"vegetation.best": 0.02, "vegetation.high": 0.025, "vegetation.published_high": 0.025}
BLOCKED: Changes = {"obstruction.measured_says": "blocked 8 %", "obstruction.candidates": "minor"}
BLOCKED |= {"obstruction.candidates_rank": 2.0}
BANKS: Changes = {"vegetation.word.where": "banks"}
SMOOTH: Changes = {"base.grade": "firm-soil-smooth", "base.lower_bound": True}
EVEN = {"irregularity.best": 0.0, "irregularity.low": 0.0, "irregularity.published_low": 0.0}
EVEN |= {"obstruction.best": 0.0, "vegetation.best": 0.0, "vegetation.low": 0.0}
EVEN |= {"vegetation.published_low": 0.0}
FAST = {"hydraulic_radius_m": 1.0, "depth_m": 1.0, "n_best": 0.030}

CASES: list[tuple[str, Changes, Changes]] = [
    ("outside-published-range", {"base.high": 0.04}, {"base.high": 0.035 + 1e-15}),
    ("outside-published-range", {"base.low": 0.02}, {"base.low": 0.02, "base.noted": True}),
    (
        "outside-published-range",
        {"meander.high": 1.2},
        {"meander.high": 1.2, "meander.published_high": 1.3},
    ),
    ("outside-published-range-noted", {"base.high": 0.04, "base.noted": True}, {"base.high": 0.04}),
    (
        "own-value-without-note",
        {"base.published_low": NAN, "base.published_high": NAN},
        {"base.published_low": NAN, "base.published_high": NAN, "base.noted": True},
    ),
    (
        "own-value-without-note",
        {"variation.published_low": NAN, "variation.published_high": NAN},
        PLAIN | {"variation.published_low": NAN, "variation.published_high": NAN},
    ),
    (
        "inside-published-gap",
        {"obstruction.best": 0.017, "obstruction.gap_low": 0.015, "obstruction.gap_high": 0.02},
        {"obstruction.best": 0.015, "obstruction.gap_low": 0.015, "obstruction.gap_high": 0.02},
    ),
    ("range-narrow", {"n_low": 0.041, "n_high": 0.045}, {"n_low": 0.041, "n_high": 0.0454}),
    ("range-narrow", {"n_low": 0.043, "n_high": 0.043}, {"n_low": 0.030, "n_high": 0.043}),
    ("n-low-for-channel", {"n_best": 0.0169}, {"n_best": 0.017}),
    ("n-low-for-channel", {"n_best": 0.0169}, PLAIN | {"n_best": 0.0169}),
    (
        "n-low-for-channel",
        {"n_best": 0.015, "base.grade": "concrete"},
        {"n_best": 0.015, "base.grade": "concrete", "base.noted": True},
    ),
    ("n-high-for-channel", {"n_best": 0.151, "n_high": 0.3}, {"n_best": 0.15, "n_high": 0.3}),
    (
        "n-high-for-channel",
        {"n_best": 0.16, "n_high": 0.3, "slope": 0.019},
        {"n_best": 0.16, "n_high": 0.3, "slope": 0.02},
    ),
    (
        "n-high-for-flood-plain",
        PLAIN | {"n_best": 0.21, "n_high": 0.3},
        PLAIN | {"n_best": 0.20, "n_high": 0.3},
    ),
    ("grade-against-criterion", BLOCKED, BLOCKED | {"obstruction.candidates": "negligible minor"}),
    ("grade-against-criterion", BLOCKED, BLOCKED | {"obstruction.near": "negligible minor"}),
    (
        "grade-against-criterion",
        BLOCKED | {"obstruction.grade": "appreciable", "obstruction.rank": 3.0},
        BLOCKED
        | {"obstruction.grade": "appreciable", "obstruction.rank": 3.0}
        | {"obstruction.word.acting_together": "yes"},
    ),
    (
        "grade-against-criterion",
        BLOCKED
        | {"obstruction.grade": "severe", "obstruction.rank": 4.0}
        | {"obstruction.word.acting_together": "yes"},
        BLOCKED | {"obstruction.grade": "minor", "obstruction.rank": 2.0},
    ),
    (
        "grade-against-criterion",
        {"meander.measured_says": "sinuosity 1.4", "meander.candidates": "appreciable"},
        {"meander.measured_says": "sinuosity 1.1", "meander.candidates": "minor"},
    ),
    (
        "near-class-edge",
        {"meander.measured_says": "sinuosity 1.22", "meander.near": "minor appreciable"},
        {"meander.measured_says": "sinuosity 1.1"},
    ),
    (
        "short-stretch-for-sinuosity",
        {"meander.number.channel_length_m": 99.0, "width_m": 10.0},
        {"meander.number.channel_length_m": 100.0, "width_m": 10.0},
    ),
    (
        "plants-not-in-grade",
        {"vegetation.word.plants": "crops", "vegetation.kinds": "turf seedlings"},
        {"vegetation.word.plants": "turf", "vegetation.kinds": "turf seedlings"},
    ),
    (
        "plants-not-in-grade",
        {"vegetation.word.plants": "crops", "vegetation.kinds": "turf seedlings"},
        {"vegetation.word.plants": "crops", "vegetation.kinds": ""},
    ),
    (
        "bed-sizes-differ",
        {"base.number.d50_mm": 10.0, "d50_mm": 21.0},
        {"base.number.d50_mm": 10.0, "d50_mm": 20.0},
    ),
    ("trees-counted-twice", LOGS | WOODS, LOGS | LEAFY),
    (
        "trees-counted-twice",
        LOGS | WOODS,
        LOGS | WOODS | {"obstruction.word.counted_in": "vegetation"},
    ),
    ("trees-counted-twice", LOGS | WOODS, LOGS | WOODS | {"vegetation.word.plants": "turf"}),
    ("trees-counted-twice", LOGS | WOODS, WOODS),
    (
        "widening-counted-twice",
        ROUGH_BANKS | VARIES,
        ROUGH_BANKS | VARIES | {"variation.noted": True},
    ),
    ("widening-counted-twice", ROUGH_BANKS | VARIES, ROUGH_BANKS),
    ("bends-counted-twice", VARIES | BENDS, VARIES | BENDS | {"meander.noted": True}),
    ("bends-counted-twice", VARIES | BENDS, VARIES),
    ("valley-slope-with-multiplier", BENDS | {"slope_along": "valley"}, {"slope_along": "valley"}),
    (
        "valley-slope-with-multiplier",
        BENDS | {"slope_along": "valley"},
        BENDS | {"slope_along": "channel"},
    ),
    ("smoothest-base-in-nature", SMOOTH, SMOOTH | EVEN),
    ("smoothest-base-in-nature", SMOOTH | EVEN | BENDS, {"base.grade": "firm-soil"} | EVEN | BENDS),
    ("average-base-with-irregularity", ROUGH_BANKS, {}),
    ("average-base-with-irregularity", ROUGH_BANKS, ROUGH_BANKS | {"handbook": "cowan-1956"}),
    ("average-base-with-irregularity", ROUGH_BANKS, ROUGH_BANKS | {"base.grade": "concrete"}),
    ("average-base-with-irregularity", ROUGH_BANKS, ROUGH_BANKS | SMOOTH),
    ("average-base-with-irregularity", ROUGH_BANKS, ROUGH_BANKS | PLAIN),
    ("boulders-counted-twice", LOGS | {"base.grade": "boulder"}, LOGS | {"base.grade": "cobble"}),
    (
        "boulders-counted-twice",
        LOGS | {"base.grade": "boulder"},
        LOGS | {"base.grade": "boulder", "obstruction.noted": True},
    ),
    (
        "bank-plants-against-shape",
        BANKS | {"width_m": 30.0, "depth_m": 1.0},
        BANKS | {"width_m": 29.0, "depth_m": 1.0},
    ),
    (
        "bank-plants-against-shape",
        BANKS | {"width_m": 30.0, "vegetation.number.depth_m": 1.0},
        {"vegetation.word.where": "bed", "width_m": 30.0, "depth_m": 1.0},
    ),
    (
        "bank-plants-against-shape",
        BANKS | {"width_m": 10.0, "depth_m": 1.0, "vegetation.best": 0.031},
        BANKS | {"width_m": 10.0, "depth_m": 1.0, "vegetation.best": 0.030},
    ),
    (
        "bank-plants-against-shape",
        BANKS | {"width_m": 30.0, "depth_m": 1.0},
        BANKS | {"width_m": 30.0, "depth_m": 1.0, "segment": "banks"},
    ),
    (
        "few-plants-for-their-value",
        {"vegetation.number.perimeter_percent": 24.0},
        {"vegetation.number.perimeter_percent": 25.0},
    ),
    (
        "few-plants-for-their-value",
        {"vegetation.number.perimeter_percent": 24.0},
        {"vegetation.number.perimeter_percent": 24.0, "vegetation.best": 0.005},
    ),
    (
        "flood-plain-mostly-blocked",
        PLAIN | {"obstruction.number.blocked_percent": 51.0},
        PLAIN | {"obstruction.number.blocked_percent": 50.0},
    ),
    (
        "flood-plain-mostly-blocked",
        PLAIN | {"obstruction.number.blocked_percent": 51.0},
        {"obstruction.number.blocked_percent": 51.0},
    ),
    ("lower-regime-from-table", LOWER, LOWER | OWN),
    ("lower-regime-from-table", LOWER | {"base.own_best": True}, SAND | {"base.word.regime": "x"}),
    ("lower-regime-from-table", LOWER, PLAIN | LOWER),
    ("lower-regime-own-value", LOWER | OWN, LOWER),
    (
        "regime-not-settled",
        SAND | {"base.word.regime": "transition"},
        SAND | {"base.word.regime": "upper"},
    ),
    ("regime-not-settled", SAND | {"base.word.regime": "unknown"}, {"base.word.regime": "unknown"}),
    (
        "handbook-handed-over",
        PLAIN | {"asked_handbook": "cowan-1956"},
        PLAIN | {"asked_handbook": ""},
    ),
    (
        "hydraulic-radius-beyond-method",
        {"hydraulic_radius_m": 4.61},
        {"hydraulic_radius_m": 4.6},
    ),
    ("slope-little-tested", {"slope": 0.002}, {"slope": 0.0019}),
    ("slope-little-tested", {"slope": 0.0099}, {"slope": 0.01}),
    ("slope-little-tested", {"slope": 0.002}, {"slope": 0.002, "base.grade": "concrete"}),
    ("slope-little-tested", {"slope": 0.002}, PLAIN | {"slope": 0.002}),
    ("slope-steep", {"slope": 0.01}, {"slope": 0.0099}),
    ("slope-steep", {"slope": 0.01}, {"slope": 0.01, "base.grade": "concrete"}),
    (
        "grains-stand-in-the-flow",
        {"hydraulic_radius_m": 0.119, "d84_mm": 100.0},
        {"hydraulic_radius_m": 0.120, "d84_mm": 100.0},
    ),
    (
        "grains-stand-in-the-flow",
        {"depth_m": 0.119, "d84_mm": 100.0, "base.own_best": True},
        {"depth_m": 0.119, "d84_mm": 100.0} | OWN,
    ),
    (
        "few-grains-deep",
        {"hydraulic_radius_m": 0.399, "d84_mm": 100.0},
        {"hydraulic_radius_m": 0.400, "d84_mm": 100.0},
    ),
    (
        "few-grains-deep",
        {"hydraulic_radius_m": 0.119, "d84_mm": 100.0} | OWN,
        {"hydraulic_radius_m": 0.119, "d84_mm": 100.0},
    ),
    # n 0.030, R = depth = 1 m: V = S^0.5 / 0.03, so Fr = 1 at S = 0.03^2 * 9.80665 = 0.008826
    ("supercritical-reach", FAST | {"slope": 0.00884}, FAST | {"slope": 0.00881}),
    (
        "supercritical-reach",
        FAST | {"slope": 0.00884},
        FAST | {"slope": 0.00884, "base.grade": "concrete"},
    ),
]


def test_nothing_is_said_about_a_quiet_channel() -> None:
    assert findings() == []


@pytest.mark.parametrize(("key", "fires", "silent"), CASES)
def test_a_rule_fires_in_its_case_and_is_silent_next_to_it(
    key: str, fires: Changes, silent: Changes
) -> None:
    assert [f.rule for f in findings(fires)].count(key) == 1
    assert key not in [f.rule for f in findings(silent)]


def test_every_rule_has_a_case_here() -> None:
    assert {key for key, _, _ in CASES} == {rule.key for rule in RULES}


@pytest.mark.parametrize(("key", "fires", "_silent"), CASES)
def test_a_finding_is_a_sentence_that_quotes_no_python_and_no_noise(
    key: str, fires: Changes, _silent: Changes
) -> None:
    (finding,) = [f for f in findings(fires) if f.rule == key]
    assert finding.says[0].isupper() or finding.says.startswith("n ")
    assert finding.says.endswith((".", "?"))
    assert not any(noise in finding.says for noise in ("nan", "np.", "array", "0000000", "  "))


def test_findings_come_worst_first() -> None:
    levels = [f.level for f in findings({"base.high": 0.05, "slope": 0.003} | VARIES | BENDS)]
    assert levels == sorted(levels, key=["stop", "ask", "tell"].index)
    assert set(levels) == {"stop", "ask", "tell"}


def test_a_finding_about_one_factor_names_that_factor() -> None:
    (finding,) = findings({"vegetation.high": 0.02})
    assert (finding.level, finding.factor) == ("stop", "vegetation")
    assert finding.says == (
        "Vegetation 0.006, from 0.002 to 0.020, leaves the published 0.002 to 0.010 for "
        "'small', and no note says why; say why in a note or return to the published range."
    )


def test_a_contradicted_grade_is_told_beside_what_was_measured() -> None:
    (finding,) = findings(BLOCKED)
    assert finding.says == (
        "Blocked 8 % points to 'minor', but the obstruction was graded 'negligible'; "
        "correct one of them or say in a note why both hold."
    )


def test_a_froude_number_is_told_with_one_decimal() -> None:
    # V = 0.04^0.5 / 0.03 = 6.667 m/s, Fr = 6.667 / (9.80665 * 1)^0.5 = 2.129
    said = [f.says for f in findings(FAST | {"slope": 0.04}) if f.rule == "supercritical-reach"]
    assert "Froude number of 2.1;" in said[0]


def test_a_value_that_prints_like_its_limit_is_said_to_be_just_beyond_it() -> None:
    (finding,) = findings(PLAIN | {"n_best": 0.203, "n_high": 0.3})
    assert finding.says.startswith("n 0.20 is just above 0.20, the most measured")


def test_a_single_published_value_is_called_one() -> None:
    (finding,) = findings(SAND | {"base.high": 0.025})
    assert "leaves the single published 0.022 for 'sand'" in finding.says


def test_a_finding_about_a_segment_starts_with_its_name() -> None:
    (finding,) = findings({"segment": "left\x1bbank", "base.high": 0.04})
    assert finding.says.startswith("left\\u001bbank: Base value 0.032")


def test_rules_about_the_whole_part_are_silent_for_its_segments() -> None:
    absurd = {"n_low": 0.3, "n_best": 0.3, "n_high": 0.3, "slope": 0.02, "hydraulic_radius_m": 9.0}
    assert {f.rule for f in findings(absurd | {"slope": 0.019})} == {
        "range-narrow",
        "n-high-for-channel",
        "slope-steep",
        "hydraulic-radius-beyond-method",
    }
    assert findings(absurd | {"segment": "bed"}) == []


def test_absurd_measurements_do_not_break_the_rules() -> None:
    found = findings(
        {"slope": 1e308, "hydraulic_radius_m": 1e308, "depth_m": 1e-300, "width_m": 1e308}
        | {"d84_mm": 1e-308, "vegetation.word.where": "banks"}
    )
    told = {f.rule: f.says for f in found}
    assert {"slope-steep", "bank-plants-against-shape", "supercritical-reach"} <= set(told)
    assert "a Froude number of over a million;" in told["supercritical-reach"]
