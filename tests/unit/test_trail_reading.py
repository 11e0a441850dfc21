"""What reading a trail finds, and what it leaves alone."""

import hashlib
import json
from pathlib import Path
from typing import Any

import pytest

from roughness.errors import RecordError
from roughness.trail.lines import encoded, hash_of, instant
from roughness.trail.reading import Trail, read_trail, verified

AT = "2026-06-03T18:20:00+02:00"
BEGIN = {"format": 1, "survey": "ab" * 16, "reach": "mill weir"}


def chain(*said: tuple[str, dict[str, Any]]) -> list[bytes]:
    raws: list[bytes] = []
    for kind, data in (("begin", BEGIN), *said):
        prev = (hash_of(raws[-1]),) if raws else ()
        raws.append(encoded(prev, AT, "Ann", kind, data))
    return raws


def visits(count: int) -> list[bytes]:
    return chain(*(("visit", {"visit": f"number {i}"}) for i in range(count)))


def read(raws: list[bytes], end: bytes = b"\n") -> Trail:
    return verified(b"".join(raw + end for raw in raws), "a.jsonl")


def places(trail: Trail) -> list[int]:
    return [fault.line for fault in trail.broken]


def test_the_hash_is_sha256_over_the_stored_bytes_without_the_line_end() -> None:
    raws = visits(2)
    for end in (b"\n", b"\r\n"):
        trail = read(raws, end)
        assert trail.intact
        assert [line.hash for line in trail.lines] == [hashlib.sha256(r).hexdigest() for r in raws]


def test_a_line_written_by_hand_with_other_spacing_is_hashed_as_it_stands() -> None:
    first = json.dumps(
        {"kind": "begin", "data": BEGIN, "by": "Ann", "at": AT, "prev": None},
        separators=(",", " : "),
    ).encode()
    second = encoded((hashlib.sha256(first).hexdigest(),), AT, "Ann", "visit", {"visit": "x"})
    assert read([first, second]).intact


def test_one_head_is_the_last_line() -> None:
    raws = visits(3)
    trail = read(raws)
    assert trail.heads == (hash_of(raws[-1]),)
    assert not trail.to_be_merged
    assert trail.is_of_reach


def test_the_last_line_cut_at_each_of_its_bytes_leaves_every_earlier_line() -> None:
    raws = visits(3)
    whole = b"".join(raw + b"\n" for raw in raws)
    kept = len(whole) - len(raws[-1]) - 1
    for cut in range(kept, len(whole)):
        trail = verified(whole[:cut], "a.jsonl")
        assert trail.intact
        assert [line.raw for line in trail.lines] == raws[:-1]
        assert trail.torn == whole[kept:cut]


@pytest.mark.parametrize(
    "tail", [b"\0" * 40, b'{"prev": "\0\0\0\0', b"\0" * 9 + b"\n", b'{"p\0\0\r\n']
)
def test_nuls_at_the_end_are_a_torn_tail(tail: bytes) -> None:
    raws = visits(2)
    trail = verified(b"".join(raw + b"\n" for raw in raws) + tail, "a.jsonl")
    assert trail.intact
    assert trail.torn == tail
    assert len(trail.lines) == len(raws)


def test_nuls_between_lines_are_broken() -> None:
    raws = visits(2)
    assert places(read([raws[0], b"\0\0" + raws[1], raws[2]])) == [2, 3]


def test_a_whole_line_without_its_line_end_is_torn() -> None:
    raws = visits(2)
    trail = verified(b"\n".join(raws), "a.jsonl")
    assert trail.torn == raws[-1]
    assert len(trail.lines) == 2


def test_a_removed_line_is_found_where_it_is_missed() -> None:
    raws = visits(4)
    for gone in range(1, 4):
        assert places(read(raws[:gone] + raws[gone + 1 :])) == [gone + 1]
    assert places(read(raws[1:])) == [1, 1]


def test_inserted_lines_are_found_with_their_number() -> None:
    raws = visits(3)
    stranger = encoded(("e" * 64,), AT, "Eve", "visit", {"visit": "never"})
    assert places(read([*raws[:2], stranger, *raws[2:]])) == [3]
    assert places(read([*raws[:3], raws[1], *raws[3:]])) == [4]
    assert places(read([*raws[:2], b"", *raws[2:]])) == [3]


def test_a_second_first_line_is_found() -> None:
    other = encoded((), AT, "Eve", "begin", BEGIN | {"reach": "other"})
    trail = read([*visits(2), other])
    assert places(trail) == [4]
    assert "second first line beside line 1" in trail.broken[0].what


@pytest.mark.parametrize(
    ("line", "why"),
    [
        (b"not json", "not JSON"),
        (b"[1, 2]", "not a JSON object"),
        (b"\xff\xfe", "not UTF-8"),
        (b'{"prev": null}', "'at' is missing"),
        (b'{"prev": null, "prev": null}', "twice"),
        (b'{"a": NaN}', "NaN"),
        (b"\xef\xbb\xbf{}", "byte order mark"),
        (b'{"a": ' + b"[" * 70 + b"]" * 70 + b"}", "deeper than 64"),
        (b'"' + b"x" * (1 << 20) + b'"', "too many"),
    ],
)
def test_what_is_no_line_is_broken_and_named(line: bytes, why: str) -> None:
    trail = read([*visits(1), line])
    assert places(trail) == [3]
    assert why in trail.broken[0].what
    assert len(trail.lines) == 2


@pytest.mark.parametrize(
    ("key", "value"),
    [
        ("prev", 7), ("prev", "abc"), ("prev", []), ("prev", ["a" * 64]),
        ("prev", ["b" * 64, "a" * 64]), ("prev", ["a" * 64, "a" * 64]), ("at", "yesterday"),
        ("at", "2026-06-03T18:20:00"), ("at", None), ("by", 3), ("kind", None), ("data", []),
    ],
)  # fmt: skip
def test_a_value_of_the_wrong_type_is_broken(key: str, value: Any) -> None:
    raws = visits(1)
    said = json.loads(raws[1]) | {key: value}
    trail = read([*raws, json.dumps(said).encode()])
    assert places(trail) == [3]
    assert f"'{key}'" in trail.broken[0].what


def test_two_heads_are_to_be_merged_and_not_broken() -> None:
    raws = visits(2)
    fork = encoded((hash_of(raws[1]),), AT, "Bo", "visit", {"visit": "fork"})
    trail = read([*raws, fork])
    assert trail.intact
    assert trail.to_be_merged
    assert trail.heads == tuple(sorted((hash_of(raws[2]), hash_of(fork))))


def test_a_line_after_two_others_joins_them() -> None:
    raws = visits(2)
    fork = encoded((hash_of(raws[1]),), AT, "Bo", "visit", {"visit": "fork"})
    heads = tuple(sorted((hash_of(raws[2]), hash_of(fork))))
    joined = encoded(heads, AT, "merge", "merge", {})
    trail = read([*raws, fork, joined])
    assert trail.intact
    assert trail.heads == (hash_of(joined),)
    assert trail.lines[-1].prev == heads


def test_a_complete_trail_out_of_order_is_fine() -> None:
    raws = visits(4)
    trail = read([raws[3], raws[0], raws[4], raws[2], raws[1]])
    assert trail.intact
    assert trail.heads == (hash_of(raws[4]),)


def test_unknown_kinds_and_unknown_keys_are_kept() -> None:
    data = {"visit": "x", "weather": {"clouds": [1, 2]}}
    trail = read(chain(("visit", data), ("weather-report", {"rain": True})))
    assert trail.intact
    assert trail.lines[1].data == data
    assert trail.lines[2].kind == "weather-report"


def test_a_newer_format_says_which_version_is_needed() -> None:
    first = encoded((), AT, "Ann", "begin", BEGIN | {"format": 2})
    trail = read([first, b"a line by other rules"])
    assert trail.newer is not None
    assert "format 2" in trail.newer.what
    assert "read-only" in trail.newer.what
    assert trail.intact


def test_a_newer_format_hides_no_change() -> None:
    raws = visits(2)
    trail = read([raws[0].replace(b'"format": 1', b'"format": 3'), *raws[1:]])
    assert trail.newer is not None
    assert places(trail) == [2]


@pytest.mark.parametrize("written", [None, "1", True, 1.0])
def test_a_first_line_without_a_format_number_is_broken(written: Any) -> None:
    assert places(read([encoded((), AT, "Ann", "begin", BEGIN | {"format": written})])) == [1]


def test_a_first_line_of_another_kind_is_broken() -> None:
    assert places(read([encoded((), AT, "Ann", "visit", {"format": 1})])) == [1]


def test_a_missing_file_and_a_folder_are_refused_in_a_sentence(tmp_path: Path) -> None:
    with pytest.raises(RecordError, match=r"reaches/a\.jsonl is not there"):
        read_trail(tmp_path / "reaches" / "a.jsonl")
    with pytest.raises(RecordError, match="is not a file"):
        read_trail(tmp_path)


def test_an_empty_file_has_no_lines_and_no_faults() -> None:
    trail = verified(b"", "a.jsonl")
    assert (trail.lines, trail.heads, trail.broken, trail.torn) == ((), (), (), b"")


def test_reading_on_from_a_known_trail_gives_the_same_as_reading_it_anew() -> None:
    raws = visits(6)
    whole = b"".join(raw + b"\n" for raw in raws)
    known = read(raws[:3])
    assert verified(whole, "a.jsonl", known) == read(raws)
    assert verified(whole + b"torn", "a.jsonl", known) == verified(whole + b"torn", "a.jsonl")


def test_reading_on_finds_a_change_in_what_was_known() -> None:
    raws = visits(6)
    whole = b"".join(raw + b"\n" for raw in raws)
    changed = whole.replace(b"number 0", b"number 9")
    assert places(verified(changed, "a.jsonl", read(raws[:4]))) == [3]


def test_reading_on_finds_broken_lines_with_their_number() -> None:
    raws = visits(3)
    assert places(verified(b"".join(r + b"\n" for r in [*raws, b"{}"]), "a.jsonl", read(raws))) == [
        5
    ]


def test_a_moment_is_the_same_in_any_offset() -> None:
    assert instant("2026-06-03T18:20:00+02:00") == instant("2026-06-03T16:20:00.000Z")
    assert instant("2026-13-03T18:20:00Z") is None
