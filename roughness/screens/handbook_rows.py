"""The rows of the published tables, as the handbook screen lists and searches them."""

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass
from functools import cached_property
from pathlib import Path
from typing import Final

from roughness.errors import RoughnessError
from roughness.handbook import Grade, Handbook
from roughness.handbook.tables import FactorTable
from roughness.quantities.foreign_text import printable, same_name_key
from roughness.quantities.printing import show_addend, show_value
from roughness.shelf.handbooks import handbook_keys, load_handbook
from roughness.survey.words import MULTIPLIER, SETTINGS, Factor, Setting, factors_of

PROVENANCE: Final = {
    "seen": "seen in the publication",
    "seen second hand": "seen second hand, in another publication",
    "memory": "from memory",
    "ours": "ours: common practice, no source",
}
IN_SHORT: Final = {
    "seen": "seen",
    "seen second hand": "seen second hand",
    "memory": "from memory",
    "ours": "ours",
}


@dataclass(frozen=True, eq=False)
class TableRow:
    """One grade with the table it stands in."""

    handbook: Handbook
    setting: Setting
    factor: Factor
    grade: Grade

    @property
    def range(self) -> str:
        """Lowest and highest published value."""
        low, high = self._shown(self.grade.low), self._shown(self.grade.high)
        return low if low == high else f"{low} – {high}"

    @property
    def typical(self) -> str:
        """The value the handbook recommends; empty where it names none or a single value."""
        grade = self.grade
        return self._shown(grade.best) if grade.best and grade.low < grade.high else ""

    def _shown(self, value: float) -> str:
        return show_value(value) if self.factor == MULTIPLIER else show_addend(value)

    @property
    def place(self) -> str:
        """Handbook, setting and factor in words."""
        return f"{self.handbook.key}, {setting_words(self.setting)}, {self.factor}"

    @cached_property
    def text(self) -> str:
        """What a search looks into."""
        grade = self.grade
        return same_name_key(
            f"{self.place} {grade.key} {grade.name} {grade.short} {grade.criterion}"
        )


def setting_words(setting: Setting) -> str:
    """Return a setting as people write it."""
    return setting.replace("-", " ")


def books(folder: Path | None) -> tuple[list[Handbook], list[str]]:
    """Return the handbooks that can be read, and one sentence for each that cannot."""
    found, wrong = [], []
    for key in handbook_keys(folder):
        try:
            found.append(load_handbook(key, folder))
        except RoughnessError as error:
            wrong.append(str(error))
    return found, wrong


def tables_of(handbook: Handbook) -> list[tuple[Setting, Factor]]:
    """Return the tables of a handbook in the order of publication."""
    return [
        (setting, factor)
        for setting in SETTINGS
        if handbook.has(setting)
        for factor in factors_of(setting)
    ]


def rows_of(handbook: Handbook, setting: Setting, factor: Factor) -> list[TableRow]:
    """Return the rows of one table."""
    return [
        TableRow(handbook, setting, factor, grade) for grade in handbook.grades(setting, factor)
    ]


def search(handbooks: Iterable[Handbook], typed: str) -> list[TableRow]:
    """Return the rows of all tables that hold every typed word."""
    words = same_name_key(typed).split()
    return [row for row in _all_rows(handbooks) if all(word in row.text for word in words)]


def _all_rows(handbooks: Iterable[Handbook]) -> Iterator[TableRow]:
    for handbook in handbooks:
        for setting, factor in tables_of(handbook):
            yield from rows_of(handbook, setting, factor)


def about_row(row: TableRow, *, with_place: bool) -> str:
    """Return everything a row says: the criterion in full, its source, how it was come by."""
    grade = row.grade
    typical = f", typical {row.typical}" if row.typical else ""
    sizes = _sizes(grade.by_d50_mm)
    told = [
        f"{grade.name}: {row.range}{typical}",
        grade.criterion,
        *([sizes] if sizes else []),
        *(["The smoothest that can be attained: a lower bound."] if grade.lower_bound else []),
        f"{row.place if with_place else row.handbook.key}; {grade.source or 'no table named'};"
        f" values {PROVENANCE[grade.provenance]}",
    ]
    return printable_lines(told)


def _sizes(pairs: Sequence[tuple[float, float]]) -> str:
    told = [f"{show_value(size)} mm {show_value(n)}" for size, n in pairs]
    return f"By median size: {', '.join(told)}" if told else ""


def about_book(handbook: Handbook, table: FactorTable) -> str:
    """Return what the handbook is good for and not, its notes and those of one table."""
    told = [handbook.citation, "", "GOOD FOR", handbook.good_for, "", "NOT FOR", handbook.not_for]
    told += ["", "NOTES", *(f"- {note}" for note in handbook.notes)] if handbook.notes else []
    told += ["", f"TABLE: {table.title}", table.question, f"Source: {table.source}"]
    told += [f"- {note}" for note in table.notes]
    symbols = ", ".join(f"{factor} {symbol}" for factor, symbol in handbook.symbols.items())
    told += ["", f"Symbols: {symbols}", f"File: sha256 {handbook.sha256}"]
    return printable_lines(told)


def printable_lines(lines: Sequence[str]) -> str:
    """Join lines that may come from anybody's file."""
    return "\n".join(printable(line) for line in lines)
