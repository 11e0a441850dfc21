"""`roughness section`: what flows through a section, its parts, its findings."""

import json
from pathlib import Path
from typing import Any

import pytest
from pydantic import TypeAdapter

from roughness.__main__ import main
from roughness.assessment.section_document import SectionFlow
from roughness.hydraulics.composite_relations import RELATIONS

Capture = pytest.CaptureFixture[str]

BED = [[0, 4], [0, 2], [20, 2], [20, 0], [30, 0], [30, 2], [50, 2], [50, 4]]
PARTS: list[dict[str, Any]] = [
    {"name": "left flood plain", "setting": "flood-plain", "from": 0, "to": 20, "n": 0.08},
    {"name": "main channel", "setting": "channel", "from": 20, "to": 30, "n": 0.03},
    {"name": "right flood plain", "setting": "flood-plain", "from": 30, "to": 50, "n": 0.06},
]
OVERBANK: dict[str, Any] = {"points": BED, "slope": 0.0009, "parts": PARTS, "water_level_m": 3}
TRAPEZOID: dict[str, Any] = {
    "trapezoid": {"bottom_width_m": 10, "side_slope": 2},
    "slope": 0.002,
    "parts": [{"n": 0.035}],
    "discharge_m3s": 50,
}
WALLED = [[0, 3], [0, 0], [4, 0], [4, 3]]


@pytest.fixture
def section(tmp_path: Path, capsys: Capture) -> Any:
    def run(document: dict[str, Any]) -> dict[str, Any]:
        file = tmp_path / "section.json"
        file.write_text(json.dumps(document), encoding="utf-8")
        assert main(["section", str(file)]) == 0
        printed: dict[str, Any] = json.loads(capsys.readouterr().out)
        return printed

    return run


def rules(printed: dict[str, Any]) -> list[str]:
    return [finding["rule"] for finding in printed["findings"]]


def test_a_discharge_gives_the_depth_and_all_that_goes_with_it(section: Any) -> None:
    # Values of another program for this trapezoid, see tests/outside/test_uniform_flow.py.
    best = section(TRAPEZOID)["best"]
    assert best["depth_m"] == best["water_level_m"] == pytest.approx(2.08273579475)
    assert best["velocity_ms"] == pytest.approx(1.69474665688)
    assert best["froude"] == pytest.approx(0.42658368789)
    assert best["reynolds"] == pytest.approx(2273632.95247)
    assert best["critical_depth_m"] == pytest.approx(1.25092591448)
    assert best["conveyance_m3s"] == pytest.approx(50 / 0.002**0.5)
    assert (best["alpha"], best["beta"]) == (1, 1)


def test_a_level_gives_the_discharge_of_parts_that_add_conveyances(section: Any) -> None:
    printed = section(OVERBANK)
    best = printed["best"]
    assert best["discharge_m3s"] == pytest.approx(66.8035129542)
    assert best["alpha"] == pytest.approx(2.31714681989)
    assert best["equivalent_n"] == pytest.approx(0.0364776346315)
    assert [part["best"]["conveyance_m3s"] for part in printed["parts"]] == pytest.approx(
        [241.999132575, 1662.11912246, 322.6655101]
    )
    # The lines of water against water, 1 m each, are nobody's wetted perimeter.
    assert [part["best"]["wetted_perimeter_m"] for part in printed["parts"]] == [21, 14, 21]
    assert [(part["from"], part["to"]) for part in printed["parts"]] == [
        (0, 20),
        (20, 30),
        (30, 50),
    ]
    assert "composite_n" not in printed
    assert rules(printed) == ["several-critical-depths", "uneven-velocities"]


def test_depth_and_level_are_two_ways_to_say_the_same(section: Any) -> None:
    raised = [[x, z + 100] for x, z in BED]
    by_depth = OVERBANK | {"points": raised, "depth_m": 3}
    del by_depth["water_level_m"]
    printed = section(by_depth)["best"]
    assert printed["water_level_m"] == 103
    assert printed["discharge_m3s"] == pytest.approx(section(OVERBANK)["best"]["discharge_m3s"])


def test_a_range_of_n_gives_low_best_and_high(section: Any) -> None:
    parts = [{"n": {"low": 0.03, "best": 0.035, "high": 0.045}}]
    printed = section(TRAPEZOID | {"parts": parts})
    depths = [printed[case]["depth_m"] for case in ("low", "best", "high")]
    assert depths == sorted(depths) and depths[0] < depths[2]
    assert [printed["parts"][0][case]["n"] for case in ("low", "best", "high")] == [
        0.03,
        0.035,
        0.045,
    ]
    assert "low" not in section(TRAPEZOID) and "high" not in section(TRAPEZOID)["parts"][0]


def test_bed_and_banks_of_one_part_have_a_composite_n_by_every_relation(section: Any) -> None:
    # n 0.05, 0.03, 0.08 on bank, bed, bank of a trapezoid 6 m wide, 1:2, 1.5 m deep.
    document = {
        "trapezoid": {"bottom_width_m": 6, "side_slope": 2},
        "slope": 0.002,
        "depth_m": 1.5,
        "parts": [{"n": 0.03, "segments": [{"to": 0, "n": 0.05}, {"from": 6, "n": 0.08}]}],
    }
    printed = section(document)
    composite = printed["composite_n"]
    assert set(composite) == set(RELATIONS)
    assert composite["horton-einstein"] == pytest.approx(0.0505823689125)
    assert composite["lotter"] == pytest.approx(0.0312928001812)
    assert printed["parts"][0]["composite_n"] == composite
    assert printed["parts"][0]["best"]["n"] == pytest.approx(0.0505823689125)
    assert rules(printed) == ["composite-n-differs"]
    assert "(lotter)" in printed["findings"][0]["says"]


def test_segments_with_a_range_wide_enough_raise_no_question(section: Any) -> None:
    wide = {"low": 0.02, "best": 0.03, "high": 0.05}
    segments = [{"to": 0, "n": 0.035}, {"from": 0, "n": wide}]
    document = TRAPEZOID | {"parts": [{"segments": segments}]}
    assert rules(section(document)) == []


def test_a_vertical_wall_is_a_segment_without_width(section: Any) -> None:
    walls = [{"from": 0, "to": 0, "n": 0.03}, {"from": 4, "to": 4, "n": 0.03}]
    document = {
        "points": WALLED,
        "slope": 0.001,
        "depth_m": 1,
        "parts": [{"n": 0.012, "segments": walls}],
    }
    printed = section(document)
    # Bed 4 m, walls 1 m each.
    assert printed["composite_n"]["horton-einstein"] == pytest.approx(
        ((4 * 0.012**1.5 + 2 * 0.03**1.5) / 6) ** (2 / 3)
    )
    assert printed["composite_n"]["cox"] == pytest.approx(0.012)
    # It divides by each segment's radius, and a wall has none.
    assert "yen-friction-slope" not in printed["composite_n"]


def test_a_part_of_one_n_has_that_n_by_every_relation(section: Any) -> None:
    assert set(section(TRAPEZOID)["composite_n"].values()) == {0.035}


def test_a_part_that_the_water_does_not_reach_is_dry_and_said_to_be(section: Any) -> None:
    printed = section(OVERBANK | {"water_level_m": 1.5})
    left = printed["parts"][0]
    assert left["best"]["n"] is None and left["composite_n"] is None
    assert left["best"]["area_m2"] == left["best"]["velocity_ms"] == 0
    assert rules(printed) == ["part-is-dry"]
    assert "left flood plain and right flood plain are dry" in printed["findings"][0]["says"]


def test_the_outermost_parts_of_a_trapezoid_go_on_up_its_banks(section: Any) -> None:
    parts = [{"name": "bank", "to": 0, "n": 0.05}, {"name": "rest", "from": 0, "n": 0.03}]
    printed = section(TRAPEZOID | {"parts": parts})
    depth = printed["best"]["depth_m"]
    assert printed["parts"][0]["best"]["area_m2"] == pytest.approx(depth**2)
    # A part that begins higher up than any water is dry.
    parts = [{"name": "hill", "to": -9000, "n": 0.05}, {"name": "rest", "from": -9000, "n": 0.03}]
    assert rules(section(TRAPEZOID | {"parts": parts})) == ["part-is-dry"]


def test_the_n_of_a_part_fills_the_stretch_between_its_segments(section: Any) -> None:
    segments = [{"to": -1, "n": 0.05}, {"from": 12, "n": 0.05}]
    inner = section(TRAPEZOID | {"parts": [{"n": 0.03, "segments": segments}]})
    told = [*segments, {"from": -1, "to": 12, "n": 0.03}]
    outer = section(TRAPEZOID | {"parts": [{"segments": told}]})
    assert inner["best"] == outer["best"]


def test_a_plain_left_in_one_part_is_advised_to_be_divided_off(section: Any) -> None:
    printed = section(OVERBANK | {"parts": [{"n": 0.04}]})
    assert rules(printed) == ["section-to-divide", "several-critical-depths"]
    assert "divided at 20.00 m" in printed["findings"][0]["says"]


def test_several_normal_depths_are_said_and_the_highest_is_given(section: Any) -> None:
    document = OVERBANK | {"parts": [{"n": 0.04}], "slope": 0.001}
    bankfull = section(document | {"water_level_m": 2})["best"]["discharge_m3s"]
    del document["water_level_m"]
    printed = section(document | {"discharge_m3s": bankfull * 0.9})
    assert "several-normal-depths" in rules(printed)
    assert printed["best"]["depth_m"] > 2
    # Divided there is only one.
    divided = OVERBANK | {"slope": 0.001, "discharge_m3s": bankfull * 0.9}
    del divided["water_level_m"]
    assert "several-normal-depths" not in rules(section(divided))


def test_an_overhang_is_calculated_and_asked_about(section: Any) -> None:
    bed = [[0, 3], [2, 2.9], [2, 1], [1, 0.9], [1, 0], [5, 0], [5, 3]]
    printed = section({"points": bed, "slope": 0.001, "depth_m": 2, "parts": [{"n": 0.04}]})
    assert rules(printed) == ["bed-runs-backwards"]
    assert "after point 3" in printed["findings"][0]["says"]
    # 4 m x 0.95 m on average up to the roof, and 3 m wide above it.
    assert printed["best"]["area_m2"] == pytest.approx(4 * 0.95 + 3 * 1.05)
    assert printed["best"]["top_width_m"] == pytest.approx(3)


def test_water_on_both_sides_of_an_island_is_said_to_be_two(section: Any) -> None:
    bed = [[0, 3], [0, 0], [2, 0], [2, 2], [3, 2], [3, 0], [6, 0], [6, 3]]
    document = {"points": bed, "slope": 0.001, "depth_m": 1, "parts": [{"n": 0.04}]}
    assert rules(section(document)) == ["separate-waters"]
    assert rules(section(document | {"depth_m": 2.5})) == []


def test_fast_smooth_steep_and_uneven_flow_is_asked_about(section: Any) -> None:
    steep = section(TRAPEZOID | {"slope": 0.2})
    assert rules(steep) == ["section-supercritical", "steep-bed-and-depth"]
    smooth = section(TRAPEZOID | {"slope": 1e-5, "parts": [{"n": 0.008}], "discharge_m3s": 0.5})
    assert rules(smooth) == ["not-fully-rough"]


def test_an_equivalent_n_below_every_n_is_shown_as_it_is(section: Any) -> None:
    alike = [part | {"n": 0.05} for part in PARTS]
    printed = section(OVERBANK | {"parts": alike})
    assert printed["best"]["equivalent_n"] == pytest.approx(0.0458481908569)
    assert "equivalent-n-outside" in rules(printed)


def test_an_n_that_segments_leave_no_place_is_said_to_be_unused(section: Any) -> None:
    segments = [{"to": 5, "n": 0.03}, {"from": 5, "n": 0.03}]
    printed = section(TRAPEZOID | {"parts": [{"n": 0.05, "segments": segments}]})
    assert rules(printed) == ["part-n-not-used"]
    assert printed["parts"][0]["best"]["n"] == pytest.approx(0.03)


def test_critical_depth_above_what_was_surveyed_is_not_given(section: Any) -> None:
    document = {"points": WALLED, "slope": 0.3, "depth_m": 2.9, "parts": [{"n": 0.02}]}
    printed = section(document)
    assert printed["best"]["critical_depth_m"] is None
    assert "no-critical-depth" in rules(printed)


def test_several_critical_depths_are_said_and_that_of_least_energy_given(section: Any) -> None:
    # A little less than what is critical at the bank's edge of a wide level bench.
    wide = [[0, 9], [0, 1], [100, 1], [100, 0], [104, 0], [104, 1], [204, 1], [204, 9]]
    at_bank = 4 * 1.0 * 9.80665**0.5
    printed = section(
        {"points": wide, "slope": 0.001, "discharge_m3s": at_bank * 0.95, "parts": [{"n": 0.04}]}
    )
    assert "several-critical-depths" in rules(printed)
    depth, below = printed["best"]["critical_depth_m"], 0.95 ** (2 / 3)
    area = 4 * depth + 200 * (depth - 1)
    assert area * (area / 204) ** 0.5 == pytest.approx(4 * 0.95)
    energies = [
        y + (at_bank * 0.95 / a) ** 2 / (2 * 9.80665)
        for y, a in ((depth, area), (below, 4 * below))
    ]
    assert energies[0] < energies[1] == pytest.approx(1.5 * below)


def test_what_is_printed_is_what_the_schema_promises(section: Any, capsys: Capture) -> None:
    printed = section(OVERBANK)
    TypeAdapter(SectionFlow).validate_python(printed)
    assert main(["schema", "section-output"]) == 0
    schema = json.loads(capsys.readouterr().out)
    assert set(printed) <= set(schema["properties"])
    assert set(schema["$defs"]["Flow"]["properties"]) == set(printed["best"])
    assert set(schema["$defs"]["PartFlow"]["properties"]) == set(printed["parts"][0]["best"])
    assert set(schema["relations"]) == set(RELATIONS)
    assert all(r["assumption"] and r["source"] for r in schema["relations"].values())
    main(["schema", "section"])
    keys = json.loads(capsys.readouterr().out)["$defs"]["SectionPart"]["properties"]
    assert {"from", "to", "n", "segments"} <= set(keys)


def test_standard_input_is_read_too(
    monkeypatch: pytest.MonkeyPatch, tmp_path: Path, capsys: Capture
) -> None:
    file = tmp_path / "s.json"
    file.write_text(json.dumps(TRAPEZOID), encoding="utf-8")
    with file.open(encoding="utf-8") as given:
        monkeypatch.setattr("sys.stdin", given)
        assert main(["section", "-", "--json"]) == 0
    assert json.loads(capsys.readouterr().out)["best"]["discharge_m3s"] == 50
