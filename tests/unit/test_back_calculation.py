"""n from a measured flow through the command line: what is printed, found and said."""

import json
from pathlib import Path
from typing import Any

import pytest
from pydantic import TypeAdapter

from roughness.__main__ import main
from roughness.assessment.back_calculating import FoundN
from roughness.findings.measured_flow import RULES, FlowFacts, find_in_flow

Capture = pytest.CaptureFixture[str]


def section(distance: float, area: float, perimeter: float, level: float) -> dict[str, float]:
    return {
        "distance_m": distance,
        "area_m2": area,
        "wetted_perimeter_m": perimeter,
        "water_level_m": level,
    }


# A computed profile of n 0.035 (see tests/outside/test_back_calculation.py).
FOUR: dict[str, Any] = {
    "discharge_m3s": 30,
    "sections": [
        section(0, 24.3347749464155, 17.4763964209165, 102.038198210458),
        section(50, 18.740480469306, 14.4073600853284, 101.903680042664),
        section(90, 28.9435695129766, 19.6179461891221, 101.888973094561),
        section(150, 23.4, 16.6, 101.8),
    ],
}
ERRORS = {"discharge_percent": 5, "water_level_m": 0.01, "area_percent": 3}


def backcalc(tmp_path: Path, capsys: Capture, document: dict[str, Any]) -> dict[str, Any]:
    file = tmp_path / "flow.json"
    file.write_text(json.dumps(document), encoding="utf-8")
    assert main(["backcalc", str(file)]) == 0
    out = capsys.readouterr().out
    TypeAdapter(FoundN).validate_json(out, strict=True)
    found: dict[str, Any] = json.loads(out)
    return found


def rules(found: dict[str, Any]) -> list[str]:
    return [finding["rule"] for finding in found["findings"]]


def test_n_of_the_reach_and_of_its_subreaches_is_printed(tmp_path: Path, capsys: Capture) -> None:
    found = backcalc(tmp_path, capsys, FOUR | {"errors": ERRORS})
    assert found["n"] == pytest.approx(0.035, rel=1e-9)
    assert [one["n"] for one in found["subreaches"]] == pytest.approx([0.035] * 3, rel=1e-8)
    assert [one["length_m"] for one in found["subreaches"]] == [50, 40, 60]
    assert found["findings"] == []


def test_the_scheme_is_kept_with_n(tmp_path: Path, capsys: Capture) -> None:
    document = FOUR | {"expansion_loss": 0.3, "contraction_loss": 0.1}
    document["sections"] = [dict(one, alpha=1.1) for one in FOUR["sections"]]
    scheme = backcalc(tmp_path, capsys, document)["scheme"]
    assert (scheme["expansion_loss"], scheme["contraction_loss"]) == (0.3, 0.1)
    assert scheme["alpha"] == [1.1] * 4
    assert "memory" in scheme["relation"]
    assert "another one gives another n" in scheme["holds"]


def test_errors_reach_n_through_the_velocity_heads_too(tmp_path: Path, capsys: Capture) -> None:
    found = backcalc(tmp_path, capsys, FOUR | {"errors": ERRORS})
    ratio = found["fall_m"] / found["net_head_m"]
    parts = (0.05 * ratio, 0.03 * (2 / 3 + ratio), 0.01 / (2**0.5 * found["net_head_m"]))
    assert found["sd"] / found["n"] == pytest.approx(sum(x * x for x in parts) ** 0.5, rel=1e-9)
    # Subreaches fall less than the whole reach and know their n less well.
    assert all(one["sd"] > found["sd"] for one in found["subreaches"])


def test_an_error_that_is_not_given_is_unknown_and_not_none(
    tmp_path: Path, capsys: Capture
) -> None:
    bare = backcalc(tmp_path, capsys, FOUR)
    assert bare["sd"] is None and {one["sd"] for one in bare["subreaches"]} == {None}
    assert "discharge, water level and area" in bare["findings"][-1]["says"]
    part = backcalc(tmp_path, capsys, FOUR | {"errors": {"discharge_percent": 5}})
    assert part["sd"] > 0
    assert "no error of water level and area" in part["findings"][-1]["says"]


def test_one_section_with_a_slope_is_uniform_flow(tmp_path: Path, capsys: Capture) -> None:
    alone = {"area_m2": 24.0, "wetted_perimeter_m": 15.2}
    errors = {"discharge_percent": 5, "slope_percent": 10, "area_percent": 3}
    document = {"discharge_m3s": 38.0, "slope": 0.0021, "sections": [alone], "errors": errors}
    found = backcalc(tmp_path, capsys, document)
    assert found["n"] == pytest.approx(0.0392448248328, rel=1e-9)
    assert found["sd"] == pytest.approx(found["n"] * 0.0866025403784, rel=1e-9)
    assert found["subreaches"] == []
    assert rules(found) == ["measured-sections-few"]


def test_sections_may_be_given_by_their_points(tmp_path: Path, capsys: Capture) -> None:
    # The same reach: rectangles 14, 11, 16 and 13 m wide on beds at these heights.
    beds = [(14, 100.30), (11, 100.20), (16, 100.08), (13, 100.00)]
    sections = [
        {
            "distance_m": one["distance_m"],
            "water_level_m": one["water_level_m"],
            "points": [[0, 105], [0, bed], [width, bed], [width, 105]],
        }
        for one, (width, bed) in zip(FOUR["sections"], beds, strict=True)
    ]
    found = backcalc(tmp_path, capsys, FOUR | {"sections": sections})
    assert found["n"] == pytest.approx(0.035, rel=1e-9)
    # V / sqrt(g A / T) is largest in the narrow section.
    area = FOUR["sections"][1]["area_m2"]
    assert found["froude"] == pytest.approx(30 / area / (9.80665 * area / 11) ** 0.5, rel=1e-9)


def test_many_flows_give_n_against_stage(tmp_path: Path, capsys: Capture) -> None:
    other = FOUR | {"discharge_m3s": 20.0, "errors": ERRORS}
    file = tmp_path / "flows.json"
    file.write_text(json.dumps([FOUR, other]), encoding="utf-8")
    assert main(["backcalc", str(file)]) == 0
    first, second = json.loads(capsys.readouterr().out)
    assert first == backcalc(tmp_path, capsys, FOUR)
    assert second == backcalc(tmp_path, capsys, other)
    assert second["water_level_m"] == FOUR["sections"][0]["water_level_m"]


def test_the_froude_number_uses_the_width_of_the_water(tmp_path: Path, capsys: Capture) -> None:
    alone = {"area_m2": 24.0, "wetted_perimeter_m": 15.2, "top_width_m": 12.0}
    found = backcalc(tmp_path, capsys, {"discharge_m3s": 38, "slope": 0.0021, "sections": [alone]})
    assert found["froude"] == pytest.approx(38 / 24 / (9.80665 * 2.0) ** 0.5)


def test_a_subreach_that_contradicts_itself_has_no_n(tmp_path: Path, capsys: Capture) -> None:
    sections = [dict(one) for one in FOUR["sections"]]
    sections[2]["water_level_m"] += 0.06
    found = backcalc(tmp_path, capsys, FOUR | {"sections": sections})
    assert found["n"] == pytest.approx(0.035, rel=1e-9)
    assert [one["n"] is None for one in found["subreaches"]] == [False, True, False]
    says = next(f["says"] for f in found["findings"] if f["rule"] == "measured-energy-rises")
    assert "between sections 2 and 3" in says


SOUND = FlowFacts(
    n=0.035,
    sections=4,
    length_m=300.0,
    fall_m=0.6,
    net_head_m=0.55,
    loss_m=0.05,
    velocity_heads_m=(0.10, 0.15, 0.12, 0.14),
    depth_m=1.5,
    froude=0.4,
    widths_known=True,
    subreach_n=(0.03, 0.04, 0.035),
)
MET: dict[str, tuple[dict[str, Any], str]] = {
    "measured-fall-small": (
        {"net_head_m": 0.149, "loss_m": 0.0}, "energy line falls by 0.149 m only",
    ),
    "measured-fall-under-velocity-head": (
        {"velocity_heads_m": (0.5, 0.61)}, "fall of 0.600 m is less than the velocity head",
    ),
    "measured-losses-large": ({"loss_m": 0.12}, "22 % of the head that friction takes"),
    "measured-reach-short": ({"length_m": 100.0}, "67 times its mean depth of 1.50 m"),
    "measured-flow-supercritical": ({"froude": 1.2}, "Froude number reaches 1.20"),
    "measured-energy-rises": ({"subreach_n": (None, 0.04, None)}, "1 and 2 and 3 and 4"),
    "measured-n-unusual": ({"n": 0.6}, "check the units"),
    "measured-subreaches-differ": ({"subreach_n": (0.03, 0.05)}, "between 0.030 and 0.050"),
    "measured-sections-few": ({"sections": 2}, "Two sections"),
    "measured-reach-expanding": ({"velocity_heads_m": (0.2, 0.1)}, "a contracting reach is better"),
    "measured-errors-left-out": ({"errors_left_out": ("area",)}, "lower limit"),
}  # fmt: skip


def test_nothing_is_said_of_a_sound_reach() -> None:
    assert find_in_flow(SOUND) == ()


@pytest.mark.parametrize("key", [rule.key for rule in RULES])
def test_each_rule_speaks_where_it_is_met(key: str) -> None:
    changed, says = MET[key]
    findings = find_in_flow(FlowFacts(**(vars(SOUND) | changed)))
    assert [finding.rule for finding in findings] == [key]
    assert says in findings[0].says


def test_without_widths_the_froude_number_is_an_upper_bound() -> None:
    (finding,) = find_in_flow(FlowFacts(**(vars(SOUND) | {"froude": 1.2, "widths_known": False})))
    assert "may be above 1" in finding.says and "top_width_m" in finding.says
