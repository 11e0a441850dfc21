"""Laws of the trail: any change is found, order and withdrawals do what they say."""

from typing import Any

from hypothesis import given, settings
from hypothesis import strategies as st

from roughness.trail.folding import fold_reach
from roughness.trail.lines import Line, encoded, hash_of, parsed
from roughness.trail.reading import Trail, verified
from roughness.trail.state import PartState, ReachState

AT = "2026-06-03T18:20:00+02:00"
SHA = "c" * 64
FACTORS = ("base", "irregularity", "variation", "obstruction", "vegetation", "meander")
Said = tuple[str, dict[str, Any]]

any_json = st.recursive(
    st.none() | st.booleans() | st.integers() | st.floats(allow_nan=False, allow_infinity=False)
    | st.text(),
    lambda inner: st.lists(inner, max_size=4) | st.dictionaries(st.text(), inner, max_size=4),
    max_leaves=12,
)  # fmt: skip
foreign = st.text() | st.sampled_from(
    ["[bold]x[/]", "👩‍🔬🐟", "<b>&amp;", "=1+1", "a\x1b[2J", "\u202eb"]
)


def chained(said: list[Said]) -> list[bytes]:
    begin = {"format": 1, "survey": "ab" * 16, "reach": "mill weir"}
    raws = [encoded((), AT, "Ann", "begin", begin)]
    for kind, data in said:
        raws.append(encoded((hash_of(raws[-1]),), AT, "Ann", kind, data))
    return raws


def read(raws: list[bytes]) -> Trail:
    return verified(b"".join(raw + b"\n" for raw in raws), "a.jsonl")


@st.composite
def one_line(draw: st.DrawFn) -> Said:
    place = {
        "part": draw(st.sampled_from(["main channel", "left flood plain"])),
        "condition": draw(st.sampled_from(["flood", "low flow"])),
    }
    kind = draw(st.sampled_from(["choose", "choose", "choose", "gate", "adopt", "visit", "later"]))
    if kind == "choose":
        grade = {"grade": draw(st.sampled_from(["minor", "severe", "small"]))}
        segment = {"segment": name} if (name := draw(st.sampled_from(["", "bed"]))) else {}
        factor = draw(st.sampled_from(FACTORS))
        choice = {"factor": factor, "choice": grade, "handbook": "x", "handbook_sha256": SHA}
        return kind, place | choice | segment
    if kind == "gate":
        bed = [{"name": "bed", "perimeter_percent": 60.0}] if draw(st.booleans()) else None
        return kind, place | {"handbook": "x", "depth_m": draw(st.floats(0.1, 9)), "segments": bed}
    if kind == "adopt":
        return kind, place | {"n": draw(st.floats(0.01, 0.2)), "reason": "because"}
    return kind, {"visit": draw(st.sampled_from(["spring", "autumn"]))}


def told(line: Line | None) -> object:
    return line and (line.kind, line.data, line.by, line.at)


def place_without_hashes(place: PartState) -> object:
    return (
        place.part, place.condition, place.gate, told(place.gate_line), place.handbook,
        place.segments, place.measured, place.visit, told(place.last_line),
        place.adopted and (place.adopted.n, place.adopted.reason, told(place.adopted.line)),
        {
            segment: {f: (c.choice, c.visit, told(c.line)) for f, c in by_factor.items()}
            for segment, by_factor in place.choices.items()
        },
    )  # fmt: skip


def without_hashes(state: ReachState) -> object:
    """Everything a state says but the hashes, which tell one history from another."""
    return (
        state.reach, state.parts, state.visits, state.last_touched, state.unusable,
        {key: place_without_hashes(place) for key, place in state.places.items()},
        [told(line) for line in state.effective if line.kind != "withdraw"],
        [told(line) for line in state.unknown],
    )  # fmt: skip


@given(st.lists(one_line(), max_size=12), st.data())
def test_a_history_with_withdrawals_says_what_it_says_without_the_withdrawn_lines(
    said: list[Said], data: st.DataObject
) -> None:
    raws = chained(said)
    gone = data.draw(st.sets(st.sampled_from(range(len(said))))) if said else set()
    for place in data.draw(st.permutations(sorted(gone))):
        withdraw = {"line": hash_of(raws[place + 1])}
        raws.append(encoded((hash_of(raws[-1]),), AT, "Ann", "withdraw", withdraw))
    without = chained([one for place, one in enumerate(said) if place not in gone])
    assert without_hashes(fold_reach(read(raws))) == without_hashes(fold_reach(read(without)))


@given(st.lists(one_line(), min_size=1, max_size=8), st.data())
def test_withdrawing_all_withdrawals_restores_everything(
    said: list[Said], data: st.DataObject
) -> None:
    raws = chained(said)
    whole = fold_reach(read(raws))
    for _ in range(2):
        withdrawn = raws[-1] if len(raws) > len(said) + 1 else data.draw(st.sampled_from(raws[1:]))
        line = {"line": hash_of(withdrawn)}
        raws.append(encoded((hash_of(raws[-1]),), AT, "Ann", "withdraw", line))
    assert without_hashes(fold_reach(read(raws))) == without_hashes(whole)


@given(st.lists(st.tuples(one_line(), st.integers(0, 20)), max_size=10), st.data())
def test_the_fold_does_not_depend_on_the_order_in_the_file(
    said: list[tuple[Said, int]], data: st.DataObject
) -> None:
    # Each line comes after any earlier one: a graph with forks.
    raws = chained([])
    for (kind, what), back in said:
        after = raws[max(0, len(raws) - 1 - back)]
        raws.append(encoded((hash_of(after),), AT, "Ann", kind, what))
    raws = list(dict.fromkeys(raws))
    shuffled = data.draw(st.permutations(raws))
    mixed = read(list(shuffled))
    assert mixed.intact
    assert mixed.heads == read(raws).heads
    assert fold_reach(mixed) == fold_reach(read(raws))


@given(st.dictionaries(foreign, any_json, max_size=5), foreign, foreign)
def test_what_is_written_is_read_back_whatever_text_it_holds(
    data: dict[str, Any], by: str, kind: str
) -> None:
    raw = encoded((), AT, by, kind, data)
    line = parsed(raw)
    assert (line.data, line.by, line.kind) == (data, by, kind)
    assert b"\n" not in raw
    assert b"\r" not in raw
    assert raw.decode("utf-8").isprintable()


@settings(max_examples=300)
@given(st.lists(one_line(), min_size=1, max_size=6), st.data())
def test_any_changed_byte_before_the_last_line_is_found(
    said: list[Said], data: st.DataObject
) -> None:
    raws = chained(said)
    whole = b"".join(raw + b"\n" for raw in raws)
    before_last = len(whole) - len(raws[-1]) - 1
    place = data.draw(st.integers(0, before_last - 1))
    changed = bytearray(whole)
    changed[place] = data.draw(st.integers(0, 255).filter(lambda byte: byte != whole[place]))
    assert not verified(bytes(changed), "a.jsonl").intact


def test_each_byte_changed_in_each_of_its_bits_is_found_and_named() -> None:
    said: Said = ("visit", {"visit": "Größe 🐟"})
    raws = chained([said, said, said])
    whole = b"".join(raw + b"\n" for raw in raws)
    for place in range(len(whole) - len(raws[-1]) - 1):
        line = whole[:place].count(b"\n") + 1
        for bit in range(8):
            changed = bytearray(whole)
            changed[place] ^= 1 << bit
            trail = verified(bytes(changed), "a.jsonl")
            assert not trail.intact
            # Either the line itself or the one that names its hash; a changed line end
            # joins two lines, a new one makes two of one.
            assert trail.broken[0].line in (line, line + 1)


@given(st.binary(max_size=200), st.lists(one_line(), max_size=3))
def test_no_bytes_at_all_make_reading_or_folding_fail(noise: bytes, said: list[Said]) -> None:
    raws = chained(said)
    fold_reach(verified(noise + b"\n" + b"\n".join(raws), "a.jsonl"))
    trail = verified(b"".join(raw + b"\n" for raw in raws) + noise, "a.jsonl")
    assert [line.raw for line in trail.lines[: len(raws)]] == raws
    fold_reach(trail)


@given(st.sampled_from(["choose", "gate", "adopt", "estimate", "part", "describe"]),
       st.dictionaries(st.sampled_from(["part", "condition", "factor", "choice", "estimate", "n"])
                       | st.text(), any_json))  # fmt: skip
def test_no_data_of_a_known_kind_makes_folding_fail(kind: str, data: dict[str, Any]) -> None:
    state = fold_reach(read(chained([(kind, data)])))
    assert len(state.effective) + len(state.unusable) == 2
