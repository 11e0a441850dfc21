"""Wrong sections: one sentence that names the field and what would be right, exit status 2."""

import json
from pathlib import Path
from typing import Any

import pytest

from roughness.__main__ import main

BED = [[0, 3], [0, 0], [10, 0], [10, 4]]
GOOD: dict[str, Any] = {"points": BED, "slope": 0.001, "depth_m": 1, "parts": [{"n": 0.03}]}
TRAPEZOID: dict[str, Any] = {
    "trapezoid": {"bottom_width_m": 4, "side_slope": 1},
    "slope": 0.001,
    "depth_m": 1,
    "parts": [{"n": 0.03}],
}


def without(*keys: str, **more: Any) -> dict[str, Any]:
    return {key: value for key, value in GOOD.items() if key not in keys} | more


def with_points(*points: Any) -> dict[str, Any]:
    return GOOD | {"points": list(points)}


def with_parts(*parts: Any) -> dict[str, Any]:
    return GOOD | {"parts": list(parts)}


def with_segments(*segments: Any) -> dict[str, Any]:
    return with_parts({"segments": list(segments)})


def named(name: str, left: Any, right: Any, n: Any = 0.03) -> dict[str, Any]:
    return {"name": name, "from": left, "to": right, "n": n}


WRONG: dict[str, tuple[Any, tuple[str, ...]]] = {
    "level slope": (GOOD | {"slope": 0}, ("slope", "does not flow", "above 0")),
    "adverse slope": (GOOD | {"slope": -0.002}, ("slope", "-0.002", "it rises")),
    "slope in per mille": (GOOD | {"slope": 2}, ("slope", "2 per mille is 0.002")),
    "slope as text": (GOOD | {"slope": "0,002"}, ("slope", "0.002")),
    "slope true": (GOOD | {"slope": True}, ("slope", "a number is due")),
    "no slope": (without("slope"), ("slope", "missing")),
    "one point": (with_points([0, 1]), ("points", "one point is no section", "at least three")),
    "two points": (with_points([0, 1], [1, 0]), ("2 points are no section",)),
    "no point": (with_points(), ("0 points are no section",)),
    "same point twice": (
        with_points([0, 2], [1, 0], [1, 0], [3, 2]),
        ("points 2 and 3 are the same", "[1, 0]", "leave one out"),
    ),
    "points out of order": (
        with_points([0, 3], [4, 0], [2, 0.5], [6, 0], [10, 3]),
        ("not in order", "from left to right"),
    ),
    "points from right to left": (
        with_points([10, 3], [5, 0], [0, 3]),
        ("from right to left", "looking downstream"),
    ),
    "last point left of the first": (
        with_points([5, 3], [8, 0], [2, 0], [1, 3]),
        ("last point", "to the right of the first"),
    ),
    "a wall without thickness": (
        with_points([0, 3], [0, 0], [5, 0], [5, 2], [5, 0], [9, 0], [9, 3]),
        ("meets",),
    ),
    "a point of three numbers": (with_points([0, 1, 2], [1, 0], [2, 1]), ("point 1", "[0, 1, 2]")),
    "a point with text": (with_points([0, 1], [1, "0"], [2, 1]), ("point 2", "two numbers in m")),
    "a point with true": (with_points([0, 1], [1, True], [2, 1]), ("point 2",)),
    "points that are none": (GOOD | {"points": "0 1"}, ("points", "a list is due")),
    "points in mm of a map": (with_points([0, 3], [2e6, 0], [4e6, 3]), ("point 2", "m")),
    "an end that is the lowest point": (
        with_points([0, 3], [5, 1], [9, 0]),
        ("an end", "lowest point", "both banks"),
    ),
    "points and trapezoid": (GOOD | {"trapezoid": TRAPEZOID["trapezoid"]}, ("both points",)),
    "no bed": (without("points"), ("neither points nor a trapezoid",)),
    "trapezoid without width": (
        TRAPEZOID | {"trapezoid": {"bottom_width_m": 0, "side_slope": 0}},
        ("trapezoid", "one of them is above 0"),
    ),
    "trapezoid of hardly any width": (
        TRAPEZOID | {"trapezoid": {"bottom_width_m": 0, "side_slope": 1e-300}},
        ("both under 0.001",),
    ),
    "section of hardly any width": (
        with_points([0, 3], [1e-300, 0], [2e-300, 3]),
        ("to the right of the first",),
    ),
    "discharge next to nothing": (
        without("depth_m", discharge_m3s=5e-324),
        ("discharge_m3s", "above 0"),
    ),
    "depth next to nothing": (GOOD | {"depth_m": 1e-300}, ("depth_m", "above 0")),
    "trapezoid with a negative width": (
        TRAPEZOID | {"trapezoid": {"bottom_width_m": -4, "side_slope": 1}},
        ("bottom width of -4 m",),
    ),
    "trapezoid with banks that lean over": (
        TRAPEZOID | {"trapezoid": {"bottom_width_m": 4, "side_slope": -1}},
        ("side slope of -1", "horizontal for 1 vertical"),
    ),
    "misspelt trapezoid": (
        TRAPEZOID | {"trapezoid": {"bottom_width": 4, "side_slope": 1}},
        ("bottom_width", "bottom_width_m"),
    ),
    "nothing flows": (without("depth_m"), ("one of discharge_m3s, water_level_m and depth_m",)),
    "level and depth": (GOOD | {"water_level_m": 1}, ("water_level_m and depth_m", "one of")),
    "discharge 0": (without("depth_m", discharge_m3s=0), ("discharge_m3s", "it is 0", "above 0")),
    "negative discharge": (without("depth_m", discharge_m3s=-5), ("discharge_m3s", "-5")),
    "a discharge no depth can carry": (
        without("depth_m", discharge_m3s=1e5),
        ("no depth carries 100000 m3/s", "3.00 m", "lower bank"),
    ),
    "depth 0": (GOOD | {"depth_m": 0}, ("depth_m", "it is 0")),
    "dry section": (
        without("depth_m", water_level_m=0),
        ("water_level_m", "dry at 0 m", "lowest point lies at 0 m"),
    ),
    "level below the bed": (without("depth_m", water_level_m=-2), ("dry at -2 m",)),
    "level above an end": (
        without("depth_m", water_level_m=3.5),
        ("3.5 m stands above the lower end", "3 m"),
    ),
    "depth above an end": (GOOD | {"depth_m": 3.2}, ("depth_m", "above the lower end")),
    "no parts": (with_parts(), ("parts", "no part")),
    "parts missing": (without("parts"), ("parts", "missing")),
    "no n": (with_parts({"name": "main channel"}), ("main channel", "n is missing")),
    "n 0": (with_parts({"n": 0}), ("n is 0", "above 0")),
    "negative n": (with_parts({"n": -0.03}), ("n is -0.03",)),
    "Strickler's K for n": (with_parts({"n": 30}), ("n is 30", "1/K = 0.033")),
    "n as text": (with_parts({"n": "0.03"}), ("parts.0.n", '"0.03"', "a number")),
    "n true": (with_parts({"n": True}), ("parts.0.n", "true")),
    "range out of order": (
        with_parts({"n": {"low": 0.04, "best": 0.03, "high": 0.05}}),
        ("low 0.04, best 0.03 and high 0.05", "low <= best <= high"),
    ),
    "range without best": (with_parts({"n": {"low": 0.04}}), ("parts.0.n", "best", "missing")),
    "unknown key of a range": (with_parts({"n": {"best": 0.03, "hi": 0.04}}), ("hi", "high")),
    "unknown setting": (with_parts({"n": 0.03, "setting": "plain"}), ("setting", "flood-plain")),
    "unknown key of a part": (with_parts({"n": 0.03, "form": 0}), ("form", "'from'")),
    "limit as text": (with_parts({"n": 0.03, "from": "a"}), ("parts.0.from", "a number is due")),
    "unknown key": (GOOD | {"dept_m": 1}, ("dept_m", "depth_m")),
    "parts that overlap": (
        with_parts(named("a", 0, 6), named("b", 5, 10)),
        ("'a' and 'b' overlap between 5 m and 6 m", "end where the next begins"),
    ),
    "parts that leave a gap": (
        with_parts(named("a", 0, 4), named("b", 5, 10)),
        ("'a' and 'b' leave a gap between 4 m and 5 m",),
    ),
    "parts that leave an end out": (
        with_parts(named("a", 0, 4), named("b", 4, 9)),
        ("from 0 m to 9 m", "from end to end"),
    ),
    "parts turned round": (with_parts(named("a", 10, 0)), ("from 10 to 0 m", "less than 'to'")),
    "two parts of one name": (
        with_parts(named("a", 0, 4), named("a", 4, 10)),
        ("two parts are named 'a'",),
    ),
    "two parts without a limit": (
        with_parts(named("a", None, 4), named("b", None, 10)),
        ("2 parts say no 'from'", "leftmost"),
    ),
    "a part beside the section": (
        with_parts(named("a", 0, 10), named("b", 10, 20)),
        ("beside the section", "0 m to 10 m"),
    ),
    "segments that overlap": (
        with_segments({"to": 6, "n": 0.03}, {"from": 5, "n": 0.04}),
        ("segments overlap between 5 m and 6 m",),
    ),
    "segments that leave a gap": (
        with_segments({"to": 4, "n": 0.03}, {"from": 5, "n": 0.04}),
        ("leave 4 m to 5 m without n", "for the rest"),
    ),
    "a segment outside its part": (
        with_segments({"from": -1, "to": 4, "n": 0.03}, {"from": 4, "n": 0.04}),
        ("outside its part", "0 m to 10 m"),
    ),
    "a segment without width where no wall is": (
        with_parts({"n": 0.03, "segments": [{"from": 5, "to": 5, "n": 0.04}]}),
        ("segments.0", "vertical wall"),
    ),
    "a list": ([1], ("no JSON object",)),
}


def run(tmp_path: Path, text: str, capsys: pytest.CaptureFixture[str]) -> str:
    file = tmp_path / "section.json"
    file.write_text(text, encoding="utf-8")
    assert main(["section", str(file)]) == 2
    out, err = capsys.readouterr()
    assert out == ""
    assert err.startswith("roughness: ") and err.count("\n") == 1
    assert "Traceback" not in err
    return err


@pytest.mark.parametrize("name", WRONG)
def test_a_wrong_section_is_refused_in_one_sentence(
    name: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    document, expected = WRONG[name]
    err = run(tmp_path, json.dumps(document), capsys)
    assert "section.json" in err
    for words in expected:
        assert words in err, err


@pytest.mark.parametrize("number", ["NaN", "Infinity", "-Infinity", "1e999"])
@pytest.mark.parametrize("place", ["slope", "depth_m", "points"])
def test_what_is_no_number_is_refused_anywhere(
    number: str, place: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    document = json.dumps(GOOD | {place: "X" if place != "points" else [[0, 3], ["X", 0], [9, 3]]})
    assert "number" in run(tmp_path, document.replace('"X"', number), capsys)


def test_too_many_points_are_refused_and_told_to_be_thinned(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    points = [[i, 1 + abs(i - 3000)] for i in range(6001)]
    assert "6001 points are too many" in run(tmp_path, json.dumps(with_points(*points)), capsys)


def test_absurd_but_possible_sections_are_calculated(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    file = tmp_path / "section.json"
    for change in (
        {"slope": 1e-300},
        {"slope": 1.0},
        {"parts": [{"n": 1e-12}]},
        {"depth_m": 1e-9},
        {"depth_m": None, "discharge_m3s": 1e-9, "points": [[-1e6, 1], [0, 0], [1e6, 1]]},
        {"points": [[0, 1e6], [1e-3, 0], [2e-3, 1e6]]},
        {"points": [[-1e6, 1], [0, 0.5], [1e6, 1]], "depth_m": 0.5},
    ):
        file.write_text(json.dumps(GOOD | change), encoding="utf-8")
        assert main(["section", str(file)]) == 0, change
        assert json.loads(capsys.readouterr().out)["best"]["area_m2"] > 0
