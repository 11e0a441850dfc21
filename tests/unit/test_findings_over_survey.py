"""Rules that look at several estimates, or at what a survey knows around one."""

from typing import Any

import pytest

from roughness.findings import Estimated, Placed, find_over_survey
from roughness.quantities.ranges import Range


def estimated(order: int = 1, best: float = 0.04, **changes: Any) -> Estimated:
    row: dict[str, Any] = {
        "reach": f"reach {order}",
        "order": order,
        "part": "main channel",
        "condition": "design flood",
        "n": Range(best - 0.01, best, best + 0.01),
        "p05": best - 0.005,
        "p95": best + 0.005,
    }
    return Estimated(**row | changes)


def keys(rows: list[Estimated]) -> list[str]:
    return [placed.finding.rule for placed in find_over_survey(rows)]


def only(rows: list[Estimated]) -> Placed:
    (placed,) = find_over_survey(rows)
    return placed


JUMP = [estimated(1, 0.04), estimated(2, 0.08)]


def test_a_jump_between_neighbours_is_asked_at_the_second_reach() -> None:
    placed = only(JUMP)
    assert (placed.reach, placed.finding.rule) == ("reach 2", "jump-between-neighbours")
    assert placed.finding.says == (
        "n jumps from 0.040 in reach 1 to 0.080 in reach 2, and their spreads do not meet; "
        "say in the note of either reach what changes between them."
    )


def test_a_jump_down_is_asked_as_well_and_the_order_of_rows_does_not_matter() -> None:
    assert keys([estimated(2, 0.04), estimated(1, 0.08)]) == ["jump-between-neighbours"]


@pytest.mark.parametrize(
    "rows",
    [
        [estimated(1, 0.04), estimated(2, 0.056, p05=0.05)],
        [estimated(1, 0.04, p95=0.06), estimated(2, 0.08, p05=0.06)],
        [estimated(1, 0.04, jump_noted=True), estimated(2, 0.08)],
        [estimated(1, 0.04), estimated(2, 0.08, jump_noted=True)],
        [estimated(1, 0.04), estimated(3, 0.08)],
        [estimated(1, 0.04), estimated(2, 0.08, part="left flood plain")],
        [estimated(1, 0.04), estimated(2, 0.08, condition="summer")],
    ],
    ids=["ratio 1.4", "spreads meet", "noted", "noted there", "no neighbours", "part", "condition"],
)
def test_no_jump_is_asked_where_it_is_small_explained_or_between_others(
    rows: list[Estimated],
) -> None:
    assert keys(rows) == []


def test_three_reaches_with_one_value_are_asked_once() -> None:
    placed = only([estimated(1), estimated(2), estimated(3)])
    assert (placed.reach, placed.finding.rule) == ("reach 1", "all-reaches-alike")


@pytest.mark.parametrize(
    "rows",
    [
        [estimated(1), estimated(2)],
        [estimated(1), estimated(2), estimated(3, 0.041)],
        [estimated(1), estimated(2), estimated(3, part="left flood plain")],
    ],
)
def test_two_reaches_or_one_other_value_are_not_all_alike(rows: list[Estimated]) -> None:
    assert keys(rows) == []


SINGLE: list[tuple[str, dict[str, Any], dict[str, Any]]] = [
    ("carried-over-unconfirmed", {"unconfirmed": ("base", "variation")}, {"unconfirmed": ()}),
    (
        "driver-without-reason",
        {"shares": {"base": 0.4, "vegetation": 0.6}, "backed": frozenset({"base"})},
        {"shares": {"base": 0.4, "vegetation": 0.6}, "backed": frozenset({"vegetation"})},
    ),
    (
        "driver-without-reason",
        {"shares": {"base": 0.34, "vegetation": 0.33, "meander": 0.33}},
        {"shares": {"base": 0.33, "vegetation": 0.32, "meander": 0.32}},
    ),
    (
        "growth-differs",
        {"visit_growth": "leaf-off", "condition_growth": "leaf-on"},
        {"visit_growth": "leaf-off", "condition_growth": "any"},
    ),
    (
        "growth-differs",
        {"visit_growth": "leaf-off", "condition_growth": "leaf-on"},
        {"visit_growth": None, "condition_growth": "leaf-on"},
    ),
    ("made-by-record", {"made_by_record": ("part",)}, {"made_by_record": ()}),
    ("adopted-differs", {"adopted": 0.0501}, {"adopted": 0.05}),
    ("multiplier-over-bank", {"multiplier_over_bank": 1.15}, {"multiplier_over_bank": 1.0}),
    (
        "multiplier-over-bank",
        {"multiplier_over_bank": 1.3},
        {"multiplier_over_bank": 1.3, "backed": frozenset({"meander"})},
    ),
    ("no-visit", {"visited": False}, {"visited": True}),
    ("adopted-differs", {"adopted": 0.029}, {"adopted": 0.03}),
]


@pytest.mark.parametrize(("key", "fires", "silent"), SINGLE)
def test_a_rule_about_one_estimate_fires_in_its_case_and_is_silent_next_to_it(
    key: str, fires: dict[str, Any], silent: dict[str, Any]
) -> None:
    assert keys([estimated(**fires)]) == [key]
    assert keys([estimated(**silent)]) == []


def test_what_was_carried_over_is_named() -> None:
    says = only([estimated(unconfirmed=("base", "variation"))]).finding.says
    assert says == (
        "Carried over and not confirmed here: base value and variation of the section; "
        "confirm or change them."
    )


def test_names_from_outside_are_made_printable() -> None:
    says = only([estimated(part="x\u202ey", made_by_record=("part",))]).finding.says
    assert "\u202e" not in says
    assert "u202e" in says


def test_a_survey_without_estimates_has_no_findings() -> None:
    assert find_over_survey([]) == []
