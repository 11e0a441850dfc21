"""Lengths as people read them: distances along the stream and depths."""

from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import rounded, show_value
from roughness.survey.stream import Reach

# Exact by the international yard and pound agreement of 1959.
_METRES = {"m": 1.0, "km": 1000.0, "ft": 0.3048, "mi": 1609.344}
_COUNTERPART = {
    "metric": {"m": "m", "km": "km", "ft": "m", "mi": "km"},
    "us": {"m": "ft", "km": "mi", "ft": "ft", "mi": "mi"},
}
_PLACES = {"m": 1, "km": 3, "ft": 1, "mi": 3}


def show_length(value: float, unit: str, units: str | None) -> str:
    """Print a length of ``unit`` in ``units`` (metric, us; None: as it was recorded).

    >>> show_length(1.5, "m", None), show_length(1.5, "m", "us"), show_length(2, "mi", "metric")
    ('1.5 m', '4.9 ft', '3.219 km')
    """
    shown = _COUNTERPART[units][unit] if units else unit
    if shown == unit:
        return f"{show_value(value)} {unit}"
    converted = rounded(value * _METRES[unit] / _METRES[shown], _PLACES[shown])
    return f"{show_value(float(converted))} {shown}"


def show_stretch(reach: Reach, unit: str | None, units: str | None) -> str:
    """Print a reach with its distances along the stream: ``mill weir, 120 m to 480 m``."""
    name = printable(reach.reach)
    ends = [
        f"{word} {show_length(end, unit, units) if unit else show_value(end)}"
        for word, end in (("from", reach.reach_from), ("to", reach.reach_to))
        if end is not None
    ]
    if not ends:
        return name
    return f"{name}, {' '.join(ends)}{'' if unit else ' (unit not said)'}"
