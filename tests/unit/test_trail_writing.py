"""Appending: kept for certain, or refused in a sentence with nothing written."""

import json
import math
from pathlib import Path
from typing import Any

import pytest

from roughness.errors import (
    BrokenTrailError,
    InputError,
    NotKeptError,
    RecordError,
)
from roughness.trail.lines import encoded, hash_of
from roughness.trail.locking import SurveyLock
from roughness.trail.naming import reach_trail
from roughness.trail.reading import read_trail
from roughness.trail.writing import Kept, append, begin

AT = "2026-06-03T18:20:00+02:00"
BEGIN = {"format": 1, "survey": "ab" * 16, "reach": "mill weir"}


@pytest.fixture
def lock(tmp_path: Path) -> SurveyLock:
    (tmp_path / "reaches").mkdir()
    return SurveyLock(tmp_path)


@pytest.fixture
def trail(tmp_path: Path, lock: SurveyLock) -> Path:
    path = reach_trail(tmp_path, "a")
    begin(path, BEGIN, by="Ann", at=AT, lock=lock)
    return path


def visit(path: Path, lock: SurveyLock, name: str = "x", **more: Any) -> Kept:
    return append(path, "visit", {"visit": name}, by="Ann", at=AT, lock=lock, **more)


def test_each_line_names_the_hash_of_the_one_before(trail: Path, lock: SurveyLock) -> None:
    kept = [visit(trail, lock, f"number {i}") for i in range(3)]
    stored = trail.read_bytes().split(b"\n")
    assert [json.loads(raw)["prev"] for raw in stored[:-1]] == [
        None,
        *(hash_of(raw) for raw in stored[:-2]),
    ]
    assert stored[-1] == b""
    assert kept[-1].line.hash == hash_of(stored[-2])
    assert kept[-1].trail == read_trail(trail)


def test_what_somebody_else_wrote_meanwhile_is_not_passed_over(
    trail: Path, lock: SurveyLock
) -> None:
    mine = read_trail(trail)
    theirs = visit(trail, lock, "theirs")
    kept = visit(trail, lock, "mine", known=mine)
    assert kept.line.prev == (theirs.line.hash,)


def test_lines_go_on_after_crlf_line_ends(trail: Path, lock: SurveyLock) -> None:
    visit(trail, lock)
    trail.write_bytes(trail.read_bytes().replace(b"\n", b"\r\n"))
    assert visit(trail, lock, "after").trail.intact


@pytest.mark.parametrize(
    "tail", [b'{"prev": "ab', b"\0" * 30, b"\0" * 30 + b"\n", b"\xff\xfe", b" "]
)
def test_a_torn_tail_is_moved_away_and_work_goes_on(
    trail: Path, lock: SurveyLock, tail: bytes
) -> None:
    before = trail.read_bytes()
    trail.write_bytes(before + tail)
    kept = visit(trail, lock)
    assert kept.repaired == tail
    assert kept.trail.intact
    assert kept.trail.torn == b""
    assert trail.read_bytes() == before + kept.line.raw + b"\n"
    saved = trail.with_name("a.jsonl.torn").read_bytes()
    assert tail in saved
    assert AT.encode() in saved


def test_the_last_line_cut_at_each_of_its_bytes_costs_no_earlier_line(
    trail: Path, lock: SurveyLock
) -> None:
    visit(trail, lock, "kept")
    before = trail.read_bytes()
    last = visit(trail, lock, "cut").line.raw + b"\n"
    for cut in range(len(last)):
        trail.write_bytes(before + last[:cut])
        assert read_trail(trail).torn == last[:cut]
        assert trail.read_bytes() == before + last[:cut], "reading writes nothing"
        kept = visit(trail, lock, "after")
        assert kept.trail.intact
        assert trail.read_bytes() == before + kept.line.raw + b"\n"


def test_torn_tails_are_collected_one_after_another(trail: Path, lock: SurveyLock) -> None:
    for tail in (b"first half", b"second half"):
        trail.write_bytes(trail.read_bytes() + tail)
        visit(trail, lock)
    saved = trail.with_name("a.jsonl.torn").read_bytes()
    assert saved.index(b"first half") < saved.index(b"second half")


def test_a_trail_torn_within_its_first_line_can_be_begun_again(
    tmp_path: Path, lock: SurveyLock
) -> None:
    path = reach_trail(tmp_path, "b")
    path.write_bytes(b'{"prev": null, "at"')
    with pytest.raises(RecordError, match="no first line"):
        visit(path, lock)
    assert begin(path, BEGIN, by="Ann", at=AT, lock=lock).repaired == b'{"prev": null, "at"'


def test_a_trail_is_begun_only_once(trail: Path, lock: SurveyLock) -> None:
    before = trail.read_bytes()
    with pytest.raises(RecordError, match="there already"):
        begin(trail, BEGIN, by="Ann", at=AT, lock=lock)
    assert trail.read_bytes() == before


def test_a_broken_trail_is_read_only(trail: Path, lock: SurveyLock) -> None:
    visit(trail, lock)
    visit(trail, lock)
    changed = trail.read_bytes().replace(b"mill weir", b"mill wier")
    trail.write_bytes(changed)
    with pytest.raises(BrokenTrailError, match=r"reaches/a\.jsonl line 2: .*read-only"):
        visit(trail, lock)
    assert trail.read_bytes() == changed


def test_a_trail_with_two_ends_is_to_be_merged_first(trail: Path, lock: SurveyLock) -> None:
    kept = visit(trail, lock)
    fork = encoded(kept.line.prev, AT, "Bo", "visit", {"visit": "fork"})
    trail.write_bytes(trail.read_bytes() + fork + b"\n")
    with pytest.raises(RecordError, match="2 ends and is to be merged first"):
        visit(trail, lock)


def test_a_newer_trail_is_read_only(trail: Path, lock: SurveyLock) -> None:
    trail.write_bytes(encoded((), AT, "Ann", "begin", BEGIN | {"format": 2}) + b"\n")
    before = trail.read_bytes()
    with pytest.raises(RecordError, match="format 2"):
        visit(trail, lock)
    assert trail.read_bytes() == before


@pytest.mark.parametrize(
    ("kind", "data", "why"),
    [
        ("visit", {}, "visit: field required"),
        ("visit", {"visit": "x", "wether": "dry"}, "wether"),
        ("part", {"part": "x", "setting": "lake"}, "setting"),
        ("choose", {"part": "x", "factor": "depth"}, "'depth' is no factor"),
        ("describe", {"slope": "steep"}, "slope"),
        ("describe", {"slope": math.nan}, "slope"),
        ("weather", {"rain": math.inf}, "cannot be written"),
        ("weather", {"rain": {1, 2}}, "cannot be written"),
        ("weather", {"rain": "x" * (1 << 20)}, "too many"),
        ("adopt", {"part": "x", "condition": "y", "n": 0.05, "low": 0.06, "reason": "z"}, "low"),
    ],
)
def test_data_that_does_not_fit_is_refused_and_nothing_written(
    trail: Path, lock: SurveyLock, kind: str, data: dict[str, Any], why: str
) -> None:
    before = trail.read_bytes()
    with pytest.raises(InputError, match=why):
        append(trail, kind, data, by="Ann", at=AT, lock=lock)
    assert trail.read_bytes() == before


def test_nesting_without_end_is_refused(trail: Path, lock: SurveyLock) -> None:
    deep: Any = 1
    for _ in range(70):
        deep = [deep]
    with pytest.raises(InputError, match="deeper than 64"):
        append(trail, "weather", {"rain": deep}, by="Ann", at=AT, lock=lock)


@pytest.mark.parametrize("at", ["now", "2026-06-03", "2026-06-03T18:20:00", "2026-06-31T00:00:00Z"])
def test_a_line_needs_a_moment_with_its_offset(trail: Path, lock: SurveyLock, at: str) -> None:
    with pytest.raises(InputError, match="no time"):
        append(trail, "visit", {"visit": "x"}, by="Ann", at=at, lock=lock)


@pytest.mark.parametrize("by", ["  ", "x" * 121, "Ann\u202e", "Ann\nBo"])
def test_a_line_needs_an_author_with_a_name(trail: Path, lock: SurveyLock, by: str) -> None:
    with pytest.raises(InputError, match="name of the author"):
        append(trail, "visit", {"visit": "x"}, by=by, at=AT, lock=lock)


def test_a_missing_folder_keeps_nothing_and_says_so(tmp_path: Path, lock: SurveyLock) -> None:
    with pytest.raises(NotKeptError, match=r"not kept: a\.jsonl"):
        begin(tmp_path / "nowhere" / "a.jsonl", BEGIN, by="Ann", at=AT, lock=lock)


def test_a_trail_that_is_a_link_is_not_written_to(
    tmp_path: Path, trail: Path, lock: SurveyLock
) -> None:
    link = trail.with_name("b.jsonl")
    link.symlink_to(trail)
    with pytest.raises(NotKeptError, match="not kept"):
        visit(link, lock)
