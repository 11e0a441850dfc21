"""Two or more copies of one trail united; pure, and the same whoever does it and when.

The result is a function of the authored lines alone. A merge line is computed from the ends
that it joins, so it can be made again at any time, and one that nothing came after is
dropped before the ends of the whole are joined by one. Hence, in bytes:

- the order of the copies does not matter, nor which two are united first;
- a copy united with itself, or with what came of it, adds nothing;
- every authored line of every copy is in the result byte for byte, and so is each merge
  line that somebody went on from or that is noted elsewhere (``noted``).

Which two are united first does not matter as long as each noted line stands in the copy of
whoever noted it; that is what ``check`` asks of every copy.
"""

from collections.abc import Collection, Iterable, Mapping, Sequence
from datetime import UTC, datetime
from typing import Final

from roughness.trail.lines import Line, encoded, instant, parsed
from roughness.trail.ordering import in_order
from roughness.trail.reading import Fault, Trail

MERGE: Final = "merge"
"""The kind of a computed line, and what stands for its author."""
_NEVER: Final = datetime.min.replace(tzinfo=UTC)
_NEVER_TEXT: Final = "0001-01-01T00:00:00+00:00"


def united(copies: Iterable[Trail], noted: Collection[str] = ()) -> tuple[Line, ...]:
    """Return the lines of the united trail in the order of its file.

    Parameters
    ----------
    copies : iterable of Trail
        Copies of one trail, each without :func:`hindrances`.
    noted : collection of str
        Hashes that are named outside the trail: such a line is never dropped.

    Raises
    ------
    InputError
        Where there are so many ends that the line that joins them would be too long.
    """
    known = {line.hash: line for trail in copies for line in trail.lines}
    kept = _with_all_before(
        [line for line in known.values() if line.hash in noted or not is_computed(line, known)],
        known,
    )
    followed = {name for line in kept.values() for name in line.prev}
    ends = [line for line in kept.values() if line.hash not in followed]
    if len(ends) > 1:
        joining = merge_line(ends)
        kept[joining.hash] = joining
    return in_file_order(kept)


def merge_line(ends: Sequence[Line]) -> Line:
    """Return the line that joins ``ends``: computed from them, by nobody."""
    latest = max(ends, key=lambda line: (instant(line.at) or _NEVER, line.at)).at
    at = latest if instant(latest) else _NEVER_TEXT
    return parsed(encoded(tuple(sorted(end.hash for end in ends)), at, MERGE, MERGE, {}))


def is_computed(line: Line, known: Mapping[str, Line]) -> bool:
    """Return whether ``line`` is, byte for byte, the line that joins what it names."""
    if line.kind != MERGE or len(line.prev) < 2 or not all(name in known for name in line.prev):
        return False
    return line.hash == merge_line([known[name] for name in line.prev]).hash


def in_file_order(lines: Mapping[str, Line]) -> tuple[Line, ...]:
    """Return the lines by their longest path from the first line, then by hash."""
    depth: dict[str, int] = {}
    for line in in_order(tuple(lines.values())):
        depth[line.hash] = 1 + max((depth[name] for name in line.prev if name in depth), default=0)
    return tuple(sorted(lines.values(), key=lambda line: (depth[line.hash], line.hash)))


def file_bytes(lines: Iterable[Line]) -> bytes:
    """Return the whole file: each line as it was stored, ended by LF."""
    return b"".join(line.raw + b"\n" for line in lines)


def origin(trail: Trail) -> str:
    """Return the hash of the first line, which tells one trail from another; "" for none."""
    return trail.first.hash if trail.first else ""


def authored(trail: Trail) -> frozenset[str]:
    """Return the hashes of the lines that uniting cannot drop."""
    known = trail.by_hash
    alone = [line for line in trail.lines if not is_computed(line, known)]
    return frozenset(_with_all_before(alone, known))


def hindrances(trail: Trail) -> tuple[Fault, ...]:
    """Return why the trail cannot be united with another.

    A line that stands in the file twice is none: tools that unite files line by line make
    such files, and uniting mends them.
    """
    twice = {line.number for line in trail.lines if line.number != trail.by_hash[line.hash].number}
    faults = tuple(fault for fault in trail.broken if fault.line not in twice)
    if trail.newer:
        faults += (trail.newer,)
    return faults or (() if trail.lines else (Fault(trail.file, 1, "it holds no whole line"),))


def _with_all_before(lines: Iterable[Line], known: Mapping[str, Line]) -> dict[str, Line]:
    found: dict[str, Line] = {}
    todo = list(lines)
    while todo:
        line = todo.pop()
        if line.hash not in found:
            found[line.hash] = line
            todo += [known[name] for name in line.prev if name in known]
    return found
