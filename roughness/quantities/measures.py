"""Measures as people type them: a number with its unit, or a bare one in the usual unit.

``8%``, ``1.3x``, ``34 mm``, ``0.6 m``, ``2 ft``, ``1.2``. A decimal comma is refused with what
to write: read silently, it would move a value by powers of ten.
"""

import math
import re
from typing import Final, Literal

from roughness.errors import InputError
from roughness.quantities.foreign_text import printable

Quantity = Literal["length", "size", "percent", "ratio", "slope", "roughness"]

# Exact by definition of the international inch and foot (1959).
_METRES: Final = {"m": 1.0, "cm": 0.01, "mm": 0.001, "km": 1000.0, "ft": 0.3048, "in": 0.0254}
_LONGER_WORDS: Final = {"'": "ft", "feet": "ft", "foot": "ft", '"': "in", "inch": "in"}
_UNITS: Final[dict[Quantity, dict[str, float]]] = {
    "length": _METRES,
    "size": {unit: metres * 1000 for unit, metres in _METRES.items()},
    "percent": {"%": 1.0},
    "ratio": {"x": 1.0, "×": 1.0},
    "slope": {"%": 0.01, "‰": 0.001, "m/m": 1.0, "m/km": 0.001},
    "roughness": {},
}
_EXAMPLES: Final[dict[Quantity, str]] = {
    "length": "1.4 m or 4.6 ft",
    "size": "34 mm or 1.3 in",
    "percent": "8 %",
    "ratio": "1.3",
    "slope": "0.002 or 0.2 %",
    "roughness": "0.035",
}
_NUMBER = re.compile(r"([+-]?(?:\d+\.?\d*|\.\d+))\s*(\S*)", re.ASCII)
_COMMA = re.compile(r"([+-]?\d+),(\d+)\s*(\S*)", re.ASCII)
_LONGEST = 40


def read_measure(text: str, quantity: Quantity, what: str = "") -> float:
    """Return a typed measure in the unit that the survey keeps it in.

    Parameters
    ----------
    text : str
        A number, with a unit or bare.
    quantity : str
        ``length`` (in m, also typed in cm, mm, km, ft, in), ``size`` (of grains, in mm),
        ``percent``, ``ratio``, ``slope`` (metres per metre, also typed in % or per mille)
        or ``roughness``.
    what : str
        How messages name the field.

    Returns
    -------
    float
        In m, mm, percent, or without a unit.

    Raises
    ------
    InputError
        Where it is no number, has a decimal comma or a unit that does not belong to it.

    >>> read_measure("2 ft", "length"), read_measure("8%", "percent")
    (0.6096, 8.0)
    """
    typed = text.strip()
    example = f"write it like {_EXAMPLES[quantity]}"
    if comma := _COMMA.fullmatch(typed):
        right = f"{comma[1]}.{comma[2]} {comma[3]}".strip()
        raise InputError(f"{typed!r} has a comma", where=what, wanted=f"write {right}")
    match = _NUMBER.fullmatch(typed) if len(typed) <= _LONGEST else None
    if match is None:
        shown = printable(typed[:_LONGEST])
        raise InputError(f"{shown!r} is no number", where=what, wanted=example)
    number, unit = float(match[1]), match[2].casefold()
    factor = 1.0 if not unit else _UNITS[quantity].get(_LONGER_WORDS.get(unit, unit))
    if factor is None:
        shown = printable(match[2])
        raise InputError(f"the unit {shown!r} does not fit here", where=what, wanted=example)
    value = _without_noise(number * factor)
    if value < 0 or not math.isfinite(value):
        raise InputError(f"{printable(typed)} is negative", where=what, wanted="0 or more is due")
    return value


def read_known_measure(text: str, quantity: Quantity, what: str = "") -> float | None:
    """Return the same, or None where nothing was typed: unknown is not 0."""
    return read_measure(text, quantity, what) if text.strip() else None


def _without_noise(value: float) -> float:
    """Round to twelve digits: 0.2 % is 0.002, not 0.0020000000000000005."""
    return float(f"{value:.12g}")
