"""The graph of a trail: its lines in order, and which of them still have an effect."""

import heapq
from collections.abc import Iterable, Mapping, Sequence
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
    ready = [(*_rank(line), line) for line in known.values() if not missing[line.hash]]
    heapq.heapify(ready)
    ordered = []
    while ready:
        line = heapq.heappop(ready)[-1]
        ordered.append(line)
        for follower in followers.get(line.hash, ()):
            missing[follower.hash] -= 1
            if not missing[follower.hash]:
                heapq.heappush(ready, (*_rank(follower), follower))
    return tuple(ordered)


def _rank(line: Line) -> tuple[datetime, str]:
    return instant(line.at) or _NEVER, line.hash


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


def comes_after(known: Mapping[str, Line], line: Line, earlier: Line) -> bool:
    """Return whether the author of ``line`` had ``earlier`` before them; no clock is asked."""
    return earlier.hash in before(known, line.prev)


def before(known: Mapping[str, Line], heads: Iterable[str]) -> frozenset[str]:
    """Return the hashes of ``heads`` and of everything they come after, as far as known."""
    seen, todo = set[str](), [name for name in heads if name in known]
    while todo:
        name = todo.pop()
        if name not in seen:
            seen.add(name)
            todo += [p for p in known[name].prev if p in known]
    return frozenset(seen)


def up_to(trail: Trail, heads: Iterable[str]) -> Trail:
    """Return the trail as it was when ``heads`` were its last lines."""
    heads = tuple(heads)
    wanted = before(trail.by_hash, heads)
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
