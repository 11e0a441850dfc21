"""Lists of reaches from outside: what is read, and how every bad row is named."""

import json
from typing import Any

import pytest

from roughness.desk.reach_lists import read_reach_list
from roughness.errors import InputError


def refusal(raw: bytes | str, name: str = "list.csv") -> str:
    with pytest.raises(InputError) as caught:
        read_reach_list(raw.encode() if isinstance(raw, str) else raw, name)
    return str(caught.value)


def test_a_csv_list_is_read_in_its_order_with_what_it_knows() -> None:
    text = (
        "\ufeffReach,from,to,slope,lon,lat,bed,note\r\n"
        '"Weir, pool",0,120,0.002,1.5,50,mud,"a ""b"""\r\n\r\nMill,120,,,,,,\r\n'
    )
    found = read_reach_list(text.encode(), "list.csv")
    weir, mill = found.reaches
    assert (weir.reach, weir.reach_from, weir.reach_to, weir.slope) == ("Weir, pool", 0, 120, 0.002)
    assert weir.position == ((1.5, 50.0),) and weir.note == 'a "b"'
    assert (mill.reach, mill.reach_to, mill.slope, mill.position) == ("Mill", None, None, None)
    assert found.unused == ("bed",)


def test_a_geojson_list_is_read_with_points_lines_and_no_position() -> None:
    features = [
        feature({"reach": "A", "from": 0, "slope": 0.01}, "LineString", [[1, 50], [1.1, 50.1, 7]]),
        feature({"name": "B"}, "Point", [2, 51]),
        {"type": "Feature", "properties": {"reach": "C", "gauge": 1}, "geometry": None},
    ]
    found = read_reach_list(collection(features), "list.geojson")
    assert [reach.reach for reach in found.reaches] == ["A", "B", "C"]
    assert found.reaches[0].position == ((1.0, 50.0), (1.1, 50.1))
    assert found.reaches[2].position is None and found.unused == ("gauge",)


def feature(properties: dict[str, Any], kind: str, coordinates: Any) -> dict[str, Any]:
    geometry = {"type": kind, "coordinates": coordinates}
    return {"type": "Feature", "properties": properties, "geometry": geometry}


def collection(features: Any, **more: Any) -> bytes:
    return json.dumps({"type": "FeatureCollection", "features": features} | more).encode()


@pytest.mark.parametrize(
    ("row", "named"),
    [
        (",1", "empty"),
        ("a\u202eb,1", "direction"),
        ("x" * 121 + ",1", "121"),
        ("WEIR ,0.1", "line 2"),
        ('B,"0,002"', "0.002"),
        ("B,steep", "steep"),
        ("B,nan", "slope"),
        ("B,inf", "slope"),
        ("B,-0.1", "slope"),
        ("B,2", "per mille"),
        ("B,1,2,3", "cells"),
    ],
)
def test_a_bad_row_is_named_with_its_line(row: str, named: str) -> None:
    sentence = refusal(f"reach,slope\nWeir,0.001\n{row}\n")
    assert "line 3" in sentence and named in sentence


def test_all_bad_rows_are_named_at_once() -> None:
    sentence = refusal("reach,slope\nA,x\nB,0.1\n,\nD,-1\n")
    assert "2 rows" in sentence and "line 2" in sentence and "line 5" in sentence
    many = refusal("reach,slope\n" + "A,x\n" * 500)
    assert "500 rows" in many and len(many) < 4000


@pytest.mark.parametrize(
    ("raw", "named"),
    [
        ("", "empty"),
        ("reach\n", "no reach"),
        ("name,slope\nA,1\n", "reach"),
        ("reach;slope\nA;1\n", "semicolons"),
        ("reach,slope,slope\nA,1,1\n", "twice"),
        ('reach\n"A\n', "line"),
        (b"reach\n\xff\n", "UTF-8"),
        (b"reach\nA\x00B\n", "NUL"),
        ('{"type": "Feature"}', "feature collection"),
        ("{", "JSON"),
    ],
)
def test_a_file_that_is_no_list_is_refused_in_one_sentence(raw: bytes | str, named: str) -> None:
    assert named in refusal(raw)


@pytest.mark.parametrize(
    ("item", "named"),
    [
        (feature({"reach": "A"}, "Point", [500000, 5600000]), "projected"),
        (feature({"reach": "A"}, "Polygon", []), "Polygon"),
        (feature({"reach": "A"}, "Point", ["1", 2]), "position"),
        (feature({"reach": 7}, "Point", [1, 2]), "text"),
        (feature({"reach": "A", "slope": "0,01"}, "Point", [1, 2]), "0.01"),
        (feature({"reach": "A", "slope": True}, "Point", [1, 2]), "slope"),
        (feature({}, "Point", [1, 2]), "empty"),
        ({"type": "Feature"}, "properties"),
        (7, "properties"),
    ],
)
def test_a_bad_feature_is_named(item: Any, named: str) -> None:
    sentence = refusal(collection([item]), "list.geojson")
    assert "feature 1" in sentence and named in sentence


def test_projected_coordinates_are_refused_by_their_own_word() -> None:
    crs = {"type": "name", "properties": {"name": "urn:ogc:def:crs:EPSG::25832"}}
    good = feature({"reach": "A"}, "Point", [1, 2])
    assert "projected" in refusal(collection([good], crs=crs), "list.geojson")
