"""Which lines of a trail come after which: what their authors had seen, whatever their clocks."""

from collections.abc import Mapping, Sequence

from roughness.trail.lines import Line

Seen = Mapping[int, int]
"""Chain, and how far along it was seen."""


class Ancestry:
    """Answers whether one line comes after another.

    The graph is laid out in chains, one for each stretch that somebody wrote without
    looking aside. A line knows how far along every other chain it has seen; within a chain
    that knowledge is shared, so a long trail with few forks costs little.

    Parameters
    ----------
    ordered : sequence of Line
        The lines, each after all lines it names.
    """

    def __init__(self, ordered: Sequence[Line]) -> None:
        self._at: dict[str, tuple[int, int]] = {}
        self._seen: dict[str, Seen] = {}
        self._ends: list[str] = []
        for line in ordered:
            self._add(line)

    def comes_after(self, later: str, earlier: str) -> bool:
        """Return whether the line with hash ``later`` has seen ``earlier``; never itself."""
        chain, along = self._at[later]
        of_earlier, place = self._at[earlier]
        if chain == of_earlier:
            return place < along
        return self._seen[later].get(of_earlier, -1) >= place

    def _add(self, line: Line) -> None:
        before = [name for name in line.prev if name in self._at]
        goes_on = next((name for name in before if self._ends[self._at[name][0]] == name), None)
        if goes_on is None:
            chain, along = len(self._ends), 0
            self._ends.append(line.hash)
        else:
            chain, along = self._at[goes_on][0], self._at[goes_on][1] + 1
            self._ends[chain] = line.hash
        self._at[line.hash] = chain, along
        alone = len(before) == 1 and goes_on is not None
        self._seen[line.hash] = self._seen[before[0]] if alone else self._united(before)

    def _united(self, before: Sequence[str]) -> Seen:
        seen: dict[int, int] = {}
        for name in before:
            for chain, along in (*self._seen[name].items(), self._at[name]):
                seen[chain] = max(along, seen.get(chain, -1))
        return seen
