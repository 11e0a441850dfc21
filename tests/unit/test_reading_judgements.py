"""An estimate's text is read strictly: one sentence says what is wrong, where, what is right."""

import copy
import json
from typing import Any

import pytest

from roughness import estimate
from roughness.errors import InputError

GOOD: dict[str, Any] = {
    "handbook": "usgs-wsp-2339",
    "setting": "channel",
    "factors": {
        "base": {"grade": "gravel"},
        "irregularity": {"grade": "minor"},
        "variation": {"grade": "gradual"},
        "obstruction": {"grade": "negligible"},
        "vegetation": {"grade": "small"},
        "meander": {"grade": "minor"},
    },
}


def changed(path: str, value: Any) -> dict[str, Any]:
    document = copy.deepcopy(GOOD)
    *steps, last = path.split(".")
    inner = document
    for step in steps:
        inner = inner.setdefault(step, {})
    if value is KeyError:
        del inner[last]
    else:
        inner[last] = value
    return document


def refusal(document: Any) -> str:
    text = document if isinstance(document, str | bytes) else json.dumps(document)
    with pytest.raises(InputError) as caught:
        estimate(text)
    sentence = str(caught.value)
    assert "\n" not in sentence
    return sentence


@pytest.mark.parametrize(
    ("path", "value", "named"),
    [
        ("factors.obstruction.grade", "negligable", ["obstruction", "negligable", "'negligible'"]),
        ("factors.base.grade", "mud", ["base", "mud", "firm-soil"]),
        ("factors.obstruction", KeyError, ["obstruction", "missing", "negligible"]),
        ("handbook", KeyError, ["handbook", "missing"]),
        ("handbook", "usgs-2339", ["usgs-2339", "usgs-wsp-2339"]),
        ("setting", "chanel", ["setting", "chanel", "channel"]),
        ("factors.base.best", "0.03", ["factors.base.best", '"0.03"', "number"]),
        ("factors.base.best", "0,03", ["factors.base.best", "0.03"]),
        ("factors.base.best", True, ["factors.base.best", "true", "number"]),
        ("factors.base.best", [0.03], ["factors.base.best", "number"]),
        ("factors.base.best", -0.03, ["base.best", "negative"]),
        ("factors.base.best", 30, ["base.best", "30", "0.035"]),
        ("factors.base.best", 0, ["base.best", "bed"]),
        ("factors.base", {"grade": "gravel", "low": 0.04, "best": 0.03}, ["low 0.04", "best 0.03"]),
        ("factors.base", {"grade": "gravel", "low": 0.05, "high": 0.03}, ["low 0.05", "high 0.03"]),
        ("factors.base.blocked_percent", 8, ["factors.base", "blocked_percent", "not known"]),
        ("factors.vegetation.stems", 8, ["vegetation", "counted stems"]),
        ("factors.base.d50_mm", 0, ["d50_mm"]),
        ("factors.meander", {"sinuosity": 0.9}, ["sinuosity", "0.9", "1 or more"]),
        ("factors.obstruction", {"blocked_percent": 101}, ["blocked_percent", "0 to 100"]),
        ("factors.base", {}, ["base", "nothing was chosen", "gravel"]),
        ("factors.base", "gravel", ["factors.base", "object"]),
        ("factors", [], ["factors"]),
        ("factor", {}, ["'factor'", "'factors'"]),
        ("dependence", 1.5, ["dependence", "1.5"]),
        ("shape", "normal", ["shape", "normal", "triangular"]),
        ("measured.slope", -0.1, ["measured.slope"]),
        ("measured.slop", 0.1, ["measured", "slop", "slope"]),
        ("segments", [], ["segments", "not both"]),
    ],
)
def test_a_wrong_field_is_named_with_what_would_be_right(
    path: str, value: Any, named: list[str]
) -> None:
    sentence = refusal(changed(path, value))
    for word in named:
        assert word in sentence


@pytest.mark.parametrize(
    ("text", "named"),
    [
        ("", "empty"),
        ("  \n", "empty"),
        ("{", "line 1"),
        ("[]", "object"),
        ('{"handbook": NaN}', "NaN"),
        ('{"dependence": Infinity}', "Infinity"),
        ('{"dependence": 1e999}', "1e999"),
        ('{"handbook": "a", "handbook": "b"}', "twice"),
        ("[" * 65 + "]" * 65, "64"),
        (b'\xff{"handbook": 1}', "UTF-8"),
        ('{"x": "' + "a" * (1 << 20) + '"}', "bytes"),
    ],
)
def test_a_text_that_is_no_document_is_refused(text: str | bytes, named: str) -> None:
    assert named in refusal(text)


def test_a_byte_order_mark_is_allowed() -> None:
    assert estimate(b"\xef\xbb\xbf" + json.dumps(GOOD).encode()).n.best > 0


def test_a_flood_plain_has_neither_variation_nor_multiplier() -> None:
    plain = changed("setting", "flood-plain")
    plain["factors"]["meander"] = {"grade": "minor"}
    del plain["factors"]["variation"]
    assert "multiplier" in refusal(plain)
    plain["factors"]["meander"] = {"grade": "not-applicable"}
    assert estimate(plain).n.best > 0
    plain["factors"]["variation"] = {"grade": "not-applicable", "best": 0.01}
    assert "variation" in refusal(plain)


def test_a_plain_blocked_above_half_without_a_grade_is_refused_with_what_to_do() -> None:
    plain = changed("setting", "flood-plain")
    del plain["factors"]["variation"], plain["factors"]["meander"]
    plain["factors"]["obstruction"] = {"blocked_percent": 60}
    assert "split" in refusal(plain)
    plain["factors"]["obstruction"]["grade"] = "appreciable"
    assert "flood-plain-mostly-blocked" in [f.rule for f in estimate(plain).findings]


@pytest.mark.parametrize(
    ("base", "named"),
    [
        ({"grade": "sand"}, "regime"),
        ({"grade": "sand", "regime": "upper"}, "d50_mm"),
        ({"grade": "sand", "regime": "upper", "d50_mm": 0.1}, "best value of your own"),
        ({"d50_mm": 0.4}, "regime"),
    ],
)
def test_a_sand_bed_needs_its_size_and_its_regime(base: dict[str, Any], named: str) -> None:
    assert named in refusal(changed("factors.base", base))


def test_a_criterion_that_leaves_two_grades_names_both() -> None:
    vegetation = {"depth_m": 1.1, "vegetation_height_m": 1.0, "plants": "turf"}
    sentence = refusal(changed("factors.vegetation", vegetation))
    assert "medium" in sentence and "large" in sentence


def test_cowan_publishes_no_limits_for_what_is_blocked() -> None:
    document = changed("handbook", "cowan-1956")
    document["factors"] |= {"base": {"grade": "earth"}, "vegetation": {"grade": "low"}}
    document["factors"]["obstruction"] = {"blocked_percent": 8}
    assert "cowan-1956" in refusal(document)
    document["factors"]["obstruction"]["grade"] = "minor"
    assert estimate(document).n.best > 0


def test_segments_must_add_to_the_whole_perimeter() -> None:
    bed = {"name": "bed", "perimeter_percent": 60, "factors": GOOD["factors"]}
    document = changed("factors", KeyError) | {"segments": [bed, bed | {"name": "banks"}]}
    assert "120 %" in refusal(document)
    document["segments"][1]["name"] = "Bed"
    assert "different names" in refusal(document)


@pytest.mark.parametrize(("banks", "fits"), [(38.9, False), (39, True), (41, True), (41.1, False)])
def test_paced_shares_of_the_perimeter_may_miss_the_whole_by_one_percent(
    banks: float, fits: bool
) -> None:
    bed = {"name": "bed", "perimeter_percent": 60, "factors": GOOD["factors"]}
    other = bed | {"name": "banks", "perimeter_percent": banks}
    document = changed("factors", KeyError) | {"segments": [bed, other]}
    if fits:
        assert estimate(document).n.best > 0
    else:
        assert "add to" in refusal(document)


@pytest.mark.parametrize("note", [" \t", "\u200b\u00ad", "\u202e \u2060"])
def test_a_note_in_which_there_is_nothing_to_read_is_none(note: str) -> None:
    found = estimate(changed("factors.base", {"grade": "gravel", "best": 0.09, "note": note}))
    assert [f.rule for f in found.findings if f.level == "stop"] == ["outside-published-range"]


def test_a_key_that_stands_there_twice_is_found_among_many() -> None:
    # Counted pair by pair this takes a minute; the whole suite would stand still.
    many = ",".join(f'"{number}":0' for number in range(90_000))
    assert "'89999' stands there twice" in refusal(f'{{{many},"89999":1}}')
