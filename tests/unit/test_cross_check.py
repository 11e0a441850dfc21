"""Independent estimates beside judged values, and through the command line."""

import io
import json
import sys
from typing import Any

import pytest
from pydantic import TypeAdapter

from roughness.__main__ import main
from roughness.assessment.cross_checking import CrossChecked
from roughness.desk.cross_checking import crosschecked
from roughness.errors import RoughnessError
from roughness.shelf.facts import shipped_facts
from roughness.survey.cross_check import CrossCheck

Capture = pytest.CaptureFixture[str]
GRAVEL: dict[str, Any] = {
    "setting": "channel",
    "slope": 0.004,
    "hydraulic_radius_m": 1.0,
    "d50_mm": 45,
    "d84_mm": 90,
}
SAND: dict[str, Any] = {
    "setting": "channel",
    "slope": 0.0003,
    "hydraulic_radius_m": 2.0,
    "d50_mm": 0.4,
    "gradation": 1.6,
}
PLAIN: dict[str, Any] = {"setting": "flood-plain", "depth_m": 1.2, "hydraulic_radius_m": 1.2}
STEMS = {
    "counted": [{"number": 40, "diameter_m": 0.1}, {"number": 8, "diameter_m": 0.4}],
    "area_m2": 450,
    "n_boundary": 0.035,
    "drag": 11,
}


def checked(given: dict[str, Any]) -> CrossChecked:
    return crosschecked(json.dumps(given).encode())


def rules(given: dict[str, Any]) -> list[str]:
    return [finding.rule for finding in checked(given).findings]


def judged(low: float, best: float, high: float) -> dict[str, float]:
    return {"low": low, "best": best, "high": high}


def test_a_base_value_beyond_all_formulas_for_the_bed_is_asked_about() -> None:
    high = GRAVEL | {"base": judged(0.050, 0.055, 0.060)}
    assert rules(high) == ["base-against-grain-formulas"]
    finding = checked(high).findings[0]
    assert finding.factor == "base" and finding.level == "ask"
    assert "lies above all formulas" in finding.says and "strickler-1923 0.028" in finding.says
    assert rules(GRAVEL | {"base": judged(0.012, 0.013, 0.015)}) == ["base-against-grain-formulas"]
    assert rules(GRAVEL | {"base": judged(0.030, 0.034, 0.040)}) == []


def test_grain_values_are_never_laid_beside_a_whole_n_that_is_larger() -> None:
    whole = GRAVEL | {"n": judged(0.045, 0.050, 0.055)}
    assert rules(whole) == []
    assert rules(GRAVEL | {"n": judged(0.090, 0.100, 0.110)}) == ["n-against-reach-formulas"]


def test_a_reach_smoother_than_its_bed_is_asked_about() -> None:
    assert rules(GRAVEL | {"n": judged(0.014, 0.015, 0.016)}) == [
        "n-against-reach-formulas",
        "n-below-grains",
    ]


def test_a_channel_type_with_nothing_in_common_is_asked_about() -> None:
    boulders = {"setting": "channel", "channel_type": "mountain-cobbles-boulders"}
    assert rules(boulders | {"n": judged(0.02, 0.025, 0.03)}) == ["n-outside-channel-type"]
    assert rules(boulders | {"n": judged(0.03, 0.045, 0.06)}) == []
    (other,) = checked(boulders).estimates
    assert (other.low, other.n, other.high) == (0.04, 0.05, 0.07)
    assert other.provenance == "seen second hand" and "Chow" in other.source


def test_a_sand_bed_in_transition_is_asked_about_and_a_settled_one_is_not() -> None:
    assert rules(SAND) == []
    assert rules(SAND | {"slope": 0.001, "hydraulic_radius_m": 1.0, "velocity_ms": 1.4}) == [
        "sand-in-either-regime"
    ]


def test_few_stones_are_said_with_what_they_leave_open() -> None:
    few = {"pebble_count_mm": [12, 18, 22, 30, 41, 55, 64, 80, 95, 130]}
    found = checked(few)
    assert "few-stones-counted" in [finding.rule for finding in found.findings]
    assert found.pebble_count is not None and found.pebble_count.stones == 10
    assert "10 stones were counted, and the d84 is between" in found.findings[0].says
    many = {"pebble_tally": [{"from_mm": 8, "to_mm": 64, "count": 200}]}
    assert "few-stones-counted" not in rules(many)
    fine = {"pebble_tally": [{"from_mm": 0, "to_mm": 2, "count": 20}]}
    assert "the d84 is not told" in checked(fine).findings[0].says


def test_a_count_gives_the_sizes_that_were_not_given_and_yields_to_those_that_were() -> None:
    tally = [{"from_mm": 32 * f, "to_mm": 64 * f, "count": 60} for f in (1, 2)]
    count = {"hydraulic_radius_m": 1.0, "pebble_tally": tally}
    by_count = {o.method: o.n for o in checked(count).estimates}
    assert by_count["strickler-1923"] == pytest.approx(0.064 ** (1 / 6) / 21.1, rel=1e-12)
    both = checked(count | {"d50_mm": 30})
    assert {o.method: o.n for o in both.estimates}["strickler-1923"] == pytest.approx(
        0.030 ** (1 / 6) / 21.1, rel=1e-12
    )
    assert "size-against-count" in [finding.rule for finding in both.findings]
    assert "size-against-count" not in rules(count | {"d50_mm": 63})


def test_nothing_inside_its_domain_is_told() -> None:
    assert rules({"setting": "channel", "slope": 0.2}) == ["nothing-inside-its-domain"]
    assert rules({"setting": "channel"}) == []


def test_counted_stems_and_grass_are_other_roads_too() -> None:
    found = checked(PLAIN | {"stems": STEMS, "retardance": "B", "slope": 0.01})
    by_method = {other.method: other for other in found.estimates}
    stems = by_method["vegetation-density"]
    assert stems.n is not None and 0.05 < stems.n < 0.2 and stems.domain == "inside"
    assert by_method["kouwen-hec-15"].provenance == "memory"
    assert "stems" not in [m.measure for m in found.missing]
    assert [m.measure for m in checked(PLAIN).missing] == ["channel_type", "stems"]


def test_judged_values_never_change_an_independent_estimate() -> None:
    one = checked(GRAVEL).estimates
    two = checked(GRAVEL | {"base": judged(0.1, 0.2, 0.3), "n": judged(0.1, 0.2, 0.3)}).estimates
    assert one == two


def test_the_command_prints_the_contract(monkeypatch: pytest.MonkeyPatch, capsys: Capture) -> None:
    text = json.dumps(GRAVEL | {"pebble_count_mm": [40, 50, 60]}).encode()
    monkeypatch.setattr(sys, "stdin", io.TextIOWrapper(io.BytesIO(text)))
    assert main(["crosscheck", "-"]) == 0
    printed = json.loads(capsys.readouterr().out)
    assert set(printed) == {"estimates", "missing", "findings", "pebble_count"}
    by_method = {row["method"]: row for row in printed["estimates"]}
    limerinos = by_method["limerinos-1970"]
    assert {"method", "n", "domain", "why", "includes", "error_percent", "source"} <= set(limerinos)
    assert limerinos["n"] == pytest.approx(0.0347154447556, rel=1e-10)
    assert limerinos["includes"] == "grain" and limerinos["domain"] == "inside"
    assert by_method["jarrett-1984"]["includes"] == "whole reach"
    assert by_method["jarrett-1984"]["error_percent"] == 28


def test_an_empty_document_gives_no_estimate_and_says_what_is_missing(
    monkeypatch: pytest.MonkeyPatch, capsys: Capture
) -> None:
    monkeypatch.setattr(sys, "stdin", io.TextIOWrapper(io.BytesIO(b"{}")))
    assert main(["crosscheck", "-"]) == 0
    printed = json.loads(capsys.readouterr().out)
    assert printed["estimates"] == [] and printed["findings"] == []
    assert printed["missing"][0]["how"]


def test_the_output_is_what_its_schema_promises(capsys: Capture) -> None:
    for given in (GRAVEL, {"pebble_count_mm": [4, 5]}):
        document = checked(given).as_document()
        TypeAdapter(CrossChecked).validate_json(json.dumps(document), strict=True)
    main(["schema", "crosscheck-output"])
    schema = json.loads(capsys.readouterr().out)
    assert schema["required"] == ["estimates", "missing", "findings"]
    assert set(schema["$defs"]["OtherN"]["properties"]) == set(
        checked(GRAVEL).as_document()["estimates"][0]
    )


def test_typed_measurements_give_what_their_text_gives() -> None:
    assert crosschecked(CrossCheck(slope=0.01, hydraulic_radius_m=0.9144)) == checked(
        {"slope": 0.01, "hydraulic_radius_m": 0.9144}
    )


def test_a_size_that_the_count_does_not_tell_contradicts_nothing() -> None:
    fine = {"pebble_tally": [{"from_mm": 0, "to_mm": 2, "count": 200}], "d50_mm": 0.5}
    assert "size-against-count" not in rules(fine)


def test_a_table_that_is_not_there_is_said_with_its_name() -> None:
    with pytest.raises(RoughnessError, match=r"nothing\.json .* install roughness again"):
        shipped_facts("nothing.json")
