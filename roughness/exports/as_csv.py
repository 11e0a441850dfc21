"""The table as CSV (RFC 4180), and beside it what its columns hold (Table Schema)."""

import csv
import io
import json
import unicodedata
from typing import Any, Final

from roughness.exports.columns import COLUMNS
from roughness.exports.table import Cell, Table

# A spreadsheet takes a cell that starts so for a formula.
_FORMULA: Final = ("=", "+", "-", "@", "\t", "\r")
# Direction signs make a reader see another text than the one that stands there.
_DIRECTION: Final = frozenset(
    "\u061c\u200e\u200f\u202a\u202b\u202c\u202d\u202e\u2066\u2067\u2068\u2069"
)
_LAYOUT: Final = frozenset("\n\r\t")


def csv_bytes(table: Table) -> bytes:
    """Return the table as UTF-8 CSV: header, CRLF line ends, an empty cell for unknown.

    Numbers have the fewest digits that read back to the same value. Text that starts like a
    formula gets one leading apostrophe; control and direction signs are spelled out.
    """
    text = io.StringIO()
    writer = csv.writer(text, lineterminator="\r\n")
    names = [column.name for column in COLUMNS]
    writer.writerow(names)
    writer.writerows([_cell(row[name]) for name in names] for row in table.rows)
    return text.getvalue().encode("utf-8")


def schema_bytes(table: Table) -> bytes:
    """Return the Table Schema (Frictionless standard) of the CSV file, with what it is about."""
    about = {key: value for key, value in table.about.items() if key != "columns"}
    schema: dict[str, Any] = {
        "fields": table.about["columns"],
        "missingValues": [""],
        "about": about
        | {
            "text_cells": "one leading apostrophe where the text starts with = + - @ tab or CR;"
            " control and direction signs are spelled as \\u and four digits"
        },
    }
    return f"{json.dumps(schema, indent=2)}\n".encode()


def _cell(cell: Cell) -> str:
    if cell is None:
        return ""
    if not isinstance(cell, str):
        return repr(float(cell))
    return f"'{_harmless(cell)}" if cell.startswith(_FORMULA) else _harmless(cell)


def _harmless(text: str) -> str:
    if text.isprintable():
        return text
    return "".join(f"\\u{ord(sign):04x}" if _is_harmful(sign) else sign for sign in text)


def _is_harmful(sign: str) -> bool:
    is_control = unicodedata.category(sign) in ("Cc", "Cs") and sign not in _LAYOUT
    return is_control or sign in _DIRECTION
