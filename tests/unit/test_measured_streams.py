"""The catalogue of measured streams: its format, a survey's own files, analogues in words."""

import json
import os
from pathlib import Path

import pytest

from roughness.__main__ import main
from roughness.comparison.analogues import analogues
from roughness.comparison.likeness import ReachFacts, likeness
from roughness.comparison.stream_files import parse_streams
from roughness.desk.measured_streams import measured_streams
from roughness.errors import InputError
from roughness.quantities.strict_toml import LARGEST

OWN = """
title = "Our gaugings"

[[streams]]
key = "willow-brook"
stream = "Willow Brook"
place = "above the mill"
setting = "channel"
bed = ["gravel"]
d50_mm = 34
d84_mm = 80.0
plants = ["brush"]
source = "gauged by the district, report 33"
provenance = "own"

[[streams.events]]
n = 0.041
date = "2024-05-12"
discharge_m3s = 12.0
area_m2 = 8.0
velocity_ms = 1.5
slope = 0.003
hydraulic_radius_m = 0.8
growth = "leaf-on"
original = { area_ft2 = 86.1 }
"""


def read(text: str) -> None:
    parse_streams(text.encode(), "own.toml")


def test_a_stream_of_ones_own_is_read_with_all_that_is_known() -> None:
    (stream,) = parse_streams(OWN.encode(), "own.toml").streams
    assert (stream.name, stream.citation) == (
        "Willow Brook above the mill", "gauged by the district, report 33",
    )  # fmt: skip
    assert (stream.d50_mm, stream.plants, stream.provenance) == (34.0, ("brush",), "own")
    assert stream.events[0].original == {"area_ft2": 86.1}


WRONG: dict[str, tuple[str, str, str]] = {
    "nothing": (OWN, "", "it is empty; a list of measured streams in TOML is due"),
    "not TOML": ('title = "', 'title = ', "line 2, column"),
    "no title": ('title = "Our gaugings"', "", "title: it is missing"),
    "misspelt key": ("d50_mm", "d50_nm", "d50_nm: this key is not known; did you mean"),
    "misspelt in an event": ("slope =", "slop =", "did you mean 'slope'"),
    "misspelt original": ("area_ft2", "area_fts", "did you mean 'area_ft2'"),
    "n as text": ("n = 0.041", 'n = "0.041"', "Manning's n of a flood"),
    "n misplaced": ("n = 0.041", "n = 41", "above 0 and at most 1"),
    "n of zero": ("n = 0.041", "n = 0.0", "above 0 and at most 1"),
    "not a number": ("n = 0.041", "n = nan", "will not do"),
    "slope in percent": ("slope = 0.003", "slope = 3", "metres of fall a metre"),
    "negative area": ("area_m2 = 8.0", "area_m2 = -8.0", "area_m2: -8.0 will not do; above 0"),
    "grains in micrometres": ("d50_mm = 34", "d50_mm = 34000", "a size in mm"),
    "d84 below d50": ("d84_mm = 80.0", "d84_mm = 8.0", "d84 8 mm is below d50 34 mm"),
    "another setting": ('"channel"', '"river"', "one of channel, flood-plain is due"),
    "another bed": ('["gravel"]', '["shingle"]', "sand, gravel, cobbles"),
    "a bed that is no list": ('["gravel"]', '"gravel"', "a list is due"),
    "from memory": ('"own"', '"memory"', "what is only remembered is no measured stream"),
    "a date in words": ('"2024-05-12"', '"May 2024"', "such as 1964-03-12"),
    "velocity apart": ("velocity_ms = 1.5", "velocity_ms = 4.9", "1.5 m/s is due"),
    "feet kept as metres": ("area_m2 = 8.0", "area_m2 = 86.1", "7.999 is due"),
    "an original alone": ("area_m2 = 8.0\n", "", "area_m2 is missing beside area_ft2 86.1"),
    "derived from nowhere": ("slope = 0.003", 'slope = 0.003\nderived = ["width"]', "'width'"),
    "control characters": ("Willow Brook", r"Willow\u001b[2J", "control or direction character"),
    "key with blanks": ('"willow-brook"', '"Willow Brook"', "small letters, digits"),
    "no events": (OWN[OWN.index("[[streams.events]]") :], "events = []", "one or more is due"),
    "the key twice": (OWN, OWN + OWN[OWN.index("[[streams]]") :], "two streams have this key"),
}  # fmt: skip


@pytest.mark.parametrize("case", WRONG)
def test_one_sentence_says_where_a_file_is_wrong(case: str) -> None:
    old, new, says = WRONG[case]
    assert old in OWN
    with pytest.raises(InputError) as refused:
        read(OWN.replace(old, new, 1))
    sentence = str(refused.value)
    assert says in sentence
    assert sentence.startswith("own.toml: ")
    assert "\n" not in sentence and "\x1b" not in sentence


@pytest.mark.parametrize("raw", [b"\xff\xfe", b"#" * (LARGEST + 1)])
def test_a_file_that_is_no_text_or_without_end_is_refused(raw: bytes) -> None:
    with pytest.raises(InputError, match=r"own\.toml: "):
        parse_streams(raw, "own.toml")


def test_a_survey_adds_its_own_streams_by_the_same_format(tmp_path: Path) -> None:
    published = measured_streams()
    assert published.faults == ()
    assert measured_streams(tmp_path) == published
    (tmp_path / "measured").mkdir()
    (tmp_path / "measured" / "ours.toml").write_text(OWN, encoding="utf-8")
    both = measured_streams(tmp_path)
    assert both.faults == ()
    assert [s.key for s in both.streams] == [*(s.key for s in published.streams), "willow-brook"]


def test_a_file_that_cannot_be_used_hides_no_other(tmp_path: Path) -> None:
    folder = tmp_path / "measured"
    folder.mkdir()
    (folder / "a.toml").write_text("title = ", encoding="utf-8")
    (folder / "b.toml").write_text(OWN, encoding="utf-8")
    (folder / "c.toml").write_text(OWN.replace("above the", "below the"), encoding="utf-8")
    (tmp_path / "outside.toml").write_text(OWN, encoding="utf-8")
    (folder / "d.toml").symlink_to(tmp_path / "outside.toml")
    (folder / ".hidden.toml").write_text("x", encoding="utf-8")
    (folder / "e.toml").mkdir()
    found = measured_streams(tmp_path)
    assert found.streams[-1].place == "above the mill"
    told = [str(fault) for fault in found.faults]
    assert [text.partition(": ")[0] for text in told] == [
        "measured/a.toml", "measured/c.toml", "measured/d.toml",
    ]  # fmt: skip
    assert "the key is that of Willow Brook above the mill already" in told[1]
    assert "a link that leads out of the folder" in told[2]


@pytest.mark.skipif(os.geteuid() == 0, reason="root reads everything")
def test_a_file_that_may_not_be_read_is_named(tmp_path: Path) -> None:
    (tmp_path / "measured").mkdir()
    (tmp_path / "measured" / "a.toml").touch(mode=0)
    (fault,) = measured_streams(tmp_path).faults
    assert str(fault).startswith("measured/a.toml: it cannot be read")


def test_the_format_is_published(capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["schema", "measured-streams"]) == 0
    schema = json.loads(capsys.readouterr().out)
    assert {"title", "streams"} <= set(schema["required"])
    assert {"d50_mm", "events", "provenance"} <= set(schema["$defs"]["StreamShape"]["properties"])


def reasons(here: ReachFacts, there: ReachFacts) -> tuple[str, ...]:
    found = likeness(here, there)
    assert found is not None
    return found.reasons


def test_likeness_is_told_in_words() -> None:
    here = ReachFacts(setting="channel", d50_mm=200, slope=0.002, hydraulic_radius_m=1.0)
    there = ReachFacts(
        setting="channel", d50_mm=220, slope=0.0002, depth_m=2.5, plants=("brush", "trees")
    )
    assert reasons(here, there) == (
        "bed of the same size (220 mm there, 200 mm here)",
        "slope 10 times smaller (0.0002 there, 0.002 here)",
        "depth 2.5 times larger (2.5 m there, 1 m here)",
        "plants not known here",
    )


@pytest.mark.parametrize(
    ("here", "there", "says"),
    [
        ({"d50_mm": 45.0}, {"bed": ("gravel",)}, "bed of the same kind (gravel)"),
        ({"bed": ("sand",)}, {"bed": ("boulders",)}, "bed of boulders, here of sand"),
        ({"d50_mm": 10.0}, {"d50_mm": 200.0}, "bed 20 times coarser (200 mm there, 10 mm here)"),
        ({"slope": 0.001}, {"slope": 0.00105}, "about the same slope (0.00105 there, 0.001 here)"),
        ({"slope": 1e-300}, {"slope": 0.1}, "slope over a million times larger"),
        ({"plants": ()}, {"plants": ()}, "plants alike (none)"),
        ({"plants": ("trees",)}, {"plants": ()}, "plants: none there, trees here"),
        ({"growth": "leaf-off"}, {"growth": "leaf-on"}, "state of growth leaf-on there"),
        ({"growth": "leaf-on"}, {"growth": "leaf-on"}, "the same state of growth (leaf-on)"),
    ],
)
def test_each_criterion_has_its_words(
    here: dict[str, object], there: dict[str, object], says: str
) -> None:
    told = reasons(
        ReachFacts(setting="channel", **here),  # type: ignore[arg-type]
        ReachFacts(setting="channel", **there),  # type: ignore[arg-type]
    )
    assert told[0].startswith(says)


def test_a_channel_is_never_like_a_flood_plain() -> None:
    channel = ReachFacts(setting="channel", depth_m=1.0)
    assert likeness(channel, ReachFacts(setting="flood-plain", depth_m=1.0)) is None


def test_a_stream_of_which_n_alone_is_known_is_named_and_not_ranked() -> None:
    found = analogues(
        ReachFacts(setting="channel", d50_mm=200, slope=0.02), measured_streams().streams
    )
    assert found.alike[0].stream.key == "rock-creek-darby"
    assert found.alike[0].n == 0.075
    assert "murder-monticello" in [stream.key for stream in found.unknown]


def test_the_event_most_alike_speaks_for_a_stream() -> None:
    streams = measured_streams().streams
    bare = ReachFacts(setting="channel", bed=("firm soil",), plants=(), depth_m=1.5)
    willows = ReachFacts(
        setting="channel", bed=("firm soil",), plants=("brush",), depth_m=1.5, growth="leaf-on"
    )
    assert analogues(bare, streams).alike[0].event.date == "1964-03"
    assert analogues(willows, streams).alike[0].event.date == "1970-10"
