"""A measured flow that cannot be: one sentence with the field, exit status 2, no n."""

import json
from pathlib import Path
from typing import Any

import pytest

from roughness.__main__ import main

FLOW: dict[str, Any] = {
    "discharge_m3s": 30.0,
    "sections": [
        {"distance_m": 0, "area_m2": 24, "wetted_perimeter_m": 17, "water_level_m": 10.4},
        {"distance_m": 100, "area_m2": 23, "wetted_perimeter_m": 17, "water_level_m": 10.2},
        {"distance_m": 200, "area_m2": 22, "wetted_perimeter_m": 16, "water_level_m": 10.0},
    ],
}
ONE: dict[str, Any] = {
    "discharge_m3s": 38.0,
    "slope": 0.0021,
    "sections": [{"area_m2": 24, "wetted_perimeter_m": 15.2}],
}


def whole(**changed: Any) -> str:
    return json.dumps(FLOW | changed)


def of_section(number: int, **changed: Any) -> str:
    sections = [dict(section) for section in FLOW["sections"]]
    sections[number - 1] |= changed
    return json.dumps(FLOW | {"sections": sections})


def lacking(name: str) -> str:
    sections = [dict(section) for section in FLOW["sections"]]
    del sections[1][name]
    return json.dumps(FLOW | {"sections": sections})


BANKS = [[0, 12], [2, 9], [12, 9], [14, 12]]


def with_points(points: Any = BANKS, level: Any = 10.4, **more: Any) -> str:
    first = {"distance_m": 0, "points": points, "water_level_m": level} | more
    return json.dumps(FLOW | {"sections": [first, *FLOW["sections"][1:]]})


def second(flow: str) -> str:
    return f"[{json.dumps(ONE)}, {flow}]"


def single(**changed: Any) -> str:
    return json.dumps({key: value for key, value in (ONE | changed).items() if value is not None})


WRONG: dict[str, tuple[str, str]] = {
    "empty": ("", "it is empty"),
    "no object": ("[1]", "flow 1: no JSON object"),
    "no flow": ("[]", "a list of 0 flows; 1 to 1000 are due"),
    "the second of two": (second(whole(discharge_m3s=-1)), "flow 2: discharge_m3s: -1 is not"),
    "the second falls not": (
        second(of_section(3, water_level_m=10.4)), "flow 2: sections: the energy line does not",
    ),
    "unknown key": (whole(discharge=30), "did you mean 'discharge_m3s'"),
    "text for a number": (whole(discharge_m3s="30,5"), "a point: 30.5"),
    "NaN": ('{"discharge_m3s": NaN}', "NaN is not a number"),
    "no discharge": ('{"sections": []}', "discharge_m3s: it is missing"),
    "discharge 0": (whole(discharge_m3s=0), "discharge_m3s: 0 is not above 0"),
    "negative discharge": (whole(discharge_m3s=-3), "the discharge in m3/s is due"),
    "no sections": (whole(sections=[]), "sections: 0 sections; 1 to 1000 are due"),
    "dry section": (of_section(2, area_m2=0), "section 2, area_m2: 0 is not above 0"),
    "no perimeter": (of_section(1, wetted_perimeter_m=0), "section 1, wetted_perimeter_m"),
    "perimeter too short": (of_section(3, wetted_perimeter_m=5), "at least 11.76 m"),
    "width above perimeter": (of_section(1, top_width_m=18), "at most the wetted perimeter"),
    "width 0": (of_section(1, top_width_m=0), "section 1, top_width_m: 0 is not above 0"),
    "alpha below 1": (of_section(2, alpha=0.9), "section 2, alpha: alpha 0.9"),
    "discharge in litres": (whole(discharge_m3s=30000), "check that the discharge is in m3/s"),
    "distance twice": (of_section(2, distance_m=0), "section 2, distance_m: the distance 0 m"),
    "distances not in order": (of_section(3, distance_m=50), "section 3, distance_m"),
    "no distance": (lacking("distance_m"), "section 2, distance_m: it is missing"),
    "no level": (lacking("water_level_m"), "section 2, water_level_m: it is missing"),
    "from downstream up": (
        json.dumps(FLOW | {"sections": FLOW["sections"][::-1]}), "from upstream to downstream",
    ),
    "level water": (of_section(3, water_level_m=10.4), "the energy line does not fall"),
    "slope and levels": (whole(slope=0.002), "slope: it does not count here"),
    "slope missing": (single(slope=None), "one section needs the slope"),
    "slope 0": (single(slope=0), "slope: 0 is not above 0"),
    "slope negative": (single(slope=-0.002), "water runs downhill"),
    "slope in permille": (single(slope=2.1), "slope: 2.1 is too steep"),
    "loss above 1": (whole(expansion_loss=1.5), "expansion_loss: 1.5 is no part"),
    "negative loss": (whole(contraction_loss=-0.1), "contraction_loss: -0.1 is no part"),
    "negative error": (whole(errors={"discharge_percent": -5}), "errors.discharge_percent: -5 %"),
    "error of all": (whole(errors={"area_percent": 100}), "0 to below 100 is due"),
    "slope error with levels": (whole(errors={"slope_percent": 5}), "errors.slope_percent"),
    "level error alone": (single(errors={"water_level_m": 0.01}), "errors.water_level_m"),
    "no area": (lacking("area_m2"), "section 2, area_m2: it is missing; area_m2 and wetted_"),
    "one point": (with_points([[0, 12]]), "section 1: points: one point is no section"),
    "a point twice": (with_points([[0, 12], [2, 9], [2, 9], [14, 12]]), "points 2 and 3 are the"),
    "points from the right": (with_points(BANKS[::-1]), "from left to right looking downstream"),
    "a point that is none": (with_points([[0, 12], [2], [14, 12]]), "sections.0.points.1"),
    "points and area": (with_points(area_m2=14), "section 1, area_m2: it stands beside points"),
    "points without level": (with_points(level=None), "section 1, water_level_m: it is missing"),
    "level below the bed": (with_points(level=9), "9 m is not above the lowest point, 9 m"),
    "level above the banks": (with_points(level=12.5), "above the lower end of the section, 12 m"),
}  # fmt: skip


@pytest.mark.parametrize("case", WRONG)
def test_one_sentence_says_what_is_wrong(
    case: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    text, says = WRONG[case]
    file = tmp_path / "flow.json"
    file.write_text(text, encoding="utf-8")
    assert main(["backcalc", str(file)]) == 2
    out, err = capsys.readouterr()
    assert out == ""
    assert says in err
    assert err.startswith("roughness: ") and err.count("\n") == 1


def test_the_documents_that_are_varied_are_right_themselves(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    for document in (whole(), single(), with_points()):
        file = tmp_path / "flow.json"
        file.write_text(document, encoding="utf-8")
        assert main(["backcalc", str(file)]) == 0
    assert capsys.readouterr().err == ""
