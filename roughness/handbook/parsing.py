"""From the bytes of a TOML file to a handbook, or to one sentence that says what is wrong."""

import hashlib
from typing import Any, Final

from pydantic import ValidationError

from roughness.errors import HandbookError, InputError
from roughness.handbook.checking import Refuse, check_handbook, check_settings, refusal
from roughness.handbook.classes import Criterion, MeasuredClass, read_interval
from roughness.handbook.tables import FactorTable, Grade, Handbook
from roughness.handbook.toml_shape import (
    LONGEST_SHORT,
    FactorShape,
    GradeShape,
    HandbookShape,
    place_of,
)
from roughness.quantities.foreign_text import nearest, printable
from roughness.quantities.strict_toml import read_toml
from roughness.survey.words import FACTORS, Factor, Plants, Setting, factors_of

_MESSAGES: Final[dict[str, str]] = {
    "empty_text": "it is empty",
    "control": "it holds a control or direction character",
    "float_type": "a number is due",
    "int_type": "a whole number is due",
    "string_type": "text in quotes is due",
    "bool_type": "true or false is due",
    "finite_number": "a finite number is due",
    "list_type": "a list is due",
    "dict_type": "a table is due",
    "model_type": "a table is due",
    "string_pattern_mismatch": "small letters, digits and single hyphens are due",
}


def parse_handbook(raw: bytes, where: str) -> Handbook:
    """Parse and check a handbook file.

    Parameters
    ----------
    raw : bytes
        The file: TOML in UTF-8, at most 1 MiB.
    where : str
        Name of the file, for messages.

    Returns
    -------
    Handbook
        Its ``sha256`` is that of the bytes with CRLF read as LF.

    Raises
    ------
    HandbookError
        In one sentence: the file, the place in it, the reason, and what would be right.
    """
    refuse = refusal(printable(where))
    document = _read_toml(raw, refuse)
    try:
        shape = HandbookShape.model_validate(document)
    except ValidationError as error:
        raise _first_fault(error, document, refuse) from None
    check_settings(shape, refuse)
    handbook = _built(shape, hash_of(raw), refuse)
    check_handbook(handbook, shape, refuse)
    return handbook


def hash_of(raw: bytes) -> str:
    """Return the sha256 of a handbook file, the same on every system's line ends."""
    return hashlib.sha256(raw.replace(b"\r\n", b"\n")).hexdigest()


def read_key(raw: bytes, where: str) -> str:
    """Return the key of a handbook file without checking the rest of it.

    Raises
    ------
    HandbookError
        Where it has no key and, as a whole, is no TOML or has none.
    """
    refuse = refusal(printable(where))
    # The key stands before the first table; the rest of the file is long.
    head, _, _ = raw.partition(b"\n[")
    try:
        key = _read_toml(head, refuse).get("key")
    except HandbookError:
        key = None
    if not isinstance(key, str):
        key = _read_toml(raw, refuse).get("key")
    if not isinstance(key, str):
        raise refuse("key", "it is missing", 'such as key = "our-agency-2024"')
    return key


def _read_toml(raw: bytes, refuse: Refuse) -> dict[str, Any]:
    try:
        return read_toml(raw, "", due="a handbook in TOML")
    except InputError as error:
        raise refuse(error.where, error.what, error.wanted) from None


def _first_fault(error: ValidationError, document: dict[str, Any], refuse: Refuse) -> HandbookError:
    faults = error.errors(include_url=False)
    # A misspelt key makes two faults; the one that shows the spelling helps more.
    fault = next((f for f in faults if f["type"] == "extra_forbidden"), faults[0])
    loc, kind = fault["loc"], fault["type"]
    place = place_of(loc, document)
    if kind == "extra_forbidden":
        known = nearest(str(loc[-1]), _names_beside(loc))
        return refuse(place, "this key is not known", f"{known}?" if known else "leave it out")
    if "[key]" in loc:
        known = nearest(str(loc[-2]), FACTORS)
        return refuse(place, "this name is not known", f"{known}?" if known else "leave it out")
    if kind == "missing":
        return refuse(place, "it is missing", "")
    if loc[-1] == "short" and kind == "too_long":
        return refuse(place, "it is too long", f"at most {LONGEST_SHORT} characters are due")
    wanted = _MESSAGES.get(kind, fault["msg"][:1].lower() + fault["msg"][1:])
    return refuse(place, f"{printable(repr(fault['input']))[:60]} will not do", wanted)


def _names_beside(loc: tuple[int | str, ...]) -> list[str]:
    """Return the keys that are known where an unknown one was met."""
    if len(loc) == 1:
        shape: type[HandbookShape | FactorShape | GradeShape] = HandbookShape
    else:
        shape = GradeShape if "grades" in loc[:-1] else FactorShape
    return [field.alias or name for name, field in shape.model_fields.items()]


def _built(shape: HandbookShape, sha256: str, refuse: Refuse) -> Handbook:
    tables = {
        setting: {factor: _table(shape, setting, factor, refuse) for factor in factors_of(setting)}
        for setting in shape.settings
    }
    return Handbook(
        **shape.model_dump(exclude={"channel", "flood_plain", "notes"}),
        notes=tuple(shape.notes),
        sha256=sha256,
        tables=tables,
    )


def _table(shape: HandbookShape, setting: Setting, factor: Factor, refuse: Refuse) -> FactorTable:
    table, place = shape.settings[setting][factor], f"{setting}.{factor}"
    origin = table
    if table.grades_from is not None:
        other = shape.settings.get(table.grades_from, {}).get(factor)
        if table.grades or other is None or other is table or other.grades_from:
            wanted = "name the other setting of this file, and give no grades here"
            raise refuse(f"{place}.grades_from", "there are no grades to take over", wanted)
        origin = other
    return FactorTable(
        factor=factor,
        title=table.title,
        question=table.question,
        source=table.source,
        grades=tuple(_grade(row, f"{place}.{row.key}", refuse) for row in origin.grades),
        notes=tuple(table.notes),
        says_below=table.says_below or "",
        says_above=table.says_above or "",
    )


def _grade(row: GradeShape, place: str, refuse: Refuse) -> Grade:
    low, best, high = _limits(row, place, refuse)
    return Grade(
        key=row.key,
        name=row.name,
        low=low,
        best=best,
        high=high,
        short=row.short,
        criterion=row.criterion,
        table=row.table,
        page=row.page,
        provenance=row.provenance,
        criterion_provenance=row.criterion_provenance or row.provenance,
        lower_bound=row.lower_bound,
        measured=_measured(row, place, refuse),
        by_d50_mm=tuple((size, n) for size, n in row.by_d50_mm or ()),
    )


def _limits(row: GradeShape, place: str, refuse: Refuse) -> tuple[float, float | None, float]:
    ranged = [x is not None for x in (row.low, row.high, row.best)]
    ways = [row.value is not None, any(ranged), row.by_d50_mm is not None]
    if sum(ways) != 1 or (any(ranged) and not (ranged[0] and ranged[1])):
        wanted = "either value, or low and high, or by_d50_mm is due"
        raise refuse(place, "its values are incomplete or given twice", wanted)
    if row.by_d50_mm is not None:
        values = [n for _, n in row.by_d50_mm]
        return min(values), None, max(values)
    if row.low is not None and row.high is not None:
        return row.low, row.best, row.high
    value = row.value or 0.0
    return value, value, value


def _measured(row: GradeShape, place: str, refuse: Refuse) -> tuple[MeasuredClass, ...]:
    single: tuple[Criterion, ...] = ("d50_mm", "blocked_percent", "sinuosity")
    texts: list[tuple[Criterion, Plants | None, str]] = [
        *((name, None, text) for name in single if (text := getattr(row, name)) is not None),
        *(("depth_over_height", kind, text) for kind, text in row.depth_over_height.items()),
    ]
    found = []
    for name, plants, text in texts:
        try:
            found.append(MeasuredClass(name, read_interval(text), plants))
        except ValueError as error:
            at = f"{place}.{name}.{plants}" if plants else f"{place}.{name}"
            raise refuse(at, str(error), "such as '>= 5 and < 15' is due") from None
    return tuple(found)
