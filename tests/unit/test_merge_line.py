"""The line that joins two ends: exactly what it says, and which lines are taken for one."""

import hashlib
import json
from typing import Any

from roughness.trail.folding import fold_reach
from roughness.trail.lines import Line, encoded, parsed
from roughness.trail.merging import file_bytes, hindrances, is_computed, merge_line, united
from roughness.trail.reading import Trail, verified

BEGIN = {"format": 1, "survey": "ab" * 16, "reach": "mill"}
FIRST = parsed(encoded((), "2026-06-01T08:00:00Z", "Ann", "begin", BEGIN))


def line(after: Line, at: str, by: str, kind: str = "later", **data: Any) -> Line:
    return parsed(encoded((after.hash,), at, by, kind, data))


def trail(*lines: Line) -> Trail:
    return verified(file_bytes(lines), "mill.jsonl")


def test_the_joining_line_is_computed_from_the_ends_alone() -> None:
    # 11:30 in one zone is before 10:00 UTC, though it reads later.
    early = line(FIRST, "2026-06-03T11:30:00+02:00", "Ann")
    late = line(FIRST, "2026-06-03T10:00:00Z", "Bo")
    joining = united([trail(FIRST, early), trail(FIRST, late)])[-1]
    assert json.loads(joining.raw) == {
        "prev": sorted([early.hash, late.hash]),
        "at": "2026-06-03T10:00:00Z",
        "by": "merge",
        "kind": "merge",
        "data": {},
    }
    assert joining.hash == hashlib.sha256(joining.raw).hexdigest()


def test_of_two_equal_moments_the_greater_text_is_taken() -> None:
    ends = [line(FIRST, at, "Ann") for at in ("2026-06-03T12:00:00+02:00", "2026-06-03T10:00:00Z")]
    assert merge_line(ends).at == merge_line(ends[::-1]).at == "2026-06-03T12:00:00+02:00"


def test_ends_whose_time_is_no_moment_are_joined_all_the_same() -> None:
    raw = encoded((FIRST.hash,), "2026-02-20T08:00:00Z", "Ann", "later", {})
    ends = [parsed(raw.replace(b"02-20", day)) for day in (b"02-30", b"02-31")]
    assert merge_line(ends).at == "0001-01-01T00:00:00+00:00"


def test_only_what_can_be_computed_again_is_taken_for_a_joining_line() -> None:
    ends = [line(FIRST, "2026-06-03T10:00:00Z", by) for by in ("Ann", "Bo")]
    known = {one.hash: one for one in (FIRST, *ends)}
    prev = tuple(sorted(end.hash for end in ends))
    at = "2026-06-03T10:00:00Z"
    joining = merge_line(ends)
    assert is_computed(joining, known)
    for by, data, when in (
        ("Ann", {}, at),
        ("merge", {"why": "?"}, at),
        ("merge", {}, "2026-06-04T10:00:00Z"),
    ):
        written = parsed(encoded(prev, when, by, "merge", data))
        assert not is_computed(written, known)
        # Somebody wrote it, so it stays, whatever else meets it later.
        other = line(FIRST, at, "Cy")
        lines = united([trail(FIRST, *ends, written), trail(FIRST, other)])
        assert written in lines
    assert joining not in united([trail(FIRST, *ends, joining), trail(FIRST, other)])


def test_a_line_never_counts_as_earlier_than_what_its_author_had_seen() -> None:
    place = {"part": "main channel", "condition": "flood", "reason": "because"}
    seen = line(FIRST, "2026-06-05T10:00:00Z", "Ann")
    behind = line(seen, "2020-01-01T00:00:00Z", "Ann", "adopt", n=0.04, **place)
    other = line(FIRST, "2026-06-04T10:00:00Z", "Bo", "adopt", n=0.05, **place)
    both = trail(*united([trail(FIRST, seen, behind), trail(FIRST, other)]))
    state = fold_reach(both).place("main channel", "flood")
    assert state and state.adopted and state.adopted.n == 0.04


def test_the_file_is_in_order_of_the_longest_path_and_then_of_the_hash() -> None:
    one = line(FIRST, "2026-06-03T10:00:00Z", "Ann")
    two = line(one, "2026-06-03T11:00:00Z", "Ann")
    other = line(FIRST, "2026-06-09T10:00:00Z", "Bo")
    lines = united([trail(FIRST, one, two), trail(FIRST, other)])
    second = sorted([one, other], key=lambda said: said.hash)
    assert list(lines[:-1]) == [FIRST, *second, two]


def test_lines_that_stand_twice_hinder_nothing_but_a_changed_one_does() -> None:
    one = line(FIRST, "2026-06-03T10:00:00Z", "Ann")
    twice = trail(FIRST, one, FIRST, one)
    assert twice.broken and not hindrances(twice)
    assert united([twice]) == (FIRST, one)
    raw = file_bytes([FIRST, one]).replace(b"mill", b"Mill") + one.raw + b"\n"
    assert hindrances(verified(raw, "mill.jsonl"))
    assert hindrances(verified(b"", "mill.jsonl"))
    assert hindrances(verified(file_bytes([FIRST, one]) + b"{}\n", "mill.jsonl"))
