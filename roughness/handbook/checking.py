"""What a well-formed handbook file can still get wrong, each as one sentence with its place."""

import itertools
import math
from collections import Counter
from collections.abc import Callable, Iterator
from typing import Final

from roughness.errors import HandbookError
from roughness.handbook.classes import CRITERION_OF, DOMAIN, Criterion, holes, overlapping
from roughness.handbook.tables import FactorTable, Grade, Handbook
from roughness.handbook.toml_shape import FactorShape, HandbookShape
from roughness.quantities.printing import enumerate_words, show_value
from roughness.survey.words import (
    MULTIPLIER,
    NOT_ON_FLOOD_PLAINS,
    Factor,
    Plants,
    Setting,
    factors_of,
)

# n of a part is far below 1 everywhere; a table value above it is a misplaced point.
_LARGEST_N: Final = 1.0
_LARGEST_MULTIPLIER: Final = 3.0

Refuse = Callable[[str, str, str], HandbookError]
"""Place, what is wrong, what would be right."""


def refusal(where: str) -> Refuse:
    """Return what makes the errors of one file."""

    def refuse(place: str, what: str, wanted: str) -> HandbookError:
        return HandbookError(what, where=f"{where}: {place}" if place else where, wanted=wanted)

    return refuse


def check_settings(shape: HandbookShape, refuse: Refuse) -> None:
    """Refuse a file without tables, and settings with a factor too few or too many."""
    if not shape.settings:
        raise refuse("", "it has no table", "give it [channel.base] and the other factors")
    if shape.flood_plain is not None and shape.flood_plains_from is not None:
        raise refuse(
            "flood_plains_from",
            "the file has flood-plain tables of its own",
            "leave flood_plains_from out, or the tables",
        )
    for setting, factors in shape.settings.items():
        for factor in factors:
            if setting == "flood-plain" and factor in NOT_ON_FLOOD_PLAINS:
                wanted = "leave it out: a flood plain has no section variation and no multiplier"
                raise refuse(f"{setting}.{factor}", f"a flood plain has no {factor}", wanted)
        for factor in factors_of(setting):
            if factor not in factors:
                wanted = f"a {setting} needs {enumerate_words(factors_of(setting))}"
                raise refuse(f"{setting}.{factor}", f"the table of {factor} is missing", wanted)
            if factor not in shape.symbols:
                raise refuse(
                    f"symbols.{factor}", "the symbol is missing", f'such as {factor} = "n1"'
                )


def check_values(grade: Grade, factor: Factor, place: str, refuse: Refuse) -> None:
    """Refuse values out of order or out of what n and m can be."""
    least, most = (1.0, _LARGEST_MULTIPLIER) if factor == MULTIPLIER else (0.0, _LARGEST_N)
    if grade.low > grade.high:
        raise refuse(
            f"{place}.low",
            f"low {show_value(grade.low)} is above high {show_value(grade.high)}",
            "low <= best <= high is due",
        )
    if grade.best is not None and not grade.low <= grade.best <= grade.high:
        raise refuse(
            f"{place}.best",
            f"best {show_value(grade.best)} lies outside "
            f"{show_value(grade.low)} to {show_value(grade.high)}",
            "low <= best <= high is due",
        )
    if grade.low < least or (factor == "base" and grade.low <= 0):
        wanted = "above 0 is due" if factor == "base" else f"{show_value(least)} or more is due"
        raise refuse(f"{place}.low", f"{show_value(grade.low)} is too small", wanted)
    if grade.high > most:
        wanted = f"at most {show_value(most)} is due"
        raise refuse(f"{place}.high", f"{show_value(grade.high)} is too large", wanted)


def check_sizes(grade: Grade, place: str, refuse: Refuse) -> None:
    """Refuse values by size that do not grow in size."""
    sizes = [size for size, _ in grade.by_d50_mm]
    if any(size <= 0 for size in sizes) or any(b <= a for a, b in itertools.pairwise(sizes)):
        raise refuse(
            f"{place}.by_d50_mm", "the sizes do not grow", "sizes in mm, each above the last"
        )


def check_grades(table: FactorTable, place: str, refuse: Refuse) -> None:
    """Refuse a table without grades or with a key twice."""
    if not table.grades:
        raise refuse(place, "it has no grades", f"give it [[{place}.grades]]")
    for key, times in Counter(grade.key for grade in table.grades).items():
        if times > 1:
            raise refuse(f"{place}.{key}.key", "two grades have this key", "each key once")


def check_classes(table: FactorTable, shape: FactorShape, place: str, refuse: Refuse) -> None:
    """Refuse classes of a measured number that overlap or leave gaps, unless said so."""
    for criterion, plants in sorted(_kinds(table), key=str):
        named = f"{criterion}.{plants}" if plants else criterion
        intervals = [
            measured.interval
            for grade in table.grades
            for measured in grade.measured
            if (measured.criterion, measured.plants) == (criterion, plants)
        ]
        shared = overlapping(intervals)
        if shared and not shape.measured_overlaps:
            raise refuse(
                f"{place}.{named}",
                f"the classes {shared[0]} and {shared[1]} overlap",
                "part them, or set measured_overlaps = true where the publication has it so",
            )
        for low, high in holes(intervals, DOMAIN[criterion]):
            if _said(low, high, criterion, shape):
                continue
            raise refuse(
                f"{place}.{named}",
                f"no class holds {_stretch(low, high)}",
                "close the gap, or set measured_gaps = true where the publication has it so",
            )


def check_criterion(grade: Grade, factor: Factor, place: str, refuse: Refuse) -> None:
    """Refuse a measured number that does not belong to the factor."""
    own = CRITERION_OF.get(factor)
    for measured in grade.measured:
        if measured.criterion != own:
            wanted = f"{factor} goes by {own}" if own else f"{factor} goes by no number"
            raise refuse(
                f"{place}.{measured.criterion}", f"it does not decide about {factor}", wanted
            )


def check_source(grade: Grade, place: str, refuse: Refuse) -> None:
    """Refuse a published grade that does not say in which table it stands."""
    if grade.provenance != "ours" and grade.table is None:
        wanted = 'name the table of the publication, or set provenance = "ours"'
        raise refuse(f"{place}.table", "it is missing", wanted)


def check_handbook(handbook: Handbook, shape: HandbookShape, refuse: Refuse) -> None:
    """Check every table of a handbook."""
    for setting, factor, table in _tables(handbook):
        place = f"{setting}.{factor}"
        check_grades(table, place, refuse)
        for grade in table.grades:
            row = f"{place}.{grade.key}"
            check_sizes(grade, row, refuse)
            check_values(grade, factor, row, refuse)
            check_criterion(grade, factor, row, refuse)
            check_source(grade, row, refuse)
        check_classes(table, shape.settings[setting][factor], place, refuse)


def _tables(handbook: Handbook) -> Iterator[tuple[Setting, Factor, FactorTable]]:
    for setting, tables in handbook.tables.items():
        for factor, table in tables.items():
            yield setting, factor, table


def _kinds(table: FactorTable) -> set[tuple[Criterion, Plants | None]]:
    return {(m.criterion, m.plants) for grade in table.grades for m in grade.measured}


def _stretch(low: float, high: float) -> str:
    if low == high:
        return show_value(low)
    if high == math.inf:
        return f"what lies above {show_value(low)}"
    return f"what lies between {show_value(low)} and {show_value(high)}"


def _said(low: float, high: float, criterion: Criterion, shape: FactorShape) -> bool:
    """Whether the file accounts for a hole: by its flag, or by words for what lies outside."""
    domain = DOMAIN[criterion]
    if low == domain.low and shape.says_below:
        return True
    return shape.measured_gaps or (high == domain.high and shape.says_above is not None)
