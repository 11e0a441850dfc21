"""A finding depends on its own row alone, and nothing unknown is held against anybody."""

from typing import Any

import numpy as np
from hypothesis import given, settings
from hypothesis import strategies as st

from roughness.findings import FactorFacts, Facts, find, met_rules
from roughness.survey.words import FACTORS

NAN = float("nan")
GRADES = ["", "gravel", "boulder", "sand", "concrete", "minor", "severe", "large"]
small = st.sampled_from([NAN, 0.0, 0.004, 0.005, 0.008, 0.02, 0.03, 0.3])
rank = st.sampled_from([NAN, 0.0, 1.0, 2.0])
flag = st.booleans()
grade = st.sampled_from(GRADES)
several = st.sampled_from(["", "minor", "minor severe", "gravel"])
measure = st.sampled_from([NAN, 0.001, 0.01, 0.3, 1.0, 5.0, 60.0])

FACTOR_ROW: dict[str, st.SearchStrategy[Any]] = {
    "grade": grade,
    "rank": rank,
    "candidates_rank": rank,
    **dict.fromkeys(
        ["low", "best", "high", "published_low", "published_high", "gap_low", "gap_high"], small
    ),
    **dict.fromkeys(["own_best", "noted", "lower_bound"], flag),
    "measured_says": st.sampled_from(["", "blocked 8 %"]),
    "candidates": several,
    "near": several,
    "kinds": st.sampled_from(["", "turf", "turf crops"]),
}
NUMBERS = {"blocked_percent", "d50_mm", "depth_m", "perimeter_percent", "channel_length_m"}
WORDS = {
    "plants": ["", "turf", "crops"],
    "where": ["", "banks", "bed"],
    "regime": ["", "lower", "unknown"],
    "acting_together": ["", "yes", "no"],
    "counted_in": ["", "obstruction"],
}
ROW: dict[str, st.SearchStrategy[Any]] = {
    "setting": st.sampled_from(["channel", "flood-plain"]),
    "asked_handbook": st.sampled_from(["usgs-wsp-2339", "cowan-1956"]),
    "handbook": st.sampled_from(["usgs-wsp-2339", "cowan-1956"]),
    "segment": st.sampled_from(["", "bed"]),
    "slope_along": st.sampled_from(["", "valley"]),
    **dict.fromkeys(["n_low", "n_best", "n_high"], small),
    **dict.fromkeys(
        [
            "d50_mm",
            "d84_mm",
            "slope",
            "hydraulic_radius_m",
            "depth_m",
            "width_m",
            "vegetation_height_m",
        ],
        measure,
    ),
}
one_row = st.fixed_dictionaries(
    {
        "row": st.fixed_dictionaries(ROW),
        "factors": st.fixed_dictionaries(
            {
                factor: st.fixed_dictionaries(
                    {
                        "row": st.fixed_dictionaries(FACTOR_ROW),
                        "numbers": st.fixed_dictionaries(dict.fromkeys(sorted(NUMBERS), measure)),
                        "words": st.fixed_dictionaries(
                            {name: st.sampled_from(known) for name, known in WORDS.items()}
                        ),
                    }
                )
                for factor in FACTORS
            }
        ),
    }
)


def columns(rows: list[dict[str, Any]]) -> dict[str, Any]:
    return {name: np.array([row[name] for row in rows]) for name in rows[0]}


def facts(rows: list[dict[str, Any]]) -> Facts:
    return Facts(
        factors={
            factor: FactorFacts(
                **columns([row["factors"][factor]["row"] for row in rows]),
                numbers=columns([row["factors"][factor]["numbers"] for row in rows]),
                words=columns([row["factors"][factor]["words"] for row in rows]),
            )
            for factor in FACTORS
        },
        **columns([row["row"] for row in rows]),
    )


@settings(max_examples=60, deadline=None)
@given(st.lists(one_row, min_size=1, max_size=4))
def test_row_by_row_and_all_at_once_find_the_same(rows: list[dict[str, Any]]) -> None:
    assert find(facts(rows)) == [find(facts([row]))[0] for row in rows]


@settings(max_examples=40, deadline=None)
@given(st.lists(one_row, min_size=1, max_size=4))
def test_the_rules_met_are_the_findings_without_their_sentences(rows: list[dict[str, Any]]) -> None:
    met = [(m.rule.key, m.factor, row) for m in met_rules(facts(rows)) for row in m.rows]
    found = [(f.rule, f.factor, row) for row, said in enumerate(find(facts(rows))) for f in said]
    assert sorted(met, key=str) == sorted(found, key=str)


UNMEASURED = dict.fromkeys(
    [
        "d50_mm",
        "d84_mm",
        "slope",
        "hydraulic_radius_m",
        "depth_m",
        "width_m",
        "vegetation_height_m",
    ],
    NAN,
)
RULES_OF_MEASURES = {
    "short-stretch-for-sinuosity",
    "bed-sizes-differ",
    "valley-slope-with-multiplier",
    "bank-plants-against-shape",
    "hydraulic-radius-beyond-method",
    "slope-little-tested",
    "slope-steep",
    "grains-stand-in-the-flow",
    "few-grains-deep",
    "supercritical-reach",
}


@settings(max_examples=60, deadline=None)
@given(one_row)
def test_what_was_not_measured_is_never_held_against_an_estimate(row: dict[str, Any]) -> None:
    row["row"] |= UNMEASURED | {"slope_along": ""}
    for factor in row["factors"].values():
        factor["numbers"] = dict.fromkeys(NUMBERS, NAN)
    assert not RULES_OF_MEASURES & {f.rule for f in find(facts([row]))[0]}


@settings(max_examples=30, deadline=None)
@given(st.sampled_from(["channel", "flood-plain"]))
def test_a_row_in_which_nothing_is_known_has_no_findings(setting: str) -> None:
    row: dict[str, Any] = dict.fromkeys(("asked_handbook", "handbook", "slope_along"), "")
    row |= {"setting": setting, "n_low": NAN, "n_best": NAN, "n_high": NAN} | UNMEASURED
    empty = {
        name: "" if name in ("grade", "measured_says", "candidates", "near") else NAN
        for name in FACTOR_ROW
        if name != "kinds"
    } | dict.fromkeys(["own_best", "noted", "lower_bound"], False)
    factors = {
        factor: {"row": empty, "numbers": {"x": NAN}, "words": {"x": ""}} for factor in FACTORS
    }
    assert find(facts([{"row": row, "factors": factors}])) == [[]]
