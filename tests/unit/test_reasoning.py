"""The sentences behind an estimate say what was chosen, and nothing more."""

from dataclasses import replace
from typing import Any

import pytest

from roughness.quantities.ranges import Range, point
from roughness.reasoning import Account, People, Step, Zone, sentences
from roughness.survey.words import Factor

SYMBOLS: dict[Factor, str] = {
    "base": "nb",
    "irregularity": "n1",
    "variation": "n2",
    "obstruction": "n3",
    "vegetation": "n4",
    "meander": "m",
}


def step(factor: Factor, grade: str | None, values: Range, **changes: Any) -> Step:
    given: dict[str, Any] = {
        "factor": factor,
        "symbol": SYMBOLS[factor],
        "grade_name": grade,
        "range": values,
        "published": values,
        "basis": "grade",
        "source": "table 2, p. 8",
    }
    return Step(**given | changes)


BASE = step(
    "base",
    "firm soil",
    Range(0.020, 0.025, 0.030),
    published=Range(0.025, 0.0285, 0.032),
    own_best=True,
    source="table 1, p. 4",
    note="  smooth clay, \x1b[31mrarely mobile ",
    share_of_variance=0.2,
)
IRREGULARITY = step("irregularity", "minor", Range(0.001, 0.003, 0.005), best_is_middle=True)
VARIATION = step("variation", "gradual", point(0.0))
OBSTRUCTION = step(
    "obstruction",
    "minor",
    Range(0.005, 0.010, 0.015),
    basis="measured",
    measured_says="blocked 8 %",
    best_is_middle=True,
    share_of_variance=0.19,
)
VEGETATION = step(
    "vegetation", "medium", Range(0.010, 0.0175, 0.025), best_is_middle=True, share_of_variance=0.61
)
MEANDER = step("meander", "appreciable", point(1.15))
STEPS = (BASE, IRREGULARITY, VARIATION, OBSTRUCTION, VEGETATION, MEANDER)
# 0.025 + 0.003 + 0.010 + 0.0175 = 0.0555, times 1.15 = 0.063825; the limits likewise
N = Range(0.0414, 0.063825, 0.08625)
ACCOUNT = Account(
    setting="channel",
    handbook="A guide",
    citation="Arcement and Schneider 1989",
    zones=(Zone(name=None, n=N, steps=STEPS),),
    n=N,
    p05=0.0531,
    p95=0.0752,
    dependence=0.5,
)


def test_an_estimate_is_told_in_one_sentence_a_step() -> None:
    assert sentences(ACCOUNT) == (
        "The part is a channel; its factors come from A guide (Arcement and Schneider 1989).",
        "Base nb 0.025 (0.020 to 0.030), firm soil: chosen (table 1, p. 4), with the best value "
        "set inside the published range; the published 0.025 to 0.032 was widened at the lower "
        "end and narrowed at the upper end; "
        'the note says: "smooth clay, \\u001b[31mrarely mobile".',
        "Irregularity n1 0.003 (0.001 to 0.005), minor: chosen (table 2, p. 8), "
        "at the middle of the published range.",
        "Variation of the section n2 0, gradual: chosen (table 2, p. 8).",
        "Obstruction n3 0.010 (0.005 to 0.015), minor: blocked 8 % points to it (table 2, p. 8), "
        "at the middle of the published range.",
        "Vegetation n4 0.0175 (0.010 to 0.025), medium: chosen (table 2, p. 8), "
        "at the middle of the published range.",
        "Multiplier m 1.15, appreciable: chosen (table 2, p. 8).",
        "The sum of five is 0.056; times m 1.15 for appreciable meandering gives n 0.064, "
        "from 0.041 to 0.086.",
        "Vegetation drives n: 61 % of the variance.",
        "The spread of the choices is 0.053 to 0.075 (5 % to 95 %), with triangular ranges and a "
        "dependence of 0.5; it takes every grade as right.",
    )


def told(factor: Factor, **changes: Any) -> str:
    """Return the sentence of one factor, changed."""
    steps = tuple(replace(s, **changes) if s.factor == factor else s for s in STEPS)
    zone = replace(ACCOUNT.zones[0], steps=steps)
    return sentences(replace(ACCOUNT, zones=(zone,)))[1 + list(SYMBOLS).index(factor)]


@pytest.mark.parametrize(
    ("changes", "wanted"),
    [
        ({"grade_name": None, "published": None}, "a value of one's own, which no table backs."),
        (
            {"range": Range(0.0, 0.004, 0.005), "own_best": True},
            "with the best value set inside the published range; the published 0.001 to 0.005 "
            "was widened at the lower end.",
        ),
        (
            {"range": Range(0.001, 0.006, 0.006), "own_best": True},
            "with the best value set outside the published range; the published 0.001 to 0.005 "
            "was widened at the upper end.",
        ),
        (
            {"range": Range(0.002, 0.003, 0.005)},
            "the published 0.001 to 0.005 was narrowed at the lower end.",
        ),
        (
            {"range": Range(0.002, 0.003, 0.004)},
            "the published 0.001 to 0.005 was narrowed at both ends.",
        ),
        (
            {"published": point(0.003)},
            "at the single published value; the single published 0.003 was widened at both ends.",
        ),
        ({"note": "Seen from both banks."}, 'the note says: "Seen from both banks."'),
        (
            {"measured_says": "blocked 8 %", "best_is_middle": False},
            "chosen (table 2, p. 8; blocked 8 % noted).",
        ),
        (
            {"published": None, "own_best": True},
            "with the best value set where nothing is published.",
        ),
        ({"range": Range(0.001, 0.004, 0.005)}, "chosen (table 2, p. 8)."),
        ({"source": "", "best_is_middle": False}, "minor: chosen."),
    ],
)
def test_a_moved_value_or_limit_is_told(changes: dict[str, Any], wanted: str) -> None:
    assert told("irregularity", **changes).endswith(wanted)


def test_a_value_that_nobody_typed_is_shown_with_five_decimals_at_most() -> None:
    third = Range(0.005, 0.019 - 0.014 / 6, 0.019)
    assert told("obstruction", range=third).startswith("Obstruction n3 0.01667 (0.005 to 0.019)")


def test_a_flood_plain_has_four_factors_and_no_multiplier() -> None:
    n = Range(0.036, 0.0555, 0.075)
    said = sentences(
        replace(
            ACCOUNT,
            setting="flood-plain",
            asked_handbook="another guide",
            n=n,
            zones=(Zone(name=None, n=n, steps=STEPS),),
        )
    )
    assert said[0].startswith("The part is a flood plain, for which another guide has no table;")
    assert (
        "The sum of four is n 0.056, from 0.036 to 0.075; a flood plain has no multiplier." in said
    )
    assert not any(s.startswith(("Variation", "Multiplier")) for s in said)


def test_bed_and_banks_are_told_apart_and_put_together() -> None:
    zones = (
        Zone(name="bed", perimeter_percent=70, n=Range(0.03, 0.035, 0.04), steps=STEPS),
        Zone(name="banks", perimeter_percent=30, n=Range(0.05, 0.062, 0.08), steps=STEPS),
    )
    said = sentences(replace(ACCOUNT, zones=zones, n=Range(0.036, 0.044, 0.054)))
    assert said[1].startswith("Bed, base nb 0.025")
    assert said[-4:-2] == (
        "The part was judged in 2 segments: bed with 70 % of the wetted perimeter and n 0.035 and "
        "banks with 30 % of the wetted perimeter and n 0.062.",
        "They are put together as if the water ran equally fast along each of them (Horton and "
        "Einstein), which gives n 0.044, from 0.036 to 0.054.",
    )
    assert said[-2] == "Vegetation of bed drives n: 61 % of the variance."


def test_no_factor_is_said_to_drive_n_with_less_than_a_third() -> None:
    steps = tuple(replace(s, share_of_variance=0.3) for s in STEPS)
    said = sentences(replace(ACCOUNT, zones=(replace(ACCOUNT.zones[0], steps=steps),)))
    assert said[-2] == (
        "No single factor drives n: the largest share of the variance, 30 %, is base."
    )


def test_points_alone_have_no_spread_and_are_not_called_certain() -> None:
    steps = tuple(replace(s, range=point(s.range.best), share_of_variance=0.0) for s in STEPS)
    n = point(0.063825)
    said = sentences(replace(ACCOUNT, n=n, zones=(Zone(name=None, n=n, steps=steps),)))
    assert said[-3:] == (
        "The sum of five is 0.056; times m 1.15 for appreciable meandering gives n 0.064, "
        "without a range.",
        "No range has any width, so nothing drives n.",
        "Without ranges the choices have no spread; that does not make n certain.",
    )


def test_what_people_differ_by_is_marked_where_it_was_only_remembered() -> None:
    people = People(p05=0.04, p95=0.1, source="a study", provenance="memory")
    said = sentences(replace(ACCOUNT, people=people))
    assert said[-1] == (
        "Experienced people who judge one and the same reach differ more or less from 0.040 to "
        "0.100 (5 % to 95 %; a study, from memory)."
    )
    seen = replace(people, provenance="seen")
    assert "memory" not in sentences(replace(ACCOUNT, people=seen))[-1]


@pytest.mark.parametrize(
    ("stops", "asks", "wanted"),
    [
        (1, 2, "Of the findings, 1 says stop and 2 ask for an answer."),
        (2, 0, "Of the findings, 2 say stop."),
        (0, 1, "Of the findings, 1 asks for an answer."),
    ],
)
def test_open_findings_are_counted_at_the_end(stops: int, asks: int, wanted: str) -> None:
    assert sentences(replace(ACCOUNT, stops=stops, asks=asks))[-1] == wanted


def test_every_sentence_starts_with_a_capital_and_ends_with_a_full_stop() -> None:
    for sentence in sentences(ACCOUNT):
        assert sentence[0].isupper()
        assert sentence.endswith(".")
