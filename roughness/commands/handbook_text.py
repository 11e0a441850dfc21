"""Handbooks as text and as JSON: what they are, and every row of their tables."""

from collections.abc import Iterator, Sequence
from pathlib import Path
from typing import Any

from roughness.commands.plain_tables import wrapped
from roughness.handbook.tables import FactorTable, Grade, Handbook
from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import show_value
from roughness.shelf.editions import shipped_editions
from roughness.shelf.folders import contents


def summary(handbook: Handbook, folder: Path | None = None) -> dict[str, Any]:
    """Return what a list of handbooks says about one; ``folder`` holds a survey's own."""
    return {
        "key": handbook.key,
        "title": handbook.title,
        "authors": handbook.authors,
        "year": handbook.year,
        "settings": list(handbook.tables),
        "from": _where_from(handbook, folder),
        "sha256": handbook.sha256,
    }


def _where_from(handbook: Handbook, folder: Path | None) -> str:
    if handbook.sha256 not in shipped_editions().get(handbook.key, frozenset()):
        return "the survey's own"
    is_copied = handbook.key in contents(folder).files
    return "shipped, copied to the survey" if is_copied else "shipped"


def summary_lines(handbooks: Sequence[Handbook], folder: Path | None = None) -> Iterator[str]:
    """Tell each handbook in a few lines."""
    for handbook in handbooks:
        about = summary(handbook, folder)
        yield printable(handbook.key)
        yield from wrapped(
            f"{printable(handbook.authors)} {handbook.year}: {printable(handbook.title)}", "  "
        )
        yield f"  for {' and '.join(about['settings'])}; {about['from']}"


def handbook_lines(handbook: Handbook) -> Iterator[str]:
    """Tell a handbook whole: citation, limits of use, notes and every row."""
    yield from wrapped(printable(f"{handbook.key}: {handbook.citation}"), rest="  ")
    yield from wrapped(printable(f"Good for: {handbook.good_for}"), rest="  ")
    yield from wrapped(printable(f"Not for: {handbook.not_for}"), rest="  ")
    for note in handbook.notes:
        yield from wrapped(printable(note), "- ")
    if handbook.flood_plains_from:
        yield from wrapped(f"Flood plains are taken from {printable(handbook.flood_plains_from)}.")
    yield f"sha256 {handbook.sha256}"
    for setting, tables in handbook.tables.items():
        for table in tables.values():
            yield ""
            yield from _table_lines(setting, handbook.symbols.get(table.factor, ""), table)


def _table_lines(setting: str, symbol: str, table: FactorTable) -> Iterator[str]:
    yield from wrapped(printable(f"{setting}, {table.factor} ({symbol}): {table.title}"), rest="  ")
    yield from wrapped(printable(table.question), "  ")
    yield from wrapped(printable(f"Source: {table.source}"), "  ", "    ")
    for note in table.notes:
        yield from wrapped(printable(note), "  - ")
    for grade in table.grades:
        yield from _grade_lines(grade)


def _grade_lines(grade: Grade) -> Iterator[str]:
    yield from wrapped(printable(f"{grade.key}: {_values(grade)}"), "  ", "      ")
    yield from wrapped(printable(grade.criterion), "      ")
    for one in grade.measured:
        plants = f", {one.plants}" if one.plants else ""
        yield f"      measured: {one.criterion} {one.interval}{plants}"
    if grade.by_d50_mm:
        pairs = ", ".join(f"{show_value(d)} mm {show_value(n)}" for d, n in grade.by_d50_mm)
        yield from wrapped(f"by d50: {pairs}", "      ")
    seen = f"values {grade.provenance}, criterion {grade.criterion_provenance}"
    yield from wrapped(printable(f"{grade.source}; {seen}"), "      ")


def _values(grade: Grade) -> str:
    if grade.low == grade.high:
        text = show_value(grade.low)
    else:
        text = f"{show_value(grade.low)} to {show_value(grade.high)}"
    if grade.best is not None and grade.low < grade.high:
        text += f", typically {show_value(grade.best)}"
    return f"{text} (a lower bound)" if grade.lower_bound else text


def handbook_document(handbook: Handbook) -> dict[str, Any]:
    """Return a handbook whole for a program."""
    return summary(handbook) | {
        "publisher": handbook.publisher,
        "citation": handbook.citation,
        "good_for": handbook.good_for,
        "not_for": handbook.not_for,
        "notes": list(handbook.notes),
        "symbols": dict(handbook.symbols),
        "flood_plains_from": handbook.flood_plains_from,
        "tables": [
            {
                "setting": setting,
                "factor": table.factor,
                "title": table.title,
                "question": table.question,
                "source": table.source,
                "notes": list(table.notes),
                "grades": [_grade(grade) for grade in table.grades],
            }
            for setting, tables in handbook.tables.items()
            for table in tables.values()
        ],
    }


def _grade(grade: Grade) -> dict[str, Any]:
    return {
        "key": grade.key,
        "name": grade.name,
        "low": grade.low,
        "best": grade.best,
        "high": grade.high,
        "criterion": grade.criterion,
        "criterion_provenance": grade.criterion_provenance,
        "measured": [
            {"criterion": one.criterion, "class": str(one.interval), "plants": one.plants}
            for one in grade.measured
        ],
        "by_d50_mm": [list(pair) for pair in grade.by_d50_mm],
        "source": grade.source,
        "provenance": grade.provenance,
        "lower_bound": grade.lower_bound,
    }
