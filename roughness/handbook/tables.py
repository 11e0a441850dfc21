"""What a parsed handbook offers: settings, factors, grades and where they come from."""

from bisect import bisect_right
from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Literal

from roughness.errors import UnknownNameError
from roughness.handbook.classes import MeasuredClass
from roughness.quantities.foreign_text import nearest, printable
from roughness.quantities.printing import enumerate_words
from roughness.quantities.ranges import Range, point
from roughness.survey.words import Factor, Setting

Provenance = Literal["seen", "seen second hand", "memory", "ours"]
OURS = "common practice, no source"


@dataclass(frozen=True, kw_only=True)
class Grade:
    """One row of a factor's table. Values are n, or m where the factor multiplies."""

    key: str
    name: str
    low: float
    best: float | None
    """Published typical value; None where the publication gives a range alone."""
    high: float
    short: str
    """What decides the grade, in at most 44 characters."""
    criterion: str
    """The same in one or two sentences."""
    table: str | None = None
    page: str | None = None
    provenance: Provenance
    """How the values were come by; the criterion may have its own."""
    criterion_provenance: Provenance
    lower_bound: bool = False
    """Smoothest attainable: a lower bound in a natural stream."""
    measured: tuple[MeasuredClass, ...] = ()
    by_d50_mm: tuple[tuple[float, float], ...] = ()
    """Published pairs of median size in mm and n; empty where size does not matter."""

    @property
    def source(self) -> str:
        """Table and page as far as they are known: ``table 2, p. 8``."""
        if self.provenance == "ours":
            return OURS
        page = f"p. {self.page}" if self.page else None
        return ", ".join(word for word in (self.table, page) if word)

    @property
    def cited(self) -> str:
        """The source, marked where the values were only remembered: ``table 2, from memory``."""
        return f"{self.source}, from memory" if self.provenance == "memory" else self.source

    @property
    def best_is_middle(self) -> bool:
        """Whether the best value is the middle of the range, because none is published."""
        return self.best is None and self.low < self.high

    @property
    def published(self) -> Range:
        """The published range, its best value the typical one or the middle."""
        # The middle of two decimals is a decimal: 0.018, not 0.018000000000000002.
        middle = round((self.low + self.high) / 2, 15) if self.low < self.high else self.low
        return Range(self.low, middle if self.best is None else self.best, self.high)

    def published_at(self, d50_mm: float) -> Range | None:
        """Return what is published for bed material of this median size.

        Parameters
        ----------
        d50_mm : float
            Median size, mm.

        Returns
        -------
        Range or None
            For a grade with values by size: the point interpolated linearly between the
            two published sizes, None outside of them. For all others the published range.
        """
        sizes = [size for size, _ in self.by_d50_mm]
        if not sizes:
            return self.published
        if not sizes[0] <= d50_mm <= sizes[-1]:
            return None
        at = bisect_right(sizes, d50_mm) - 1
        size, n = self.by_d50_mm[at]
        if size == d50_mm:
            return point(n)
        next_size, next_n = self.by_d50_mm[at + 1]
        return point(n + (next_n - n) * (d50_mm - size) / (next_size - size))


@dataclass(frozen=True, kw_only=True)
class FactorTable:
    """The table of one factor in one setting."""

    factor: Factor
    title: str
    question: str
    """What the factor asks, in plain words."""
    source: str
    """Publication and table, and how they were seen."""
    grades: tuple[Grade, ...]
    notes: tuple[str, ...] = ()
    says_below: str = ""
    """What to know where a measured number lies below every published class."""
    says_above: str = ""
    """What to do where it lies above every published class."""


@dataclass(frozen=True, kw_only=True, eq=False)
class Handbook:
    """One published set of factor tables; its hash tells one edition of the file from another."""

    key: str
    title: str
    authors: str
    year: int
    publisher: str
    good_for: str
    not_for: str
    notes: tuple[str, ...]
    symbols: Mapping[Factor, str]
    flood_plains_from: str | None
    """Key of the handbook that takes over flood plains where this one has no table."""
    sha256: str
    """Of the file's bytes with CRLF read as LF, 64 hex digits."""
    tables: Mapping[Setting, Mapping[Factor, FactorTable]] = field(repr=False)

    @property
    def citation(self) -> str:
        """Authors, year, title and publisher, as a report cites them."""
        return f"{self.authors}, {self.year}, {self.title}: {self.publisher}"

    def has(self, setting: Setting) -> bool:
        """Whether the handbook has tables for ``setting``."""
        return setting in self.tables

    def table(self, setting: Setting, factor: Factor) -> FactorTable:
        """Return the table of ``factor``.

        Raises
        ------
        UnknownNameError
            Where the handbook has no such setting or the setting no such factor.
        """
        try:
            return self.tables[setting][factor]
        except KeyError:
            raise UnknownNameError(
                f"the handbook {self.key} has no table of {factor} for the setting {setting}"
            ) from None

    def grades(self, setting: Setting, factor: Factor) -> tuple[Grade, ...]:
        """Return the grades in the order of the table; none where the setting has no factor."""
        table = self.tables.get(setting, {}).get(factor)
        return table.grades if table else ()

    def grade(self, setting: Setting, factor: Factor, key: str, *, where: str = "") -> Grade:
        """Return one grade by its key; ``where`` is the place of the choice, for messages.

        Raises
        ------
        UnknownNameError
            Names the nearest key and lists the ones that are there.
        """
        grades = self.table(setting, factor).grades
        for grade in grades:
            if grade.key == key:
                return grade
        keys = [grade.key for grade in grades]
        near = nearest(key, keys)
        known = f"known for {setting} are {enumerate_words(keys)}"
        raise UnknownNameError(
            f"{self.key} has no grade {printable(key)!r} of {factor}",
            where=where,
            wanted=f"{near}? {known}" if near else known,
        )

    def rank(self, setting: Setting, factor: Factor, key: str) -> int:
        """Return the place of a grade in its table, 0 for the first."""
        grade = self.grade(setting, factor, key)
        return self.table(setting, factor).grades.index(grade)
