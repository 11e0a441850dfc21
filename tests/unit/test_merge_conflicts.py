"""What counts as said apart: whole estimates, setups, segments; and what settles it."""

from typing import Any

from roughness.trail.conflicts import Conflict, conflicts
from roughness.trail.lines import Line, encoded, parsed
from roughness.trail.merging import file_bytes, united
from roughness.trail.reading import Trail, verified

PLACE = {"part": "main channel", "condition": "flood"}
BEGIN = {"format": 1, "survey": "ab" * 16, "reach": "mill"}
SHA = "c" * 64
AT = "2026-06-03T10:00:00Z"
FIRST = parsed(encoded((), AT, "Ann", "begin", BEGIN))
BED = {"name": "bed", "perimeter_percent": 60.0}
BANKS = {"name": "banks", "perimeter_percent": 40.0}


def line(after: Line, by: str, kind: str, **data: Any) -> Line:
    return parsed(encoded((after.hash,), AT, by, kind, PLACE | data))


def trail(*lines: Line) -> Trail:
    return verified(file_bytes(lines), "mill.jsonl")


def choose(after: Line, by: str, grade: str, factor: str = "vegetation", **more: Any) -> Line:
    choice = {"grade": grade} | more.pop("choice", {})
    said = {"factor": factor, "choice": choice, "handbook": "x", "handbook_sha256": SHA}
    return line(after, by, "choose", **said | more)


def estimate(after: Line, by: str, kind: str = "estimate", **grades: str) -> Line:
    factors = {factor: {"grade": grade} for factor, grade in grades.items()}
    judged = {"handbook": "x", "setting": "channel", "factors": factors}
    more = {"reason": "agreed", "opinions": []} if kind == "consensus" else {}
    return line(after, by, kind, handbook_sha256=SHA, estimate=judged, **more)


def gate(after: Line, by: str, **said: Any) -> Line:
    return line(after, by, "gate", handbook="x", **said)


def apart(*sides: list[Line]) -> Trail:
    return trail(*united([trail(FIRST, *side) for side in sides]))


def about(found: tuple[Conflict, ...]) -> list[tuple[str | None, str]]:
    return [(conflict.segment, conflict.about) for conflict in found]


def test_two_whole_estimates_are_apart_only_where_they_differ() -> None:
    both = apart(
        [estimate(FIRST, "Ann", base="gravel", vegetation="small", irregularity="minor")],
        [estimate(FIRST, "Bo", base="gravel", vegetation="large")],
    )
    assert about(conflicts(both)) == [(None, "irregularity"), (None, "vegetation")]


def test_choosing_one_factor_anew_settles_that_one_alone_and_a_consensus_settles_all() -> None:
    both = apart(
        [estimate(FIRST, "Ann", base="gravel", vegetation="small")],
        [estimate(FIRST, "Bo", base="cobble", vegetation="large")],
    )
    end = both.by_hash[both.heads[0]]
    chosen = choose(end, "Cy", "small")
    assert about(conflicts(trail(*both.lines, chosen))) == [(None, "base")]
    agreed = estimate(end, "Cy", "consensus", base="gravel", vegetation="large")
    assert not conflicts(trail(*both.lines, agreed))


def test_a_word_of_one_side_alone_settles_nothing() -> None:
    mine = choose(FIRST, "Ann", "small")
    both = apart([mine, choose(mine, "Ann", "medium")], [choose(FIRST, "Bo", "large")])
    (found,) = conflicts(both)
    grades = [side.said.grade for side in found.sides]
    assert sorted(grades) == ["large", "medium"]


def test_three_people_apart_are_one_conflict_with_three_sides() -> None:
    both = apart(*([choose(FIRST, by, grade)] for by, grade in
                   (("Ann", "small"), ("Bo", "medium"), ("Cy", "large"))))  # fmt: skip
    (found,) = conflicts(both)
    assert {side.line.by for side in found.sides} == {"Ann", "Bo", "Cy"}


def test_notes_may_differ_and_so_may_factors_but_not_handbooks_or_values() -> None:
    one = choose(FIRST, "Ann", "small", choice={"note": "willows"})
    assert not conflicts(apart([one], [choose(FIRST, "Bo", "small", choice={"note": "alders"})]))
    assert not conflicts(apart([one], [choose(FIRST, "Bo", "minor", "irregularity")]))
    assert conflicts(apart([one], [choose(FIRST, "Bo", "small", handbook="y")]))
    assert conflicts(apart([one], [choose(FIRST, "Bo", "small", choice={"best": 0.007})]))


def test_segments_and_places_are_compared_as_people_would_name_them() -> None:
    found = conflicts(apart([choose(FIRST, "Ann", "small", segment="Bed")],
                            [choose(FIRST, "Bo", "large", segment="bed ")]))  # fmt: skip
    ((segment, factor),) = about(found)
    assert (segment or "").strip().lower() == "bed" and factor == "vegetation"
    assert not conflicts(apart([choose(FIRST, "Ann", "small", segment="bed")],
                               [choose(FIRST, "Bo", "large", segment="banks")]))  # fmt: skip


def test_setups_are_apart_where_an_answer_differs() -> None:
    assert not conflicts(apart([gate(FIRST, "Ann", depth_m=1.0)],
                               [gate(FIRST, "Bo", depth_m=1.0, visit="spring")]))  # fmt: skip
    found = conflicts(apart([gate(FIRST, "Ann", depth_m=1.0)], [gate(FIRST, "Bo", depth_m=2.0)]))
    assert about(found) == [(None, "setup")]
    split = [gate(FIRST, "Ann", segments=[BED, BANKS])]
    assert about(conflicts(apart(split, [estimate(FIRST, "Bo", base="gravel")]))) == [
        (None, "setup")
    ]
    assert not conflicts(
        apart([gate(FIRST, "Ann", depth_m=1.0)], [estimate(FIRST, "Bo", base="gravel")])
    )


def test_what_cannot_be_read_as_its_kind_is_no_side() -> None:
    assert not conflicts(
        apart([choose(FIRST, "Ann", "small")], [line(FIRST, "Bo", "choose", factor="vegetation")])
    )
