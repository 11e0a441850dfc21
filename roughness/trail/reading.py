"""A trail read from its file and verified; nothing is ever written here.

Bytes after the last line end are a torn tail: somebody stopped in the middle of a line
that was never said to be kept. They are no fault.
"""

import hashlib
import stat
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from pathlib import Path

from roughness.errors import InputError, RecordError
from roughness.trail.lines import FORMAT, Line, hash_of, parsed, without_line_end
from roughness.trail.naming import shown


@dataclass(frozen=True, slots=True)
class Fault:
    """Something that does not hold in a trail."""

    file: str
    line: int
    """Line number from 1."""
    what: str

    def __str__(self) -> str:
        return f"{self.file} line {self.line}: {self.what}"


@dataclass(frozen=True)
class Trail:
    """The lines of one file, in file order, and what was found wrong with them."""

    file: str
    """The file as messages name it."""
    lines: tuple[Line, ...] = ()
    heads: tuple[str, ...] = ()
    """Hashes of the lines that no other line comes after, sorted."""
    torn: bytes = b""
    """What stands after the last whole line."""
    broken: tuple[Fault, ...] = ()
    newer: Fault | None = None
    """Set where a newer version wrote the trail: it opens read-only."""
    size: int = 0
    """Length of the whole lines together, in bytes."""
    digest: str = field(default="", repr=False)
    """sha256 of the whole lines together: tells whether they are still the same."""
    by_hash: Mapping[str, Line] = field(default_factory=dict, repr=False, compare=False)

    @property
    def intact(self) -> bool:
        """Whether every line hangs together with the others; a torn tail does not count."""
        return not self.broken

    @property
    def to_be_merged(self) -> bool:
        """Whether two people went on from the same line without seeing each other."""
        return len(self.heads) > 1

    @property
    def first(self) -> Line | None:
        """The line that everything else comes after."""
        return next((line for line in self.lines if not line.prev), None)

    @property
    def is_of_reach(self) -> bool:
        """Whether this is the trail of a reach, not the survey's own."""
        return self.first is not None and "reach" in self.first.data


def read_trail(path: Path, known: Trail | None = None) -> Trail:
    """Read and verify the trail in ``path``.

    Parameters
    ----------
    path : Path
        The file.
    known : Trail, optional
        The same file as it was read before: where it only grew, only what is new is parsed.

    Raises
    ------
    RecordError
        Where there is no such file, or it cannot be read at all.
    """
    try:
        if not stat.S_ISREG(path.stat().st_mode):
            raise RecordError(f"{shown(path)} is not a file")
        raw = path.read_bytes()
    except FileNotFoundError:
        raise RecordError(f"{shown(path)} is not there") from None
    except OSError as error:
        raise RecordError(f"{shown(path)} cannot be read ({error.strerror})") from None
    return verified(raw, shown(path), known)


def verified(raw: bytes, file: str, known: Trail | None = None) -> Trail:
    """Verify the bytes of a trail; see :func:`read_trail`."""
    size = _end_of_whole_lines(raw)
    digest = hashlib.sha256(memoryview(raw)[:size])
    whole, torn = raw[:size], raw[size:]
    before = known if known is not None and _only_grew(known, whole) else Trail(file)
    new, unreadable = _parsed_lines(whole[before.size :], before)
    lines, by_hash = (*before.lines, *new), dict(before.by_hash)
    hidden = {stored for stored, _ in unreadable}
    broken = [*_graph_faults(new, by_hash, hidden, file), *_first_line_faults(lines, file)]
    newer = _newer_format(lines, file)
    if not newer:  # a newer version's lines need not look as this one's, only hang together
        broken += [fault for _, fault in unreadable]
    broken.sort(key=lambda fault: fault.line)
    return Trail(
        file,
        lines,
        _heads(lines),
        torn,
        tuple(broken),
        newer,
        size,
        digest.hexdigest(),
        by_hash,
    )


def _parsed_lines(whole: bytes, before: Trail) -> tuple[list[Line], list[tuple[str, Fault]]]:
    """Return the lines, and of those that cannot be read the hash and what is wrong."""
    lines, unreadable = [], []
    start = before.lines[-1].number + 1 if before.lines else 1
    for number, ended in enumerate(whole.split(b"\n")[:-1], start):
        stored = without_line_end(ended)
        try:
            lines.append(parsed(stored, number))
        except InputError as error:
            what = str(error).replace("at line 1, column", "at column")
            unreadable.append((hash_of(stored), Fault(before.file, number, what)))
    return lines, unreadable


def _end_of_whole_lines(raw: bytes) -> int:
    end = raw.rfind(b"\n") + 1
    # After a power cut a file can be as long as planned but run out in NULs instead of the
    # last line; no line that was kept ends in one.
    while raw.endswith((b"\0\n", b"\0\r\n"), 0, end):
        end = raw.rfind(b"\n", 0, end - 1) + 1
    return end


def _only_grew(known: Trail, whole: bytes) -> bool:
    if known.broken or known.newer or not known.lines or len(whole) < known.size:
        return False
    return hashlib.sha256(memoryview(whole)[: known.size]).hexdigest() == known.digest


def _graph_faults(
    new: Sequence[Line], by_hash: dict[str, Line], hidden: set[str], file: str
) -> Iterator[Fault]:
    """Add the new lines to ``by_hash``; ``hidden`` are hashes of lines that cannot be read."""
    for line in new:
        if line.hash in by_hash:
            twice = by_hash[line.hash].number
            yield Fault(file, line.number, f"it stands there twice, first in line {twice}")
        else:
            by_hash[line.hash] = line
    for line in new:
        if any(name not in by_hash and name not in hidden for name in line.prev):
            yield Fault(file, line.number, "it comes after a line that is not there or was changed")


def _first_line_faults(lines: Sequence[Line], file: str) -> Iterator[Fault]:
    firsts = [line for line in lines if not line.prev]
    if lines and not firsts:
        yield Fault(file, lines[0].number, "the first line of the trail is missing")
    for second in firsts[1:]:
        yield Fault(file, second.number, f"a second first line beside line {firsts[0].number}")
    if firsts and (firsts[0].kind != "begin" or type(firsts[0].data.get("format")) is not int):
        yield Fault(file, firsts[0].number, "the first line does not say the format of the trail")


def _newer_format(lines: Sequence[Line], file: str) -> Fault | None:
    first = next((line for line in lines if not line.prev), None)
    written = first.data.get("format") if first else None
    if first is None or type(written) is not int or written <= FORMAT:
        return None
    return Fault(
        file,
        first.number,
        f"the trail is of format {written}, this version knows format {FORMAT}; it opens"
        f" read-only, a version that knows format {written} is needed to go on",
    )


def _heads(lines: Sequence[Line]) -> tuple[str, ...]:
    followed = {name for line in lines for name in line.prev}
    return tuple(sorted({line.hash for line in lines} - followed))
