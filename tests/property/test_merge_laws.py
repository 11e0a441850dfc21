"""Laws of uniting copies of a trail, on histories that grew apart and met in any order."""

from dataclasses import dataclass, field
from datetime import datetime, timedelta, timezone
from functools import reduce
from itertools import permutations
from typing import Any

from hypothesis import given, settings
from hypothesis import strategies as st

from roughness.trail.ancestry import Ancestry
from roughness.trail.conflicts import conflicts
from roughness.trail.folding import fold_reach
from roughness.trail.lines import Line, encoded, hash_of
from roughness.trail.merging import authored, file_bytes, is_computed, united
from roughness.trail.ordering import in_order, withdrawn
from roughness.trail.reading import Trail, verified

SHA = "c" * 64
FACTORS = ("base", "irregularity", "vegetation")
BEGIN = {"format": 1, "survey": "ab" * 16, "reach": "mill weir"}
# Clocks go any way they like, in any zone; equal times are common.
moments = st.builds(
    lambda minutes, zone: (
        datetime(2026, 6, 1, tzinfo=timezone(timedelta(hours=zone))) + timedelta(minutes=minutes)
    ).isoformat(),
    st.integers(0, 20),
    st.integers(-2, 2),
)


@dataclass
class Copy:
    """What one person's folder holds."""

    trail: Trail
    noted: frozenset[str] = field(default_factory=frozenset)

    def met(self, other: "Copy") -> "Copy":
        noted = self.noted | other.noted
        return Copy(read(united([self.trail, other.trail], noted)), noted)

    @property
    def content(self) -> bytes:
        return file_bytes(self.trail.lines)


def read(lines: tuple[Line, ...] | list[Line]) -> Trail:
    return verified(file_bytes(lines), "a.jsonl")


def written(trail: Trail, at: str, by: str, kind: str, data: dict[str, Any]) -> Trail:
    raw = encoded(trail.heads, at, by, kind, data)
    return verified(file_bytes(trail.lines) + raw + b"\n", "a.jsonl")


@st.composite
def said(draw: st.DrawFn, trail: Trail) -> tuple[str, dict[str, Any]]:
    place = {"part": draw(st.sampled_from(["main channel", "left"])), "condition": "flood"}
    kind = draw(
        st.sampled_from(["choose"] * 4 + ["gate", "adopt", "estimate", "later", "withdraw"])
    )
    if kind == "withdraw" and len(trail.lines) > 1:
        return kind, {"line": draw(st.sampled_from(trail.lines[1:])).hash}
    grade = {"grade": draw(st.sampled_from(["minor", "severe"]))}
    if kind == "choose":
        factor = draw(st.sampled_from(FACTORS))
        choice = {"factor": factor, "choice": grade, "handbook": "x", "handbook_sha256": SHA}
        return kind, place | choice
    if kind == "gate":
        return kind, place | {"handbook": "x", "depth_m": float(draw(st.integers(1, 3)))}
    if kind == "adopt":
        return kind, place | {"n": draw(st.sampled_from([0.03, 0.04])), "reason": "because"}
    if kind == "estimate":
        factors = dict.fromkeys(FACTORS, grade)
        judged = {"handbook": "x", "setting": "channel", "factors": factors}
        return kind, place | {"handbook_sha256": SHA, "estimate": judged}
    return "later", {"word": draw(st.integers(0, 3))}


@st.composite
def copies(draw: st.DrawFn, most: int = 14) -> list[Copy]:
    """Three folders that began alike, were written in, met pairwise and noted their ends."""
    first = verified(encoded((), "2026-06-01T00:00:00Z", "Ann", "begin", BEGIN) + b"\n", "a.jsonl")
    folders = [Copy(first) for _ in range(3)]
    for _ in range(draw(st.integers(0, most))):
        mine = draw(st.integers(0, 2))
        does = draw(st.sampled_from(["write"] * 3 + ["meet", "note", "meet and note"]))
        if does == "write":
            trail, by = folders[mine].trail, ["Ann", "Bo", "Cy"][mine]
            trail = written(trail, draw(moments), by, *draw(said(trail)))
            folders[mine] = Copy(trail, folders[mine].noted)
        if "meet" in does:
            folders[mine] = folders[mine].met(folders[draw(st.integers(0, 2))])
        if "note" in does:
            noted = folders[mine].noted | set(folders[mine].trail.heads)
            folders[mine] = Copy(folders[mine].trail, noted)
    return folders


def told(trail: Trail) -> object:
    """What a trail's state says, but for the computed lines, which say nothing."""
    state, known = fold_reach(trail), trail.by_hash
    return (
        state.reach, state.places, state.withdrawn, state.last_touched,
        [line for line in state.effective if not is_computed(line, known)],
    )  # fmt: skip


@given(copies())
def test_either_side_first_gives_the_same_bytes(folders: list[Copy]) -> None:
    a, b, _ = folders
    assert a.met(b).content == b.met(a).content


@settings(max_examples=300)
@given(copies())
def test_which_two_meet_first_makes_no_difference_to_the_bytes(folders: list[Copy]) -> None:
    a, b, c = folders
    assert a.met(b).met(c).content == a.met(b.met(c)).content
    contents = {reduce(Copy.met, order).content for order in permutations(folders)}
    at_once = united([a.trail, b.trail, c.trail], a.noted | b.noted | c.noted)
    assert contents == {file_bytes(at_once)}


@given(copies())
def test_meeting_again_adds_nothing(folders: list[Copy]) -> None:
    a, b, _ = folders
    met = a.met(b)
    assert met.met(met).content == met.content
    assert met.met(a).content == met.content == b.met(met).content


@given(copies())
def test_no_authored_line_and_no_noted_line_is_lost_or_changed(folders: list[Copy]) -> None:
    a, b, _ = folders
    met = a.met(b)
    raws = {line.hash: line.raw for line in met.trail.lines}
    assert all(hash_of(raw) == name for name, raw in raws.items())
    for copy in (a, b):
        for line in copy.trail.lines:
            if line.hash in authored(copy.trail) or line.hash in met.noted:
                assert raws[line.hash] == line.raw
            else:
                assert (line.kind, line.by, dict(line.data)) == ("merge", "merge", {})


@given(copies())
def test_an_end_that_was_noted_outside_stays_whatever_meets_later(folders: list[Copy]) -> None:
    a, b, c = folders
    met = a.met(b)
    noted = Copy(met.trail, met.noted | set(met.trail.heads))
    for later in (noted.met(c), c.met(noted), noted.met(b).met(c)):
        assert later.noted >= set(met.trail.heads)
        assert later.trail.by_hash.keys() >= set(met.trail.heads)
    assert noted.met(b).met(c).content == noted.met(c.met(b)).content == c.met(noted).content


@given(copies())
def test_the_result_hangs_together_and_has_one_end(folders: list[Copy]) -> None:
    met = folders[0].met(folders[1])
    assert met.trail.intact
    assert len(met.trail.heads) == 1
    new = set(met.trail.by_hash) - set(folders[0].trail.by_hash) - set(folders[1].trail.by_hash)
    assert len(new) <= 1


@given(copies())
def test_where_one_side_holds_the_other_no_line_is_made(folders: list[Copy]) -> None:
    a, b, _ = folders
    whole = a.met(b)
    grown = Copy(written(whole.trail, "2026-06-01T00:00:00Z", "Di", "later", {}), whole.noted)
    assert set(grown.met(a).trail.by_hash) == set(grown.trail.by_hash)
    assert set(b.met(grown).trail.by_hash) == set(grown.trail.by_hash)


@given(copies())
def test_the_line_that_joins_changes_nothing_in_the_state(folders: list[Copy]) -> None:
    a, b, _ = folders
    both = {line.hash: line for copy in (a, b) for line in copy.trail.lines}
    apart = verified(file_bytes(both.values()), "a.jsonl")
    assert told(a.met(b).trail) == told(apart)
    assert conflicts(a.met(b).trail) == conflicts(apart)


@given(copies(), st.randoms(use_true_random=False))
def test_a_file_that_a_sync_tool_united_line_by_line_is_mended(
    folders: list[Copy], dice: Any
) -> None:
    a, b, _ = folders
    lines = [*a.trail.lines, *b.trail.lines]  # in any order, many of them twice
    dice.shuffle(lines)
    mended = united([read(lines)], a.noted | b.noted)
    assert file_bytes(mended) == a.met(b).content


def seen_by(name: str, known: dict[str, Line]) -> set[str]:
    return {p for q in known[name].prev for p in (q, *seen_by(q, known))}


@given(copies())
def test_ancestry_says_what_following_every_name_says(folders: list[Copy]) -> None:
    trail = reduce(Copy.met, folders).trail
    known = dict(trail.by_hash)
    ancestry = Ancestry(in_order(trail.lines))
    for later in known:
        before = seen_by(later, known)
        assert {one for one in known if ancestry.comes_after(later, one)} == before


@settings(max_examples=300)
@given(copies())
def test_a_conflict_stands_exactly_where_two_words_have_not_met(folders: list[Copy]) -> None:
    """Adopted values alone, judged pair by pair straight from the definition."""
    trail = reduce(Copy.met, folders).trail
    known, gone = dict(trail.by_hash), withdrawn(in_order(trail.lines))
    for part in ("main channel", "left"):
        lines = [
            line for line in in_order(trail.lines)
            if line.kind == "adopt" and line.data["part"] == part and line.hash not in gone
        ]  # fmt: skip
        before = {line.hash: seen_by(line.hash, known) for line in lines}
        standing = {
            one.hash
            for one in lines for other in lines
            if one.hash != other.hash
            and one.hash not in before[other.hash] and other.hash not in before[one.hash]
            and not any({one.hash, other.hash} <= before[z] for z in before)
            and not any(one.hash in before[z] for z in before)
        }  # fmt: skip
        values = {known[name].data["n"] for name in standing}
        found = [c for c in conflicts(trail) if c.about == "adopted n" and c.part == part]
        if len(values) < 2:
            assert not found
        else:
            assert [{side.line.hash for side in c.sides} for c in found] == [standing]
            adopted = fold_reach(trail).place(part, "flood")
            assert adopted and adopted.adopted
            assert found[0].standing.line == adopted.adopted.line


@given(copies())
def test_after_somebody_who_saw_both_sides_sets_it_again_no_conflict_stands(
    folders: list[Copy],
) -> None:
    trail = reduce(Copy.met, folders).trail
    for found in conflicts(trail):
        line = found.standing.line
        kind = {"setup": "gate", "adopted n": "adopt"}.get(found.about, "choose")
        data = dict(line.data)
        if kind == "gate":
            data = {"part": found.part, "condition": found.condition, "handbook": "x"}
        elif kind == "choose":
            data = {
                "part": found.part, "condition": found.condition, "factor": found.about,
                "choice": {"grade": "minor"}, "handbook": "x", "handbook_sha256": SHA,
            }  # fmt: skip
        trail = written(trail, "2020-01-01T00:00:00Z", "Di", kind, data)
    assert not conflicts(trail)


@given(copies())
def test_the_later_of_two_single_words_is_shown(folders: list[Copy]) -> None:
    base = reduce(Copy.met, folders).trail
    place = {"part": "main channel", "condition": "flood", "reason": "because"}
    late, later = "2027-01-01T10:00:00+02:00", "2027-01-01T09:00:00Z"
    one = written(base, late, "Ann", "adopt", place | {"n": 0.05})
    two = written(base, later, "Bo", "adopt", place | {"n": 0.06})
    state = fold_reach(read(united([one, two]))).place("main channel", "flood")
    assert state and state.adopted and state.adopted.n == 0.06
