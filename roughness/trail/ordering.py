"""The graph of a trail: its lines in order, and which of them still have an effect."""

import heapq
from collections.abc import Iterable, Sequence
from dataclasses import replace
from datetime import UTC, datetime
from itertools import pairwise

from roughness.trail.lines import Line, instant
from roughness.trail.reading import Trail

_NEVER = datetime.min.replace(tzinfo=UTC)


def in_order(lines: Sequence[Line]) -> tuple[Line, ...]:
    """Return each line after all lines it names; the file order does not matter.

    Lines that do not see each other stand by their time and, within it, by their hash; a
    line never counts as earlier than what it comes after, whatever its clock said.
    """
    if all(line.prev == (before.hash,) for before, line in pairwise(lines)):
        return tuple(lines)
    known = {line.hash: line for line in lines}
    missing = {h: sum(p in known for p in set(line.prev)) for h, line in known.items()}
    followers: dict[str, list[Line]] = {}
    for line in known.values():
        for name in set(line.prev):
            followers.setdefault(name, []).append(line)
    told_at = {h: instant(line.at) or _NEVER for h, line in known.items()}
    ready = [(told_at[h], h) for h in known if not missing[h]]
    heapq.heapify(ready)
    ordered = []
    while ready:
        at, name = heapq.heappop(ready)
        ordered.append(known[name])
        for follower in followers.get(name, ()):
            told_at[follower.hash] = max(at, told_at[follower.hash])
            missing[follower.hash] -= 1
            if not missing[follower.hash]:
                heapq.heappush(ready, (told_at[follower.hash], follower.hash))
    return tuple(ordered)


def withdrawn(ordered: Sequence[Line]) -> frozenset[str]:
    """Return the hashes of the lines that have no effect any more.

    A withdrawal counts as long as it is not withdrawn itself. It reaches only lines
    before it, and never the first one.
    """
    before = {line.hash: place for place, line in enumerate(ordered)}
    gone: set[str] = set()
    for place in range(len(ordered) - 1, -1, -1):
        line = ordered[place]
        if line.kind != "withdraw" or line.hash in gone:
            continue
        target = line.data.get("line")
        if isinstance(target, str) and 0 < before.get(target, -1) < place:
            gone.add(target)
    return frozenset(gone)


def up_to(trail: Trail, heads: Iterable[str]) -> Trail:
    """Return the trail as it was when ``heads`` were its last lines."""
    wanted, todo = set[str](), [name for name in heads if name in trail.by_hash]
    while todo:
        name = todo.pop()
        if name not in wanted:
            wanted.add(name)
            todo += [p for p in trail.by_hash[name].prev if p in trail.by_hash]
    lines = tuple(line for line in trail.lines if line.hash in wanted)
    return replace(
        trail,
        lines=lines,
        heads=tuple(sorted(set(heads) & wanted)),
        by_hash={line.hash: line for line in lines},
        torn=b"",
        size=0,
        digest="",
    )
