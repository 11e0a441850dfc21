"""Channel types: looked up by words, refused where the table is no table."""

import json

import pytest

from roughness.__main__ import main
from roughness.comparison import of_channel_type, parse_channel_types
from roughness.desk.cross_checking import channel_types
from roughness.errors import InputError, UnknownNameError

ROW = {
    "key": "ditch",
    "group": "made",
    "name": "a ditch",
    "setting": "channel",
    "low": 0.02,
    "normal": 0.03,
    "high": 0.04,
    "provenance": "memory",
}
TABLE = {"key": "t", "citation": "c", "provenance": "memory", "notes": [], "rows": [ROW]}


def parsed(**changes: object) -> object:
    table = TABLE | {"rows": [ROW | changes]}
    return parse_channel_types(json.dumps(table).encode(), "t.json")


def test_words_in_any_order_and_beginnings_of_words_find_rows() -> None:
    table = channel_types()
    assert [row.key for row in table.find("boulders mountain")] == [
        "mountain-gravel-cobbles",
        "mountain-cobbles-boulders",
    ]
    assert [row.key for row in table.find("willow summer")] == ["willows-dense-summer"]
    assert table.one("Field-No-Crop").normal == 0.030
    assert table.find("") == () and table.find("space ship") == ()


def test_words_that_fit_several_rows_or_none_are_refused_with_names() -> None:
    table = channel_types()
    with pytest.raises(InputError, match=r"fits 2 channel types.*brush-light-winter"):
        table.one("light brush trees")
    with pytest.raises(UnknownNameError, match="did you mean 'plain-sluggish-weedy'"):
        table.one("plain-slugish-wedy")
    with pytest.raises(UnknownNameError, match="tables chow-1959` prints them all"):
        table.one("space ship")


def test_a_row_of_another_setting_is_outside_its_domain() -> None:
    table = channel_types()
    row = table.one("willows-dense-summer")
    assert of_channel_type(table, row, "flood-plain").domain == "inside"
    assert of_channel_type(table, row, None).domain == "inside"
    other = of_channel_type(table, row, "channel")
    assert other.domain == "outside" and "flood-plain" in other.why
    assert (other.low, other.n, other.high) == (0.11, 0.15, 0.20)


@pytest.mark.parametrize(
    ("changes", "says"),
    [
        ({"low": 0.05}, "the row ditch is not in order"),
        ({"low": 0.0}, "the row ditch is not in order"),
        ({"normal": "0.03"}, "rows.0.normal"),
        ({"colour": "red"}, "rows.0.colour"),
    ],
)
def test_a_file_that_is_no_such_table_is_refused_with_the_place(
    changes: dict[str, object], says: str
) -> None:
    with pytest.raises(InputError, match=says):
        parsed(**changes)


def test_a_key_that_comes_twice_is_refused() -> None:
    table = json.dumps(TABLE | {"rows": [ROW, ROW]}).encode()
    with pytest.raises(InputError, match="twice"):
        parse_channel_types(table, "t.json")


def test_the_types_are_printed_with_their_keys_and_marks(
    capsys: pytest.CaptureFixture[str],
) -> None:
    assert main(["tables", "chow-1959"]) == 0
    out = capsys.readouterr().out
    assert all(len(line) <= 80 for line in out.splitlines())
    flat = " ".join(out.split())
    for row in channel_types().rows:
        assert f" {row.key}: {row.name}; " in flat
    assert "0.035 to 0.1, no usual value; memory" in flat
    assert main(["tables", "chow-1959", "--json"]) == 0
    assert len(json.loads(capsys.readouterr().out)["rows"]) == len(channel_types().rows)
