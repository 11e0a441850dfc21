"""What was typed into a form, as the values it stands for."""

import math

from roughness.errors import InputError
from roughness.quantities.foreign_text import printable


def text_or_none(typed: str) -> str | None:
    """Return the trimmed text, None where nothing was typed."""
    return typed.strip() or None


def number_or_none(typed: str, what: str) -> float | None:
    """Return the number, None where nothing was typed.

    Raises
    ------
    InputError
        Where it is no number; a decimal comma is named.
    """
    text = typed.strip()
    if not text:
        return None
    try:
        value = float(text)
    except ValueError:
        value = math.nan
    if math.isfinite(value) and "_" not in text:
        return value
    comma = text.count(",") == 1 and text.replace(",", "").isdigit()
    raise InputError(
        f"{what} {printable(text)!r} is no number",
        wanted=f"write {text.replace(',', '.')}" if comma else "digits with a point, such as 0.5",
    )


def number(typed: str, what: str) -> float:
    """Return the number that must be there.

    Raises
    ------
    InputError
        Where it is missing or no number.
    """
    value = number_or_none(typed, what)
    if value is None:
        raise InputError(f"{what} is missing", wanted="type a number")
    return value
